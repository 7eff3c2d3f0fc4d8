"""Carbon activity by element potential and by three reactions."""

from __future__ import annotations

from collections.abc import Mapping
from math import exp

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from practice.settled_from import Amounts, by_hand, figures, settle

from gibbsmin.practice.figures.carbon import CARBON_REACTIONS, carbon, carbon_by_reactions
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.practice.reactions.reactions import reaction
from gibbsmin.states.system import System

SYSTEM = System.from_elements("C H O N")


def reformed(temperature: float, steam: float) -> Settled:
    """Invented reformer gas with graphite held off."""
    feeds: Mapping[str, Amounts] = {"gas": {"CH4": 1.0, "N2": 0.05}, "steam": {"H2O": steam}}
    return settle(SYSTEM, feeds, temperature, 20e5)


def test_boudouard_worked_by_hand() -> None:
    """CO 0.30 and CO2 0.05 bar at 700 °C; log10 K = 0.018 between JANAF (1998) 0.750 at 900 and -1.052 at 1100 K."""
    log10_K = 0.750 + (1.0 / 900.0 - 1.0 / 973.15) / (1.0 / 900.0 - 1.0 / 1100.0) * (-1.052 - 0.750)
    found = carbon_by_reactions({"CO": 0.30, "CO2": 0.05}, 973.15, 1e5)
    assert found["co"][0] == pytest.approx(10.0**log10_K * 0.30**2 / 0.05, rel=0.04)
    assert np.isnan(found["ch4"][0])
    assert np.isnan(found["co_h2"][0])


def test_off_equilibrium_each_has_its_own() -> None:
    """Gas of 24 bar and 870 °C by K of JANAF (1998), interpolated by hand: 0.171, 0.216, 0.171; data differ by 1 %."""
    gas = {"H2": 0.4870, "H2O": 0.3301, "CO": 0.0942, "CO2": 0.0550, "CH4": 0.0302, "N2": 0.0035}
    found = carbon_by_reactions(gas, 1143.15, 24e5)
    assert [found[key][0] for key in CARBON_REACTIONS] == pytest.approx([0.171, 0.216, 0.171], rel=0.02)
    told = figures(carbon(by_hand(gas, {}, 1143.15, 24e5)))
    assert [told[f"carbon_activity_by_{key}"][0] for key in CARBON_REACTIONS] == pytest.approx(
        [found[key][0] for key in CARBON_REACTIONS]
    )
    assert "carbon_activity" not in told  # nobody knows the potential of a gas that is not at equilibrium


@given(st.floats(700.0, 1400.0), st.floats(0.3, 4.0))
def test_at_equilibrium_all_are_one(temperature: float, steam: float) -> None:
    state = reformed(temperature, steam)
    gas = {name: state.wet(name) for name in ("CO", "CO2", "CH4", "H2", "H2O")}
    activity = figures(carbon(state))
    assert list(activity) == ["carbon_activity"]
    for each in carbon_by_reactions(gas, state.temperature, state.pressure).values():
        assert each == pytest.approx(activity["carbon_activity"], rel=1e-5)


def test_graphite_that_is_there_has_activity_one() -> None:
    state = settle(System.from_elements("C H O", condensed=True), {"gas": {"CH4": 1.0, "H2O": 0.3}}, 1000.0, 1e5)
    assert state.amounts["C(s):graphite"][0] > 0.0
    assert figures(carbon(state))["carbon_activity"][0] == pytest.approx(1.0)


def test_pressure_moves_each_as_its_law_says() -> None:
    gas = {"CO": 0.2, "CO2": 0.1, "CH4": 0.1, "H2": 0.4, "H2O": 0.2}
    one, ten = (carbon_by_reactions(gas, 900.0, p) for p in (1e5, 1e6))
    assert ten["co"] == pytest.approx(10.0 * one["co"])
    assert ten["ch4"] == pytest.approx(one["ch4"] / 10.0)
    assert ten["co_h2"] == pytest.approx(10.0 * one["co_h2"])


def test_the_three_differ_by_reactions_between_gases() -> None:
    """K_B/K_R is the constant of the shift, so that their activities differ by its quotient over its constant."""
    gas = {"CO": 0.2, "CO2": 0.1, "H2": 0.4, "H2O": 0.3}
    found = carbon_by_reactions(gas, 800.0, 1e5)
    shift = exp(reaction("CO + H2O(g) = CO2 + H2").ln_k(800.0))
    assert found["co"][0] / found["co_h2"][0] == pytest.approx(shift * 0.2 * 0.3 / (0.1 * 0.4))


def test_no_carbon_no_activity() -> None:
    state = settle(System.from_elements("H O"), {"steam": {"H2O": 1.0}}, 1500.0)
    assert carbon(state) == []
