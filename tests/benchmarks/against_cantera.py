"""Run as a script: time a state of methane in air (gri30) by gibbsmin and by each of Cantera's solvers.

The argument says what is held: ``TP``, or ``HP`` with the enthalpy of a feed preheated to at most 1200 K (flames).
To be run with one thread for linear algebra (``OPENBLAS_NUM_THREADS=1``): Cantera's solver is no faster with two, and
the second one, which waits busily, slows whatever is measured next. Rounds of both alternate, so that a busy machine
slows both; a solver that is twice as slow as the fastest runs in the first round only. Prints JSON: seconds a state of
every round.
"""

import json
import sys
from collections.abc import Callable
from time import perf_counter

import cantera as ct
import numpy as np

from gibbsmin.interop import system_from_cantera
from gibbsmin.states.solve import equilibria

STATES, FEW, ROUNDS = 2000, 200, 7
HOTTEST = {"TP": 3000.0, "HP": 1200.0}
"""Temperature up to which states, or feeds, are drawn, [K]."""
SOLVERS = ("element_potential", "vcs", "gibbs")


def draw(gas: ct.Solution, held: str) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """Draw unrelated states: T from 300 K, P 0.1 to 100 bar, equivalence ratio 0.3 to 3."""
    rng = np.random.default_rng(53)
    X = np.zeros((STATES, gas.n_species))
    X[:, gas.species_index("CH4")] = rng.uniform(0.3, 3.0, STATES)
    X[:, gas.species_index("O2")] = 2.0
    X[:, gas.species_index("N2")] = 7.52
    X /= X.sum(axis=1, keepdims=True)
    return rng.uniform(300.0, HOTTEST[held], STATES), 10.0 ** rng.uniform(4.0, 7.0, STATES), X


def settle(gas: ct.Solution, held: str, solver: str, T: np.ndarray, P: np.ndarray, X: np.ndarray) -> None:
    """Set each state and settle it; a state on which the solver gives up costs the time until it does."""
    for t, p, x in zip(T, P, X, strict=True):
        gas.TPX = t, p, x
        try:
            gas.equilibrate(held, solver=solver, max_steps=200)
        except ct.CanteraError:
            continue


def enthalpies(gas: ct.Solution, T: np.ndarray, P: np.ndarray, X: np.ndarray) -> np.ndarray:
    """Enthalpy of a mole of each feed, [J]."""
    H = np.empty(STATES)
    for i in range(STATES):
        gas.TPX = T[i], P[i], X[i]
        H[i] = gas.enthalpy_mole / 1000.0
    return H


def seconds(work: Callable[[], object]) -> float:
    start = perf_counter()
    work()
    return perf_counter() - start


def main() -> None:
    gas = ct.Solution("gri30.yaml")
    system = system_from_cantera(gas)
    held = sys.argv[1]
    T, P, X = draw(gas, held)
    if held == "HP":
        conditions = {"enthalpy": enthalpies(gas, T, P, X), "pressure": P}
    else:
        conditions = {"temperature": T, "pressure": P}
    batch = equilibria(system, X, **conditions)
    few = (T[:FEW], P[:FEW], X[:FEW])
    times: dict[str, list[float]] = {"gibbsmin": [], **{solver: [] for solver in SOLVERS}}
    solvers = list(SOLVERS)
    for _ in range(ROUNDS):
        times["gibbsmin"].append(seconds(lambda: equilibria(system, X, **conditions)) / STATES)
        for solver in solvers:
            times[solver].append(seconds(lambda solver=solver: settle(gas, held, solver, *few)) / FEW)  # type: ignore[misc]
        fastest = min(times[solver][0] for solver in SOLVERS)
        solvers = [solver for solver in SOLVERS if times[solver][0] <= 2.0 * fastest]
    json.dump({"certified": bool(batch.certified.all()), "cantera": ct.__version__, "times": times}, sys.stdout)


if __name__ == "__main__":
    main()
