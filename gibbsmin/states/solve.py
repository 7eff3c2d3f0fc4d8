"""From a feed and two held conditions to states."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from gibbsmin.constants import STANDARD_PRESSURE
from gibbsmin.errors import FeedError, InputError
from gibbsmin.solver.minimize import minimize_many, new_outcome
from gibbsmin.states.batch import Batch
from gibbsmin.states.state import State
from gibbsmin.states.system import Array, System
from gibbsmin.units import Measurable, quantity

COLDEST, HOTTEST = 50.0, 20000.0
"""Temperatures beyond which the data say nothing at all, [K]."""


def equilibrium(
    system: System, feed: Mapping[str, Measurable], *, temperature: Measurable, pressure: Measurable
) -> State:
    """Find the state in which a feed settles at a held temperature and pressure.

    The method is the dual programme of `gibbsmin.solver` (White, Johnson & Dantzig 1958; Duffin, Peterson & Zener
    1967).

    Parameters
    ----------
    system : System
        What may form.
    feed : mapping of str to float or quantity
        Amount of each species that goes in, [mol].
    temperature, pressure : float, str or pint quantity
        Held conditions; a bare number is in [K] and [Pa]. Pressures are absolute.

    Returns
    -------
    State
        Certified.

    Raises
    ------
    InputError
        A quantity with the wrong dimension or out of range, or a feed that the system cannot hold.
    NotCertified
        No state was found and proved; the text says why and what to try.
    """
    batch = equilibria(
        system,
        element_amounts=system.feed(feed)[None, :],
        temperature=quantity(temperature, "K", "temperature"),
        pressure=quantity(pressure, "Pa", "pressure"),
    )
    return batch.state(0)


def equilibria(
    system: System,
    feeds: ArrayLike | None = None,
    *,
    temperature: ArrayLike,
    pressure: ArrayLike,
    element_amounts: ArrayLike | None = None,
) -> Batch:
    """Find many states at held temperatures and pressures in one call.

    Parameters
    ----------
    system : System
        What may form.
    feeds : (states, S) or (S,) array
        Amounts of the species that go in, in the order of ``system.species``, [mol].
    temperature, pressure : (states,) arrays or scalars
        [K], [Pa].
    element_amounts : (states, E) or (E,) array
        Instead of ``feeds``: amounts of the elements, in the order of ``system.elements``, [mol].

    Returns
    -------
    Batch
        States that could not be certified are marked, with their reason.

    Raises
    ------
    InputError
        Shapes that do not go together, or a value that is not finite or out of range.
    """
    T = _positive(temperature, "temperature")
    P = _positive(pressure, "pressure")
    if np.any((T < COLDEST) | (T > HOTTEST)):
        raise InputError(f"temperature must lie within {COLDEST:.0f} and {HOTTEST:.0f} K; got {_first(T):.6g} K")
    b = _element_amounts(system, feeds, element_amounts)
    lengths = {"temperature": T.shape, "pressure": P.shape, "feeds": b.shape[:-1]}
    counts = {shape[0] for shape in lengths.values() if shape} - {1}
    if len(counts) > 1 or any(len(shape) > 1 for shape in lengths.values()):
        found = ", ".join(
            f"{name} {shape[0] if len(shape) == 1 else shape or 'one'}" for name, shape in lengths.items()
        )
        raise InputError(
            f"temperature, pressure and feeds have one axis, that of the states, of one length; got {found}"
        )
    count = counts.pop() if counts else 1
    T, P = (
        np.array(np.broadcast_to(value, (count,)), float, order="C") for value in (T, P)
    )  # copies: the compiled code is one
    b = np.array(np.broadcast_to(b, (count, b.shape[-1])), float, order="C")  # for writable arrays in row order only
    outcome = new_outcome(count, len(system.species), len(system.elements))
    minimize_many(system.element_matrix, system.gas, b, 0, False, P / STANDARD_PRESSURE, T, system.table, outcome)
    return Batch(system, T, P, outcome)


def _positive(value: ArrayLike, what: str) -> Array:
    """Return ``value`` as an array of finite positive numbers."""
    array: Array = np.asarray(value, float)
    if not np.all(np.isfinite(array) & (array > 0.0)):
        raise InputError(f"{what} must be finite and above zero; got {array[~(array > 0.0) | ~np.isfinite(array)][0]}")
    return array


def _first(T: Array) -> float:
    """First temperature out of range."""
    return float(T[(T < COLDEST) | (T > HOTTEST)].flat[0])


def _element_amounts(system: System, feeds: Any, element_amounts: Any) -> Array:
    """Return element amounts, (..., E) [mol], from either form of feed."""
    if (feeds is None) == (element_amounts is None):
        raise InputError("give either feeds or element_amounts")
    given, names, what = (
        (element_amounts, system.elements, "element_amounts") if feeds is None else (feeds, system.species, "feeds")
    )
    array: Array = np.asarray(given, float)
    if array.ndim not in (1, 2) or array.shape[-1] != len(names):
        raise InputError(f"{what} must have shape (states, {len(names)}) or ({len(names)},); got {array.shape}")
    if not np.isfinite(array).all():
        raise InputError(f"{what} must be finite")
    if feeds is None:
        return array
    if (array < 0.0).any():
        raise FeedError(
            f"the feed of {names[int(np.argmax((array < 0.0).reshape(-1, len(names)).any(axis=0)))]} is negative"
        )
    amounts: Array = array @ system.element_matrix.T
    return amounts
