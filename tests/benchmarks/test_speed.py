"""How fast: against Cantera on the same states in the same process, one thread; and how long a cold start compiles."""

import json
import os
import subprocess
import sys
from pathlib import Path
from statistics import median
from time import process_time

import numpy as np
import pytest

from gibbsmin.states.solve import equilibria
from gibbsmin.states.system import System

ROOT = Path(__file__).parents[2]
ONE_THREAD = {f"{library}_NUM_THREADS": "1" for library in ("OMP", "OPENBLAS", "MKL", "NUMBA")}


@pytest.mark.parametrize(("held", "least"), [("TP", 8.0), ("HP", 25.0)])
def test_methane_in_air_against_cantera(held: str, least: float, capsys: pytest.CaptureFixture[str]) -> None:
    """How many times as fast a state is as by the fastest of Cantera's solvers: the best of up to three runs.

    Each run is a median over rounds; a busy host slows the two by unequal shares, so one low run is not believed. The
    ratio at held H and P is near its bar (26 to 30 on an idle machine): look at the figures, not at the verdict.
    """
    ratios: list[float] = []
    while len(ratios) < 3 and max(ratios, default=0.0) < least:
        ratios.append(ratio_to_cantera(held, capsys))
    assert max(ratios) >= least


def ratio_to_cantera(held: str, capsys: pytest.CaptureFixture[str]) -> float:
    """Median over rounds of Cantera's time, by its fastest solver, over ours."""
    done = subprocess.run(
        [sys.executable, str(Path(__file__).parent / "against_cantera.py"), held],
        env={**os.environ, **ONE_THREAD, "PYTHONPATH": str(ROOT)},
        capture_output=True,
        text=True,
        check=True,
    )
    found = json.loads(done.stdout)
    assert found["certified"]
    ours = found["times"].pop("gibbsmin")
    fastest = min(found["times"], key=lambda solver: median(found["times"][solver]))
    ratio = float(median(theirs / own for theirs, own in zip(found["times"][fastest], ours, strict=True)))
    with capsys.disabled():
        others = ", ".join(f"{solver} {1e6 * median(times):.0f}" for solver, times in found["times"].items())
        print(f"\ngri30 CH4/air at held {' and '.join(held)}: {1e6 * median(ours):.1f} us a state")
        print(f"Cantera {found['cantera']}: {others} us")
        print(f"ratio to the fastest ({fastest}): {ratio:.1f}")
    return ratio


@pytest.mark.parametrize(
    ("elements", "limit"),
    [("C H O N S", 1.0e-4), ("C H O N S Cl Na K Ca Si", 4.0e-4)],
)
def test_time_of_a_state_with_condensed_phases(elements: str, limit: float, capsys: pytest.CaptureFixture[str]) -> None:
    """Limits are three times what one core of a small server took."""
    system, rng = System.from_elements(elements), np.random.default_rng(1)
    b = 10.0 ** rng.uniform(-4.0, 0.0, (1000, len(system.elements)))
    T, P = rng.uniform(300.0, 3000.0, 1000), 10.0 ** rng.uniform(4.0, 7.0, 1000)
    assert equilibria(system, element_amounts=b, temperature=T, pressure=P).certified.all()
    start = process_time()
    equilibria(system, element_amounts=b, temperature=T, pressure=P)
    time = (process_time() - start) / 1000.0
    with capsys.disabled():
        print(f"\n{system!r}: {1e6 * time:.0f} us a state")
    assert time <= limit


COLD = """
from time import process_time
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
