"""The gas-fired boiler, every number of its table recomputed outside (see ``fires_by_hand``).

Cantera on NASA's collection finds flame and frozen gas; volumes, emissions, dew points and losses are arithmetic on
them. The data of the project are newer for NO, OH and H2O, which is 1 K and 1 % at these flames.
"""

from __future__ import annotations

from collections.abc import Callable
from functools import cache
from pathlib import Path

import pytest
from scipy.optimize import brentq
from shipped import fires_by_hand as hand
from shipped.conftest import Run
from shipped.variant import variant

BAR = 1.01325
FROZEN, STACK, REFERENCE = 1273.15, 413.15, 288.15
FUEL = {"CH4": 92.0, "C2H6": 4.0, "C3H8": 1.0, "N2": 2.2, "CO2": 0.8}  # 100 mol
RATE = 989.0 / 3600.0 / hand.NORMAL / 100.0  # of them a second
# 15 degC and 60 %: 0.6 x 1705.7 Pa (IAPWS) in 101325 Pa
MOISTURE = 0.6 * 1705.7 / 101325.0
# kJ/mol at 25 degC: ISO 6976:1995 (from memory), CH4, C2H6, C3H8; 2, 3 and 4 mol of water at 44.016 kJ/mol
HIGHER = 1e3 * (92.0 * 890.63 + 4.0 * 1560.69 + 1.0 * 2219.17)
LOWER = HIGHER - 44.016e3 * (92.0 * 2 + 4.0 * 3 + 1.0 * 4)


@cache
def burnt() -> tuple[dict[str, float], dict[str, float]]:
    """Air and frozen gas for 100 mol of fuel, the air such that 3 % O2 is left."""

    def gas(air: dict[str, float]) -> dict[str, float]:
        return hand.settle(hand.elements(hand.plus(FUEL, air)), hand.LEAN, FROZEN, BAR)

    def off(oxygen: float) -> float:
        return hand.dry(gas(hand.air(oxygen, MOISTURE)), "O2") - 0.03

    air = hand.air(brentq(off, 205.0, 260.0, xtol=1e-8), MOISTURE)
    return air, gas(air)


@cache
def flame(ratio: float, preheat: float) -> tuple[float, dict[str, float]]:
    """Flame [K] and its gas where the frozen gas, ``ratio`` times, comes back at 140 degC."""
    air, gas = burnt()
    fed = hand.heat_content(FUEL, 288.15) + hand.heat_content(air, preheat + 273.15)
    fed += ratio * hand.heat_content(gas, 413.15)
    atoms = hand.times(1.0 + ratio, hand.elements(hand.plus(FUEL, air)))
    return hand.flame(atoms, hand.LEAN, BAR, fed)


@pytest.fixture
def run(shipped: Callable[[str], Run]) -> Run:
    return shipped("gas_boiler")


def each(run: Run) -> list[tuple[float, float, dict[str, object]]]:
    """Recirculation, preheat in degC, and the state."""
    keys = ("feeds.recirculated.recirculation_ratio", "feeds.air.temperature")
    return [(*(state["inputs"][key] for key in keys), state) for state in run.data["states"]]


def test_flames(run: Run) -> None:
    assert len(each(run)) == 14
    for ratio, preheat, state in each(run):
        T, gas = flame(ratio, round(preheat, 6))
        assert state["temperature"] == pytest.approx(T, abs=1.0)
        x = hand.fractions(gas)
        for name in ("N2", "H2O", "CO2", "O2"):
            assert state["mole_fractions"][name] == pytest.approx(x[name], rel=2e-3), name
        for name in ("NO", "CO", "OH", "H2"):
            assert state["mole_fractions"][name] == pytest.approx(x[name], rel=0.03), name


def test_flue_gas(run: Run) -> None:
    """Losses by enthalpies of NASA; Siegert's formula of 1. BImSchV, from memory: A 0.66, B 0.009."""
    air, gas = burnt()
    expected = hand.flue_gas(
        hand.elements(FUEL), 100.0 * hand.NORMAL, LOWER, HIGHER, air, gas, BAR * 1e5, reference=3.0
    )
    expected |= {
        "fuel_heat": LOWER * RATE,
        "reference_oxygen": 0.03,
        "stack_temperature": STACK,
        "water_condensed": 0.0,
    }
    q = hand.stack_loss(gas, STACK, REFERENCE) / LOWER
    expected["loss_flue_gas"], expected["efficiency_lower"] = q, 1.0 - q
    expected["efficiency_higher"] = (1.0 - q) * LOWER / HIGHER
    expected["loss_unburnt_gas"] = (gas["CO"] * 282.98e3 + gas["H2"] * 241.82e3) / LOWER
    expected["loss_siegert"] = (140.0 - 15.0) * (0.66 / (21.0 - 3.0) + 0.009) / 100.0
    for ratio, preheat, state in each(run):
        flame_gas = hand.fractions(flame(ratio, round(preheat, 6))[1])
        oxidant = sum(air.values()) + ratio * sum(gas.values())
        own = {"no_settled": flame_gas["NO"], "co_settled": flame_gas["CO"]}
        own["oxidant_oxygen_mixed"] = (air["O2"] + ratio * gas["O2"]) / oxidant
        hand.agree(state["key_figures"]["flue gas"], {**expected, **own}, rel=2e-3, traces=0.03)


def test_air_for_complete_combustion_worked_by_hand(run: Run) -> None:
    """2 CH4 + 3.5 C2H6 + 5 C3H8: 2.03 mol O2 a mole of fuel, 9.69 Nm3 of air of 20.95 %."""
    found = run.state()["key_figures"]["flue gas"]
    assert found["air_needed"] == pytest.approx(2.03 / 0.2095, rel=1e-9)
    # CO2 1.038 + N2 0.022 + 2.03 x 79.05/20.95 in the dry gas without excess
    dry = 1.038 + 0.022 + 2.03 * 79.05 / 20.95
    assert found["carbon_dioxide_most"] == pytest.approx((0.92 + 0.08 + 0.03 + 0.008) / dry, rel=1e-9)
    assert found["air_ratio_by_oxygen"] == pytest.approx(1.0 + dry / 9.6897 * 3.0 / (20.95 - 3.0), rel=1e-4)


def test_lost_work(run: Run) -> None:
    """288.15 K times the entropy of what leaves less that of what is fed, by NASA's entropies."""
    air, back = burnt()
    for ratio, preheat, state in each(run):
        T, gas = flame(ratio, round(preheat, 6))
        fed = hand.total_entropy(FUEL, 288.15, BAR) + hand.total_entropy(air, preheat + 273.15, BAR)
        if ratio:
            fed += hand.total_entropy(hand.times(ratio, back), 413.15, BAR)
        made = RATE * (hand.total_entropy(gas, T, BAR) - fed)
        assert state["audit"]["lost_work"] == pytest.approx(288.15 * made, rel=3e-3)


def test_what_the_header_promises(run: Run, tmp_path: Path) -> None:
    T = {(ratio, round(preheat)): state["temperature"] for ratio, preheat, state in each(run)}
    off = T[0.0, 15] - T[0.15, 15]
    assert 170.0 < off < 195.0
    assert 0.6 < (T[0.15, 250] - T[0.15, 15]) / off < 0.75
    for ratio in (0.0, 0.15):
        NO = [state["mole_fractions"]["NO"] for r, _, state in each(run) if r == ratio]
        assert sorted(NO) == NO
    assert run.figure("flue gas", "co_dry") < 1e-7
    cool = variant("gas_boiler", tmp_path, ('stack_temperature = "140 degC"', 'stack_temperature = "45 degC"'))
    figures = cool.state()["key_figures"]["flue gas"]
    assert figures["water_condensed"] > 0.3
    assert figures["efficiency_lower"] > 1.0


def test_air_varied_instead(tmp_path: Path) -> None:
    """Every per cent of O2 costs 0.3 % of the fuel; below 1 % CO of the flame grows fast."""
    run = variant(
        "gas_boiler",
        tmp_path,
        ('"feeds.air.temperature"', '"feeds.air.flue_gas_oxygen_percent"'),
        ('["15 degC", "100 degC", "150 degC", "200 degC", "250 degC", "300 degC", "400 degC"]', "[0.5, 1, 2, 3, 5, 8]"),
    )
    states = [state for state in run.data["states"] if state["inputs"]["feeds.recirculated.recirculation_ratio"] == 0.0]
    loss = [state["key_figures"]["flue gas"]["loss_flue_gas"] for state in states]
    assert 0.0025 < (loss[-1] - loss[0]) / 7.5 < 0.0035
    CO = [state["mole_fractions"]["CO"] for state in states]
    NO = [state["mole_fractions"]["NO"] for state in states]
    assert CO[0] > 2.0 * CO[3]
    assert NO[0] < NO[3]
