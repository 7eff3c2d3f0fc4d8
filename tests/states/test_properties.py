"""What must hold for every feed, temperature and pressure, whatever the species."""

from functools import cache

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from proof import prove

from gibbsmin.constants import R
from gibbsmin.states.solve import equilibria
from gibbsmin.states.state import State
from gibbsmin.states.system import System

ELEMENTS = "C H O N S"
NOTHING = st.just(0.0)
AMOUNTS = st.lists(
    st.one_of(NOTHING, st.integers(1, 4).map(float), st.floats(-8.0, 0.0).map(lambda e: 10.0**e)),
    min_size=5,
    max_size=5,
).filter(any)
TEMPERATURES = st.floats(250.0, 5500.0)
PRESSURES = st.floats(2.0, 8.0).map(lambda e: 10.0**e)


@cache
def all_species() -> System:
    return System.from_elements(ELEMENTS)


def settled(system: System, amounts: dict[str, float], T: float, P: float) -> State:
    """State for element amounts by symbol."""
    b = [amounts.get(symbol, 0.0) for symbol in system.elements]
    return equilibria(system, element_amounts=b, temperature=T, pressure=P).state(0)


def named(b: list[float]) -> dict[str, float]:
    return dict(zip(ELEMENTS.split(), b, strict=True))


def same(one: State, other: State, scale: float = 1.0) -> None:
    """Two states agree: Gibbs energy to 1e-11, every amount to 1e-6 of itself or 1e-9 of the whole."""
    total = one.amounts.sum()
    G = scale * one.gibbs_energy
    assert other.gibbs_energy == pytest.approx(G, rel=1.0e-11, abs=1.0e-11 * R * one.temperature * scale * total)
    expected = scale * one.amounts
    difference = abs(other.amounts.reindex(expected.index) - expected)
    assert (difference <= np.maximum(1.0e-6 * expected, 1.0e-9 * scale * total)).all()


@given(AMOUNTS, TEMPERATURES, PRESSURES)
def test_certificate_worked_out_again(b: list[float], T: float, P: float) -> None:
    state = settled(all_species(), named(b), T, P)
    order = [named(b)[symbol] for symbol in state.system.elements]
    proof = prove(state.system, T, P, order, state.amounts_array, state.element_potentials_array)
    assert proof.holds, proof
    assert state.certificate.ok


@given(AMOUNTS, TEMPERATURES, PRESSURES)
def test_mole_fractions_sum_to_one_in_every_phase_that_is_there(b: list[float], T: float, P: float) -> None:
    state = settled(all_species(), named(b), T, P)
    sums = [state.mole_fractions_array[list(phase.members)].sum() for phase in state.system.phase_models]
    there = state.phase_amounts.to_numpy() > 0.0
    assert np.array(sums)[there] == pytest.approx(1.0, rel=1.0e-12)
    assert not np.array(sums)[~there].any()
    assert (state.affinities <= 1.0e-8).all()


@given(AMOUNTS, TEMPERATURES, PRESSURES, st.floats(-9.0, 9.0))
def test_amounts_scale_with_the_feed(b: list[float], T: float, P: float, exponent: float) -> None:
    scale = 10.0**exponent
    one = settled(all_species(), named(b), T, P)
    many = settled(all_species(), {name: scale * amount for name, amount in named(b).items()}, T, P)
    same(one, many, scale)


@given(AMOUNTS, TEMPERATURES, PRESSURES, st.randoms(use_true_random=False))
def test_order_of_species_and_elements_is_without_effect(b: list[float], T: float, P: float, random: object) -> None:
    records = list(all_species().records)
    random.shuffle(records)  # type: ignore[attr-defined]
    shuffled = System.from_species(records)
    same(settled(all_species(), named(b), T, P), settled(shuffled, named(b), T, P))


@given(AMOUNTS, TEMPERATURES, PRESSURES, st.sets(st.integers(0, 150), min_size=1, max_size=60))
def test_a_further_species_never_raises_the_gibbs_energy(b: list[float], T: float, P: float, out: set[int]) -> None:
    full = all_species()
    names = {record.name for j, record in enumerate(full.records) if j in out and len(record.elements) > 1}
    fewer = System.from_species([record for record in full.records if record.name not in names])
    all_of_them, some = settled(full, named(b), T, P), settled(fewer, named(b), T, P)
    slack = 1.0e-9 * R * T * all_of_them.amounts.sum()
    assert all_of_them.gibbs_energy <= some.gibbs_energy + slack
    if not all_of_them.amounts[list(names)].any():
        same(some, all_of_them)


@given(AMOUNTS, AMOUNTS, TEMPERATURES, PRESSURES)
def test_mixing_two_feeds_never_raises_the_gibbs_energy(
    first: list[float], second: list[float], T: float, P: float
) -> None:
    both = [one + other for one, other in zip(first, second, strict=True)]
    one, other, mixed = (settled(all_species(), named(b), T, P) for b in (first, second, both))
    slack = 1.0e-9 * R * T * mixed.amounts.sum()
    assert mixed.gibbs_energy <= one.gibbs_energy + other.gibbs_energy + slack


@given(TEMPERATURES, PRESSURES, st.floats(0.01, 0.99), st.floats(0.0, 5.0))
def test_a_feed_split_in_two_is_the_same_feed(T: float, P: float, share: float, steam: float) -> None:
    system = all_species()
    whole = system.feed({"CH4": 1.0, "H2O": steam, "SO2": 0.1, "N2": 0.3})
    parts = system.feed({"CH4": share, "SO2": 0.1 * share}) + system.feed(
        {"CH4": 1.0 - share, "H2O": steam, "SO2": 0.1 * (1.0 - share), "N2": 0.3}
    )
    one, other = (equilibria(system, element_amounts=b, temperature=T, pressure=P).state(0) for b in (whole, parts))
    same(one, other)


@cache
def gas_only() -> System:
    return System.from_elements("C H O N", condensed=False)


@given(
    st.lists(st.floats(0.05, 1.0), min_size=4, max_size=4),
    st.floats(400.0, 5000.0),
    st.floats(3.0, 7.0).map(lambda e: 10.0**e),
)
def test_derivatives_of_the_gibbs_energy(b: list[float], T: float, P: float) -> None:
    """G falls with T as S says, rises with P as V says, and with the elements as their potentials say (Gibbs 1876).

    G is convex in the elements and concave in T and P, so that each derivative lies between its two one-sided
    differences, whatever the step: nothing is lost to truncation near exact stoichiometry.
    """
    system, d = gas_only(), 1.0e-4
    feeds = np.array(
        [b] * 5 + [[x * (1.0 + s * d * (i == j)) for j, x in enumerate(b)] for i in range(4) for s in (-1, 1)]
    )
    temperature, pressure = np.full(13, T), np.full(13, P)
    temperature[1:3] *= 1.0 - d, 1.0 + d
    pressure[3:5] *= 1.0 - d, 1.0 + d
    batch = equilibria(system, element_amounts=feeds, temperature=temperature, pressure=pressure)
    state, G = batch.state(0), batch.gibbs_energy
    potentials = R * T * state.element_potentials_array
    steps = d * np.array([T, P, *b])
    below, above = (G[0] - G[1::2]) / steps, (G[2::2] - G[0]) / steps
    slack = 1.0e-13 * (abs(state.enthalpy) + T * abs(state.entropy)) / steps
    slopes = np.array([-state.entropy, state.volume, *potentials])
    sense = np.array([-1.0, -1.0, 1.0, 1.0, 1.0, 1.0])
    assert np.all(sense * below <= sense * slopes + slack)
    assert np.all(sense * slopes <= sense * above + slack)
    assert np.all(abs(above - below)[:2] <= 0.05 * abs(slopes[:2]))  # the two sides bracket closely


@pytest.mark.parametrize("feed", [{"CH4": 1.0, "H2O": 3.0}, {"C": 1.0, "O2": 0.4, "N2": 1.0}, {"NH3": 1.0, "CO2": 0.5}])
def test_enthalpy_rises_with_temperature(feed: dict[str, float]) -> None:
    """Stability: dH/dT > 0 at held P, across condensation of water and of carbon too."""
    system = System.from_elements("C H O N")
    T = np.linspace(250.0, 5500.0, 2000)
    batch = equilibria(system, element_amounts=system.feed(feed), temperature=T, pressure=1.0e5)
    assert (np.diff(batch.enthalpy) > 0.0).all()
    assert (np.diff(batch.entropy) > 0.0).all()
    assert (np.diff(batch.gibbs_energy) < 0.0).all()
