"""One state whose temperature is unknown: energy or entropy is held, at constant pressure or volume.

The start is the temperature at which the linear programme has the energy or entropy asked for; if the iteration does
not lead home from there, T is narrowed by states of given temperature.
"""

from __future__ import annotations

from typing import Any, Final

import numpy as np

from gibbsmin.compiled import inlined
from gibbsmin.solver.at_temperature import at_temperature
from gibbsmin.solver.candidates import select_candidates
from gibbsmin.solver.energy import energy_excess, follow, form_energies, potentials
from gibbsmin.solver.layout import (
    CHANGES,
    COLD,
    ENTROPY,
    EXTRA,
    IDLE,
    MODE,
    PRESENT,
    REUSES,
    SECOND,
    TEMPERATURE,
    WARM,
    T,
    Work,
)
from gibbsmin.solver.phase_set import NONE, start_phases
from gibbsmin.solver.settle import settle
from gibbsmin.solver.simplex import optimal_basis
from gibbsmin.solver.status import SOLVED, TOO_COLD, TOO_HOT, UNSETTLED
from gibbsmin.thermo.table import Table

CLOSE: Final = 1.0e-3  # relative change of T that is near enough for a start
NARROW: Final = 1.0e-7  # width of the bracket at which the programme jumps: a plateau
GUESS: Final = 1500.0  # K
BRACKETS: Final = (1.0e-2, 1.0e-2, 1.0e-11)
"""Relative width of a bracket of T at which settling is tried first, factor to the next, and last width."""


@inlined
def at_energy(A: Any, gas: Any, b: Any, table: Table, w: Work) -> int:
    """Solve for one state with the temperature unknown; return its status."""
    w.count[REUSES] = -1
    w.count[CHANGES], w.count[EXTRA] = 0, NONE
    for j in range(gas.size):
        w.g[j] = 0.0
    select_candidates(A, gas, b, w.g, w)
    if start_temperature(A, b, gas, table, w):
        follow(table, gas, w)
        start_phases(w)
        if settle(b, gas, table, w) and all_usable(table, w):
            return SOLVED
    return by_bracket(A, gas, b, table, w)


@inlined
def all_usable(table: Table, w: Work) -> bool:
    """Tell whether every condensed species that is present may be used at the present T."""
    usable = True
    for i in range(w.c.size):
        if w.kind[i] == PRESENT:
            j = w.species[w.basis[i]]
            usable &= table.low[j] <= w.value[T] <= table.top[j]
    return usable


@inlined
def by_bracket(A: Any, gas: Any, b: Any, table: Table, w: Work) -> int:
    """Narrow T by states of held T, whose energy and entropy rise with T, and settle from the nearest of them."""
    mode, low, high = w.count[MODE], w.value[COLD], w.value[WARM]
    narrow = BRACKETS[0]
    for _ in range(120):
        w.value[T] = np.sqrt(low * high)
        w.count[MODE] = TEMPERATURE
        solved = at_temperature(A, gas, b, table, w) == SOLVED
        w.count[MODE] = mode
        w.count[CHANGES] = 0
        too_warm = w.value[T] > GUESS
        if solved:
            follow(table, gas, w)
            too_warm = energy_excess(w) > 0.0
        if too_warm:
            high = w.value[T]
        else:
            low = w.value[T]
        if high / low < 1.0 + narrow:
            if high > 0.999 * w.value[WARM]:
                return TOO_HOT
            if low < 1.001 * w.value[COLD]:
                return TOO_COLD
            if solved and settle(b, gas, table, w) and all_usable(table, w):
                return SOLVED
            narrow *= BRACKETS[1]
            if narrow < BRACKETS[2]:
                break
    return UNSETTLED


@inlined
def start_temperature(A: Any, b: Any, gas: Any, table: Table, w: Work) -> bool:
    """Set T and an optimal basis there; False if no basis was found.

    The energy of a fixed basis is smooth in T, that of the programme jumps where the basis changes: Newton steps, kept
    within a bracket that every trial narrows.
    """
    low, high = w.value[COLD], w.value[WARM]
    w.value[T] = GUESS
    for _ in range(60):
        potentials(table, gas, w)
        if not optimal_basis(A, b, w.g, 0.0, w):
            return False
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
def basis_excess(w: Work) -> tuple[float, float]:
    """E of eq. (7) for the species of the basis alone, without mixing, and its derivative by ln T."""
    total = slope = 0.0
    for i in range(w.c.size):
        if w.kind[i] != IDLE:
            j = w.species[w.basis[i]]
            total += w.c[i] * w.e[j]
            slope += w.c[i] * w.cp[j]
            if w.count[MODE] == ENTROPY:
                total -= w.c[i] * w.g[j]
    target = w.value[SECOND]
    return total - (target if w.count[MODE] == ENTROPY else target / w.value[T]), slope
