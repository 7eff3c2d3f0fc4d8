"""Run as a script: how the time of a state grows with their number, on two processors, and against bare arithmetic.

The argument is ``numbers``, ``processors`` or ``arithmetic``. States are those of methane in air of
`problems.methane_in_air` at held T. The last line is JSON.
"""

from __future__ import annotations

import json
import os
import sys
from collections.abc import Callable
from concurrent.futures import ThreadPoolExecutor
from time import perf_counter, process_time
from typing import Any

import numba
import numpy as np
from problems import methane_in_air

from gibbsmin.solver.exponential import exponentials
from gibbsmin.states.batch import Batch
from gibbsmin.states.solve import equilibria

NUMBERS = (1_000, 10_000, 100_000, 1_000_000)
LEAST = 300_000
"""States of each number that a round solves at least: a small number is solved the more often."""
ROUNDS = 7


def repeated(count: int) -> Callable[[slice], Batch]:
    """Return a function that solves a part of so many states: the same thousand unrelated ones over and over."""
    problem, few = methane_in_air("TP"), NUMBERS[0]
    b = np.tile(problem.feeds[:few] @ problem.system.element_matrix.T, (count // few, 1))
    T, P = (np.tile(problem.conditions[name][:few], count // few) for name in ("temperature", "pressure"))

    def solve(part: slice) -> Batch:
        return equilibria(problem.system, element_amounts=b[part], temperature=T[part], pressure=P[part])

    return solve


def numbers() -> dict[str, list[list[float]]]:
    """Seconds a state in each round, by the number of states in a call: of the program, and of the system.

    The system's share is what it takes to hand out memory, which differs between machines: one that is virtual may have
    to get each page from its host.
    """
    found: dict[str, list[list[float]]] = {str(count): [] for count in NUMBERS}
    solvers = {count: repeated(count) for count in NUMBERS}
    for _ in range(3):
        for count, solve in solvers.items():
            calls = -(-LEAST // count)
            before = os.times()
            for _ in range(calls):
                solve(slice(count))
            after = os.times()
            used = [(after.user - before.user) / (calls * count), (after.system - before.system) / (calls * count)]
            found[str(count)].append(used)
    return found


def processors() -> dict[str, list[float]]:
    """Seconds by the clock, all by one thread and halves by two, in alternating rounds; ``bare`` ones of `step`."""
    count, steps = 100_000, 4_000_000
    solve = repeated(count)
    halves = [slice(0, count // 2), slice(count // 2, count)]
    rooms = [bare_arrays(), bare_arrays()]
    found: dict[str, list[float]] = {name: [] for name in ("one", "two", "bare one", "bare two")}
    with ThreadPoolExecutor(2) as pool:
        works: dict[str, Callable[[], object]] = {
            "one": lambda: solve(slice(count)),
            "two": lambda: list(pool.map(solve, halves)),
            "bare one": lambda: step(steps, False, *rooms[0]),
            "bare two": lambda: list(pool.map(lambda room: step(steps // 2, False, *room), rooms)),
        }
        for work in works.values():
            work()
        for _ in range(ROUNDS):
            for name, work in works.items():
                start = perf_counter()
                work()
                found[name].append(perf_counter() - start)
    return found


@numba.njit(fastmath={"reassoc", "contract", "nsz"}, error_model="numpy", nogil=True)
def step(steps: int, library: bool, u: Any, n: Any, row: Any, nu: Any, H: Any, raw: Any, bits: Any) -> None:
    """Do the least that Newton steps can be: an exponential a species, and one triangle of the matrix of eq. (6)."""
    for _ in range(steps):
        u[0] = -1.0 / (1.0 + abs(H[0, 0]))  # each step waits for the one before
        if library:
            for j in range(u.size):
                n[j] = np.exp(u[j])
        else:
            exponentials(u.size, u, n, raw, bits)
        for p in range(nu.shape[0]):
            for j in range(u.size):
                row[j] = nu[p, j] * n[j]
            for q in range(p + 1):
                total = 0.0
                for j in range(u.size):
                    total += row[j] * nu[q, j]
                H[p, q] = total


def bare_arrays() -> tuple[np.ndarray, ...]:
    """Arrays for `step`. Argon is not in the feed, which leaves 52 species and 4 elements."""
    S, E, rng = 52, 4, np.random.default_rng(3)
    nu, raw = rng.integers(-2, 4, (E, S)).astype(float), np.zeros(S)
    return rng.uniform(-30.0, 0.0, S), np.zeros(S), np.zeros(S), nu, np.zeros((E, E)), raw, raw.view(np.int64)


def arithmetic() -> dict[str, list[float] | float]:
    """Seconds of a state and of bare steps, in alternating rounds, and Newton steps a state.

    ``bare`` takes gibbsmin's own exponential, ``library`` that of the library of C.
    """
    count, steps, room = 2_000, 20_000, bare_arrays()
    solve = repeated(count)
    taken = float(solve(slice(count)).steps.mean())
    works: dict[str, tuple[Callable[[], object], int]] = {
        "own": (lambda: solve(slice(count)), count),
        "bare": (lambda: step(steps, False, *room), steps),
        "library": (lambda: step(steps, True, *room), steps),
    }
    found: dict[str, list[float]] = {name: [] for name in works}
    for work, _ in works.values():
        work()
    for _ in range(2 * ROUNDS):
        for name, (work, times) in works.items():
            start = process_time()
            work()
            found[name].append((process_time() - start) / times)
    return {"steps": taken, **found}


if __name__ == "__main__":
    print(json.dumps({"numbers": numbers, "processors": processors, "arithmetic": arithmetic}[sys.argv[1]]()))
