"""Held enthalpy, entropy, internal energy and volume: refusals, plateaus with analytic answers, laws, round trips."""

from functools import cache

import numpy as np
import pytest
from hypothesis import assume, given
from hypothesis import strategies as st
from proof import prove

from gibbsmin.constants import R
from gibbsmin.errors import InputError, NotCertified, UnitError
from gibbsmin.states.batch import Batch
from gibbsmin.states.solve import equilibria, equilibrium
from gibbsmin.states.state import State
from gibbsmin.states.system import System
from gibbsmin.thermo.database import load
from gibbsmin.thermo.record import Species

BAR = 1.0e5


def proved(state: State, feed: dict[str, float]) -> bool:
    """Judge a state at its own T and P, which proves it for what is held as well."""
    system = state.system
    n, lam = state.amounts_array, state.element_potentials_array
    return prove(system, state.temperature, state.pressure, system.feed(feed), n, lam).holds and state.certificate.ok


# ------------------------------------------------------------------------------------------- what is refused

AIR = System.from_species("O2 N2 NO O")
AIR_FEED = {"O2": 0.21, "N2": 0.79}
VALUES = {
    "temperature": 1000.0,
    "pressure": BAR,
    "volume": 0.1,
    "enthalpy": 2.0e4,
    "internal_energy": 1.5e4,
    "entropy": 230.0,
}


@pytest.mark.parametrize(
    ("held", "words"),
    [
        ("", ["nothing cannot be held"]),
        ("temperature", ["temperature cannot be held"]),
        ("volume", ["volume cannot be held"]),
        ("temperature pressure volume", ["pressure and temperature and volume cannot be held"]),
        ("temperature entropy", ["entropy and temperature", "may be two or none"]),
        ("temperature enthalpy", ["enthalpy and temperature", "hardly depends on pressure"]),
        ("temperature internal_energy", ["internal_energy and temperature", "hardly depends on volume"]),
        ("enthalpy entropy", ["enthalpy and entropy", "pressure and temperature would both"]),
        ("pressure volume", ["pressure and volume", "several answers"]),
        ("volume enthalpy", ["enthalpy and volume", "hold internal_energy"]),
        ("pressure internal_energy", ["internal_energy and pressure", "hold enthalpy"]),
        ("enthalpy internal_energy", ["enthalpy and internal_energy cannot be held"]),
        ("internal_energy entropy", ["entropy and internal_energy cannot be held"]),
    ],
)
def test_what_cannot_be_held_is_refused_with_the_reason(held: str, words: list[str]) -> None:
    conditions = {name: VALUES[name] for name in held.split()}
    for call in (
        lambda: equilibrium(AIR, AIR_FEED, **conditions),
        lambda: equilibria(AIR, element_amounts=AIR.feed(AIR_FEED), **conditions),
    ):
        with pytest.raises(InputError) as caught:
            call()
        message = str(caught.value)
        assert all(word in message for word in words), message
        for pair in ("temperature and pressure", "enthalpy and pressure", "entropy and volume"):
            assert pair in message  # what would be right


@pytest.mark.parametrize(
    ("conditions", "error", "words"),
    [
        ({"enthalpy": "100 K", "pressure": BAR}, UnitError, ["enthalpy", "100 K"]),
        ({"enthalpy": "100 J/K", "pressure": BAR}, UnitError, ["enthalpy", "100 J/K"]),
        ({"entropy": "100 J", "pressure": BAR}, UnitError, ["entropy", "100 J"]),
        ({"internal_energy": "3 bar", "volume": 1.0}, UnitError, ["internal_energy", "3 bar"]),
        ({"temperature": 300.0, "volume": "3 kg"}, UnitError, ["volume", "3 kg"]),
        ({"enthalpy": float("nan"), "pressure": BAR}, InputError, ["enthalpy", "nan"]),
        ({"entropy": float("inf"), "pressure": BAR}, InputError, ["entropy", "inf"]),
        ({"internal_energy": 1.0e4, "volume": 0.0}, InputError, ["volume", "0"]),
        ({"temperature": 300.0, "volume": -1.0}, InputError, ["volume", "-1"]),
        ({"enthalpy": 1.0e4, "pressure": -1.0}, InputError, ["pressure", "-1"]),
        ({"temperature": 3.0e4, "volume": 1.0}, InputError, ["temperature", "20000"]),
    ],
)
def test_wrong_values_are_named(conditions: dict[str, object], error: type[Exception], words: list[str]) -> None:
    with pytest.raises(error) as caught:
        equilibrium(AIR, AIR_FEED, **conditions)  # type: ignore[arg-type]
    assert all(word in str(caught.value) for word in words), str(caught.value)


@pytest.mark.parametrize(
    ("low", "high", "other"),
    [
        ({"enthalpy": -1.0e9}, {"enthalpy": 1.0e9}, {"pressure": BAR}),
        ({"entropy": 1.0}, {"entropy": 1.0e5}, {"pressure": BAR}),
        ({"internal_energy": -1.0e9}, {"internal_energy": 1.0e9}, {"volume": 0.1}),
        ({"entropy": -1.0e3}, {"entropy": 1.0e5}, {"volume": 0.1}),
    ],
)
def test_beyond_all_data(low: dict[str, float], high: dict[str, float], other: dict[str, float]) -> None:
    for system, feed in ((AIR, AIR_FEED), (System.from_elements("C H O N"), {"CH4": 1.0, "O2": 2.0, "N2": 7.52})):
        with pytest.raises(NotCertified, match=r"below all data.*Give more heat or entropy"):
            equilibrium(system, feed, **low, **other)
        with pytest.raises(NotCertified, match=r"above all data.*Give less heat or entropy"):
            equilibrium(system, feed, **high, **other)


@pytest.mark.parametrize(
    ("text", "plain"),
    [
        ({"enthalpy": "100 kJ", "pressure": "1 bar"}, {"enthalpy": 1.0e5, "pressure": BAR}),
        ({"entropy": "0.28 kJ/K", "pressure": "2 bar"}, {"entropy": 280.0, "pressure": 2.0e5}),
        ({"internal_energy": "0.05 MJ", "volume": "10 L"}, {"internal_energy": 5.0e4, "volume": 0.010}),
        ({"temperature": "726.85 degC", "volume": "500 cm3"}, {"temperature": 1000.0, "volume": 5.0e-4}),
    ],
)
def test_kJ_are_a_thousand_J(text: dict[str, str], plain: dict[str, float]) -> None:
    one, other = equilibrium(AIR, AIR_FEED, **text), equilibrium(AIR, AIR_FEED, **plain)  # type: ignore[arg-type]
    assert one.temperature == pytest.approx(other.temperature, rel=1.0e-12)
    assert one.pressure == pytest.approx(other.pressure, rel=1.0e-12)


# ------------------------------------------------------------------------------------------- plateaus


def crossing(high: list[Species], low: list[Species], between: tuple[float, float], p: float = 1.0) -> float:
    """Temperature at which the two sides have one G, gases at ``p`` bar."""

    def excess(T: float) -> float:
        G = [[one.gibbs_energy(T) + R * T * np.log(p) * (not one.condensed) for one in side] for side in (high, low)]
        return float(sum(G[0]) - sum(G[1]))

    left, right = between
    assert excess(left) > 0.0 > excess(right)
    while right - left > 1.0e-13 * right:
        middle = 0.5 * (left + right)
        left, right = (middle, right) if excess(middle) > 0.0 else (left, middle)
    return 0.5 * (left + right)


CHANGES = {
    "ice melts": ("H2O(s)", "H2O(l)", (250.0, 300.0), "H2O"),
    "water boils": ("H2O(l)", "H2O", (350.0, 400.0), "H2O(s)"),
    "aluminium melts": ("Al(s)", "Al(l)", (900.0, 960.0), ""),
    "alumina melts": ("Al2O3(s):alpha", "Al2O3(l)", (2300.0, 2350.0), ""),
    "limestone burns": ("CaCO3(s):calcite", "CaO(s) CO2", (1100.0, 1200.0), ""),
    "ammonium chloride sublimes": ("NH4Cl(s)", "NH3 HCl", (500.0, 700.0), ""),
}


@pytest.mark.parametrize("share", [1.0e-9, 1.0e-3, 0.25, 0.5, 0.999, 1.0 - 1.0e-9])
@pytest.mark.parametrize("held", ["enthalpy", "entropy"])
@pytest.mark.parametrize("change", CHANGES)
def test_plateau_by_the_lever_rule(change: str, held: str, share: float) -> None:
    """Between the two sides T is that of the change, and the share that has changed follows from H or S alone."""
    before, after, between, more = CHANGES[change]
    low, high = load().get(before), [load().get(name) for name in after.split()]
    system = System.from_species([before, *after.split(), *more.split()])
    gases = [one for one in high if not one.condensed]
    x = 1.0 / max(len(gases), 1)  # mole fraction of each gas, at 1 bar
    T = crossing(high, [low], between, x)

    def value(species: Species) -> float:
        mixing = 0.0 if species.condensed else -R * np.log(x)
        return float(species.enthalpy(T) if held == "enthalpy" else species.entropy(T) + mixing)

    wanted = (1.0 - share) * value(low) + share * sum(value(one) for one in high)
    state = equilibrium(system, {before: 1.0}, pressure=BAR, **{held: wanted})
    assert proved(state, {before: 1.0})
    assert state.temperature == pytest.approx(T, rel=1.0e-9)
    assert getattr(state, held) == pytest.approx(wanted, rel=1.0e-9)
    assert state.amounts[before] == pytest.approx(1.0 - share, abs=1.0e-8)
    for one in high:
        assert state.amounts[one.name] == pytest.approx(share, abs=1.0e-8)


@pytest.mark.parametrize("share", [0.0, 0.1, 0.5, 0.9])
@pytest.mark.parametrize("break_at", [1184.0, 1665.0])
def test_iron_between_two_crystal_forms_of_one_record(break_at: float, share: float) -> None:
    """Alpha to gamma, gamma to delta: T stays at the jump of H inside the record."""
    iron = load().get("Fe(s)")
    below, above = iron.enthalpy(break_at), iron.enthalpy(np.nextafter(break_at, 2000.0))
    assert above - below > 500.0
    system = System.from_species(["Fe(s)", "Fe(l)", "Fe"])
    wanted = below + share * (above - below)
    state = equilibrium(system, {"Fe(s)": 1.0}, enthalpy=wanted, pressure=BAR)
    assert state.certificate.ok
    assert state.temperature == pytest.approx(break_at, rel=1.0e-6)
    assert state.enthalpy == pytest.approx(wanted, rel=1.0e-9)
    assert state.amounts["Fe(s)"] == pytest.approx(1.0, rel=1.0e-9)
    assert state.entropy == pytest.approx(iron.entropy(break_at) + (wanted - below) / break_at, rel=1.0e-7)


@pytest.mark.parametrize("T", [320.0, 400.0, 550.0])
@pytest.mark.parametrize("share", [1.0e-4, 0.3, 0.999])
def test_wet_steam_in_a_vessel(T: float, share: float) -> None:
    """A vessel of water and steam: pressure is that of saturation, the quality follows from the volume."""
    liquid, vapour = load().get("H2O(l)"), load().get("H2O")
    p = BAR * np.exp((liquid.gibbs_energy(T) - vapour.gibbs_energy(T)) / (R * T))
    V = share * R * T / p
    U = share * (vapour.enthalpy(T) - R * T) + (1.0 - share) * liquid.enthalpy(T)
    S = share * (vapour.entropy(T) - R * np.log(p / BAR)) + (1.0 - share) * liquid.entropy(T)
    system = System.from_species(["H2O", "H2O(l)", "H2O(s)"])
    for second in ({"temperature": T}, {"internal_energy": U}, {"entropy": S}):
        state = equilibrium(system, {"H2O": 1.0}, volume=V, **second)
        assert proved(state, {"H2O": 1.0})
        assert state.temperature == pytest.approx(T, rel=1.0e-9)
        assert state.pressure == pytest.approx(p, rel=1.0e-8)
        assert state.volume == pytest.approx(V, rel=1.0e-12)
        assert state.amounts["H2O"] == pytest.approx(share, rel=1.0e-7)


@pytest.mark.parametrize("T", [800.0, 950.0, 1100.0, 1500.0])
def test_graphite_under_its_oxides(T: float) -> None:
    """C + CO2 = 2 CO at 2 bar: x_CO is a root of x^2 P/(1 - x) = K, and so is the enthalpy known."""
    system = System.from_species(["C(s):graphite", "CO", "CO2", "O2"])
    carbon, monoxide, dioxide = (load().get(name) for name in ("C(s):graphite", "CO", "CO2"))
    drop = carbon.gibbs_energy(T) + dioxide.gibbs_energy(T) - 2.0 * monoxide.gibbs_energy(T)
    k = np.exp(drop / (R * T)) / 2.0
    x = 2.0 * k / (k + np.sqrt(k * k + 4.0 * k))
    gas = 1.0 / (2.0 - x)  # 1 mol of oxygen atoms
    soot = 3.0 - gas
    H = gas * (x * monoxide.enthalpy(T) + (1.0 - x) * dioxide.enthalpy(T)) + soot * carbon.enthalpy(T)
    feed = {"C(s):graphite": 3.0, "O2": 0.5}
    state = equilibrium(system, feed, enthalpy=H, pressure=2.0e5)
    assert proved(state, feed)
    assert state.temperature == pytest.approx(T, rel=1.0e-8)
    assert state.amounts["C(s):graphite"] == pytest.approx(soot, rel=1.0e-8)
    assert state.mole_fractions["CO"] == pytest.approx(x, rel=1.0e-7)


# ------------------------------------------------------------------------------------------- laws

SCANS = {
    "iron to its vapour": ("Fe Fe(s) Fe(l)", {"Fe(s)": 1.0}, 0.0, 5.0e5),
    "limestone": ("Ca CaO CaO(s) CaO(l) CaCO3(s):calcite CO2 CO O2", {"CaCO3(s):calcite": 1.0}, -1.2e6, -3.0e5),
    "alumina": ("Al2O3(s):alpha Al2O3(l) Al Al(s) Al(l) AlO Al2O O O2", {"Al2O3(s):alpha": 1.0}, -1.65e6, 1.5e6),
    "water": ("H2O H2O(l) H2O(s) H2 O2 OH H O", {"H2O": 1.0}, -2.93e5, 5.0e5),
    "methane in air": ("CH4 CO CO2 C(s):graphite H2 H2O H2O(l) O2 N2 NO OH H O",
                       {"CH4": 1.0, "O2": 1.0, "N2": 3.76}, -3.0e5, 1.0e6),
}  # fmt: skip


@pytest.mark.parametrize("volume", [False, True], ids=["pressure", "volume"])
@pytest.mark.parametrize("name", SCANS)
def test_entropy_is_concave_in_energy_with_slope_1_over_T(name: str, volume: bool) -> None:
    """DS = dH/T at held P, dS = dU/T at held V: between neighbours dS/dH lies between their 1/T, plateaus included."""
    species, feed, low, high = SCANS[name]
    system, energy = System.from_species(species.split()), np.linspace(low, high, 800)
    if volume:
        batch = equilibria(system, element_amounts=system.feed(feed), internal_energy=energy, volume=0.05)
    else:
        batch = equilibria(system, element_amounts=system.feed(feed), enthalpy=energy, pressure=BAR)
    assert batch.certified.all(), [(energy[i], batch.reason[i]) for i in np.flatnonzero(~batch.certified)[:3]]
    T, S = batch.temperature, batch.entropy
    found = batch.internal_energy if volume else batch.enthalpy
    assert found == pytest.approx(energy, rel=1.0e-9, abs=1.0e-6)
    assert (np.diff(T) >= -1.0e-9 * T[1:]).all()
    slope = np.diff(S) / np.diff(energy)
    slack = 1.0e-7 / T[1:]
    assert (slope <= 1.0 / T[:-1] + slack).all()
    assert (slope >= 1.0 / T[1:] - slack).all()
    given = {"volume": 0.05} if volume else {"pressure": BAR}
    again = equilibria(system, element_amounts=system.feed(feed), entropy=S, **given)
    assert again.certified.all()
    assert again.temperature == pytest.approx(T, rel=1.0e-7)


AMOUNTS = st.lists(
    st.one_of(st.just(0.0), st.integers(1, 4).map(float), st.floats(-8.0, 0.0).map(lambda e: 10.0**e)),
    min_size=5,
    max_size=5,
).filter(any)
TEMPERATURES = st.floats(280.0, 5500.0)
PRESSURES = st.floats(3.0, 8.0).map(lambda e: 10.0**e)


@cache
def all_species() -> System:
    return System.from_elements("C H O N S")


def at(b: list[float], **held: float) -> State:
    return equilibria(all_species(), element_amounts=b, **held).state(0)  # type: ignore[arg-type]


@given(AMOUNTS, TEMPERATURES, PRESSURES)
def test_round_trips(b: list[float], T: float, P: float) -> None:
    """From T and P to what they make, held, and back."""
    first = at(b, temperature=T, pressure=P)
    ways = [{"enthalpy": first.enthalpy, "pressure": P}, {"entropy": first.entropy, "pressure": P}]
    if first.gas_amount > 1.0e-6 * first.amounts_array.sum():
        V = first.volume
        ways += [{"temperature": T, "volume": V}, {"entropy": first.entropy, "volume": V}]
        ways += [{"internal_energy": first.internal_energy, "volume": V}]
    for held in ways:
        state = at(b, **held)
        assert state.temperature == pytest.approx(T, rel=1.0e-6), held
        assert state.pressure == pytest.approx(P, rel=1.0e-6), held
        assert state.gibbs_energy == pytest.approx(first.gibbs_energy, rel=1.0e-6, abs=R * T * 1.0e-6 * sum(b))
        for name, value in held.items():
            assert getattr(state, name) == pytest.approx(value, rel=1.0e-8, abs=1.0e-8 * R * T * sum(b))


@given(AMOUNTS, AMOUNTS, TEMPERATURES, TEMPERATURES, PRESSURES)
def test_two_streams_mix_without_losing_energy_or_entropy(
    b: list[float], c: list[float], T: float, U: float, P: float
) -> None:
    """At one pressure: the enthalpies add up, and the entropy of the mixture is at least the sum."""
    one, other = at(b, temperature=T, pressure=P), at(c, temperature=U, pressure=P)
    both = [x + y for x, y in zip(b, c, strict=True)]
    H = one.enthalpy + other.enthalpy
    mixed = at(both, enthalpy=H, pressure=P)
    assert mixed.enthalpy == pytest.approx(H, rel=1.0e-9, abs=1.0e-6 * sum(both))
    least = one.entropy + other.entropy
    assert mixed.entropy >= least - 1.0e-8 * R * sum(both)
    assert prove(all_species(), mixed.temperature, P, both, mixed.amounts_array, mixed.element_potentials_array).holds


@given(AMOUNTS, AMOUNTS, TEMPERATURES, TEMPERATURES, PRESSURES, PRESSURES)
def test_two_vessels_joined(b: list[float], c: list[float], T: float, U: float, P: float, Q: float) -> None:
    """The internal energies and volumes add up, and the entropy is at least the sum."""
    one, other = at(b, temperature=T, pressure=P), at(c, temperature=U, pressure=Q)
    both = [x + y for x, y in zip(b, c, strict=True)]
    V = one.volume + other.volume
    assume(min(one.gas_amount, other.gas_amount) > 1.0e-6 * sum(both))
    energy = one.internal_energy + other.internal_energy
    joined = at(both, internal_energy=energy, volume=V)
    assert joined.internal_energy == pytest.approx(energy, rel=1.0e-9, abs=1.0e-6 * sum(both))
    assert joined.volume == pytest.approx(V, rel=1.0e-9)
    assert joined.entropy >= one.entropy + other.entropy - 1.0e-8 * R * sum(both)


@given(AMOUNTS, TEMPERATURES, PRESSURES, st.floats(-9.0, 9.0))
def test_temperature_stays_where_everything_is_scaled(b: list[float], T: float, P: float, exponent: float) -> None:
    scale, first = 10.0**exponent, at(b, temperature=T, pressure=P)
    state = at([scale * x for x in b], enthalpy=scale * first.enthalpy, pressure=P)
    assert state.temperature == pytest.approx(T, rel=1.0e-6)


def test_a_batch_is_its_states() -> None:
    system, feed = System.from_elements("C H O N"), {"CH4": 1.0, "O2": 2.0, "N2": 7.52}
    H, P = np.linspace(-7.0e5, 4.0e5, 12), np.geomspace(1.0e4, 1.0e7, 12)
    batch: Batch = equilibria(system, element_amounts=system.feed(feed), enthalpy=H, pressure=P)
    assert batch.certified.all()
    for i in range(12):
        state = equilibrium(system, feed, enthalpy=H[i], pressure=P[i])
        assert state.temperature == pytest.approx(batch.temperature[i], rel=1.0e-9)
        assert batch.state(i).entropy == pytest.approx(state.entropy, rel=1.0e-9)
