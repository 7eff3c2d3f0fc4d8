"""Ten thousand random states over three systems: all are certified, and samples are proved again in plain numpy."""

import numpy as np
import pytest
from proof import prove

from gibbsmin.states.solve import equilibria
from gibbsmin.states.system import System

SYSTEMS = {
    "gas only": (System.from_elements("C H O N", condensed=False), 3500),
    "gas and condensed": (System.from_elements("C H O N S"), 3500),
    "ash of ten elements": (System.from_elements("C H O N S Cl Na K Ca Si"), 3000),
}


def draw(rng: np.random.Generator, states: int, elements: int) -> np.ndarray:
    """Draw element amounts: half over eight decades with one in ten absent, half in whole numbers."""
    b = 10.0 ** rng.uniform(-8.0, 0.0, (states, elements)) * (rng.random((states, elements)) < 0.9)
    half = rng.random(states) < 0.5
    b[half] = rng.integers(0, 5, (half.sum(), elements))
    b[b.sum(axis=1) == 0.0, 0] = 1.0
    return b


@pytest.mark.parametrize("name", SYSTEMS)
def test_all_are_certified(name: str) -> None:
    system, states = SYSTEMS[name]
    rng = np.random.default_rng(10_000)
    b = draw(rng, states, len(system.elements))
    T, P = rng.uniform(200.0, 6000.0, states), 10.0 ** rng.uniform(1.0, 9.0, states)
    batch = equilibria(system, element_amounts=b, temperature=T, pressure=P)
    bad = np.flatnonzero(~batch.certified)
    assert not bad.size, [(T[i], P[i], b[i].tolist(), batch.reason[i]) for i in bad[:3]]
    assert batch.element_residual.max() <= 1.0e-10
    assert batch.gap.max() <= 1.0e-8
    assert batch.worst_affinity.max() <= 1.0e-8
    for i in range(0, states, 31):
        assert prove(system, T[i], P[i], b[i], batch.amounts[i], batch.element_potentials[i]).holds
