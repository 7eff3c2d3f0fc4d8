"""A start from the states before: where the last one settled, moved on along the line that the last two lie on.

The conditions of a state are a point: the shares of the elements in b, the logarithm of pressure or volume, and 1/T or
the energy or entropy held. Along a sweep the points of three states lie on a line, mostly, and y, ln N and ln T of
the last two then give those of the next to second order in the step. Phases stay as they were; what has to change is
found by the iteration.
"""

from __future__ import annotations

from typing import Any, Final

import numpy as np

from gibbsmin.compiled import inlined
from gibbsmin.solver.basis import basis_amounts, exact_prices
from gibbsmin.solver.candidates import same_candidates
from gibbsmin.solver.energy import follow, potentials
from gibbsmin.solver.layout import (
    BEFORE,
    BEFORE_POINT,
    CHANGES,
    EMPTY,
    ENERGY,
    EXTRA,
    FIRST,
    FREE,
    GAS,
    GIBBS,
    HISTORY,
    KIND,
    LAST,
    LAST_POINT,
    MIXED,
    MODE,
    POINT,
    REUSES,
    SECOND,
    TEMPERATURE,
    VOLUME,
    C,
    N,
    T,
    Work,
    Y,
)
from gibbsmin.thermo.table import Table

FAR: Final = 0.3  # largest change of the point that is bridged
NEAR: Final = 0.05  # largest change that is bridged without a line
ALONG: Final = 1.0e-4  # how far from the line a point may lie, relative to the change, squared
LONGEST: Final = 4.0  # largest change relative to the one before
HOT: Final = 1.0e3  # K; what a change of 1/T or of energy over R is measured by
SPREAD: Final = 1.0e1  # what a change of entropy over R is measured by


@inlined
def point(b: Any, w: Work) -> None:
    """Write the point of the present conditions into ``w.at[POINT]``."""
    m, total = b.size, 0.0
    for i in range(m):
        total += abs(b[i])
    for i in range(m):
        w.at[POINT, i] = b[i] / total
    w.at[POINT, m] = w.value[FIRST] + (np.log(total) if w.count[VOLUME] == 1 else 0.0)
    if w.count[MODE] == TEMPERATURE:
        w.at[POINT, m + 1] = HOT / w.value[T]
    else:
        w.at[POINT, m + 1] = w.value[SECOND] / total / (HOT if w.count[MODE] == ENERGY else SPREAD)


@inlined
def continue_last(b: Any, gas: Any, table: Table, w: Work) -> bool:
    """Prepare a start from the last state; False where there is none, it is too far, or other species may be there."""
    point(b, w)
    m, history = b.size, w.count[HISTORY]
    if history == 0 or w.count[REUSES] < 0:
        return False
    change = along = before = 0.0
    for i in range(m + 2):
        step, last = w.at[POINT, i] - w.at[LAST_POINT, i], w.at[LAST_POINT, i] - w.at[BEFORE_POINT, i]
        change += step * step
        along += step * last
        before += last * last
    if change > FAR * FAR:
        return False
    ratio = 0.0
    if history > 1 and before > 0.0:
        ratio = along / before
        if change - ratio * along > ALONG * change or abs(ratio) > LONGEST:
            ratio = 0.0
    if ratio == 0.0 and change > NEAR * NEAR:
        return False
    if w.count[MODE] == TEMPERATURE:
        potentials(table, gas, w)
    else:
        w.value[T] = np.exp(ahead(m + 1, ratio, w))
        for j in range(gas.size):
            w.std[GIBBS, j] = 0.0
    if not same_candidates(b, w.std[GIBBS], w):
        return False
    basis_amounts(b, w)
    for i in range(m):
        if w.what[KIND, i] == EMPTY and w.at[C, i] != 0.0:
            return False
        if w.what[KIND, i] == FREE:
            w.at[Y, i] = ahead(i, ratio, w)
    if w.count[GAS] == 1 and w.count[VOLUME] == 0:
        total = 0.0
        for i in range(m):
            total += abs(b[i])
        w.value[N] = total * np.exp(ahead(m, ratio, w))
    w.count[CHANGES] = 0
    if w.count[MODE] == TEMPERATURE:
        exact_prices(w.std[GIBBS], w)
    else:
        follow(table, gas, w)
    return True


@inlined
def ahead(i: int, ratio: float, w: Work) -> float:
    """Move unknown ``i`` of the last state on by ``ratio`` of its last change."""
    return float(w.at[LAST, i] + ratio * (w.at[LAST, i] - w.at[BEFORE, i]))


@inlined
def remember(b: Any, w: Work) -> None:
    """Keep the unknowns of a state that was found; those of the one before too if they are of the same phases."""
    m = b.size
    if w.count[MIXED] == 1 or w.count[EXTRA] >= 0:
        w.count[HISTORY] = 0
        return
    w.count[HISTORY] = 2 if w.count[HISTORY] > 0 and w.count[CHANGES] == 0 else 1
    total = 0.0
    for i in range(m):
        total += abs(b[i])
    for i in range(m + 2):
        w.at[BEFORE_POINT, i], w.at[BEFORE, i] = w.at[LAST_POINT, i], w.at[LAST, i]
        w.at[LAST_POINT, i] = w.at[POINT, i]
    for i in range(m):
        w.at[LAST, i] = w.at[Y, i]
    w.at[LAST, m] = np.log(w.value[N] / total)
    w.at[LAST, m + 1] = np.log(w.value[T])
