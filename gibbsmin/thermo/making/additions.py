"""Species that NASA TM-4513 does not hold: made from the entries of ``additions.toml``."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from gibbsmin.constants import STANDARD_TEMPERATURE
from gibbsmin.elements import parse_formula, split_name
from gibbsmin.thermo.making.draft import Draft, rounded
from gibbsmin.thermo.making.sources import burcat, crc, perry
from gibbsmin.thermo.making.steps import Drafts, from_janaf
from gibbsmin.thermo.record import R_OF_FIT, Piece

GAS_SPANS = [[200.0, 1000.0], [1000.0, 6000.0]]
"""Ranges [K] in which a gas is fitted to a NIST-JANAF table if its entry does not say."""


def set_defaults(draft: Draft, classes: Mapping[str, Any], u_H: str = "", u_S: str = "") -> None:
    """Set the uncertainties printed for the species [kJ/mol, J/mol/K], or else those of its class."""
    own = classes[draft.species_class]
    elements, _ = parse_formula(split_name(draft.name).formula)
    atoms = sum(elements.values())
    each = own.get("u_H_atom_kJ", own["u_H_kJ"]) if atoms == 1.0 else own["u_H_kJ"]
    draft.doubt(1e3 * each, "default of the class", assumed=True)
    if u_H:
        draft.doubt(1e3 * float(u_H), "printed in Burcat & Ruscic 2005")
    draft.entropy_uncertainty = float(u_S) if u_S else next(u for most, u in own["u_S_J_K"] if atoms <= most)


def add(drafts: Drafts, entry: Mapping[str, Any], classes: Mapping[str, Any]) -> None:
    """Make the draft of a species that TM-4513 does not hold."""
    origin, name, notes = entry["origin"], entry["name"], []
    if name in drafts:
        raise ValueError(f"the addition {name!r} is there already")
    if origin == "janaf":
        gas = split_name(name).phase == "gas"
        pieces, quality = from_janaf(entry["table"], entry["spans"] if not gas else entry.get("spans", GAS_SPANS))
        source, notes = f"NIST-JANAF {entry['table']}", [quality]
    elif origin == "burcat":
        pieces = [
            piece._replace(form=form) for record, low, form in entry["records"] for piece in burcat()[record, low]
        ]
        source = f"Burcat & Ruscic 2005 ({entry['records'][0][0]})"
    elif origin == "crc":
        pieces, source, notes = from_crc(entry)
    elif origin == "melt":
        pieces, source = [melted(drafts[name.replace("(l)", "(s)")], entry)], entry["source"]
    else:
        pieces, source = given(entry), entry["source"]
    draft = Draft(name, pieces, source, entry["class"], list(entry.get("aliases", [])), notes)
    if "note" in entry:
        draft.notes.append(entry["note"])
    set_defaults(draft, classes)
    if "u_H_kJ" in entry:
        draft.doubt(1e3 * entry["u_H_kJ"], entry.get("u_H_source", source))
    draft.entropy_uncertainty = entry.get("u_S_J_K", draft.entropy_uncertainty)
    if "H_kJ" in entry and origin == "burcat":
        draft.shift(H=1e3 * entry["H_kJ"] - draft.enthalpy(STANDARD_TEMPERATURE))
    draft.default = entry.get("default", True)
    drafts[name] = draft


def from_crc(entry: Mapping[str, Any]) -> tuple[list[Piece], str, list[str]]:
    """Make the piece of a solid from CRC's H and S, with Perry's Cp where it spans a range, else CRC's constant."""
    values = crc()[entry["cas"]]
    H, S = values["Hfs"], values.get("S0s", entry.get("S_J_K", 0.0))
    source = "CRC Handbook of Chemistry and Physics, standard thermodynamic properties"
    if "perry" in entry:
        a, b, c, d, low, high = perry()[entry["perry"]]
        source += "; Cp from Perry's Chemical Engineers' Handbook, table 2-151"
        return [integrated((c, 0.0, a, b, d), low, entry.get("high_K", high), H, S)], source, []
    Cp = entry.get("Cp_J_K", values.get("Cps"))
    note = "Cp is constant: caution above 800 K"
    return [integrated((0.0, 0.0, Cp, 0.0, 0.0), 298.15, entry["high_K"], H, S)], source, [note]


def given(entry: Mapping[str, Any]) -> list[Piece]:
    """Make the piece of a species whose figures stand in the file: Cp = sum of terms in T^-2, T^-1, 1, T, T^2."""
    low, high = entry["range_K"]
    return [integrated(tuple(entry["Cp_J_K"]), low, high, 1e3 * entry["H_kJ"], entry["S_J_K"])]


def melted(solid: Draft, entry: Mapping[str, Any]) -> Piece:
    """Make the piece of a liquid from its solid, the temperature and enthalpy of melting, and a constant Cp."""
    low, high = entry["range_K"]
    liquid = Draft("", [integrated((0.0, 0.0, entry["Cp_J_K"]), low, high, 0.0, 0.0)], "", "")
    H, S = solid.enthalpy(low) + 1e3 * entry["melting_kJ"], solid.entropy(low) + 1e3 * entry["melting_kJ"] / low
    liquid.shift(H - liquid.enthalpy(low), S - liquid.entropy(low))
    return liquid.pieces[0]


def integrated(Cp: tuple[float, ...], low: float, high: float, H: float, S: float) -> Piece:
    """Piece with Cp [J/mol/K] in powers of T from -2 on, and H [J/mol], S [J/mol/K] at 298.15 K."""
    terms = tuple(rounded(c / R_OF_FIT) for c in Cp) + (0.0,) * (7 - len(Cp))
    draft = Draft("", [Piece(low, high, (*terms, 0.0, 0.0))], "", "")
    T = STANDARD_TEMPERATURE
    draft.shift(H - draft.enthalpy(T), S - draft.entropy(T))
    return draft.pieces[0]
