"""NIST-JANAF tables (Chase 1998) as the package ``janaf`` carries them, by the number of the table.

Nothing of the project is used here. log10 of the formation constant is nearly straight in 1/T between the 100 K points;
enthalpies are joined by cubics with the slopes Cp that the tables print.
"""

from __future__ import annotations

from collections.abc import Mapping
from functools import cache
from importlib.resources import files

import numpy as np
from scipy.interpolate import CubicHermiteSpline

R = 8.314462618  # J/mol/K


@cache
def rows(table: str) -> tuple[tuple[float, ...], ...]:
    """T, Cp, H - H(298.15), formation enthalpy, log10 Kf; from 200 K on."""
    found: dict[float, tuple[float, ...]] = {}
    for line in files("janaf").joinpath("data", f"{table}.txt").read_text().splitlines()[2:]:
        try:
            cells = [float(cell) for cell in line.split("\t")]
        except ValueError:
            continue
        if len(cells) == 8 and cells[0] >= 200.0:
            found.setdefault(cells[0], (cells[0], cells[1], cells[4], cells[5], cells[7]))
    return tuple(found[T] for T in sorted(found))


def log_kf(table: str, temperature: float) -> float:
    """log10 of the formation constant at 1 bar."""
    T, _, _, _, log_k = np.array(rows(table)).T
    assert T[0] <= temperature <= T[-1]
    return float(np.interp(-1.0 / temperature, -1.0 / T, log_k))


def log_k(reaction: Mapping[str, float], temperature: float) -> float:
    """log10 of the constant of a reaction, by the tables of its members; reference states need none."""
    return sum(nu * log_kf(table, temperature) for table, nu in reaction.items())


@cache
def _sensible(table: str) -> CubicHermiteSpline:
    T, cp, h, _, _ = np.array(rows(table)).T
    return CubicHermiteSpline(T, 1e3 * h, cp)


def enthalpy(table: str, temperature: float, reference: bool = False) -> float:
    """Enthalpy with that of the elements at 298.15 K as zero, [J/mol]; ``reference``: the table of an element."""
    formed = 0.0 if reference else 1e3 * next(row[3] for row in rows(table) if row[0] == 298.15)
    return formed + float(_sensible(table)(temperature))
