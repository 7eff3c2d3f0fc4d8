"""The coal gasifier, every number of its table recomputed outside (``fires_by_hand``), for a kilogram of dry coal."""

from __future__ import annotations

from collections.abc import Callable
from functools import cache
from pathlib import Path

import pytest
from shipped import fires_by_hand as hand
from shipped.conftest import Run
from shipped.gas_by_hand import BOUDOUARD, log_k
from shipped.variant import variant

BAR = 40.0
NAMES = [*hand.LEAN, *hand.RICH, "SO2"]
DRY = {"C": 75.0, "H": 5.0, "O": 8.0, "N": 1.5, "S": 1.0, "ash": 9.5}
ATOMS = hand.of_analysis(DRY)
WATER = 0.02 / 18.015e-3  # mol
STEAM = 0.10 / 18.015e-3
ASH = 0.095  # kg
HIGHER = hand.channiwala_parikh(DRY)
LOWER = HIGHER - hand.EVAPORATION * (0.05 / 2.016 * 18.015 + 0.02)
RATE = 100e3 / 3600.0  # kg a second
LOSS = 17.29e6 / RATE
# kJ/mol at 25 degC, higher and lower: CH4, CO, H2 of ISO 6976:1995; the rest from formation enthalpies (CODATA, CRC)
HEAT = {
    "CO": (282.98, 282.98), "H2": (285.83, 241.81), "CH4": (890.63, 802.60), "NH3": (382.8, 316.8),
    "HCN": (671.6, 649.6), "H2S": (562.0, 518.0), "COS": (548.2, 548.2),
}  # fmt: skip


@cache
def gasified(ratio: float) -> tuple[float, dict[str, float]]:
    """Temperature [K] and raw gas for ``ratio`` kg of oxygen of 99.5 % a kilogram."""
    oxygen = ratio / (0.995 * 31.998e-3 + 0.005 * 39.95e-3)
    feed = {"O2": 0.995 * oxygen, "Ar": 0.005 * oxygen}
    fed = hand.formation(ATOMS, HIGHER) + WATER * hand.FORMATION["H2O"] + hand.heat_content(feed, 393.15)
    fed += STEAM * hand.enthalpy("H2O", 573.15) - LOSS
    atoms = hand.plus(ATOMS, {"H": 2.0 * (WATER + STEAM), "O": WATER + STEAM}, hand.elements(feed))
    return hand.flame(atoms, NAMES, BAR, fed, ASH)


@pytest.fixture
def run(shipped: Callable[[str], Run]) -> Run:
    return shipped("coal_gasifier")


def each(run: Run) -> list[tuple[float, dict[str, object]]]:
    return [(round(state["inputs"]["feeds.oxygen.mass_ratio"], 6), state) for state in run.data["states"]]


def test_raw_gas(run: Run) -> None:
    assert len(each(run)) == 12
    for ratio, state in each(run):
        T, gas = gasified(ratio)
        assert state["temperature"] == pytest.approx(T, abs=2.0)
        x = hand.fractions(gas)
        for name in ("CO", "H2", "H2S"):
            assert state["mole_fractions"][name] == pytest.approx(x[name], rel=5e-3), name
        # small beside large ones, so that 2 K count; N2 is what HCN and NH3 leave
        for name in ("H2O", "CO2", "CH4", "N2"):
            assert state["mole_fractions"][name] == pytest.approx(x[name], rel=0.06, abs=1e-5), name


def test_key_figures(run: Run) -> None:
    for ratio, state in each(run):
        T, gas = gasified(ratio)
        found = dict(state["key_figures"]["gasification"])
        dry = {name: n for name, n in gas.items() if name != "H2O"}
        total = sum(dry.values())
        higher, lower = (1e3 * sum(HEAT[name][k] * dry[name] for name in HEAT) for k in (0, 1))
        sulfur = [1e3 * sum(HEAT[name][k] * dry[name] for name in ("H2S", "COS")) for k in (0, 1)]
        pure = ratio * 0.995 * 31.998 / (0.995 * 31.998 + 0.005 * 39.95)
        x = hand.fractions(gas)
        expected = {
            "gasification_air_ratio": pure / 31.998e-3 / hand.oxygen_need(ATOMS),
            "oxygen_per_fuel": pure,
            "gas_per_fuel": total * hand.NORMAL,
            "cold_gas_efficiency_higher": (higher - sulfur[0]) / HIGHER,
            "cold_gas_efficiency_lower": (lower - sulfur[1]) / LOWER,
            "raw_gas_higher": higher / total / hand.NORMAL,
            "raw_gas_lower": lower / total / hand.NORMAL,
            "carbon_conversion": 1.0,
            "h2_to_co": dry["H2"] / dry["CO"],
            "synthesis_gas_dry": (dry["CO"] + dry["H2"]) / total,
            "sulfur_dry": (dry["H2S"] + dry["COS"]) / total,
        }
        for name, value in expected.items():
            assert found.pop(name) == pytest.approx(value, rel=4e-3), name
        traces = {
            "co2_dry": dry["CO2"] / total,
            "ch4_dry": dry["CH4"] / total,
            "nitrogen_dry": (dry["NH3"] + dry["HCN"]) / total,
            "carbon_activity": 10.0 ** log_k(BOUDOUARD, T) * (x["CO"] * BAR) ** 2 / (x["CO2"] * BAR),
        }
        for name, value in traces.items():
            assert found.pop(name) == pytest.approx(value, rel=0.08), name
        assert not found


def test_soot_edge_and_the_rest_of_the_header(run: Run) -> None:
    at = dict(each(run))
    activity = {ratio: state["key_figures"]["gasification"]["carbon_activity"] for ratio, state in at.items()}
    assert activity[0.81] > 1.0 > activity[0.83]
    assert 0.5 < activity[0.82] < 2.0
    kelvin = (at[0.90]["temperature"] - at[0.84]["temperature"]) / 100.0 / (0.90 - 0.84) * 0.85
    assert 25.0 < kelvin < 40.0  # a per cent of oxygen
    efficiency = [state["key_figures"]["gasification"]["cold_gas_efficiency_higher"] for state in at.values()]
    assert efficiency == sorted(efficiency, reverse=True)
    for ratio in (0.85, 0.90):
        assert at[ratio]["key_figures"]["gasification"]["synthesis_gas_dry"] > 0.95
        assert at[ratio]["key_figures"]["gasification"]["ch4_dry"] < 1e-3
    assert "Carbon activity" in run.screen


def test_unconverted_carbon_as_the_header_says(tmp_path: Path) -> None:
    line = 'exclude = ["C(s):graphite"]      # its activity is shown'
    run = variant("coal_gasifier", tmp_path, (line, f"{line}\ncarbon_conversion = 99.5"))
    for state in run.data["states"]:
        assert state["key_figures"]["gasification"]["carbon_conversion"] == pytest.approx(0.995)
