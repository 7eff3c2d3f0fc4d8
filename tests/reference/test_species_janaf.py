"""Shipped data against the NIST-JANAF tables (Chase, J. Phys. Chem. Ref. Data Monograph 9, 1998).

The file ``janaf_points.csv`` holds single values, with a tolerance that says how far apart the two sources are. The
draw takes species whose record in TM-4513 says that it was made from a JANAF table, so that it proves the copying;
tables in which misprints are known, and species whose data were changed on purpose, are left out.
"""

import csv
import json
import random
import re
from collections import defaultdict
from math import log
from pathlib import Path

import pytest

from gibbsmin.elements import parse_formula
from gibbsmin.errors import FormulaError
from gibbsmin.thermo.database import load
from gibbsmin.thermo.making.assemble import read_toml
from gibbsmin.thermo.making.sources import janaf, janaf_enthalpy, package_file
from gibbsmin.thermo.making.steps import STEPS

POINTS = list(csv.DictReader((Path(__file__).parent / "janaf_points.csv").read_text().splitlines()))
T0 = 298.15
R = 8.31451

REFERENCE = {
    "H": ["H2"],
    "O": ["O2"],
    "N": ["N2"],
    "Cl": ["Cl2"],
    "C": ["C(s):graphite"],
    "S": ["S(s)", "S(l)", "S2"],  # as JANAF: S2, not S8, above the boiling point
    "Na": ["Na(s)", "Na(l)", "Na"],
    "K": ["K(s)", "K(l)", "K"],
    "Ca": ["Ca(s)", "Ca(l)", "Ca"],
    "Mg": ["Mg(s)", "Mg(l)", "Mg"],
    "Al": ["Al(s)", "Al(l)", "Al"],
    "Si": ["Si(s)", "Si(l)"],
}

MISPRINTS = {
    *("H-046", "O-011", "C-044", "H-079", "Cl-159", "Be-065", "H-007", "B-049", "F-067", "Al-030", "C-140", "C-151"),
    *("C-119", "C-064", "C-066", "N-026", "S-016", "S-017", "S-018", "S-019", "S-020"),
}
"""Tables whose columns contradict each other somewhere."""


def reference(element: str, T: float) -> tuple[float, float]:
    """H and G of one atom of the element in the state that is stable at ``T``, [J/mol]."""
    states = []
    for name in REFERENCE[element]:
        species = load().get(name)
        atoms = species.elements[element]
        states.append((species.gibbs_energy(T) / atoms, species.enthalpy(T) / atoms))
    G, H = min(states)
    return H, G


def value(name: str, T: float, quantity: str) -> float:
    species = load().get(name)
    if quantity == "Cp":
        return species.heat_capacity(T)
    if quantity == "S":
        return species.entropy(T)
    if quantity == "H-H298":
        return (species.enthalpy(T) - species.enthalpy(T0)) / 1e3
    H, G = species.enthalpy(T), species.gibbs_energy(T)
    for element, atoms in species.elements.items():
        h, g = reference(element, T)
        H, G = H - atoms * h, G - atoms * g
    return {"dfH": H / 1e3, "dfG": G / 1e3, "logKf": -G / (R * T * 2.302585093)}[quantity]


@pytest.mark.parametrize("point", POINTS, ids=lambda p: f"{p['species']}-{p['quantity']}-{p['T']}")
def test_printed_values(point: dict[str, str]) -> None:
    computed = value(point["species"], float(point["T"]), point["quantity"])
    assert computed == pytest.approx(float(point["value"]), abs=float(point["tolerance"]))


def tables() -> dict[tuple[object, int, str], list[str]]:
    """Tables by composition, charge and phase."""
    index = json.loads(package_file("janaf", "janaf.json").read_text("utf-8"))
    result = defaultdict(list)
    for table in index["index"]:
        header = package_file("janaf", "data", f"{table}.txt").read_text("utf-8").split("\n", 1)[0]
        match = re.fullmatch(r"(.+)\((g|cr|l)\)", header.split("\t")[1].strip())
        if match is None:
            continue
        try:
            elements, charge = parse_formula(match[1])
        except FormulaError:
            continue
        result[frozenset(elements.items()), charge, {"g": "gas", "cr": "solid", "l": "liquid"}[match[2]]].append(table)
    return result


def drawn(phase: str, count: int) -> list[tuple[str, str, float]]:
    """Species, table and temperature, drawn with a fixed seed."""
    # What a repair of the uncertainty names has the figures of its record still.
    kinds = [kind for kind in STEPS if kind != "uncertainty"]
    changed = {entry["name"] for kind in kinds for entry in read_toml("repairs.toml").get(kind, [])}
    known = tables()
    pool = []
    for name in load().names:
        species = load().get(name)
        match = known.get((frozenset(species.elements.items()), species.charge, species.phase), [])
        plain = re.match(r"NASA TM-4513 \(J ?\d+/\d+\)$", species.source)
        if plain and species.phase == phase and len(match) == 1 and name not in changed and not MISPRINTS & set(match):
            low, high = species.temperature_range
            rows = [
                row.T for row in janaf(match[0]) if max(400.0, low) < row.T < min(3000.0, high) and row.T % 100 == 0
            ]
            if rows and len({piece.form for piece in species.pieces}) == 1:
                pool.append((name, match[0], rows))
    dice = random.Random(1998)
    return [(name, table, dice.choice(rows)) for name, table, rows in dice.sample(pool, count)]


def compare(name: str, table: str, T: float) -> tuple[float, float, float]:
    """Differences in Cp [J/mol/K], S [J/mol/K] and H(T) - H(298.15 K) [kJ/mol]."""
    species = load().get(name)
    row = next(row for row in janaf(table) if row.T == T)
    H = species.enthalpy(T) - (species.enthalpy(T0) if species.temperature_range[0] <= 300 else species.enthalpy(T))
    own = row.H if species.temperature_range[0] <= 300 else 0.0
    return species.heat_capacity(T) - row.Cp, species.entropy(T) - row.S, (H - own) / 1e3


@pytest.mark.parametrize(("name", "table", "T"), drawn("gas", 90))
def test_gases_drawn(name: str, table: str, T: float) -> None:
    Cp, S, H = compare(name, table, T)
    assert abs(Cp) < 0.6
    assert abs(S) < 0.15
    assert abs(H) < 0.2


@pytest.mark.parametrize(("name", "table", "T"), drawn("solid", 30) + drawn("liquid", 20))
def test_condensed_drawn(name: str, table: str, T: float) -> None:
    Cp, S, H = compare(name, table, T)
    assert abs(Cp) < 1.0
    assert abs(S) < 0.3
    assert abs(H) < 0.3


ADDED = {entry["name"]: entry.get("Cp_J_K", 0.0) for entry in read_toml("repairs.toml")["adjust"]}
"""What repairs add to Cp of a species, H and S at 298.15 K kept, [J/mol/K]."""

MOVED = {entry["name"]: entry["H_J"] for entry in read_toml("repairs.toml")["adjust"]}
"""What repairs add to H of a fitted species [J/mol]."""

FITTED = [
    (entry["name"], entry["table"].split("/")[0], entry.get("spans", [[200.0, 1000.0], [1000.0, 6000.0]]))
    for entry in [*read_toml("repairs.toml")["refit"], *read_toml("additions.toml")["species"]]
    if "table" in entry
]


@pytest.mark.parametrize(("name", "table", "spans"), FITTED, ids=[f"{name}-{table}" for name, table, _ in FITTED])
def test_fitted_to_the_table(name: str, table: str, spans: list[list[float]]) -> None:
    # Liquids were moved to melt where the table says, so their H is held to the table by its slope only.
    species = load().get(name)
    inside = [row for row in janaf(table) if spans[0][0] < row.T < spans[0][1]]
    row, last = inside[len(inside) // 2], inside[-1]
    added = ADDED.get(name, 0.0)
    assert species.heat_capacity(row.T) == pytest.approx(row.Cp + added, abs=1.5)
    assert species.entropy(row.T) == pytest.approx(row.S + added * log(row.T / T0), abs=0.3)
    rise = species.enthalpy(last.T) - species.enthalpy(row.T)
    assert rise == pytest.approx(last.H - row.H + added * (last.T - row.T), abs=200.0)
    if species.phase == "gas" and "ATcT" not in species.source:
        assert species.standard_enthalpy == pytest.approx(janaf_enthalpy(table) + MOVED.get(name, 0.0), abs=1.0)
