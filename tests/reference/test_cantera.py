"""Equilibria at held T and P against Cantera (https://cantera.org), on the thermodynamic data of its own packages.

gibbsmin takes the species over from the Cantera objects, so that both solve the same problem. States lie within the
range that all species of a gas have in common, where no rule for extrapolation enters.
"""

from collections.abc import Callable, Iterator
from typing import NamedTuple

import cantera as ct
import numpy as np
import pytest

from gibbsmin.constants import R
from gibbsmin.interop import system_from_cantera
from gibbsmin.states.batch import Batch
from gibbsmin.states.solve import equilibria

STATES = 300
TRACE = 1.0e-12


def from_elements(elements: str) -> ct.Solution:
    """Take all neutral gases of NASA's collection that are made of some elements."""
    wanted = set(elements.split())
    species = [
        item
        for item in ct.Species.list_from_file("nasa_gas.yaml")
        if item.composition.keys() <= wanted and not item.charge and item.thermo.max_temp >= 5000.0
    ]
    return ct.Solution(thermo="ideal-gas", species=species)


GASES = {
    "gri30": lambda: ct.Solution("gri30.yaml"),  # 53 species, natural gas
    "h2o2": lambda: ct.Solution("h2o2.yaml"),  # with argon and nitrogen
    "nDodecane_Reitz": lambda: ct.Solution("nDodecane_Reitz.yaml", "nDodecane_IG"),  # 100 species
    "SiF4_NH3_mec": lambda: ct.Solution("SiF4_NH3_mec.yaml", "gas"),
    "airNASA9": lambda: ct.Solution("airNASA9.yaml"),  # ions and electrons
    "nasa_gas with sulfur and chlorine": lambda: from_elements("C H O N S Cl"),
}


def draw(rng: np.random.Generator, gas: ct.Solution, states: int) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """Draw temperatures [K], pressures from 1e-2 to 1e2 bar [Pa] and feeds of one to five neutral species."""
    T = rng.uniform(max(gas.min_temp, 200.0), min(gas.max_temp, 6000.0), states)
    P = 10.0 ** rng.uniform(3.0, 7.0, states)
    neutral = np.flatnonzero(gas.charges == 0.0)
    X = np.zeros((states, gas.n_species))
    for x in X:
        chosen = rng.choice(neutral, rng.integers(1, 6))
        x[chosen] = 10.0 ** rng.uniform(-3.0, 0.0, chosen.size)
        x /= x.sum()
    return T, P, X


def settled(gas: ct.Solution, T: float, P: float, x: np.ndarray) -> Iterator[np.ndarray]:
    """Mole fractions by each of Cantera's two accurate solvers that converges.

    Its third, ``gibbs``, ends on some of these states up to a factor of two from what the other two agree on.
    """
    for solver in ("vcs", "element_potential"):
        gas.TPX = T, P, x
        try:
            gas.equilibrate("TP", solver=solver, rtol=1.0e-12, max_steps=500, max_iter=200)
        except ct.CanteraError:
            continue
        yield np.array(gas.X)


def excess(batch: Batch, i: int, P: float, feed: np.ndarray, theirs: np.ndarray) -> float:
    """Gibbs energy of amounts found elsewhere less that of state ``i``, in RT a mole.

    What those amounts leave unbalanced (up to 1e-9 of an element) is charged at the element potentials.
    """
    system, T, lam = batch.system, batch.temperature[i], batch.element_potentials[i]
    here = theirs > 0.0
    ln_a = np.where(system.gas, np.log(P / 1.0e5), 0.0)[here]
    ln_a += np.where(system.gas, np.log(np.maximum(theirs, 1.0e-300) / theirs[system.gas].sum()), 0.0)[here]
    G_RT = theirs[here] @ (system.standard_potentials(T)[here] + ln_a)
    known = np.isfinite(lam)
    G_RT -= lam[known] @ (system.element_matrix @ (theirs - feed))[known]
    return float((G_RT - batch.gibbs_energy[i] / (R * T)) / theirs.sum())


@pytest.mark.parametrize("name", GASES)
def test_mole_fractions_and_gibbs_energy_of_gases(name: str) -> None:
    gas = GASES[name]()
    T, P, X = draw(np.random.default_rng(2024), gas, STATES)
    batch = equilibria(system_from_cantera(gas), X, temperature=T, pressure=P)
    assert batch.certified.all(), [batch.reason[i] for i in np.flatnonzero(~batch.certified)]
    differences = []
    for i in range(STATES):
        n = batch.amounts[i]
        ours = n / n.sum()
        nearest = np.inf
        for theirs in settled(gas, T[i], P[i], X[i]):
            seen = np.maximum(ours, theirs) > TRACE
            nearest = min(nearest, float(abs(ours[seen] / theirs[seen] - 1.0).max()))
            assert excess(batch, i, P[i], X[i], theirs * n.sum()) >= -1.0e-9
        if np.isfinite(nearest):
            differences.append(nearest)
    assert len(differences) >= 0.95 * STATES
    assert max(differences) <= 1.0e-6
    assert np.median(differences) <= 1.0e-9


def test_standard_functions_are_taken_over_exactly() -> None:
    for name in ("gri30", "airNASA9"):
        gas = GASES[name]()
        system = system_from_cantera(gas)
        for T in np.linspace(gas.min_temp, gas.max_temp, 23):
            gas.TP = T, ct.one_atm
            own = np.array([[r.heat_capacity(T) / R, r.enthalpy(T) / (R * T)] for r in system.records])
            assert own[:, 0] == pytest.approx(gas.standard_cp_R, rel=1.0e-12)
            assert own[:, 1] == pytest.approx(gas.standard_enthalpies_RT, rel=1.0e-12)
            at_1_atm = system.standard_potentials(T) + np.log(ct.one_atm / 1.0e5)
            assert at_1_atm == pytest.approx(gas.standard_gibbs_RT, rel=1.0e-12)


class Mixture(NamedTuple):
    """A gas over solids and liquids, and what to draw: temperatures [K] and amounts from 0 to 1 mol of some species."""

    gas: ct.Solution
    condensed: list[ct.Solution]
    low: float
    high: float
    feed: tuple[str, ...]


def from_nasa(elements: str, condensed: list[str], low: float, high: float, feed: tuple[str, ...]) -> Mixture:
    """Take NASA's gases of some elements and some of its condensed species, each a phase without volume."""
    phases = []
    for species in ct.Species.list_from_file("nasa_condensed.yaml"):
        if species.name in condensed:
            data = {"name": species.name, "composition": species.composition, "thermo": species.input_data["thermo"]}
            data["equation-of-state"] = {"model": "constant-volume", "molar-volume": 1.0e-9}
            phases.append(ct.Solution(thermo="fixed-stoichiometry", species=[ct.Species.from_dict(data)]))
    return Mixture(from_elements(elements), phases, low, high, feed)


MIXTURES: dict[str, Callable[[], Mixture]] = {
    "gri30 with graphite": lambda: Mixture(
        ct.Solution("gri30.yaml"), [ct.Solution("graphite.yaml")], 400.0, 2500.0, ("CH4", "C2H6", "O2", "N2")
    ),
    "water, acid, sulfur and soot": lambda: from_nasa(
        "C H O S", ["C(gr)", "H2O(L)", "S(L)", "H2SO4(L)"], 400.0, 600.0, ("H2", "O2", "SO2", "CO")
    ),
    "ash": lambda: from_nasa(
        "C H O S Ca Na Si",
        ["C(gr)", "CaCO3(caL)", "CaO(s)", "CaS(s)", "CaSO4(s)", "Na2CO3(II)", "Na2SO4(I)", "SiO2(hqz)"],
        850.0,
        1120.0,
        ("CH4", "O2", "H2O", "SO2", "Ca", "Na", "Si"),
    ),
}


@pytest.mark.parametrize("name", MIXTURES)
def test_gas_over_condensed_phases(name: str) -> None:
    """Amounts and Gibbs energy at 1 atm, the standard pressure there, so that molar volumes are without effect."""
    mixture = MIXTURES[name]()
    system = system_from_cantera([mixture.gas, *mixture.condensed])
    rng = np.random.default_rng(7)
    cases, compared, present = 50, 0, 0
    for _ in range(cases):
        T = float(rng.uniform(mixture.low, mixture.high))
        feed = {species: float(rng.uniform(0.0, 1.0)) for species in mixture.feed}
        n = np.array([feed.get(species, 0.0) for species in system.species])
        batch = equilibria(system, n, temperature=T, pressure=ct.one_atm)
        assert batch.certified.all()
        theirs = mixture_amounts(mixture, T, feed)
        if theirs is None:
            continue
        compared += 1
        ours = batch.amounts[0]
        present += int((ours[~system.gas] > 0.0).sum())
        assert excess(batch, 0, ct.one_atm, n, theirs) >= -1.0e-9
        assert ours == pytest.approx(theirs, rel=1.0e-5, abs=1.0e-8 * ours.sum())
    assert compared >= 0.8 * cases
    assert present >= 0.2 * compared


def mixture_amounts(mixture: Mixture, T: float, feed: dict[str, float]) -> np.ndarray | None:
    """Amounts [mol] by the first of Cantera's multiphase solvers that converges; None where none does."""
    for solver in ("vcs", "gibbs"):
        mixture.gas.TPX = T, ct.one_atm, feed
        for phase in mixture.condensed:
            phase.TP = T, ct.one_atm
        total = sum(feed.values()) / 1000.0
        whole = ct.Mixture([(mixture.gas, total), *((phase, 0.0) for phase in mixture.condensed)])
        whole.T, whole.P = T, ct.one_atm
        try:
            whole.equilibrate("TP", solver=solver, rtol=1.0e-10, max_steps=3000)
        except ct.CanteraError:
            continue
        return np.array(whole.species_moles) * 1000.0
    return None
