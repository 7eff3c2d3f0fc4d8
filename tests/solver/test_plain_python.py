"""The solver without compilation gives what the compiled one gives: what is debugged is what is run."""

from collections.abc import Callable
from typing import Any

import numpy as np
import pytest

from gibbsmin.states.solve import equilibria
from gibbsmin.states.system import System


def test_plain_python_and_compiled_code_agree(in_plain_python: Callable[[dict[str, Any]], Any]) -> None:
    rng = np.random.default_rng(11)
    system = System.from_elements("C H O N")
    b = np.array(
        [[1.0, 4.0, 4.0, 0.0], [1.0, 4.0, 1.0, 7.0], [2.0, 1.0, 1.0, 1.0e-9], *10.0 ** rng.uniform(-3.0, 0.0, (5, 4))]
    )
    T, P = np.array([300.0, 900.0, 800.0, *rng.uniform(300.0, 4000.0, 5)]), 10.0 ** rng.uniform(3.0, 7.0, 8)
    batch = equilibria(system, element_amounts=b, temperature=T, pressure=P)
    assert batch.certified.all()
    question = {"what": "states", "elements": "C H O N", "b": b.tolist(), "T": T.tolist(), "P": P.tolist()}
    for i, plain in enumerate(in_plain_python(question)):
        assert plain["certified"]
        seen = batch.amounts[i] > 1.0e-18 * batch.amounts[i].sum()
        assert np.array(plain["n"])[seen] == pytest.approx(batch.amounts[i][seen], rel=1.0e-7)
