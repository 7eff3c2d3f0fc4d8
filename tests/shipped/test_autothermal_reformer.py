"""The autothermal reformer, every number of its table recomputed (see ``gas_by_hand``), and by Cantera.

NIST-JANAF has CH4 less by 0.3 kJ/mol at 25 °C and by 0.6 kJ/mol at 650 °C than newer data; with 93 kmol/h of it the
exit is 3 to 4 K colder by JANAF. gri30, packaged with Cantera, has the newer value.
"""

from __future__ import annotations

import re
from collections.abc import Callable
from itertools import pairwise
from pathlib import Path

import pytest
from shipped import gas_by_hand as hand
from shipped.conftest import Run
from shipped.variant import variant, without_sweep

KMOL_H = 1e3 / 3600.0
CARBON = 101.0 * KMOL_H  # of 93 CH4 and 4 C2H6, mol/s
RATIOS = [0.50 + 0.01 * i for i in range(13)]
LOSS = 150e3  # W


def fed(ratio: float) -> dict[str, float]:
    gas = {"CH4": 93.0, "C2H6": 4.0, "N2": 2.0, "CO2": 1.0}
    return {**{name: n * KMOL_H for name, n in gas.items()}, "H2O": 0.6 * CARBON, "O2": ratio * CARBON}


@pytest.fixture
def run(shipped: Callable[[str], Run]) -> Run:
    return shipped("autothermal_reformer")


def test_walls_lose_what_they_are_told(run: Run) -> None:
    assert [state["inputs"]["feeds.oxygen.oxygen_to_carbon"] for state in run.data["states"]] == pytest.approx(RATIOS)
    assert all(state["heat"] == -LOSS for state in run.data["states"])


@pytest.mark.parametrize("index", [0, 5, 12])
def test_exit_temperature_by_janaf(index: int, run: Run) -> None:
    feed = fed(RATIOS[index])
    came = hand.total_enthalpy({name: n for name, n in feed.items() if name != "O2"}, 923.15)
    came += feed["O2"] * hand.enthalpy("O2", 503.15) - LOSS
    T = hand.adiabatic(lambda T: hand.reformed(feed, T, 30.0), came, 1100.0, 1700.0)
    assert run.state(index)["temperature"] == pytest.approx(T + 3.0, abs=1.5)  # the data of CH4, see above


@pytest.mark.parametrize("index", range(13))
def test_gas_by_janaf_at_the_exit_temperature(index: int, run: Run) -> None:
    """Slip 5 %: at 1250 °C the tables of CH4 are that far apart; N2 loses 1 % to ammonia, left out by hand."""
    state = run.state(index)
    by_hand = hand.fractions(hand.reformed(fed(RATIOS[index]), state["temperature"], 30.0))
    for name, x in by_hand.items():
        rel = {"CH4": 0.05, "N2": 0.02}.get(name, 0.004)
        assert state["mole_fractions"][name] == pytest.approx(x, rel=rel), name
    ammonia = 10.0 ** hand.log_k(hand.AMMONIA, state["temperature"])
    ammonia *= (by_hand["N2"] * 30.0) ** 0.5 * (by_hand["H2"] * 30.0) ** 1.5 / 30.0
    assert state["mole_fractions"]["NH3"] == pytest.approx(ammonia, rel=0.03)


def test_exit_by_cantera(run: Run) -> None:
    """All states by gri30 at held enthalpy: 1.5 K, slip 3 %, the rest 0.5 %."""
    gas = hand.packaged()
    for index, ratio in enumerate(RATIOS):
        feed = fed(ratio)
        came = -LOSS
        for names, T in ((("CH4", "C2H6", "N2", "CO2", "H2O"), 923.15), (("O2",), 503.15)):
            came += sum(feed[name] * gas.species(name).thermo.h(T) / 1e3 for name in names)
        gas.TPX = 1300.0, 30e5, feed
        mass = 1e-3 * sum(n * gas.molecular_weights[gas.species_index(name)] for name, n in feed.items())
        gas.HP = came / mass, 30e5
        gas.equilibrate("HP", rtol=1e-9)
        state = run.state(index)
        assert state["temperature"] == pytest.approx(gas.T, abs=1.5)
        for name, rel in (("H2", 5e-3), ("CO", 5e-3), ("CO2", 5e-3), ("H2O", 5e-3), ("CH4", 0.03)):
            assert state["mole_fractions"][name] == pytest.approx(gas[name].X[0], rel=rel), (ratio, name)


@pytest.mark.parametrize("index", [0, 5, 12])
def test_numbers_of_the_trade(index: int, run: Run) -> None:
    T = run.state(index)["temperature"]
    gas = hand.reformed(fed(RATIOS[index]), T, 30.0)
    oxygen = RATIOS[index] * CARBON
    expected = {
        "steam_to_carbon": 0.6,
        "oxygen_to_carbon": RATIOS[index],
        "oxygen_per_1000_synthesis_gas": 1000.0 * oxygen / (gas["H2"] + gas["CO"]),
        "h2_dry": hand.dry(gas, "H2"),
        "co_dry": hand.dry(gas, "CO"),
        "co2_dry": hand.dry(gas, "CO2"),
        "h2_to_co": gas["H2"] / gas["CO"],
        "module": (gas["H2"] - gas["CO2"]) / (gas["CO"] + gas["CO2"]),
        "hydrocarbon_conversion": (gas["CO"] + gas["CO2"] - KMOL_H) / CARBON,
        "duty_per_carbon": -LOSS / CARBON,
        "reforming_equilibrium_temperature": T,
        "shift_equilibrium_temperature": T,
        "dry_gas": sum(gas.values()) - gas["H2O"],
        "hydrogen": gas["H2"],
        "water_in_gas": 0.018015 * gas["H2O"],
    }
    for name, value in expected.items():
        assert run.figure("reforming", name, index) == pytest.approx(value, rel=0.005), name
    assert run.figure("reforming", "ch4_slip", index) == pytest.approx(hand.dry(gas, "CH4"), rel=0.05)
    for name in ("reforming_approach", "shift_approach"):
        assert run.figure("reforming", name, index) == 0.0
    carbon = 10.0 ** (hand.log_k(hand.BOUDOUARD, T) - hand.log_q(hand.BOUDOUARD, hand.fractions(gas), 30.0))
    assert run.figure("reforming", "carbon_activity", index) == pytest.approx(carbon, rel=0.02)
    assert "methane_cracking_up_to" not in run.state(index)["key_figures"]["reforming"]  # a flame is no such path


def test_second_law(run: Run) -> None:
    """Feeds come in apart; what the walls lose ends in surroundings at 25 °C."""
    feed, T = fed(0.55), run.state(5)["temperature"]
    gas = {name: n for name, n in feed.items() if name not in ("H2O", "O2")}
    came = hand.total_entropy(gas, 923.15, 30.0) + hand.total_entropy({"H2O": feed["H2O"]}, 923.15, 30.0)
    came += hand.total_entropy({"O2": feed["O2"]}, 503.15, 30.0)
    made = hand.total_entropy(hand.reformed(feed, T, 30.0), T, 30.0) - came + LOSS / 298.15
    assert run.state(5)["audit"]["entropy_generated"] == pytest.approx(made, rel=0.01)


def test_more_oxygen_as_the_comment_says(run: Run) -> None:
    T = [state["temperature"] for state in run.data["states"]]
    assert all(10.0 < after - before < 35.0 for before, after in pairwise(T))
    slip, module, carbon = (
        [run.figure("reforming", name, i) for i in range(13)] for name in ("ch4_slip", "module", "carbon_activity")
    )
    assert slip == sorted(slip, reverse=True)
    assert max(module) < 2.0
    assert max(carbon) < 0.4


def test_more_steam_as_the_comment_says(run: Run, tmp_path: Path) -> None:
    changes = [without_sweep("autothermal_reformer"), ("steam_to_carbon = 0.6", "steam_to_carbon = 1.0")]
    wet = variant("autothermal_reformer", tmp_path, *changes)
    assert wet.figure("reforming", "h2_to_co") > 1.1 * run.figure("reforming", "h2_to_co", 5)
    assert wet.figure("reforming", "module") == pytest.approx(run.figure("reforming", "module", 5), abs=0.05)


def test_the_approach_at_the_end_works(run: Run, tmp_path: Path) -> None:
    text = '# [approach.reforming]\n# reaction = "CH4 + H2O = CO + 3 H2"\n# temperature = "-10 K"'
    short = variant(
        "autothermal_reformer", tmp_path, without_sweep("autothermal_reformer"), (text, text.replace("# ", ""))
    )
    assert short.figure("reforming", "reforming_approach") == pytest.approx(-10.0, abs=1e-3)
    assert short.figure("reforming", "ch4_slip") > run.figure("reforming", "ch4_slip", 5)


def test_feeds_that_could_ignite_are_named(run: Run) -> None:
    assert "flammable range before they react" in re.sub(r"\s+", " ", run.screen)
