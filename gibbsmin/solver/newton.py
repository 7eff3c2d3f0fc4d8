"""Newton's method in the free coordinates and ln N for a fixed set of phases, eqs. (5) to (8)."""

from __future__ import annotations

from typing import Any, Final

import numpy as np

from gibbsmin.compiled import inlined, summing
from gibbsmin.solver.energy import boiling, energy_border, energy_error
from gibbsmin.solver.gas import VANISHING
from gibbsmin.solver.layout import (
    AMOUNT,
    DE,
    DEMAND,
    EXTRA,
    FREE,
    GAS,
    KIND,
    LIST,
    MODE,
    MORE,
    RIGHT,
    ROW,
    STEP,
    SUPPLY,
    TEMPERATURE,
    VOLUME,
    G,
    N,
    T,
    U,
    Work,
    X,
    Y,
)

MAJOR: Final = 1.0e-3  # a species above this share of the gas changes by no more than ...
CHANGE: Final = 2.0  # ... this in ln n a step; a rarer one comes up to exp(-CHANGE) of the gas at most
WARMING: Final = 0.22  # largest change of ln T a step
SINGULAR: Final = 1.0e-15


@inlined
def newton_error(w: Work) -> float:
    """Largest relative imbalance of a free coordinate, of the sum of mole fractions, and of the energy."""
    error = energy_error(w)
    if w.count[GAS] == 1 and w.count[VOLUME] == 0:
        error = max(error, abs(np.log(w.value[X])))
    for i in range(w.nu.shape[0]):
        if w.what[KIND, i] == FREE:
            scale = max(w.at[SUPPLY, i], w.at[DEMAND, i])
            if scale > VANISHING:
                error = max(error, abs(w.at[SUPPLY, i] - w.at[DEMAND, i]) / scale)
    return float(error)


@summing
def assemble(w: Work) -> int:
    """Set up eq. (6), unscaled; return the number of free coordinates f, which is the place of ln N.

    The scale of each row is left in ``w.at[STEP]``: with it the diagonal becomes one.
    """
    f = 0
    for i in range(w.nu.shape[0]):
        if w.what[KIND, i] == FREE:
            w.what[LIST, f] = i
            f += 1
    H, row, gas = w.matrix, w.of[ROW], w.count[G]
    for p in range(f):
        nu = w.nu[w.what[LIST, p]]
        total = 0.0
        for j in range(gas):
            row[j] = nu[j] * w.of[AMOUNT, j]
            total += row[j]
        H[f, p] = H[p, f] = total
        for q in range(p + 1):
            other = w.nu[w.what[LIST, q]]
            total = 0.0
            for j in range(gas):
                total += row[j] * other[j]
            H[p, q] = H[q, p] = total
        w.at[RIGHT, p] = w.at[DEMAND, w.what[LIST, p]] - w.at[SUPPLY, w.what[LIST, p]]
        w.at[STEP, p] = 1.0 / np.sqrt(H[p, p]) if H[p, p] > VANISHING else 0.0
    if w.count[GAS] == 1 and w.count[VOLUME] == 0:
        amount = w.value[N] * w.value[X]
        w.at[RIGHT, f] = -amount * np.log(w.value[X])
        w.at[STEP, f] = 1.0 / np.sqrt(amount)
    else:
        w.at[RIGHT, f] = w.at[STEP, f] = 0.0
    H[f, f] = 0.0
    return f


@inlined
def scale(size: int, w: Work) -> None:
    """Scale rows and columns; a row of scale zero leaves its unknown as it is."""
    H = w.matrix
    for p in range(size):
        w.at[RIGHT, p] *= w.at[STEP, p]
        for q in range(size):
            H[p, q] *= w.at[STEP, p] * w.at[STEP, q]
        if w.at[STEP, p] == 0.0:
            H[p, p] = 1.0


@inlined
def solve(matrix: Any, right: Any, size: int) -> bool:
    """Solve in place by elimination with partial pivoting; False if the matrix is singular to rounding."""
    for k in range(size):
        best, row = abs(matrix[k, k]), k
        for i in range(k + 1, size):
            if abs(matrix[i, k]) > best:
                best, row = abs(matrix[i, k]), i
        if best < SINGULAR:
            return False
        if row != k:
            for q in range(k, size):
                matrix[k, q], matrix[row, q] = matrix[row, q], matrix[k, q]
            right[k], right[row] = right[row], right[k]
        inverse = 1.0 / matrix[k, k]
        matrix[k, k] = inverse
        for i in range(k + 1, size):
            factor = matrix[i, k] * inverse
            if factor != 0.0:
                for q in range(k + 1, size):
                    matrix[i, q] -= factor * matrix[k, q]
                right[i] -= factor * right[k]
    for k in range(size - 1, -1, -1):
        total = right[k]
        for q in range(k + 1, size):
            total -= matrix[k, q] * right[q]
        right[k] = total * matrix[k, k]
    return True


@inlined
def step_length(f: int, w: Work) -> float:
    """Fraction of the step in ``w.at[RIGHT]`` that may be taken."""
    alpha, change, gas = 1.0, w.of[ROW], w.count[G]
    rise = 0.0 if boiling(w) else w.at[RIGHT, f]
    for j in range(gas):
        change[j] = rise
    for p in range(f):
        nu = w.nu[w.what[LIST, p]]
        for j in range(gas):
            change[j] += nu[j] * w.at[RIGHT, p]
    if w.count[MODE] != TEMPERATURE:
        tau = w.at[RIGHT, f + 1]
        for j in range(gas):
            change[j] += w.of[DE, j] * tau
        if abs(tau) > WARMING:
            alpha = WARMING / abs(tau)
    major = MAJOR * w.value[N] * w.value[X]
    for j in range(gas):
        if w.of[AMOUNT, j] > major:
            if abs(change[j]) * alpha > CHANGE:
                alpha = CHANGE / abs(change[j])
        elif change[j] * alpha + w.of[U, j] > -CHANGE:
            alpha = max((-CHANGE - w.of[U, j]) / change[j], 1.0e-3)
    return alpha


@inlined
def newton_step(w: Work) -> bool:
    """Take one step; False if the equations are singular. The gas goes where it would have to be negative."""
    f = assemble(w)
    size = f + 1
    if w.count[MODE] != TEMPERATURE:
        energy_border(f, w)
        size += 2 if w.count[EXTRA] >= 0 else 1
    scale(size, w)
    if not solve(w.matrix, w.at[RIGHT], size):
        return False
    for p in range(size):
        w.at[RIGHT, p] *= w.at[STEP, p]
    alpha = step_length(f, w)
    for p in range(f):
        w.at[Y, w.what[LIST, p]] += alpha * w.at[RIGHT, p]
    if boiling(w):
        w.value[N] *= 1.0 + alpha * w.at[RIGHT, f]
        if w.value[N] <= 0.0:
            w.count[GAS], w.value[N] = 0, 1.0
    elif w.count[GAS] == 1 and w.count[VOLUME] == 0:
        w.value[N] *= np.exp(alpha * w.at[RIGHT, f])
    if w.count[MODE] != TEMPERATURE:
        w.value[T] *= np.exp(alpha * w.at[RIGHT, f + 1])
        if w.count[EXTRA] >= 0:
            w.value[MORE] += alpha * w.at[RIGHT, f + 2]
    return True
