"""A starting basis: the linear programme min g.n, A n = b, n >= 0, in which every species is a pure phase.

Simplex method (Dantzig, Linear Programming and Extensions, Princeton 1963) in the coordinates of `basis`, where d_j is
the price of species j; started from artificial columns of high cost. Prices are taken per atom, so that large molecules
are not preferred; Bland's rule (Math. Oper. Res. 2 (1977) 103) after a run of degenerate steps.
"""

from __future__ import annotations

from typing import Any, Final

import numpy as np

from gibbsmin.compiled import inlined
from gibbsmin.solver.basis import basis_amounts, exact_prices, replace
from gibbsmin.solver.layout import ATOMS, BASIS, FREE, IDLE, KIND, C, D, G, K, Work, Y

ARTIFICIAL: Final = 1.0e6  # cost of an artificial column; potentials lie below 1e4 an atom
PRICE: Final = 1.0e-7
PIVOT: Final = 1.0e-9
LACK: Final = 1.0e-11  # share of an element that may be left over by rounding


@inlined
def start_basis(A: Any, b: Any, g: Any, bias: float, w: Work) -> None:
    """Begin with one artificial column for each element, of the sign of b; ``bias`` is added to the cost of gases."""
    m = b.size
    for i in range(m):
        for k in range(m):
            w.inverse[i, k] = 0.0
        w.inverse[i, i] = -1.0 if b[i] < 0.0 else 1.0
        w.what[BASIS, i], w.what[KIND, i] = -1, FREE
        w.at[C, i], w.at[Y, i] = abs(b[i]), 0.0
    for k in range(w.count[K]):
        total = 0.0
        for i in range(m):
            w.nu[i, k] = w.inverse[i, i] * A[i, w.species[k]]
            total += w.nu[i, k]
        w.of[D, k] = g[w.species[k]] - ARTIFICIAL * total + (bias if k < w.count[G] else 0.0)


@inlined
def entering(bland: bool, w: Work) -> int:
    """Return the candidate with the lowest price per atom, -1 if none is negative."""
    best, found = -PRICE, -1
    for j in range(w.count[K]):
        price = w.of[D, j] / w.of[ATOMS, j]
        if price < best:
            best, found = price, j
            if bland:
                break
    return found


@inlined
def leaving(j: int, bland: bool, w: Work) -> int:
    """Return the place that candidate ``j`` empties first, -1 if none."""
    best, found = np.inf, -1
    for i in range(w.nu.shape[0]):
        entry = w.nu[i, j]
        if entry > PIVOT:
            ratio = max(w.at[C, i], 0.0) / entry
            better = ratio < best
            if ratio == best:
                better = w.what[BASIS, i] < w.what[BASIS, found] if bland else entry > w.nu[found, j]
            if better:
                best, found = ratio, i
    return found


@inlined
def real_for(place: int, w: Work) -> int:
    """Candidate that takes the place of an artificial column of amount zero, -1 if none can: a dependent row.

    It is the one with the lowest price once the artificial costs are taken out, so that others stay dear.
    """
    best, found = np.inf, -1
    for j in range(w.count[K]):
        entry = abs(w.nu[place, j])
        if entry > PIVOT:
            price = w.of[D, j]
            for i in range(w.nu.shape[0]):
                if w.what[BASIS, i] < 0:
                    price += ARTIFICIAL * w.nu[i, j]
            if price < best * entry:
                best, found = price / entry, j
    return found


@inlined
def optimal_basis(again: bool, A: Any, b: Any, g: Any, bias: float, w: Work) -> bool:
    """Find an optimal basis; False if the candidates cannot hold b, or no end is found.

    ``again``: from the basis of the state before, with the same candidates; False if that basis cannot hold b. Else
    from artificial columns; one that is left at the end holds nothing, and a real one takes its place, or its row
    depends on others.
    """
    if not again:
        start_basis(A, b, g, bias, w)
    elif not start_again(b, g, w):
        return False
    for _ in range(b.size + 1):
        if not improve(b, w):
            return False
        place = artificial_place(w)
        if place < 0:
            if not again:  # free of the artificial costs
                exact_prices(g, w)
            return True
        scale = 0.0
        for i in range(b.size):
            scale = max(scale, abs(w.inverse[place, i] * b[i]))
        if w.at[C, place] > LACK * scale:
            return False
        j = real_for(place, w)
        if j < 0:
            w.what[KIND, place], w.at[C, place] = IDLE, 0.0
        else:
            replace(place, j, b, w)
    return False


@inlined
def artificial_place(w: Work) -> int:
    """First place that still has an artificial column, -1 if there is none."""
    for i in range(w.nu.shape[0]):
        if w.what[BASIS, i] < 0 and w.what[KIND, i] != IDLE:
            return i
    return -1


@inlined
def start_again(b: Any, g: Any, w: Work) -> bool:
    """Begin with the basis of the state before; False if it cannot hold b."""
    basis_amounts(b, w)
    for i in range(w.nu.shape[0]):
        w.at[Y, i] = 0.0
        if w.what[KIND, i] != IDLE:
            w.what[KIND, i] = FREE
            if w.at[C, i] < 0.0:
                return False
    exact_prices(g, w)
    return True


@inlined
def improve(b: Any, w: Work) -> bool:
    """Exchange basis species until no price is negative; False if the search does not end."""
    m = b.size
    stalled = 0
    for _ in range(200 + 60 * m):
        bland = stalled > 2 * m + 10
        j = entering(bland, w)
        if j < 0:
            return True
        place = leaving(j, bland, w)
        if place < 0:
            return False
        stalled = stalled + 1 if w.at[C, place] <= 0.0 else 0
        replace(place, j, b, w)
    return False
