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
from gibbsmin.solver.continuation import continue_last
from gibbsmin.solver.energy import energy_excess, follow, potentials
from gibbsmin.solver.layout import (
    BASIS,
    CHANGES,
    COLD,
    COLD_EXCESS,
    COLD_SIDE,
    EXTRA,
    GIBBS,
    HIGH,
    HISTORY,
    KIND,
    LOW,
    MIXED,
    MODE,
    PRESENT,
    REUSES,
    SHARE,
    SIDES,
    TEMPERATURE,
    WARM,
    WARM_EXCESS,
    WARM_SIDE,
    WIDTH,
    T,
    Work,
)
from gibbsmin.solver.outcome import amounts
from gibbsmin.solver.phase_set import NONE, start_phases
from gibbsmin.solver.settle import settle
from gibbsmin.solver.simplex import optimal_basis
from gibbsmin.solver.status import NO_ROOM, SOLVED, TOO_COLD, TOO_HOT, UNSETTLED
from gibbsmin.solver.warmth import MOST_REUSES, begin_joint
from gibbsmin.thermo.table import Table

STARTS: Final = (0.0, -4.0, 4.0, -12.0)
"""Added to the potentials of gases in the linear programme, one after the other until a start leads to the answer."""

BRACKETS: Final = (1.0e-2, 1.0e-2, 1.0e-13)
"""Relative width of a bracket of T at which the joint iteration is tried, factor to the next, and last width."""

MIDDLE: Final = 1500.0
"""Above this temperature a state that was not found counts as too warm, below it as too cold, [K]."""

BOTH: Final = 3
ON: Final = -1  # no outcome yet


@inlined
def one_state(A: Any, gas: Any, b: Any, table: Table, w: Work) -> int:
    """Solve for one state; return its status. ``b`` (m,) is scaled to a sum of about one."""
    mode = w.count[MODE]
    w.value[LOW], w.value[HIGH], w.value[WIDTH] = w.value[COLD], w.value[WARM], BRACKETS[0]
    w.count[MIXED], w.count[SIDES], attempt = 0, 0, 0
    joint = mode != TEMPERATURE
    continued = ready = continue_last(b, gas, table, w)
    begun = continued
    for _ in range(1000):
        room = True
        if not begun and joint:
            ready = begin_joint(A, gas, b, table, w)
        elif not begun:
            w.count[CHANGES], w.count[EXTRA] = 0, NONE
            if attempt == 0:  # the basis of the state before; where T is to be found, the candidates are those of any T
                potentials(table, gas, w)
                ready = mode == TEMPERATURE and same_basis(A, gas, b, w)
                ready = ready and optimal_basis(attempt == 0, A, b, w.std[GIBBS], 0.0, w)
                w.count[REUSES] = w.count[REUSES] + 1 if ready else -1
            else:
                room = ready = optimal_basis(attempt == 0, A, b, w.std[GIBBS], STARTS[attempt - 1], w)
                w.count[REUSES] = 0 if ready and mode == TEMPERATURE else -1
            if ready:
                start_phases(w)
        settled = ready and settle(b, gas, table, w)
        begun = False
        if not continued:
            w.count[HISTORY] = 0
        if joint and settled and all_usable(table, w):
            return SOLVED
        if continued:
            continued = False
            if settled and not joint:
                return SOLVED
            w.count[REUSES], w.count[HISTORY] = -1, 0
            continue
        if not joint and not settled and room and attempt < len(STARTS):
            attempt += 1
            continue
        if mode == TEMPERATURE:
            return SOLVED if settled else (UNSETTLED if room else NO_ROOM)
        status = ON if joint else narrow(mode, settled, gas, table, w)
        if status != ON:
            return status
        joint = not joint and w.value[WIDTH] < 0.0
        w.value[WIDTH] = abs(w.value[WIDTH])
        begun = joint  # the joint iteration goes on from the state at hand
        if not joint:
            attempt, w.count[MODE], w.value[T] = 0, TEMPERATURE, np.sqrt(w.value[LOW] * w.value[HIGH])
    return UNSETTLED


@inlined
def same_basis(A: Any, gas: Any, b: Any, w: Work) -> bool:
    """Tell whether the basis of the state before may be a start; if its candidates are others, select this state's."""
    again = w.count[REUSES] >= 0 and same_candidates(b, w.std[GIBBS], w)
    if not again:
        select_candidates(A, gas, b, w.std[GIBBS], w)
    return bool(again and w.count[REUSES] < MOST_REUSES)


@inlined
def narrow(mode: int, settled: bool, gas: Any, table: Table, w: Work) -> int:
    """Narrow the bracket of T by a state of held T; return a status that ends the search, or ON.

    The width turns negative where the joint iteration is to be tried from this state. Where T is narrowed to nothing
    and the energy asked for lies between those of the two sides, both of them minima, it is that of a mixture of them:
    a plateau, or a transition within one record.
    """
    w.count[MODE] = mode
    warm = w.value[T] > MIDDLE
    if settled:
        follow(table, gas, w)
        excess = energy_excess(w)
        warm = excess > 0.0
        amounts(1.0, w, w.std[WARM_SIDE if warm else COLD_SIDE])
        w.value[WARM_EXCESS if warm else COLD_EXCESS] = excess
        w.count[SIDES] |= 2 if warm else 1
    w.value[HIGH if warm else LOW] = w.value[T]
    if w.value[HIGH] / w.value[LOW] >= 1.0 + w.value[WIDTH]:
        return ON
    if w.value[HIGH] > 0.999 * w.value[WARM]:
        return TOO_HOT
    if w.value[LOW] < 1.001 * w.value[COLD]:
        return TOO_COLD
    w.value[WIDTH] *= BRACKETS[1]
    if w.value[WIDTH] < BRACKETS[2]:
        cold = w.value[COLD_EXCESS]
        w.count[MIXED], w.value[SHARE] = 1, cold / (cold - w.value[WARM_EXCESS])
        return SOLVED if settled and w.count[SIDES] == BOTH else UNSETTLED
    if settled:
        w.count[CHANGES] = 0
        w.value[WIDTH] = -w.value[WIDTH]
    return ON


@inlined
def all_usable(table: Table, w: Work) -> bool:
    """Tell whether every condensed species that is present may be used at the present T."""
    usable = True
    for i in range(w.nu.shape[0]):
        if w.what[KIND, i] == PRESENT:
            j = w.species[w.what[BASIS, i]]
            usable &= table.low[j] <= w.value[T] <= table.top[j]
    return usable
