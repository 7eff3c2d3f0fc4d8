"""Run as a script: where the time of a state goes, by part of the solver; unrelated states, and along a sweep.

Each part is timed by itself in a compiled loop on the arrays that a settled state of methane in air leaves, then
multiplied with how often a state needs it. What is left is what the parts do not cover: the start from the last state,
branches, copies, and the call from Python.
"""

from __future__ import annotations

from collections.abc import Callable
from functools import partial
from time import process_time
from typing import Any

import numpy as np
from problems import methane_in_air, methane_sweep

from gibbsmin.compiled import compiled
from gibbsmin.solver.basis import basis_amounts, exact_prices
from gibbsmin.solver.candidates import same_candidates
from gibbsmin.solver.certificate import element_residual, optimality
from gibbsmin.solver.energy import potentials
from gibbsmin.solver.gas import activities, worst_balance
from gibbsmin.solver.layout import GIBBS, HIGH, LOW, RIGHT, WIDTH, T, Work, new_work
from gibbsmin.solver.minimize import minimize_many
from gibbsmin.solver.newton import assemble, newton_error, scale, solve, step_length
from gibbsmin.solver.outcome import Outcome, close_balances, collect, finish, new_outcome
from gibbsmin.solver.phase_set import poor_place, start_phases, wanted_change
from gibbsmin.solver.simplex import optimal_basis
from gibbsmin.thermo.table import Table

STEP, ROUND, STATE, START = "each Newton step", "each look at the gas", "each state", "each start from nothing"
PARTS = (
    ("standard potentials at T", STATE),
    ("prices of the basis", STATE),
    ("amounts of the basis", STATE),
    ("the same candidates?", STATE),
    ("linear programme", START),
    ("start of the phases", START),
    ("exponentials and balances", ROUND),
    ("worst balance, errors", ROUND),
    ("does a phase come or go?", ROUND),
    ("matrix", STEP),
    ("its solution", STEP),
    ("length of the step", STEP),
    ("collecting the amounts", STATE),
    ("closing the balances", STATE),
    ("proof: the gap and affinities", STATE),
    ("proof: the element balances", STATE),
    ("totals, beside the proof", STATE),
)
LOOPS = 20_000


@compiled
def repeat(
    part: int, count: int, A: Any, gas: Any, b: Any, P: float, at: float, table: Table, w: Work, out: Outcome
) -> None:
    """Do one part of the solver ``count`` times."""
    for k in range(count):
        if part == 0:
            w.value[T] = at + 0.001 * k
            potentials(table, gas, w)
        elif part == 1:
            exact_prices(w.std[GIBBS], w)
        elif part == 2:
            basis_amounts(w.b, w)
        elif part == 3:
            w.value[LOW] = same_candidates(w.b, w.std[GIBBS], w)
        elif part == 4:
            optimal_basis(True, A, w.b, w.std[GIBBS], 0.0, w)
        elif part == 5:
            start_phases(w)
        elif part == 6:
            activities(w)
        elif part == 7:
            w.value[LOW], w.value[HIGH] = worst_balance(w), newton_error(w)
        elif part == 8:
            w.value[LOW], w.value[HIGH] = poor_place(w), wanted_change(1.0e-3, w.b, w)
        elif part == 9:
            w.value[LOW] = assemble(w)
        elif part == 10:
            size = assemble(w) + 1
            scale(size, w)
            w.value[LOW] = solve(w.matrix, w.at[RIGHT], size)
        elif part == 11:
            w.value[LOW] = step_length(4, w)
        elif part == 12:
            collect(1.0, A, w, out.n[0], out.lam[0])
        elif part == 13:
            close_balances(b, w, out.n[0])
        elif part == 14:
            w.value[LOW], w.value[HIGH], w.value[WIDTH] = optimality(A, gas, b, w.std[GIBBS], out.n[0], out.lam[0], w)
        elif part == 15:
            w.value[LOW] = element_residual(A, b, out.n[0])
        elif part == 16:
            finish(A, gas, b, P, at, table, w, 0, out)


def timed(work: Callable[[], object]) -> float:
    start = process_time()
    work()
    return process_time() - start


def parts() -> list[float]:
    """Time of each part, [s]: the least of five rounds."""
    problem = methane_sweep(1)
    system, P, at = problem.system, 1.0, 1800.0
    A, S, m = system.element_matrix, len(system.species), len(system.elements)
    b = A @ problem.feeds
    w, out = new_work(A), new_outcome(1, S, m)

    one, two, none = np.array([P]), np.array([at]), np.zeros((1, S))

    def settled() -> None:
        minimize_many(A, system.gas, b[None, :].copy(), 0, False, one, two, none, system.table, w, out)

    took = []
    for part in range(len(PARTS)):
        arguments = (A, system.gas, b, P, at, system.table, w, out)
        settled()
        repeat(part, 1, *arguments)
        rounds = []
        for _ in range(5):
            settled()
            rounds.append(timed(partial(repeat, part, LOOPS, *arguments)) / LOOPS)
        took.append(min(rounds))
    took[10] -= took[9]  # the matrix has to be made anew for each solution
    took[16] -= took[14] + took[15]
    return took


def main() -> None:
    took = parts()
    for title, problem in (("unrelated states", methane_in_air("TP")), ("along a sweep", methane_sweep(1))):
        batch = problem.solve()
        whole = min(timed(problem.solve) for _ in range(9)) / len(batch)
        steps = float(batch.steps.mean())
        often = {STEP: steps, ROUND: steps + 1.0, STATE: 1.0, START: 1.0 if title == "unrelated states" else 0.0}
        print(f"{title}: {1e6 * whole:.2f} us a state, {steps:.2f} Newton steps")
        left = whole
        for (name, when), time in zip(PARTS, took, strict=True):
            share = often[when] * time
            left -= share
            print(f"  {name:32s}{1e6 * time:7.3f} us {when:24s}{100.0 * share / whole:5.1f} %")
        print(f"  {'what is left':68s}{100.0 * left / whole:5.1f} %")


if __name__ == "__main__":
    main()
