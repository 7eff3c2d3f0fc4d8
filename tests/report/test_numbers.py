"""Numbers as people read them."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from gibbsmin.report.numbers import figures, level, plain, prefixed, share


@pytest.mark.parametrize(
    ("value", "count", "text"),
    [
        (0.0, 4, "0"),
        (49.4, 4, "49.40"),
        (9.9996, 4, "10.00"),
        (999.96, 4, "1000"),
        (1234567.0, 3, "1230000"),
        (-0.36, 4, "-0.3600"),
        (1e-4, 3, "0.000100"),
        (1e-12, 3, "1.00e-12"),
        (float("nan"), 3, "-"),
        (float("inf"), 3, "-"),
    ],
)
def test_figures(value: float, count: int, text: str) -> None:
    assert figures(value, count) == text


@given(st.floats(-1e300, 1e300).filter(lambda x: abs(x) > 1e-300), st.integers(2, 8))
def test_figures_keep_their_accuracy(value: float, count: int) -> None:
    assert float(figures(value, count)) == pytest.approx(value, rel=0.5001 * 10.0 ** (1 - count))


@given(st.floats(1e-15, 1.0))
def test_shares_read_back(x: float) -> None:
    text = share(x)
    value = float(text.removesuffix(" ppm")) * (1e-6 if text.endswith("ppm") else 1e-2)
    assert value == pytest.approx(x, rel=0.055)


@pytest.mark.parametrize(("x", "text"), [(0.4940, "49.40"), (5e-5, "50.0 ppm"), (2e-8, "0.020 ppm"), (0.0, "0")])
def test_share(x: float, text: str) -> None:
    assert share(x) == text


@pytest.mark.parametrize(("value", "text"), [(6.8e6, "6.800 MW"), (-215e3, "-215.0 kW"), (0.5, "500.0 mW"), (0, "0 W")])
def test_prefixed(value: float, text: str) -> None:
    assert prefixed(value, "W") == text


@pytest.mark.parametrize(("value", "text"), [(870.0, "870"), (-0.001, "0"), (1143.15, "1143.15"), (3.5, "3.5")])
def test_plain(value: float, text: str) -> None:
    assert plain(value) == text


@pytest.mark.parametrize(("x", "text"), [(1e-6, "1 ppm"), (1e-3, "0.1 %"), (5e-9, "0.005 ppm")])
def test_level(x: float, text: str) -> None:
    assert level(x) == text
