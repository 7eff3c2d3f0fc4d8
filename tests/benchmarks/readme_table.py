"""Run as a script: measure everything and rewrite the section on speed in the README.

``python tests/benchmarks/readme_table.py`` takes some five minutes; for figures worth printing the machine must have
nothing else to do. Ratios to Cantera are the middle one of three runs.
"""

from __future__ import annotations

import os
from dataclasses import dataclass
from textwrap import fill

from running import ROOT, Compared, arithmetic, compare, flatness, large_study, two_processors

README = ROOT / "README.md"
BEGIN, END = "<!-- benchmarks -->", "<!-- end of benchmarks -->"
RUNS = 3
LIMIT = 5.0
"""Time of a state over that of the bare arithmetic of its steps that is aimed at."""


@dataclass(frozen=True)
class Row:
    """A row of the table: what the states are, what is held, the ratio aimed at, and what keeps it from more."""

    states: str
    held: str
    goal: float = 0.0
    why: str = ""


ROWS = {
    "unrelated": Row("methane in air, unrelated states", "T, P", 10.0, "a state takes four Newton steps"),
    "one axis": Row(
        "methane in air, 2000 temperatures",
        "T, P",
        30.0,
        "a state takes 1.4 Newton steps instead of 4, but thermodynamic functions, collecting the answer and its proof "
        "take as long as ever; and Cantera too gains from going on where it was",
    ),
    "two axes": Row(
        "methane in air, 50 temperatures at each of 40 pressures",
        "T, P",
        30.0,
        "steps of 30 K still take 2.2 Newton steps, and every row begins from nothing",
    ),
    "flames": Row("methane in air, unrelated flames", "H, P", 40.0, "the energy is one more row of each Newton step"),
    "fuels": Row("C-H-O-N-S, unrelated", "T, P", 50.0),
    "ashes": Row("ash: C-H-O-N-S-Cl-Na-K-Ca-Si, unrelated", "T, P", 50.0),
    "one by one": Row(
        "methane in air, one call of Python a state", "T, P", 1.0, "checks and small arrays outweigh the solution"
    ),
}


def middle(problem: str) -> Compared:
    """Return the middle one of several runs."""
    return sorted((compare(problem) for _ in range(RUNS)), key=lambda run: run.ratio)[RUNS // 2]


def figure(value: float) -> str:
    """Write a number with two digits, or all before the point."""
    return f"{value:.1f}" if value < 10.0 else f"{value:.0f}"


def species(run: Compared) -> str:
    return f"{run.gases}" if not run.condensed else f"{run.gases} + {run.condensed} condensed"


def table(runs: dict[str, Compared]) -> list[str]:
    lines = [
        "| states | held | species | gibbsmin, µs a state | Cantera, µs a state | times as fast |",
        "| --- | --- | --- | --- | --- | --- |",
    ]
    for name, run in runs.items():
        row, solver = ROWS[name], run.solver.replace("_", " ")
        cells = (row.states, row.held, species(run), figure(1e6 * run.own), f"{figure(1e6 * run.theirs)} ({solver})")
        lines.append("| " + " | ".join((*cells, figure(run.ratio))) + " |")
    return lines


def unsettled(runs: dict[str, Compared]) -> list[str]:
    """Say what Cantera did not settle, where some of its solvers fail."""
    words = {
        "same": "as gibbsmin did",
        "given up": "not at all",
        "wrong": "with more than the lowest Gibbs energy",
        "beyond": "with species beyond the range of their data",
    }
    told = []
    for name, run in runs.items():
        if set(run.verdicts) - {"same"}:
            found = ", ".join(f"{run.verdicts[key]} {text}" for key, text in words.items() if key in run.verdicts)
            told.append(
                f"Of {sum(run.verdicts.values())} states of {ROWS[name].states}, Cantera found {found}; times are "
                "compared on the first."
            )
    return told


def missed(runs: dict[str, Compared]) -> list[str]:
    """Say which goals were not met, and why."""
    return [
        f"- {ROWS[name].states}, {ROWS[name].held} held: {figure(run.ratio)} instead of {ROWS[name].goal:.0f} times: "
        f"{ROWS[name].why}."
        for name, run in runs.items()
        if run.ratio < ROWS[name].goal
    ]


def beside() -> list[str]:
    """Measure what has nothing to do with Cantera."""
    spread, numbers = flatness()
    states, bare = max((two_processors() for _ in range(RUNS)), key=lambda pair: pair[1])
    limit = arithmetic()
    few, many, both = large_study(100_000, 1), large_study(1_000_000, 1), large_study(1_000_000, 2)
    first, last = min(numbers), max(numbers)
    told = [
        f"- A state takes {1e6 * numbers[first][0]:.1f} µs in a call of {first:,} states and "
        f"{1e6 * numbers[last][0]:.1f} µs in one of {last:,}; the slowest of four numbers takes "
        f"{100.0 * (spread - 1.0):.0f} % longer than the fastest. In the largest the system takes "
        f"{1e6 * numbers[last][1]:.1f} µs more to hand out memory for the answers.",
        f"- A sweep of 1,000,000 states on disk, with the key figures of a reformer, NetCDF and CSV, takes "
        f"{many.seconds:.0f} s with one process and {both.seconds:.0f} s with two: one alone puts the parts together. "
        f"It takes {many.memory:.0f} MiB, one of 100,000 takes {few.memory:.0f} MiB.",
        f"- Two threads are {states:.1f} times as fast as one; at bare arithmetic they were {bare:.1f} times as fast.",
        f"- A state takes {limit.library:.1f} times as long as the bare arithmetic of its Newton steps in a compiled "
        "loop: one exponential a species and the sums of the matrix. With the exponential in vector instructions it "
        f"is {limit.ratio:.1f} times. `tests/benchmarks/profile_parts.py` tells where the rest goes.",
    ]
    if limit.library > LIMIT:
        told.append(
            f"- We aim at {LIMIT:.0f} times the bare arithmetic. Loops over 52 species and matrices of 5 by 5 are too "
            "short to hide what lies between them, and start and proof take as long as two Newton steps."
        )
    return told


def section() -> str:
    """Measure, and write the section."""
    runs = {name: middle(name) for name in ROWS}
    version = next(iter(runs.values())).cantera
    head = (
        f"Against the fastest solver of Cantera {version}, on the same states with the same thermodynamic data, one "
        f"thread, in one process in turns: the middle of {RUNS} runs, each a median of rounds, on a machine of "
        f"{os.cpu_count()} cores. Every state of gibbsmin is certified in that time."
    )
    lines = ["## Speed", "", wrapped(head), "", *table(runs), ""]
    lines += [wrapped(" ".join(unsettled(runs))), ""] if unsettled(runs) else []
    lines += [wrapped(line) for line in beside()]
    if short := missed(runs):
        lines += ["", "Not reached of what we aim at:", "", *(wrapped(line) for line in short)]
    lines += ["", "`python tests/benchmarks/readme_table.py` measures all of this anew and rewrites this section."]
    return "\n".join(lines)


def wrapped(line: str) -> str:
    return fill(line, 120, subsequent_indent="  " if line.startswith("- ") else "", break_on_hyphens=False)


def main() -> None:
    new = section()
    text = README.read_text(encoding="utf-8")  # only now: it may have been edited meanwhile
    before, rest = text.split(BEGIN)
    after = rest.split(END)[1]
    README.write_text(f"{before}{BEGIN}\n{new}\n{END}{after}", encoding="utf-8")


if __name__ == "__main__":
    main()
