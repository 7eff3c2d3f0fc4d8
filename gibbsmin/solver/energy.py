"""Temperature as an unknown: standard functions at the present T, the energy balance (7) and its border (8)."""

from __future__ import annotations

from typing import Any

import numpy as np

from gibbsmin.compiled import inlined, summing
from gibbsmin.solver.basis import exact_prices
from gibbsmin.solver.gas import present_amount
from gibbsmin.solver.layout import (
    AMOUNT,
    BASIS,
    CAPACITY,
    DE,
    DISORDER,
    ENTROPY,
    EXTRA,
    FIRST,
    FREE,
    GAS,
    GIBBS,
    HEAT,
    IDLE,
    KIND,
    LIST,
    MODE,
    MORE,
    OFFSET,
    PRESENT,
    RIGHT,
    ROW,
    SECOND,
    STEP,
    TEMPERATURE,
    VOLUME,
    C,
    G,
    K,
    T,
    U,
    Work,
    Y,
)
from gibbsmin.thermo.table import Table, standard_heat_capacity, standard_state


@inlined
def potentials(table: Table, gas: Any, w: Work) -> None:
    """Make g, e, s and Cp of every species at the present T; g is inf where the range rules forbid a species."""
    temperature = w.value[T]
    standard_state(temperature, table, w.pieces, w.std[HEAT], w.std[DISORDER])
    held_volume = w.count[VOLUME] == 1
    shift = w.value[FIRST] + (np.log(temperature) if held_volume else 0.0)
    for j in range(gas.size):
        usable = table.low[j] <= temperature <= table.top[j]
        own = w.std[HEAT, j] - w.std[DISORDER, j] + w.std[OFFSET, j]
        w.std[GIBBS, j] = own + (shift if gas[j] else 0.0) if usable else np.inf
    if w.count[MODE] != TEMPERATURE:
        standard_heat_capacity(temperature, table, w.pieces, w.std[CAPACITY])
        if held_volume:
            for j in range(gas.size):
                if gas[j]:
                    w.std[HEAT, j] -= 1.0
                    w.std[CAPACITY, j] -= 1.0


@inlined
def follow(table: Table, gas: Any, w: Work) -> None:
    """Bring g, d and de to the present T; a basis species stays one even beyond its range, until it leaves."""
    potentials(table, gas, w)
    shift = w.value[FIRST] + (np.log(w.value[T]) if w.count[VOLUME] == 1 else 0.0)
    for i in range(w.nu.shape[0]):
        if w.what[KIND, i] != IDLE:
            j = w.species[w.what[BASIS, i]]
            extended = w.std[HEAT, j] + (1.0 if gas[j] and w.count[VOLUME] == 1 else 0.0)
            w.std[GIBBS, j] = extended - w.std[DISORDER, j] + w.std[OFFSET, j] + (shift if gas[j] else 0.0)
    exact_prices(w.std[GIBBS], w)
    form_energies(w)


@summing
def form_energies(w: Work) -> None:
    """Make de_j = e_j - nu_j.e_B."""
    for k in range(w.count[K]):
        w.of[DE, k] = w.std[HEAT, w.species[k]]
    for i in range(w.nu.shape[0]):
        if w.what[KIND, i] != IDLE:
            energy = w.std[HEAT, w.species[w.what[BASIS, i]]]
            for k in range(w.count[K]):
                w.of[DE, k] -= w.nu[i, k] * energy


@inlined
def energy_sum(w: Work) -> float:
    """Energy of the mixture over RT: c.e_B + sum n_j de_j."""
    total = 0.0
    for i in range(w.nu.shape[0]):
        if w.what[KIND, i] != IDLE:
            total += w.at[C, i] * w.std[HEAT, w.species[w.what[BASIS, i]]]
    if w.count[GAS] == 1:
        for j in range(w.count[G]):
            total += w.of[AMOUNT, j] * w.of[DE, j]
    if w.count[EXTRA] >= 0:
        total += w.value[MORE] * w.of[DE, w.count[EXTRA]]
    return total


@inlined
def energy_excess(w: Work) -> float:
    """E of eq. (7)."""
    total = energy_sum(w)
    if w.count[MODE] != ENTROPY:
        return float(total - w.value[SECOND] / w.value[T])
    for i in range(w.nu.shape[0]):
        if w.what[KIND, i] != IDLE and w.at[C, i] != 0.0:
            total -= w.at[C, i] * (w.std[GIBBS, w.species[w.what[BASIS, i]]] + w.at[Y, i])
    if w.count[VOLUME] == 1:
        for j in range(w.count[G]):
            total += w.of[AMOUNT, j]
    return float(total - w.value[SECOND])


@inlined
def heat_capacity_sum(w: Work) -> float:
    """Frozen heat capacity of the mixture over R."""
    total = 0.0
    if w.count[GAS] == 1:
        for j in range(w.count[G]):
            total += w.of[AMOUNT, j] * w.std[CAPACITY, w.species[j]]
    for i in range(w.nu.shape[0]):
        if w.what[KIND, i] == PRESENT:
            total += abs(present_amount(i, w)) * w.std[CAPACITY, w.species[w.what[BASIS, i]]]
    if w.count[EXTRA] >= 0:
        total += abs(w.value[MORE]) * w.std[CAPACITY, w.species[w.count[EXTRA]]]
    return total


@summing
def energy_border(f: int, w: Work) -> None:
    """Write row and column f + 1 of the matrix, that of tau, and f + 2, that of the extra species; eq. (8)."""
    H, row, gas, tau = w.matrix, w.of[ROW], w.count[G], f + 1
    present = w.count[GAS] == 1
    entropy = w.count[MODE] == ENTROPY
    q = square = 0.0
    for j in range(gas):
        row[j] = w.of[AMOUNT, j] * w.of[DE, j]
        q += row[j]
        square += row[j] * w.of[DE, j]
    for p in range(f):
        nu = w.nu[w.what[LIST, p]]
        total = flow = 0.0
        for j in range(gas):
            total += row[j] * nu[j]
            flow += w.of[AMOUNT, j] * nu[j]
        H[p, tau] = total
        H[tau, p] = total if present else 0.0
        if entropy:
            H[tau, p] -= w.at[C, w.what[LIST, p]]
            if w.count[VOLUME] == 1:
                H[tau, p] += flow
    no_gas_row = w.count[VOLUME] == 1 or not present
    H[f, tau] = H[tau, f] = 0.0 if no_gas_row else q
    excess = energy_excess(w)
    r = heat_capacity_sum(w) + (square if present else 0.0)
    if not entropy:
        r -= excess
    elif w.count[VOLUME] == 0 and present:
        r -= q
    w.at[RIGHT, tau] = -excess
    k = w.count[EXTRA]
    if k >= 0:
        r -= w.value[MORE] * w.of[DE, k] if entropy else 0.0
        H[tau, tau + 1] = H[tau + 1, tau] = w.of[DE, k]
        for p in range(f + 1):
            H[p, tau + 1] = H[tau + 1, p] = 0.0
        H[tau + 1, tau + 1] = 0.0
        w.at[RIGHT, tau + 1] = -w.of[U, k]
    H[tau, tau] = r
    w.at[STEP, tau] = 1.0 / np.sqrt(max(r, 1.0e-3))
    w.at[STEP, tau + 1] = 1.0


@inlined
def energy_error(w: Work) -> float:
    """Relative error of the temperature that the energy balance still asks for; zero where T is held."""
    if w.count[MODE] == TEMPERATURE:
        return 0.0
    error = abs(energy_excess(w)) / max(heat_capacity_sum(w), 1.0e-3)
    if w.count[EXTRA] >= 0:
        error = max(error, abs(w.of[U, w.count[EXTRA]]))
    return float(error)


@inlined
def boiling(w: Work) -> bool:
    """Tell whether the gas is there because the temperature is where it coexists with what is condensed."""
    if w.count[MODE] == TEMPERATURE or w.count[GAS] == 0 or w.count[VOLUME] == 1:
        return False
    held = 0.0
    for i in range(w.nu.shape[0]):
        held += abs(w.at[C, i]) if w.what[KIND, i] == FREE else 0.0
    return held == 0.0


@inlined
def plateau(w: Work) -> bool:
    """Tell whether the phases that are present already fix the temperature."""
    return w.count[EXTRA] >= 0 or boiling(w)
