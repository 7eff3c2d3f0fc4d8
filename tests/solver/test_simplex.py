"""The linear programme that gives the start, against HiGHS (Huangfu & Hall, Math. Prog. Comp. 10 (2018) 119)."""

from collections.abc import Callable
from typing import Any

import numpy as np
import pytest
from scipy.optimize import linprog

from gibbsmin.states.system import System

Programme = tuple[np.ndarray, np.ndarray, np.ndarray]


TIGHT = {"primal_feasibility_tolerance": 1.0e-10, "dual_feasibility_tolerance": 1.0e-10}


def real_programmes(count: int) -> list[Programme]:
    """Draw programmes with the species of seven elements: integer feeds for degeneracy, others over three decades."""
    system, rng = System.from_elements("C H O N S Cl Na"), np.random.default_rng(3)
    found = []
    for k in range(count):
        T = float(rng.uniform(300.0, 3000.0))
        b = rng.integers(0, 4, 7).astype(float) if k % 2 else 10.0 ** rng.uniform(-3.0, 0.0, 7)
        b[0] = max(b[0], 1.0)
        usable = np.array([low <= T <= top for low, top in (record.usable for record in system.records)])
        found.append((system.element_matrix[:, usable], b, system.standard_potentials(T)[usable]))
    return found


def answers(in_plain_python: Callable[[dict[str, Any]], Any], programmes: list[Programme]) -> list[dict[str, Any]]:
    data = [[part.tolist() for part in programme] for programme in programmes]
    found: list[dict[str, Any]] = in_plain_python({"what": "programmes", "programmes": data})
    return found


def test_optimum_is_that_of_highs(in_plain_python: Callable[[dict[str, Any]], Any]) -> None:
    programmes = real_programmes(40)
    for (A, b, g), ours in zip(programmes, answers(in_plain_python, programmes), strict=True):
        theirs = linprog(g, A_eq=A, b_eq=b, method="highs", options=TIGHT)
        assert theirs.status == 0
        n = np.array(ours["n"])
        assert ours["found"]
        assert (n >= 0.0).all()
        assert A @ n == pytest.approx(b, rel=1.0e-9)
        assert g @ n == pytest.approx(theirs.fun, rel=1.0e-9)


SPECIES = np.array([[1.0, 1.0, 0.0], [1.0, 2.0, 2.0]])  # CO, CO2, O2


@pytest.mark.parametrize(
    ("columns", "b", "expected"),
    [
        ([0, 1, 2], [1.0, 1.5], [0.5, 0.5, 0.0]),
        ([0, 1, 2], [1.0, 2.0], [0.0, 1.0, 0.0]),  # on a corner
        ([0, 1, 2], [1.0, 5.0], [0.0, 1.0, 1.5]),
        ([0, 1, 2], [1.0, 0.5], None),  # more carbon than CO holds
        ([0, 1], [1.0, 3.0], None),  # more oxygen than CO2 holds
        ([1], [1.0, 2.0], [1.0]),  # one species, two rows: one depends on the other
        ([1], [1.0, 2.1], None),
        ([0, 1, 2], [1.0e-13, 1.0], [0.0, 1.0e-13, 0.5]),  # a trace has a species of its own
    ],
)
def test_small_programmes_by_hand(
    columns: list[int], b: list[float], expected: list[float] | None, in_plain_python: Callable[[dict[str, Any]], Any]
) -> None:
    A, g = SPECIES[:, columns], np.array([-25.0, -50.0, -20.0])[columns]
    (ours,) = answers(in_plain_python, [(A, np.array(b), g)])
    assert ours["found"] is (expected is not None)
    if expected is not None:
        assert ours["n"] == pytest.approx(expected, rel=1.0e-9, abs=1.0e-16)
