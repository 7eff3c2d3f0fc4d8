"""One state: a start, the iteration, and what to try if it does not lead home.

At a given temperature: the basis of the state before, if it has the same candidates and still holds b; then starts of
the linear programme with gases made cheaper or dearer. With the temperature unknown: the temperature of the linear
programme; then T is narrowed by states of given temperature, whose energy and entropy rise with T, and the joint
iteration is tried again from the nearest. `settle` has one place of call, because every further one is compiled anew.
"""

from __future__ import annotations

from typing import Any, Final

import numpy as np

from gibbsmin.compiled import inlined
from gibbsmin.solver.candidates import same_candidates, select_candidates
from gibbsmin.solver.energy import energy_excess, follow, potentials
from gibbsmin.solver.layout import (
    BASIS,
    CHANGES,
    COLD,
    COLD_SIDE,
    EXTRA,
    GIBBS,
    KIND,
    MIXED,
    MODE,
    PRESENT,
    REUSES,
    SHARE,
    TEMPERATURE,
    WARM,
    WARM_SIDE,
    T,
    Work,
)
from gibbsmin.solver.outcome import amounts
from gibbsmin.solver.phase_set import NONE, start_phases
from gibbsmin.solver.settle import settle
from gibbsmin.solver.simplex import optimal_basis, optimal_basis_again
from gibbsmin.solver.status import NO_ROOM, SOLVED, TOO_COLD, TOO_HOT, UNSETTLED
from gibbsmin.solver.warmth import GUESS, start_temperature
from gibbsmin.thermo.table import Table

STARTS: Final = (0.0, -4.0, 4.0, -12.0)
"""Added to the potentials of gases in the linear programme, one after the other until a start leads to the answer."""

MOST_REUSES: Final = 50
"""States in a row that take over the coordinates of the one before, so that rounding does not gather in them."""

BRACKETS: Final = (1.0e-2, 1.0e-2, 1.0e-11)
"""Relative width of a bracket of T at which the joint iteration is tried, factor to the next, and last width."""

READY: Final = 1
BOTH: Final = 3


@inlined
def one_state(A: Any, gas: Any, b: Any, table: Table, w: Work) -> int:
    """Solve for one state; return its status. ``b`` (m,) is scaled to a sum of about one.

    Where T is narrowed to nothing and the energy asked for lies between those of the two sides, both of them minima, it
    is that of a mixture of them: a plateau, or a transition within one record.
    """
    w.count[MIXED] = 0
    sides, cold_excess, warm_excess = 0, 0.0, 0.0
    mode, low, high, narrow = w.count[MODE], w.value[COLD], w.value[WARM], BRACKETS[0]
    joint = mode != TEMPERATURE
    ready = begin_joint(A, gas, b, table, w) if joint else begin(0, mode, A, gas, b, table, w)
    attempt = 0
    for _ in range(1000):
        settled = ready == READY and settle(b, gas, table, w)
        if joint and settled and all_usable(table, w):
            return SOLVED
        if not joint:
            if not settled and ready != NO_ROOM and attempt < len(STARTS):
                attempt += 1
                ready = begin(attempt, mode, A, gas, b, table, w)
                continue
            if mode == TEMPERATURE:
                return SOLVED if settled else (NO_ROOM if ready == NO_ROOM else UNSETTLED)
            w.count[MODE] = mode
            too_warm = w.value[T] > GUESS
            if settled:
                follow(table, gas, w)
                excess = energy_excess(w)
                too_warm = excess > 0.0
                amounts(1.0, w, w.std[WARM_SIDE if too_warm else COLD_SIDE])
                cold_excess, warm_excess = (cold_excess, excess) if too_warm else (excess, warm_excess)
                sides |= 2 if too_warm else 1
            low, high = (low, w.value[T]) if too_warm else (w.value[T], high)
        if not joint and high / low < 1.0 + narrow:
            if high > 0.999 * w.value[WARM] or low < 1.001 * w.value[COLD]:
                return TOO_HOT if high > 0.999 * w.value[WARM] else TOO_COLD
            narrow *= BRACKETS[1]
            joint, ready, w.count[CHANGES] = settled, READY, 0
            if narrow < BRACKETS[2]:
                w.count[MIXED], w.value[SHARE] = 1, cold_excess / (cold_excess - warm_excess)
                return SOLVED if settled and sides == BOTH else UNSETTLED
            if joint:
                continue
        joint, attempt = False, 0
        w.count[MODE], w.value[T] = TEMPERATURE, np.sqrt(low * high)
        ready = begin(0, mode, A, gas, b, table, w)
    return UNSETTLED


@inlined
def begin(attempt: int, mode: int, A: Any, gas: Any, b: Any, table: Table, w: Work) -> int:
    """Prepare a start at the present T: READY, NO_ROOM, or 0 where this one (the basis of the state before) is none.

    Where T is to be found, as ``mode`` says, the candidates are those of any T (`begin_joint`).
    """
    w.count[CHANGES], w.count[EXTRA] = 0, NONE
    if attempt == 0:
        potentials(table, gas, w)
        if mode != TEMPERATURE:
            return 0
        again = w.count[REUSES] >= 0 and same_candidates(b, w.std[GIBBS], w)
        usable = again and w.count[REUSES] < MOST_REUSES and optimal_basis_again(b, w.std[GIBBS], w)
        w.count[REUSES] = w.count[REUSES] + 1 if usable else -1
        if usable:
            start_phases(w)
            return READY
        if not again:
            select_candidates(A, gas, b, w.std[GIBBS], w)
        return 0
    if not optimal_basis(A, b, w.std[GIBBS], STARTS[attempt - 1], w):
        w.count[REUSES] = -1
        return NO_ROOM
    w.count[REUSES] = 0 if mode == TEMPERATURE else -1
    start_phases(w)
    return READY


@inlined
def begin_joint(A: Any, gas: Any, b: Any, table: Table, w: Work) -> int:
    """Prepare the first start with T unknown: READY, or 0 if no temperature was found."""
    w.count[CHANGES], w.count[EXTRA] = 0, NONE
    for j in range(gas.size):
        w.std[GIBBS, j] = 0.0
    again = w.count[REUSES] >= 0 and same_candidates(b, w.std[GIBBS], w)
    if not again:
        select_candidates(A, gas, b, w.std[GIBBS], w)
    again &= w.count[REUSES] < MOST_REUSES
    w.count[REUSES] = w.count[REUSES] + 1 if again else 0
    if not start_temperature(again, A, b, gas, table, w):
        w.count[REUSES] = -1
        return 0
    follow(table, gas, w)
    start_phases(w)
    return READY


@inlined
def all_usable(table: Table, w: Work) -> bool:
    """Tell whether every condensed species that is present may be used at the present T."""
    usable = True
    for i in range(w.nu.shape[0]):
        if w.what[KIND, i] == PRESENT:
            j = w.species[w.what[BASIS, i]]
            usable &= table.low[j] <= w.value[T] <= table.top[j]
    return usable
