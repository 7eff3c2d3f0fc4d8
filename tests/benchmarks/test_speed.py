"""How fast: against Cantera on the same states in the same process, one thread; and how long a cold start compiles."""

import os
import subprocess
import sys
from collections.abc import Callable
from pathlib import Path
from time import process_time
from typing import Any

import numpy as np
import pytest
from running import ROOT, arithmetic, compare, flatness, large_study, two_processors

from gibbsmin.states.solve import equilibria
from gibbsmin.states.system import System

TRIES = 3


def best(run: Callable[[], float], least: float) -> float:
    """Return the highest of up to three runs, none after one that reaches ``least``: a busy host slows at random."""
    found = run()
    for _ in range(TRIES - 1):
        if found < least:
            found = max(found, run())
    return found


@pytest.mark.slow
@pytest.mark.parametrize(
    ("problem", "least"),
    [
        ("unrelated", 8.0),
        ("one axis", 20.0),
        ("two axes", 15.0),
        ("flames", 25.0),
        ("fuels", 30.0),
        ("ashes", 30.0),
    ],
)
def test_against_cantera(problem: str, least: float, capsys: pytest.CaptureFixture[str]) -> None:
    """How many times as fast a state is as by the fastest of Cantera's solvers: the best of up to three runs.

    With two axes 20 is aimed at, and 18 to 23 are measured; see the README.
    """

    def ratio() -> float:
        found = compare(problem)
        with capsys.disabled():
            others = ", ".join(f"{name} {1e6 * time:.0f}" for name, time in found.others.items())
            print(f"\n{problem}: {1e6 * found.own:.1f} us a state, Cantera {1e6 * found.theirs:.0f} ({found.solver})")
            print(f"its others: {others} us; verdicts {found.verdicts}; ratio {found.ratio:.1f}")
        return found.ratio

    assert best(ratio, least) >= least


@pytest.mark.slow
def test_one_call_of_python_against_one_of_cantera(capsys: pytest.CaptureFixture[str]) -> None:
    def ratio() -> float:
        found = compare("one by one")
        with capsys.disabled():
            print(f"\none call: {1e6 * found.own:.0f} us, Cantera {1e6 * found.theirs:.0f} us, ratio {found.ratio:.2f}")
        return found.ratio

    assert best(ratio, 1.0) >= 1.0


@pytest.mark.slow
def test_the_time_of_a_state_does_not_grow_with_their_number(capsys: pytest.CaptureFixture[str]) -> None:
    """The program's own time; what the system takes to hand out memory is printed beside it."""

    def evenness() -> float:
        spread, middle = flatness()
        with capsys.disabled():
            told = ", ".join(f"{n}: {1e6 * own:.2f} + {1e6 * system:.2f}" for n, (own, system) in middle.items())
            print(f"\nus a state, program + system: {told}; slowest over fastest {spread:.3f}")
        return 1.0 / spread

    assert best(evenness, 1.0 / 1.1) >= 1.0 / 1.1


@pytest.mark.slow
@pytest.mark.skipif((os.cpu_count() or 1) < 2, reason="one processor")
def test_two_processors(capsys: pytest.CaptureFixture[str]) -> None:
    """1.8 times, where the second processor is free: bare arithmetic tells."""
    found = []
    for _ in range(TRIES):
        found.append(two_processors())
        with capsys.disabled():
            print(f"\ntwo threads: states {found[-1][0]:.2f}, bare arithmetic {found[-1][1]:.2f} times as fast as one")
        if found[-1][0] >= 1.8:
            return
    if all(bare < 1.9 for _, bare in found):
        pytest.skip("the second processor is busy")
    pytest.fail(f"two threads are {max(states for states, _ in found):.2f} times as fast as one, not 1.8")


@pytest.mark.slow
def test_a_state_against_bare_arithmetic(capsys: pytest.CaptureFixture[str]) -> None:
    """At most eight times as long as an ordinary loop over exponentials and sums takes for as many Newton steps."""

    def inverse() -> float:
        found = arithmetic()
        with capsys.disabled():
            print(f"\na state over bare steps: {found.library:.1f}, over vectorised ones {found.ratio:.1f}")
        return 1.0 / found.library

    assert best(inverse, 1.0 / 8.0) >= 1.0 / 8.0


@pytest.mark.slow
def test_memory_does_not_grow_with_the_number_of_states(capsys: pytest.CaptureFixture[str]) -> None:
    """A million states on disk under 1 GiB; no more than 32 MiB above 100,000."""
    few, many = large_study(100_000, 1), large_study(1_000_000, 1)
    with capsys.disabled():
        print(f"\n100,000 states: {few.memory:.0f} MiB, 1,000,000: {many.memory:.0f} MiB in {many.seconds:.0f} s")
    assert many.memory < 1024.0
    assert many.memory < few.memory + 32.0


@pytest.mark.parametrize(
    ("elements", "limit"),
    [("C H O N S", 1.0e-4), ("C H O N S Cl Na K Ca Si", 4.0e-4)],
)
def test_time_of_a_state_with_condensed_phases(
    elements: str, limit: float, benchmark: Any, capsys: pytest.CaptureFixture[str]
) -> None:
    """Limits are three times what one core of a small server took."""
    system, rng = System.from_elements(elements), np.random.default_rng(1)
    b = 10.0 ** rng.uniform(-4.0, 0.0, (1000, len(system.elements)))
    T, P = rng.uniform(300.0, 3000.0, 1000), 10.0 ** rng.uniform(4.0, 7.0, 1000)
    batch = benchmark(equilibria, system, element_amounts=b, temperature=T, pressure=P)
    assert batch.certified.all()
    start = process_time()
    equilibria(system, element_amounts=b, temperature=T, pressure=P)
    time = (process_time() - start) / 1000.0
    with capsys.disabled():
        print(f"\n{system!r}: {1e6 * time:.0f} us a state")
    assert time <= limit


COLD = """
from time import process_time
from typing import Any
from gibbsmin.states.solve import equilibrium
from gibbsmin.states.system import System
system = System.from_species("CH4 H2O CO CO2 H2 C(s):graphite")
start = process_time()
equilibrium(system, {"CH4": 1.0, "H2O": 2.0}, temperature=1000.0, pressure=1e5)
print(process_time() - start)
"""


@pytest.mark.slow
def test_compilation_in_a_fresh_cache(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Everything a case needs compiles within 20 s (12 to 13 on an idle machine); from the cache it takes no time."""
    environment = {**os.environ, "XDG_CACHE_HOME": str(tmp_path), "PYTHONPATH": str(ROOT)}
    times = []
    for _ in range(2):
        done = subprocess.run([sys.executable, "-c", COLD], env=environment, capture_output=True, text=True, check=True)
        times.append(float(done.stdout.split()[-1]))
    with capsys.disabled():
        print(f"\nfirst state: {times[0]:.1f} s with a fresh cache, {times[1]:.2f} s from the cache")
    assert times[0] <= 20.0
    assert times[1] <= 1.0
