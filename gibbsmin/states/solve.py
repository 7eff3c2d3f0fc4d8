"""From a feed and two held conditions to states."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from typing import Any, Final

import numpy as np
from numpy.typing import ArrayLike

from gibbsmin.constants import STANDARD_PRESSURE, STANDARD_TEMPERATURE, R
from gibbsmin.errors import FeedError, InputError
from gibbsmin.solver.layout import new_work
from gibbsmin.solver.minimize import minimize_many
from gibbsmin.solver.outcome import Outcome, new_outcome
from gibbsmin.solver.status import SOLVED, UNSETTLED
from gibbsmin.states.batch import Batch
from gibbsmin.states.held import UNIT, which_pair
from gibbsmin.states.state import State
from gibbsmin.states.system import Array, System, constraint_row
from gibbsmin.units import Measurable, quantity

COLDEST, HOTTEST = 50.0, 20000.0
"""Temperatures beyond which the data say nothing at all, [K]."""

NOTHING: Final = 1e-200
"""Amount of an element, relative to that of the most abundant, that is none: less than one atom in any plant."""

APPROACH_ROUNDS, APPROACH_CLOSE = 40, 1e-11
"""How often approach temperatures are counted anew from a temperature that comes out, and when that is enough [-]."""


def equilibrium(
    system: System,
    feed: Mapping[str, Measurable],
    *,
    temperature: Measurable | None = None,
    pressure: Measurable | None = None,
    volume: Measurable | None = None,
    enthalpy: Measurable | None = None,
    internal_energy: Measurable | None = None,
    entropy: Measurable | None = None,
    constrained: Mapping[str, Measurable] | None = None,
    approach: Mapping[str, float] | None = None,
) -> State:
    """Find the state in which a feed settles while two conditions are held.

    The method is the dual programme of `gibbsmin.solver` (White, Johnson & Dantzig 1958; Duffin, Peterson & Zener
    1967), with the temperature as one more unknown where it is not held.

    Parameters
    ----------
    system : System
        What may form.
    feed : mapping of str to float or quantity
        Amount of each species that goes in, [mol].
    temperature, pressure, volume, enthalpy, internal_energy, entropy : float, str or pint quantity
        Two held conditions: pressure with temperature, enthalpy or entropy; or volume with temperature, internal
        energy or entropy. A bare number is in [K], [Pa], [m3], [J], [J], [J/K]. Pressures are absolute; elements at
        298.15 K are the zero of energy.
    constrained : mapping of str to float or quantity
        What each constraint of the system holds, [mol]; one that is not there keeps what the feed has.
    approach : mapping of str to float
        Approach temperatures of reactions of the system, [K]; not together with entropy.

    Returns
    -------
    State
        Certified.

    Raises
    ------
    InputError
        A pair that cannot be held, a quantity with the wrong dimension or out of range, or a feed that the system
        cannot hold.
    NotCertified
        No state was found and proved; the text says why and what to try.
    """
    given = {
        "temperature": temperature,
        "pressure": pressure,
        "volume": volume,
        "enthalpy": enthalpy,
        "internal_energy": internal_energy,
        "entropy": entropy,
    }
    pair, first, second = which_pair(given)
    values = {name: quantity(value, UNIT[name], name) for name, value in ((pair.first, first), (pair.second, second))}
    held = {name: quantity(value, "mol", f"constrained[{name!r}]") for name, value in (constrained or {}).items()}
    b = system.feed(feed)[None, :]
    return equilibria(system, element_amounts=b, constrained=held, approach=approach, **values).state(0)


def equilibria(
    system: System,
    feeds: ArrayLike | None = None,
    *,
    element_amounts: ArrayLike | None = None,
    temperature: ArrayLike | None = None,
    pressure: ArrayLike | None = None,
    volume: ArrayLike | None = None,
    enthalpy: ArrayLike | None = None,
    internal_energy: ArrayLike | None = None,
    entropy: ArrayLike | None = None,
    constrained: Mapping[str, ArrayLike] | None = None,
    approach: Mapping[str, ArrayLike] | None = None,
) -> Batch:
    """Find many states in one call.

    Parameters
    ----------
    system : System
        What may form.
    feeds : (states, S) or (S,) array
        Amounts of the species that go in, in the order of ``system.species``, [mol].
    element_amounts : (states, E) or (E,) array
        Instead of ``feeds``: amounts of the elements, in the order of ``system.elements``, [mol].
    temperature, pressure, volume, enthalpy, internal_energy, entropy : (states,) arrays or scalars
        Two held conditions, as in `equilibrium`: [K], [Pa], [m3], [J], [J], [J/K].
    constrained, approach : mapping of str to (states,) array or scalar
        As in `equilibrium`, [mol] and [K].

    Returns
    -------
    Batch
        States that could not be certified are marked, with their reason.

    Raises
    ------
    InputError
        A pair that cannot be held, shapes that do not go together, or a value that is not finite or out of range.
    """
    given = {
        "temperature": temperature,
        "pressure": pressure,
        "volume": volume,
        "enthalpy": enthalpy,
        "internal_energy": internal_energy,
        "entropy": entropy,
    }
    pair, first, second = which_pair(given)
    one, two = _finite(first, pair.first), _finite(second, pair.second)
    b = _element_amounts(system, feeds, element_amounts)
    lengths = {pair.second: two.shape, pair.first: one.shape, "feeds": b.shape[:-1]}
    counts = {shape[0] for shape in lengths.values() if shape} - {1}
    if len(counts) > 1 or any(len(shape) > 1 for shape in lengths.values()):
        told = {name: shape[0] if len(shape) == 1 else shape or "one" for name, shape in lengths.items()}
        found = ", ".join(f"{name} {length}" for name, length in told.items())
        raise InputError(f"held conditions and feeds have one axis, that of the states, of one length; got {found}")
    count = counts.pop() if counts else 1
    one, two, b = _rows(one, (count,)), _rows(two, (count,)), _rows(b, (count, b.shape[-1]))
    _constrain(b, system, constrained or {})
    sizes = np.abs(b)
    b[sizes < NOTHING * sizes.max(axis=1, keepdims=True, initial=0.0)] = 0.0
    one = one * STANDARD_PRESSURE / R if pair.volume else one / STANDARD_PRESSURE
    if pair.second != "temperature":
        two = two / R

    def minimized(offset: Array) -> Outcome:
        outcome = new_outcome(count, len(system.species), len(system.elements))
        work, A = new_work(system.element_matrix), system.element_matrix
        minimize_many(A, system.gas, b, pair.mode, pair.volume, one, two, offset, system.table, work, outcome)
        return outcome

    if not approach:
        return Batch(system, minimized(np.zeros((1, len(system.species)))))
    if pair.second == "entropy":
        raise InputError("an approach temperature and a held entropy do not go together; hold another condition")
    if pair.second == "temperature":
        offset = system.approaches.offsets(two, approach)
        return Batch(system, minimized(offset), offset)
    return _follow_approach(system, approach, minimized)


def _follow_approach(system: System, approach: Mapping[str, ArrayLike], minimized: Callable[[Array], Outcome]) -> Batch:
    """Find states of held energy whose approach temperatures count from the temperature that comes out.

    The offsets change little with T: a fixed point, which a secant step in each state brings home in four or five
    rounds. What does not come home is marked.
    """
    outcome = minimized(np.zeros((1, len(system.species))))
    T = np.array(outcome.temperature)
    old, missed = T, np.zeros_like(T)
    for _ in range(APPROACH_ROUNDS):
        offset = system.approaches.offsets(np.where(T > 0.0, T, STANDARD_TEMPERATURE), approach)
        outcome = minimized(offset)
        miss = outcome.temperature - T
        settled = (np.abs(miss) <= APPROACH_CLOSE * T) | (outcome.status != SOLVED)
        if settled.all():
            break
        slope = (missed - miss) / np.where(old != T, T - old, np.inf)  # one less what T does to the T that comes out
        old, missed = T, miss
        T = np.where(settled, T, T + miss / np.where((slope > 0.5) & (slope < 2.0), slope, 1.0))
    outcome.status[~settled] = UNSETTLED
    return Batch(system, outcome, offset)


def _constrain(b: Array, system: System, constrained: Mapping[str, ArrayLike]) -> None:
    """Write what the constraints hold into their rows of ``b``."""
    for name, value in constrained.items():
        if name not in system.constraints:
            known = ", ".join(system.constraints) or "none"
            raise InputError(f"the system has no constraint {name!r}; it has {known}")
        amount = np.asarray(value, float)
        if not np.isfinite(amount).all() or amount.shape not in ((), (len(b),)):
            raise InputError(f"the constraint {name} must hold finite amounts, one or one a state")
        b[:, system.elements.index(constraint_row(name))] = amount


def _rows(values: Array, shape: tuple[int, ...]) -> Array:
    """Copy values to every state: the compiled code is one for writable arrays in row order only."""
    rows = np.empty(shape)
    rows[...] = values
    return rows


def _finite(value: ArrayLike, what: str) -> Array:
    """Return ``value`` as an array of finite numbers, positive where that is needed, T within all data."""
    array: Array = np.asarray(value, float)
    least, most = _span(array)
    if what in ("temperature", "pressure", "volume"):
        if not 0.0 < least <= most < np.inf:
            wrong = array[~((array > 0.0) & np.isfinite(array))][0]
            raise InputError(f"{what} must be finite and above zero; got {wrong}")
    elif not -np.inf < least <= most < np.inf:
        raise InputError(f"{what} must be finite; got {array[~np.isfinite(array)][0]}")
    if what == "temperature" and not COLDEST <= least <= most <= HOTTEST:
        wrong = array[(array < COLDEST) | (array > HOTTEST)][0]
        raise InputError(f"temperature must lie within {COLDEST:.0f} and {HOTTEST:.0f} K; got {wrong:.6g} K")
    return array


def _span(array: Array) -> tuple[float, float]:
    """Return the least and the most of an array, nan where one of its numbers is; a middling number if it is empty."""
    return (float(array.min()), float(array.max())) if array.size else (1.0e3, 1.0e3)


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
    least, most = _span(array)
    if not -np.inf < least <= most < np.inf:
        raise InputError(f"{what} must be finite")
    if feeds is None:
        return array
    if least < 0.0:
        raise FeedError(
            f"the feed of {names[int(np.argmax((array < 0.0).reshape(-1, len(names)).any(axis=0)))]} is negative"
        )
    amounts: Array = array @ system.element_matrix.T
    return amounts
