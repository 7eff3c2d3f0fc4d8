"""The two shift beds, every number of their tables recomputed from the NIST-JANAF tables (see ``gas_by_hand``).

CH4 and N2 pass through, so that one bisection for CO2 and one for the temperature are all.
"""

from __future__ import annotations

from collections.abc import Callable
from functools import cache
from math import exp, log

import pytest
from scipy.optimize import brentq
from shipped import gas_by_hand as hand
from shipped.conftest import Run

FLOW = 571e3 / 3600.0  # mol/s
BEDS = {
    "shift_converter": (23.0, {"H2": 48.76, "H2O": 33.04, "CO": 9.42, "CO2": 5.48, "CH4": 2.96, "N2": 0.34}),
    "shift_converter_cold_bed": (22.0, {"H2": 55.33, "H2O": 26.47, "CO": 2.85, "CO2": 12.05, "CH4": 2.96, "N2": 0.34}),
}
POINTS = [("shift_converter", i) for i in range(0, 9, 2)] + [("shift_converter_cold_bed", i) for i in range(0, 13, 3)]


def fed(bed: str) -> dict[str, float]:
    whole = sum(BEDS[bed][1].values())
    return {name: FLOW * x / whole for name, x in BEDS[bed][1].items()}


def settled(bed: str, T: float) -> dict[str, float]:
    """Gas whose shift constant holds at T + 10 K, mol/s."""
    feed = fed(bed)
    atoms = hand.elements({name: feed[name] for name in ("H2", "H2O", "CO", "CO2")})
    gas = hand.shifted(atoms["C"], atoms["H"], atoms["O"], T + 10.0)
    return {**gas, "CH4": feed["CH4"], "N2": feed["N2"]}


@cache
def exit_temperature(bed: str, inlet: float) -> float:
    came = hand.total_enthalpy(fed(bed), inlet)
    return hand.adiabatic(lambda T: settled(bed, T), came, inlet, inlet + 150.0)


def saturation(T: float) -> float:
    """Pa, Hyland and Wexler (1983), 0 to 200 °C."""
    ln_p = -5800.2206 / T + 1.3914993 - 0.048640239 * T + 4.1764768e-5 * T**2 - 1.4452093e-8 * T**3
    return exp(ln_p + 6.5459673 * log(T))


def dew_point(partial: float) -> float:
    return float(brentq(lambda T: saturation(T) - partial, 300.0, 490.0))


def inlet(run: Run, index: int) -> float:
    return float(run.state(index)["inputs"]["feeds.gas.temperature"]) + 273.15


@pytest.mark.parametrize(("bed", "index"), POINTS)
def test_exit_of_the_bed(bed: str, index: int, shipped: Callable[[str], Run]) -> None:
    """0.3 K; heats of the shift differ by less than 0.1 % between tables, heat capacities too."""
    run = shipped(bed)
    state, T_in = run.state(index), inlet(run, index)
    T = exit_temperature(bed, T_in)
    assert state["temperature"] == pytest.approx(T, abs=0.3)
    for name, x in hand.fractions(settled(bed, T)).items():
        assert state["mole_fractions"][name] == pytest.approx(x, rel=0.01 if name == "CO" else 0.002), name


@pytest.mark.parametrize(("bed", "index"), POINTS)
def test_numbers_of_the_trade(bed: str, index: int, shipped: Callable[[str], Run]) -> None:
    run = shipped(bed)
    T_in, feed, bar = inlet(run, index), fed(bed), BEDS[bed][0]
    T = exit_temperature(bed, T_in)
    gas = settled(bed, T)
    wet = hand.fractions(gas)["H2O"]
    expected = {
        "steam_to_dry_gas": feed["H2O"] / (FLOW - feed["H2O"]),
        "h2_dry": hand.dry(gas, "H2"),
        "co_dry": hand.dry(gas, "CO"),
        "co2_dry": hand.dry(gas, "CO2"),
        "ch4_slip": hand.dry(gas, "CH4"),
        "h2_to_co": gas["H2"] / gas["CO"],
        "module": (gas["H2"] - gas["CO2"]) / (gas["CO"] + gas["CO2"]),
        "co_conversion": 1.0 - gas["CO"] / feed["CO"],
        "shift_equilibrium_temperature": T + 10.0,
    }
    for name, value in expected.items():
        assert run.figure("shift", name, index) == pytest.approx(value, rel=0.01), name
    assert run.figure("shift", "shift_approach", index) == pytest.approx(10.0, abs=1e-6)
    margin = T_in - dew_point(feed["H2O"] / FLOW * bar * 1e5)
    assert run.figure("shift", "dew_margin_inlet", index) == pytest.approx(margin, abs=0.2)  # of the formula
    assert run.figure("shift", "dew_margin", index) == pytest.approx(T - dew_point(wet * bar * 1e5), abs=0.5)


@pytest.mark.parametrize("bed", BEDS)
def test_constant_of_the_shift_holds_ten_kelvin_above(bed: str, shipped: Callable[[str], Run]) -> None:
    for state in shipped(bed).data["states"]:
        found = hand.log_q(hand.SHIFT, state["mole_fractions"], 1.0)
        assert found == pytest.approx(hand.log_k(hand.SHIFT, state["temperature"] + 10.0), abs=0.005)


def test_the_hot_bed_gets_what_the_reformer_leaves(shipped: Callable[[str], Run]) -> None:
    """As typed, to 0.02 mole %; the ammonia of the reformer, 0.01 %, is left out."""
    left = shipped("steam_reformer").state()
    for name, percent in BEDS["shift_converter"][1].items():
        assert 100.0 * left["mole_fractions"][name] == pytest.approx(percent, abs=0.02), name
    assert left["phases"]["gas"] == pytest.approx(FLOW, rel=1e-3)


def test_the_cold_bed_gets_what_the_hot_bed_leaves(shipped: Callable[[str], Run]) -> None:
    hot = shipped("shift_converter")
    at_350 = next(i for i in range(9) if abs(inlet(hot, i) - 623.15) < 0.01)
    for name, percent in BEDS["shift_converter_cold_bed"][1].items():
        assert 100.0 * hot.state(at_350)["mole_fractions"][name] == pytest.approx(percent, abs=0.01), name


@pytest.mark.parametrize("bed", BEDS)
def test_colder_inlets_leave_less_as_the_comments_say(bed: str, shipped: Callable[[str], Run]) -> None:
    run = shipped(bed)
    left = [run.figure("shift", "co_dry", i) for i in range(len(run.data["states"]))]
    assert left == sorted(left)
    assert "Carbon activity" in run.screen


def test_the_hot_bed_warms_itself_and_the_cold_one_comes_near_to_water(shipped: Callable[[str], Run]) -> None:
    hot, cold = shipped("shift_converter"), shipped("shift_converter_cold_bed")
    rises = [hot.state(i)["temperature"] - inlet(hot, i) for i in range(9)]
    assert all(65.0 < rise < 85.0 for rise in rises)  # "some 75 K"
    assert "Metal dusting" in hot.screen
    margins = [cold.figure("shift", "dew_margin_inlet", i) for i in range(13)]
    assert margins[0] < 15.0 < 20.0 < margins[2]
