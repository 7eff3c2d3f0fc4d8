"""States along a line begin from the ones before, and come out as if each were the only one."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from gibbsmin.states.batch import Batch
from gibbsmin.states.solve import equilibria
from gibbsmin.states.system import System

SYSTEMS = {
    "soot and water": ("C H O N S", {"CH4": 1.0, "O2": 0.6, "N2": 1.0, "H2S": 0.01, "H2O": 0.5}),
    "lean flame": ("C H O N", {"CH4": 1.0, "O2": 2.4, "N2": 9.0}),
    "salts": ("C H O N S Cl K Na", {"CO2": 1.0, "N2": 5.0, "O2": 0.3, "KCl": 1e-3, "SO2": 2e-3, "H2O": 1.0}),
    "ash": ("C H O N S Cl Si Al Ca K", {"CO": 1.0, "H2O": 0.4, "N2": 1.0, "H2S": 0.01, "HCl": 0.003,
            "SiO2(s)": 0.05, "Al2O3(s)": 0.02, "CaO(s)": 0.03, "K2O(s)": 0.01}),
}  # fmt: skip


def made(name: str) -> tuple[System, np.ndarray]:
    """System and element amounts of one of the mixtures."""
    elements, feed = SYSTEMS[name]
    system = System.from_elements(elements)
    return system, system.feed(feed)


def alone(system: System, b: np.ndarray, **held: np.ndarray) -> list[Batch]:
    """Solve each state by itself."""
    count = len(next(iter(held.values())))
    rows = np.broadcast_to(b, (count, b.shape[-1]))
    pairs = [{name: values[i] for name, values in held.items()} for i in range(count)]
    return [equilibria(system, element_amounts=rows[i], **pair) for i, pair in enumerate(pairs)]  # type: ignore[arg-type]


def same(batch: Batch, single: list[Batch]) -> None:
    """Compare states with those found alone."""
    assert batch.certified.all()
    n, ref = batch.amounts, np.concatenate([one.amounts for one in single])
    scale = ref.sum(axis=1, keepdims=True)
    assert np.abs(n - ref).max() <= 1e-9 * scale.max()
    big = ref > 1e-12 * scale
    assert n[big] == pytest.approx(ref[big], rel=1e-7)
    assert batch.temperature == pytest.approx(np.concatenate([one.temperature for one in single]), rel=1e-9)


@pytest.mark.parametrize("name", SYSTEMS)
def test_over_temperature_and_pressure(name: str) -> None:
    system, b = made(name)
    T, P = (grid.ravel() for grid in np.meshgrid(np.linspace(500.0, 2000.0, 31), np.geomspace(1e4, 1e7, 6)))
    same(equilibria(system, element_amounts=b, temperature=T, pressure=P), alone(system, b, temperature=T, pressure=P))


@pytest.mark.parametrize("name", SYSTEMS)
def test_over_composition(name: str) -> None:
    system, b = made(name)
    more = system.feed({"O2": 1.0})
    rows = b + np.linspace(0.0, 2.0, 60)[:, None] * more
    T = np.full(60, 1400.0)
    batch = equilibria(system, element_amounts=rows, temperature=T, pressure=1e5)
    same(batch, [equilibria(system, element_amounts=row, temperature=1400.0, pressure=1e5) for row in rows])


@pytest.mark.parametrize("name", SYSTEMS)
def test_over_enthalpy(name: str) -> None:
    system, b = made(name)
    P = np.full(40, 2e5)
    ends = equilibria(system, element_amounts=b, temperature=np.array([800.0, 1900.0]), pressure=2e5).enthalpy
    H = np.linspace(*ends, 40)
    same(equilibria(system, element_amounts=b, enthalpy=H, pressure=P), alone(system, b, enthalpy=H, pressure=P))


@settings(max_examples=30, deadline=None)
@given(st.sampled_from(list(SYSTEMS)), st.integers(0, 2**31), st.floats(1e-6, 0.3), st.booleans())
def test_random_walks(name: str, seed: int, step: float, with_feed: bool) -> None:
    """Steps of any size and direction, back and forth, from very small ones on."""
    rng = np.random.default_rng(seed)
    system, b = made(name)
    T = 1200.0 * np.exp(np.clip(np.cumsum(rng.normal(0.0, step, 25)), -0.6, 0.6))
    P = 1e5 * np.exp(np.cumsum(rng.normal(0.0, step, 25)))
    rows = np.broadcast_to(b, (25, b.size))
    if with_feed:
        rows = rows * np.exp(np.clip(np.cumsum(rng.normal(0.0, step, (25, b.size)), axis=0), -2.0, 2.0))
    batch = equilibria(system, element_amounts=rows, temperature=T, pressure=P)
    same(batch, [equilibria(system, element_amounts=rows[i], temperature=T[i], pressure=P[i]) for i in range(25)])


def test_the_same_state_again_and_again() -> None:
    system, b = made("lean flame")
    batch = equilibria(system, element_amounts=b, temperature=np.full(50, 1800.0), pressure=1e5)
    assert batch.certified.all()
    assert np.ptp(batch.amounts, axis=0).max() <= 1e-12 * batch.amounts[0].sum()


def test_a_sweep_takes_few_steps() -> None:
    system, b = made("lean flame")
    batch = equilibria(system, element_amounts=b, temperature=np.linspace(1000.0, 2500.0, 500), pressure=1e5)
    unrelated = equilibria(system, element_amounts=b, temperature=np.resize([1000.0, 2500.0], 500), pressure=1e5)
    assert batch.steps.mean() < 0.7 * unrelated.steps.mean()
