"""The states on which gibbsmin and Cantera are compared, and how Cantera is asked for each of them."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace

import cantera as ct
import numpy as np
from cantera_mixture import mixture_of, verdict

from gibbsmin.interop import system_from_cantera
from gibbsmin.states.batch import Batch
from gibbsmin.states.solve import equilibria, equilibrium
from gibbsmin.states.system import System

Way = Callable[[int], None]
"""Settles state ``i`` by Cantera; raises ``cantera.CanteraError`` if it gives up."""


@dataclass(frozen=True)
class Problem:
    """States, and all ways in which Cantera can settle them.

    Attributes
    ----------
    system : System
    feeds : (states, S) or (S,) array
        [mol].
    conditions : dict of str to array
        What is held.
    ways : dict of str to callable
        Cantera's solvers by name.
    few : int
        How many of the states Cantera settles in each round: the first; along a sweep all.
    verdicts : callable or None
        Given a batch and one of ``ways``, says for each state of Cantera's whether it is the same.
    one_by_one : list of dict or None
        Feeds [mol] of the first ``few`` states, where each is to be solved by a call of its own.
    """

    system: System
    feeds: np.ndarray
    conditions: dict[str, np.ndarray]
    ways: dict[str, Way]
    few: int
    verdicts: Callable[[Batch, Way], list[str]] | None = None
    one_by_one: list[dict[str, float]] | None = None

    def solve(self) -> Batch:
        """Solve all states by gibbsmin in one call."""
        return equilibria(self.system, self.feeds, **self.conditions)

    def solve_one_by_one(self) -> None:
        """Solve the first ``few`` states by a call each."""
        for i, feed in enumerate(self.one_by_one or []):
            equilibrium(self.system, feed, **{name: float(values[i]) for name, values in self.conditions.items()})


def methane_in_air(held: str) -> Problem:
    """Unrelated states of methane in air: P 0.1 to 100 bar, equivalence ratio 0.3 to 3.

    At held T from 300 to 3000 K; at held H that of feeds preheated to 300 to 1200 K (flames).
    """
    gas, rng, states = ct.Solution("gri30.yaml"), np.random.default_rng(53), 2000
    X = np.zeros((states, gas.n_species))
    X[:, gas.species_index("CH4")] = rng.uniform(0.3, 3.0, states)
    X[:, gas.species_index("O2")], X[:, gas.species_index("N2")] = 2.0, 7.52
    X /= X.sum(axis=1, keepdims=True)
    T, P = rng.uniform(300.0, 3000.0 if held == "TP" else 1200.0, states), 10.0 ** rng.uniform(4.0, 7.0, states)

    def way(solver: str) -> Way:
        def settle(i: int) -> None:
            gas.TPX = T[i], P[i], X[i]
            gas.equilibrate(held, solver=solver, max_steps=200)

        return settle

    conditions = {"temperature": T, "pressure": P}
    if held == "HP":
        conditions = {"enthalpy": np.array(list(_enthalpies(gas, T, P, X))), "pressure": P}
    return Problem(system_from_cantera(gas), X, conditions, {name: way(name) for name in SOLVERS}, 200)


SOLVERS = ("element_potential", "vcs", "gibbs")


def one_by_one() -> Problem:
    """Make the unrelated states of `methane_in_air` at held T one call of Python each, with the feed by name."""
    whole, gas = methane_in_air("TP"), ct.Solution("gri30.yaml")
    names = ("CH4", "O2", "N2")
    feeds = [{name: float(x[gas.species_index(name)]) for name in names} for x in whole.feeds[: whole.few]]
    T, P = whole.conditions["temperature"], whole.conditions["pressure"]

    def way(solver: str) -> Way:
        def settle(i: int) -> None:
            gas.TPX = T[i], P[i], feeds[i]
            gas.equilibrate("TP", solver=solver, max_steps=200)

        return settle

    return replace(whole, ways={name: way(name) for name in SOLVERS}, one_by_one=feeds)


def _enthalpies(gas: ct.Solution, T: np.ndarray, P: np.ndarray, X: np.ndarray) -> Iterator[float]:
    """Enthalpy of a mole of each feed, [J]."""
    for t, p, x in zip(T, P, X, strict=True):
        gas.TPX = t, p, x
        yield gas.enthalpy_mole / 1000.0


def methane_sweep(axes: int) -> Problem:
    """Methane in air, equivalence ratio 0.9, over 2000 temperatures, or 50 temperatures at each of 40 pressures.

    Cantera begins each state afresh from the feed, or goes on from where the last one left the gas.
    """
    gas = ct.Solution("gri30.yaml")
    if axes == 1:
        T, P = np.linspace(1000.0, 2500.0, 2000), np.full(2000, 1.0e5)
    else:
        T, P = (np.ravel(a) for a in np.meshgrid(np.linspace(1000.0, 2500.0, 50), np.geomspace(1.0e5, 1.0e7, 40)))
    X = np.zeros(gas.n_species)
    X[[gas.species_index(name) for name in ("CH4", "O2", "N2")]] = 0.9, 2.0, 7.52
    X /= X.sum()

    def way(solver: str, onward: bool) -> Way:
        def settle(i: int) -> None:
            if onward and i > 0:
                gas.TP = T[i], P[i]
            else:
                gas.TPX = T[i], P[i], X
            gas.equilibrate("TP", solver=solver, max_steps=200)

        return settle

    ways = {name: way(name, False) for name in SOLVERS}
    ways |= {f"{name}, from the last state": way(name, True) for name in SOLVERS}
    return Problem(system_from_cantera(gas), X, {"temperature": T, "pressure": P}, ways, len(T))


GASES = 150
FUELS = {"C(s):graphite": (0.2, 2.0), "H2": (0.25, 3.0), "O2": (0.1, 2.0), "N2": (0.01, 2.0), "S2": (0.001, 0.2)}
ASHES = {
    "C(s):graphite": (1.0, 1.0),
    "H2": (0.3, 0.6),
    "O2": (0.2, 1.5),
    "N2": (0.01, 4.0),
    "H2S": (0.001, 0.02),
    "HCl": (0.0005, 0.01),
    "Na2O(s)": (0.0005, 0.01),
    "K2O(s)": (0.0005, 0.01),
    "CaO(s)": (0.0005, 0.02),
    "SiO2(s)": (0.001, 0.05),
}
"""Ranges of what is fed, [mol]; invented."""


def condensed(
    elements: str, gases: int, feed: dict[str, tuple[float, float]], states: int, few: int, solvers: tuple[str, ...]
) -> Problem:
    """Unrelated states of gases (the smaller molecules) and all condensed species: 400 to 2500 K, 1 to 30 bar."""
    records = System.from_elements(elements).records
    kept = sorted((r for r in records if not r.condensed), key=lambda r: sum(r.elements.values()))[:gases]
    system, rng = System([*kept, *(r for r in records if r.condensed)]), np.random.default_rng(1)
    n = np.zeros((states, len(system.species)))
    for name, (low, high) in feed.items():
        n[:, system.index[name]] = rng.uniform(low, high, states)
    T, P = rng.uniform(400.0, 2500.0, states), 10.0 ** rng.uniform(5.0, 6.5, states)
    whole = mixture_of(system)

    def way(solver: str, estimate: int) -> Way:
        def settle(i: int) -> None:
            whole.T, whole.P = T[i], P[i]
            whole.species_moles = n[i] / 1000.0
            whole.equilibrate("TP", solver=solver, estimate_equil=estimate, max_steps=1000)

        return settle

    def verdicts(batch: Batch, settle: Way) -> list[str]:
        found = []
        for i in range(few):
            try:
                settle(i)
            except ct.CanteraError:
                found.append("given up")
                continue
            theirs = 1000.0 * np.array(whole.species_moles)
            found.append(verdict(system, T[i], P[i], batch.element_potentials[i], n[i], theirs))
        return found

    ways = {
        f"{solver}, {'own start' if estimate else 'from the feed'}": way(solver, estimate)
        for solver in solvers
        for estimate in (-1, 0)
    }
    return Problem(system, n, {"temperature": T, "pressure": P}, ways, few, verdicts)


ALL = 10_000

PROBLEMS: dict[str, Callable[[], Problem]] = {
    "unrelated": lambda: methane_in_air("TP"),
    "one axis": lambda: methane_sweep(1),
    "two axes": lambda: methane_sweep(2),
    "flames": lambda: methane_in_air("HP"),
    "one by one": one_by_one,
    "fuels": lambda: condensed("C H O N S", GASES, FUELS, 2000, 60, ("vcs", "gibbs")),
    # "gibbs" settled none of 30 states of ash within 1000 steps
    "ashes": lambda: condensed("C H O N S Cl Na K Ca Si", ALL, ASHES, 1000, 30, ("vcs",)),
}
