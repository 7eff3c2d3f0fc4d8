"""Approach temperatures against arithmetic by hand, published fits, measurements, and what the solver imposes."""

from __future__ import annotations

from math import log, log10

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from practice.settled_from import by_hand, figures, settle

from gibbsmin.practice.figures.approach import (
    AMMONIA,
    METHANOL,
    REFORMING,
    SHIFT,
    approach,
    equilibrium_temperature,
    words,
)
from gibbsmin.practice.reactions.reactions import reaction
from gibbsmin.states.solve import equilibria
from gibbsmin.states.system import System

# An invented reformer outlet at 870 °C and 24 bar.
OUTLET = {"H2": 0.4870, "H2O": 0.3301, "CO": 0.0942, "CO2": 0.0550, "CH4": 0.0302, "N2": 0.0035}


def test_quotient_worked_by_hand() -> None:
    """Q = 628.6 bar² and 0.8614 by hand; ln K of both, linear in 1/T between JANAF (1998) values at 1100 and 1300 K.

    log10 K of reforming 2.494 and 4.153, of shift -0.005 and -0.245.
    """
    Q = 0.0942 * 0.4870**3 * 24.0**2 / (0.0302 * 0.3301)
    assert pytest.approx(628.6, rel=1.0e-3) == Q
    for watched, q, low, high in ((REFORMING, Q, 2.494, 4.153), (SHIFT, 0.8614, -0.005, -0.245)):
        part = (log10(q) - low) / (high - low)
        by_hand_T = 1.0 / (1.0 / 1100.0 + part * (1.0 / 1300.0 - 1.0 / 1100.0))
        found = equilibrium_temperature(reaction(watched.equation), OUTLET, 24.0e5, 1143.15)
        assert found[0] == pytest.approx(by_hand_T, abs=3.0)


def test_shift_by_the_fit_of_moe() -> None:
    """Moe (1962): ln K = 4577.8/T - 4.33, which is a few percent off the tables."""
    gas = {"CO": 0.03, "H2O": 0.30, "CO2": 0.15, "H2": 0.52}
    by_fit = 4577.8 / (log(0.15 * 0.52 / (0.03 * 0.30)) + 4.33)
    assert equilibrium_temperature(reaction(SHIFT.equation), gas, 25e5, 650.0)[0] == pytest.approx(by_fit, abs=15.0)


def test_methanol_by_the_fit_of_graaf() -> None:
    """Graaf et al. (1986): log10 K = 5139/T - 12.621, bar; sources differ by 30 % in K, which is 7 K."""
    gas = {"CO": 0.06, "H2": 0.60, "CH3OH": 0.08, "N2": 0.26}
    by_fit = 5139.0 / (log10(0.08 / (0.06 * 0.60**2 * 80.0**2)) + 12.621)
    assert equilibrium_temperature(reaction(METHANOL.equation), gas, 80e5, 500.0)[0] == pytest.approx(by_fit, abs=12.0)


@pytest.mark.parametrize(("celsius", "percent"), [(350.0, 7.35), (400.0, 3.85)])
def test_ammonia_as_measured(celsius: float, percent: float) -> None:
    """Larson and Dodge (1923), 10 atm, H2/N2 = 3 (from memory); K of today is 4 to 7 % higher, which is 6 K."""
    x = percent / 100.0
    gas = {"NH3": x, "N2": 0.25 * (1.0 - x), "H2": 0.75 * (1.0 - x)}
    found = equilibrium_temperature(reaction(AMMONIA.equation), gas, 10.0 * 101325.0, celsius + 273.15)
    assert found[0] - 273.15 == pytest.approx(celsius, abs=8.0)


@given(st.floats(450.0, 1500.0), st.floats(-40.0, 40.0), st.floats(0.02, 0.4), st.floats(0.02, 0.4))
def test_gas_in_balance_elsewhere(T: float, away: float, CO: float, H2O: float) -> None:
    """A gas made to balance at T + approach is found there."""
    K = float(np.exp(reaction(SHIFT.equation).ln_k(T + away)))
    product = (K * CO * H2O) ** 0.5
    gas = {"CO": CO, "H2O": H2O, "CO2": product, "H2": product}
    found = equilibrium_temperature(reaction(SHIFT.equation), gas, 1e5, T)
    assert found[0] == pytest.approx(T + away, abs=1e-6)


@settings(max_examples=40)
@given(st.floats(600.0, 1300.0), st.floats(1e5, 60e5))
def test_pressure_cancels_only_where_moles_stay(T: float, p: float) -> None:
    gas = {"CO": 0.1, "H2O": 0.3, "CO2": 0.1, "H2": 0.4, "CH4": 0.1}
    one, other = (equilibrium_temperature(reaction(SHIFT.equation), gas, P, T) for P in (p, 2.0 * p))
    assert one[0] == pytest.approx(other[0], rel=1e-9)
    one, other = (equilibrium_temperature(reaction(REFORMING.equation), gas, P, T) for P in (p, 2.0 * p))
    assert other[0] > one[0]


def test_equilibrium_has_no_approach() -> None:
    system = System.from_species("CH4 H2 H2O CO CO2 N2")
    state = settle(system, {"gas": {"CH4": 1.0, "N2": 0.1}, "steam": {"H2O": 3.0}}, [900.0, 1100.0], 25e5)
    for watched in (REFORMING, SHIFT):
        found = figures(approach(state, watched))
        assert found[f"{watched.key}_approach"].tolist() == [0.0, 0.0]
        assert found[f"{watched.key}_equilibrium_temperature"] == pytest.approx(state.temperature)


def test_imposed_approach_is_found_again() -> None:
    """The solver holds the constant of reforming at T - 10 K and leaves that of shift: both are read from the gas."""
    reforming = {"CH4": -1.0, "H2O": -1.0, "CO": 1.0, "H2": 3.0}
    system = System.from_species("CH4 H2 H2O CO CO2 N2", approaches={"reforming": reforming})
    feed = np.array([system.feed({"CH4": 1.0, "H2O": 3.0, "N2": 0.1})])
    batch = equilibria(system, element_amounts=feed, temperature=1143.15, pressure=24e5, approach={"reforming": -10.0})
    amounts = dict(zip(system.species, batch.amounts.T, strict=True))
    gas = {name: n / sum(amounts.values()) for name, n in amounts.items()}
    found = equilibrium_temperature(reaction(REFORMING.equation), gas, 24e5, 1143.15)
    assert found[0] == pytest.approx(1133.15, abs=1e-4)
    found = equilibrium_temperature(reaction(SHIFT.equation), gas, 24e5, 1143.15)
    assert found[0] == pytest.approx(1143.15, abs=1e-4)


def test_words_tell_both_conventions() -> None:
    reforming, shift = reaction(REFORMING.equation), reaction(SHIFT.equation)
    assert words(reforming, -11.1) == "Approach -11.1 K (11.1 K short of equilibrium)"
    assert words(reforming, 4.0) == "Approach +4.0 K (4.0 K beyond equilibrium)"
    assert words(shift, 10.0) == "Approach +10.0 K (10.0 K short of equilibrium)"
    assert words(shift, -10.0) == "Approach -10.0 K (10.0 K beyond equilibrium)"
    assert words(shift, 0.01) == "At equilibrium"


def test_words_of_one_state_stand_in_the_note() -> None:
    one = approach(by_hand(OUTLET, {}, 1143.15, 24e5), REFORMING)[1]
    assert "K short of equilibrium" in one.note
    assert -12.5 < one.value[0] < -9.5


def test_solids_count_as_one() -> None:
    """CaCO3 = CaO + CO2: 1 atm of CO2 at 900.5 °C by the fit of Baker 1962 (from memory); data differ by 10 K."""
    found = equilibrium_temperature(reaction("CaCO3(s) = CaO(s) + CO2"), {"CO2": 1.0}, 101325.0, 1100.0)
    assert found[0] - 273.15 == pytest.approx(900.5, abs=12.0)


def test_no_number_where_there_is_none() -> None:
    shift = reaction(SHIFT.equation)
    missing = {"CO": np.array([0.1, 0.0]), "H2O": 0.3, "CO2": 0.2, "H2": 0.4}
    found = equilibrium_temperature(shift, missing, 1e5, 700.0)
    assert np.isfinite(found).tolist() == [True, False]
    assert np.isnan(equilibrium_temperature(shift, {"CO": 0.1, "H2O": 0.3}, 1e5, 700.0)[0])
    everything_shifted = {"CO": 1e-40, "H2O": 0.3, "CO2": 0.2, "H2": 0.4}
    assert np.isnan(equilibrium_temperature(shift, everything_shifted, 1e5, 700.0)[0])
    assert np.isnan(equilibrium_temperature(shift, {**missing, "CO": 0.1}, 1e5, np.nan)[0])
