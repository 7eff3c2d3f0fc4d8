"""Numbers of gasifiers against arithmetic by hand."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from practice.settled_from import Amounts, by_hand, feed_facts, figures, settle

from gibbsmin.practice.feeds.heating import heating_value
from gibbsmin.practice.figures.gasification import gasification
from gibbsmin.practice.figures.settled import FeedFacts, Settled
from gibbsmin.states.system import System
from gibbsmin.thermo.database import load

# An invented coal, mass % dry: C 75, H 5, O 8, N 1.5, S 1, ash 9.5; one kilogram of it and 0.08 kg of water.
ATOMS = {"C": 750.0 / 12.011, "H": 50.0 / 1.008, "O": 80.0 / 15.999, "N": 15.0 / 14.007, "S": 10.0 / 32.06}
WATER = 0.08 / 0.018015
HIGHER, LOWER = 31.124e6, 29.84e6

SYSTEM = System.from_elements("C H O", condensed=True)


def coal(higher: float | None = HIGHER, lower: float | None = LOWER) -> FeedFacts:
    """Take the coal with its moisture, as a feed by analysis."""
    elements = {symbol: np.array([n]) for symbol, n in ATOMS.items()}
    elements["H"], elements["O"] = elements["H"] + 2.0 * WATER, elements["O"] + WATER
    heats = [None if value is None else np.array([value]) for value in (higher, lower)]
    return FeedFacts({"H2O(l)": np.array([WATER])}, elements, np.array([1.08]), *heats, by_analysis=True)


def with_heats(amounts: Amounts) -> FeedFacts:
    """Make a feed of one state with its own heating values."""
    facts = feed_facts(amounts, 1)
    value = heating_value([load().get(name) for name in amounts], [n[0] for n in facts.amounts.values()])
    return replace(facts, higher=np.array([value.higher]), lower=np.array([value.lower]))


def gasified(gas: Amounts, fuel: FeedFacts, **others: Amounts) -> Settled:
    """Put an invented raw gas beside what it was made of."""
    feeds = {"fuel": fuel, **{name: with_heats(amounts) for name, amounts in others.items()}}
    return replace(by_hand(gas, {}, 1700.0, 40e5), feeds=feeds)


# All carbon of the coal in the gas; 2 H2 + CO + CH4 hold it, the rest is water and sulfur.
GAS = {"CO": 55.0, "H2": 24.0, "CO2": 5.0, "CH4": ATOMS["C"] - 60.2, "COS": 0.2, "H2S": 0.112, "N2": 0.5, "H2O": 4.0}


def test_coal_by_hand() -> None:
    """O2 need of the coal: C + H/4 + S - O/2 = 72.66 mol/kg, moisture without effect."""
    found = figures(gasification(gasified(GAS, coal(), oxygen={"O2": 26.0, "Ar": 0.13})))
    dry = sum(GAS.values()) - 4.0
    need = ATOMS["C"] + ATOMS["H"] / 4.0 + ATOMS["S"] - ATOMS["O"] / 2.0
    assert need == pytest.approx(72.655, abs=0.01)
    assert found["gasification_air_ratio"][0] == pytest.approx(26.0 / need)
    assert found["oxygen_per_fuel"][0] == pytest.approx(26.0 * 0.031998)
    assert found["gas_per_fuel"][0] == pytest.approx(0.022414 * dry, rel=1e-5)  # Nm3
    assert found["carbon_conversion"][0] == pytest.approx(1.0)
    assert found["h2_to_co"][0] == pytest.approx(24.0 / 55.0)
    assert found["synthesis_gas_dry"][0] == pytest.approx(79.0 / dry)
    assert found["ch4_dry"][0] == pytest.approx(GAS["CH4"] / dry)
    assert found["sulfur_dry"][0] == pytest.approx(0.312 / dry)
    assert "nitrogen_dry" not in found  # neither NH3 nor HCN can form in this gas


def test_cold_gas_efficiency_by_printed_heats() -> None:
    """ISO 6976 (from memory), kJ/mol: CO 282.98, H2 285.83 and 241.81, CH4 890.58 and 802.55; sulfur does not count."""
    found = figures(gasification(gasified(GAS, coal(), oxygen={"O2": 26.0})))
    higher = 1e3 * (55.0 * 282.98 + 24.0 * 285.83 + GAS["CH4"] * 890.58)
    lower = 1e3 * (55.0 * 282.98 + 24.0 * 241.81 + GAS["CH4"] * 802.55)
    assert found["cold_gas_efficiency_higher"][0] == pytest.approx(higher / HIGHER, rel=5e-4)
    assert found["cold_gas_efficiency_lower"][0] == pytest.approx(lower / LOWER, rel=5e-4)
    sulfur = 1e3 * (0.112 * 518.0 + 0.2 * 548.2)  # lower, H2S and COS, CRC Handbook (from memory)
    per_volume = (lower + sulfur) / (sum(GAS.values()) - 4.0) / 0.022414  # J/Nm3
    assert found["raw_gas_lower"][0] == pytest.approx(per_volume, rel=5e-4)


def test_carbon_monoxide_from_carbon() -> None:
    """C + 1/2 O2 = CO keeps 282.98 of 393.51 kJ: 71.9 %, whichever heating value (textbooks)."""
    fuel = with_heats({"C(s):graphite": 1.0})
    found = figures(gasification(gasified({"CO": 1.0}, fuel, oxygen={"O2": 0.5})))
    assert found["cold_gas_efficiency_lower"][0] == pytest.approx(282.98 / 393.51, rel=1e-3)
    assert found["cold_gas_efficiency_higher"][0] == pytest.approx(found["cold_gas_efficiency_lower"][0])
    assert found["gasification_air_ratio"][0] == pytest.approx(0.5)


def test_char_that_is_left() -> None:
    state = gasified({"CO": 0.7, "CO2": 0.1, "C(s):graphite": 0.2}, with_heats({"C(s):graphite": 1.0}))
    assert figures(gasification(state))["carbon_conversion"][0] == pytest.approx(0.8)


def test_carbon_dioxide_that_carries_the_coal_is_not_converted_coal() -> None:
    """Of 1 mol C a half reacts, with 0.5 mol CO2 of the carrier gas: C + CO2 = 2 CO."""
    fuel = with_heats({"C(s):graphite": 1.0})
    state = gasified({"CO": 1.0, "CO2": 0.3, "C(s):graphite": 0.5}, fuel, carrier={"CO2": 0.8})
    assert figures(gasification(state))["carbon_conversion"][0] == pytest.approx(0.5)


def test_steam_and_moisture_are_no_fuel() -> None:
    """Vapour of the feeds has a higher heating value by its condensation, which does not count as fuel."""
    plain = figures(gasification(gasified(GAS, coal(), oxygen={"O2": 26.0})))
    steam = figures(gasification(gasified(GAS, coal(), oxygen={"O2": 26.0}, steam={"H2O": 8.0})))
    assert steam == {name: pytest.approx(value, nan_ok=True) for name, value in plain.items()}


def test_fuel_without_known_heating_value() -> None:
    found = figures(gasification(gasified(GAS, coal(None, None), oxygen={"O2": 26.0})))
    assert "cold_gas_efficiency_lower" not in found
    assert found["raw_gas_lower"][0] > 0.0
    assert found["carbon_conversion"][0] == pytest.approx(1.0)


def test_steam_alone_gasifies_without_air_ratio() -> None:
    found = figures(gasification(gasified({"CO": 1.0, "H2": 1.0}, with_heats({"C(s):graphite": 1.0}), w={"H2O": 1.0})))
    assert "gasification_air_ratio" not in found
    assert "oxygen_per_fuel" not in found
    assert found["cold_gas_efficiency_lower"][0] == pytest.approx((282.98 + 241.81) / 393.51, rel=1e-3)


@settings(max_examples=30)
@given(st.floats(1000.0, 1800.0), st.floats(0.5, 0.9), st.floats(1e5, 40e5))
def test_energy_that_is_not_in_the_gas_is_heat(temperature: float, oxygen: float, pressure: float) -> None:
    """Heat of burning the fuel is that of the gas, that of the soot and that of gasifying, at 25 degC, H2O a gas."""
    fuel: Amounts = {"CH4": 1.0}
    feeds = {"fuel": fuel, "oxygen": {"O2": oxygen}}
    state = settle(SYSTEM, feeds, temperature, pressure)
    state = replace(state, feeds={name: with_heats(amounts) for name, amounts in feeds.items()})
    found = figures(gasification(state))
    formation = sum(record.standard_enthalpy * state.amounts[name][0] for name, record in state.records.items())
    released = load().get("CH4").standard_enthalpy - formation
    soot = -load().get("CO2").standard_enthalpy * state.amounts["C(s):graphite"][0]
    lower = 1e3 * 802.55  # CH4, ISO 6976 (from memory)
    assert found["cold_gas_efficiency_lower"][0] * lower == pytest.approx(lower - released - soot, abs=300.0)
