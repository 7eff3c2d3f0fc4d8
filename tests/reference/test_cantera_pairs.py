"""Gases at held enthalpy, entropy, internal energy and volume against Cantera (https://cantera.org), on its own data.

A state drawn at T and P gives what is then held. Both find the temperature anew from there, Cantera from an
equilibrium at other T and P; gibbsmin is given no start at all.
"""

from collections.abc import Iterator

import cantera as ct
import numpy as np
import pytest

from gibbsmin.interop import system_from_cantera
from gibbsmin.states.batch import Batch
from gibbsmin.states.solve import equilibria

STATES = 200
TRACE = 1.0e-10
FEED = ("CH4", "O2", "N2", "H2", "CO", "H2O", "CO2", "C2H6", "NH3")
PAIRS = {
    "HP": ("enthalpy", "pressure"),
    "SP": ("entropy", "pressure"),
    "TV": ("temperature", "volume"),
    "UV": ("internal_energy", "volume"),
    "SV": ("entropy", "volume"),
}


def draw(rng: np.random.Generator, gas: ct.Solution) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """Draw T within the data [K], P from 1e-2 to 1e2 bar [Pa], and mole fractions of two to five species."""
    X = np.zeros((STATES, gas.n_species))
    for x in X:
        chosen = rng.choice(FEED, rng.integers(2, 6), replace=False)
        x[[gas.species_index(name) for name in chosen]] = 10.0 ** rng.uniform(-2.0, 0.0, chosen.size)
        x /= x.sum()
    return rng.uniform(400.0, 2900.0, STATES), 10.0 ** rng.uniform(3.0, 7.0, STATES), X


def theirs(gas: ct.Solution, pair: str, batch: Batch, X: np.ndarray) -> Iterator[tuple[int, float, float, np.ndarray]]:
    """Index, temperature, pressure and mole fractions of every state on which Cantera converges."""
    held = [getattr(batch, name) for name in PAIRS[pair]]
    for i in range(STATES):
        mass = X[i] @ gas.molecular_weights / 1000.0
        per_mass = [values[i] if name in ("temperature", "pressure") else values[i] / mass
                    for name, values in zip(PAIRS[pair], held, strict=True)]  # fmt: skip
        try:
            gas.TPX = 0.9 * batch.temperature[i] + 100.0, 1.1 * batch.pressure[i], X[i]
            gas.equilibrate("TP")
            if pair == "TV":
                gas.TD = per_mass[0], 1.0 / per_mass[1]
            else:
                setattr(gas, pair, per_mass)
            gas.equilibrate(pair, solver="element_potential", rtol=1.0e-11, max_steps=1000, max_iter=500)
        except ct.CanteraError:
            continue
        yield i, gas.T, gas.P, np.array(gas.X)


@pytest.mark.parametrize("pair", PAIRS)
def test_temperature_pressure_and_mole_fractions(pair: str) -> None:
    gas = ct.Solution("gri30.yaml")
    system = system_from_cantera(gas)
    T, P, X = draw(np.random.default_rng(1970), gas)
    before = equilibria(system, X, temperature=T, pressure=P)
    conditions = {name: getattr(before, name) for name in PAIRS[pair]}
    batch = equilibria(system, X, **conditions)
    assert batch.certified.all(), [batch.reason[i] for i in np.flatnonzero(~batch.certified)]
    assert batch.temperature == pytest.approx(T, rel=1.0e-9)
    compared = 0
    for i, temperature, pressure, x in theirs(gas, pair, before, X):
        compared += 1
        assert batch.temperature[i] == pytest.approx(temperature, rel=1.0e-6)
        assert batch.pressure[i] == pytest.approx(pressure, rel=1.0e-6)
        ours = batch.amounts[i] / batch.amounts[i].sum()
        seen = np.maximum(ours, x) > TRACE
        assert ours[seen] == pytest.approx(x[seen], rel=1.0e-5)
    assert compared >= 0.95 * STATES
