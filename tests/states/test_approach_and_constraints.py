"""Approach temperatures and linear constraints on amounts."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.optimize import brentq

import gibbsmin as gm
from gibbsmin.errors import InputError

REFORMING = {"CH4": -1.0, "H2O": -1.0, "CO": 1.0, "H2": 3.0}
SHIFT = {"CO": -1.0, "H2O": -1.0, "CO2": 1.0, "H2": 1.0}
FEED = {"CH4": 101.0, "H2O": 300.0, "N2": 2.0}


@pytest.fixture(scope="module")
def system() -> gm.System:
    """Species of a reformer with two reactions that may lag behind."""
    return gm.System.from_elements("C H O N", condensed=False, approaches={"reforming": REFORMING, "shift": SHIFT})


def equilibrium_temperature(equation: str, state: gm.State) -> float:
    """Temperature at which the composition would be at equilibrium, from K(T) = Q."""
    found = gm.reaction(equation)
    x, bar = state.mole_fractions, state.pressure / 1e5
    nu = {"CH4 + H2O = CO + 3 H2": REFORMING, "CO + H2O = CO2 + H2": SHIFT}[equation]
    ln_q = sum(n * np.log(x[name] * bar) for name, n in nu.items())
    return float(brentq(lambda T: found.ln_k(T) - ln_q, 300.0, 3000.0, xtol=1e-10))


@settings(max_examples=25, deadline=None)
@given(
    T=st.floats(800.0, 1400.0),
    bar=st.floats(0.5, 60.0),
    reforming=st.floats(-40.0, 10.0),
    shift=st.floats(-10.0, 40.0),
)
def test_each_named_reaction_is_at_equilibrium_at_its_own_temperature(
    system: gm.System, T: float, bar: float, reforming: float, shift: float
) -> None:
    approach = {"reforming": reforming, "shift": shift}
    state = gm.equilibrium(system, FEED, temperature=T, pressure=bar * 1e5, approach=approach)
    assert state.certificate.ok
    assert equilibrium_temperature("CH4 + H2O = CO + 3 H2", state) == pytest.approx(T + reforming, abs=1e-6)
    assert equilibrium_temperature("CO + H2O = CO2 + H2", state) == pytest.approx(T + shift, abs=1e-6)


def test_a_reaction_that_is_not_named_stays_at_equilibrium(system: gm.System) -> None:
    state = gm.equilibrium(system, FEED, temperature=1143.15, pressure=24e5, approach={"reforming": -15.0})
    assert equilibrium_temperature("CO + H2O = CO2 + H2", state) == pytest.approx(1143.15, abs=1e-7)


def test_activities_are_those_of_the_mixture(system: gm.System) -> None:
    state = gm.equilibrium(system, FEED, temperature=1143.15, pressure=24e5, approach={"reforming": -15.0})
    assert np.exp(state.ln_activity["CH4"]) == pytest.approx(24.0 * state.mole_fractions["CH4"], rel=1e-9)


def test_held_enthalpy_gives_the_state_of_held_temperature_back(system: gm.System) -> None:
    T = np.array([900.0, 1100.0, 1300.0])
    change = {"reforming": np.array([-5.0, -20.0, -40.0]), "shift": 10.0}
    feed = np.array([FEED.get(name, 0.0) for name in system.species])
    first = gm.equilibria(system, feed, temperature=T, pressure=20e5, approach=change)
    second = gm.equilibria(system, feed, enthalpy=first.enthalpy, pressure=20e5, approach=change)
    assert second.certified.all()
    assert second.temperature == pytest.approx(T, abs=1e-7)
    assert second.state(1).amounts["CH4"] == pytest.approx(first.state(1).amounts["CH4"], rel=1e-8)


@pytest.mark.parametrize(
    ("approaches", "message"),
    [
        ({"r": {"CH4": -1.0, "H2O": -1.0, "CO": 1.0, "H2": 2.0}}, "does not balance: -2 H"),
        ({"r": REFORMING, "again": REFORMING}, "first species"),
        (
            {"r": REFORMING, "dry": {"CO2": -1.0, "CH4": -1.0, "CO": 2.0, "H2": 2.0}, "s": SHIFT},
            "depend on one another",
        ),
        ({"r": {"CH4": -1.0}}, "at least two species"),
        ({"r": {"CH4": -1.0, "C(s):graphite": 1.0, "H2": 2.0}}, "graphite"),
    ],
)
def test_reactions_that_will_not_do(approaches: dict[str, dict[str, float]], message: str) -> None:
    with pytest.raises(InputError, match=message):
        gm.System.from_elements("C H O", condensed=False, approaches=approaches)


def test_what_cannot_be_solved_is_refused(system: gm.System) -> None:
    with pytest.raises(InputError, match="no reaction 'reform'"):
        gm.equilibrium(system, FEED, temperature=1000.0, pressure=1e5, approach={"reform": -10.0})
    with pytest.raises(InputError, match="entropy do not go together"):
        gm.equilibrium(system, FEED, entropy=9e4, pressure=1e5, approach={"reforming": -10.0})
    with pytest.raises(InputError, match="above 0 K"):
        gm.equilibrium(system, FEED, temperature=1000.0, pressure=1e5, approach={"reforming": -1000.0})


@settings(max_examples=25, deadline=None)
@given(methane=st.floats(0.0, 60.0), char=st.floats(0.0, 30.0), T=st.floats(700.0, 1500.0))
def test_linear_constraints_are_met_and_the_rest_is_a_minimum(methane: float, char: float, T: float) -> None:
    system = gm.System.from_elements(
        "C H O N", constraints={"hydrocarbons": {"CH4": 1.0, "C2H6": 2.0}, "char": {"C(s):graphite": 1.0}}
    )
    held = {"hydrocarbons": methane, "char": char}
    state = gm.equilibrium(system, FEED, temperature=T, pressure=20e5, constrained=held)
    n = state.amounts
    assert state.certificate.ok
    assert n["CH4"] + 2.0 * n["C2H6"] == pytest.approx(methane, rel=1e-9, abs=1e-12)
    assert n["C(s):graphite"] == pytest.approx(char, rel=1e-9, abs=1e-12)
    assert equilibrium_temperature("CO + H2O = CO2 + H2", state) == pytest.approx(T, abs=1e-5)


def test_a_constraint_without_a_value_keeps_what_the_feed_has() -> None:
    system = gm.System.from_elements("C H O N", condensed=False, constraints={"methane": {"CH4": 1.0}})
    state = gm.equilibrium(system, {"CH4": 2.0, "CO": 1.0, "H2O": 1.0}, temperature=600.0, pressure=1e5)
    assert state.amounts["CH4"] == pytest.approx(2.0)


def test_constraints_that_cannot_be_met_are_told() -> None:
    system = gm.System.from_elements("C H O", condensed=False, constraints={"methane": {"CH4": 1.0}})
    with pytest.raises(gm.errors.NotCertified, match="constraints"):
        gm.equilibrium(system, {"CH4": 1.0}, temperature=900.0, pressure=1e5, constrained={"methane": 2.0})
    with pytest.raises(InputError, match="no constraint 'metane'"):
        gm.equilibrium(system, {"CH4": 1.0}, temperature=900.0, pressure=1e5, constrained={"metane": 0.5})
