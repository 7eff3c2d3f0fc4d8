"""The combustor of the gas turbine, every number of its table recomputed outside (see ``fires_by_hand``)."""

from __future__ import annotations

from collections.abc import Callable
from functools import cache
from pathlib import Path

import pytest
from scipy.optimize import brentq
from shipped import fires_by_hand as hand
from shipped.conftest import Run
from shipped.variant import variant

BAR = 20.0
FUEL = {"CH4": 92.0, "C2H6": 4.0, "C3H8": 1.0, "N2": 2.2, "CO2": 0.8}  # 100 mol
MASS = sum(n * hand.molar_mass(name) for name, n in FUEL.items())  # kg
RATE = 2.3 / MASS
NEED = hand.oxygen_need(hand.elements(FUEL))
# kJ/mol at 25 degC: ISO 6976:1995 (from memory); 2, 3 and 4 mol of water at 44.016 kJ/mol
HIGHER = 1e3 * (92.0 * 890.63 + 4.0 * 1560.69 + 1.0 * 2219.17)
LOWER = HIGHER - 44.016e3 * (92.0 * 2 + 4.0 * 3 + 1.0 * 4)


def air(equivalence: float) -> dict[str, float]:
    return hand.air(NEED / equivalence, 0.0101)


@cache
def flame(water: float, equivalence: float) -> tuple[float, dict[str, float]]:
    """Combustor outlet [K] and its gas; ``water`` in kg per kg of fuel, liquid of 25 degC."""
    moles = water * MASS / 18.015e-3
    fed = hand.heat_content(FUEL, 298.15) + hand.heat_content(air(equivalence), 723.15) + moles * hand.FORMATION["H2O"]
    atoms = hand.elements(hand.plus(FUEL, air(equivalence), {"H2O": moles}))
    return hand.flame(atoms, hand.LEAN, BAR, fed)


@pytest.fixture
def run(shipped: Callable[[str], Run]) -> Run:
    return shipped("gas_turbine")


def each(run: Run) -> list[tuple[float, float, dict[str, object]]]:
    """Water, equivalence ratio, and the state."""
    keys = ("feeds.water.mass_ratio", "feeds.air.equivalence_ratio")
    return [(*(state["inputs"][key] for key in keys), state) for state in run.data["states"]]


def test_outlets(run: Run) -> None:
    assert len(each(run)) == 18
    for water, equivalence, state in each(run):
        T, gas = flame(water, equivalence)
        assert state["temperature"] == pytest.approx(T, abs=1.5)
        x = hand.fractions(gas)
        for name in ("N2", "H2O", "O2", "CO2", "Ar"):
            assert state["mole_fractions"][name] == pytest.approx(x[name], rel=2e-3), name


def test_flue_gas(run: Run) -> None:
    for water, equivalence, state in each(run):
        _, gas = flame(water, equivalence)
        expected = hand.flue_gas(
            hand.elements(FUEL), 100.0 * hand.NORMAL, LOWER, HIGHER, air(equivalence), gas, 101300.0, reference=15.0
        )
        expected |= {"fuel_heat": LOWER * RATE, "reference_oxygen": 0.15}
        hand.agree(state["key_figures"]["flue gas"], expected, rel=2e-3, traces=0.1)


def test_lost_work(run: Run) -> None:
    """298.15 K times the entropy generated; liquid water 69.95 J/mol/K (CODATA key values)."""
    for water, equivalence, state in each(run):
        T, gas = flame(water, equivalence)
        fed = hand.total_entropy(FUEL, 298.15, BAR) + hand.total_entropy(air(equivalence), 723.15, BAR)
        made = hand.total_entropy(gas, T, BAR) - fed - water * MASS / 18.015e-3 * 69.95
        assert state["audit"]["lost_work"] == pytest.approx(298.15 * RATE * made, rel=3e-3)


def test_equivalence_ratio_for_1500_degrees() -> None:
    """0.495, which the case has where nothing is varied."""
    found = brentq(lambda ratio: flame(0.0, ratio)[0] - 1773.15, 0.45, 0.55, xtol=1e-5)
    assert found == pytest.approx(0.495, abs=0.002)


def test_compressor_that_the_header_names() -> None:
    """Pressure ratio 20 from 15 degC at 88 %: 443 degC; dry air by NASA's functions."""
    dry = hand.DRY_AIR
    inlet = hand.total_entropy(dry, 288.15, 1.0)
    ideal = brentq(lambda T: hand.total_entropy(dry, T, 20.0) - inlet, 500.0, 900.0)
    start = hand.heat_content(dry, 288.15)
    work = (hand.heat_content(dry, ideal) - start) / 0.88
    outlet = brentq(lambda T: hand.heat_content(dry, T) - start - work, 500.0, 900.0)
    assert outlet - 273.15 == pytest.approx(443.0, abs=1.0)


def test_what_the_header_promises(run: Run, tmp_path: Path) -> None:
    T = {(water, ratio): state["temperature"] for water, ratio, state in each(run)}
    assert T[0.0, 0.5] - T[1.0, 0.5] == pytest.approx(120.0, abs=5.0)
    base = variant(
        "gas_turbine", tmp_path, ("values = [0.30, 0.35, 0.40, 0.45, 0.50, 0.55]", "values = [0.495]")
    ).state()
    assert base["temperature"] - 273.15 == pytest.approx(1500.0, abs=3.0)
    assert base["key_figures"]["flue gas"]["nox_volume_at_reference_oxygen"] > 100.0 * 15e-6
    assert base["heat_capacity"] > base["frozen_heat_capacity"]
