"""A first temperature where it is not held: that at which the linear programme has the energy or entropy asked for."""

from __future__ import annotations

from typing import Any, Final

import numpy as np

from gibbsmin.compiled import inlined
from gibbsmin.solver.energy import form_energies, potentials
from gibbsmin.solver.layout import (
    BASIS,
    CAPACITY,
    COLD,
    ENTROPY,
    GIBBS,
    HEAT,
    IDLE,
    KIND,
    MODE,
    SECOND,
    WARM,
    C,
    T,
    Work,
)
from gibbsmin.solver.simplex import optimal_basis, optimal_basis_again
from gibbsmin.thermo.table import Table

CLOSE: Final = 1.0e-3  # relative change of T that is near enough for a start
NARROW: Final = 1.0e-7  # width of the bracket at which the programme jumps: a plateau
GUESS: Final = 1500.0  # K


@inlined
def start_temperature(again: bool, A: Any, b: Any, gas: Any, table: Table, w: Work) -> bool:
    """Set T and an optimal basis there; False if no basis was found. ``again``: go on from the basis and T of ``w``.

    The energy of a fixed basis is smooth in T, that of the programme jumps where the basis changes: Newton steps, kept
    within a bracket that every trial narrows.
    """
    low, high = w.value[COLD], w.value[WARM]
    if not again:
        w.value[T] = GUESS
    for _ in range(60):
        potentials(table, gas, w)
        kept = again and basis_usable(w) and optimal_basis_again(b, w.std[GIBBS], w)
        if not kept and not optimal_basis(A, b, w.std[GIBBS], 0.0, w):
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
            return True
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
