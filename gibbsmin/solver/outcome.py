"""What comes out: amounts, element potentials, totals and the certificate of each state."""

from __future__ import annotations

from typing import Any, NamedTuple

import numpy as np

from gibbsmin.compiled import inlined, summing
from gibbsmin.solver.basis import NOISE
from gibbsmin.solver.certificate import element_residual, optimality
from gibbsmin.solver.gas import present_amount
from gibbsmin.solver.layout import (
    AMOUNT,
    BASIS,
    CAPACITY,
    COLD_SIDE,
    DISORDER,
    ENERGY,
    ENTROPY,
    EXTRA,
    GAS,
    GIBBS,
    HEAT,
    IDLE,
    KIND,
    LEFT,
    MIXED,
    MODE,
    MORE,
    OFFSET,
    PRESENT,
    SHARE,
    TEMPERATURE,
    VOLUME,
    WARM_SIDE,
    G,
    K,
    T,
    Work,
    Y,
)
from gibbsmin.solver.phase_set import NOTHING
from gibbsmin.solver.status import AFFINITY_LIMIT, GAP_LIMIT, HELD_LIMIT, IN_GAP, RESIDUAL_LIMIT, UNPROVED
from gibbsmin.thermo.table import Table, standard_heat_capacity, standard_state


class Outcome(NamedTuple):
    """Results of ``states`` states of S species and m elements; `new_outcome` allocates them."""

    n: Any  # (states, S) mol
    lam: Any  # (states, m) [-], -inf for an element of which there is none
    temperature: Any  # (states,) K
    pressure: Any  # (states,) bar
    enthalpy: Any  # (states,) H/R, mol K
    entropy: Any  # (states,) S/R, mol
    status: Any  # (states,) int, see `status`
    steps: Any  # (states,) int, Newton steps
    residual: Any  # (states,)
    gap: Any  # (states,)
    affinity: Any  # (states,)
    held: Any  # (states,) relative error of T that the second held condition leaves; zero where T is held


def new_outcome(states: int, S: int, m: int) -> Outcome:
    """Allocate an `Outcome` of ``states`` states, ``S`` species and ``m`` elements."""
    real, whole = np.float64, np.int64
    shapes = [(states, S), (states, m), *[(states,)] * 10]
    types = [*[real] * 6, whole, whole, *[real] * 4]
    return Outcome(*[np.zeros(shape, kind) for shape, kind in zip(shapes, types, strict=True)])


@inlined
def amounts(scale: float, w: Work, n: Any) -> None:
    """Write the amounts of the present state, times ``scale``, into ``n`` (S,)."""
    for j in range(n.size):
        n[j] = 0.0
    if w.count[GAS] == 1:
        for j in range(w.count[G]):
            n[w.species[j]] = scale * w.of[AMOUNT, j]
    if w.count[EXTRA] >= 0:
        n[w.species[w.count[EXTRA]]] = scale * max(w.value[MORE], 0.0)
    for i in range(w.nu.shape[0]):
        if w.what[KIND, i] == PRESENT:
            n[w.species[w.what[BASIS, i]]] = scale * max(present_amount(i, w), 0.0)


@inlined
def collect(scale: float, A: Any, w: Work, n: Any, lam: Any) -> None:
    """Write amounts (times ``scale``) and element potentials of the present state, eq. (4).

    An idle place is still that of the artificial column of its own row: a row that depends on others has the
    potential zero, one that no candidate holds (an absent element) minus infinity.
    """
    m = lam.size
    if w.count[MIXED] == 1:
        share = w.value[SHARE]
        for j in range(n.size):
            n[j] = scale * ((1.0 - share) * w.std[COLD_SIDE, j] + share * w.std[WARM_SIDE, j])
    else:
        amounts(scale, w, n)
    for i in range(m):
        lam[i] = 0.0
    for i in range(m):
        if w.what[KIND, i] == IDLE:
            held = False
            for k in range(w.count[K]):
                held |= A[i, w.species[k]] != 0.0
            lam[i] += 0.0 if held else -np.inf
            continue
        potential = w.std[GIBBS, w.species[w.what[BASIS, i]]] + w.at[Y, i]
        for k in range(m):
            lam[k] += w.inverse[i, k] * potential


@inlined
def close_balances(b: Any, w: Work, n: Any) -> None:
    """Let the condensed species take up what rounding left of the element balances: n_c + (B^-1 (b - A n))_c.

    What is rounding for the element itself is left alone: it would drown the balance of a rare one.
    """
    m = b.size
    for i in range(m):
        total = b[i]
        for j in range(n.size):
            total -= w.A[i, j] * n[j]
        w.at[LEFT, i] = total if abs(total) > NOISE * abs(b[i]) else 0.0
    for i in range(m):
        if w.what[KIND, i] == PRESENT:
            j, total = w.species[w.what[BASIS, i]], 0.0
            for k in range(m):
                total += w.inverse[i, k] * w.at[LEFT, k]
            n[j] = max(n[j] + total, 0.0)


@summing
def gas_amount(gas: Any, n: Any) -> float:
    """Amount of gas."""
    total = 0.0
    for j in range(n.size):
        total += n[j] if gas[j] else 0.0
    return total


@summing
def weighted(n: Any, values: Any) -> float:
    """Sum of ``values`` (S,) weighted with the amounts ``n`` (S,)."""
    total = 0.0
    for j in range(n.size):
        total += n[j] * values[j]
    return total


@inlined
def finish(
    A: Any, gas: Any, b: Any, first: float, second: float, table: Table, w: Work, state: int, out: Outcome
) -> None:
    """Write the totals of a state, and prove it as one at its own temperature and pressure.

    H/R = T sum n_j h_j; S/R = sum n_j (s_j - ln x_j - ln P/P°) over the gas, sum n_c s_c beside it.
    """
    n, temperature = out.n[state], w.value[T]
    amount = gas_amount(gas, n)
    pressure = amount * temperature / first if w.count[VOLUME] == 1 else first
    out.temperature[state], out.pressure[state] = temperature, pressure
    if w.count[VOLUME] == 1:  # there the iteration has U and Cv
        standard_state(temperature, table, w.pieces, w.std[HEAT], w.std[DISORDER])
        standard_heat_capacity(temperature, table, w.pieces, w.std[CAPACITY])
    lnP = np.log(pressure) if pressure > 0.0 else NOTHING
    for j in range(n.size):
        usable = table.low[j] <= temperature <= table.top[j] and w.chosen[j]
        own = w.std[HEAT, j] - w.std[DISORDER, j] + w.std[OFFSET, j]
        w.std[GIBBS, j] = own + (lnP if gas[j] else 0.0) if usable else np.inf
    out.gap[state], out.affinity[state], mixing = optimality(A, gas, b, w.std[GIBBS], n, out.lam[state], w)
    enthalpy, entropy = temperature * weighted(n, w.std[HEAT]), weighted(n, w.std[DISORDER]) - mixing - amount * lnP
    capacity = weighted(n, w.std[CAPACITY]) if w.count[MODE] != TEMPERATURE else 0.0
    if w.count[MIXED] == 1:  # H and S jump at this T: they follow from what is held and from G = b.lam
        energy = 0.0
        for i in range(b.size):
            energy += b[i] * out.lam[state, i] if b[i] != 0.0 else 0.0
        for j in range(n.size):
            energy -= n[j] * w.std[OFFSET, j]
        if w.count[MODE] == ENERGY:
            enthalpy = second + (amount * temperature if w.count[VOLUME] == 1 else 0.0)
            entropy = enthalpy / temperature - energy
        else:
            entropy = second
            enthalpy = temperature * (entropy + energy)
    out.enthalpy[state], out.entropy[state] = enthalpy, entropy
    if w.count[MODE] == ENERGY:
        energy = enthalpy - (amount * temperature if w.count[VOLUME] == 1 else 0.0)
        out.held[state] = abs(energy - second) / (capacity * temperature)
    elif w.count[MODE] == ENTROPY:
        out.held[state] = abs(entropy - second) / capacity
    out.residual[state] = element_residual(A, b, n)
    proved = out.residual[state] <= RESIDUAL_LIMIT and out.gap[state] <= GAP_LIMIT
    if not (proved and out.affinity[state] <= AFFINITY_LIMIT and out.held[state] <= HELD_LIMIT):
        out.status[state] = IN_GAP if w.count[MIXED] == 1 else UNPROVED
