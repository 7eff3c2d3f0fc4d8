"""The gas turbine train by Cantera with NASA's data (``fires_by_hand``): every stream, all work and heat."""

from __future__ import annotations

from collections.abc import Callable
from functools import cache
from pathlib import Path

import pytest
from scipy.optimize import brentq
from shipped import fires_by_hand as hand
from shipped.conftest import Run
from shipped.train_balance import State, closes, shown
from shipped.variant import variant, without_sweep

FUEL = {"CH4": 92.0, "C2H6": 4.0, "C3H8": 1.0, "N2": 2.2, "CO2": 0.8}  # 100 mol
MASS = sum(n * hand.molar_mass(name) for name, n in FUEL.items())  # kg
RATE = 2.3 / MASS  # hundreds of mol of fuel a second
NEED = hand.oxygen_need(hand.elements(FUEL))
LOWER = 1e3 * (92.0 * 802.6 + 4.0 * 1428.6 + 1.0 * 2043.1)
"""kJ/mol at 25 degC: ISO 6976:1995 less 44.0 kJ/mol for the water (from memory), [J for 100 mol]."""

AMBIENT, COMPRESSED, FIRED, BACK = 1.013, 20.26, 19.66, 1.03  # bar
IDLE = ("NO", "NO2")


def air(equivalence: float) -> dict[str, float]:
    return hand.air(NEED / equivalence, 0.0101)


def isentropic(entropy: float, gas: dict[str, float], bar: float) -> float:
    """Temperature of an unreacted gas of that entropy, K."""
    return float(brentq(lambda T: hand.total_entropy(gas, T, bar) - entropy, 250.0, 2500.0, xtol=1e-9))


@cache
def compressor() -> tuple[float, float]:
    """Outlet, K, and work for a mole of air, J."""
    gas = hand.times(1.0 / sum(air(1.0).values()), air(1.0))
    ideal = isentropic(hand.total_entropy(gas, 288.15, AMBIENT), gas, COMPRESSED)
    start = hand.heat_content(gas, 288.15)
    work = (hand.heat_content(gas, ideal) - start) / 0.88
    T = brentq(lambda T: hand.heat_content(gas, T) - start - work, 400.0, 1200.0, xtol=1e-9)
    return float(T), work


@cache
def fired(water: float, equivalence: float) -> tuple[float, dict[str, float]]:
    """Combustor outlet, K, and its gas, mol for 100 of fuel."""
    moles = water * MASS / 18.015e-3
    fed = hand.heat_content(FUEL, 298.15) + hand.heat_content(air(equivalence), compressor()[0])
    atoms = hand.elements(hand.plus(FUEL, air(equivalence), {"H2O": moles}))
    return hand.flame(atoms, hand.LEAN, FIRED, fed + moles * hand.FORMATION["H2O"])


@cache
def expanded(water: float, equivalence: float) -> tuple[float, float, dict[str, float]]:
    """Turbine outlet, K, work put in, J, and gas for 100 mol of fuel; NO and NO2 pass, the rest settles."""
    T, gas = fired(water, equivalence)
    passing = {name: gas[name] for name in IDLE}
    settling = {name: n for name, n in gas.items() if name not in IDLE}
    names = [name for name in hand.LEAN if name not in IDLE]
    given = hand.elements(settling)

    def outlet(T: float) -> dict[str, float]:
        return hand.plus(hand.settle(given, names, T, BACK), passing)

    start, H = hand.total_entropy(gas, T, FIRED), hand.heat_content(gas, T)
    ideal = brentq(lambda T: hand.total_entropy(outlet(T), T, BACK) - start, 600.0, 1500.0, xtol=1e-6)
    work = 0.90 * (hand.heat_content(outlet(ideal), ideal) - H)
    T = brentq(lambda T: hand.heat_content(outlet(T), T) - H - work, 600.0, 1500.0, xtol=1e-6)
    return float(T), work, outlet(T)


@pytest.fixture
def run(shipped: Callable[[str], Run]) -> Run:
    return shipped("train_gas_turbine")


def each(run: Run) -> list[tuple[float, float, State]]:
    """Water, equivalence ratio, and the state."""
    keys = ("feeds.water.mass_ratio", "feeds.air.equivalence_ratio")
    return [(*(state["inputs"][key] for key in keys), state) for state in run.data["states"]]


def test_balances_close(run: Run) -> None:
    closes(run, {"compressor", "combustor", "turbine", "heat_recovery"})
    shown(run)


def test_compressor(run: Run) -> None:
    """Moist air; 443.0 degC and 442.6 kJ/kg are the textbook's for dry air (ideal gas, JANAF)."""
    T, work = compressor()
    for _, equivalence, state in each(run):
        moles = RATE * sum(air(equivalence).values())
        assert state["streams"]["compressor"]["temperature"] == pytest.approx(T, abs=0.2)
        assert state["steps"]["compressor"]["work"] == pytest.approx(work * moles, rel=1e-3)
        assert state["streams"]["compressor"]["pressure"] == pytest.approx(20.26e5)
    assert pytest.approx(443.0, abs=2.0) == T - 273.15


def test_combustor(run: Run) -> None:
    assert len(each(run)) == 18
    for water, equivalence, state in each(run):
        T, gas = fired(water, equivalence)
        stream = state["streams"]["combustor"]
        assert stream["temperature"] == pytest.approx(T, abs=1.5)
        assert stream["pressure"] == pytest.approx(19.66e5)
        for name in ("N2", "H2O", "O2", "CO2", "Ar"):
            assert stream["amounts"][name] == pytest.approx(RATE * gas[name], rel=2e-3), name
        for name in ("NO", "OH", "CO"):  # 1.5 K more or less
            assert stream["amounts"][name] == pytest.approx(RATE * gas[name], rel=0.05), name


def test_turbine_and_heat_recovery(run: Run) -> None:
    for water, equivalence, state in each(run):
        T, work, gas = expanded(water, equivalence)
        assert state["streams"]["turbine"]["temperature"] == pytest.approx(T, abs=1.0)
        assert state["steps"]["turbine"]["work"] == pytest.approx(RATE * work, rel=2e-3)
        for name in ("N2", "H2O", "O2", "CO2", "Ar"):
            assert state["streams"]["turbine"]["amounts"][name] == pytest.approx(RATE * gas[name], rel=2e-3), name
        heat = RATE * (hand.heat_content(gas, 373.15) - hand.heat_content(gas, T))
        assert state["steps"]["heat_recovery"]["heat"] == pytest.approx(heat, rel=3e-3)


def test_lost_work(run: Run) -> None:
    """298.15 K times the entropy made; liquid water 69.95 J/mol/K (CODATA key values)."""
    for water, equivalence, state in each(run):
        T, gas = fired(water, equivalence)
        fed = hand.total_entropy(FUEL, 298.15, 25.0) + water * MASS / 18.015e-3 * 69.95
        made = hand.total_entropy(gas, T, FIRED) - fed
        made -= hand.total_entropy(air(equivalence), compressor()[0], COMPRESSED)
        assert state["steps"]["combustor"]["lost_work"] == pytest.approx(298.15 * RATE * made, rel=4e-3)


def test_gases_of_the_turbine_that_do_not_settle_pass(run: Run) -> None:
    for state in run.data["states"]:
        before, after = (state["streams"][name]["amounts"] for name in ("combustor", "turbine"))
        for name in IDLE:
            assert after[name] == pytest.approx(before[name], rel=1e-12)
        assert after["CO"] < 0.1 * before["CO"]
        assert after["OH"] < 0.01 * before["OH"]


def net(state: State) -> float:
    """Work gained, W."""
    return -float(state["train"]["work"])


def test_what_the_header_promises(run: Run) -> None:
    at = {(water, ratio): state for water, ratio, state in each(run)}
    base, wet, refired = at[0.0, 0.495], at[1.0, 0.495], at[1.0, 0.58]
    heat = RATE * LOWER
    assert heat == pytest.approx(108e6, rel=0.01)
    assert net(base) == pytest.approx(45.1e6, abs=0.1e6)
    assert base["steps"]["compressor"]["work"] == pytest.approx(33.6e6, abs=0.1e6)
    assert base["steps"]["turbine"]["work"] == pytest.approx(-78.7e6, abs=0.1e6)
    assert net(base) / heat == pytest.approx(0.418, abs=2e-3)
    assert net(base) / base["streams"]["air"]["mass"] == pytest.approx(597e3, abs=1e3)
    inlet = {key: state["streams"]["combustor"]["temperature"] - 273.15 for key, state in at.items()}
    assert inlet[0.0, 0.495] == pytest.approx(1500.0, abs=10.0)
    assert inlet[1.0, 0.58] == pytest.approx(1500.0, abs=3.0)
    assert inlet[0.0, 0.495] - inlet[1.0, 0.495] == pytest.approx(118.0, abs=2.0)
    assert net(base) - net(wet) == pytest.approx(1.9e6, abs=0.1e6)
    assert net(refired) / refired["streams"]["air"]["mass"] == pytest.approx(673e3, abs=2e3)
    assert net(refired) / heat == pytest.approx(0.402, abs=2e-3)
    efficiency = [net(at[0.0, ratio]) for ratio in (0.40, 0.45, 0.495, 0.55)]
    assert efficiency == sorted(efficiency)
    assert efficiency[-1] / efficiency[0] < 1.02
    lost = base["train"]["lost_work"]
    assert base["steps"]["combustor"]["lost_work"] / lost == pytest.approx(0.5, abs=0.05)
    assert base["steps"]["heat_recovery"]["lost_work"] / lost == pytest.approx(0.5, abs=0.05)


RULE = 'species = { inert = ["NO", "NO2"] }'


def test_frozen_and_settling_turbine(run: Run, tmp_path: Path) -> None:
    base = next(state for water, ratio, state in each(run) if (water, ratio) == (0.0, 0.495))
    sweeps = [without_sweep("train_gas_turbine"), ('[[sweep]]\nvary = "feeds.air', '# [[sweep]]\n# vary = "feeds.air')]
    sweeps.append(("values = [0.40,", "# values = [0.40,"))
    work = {}
    for name, rule in (("frozen", "frozen = true"), ("settling", "")):
        folder = tmp_path / name
        folder.mkdir()
        (state,) = variant("train_gas_turbine", folder, *sweeps, (RULE, rule)).data["states"]
        work[name] = state["steps"]["turbine"]["work"] / base["steps"]["turbine"]["work"] - 1.0
    assert work["frozen"] == pytest.approx(-0.001, abs=5e-4)
    assert work["settling"] == pytest.approx(0.003, abs=5e-4)
