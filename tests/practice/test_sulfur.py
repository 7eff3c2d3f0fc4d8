"""Sulfur recovery: ratios by hand, the dew point against the solver, published properties of sulfur vapour."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from settled_from import by_hand, figures, settle

from gibbsmin.practice.figures.sulfur import sulfur
from gibbsmin.practice.figures.sulfur_vapour import VAPOUR, saturation, sulfur_dew_temperature
from gibbsmin.states.system import System

SYSTEM = System.from_elements("H O N S")
FURNACE_GAS = {"H2S": 5.4, "SO2": 2.7, "H2O": 30.0, "N2": 50.0, "S2": 9.0}


def test_ratios_and_conversion_by_hand() -> None:
    """An invented gas: 10 H2S in; 1 H2S, 0.2 COS, 0.1 CS2, 1.2 SO2, 3 S2 and 0.05 S8 out: 2.6 and 6.4 atoms of S."""
    gas = {"H2S": 1.0, "COS": 0.2, "CS2": 0.1, "SO2": 1.2, "S2": 3.0, "S8": 0.05, "N2": 20.0}
    found = figures(sulfur(by_hand(gas, {"acid gas": {"H2S": 9.0}, "air": {"O2": 4.0, "N2": 20.0}})))
    assert found["h2s_to_so2"] == pytest.approx(1.0 / 1.2)
    assert found["sulfide_to_so2"] == pytest.approx(1.4 / 1.2)
    assert found["air_demand"] == pytest.approx(0.5 * (1.4 - 2.4) / 4.0)  # too much air
    assert found["conversion_to_sulfur"] == pytest.approx(6.4 / 9.0)
    assert found["sulfur_in_cos_and_cs2"] == pytest.approx(0.4 / 9.0)
    assert found["sulfur_vapour_as_s8"] == pytest.approx(0.4 / 6.4)
    assert found["atoms_in_sulfur_vapour"] == pytest.approx(6.4 / 3.05)
    assert found["h2s_wet"] == pytest.approx(1.0 / 25.55)


def test_sulfur_that_came_in_as_such_is_not_counted_as_made() -> None:
    found = figures(sulfur(by_hand({"H2S": 1.0, "S8": 0.5, "N2": 9.0}, {"gas": {"H2S": 3.0, "S8": 0.25, "N2": 9.0}})))
    assert found["conversion_to_sulfur"] == pytest.approx(2.0 / 3.0)


def test_the_air_demand_brings_the_ratio_to_two() -> None:
    """Adding the oxygen that it says, and settling again, must end at H2S = 2 SO2 as far as the balance is concerned.

    The balance 2 H2S + SO2 = 3 S + 2 H2O keeps H2S - 2 SO2, so that both runs agree exactly once hydrogen is nowhere.
    """
    small = System.from_species("H2S SO2 H2O N2 S2 S6 S8")
    acid, oxygen = {"H2S": 1.0}, 0.45
    first = figures(sulfur(settle(small, {"acid": acid, "air": {"O2": oxygen, "N2": 1.9}}, [600.0])))
    more = oxygen * (1.0 + float(first["air_demand"][0]))
    second = figures(sulfur(settle(small, {"acid": acid, "air": {"O2": more, "N2": 1.9}}, [600.0])))
    assert abs(first["sulfide_to_so2"][0] - 2.0) > 0.5
    assert second["sulfide_to_so2"] == pytest.approx(2.0, abs=1e-6)


def test_over_liquid_sulfur_the_dew_point_is_the_temperature() -> None:
    """Two ways: the solver's phase equilibrium, and the dew point of what it left in the gas."""
    settled = settle(SYSTEM, {"gas": FURNACE_GAS}, [400.0, 430.0, 500.0], 1.5e5)
    assert (settled.amount("S(l)") > 0.0).all()
    found = figures(sulfur(settled))
    assert sulfur_dew_temperature(settled) == pytest.approx(settled.temperature, abs=1e-6)
    assert found["sulfur_dew_margin"] == pytest.approx(0.0, abs=1e-6)
    whole = found["sulfur_condensed"] + found["sulfur_as_vapour"]
    assert found["sulfur_condensed_share"] == pytest.approx(found["sulfur_condensed"] / whole)


def test_a_gas_that_only_redistributes_drops_sulfur_at_its_dew_point() -> None:
    """Nitrogen and sulfur alone, cooled by the solver to either side of the dew point found at 900 K."""
    system = System.from_species(["N2", *VAPOUR, "S(l)", "S(s)"])
    feed = {"gas": {"N2": 1.0, "S2": 0.05}}
    hot = settle(system, feed, [900.0])
    dew = float(sulfur_dew_temperature(hot)[0])
    around = settle(system, feed, [dew - 0.01, dew + 0.01])
    assert around.amount("S(l)")[0] > 0.0
    assert around.amount("S(l)")[1] == 0.0


@settings(max_examples=15)
@given(st.floats(1e-5, 0.5), st.floats(1.01, 3.0))
def test_more_sulfur_or_pressure_raises_the_dew_point(amount: float, factor: float) -> None:
    def dew(sulfur_amount: float, pressure: float) -> float:
        return float(sulfur_dew_temperature(by_hand({"N2": 1.0, "S8": sulfur_amount}, {}, 900.0, pressure))[0])

    assert dew(factor * amount, 1e5) > dew(amount, 1e5)
    assert dew(amount, factor * 1e5) > dew(amount, 1e5)


def test_pure_sulfur_vapour_condenses_at_the_boiling_point() -> None:
    """444.6 degC at 101325 Pa: CRC Handbook of Chemistry and Physics (from memory)."""
    pure = by_hand({"S8": 1.0}, {}, 900.0, 101325.0)
    assert sulfur_dew_temperature(pure) == pytest.approx(444.6 + 273.15, abs=1.5)


# mmHg at K: D. R. Stull, Ind. Eng. Chem. 39 (1947) 540, as handbooks reprint it (from memory).
@pytest.mark.parametrize(("mmHg", "kelvin"), [(1.0, 457.0), (10.0, 517.0), (100.0, 600.3)])
def test_vapour_pressure_of_sulfur(mmHg: float, kelvin: float) -> None:
    pure = by_hand({"S8": 1.0}, {}, 900.0, mmHg * 101325.0 / 760.0)
    assert sulfur_dew_temperature(pure) == pytest.approx(kelvin, abs=4.0)


def test_shares_of_the_vapour_sum_to_one() -> None:
    found = figures(sulfur(settle(SYSTEM, {"gas": FURNACE_GAS}, [700.0, 1000.0, 1400.0])))
    shares = [value for name, value in found.items() if name.startswith("sulfur_vapour_as_")]
    assert "sulfur_vapour_as_s" not in found  # at most 0.003 % of the sulfur, and so left out
    assert len(shares) == len(VAPOUR) - 1
    assert sum(shares) == pytest.approx(1.0, abs=1e-4)
    assert (np.diff(found["atoms_in_sulfur_vapour"]) < 0.0).all()  # heat breaks S8 to S2


def test_pressures_over_sulfur_are_those_of_the_solver() -> None:
    settled = settle(SYSTEM, {"gas": FURNACE_GAS}, [430.0], 1.5e5)
    over = saturation(settled, settled.temperature)
    for name in ("S2", "S6", "S8"):
        assert over[name] == pytest.approx(settled.pressure * settled.wet(name), rel=1e-8)


def test_what_is_not_there_is_not_reported() -> None:
    """No oxygen is fed to a catalytic stage, and a furnace condenses nothing."""
    stage = figures(sulfur(by_hand({"H2S": 1.0, "S8": 1.0, "N2": 9.0}, {"gas": {"H2S": 9.0, "N2": 9.0}})))
    furnace = figures(sulfur(by_hand({"H2S": 1.0, "S2": 1.0}, {"gas": {"H2S": 3.0}, "air": {"O2": 1.2, "N2": 4.0}})))
    assert "o2_to_h2s_fed" not in stage
    assert furnace["o2_to_h2s_fed"] == pytest.approx(0.4)
    assert "sulfur_condensed" not in furnace
    assert "sulfur_condensed_share" not in furnace


def test_ammonia_left() -> None:
    found = figures(sulfur(by_hand({"H2S": 1.0, "NH3": 0.01, "N2": 1.0}, {"gas": {"H2S": 1.0, "NH3": 0.5}})))
    assert found["ammonia_left"] == pytest.approx(0.02)


def test_a_gas_without_sulfur_has_no_numbers_of_it() -> None:
    found = figures(sulfur(by_hand({"N2": 1.0, "S2": 0.0}, {"gas": {"N2": 1.0}})))
    assert not any("dew" in name or "conversion" in name or "vapour_as" in name for name in found)
