"""From the packages to finished drafts: naming, uncertainty defaults, repairs, additions, usable ranges."""

from __future__ import annotations

import csv
import tomllib
from collections.abc import Iterable, Mapping
from importlib.resources import files
from typing import Any

from gibbsmin.constants import STANDARD_TEMPERATURE
from gibbsmin.elements import parse_formula, split_name
from gibbsmin.thermo.making.additions import add, set_defaults
from gibbsmin.thermo.making.draft import Draft
from gibbsmin.thermo.making.sources import tm4513
from gibbsmin.thermo.making.steps import STEPS, Drafts, close_joins, close_melting, join, reanchor

DATA = files("gibbsmin.thermo").joinpath("data")

GAS_RANGE = (150.0, 20000.0)
"""Usable range of every gas, [K]: gases are never hidden, and constant Cp holds no surprise (see ``record``)."""

LOWEST = 150.0
"""Lower end of the usable range of the first condensed piece, [K]: no colder than the gases."""

SOLID_OVER_LIQUID = 300.0  # K beyond the last join
WITHOUT_LIQUID = 200.0  # K beyond the end of a condensed species that nothing follows
LIQUID_BELOW = 300.0  # K below the join with its solid


def read_toml(name: str) -> dict[str, Any]:
    """Read a data file of the project."""
    return tomllib.loads(DATA.joinpath(name).read_text("utf-8"))


def read_names() -> list[dict[str, str]]:
    """Read the naming table of the source records."""
    return read_csv("names.csv")


def read_csv(name: str) -> list[dict[str, str]]:
    """Read a table of the project."""
    return list(csv.DictReader(DATA.joinpath(name).read_text("utf-8").splitlines()))


def assemble() -> list[Draft]:
    """Make the drafts of all species, by name."""
    names, repairs, additions = read_names(), read_toml("repairs.toml"), read_toml("additions.toml")
    classes: Mapping[str, Any] = repairs["class"]
    drafts = join({row["name"]: read_record(row, classes) for row in names})
    late = ("standard", "adjust", "meet", "uncertainty", "off")
    apply(drafts, repairs, [kind for kind in STEPS if kind not in late])
    for entry in additions["species"]:
        add(drafts, entry, classes)
        if entry["origin"] == "janaf":
            close_melting(drafts, entry["name"])
    tables = [*names, *additions["species"]]
    reanchor(drafts, {entry["name"]: entry["atct"] for entry in tables if entry.get("atct")})
    apply(drafts, repairs, late)
    close_joins(drafts)
    doubt_as_published(drafts, read_csv("key_values.csv"))
    for draft in drafts.values():
        mark_reference(draft)
    return sorted(drafts.values(), key=lambda draft: draft.name)


def apply(drafts: Drafts, repairs: Mapping[str, Any], kinds: tuple[str, ...] | list[str]) -> None:
    """Take the repairs of the given kinds, each with its reason in the note of the species."""
    for kind in kinds:
        for entry in repairs.get(kind, []):
            STEPS[kind](drafts, entry)
            draft = drafts.get(entry["name"])
            if draft is not None and kind not in ("forms", "uncertainty"):
                draft.notes.append(f"{entry['reason'].rstrip('.')} ({entry['source']})")


def read_record(row: Mapping[str, str], classes: Mapping[str, Any]) -> Draft:
    """Make the draft of one record of NASA TM-4513, checked against its name."""
    pieces, composition, note = tm4513(row["file"])[row["record"]]
    elements, charge = parse_formula(split_name(row["name"]).formula)
    stated = {element: float(atoms) for element, atoms in composition.items() if element != "E"}
    if stated != elements or (charge != -composition.get("E", 0.0) and row["record"] != "Zn+"):
        # The packaged composition of Zn+ lacks its charge.
        raise ValueError(f"record {row['record']!r} holds {composition}, but its name here is {row['name']!r}")
    source = f"NASA TM-4513 ({note.split(';')[0]})"
    draft = Draft(row["name"], list(pieces), source, row["class"], joined=row["species"])
    draft.aliases = [alias for alias in row["aliases"].split(";") if alias]
    draft.notes = [row["remark"]] if row["remark"] else []
    draft.records = [row["record"]]
    set_defaults(draft, classes, row["u_H_kJ_mol"], row["u_S_J_mol_K"])
    return draft


def doubt_as_published(drafts: Drafts, rows: Iterable[Mapping[str, str]]) -> None:
    """Take published uncertainties of H and S at 298.15 K, widened where the species lies further from the value."""
    for row in rows:
        draft, T = drafts[row["name"]], STANDARD_TEMPERATURE
        distance, published = abs(draft.enthalpy(T) - 1e3 * float(row["H_kJ"])), 1e3 * float(row["u_H_kJ"])
        source = row["source"] if distance <= published else f"distance from {row['source']}"
        draft.doubt(round(max(published, distance), -1), source)
        if row["S_J_K"]:
            distance = abs(draft.entropy(T) - float(row["S_J_K"]))
            draft.entropy_uncertainty = round(max(float(row["u_S_J_K"]), distance), 3)


def mark_reference(draft: Draft) -> None:
    """Give the reference state of an element no uncertainty of H: it is zero by definition."""
    elements, _ = parse_formula(split_name(draft.name).formula)
    if len(elements) <= 1 and draft.reaches_298() and abs(draft.enthalpy(STANDARD_TEMPERATURE)) < 5.0:
        draft.doubt(0.0, "reference state")


def usable(draft: Draft, phases: set[str]) -> tuple[float, float]:
    """Range in which a species may be a candidate, [K]; ``phases`` are those in which its formula is known."""
    phase = split_name(draft.name).phase
    low, high = draft.pieces[0].low, draft.pieces[-1].high
    if phase == "gas":
        return GAS_RANGE
    if phase == "solid":
        return min(LOWEST, low), high + (SOLID_OVER_LIQUID if "liquid" in phases else WITHOUT_LIQUID)
    start = low - LIQUID_BELOW if "solid" in phases else LOWEST
    return max(LOWEST, start), min(high + WITHOUT_LIQUID, draft.limit)
