"""Species of the user's own, read from TOML.

    [[species]]
    name = "C3H8O2:propylene-glycol"          # as everywhere: formula, (s) or (l), :form
    enthalpy_of_formation = "-429.8 kJ/mol"   # at 298.15 K; a bare number is in J/mol
    standard_entropy = "352 J/mol/K"          # at 298.15 K
    heat_capacity = { temperatures = [300, 500, 1000], values = [103, 151, 224], unit = "J/mol/K" }
    source = "where it comes from"

Heat capacity is one value (then ``range`` says from where to where), or a table as above, between whose points Cp
is a straight line. Or ``polynomial`` stands instead, with pieces of 7 or 9 coefficients in the order of
``polynomial.py`` (without a1 and a2 where there are 7), which also fix enthalpy and entropy:

    polynomial = [
      { range = ["200 K", "1000 K"], coefficients = [4.2, -2.0e-3, 6.5e-6, -5.5e-9, 1.8e-12, -3.0e4, -0.85] },
    ]

May stand too: ``uncertainty``, ``entropy_uncertainty``, ``reference_pressure``, ``gas_constant`` (of the polynomial),
``usable`` (range of temperature), ``aliases``, ``note``, and ``plausible = true`` to keep an unusual record.
"""

from __future__ import annotations

import tomllib
from collections.abc import Mapping, Sequence
from dataclasses import replace
from itertools import pairwise
from os import PathLike, fspath
from pathlib import Path
from typing import Any, Final

import numpy as np

from gibbsmin.constants import STANDARD_PRESSURE, R
from gibbsmin.elements import Name, parse_formula, split_name
from gibbsmin.errors import CaseError, FormulaError, UnitError, nearest
from gibbsmin.thermo.checkup import check
from gibbsmin.thermo.record import Piece, Species
from gibbsmin.units import quantity

REQUIRED: Final = ("name", "source")
MEASURED: Final = ("enthalpy_of_formation", "standard_entropy", "heat_capacity", "range")
OPTIONAL: Final = (
    *("polynomial", "gas_constant", "uncertainty", "entropy_uncertainty", "reference_pressure", "usable"),
    *("aliases", "note", "plausible"),
)
KEYS: Final = (*REQUIRED, *MEASURED, *OPTIONAL)

GAS_RANGE: Final = (150.0, 20000.0)
"""Range in which a gas of the user's is a candidate, [K]; with constant Cp beyond its data."""

BEYOND: Final = 200.0
"""How far a solid or liquid of the user's is a candidate beyond its data, [K]."""

SERIOUS: Final = ("composition", "units", "third_law", "gap", "heat_capacity", "gas_heat_capacity", "degeneracy")
"""Tests of ``checkup`` that a species must pass to be read, unless it says ``plausible = true``."""

SMALL_ENTHALPY: Final = 3000.0
"""A compound's enthalpy of formation below this [J/mol] is more often kJ that were taken for J than true."""


def read_species(path: str | PathLike[str], strict: bool = True) -> list[Species]:
    """Read the species of a TOML file.

    Parameters
    ----------
    path : str or path
        The file; its layout is in the head of this module.
    strict : bool
        Whether implausible records are refused; with False they are returned, for ``checkup.check`` to judge.

    Returns
    -------
    list of Species
        In the order of the file.

    Raises
    ------
    CaseError
        The file cannot be read or a record is wrong; the text names file, species, key, and what would be right.
    """
    file = fspath(path)
    try:
        content = tomllib.loads(Path(path).read_text("utf-8"))
    except OSError as error:
        raise CaseError(f"the file cannot be read: {error.strerror}", file) from error
    except (tomllib.TOMLDecodeError, UnicodeDecodeError) as error:
        raise CaseError(f"not a TOML file: {error}", file) from error
    records = content.get("species")
    if not isinstance(records, list) or not records:
        raise CaseError("no [[species]] in the file; each species starts with that line", file)
    if other := sorted(content.keys() - {"species"}):
        raise CaseError("does not belong in a species file; only [[species]] does", file, other[0])
    species: list[Species] = []
    for number, record in enumerate(records, 1):
        if not isinstance(record, Mapping):
            raise CaseError("expected a table of keys and values", file, f"species {number}")
        one = _Reader(record, file, number).species()
        if any(one.name == earlier.name for earlier in species):
            raise CaseError("stands twice in the file", file, f"species {one.name!r}")
        if strict and record.get("plausible") is not True:
            _refuse_implausible(one, record, file)
        species.append(one)
    return species


class _Reader:
    """Reads one record; knows where it is, for messages."""

    def __init__(self, record: Mapping[str, Any], file: str, number: int) -> None:
        self.record, self.file = record, file
        self.title = repr(record["name"]) if isinstance(record.get("name"), str) else str(number)

    def wrong(self, key: str, message: str) -> CaseError:
        """Return the error for ``key`` of this species."""
        return CaseError(message, self.file, f"species {self.title}, {key}")

    def species(self) -> Species:
        """Make the species."""
        for key in self.record:
            if key not in KEYS:
                raise self.wrong(key, f"there is no such key{nearest(key, KEYS)}")
        name = self.name()
        elements, charge = parse_formula(name.formula)
        pressure = self.number("reference_pressure", "Pa", STANDARD_PRESSURE)
        polynomial = "polynomial" in self.record
        pieces = self.polynomial() if polynomial else self.integrated(self.heat_capacity())
        usable = self.span("usable") if "usable" in self.record else _usable(name.phase, pieces)
        species = Species(
            name=self.text("name"),
            formula=name.formula,
            phase=name.phase,
            form=name.form,
            elements=elements,
            charge=charge,
            pieces=tuple(pieces),
            usable=usable,
            aliases=self.aliases(),
            reference_pressure=pressure,
            gas_constant=self.number("gas_constant", "J/mol/K", R),
            source=self.text("source"),
            note=self.text("note", ""),
            enthalpy_uncertainty=self.number("uncertainty", "J/mol", 0.0),
            entropy_uncertainty=self.number("entropy_uncertainty", "J/mol/K", 0.0),
            uncertainty_source="given with the species" if "uncertainty" in self.record else "not given",
            uncertainty_assumed="uncertainty" not in self.record,
        )
        return self.agreeing(species) if polynomial else self.anchored(species)

    def name(self) -> Name:
        """Return the name, taken apart."""
        try:
            name = split_name(self.text("name"))
            parse_formula(name.formula)
        except FormulaError as error:
            raise self.wrong("name", str(error)) from error
        return name

    def text(self, key: str, default: str | None = None) -> str:
        """Return a text that is not empty, unless there is a default."""
        value = self.record.get(key, default)
        if value is None:
            raise self.wrong(key, "is missing")
        if not isinstance(value, str) or (not value.strip() and default is None):
            raise self.wrong(key, f"expected a text, got {value!r}")
        return value

    def aliases(self) -> tuple[str, ...]:
        """Return the other names."""
        value = self.record.get("aliases", [])
        if not isinstance(value, list) or not all(isinstance(alias, str) for alias in value):
            raise self.wrong("aliases", f'expected a list of texts like ["glycol"], got {value!r}')
        return tuple(value)

    def number(self, key: str, unit: str, default: float | None = None) -> float:
        """Return a quantity in SI."""
        if key not in self.record:
            if default is None:
                raise self.wrong(key, f"is missing; a bare number is in {unit}")
            return default
        value = self.quantity(self.record[key], unit, key)
        if key not in ("enthalpy_of_formation", "standard_entropy") and value < 0.0:
            raise self.wrong(key, f"must not be negative, got {self.record[key]!r}")
        return value

    def quantity(self, value: Any, unit: str, key: str) -> float:
        """Convert ``value``; errors say where."""
        try:
            return quantity(value, unit, key)
        except UnitError as error:
            raise self.wrong(key, str(error)) from error

    def span(self, key: str, value: Any = None) -> tuple[float, float]:
        """Return a range of temperature [K]."""
        found = self.record.get(key) if value is None else value
        if not isinstance(found, list) or len(found) != 2:
            raise self.wrong(key, f'expected two temperatures like ["300 K", "1500 K"], got {found!r}')
        low, high = self.quantity(found[0], "K", key), self.quantity(found[1], "K", key)
        if not 0.0 < low < high:
            raise self.wrong(key, f"expected two rising temperatures above 0 K, got {found!r}")
        return low, high

    def heat_capacity(self) -> list[tuple[float, float]]:
        """Return points of Cp(T) in K and J/mol/K: two for a constant."""
        value = self.record.get("heat_capacity")
        if value is None:
            raise self.wrong("heat_capacity", "is missing; give it, or polynomial in its place")
        if not isinstance(value, Mapping):
            Cp = self.quantity(value, "J/mol/K", "heat_capacity")
            if "range" not in self.record:
                raise self.wrong("range", 'is missing; say for which range Cp holds, like ["300 K", "600 K"]')
            low, high = self.span("range")
            return [(low, Cp), (high, Cp)]
        if unknown := sorted(value.keys() - {"temperatures", "values", "unit"}):
            raise self.wrong("heat_capacity", f"has no key {unknown[0]!r}; temperatures, values and unit belong here")
        T, values = value.get("temperatures"), value.get("values")
        if not isinstance(T, list) or not isinstance(values, list) or len(T) != len(values) or len(T) < 2:
            raise self.wrong("heat_capacity", "expected temperatures and values, two or more and as many of each")
        unit = value.get("unit", "J/mol/K")
        factor = self.quantity(f"1 {unit}", "J/mol/K", "heat_capacity.unit")
        kelvin = [self.quantity(t, "K", "heat_capacity.temperatures") for t in T]
        if not all(low < high for low, high in pairwise(kelvin)) or kelvin[0] <= 0.0:
            raise self.wrong("heat_capacity.temperatures", f"expected rising temperatures above 0 K, got {T!r}")
        return [
            (t, factor * self.quantity(c, "1", "heat_capacity.values")) for t, c in zip(kelvin, values, strict=True)
        ]

    def integrated(self, points: Sequence[tuple[float, float]]) -> list[Piece]:
        """Make pieces in which Cp is a straight line, H and S continuous; their constants are still to be anchored."""
        scale = self.number("gas_constant", "J/mol/K", R)
        pieces: list[Piece] = []
        H = S = 0.0  # H/R [K] and S/R at the end of the piece before
        for (low, a), (high, b) in pairwise(points):
            slope = (b - a) / (high - low) / scale
            constant = a / scale - slope * low
            b1 = H - constant * low - slope * low**2 / 2.0
            b2 = S - constant * float(np.log(low)) - slope * low
            pieces.append(Piece(low, high, (0.0, 0.0, constant, slope, 0.0, 0.0, 0.0, b1, b2)))
            H = constant * high + slope * high**2 / 2.0 + b1
            S = constant * float(np.log(high)) + slope * high + b2
        return pieces

    def polynomial(self) -> list[Piece]:
        """Return the pieces as they are given."""
        value = self.record["polynomial"]
        if not isinstance(value, list) or not value:
            raise self.wrong("polynomial", "expected a list of { range = [...], coefficients = [...] }")
        pieces = []
        for part in value:
            if not isinstance(part, Mapping) or part.keys() != {"range", "coefficients"}:
                raise self.wrong("polynomial", f"expected {{ range = [...], coefficients = [...] }}, got {part!r}")
            low, high = self.span("polynomial.range", part["range"])
            a = part["coefficients"]
            if not isinstance(a, list) or len(a) not in (7, 9):
                raise self.wrong("polynomial.coefficients", f"expected 7 or 9 numbers, got {a!r}")
            numbers = [self.quantity(x, "1", "polynomial.coefficients") for x in a]
            pieces.append(Piece(low, high, tuple(numbers) if len(a) == 9 else (0.0, 0.0, *numbers)))
        for lower, upper in pairwise(pieces):
            if lower.high != upper.low:
                text = f"one range ends at {lower.high:g} K, the next starts at {upper.low:g} K; they must touch"
                raise self.wrong("polynomial.range", text)
        return pieces

    def anchored(self, species: Species) -> Species:
        """Give the species its H and S at 298.15 K."""
        H = self.number("enthalpy_of_formation", "J/mol") - species.standard_enthalpy
        # The record's entropy is at its own standard pressure, the functions of a species are at 1 bar.
        own = species.standard_entropy - species.gas_constant * species.pressure_entropy_R
        S = self.number("standard_entropy", "J/mol/K") - own
        scale = species.gas_constant
        pieces = tuple(
            piece._replace(coefficients=(*piece.coefficients[:7], b1 + H / scale, b2 + S / scale))
            for piece in species.pieces
            for b1, b2 in [piece.coefficients[7:]]
        )
        return replace(species, pieces=pieces)

    def agreeing(self, species: Species) -> Species:
        """Hold a polynomial to the enthalpy and entropy that stand beside it."""
        own = species.standard_entropy - species.gas_constant * species.pressure_entropy_R
        for key, unit, value, room in (
            ("enthalpy_of_formation", "J/mol", species.standard_enthalpy, 500.0),
            ("standard_entropy", "J/mol/K", own, 0.5),
        ):
            if key in self.record and abs(self.number(key, unit) - value) > room:
                text = f"is {self.record[key]!r}, but at 298.15 K the polynomial gives {value:.6g} {unit}"
                raise self.wrong(key, text)
        for key in ("heat_capacity", "range"):
            if key in self.record:
                raise self.wrong(key, "does not go with polynomial; give one of them")
        return species


def _usable(phase: str, pieces: Sequence[Piece]) -> tuple[float, float]:
    """Range [K] in which a species is a candidate, if it does not say."""
    if phase == "gas":
        return GAS_RANGE
    return max(pieces[0].low - BEYOND, min(GAS_RANGE[0], pieces[0].low)), pieces[-1].high + BEYOND


def _refuse_implausible(species: Species, record: Mapping[str, Any], file: str) -> None:
    """Refuse figures that chemistry does not know, J taken for kJ above all."""
    keys = {"units": "enthalpy_of_formation", "composition": "name"}
    for finding in check([species]):
        if finding.test in SERIOUS:
            entropy = "S°" in finding.message or "entropy" in finding.message
            key = "standard_entropy" if entropy else keys.get(finding.test, "heat_capacity")
            text = f"{finding.message} (plausible = true keeps it)"
            raise CaseError(text, file, f"species {species.name!r}, {key}")
    H = species.standard_enthalpy
    if len(species.elements) > 1 and 0.0 < abs(H) < SMALL_ENTHALPY and "enthalpy_of_formation" in record:
        text = (
            f"{record['enthalpy_of_formation']!r} is {H:g} J/mol, hardly anything; if kJ/mol were meant, write "
            f"'{H:g} kJ/mol' (plausible = true keeps it)"
        )
        raise CaseError(text, file, f"species {species.name!r}, enthalpy_of_formation")
