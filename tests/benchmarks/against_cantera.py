"""Run as a script: time a state of methane in air (gri30, held T and P) by gibbsmin and by each of Cantera's solvers.

To be run with one thread for linear algebra (``OPENBLAS_NUM_THREADS=1``): Cantera's solver is no faster with two, and
the second one, which waits busily, slows whatever is measured next. Rounds of both alternate, so that a busy machine
slows both. Prints JSON: seconds a state of every round.
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
SOLVERS = ("element_potential", "vcs", "gibbs")


def draw(gas: ct.Solution) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """Draw unrelated states: T 300 to 3000 K, P 0.1 to 100 bar, equivalence ratio 0.3 to 3."""
    rng = np.random.default_rng(53)
    X = np.zeros((STATES, gas.n_species))
    X[:, gas.species_index("CH4")] = rng.uniform(0.3, 3.0, STATES)
    X[:, gas.species_index("O2")] = 2.0
    X[:, gas.species_index("N2")] = 7.52
    X /= X.sum(axis=1, keepdims=True)
    return rng.uniform(300.0, 3000.0, STATES), 10.0 ** rng.uniform(4.0, 7.0, STATES), X


def settle(gas: ct.Solution, solver: str, T: np.ndarray, P: np.ndarray, X: np.ndarray) -> None:
    """Set each state and settle it; a state on which the solver gives up costs the time until it does."""
    for t, p, x in zip(T, P, X, strict=True):
        gas.TPX = t, p, x
        try:
            gas.equilibrate("TP", solver=solver, max_steps=200)
        except ct.CanteraError:
            continue


def seconds(work: Callable[[], object]) -> float:
    start = perf_counter()
    work()
    return perf_counter() - start


def main() -> None:
    gas = ct.Solution("gri30.yaml")
    system = system_from_cantera(gas)
    T, P, X = draw(gas)
    batch = equilibria(system, X, temperature=T, pressure=P)
    few = (T[:FEW], P[:FEW], X[:FEW])
    times: dict[str, list[float]] = {"gibbsmin": [], **{solver: [] for solver in SOLVERS}}
    for _ in range(ROUNDS):
        times["gibbsmin"].append(seconds(lambda: equilibria(system, X, temperature=T, pressure=P)) / STATES)
        for solver in SOLVERS:
            times[solver].append(seconds(lambda solver=solver: settle(gas, solver, *few)) / FEW)  # type: ignore[misc]
    json.dump({"certified": bool(batch.certified.all()), "cantera": ct.__version__, "times": times}, sys.stdout)


if __name__ == "__main__":
    main()
