"""Numbers of reformers and shift beds against arithmetic by hand and a printed worked example."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from practice.settled_from import by_hand, figures, settle

from gibbsmin.practice.figures.reforming import reforming, shift
from gibbsmin.practice.figures.settled import FeedFacts
from gibbsmin.practice.reactions.reactions import reaction
from gibbsmin.states.system import System

C1 = System.from_species("CH4 H2 H2O CO CO2 N2")

# An invented gas of refinery and steam, and an invented outlet, mol.
FEEDS = {"gas": {"CH4": 80.0, "C2H6": 5.0, "CO2": 6.0, "CO": 1.0, "N2": 8.0}, "steam": {"H2O": 270.0}}
OUTLET = {"CH4": 18.0, "CO": 40.0, "CO2": 39.0, "H2": 250.0, "H2O": 153.0, "N2": 8.0}


def test_worked_by_hand() -> None:
    found = figures(reforming(by_hand(OUTLET, FEEDS, 1100.0, 24e5)))
    dry = 18.0 + 40.0 + 39.0 + 250.0 + 8.0
    expected = {
        "steam_to_carbon": 270.0 / (80.0 + 2.0 * 5.0),
        "h2_to_co": 250.0 / 40.0,
        "module": (250.0 - 39.0) / (40.0 + 39.0),
        "ch4_slip": 18.0 / dry,
        "co_dry": 40.0 / dry,
        "co2_dry": 39.0 / dry,
        "h2_dry": 250.0 / dry,
        "hydrocarbon_conversion": (40.0 + 39.0 - 7.0) / 90.0,
        "dry_gas": dry,
        "hydrogen": 250.0,
        "water_in_gas": 153.0 * 0.018015,
    }
    for name, value in expected.items():
        assert found[name][0] == pytest.approx(value, rel=1e-5), name
    assert "oxygen_to_carbon" not in found
    assert "duty_per_carbon" not in found


def test_oxygen_and_heat_by_hand() -> None:
    feeds = {**FEEDS, "oxygen": {"O2": 45.0, "N2": 0.2}}
    state = replace(by_hand(OUTLET, feeds, 1300.0, 30e5), heat=np.array([1.8e6]), is_flow=True)
    found = figures(reforming(state))
    assert found["oxygen_to_carbon"][0] == pytest.approx(45.0 / 90.0)
    assert found["oxygen_per_1000_synthesis_gas"][0] == pytest.approx(1000.0 * 45.0 / 290.0)
    assert found["duty_per_carbon"][0] == pytest.approx(20.0e3)
    assert "methane_cracking_up_to" not in found  # a flame is no straight path
    units = {figure.name: (figure.unit, figure.shown) for figure in reforming(state)}
    assert units["dry_gas"] == ("mol/s", "Nm3/h")
    assert units["water_in_gas"] == ("kg/s", "kg/h")


def test_printed_worked_example() -> None:
    """Smith and Van Ness, example 13.14: 2 CH4 + 3 H2O at 1000 K and 1 bar; printed with Gibbs energies of its own."""
    state = settle(C1, {"gas": {"CH4": 2.0}, "steam": {"H2O": 3.0}}, 1000.0, 1e5)
    y = {"CH4": 0.0196, "H2O": 0.0980, "CO": 0.1743, "CO2": 0.0371, "H2": 0.6710}
    found = figures(reforming(state))
    assert found["steam_to_carbon"][0] == 1.5
    assert found["ch4_slip"][0] == pytest.approx(y["CH4"] / (1.0 - y["H2O"]), rel=0.05)
    assert found["h2_to_co"][0] == pytest.approx(y["H2"] / y["CO"], rel=0.01)
    assert found["module"][0] == pytest.approx((y["H2"] - y["CO2"]) / (y["CO"] + y["CO2"]), rel=0.01)
    carbon = y["CO"] + y["CO2"]
    assert found["hydrocarbon_conversion"][0] == pytest.approx(carbon / (carbon + y["CH4"]), abs=0.005)


def test_water_counts_wherever_it_comes_from() -> None:
    steam = figures(reforming(by_hand(OUTLET, {"a": {"CH4": 50.0}, "b": {"H2O": 120.0}})))
    apart = figures(reforming(by_hand(OUTLET, {"a": {"CH4": 50.0, "H2O": 20.0}, "b": {"H2O(l)": 100.0}})))
    assert steam["steam_to_carbon"][0] == apart["steam_to_carbon"][0] == pytest.approx(2.4)


def test_carbon_of_a_fuel_by_analysis_counts() -> None:
    naphtha = FeedFacts({}, {"C": np.array([70.0]), "H": np.array([150.0])}, np.array([1.0]), by_analysis=True)
    state = by_hand(OUTLET, {"steam": {"H2O": 210.0}, "gas": {"CO2": 5.0}})
    found = figures(reforming(replace(state, feeds={**state.feeds, "naphtha": naphtha})))
    assert found["steam_to_carbon"][0] == pytest.approx(3.0)


@settings(max_examples=40)
@given(st.floats(800.0, 1300.0), st.floats(1.0, 5.0), st.floats(1e5, 40e5))
def test_conversion_and_slip_are_one(temperature: float, steam: float, pressure: float) -> None:
    """What was not converted is the methane that is left; T_eq is the temperature."""
    feeds = {"gas": {"CH4": 0.9, "CO2": 0.1}, "steam": {"H2O": 0.9 * steam}}
    state = settle(C1, feeds, temperature, pressure)
    found = figures(reforming(state))
    assert found["steam_to_carbon"][0] == pytest.approx(steam)
    assert found["hydrocarbon_conversion"][0] == pytest.approx(1.0 - state.amounts["CH4"][0] / 0.9, abs=1e-9)
    assert found["reforming_approach"][0] == 0.0
    assert found["shift_equilibrium_temperature"][0] == pytest.approx(temperature)


def test_methane_cracks_up_to_where_its_activity_is_one() -> None:
    feeds = {"gas": {"CH4": 1.0, "N2": 0.05}, "steam": {"H2O": 3.0}}
    state = settle(C1, feeds, 1143.15, 24e5)
    z = figures(reforming(state))["methane_cracking_up_to"][0]
    assert 0.0 < z < 1.0
    moles = {name: (1.0 - z) * state.fed(name)[0] + z * n[0] for name, n in state.amounts.items()}
    p = {name: 24.0 * n / sum(moles.values()) for name, n in moles.items()}
    K = np.exp(reaction("CH4 = C(s):graphite + 2 H2").ln_k(1143.15))
    assert K * p["CH4"] / p["H2"] ** 2 == pytest.approx(1.0, rel=1e-5)


def test_cracking_is_asked_only_where_there_is_something_to_crack() -> None:
    settled_soot = by_hand({"CH4": 9.0, "H2": 1.0}, {"gas": {"CH4": 10.0}}, 1300.0, 1e5)  # cracks at the end too
    assert "methane_cracking_up_to" not in figures(reforming(settled_soot))
    no_methane = by_hand(OUTLET, {"gas": {"C3H8": 30.0}, "steam": {"H2O": 200.0}})
    assert "methane_cracking_up_to" not in figures(reforming(no_methane))


def test_states_that_were_not_certified_stay_empty() -> None:
    state = settle(C1, {"gas": {"CH4": 1.0}, "steam": {"H2O": [2.0, 3.0]}}, 1100.0, 20e5)
    lost = np.array([False, True])
    hidden = replace(
        state,
        amounts={name: np.where(lost, np.nan, n) for name, n in state.amounts.items()},
        temperature=np.where(lost, np.nan, state.temperature),
        element_potentials={e: np.where(lost, np.nan, v) for e, v in state.element_potentials.items()},
    )
    found = figures(reforming(hidden))
    assert found["steam_to_carbon"].tolist() == [2.0, 3.0]
    for name in ("h2_to_co", "reforming_approach", "carbon_activity", "dry_gas", "methane_cracking_up_to"):
        assert np.isfinite(found[name]).tolist() == [True, False], name


def test_shift_by_hand() -> None:
    feeds = {"gas": {"CO": 12.0, "CO2": 6.0, "H2": 52.0, "H2O": 30.0}}
    found = figures(shift(by_hand({"CO": 3.0, "CO2": 15.0, "H2": 61.0, "H2O": 21.0}, feeds, 693.15, 25e5)))
    assert found["co_conversion"][0] == pytest.approx(0.75)
    assert found["co_dry"][0] == pytest.approx(3.0 / 79.0)
    assert found["steam_to_dry_gas"][0] == pytest.approx(30.0 / 70.0)
    assert "ch4_slip" not in found
    assert "dew_margin_inlet" not in found  # nobody said how warm the feed is


def test_dew_margins_by_the_steam_tables() -> None:
    """6 bar of steam condense at 158.8 °C, 5 bar at 151.8 °C (steam tables, from memory)."""
    state = by_hand(
        {"CO2": 15.0, "H2": 60.0, "H2O": 25.0}, {"gas": {"CO": 10.0, "H2": 60.0, "H2O": 30.0}}, 503.15, 20e5
    )
    warm = {name: replace(feed, temperature=np.array([473.15])) for name, feed in state.feeds.items()}
    found = figures(shift(replace(state, feeds=warm)))
    assert found["dew_margin_inlet"][0] == pytest.approx(200.0 - 158.8, abs=0.1)
    assert found["dew_margin"][0] == pytest.approx(230.0 - 151.8, abs=0.1)


def test_no_inlet_margin_for_feeds_of_different_temperature() -> None:
    state = by_hand({"CO2": 15.0, "H2": 60.0, "H2O": 25.0}, {"gas": {"CO": 10.0}, "steam": {"H2O": 30.0}}, 503.15, 20e5)
    temperatures = {"gas": 473.15, "steam": 523.15}
    feeds = {name: replace(feed, temperature=np.array([temperatures[name]])) for name, feed in state.feeds.items()}
    assert "dew_margin_inlet" not in figures(shift(replace(state, feeds=feeds)))


@given(st.floats(450.0, 750.0))
def test_shift_is_at_equilibrium(temperature: float) -> None:
    state = settle(System.from_species("CO CO2 H2 H2O N2"), {"gas": {"CO": 0.1, "H2O": 0.4, "H2": 0.5}}, temperature)
    found = figures(shift(state))
    assert found["shift_equilibrium_temperature"][0] == pytest.approx(temperature)
    assert 0.0 < found["co_conversion"][0] < 1.0
