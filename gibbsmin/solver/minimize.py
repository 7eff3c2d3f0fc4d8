"""Many states in one call."""

from __future__ import annotations

from typing import Any

import numpy as np

from gibbsmin.compiled import compiled
from gibbsmin.solver.continuation import remember
from gibbsmin.solver.layout import (
    COLD,
    FIRST,
    HISTORY,
    MODE,
    OFFSET,
    REUSES,
    SECOND,
    STEPS,
    TEMPERATURE,
    VOLUME,
    WARM,
    T,
    Work,
)
from gibbsmin.solver.one_state import one_state
from gibbsmin.solver.outcome import Outcome, close_balances, collect, finish
from gibbsmin.solver.status import NO_FEED, SOLVED
from gibbsmin.thermo.table import Table


@compiled
def minimize_many(
    A: Any,
    gas: Any,
    b: Any,
    mode: int,
    volume: bool,
    first: Any,
    second: Any,
    offset: Any,
    table: Table,
    w: Work,
    out: Outcome,
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
    offset : (states, S) or (1, S) array
        Added to g of every species [-], as a constant of the state: not for held entropy.
    table : Table
        Standard-state functions.
    w : Work
        Arrays to work in, of `new_work`.
    out : Outcome
        Filled in place.
    """
    m, S = A.shape
    w.count[REUSES], w.count[HISTORY] = -1, 0
    w.value[COLD], w.value[WARM] = np.inf, 0.0
    for j in range(S):
        w.value[COLD], w.value[WARM] = min(w.value[COLD], table.low[j]), max(w.value[WARM], table.top[j])
    for state in range(first.size):
        scale = 0.0
        for i in range(m):
            scale += abs(b[state, i])
        out.status[state] = NO_FEED
        if scale == 0.0:
            continue
        scale = 2.0 ** np.ceil(np.log2(scale))  # a power of two: what is stoichiometric stays so to the last bit
        for i in range(m):
            w.b[i] = b[state, i] / scale
        for j in range(S):
            w.std[OFFSET, j] = offset[state if offset.shape[0] > 1 else 0, j]
        w.count[STEPS] = 0
        w.count[VOLUME] = 1 if volume else 0
        w.value[FIRST] = -np.log(first[state] / scale) if volume else np.log(first[state])
        if mode == TEMPERATURE:
            w.value[T] = second[state]
        w.value[SECOND] = second[state] / scale
        w.count[MODE] = mode
        out.status[state] = one_state(A, gas, w.b, table, w)
        out.steps[state] = w.count[STEPS]
        if out.status[state] != SOLVED:
            w.count[HISTORY] = 0
        if out.status[state] == SOLVED:
            remember(w.b, w)
            collect(scale, A, w, out.n[state], out.lam[state])
            close_balances(b[state], w, out.n[state])
            finish(A, gas, b[state], first[state], second[state], table, w, state, out)
