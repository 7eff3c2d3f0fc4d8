"""The second law: entropy of feeds, and accounts that never come out negative."""

from functools import cache

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from gibbsmin.constants import R
from gibbsmin.errors import InputError
from gibbsmin.practice.audit import Audit, audit, feed_enthalpy, feed_entropy, least_loss_temperature
from gibbsmin.practice.feeds.heating import heating_value
from gibbsmin.states.solve import equilibria, equilibrium
from gibbsmin.states.system import System
from gibbsmin.thermo.database import load
from gibbsmin.thermo.record import Species


def records(*names: str) -> list[Species]:
    return [load().get(name) for name in names]


def test_entropy_of_a_feed_by_hand() -> None:
    """Humid air and a drop of water: partial pressures in the gas, the liquid as it is."""
    feed = records("N2", "O2", "H2O", "H2O(l)")
    n, T, P = np.array([0.78, 0.21, 0.01, 0.5]), 320.0, 3.0e5
    by_hand = sum(
        amount * (record.entropy(T) - R * np.log(amount / 1.0 * P / 1.0e5))
        for record, amount in zip(feed[:3], n, strict=False)
    )
    by_hand += 0.5 * feed[3].entropy(T)
    assert feed_entropy(feed, n, T, P) == pytest.approx(by_hand, rel=1.0e-12)
    assert feed_enthalpy(feed, n, T) == pytest.approx(sum(a * r.enthalpy(T) for a, r in zip(n, feed, strict=True)))


def test_a_feed_of_one_species_has_its_standard_entropy() -> None:
    """Water 69.95, oxygen 205.15 J/mol/K at 25 °C and 1 bar (CODATA, from memory)."""
    assert feed_entropy(records("H2O(l)"), [2.0], 298.15, 7.0e5) == pytest.approx(2.0 * 69.95, abs=0.1)
    assert feed_entropy(records("O2", "N2"), [1.0, 0.0], 298.15, 1.0e5) == pytest.approx(205.15, abs=0.01)


def test_states_of_a_sweep_at_once() -> None:
    feed = records("CH4", "O2")
    n, T = np.array([[1.0, 2.0], [0.0, 1.0], [0.0, 0.0]]), np.array([300.0, 400.0, 500.0])
    S, H = feed_entropy(feed, n, T, 2.0e5), feed_enthalpy(feed, n, T)
    for i in range(3):
        assert S[i] == pytest.approx(feed_entropy(feed, n[i], T[i], 2.0e5), rel=1.0e-12)
        assert H[i] == pytest.approx(feed_enthalpy(feed, n[i], T[i]), rel=1.0e-12)
    assert S[2] == H[2] == 0.0
    swept = feed_entropy(feed, n[0], 300.0, np.array([1.0e5, 2.0e5]))
    assert swept[0] - swept[1] == pytest.approx(3.0 * R * np.log(2.0), rel=1.0e-12)


@pytest.mark.parametrize("amounts", [[1.0], [1.0, -1.0], [np.inf, 1.0], [[[1.0, 1.0]]]])
def test_bad_amounts(amounts: list[float]) -> None:
    with pytest.raises(InputError, match="amounts"):
        feed_entropy(records("CH4", "O2"), amounts, 300.0, 1.0e5)


def test_methane_burning_in_air() -> None:
    """CH4 and air of ratio 1.15 from 25 °C, 1 bar, adiabatic: 851 J/K and 254 kJ, 31.6 % of the lower heating value.

    From sums over NIST-JANAF tables by another program; fuel and air come in apart.
    """
    air = {"O2": 0.209476, "N2": 0.78084, "Ar": 0.00934, "CO2": 0.000344}
    moles = 1.15 * 2.0 / air["O2"]
    feed = {"CH4": 1.0, **{name: moles * x for name, x in air.items()}}
    system = System.from_elements("C H O N", inert=["Ar"], exclude=["C(s):graphite"])
    fuel, oxidant = (records("CH4"), [1.0]), (records(*air), [moles * x for x in air.values()])
    H = sum(feed_enthalpy(*part, 298.15) for part in (fuel, oxidant))
    S = sum(feed_entropy(*part, 298.15, 1.0e5) for part in (fuel, oxidant))
    state = equilibrium(system, feed, enthalpy=H, pressure=1.0e5)
    lower = heating_value(*fuel).lower
    account = audit(S, state.entropy, 0.0, state.temperature, heating_value=lower)
    assert account.entropy_generated == pytest.approx(851.0, rel=5.0e-3)
    assert account.lost_work == pytest.approx(254.0e3, rel=5.0e-3)
    assert account.lost_work / lower == pytest.approx(0.316, abs=0.002)
    assert account.entropy_of_surroundings == 0.0
    assert account.sentence.startswith("Of the 802.6 kJ of lower heating value of the feeds, 25")
    assert "(31." in account.sentence


ELEMENTS = "C H O N"
FEED = ("CH4", "O2", "N2", "H2O", "CO", "C(s):graphite", "H2O(l)")


@cache
def system() -> System:
    return System.from_elements(ELEMENTS)


@settings(max_examples=80)
@given(
    st.lists(st.one_of(st.just(0.0), st.floats(1.0e-6, 1.0)), min_size=7, max_size=7).filter(any),
    st.lists(st.floats(250.0, 1500.0), min_size=7, max_size=7),
    st.floats(250.0, 3500.0),
    st.floats(3.0, 7.0).map(lambda e: 10.0**e),
    st.floats(1.0, 50.0),
    st.floats(250.0, 350.0),
)
def test_never_negative(n: list[float], temperatures: list[float], T: float, P: float, over: float, T0: float) -> None:
    """Each species its own feed at its own temperature and at the pressure of the state or above."""
    feeds = [([load().get(name)], [amount], t) for name, amount, t in zip(FEED, n, temperatures, strict=True)]
    S = sum(feed_entropy(who, amount, t, over * P) for who, amount, t in feeds)
    H = sum(feed_enthalpy(who, amount, t) for who, amount, t in feeds)
    b = system().feed(dict(zip(FEED, n, strict=True)))
    state = equilibria(system(), element_amounts=b, temperature=T, pressure=P).state(0)
    least = audit(S, state.entropy, state.enthalpy - H, T, source_temperature=T)
    usual = audit(S, state.entropy, state.enthalpy - H, T, surroundings_temperature=T0)
    assert 0.0 <= least.entropy_generated <= usual.entropy_generated * (1.0 + 1.0e-9) + 1.0e-9 * sum(n)
    assert usual.lost_work == pytest.approx(T0 * usual.entropy_generated, rel=1.0e-12)
    excess = H - T * S - state.gibbs_energy
    assert T * least.entropy_generated == pytest.approx(excess, rel=1.0e-6, abs=1.0e-8 * (abs(H) + T * abs(S)))


@settings(max_examples=80)
@given(
    st.lists(st.one_of(st.just(0.0), st.floats(1.0e-6, 1.0)), min_size=7, max_size=7).filter(any),
    st.floats(280.0, 1500.0),
    st.floats(3.0, 7.0).map(lambda e: 10.0**e),
)
def test_never_negative_without_heat(n: list[float], T: float, P: float) -> None:
    """Feeds at one temperature, apart, flow together or are shut in the volume that they fill, and settle."""
    each = [([load().get(name)], [amount]) for name, amount in zip(FEED, n, strict=True)]
    S = sum(feed_entropy(*feed, T, P) for feed in each)
    H = sum(feed_enthalpy(*feed, T) for feed in each)
    b = system().feed(dict(zip(FEED, n, strict=True)))
    V = sum(amount for (record,), (amount,) in each if not record.condensed) * R * T / P
    held: list[dict[str, float]] = [{"enthalpy": H, "pressure": P}]
    if V > 0.0:
        held.append({"internal_energy": H - P * V, "volume": V})
    for pair in held:
        batch = equilibria(system(), element_amounts=b, **pair)
        assert batch.certified.all(), batch.reason
        account = audit(S, batch.entropy[0], 0.0, batch.temperature[0])
        assert account.entropy_generated >= 0.0
        assert account.entropy_of_surroundings == 0.0


def test_expansion_without_loss() -> None:
    """Combustion gas from 20 to 1 bar at held entropy: its work is what its enthalpy falls by, and nothing is lost."""
    feed = {"CH4": 1.0, "O2": 4.0, "N2": 15.0}
    hot = equilibrium(system(), feed, temperature=1800.0, pressure=2.0e6)
    cold = equilibrium(system(), feed, entropy=hot.entropy, pressure=1.0e5)
    account = audit(hot.entropy, cold.entropy, 0.0, cold.temperature, work=cold.enthalpy - hot.enthalpy)
    assert account.entropy_generated == account.lost_work == 0.0
    assert account.work < 0.0


def test_an_equilibrium_fed_with_itself_loses_nothing() -> None:
    state = equilibrium(system(), {"CH4": 1.0, "H2O": 2.0}, temperature=1100.0, pressure=2.0e6)
    S = feed_entropy(state.system.records, state.amounts_array, 1100.0, 2.0e6)
    H = feed_enthalpy(state.system.records, state.amounts_array, 1100.0)
    account = audit(S, state.entropy, state.enthalpy - H, 1100.0)
    assert account.entropy_generated == account.lost_work == 0.0
    assert account.sentence == "No entropy is generated: the step is reversible, and no work is lost."


def test_heat_comes_from_where_it_can() -> None:
    """Taken up: from what is as hot as the state. Given off: to the surroundings."""
    assert least_loss_temperature(1.0e5, 1100.0, 298.15) == 1100.0
    assert least_loss_temperature(-1.0e5, 1100.0, 298.15) == 298.15
    assert least_loss_temperature(1.0e5, 250.0, 298.15) == 298.15
    assert least_loss_temperature(-1.0e5, 250.0, 298.15) == 250.0
    reformer = audit(200.0, 450.0, 2.0e5, 1100.0)
    furnace = audit(200.0, 450.0, 2.0e5, 1100.0, source_temperature=1600.0)
    assert reformer.source_temperature == 1100.0
    assert furnace.entropy_of_surroundings == pytest.approx(-2.0e5 / 1600.0)
    assert furnace.entropy_generated == pytest.approx(250.0 - 125.0)
    assert furnace.lost_work == pytest.approx(298.15 * 125.0)


def test_a_step_that_cannot_happen_says_so() -> None:
    """Heat for a reformer out of surroundings at 25 °C."""
    account = audit(200.0, 450.0, 2.0e5, 1100.0, source_temperature=298.15)
    assert account.entropy_generated < 0.0
    assert account.sentence.startswith("This step cannot happen by itself: entropy would fall by 420.8 J/K")


def test_compression_needs_its_work_in_the_account() -> None:
    """An ideal gas from 1 to 10 bar at 300 K: the work is given off as heat, and nothing is lost."""
    gas = records("N2")
    S = [feed_entropy(gas, [1.0], 300.0, P) for P in (1.0e5, 1.0e6)]
    assert audit(S[0], S[1], 0.0, 300.0).entropy_generated < 0.0
    work = 300.0 * R * np.log(10.0)
    account = audit(S[0], S[1], -work, 300.0, work=work, surroundings_temperature=300.0)
    assert account.entropy_generated == 0.0
    assert account.work == work


def test_rounding_is_zero_and_what_is_more_is_not() -> None:
    assert audit(1000.0, 1000.0 + 1.0e-6, 0.0, 500.0).entropy_generated == 0.0
    assert audit(1000.0, 1000.0 - 1.0e-6, 0.0, 500.0).entropy_generated == 0.0
    assert audit(1000.0, 1000.01, 0.0, 500.0).entropy_generated == pytest.approx(0.01)


def test_flows_are_in_watts() -> None:
    account = audit(1.0e3, 1.9e3, 0.0, 2000.0, flow=True)
    assert account.sentence.startswith("268.3 kW of work that could have been had is lost with surroundings at 25.0 °C")
    assert "900 W/K" in account.sentence
    assert Audit(**account.to_dict()) == account


@pytest.mark.parametrize("wrong", ["surroundings_temperature", "source_temperature"])
@pytest.mark.parametrize("value", [0.0, -5.0, np.nan, np.inf])
def test_temperatures_must_make_sense(wrong: str, value: float) -> None:
    with pytest.raises(InputError, match=wrong):
        audit(1.0, 2.0, 3.0, 500.0, **{wrong: value})
