"""Losses and efficiency: limits that are known, hand balances, and Siegert's formula beside them."""

from __future__ import annotations

import numpy as np
import pytest
from fired import methane
from hypothesis import given
from hypothesis import strategies as st
from settled_from import figures

from gibbsmin.errors import InputError
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.practice.flue_gas.flue_gas import FlueGasSetting, flue_gas
from gibbsmin.practice.flue_gas.losses import condensed_share, siegert

LOWER = 802.6e3  # of CH4 at 25 °C [J/mol], and the higher one: ISO 6976 (1995): 890.63
HIGHER = 890.6e3


def lost(fire: Settled, celsius: float, **setting: object) -> dict[str, float]:
    """Key figures with the stack at ``celsius``."""
    chosen = FlueGasSetting(stack_temperature=celsius + 273.15, **setting)
    return {name: float(value[0]) for name, value in figures(flue_gas(fire, chosen, fire)).items()}


@pytest.mark.parametrize(
    ("fuel", "stack", "oxygen", "percent"),
    [("natural gas", 150.0, 0.03, 5.94), ("light oil", 180.0, 0.035, 7.34)],
)
def test_siegert_worked_by_hand(fuel: str, stack: float, oxygen: float, percent: float) -> None:
    """(150 - 20) (0.66/(21 - 3) + 0.009); (180 - 20) (0.68/(21 - 3.5) + 0.007): 1. BImSchV, annex, from memory."""
    found = siegert(fuel, np.array([stack + 273.15]), 293.15, np.array([oxygen]))
    assert 100.0 * float(found[0]) == pytest.approx(percent, abs=0.006)


@given(st.floats(80.0, 250.0), st.floats(1.05, 1.5))
def test_own_balance_lies_by_siegert(stack: float, air_ratio: float) -> None:
    found = lost(methane(air_ratio), stack, reference_temperature=293.15, siegert="natural gas")
    assert found["loss_flue_gas"] == pytest.approx(found["loss_siegert"], abs=0.004)


def test_heat_of_carbon_monoxide() -> None:
    """283.0 kJ/mol of CO (CODATA key values 1989: 393.51 - 110.53), 0.01 mol in the gas of 1 mol of CH4."""
    found = lost(methane(traces={"CO": 0.01}), 150.0)
    assert found["loss_unburnt_gas"] == pytest.approx(0.01 * 282.98e3 / LOWER, rel=1e-3)
    assert "loss_unburnt_carbon" not in found  # nothing solid is there


def test_unburnt_carbon_and_hot_ash() -> None:
    """393.51 kJ/mol of graphite (CODATA); quartz has 0.74 kJ/kg/K at 25 and 0.98 at 200 °C (from memory)."""
    found = lost(methane(traces={"C(s):graphite": 0.02, "SiO2(s)": 1.0}), 200.0)
    assert found["loss_unburnt_carbon"] == pytest.approx(0.02 * 393.51e3 / LOWER, rel=1e-3)
    graphite = 0.02 * 12.011e-3 * 0.9e3 * 175.0 / LOWER
    assert 0.74 < (found["loss_ash"] - graphite) * LOWER / (0.06008e3 * 175.0) < 0.98


def test_a_stack_at_the_reference_loses_what_does_not_condense() -> None:
    """At 25 °C: the vapour that stays (3169.8 Pa) keeps its latent heat of 2441.7 kJ/kg, IAPWS-95."""
    fire = methane()
    found = lost(fire, 25.0)
    vapour = float(fire.dry_gas[0]) * 3169.8 / (101325.0 - 3169.8)
    assert found["water_condensed"] == pytest.approx(1.0 - vapour / 2.0, abs=1e-5)
    assert 1.0 - found["efficiency_higher"] == pytest.approx(vapour * 18.015e-3 * 2441.7e3 / HIGHER, rel=2e-3)
    assert found["efficiency_lower"] > 1.0


@given(st.floats(25.0, 300.0), st.floats(1.01, 3.0), st.floats(0.0, 0.05))
def test_efficiency_on_higher_value_stays_below_one(stack: float, air_ratio: float, wall: float) -> None:
    found = lost(methane(air_ratio), stack, wall_loss=wall)
    assert found["efficiency_higher"] < 1.0
    assert found["efficiency_lower"] / found["efficiency_higher"] == pytest.approx(HIGHER / LOWER, rel=1e-4)
    losses = ("loss_flue_gas", "loss_unburnt_gas", "loss_unburnt_carbon", "loss_ash", "loss_wall")
    assert found["efficiency_lower"] + sum(found.get(name, 0.0) for name in losses) == pytest.approx(1.0)


@given(st.floats(26.0, 299.0))
def test_a_hotter_stack_loses_more(stack: float) -> None:
    fire = methane()
    assert lost(fire, stack + 1.0)["loss_flue_gas"] > lost(fire, stack)["loss_flue_gas"]


def test_condensation_begins_at_the_dew_point() -> None:
    """12.335 mol dry, 2 mol of water, 1 atm: 52.6 °C; at 40 °C vapour holds 7384.9 Pa (IAPWS)."""
    gas, vapour = np.array([12.335] * 4), np.array([2.0] * 4)
    T = np.array([40.0, 52.3, 53.0, 500.0]) + 273.15
    found = condensed_share(gas, vapour, T, np.full(4, 101325.0))
    assert found[0] == pytest.approx(1.0 - 12.335 * 7384.9 / (101325.0 - 7384.9) / 2.0, abs=1e-4)
    assert found[1] > 0.0
    assert found[2:].tolist() == [0.0, 0.0]


def test_siegert_is_silent_for_a_wet_stack_and_refuses_another_fuel() -> None:
    assert np.isnan(lost(methane(), 40.0, siegert="natural gas")["loss_siegert"])
    with pytest.raises(InputError, match=r"no coefficients of Siegert's formula for 'wood'; known are natural gas"):
        siegert("wood", np.array([400.0]), 300.0, np.array([0.05]))
