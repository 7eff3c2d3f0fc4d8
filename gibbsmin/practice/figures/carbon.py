"""Activity of carbon in a gas, whether or not graphite may form.

Graphite is the reference: ln a_C = mu_C/RT - G°_graphite/RT, and mu_C/RT is the element potential of carbon. A gas that
is not in equilibrium has no such potential; there each of three reactions gives an activity of its own,

    a_C = K_B p_CO²/p_CO2 = K_M p_CH4/p_H2² = K_R p_CO p_H2/p_H2O      (p over 1 bar)                    (1)

which are one at equilibrium. Whisker carbon on nickel needs a few kJ/mol more than graphite, so that a_C = 1 is the
safe line (J. R. Rostrup-Nielsen, Catalytic Steam Reforming, 1984, from memory).
"""

from __future__ import annotations

from collections.abc import Mapping
from functools import cache
from typing import Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

from gibbsmin.constants import STANDARD_PRESSURE, R
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.potentials import record_of
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.practice.figures.tally import known
from gibbsmin.practice.reactions.reactions import Reaction, reaction
from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]

CARBON_REACTIONS: Final = {
    "co": "2 CO = C(s):graphite + CO2",
    "ch4": "CH4 = C(s):graphite + 2 H2",
    "co_h2": "CO + H2 = C(s):graphite + H2O(g)",
}
"""The three reactions that lay carbon down, each as it would."""

_GASES: Final = ("CO", "CO2", "CH4", "H2", "H2O")
_LABELS: Final = {"co": "a_C by 2 CO = C + CO2", "ch4": "a_C by CH4 = C + 2 H2", "co_h2": "a_C by CO + H2 = C + H2O"}
_MOST: Final = 700.0  # of a logarithm, before it is no number any more
_SAME: Final = 0.005  # of ln a_C; closer than that, the reactions tell nothing of their own


def carbon_activity(potential: ArrayLike, graphite: Species, temperature: ArrayLike) -> Floats:
    """Activity of carbon against graphite.

    Parameters
    ----------
    potential : array (states,)
        Element potential of carbon divided by RT, [-].
    graphite : Species
        The record of graphite.
    temperature : array (states,)
        [K].

    Returns
    -------
    array (states,)
        a_C, [-]: 1 where graphite is present or just about to be.
    """
    T = np.asarray(temperature, float)
    ln_a = np.asarray(potential, float) - np.asarray(graphite.gibbs_energy(T)) / (R * T)
    activity: Floats = np.exp(np.minimum(ln_a, _MOST))
    return activity


def carbon_by_reactions(
    fractions: Mapping[str, ArrayLike], temperature: ArrayLike, pressure: ArrayLike
) -> dict[str, Floats]:
    """Activity of carbon by each of the three reactions, eq. (1), in any gas.

    Parameters
    ----------
    fractions : mapping of str to array (states,)
        Mole fractions of CO, CO2, CH4, H2 and H2O in the wet gas, [-]; one that is missing is nowhere.
    temperature, pressure : array (states,)
        [K], [Pa].

    Returns
    -------
    dict of str to array (states,)
        a_C, [-], by the keys of `CARBON_REACTIONS`; nan where the gas lacks a species of the reaction.

    Examples
    --------
    >>> found = carbon_by_reactions({"CO": 0.30, "CO2": 0.05}, 973.15, 1.0e5)
    >>> found["co"].round(1).tolist()
    [1.8]
    """
    T, p, *parts = np.broadcast_arrays(np.atleast_1d(temperature), pressure, *fractions.values())
    gas = dict(zip(fractions, parts, strict=True))
    found: dict[str, Floats] = {}
    for key in CARBON_REACTIONS:
        each = _reaction(key)
        ln_a = np.full(T.shape, np.nan)
        terms = [
            (nu, np.asarray(gas.get(record.name, np.zeros(T.shape)), float))
            for record, nu in zip(each.species, each.coefficients.values(), strict=True)
            if not record.condensed
        ]
        there = np.isfinite(T) & (T > 0.0) & np.all([part > 0.0 for _, part in terms], axis=0)
        total = np.asarray(each.ln_k(T[there]), float)
        for nu, part in terms:
            total = total - nu * np.log(part[there] * p[there] / STANDARD_PRESSURE)
        ln_a[there] = total
        found[key] = np.exp(np.minimum(ln_a, _MOST))
    return found


def carbon(settled: Settled) -> list[KeyFigure]:
    """Activity of carbon by its element potential, and by the three reactions where they say something else.

    Parameters
    ----------
    settled : Settled
        Feeds and what they settle to; graphite need not be allowed.

    Returns
    -------
    list of KeyFigure
        Those that any state has.
    """
    T = settled.temperature
    nothing = np.full(len(T), np.nan)
    potential = np.asarray(settled.element_potentials.get("C", nothing), float)
    given = np.isfinite(T) & np.isfinite(potential)
    activity = nothing.copy()
    activity[given] = carbon_activity(potential[given], record_of(settled, "C(s):graphite"), T[given])
    by = carbon_by_reactions({name: settled.wet(name) for name in _GASES}, T, settled.pressure)
    figures = [
        KeyFigure(
            "carbon_activity",
            "carbon activity a_C",
            activity,
            note="Against graphite: above 1 carbon can form; inlet, wall and cooling are other questions.",
        )
    ]
    if any(_differs(each, activity) for each in by.values()):
        figures += [
            KeyFigure(
                f"carbon_activity_by_{key}",
                _LABELS[key],
                by[key],
                note="The gas is off equilibrium, so that each reaction has an activity of its own.",
            )
            for key in CARBON_REACTIONS
        ]
    return known(figures)


def _differs(one: Floats, other: Floats) -> bool:
    """Whether two activities are apart, or only the first is known, in any state."""
    both = (one > 0.0) & (other > 0.0)
    alone = np.isfinite(one) & ~np.isfinite(other)
    return bool(alone.any() or (np.abs(np.log(one[both] / other[both])) > _SAME).any())


@cache
def _reaction(key: str) -> Reaction:
    """Read one of the three, once."""
    return reaction(CARBON_REACTIONS[key])
