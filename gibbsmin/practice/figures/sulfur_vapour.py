"""Vapour of sulfur: S to S8 in balance with each other, and where liquid or solid sulfur would drop out of it.

Over condensed sulfur, which has activity one, every S_n has a pressure of its own:

    ln(p_n/1 bar) = n G°_S/RT - G°_Sn/RT,      G°_S the lower of liquid and solid                          (1)

A gas that cools without any other reaction, at one pressure P, keeps its atoms s of elemental sulfur and its amount m
of everything else, and the S_n follow the balance among themselves. It is saturated at the temperature at which

    m Σ n p_n = s (P - Σ p_n)                                                                              (2)

whose left side rises and whose right side falls with temperature, so that bisection cannot miss it.
"""

from __future__ import annotations

from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.constants import STANDARD_PRESSURE, R
from gibbsmin.practice.figures.potentials import record_of
from gibbsmin.practice.figures.settled import Settled

Floats = NDArray[np.float64]

VAPOUR: Final = {"S": 1, "S2": 2, "S3": 3, "S4": 4, "S5": 5, "S6": 6, "S7": 7, "S8": 8}
"""Species of the vapour of sulfur, and their atoms."""

CONDENSED: Final = ("S(l)", "S(s)")
"""Sulfur that has dropped out."""

_COLD: Final = 250.0
_HOT: Final = 1300.0
"""K between which a dew temperature is looked for; the critical temperature of sulfur is near 1313 K (from memory)."""

_HALVINGS: Final = 50


def vapour_atoms(settled: Settled) -> Floats:
    """Atoms of elemental sulfur in the gas, (states,), [mol or mol/s]."""
    return np.asarray(sum((n * settled.amount(name) for name, n in VAPOUR.items()), settled.zero))


def saturation(settled: Settled, temperature: Floats) -> dict[str, Floats]:
    """Pressure of every S_n over condensed sulfur, by eq. (1).

    Parameters
    ----------
    settled : Settled
        Only its own records of sulfur are used, where it has them.
    temperature : array (states,)
        [K].

    Returns
    -------
    dict of str to array (states,)
        By the names of ``VAPOUR``, [Pa].
    """
    RT = R * temperature
    condensed = np.minimum(*(record_of(settled, name).gibbs_energy(temperature) for name in CONDENSED))
    return {
        name: STANDARD_PRESSURE * np.exp((n * condensed - record_of(settled, name).gibbs_energy(temperature)) / RT)
        for name, n in VAPOUR.items()
    }


def sulfur_dew_temperature(settled: Settled) -> Floats:
    """Temperature at which sulfur begins to drop out when the gas cools with all else frozen, by eq. (2).

    Parameters
    ----------
    settled : Settled

    Returns
    -------
    array (states,)
        [K]; that of the state where condensed sulfur is present, nan where the gas holds no elemental sulfur.

    Notes
    -----
    Sulfur that stands in H2S, SO2 and other compounds does not count, though it would make more sulfur on a catalyst.
    """
    atoms = vapour_atoms(settled)
    rest = settled.gas - settled.amount(*VAPOUR)
    low, high = np.full(len(atoms), _COLD), np.full(len(atoms), _HOT)

    def excess(T: Floats) -> Floats:
        pressures = saturation(settled, T)
        bound = sum(n * pressures[name] for name, n in VAPOUR.items())
        return np.asarray(rest * bound - atoms * (settled.pressure - sum(pressures.values())))

    bracketed = (atoms > 0.0) & (excess(low) < 0.0) & (excess(high) > 0.0)
    for _ in range(_HALVINGS):
        middle = 0.5 * (low + high)
        above = excess(middle) > 0.0
        low, high = np.where(above, low, middle), np.where(above, middle, high)
    return np.where(bracketed, 0.5 * (low + high), np.nan)
