"""The ammonia converter, every number of its table recomputed from the NIST-JANAF tables (see ``gas_by_hand``).

CH4 and Ar pass through: one bisection for the extent x of N2 + 3 H2 = 2 NH3, and one for the temperature.
"""

from __future__ import annotations

import re
from collections.abc import Callable
from functools import cache
from pathlib import Path

import pytest
from scipy.optimize import brentq
from shipped import gas_by_hand as hand
from shipped.conftest import CASES, Run
from shipped.variant import variant, without_sweep

FED = {"N2": 21.5, "H2": 64.5, "NH3": 3.0, "Ar": 4.0, "CH4": 7.0}  # mol of 100
FLOW = 20000e3 / 3600.0  # mol/s
BAR, APPROACH = 150.0, 15.0
INLETS = [340.0 + 10.0 * i for i in range(9)]


@pytest.fixture
def run(shipped: Callable[[str], Run]) -> Run:
    return shipped("ammonia_converter")


def settled(feed: dict[str, float], T: float, bar: float) -> dict[str, float]:
    """Gas in balance by the constant at T."""

    def gas(x: float) -> dict[str, float]:
        made = {"N2": -x, "H2": -3.0 * x, "NH3": 2.0 * x}
        return {name: n + made.get(name, 0.0) for name, n in feed.items()}

    wanted = hand.log_k(hand.AMMONIA, T)
    low, high = -feed["NH3"] / 2.0, min(feed["N2"], feed["H2"] / 3.0)
    edge = 1e-9 * (high - low)
    x = brentq(
        lambda x: hand.log_q(hand.AMMONIA, hand.fractions(gas(x)), bar) - wanted, low + edge, high - edge, xtol=1e-13
    )
    return gas(x)


@cache
def exit_temperature(celsius: float, approach: float) -> float:
    came = hand.total_enthalpy(FED, celsius + 273.15)
    return hand.adiabatic(lambda T: settled(FED, T + approach, BAR), came, 600.0, 900.0)


@pytest.mark.parametrize("index", range(9))
def test_exit_of_the_bed(index: int, run: Run) -> None:
    """1 K and 0.5 %: tables of NH3 differ by 0.05 kJ/mol, which is 1 % of the constant."""
    state, T = run.state(index), exit_temperature(INLETS[index], APPROACH)
    assert state["inputs"]["feeds.gas.temperature"] == pytest.approx(INLETS[index])
    assert state["temperature"] == pytest.approx(T, abs=1.0)
    gas = settled(FED, T + APPROACH, BAR)
    for name, x in hand.fractions(gas).items():
        assert state["mole_fractions"][name] == pytest.approx(x, rel=0.005), name
    assert state["phases"]["gas"] == pytest.approx(FLOW * sum(gas.values()) / 100.0, rel=0.001)


@pytest.mark.parametrize("index", range(9))
def test_numbers_of_the_trade(index: int, run: Run) -> None:
    T = exit_temperature(INLETS[index], APPROACH)
    gas = settled(FED, T + APPROACH, BAR)
    expected = {
        "nh3_inlet": 0.03,
        "nh3_outlet": hand.fractions(gas)["NH3"],
        "n2_conversion": 1.0 - gas["N2"] / 21.5,
        "h2_to_n2": 3.0,
        "inerts_inlet": 0.11,
    }
    for name, value in expected.items():
        assert run.figure("ammonia", name, index) == pytest.approx(value, rel=0.01), name
    assert run.figure("ammonia", "ammonia_equilibrium_temperature", index) == pytest.approx(T + APPROACH, abs=1.0)
    assert run.figure("ammonia", "ammonia_approach", index) == pytest.approx(APPROACH, abs=1e-6)


def test_second_law(run: Run) -> None:
    """Adiabatic: entropy of what leaves less that of the gas that came; a small difference of large numbers."""
    T = exit_temperature(INLETS[4], APPROACH)
    gas = settled(FED, T + APPROACH, BAR)
    made = hand.total_entropy(gas, T, BAR) - hand.total_entropy(FED, INLETS[4] + 273.15, BAR)
    assert run.state(4)["audit"]["entropy_generated"] == pytest.approx(FLOW / 100.0 * made, rel=0.02)


def test_without_approach_it_ends_hotter_and_richer(run: Run, tmp_path: Path) -> None:
    full = variant("ammonia_converter", tmp_path, without_sweep("ammonia_converter"), ('"15 K"', '"0 K"')).state()
    T = exit_temperature(380.0, 0.0)
    assert full["temperature"] == pytest.approx(T, abs=1.0)
    assert full["mole_fractions"]["NH3"] == pytest.approx(hand.fractions(settled(FED, T, BAR))["NH3"], rel=0.005)
    assert full["temperature"] > run.state(4)["temperature"] + 5.0
    assert full["mole_fractions"]["NH3"] > run.figure("ammonia", "nh3_outlet", 4)


def test_the_bias_that_the_comment_states(run: Run) -> None:
    """Ideal gases by JANAF against what Larson and Dodge measured (1923, from memory) at 450 °C."""
    comment = re.sub(r"\n# ", " ", (CASES / "ammonia_converter.toml").read_text(encoding="utf-8"))
    for atm, measured, ideal in ((100.0, 16.4, 16.2), (300.0, 35.8, 32.0)):
        gas = settled({"N2": 1.0, "H2": 3.0, "NH3": 0.0}, 723.15, 1.01325 * atm)
        assert 100.0 * hand.fractions(gas)["NH3"] == pytest.approx(ideal, abs=0.15)
        assert f"{measured} " in comment
        assert f"{ideal}" in comment
    assert "NH3, outlet, as ideal gas" in run.screen


def test_colder_inlets_give_more_as_the_comment_says(run: Run) -> None:
    made = [run.figure("ammonia", "nh3_outlet", i) for i in range(9)]
    ends = [state["temperature"] for state in run.data["states"]]
    assert sorted(made, reverse=True) == made
    assert sorted(ends) == ends
    assert "Toxic gas, immediately dangerous to life: NH3" in re.sub(r"\s+", " ", run.screen)
