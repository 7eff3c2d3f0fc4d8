"""The oxy-fuel train by Cantera with NASA's data (``fires_by_hand``), for a kilogram of dry coal.

The loop has a closed form: what goes round is the gas that leaves, so many times over.
"""

from __future__ import annotations

from collections.abc import Callable
from functools import cache

import pytest
from chemicals.iapws import iapws95_Psat
from scipy.optimize import brentq
from shipped import fires_by_hand as hand
from shipped import janaf_tables
from shipped.conftest import Run
from shipped.train_balance import State, closes, shown

HOT, COOL, COLD = 1273.15, 473.15, 303.15
BAR, SUCTION = 1.013, 0.983
NAMES = [*hand.LEAN, *hand.SULFUR]
DRY = {"C": 75.0, "H": 5.0, "O": 8.0, "N": 1.5, "S": 1.0, "ash": 9.5}
ATOMS = hand.of_analysis(DRY)
WATER = 0.08 / 18.015e-3  # mol
ASH = 0.095  # kg
HIGHER = hand.channiwala_parikh(DRY)
RATE = 31.2e3 / 3600.0 / 1.08  # kg of dry coal a second
COAL = hand.plus(ATOMS, {"H": 2.0 * WATER, "O": WATER})
HEAT_OF_COAL = hand.formation(ATOMS, HIGHER) + WATER * hand.FORMATION["H2O"]
OXYGEN = 1.0287 * hand.oxygen_need(ATOMS)  # mol of O2 from outside
SHARE, LEAK = "stages.economizer.take.recycle.percent", "feeds.leak.mole_ratio"

Gas = dict[str, float]


@cache
def fed(leak: float) -> tuple[Gas, Gas]:
    """Oxygen and the air that leaks in, ``leak`` mol of it for one of oxygen."""
    moist = hand.air(1.0, 0.01)
    air = hand.times(leak / sum(moist.values()), moist)
    oxygen = OXYGEN / (0.95 + air["O2"])
    return {"O2": 0.95 * oxygen, "Ar": 0.035 * oxygen, "N2": 0.015 * oxygen}, hand.times(oxygen, air)


@cache
def leaving(leak: float) -> Gas:
    """Gas that leaves, as it is frozen at 1000 degC, mol."""
    return hand.settle(hand.plus(COAL, hand.elements(hand.plus(*fed(leak)))), NAMES, HOT, BAR)


@cache
def fan(leak: float) -> tuple[float, float]:
    """Outlet of the fan, K, and its work for so much gas as leaves, J."""
    gas = leaving(leak)
    start, entropy = hand.heat_content(gas, COOL), hand.total_entropy(gas, COOL, SUCTION)
    ideal = brentq(lambda T: hand.total_entropy(gas, T, BAR) - entropy, COOL, COOL + 50.0, xtol=1e-9)
    work = (hand.heat_content(gas, ideal) - start) / 0.80
    return float(brentq(lambda T: hand.heat_content(gas, T) - start - work, COOL, COOL + 50.0, xtol=1e-9)), work


@cache
def flame(leak: float, share: float) -> tuple[float, float, Gas]:
    """Furnace outlet, K, its heat content, J, and gas; of all flue gas ``share`` goes back."""
    oxygen, air = fed(leak)
    brought = HEAT_OF_COAL + hand.heat_content(oxygen, COOL) + hand.heat_content(air, 298.15)
    brought += share / (1.0 - share) * hand.heat_content(leaving(leak), fan(leak)[0])
    atoms = hand.times(1.0 / (1.0 - share), hand.plus(COAL, hand.elements(hand.plus(oxygen, air))))
    T, gas = hand.flame(atoms, NAMES, BAR, brought, ASH)
    return T, brought, gas


@cache
def condensed(leak: float) -> tuple[float, float]:
    """Water that drops out at 30 degC, mol, and heat put in, J; vapour pressure of IAPWS-95, liquid of JANAF."""
    gas = leaving(leak)
    rest = {name: n for name, n in gas.items() if name != "H2O"}
    saturation = iapws95_Psat(COLD) / (SUCTION * 1e5)
    vapour = sum(rest.values()) * saturation / (1.0 - saturation)
    water = gas["H2O"] - vapour
    out = hand.heat_content({**rest, "H2O": vapour}, COLD) + water * janaf_tables.enthalpy("H-063", COLD)
    return water, out - hand.heat_content(gas, COOL)


@pytest.fixture
def run(shipped: Callable[[str], Run]) -> Run:
    return shipped("train_oxyfuel")


def each(run: Run) -> list[tuple[float, float, State]]:
    """Leak, share that goes back, and the state."""
    return [(state["inputs"][LEAK], state["inputs"][SHARE] / 100.0, state) for state in run.data["states"]]


def test_balances_close_and_the_loop_is_steady(run: Run) -> None:
    closes(run, {"furnace", "boiler", "economizer", "fan", "condenser"})
    shown(run)
    for _, share, state in each(run):
        assert state["train"]["recycle_residual"] <= 1e-10
        assert state["train"]["recycle_rounds"] <= 10
        back, on = (state["streams"][name]["amount"] for name in ("economizer.recycle", "economizer"))
        assert back / (back + on) == pytest.approx(share, rel=1e-12)


def test_what_leaves(run: Run) -> None:
    for leak, _, state in each(run):
        gas, stream = leaving(leak), state["streams"]["economizer"]
        assert stream["temperature"] == pytest.approx(COOL)
        assert stream["pressure"] == pytest.approx(98300.0)
        for name in ("CO2", "H2O", "Ar", "N2", "O2", "SO2"):
            assert stream["amounts"][name] == pytest.approx(RATE * gas[name], rel=2e-3), name
        for name in ("SO3", "NO"):
            assert stream["amounts"][name] == pytest.approx(RATE * gas[name], rel=0.05), name


def test_furnace(run: Run) -> None:
    assert len(each(run)) == 12
    for leak, share, state in each(run):
        T, _, gas = flame(leak, share)
        stream = state["streams"]["furnace"]
        assert stream["temperature"] == pytest.approx(T, abs=3.0)
        for name in ("CO2", "H2O", "Ar", "N2"):
            assert stream["amounts"][name] == pytest.approx(RATE * gas[name], rel=3e-3), name
        for name in ("O2", "CO", "OH"):
            assert stream["amounts"][name] == pytest.approx(RATE * gas[name], rel=0.03), name


def test_heat_and_work(run: Run) -> None:
    for leak, share, state in each(run):
        gas, times = leaving(leak), 1.0 / (1.0 - share)
        hot = times * hand.heat_content(gas, HOT) + hand.of_quartz(ASH, HOT)
        cool = times * hand.heat_content(gas, COOL) + hand.of_quartz(ASH, COOL)
        outlet, work = fan(leak)
        assert state["streams"]["fan"]["temperature"] == pytest.approx(outlet, abs=0.05)
        expected = {"boiler": hot - flame(leak, share)[1], "economizer": cool - hot, "condenser": condensed(leak)[1]}
        for name, heat in expected.items():
            assert state["steps"][name]["heat"] == pytest.approx(RATE * heat, rel=4e-3), name
        assert state["steps"]["fan"]["work"] == pytest.approx(RATE * share * times * work, rel=2e-3)
        assert state["train"]["heat"] == pytest.approx(RATE * sum(expected.values()), rel=2e-3)


def test_condenser(run: Run) -> None:
    for leak, _, state in each(run):
        water = state["streams"]["condenser.water"]["amounts"]
        assert set(water) == {"H2O(l)"}
        assert water["H2O(l)"] == pytest.approx(RATE * condensed(leak)[0], rel=3e-3)


def test_ash_takes_no_part_and_goes_out_once(run: Run) -> None:
    """All of it, 60.083 g/mol as quartz, and nothing made of it."""
    for _, _, state in each(run):
        streams = state["streams"]
        assert streams["economizer.ash"]["amounts"]["ash"] == pytest.approx(RATE * ASH / 60.083e-3, rel=1e-4)
        assert streams["furnace"]["amounts"]["ash"] == pytest.approx(streams["coal"]["amounts"]["ash"], rel=1e-12)
        assert not [name for one in streams.values() for name in one["amounts"] if name.startswith("Si")]


def test_gas_that_has_just_settled_is_not_called_a_premix(run: Run) -> None:
    """At 2300 degC it holds CO beside O2, in balance."""
    for state in run.data["states"]:
        told = " ".join(state["cautions"])
        assert "Toxic gas" in told
        assert "Feed 'furnace'" not in told
        assert "Stage boiler: The feeds together" not in told


def test_the_same_as_the_case_of_one_furnace(run: Run, shipped: Callable[[str], Run]) -> None:
    """``oxyfuel_boiler`` finds the recycle by another way; its gas has no fan, which warms by 4 K."""
    alone = shipped("oxyfuel_boiler").data["states"]
    for leak, share, state in each(run):
        for other in alone:
            inputs = other["inputs"]
            if leak == inputs[LEAK] == 0.0 and inputs["feeds.recycle.recirculated_percent"] == 100.0 * share:
                furnace = state["streams"]["furnace"]["temperature"]
                assert 0.0 < furnace - other["temperature"] < 3.0


def test_what_the_header_promises(run: Run) -> None:
    at = {(leak, round(share, 3)): state for leak, share, state in each(run)}
    low, base, high = (at[0.0, share] for share in (0.50, 0.67, 0.75))

    def celsius(state: State) -> float:
        return float(state["streams"]["furnace"]["temperature"]) - 273.15

    assert celsius(low) == pytest.approx(2300.0, abs=10.0)
    assert celsius(high) == pytest.approx(1670.0, abs=5.0)
    assert celsius(base) == pytest.approx(1964.0, abs=10.0)
    for name, first, last in (("boiler", 178e6, 119e6), ("economizer", 60e6, 119e6)):
        assert -low["steps"][name]["heat"] == pytest.approx(first, abs=1e6)
        assert -high["steps"][name]["heat"] == pytest.approx(last, abs=1e6)
    assert low["steps"]["fan"]["work"] == pytest.approx(0.12e6, abs=0.01e6)
    assert high["steps"]["fan"]["work"] == pytest.approx(0.35e6, abs=0.01e6)
    for state in at.values():
        assert -state["train"]["heat"] == pytest.approx(252e6, abs=1e6)
    for share in (0.50, 0.60, 0.65, 0.67, 0.70, 0.75):
        assert at[0.0, share]["streams"]["condenser"]["mole_fractions_dry"]["CO2"] == pytest.approx(0.90, abs=0.01)
        assert at[0.1, share]["streams"]["condenser"]["mole_fractions_dry"]["CO2"] == pytest.approx(0.83, abs=0.01)
        for name, n in at[0.0, share]["streams"]["economizer"]["mole_fractions_wet"].items():
            if n > 1e-9:
                assert n == pytest.approx(base["streams"]["economizer"]["mole_fractions_wet"][name], rel=1e-8), name
    gas = base["streams"]["economizer"]["mole_fractions_wet"]
    assert base["streams"]["economizer"]["mole_fractions_dry"]["O2"] == pytest.approx(0.03, abs=2e-4)
    assert gas["SO3"] == pytest.approx(67e-6, abs=2e-6)
    points = [f(1e5 * BAR * gas["H2O"], 1e5 * BAR * gas["SO3"]) for f in (hand.verhoff_banchero, hand.okkes)]
    assert all(point - 273.15 == pytest.approx(165.0, abs=5.0) for point in points)
