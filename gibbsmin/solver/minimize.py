"""One state and many states: from element amounts, T and P to amounts, element potentials and certificate."""

from __future__ import annotations

from typing import Any, Final, NamedTuple

import numpy as np

from gibbsmin.compiled import compiled, inlined
from gibbsmin.solver.candidates import same_candidates, select_candidates
from gibbsmin.solver.certificate import element_residual, optimality
from gibbsmin.solver.gas import present_amount
from gibbsmin.solver.energy import energy_excess, follow, potentials
from gibbsmin.solver.layout import (
    CHANGES,
    COLD,
    ENERGY,
    ENTROPY,
    EXTRA,
    FIRST,
    GAS,
    IDLE,
    MODE,
    MORE,
    PRESENT,
    REUSES,
    SECOND,
    STEPS,
    TEMPERATURE,
    VOLUME,
    WARM,
    G,
    K,
    T,
    Work,
    new_work,
)
from gibbsmin.solver.phase_set import NONE, NOTHING, start_phases
from gibbsmin.solver.settle import settle
from gibbsmin.solver.simplex import optimal_basis, optimal_basis_again
from gibbsmin.solver.status import (
    AFFINITY_LIMIT,
    GAP_LIMIT,
    HELD_LIMIT,
    NO_FEED,
    NO_ROOM,
    RESIDUAL_LIMIT,
    SOLVED,
    TOO_COLD,
    TOO_HOT,
    UNPROVED,
    UNSETTLED,
)
from gibbsmin.solver.warmth import GUESS, start_temperature
from gibbsmin.species.table import Table, standard_heat_capacity, standard_state

STARTS: Final = (0.0, -4.0, 4.0, -12.0)
"""Added to the potentials of gases in the linear programme, one after the other until a start leads to the answer."""

BRACKETS: Final = (1.0e-2, 1.0e-2, 1.0e-11)
"""Relative width of a bracket of T at which settling is tried first, factor to the next, and last width."""

MOST_REUSES: Final = 50
"""States in a row that take over the coordinates of the one before, so that rounding does not gather in them."""


class Outcome(NamedTuple):
    """Results of ``states`` states of S species and m elements; `new_outcome` allocates them."""

    n: Any  # (states, S) mol
    lam: Any  # (states, m) [-], -inf for an element of which there is none
    temperature: Any  # (states,) K
    pressure: Any  # (states,) bar
    enthalpy: Any  # (states,) H/R, mol K
    entropy: Any  # (states,) S/R, mol
    status: Any  # (states,) int, see `status`
    steps: Any  # (states,) int, Newton steps
    residual: Any  # (states,)
    gap: Any  # (states,)
    affinity: Any  # (states,)
    held: Any  # (states,) relative error of T that the second held condition leaves; zero where T is held


def new_outcome(states: int, S: int, m: int) -> Outcome:
    """Allocate an `Outcome` of ``states`` states, ``S`` species and ``m`` elements."""
    real, whole = np.float64, np.int64
    shapes = [(states, S), (states, m), *[(states,)] * 10]
    types = [*[real] * 6, whole, whole, *[real] * 4]
    return Outcome(*[np.zeros(shape, kind) for shape, kind in zip(shapes, types, strict=True)])


@inlined
def collect(scale: float, A: Any, w: Work, n: Any, lam: Any) -> None:
    """Write amounts (times ``scale``) and element potentials of the present state, eq. (4).

    An idle place is still that of the artificial column of its own row: a row that depends on others has the
    potential zero, one that no candidate holds (an absent element) minus infinity.
    """
    m = lam.size
    for j in range(n.size):
        n[j] = 0.0
    for i in range(m):
        lam[i] = 0.0
    if w.count[GAS] == 1:
        for j in range(w.count[G]):
            n[w.species[j]] = scale * w.n[j]
    if w.count[EXTRA] >= 0:
        n[w.species[w.count[EXTRA]]] = scale * max(w.value[MORE], 0.0)
    for i in range(m):
        if w.kind[i] == IDLE:
            held = False
            for k in range(w.count[K]):
                held |= A[i, w.species[k]] != 0.0
            lam[i] += 0.0 if held else -np.inf
            continue
        if w.kind[i] == PRESENT:
            n[w.species[w.basis[i]]] = scale * max(present_amount(i, w), 0.0)
        potential = w.g[w.species[w.basis[i]]] + w.y[i]
        for k in range(m):
            lam[k] += w.inverse[i, k] * potential


@inlined
def close_balances(b: Any, w: Work, n: Any) -> None:
    """Let the condensed species take up what rounding left of the element balances: n_c + (B^-1 (b - A n))_c."""
    m = b.size
    for i in range(m):
        total = b[i]
        for j in range(n.size):
            total -= w.A[i, j] * n[j]
        w.left[i] = total
    for i in range(m):
        if w.kind[i] == PRESENT:
            j, total = w.species[w.basis[i]], 0.0
            for k in range(m):
                total += w.inverse[i, k] * w.left[k]
            n[j] = max(n[j] + total, 0.0)


@inlined
def at_temperature(A: Any, gas: Any, b: Any, table: Table, w: Work) -> int:
    """Solve problem (1) for one state at the T of ``w``; return its status. ``b`` (m,) is scaled to a sum of one."""
    w.count[CHANGES], w.count[EXTRA] = 0, NONE
    potentials(table, gas, w)
    again = w.count[REUSES] >= 0 and same_candidates(b, w.g, w)
    if again and w.count[REUSES] < MOST_REUSES and optimal_basis_again(b, w.g, w):
        w.count[REUSES] += 1
        start_phases(w)
        if settle(b, gas, table, w):
            return SOLVED
    elif not again:
        select_candidates(A, gas, b, w.g, w)
    w.count[REUSES] = -1
    for bias in STARTS:
        if not optimal_basis(A, b, w.g, bias, w):
            return NO_ROOM
        start_phases(w)
        w.count[CHANGES] = 0
        if settle(b, gas, table, w):
            w.count[REUSES] = 0
            return SOLVED
    return UNSETTLED


@inlined
def at_energy(A: Any, gas: Any, b: Any, table: Table, w: Work) -> int:
    """Solve for one state with the temperature unknown; return its status."""
    w.count[REUSES] = -1
    w.count[CHANGES], w.count[EXTRA] = 0, NONE
    for j in range(gas.size):
        w.g[j] = 0.0
    select_candidates(A, gas, b, w.g, w)
    if start_temperature(A, b, gas, table, w):
        follow(table, gas, w)
        start_phases(w)
        if settle(b, gas, table, w) and all_usable(table, w):
            return SOLVED
    return by_bracket(A, gas, b, table, w)


@inlined
def all_usable(table: Table, w: Work) -> bool:
    """Tell whether every condensed species that is present may be used at the present T."""
    usable = True
    for i in range(w.c.size):
        if w.kind[i] == PRESENT:
            j = w.species[w.basis[i]]
            usable &= table.low[j] <= w.value[T] <= table.top[j]
    return usable


@inlined
def by_bracket(A: Any, gas: Any, b: Any, table: Table, w: Work) -> int:
    """Narrow T by states of held T, whose energy and entropy rise with T, and settle from the nearest of them."""
    mode, low, high = w.count[MODE], w.value[COLD], w.value[WARM]
    narrow = BRACKETS[0]
    for _ in range(120):
        w.value[T] = np.sqrt(low * high)
        w.count[MODE] = TEMPERATURE
        solved = at_temperature(A, gas, b, table, w) == SOLVED
        w.count[MODE] = mode
        w.count[CHANGES] = 0
        too_warm = w.value[T] > GUESS
        if solved:
            follow(table, gas, w)
            too_warm = energy_excess(w) > 0.0
        if too_warm:
            high = w.value[T]
        else:
            low = w.value[T]
        if high / low < 1.0 + narrow:
            if high > 0.999 * w.value[WARM]:
                return TOO_HOT
            if low < 1.001 * w.value[COLD]:
                return TOO_COLD
            if solved and settle(b, gas, table, w) and all_usable(table, w):
                return SOLVED
            narrow *= BRACKETS[1]
            if narrow < BRACKETS[2]:
                break
    return UNSETTLED


@compiled
def minimize_many(
    A: Any, gas: Any, b: Any, mode: int, volume: bool, first: Any, second: Any, table: Table, out: Outcome
) -> None:
    """Solve every state of a batch.

    Parameters
    ----------
    A : (m, S) array
        Atoms of each element in each species [-].
    gas : (S,) bool array
        True for the species of the ideal gas.
    b : (states, m) array
        Element amounts [mol].
    mode : int
        What ``second`` is: TEMPERATURE, ENERGY or ENTROPY of `layout`.
    volume : bool
        Whether ``first`` is a volume.
    first : (states,) array
        Pressure [bar], or volume over R [mol K/bar], finite and positive.
    second : (states,) array
        Temperature [K]; enthalpy, or at held volume internal energy, over R [mol K]; or entropy over R [mol].
    table : Table
        Standard-state functions.
    out : Outcome
        Filled in place.
    """
    m, S = A.shape
    w = new_work(A)
    w.count[REUSES] = -1
    w.count[MODE] = mode
    w.value[COLD], w.value[WARM] = np.inf, 0.0
    for j in range(S):
        w.value[COLD], w.value[WARM] = min(w.value[COLD], table.low[j]), max(w.value[WARM], table.top[j])
    relative = np.empty(m)
    for state in range(first.size):
        scale = 0.0
        for i in range(m):
            scale += abs(b[state, i])
        out.status[state] = NO_FEED
        if scale == 0.0:
            continue
        scale = 2.0 ** np.ceil(np.log2(scale))  # a power of two: what is stoichiometric stays so to the last bit
        for i in range(m):
            relative[i] = b[state, i] / scale
        w.count[STEPS] = 0
        w.count[VOLUME] = 1 if volume else 0
        w.value[FIRST] = -np.log(first[state] / scale) if volume else np.log(first[state])
        w.value[T] = second[state]
        w.value[SECOND] = second[state] / scale
        if mode == TEMPERATURE:
            out.status[state] = at_temperature(A, gas, relative, table, w)
        else:
            out.status[state] = at_energy(A, gas, relative, table, w)
        out.steps[state] = w.count[STEPS]
        if out.status[state] == SOLVED:
            collect(scale, A, w, out.n[state], out.lam[state])
            close_balances(b[state], w, out.n[state])
            finish(A, gas, b[state], first[state], second[state], table, w, state, out)


@inlined
def finish(A: Any, gas: Any, b: Any, first: float, second: float, table: Table, w: Work, state: int, out: Outcome) -> None:
    """Write the totals of a state, and prove it as one at its own temperature and pressure.

    H/R = T sum n_j h_j; S/R = sum n_j (s_j - ln x_j - ln P/P°) over the gas, sum n_c s_c beside it.
    """
    n, temperature = out.n[state], w.value[T]
    amount = 0.0
    for j in range(n.size):
        amount += n[j] if gas[j] else 0.0
    pressure = amount * temperature / first if w.count[VOLUME] == 1 else first
    out.temperature[state], out.pressure[state] = temperature, pressure
    standard_state(temperature, table, w.e, w.s)
    standard_heat_capacity(temperature, table, w.cp)
    lnP = np.log(pressure) if pressure > 0.0 else NOTHING
    enthalpy = entropy = capacity = 0.0
    for j in range(n.size):
        usable = table.low[j] <= temperature <= table.top[j] and w.chosen[j]
        w.g[j] = w.e[j] - w.s[j] + (lnP if gas[j] else 0.0) if usable else np.inf
        if n[j] > 0.0:
            enthalpy += n[j] * w.e[j] * temperature
            entropy += n[j] * (w.s[j] - (lnP + np.log(n[j] / amount) if gas[j] else 0.0))
            capacity += n[j] * w.cp[j]
    out.enthalpy[state], out.entropy[state] = enthalpy, entropy
    if w.count[MODE] == ENERGY:
        energy = enthalpy - (amount * temperature if w.count[VOLUME] == 1 else 0.0)
        out.held[state] = abs(energy - second) / (capacity * temperature)
    elif w.count[MODE] == ENTROPY:
        out.held[state] = abs(entropy - second) / capacity
    out.residual[state] = element_residual(A, b, n)
    out.gap[state], out.affinity[state] = optimality(A, gas, b, w.g, n, out.lam[state], w.u)
    proved = out.residual[state] <= RESIDUAL_LIMIT and out.gap[state] <= GAP_LIMIT
    if not (proved and out.affinity[state] <= AFFINITY_LIMIT and out.held[state] <= HELD_LIMIT):
        out.status[state] = UNPROVED
