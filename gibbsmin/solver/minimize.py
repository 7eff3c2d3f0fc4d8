"""One state and many states: from element amounts, T and P to amounts, element potentials and certificate."""

from __future__ import annotations

from typing import Any, Final, NamedTuple

import numpy as np

from gibbsmin.compiled import compiled, inlined
from gibbsmin.solver.candidates import same_candidates, select_candidates
from gibbsmin.solver.certificate import element_residual, optimality
from gibbsmin.solver.gas import present_amount
from gibbsmin.solver.layout import CHANGES, GAS, IDLE, PRESENT, REUSES, STEPS, G, K, Work, new_work
from gibbsmin.solver.phase_set import start_phases
from gibbsmin.solver.settle import settle
from gibbsmin.solver.simplex import optimal_basis, optimal_basis_again
from gibbsmin.solver.status import (
    AFFINITY_LIMIT,
    GAP_LIMIT,
    NO_FEED,
    NO_ROOM,
    RESIDUAL_LIMIT,
    SOLVED,
    UNPROVED,
    UNSETTLED,
)
from gibbsmin.thermo.table import Table, standard_state

STARTS: Final = (0.0, -4.0, 4.0, -12.0)
"""Added to the potentials of gases in the linear programme, one after the other until a start leads to the answer."""

MOST_REUSES: Final = 50
"""States in a row that take over the coordinates of the one before, so that rounding does not gather in them."""


class Outcome(NamedTuple):
    """Results of ``states`` states of S species and m elements; `new_outcome` allocates them."""

    n: Any  # (states, S) mol
    lam: Any  # (states, m) [-], -inf for an element of which there is none
    enthalpy: Any  # (states,) H/R, mol K
    entropy: Any  # (states,) S/R, mol
    status: Any  # (states,) int, see `status`
    steps: Any  # (states,) int, Newton steps
    residual: Any  # (states,)
    gap: Any  # (states,)
    affinity: Any  # (states,)


def new_outcome(states: int, S: int, m: int) -> Outcome:
    """Allocate an `Outcome` of ``states`` states, ``S`` species and ``m`` elements."""
    real, whole = np.float64, np.int64
    shapes = [(states, S), (states, m), *[(states,)] * 7]
    types = [real, real, real, real, whole, whole, real, real, real]
    return Outcome(*[np.zeros(shape, kind) for shape, kind in zip(shapes, types, strict=True)])


@inlined
def collect(scale: float, A: Any, g: Any, w: Work, n: Any, lam: Any) -> None:
    """Write amounts (times ``scale``) and element potentials of the present state, eq. (4).

    An idle place is still that of the artificial column of its own row: a row that depends on others has the
    potential zero, one that no candidate holds (an absent element) minus infinity.
    """
    m = lam.size
    n[:] = 0.0
    lam[:] = 0.0
    if w.count[GAS] == 1:
        for j in range(w.count[G]):
            n[w.species[j]] = scale * w.n[j]
    for i in range(m):
        if w.kind[i] == IDLE:
            held = False
            for k in range(w.count[K]):
                held |= A[i, w.species[k]] != 0.0
            lam[i] += 0.0 if held else -np.inf
            continue
        if w.kind[i] == PRESENT:
            n[w.species[w.basis[i]]] = scale * max(present_amount(i, w), 0.0)
        potential = g[w.species[w.basis[i]]] + w.y[i]
        for k in range(m):
            lam[k] += w.inverse[i, k] * potential


@inlined
def close_balances(b: Any, w: Work, n: Any) -> None:
    """Let the condensed species take up what rounding left of the element balances: n_c + (B^-1 (b - A n))_c."""
    m = b.size
    for i in range(m):
        total = b[i]
        for j in range(n.size):
            total -= w.A[i, j] * n[j]
        w.left[i] = total
    for i in range(m):
        if w.kind[i] == PRESENT:
            j, total = w.species[w.basis[i]], 0.0
            for k in range(m):
                total += w.inverse[i, k] * w.left[k]
            n[j] = max(n[j] + total, 0.0)


@inlined
def one_state(A: Any, gas: Any, b: Any, g: Any, w: Work) -> int:
    """Solve problem (1) for one state; return its status.

    ``b`` (m,) is scaled to a sum of one; ``g`` (S,) is inf where a species is no candidate, and becomes inf where it
    cannot be present.
    """
    w.count[STEPS] = w.count[CHANGES] = 0
    again = w.count[REUSES] >= 0 and same_candidates(b, g, w)
    if again and w.count[REUSES] < MOST_REUSES and optimal_basis_again(b, g, w):
        w.count[REUSES] += 1
        start_phases(w)
        if settle(b, w):
            return SOLVED
    elif not again:
        select_candidates(A, gas, b, g, w)
    w.count[REUSES] = -1
    for bias in STARTS:
        if not optimal_basis(A, b, g, bias, w):
            return NO_ROOM
        start_phases(w)
        w.count[CHANGES] = 0
        if settle(b, w):
            w.count[REUSES] = 0
            return SOLVED
    return UNSETTLED


@compiled
def minimize_many(A: Any, gas: Any, b: Any, T: Any, P: Any, table: Table, out: Outcome) -> None:
    """Solve every state of a batch.

    Parameters
    ----------
    A : (m, S) array
        Atoms of each element in each species [-].
    gas : (S,) bool array
        True for the species of the ideal gas.
    b : (states, m) array
        Element amounts [mol].
    T, P : (states,) arrays
        Temperature [K] and pressure [bar], finite and positive.
    table : Table
        Standard-state functions.
    out : Outcome
        Filled in place.
    """
    m, S = A.shape
    w = new_work(A)
    w.count[REUSES] = -1
    h, s, g, relative = np.empty(S), np.empty(S), np.empty(S), np.empty(m)
    for state in range(T.size):
        n, lam = out.n[state], out.lam[state]
        standard_state(T[state], table, h, s)
        lnP = np.log(P[state])
        for j in range(S):
            usable = table.low[j] <= T[state] <= table.top[j]
            g[j] = h[j] - s[j] + (lnP if gas[j] else 0.0) if usable else np.inf
        scale = 0.0
        for i in range(m):
            scale += abs(b[state, i])
        if scale > 0.0:
            scale = 2.0 ** np.ceil(np.log2(scale))  # a power of two: what is stoichiometric stays so to the last bit
        for i in range(m):
            relative[i] = b[state, i] / scale
        status = NO_FEED if not scale > 0.0 else one_state(A, gas, relative, g, w)
        out.steps[state] = w.count[STEPS]
        if status == SOLVED:
            collect(scale, A, g, w, n, lam)
            close_balances(b[state], w, n)
            out.residual[state] = element_residual(A, b[state], n)
            out.gap[state], out.affinity[state] = optimality(A, gas, b[state], g, n, lam, w.u)
            proved = out.residual[state] <= RESIDUAL_LIMIT and out.gap[state] <= GAP_LIMIT
            if not (proved and out.affinity[state] <= AFFINITY_LIMIT):
                status = UNPROVED
            totals(T[state], lnP, gas, h, s, state, out)
        out.status[state] = status


@inlined
def totals(T: float, lnP: float, gas: Any, h: Any, s: Any, state: int, out: Outcome) -> None:
    """Write H/R and S/R of the mixture: S/R = sum n_j (s_j - ln x_j - ln P/P°) over the gas, sum n_c s_c beside it."""
    n = out.n[state]
    amount = 0.0
    for j in range(n.size):
        amount += n[j] if gas[j] else 0.0
    for j in range(n.size):
        if n[j] > 0.0:
            mixing = lnP + np.log(n[j] / amount) if gas[j] else 0.0
            out.enthalpy[state] += n[j] * h[j] * T
            out.entropy[state] += n[j] * (s[j] - mixing)
