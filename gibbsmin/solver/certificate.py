"""The proof of a state, recomputed from the amounts and the element potentials alone."""

from __future__ import annotations

from typing import Any, Final

import numpy as np

from gibbsmin.compiled import summing
from gibbsmin.solver.exponential import exponentials
from gibbsmin.solver.gas import VANISHING
from gibbsmin.solver.layout import ROW, U, Work

NEAR: Final = 1.0e-5  # below it ln(1 + x) = x - x^2/2 to rounding


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
def optimality(A: Any, gas: Any, b: Any, g: Any, n: Any, lam: Any, w: Work) -> tuple[float, float, float]:
    """Duality gap and worst affinity of a state, and the sum of n ln x over its gas.

    Parameters
    ----------
    A, gas, b, g, n, lam : arrays (m, S), (S,), (m,), (S,), (S,), (m,)
        The problem (1) with g = inf for a species that is no candidate, and the pair to be proved.
    w : Work
        For room to work in.

    Returns
    -------
    gap : float
        (sum_j n_j mu_j/RT - b.lam) / sum_j n_j [-].
    affinity : float
        Largest violation of (2) and (3), and largest difference between mu_j/RT and a_j.lam of a present species [-].
    mixing : float
        sum_j n_j ln x_j over the gas [mol].
    """
    u, x = w.of[U], w.of[ROW]
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
    exponentials(n.size, u, x, w.raw, w.bits)
    worst = X = mixing = 0.0
    for j in range(n.size):
        if g[j] == np.inf:
            continue
        if not gas[j]:
            worst = max(worst, abs(u[j]) if n[j] > 0.0 else u[j])
            primal += n[j] * g[j]
            continue
        X += x[j]
        if n[j] > 0.0:
            change = n[j] / (total * x[j]) - 1.0 if x[j] > 0.0 else np.inf  # ln(1 + change) is what n is off by
            off = change - 0.5 * change * change if abs(change) < NEAR else np.log(n[j] / total) - u[j]
            mixing += n[j] * (u[j] + off)
            primal += n[j] * g[j]
            if n[j] > VANISHING * amount:
                worst = max(worst, abs(off))
    if X > 0.0:
        worst = max(worst, abs(np.log(X)) if total > 0.0 else np.log(X))
    return abs(primal + mixing - dual) / amount, worst, mixing
