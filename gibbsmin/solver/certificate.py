"""The proof of a state, recomputed from the amounts and the element potentials alone."""

from __future__ import annotations

from typing import Any

import numpy as np

from gibbsmin.compiled import summing
from gibbsmin.solver.gas import CEILING, FLOOR, VANISHING


@summing
def element_residual(A: Any, b: Any, n: Any) -> float:
    """Largest abs(A n - b), each row relative to its own b_i (or to its turnover where b_i is zero).

    ``A`` (m, S), ``b`` (m,), ``n`` (S,).
    """
    worst = 0.0
    for i in range(b.size):
        total, turnover = -b[i], 0.0
        for j in range(n.size):
            total += A[i, j] * n[j]
            turnover += abs(A[i, j]) * n[j]
        scale = abs(b[i]) if b[i] != 0.0 else turnover
        if scale > 0.0:
            worst = max(worst, abs(total) / scale)
    return float(worst)


@summing
def optimality(A: Any, gas: Any, b: Any, g: Any, n: Any, lam: Any, u: Any) -> tuple[float, float]:
    """Duality gap and worst affinity of a state.

    Parameters
    ----------
    A, gas, b, g, n, lam : arrays (m, S), (S,), (m,), (S,), (S,), (m,)
        The problem (1) with g = inf for a species that is no candidate, and the pair to be proved.
    u : (S,) array
        Room to work in.

    Returns
    -------
    gap : float
        (sum_j n_j mu_j/RT - b.lam) / sum_j n_j [-].
    affinity : float
        Largest violation of (2) and (3), and largest difference between mu_j/RT and a_j.lam of a present species [-].
    """
    amount = dual = primal = total = 0.0
    for j in range(n.size):
        amount += n[j]
        total += n[j] if gas[j] else 0.0
        u[j] = -g[j]
    for i in range(b.size):
        if np.isfinite(lam[i]):
            dual += b[i] * lam[i]
            for j in range(n.size):
                u[j] += A[i, j] * lam[i]
    worst, X = 0.0, 0.0
    for j in range(n.size):
        if g[j] == np.inf:
            continue
        if not gas[j]:
            worst = max(worst, abs(u[j]) if n[j] > 0.0 else u[j])
            primal += n[j] * g[j]
            continue
        if u[j] > FLOOR:
            X += np.exp(min(u[j], CEILING))
        if n[j] > 0.0:
            ln_x = np.log(n[j] / total)
            primal += n[j] * (g[j] + ln_x)
            if n[j] > VANISHING * amount:
                worst = max(worst, abs(ln_x - u[j]))
    if X > 0.0:
        worst = max(worst, abs(np.log(X)) if total > 0.0 else np.log(X))
    return abs(primal - dual) / amount, worst
