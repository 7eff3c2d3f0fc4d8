"""Equilibrium of reformer gas by bisection, with the NIST-JANAF tables (Chase 1998) that the package ``janaf`` carries.

Nothing of the project is used here. Formation constants are nearly straight in 1/T between the 100 K points of the
tables; enthalpies are joined by cubics with the slopes Cp that the tables print. C2H6, which JANAF does not have, is
that of ``gri30.yaml``, packaged with Cantera.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from functools import cache
from importlib.resources import files
from math import log, log10

import cantera
import numpy as np
from scipy.interpolate import CubicHermiteSpline
from scipy.optimize import brentq

R = 8.314462618  # J/mol/K
TABLE = {
    "H2": "H-050", "N2": "N-023", "O2": "O-029", "Ar": "Ar-001", "CO": "C-093", "CO2": "C-095", "H2O": "H-064",
    "CH4": "C-067", "NH3": "H-083",
}  # fmt: skip
REFERENCE = ("H2", "N2", "O2", "Ar", "C")
ATOMS = {
    "H2": {"H": 2}, "CO": {"C": 1, "O": 1}, "CO2": {"C": 1, "O": 2}, "H2O": {"H": 2, "O": 1}, "CH4": {"C": 1, "H": 4},
    "C2H6": {"C": 2, "H": 6}, "O2": {"O": 2}, "N2": {"N": 2}, "NH3": {"N": 1, "H": 3}, "Ar": {"Ar": 1},
    "CH3OH": {"C": 1, "H": 4, "O": 1},
}  # fmt: skip

WEIGHT = {"H": 1.008, "C": 12.011, "N": 14.007, "O": 15.999, "Ar": 39.95}  # g/mol, IUPAC 2021 abridged
NORMAL = R * 273.15 / 101325.0  # m3/mol

REFORMING = {"CH4": -1, "H2O": -1, "CO": 1, "H2": 3}
SHIFT = {"CO": -1, "H2O": -1, "CO2": 1, "H2": 1}
AMMONIA = {"N2": -0.5, "H2": -1.5, "NH3": 1}
BOUDOUARD = {"CO": -2, "CO2": 1, "C": 1}
CRACKING = {"CH4": -1, "H2": 2, "C": 1}
CARBON_FROM_WATER_GAS = {"CO": -1, "H2": -1, "H2O": 1, "C": 1}


@cache
def rows(name: str) -> tuple[tuple[float, ...], ...]:
    """T, Cp, S, H - H(298.15), formation enthalpy, log10 Kf; from 200 K on."""
    found = []
    for line in files("janaf").joinpath("data", f"{TABLE[name]}.txt").read_text().splitlines()[2:]:
        try:
            cells = [float(cell) for cell in line.split("\t")]
        except ValueError:
            continue
        if len(cells) == 8 and cells[0] >= 200.0:
            found.append((cells[0], cells[1], cells[2], cells[4], cells[5], cells[7]))
    return tuple(found)


@cache
def sensible(name: str) -> CubicHermiteSpline:
    T, cp, _, h, _, _ = np.array(rows(name)).T
    return CubicHermiteSpline(T, 1e3 * h, cp)


@cache
def standard_entropy(name: str) -> CubicHermiteSpline:
    T, cp, s, _, _, _ = np.array(rows(name)).T
    return CubicHermiteSpline(T, s, cp / T)


def heat_capacity(name: str, T: float) -> float:
    """J/mol/K."""
    return float(sensible(name)(T, 1))


@cache
def packaged() -> cantera.Solution:
    return cantera.Solution("gri30.yaml")


@cache
def enthalpy(name: str, T: float) -> float:
    """J/mol, elements at 298.15 K being zero."""
    if name == "C2H6":
        return float(packaged().species(name).thermo.h(T)) / 1e3
    formation = next(row[4] for row in rows(name) if row[0] == 298.15)
    return 1e3 * formation + float(sensible(name)(T))


def total_enthalpy(amounts: Mapping[str, float], T: float) -> float:
    return sum(n * enthalpy(name, T) for name, n in amounts.items() if n)


def total_entropy(amounts: Mapping[str, float], T: float, bar: float) -> float:
    """J/K of a mixture of ideal gases."""
    total = 0.0
    for name, x in fractions(amounts).items():
        if name == "C2H6":
            s = float(packaged().species(name).thermo.s(T)) / 1e3 + R * log(1.01325)  # its data are for 1 atm
        else:
            s = float(standard_entropy(name)(T))
        total += amounts[name] * (s - R * log(x * bar))
    return total


def log_kf(name: str, T: float) -> float:
    if name in REFERENCE:
        return 0.0
    T_row, *_, value = np.array(rows(name)).T
    return float(np.interp(-1.0 / T, -1.0 / T_row, value))


def log_k(reaction: Mapping[str, float], T: float) -> float:
    """log10 K at 1 bar; graphite is a reference."""
    return sum(nu * log_kf(name, T) for name, nu in reaction.items())


def log_q(reaction: Mapping[str, float], fractions: Mapping[str, float], bar: float) -> float:
    """log10 of the quotient of pressures in bar; carbon counts one."""
    return sum(nu * log10(fractions[name] * bar) for name, nu in reaction.items() if name != "C")


def elements(amounts: Mapping[str, float]) -> dict[str, float]:
    found: dict[str, float] = {}
    for name, n in amounts.items():
        for symbol, count in ATOMS[name].items():
            found[symbol] = found.get(symbol, 0.0) + count * n
    return found


def mean_molar_mass(amounts: Mapping[str, float]) -> float:
    """kg/mol."""
    mass = sum(WEIGHT[symbol] * n for symbol, n in elements(amounts).items())
    return 1e-3 * mass / sum(amounts.values())


def shifted(C: float, H: float, O: float, T: float) -> dict[str, float]:
    """CO, CO2, H2 and H2O of so many atoms, by the shift reaction at T."""

    def gas(CO2: float) -> dict[str, float]:
        water = O - C - CO2
        return {"CO": C - CO2, "CO2": CO2, "H2O": water, "H2": H / 2 - water}

    low, high = max(0.0, O - C - H / 2), min(C, O - C)
    edge = 1e-13 * high
    wanted = log_k(SHIFT, T)
    return gas(
        brentq(lambda CO2: log_q(SHIFT, gas(CO2), 1.0) - wanted, low + edge, high - edge, xtol=1e-16, rtol=1e-14)
    )


def reformed(feed: Mapping[str, float], T: float, bar: float, approach: float = 0.0) -> dict[str, float]:
    """Amounts that CH4, CO, CO2, H2 and H2O settle to, N2 and Ar beside them; K of reforming holds at T + approach."""
    atoms = elements(feed)
    C, H, O = (atoms[symbol] for symbol in "CHO")
    idle = {name: feed[name] for name in ("N2", "Ar") if name in feed}
    wanted = log_k(REFORMING, T + approach)

    def gas(CH4: float) -> dict[str, float]:
        return {"CH4": CH4, **shifted(C - CH4, H - 4 * CH4, O, T), **idle}

    def off(CH4: float) -> float:
        amounts = gas(CH4)
        return log_q(REFORMING, fractions(amounts), bar) - wanted

    low, high = max(0.0, C - O), min(C, H / 4, (2 * C + H / 2 - O) / 4)  # where water, H2, CO and CO2 run out
    return gas(brentq(off, low + 1e-9 * C, high - 1e-9 * C, xtol=1e-14, rtol=1e-13))


def fractions(amounts: Mapping[str, float]) -> dict[str, float]:
    total = sum(amounts.values())
    return {name: n / total for name, n in amounts.items()}


def adiabatic(settle: Callable[[float], dict[str, float]], feed_enthalpy: float, low: float, high: float) -> float:
    """Temperature at which what settles has the enthalpy of the feeds, K."""
    return float(brentq(lambda T: total_enthalpy(settle(T), T) - feed_enthalpy, low, high, xtol=1e-7))


def dry(amounts: Mapping[str, float], *names: str) -> float:
    """Share of the gas without its water."""
    total = sum(n for name, n in amounts.items() if name != "H2O")
    return sum(amounts[name] for name in names) / total
