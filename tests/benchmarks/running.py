"""Run the scripts of this folder, each in a process of its own with one thread, and sum up what they tell."""

from __future__ import annotations

import json
import os
import subprocess
import sys
from dataclasses import dataclass
from pathlib import Path
from statistics import median
from typing import Any

ROOT = Path(__file__).parents[2]
ONE_THREAD = {f"{library}_NUM_THREADS": "1" for library in ("OMP", "OPENBLAS", "MKL", "NUMBA")}


def script(name: str, *arguments: str) -> dict[str, Any]:
    """Return what a script of this folder prints in its last line."""
    done = subprocess.run(
        [sys.executable, str(Path(__file__).parent / name), *arguments],
        env={**os.environ, **ONE_THREAD, "PYTHONPATH": str(ROOT)},
        stdout=subprocess.PIPE,
        text=True,
        check=True,
    )
    found: dict[str, Any] = json.loads(done.stdout.splitlines()[-1])
    return found


@dataclass(frozen=True)
class Compared:
    """One run of `against_cantera`.

    Attributes
    ----------
    own, theirs : float
        Median over the rounds of the time of a state, [s].
    ratio : float
        Median of the ratio within a round.
    solver : str
        Cantera's fastest.
    others : dict of str to float
        The others, [s].
    gases, condensed : int
        Species.
    verdicts : dict of str to int
        What came of ``solver``'s states, where it does not settle all: how many are the same, given up, wrong, or
        beyond the data.
    cantera : str
        Its version.
    """

    own: float
    theirs: float
    ratio: float
    solver: str
    others: dict[str, float]
    gases: int
    condensed: int
    verdicts: dict[str, int]
    cantera: str


def compare(problem: str) -> Compared:
    """Run `against_cantera` once."""
    found = script("against_cantera.py", problem)
    if not found["certified"]:
        raise RuntimeError(f"not all states of {problem!r} are certified")
    times = found["times"]
    own = times.pop("gibbsmin")
    middle = {solver: median(rounds) for solver, rounds in times.items()}
    solver = min(middle, key=middle.__getitem__)
    return Compared(
        own=median(own),
        theirs=middle.pop(solver),
        ratio=median(theirs / ours for theirs, ours in zip(times[solver], own, strict=True)),
        solver=solver,
        others=middle,
        gases=found["gases"],
        condensed=found["condensed"],
        verdicts=found["verdicts"].get(solver, {}),
        cantera=found["cantera"],
    )


def flatness() -> tuple[float, dict[int, tuple[float, float]]]:
    """Return the least over rounds of slowest over fastest number of states, and medians of each number.

    The medians are times of a state, [s]: of the program, and of the system that hands out memory.
    """
    found = script("own_speed.py", "numbers")
    rounds = zip(*([used[0] for used in found[count]] for count in found), strict=True)
    spread = min(max(each) / min(each) for each in rounds)
    middle = {int(n): (median(u[0] for u in used), median(u[1] for u in used)) for n, used in found.items()}
    return spread, middle


def two_processors() -> tuple[float, float]:
    """Return how many times as fast two threads are as one: at states, and at bare arithmetic; least times each."""
    least = {name: min(rounds) for name, rounds in script("own_speed.py", "processors").items()}
    return least["one"] / least["two"], least["bare one"] / least["bare two"]


@dataclass(frozen=True)
class Arithmetic:
    """A state against bare arithmetic.

    Attributes
    ----------
    step : float
        A bare Newton step, [s].
    ratio : float
        A state over as many bare steps as it takes.
    library : float
        The same with the exponential of the library of C.
    """

    step: float
    ratio: float
    library: float


def arithmetic() -> Arithmetic:
    """Compare a state with bare arithmetic, in one process."""
    found = script("own_speed.py", "arithmetic")
    steps = found.pop("steps")
    ratios = {
        name: median(own / (steps * step) for own, step in zip(found["own"], found[name], strict=True))
        for name in ("bare", "library")
    }
    return Arithmetic(median(found["bare"]), ratios["bare"], ratios["library"])


@dataclass(frozen=True)
class Large:
    """A large study on disk: seconds by the clock, and the memory of all its processes together at most [MiB]."""

    seconds: float
    memory: float


def large_study(states: int, workers: int) -> Large:
    """Solve a large study."""
    found = script("large_study.py", str(states), str(workers))
    if not found["certified"]:
        raise RuntimeError("not all states of the large study are certified")
    children = workers * found["child memory"] if workers > 1 else 0.0
    return Large(found["seconds"], found["own memory"] + children)
