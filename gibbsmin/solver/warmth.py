"""A first temperature where it is not held: that at which the linear programme has the energy or entropy asked for."""

from __future__ import annotations

from typing import Any, Final

import numpy as np

from gibbsmin.compiled import inlined
from gibbsmin.solver.candidates import same_candidates, select_candidates
from gibbsmin.solver.energy import follow, form_energies, potentials
from gibbsmin.solver.layout import (
    BASIS,
    CAPACITY,
    CHANGES,
    COLD,
    ENTROPY,
    EXTRA,
    GIBBS,
    HEAT,
    IDLE,
    KIND,
    MODE,
    REUSES,
    SECOND,
    WARM,
    C,
    T,
    Work,
)
from gibbsmin.solver.phase_set import NONE, start_phases
from gibbsmin.solver.simplex import optimal_basis
from gibbsmin.thermo.table import Table

CLOSE: Final = 3.0e-2  # relative change of T that is near enough for a start
NARROW: Final = 1.0e-7  # width of the bracket at which the programme jumps: a plateau
GUESS: Final = 500.0  # K; low, so that of several answers, where data end, the coldest is found

MOST_REUSES: Final = 50
"""States in a row that take over the coordinates of the one before, so that rounding does not gather in them."""


@inlined
def begin_joint(A: Any, gas: Any, b: Any, table: Table, w: Work) -> bool:
    """Prepare the start with T unknown: candidates of any T, T and basis of the programme; False if there is none.

    The energy of a fixed basis is smooth in T, that of the programme jumps where the basis changes: Newton steps, kept
    within a bracket that every trial narrows.
    """
    w.count[CHANGES], w.count[EXTRA] = 0, NONE
    for j in range(gas.size):
        w.std[GIBBS, j] = 0.0
    again = w.count[REUSES] >= 0 and same_candidates(b, w.std[GIBBS], w)
    if not again:
        select_candidates(A, gas, b, w.std[GIBBS], w)
    again &= w.count[REUSES] < MOST_REUSES
    w.count[REUSES] = w.count[REUSES] + 1 if again else 0
    low, high = w.value[COLD], w.value[WARM]
    if not again:
        w.value[T] = GUESS
    for _ in range(60):
        potentials(table, gas, w)
        kept = again and basis_usable(w)
        found = optimal_basis(kept, A, b, w.std[GIBBS], 0.0, w)
        if not found and (not kept or not optimal_basis(not kept, A, b, w.std[GIBBS], 0.0, w)):
            w.count[REUSES] = -1
            return False
        again = True
        form_energies(w)
        excess, slope = basis_excess(w)
        old = w.value[T]
        if excess > 0.0:
            high = old
        else:
            low = old
        change = -excess / max(slope, 1.0e-3)
        new = old * np.exp(min(max(change, -0.7), 0.7))
        if not low < new < high:
            new = np.sqrt(low * high)
        w.value[T] = new
        if abs(new / old - 1.0) < CLOSE or high / low < 1.0 + NARROW:
            break
    follow(table, gas, w)
    start_phases(w)
    return True


@inlined
def basis_usable(w: Work) -> bool:
    """Tell whether every species of the basis may be used at the present T."""
    usable = True
    for i in range(w.nu.shape[0]):
        if w.what[KIND, i] != IDLE:
            usable &= w.std[GIBBS, w.species[w.what[BASIS, i]]] < np.inf
    return usable


@inlined
def basis_excess(w: Work) -> tuple[float, float]:
    """E of eq. (7) for the species of the basis alone, without mixing, and its derivative by ln T."""
    total = slope = 0.0
    for i in range(w.nu.shape[0]):
        if w.what[KIND, i] != IDLE:
            j = w.species[w.what[BASIS, i]]
            total += w.at[C, i] * w.std[HEAT, j]
            slope += w.at[C, i] * w.std[CAPACITY, j]
            if w.count[MODE] == ENTROPY:
                total -= w.at[C, i] * w.std[GIBBS, j]
    target = w.value[SECOND]
    return total - (target if w.count[MODE] == ENTROPY else target / w.value[T]), slope
