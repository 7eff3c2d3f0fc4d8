"""The proof of a state, recomputed from the amounts and the element potentials alone."""

from __future__ import annotations

from typing import Any

import numpy as np

from gibbsmin.compiled import inlined


@inlined
def element_residual(A: Any, b: Any, n: Any) -> float:
    """Largest abs(A n - b), each row relative to its own b_i (or to its turnover where b_i is zero).

    ``A`` (S, m), ``b`` (m,), ``n`` (S,).
    """
    worst = 0.0
    for i in range(b.size):
        total, turnover = -b[i], 0.0
        for j in range(n.size):
            total += A[j, i] * n[j]
            turnover += abs(A[j, i]) * n[j]
        scale = abs(b[i]) if b[i] != 0.0 else turnover
        if scale > 0.0:
            worst = max(worst, abs(total) / scale)
    return float(worst)


@inlined
def optimality(A: Any, gas: Any, b: Any, g: Any, n: Any, lam: Any) -> tuple[float, float]:
    """Duality gap and worst affinity of a state.

    Parameters
    ----------
    A, gas, b, g, n, lam : arrays (S, m), (S,), (m,), (S,), (S,), (m,)
        The problem (1) with g = inf for a species that is no candidate, and the pair to be proved.

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
        if gas[j]:
            total += n[j]
    for i in range(b.size):
        dual += b[i] * lam[i] if b[i] != 0.0 else 0.0
    worst, X = 0.0, 0.0
    for j in range(n.size):
        if not np.isfinite(g[j]):
            continue
        u = -g[j]
        for i in range(b.size):
            u += A[j, i] * lam[i] if A[j, i] != 0.0 else 0.0
        if gas[j]:
            X += np.exp(min(u, 300.0))
        else:
            worst = max(worst, abs(u) if n[j] > 0.0 else u)
        if n[j] > 0.0:
            mixing = np.log(n[j] / total) if gas[j] else 0.0
            primal += n[j] * (g[j] + mixing)
            if gas[j] and n[j] > 1.0e-290 * total:
                worst = max(worst, abs(mixing - u))
    if X > 0.0:
        worst = max(worst, abs(np.log(X)) if total > 0.0 else np.log(X))
    return abs(primal - dual) / amount, worst
