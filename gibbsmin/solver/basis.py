"""Coordinates relative to a basis of species, eq. (4), and the exchange of one basis species for another."""

from __future__ import annotations

from typing import Any, Final

from gibbsmin.compiled import inlined
from gibbsmin.solver.layout import IDLE, MODE, TEMPERATURE, K, Work

DUST: Final = 1.0e-9  # coordinates are ratios of small numbers of atoms; what is smaller is rounding
NOISE: Final = 4.0e-16  # rounding of B^-1 b, relative to the sum of its terms


@inlined
def replace(place: int, j: int, b: Any, w: Work) -> None:
    """Put candidate ``j`` into ``place`` of the basis; activities stay as they are, coordinates change.

    With t = nu_k[place] / nu_j[place]: nu_k -> nu_k - t nu_j (t itself at ``place``), d_k -> d_k - t d_j and de
    alike. The rows of B^-1 change alike, and c is made afresh.
    """
    m = w.c.size
    activity = -w.d[j]
    for i in range(m):
        w.right[i] = w.nu[i, j]
        activity += w.nu[i, j] * w.y[i]
    w.y[place] = activity
    w.basis[place] = j
    pivot, shift, shift_e, t, candidates = w.right[place], w.d[j], w.de[j], w.row, w.count[K]
    for k in range(candidates):
        t[k] = w.nu[place, k] / pivot
        w.nu[place, k] = t[k]
        w.d[k] -= t[k] * shift
    if w.count[MODE] != TEMPERATURE:
        for k in range(candidates):
            w.de[k] -= t[k] * shift_e
    for i in range(m):
        factor = w.right[i]
        if i != place and factor != 0.0:
            for k in range(candidates):
                value = w.nu[i, k] - t[k] * factor
                w.nu[i, k] = value if abs(value) > DUST else 0.0
    for i in range(m):
        w.nu[i, j] = 0.0
        w.inverse[place, i] /= pivot
    w.nu[place, j] = 1.0
    w.d[j] = w.de[j] = 0.0
    for i in range(m):
        if i != place:
            for k in range(m):
                value = w.inverse[i, k] - w.right[i] * w.inverse[place, k]
                w.inverse[i, k] = value if abs(value) > DUST else 0.0
    basis_amounts(b, w)


@inlined
def basis_amounts(b: Any, w: Work) -> None:
    """Make c = B^-1 b afresh, with one step of refinement: c + B^-1 (b - B c).

    The residual of an element that is rare beside the others has only small terms, so that its balance closes relative
    to its own amount. What is only rounding becomes zero, so that exact stoichiometry stays exact.
    """
    m = w.c.size
    for i in range(m):
        total = 0.0
        if w.kind[i] != IDLE:
            for k in range(m):
                total += w.inverse[i, k] * b[k]
        w.c[i] = total
    for i in range(m):
        total = b[i]
        for k in range(m):
            if w.basis[k] >= 0 and w.kind[k] != IDLE:
                total -= w.A[i, w.species[w.basis[k]]] * w.c[k]
            elif k == i:
                total = 0.0
                break
        w.left[i] = total
    for i in range(m):
        terms = 0.0
        if w.kind[i] != IDLE:
            for k in range(m):
                w.c[i] += w.inverse[i, k] * w.left[k]
                terms += abs(w.inverse[i, k] * b[k])
        if abs(w.c[i]) < NOISE * terms:
            w.c[i] = 0.0


@inlined
def exact_prices(g: Any, w: Work) -> None:
    """Make d_j = g_j - nu_j.g_B afresh, and nu zero in dependent rows."""
    m = w.c.size
    for i in range(m):
        idle = w.kind[i] == IDLE
        w.right[i] = 0.0 if idle else g[w.species[w.basis[i]]]
        if idle:
            for k in range(w.count[K]):
                w.nu[i, k] = 0.0
    for k in range(w.count[K]):
        w.d[k] = g[w.species[k]]
    for i in range(m):
        price = w.right[i]
        for k in range(w.count[K]):
            w.d[k] -= w.nu[i, k] * price
    for i in range(m):
        if w.kind[i] != IDLE:
            w.d[w.basis[i]] = 0.0
