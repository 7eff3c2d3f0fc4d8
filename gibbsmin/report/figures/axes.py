"""Axes: linear or logarithmic, their titles and ticks, and lines on them."""

from __future__ import annotations

import textwrap
from collections.abc import Sequence
from typing import Any, Final

import numpy as np
from matplotlib.axes import Axes
from matplotlib.axis import Axis, XAxis
from matplotlib.ticker import FuncFormatter, LogLocator, MaxNLocator, NullFormatter, NullLocator
from numpy.typing import NDArray

from gibbsmin.report.figures.drawn import number
from gibbsmin.report.figures.labels import Line
from gibbsmin.report.figures.quantities import Quantity
from gibbsmin.report.figures.source import Input
from gibbsmin.report.figures.style import POINTS, with_unit
from gibbsmin.report.words import shortened

Floats = NDArray[np.float64]

UNIT_WORDS: Final = {
    "%": "percent",
    "ppmv": "ppm by volume, ppmv",
    **{unit: f"temperature, {unit}" for unit in ("K", "°C", "°F")},
    **{f"{prefix}W": f"power, {prefix}W" for prefix in ("", "k", "M", "G")},
    **{f"{prefix}J": f"energy, {prefix}J" for prefix in ("", "k", "M", "G")},
}
"""Units as titles of axes that several results share."""

_LONGEST: Final = 60  # letters of an axis title
_FEW: Final = 25  # up to so many points each is marked
_EVEN: Final = 1e-6
_TITLE: Final = 5.0  # pt that a letter of a panel's title takes


def input_axis(panel: Axes, one: Input, ticks: int = 8) -> None:
    """Set the horizontal axis: title, limits, and its scale, logarithmic where the values are spaced so."""
    low, high = float(one.values.min()), float(one.values.max())
    scale_input(panel.xaxis, one, ticks)
    if low < high:
        panel.set_xlim(low, high)
    panel.set_xlabel(with_unit(shortened(one.label, _LONGEST), one.unit))


def scale_input(axis: Axis, one: Input, ticks: int = 8) -> None:
    """Make an axis logarithmic where the values of the input are spaced so, with ticks that people read."""
    axis.set_major_locator(MaxNLocator(ticks, steps=[1, 2, 2.5, 5, 10]))
    axis.set_major_formatter(FuncFormatter(_tick))
    if is_geometric(one.values):
        (axis.axes.set_xscale if isinstance(axis, XAxis) else axis.axes.set_yscale)("log")
        decades = np.log10(one.values.max() / one.values.min())
        axis.set_major_locator(LogLocator(10.0, subs=(1.0,) if decades > 2.0 else (1.0, 2.0, 5.0)))
        axis.set_major_formatter(FuncFormatter(_tick))
        axis.set_minor_formatter(NullFormatter())


def is_geometric(values: Floats) -> bool:
    """Whether values have even ratios, and not even differences.

    Examples
    --------
    >>> is_geometric(np.array([1.0, 10.0, 100.0])), is_geometric(np.array([1.0, 2.0, 3.0]))
    (True, False)
    """
    if values.size < 3 or values.min() <= 0.0:
        return False
    ratios, steps = np.diff(np.log(values)), np.diff(values)
    return bool(np.ptp(ratios) <= _EVEN * abs(ratios[0]) and np.ptp(steps) > _EVEN * abs(steps[0]))


def log_axis(panel: Axes, floor: float, top: float, shares: bool) -> None:
    """Make the vertical axis logarithmic from a floor to the decade above the largest value.

    Parameters
    ----------
    panel : Axes
    floor, top : float
        Lowest value, and largest value that is drawn, as shown.
    shares : bool
        Percent of the gas: ticks below 0.1 % say ppm.
    """
    panel.set_yscale("log")
    upper = min(100.0, 10.0 ** np.ceil(np.log10(top))) if shares else top * 1.3
    panel.set_ylim(floor, max(upper, floor * 10.0))
    panel.yaxis.set_major_locator(LogLocator(10.0, numticks=12))
    panel.yaxis.set_minor_locator(NullLocator())
    panel.yaxis.set_major_formatter(FuncFormatter(_percent_or_ppm if shares else _tick))


def linear_axis(panel: Axes, quantities: Sequence[Quantity]) -> None:
    """Set limits of a linear axis: from zero where values come near it, else a little beyond them."""
    spans = [one.span for one in quantities if np.isfinite(one.span[0])]
    if not spans:
        return
    low, high = min(span[0] for span in spans), max(span[1] for span in spans)
    room = 0.05 * (high - low) or 0.05 * abs(high) or 1.0
    bottom = 0.0 if 0.0 <= low < 0.35 * high else low - room
    panel.set_ylim(bottom, 0.0 if high <= 0.0 and high > 0.35 * low else high + room)
    panel.yaxis.set_major_locator(MaxNLocator(6, steps=[1, 2, 2.5, 5, 10]))
    panel.yaxis.set_major_formatter(FuncFormatter(_tick))


def draw_line(panel: Axes, one: Input, quantity: Quantity, colour: str, **stroke: Any) -> Line:
    """Draw one result over one input; where there are few points they are marked."""
    return draw_values(panel, one.values, quantity.shown, quantity.label, colour, **stroke)


def draw_values(panel: Axes, x: Floats, y: Floats, label: str, colour: str, **stroke: Any) -> Line:
    """Draw one line, in the order of its abscissa."""
    order = np.argsort(x, kind="stable")
    marks: dict[str, Any] = {"marker": "o", "markersize": 2.6} if x.size <= _FEW else {}
    drawn = np.where(y[order] > 0.0, y[order], np.nan) if panel.get_yscale() == "log" else y[order]
    panel.plot(x[order], drawn, color=colour, **marks, **stroke)
    return Line(label, colour, x[order], drawn)


def panel_title(panel: Axes, text: str, width: float) -> None:
    """Write what a panel shows over it, on the left, in as many lines as its ``width`` [pt] asks for."""
    wrapped = "\n".join(textwrap.wrap(text, max(int(width / _TITLE), 12), break_long_words=True))
    panel.set_title(wrapped, loc="left", fontsize=POINTS - 0.5)


def _percent_or_ppm(value: float, _: float) -> str:
    return f"{number(value)} %" if value > 0.0999 else f"{number(1e4 * value)} ppm"


def _tick(value: float, _: float) -> str:
    """Write a round value, as finely as neighbours need to differ."""
    return f"{value:.7g}"
