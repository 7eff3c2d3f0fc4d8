"""Readers of the packaged data: what each package holds, in SI units and in nine-coefficient pieces."""

from __future__ import annotations

import csv
import re
import xml.etree.ElementTree as ElementTree
from collections.abc import Iterator
from functools import cache
from importlib.util import find_spec
from pathlib import Path
from typing import Any, NamedTuple

from gibbsmin.thermo.record import Piece

CALORIE = 4.184  # J, exact (thermochemical)


class Row(NamedTuple):
    """One line of a table: ``T`` [K], ``Cp`` and ``S`` [J/mol/K], ``H`` - H(298.15 K) [J/mol]."""

    T: float
    Cp: float
    S: float
    H: float


def package_file(package: str, *parts: str) -> Path:
    """Path of a data file inside an installed package, found without importing the package."""
    spec = find_spec(package)
    if spec is None or not spec.submodule_search_locations:
        raise ModuleNotFoundError(f"the build of species.json reads the package {package!r}, which is not installed")
    return Path(spec.submodule_search_locations[0]).joinpath(*parts)


@cache
def tm4513(file: str) -> dict[str, tuple[list[Piece], dict[str, float], str]]:
    """Read the records of ``nasa_<file>.yaml``: pieces, composition (E for electrons) and note, by record name."""
    import cantera  # heavy, and needed by the build only

    records = {}
    for species in cantera.Species.list_from_file(f"nasa_{file}.yaml"):
        data: dict[str, Any] = dict(species.input_data)
        thermo = data["thermo"]
        ends = thermo["temperature-ranges"]
        pieces = [
            # Cantera pads records of one piece with an empty second one.
            Piece(low, high, tuple(a) if len(a) == 9 else (0.0, 0.0, *a))
            for low, high, a in zip(ends[:-1], ends[1:], thermo["data"], strict=True)
            if high > low
        ]
        note = " ".join(str(thermo.get("note", "")).split())
        records[species.name] = (pieces, dict(species.composition), note)
    return records


def _tsv(*parts: str) -> Iterator[dict[str, str]]:
    with package_file("chemicals", *parts).open(encoding="utf-8", newline="") as file:
        yield from csv.DictReader(file, delimiter="\t")


@cache
def atct() -> dict[str, tuple[float, float]]:
    """Read the enthalpy of formation at 298.15 K and its 95 % uncertainty [J/mol], by CAS number and phase."""
    return {
        f"{row['CAS']} {phase}": (float(row[f"Hf{phase}"]), float(row["uncertainty"]))
        for phase in "gl"
        for row in _tsv("Reactions", f"ATcT 1.112 ({phase}).tsv")
    }


@cache
def crc() -> dict[str, dict[str, float]]:
    """Read the CRC table by CAS number: ``Hfs``, ``S0s``, ``Cps`` and the like, [J/mol] and [J/mol/K]."""
    table = "CRC Standard Thermodynamic Properties of Chemical Substances.tsv"
    return {
        row["CAS"]: {key: float(value) for key, value in row.items() if value and key not in ("CAS", "Chemical")}
        for row in _tsv("Heat Capacity", table)
    }


@cache
def perry() -> dict[str, tuple[float, float, float, float, float, float]]:
    """Read Perry's heat capacities of solids by formula: constant, T, T^-2, T^2 terms [J/mol/K], low and high [K]."""
    result = {}
    for cells in _tsv("Heat Capacity", "Perrys Table 2-151-2.tsv"):
        row = {key: value.strip() for key, value in cells.items()}
        if row["main phase"] == "c" and row["Tmin"] and row["Tmax"]:
            terms = [
                float(row[key] or 0.0) * CALORIE for key in ("Constant Term", "+*T term", "/T^2 term", "*T^2 term")
            ]
            key = f"{row['Formula']} {row['subphase']}".strip()
            result[key] = (terms[0], terms[1], terms[2], terms[3], float(row["Tmin"]), float(row["Tmax"]))
    return result


@cache
def burcat() -> dict[tuple[str, float], list[Piece]]:
    """Read the pieces of the Burcat file by its own formula text and lower limit [K]."""
    result = {}
    for phase in ElementTree.parse(package_file("thermochem", "BURCAT_THR.xml")).getroot().iter("phase"):
        limits = phase.find("temp_limit")
        coefficients = phase.find("coefficients")
        if limits is None or coefficients is None:
            continue
        low, high = float(limits.attrib["low"]), float(limits.attrib["high"])
        pieces = []
        for key, start, end in (("Tmin_to_1000", low, min(high, 1000.0)), ("1000_to_Tmax", max(low, 1000.0), high)):
            found = coefficients.find(f"range_{key}")
            if found is not None and start < end:
                try:
                    a = tuple(float((c.text or "").replace(" ", "")) for c in found.iter("coef"))
                except ValueError:
                    continue  # a misprinted number: the record is not used here
                pieces.append(Piece(start, end, (0.0, 0.0, *a)))
        result[" ".join((phase.findtext("formula") or "").split()), low] = pieces
    return result


@cache
def janaf(table: str) -> list[Row]:
    """Read the numbers of a NIST-JANAF table; at a transition two rows have the same temperature."""
    rows = []
    for line in package_file("janaf", "data", f"{table}.txt").read_text("utf-8").splitlines()[2:]:
        words = line.split("\t")
        try:
            T, Cp, S, _, H = (float(re.sub(r"\s", "", word)) for word in words[:5])
        except ValueError:
            continue  # empty cells below the first temperature, and "infinity"
        rows.append(Row(T, Cp, S, 1e3 * H))
    return [row for row in rows if row.T > 0.0]


@cache
def janaf_enthalpy(table: str) -> float:
    """Enthalpy of formation at 298.15 K in a NIST-JANAF table, [J/mol]."""
    for line in package_file("janaf", "data", f"{table}.txt").read_text("utf-8").splitlines()[2:]:
        words = line.split("\t")
        if words[0].strip() == "298.15":
            return 1e3 * float(words[5])
    raise LookupError(f"table {table} has no line for 298.15 K")
