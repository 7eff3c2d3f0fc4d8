"""Run as a script: solve a large study on disk; how long it takes and how much memory.

Arguments: number of states, number of processes. The last line is JSON: seconds by the clock; the largest memory of
this process, and of its largest child [MiB].
"""

from __future__ import annotations

import json
import resource
import sys
import tempfile
from pathlib import Path
from time import perf_counter

import gibbsmin as gm

CASE = """
title = "Fernhollow Syngas (invented): reformer, a million points"
key_figures = ["reforming"]
[species]
allow = ["CH4", "C2H6", "H2O", "CO", "CO2", "H2", "N2", "NH3"]
[feeds.gas]
mole_percent = {{ CH4 = 90.0, N2 = 10.0 }}
flow = "100 kmol/h"
temperature = "500 degC"
[feeds.steam]
species = "H2O"
steam_to_carbon = 3.0
temperature = "500 degC"
[held]
temperature = "800 degC"
pressure = "20 bar"
[[sweep]]
vary = "held.pressure"
from = "1 bar"
to = "40 bar"
points = {rows}
[[sweep]]
vary = "held.temperature"
from = "600 degC"
to = "1000 degC"
points = 1000
"""


def main() -> None:
    states, workers = int(sys.argv[1]), int(sys.argv[2])
    with tempfile.TemporaryDirectory() as folder:
        case = Path(folder) / "million.toml"
        case.write_text(CASE.format(rows=states // 1000), encoding="utf-8")
        start = perf_counter()
        done = gm.read_case(case).run_into(Path(folder) / "out", workers=workers)
        took = perf_counter() - start
        size = sum(path.stat().st_size for path in (Path(folder) / "out").iterdir())
    memory = [resource.getrusage(who).ru_maxrss / 1024.0 for who in (resource.RUSAGE_SELF, resource.RUSAGE_CHILDREN)]
    print(
        json.dumps(
            {
                "certified": done.all_certified,
                "seconds": took,
                "own memory": memory[0],
                "child memory": memory[1],
                "disk": size,
            }
        )
    )


if __name__ == "__main__":
    main()
