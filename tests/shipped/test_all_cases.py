"""The shipped cases: they run, every state is certified, elements close, and hand calculations agree.

Balances are recomputed from result.json alone, with a formula reader of the test's own. Equilibrium constants come
from the NIST-JANAF tables (Chase 1998) as the package ``janaf`` carries them, interpolated in 1/T between 100 K
points (log10 Kf is so nearly straight in 1/T that this costs less than 0.002).
"""

from __future__ import annotations

import re
from collections.abc import Callable
from importlib.resources import files
from math import exp, log, log10
from typing import Any

import pytest
from shipped.conftest import CASES, Run

NAMES = sorted(path.stem for path in CASES.glob("*.toml") if path.stem != "study_million")  # it has a test of its own
MIXTURES = [name for name in NAMES if not name.startswith("train_")]
STANDARD = 1e5  # Pa


class Results:
    """Cases as they are asked for: what result.json holds, and what was printed."""

    def __init__(self, shipped: Callable[[str], Run]) -> None:
        self.shipped = shipped

    def __getitem__(self, name: str) -> tuple[dict[str, Any], str]:
        run = self.shipped(name)
        return run.data, run.screen


@pytest.fixture
def results(shipped: Callable[[str], Run]) -> Results:
    """Every case once a session."""
    return Results(shipped)


def atoms(name: str) -> dict[str, float]:
    """Atoms in a species name; brackets are opened by repetition."""
    formula = re.sub(r"\((?:s|l)\).*|:.*|[+-]+$", "", name)
    while match := re.search(r"\(([^()]*)\)(\d*)", formula):
        formula = formula.replace(match[0], match[1] * int(match[2] or 1), 1)
    found: dict[str, float] = {}
    for symbol, count in re.findall(r"([A-Z][a-z]?)([\d.]*)", formula):
        found[symbol] = found.get(symbol, 0.0) + float(count or 1)
    return found


def elements(amounts: dict[str, float]) -> dict[str, float]:
    """Moles of each element in moles of species."""
    found: dict[str, float] = {}
    for name, n in amounts.items():
        for symbol, count in atoms(name).items():
            found[symbol] = found.get(symbol, 0.0) + count * n
    return found


def scaled(composition: dict[str, float], total: float) -> dict[str, float]:
    whole = sum(composition.values())
    return {name: total * x / whole for name, x in composition.items()}


def fed_to_reformer() -> dict[str, float]:
    gas = scaled({"CH4": 93, "C2H6": 4, "N2": 2, "CO2": 1}, 100e3 / 3600)  # 100 kmol/h in mol/s
    return {**gas, "H2O": 3.0 * (gas["CH4"] + 2 * gas["C2H6"])}  # S/C = 3


def fed_to_furnace(air_ratio: float) -> dict[str, float]:
    flow = 400 / 3600 * 101325 / (8.31446261815324 * 273.15)  # 400 Nm3/h in mol/s
    fuel = scaled({"CH4": 92, "C2H6": 4, "C3H8": 1, "N2": 2.2, "CO2": 0.8}, flow)
    need = 2 * fuel["CH4"] + 3.5 * fuel["C2H6"] + 5 * fuel["C3H8"]  # mol O2: C + H/4
    composition = {"N2": 77.295, "O2": 20.736, "Ar": 0.925, "CO2": 0.031, "H2O": 1.013}
    air = scaled(composition, air_ratio * need * sum(composition.values()) / composition["O2"])
    return {name: fuel.get(name, 0.0) + air.get(name, 0.0) for name in {*fuel, *air}}


def close(found: dict[str, float], wanted: dict[str, float], rel: float) -> None:
    assert found.keys() == wanted.keys()
    for symbol, amount in wanted.items():
        assert found[symbol] == pytest.approx(amount, rel=rel), symbol


@pytest.mark.parametrize("name", NAMES)
def test_every_state_is_certified_and_comes_with_cautions(name: str, results: Results) -> None:
    data, printed = results[name]
    for state in data["states"]:
        certificate = state["certificate"]
        assert certificate["ok"] is True
        assert certificate["element_residual"] <= 1e-10
        assert abs(certificate["gap"]) <= 1e-8
        assert certificate["worst_affinity"] <= 1e-8
        assert state["cautions"], "every one of these gases poisons or asphyxiates"
    assert "invented" in data["title"]
    assert "Local codes and licensed practice decide" in re.sub(r"\s+", " ", printed)
    assert max(map(len, printed.splitlines()[:-1])) <= 80


def test_reformer_elements_close(results: Results) -> None:
    (state,) = results["steam_reformer"][0]["states"]
    close(elements(state["amounts"]), elements(fed_to_reformer()), 1e-9)


def test_furnace_elements_close(results: Results) -> None:
    for state in results["furnace_flue_gas"][0]["states"]:
        air_ratio = state["inputs"]["feeds.air.air_ratio"]
        close(elements(state["amounts"]), elements(fed_to_furnace(air_ratio)), 1e-9)


@pytest.mark.parametrize("name", MIXTURES)
def test_energy_and_entropy_close_in_every_state(name: str, results: Results) -> None:
    """From result.json alone: what goes in and out of energy, and entropy that never falls."""
    for state in results[name][0]["states"]:
        kind = "internal_energy" if "volume" in state["held"] else "enthalpy"
        fed = state[f"feed_{kind}"]
        turnover = abs(state[kind]) + abs(fed)
        assert state[kind] - fed == pytest.approx(state["heat"] + state["work"], abs=1e-9 * turnover)
        audit = state["audit"]
        assert audit["entropy_of_products"] == state["entropy"]
        assert audit["entropy_generated"] >= 0.0
        made = state["entropy"] - audit["entropy_of_feeds"] - state["heat"] / audit["source_temperature"]
        assert audit["entropy_generated"] == pytest.approx(made, abs=1e-9 * abs(state["entropy"]))
        assert audit["lost_work"] == pytest.approx(audit["surroundings_temperature"] * audit["entropy_generated"])
        assert state["gibbs_energy"] == pytest.approx(state["enthalpy"] - state["temperature"] * state["entropy"])


def along(results: Results, name: str, vary: str) -> dict[float, dict[str, Any]]:
    """States of a case by the value of its one varied input."""
    return {round(state["inputs"][vary], 6): state for state in results[name][0]["states"]}


def test_explosion_pressure(results: Results) -> None:
    """2589 K and 8.93 bar for methane and its air from 25 degC and 1 atm (NIST-JANAF tables, by hand)."""
    states = along(results, "vessel_explosion", "feeds.air.air_ratio")
    assert states[1.0]["temperature"] == pytest.approx(2589.0, abs=8.0)
    assert states[1.0]["pressure"] == pytest.approx(8.93e5, rel=0.01)
    assert max(states, key=lambda ratio: states[ratio]["pressure"]) == 0.9
    printed = re.sub(r"\s+", " ", results["vessel_explosion"][1])
    assert "Vent sizing and detonation are not covered" in printed


def test_explosion_against_cantera(results: Results) -> None:
    """gri30 at held internal energy and volume; its data differ a little from ours."""
    import cantera

    gas = cantera.Solution("gri30.yaml")
    for ratio, state in along(results, "vessel_explosion", "feeds.air.air_ratio").items():
        air = {"N2": 0.78087, "O2": 0.209476, "AR": 0.00934, "CO2": 0.000314}
        amounts = {species: x * ratio * 2.0 / 0.209476 for species, x in air.items()}
        gas.TPX = 298.15, 101325.0, {**amounts, "CH4": 1.0}
        gas.equilibrate("UV", rtol=1e-10)
        assert state["temperature"] == pytest.approx(gas.T, rel=2e-3)
        assert state["pressure"] == pytest.approx(gas.P, rel=2e-3)


def test_quench_ends_saturated(results: Results) -> None:
    """Where water is left over, its partial pressure is the saturation pressure of Hyland & Wexler (1983)."""
    for state in results["quench"][0]["states"]:
        T = state["temperature"]
        ln_p = -5800.2206 / T + 1.3914993 - 0.048640239 * T + 4.1764768e-5 * T**2 - 1.4452093e-8 * T**3
        saturation = exp(ln_p + 6.5459673 * log(T))
        partial = state["mole_fractions"]["H2O"] * state["pressure"]
        if state["amounts"]["H2O(l)"] > 0.0:
            # the data have the gas as ideal, real vapour is 1 % denser
            assert partial == pytest.approx(saturation, rel=0.03)
        elif T < 470.0:  # range of the formula
            assert partial < saturation


def test_expansion_against_cantera(results: Results) -> None:
    """gri30 at held entropy, then at the enthalpy that the efficiency leaves."""
    import cantera

    gas = cantera.Solution("gri30.yaml")
    gas.TPX = 1773.15, 20e5, {"N2": 75.3, "O2": 10.0, "CO2": 4.7, "H2O": 9.1, "AR": 0.9}
    h1, s1 = gas.h, gas.s  # J/kg, J/kg/K: cantera counts entropy from 1 atm on both sides
    gas.SP = s1, 1.03e5
    gas.equilibrate("SP", rtol=1e-10)
    ideal = gas.h - h1
    for efficiency, state in along(results, "expansion", "held.isentropic_efficiency").items():
        gas.HP = h1 + efficiency * ideal, 1.03e5
        gas.equilibrate("HP", rtol=1e-10)
        assert state["work"] == pytest.approx(100.0 * efficiency * ideal, rel=2e-3)  # 100 kg/s
        assert state["temperature"] == pytest.approx(gas.T, rel=2e-3)
        assert (state["audit"]["entropy_generated"] == 0.0) == (efficiency == 1.0)


def log_kf(table: str, temperature: float) -> float:
    """log10 of the formation constant from a NIST-JANAF table."""
    text = files("janaf").joinpath("data", f"{table}.txt").read_text()
    rows = [line.split("\t") for line in text.splitlines()[2:]]
    points = []
    for row in rows:
        try:
            points.append((float(row[0]), float(row[7])))
        except (ValueError, IndexError):
            continue
    below = max(point for point in points if point[0] <= temperature and point[0] >= 300)
    above = min(point for point in points if point[0] >= temperature)
    if below == above:
        return below[1]
    part = (1 / temperature - 1 / below[0]) / (1 / above[0] - 1 / below[0])
    return below[1] + part * (above[1] - below[1])


TABLE = {"CO": "C-093", "CO2": "C-095", "H2O": "H-064", "CH4": "C-067"}


def log_k(reaction: dict[str, int], temperature: float) -> float:
    """log10 K at 1 bar of a reaction of CO, CO2, H2O and CH4; H2 and graphite are reference states."""
    return sum(nu * log_kf(TABLE[name], temperature) for name, nu in reaction.items() if name in TABLE)


def log_q(reaction: dict[str, int], state: dict[str, Any]) -> float:
    """log10 of the quotient of pressures in bar; graphite counts 1."""
    x, p = state["mole_fractions"], state["pressure"] / STANDARD
    return sum(nu * log10(x[name] * p) for name, nu in reaction.items() if name != "C(s):graphite")


SHIFT = {"CO": -1, "H2O": -1, "CO2": 1, "H2": 1}


def test_furnace_short_of_air_obeys_the_shift_of_janaf(results: Results) -> None:
    for state in results["furnace_flue_gas"][0]["states"]:
        assert log_q(SHIFT, state) == pytest.approx(log_k(SHIFT, state["temperature"]), abs=0.01)


def test_furnace_with_excess_air_by_hand(results: Results) -> None:
    """Complete burning at air ratio 1.15; NO and the like take up less than 0.05 % here."""
    states = {state["inputs"]["feeds.air.air_ratio"]: state for state in results["furnace_flue_gas"][0]["states"]}
    x = states[1.15]["mole_fractions"]
    fed = fed_to_furnace(1.15)
    carbon = fed["CO2"] + fed["CH4"] + 2 * fed["C2H6"] + 3 * fed["C3H8"]
    water = fed["H2O"] + 2 * fed["CH4"] + 3 * fed["C2H6"] + 4 * fed["C3H8"]
    oxygen = fed["O2"] - 2 * fed["CH4"] - 3.5 * fed["C2H6"] - 5 * fed["C3H8"]
    total = carbon + water + oxygen + fed["N2"] + fed["Ar"]
    assert x["CO2"] == pytest.approx(carbon / total, abs=5e-4)
    assert x["H2O"] == pytest.approx(water / total, abs=5e-4)
    assert x["O2"] == pytest.approx(oxygen / total, abs=5e-4)
    assert x["CO"] < 1e-5


def test_the_cases_show_what_their_comments_promise(results: Results) -> None:
    furnace = results["furnace_flue_gas"][0]["states"]
    assert furnace[0]["mole_fractions"]["CO"] > 0.01  # air ratio 0.90
    assert furnace[-1]["mole_fractions"]["CO"] < 1e-6  # 1.40
