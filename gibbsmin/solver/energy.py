"""Temperature as an unknown: standard functions at the present T, the energy balance (7) and its border (8)."""

from __future__ import annotations

from typing import Any

import numpy as np

from gibbsmin.compiled import inlined, summing
from gibbsmin.solver.basis import exact_prices
from gibbsmin.solver.gas import present_amount
from gibbsmin.solver.layout import (
    ENTROPY,
    EXTRA,
    FIRST,
    FREE,
    GAS,
    IDLE,
    MODE,
    MORE,
    PRESENT,
    SECOND,
    TEMPERATURE,
    VOLUME,
    G,
    K,
    T,
    Work,
)
from gibbsmin.thermo.table import Table, standard_heat_capacity, standard_state


@inlined
def potentials(table: Table, gas: Any, w: Work) -> None:
    """Make g, e, s and Cp of every species at the present T; g is inf where the range rules forbid a species."""
    temperature = w.value[T]
    standard_state(temperature, table, w.e, w.s)
    held_volume = w.count[VOLUME] == 1
    shift = w.value[FIRST] + (np.log(temperature) if held_volume else 0.0)
    for j in range(gas.size):
        usable = table.low[j] <= temperature <= table.top[j]
        w.g[j] = w.e[j] - w.s[j] + (shift if gas[j] else 0.0) if usable else np.inf
    if w.count[MODE] != TEMPERATURE:
        standard_heat_capacity(temperature, table, w.cp)
        if held_volume:
            for j in range(gas.size):
                if gas[j]:
                    w.e[j] -= 1.0
                    w.cp[j] -= 1.0


@inlined
def follow(table: Table, gas: Any, w: Work) -> None:
    """Bring g, d and de to the present T; a basis species stays one even beyond its range, until it leaves."""
    potentials(table, gas, w)
    shift = w.value[FIRST] + (np.log(w.value[T]) if w.count[VOLUME] == 1 else 0.0)
    for i in range(w.c.size):
        if w.kind[i] != IDLE:
            j = w.species[w.basis[i]]
            extended = w.e[j] + (1.0 if gas[j] and w.count[VOLUME] == 1 else 0.0)
            w.g[j] = extended - w.s[j] + (shift if gas[j] else 0.0)
    exact_prices(w.g, w)
    form_energies(w)


@summing
def form_energies(w: Work) -> None:
    """Make de_j = e_j - nu_j.e_B."""
    for k in range(w.count[K]):
        w.de[k] = w.e[w.species[k]]
    for i in range(w.c.size):
        if w.kind[i] != IDLE:
            energy = w.e[w.species[w.basis[i]]]
            for k in range(w.count[K]):
                w.de[k] -= w.nu[i, k] * energy


@inlined
def energy_sum(w: Work) -> float:
    """Energy of the mixture over RT: c.e_B + sum n_j de_j."""
    total = 0.0
    for i in range(w.c.size):
        if w.kind[i] != IDLE:
            total += w.c[i] * w.e[w.species[w.basis[i]]]
    if w.count[GAS] == 1:
        for j in range(w.count[G]):
            total += w.n[j] * w.de[j]
    if w.count[EXTRA] >= 0:
        total += w.value[MORE] * w.de[w.count[EXTRA]]
    return total


@inlined
def energy_excess(w: Work) -> float:
    """E of eq. (7)."""
    total = energy_sum(w)
    if w.count[MODE] != ENTROPY:
        return float(total - w.value[SECOND] / w.value[T])
    for i in range(w.c.size):
        if w.kind[i] != IDLE and w.c[i] != 0.0:
            total -= w.c[i] * (w.g[w.species[w.basis[i]]] + w.y[i])
    if w.count[VOLUME] == 1:
        for j in range(w.count[G]):
            total += w.n[j]
    return float(total - w.value[SECOND])


@inlined
def heat_capacity_sum(w: Work) -> float:
    """Frozen heat capacity of the mixture over R."""
    total = 0.0
    if w.count[GAS] == 1:
        for j in range(w.count[G]):
            total += w.n[j] * w.cp[w.species[j]]
    for i in range(w.c.size):
        if w.kind[i] == PRESENT:
            total += abs(present_amount(i, w)) * w.cp[w.species[w.basis[i]]]
    if w.count[EXTRA] >= 0:
        total += abs(w.value[MORE]) * w.cp[w.species[w.count[EXTRA]]]
    return total


@summing
def energy_border(f: int, w: Work) -> None:
    """Write row and column f + 1 of the matrix, that of tau, and f + 2, that of the extra species; eq. (8)."""
    H, row, gas, tau = w.matrix, w.row, w.count[G], f + 1
    present = w.count[GAS] == 1
    entropy = w.count[MODE] == ENTROPY
    q = square = 0.0
    for j in range(gas):
        row[j] = w.n[j] * w.de[j]
        q += row[j]
        square += row[j] * w.de[j]
    for p in range(f):
        nu = w.nu[w.free[p]]
        total = flow = 0.0
        for j in range(gas):
            total += row[j] * nu[j]
            flow += w.n[j] * nu[j]
        H[p, tau] = total
        H[tau, p] = total if present else 0.0
        if entropy:
            H[tau, p] -= w.c[w.free[p]]
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
    w.right[tau] = -excess
    k = w.count[EXTRA]
    if k >= 0:
        r -= w.value[MORE] * w.de[k] if entropy else 0.0
        H[tau, tau + 1] = H[tau + 1, tau] = w.de[k]
        for p in range(f + 1):
            H[p, tau + 1] = H[tau + 1, p] = 0.0
        H[tau + 1, tau + 1] = 0.0
        w.right[tau + 1] = -w.u[k]
    H[tau, tau] = r
    w.step[tau] = 1.0 / np.sqrt(max(r, 1.0e-3))
    w.step[tau + 1] = 1.0


@inlined
def energy_error(w: Work) -> float:
    """Relative error of the temperature that the energy balance still asks for; zero where T is held."""
    if w.count[MODE] == TEMPERATURE:
        return 0.0
    error = abs(energy_excess(w)) / max(heat_capacity_sum(w), 1.0e-3)
    if w.count[EXTRA] >= 0:
        error = max(error, abs(w.u[w.count[EXTRA]]))
    return float(error)


@inlined
def boiling(w: Work) -> bool:
    """Tell whether the gas is there because the temperature is where it coexists with what is condensed."""
    if w.count[MODE] == TEMPERATURE or w.count[GAS] == 0 or w.count[VOLUME] == 1:
        return False
    held = 0.0
    for i in range(w.c.size):
        held += abs(w.c[i]) if w.kind[i] == FREE else 0.0
    return held == 0.0


@inlined
def plateau(w: Work) -> bool:
    """Tell whether the phases that are present already fix the temperature."""
    return w.count[EXTRA] >= 0 or boiling(w)
