"""The methanation bed, every number of its table recomputed from the NIST-JANAF tables (see ``gas_by_hand``).

JANAF's CH4 is 0.3 kJ/mol more stable at 25 °C than that of newer tables, so its gas is a little further converted.
"""

from __future__ import annotations

from collections.abc import Callable
from itertools import pairwise
from pathlib import Path

import pytest
from scipy.optimize import brentq
from shipped import gas_by_hand as hand
from shipped.conftest import Run
from shipped.variant import variant, without_sweep

FLOW = 1000.0 / 3600.0 / hand.NORMAL  # 1000 Nm3/h in mol/s
FED = {"CO2": 0.2 * FLOW, "H2": 0.8 * FLOW}
INLET, BAR = 573.15, 20.0
GROSS = {"CH4": 890.63, "H2": 285.83, "CO": 282.98}  # kJ/mol at 25 °C, ISO 6976:1995 (from memory)
WATER_MADE = {"CH4": 2.0, "H2": 1.0}
LATENT = 44.01  # kJ/mol at 25 °C, IAPWS (from memory)
FACTOR = {"CH4": 0.0490, "H2": -0.004, "CO": 0.0265, "CO2": 0.0819}  # √b at 0 °C, ISO 6976:1995 (from memory)


@pytest.fixture
def run(shipped: Callable[[str], Run]) -> Run:
    return shipped("methanation")


def settled(run: Run, index: int) -> dict[str, float]:
    return hand.reformed(FED, run.state(index)["temperature"], BAR)


@pytest.mark.parametrize("index", range(23))
def test_gas_and_heat(index: int, run: Run) -> None:
    """CO, CO2 and H2 are small differences where nearly all is converted: 4 % there, as the constant differs."""
    state, gas = run.state(index), settled(run, index)
    for name, x in hand.fractions(gas).items():
        assert state["mole_fractions"][name] == pytest.approx(x, rel=0.01 if x > 0.2 else 0.04), name
    heat = hand.total_enthalpy(gas, state["temperature"]) - hand.total_enthalpy(FED, INLET)
    assert state["heat"] == pytest.approx(heat, abs=5e3)  # of some 300 kW


@pytest.mark.parametrize("index", range(0, 23, 2))
def test_numbers_of_the_trade(index: int, run: Run) -> None:
    gas, T = settled(run, index), run.state(index)["temperature"]
    assert run.figure("methanation", "feed_factor", index) == pytest.approx(1.0)
    expected = {
        "ch4_dry": (hand.dry(gas, "CH4"), 0.02),
        "h2_dry": (hand.dry(gas, "H2"), 0.02),
        "oxides_left": (hand.dry(gas, "CO", "CO2"), 0.03),
        "co_left": (hand.dry(gas, "CO"), 0.04),
        "oxides_conversion": (1.0 - (gas["CO"] + gas["CO2"]) / FED["CO2"], 0.01),
        "methanation_equilibrium_temperature": (T, 1e-9),
    }
    for name, (value, rel) in expected.items():
        assert run.figure("methanation", name, index) == pytest.approx(value, rel=rel), name
    assert run.figure("methanation", "methanation_approach", index) == 0.0
    carbon = hand.log_k(hand.CRACKING, T) - hand.log_q(hand.CRACKING, hand.fractions(gas), BAR)
    assert run.figure("methanation", "carbon_activity", index) == pytest.approx(10.0**carbon, rel=0.05)


@pytest.mark.parametrize("index", [0, 8, 22])
def test_worth_as_a_fuel_by_iso_6976(index: int, run: Run) -> None:
    """Burned at 25 °C, metered at 0 °C and 101325 Pa, from the gas as filed; editions differ by 0.1 %."""
    wet = run.state(index)["mole_fractions"]
    x = {name: wet[name] / (1.0 - wet["H2O"]) for name in FACTOR}
    gross = 1e3 * sum(x[name] * value for name, value in GROSS.items())
    net = gross - 1e3 * LATENT * sum(count * x[name] for name, count in WATER_MADE.items())
    Z = 1.0 - sum(x[name] * s for name, s in FACTOR.items()) ** 2
    volume, mass = hand.NORMAL * Z, hand.mean_molar_mass(x)
    density = mass / 0.0289626 * 0.99941 / Z  # of air 0.99941
    expected = {
        "heating_value_superior": gross / volume,
        "heating_value_inferior": net / volume,
        "heating_value_superior_mass": gross / mass,
        "heating_value_inferior_mass": net / mass,
        "relative_density": density,
        "compression_factor": Z,
        "density_at_metering": mass / volume,
        "wobbe_superior": gross / volume / density**0.5,
        "wobbe_inferior": net / volume / density**0.5,
    }
    for name, value in expected.items():
        assert run.figure("methanation", name, index) == pytest.approx(value, rel=2e-3), name


def zero_heat(run: Run) -> float:
    """Temperature at which the heat changes sign, °C, between two states."""
    states = run.data["states"]
    for before, after in pairwise(states):
        if before["heat"] < 0.0 <= after["heat"]:
            part = before["heat"] / (before["heat"] - after["heat"])
            return float(before["temperature"] + part * (after["temperature"] - before["temperature"]) - 273.15)
    raise AssertionError("the heat does not change sign")


def test_a_bed_that_is_not_cooled(run: Run) -> None:
    """1 K for the straight line between two states; 1 K for the data of CH4."""
    came = hand.total_enthalpy(FED, INLET)
    T = hand.adiabatic(lambda T: hand.reformed(FED, T, BAR), came, 700.0, 1300.0)
    assert zero_heat(run) == pytest.approx(T - 273.15, abs=2.0)
    assert zero_heat(run) == pytest.approx(770.0, abs=5.0)  # as the comment says


def test_a_recycle_of_two_as_the_comment_says(tmp_path: Path) -> None:
    """(1 + r) H(T) = H of fresh gas + r H of the same gas, cooled to the inlet with its composition."""
    text = (
        '# [feeds.recycle]\n# composition = "flue gas"\n'
        "# recirculation_ratio = 2.0      # over the product that leaves for good\n"
        '# temperature = "300 degC"'
    )
    run = variant("methanation", tmp_path, (text, text.replace("# ", "").replace("0      over", "0  # over")))

    def off(T: float) -> float:
        gas = hand.reformed(FED, T, BAR)
        warming = hand.total_enthalpy(gas, T) - hand.total_enthalpy(gas, INLET)
        return hand.total_enthalpy(gas, T) - hand.total_enthalpy(FED, INLET) + 2.0 * warming

    T = brentq(off, 700.0, 1100.0)
    assert zero_heat(run) == pytest.approx(T - 273.15, abs=2.0)
    assert zero_heat(run) == pytest.approx(614.0, abs=2.0)


@pytest.mark.parametrize(("hydrogen", "low", "high"), [(3.0, 0.84, 0.88), (2.5, 1.05, 1.3)])
def test_carbon_with_less_hydrogen_as_the_comment_says(
    hydrogen: float, low: float, high: float, tmp_path: Path
) -> None:
    dioxide = 100.0 / (1.0 + hydrogen)
    composition = ("{ CO2 = 20.0, H2 = 80.0 }", f"{{ CO2 = {dioxide}, H2 = {100.0 - dioxide} }}")
    lean = variant("methanation", tmp_path, without_sweep("methanation"), composition)
    assert low < lean.figure("methanation", "carbon_activity") < high
    gas = hand.reformed({"CO2": dioxide, "H2": 100.0 - dioxide}, INLET, BAR)
    by_hand = hand.log_k(hand.CRACKING, INLET) - hand.log_q(hand.CRACKING, hand.fractions(gas), BAR)
    assert lean.figure("methanation", "carbon_activity") == pytest.approx(10.0**by_hand, rel=0.05)


def test_a_cold_last_bed_makes_grid_gas_and_a_hot_one_hydrogen(run: Run) -> None:
    cold, hot = run.state(0)["mole_fractions"], run.state(16)["mole_fractions"]  # 250 and 650 °C
    assert run.figure("methanation", "ch4_dry", 1) > 0.94
    assert run.figure("methanation", "h2_dry", 1) < 0.05
    assert hot["H2"] > hot["CH4"]
    assert cold["H2"] < cold["CH4"]
    assert all(run.figure("methanation", "carbon_activity", i) < 0.6 for i in range(23))
