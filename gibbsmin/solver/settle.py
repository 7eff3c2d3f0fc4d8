"""From a start to an answer: balances first, then Newton steps, and changes of the phase set where they are wanted."""

from __future__ import annotations

from typing import Any, Final

import numpy as np

from gibbsmin.compiled import inlined
from gibbsmin.solver.basis import replace
from gibbsmin.solver.energy import boiling, follow
from gibbsmin.solver.gas import OVERDRAFT, activities, balance_step, imbalance, overdrawn, worst_balance
from gibbsmin.solver.layout import (
    CHANGES,
    COLD,
    EXTRA,
    FREE,
    GAS,
    JOIN,
    KIND,
    MODE,
    PRESENT,
    STEPS,
    TEMPERATURE,
    VOLUME,
    WARM,
    C,
    G,
    N,
    T,
    Work,
    X,
    Y,
)
from gibbsmin.solver.newton import newton_error, newton_step
from gibbsmin.solver.phase_set import EXTRA_PLACE, NONE, STUCK, poor_place, saturating, set_gas, wanted_change
from gibbsmin.thermo.table import Table

COARSE: Final = 1.0  # abs(ln(supply/demand)) above which one balance at a time is set right
CROWDED: Final = 3.0  # ln X above which the gas is given more room before anything else
NEAR: Final = 1.0e-2  # Newton error below which phases may change
DONE: Final = 1.0e-13
ENOUGH: Final = 1.0e-11  # accepted where rounding forbids DONE
MOST_STEPS: Final = 60  # from one start; 20 were the most that a start needed that led to the answer
MOST_CHANGES: Final = 200
MOST_ROUNDS: Final = 2000


@inlined
def settle(b: Any, gas: Any, table: Table, w: Work) -> bool:
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
            if place == NONE and crowded(w):
                w.value[N] *= w.value[X]
                continue
            if place == NONE and (error < NEAR or overdrawn(w)):
                place = wanted_change(min(error, 0.1 * OVERDRAFT), b, w)
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
        if w.count[MODE] != TEMPERATURE:
            if not w.value[COLD] < w.value[T] < w.value[WARM]:
                return False
            follow(table, gas, w)
    return False


@inlined
def crowded(w: Work) -> bool:
    """Tell whether the gas has far too little room, and no condensed species is the cause."""
    if w.count[GAS] == 0 or w.count[VOLUME] == 1 or boiling(w):
        return False
    return bool(np.log(w.value[X]) > CROWDED and not overdrawn(w))


@inlined
def change(place: int, b: Any, w: Work) -> None:
    """Put candidate ``w.count[JOIN]`` into ``place``, present if condensed, free if gas; NONE only frees the place.

    Then see that there is a gas where a free coordinate holds something, and, unless the temperature is free to stay
    where gas and condensed coexist, only there.
    """
    w.count[CHANGES] += 1
    k = w.count[JOIN]
    if place == EXTRA_PLACE:
        return
    if k != NONE:
        replace(place, k, b, w)
        if k >= w.count[G]:
            w.what[KIND, place], w.at[Y, place] = PRESENT, 0.0
    held = 0.0
    for i in range(w.nu.shape[0]):
        held += abs(w.at[C, i]) if w.what[KIND, i] == FREE else 0.0
    surplus = held == 0.0 and w.count[GAS] == 1 and (w.count[MODE] == TEMPERATURE or w.count[EXTRA] >= 0)
    if surplus or (held > 0.0 and w.count[GAS] == 0):
        set_gas(held, w)
