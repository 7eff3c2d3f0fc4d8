"""Run as a script: how the time of a state grows with their number, on two processors, and against bare arithmetic.

The argument is ``numbers``, ``processors`` or ``arithmetic``. States are those of methane in air of
`problems.methane_in_air` at held T. The last line is JSON.
"""

from __future__ import annotations

import json
import sys
from collections.abc import Callable
from concurrent.futures import ThreadPoolExecutor
from statistics import median
from time import perf_counter, process_time

import numba
import numpy as np
from problems import methane_in_air

from gibbsmin.solver.exponential import exponentials
from gibbsmin.states.batch import Batch
from gibbsmin.states.solve import equilibria

NUMBERS = (1_000, 10_000, 100_000, 1_000_000)
MOST = 2_000_000
"""States solved of each number in all: a small number is solved the more often."""
ROUNDS = 7


def states(count: int) -> tuple[Callable[[slice], Batch], int]:
    """Return a function that solves a part of so many unrelated states, and how many there are."""
    problem = methane_in_air("TP")
    times = -(-count // len(problem.feeds))
    b = np.tile(problem.feeds @ problem.system.element_matrix.T, (times, 1))[:count]
    T, P = (np.tile(problem.conditions[name], times)[:count] for name in ("temperature", "pressure"))

    def solve(part: slice) -> Batch:
        return equilibria(problem.system, element_amounts=b[part], temperature=T[part], pressure=P[part])

    return solve, count


def numbers() -> dict[str, list[float]]:
    """Seconds of the processor a state, of every call, by the number of states; what is repeated is the same 1000."""
    problem = methane_in_air("TP")
    few = NUMBERS[0]
    first = problem.feeds[:few] @ problem.system.element_matrix.T
    found: dict[str, list[float]] = {str(count): [] for count in NUMBERS}
    for _ in range(3):
        for count in NUMBERS:
            b = np.tile(first, (count // few, 1))
            T, P = (np.tile(problem.conditions[name][:few], count // few) for name in ("temperature", "pressure"))
            for _ in range(max(1, min(MOST // 3 // count, 100))):
                start = process_time()
                batch = equilibria(problem.system, element_amounts=b, temperature=T, pressure=P)
                found[str(count)].append((process_time() - start) / count)
                assert batch.certified.all()
                del batch
    return found


def processors() -> dict[str, list[float]]:
    """Seconds by the clock of 100,000 states, all by one thread and halves by two, in alternating rounds."""
    solve, count = states(100_000)
    halves = [slice(0, count // 2), slice(count // 2, count)]
    found: dict[str, list[float]] = {"one": [], "two": []}
    with ThreadPoolExecutor(2) as pool:
        list(pool.map(solve, halves))
        for _ in range(ROUNDS):
            start = perf_counter()
            solve(slice(count))
            found["one"].append(perf_counter() - start)
            start = perf_counter()
            list(pool.map(solve, halves))
            found["two"].append(perf_counter() - start)
    return found


@numba.njit(fastmath={"reassoc", "contract", "nsz"}, error_model="numpy")
def bare(steps: int, u: np.ndarray, n: np.ndarray, row: np.ndarray, nu: np.ndarray, H: np.ndarray, bits: np.ndarray) -> None:
    """Do the least that a Newton step can be: an exponential a species, and one triangle of the matrix of eq. (6)."""
    raw = bits.view(np.float64)
    for _ in range(steps):
        u[0] = -1.0 / (1.0 + H[0, 0])  # each step waits for the one before
        exponentials(u.size, u, n, raw, bits)
        for p in range(nu.shape[0]):
            for j in range(u.size):
                row[j] = nu[p, j] * n[j]
            for q in range(p + 1):
                total = 0.0
                for j in range(u.size):
                    total += row[j] * nu[q, j]
                H[p, q] = total


def arithmetic() -> dict[str, list[float] | float]:
    """Seconds of a bare step and of a state, in alternating rounds, and Newton steps a state.

    Argon is not in the feed, which leaves 52 species and 4 elements.
    """
    solve, count = states(2_000)
    S, E, steps = 52, 4, 20_000
    rng = np.random.default_rng(3)
    u, nu = rng.uniform(-30.0, 0.0, S), rng.integers(-2, 4, (E, S)).astype(float)
    arrays = (u, np.zeros(S), np.zeros(S), nu, np.zeros((E, E)), np.zeros(S, np.int64))
    bare(1, *arrays)
    taken = float(solve(slice(count)).steps.mean())
    found: dict[str, list[float] | float] = {"steps": taken}
    bare_times, own_times = [], []
    for _ in range(2 * ROUNDS):
        start = process_time()
        bare(steps, *arrays)
        bare_times.append((process_time() - start) / steps)
        start = process_time()
        solve(slice(count))
        own_times.append((process_time() - start) / count)
    ratio = median(own / (taken * step) for own, step in zip(own_times, bare_times, strict=True))
    return {**found, "bare": bare_times, "own": own_times, "ratio": ratio}


if __name__ == "__main__":
    print(json.dumps({"numbers": numbers, "processors": processors, "arithmetic": arithmetic}[sys.argv[1]]()))
