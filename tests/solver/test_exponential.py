"""The solver's own exponential against the library's."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from gibbsmin.solver.exponential import CEILING, FLOOR, exponentials


def exponential(*values: float) -> np.ndarray:
    """All of it as plain Python."""
    u, raw = np.array(values, float), np.zeros(len(values))
    x = np.zeros(len(values))
    exponentials.py_func(len(values), u, x, raw, raw.view(np.int64))
    return x


@given(st.floats(FLOOR + 1e-6, CEILING))
def test_exact_to_rounding(u: float) -> None:
    assert exponential(u)[0] == pytest.approx(np.exp(u), rel=4.5e-16)


@given(st.integers(-1009, 432))
def test_at_powers_of_two_and_beside_them(k: int) -> None:
    u = k * np.log(2.0)
    values = [np.nextafter(u, -np.inf), u, np.nextafter(u, np.inf), u + 0.5 * np.log(2.0)]
    assert exponential(*values) == pytest.approx(np.exp(values), rel=4.5e-16)


def test_what_is_too_small_is_nothing_and_what_is_too_large_is_cut() -> None:
    assert exponential(-np.inf, FLOOR, -1e300).tolist() == [0.0, 0.0, 0.0]
    assert exponential(np.inf, 1e300) == pytest.approx([np.exp(CEILING)] * 2)
    assert exponential(0.0)[0] == 1.0
