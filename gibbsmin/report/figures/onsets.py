"""Where condensed phases come and go along one input: marks over a panel, between the two states that enclose them."""

from __future__ import annotations

from collections.abc import Sequence
from itertools import pairwise
from typing import Final, NamedTuple

import numpy as np
from matplotlib.axes import Axes

from gibbsmin.report.figures.drawn import number
from gibbsmin.report.figures.quantities import Quantity
from gibbsmin.report.figures.source import Input
from gibbsmin.report.figures.style import FAINT, POINTS, value_with_unit

_ROWS: Final = 3
_LETTER: Final = 0.62  # of the size of letters
_HALF_UNIT: Final = 0.5


class Mark(NamedTuple):
    """A phase that is there on one side only of the interval from ``low`` to ``high``."""

    phase: str
    low: float
    high: float
    appears: bool


def marks_of(one: Input, phases: Sequence[Quantity]) -> list[Mark]:
    """Find the intervals between neighbouring states in which phases come or go.

    Parameters
    ----------
    one : Input
        The input along which the states lie.
    phases : sequence of Quantity
        Amounts, (n,); nan where a state is not certified, and there nothing is told.

    Returns
    -------
    list of Mark
        By phase, then by the input.
    """
    order = np.argsort(one.values, kind="stable")
    found = []
    for phase in phases:
        for i, j in pairwise(order):
            here, there = phase.values[i], phase.values[j]
            if np.isfinite(here) and np.isfinite(there) and (here > 0.0) != (there > 0.0):
                found.append(Mark(phase.label, float(one.values[i]), float(one.values[j]), bool(there > 0.0)))
    return found


def interval(mark: Mark, unit: str) -> str:
    """Write the interval, or one value where it is no wider than a unit.

    Examples
    --------
    >>> interval(Mark("C(s)", 600.0, 620.0, True), "°C"), interval(Mark("C(s)", 600.0, 600.5, True), "°C")
    ('600–620 °C', '600 °C')
    """
    if unit in ("°C", "°F", "K") and mark.high - mark.low <= 1.0:
        return value_with_unit(f"{np.floor(0.5 * (mark.low + mark.high) + _HALF_UNIT - 1e-9):.0f}", unit)
    return value_with_unit(f"{number(mark.low)}–{number(mark.high)}", unit)


def sentence(marks: Sequence[Mark], unit: str) -> str:
    """Tell all marks for the line under a figure; empty where there are none."""
    told = [f"{mark.phase} {'from' if mark.appears else 'up to'} {interval(mark, unit)}" for mark in marks]
    return f"Phases come and go between states: {'; '.join(told)}." if told else ""


def draw_marks(panel: Axes, marks: Sequence[Mark], unit: str) -> None:
    """Draw a thin dashed line at each mark, and name it over the panel; what finds no room is not named.

    Parameters
    ----------
    panel : Axes
        With its limits set, and laid out, so that its size is known.
    marks : sequence of Mark
    unit : str
        Unit of the input, as people write it.
    """
    width = panel.get_window_extent().width * 72.0 / panel.figure.dpi
    size = POINTS - 1.5
    rows: list[float] = [-1e9] * _ROWS
    inverse = panel.transAxes.inverted()
    for mark in sorted(marks, key=lambda mark: mark.low):
        middle = np.sqrt(mark.low * mark.high) if panel.get_xscale() == "log" else 0.5 * (mark.low + mark.high)
        panel.axvline(middle, color=FAINT, linewidth=0.7, linestyle=(0, (4, 3)))
        text = f"{mark.phase} {interval(mark, unit)}"
        half = 0.5 * _LETTER * size * len(text)
        at = float(inverse.transform(panel.transData.transform((middle, 1.0)))[0]) * width
        at = min(max(at, half), max(width - half, half))
        free = [row for row in range(_ROWS) if at - half > rows[row] + 5.0]
        if free:
            rows[free[0]] = at + half
            panel.annotate(
                text, (at / width, 1.0), (0.0, 3.0 + 1.3 * size * free[0]), xycoords="axes fraction",
                textcoords="offset points", ha="center", va="bottom", fontsize=size, color=FAINT,
            )  # fmt: skip
