"""The ammonia loop: one round of it by the NIST-JANAF tables, and the vapour pressure of ammonia of the VDI Heat Atlas.

The round begins with the gas that the loop reports, and must come back to it.
"""

from __future__ import annotations

from collections.abc import Callable

import pytest
from scipy.optimize import brentq
from shipped import gas_by_hand as hand
from shipped import loops_by_hand as loops
from shipped.conftest import Run
from shipped.train_balance import closes, figure, shown

Gas = dict[str, float]

FLOW = 6000e3 / 3600.0  # mol/s
MADE_UP = {name: FLOW * x for name, x in {"N2": 0.2465, "H2": 0.7395, "Ar": 0.004, "CH4": 0.010}.items()}
PURGES = [2.0, 3.0, 4.0, 5.0, 6.0]
STEPS = {
    *("loop_gas", "exchanger", "bed_1", "cooler_1", "bed_2", "cooler_2", "bed_3"),
    *("water_cooler", "chiller", "purge_point", "circulator"),
}


@pytest.fixture
def run(shipped: Callable[[str], Run]) -> Run:
    return shipped("train_ammonia_loop")


def bed(gas: Gas, approach: float = 15.0, inlet: float = 653.15, bar: float = 150.0) -> tuple[Gas, float]:
    """Settle an adiabatic bed whose constant holds at T + approach."""

    def after(x: float) -> Gas:
        made = {"N2": -x, "H2": -3.0 * x, "NH3": 2.0 * x}
        return {name: n + made.get(name, 0.0) for name, n in gas.items()}

    def settled(T: float) -> Gas:
        wanted = hand.log_k(hand.AMMONIA, T + approach)
        low, high = -gas["NH3"] / 2.0, min(gas["N2"], gas["H2"] / 3.0)
        edge = 1e-9 * (high - low)
        x = brentq(lambda x: hand.log_q(hand.AMMONIA, hand.fractions(after(x)), bar) - wanted, low + edge, high - edge)
        return after(x)

    hot = hand.adiabatic(settled, hand.total_enthalpy(gas, inlet), 600.0, 900.0)
    return settled(hot), hot


def close(found: Gas, wanted: Gas, rel: float) -> None:
    for name, n in wanted.items():
        assert found[name] == pytest.approx(n, rel=rel), name


def test_balances_and_screen(run: Run) -> None:
    closes(run, STEPS)
    shown(run)
    for state in run.data["states"]:
        assert state["train"]["recycle_residual"] <= 1e-10


@pytest.mark.parametrize("index", range(5))
def test_one_round(index: int, run: Run) -> None:
    """1 K and 0.5 %: tables of NH3 differ by 0.05 kJ/mol; 3 % of the vapour pressure, which the liquid is fitted to."""
    state = run.state(index)
    streams, purge = state["streams"], PURGES[index] / 100.0
    gas = {name: streams["loop_gas"]["amounts"][name] for name in ("N2", "H2", "NH3", "Ar", "CH4")}
    for name in ("bed_1", "bed_2", "bed_3"):
        gas, T = bed(gas)
        assert streams[name]["temperature"] == pytest.approx(T, abs=1.0)
        close(streams[name]["amounts"], gas, 0.005)
    for name, celsius in (("water_cooler", 30.0), ("chiller", 0.0)):
        there = {**gas, "NH3": sum(streams["bed_3"]["amounts"][part] for part in ("NH3",))}
        liquid = loops.condensed(there, 273.15 + celsius, 142.0, "NH3")["NH3"]
        outlet = streams[name]["amounts"]
        found = outlet["NH3(l)"] if name == "water_cooler" else streams["chiller.ammonia"]["amounts"]["NH3(l)"]
        assert found == pytest.approx(liquid, rel=0.01)
        y = outlet["NH3"] / streams[name]["gas"]
        assert y == pytest.approx(loops.saturation("NH3", 273.15 + celsius) / 142.0, rel=0.03)
    left = {name: streams["chiller"]["amounts"][name] for name in gas}
    close(streams["purge_point.purge"]["amounts"], {name: purge * n for name, n in left.items()}, 1e-9)
    back = {name: (1.0 - purge) * n for name, n in left.items()}
    close(streams["circulator"]["amounts"], back, 1e-9)
    close(streams["loop_gas"]["amounts"], {name: MADE_UP.get(name, 0.0) + back[name] for name in back}, 1e-9)
    T, work = loops.compressed(back, 273.15, 142.0, 150.0, 0.8)
    assert streams["circulator"]["temperature"] == pytest.approx(T, abs=0.1)
    assert state["steps"]["circulator"]["work"] == pytest.approx(work, rel=0.01)


@pytest.mark.parametrize("index", range(5))
def test_what_comes_in_and_does_not_react_is_in_the_loop_by_the_purge(index: int, run: Run) -> None:
    streams = run.state(index)["streams"]
    for name in ("Ar", "CH4"):
        assert streams["loop_gas"]["amounts"][name] == pytest.approx(MADE_UP[name] / (PURGES[index] / 100.0), rel=1e-8)
    nitrogen = 2.0 * MADE_UP["N2"]
    ammonia = streams["chiller.ammonia"]["amounts"]["NH3(l)"]
    purged = streams["purge_point.purge"]["amounts"]
    assert ammonia + 2.0 * purged["N2"] + purged["NH3"] == pytest.approx(nitrogen, rel=1e-9)


def test_heat_of_condensing(run: Run) -> None:
    """Gas cooled by its tables, liquid by the slope of the vapour pressure; 3 %."""
    state = run.state(2)
    streams, steps = state["streams"], state["steps"]
    gas = {name: streams["bed_3"]["amounts"][name] for name in ("N2", "H2", "NH3", "Ar", "CH4")}
    liquid = streams["chiller.ammonia"]["amounts"]["NH3(l)"]
    cooling = hand.total_enthalpy(gas, 273.15) - hand.total_enthalpy(gas, streams["bed_3"]["temperature"])
    wanted = cooling - liquid * loops.heat_of_vaporization("NH3", 273.15)
    assert steps["water_cooler"]["heat"] + steps["chiller"]["heat"] == pytest.approx(wanted, rel=0.03)
    assert loops.heat_of_vaporization("NH3", 298.15) == pytest.approx(22.2e3, rel=0.03)  # as own_species says


def test_what_the_comments_say(run: Run) -> None:
    base = run.state(2)
    nitrogen = base["streams"]["chiller.ammonia"]["amounts"]["NH3(l)"] / (2.0 * MADE_UP["N2"])
    assert nitrogen == pytest.approx(0.915, abs=0.001)
    passed = 1.0 - base["streams"]["bed_3"]["amounts"]["N2"] / base["streams"]["loop_gas"]["amounts"]["N2"]
    assert passed == pytest.approx(1.0 / 3.0, abs=0.02)
    inerts = [figure(run.state(i), "bed_1", "ammonia", "inerts_inlet") for i in range(5)]
    assert (round(100.0 * inerts[0]), round(100.0 * inerts[4])) == (18, 8)
    ends = [base["streams"][f"bed_{k}"]["temperature"] - 273.15 for k in (1, 2, 3)]
    assert [round(T) for T in ends] == [500, 450, 424]
    assert 100.0 * loops.saturation("NH3", 273.15) / 142.0 == pytest.approx(3.05, abs=0.06)
    loop = [state["streams"]["loop_gas"]["amount"] for state in run.data["states"]]
    assert loop == sorted(loop, reverse=True)
    for k in (1, 2, 3):
        assert figure(base, f"bed_{k}", "ammonia", "ammonia_approach") == pytest.approx(15.0, abs=1e-6)
