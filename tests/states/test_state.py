"""What a state tells: properties, potentials, how far absent phases are, and what its answer rests on."""

import numpy as np
import pytest

from gibbsmin.constants import R
from gibbsmin.states.certificate import Certificate
from gibbsmin.states.solve import equilibrium
from gibbsmin.states.state import State
from gibbsmin.states.system import System
from gibbsmin.thermo.database import load


@pytest.fixture(scope="module")
def reformer() -> State:
    feed = {"CH4": 1.0, "H2O": 0.9}
    return equilibrium(System.from_elements("C H O N"), feed, temperature=950.0, pressure=5.0e5)


def test_properties_are_sums_over_the_species(reformer: State) -> None:
    T, P = reformer.temperature, reformer.pressure
    H = S = 0.0
    for record, n, x in zip(reformer.system.records, reformer.amounts, reformer.mole_fractions, strict=True):
        if n > 0.0:
            mixing = 0.0 if record.condensed else R * np.log(x * P / 1.0e5)
            H += n * record.enthalpy(T)
            S += n * (record.entropy(T) - mixing)
    assert reformer.enthalpy == pytest.approx(H, rel=1.0e-12)
    assert reformer.entropy == pytest.approx(S, rel=1.0e-12)
    assert reformer.gibbs_energy == pytest.approx(H - T * S, rel=1.0e-12)
    assert reformer.volume == pytest.approx(reformer.phase_amounts["gas"] * R * T / P, rel=1.0e-14)
    assert reformer.internal_energy == pytest.approx(H - P * reformer.volume, rel=1.0e-12)


def test_mass_is_that_of_the_feed(reformer: State) -> None:
    feed = load().get("CH4").molar_mass + 0.9 * load().get("H2O").molar_mass
    assert reformer.mass == pytest.approx(feed, rel=1.0e-12)
    assert reformer.density == pytest.approx(feed / reformer.volume, rel=1.0e-12)
    gas = feed - reformer.amounts["C(s):graphite"] * load().get("C(s):graphite").molar_mass
    assert reformer.mean_molar_mass == pytest.approx(gas / reformer.gas_amount, rel=1.0e-12)


def test_potentials_of_all_species_come_from_those_of_the_elements(reformer: State) -> None:
    lam = reformer.element_potentials
    mu = reformer.ln_activity + reformer.system.standard_potentials(reformer.temperature)
    assert mu["CO2"] == pytest.approx(lam["C"] + 2.0 * lam["O"], rel=1.0e-12)
    x, P = reformer.mole_fractions, reformer.pressure
    assert reformer.ln_activity["H2"] == pytest.approx(np.log(x["H2"] * P / 1.0e5), abs=1.0e-9)
    assert reformer.ln_activity["C(s):graphite"] == pytest.approx(0.0, abs=1.0e-9)  # it is there


def test_ln_activity_is_finite_for_the_rarest_and_infinite_only_without_its_element(reformer: State) -> None:
    assert reformer.element_potentials["N"] == -np.inf
    holds_N = reformer.system.element_matrix[reformer.system.elements.index("N")] != 0.0
    assert (reformer.ln_activity[holds_N] == -np.inf).all()
    assert np.isfinite(reformer.ln_activity[~holds_N]).all()
    assert not reformer.amounts[holds_N].any()
    assert reformer.ln_activity["C5"] < -50.0


def test_an_equilibrium_constant_comes_out(reformer: State) -> None:
    """CO + H2O = CO2 + H2 by the activities and by the data."""
    a = reformer.ln_activity
    G = {name: load().get(name).gibbs_energy(950.0) for name in ("CO", "H2O", "CO2", "H2")}
    ln_K = -(G["CO2"] + G["H2"] - G["CO"] - G["H2O"]) / (R * 950.0)
    assert a["CO2"] + a["H2"] - a["CO"] - a["H2O"] == pytest.approx(ln_K, abs=1.0e-9)


def test_affinity_of_an_absent_liquid_is_the_logarithm_of_its_saturation() -> None:
    system = System.from_species("N2 H2O H2O(l)")
    vapour, liquid = load().get("H2O"), load().get("H2O(l)")
    T = 330.0
    p_sat = 1.0e5 * np.exp((liquid.gibbs_energy(T) - vapour.gibbs_energy(T)) / (R * T))
    for saturation in (1.0e-3, 0.5, 1.0 - 1.0e-9):
        feed = {"H2O": saturation * p_sat, "N2": 1.0e5 - saturation * p_sat}
        state = equilibrium(system, feed, temperature=T, pressure=1.0e5)
        assert state.amounts["H2O(l)"] == 0.0
        assert state.affinities["H2O(l)"] == pytest.approx(np.log(saturation), abs=1.0e-9)
    wet = equilibrium(system, {"H2O": 1.001 * p_sat, "N2": 1.0e5 - p_sat}, temperature=T, pressure=1.0e5)
    assert wet.amounts["H2O(l)"] > 0.0
    assert "H2O(l)" not in wet.affinities
    assert wet.mole_fractions["H2O"] == pytest.approx(p_sat / 1.0e5, rel=1.0e-9)


def test_affinity_of_an_absent_gas() -> None:
    """Water under pressure: the logarithm of its vapour pressure over the pressure; zero at boiling."""
    system = System.from_species("H2O H2O(l)")
    vapour, liquid = load().get("H2O"), load().get("H2O(l)")
    T = 400.0
    p_sat = 1.0e5 * np.exp((liquid.gibbs_energy(T) - vapour.gibbs_energy(T)) / (R * T))
    for factor in (1.0 + 1.0e-9, 2.0, 1.0e3):
        state = equilibrium(system, {"H2O": 1.0}, temperature=T, pressure=factor * p_sat)
        assert state.phase_amounts["gas"] == 0.0
        assert state.volume == 0.0
        assert state.density == np.inf
        assert state.mean_molar_mass == pytest.approx(liquid.molar_mass, rel=1.0e-12)
        assert state.affinities["gas"] == pytest.approx(-np.log(factor), abs=1.0e-9)
    assert equilibrium(system, {"H2O": 1.0}, temperature=T, pressure=0.999 * p_sat).amounts["H2O(l)"] == 0.0


def test_affinities_are_in_order_and_leave_out_what_data_do_not_allow() -> None:
    system = System.from_elements("C H O")
    state = equilibrium(system, {"CH4": 1.0, "O2": 2.0}, temperature=1500.0, pressure=1.0e5)
    values = state.affinities.to_numpy()
    assert (np.diff(values) <= 0.0).all()
    assert "H2O(s)" not in state.affinities  # ice at 1500 K
    assert "C(s):graphite" in state.affinities


def test_a_system_of_solids_only() -> None:
    system = System.from_species("CaO(s) SiO2(s) CaSiO3(s) Ca2SiO4(s)")
    state = equilibrium(system, {"CaO(s)": 1.5, "SiO2(s)": 1.0}, temperature=1000.0, pressure=1.0e5)
    assert state.amounts[["CaSiO3(s)", "Ca2SiO4(s)"]].to_numpy() == pytest.approx(0.5, rel=1.0e-12)
    assert "gas" not in state.phase_amounts
    assert state.entropy == pytest.approx(0.5 * sum(load().get(s).entropy(1000.0) for s in ("CaSiO3(s)", "Ca2SiO4(s)")))


def test_a_species_beyond_its_data_is_named() -> None:
    system = System.from_elements("N", ions=False)
    assert equilibrium(system, {"N2": 1.0}, temperature=3000.0, pressure=1.0e5).warnings == []
    (hot,) = equilibrium(System.from_species("N2"), {"N2": 1.0}, temperature=9000.0, pressure=1.0e5).warnings
    assert "N2 is used at 9000 K" in hot
    assert "6000 K" in hot
    quartz = System.from_species("O2 SiO2(s)")
    (warning,) = equilibrium(quartz, {"SiO2(s)": 1.0, "O2": 1.0}, temperature=2100.0, pressure=1.0e5).warnings
    assert "SiO2(s) is used at 2100 K" in warning


def test_traces_beyond_their_data_are_no_warning() -> None:
    """Carbonic acid and the like are traces in a flame; only what is above 1e-6 of the whole is named."""
    state = equilibrium(System.from_elements("C H O N"), {"CH4": 1.0, "O2": 2.0}, temperature=298.15, pressure=1.0e5)
    assert state.warnings == []


@pytest.mark.parametrize(
    ("figures", "ok"),
    [((1e-11, 1e-9, 1e-9), True), ((1e-9, 0.0, 0.0), False), ((0.0, 1e-7, 0.0), False), ((0.0, 0.0, 1e-7), False)],
)
def test_certificate_judges_each_of_its_figures(figures: tuple[float, float, float], ok: bool) -> None:
    certificate = Certificate(*figures)
    assert certificate.ok is ok
    assert str(certificate).startswith("certified" if ok else "NOT certified")
