"""Coordinates relative to a basis of species, eq. (4), and the exchange of one basis species for another."""

from __future__ import annotations

from typing import Any, Final

from gibbsmin.compiled import inlined
from gibbsmin.solver.layout import BASIS, DE, IDLE, KIND, LEFT, MODE, RIGHT, ROW, TEMPERATURE, C, D, K, Work, Y

DUST: Final = 1.0e-9  # coordinates are ratios of small numbers of atoms; what is smaller is rounding
NOISE: Final = 4.0e-16  # rounding of B^-1 b, relative to the sum of its terms


@inlined
def replace(place: int, j: int, b: Any, w: Work) -> None:
    """Put candidate ``j`` into ``place`` of the basis; activities stay as they are, coordinates change.

    With t = nu_k[place] / nu_j[place]: nu_k -> nu_k - t nu_j (t itself at ``place``), d_k -> d_k - t d_j and de
    alike. The rows of B^-1 change alike, and c is made afresh.
    """
    m = w.nu.shape[0]
    activity = -w.of[D, j]
    for i in range(m):
        w.at[RIGHT, i] = w.nu[i, j]
        activity += w.nu[i, j] * w.at[Y, i]
    w.at[Y, place] = activity
    w.what[BASIS, place] = j
    pivot, shift, shift_e, t, candidates = w.at[RIGHT, place], w.of[D, j], w.of[DE, j], w.of[ROW], w.count[K]
    for k in range(candidates):
        t[k] = w.nu[place, k] / pivot
        w.nu[place, k] = t[k]
        w.of[D, k] -= t[k] * shift
    if w.count[MODE] != TEMPERATURE:
        for k in range(candidates):
            w.of[DE, k] -= t[k] * shift_e
    for i in range(m):
        factor = w.at[RIGHT, i]
        if i != place and factor != 0.0:
            for k in range(candidates):
                value = w.nu[i, k] - t[k] * factor
                w.nu[i, k] = value if abs(value) > DUST else 0.0
    for i in range(m):
        w.nu[i, j] = 0.0
        w.inverse[place, i] /= pivot
    w.nu[place, j] = 1.0
    w.of[D, j] = w.of[DE, j] = 0.0
    for i in range(m):
        if i != place:
            for k in range(m):
                value = w.inverse[i, k] - w.at[RIGHT, i] * w.inverse[place, k]
                w.inverse[i, k] = value if abs(value) > DUST else 0.0
    basis_amounts(b, w)


@inlined
def basis_amounts(b: Any, w: Work) -> None:
    """Make c = B^-1 b afresh, with one step of refinement: c + B^-1 (b - B c).

    The residual of an element that is rare beside the others has only small terms, so that its balance closes relative
    to its own amount. What is only rounding becomes zero, so that exact stoichiometry stays exact.
    """
    m = w.nu.shape[0]
    for i in range(m):
        total = 0.0
        if w.what[KIND, i] != IDLE:
            for k in range(m):
                total += w.inverse[i, k] * b[k]
        w.at[C, i] = total
    for i in range(m):
        total = b[i]
        for k in range(m):
            if w.what[BASIS, k] >= 0 and w.what[KIND, k] != IDLE:
                total -= w.A[i, w.species[w.what[BASIS, k]]] * w.at[C, k]
            elif k == i:
                total = 0.0
                break
        w.at[LEFT, i] = total
    for i in range(m):
        terms = 0.0
        if w.what[KIND, i] != IDLE:
            for k in range(m):
                w.at[C, i] += w.inverse[i, k] * w.at[LEFT, k]
                terms += abs(w.inverse[i, k] * b[k])
        if abs(w.at[C, i]) < NOISE * terms:
            w.at[C, i] = 0.0


@inlined
def exact_prices(g: Any, w: Work) -> None:
    """Make d_j = g_j - nu_j.g_B afresh, and nu zero in dependent rows."""
    m = w.nu.shape[0]
    for i in range(m):
        idle = w.what[KIND, i] == IDLE
        w.at[RIGHT, i] = 0.0 if idle else g[w.species[w.what[BASIS, i]]]
        if idle:
            for k in range(w.count[K]):
                w.nu[i, k] = 0.0
    for k in range(w.count[K]):
        w.of[D, k] = g[w.species[k]]
    for i in range(m):
        price = w.at[RIGHT, i]
        for k in range(w.count[K]):
            w.of[D, k] -= w.nu[i, k] * price
    for i in range(m):
        if w.what[KIND, i] != IDLE:
            w.of[D, w.what[BASIS, i]] = 0.0
