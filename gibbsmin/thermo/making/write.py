"""Writes ``species.json``: one species a line, keys in a fixed order, no time stamps."""

from __future__ import annotations

import json
from collections import defaultdict
from importlib.metadata import version
from typing import Any

from gibbsmin.constants import STANDARD_PRESSURE, STANDARD_TEMPERATURE
from gibbsmin.elements import parse_formula, split_name
from gibbsmin.thermo.making.assemble import assemble, usable
from gibbsmin.thermo.making.draft import Draft
from gibbsmin.thermo.record import R_OF_FIT

FORMAT = 1
DATA_VERSION = "1.0"
PACKAGES = ("cantera", "chemicals", "janaf", "thermochem")


def made_from() -> dict[str, str]:
    """Versions of the packages that the data come from, as installed here."""
    return {package: version(package) for package in PACKAGES}


def number(value: float) -> float | int:
    """Whole numbers without a point: the file is a fifth smaller."""
    return int(value) if value == int(value) else value


def sentence(note: str) -> str:
    """Return the note with a capital, unless it starts with a symbol, and without its full stop."""
    word = note.split()[0]
    return (note[0].upper() + note[1:] if word.isalpha() and word.islower() else note).rstrip(".")


def line(draft: Draft, phases: set[str]) -> dict[str, Any]:
    """Return the fields of one species, in the order of the file."""
    name = split_name(draft.name)
    elements, charge = parse_formula(name.formula)
    at_298 = draft.reaches_298()
    return {
        "name": draft.name,
        "formula": name.formula,
        "phase": name.phase,
        "form": name.form,
        "aliases": draft.aliases,
        "elements": {element: number(atoms) for element, atoms in elements.items()},
        "charge": charge,
        "H298": round(draft.enthalpy(STANDARD_TEMPERATURE)) + 0 if at_298 else None,
        "S298": round(draft.entropy(STANDARD_TEMPERATURE), 3) if at_298 else None,
        "R": R_OF_FIT,
        "reference_pressure": number(STANDARD_PRESSURE),
        "pieces": [
            [number(low), number(high), [number(a) for a in coefficients], *([form] if form else [])]
            for low, high, coefficients, form in draft.pieces
        ],
        "usable": [number(round(T, 3)) for T in usable(draft, phases)],
        "source": draft.source,
        "note": ". ".join(map(sentence, draft.notes)),
        "u_H": number(round(draft.enthalpy_uncertainty, 3)),
        "u_H_source": draft.uncertainty_source,
        "u_H_assumed": draft.uncertainty_assumed,
        "u_S": number(draft.entropy_uncertainty),
        "class": draft.species_class,
        "default": draft.default,
        "records": draft.records,
    }


def build() -> str:
    """Make the text of ``species.json``."""
    drafts = assemble()
    phases: dict[str, set[str]] = defaultdict(set)
    for draft in drafts:
        name = split_name(draft.name)
        phases[name.formula].add(name.phase)
    head = json.dumps({"format": FORMAT, "version": DATA_VERSION, "made_from": made_from()})
    lines = (
        json.dumps(line(draft, phases[split_name(draft.name).formula]), ensure_ascii=False, separators=(",", ":"))
        for draft in drafts
    )
    return head[:-1] + ', "species": [\n' + ",\n".join(lines) + "\n]}\n"
