"""One state and many states: from element amounts, T and P to amounts, element potentials and certificate."""

from __future__ import annotations

from typing import Any, NamedTuple

import numpy as np

from gibbsmin.compiled import compiled, inlined
from gibbsmin.solver.basis import replace
from gibbsmin.solver.certificate import element_residual, optimality
from gibbsmin.solver.gas import OVERDRAFT, activities, balance_step, imbalance, overdrawn, present_amount, worst_balance
from gibbsmin.solver.layout import CHANGES, FREE, GAS, IDLE, JOIN, PRESENT, STEPS, G, K, N, Work, X, new_work
from gibbsmin.solver.newton import newton_error, newton_step
from gibbsmin.solver.phase_set import NONE, STUCK, poor_place, saturating, set_gas, start_phases, wanted_change
from gibbsmin.solver.simplex import exact_prices, optimal_basis, select_candidates
from gibbsmin.solver.status import (
    AFFINITY_LIMIT,
    BAD_INPUT,
    GAP_LIMIT,
    NO_FEED,
    NO_ROOM,
    RESIDUAL_LIMIT,
    SOLVED,
    UNPROVED,
    UNSETTLED,
)
from gibbsmin.species.table import Table, standard_state

COARSE = 1.0  # abs(ln(supply/demand)) above which one balance at a time is set right
NEAR = 1.0e-2  # Newton error below which phases may change
CROWDED = 3.0  # ln X above which the gas is given more room before anything else
DONE = 1.0e-13
ENOUGH = 1.0e-11  # accepted where rounding forbids DONE
MOST_STEPS = 60  # from one start; 20 were the most that any start needed that led to the answer
STARTS = (0.0, -4.0, 4.0, -12.0)  # added to the potentials of gases in the linear programme, until a start leads home
MOST_CHANGES = 200
MOST_ROUNDS = 2000


class Outcome(NamedTuple):
    """Results of ``states`` states of S species and m elements."""

    n: Any  # (states, S) mol
    lam: Any  # (states, m) [-]
    status: Any  # (states,) int, see `status`
    steps: Any  # (states,) int, Newton steps
    residual: Any  # (states,)
    gap: Any  # (states,)
    affinity: Any  # (states,)


@inlined
def settle(b: Any, w: Work) -> bool:
    """Iterate from the start until nothing is out of balance and no phase wants to come or go."""
    last, steps = np.inf, w.count[STEPS]
    for _ in range(MOST_ROUNDS):
        activities(w)
        place = NONE
        worst = worst_balance(w)
        if worst >= 0 and imbalance(worst, w) > COARSE:
            if balance_step(worst, w):
                continue
            place = worst
            w.count[JOIN] = saturating(place, w)
            if w.count[JOIN] == NONE:
                return False
        else:
            error = newton_error(w)
            place = poor_place(w)
            if place == NONE and w.count[GAS] == 1 and np.log(w.value[X]) > CROWDED and not overdrawn(w):
                w.value[N] *= w.value[X]
                continue
            if place == NONE and (error < NEAR or overdrawn(w)):
                place = wanted_change(min(error, 0.1 * OVERDRAFT), w)
        if place == STUCK or w.count[CHANGES] > MOST_CHANGES:
            return False
        if place != NONE:
            change(place, b, w)
            last = np.inf
            continue
        if error < DONE or (error < ENOUGH and error >= last):
            return True
        last = error
        w.count[STEPS] += 1
        if w.count[STEPS] - steps > MOST_STEPS or not newton_step(w):
            return False
    return False


@inlined
def change(place: int, b: Any, w: Work) -> None:
    """Put candidate ``w.count[JOIN]`` into ``place``, present if condensed, free if gas; with NONE the place is only freed.

    Then see that there is a gas just where a free coordinate holds something.
    """
    w.count[CHANGES] += 1
    k = w.count[JOIN]
    if k != NONE:
        replace(place, k, b, w)
        if k >= w.count[G]:
            w.kind[place], w.y[place] = PRESENT, 0.0
    held = 0.0
    for i in range(w.c.size):
        held += abs(w.c[i]) if w.kind[i] == FREE else 0.0
    if (held > 0.0) != (w.count[GAS] == 1):
        set_gas(held, w)


@inlined
def collect(scale: float, g: Any, w: Work, n: Any, lam: Any) -> None:
    """Write amounts (times ``scale``) and element potentials of the present state, eq. (4)."""
    m = lam.size
    n[:] = 0.0
    lam[:] = 0.0
    if w.count[GAS] == 1:
        for j in range(w.count[G]):
            n[w.species[j]] = scale * w.n[j]
    for i in range(m):
        if w.kind[i] == IDLE:
            continue
        if w.kind[i] == PRESENT:
            n[w.species[w.basis[i]]] = scale * max(present_amount(i, w), 0.0)
        potential = g[w.species[w.basis[i]]] + w.y[i]
        for k in range(m):
            lam[k] += w.inverse[i, k] * potential


@inlined
def one_state(A: Any, gas: Any, b: Any, g: Any, w: Work, n: Any, lam: Any) -> int:
    """Solve problem (1) for one state; return its status. ``g`` (S,) is inf where a species is no candidate, and
    becomes inf where it cannot be present.
    """
    scale = 0.0
    for i in range(b.size):
        scale += abs(b[i])
    if not np.isfinite(scale):
        return BAD_INPUT
    if scale == 0.0:
        return NO_FEED
    relative = b / scale
    w.count[:] = 0
    select_candidates(A, gas, relative, g, w)
    for bias in STARTS:
        if not optimal_basis(A, relative, g, bias, w):
            return NO_ROOM
        exact_prices(g, w)
        start_phases(w)
        w.count[CHANGES] = 0
        if settle(relative, w):
            collect(scale, g, w, n, lam)
            return SOLVED
    return UNSETTLED


@compiled
def minimize_many(A: Any, gas: Any, b: Any, T: Any, P: Any, table: Table, out: Outcome) -> None:
    """Solve every state of a batch.

    Parameters
    ----------
    A : (S, m) array
        Atoms of each element in each species [-].
    gas : (S,) bool array
        True for the species of the ideal gas.
    b : (states, m) array
        Element amounts [mol].
    T, P : (states,) arrays
        Temperature [K] and pressure [bar].
    table : Table
        Standard-state functions.
    out : Outcome
        Filled in place.
    """
    S, m = A.shape
    w = new_work(S, m)
    h, s, g = np.empty(S), np.empty(S), np.empty(S)
    for state in range(T.size):
        n, lam = out.n[state], out.lam[state]
        out.residual[state] = out.gap[state] = out.affinity[state] = np.nan
        n[:] = np.nan
        lam[:] = np.nan
        out.steps[state] = 0
        if not (T[state] > 0.0 and P[state] > 0.0 and np.isfinite(T[state]) and np.isfinite(P[state])):
            out.status[state] = BAD_INPUT
            continue
        standard_state(T[state], table, h, s)
        lnP = np.log(P[state])
        for j in range(S):
            usable = table.low[j] <= T[state] <= table.top[j]
            g[j] = h[j] - s[j] + (lnP if gas[j] else 0.0) if usable else np.inf
        status = one_state(A, gas, b[state], g, w, n, lam)
        out.steps[state] = w.count[STEPS]
        if status == SOLVED:
            out.residual[state] = element_residual(A, b[state], n)
            out.gap[state], out.affinity[state] = optimality(A, gas, b[state], g, n, lam)
            proved = out.residual[state] <= RESIDUAL_LIMIT and out.gap[state] <= GAP_LIMIT
            if not (proved and out.affinity[state] <= AFFINITY_LIMIT):
                status = UNPROVED
        out.status[state] = status
