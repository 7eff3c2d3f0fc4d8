"""The species that a state can hold at all.

Arguments throughout: ``A`` (m, S), ``gas`` (S,) bool, ``b`` (m,), ``g`` (S,) with inf for a species that is no
candidate.
"""

from __future__ import annotations

from typing import Any

import numpy as np

from gibbsmin.compiled import inlined
from gibbsmin.solver.layout import ATOMS, G, K, Work


@inlined
def same_candidates(b: Any, g: Any, w: Work) -> bool:
    """Tell whether this state offers and lacks what the one before did; if so, ``g`` becomes inf as it did there."""
    for i in range(b.size):
        if (b[i] == 0.0) != w.lacking[i]:
            return False
    for j in range(g.size):
        if (g[j] != np.inf) != w.offered[j]:
            return False
    for j in range(g.size):
        if not w.chosen[j]:
            g[j] = np.inf
    return True


@inlined
def select_candidates(A: Any, gas: Any, b: Any, g: Any, w: Work) -> None:
    """Gather the species that can be present at all, gas first; ``g`` becomes inf for the others.

    A species leaves when it holds an element of which there is none, or charge of a sign that nothing balances.
    """
    m, S = A.shape
    for j in range(S):
        w.offered[j] = g[j] != np.inf
    changed = True
    while changed:
        changed = False
        for i in range(m):
            positive = negative = b[i] != 0.0
            for j in range(S):
                if g[j] != np.inf:
                    positive |= A[i, j] > 0.0
                    negative |= A[i, j] < 0.0
            if positive != negative:
                changed = True
                for j in range(S):
                    if A[i, j] != 0.0:
                        g[j] = np.inf
    for i in range(m):
        w.lacking[i] = b[i] == 0.0
    k = 0
    for phase in range(2):
        for j in range(S):
            if g[j] != np.inf and gas[j] == (phase == 0):
                w.species[k] = j
                total = 0.0
                for i in range(m):
                    total += abs(A[i, j])
                w.of[ATOMS, k] = max(total, 1.0e-3)
                k += 1
        if phase == 0:
            w.count[G] = k
    w.count[K] = k
    for j in range(S):
        w.chosen[j] = g[j] != np.inf
