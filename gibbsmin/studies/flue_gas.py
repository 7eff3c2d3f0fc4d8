"""Flue gas that settles once more before it leaves, part of which may go back, and the air that gives it its oxygen.

A flue gas keeps the composition that it has at some temperature on its way to the stack, where reactions become too
slow; that is taken as a state of its own, of the same elements, at that temperature and the held pressure.
"""

from __future__ import annotations

from collections.abc import Callable
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.errors import InputError
from gibbsmin.states.batch import Batch
from gibbsmin.states.system import System

Floats = NDArray[np.float64]
Settle = Callable[[Floats], Batch]
"""From element amounts (states, E) to the flue gas of every state."""

ROUNDS: Final = 60
CLOSE: Final = 1e-11
"""Change of a returned gas, per its amount, and of a share of oxygen, that ends the rounds [-]."""


def returned_gas(system: System, fresh: Floats, share: Floats, dried: bool, settle: Settle) -> Floats:
    """Find the flue gas that goes back to the fire in steady state.

    Parameters
    ----------
    system : System
        What may form.
    fresh : array (states, E)
        Elements of all that is fed but the returned gas, [mol or mol/s].
    share : array (states,)
        Part r of all flue gas that goes back, from 0 to below 1, [-].
    dried : bool
        Whether its water vapour is taken out, after the parting.
    settle : callable
        Gives the flue gas of all that is fed.

    Returns
    -------
    array (states, S)
        Amount of each species that goes back, [mol or mol/s].

    Raises
    ------
    InputError
        The share is not from 0 to below 1, a state has no flue gas, or none that is steady.

    Notes
    -----
    With e the elements of the returned gas and F(e) those of the flue gas of fresh feeds and e, e = r F(e). An element
    that passes has F' = 1, one that is held back by drying or as a solid F' = 0; Wegstein's method (Wegstein, Commun.
    ACM 1 (6) (1958) 9) finds F' of each from round to round, between these bounds.
    """
    if np.any((share < 0.0) | (share >= 1.0)):
        raise InputError("the share of the flue gas that goes back must be from 0 to below 1")
    A, gas = system.element_matrix, system.gas
    kept = gas & ~(dried & (np.array(system.species) == "H2O"))
    r = share[:, None]
    e = old = old_given = np.zeros_like(fresh)
    passes = np.ones_like(fresh)
    for number in range(ROUNDS):
        batch = settle(fresh + e)
        if not batch.certified.all():
            first = int(np.flatnonzero(~batch.certified)[0])
            raise InputError(f"the flue gas of state {first + 1} was not found: {batch.reason[first]}")
        x = r * np.where(kept, batch.amounts, 0.0)
        given = x @ A.T
        if np.all(np.abs(given - e).sum(axis=1) <= CLOSE * np.abs(given).sum(axis=1)):
            return x
        if number:
            moved = np.abs(e - old) > CLOSE * np.abs(e)
            rise = np.divide(given - old_given, e - old, out=np.zeros_like(e), where=moved)  # r F'
            passes = np.where(moved, np.clip(rise / np.maximum(r, CLOSE), 0.0, 1.0), passes)
        old, old_given = e, given
        e = e + (given - e) / (1.0 - r * passes)
    raise InputError(f"the returned flue gas found no steady state in {ROUNDS} rounds")


def air_for_oxygen(wanted: Floats, oxidant: float, first: Floats, oxygen: Callable[[Floats], Floats]) -> Floats:
    """Find the air ratio that gives a dry flue gas its oxygen.

    Parameters
    ----------
    wanted : array (states,)
        O2 of the dry flue gas, mole fraction, [-].
    oxidant : float
        O2 of the dry oxidant, mole fraction, [-].
    first : array (states,)
        Air ratio to begin with, above 1, [-].
    oxygen : callable
        From air ratios (states,) to O2 of the dry flue gas (states,).

    Returns
    -------
    array (states,)
        Air ratio, [-].

    Raises
    ------
    InputError
        No air gives so much oxygen.

    Notes
    -----
    Where everything burns, the air ratio is linear in y = x/(x_oxidant - x) (balance of oxygen and dry gas), so that
    the secant method in y needs few rounds.
    """
    if np.any((wanted <= 0.0) | (wanted >= oxidant)):
        raise InputError(f"a flue gas with this oxidant can hold between 0 and {100.0 * oxidant:.4g} % O2, dry")

    def y(x: Floats) -> Floats:
        return x / (oxidant - x)

    goal, old = y(wanted), first
    at_old, ratio = y(oxygen(old)), 1.02 * first
    for _ in range(ROUNDS):
        x = oxygen(ratio)
        if np.all(np.abs(x - wanted) <= CLOSE):
            return ratio
        at = y(x)
        rise = np.where(at != at_old, (ratio - old) / np.where(at != at_old, at - at_old, 1.0), 0.0)
        old, at_old = ratio, at
        ratio = np.clip(ratio + (goal - at) * rise, 0.5 * ratio, 2.0 * ratio)
    raise InputError("no air ratio was found that gives the flue gas its oxygen")
