"""Heat capacities, expansion and sound speeds of states: against Cantera, differences of states, and plateaus."""

from functools import cache

import cantera as ct
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from gibbsmin.constants import R
from gibbsmin.interop import system_from_cantera
from gibbsmin.states.response import response
from gibbsmin.states.solve import equilibria, equilibrium
from gibbsmin.states.state import State
from gibbsmin.states.system import System

STENCIL, WEIGHTS = np.array([-2.0, -1.0, 1.0, 2.0]), np.array([1.0, -8.0, 8.0, -1.0]) / 12.0
"""Central difference of fourth order: Richardson's extrapolation of two of second order."""


def states_of_gri30(count: int) -> list[tuple[float, float, dict[str, float]]]:
    """Draw states within the range of all species and away from the joins of their data at 1000 K."""
    rng = np.random.default_rng(4)
    found = []
    while len(found) < count:
        T, P = float(rng.uniform(400.0, 2900.0)), float(10.0 ** rng.uniform(3.5, 6.5))
        feed = dict(zip(("CH4", "O2", "N2", "H2O"), rng.uniform(0.05, 1.0, 4).tolist(), strict=True))
        if abs(T - 1000.0) > 20.0:
            found.append((T, P, feed))
    return found


@cache
def gri30() -> tuple[ct.Solution, System]:
    gas = ct.Solution("gri30.yaml")
    return gas, system_from_cantera(gas)


def held(state: State, gas: ct.Solution) -> float:
    """Give Cantera the composition of a state; returns the mass [kg]."""
    gas.TPX = state.temperature, state.pressure, state.amounts_array / state.amounts_array.sum()
    return state.mass


def test_frozen_properties_are_those_of_cantera() -> None:
    gas, system = gri30()
    for T, P, feed in states_of_gri30(20):
        state = equilibrium(system, feed, temperature=T, pressure=P)
        mass = held(state, gas)
        assert state.frozen_heat_capacity == pytest.approx(mass * gas.cp_mass, rel=1.0e-10)
        assert state.frozen_isentropic_exponent == pytest.approx(gas.cp / gas.cv, rel=1.0e-10)
        assert state.frozen_sound_speed == pytest.approx(gas.sound_speed, rel=1.0e-10)


def test_equilibrium_properties_are_differences_of_cantera_states() -> None:
    gas, system = gri30()
    compared = 0
    for T, P, feed in states_of_gri30(30):
        state = equilibrium(system, feed, temperature=T, pressure=P)
        H, S, V = [], [], []
        try:
            for factor_T, factor_P in [*((1.0 + 2.0e-3 * k, 1.0) for k in STENCIL), (1.0, 1.0)]:
                mass = held(state, gas)
                gas.TP = T * factor_T, P * factor_P
                gas.equilibrate("TP", solver="vcs", rtol=1.0e-13, max_steps=1000)
                H.append(mass * gas.enthalpy_mass)
                V.append(mass / gas.density)
            for k in STENCIL:  # along an isentrope, found from that of constant temperature
                mass = held(state, gas)
                gas.SP = gas.entropy_mass, P * (1.0 + 2.0e-3 * k)
                gas.equilibrate("SP", rtol=1.0e-12, max_steps=1000)
                S.append(np.log(gas.density))
        except ct.CanteraError:
            continue
        compared += 1
        assert state.heat_capacity == pytest.approx(WEIGHTS @ H[:4] / (2.0e-3 * T), rel=2.0e-6)
        assert state.thermal_expansion == pytest.approx(WEIGHTS @ np.log(V[:4]) / (2.0e-3 * T), rel=2.0e-6)
        P_of = np.log(1.0 + 2.0e-3 * STENCIL)
        exponent = 1.0 / np.polyfit(P_of, S, 3)[2]
        assert state.isentropic_exponent == pytest.approx(exponent, rel=1.0e-5)
        assert state.sound_speed == pytest.approx(np.sqrt(exponent * P * state.volume / state.mass), rel=1.0e-5)
    assert compared >= 20


CASES = {
    "flame": ("C H O N", {"CH4": 1.0, "O2": 2.0, "N2": 7.52}, 2250.0, 1.0e5),
    "soot": ("C H O N", {"CH4": 1.0, "H2O": 0.9}, 950.0, 5.0e5),
    "wet flue gas": ("C H O N", {"CH4": 1.0, "O2": 2.5, "N2": 9.0}, 310.0, 1.0e5),
    "exact stoichiometry in the cold": ("C H O N", {"CO2": 1.0, "N2": 7.52}, 320.0, 1.0e5),
    "steam that does not fall apart": ("H O", {"H2O": 1.0}, 400.0, 1.0e5),
    "burnt without a rest": ("C H O N S", {"CH4": 1.0, "O2": 2.0, "N2": 7.52, "SO2": 0.1}, 500.0, 1.0e5),
    "sulfur vapour": ("H O N S", {"H2S": 1.0, "O2": 0.5, "N2": 2.0}, 700.0, 1.5e5),
    "steam falls apart": ("H O", {"H2O": 1.0}, 3500.0, 1.0e4),
    "lime over its carbon dioxide": ("C O Ca N", {"CaCO3(s)": 1.0, "N2": 1.0}, 1080.0, 1.0e5),
    "a trace of sulfur": ("C H O N S", {"CH4": 1.0, "O2": 1.0, "N2": 4.0, "SO2": 1.0e-13}, 1240.0, 1.0e5),
}


@pytest.mark.parametrize("name", CASES)
def test_differences_of_states(name: str) -> None:
    elements, feed, T, P = CASES[name]
    system = System.from_elements(elements)
    state = equilibrium(system, feed, temperature=T, pressure=P)
    d = 1.0e-3
    factors = np.concatenate((1.0 + d * STENCIL, np.ones(4)))
    batch = equilibria(
        system, element_amounts=system.feed(feed), temperature=T * factors, pressure=P * np.roll(factors, 4)
    )
    present = state.amounts_array[~system.gas] > 0.0
    assert all(((row > 0.0) == present).all() for row in batch.amounts[:, ~system.gas]), "a phase comes or goes nearby"
    along_T, along_P = slice(0, 4), slice(4, 8)
    Cp = WEIGHTS @ batch.enthalpy[along_T] / (d * T)
    lnV = np.log(batch.volume)
    assert state.heat_capacity == pytest.approx(Cp, rel=1.0e-6)
    assert state.heat_capacity == pytest.approx(WEIGHTS @ batch.entropy[along_T] / d, rel=1.0e-6)
    assert state.thermal_expansion == pytest.approx(WEIGHTS @ lnV[along_T] / (d * T), rel=1.0e-6)
    assert state.compressibility == pytest.approx(-WEIGHTS @ lnV[along_P] / (d * P), rel=1.0e-6)
    # Maxwell: (dS/dP)_T = -(dV/dT)_P, from different states
    maxwell = -WEIGHTS @ batch.entropy[along_P] / (d * P)
    assert state.thermal_expansion * state.volume == pytest.approx(maxwell, rel=1.0e-6)


@pytest.mark.parametrize("name", [*CASES, "boiling water"])
def test_differences_of_states_at_held_volume(name: str) -> None:
    """Cv along T at held V, and the sound speed along V at held S, by states that the solver finds on their own."""
    if name == "boiling water":
        system, feed = System.from_species("H2O H2O(l)"), {"H2O": 1.0}
        state = equilibrium(system, feed, enthalpy=-2.7e5, pressure=1.0e5)
        assert state.heat_capacity == np.inf
    else:
        elements, feed, T, P = CASES[name]
        system = System.from_elements(elements)
        state = equilibrium(system, feed, temperature=T, pressure=P)
    b, d = system.feed(feed), 1.0e-3
    along_T = equilibria(
        system, element_amounts=b, temperature=state.temperature * (1.0 + d * STENCIL), volume=state.volume
    )
    Cv = WEIGHTS @ along_T.internal_energy / (d * state.temperature)
    assert state.heat_capacity_constant_volume == pytest.approx(Cv, rel=1.0e-6)
    along_S = equilibria(system, element_amounts=b, entropy=state.entropy, volume=state.volume * (1.0 + d * STENCIL))
    dP_dlnV = WEIGHTS @ along_S.pressure / d
    assert state.isentropic_exponent == pytest.approx(-dP_dlnV / state.pressure, rel=1.0e-6)
    assert state.sound_speed == pytest.approx(np.sqrt(-dP_dlnV * state.volume / state.mass), rel=1.0e-6)


@pytest.mark.parametrize(
    ("species", "feed", "enthalpy"),
    [
        ("H2O H2O(l)", {"H2O": 1.0}, -2.7e5),
        ("H2O H2O(l) H2O(s)", {"H2O": 1.0}, -2.9e5),
        ("Fe Fe(s) Fe(l)", {"Fe(s)": 1.0}, 6.5e4),
        ("CaO(s) CaCO3(s) CO2", {"CaCO3(s)": 1.0}, -1.0e6),
        ("NH4Cl(s) NH3 HCl N2 H2 Cl2", {"NH4Cl(s)": 1.0}, -2.0e5),
    ],
)
def test_plateaus_that_the_solver_finds(species: str, feed: dict[str, float], enthalpy: float) -> None:
    """More heat, and no higher temperature: boiling, freezing, melting, lime burning, a salt that becomes gases."""
    system = System.from_species(species)
    less, state, more = (
        equilibrium(system, feed, enthalpy=enthalpy + change, pressure=1.0e5) for change in (-500.0, 0.0, 500.0)
    )
    assert less.temperature == pytest.approx(more.temperature, abs=1.0e-6)
    assert state.heat_capacity == np.inf
    assert np.isfinite(state.frozen_heat_capacity)


AMOUNTS = st.lists(st.floats(-10.0, 0.0).map(lambda e: 10.0**e), min_size=5, max_size=5)


@cache
def everything() -> System:
    return System.from_elements("C H O N S")


@settings(max_examples=60)
@given(AMOUNTS, st.floats(280.0, 5000.0), st.floats(2.0, 7.0).map(lambda e: 10.0**e))
def test_identities_and_stability(b: list[float], T: float, P: float) -> None:
    """Cp - Cv = TV alpha^2/kappa and Cp/Cv of the exponents, and what stability asks of every state."""
    state = equilibria(everything(), element_amounts=b, temperature=T, pressure=P).state(0)
    Cp, Cv = state.heat_capacity, state.heat_capacity_constant_volume
    if state.gas_amount == 0.0:
        assert Cp == state.frozen_heat_capacity
        return
    assert Cp >= Cv > 0.0
    assert Cp >= state.frozen_heat_capacity * (1.0 - 1.0e-12)
    if np.isfinite(Cp):
        alpha, kappa = state.thermal_expansion, state.compressibility
        assert Cp - Cv == pytest.approx(T * state.volume * alpha**2 / kappa, rel=1.0e-9, abs=1.0e-12 * Cp)
        assert state.isentropic_exponent == pytest.approx(state.heat_capacity_ratio / (P * kappa), rel=1.0e-9)
    assert 0.0 < state.sound_speed <= state.frozen_sound_speed * (1.0 + 1.0e-12)  # Le Chatelier


@given(st.floats(-6.0, 6.0))
def test_scale(exponent: float) -> None:
    scale = 10.0**exponent
    one, many = (
        equilibrium(everything(), {"CH4": k, "O2": 1.5 * k}, temperature=2000.0, pressure=1.0e5) for k in (1.0, scale)
    )
    assert many.heat_capacity == pytest.approx(scale * one.heat_capacity, rel=1.0e-9)
    assert many.sound_speed == pytest.approx(one.sound_speed, rel=1.0e-9)
    assert many.thermal_expansion == pytest.approx(one.thermal_expansion, rel=1.0e-9)


def test_boiling_water() -> None:
    """Liquid and vapour at once: Cp is infinite, Cv and the sound speed are those of Clapeyron's equation."""
    system = System.from_species(["H2O", "H2O(l)"])
    vapour, liquid = system.records
    T = 373.15
    P = 1.0e5 * np.exp((liquid.gibbs_energy(T) - vapour.gibbs_energy(T)) / (R * T))
    n = np.array([0.3, 0.7])
    H = n @ [vapour.enthalpy(T), liquid.enthalpy(T)]
    found = response(system, T, P, n, float(H))
    L = vapour.enthalpy(T) - liquid.enthalpy(T)
    slope = P * L / (R * T**2)  # dP/dT
    V = 0.3 * R * T / P
    # At constant V: dS/dT = sum n (cp/T - ...) with dn = V d(P/RT)
    dn = V / (R * T) * (slope - P / T)
    Cv = 0.3 * vapour.heat_capacity(T) + 0.7 * liquid.heat_capacity(T) + dn * L - V * slope
    assert found.heat_capacity == np.inf
    assert found.thermal_expansion == np.inf
    assert found.compressibility == np.inf
    assert found.heat_capacity_constant_volume == pytest.approx(Cv, rel=1.0e-9)
    c2 = V**2 * T * slope**2 / Cv / (n @ system.molar_masses)
    assert found.sound_speed == pytest.approx(np.sqrt(c2), rel=1.0e-9)
    assert found.frozen_heat_capacity == pytest.approx(
        0.3 * vapour.heat_capacity(T) + 0.7 * liquid.heat_capacity(T), rel=1.0e-12
    )


def test_melting_and_what_lies_between_two_crystal_forms() -> None:
    system = System.from_species(["Fe(s)", "Fe(l)", "Ar"])
    solid, liquid, argon = system.records
    T = solid.temperature_range[1]
    n = np.array([0.4, 0.6, 2.0])
    H = float(n @ [solid.enthalpy(T), liquid.enthalpy(T), argon.enthalpy(T)])
    found = response(system, T, 1.0e5, n, H)
    assert found.heat_capacity == found.heat_capacity_constant_volume == np.inf
    assert np.isnan(found.thermal_expansion)
    assert found.compressibility == pytest.approx(1.0e-5, rel=1.0e-12)
    assert found.isentropic_exponent == pytest.approx(1.0, rel=1.0e-12)  # as much heat as it takes, so isothermal
    bare = response(system, T, 1.0e5, np.array([0.4, 0.6, 0.0]), H - 2.0 * argon.enthalpy(T))
    assert bare.heat_capacity == np.inf
    assert np.isnan(bare.sound_speed)
    one = np.array([1.0, 0.0, 2.0])
    change = next(a.high for a, b in zip(solid.pieces, solid.pieces[1:], strict=False) if a.form != b.form)
    H = float(one @ [solid.enthalpy(change), 0.0, argon.enthalpy(change)])
    assert np.isfinite(response(system, change, 1.0e5, one, H).heat_capacity)
    assert response(system, change, 1.0e5, one, H + 300.0).heat_capacity == np.inf


def test_without_a_gas() -> None:
    state = equilibrium(System.from_elements("Ca O"), {"CaO(s)": 2.0}, temperature=1000.0, pressure=1.0e5)
    lime = state.system.records[state.system.index["CaO(s)"]]
    assert state.heat_capacity == pytest.approx(2.0 * lime.heat_capacity(1000.0), rel=1.0e-12)
    for name in ("thermal_expansion", "compressibility", "sound_speed", "frozen_sound_speed", "heat_capacity_ratio"):
        assert np.isnan(getattr(state, name))


def test_air_at_room_temperature() -> None:
    """Speed of sound in dry air at 20 °C: 343.2 m/s (textbook value, from memory); Cp/Cv 1.400."""
    system = System.from_species("N2 O2 Ar CO2 NO O")
    air = {"N2": 0.7808, "O2": 0.2095, "Ar": 0.0093, "CO2": 0.0004}
    state = equilibrium(system, air, temperature=293.15, pressure=101325.0)
    assert state.sound_speed == pytest.approx(343.2, abs=0.2)
    assert state.heat_capacity_ratio == pytest.approx(1.400, abs=0.001)
    assert state.heat_capacity / state.mass == pytest.approx(1005.0, abs=2.0)
    assert state.thermal_expansion == pytest.approx(1.0 / 293.15, rel=1.0e-9)
