"""How far a named reaction is from equilibrium: the temperature at which its gas would be in balance.

With Q the reaction quotient of the gas as it is, pressures over 1 bar,

    ln K(T_eq) = ln Q,    approach = T_eq - T                                                            (1)

so that the constant holds at T + approach. The trade quotes a positive number for 'less converted than equilibrium':
T - T_eq for reactions that take up heat, T_eq - T for those that give it off. Both are told.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from typing import Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

from gibbsmin.constants import STANDARD_PRESSURE, R
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.practice.reactions.reactions import Reaction, reaction

Floats = NDArray[np.float64]

_COLDEST, _HOTTEST = 200.0, 6000.0
_STEPS: Final = 60
_EXACT: Final = 1e-12  # relative, of a temperature
_NOTHING: Final = 0.05  # K, an approach that is none in words
_ROUNDING: Final = 1e-6  # K, an approach that is none in figures


@dataclass(frozen=True)
class Watched:
    """A reaction whose distance from equilibrium a trade watches.

    Attributes
    ----------
    key : str
        Begins the names of its figures.
    label : str
        What people call it.
    equation : str
        As `reaction` reads it.
    usual : str
        Usual distance short of equilibrium, for the note; common practice, no source.
    """

    key: str
    label: str
    equation: str
    usual: str


REFORMING: Final = Watched(
    "reforming", "reforming", "CH4 + H2O(g) = CO + 3 H2", "0 to 20 K in tubes, 5 to 20 K behind burners"
)
SHIFT: Final = Watched("shift", "shift", "CO + H2O(g) = CO2 + H2", "5 to 20 K in a hot bed, 5 to 15 K in a cold one")
METHANATION: Final = Watched(
    "methanation", "methanation", "CO + 3 H2 = CH4 + H2O(g)", "5 to 20 K, less on fresh catalyst"
)
AMMONIA: Final = Watched("ammonia", "ammonia", "1/2 N2 + 3/2 H2 = NH3", "10 to 30 K behind a bed")
METHANOL: Final = Watched("methanol", "methanol", "CO + 2 H2 = CH3OH", "5 to 20 K")


def equilibrium_temperature(
    each: Reaction, fractions: Mapping[str, ArrayLike], pressure: ArrayLike, near: ArrayLike
) -> Floats:
    """Temperature at which a gas would be in balance by one reaction.

    Parameters
    ----------
    each : Reaction
        Solids and liquids of it count as present and pure.
    fractions : mapping of str to array (states,)
        Mole fractions in the wet gas, [-]; measured or calculated.
    pressure : array (states,)
        [Pa].
    near : array (states,)
        Where the search begins, [K]: the temperature of the gas.

    Returns
    -------
    array (states,)
        T_eq of eq. (1), [K]; nan where the gas lacks a species of the reaction, or no temperature from 200 to 6000 K
        gives balance.

    Notes
    -----
    ln K is nearly straight in 1/T with the slope -dH/R, so that Newton's steps in 1/T settle in a few.

    Examples
    --------
    >>> gas = {"CO": 0.0942, "H2O": 0.3301, "CO2": 0.0550, "H2": 0.4870}
    >>> T = equilibrium_temperature(reaction("CO + H2O(g) = CO2 + H2"), gas, 24e5, 1143.15)
    >>> (T - 273.15).round().tolist()
    [869.0]
    """
    start, p, *x = np.broadcast_arrays(np.atleast_1d(near), pressure, *fractions.values())
    gas = dict(zip(fractions, x, strict=True))
    ln_Q = np.zeros(start.shape)
    for record, nu in zip(each.species, each.coefficients.values(), strict=True):
        if not record.condensed:
            partial = np.asarray(gas.get(record.name, np.zeros(start.shape)), float) * p / STANDARD_PRESSURE
            ln_Q += nu * np.log(partial, out=np.full(start.shape, np.nan), where=partial > 0.0)
    found = np.full(start.shape, np.nan)
    left = np.flatnonzero(np.isfinite(ln_Q) & (start > _COLDEST) & (start < _HOTTEST))
    inverse = 1.0 / start[left].astype(float)
    for _ in range(_STEPS):
        if not left.size:
            break
        T = 1.0 / inverse
        slope = np.asarray(each.enthalpy(T), float) / R
        off = np.asarray(each.ln_k(T), float) - ln_Q[left]
        inverse = inverse + np.divide(off, slope, out=np.full(T.shape, np.nan), where=slope != 0.0)
        settled = np.abs(inverse * T - 1.0) <= _EXACT
        found[left[settled]] = 1.0 / inverse[settled]
        going = ~settled & (inverse > 1.0 / _HOTTEST) & (inverse < 1.0 / _COLDEST)
        left, inverse = left[going], inverse[going]
    return found


def approach(settled: Settled, watched: Watched) -> list[KeyFigure]:
    """T_eq of a reaction in the settled gas, and its approach; zero where the gas is at equilibrium.

    Parameters
    ----------
    settled : Settled
        Feeds and what they settle to.
    watched : Watched
        The reaction.

    Returns
    -------
    list of KeyFigure
        Two; nan where the gas lacks a species of the reaction.
    """
    each = _reaction(watched.equation)
    gas = {record.name: settled.wet(record.name) for record in each.species}
    T_eq = equilibrium_temperature(each, gas, settled.pressure, settled.temperature)
    away = T_eq - settled.temperature
    away = np.where(np.abs(away) < _ROUNDING, 0.0, away)
    sense = (
        f"{each.equation}, K holds at T + approach. Usually short of equilibrium by {watched.usual} (common practice)."
    )
    note = f"{words(each, float(away[0]))}. {sense}" if len(away) == 1 and np.isfinite(away[0]) else sense
    return [
        KeyFigure(
            f"{watched.key}_equilibrium_temperature",
            f"T_eq of {watched.label}",
            T_eq,
            "K",
            "degC",
        ),
        KeyFigure(f"{watched.key}_approach", f"approach of {watched.label}", away, "K", note=note),
    ]


def words(each: Reaction, away: float) -> str:
    """Say an approach in both conventions.

    Parameters
    ----------
    each : Reaction
        The reaction.
    away : float
        Approach, T_eq - T, [K].

    Returns
    -------
    str

    Examples
    --------
    >>> words(reaction("CH4 + H2O(g) = CO + 3 H2"), -11.1)
    'Approach -11.1 K (11.1 K short of equilibrium)'
    """
    if abs(away) < _NOTHING:
        return "At equilibrium"
    takes_heat = float(each.enthalpy(298.15)) > 0.0
    side = "short of" if (away < 0.0) == takes_heat else "beyond"
    return f"Approach {away:+.1f} K ({abs(away):.1f} K {side} equilibrium)"


@cache
def _reaction(equation: str) -> Reaction:
    """Read an equation once."""
    return reaction(equation)
