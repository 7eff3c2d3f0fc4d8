"""The repairs of ``repairs.toml``, one small function per kind, all acting on drafts by species name."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from math import log
from typing import Any

from gibbsmin.constants import STANDARD_TEMPERATURE
from gibbsmin.elements import split_name
from gibbsmin.thermo.making.draft import Draft, rounded
from gibbsmin.thermo.making.fit import Segment, fit
from gibbsmin.thermo.making.sources import atct, burcat, janaf, janaf_enthalpy
from gibbsmin.thermo.record import R_OF_FIT, Piece

Drafts = dict[str, Draft]
Entry = Mapping[str, Any]
Spans = Sequence[Sequence[Any]]

ELECTRON_ENTHALPY = 6197.0
"""H(298.15 K) - H(0 K) of the electron gas [J/mol], 5/2 R T: what a convention without it leaves out."""

REANCHOR_ABOVE = 500.0
"""Smallest difference [J/mol] at which an enthalpy of formation is moved to the Active Thermochemical Tables."""

SMALLEST = 1.0
"""Uncertainty [J/mol] taken where the tables print zero: the last digit that they print."""

NOTABLE = 200.0
"""Mismatch of G at a melting point [J/mol] that is worth a note."""

JOIN_LIMIT = 5.0
"""Largest mismatch of G at a join of two crystal forms [J/mol] that is closed without a repair of its own."""


def join(drafts: Drafts) -> Drafts:
    """Make one species of the crystal forms that share one, as pieces over the temperature."""
    result: Drafts = {}
    for draft in drafts.values():
        name = draft.joined or draft.name
        if draft.joined:
            form = split_name(draft.name).form
            draft.pieces = [piece._replace(form=piece.form or form) for piece in draft.pieces]
            draft.aliases = [*draft.aliases, draft.name]
            draft.name = name
        if name in result:
            first = result[name]
            first.pieces += draft.pieces
            first.aliases += draft.aliases
            first.notes += draft.notes
            first.records += draft.records
            first.source = first.source if draft.source in first.source else f"{first.source}; {draft.source}"
        else:
            result[name] = draft
    return result


def leave_out(drafts: Drafts, entry: Entry) -> None:
    """Remove a species."""
    del drafts[entry["name"]]


def shift(drafts: Drafts, entry: Entry) -> None:
    """Add constants to H and S from a temperature on."""
    drafts[entry["name"]].shift(entry.get("H_J", 0.0), entry.get("S_J_K", 0.0), entry.get("from_K", 0.0))


def continuous(drafts: Drafts, entry: Entry) -> None:
    """Make H and S continuous at a break, moving all pieces above it."""
    draft, T = drafts[entry["name"]], entry["T_K"]
    draft.shift(
        draft.enthalpy(T) - draft.enthalpy(T, upper=True), draft.entropy(T) - draft.entropy(T, upper=True), from_T=T
    )


def name_forms(drafts: Drafts, entry: Entry) -> None:
    """Give the pieces of a species the names of its crystal forms."""
    draft = drafts[entry["name"]]
    draft.pieces = [piece._replace(form=form) for piece, form in zip(draft.pieces, entry["forms"], strict=True)]


def segments(table: str, spans: Spans, zero: float) -> list[Segment]:
    """Segments of a NIST-JANAF table: spans of low, high, kind of start, form; ``zero`` is H(298.15 K) [J/mol]."""
    rows = [row._replace(H=row.H + zero) for row in janaf(table)]
    result = []
    for low, high, *rest in spans:
        # At a transition two rows have the same temperature: the first ends a piece, the second starts one.
        inside = [row for row in rows if low < row.T < high]
        start, end = ([row for row in rows if row.T in edge] for edge in ((low,), (high,)))
        result.append(Segment(low, high, [*start[-1:], *inside, *end[:1]], *rest))
    return result


def from_janaf(tables: str, spans: Spans, enthalpy: float | None = None) -> tuple[list[Piece], str]:
    """Fit pieces to NIST-JANAF tables and say how well.

    ``tables`` names one table, or one a span with ``/`` between; ``enthalpy`` [J/mol] replaces that of the table.
    """
    words = tables.split("/")
    parts = []
    for i, span in enumerate(spans):
        table = words[min(i, len(words) - 1)]
        parts += segments(table, [span], janaf_enthalpy(table) if enthalpy is None else enthalpy)
    anchors = [row for row in parts[0].rows if row.T == STANDARD_TEMPERATURE] or [parts[0].rows[0]]
    pieces, deviation = fit(parts, (anchors[0].T, anchors[0].H, anchors[0].S))
    return pieces, f"Fitted to the table within {max(deviation, 0.01):.2g} J/mol/K in Cp"


def refit(drafts: Drafts, entry: Entry) -> None:
    """Replace the pieces of a species, or those from the first span on, by a fit to a NIST-JANAF table."""
    draft = drafts[entry["name"]]
    enthalpy = 1e3 * entry["H_kJ"] if "H_kJ" in entry else None
    pieces, quality = from_janaf(entry["table"], entry["spans"], enthalpy)
    kept = [piece for piece in draft.pieces if piece.low < pieces[0].low] if entry.get("keep_below") else []
    if kept:
        kept[-1] = kept[-1]._replace(high=pieces[0].low)
        draft.source += f" below {pieces[0].low:g} K, NIST-JANAF {entry['table']} above"
    else:
        draft.source = f"NIST-JANAF {entry['table']}"
    draft.pieces = kept + pieces
    draft.notes.append(quality)
    if kept:
        meet_below(draft, pieces[0].low)


def replace(drafts: Drafts, entry: Entry) -> None:
    """Replace the pieces of a species by those of the Burcat file."""
    draft = drafts[entry["name"]]
    draft.pieces = list(burcat()[entry["record"], entry["from_K"]])
    draft.source = entry["source"]


def meet(drafts: Drafts, entry: Entry) -> None:
    """Move H of a species so that its G equals that of another, or of amounts of others, at a temperature."""
    draft, T = drafts[entry["name"]], entry["T_K"]
    others = entry["with"] if isinstance(entry["with"], Mapping) else {entry["with"]: 1.0}
    draft.shift(H=sum(n * drafts[name].gibbs_energy(T) for name, n in others.items()) - draft.gibbs_energy(T))


def meet_below(draft: Draft, T: float) -> None:
    """Move H of the pieces from ``T`` [K] on so that G is continuous there, and S as well where H would fall."""
    draft.shift(H=draft.gibbs_energy(T) - draft.gibbs_energy(T, upper=True), from_T=T)
    fall = draft.enthalpy(T) - draft.enthalpy(T, upper=True)
    if fall > 0.0:
        draft.shift(H=fall, S=fall / T, from_T=T)


def cut(drafts: Drafts, entry: Entry) -> None:
    """End or start the pieces of a species at a temperature."""
    draft = drafts[entry["name"]]
    low, high = entry.get("low_K", 0.0), entry.get("high_K", float("inf"))
    draft.pieces = [
        piece._replace(low=max(piece.low, low), high=min(piece.high, high))
        for piece in draft.pieces
        if piece.low < high and piece.high > low
    ]


def limit(drafts: Drafts, entry: Entry) -> None:
    """Set the highest temperature at which a liquid may be a candidate."""
    drafts[entry["name"]].limit = entry["high_K"]


def standard(drafts: Drafts, entry: Entry) -> None:
    """Move a species to another enthalpy of formation or entropy at 298.15 K, its liquid with it."""
    draft = drafts[entry["name"]]
    T = STANDARD_TEMPERATURE
    H = 1e3 * entry["H_kJ"] - draft.enthalpy(T) if "H_kJ" in entry else 0.0
    S = entry["S_J_K"] - draft.entropy(T) if "S_J_K" in entry else 0.0
    move_together(drafts, draft, H, S)
    source = entry["source"]
    draft.source += f"; {'enthalpy of formation' if 'H_kJ' in entry else 'entropy'} from {source}"


def adjust(drafts: Drafts, entry: Entry) -> None:
    """Add a constant to Cp, with H and S at 298.15 K kept, and one to H; no other species moves with it."""
    draft = drafts[entry["name"]]
    T, Cp = STANDARD_TEMPERATURE, entry.get("Cp_J_K", 0.0)
    draft.pieces = [
        piece._replace(coefficients=(*a[:2], rounded(a[2] + Cp / R_OF_FIT), *a[3:]))
        for piece in draft.pieces
        for a in [piece.coefficients]
    ]
    draft.shift(entry.get("H_J", 0.0) - Cp * T, -Cp * log(T))


def uncertainty(drafts: Drafts, entry: Entry) -> None:
    """Set the uncertainty of H or S."""
    draft = drafts[entry["name"]]
    if "u_H_kJ" in entry:
        draft.doubt(1e3 * entry["u_H_kJ"], entry["source"])
    draft.entropy_uncertainty = entry.get("u_S_J_K", draft.entropy_uncertainty)


def off(drafts: Drafts, entry: Entry) -> None:
    """Leave a species out of choices by element; it stays reachable by name."""
    drafts[entry["name"]].default = False


STEPS: dict[str, Callable[[Drafts, Entry], None]] = {
    "leave_out": leave_out,
    "forms": name_forms,
    "shift": shift,
    "continuous": continuous,
    "refit": refit,
    "replace": replace,
    "cut": cut,
    "limit": limit,
    "standard": standard,
    "adjust": adjust,
    "meet": meet,
    "uncertainty": uncertainty,
    "off": off,
}
"""Kinds of repair in the order in which they are taken; ``standard`` comes after the re-anchoring."""


def move_together(drafts: Drafts, draft: Draft, H: float, S: float = 0.0) -> None:
    """Move a gas, and by the same enthalpy the condensed species of the same substance: boiling points stay."""
    draft.shift(H, S)
    name = split_name(draft.name)
    if name.phase != "gas":
        return
    for other in drafts.values():
        twin = split_name(other.name)
        if other is not draft and (twin.formula, twin.form) == (name.formula, name.form):
            other.shift(H)
            other.notes.append(f"enthalpy moved by {1e-3 * H:+.3f} kJ/mol with the gas")


def reanchor(drafts: Drafts, tables: Mapping[str, str]) -> None:
    """Move enthalpies of formation to the Active Thermochemical Tables, and take their uncertainties.

    Those are moved that differ by more than both ``REANCHOR_ABOVE`` and the uncertainty given there.

    ``tables`` gives CAS number and phase by species name. The tables count no enthalpy of the thermal electron.
    """
    for name, key in tables.items():
        if name not in drafts:
            continue
        draft = drafts[name]
        enthalpy, u = atct()[key]
        charge = name.count("+") - name.count("-") if name[-1] in "+-" else 0
        difference = enthalpy + ELECTRON_ENTHALPY * charge - draft.enthalpy(STANDARD_TEMPERATURE)
        if abs(difference) > max(REANCHOR_ABOVE, u):
            move_together(drafts, draft, difference)
            draft.source += "; enthalpy of formation from ATcT 1.112"
            draft.notes.append(f"enthalpy moved by {1e-3 * difference:+.3f} kJ/mol to ATcT")
        draft.doubt(max(u, SMALLEST), "ATcT 1.112")


def close_joins(drafts: Drafts) -> None:
    """Close the mismatch of G at the joins of crystal forms by moving H of the pieces above."""
    for draft in drafts.values():
        for lower, upper in zip(draft.pieces[:-1], draft.pieces[1:], strict=True):
            if lower.form == upper.form:
                continue
            T = upper.low
            gap = draft.gibbs_energy(T) - draft.gibbs_energy(T, upper=True)
            if abs(gap) > JOIN_LIMIT:
                raise ValueError(f"{draft.name}: G jumps by {-gap:.1f} J/mol at {T} K; it needs a repair of its own")
            draft.shift(H=gap, from_T=T)


def close_melting(drafts: Drafts, name: str) -> None:
    """Move H of a liquid that starts where the solid of the same formula ends: G is the same there."""
    liquid = drafts[name]
    solid = drafts.get(name.replace("(l)", "(s)"))
    T = liquid.pieces[0].low
    if solid is not None and solid.pieces[-1].high == T:
        gap = solid.gibbs_energy(T) - liquid.gibbs_energy(T)
        liquid.shift(H=gap)
        if abs(gap) > NOTABLE:
            liquid.notes.append(f"enthalpy moved by {1e-3 * gap:+.3f} kJ/mol to melt at {T:g} K, as the table says")
