"""From a start to an answer: balances first, then Newton steps, and changes of the phase set where they are wanted."""

from __future__ import annotations

from typing import Any, Final

import numpy as np

from gibbsmin.compiled import inlined
from gibbsmin.solver.basis import replace
from gibbsmin.solver.gas import OVERDRAFT, activities, balance_step, imbalance, overdrawn, worst_balance
from gibbsmin.solver.layout import CHANGES, FREE, GAS, JOIN, PRESENT, STEPS, G, N, Work, X
from gibbsmin.solver.newton import newton_error, newton_step
from gibbsmin.solver.phase_set import NONE, STUCK, poor_place, saturating, set_gas, wanted_change

COARSE: Final = 1.0  # abs(ln(supply/demand)) above which one balance at a time is set right
CROWDED: Final = 3.0  # ln X above which the gas is given more room before anything else
NEAR: Final = 1.0e-2  # Newton error below which phases may change
DONE: Final = 1.0e-13
ENOUGH: Final = 1.0e-11  # accepted where rounding forbids DONE
MOST_STEPS: Final = 60  # from one start; 20 were the most that a start needed that led to the answer
MOST_CHANGES: Final = 200
MOST_ROUNDS: Final = 2000


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
    return False


@inlined
def change(place: int, b: Any, w: Work) -> None:
    """Put candidate ``w.count[JOIN]`` into ``place``, present if condensed, free if gas; NONE only frees the place.

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
