"""Run as a script with NUMBA_DISABLE_JIT=1: what the solver does as plain Python, printed as JSON.

Its parts are callable from compiled code only, so this is also where a part is looked at by itself.
"""

import json
import sys
from typing import Any

import numpy as np

from gibbsmin.solver.candidates import select_candidates
from gibbsmin.solver.layout import BASIS, IDLE, KIND, C, new_work
from gibbsmin.solver.simplex import optimal_basis
from gibbsmin.states.solve import equilibria
from gibbsmin.states.system import System


def states(question: dict[str, Any]) -> list[dict[str, Any]]:
    """Solve states; arguments of `equilibria` by name."""
    system = System.from_elements(question["elements"])
    batch = equilibria(system, element_amounts=question["b"], temperature=question["T"], pressure=question["P"])
    found = zip(batch.certified, batch.amounts, batch.element_potentials, strict=True)
    return [{"certified": bool(ok), "n": n.tolist(), "lam": lam.tolist()} for ok, n, lam in found]


def programmes(question: dict[str, Any]) -> list[dict[str, Any]]:
    """Solve linear programmes min g.n, A n = b, n >= 0 by the solver's simplex."""
    answers = []
    for A, b, g in question["programmes"]:
        A, b, g = np.array(A, float), np.array(b, float), np.array(g, float)
        work = new_work(A)
        with np.errstate(over="ignore", invalid="ignore"):
            select_candidates(A, np.ones(A.shape[1], bool), b, g, work)
            found = optimal_basis(False, A, b, g, 0.0, work)
        n = np.zeros(A.shape[1])
        for place in range(b.size):
            if found and work.what[KIND, place] != IDLE:
                n[work.species[work.what[BASIS, place]]] = work.at[C, place]
        answers.append({"found": bool(found), "n": n.tolist()})
    return answers


if __name__ == "__main__":
    asked = json.load(sys.stdin)
    json.dump({"states": states, "programmes": programmes}[asked["what"]](asked), sys.stdout)
