"""Activities, amounts and balances of the gas at given y and N."""

from __future__ import annotations

from typing import Final

import numpy as np

from gibbsmin.compiled import inlined, summing
from gibbsmin.solver.exponential import exponentials
from gibbsmin.solver.layout import (
    AMOUNT,
    DEMAND,
    EXTRA,
    FREE,
    GAS,
    KIND,
    MORE,
    PRESENT,
    SUPPLY,
    C,
    D,
    G,
    K,
    N,
    U,
    Work,
    X,
    Y,
)

VANISHING: Final = 1.0e-280  # turnover near the smallest number there is: balanced in logarithms only
OVERDRAFT: Final = 0.01  # share of its turnover by which a condensed species may be overdrawn on the way


@summing
def activities(w: Work) -> None:
    """Compute u of every candidate, n of the gas ones, X, and supply and demand of every coordinate, eq. (5)."""
    m, gas, candidates, amount = w.nu.shape[0], w.count[G], w.count[K], w.value[N]
    u, n = w.of[U], w.of[AMOUNT]
    for j in range(candidates):
        u[j] = -w.of[D, j]
    for i in range(m):
        y = w.at[Y, i]
        if y != 0.0:
            for j in range(candidates):
                u[j] += w.nu[i, j] * y
    exponentials(gas, u, n, w.raw, w.bits)
    total = 0.0
    for j in range(gas):
        total += n[j]
        n[j] *= amount
    w.value[X] = total
    for i in range(m):
        supply, demand = max(-w.at[C, i], 0.0), max(w.at[C, i], 0.0)
        for j in range(gas):
            flow = w.nu[i, j] * n[j]
            supply += 0.5 * (abs(flow) + flow)
            demand += 0.5 * (abs(flow) - flow)
        w.at[SUPPLY, i], w.at[DEMAND, i] = supply, demand
    if w.count[EXTRA] >= 0:
        for i in range(m):
            flow = w.nu[i, w.count[EXTRA]] * w.value[MORE]
            w.at[SUPPLY, i] += max(flow, 0.0)
            w.at[DEMAND, i] -= min(flow, 0.0)


@inlined
def present_amount(i: int, w: Work) -> float:
    """Amount of the condensed species in place ``i``: what the gas, and an extra species, leave of c."""
    if w.count[GAS] == 0:
        k = w.count[EXTRA]
        return float(w.at[C, i] - (w.nu[i, k] * w.value[MORE] if k >= 0 else 0.0))
    return float(w.at[DEMAND, i] - w.at[SUPPLY, i])


@inlined
def overdrawn(w: Work) -> bool:
    """Tell whether the gas takes so much of a condensed species that no further step will mend it."""
    for i in range(w.nu.shape[0]):
        if w.what[KIND, i] == PRESENT:
            amount = present_amount(i, w)
            if amount < -abs(w.at[C, i]) and amount < -OVERDRAFT * max(w.at[SUPPLY, i], w.at[DEMAND, i]):
                return True
    return False


@inlined
def worst_balance(w: Work) -> int:
    """Return the free coordinate whose supply and demand differ most (as a ratio), -1 if there is none."""
    worst, found = 0.0, -1
    for i in range(w.nu.shape[0]):
        if w.what[KIND, i] == FREE:
            ratio = imbalance(i, w)
            if ratio > worst:
                worst, found = ratio, i
    return found


@inlined
def imbalance(i: int, w: Work) -> float:
    """Return abs(ln(supply/demand)) of coordinate ``i``: inf where just one of them is zero, 0 where both vanish."""
    if max(w.at[SUPPLY, i], w.at[DEMAND, i]) < VANISHING:
        return 0.0
    if w.at[SUPPLY, i] == 0.0 or w.at[DEMAND, i] == 0.0:
        return np.inf
    return float(abs(np.log(w.at[SUPPLY, i] / w.at[DEMAND, i])))


@inlined
def side(i: int, sign: float, w: Work) -> tuple[float, float]:
    """Logarithm of the supply (``sign`` 1) or demand (-1) of coordinate ``i``, and its derivative by y_i.

    Summed relative to the largest term, so that nothing is too large or too small; -inf where there is no term.
    """
    c = max(-sign * w.at[C, i], 0.0) / w.value[N]
    largest = np.log(c) if c > 0.0 else -np.inf
    for j in range(w.count[G]):
        if sign * w.nu[i, j] > 0.0:
            largest = max(largest, w.of[U, j])
    if largest == -np.inf:
        return largest, 0.0
    total, slope = (c * np.exp(-largest) if c > 0.0 else 0.0), 0.0
    for j in range(w.count[G]):
        nu = sign * w.nu[i, j]
        if nu > 0.0:
            term = nu * np.exp(w.of[U, j] - largest)
            total += term
            slope += nu * term
    return largest + np.log(total), sign * slope / total


@inlined
def balance_step(i: int, w: Work) -> bool:
    """One Newton step on ln(supply/demand) = 0 in y_i alone: nearly linear, however far the start.

    False if one of the two is zero whatever y_i.
    """
    supply, rise = side(i, 1.0, w)
    demand, fall = side(i, -1.0, w)
    if supply == -np.inf or demand == -np.inf:
        return False
    w.at[Y, i] -= (supply - demand) / (rise - fall)
    return True
