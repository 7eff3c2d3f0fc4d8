"""All zeros of a smooth function over a range: a scan, a look at every turning point, then a safeguarded Newton."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import Any, Final

import numpy as np

_POINTS: Final = 400
_STEPS: Final = 200
_EXACT: Final = 1e-12  # relative, of a zero
_ONE: Final = 1e-6  # relative; zeros closer than that are one

Function = Callable[[Any], Any]


def zeros(function: Function, slope: Function, low: float, high: float, breaks: Sequence[float] = ()) -> list[float]:
    """Find where ``function`` changes its sign.

    Parameters
    ----------
    function, slope : callable
        Take arrays; ``slope`` is the derivative.
    low, high : float
        Range that is searched.
    breaks : sequence of float
        Where ``slope`` may jump.

    Returns
    -------
    list of float
        In rising order.

    Notes
    -----
    Two zeros between neighbouring points of the scan are found by the turning point that must lie between them.

    Examples
    --------
    >>> [round(x, 9) for x in zeros(lambda x: (x - 2.0) * (x - 2.001), lambda x: 2.0 * x - 4.001, 1.0, 9.0)]
    [2.0, 2.001]
    """
    inside = [x for x in breaks if low < x < high]
    points = np.unique(
        np.concatenate((np.geomspace(low, high, _POINTS), inside, [np.nextafter(x, np.inf) for x in inside]))
    ).clip(low, high)
    f, df = function(points), slope(points)
    found: list[float] = []
    for k in range(len(points) - 1):
        a, b = float(points[k]), float(points[k + 1])
        if (f[k] >= 0.0) != (f[k + 1] >= 0.0):
            found.append(_zero(function, slope, a, b))
        elif df[k] * df[k + 1] < 0.0 and df[k] * f[k] < 0.0:  # it turns in between, on its way to zero
            turn = _halved(slope, a, b)
            if (function(turn) >= 0.0) != (f[k] >= 0.0):
                found += [_zero(function, slope, a, turn), _zero(function, slope, turn, b)]
    apart: list[float] = []
    for x in found:
        if not apart or x - apart[-1] > _ONE * x:
            apart.append(x)
    return apart


def _zero(function: Function, slope: Function, a: float, b: float) -> float:
    """Newton from the middle of a bracket; halved where a step would leave it."""
    rising = bool(function(b) >= 0.0)
    x = 0.5 * (a + b)
    for _ in range(_STEPS):
        value, steep = float(function(x)), float(slope(x))
        a, b = (a, x) if (value >= 0.0) == rising else (x, b)
        step = x - value / steep if steep else a
        following = step if a < step < b else 0.5 * (a + b)
        if abs(following - x) <= _EXACT * x:
            return following
        x = following
    return x


def _halved(function: Function, a: float, b: float) -> float:
    """Where ``function`` changes sign, by halving alone."""
    rising = bool(function(b) >= 0.0)
    while b - a > _EXACT * b:
        middle = 0.5 * (a + b)
        a, b = (a, middle) if (function(middle) >= 0.0) == rising else (middle, b)
    return 0.5 * (a + b)
