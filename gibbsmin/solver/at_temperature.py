"""One state at a given temperature: a start, the iteration, and other starts if it fails."""

from __future__ import annotations

from typing import Any, Final

from gibbsmin.compiled import inlined
from gibbsmin.solver.candidates import same_candidates, select_candidates
from gibbsmin.solver.energy import potentials
from gibbsmin.solver.layout import CHANGES, EXTRA, REUSES, Work
from gibbsmin.solver.phase_set import NONE, start_phases
from gibbsmin.solver.settle import settle
from gibbsmin.solver.simplex import optimal_basis, optimal_basis_again
from gibbsmin.solver.status import NO_ROOM, SOLVED, UNSETTLED
from gibbsmin.thermo.table import Table

STARTS: Final = (0.0, -4.0, 4.0, -12.0)
"""Added to the potentials of gases in the linear programme, one after the other until a start leads to the answer."""

MOST_REUSES: Final = 50
"""States in a row that take over the coordinates of the one before, so that rounding does not gather in them."""


@inlined
def at_temperature(A: Any, gas: Any, b: Any, table: Table, w: Work) -> int:
    """Solve problem (1) for one state at the T of ``w``; return its status. ``b`` (m,) is scaled to a sum of one."""
    w.count[CHANGES], w.count[EXTRA] = 0, NONE
    potentials(table, gas, w)
    again = w.count[REUSES] >= 0 and same_candidates(b, w.g, w)
    if again and w.count[REUSES] < MOST_REUSES and optimal_basis_again(b, w.g, w):
        w.count[REUSES] += 1
        start_phases(w)
        if settle(b, gas, table, w):
            return SOLVED
    elif not again:
        select_candidates(A, gas, b, w.g, w)
    w.count[REUSES] = -1
    for bias in STARTS:
        if not optimal_basis(A, b, w.g, bias, w):
            return NO_ROOM
        start_phases(w)
        w.count[CHANGES] = 0
        if settle(b, gas, table, w):
            w.count[REUSES] = 0
            return SOLVED
    return UNSETTLED
