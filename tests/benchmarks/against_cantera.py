"""Run as a script: time the states of a problem by gibbsmin and by each of Cantera's solvers, in one process.

The argument names one of `problems.PROBLEMS`. To be run with one thread for linear algebra
(``OPENBLAS_NUM_THREADS=1``): Cantera's solver is no faster with two, and the second one, which waits busily, slows
whatever is measured next. Rounds of both alternate, so that a busy machine slows both; a solver that is half as slow
again as the fastest runs in the first round only. Where Cantera does not settle every state, those that it does not are
counted, and time is compared on those that its solver settles. The last line is JSON: seconds a state of every round.
"""

from __future__ import annotations

import json
import sys
from collections import Counter
from collections.abc import Callable, Iterable
from time import process_time
from typing import Any

import cantera as ct
from problems import PROBLEMS, Problem, Way

ROUNDS = 7
CALLS = 5
"""Calls of gibbsmin in a round, because one is so short that the memory and branches that Cantera left count."""
SLOW = 1.5
"""A solver that needs so many times as long as the fastest is not measured again."""


def settle_all(settle: Way, states: Iterable[int]) -> None:
    """Settle states; one on which the solver gives up costs the time until it does."""
    for i in states:
        try:
            settle(i)
        except ct.CanteraError:
            continue


def seconds(work: Callable[[], object]) -> float:
    """Time of this process's one processor: what other processes take does not count."""
    start = process_time()
    work()
    return process_time() - start


def measure(problem: Problem) -> dict[str, Any]:
    """Time all ways; for condensed phases the most reliable of Cantera's ways counts, then the fastest."""
    batch = problem.solve()
    problem.solve_one_by_one()
    states = {name: list(range(problem.few)) for name in problem.ways}
    told: dict[str, dict[str, int]] = {}
    if problem.verdicts is not None:
        for name, settle in problem.ways.items():
            found = problem.verdicts(batch, settle)
            states[name] = [i for i, verdict in enumerate(found) if verdict == "same"]
            told[name] = dict(Counter(found))
    ways = {name: settle for name, settle in problem.ways.items() if len(states[name]) > problem.few / 4}
    own, count = (problem.solve, len(batch)) if problem.one_by_one is None else (problem.solve_one_by_one, problem.few)
    times: dict[str, list[float]] = {"gibbsmin": [], **{name: [] for name in ways}}
    for _ in range(ROUNDS):
        times["gibbsmin"].append(seconds(lambda: [own() for _ in range(CALLS)]) / (CALLS * count))
        for name, settle in ways.items():
            took = seconds(lambda settle=settle, name=name: settle_all(settle, states[name]))  # type: ignore[misc]
            times[name].append(took / len(states[name]))
        first = {name: times[name][0] for name in ways}
        ways = {name: settle for name, settle in ways.items() if first[name] <= SLOW * min(first.values())}
    species = len(problem.system.species)
    gases = int(problem.system.gas.sum())
    return {
        "certified": bool(batch.certified.all()),
        "steps": float(batch.steps.mean()),
        "gases": gases,
        "condensed": species - gases,
        "cantera": ct.__version__,
        "few": problem.few,
        "verdicts": told,
        "times": times,
    }


if __name__ == "__main__":
    print(json.dumps(measure(PROBLEMS[sys.argv[1]]())))
