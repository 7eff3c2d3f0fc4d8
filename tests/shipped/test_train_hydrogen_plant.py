"""The hydrogen plant, every stream recomputed from the NIST-JANAF tables and the vapour pressure of IAPWS.

NH3, 120 ppm, is left out by hand: it takes 0.2 of 570 kmol/h.
"""

from __future__ import annotations

from collections.abc import Callable
from copy import deepcopy
from functools import cache
from pathlib import Path

import pytest
from shipped import gas_by_hand as hand
from shipped import loops_by_hand as loops
from shipped.conftest import Run
from shipped.train_balance import closes, figure, shown
from shipped.variant import variant

Gas = dict[str, float]

KMOL_H = 1e3 / 3600.0
NATURAL = {"CH4": 93.0, "C2H6": 4.0, "N2": 2.0, "CO2": 1.0}
GAS = {name: n * KMOL_H for name, n in NATURAL.items()}  # 100 kmol/h
FUEL = {name: 0.272 * n for name, n in GAS.items()}
AIR = {name: 578.0 * KMOL_H * x for name, x in {"N2": 0.78087, "O2": 0.209476, "Ar": 0.00934, "CO2": 0.000314}.items()}
STEPS = {
    *("reformer", "boiler", "ht_shift", "cooler", "lt_shift", "knock_out"),
    *("adsorber", "valve", "burner", "firebox"),
}


@pytest.fixture
def run(shipped: Callable[[str], Run]) -> Run:
    return shipped("train_hydrogen_plant")


def bed(gas: Gas, T: float, approach: float) -> tuple[Gas, float]:
    """Settle an adiabatic shift bed whose constant holds at T + approach; CH4 and N2 pass."""
    idle = {name: gas[name] for name in ("CH4", "N2")}
    atoms = hand.elements({name: n for name, n in gas.items() if name not in idle})

    def settled(t: float) -> Gas:
        return {**hand.shifted(atoms["C"], atoms["H"], atoms["O"], t + approach), **idle}

    hot = hand.adiabatic(settled, hand.total_enthalpy(gas, T), T, T + 250.0)
    return settled(hot), hot


@cache
def plant() -> dict[str, tuple[Gas, float]]:
    steam = {"H2O": 303.0 * KMOL_H}
    reformed = hand.reformed({**GAS, **steam}, 1143.15, 24.0, -10.0)
    hot, T_hot = bed(reformed, 623.15, 10.0)
    cold, T_cold = bed(hot, 473.15, 10.0)
    water = loops.condensed(cold, 313.15, 22.0, "H2O")["H2O"]
    dry = {**cold, "H2O": cold["H2O"] - water}
    rest = {**dry, "H2": 0.12 * dry["H2"]}
    atoms = hand.elements({name: sum(part.get(name, 0.0) for part in (rest, FUEL)) for name in {*rest, *FUEL}})
    burned = {
        "CO2": atoms["C"] + AIR["CO2"], "H2O": atoms["H"] / 2.0, "N2": atoms["N"] / 2.0 + AIR["N2"], "Ar": AIR["Ar"],
        "O2": AIR["O2"] + atoms["O"] / 2.0 - atoms["C"] - atoms["H"] / 4.0,
    }  # fmt: skip
    return {
        "reformer": (reformed, 1143.15), "ht_shift": (hot, T_hot), "lt_shift": (cold, T_cold),
        "knock_out": (dry, 313.15), "adsorber": (rest, 313.15), "firebox": (burned, 1273.15),
        "knock_out.water": ({"H2O(l)": water}, 313.15), "adsorber.hydrogen": ({"H2": 0.88 * dry["H2"]}, 313.15),
    }  # fmt: skip


def as_one(run: Run) -> Run:
    """Adsorber and valve read as one step: what parts the gas is the pressure that the valve gives up."""
    data = deepcopy(run.data)
    for state in data["states"]:
        del state["streams"]["adsorber"]
        for stream in state["streams"].values():
            for end in ("from", "to"):
                stream[end] = "valve" if stream[end] == "adsorber" else stream[end]
        parting, valve = state["steps"].pop("adsorber"), state["steps"]["valve"]
        for name in ("heat", "work", "entropy_generated", "lost_work"):
            valve[name] += parting[name]
    return Run(data, run.screen)


def test_balances_and_screen(run: Run) -> None:
    assert set(run.state()["steps"]) == STEPS
    assert run.state()["steps"]["adsorber"]["entropy_generated"] < 0.0
    closes(as_one(run), STEPS - {"adsorber"})
    shown(run)


@pytest.mark.parametrize("name", sorted(plant()))
def test_every_stream(name: str, run: Run) -> None:
    """0.5 %, 3 % of what is below 5 %; 1 K."""
    stream, (gas, T) = run.state()["streams"][name], plant()[name]
    assert stream["temperature"] == pytest.approx(T, abs=1.0)
    assert stream["amount"] == pytest.approx(sum(gas.values()), rel=2e-3)
    for species, x in hand.fractions(gas).items():
        if x > 1e-3:
            found = stream["amounts"][species] / stream["amount"]
            assert found == pytest.approx(x, rel=0.005 if x > 0.05 else 0.03), species


def test_heats(run: Run) -> None:
    steps = run.state()["steps"]
    fed = hand.total_enthalpy({**GAS, "H2O": 303.0 * KMOL_H}, 823.15)
    reformed, _ = plant()["reformer"]
    hot, T_hot = plant()["ht_shift"]
    into_fire = hand.total_enthalpy(FUEL, 288.15) + hand.total_enthalpy(AIR, 573.15)
    into_fire += hand.total_enthalpy(plant()["adsorber"][0], 313.15)
    dry, water = plant()["knock_out"][0], plant()["knock_out.water"][0]["H2O(l)"]
    cold, T_cold = plant()["lt_shift"]
    condensing = hand.total_enthalpy({**dry, "H2O": dry["H2O"] + water}, 313.15) - water * 43.35e3  # at 40 °C, IAPWS
    expected = {
        "reformer": hand.total_enthalpy(reformed, 1143.15) - fed,
        "boiler": hand.total_enthalpy(reformed, 623.15) - hand.total_enthalpy(reformed, 1143.15),
        "cooler": hand.total_enthalpy(hot, 473.15) - hand.total_enthalpy(hot, T_hot),
        "knock_out": condensing - hand.total_enthalpy(cold, T_cold),
        "firebox": hand.total_enthalpy(plant()["firebox"][0], 1273.15) - into_fire,
    }
    for name, heat in expected.items():
        assert steps[name]["heat"] == pytest.approx(heat, rel=0.01), name
    for name in ("ht_shift", "lt_shift", "adsorber", "valve", "burner"):
        assert steps[name]["heat"] == 0.0


def test_numbers_of_the_trade(run: Run) -> None:
    state = run.state()
    reformed, hot, cold = (plant()[name][0] for name in ("reformer", "ht_shift", "lt_shift"))
    assert figure(state, "reformer", "reforming", "steam_to_carbon") == pytest.approx(3.0)
    assert figure(state, "reformer", "reforming", "reforming_approach") == pytest.approx(-10.0, abs=1e-6)
    for name, gas in (("ht_shift", hot), ("lt_shift", cold)):
        assert figure(state, name, "shift", "shift_approach") == pytest.approx(10.0, abs=1e-6)
        assert figure(state, name, "shift", "co_dry") == pytest.approx(hand.dry(gas, "CO"), rel=0.03)
    assert figure(state, "reformer", "reforming", "ch4_slip") == pytest.approx(hand.dry(reformed, "CH4"), rel=0.02)


def test_what_the_comments_say(run: Run) -> None:
    state = run.state()
    spare = -state["steps"]["firebox"]["heat"] / state["steps"]["reformer"]["heat"]
    assert spare == pytest.approx(1.03, abs=0.005)
    flue = state["streams"]["firebox"]["mole_fractions_dry"]
    assert flue["O2"] == pytest.approx(0.02, abs=0.0005)
    dry = [state["streams"][name]["mole_fractions_dry"]["CO"] for name in ("reformer", "ht_shift", "lt_shift")]
    assert [round(100.0 * x, 1) for x in dry] == [14.1, 3.9, 0.4]
    lost = {name: step["lost_work"] for name, step in state["steps"].items()}
    assert sorted(lost, key=lambda name: -lost[name])[:3] == ["firebox", "burner", "boiler"]


def test_without_approach(tmp_path: Path) -> None:
    """Calculated with NIST-JANAF tables: 3.87 % CH4; 350 to 426.5 degC and 3.83 % CO; 200 to 230.7 degC and 0.385 %."""
    state = variant("train_hydrogen_plant", tmp_path, ('"-10 K"', '"0 K"'), ('"10 K"', '"0 K"')).state()
    assert 100.0 * figure(state, "reformer", "reforming", "ch4_slip") == pytest.approx(3.87, abs=0.05)
    assert 100.0 * figure(state, "ht_shift", "shift", "co_dry") == pytest.approx(3.83, abs=0.03)
    assert 100.0 * figure(state, "lt_shift", "shift", "co_dry") == pytest.approx(0.385, abs=0.01)
    assert state["streams"]["ht_shift"]["temperature"] - 273.15 == pytest.approx(426.5, abs=1.0)
    assert state["streams"]["lt_shift"]["temperature"] - 273.15 == pytest.approx(230.7, abs=1.0)
