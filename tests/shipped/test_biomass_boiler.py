"""The straw boiler, every number of its table recomputed outside, for a kilogram of dry straw.

The gas but for potassium by Cantera (see ``fires_by_hand``); potassium, chlorine and sulfur by three balances and the
constants of the NIST-JANAF tables, solved here.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Mapping
from functools import cache
from pathlib import Path

import numpy as np
import pytest
from scipy.optimize import brentq, root
from shipped import fires_by_hand as hand
from shipped import janaf_tables as janaf
from shipped.conftest import CASES, Run
from shipped.variant import variant
from typer.testing import CliRunner

from gibbsmin.cli.main import app

BAR = 1.013
NAMES = [*hand.LEAN, *hand.SULFUR, *hand.CHLORINE]
DRY = {"C": 46.5, "H": 5.8, "O": 41.2, "N": 0.6, "S": 0.15, "Cl": 0.35, "ash": 5.4}
STRAW = hand.of_analysis(DRY)
POTASSIUM = 2.0 * 4.05 / 94.196  # mol, of K2O
ASH = 0.04995  # kg
WATER = 12.0 / 88.0 / 18.015e-3  # mol
# Milne, Brennan & Glenn 1990, from memory; MJ/kg dry
HIGHER = 1e6 * (0.341 * 46.5 + 1.322 * 5.8 - 0.12 * (41.2 + 0.6) + 0.0686 * 0.15 - 0.0153 * 5.4)
LOWER = HIGHER - hand.EVAPORATION * (0.058 / 2.016 * 18.015 + 12.0 / 88.0)
RATE = 2920.0 / 3600.0 * 0.88  # kg of dry straw a second
SULFUR = {0.0: 0.0, 9.0: 9.0 / 3600.0 / 32.06e-3 / RATE}  # mol, by kg/h

TABLE = {
    "KCl": "Cl-039", "K2Cl2": "Cl-091", "KOH": "H-012", "HCl": "Cl-026", "SO2": "O-034", "SO3": "O-058",
    "H2SO4": "H-076", "K2SO4": "K-021", "K2SO4(s)": "K-020", "H2O": "H-064", "Cl": "Cl-001",
}  # fmt: skip


def need(sulfur: float) -> float:
    return hand.oxygen_need(hand.plus(STRAW, {"S": sulfur}))


def log_k(T: float, **reaction: float) -> float:
    """log10 K; K2SO4s is the solid, O2 and Cl2 are references."""
    named = {TABLE[name.replace("K2SO4s", "K2SO4(s)")]: nu for name, nu in reaction.items()}
    return janaf.log_k(named, T)


@cache
def majors(sulfur: float, T: float) -> dict[str, float]:
    """Settle the gas without potassium, mol."""
    air = hand.air(1.4 * need(sulfur), 0.01)
    atoms = hand.plus(STRAW, {"S": sulfur, "H": 2.0 * WATER, "O": WATER}, hand.elements(air))
    return hand.settle(atoms, NAMES, T, BAR)


@cache
def settled(sulfur: float, T: float) -> dict[str, float]:
    """All of the gas and K2SO4(s), mol."""
    gas = dict(majors(sulfur, T))
    total = sum(gas.values())
    p = {name: gas[name] / total * BAR for name in ("O2", "H2O")}
    chlorine, sulfur_all = STRAW["Cl"], STRAW["S"] + sulfur
    K = {
        "KOH": 10.0 ** log_k(T, KCl=-1, H2O=-1, KOH=1, HCl=1) * p["H2O"],  # times KCl/HCl
        "K2Cl2": 10.0 ** log_k(T, KCl=-2, K2Cl2=1),
        "K2SO4": 10.0 ** log_k(T, KCl=-2, SO2=-1, H2O=-1, K2SO4=1, HCl=2) * p["O2"] ** 0.5 * p["H2O"],
        "K2SO4s": 10.0 ** log_k(T, KCl=-2, SO2=-1, H2O=-1, K2SO4s=1, HCl=2) * p["O2"] ** 0.5 * p["H2O"],
        "SO3": 10.0 ** log_k(T, SO2=-1, SO3=1) * p["O2"] ** 0.5,
        "H2SO4": 10.0 ** log_k(T, SO2=-1, H2O=-1, H2SO4=1) * p["O2"] ** 0.5 * p["H2O"],
        "Cl2": 10.0 ** log_k(T, HCl=-2, H2O=1) * p["O2"] ** 0.5 / p["H2O"],
        "Cl": 10.0 ** log_k(T, HCl=-1, H2O=0.5, Cl=1) * p["O2"] ** 0.25 / p["H2O"] ** 0.5,
    }

    def pressures(ln: np.ndarray) -> tuple[dict[str, float], float]:
        """Bar of the trace gases, and the activity of solid K2SO4."""
        KCl, HCl, SO2 = np.exp(ln)
        bar = {"KCl": KCl, "HCl": HCl, "SO2": SO2, "KOH": K["KOH"] * KCl / HCl, "K2Cl2": K["K2Cl2"] * KCl**2}
        bar |= {"K2SO4": K["K2SO4"] * KCl**2 * SO2 / HCl**2, "SO3": K["SO3"] * SO2, "H2SO4": K["H2SO4"] * SO2}
        bar |= {"Cl2": K["Cl2"] * HCl**2, "Cl": K["Cl"] * HCl}
        return bar, K["K2SO4s"] * KCl**2 * SO2 / HCl**2

    def balanced(left: float) -> tuple[dict[str, float], float]:
        """Trace gases, mol, and that activity, where so much potassium is left in the gas."""
        solid = (POTASSIUM - left) / 2.0

        def off(ln: np.ndarray) -> list[float]:
            bar, _ = pressures(ln)
            n = {name: one / BAR * total for name, one in bar.items()}
            return [
                (n["KCl"] + n["KOH"] + 2.0 * (n["K2Cl2"] + n["K2SO4"])) / left - 1.0,
                (n["HCl"] + n["KCl"] + n["Cl"] + 2.0 * (n["K2Cl2"] + n["Cl2"])) / chlorine - 1.0,
                (n["SO2"] + n["SO3"] + n["H2SO4"] + n["K2SO4"] + solid) / sulfur_all - 1.0,
            ]

        start = np.log(np.array([left / 2.0, chlorine - left / 2.0, sulfur_all - solid]) * BAR / total)
        found = root(off, start, method="lm", tol=1e-13)
        assert max(map(abs, off(found.x))) < 1e-9
        bar, activity = pressures(found.x)
        return {name: one / BAR * total for name, one in bar.items()}, activity

    left = POTASSIUM
    traces, activity = balanced(left)
    if activity > 1.0:
        ln = brentq(lambda ln: np.log(balanced(POTASSIUM * np.exp(ln))[1]), np.log(1e-12), 0.0, xtol=1e-12)
        left = POTASSIUM * np.exp(ln)
        traces, _ = balanced(left)
    solid = (POTASSIUM - left) / 2.0
    # K2O + 2 HCl = 2 KCl + H2O, K2O + H2O = 2 KOH, K2O + SO2 + 1/2 O2 = K2SO4
    gas["H2O"] += traces["KCl"] / 2.0 + traces["K2Cl2"] - traces["KOH"] / 2.0
    gas["O2"] -= (solid + traces["K2SO4"]) / 2.0
    return {**gas, **traces, "K2SO4(s)": solid}


def gas_of(amounts: Mapping[str, float]) -> dict[str, float]:
    return {name: n for name, n in amounts.items() if name != "K2SO4(s)"}


@pytest.fixture
def run(shipped: Callable[[str], Run]) -> Run:
    return shipped("biomass_boiler")


def each(run: Run) -> list[tuple[float, float, dict[str, object]]]:
    """Sulfur that is added, temperature in K, and the state."""
    flow, temperature = "feeds.sulfur.flow", "held.temperature"
    return [
        (SULFUR[round(state["inputs"][flow], 6)], round(state["inputs"][temperature] + 273.15, 6), state)
        for state in run.data["states"]
    ]


def test_gas(run: Run) -> None:
    assert len(each(run)) == 16
    for sulfur, T, state in each(run):
        x = hand.fractions(gas_of(settled(sulfur, T)))
        for name in ("N2", "H2O", "CO2", "O2", "Ar"):
            assert state["mole_fractions"][name] == pytest.approx(x[name], rel=2e-3), name


def test_potassium_chlorine_and_sulfur(run: Run) -> None:
    for sulfur, T, state in each(run):
        expected = settled(sulfur, T)
        total = sum(gas_of(expected).values())
        for name in ("KCl", "HCl", "SO2", "KOH"):
            assert state["mole_fractions"][name] == pytest.approx(expected[name] / total, rel=0.02), (name, T)
        solid = state["amounts"].get("K2SO4(s)", 0.0) / RATE
        assert solid == pytest.approx(expected["K2SO4(s)"], abs=2e-3 * POTASSIUM / 2.0), T


def test_salts_are_shares_of_what_is_fed(run: Run) -> None:
    for sulfur, _, state in each(run):
        found, n = state["key_figures"]["salts"], state["amounts"]
        fed = RATE * POTASSIUM
        assert found["s_to_cl_fed"] == pytest.approx((STRAW["S"] + sulfur) / STRAW["Cl"], rel=1e-5)
        acid = STRAW["Cl"] + 2.0 * (STRAW["S"] + sulfur)
        assert found["alkali_to_acid_fed"] == pytest.approx(POTASSIUM / acid, rel=1e-5)
        assert found["sulfate_to_chloride_fed"] == pytest.approx(2.0 * found["s_to_cl_fed"])
        sulfate = 2.0 * (n.get("K2SO4(s)", 0.0) + n["K2SO4"])
        chloride = n["KCl"] + 2.0 * n["K2Cl2"]
        assert found["alkali_as_sulfate"] == pytest.approx(sulfate / fed, rel=1e-4)
        assert found["alkali_as_chloride"] == pytest.approx(chloride / fed, rel=1e-3)
        assert found["k_in_kcl"] == pytest.approx(n["KCl"] / fed, rel=1e-4)
        assert found["k_in_koh"] == pytest.approx(n["KOH"] / fed, rel=1e-4)
        assert found["cl_in_hcl"] == pytest.approx(n["HCl"] / RATE / STRAW["Cl"], rel=1e-4)
        assert found["s_in_so2"] == pytest.approx(n["SO2"] / RATE / (STRAW["S"] + sulfur), rel=1e-4)
        assert found["alkali_chlorides_wet"] == pytest.approx(chloride / state["phases"]["gas"], rel=1e-9)


def test_flue_gas(run: Run) -> None:
    """SOx and HCl are those of the state, whose potassium was tested above; all else is recomputed."""
    received = 1.0 / 0.88
    for sulfur, T, state in each(run):
        gas = gas_of(settled(sulfur, T))
        for name in ("SO2", "SO3", "H2SO4", "HCl", "Cl2"):
            gas[name] = state["amounts"].get(name, 0.0) / RATE
        fuel = hand.plus(STRAW, {"S": sulfur})
        heat = 296.81e3 * sulfur  # of S, CODATA
        unit = received + sulfur * 32.06e-3
        air = hand.air(1.4 * need(sulfur), 0.01)
        expected = hand.flue_gas(
            fuel, unit, LOWER + heat, HIGHER + heat, air, gas, BAR * 1e5, 6.0, sulfur_trioxide=0.02
        )
        expected |= {"fuel_heat": RATE * (LOWER + heat), "reference_oxygen": 0.06}
        hand.agree(state["key_figures"]["flue gas"], expected, rel=2e-3, traces=0.05)


def test_heat_to_be_taken_away(run: Run) -> None:
    """Gas by NASA, KCl and K2SO4 by JANAF, ash as quartz; K2O -363.2 kJ/mol (JANAF K-012)."""
    for sulfur, T, state in each(run):
        amounts = settled(sulfur, T)
        gas = {name: n for name, n in gas_of(amounts).items() if name not in TABLE or name == "H2O"}
        out = hand.heat_content(gas, T) + hand.of_quartz(ASH, T)
        out += sum(n * janaf.enthalpy(TABLE[name], T) for name, n in amounts.items() if name in TABLE and name != "H2O")
        straw = hand.formation(STRAW, HIGHER) + WATER * hand.FORMATION["H2O"] - 363.2e3 * POTASSIUM / 2.0
        fed = straw + hand.heat_content(hand.air(1.4 * need(sulfur), 0.01), 298.15)
        assert state["heat"] == pytest.approx(RATE * (out - fed), rel=2e-3), T


def test_adiabatic_as_the_header_says(tmp_path: Path) -> None:
    text = (CASES / "biomass_boiler.toml").read_text(encoding="utf-8")
    held, sweep = 'temperature = "1200 degC"        # varied below', text[text.index("[[sweep]]") :]
    found = variant("biomass_boiler", tmp_path, (sweep, ""), (held, "adiabatic = true")).state()
    atoms = hand.plus(STRAW, {"H": 2.0 * WATER, "O": WATER}, hand.elements(hand.air(1.4 * need(0.0), 0.01)))
    fed = hand.formation(STRAW, HIGHER) + WATER * hand.FORMATION["H2O"]
    fed += hand.heat_content(hand.air(1.4 * need(0.0), 0.01), 298.15)
    T, _ = hand.flame(atoms, NAMES, BAR, fed, ASH)
    assert found["temperature"] == pytest.approx(T, abs=3.0)  # potassium salts are 0.2 % of the heat
    assert found["temperature"] - 273.15 == pytest.approx(1520.0, abs=2.0)


def test_ash_as_the_header_divides_it() -> None:
    """Of 100 kg 7.5 kg of K2O are volatile; the rest is the ash stated, brought to 100."""
    whole = {"SiO2": 45.0 + 7.0, "K2O": 25.0, "CaO": 11.0, "MgO": 4.0, "P2O5": 4.0, "Na2O": 1.0, "Al2O3": 2.0}
    whole["Fe2O3"] = 1.0
    rest = {**whole, "K2O": 0.7 * whole["K2O"]}
    text = (CASES / "biomass_boiler.toml").read_text(encoding="utf-8")
    stated = re.search(r"ash_oxides_percent = \{(.*?)\}", text)
    assert stated is not None
    for oxide, percent in re.findall(r"(\w+) = ([\d.]+)", stated[1]):
        assert float(percent) == pytest.approx(100.0 * rest[oxide] / sum(rest.values()), abs=0.06), oxide
    assert pytest.approx(5.4 * 0.075) == 0.405
    shown = CliRunner().invoke(app, ["check", str(CASES / "biomass_boiler.toml")])
    index = re.search(r"alkali index ([\d.]+)", shown.stdout)
    assert index is not None
    # kg of K2O and Na2O a GJ, Miles et al. 1995 from memory; the volatile K2O counts
    assert float(index[1]) == pytest.approx((0.250 + 0.01) * 0.054 / HIGHER * 1e9, rel=0.01)


def test_what_the_header_promises(run: Run) -> None:
    at = {(sulfur > 0.0, round(T - 273.15)): state for sulfur, T, state in each(run)}
    for added in (False, True):
        assert at[added, 1100]["amounts"].get("K2SO4(s)", 0.0) == 0.0
        assert at[added, 1100]["key_figures"]["salts"]["k_in_kcl"] > 0.9
        assert at[added, 700]["key_figures"]["salts"]["alkali_as_sulfate"] > 0.98
    assert at[True, 1000]["amounts"]["K2SO4(s)"] > 2.0 * at[False, 1000]["amounts"]["K2SO4(s)"]
    assert at[False, 700]["mole_fractions"]["SO2"] < 1e-5


def test_straw_poor_in_sulfur_leaves_chloride(tmp_path: Path) -> None:
    run = variant("biomass_boiler", tmp_path, ("S = 0.15", "S = 0.03"), ("ash = 4.995", "ash = 5.115"))
    state = next(s for s in run.data["states"] if s["inputs"]["held.temperature"] == pytest.approx(500.0))
    assert state["amounts"]["KCl(s)"] > 0.0
