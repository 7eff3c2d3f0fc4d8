"""Activities, amounts and balances of the gas at given y and N."""

from __future__ import annotations

from typing import Final

import numpy as np

from gibbsmin.compiled import inlined
from gibbsmin.solver.layout import FREE, GAS, G, K, N, Work, X

CEILING: Final = 300.0  # largest u that is taken at its word, so that nothing overflows


@inlined
def activities(w: Work) -> None:
    """Compute u of every candidate, n of the gas ones, X, and supply and demand of every coordinate, eq. (5)."""
    m, gas = w.c.size, w.count[G]
    for i in range(m):
        w.supply[i] = max(-w.c[i], 0.0)
        w.demand[i] = max(w.c[i], 0.0)
    total, amount = 0.0, w.value[N]
    for j in range(w.count[K]):
        u = -w.d[j]
        for i in range(m):
            u += w.nu[j, i] * w.y[i]
        w.u[j] = u
        if j < gas:
            x = np.exp(min(u, CEILING))
            total += x
            n = amount * x
            w.n[j] = n
            for i in range(m):
                flow = w.nu[j, i] * n
                if flow > 0.0:
                    w.supply[i] += flow
                else:
                    w.demand[i] -= flow
    w.value[X] = total


@inlined
def present_amount(i: int, w: Work) -> float:
    """Amount of the condensed species in place ``i``: what the gas leaves of c."""
    if w.count[GAS] == 0:
        return float(w.c[i])
    return float(w.demand[i] - w.supply[i])


@inlined
def worst_balance(w: Work) -> int:
    """Return the free coordinate whose supply and demand differ most (as a ratio), -1 if there is none."""
    worst, found = 0.0, -1
    for i in range(w.c.size):
        if w.kind[i] == FREE:
            ratio = imbalance(i, w)
            if ratio > worst:
                worst, found = ratio, i
    return found


@inlined
def imbalance(i: int, w: Work) -> float:
    """Return abs(ln(supply/demand)) of coordinate ``i``: inf where just one of them is zero, 0 where both are."""
    if w.supply[i] == 0.0 and w.demand[i] == 0.0:
        return 0.0
    if w.supply[i] == 0.0 or w.demand[i] == 0.0:
        return np.inf
    return float(abs(np.log(w.supply[i] / w.demand[i])))


@inlined
def balance_step(i: int, w: Work) -> None:
    """One Newton step on ln(supply/demand) = 0 in y_i alone; nearly linear, however far the start."""
    slope = 0.0
    supply, demand = w.supply[i], w.demand[i]
    for j in range(w.count[G]):
        nu = w.nu[j, i]
        if nu > 0.0:
            slope += nu * nu * w.n[j] / supply
        elif nu < 0.0:
            slope += nu * nu * w.n[j] / demand
    w.y[i] -= np.log(supply / demand) / slope
