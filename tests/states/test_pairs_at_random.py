"""Five thousand random states for each held pair over three systems: all certified, and T found again.

A state drawn at T and P gives what is then held. Its T is the answer, unless the data of a condensed species end on
the way: beyond its usable range a liquid is hidden, however stable, so that energy and entropy jump there, in most
cases down, and several temperatures have the same entropy.
"""

from collections.abc import Callable
from functools import cache

import numpy as np
import pytest
from proof import prove

from gibbsmin.constants import R
from gibbsmin.states.batch import Batch
from gibbsmin.states.solve import equilibria
from gibbsmin.states.system import System

STATES = 5000
SYSTEMS = {
    "gas only": System.from_elements("C H O N", condensed=False),
    "gas and condensed": System.from_elements("C H O N S"),
    "ash of ten elements": System.from_elements("C H O N S Cl Na K Ca Si"),
}
PAIRS = (
    ("enthalpy", "pressure"),
    ("entropy", "pressure"),
    ("temperature", "volume"),
    ("internal_energy", "volume"),
    ("entropy", "volume"),
)

NOTHING = np.zeros_like
SIZE: dict[str, Callable[[Batch], np.ndarray]] = {
    "temperature": lambda batch: NOTHING(batch.temperature),
    "pressure": lambda batch: NOTHING(batch.temperature),
    "volume": lambda batch: NOTHING(batch.temperature),
    "enthalpy": lambda batch: R * batch.temperature * batch.amounts.sum(axis=1),
    "internal_energy": lambda batch: R * batch.temperature * batch.amounts.sum(axis=1),
    "entropy": lambda batch: R * batch.amounts.sum(axis=1),
}
"""What a deviation is measured by, beside the value itself, which may be near zero for an energy."""


@cache
def drawn(name: str) -> tuple[np.ndarray, Batch]:
    """Element amounts over eight decades, or in whole numbers, and the states at T and P drawn with them."""
    system, rng = SYSTEMS[name], np.random.default_rng(50_000)
    elements = len(system.elements)
    b = 10.0 ** rng.uniform(-8.0, 0.0, (STATES, elements)) * (rng.random((STATES, elements)) < 0.9)
    half = rng.random(STATES) < 0.5
    b[half] = rng.integers(0, 5, (half.sum(), elements))
    b[b.sum(axis=1) == 0.0, 0] = 1.0
    T, P = rng.uniform(200.0, 6000.0, STATES), 10.0 ** rng.uniform(1.0, 9.0, STATES)
    return b, equilibria(system, element_amounts=b, temperature=T, pressure=P)


def drops_at_an_end(system: System, b: np.ndarray, T: float, U: float, name: str, other: str, value: float) -> bool:
    """Tell whether ``name`` falls with rising temperature where a condensed species ends between two temperatures."""
    low, high = min(T, U), max(T, U)
    for end in {end for record in system.records if record.condensed for end in record.usable if low < end < high}:
        either_side = equilibria(
            system, element_amounts=b, temperature=[end * (1.0 - 1e-9), end * (1.0 + 1e-9)], **{other: value}
        )
        below, above = getattr(either_side, name)
        if above < below:
            return True
    return False


@pytest.mark.parametrize("name", SYSTEMS)
def test_all_are_certified_and_lead_back(name: str) -> None:
    system, (b, before) = SYSTEMS[name], drawn(name)
    assert before.certified.all()
    gas = before.amounts[:, system.gas].sum(axis=1) > 1.0e-8 * before.amounts.sum(axis=1)
    asked = elsewhere = 0
    for pair in PAIRS:
        index = np.flatnonzero(gas) if "volume" in pair else np.arange(STATES)
        held = {condition: getattr(before, condition)[index] for condition in pair}
        batch = equilibria(system, element_amounts=b[index], **held)
        bad = np.flatnonzero(~batch.certified)
        assert not bad.size, (pair, [(b[index[i]].tolist(), batch.reason[i]) for i in bad[:3]])
        for condition, values in held.items():
            size = abs(values) + SIZE[condition](batch)
            assert (abs(getattr(batch, condition) - values) <= 1.0e-9 * size).all(), (pair, condition)
        away = np.flatnonzero(abs(batch.temperature / before.temperature[index] - 1.0) > 1.0e-6)
        asked, elsewhere = asked + index.size, elsewhere + away.size
        for i in away:
            T, U = before.temperature[index[i]], batch.temperature[i]
            assert drops_at_an_end(system, b[index[i]], T, U, pair[0], pair[1], held[pair[1]][i]), (pair, T, U)
        same = np.setdiff1d(np.arange(index.size), away)
        assert (abs(batch.pressure[same] / before.pressure[index[same]] - 1.0) <= 1.0e-6).all(), pair
        for i in [*range(0, index.size, 499), *away]:
            state = (batch.temperature[i], batch.pressure[i], b[index[i]])
            assert prove(system, *state, batch.amounts[i], batch.element_potentials[i]).holds, (pair, state)
    assert elsewhere <= 0.002 * asked
