"""Names at the ends of lines, nudged apart; where a line leaves the picture before its end, a name beside it."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Final, NamedTuple

import numpy as np
from matplotlib.axes import Axes
from matplotlib.patheffects import withStroke
from numpy.typing import NDArray

from gibbsmin.report.figures.style import FAINT, POINTS, readable
from gibbsmin.report.words import shortened

Floats = NDArray[np.float64]

HALO: Final = withStroke(linewidth=2.5, foreground="white")
"""What keeps words legible on lines."""

_APART: Final = 1.25  # lines of text from one label to the next
_BESIDE: Final = 9.0  # pt from the edge to a label
_LONGEST: Final = 32  # letters of a label
_CANDIDATES: Final = 25


class Line(NamedTuple):
    """A line that was drawn: its ``name``, its ``colour``, and its points as shown."""

    name: str
    colour: str
    x: Floats
    y: Floats


def label_lines(panel: Axes, lines: Sequence[Line]) -> None:
    """Write the name of each line at its right end, or beside it.

    Parameters
    ----------
    panel : Axes
        With its scales and limits set, and laid out, so that its size is known.
    lines : sequence of Line
    """
    size = panel.get_window_extent()
    dots = panel.figure.dpi / 72.0  # pixels per point
    width, height = size.width / dots, size.height / dots  # pt
    lines = [line._replace(name=shortened(line.name, _LONGEST)) for line in lines]
    places = [_points(panel, line, width, height) for line in lines]
    ends = [_end(place, width, height) for place in places]
    right = [k for k, end in enumerate(ends) if end is not None]
    wanted = np.array([ends[k] for k in right], float)
    step = _APART * POINTS
    for k, at in zip(right, spread(wanted, step, 0.0, height), strict=True):
        _write_end(panel, lines[k], float(wanted[right.index(k)]), at, width, height)
    taken: list[tuple[float, float, float, float]] = []
    for k, line in enumerate(lines):
        if k not in right and places[k].size:
            _write_beside(panel, line, k, places, taken, (width, height))


def spread(wanted: Floats, step: float, low: float, high: float) -> list[float]:
    """Move places apart, as little as will do, and keep them between two ends as far as there is room.

    Parameters
    ----------
    wanted : array (n,)
        Where each would best be.
    step : float
        Least distance.
    low, high : float
        Ends.

    Returns
    -------
    list of float
        In the order of ``wanted``.

    Examples
    --------
    >>> spread(np.array([5.0, 5.0, 30.0]), 10.0, 0.0, 40.0)
    [0.0, 10.0, 30.0]
    """
    order = np.argsort(wanted, kind="stable")
    groups: list[tuple[float, int]] = []  # middle, number
    for value in wanted[order]:
        groups.append((_kept(float(value), 1, step, low, high), 1))
        while len(groups) > 1:
            (one, n), (two, m) = groups[-2:]
            if two - 0.5 * (m - 1) * step - one - 0.5 * (n - 1) * step >= step:
                break
            # The mean of what the members of both want, shifted by their places in the group.
            middle = ((one + 0.5 * m * step) * n + (two - 0.5 * n * step) * m) / (n + m)
            groups[-2:] = [(_kept(middle, n + m, step, low, high), n + m)]
    places = [middle + (k - 0.5 * (n - 1)) * step for middle, n in groups for k in range(n)]
    found = np.empty(len(places))
    found[order] = places
    return [float(place) for place in found]


def _kept(middle: float, count: int, step: float, low: float, high: float) -> float:
    """Keep a group of places between the ends; in the middle of them where there is no room."""
    half = 0.5 * (count - 1) * step
    if high - low < 2.0 * half:
        return 0.5 * (low + high)
    return min(max(middle, low + half), high - half)


def _points(panel: Axes, line: Line, width: float, height: float) -> Floats:
    """Points of a line in points of the page from the lower left corner, (n, 2), finer than it was drawn."""
    known = np.isfinite(line.x) & np.isfinite(line.y)
    with np.errstate(invalid="ignore", divide="ignore"):
        there: Floats = panel.transAxes.inverted().transform(
            panel.transData.transform(np.column_stack((line.x[known], line.y[known])))
        )
    there = there[np.isfinite(there).all(axis=1)] * (width, height)
    if len(there) < 2:
        return there
    way = np.concatenate(([0.0], np.cumsum(np.hypot(*np.diff(there, axis=0).T))))
    fine = np.linspace(0.0, way[-1], max(len(there), 200))
    return np.column_stack((np.interp(fine, way, there[:, 0]), np.interp(fine, way, there[:, 1])))


def _end(place: Floats, width: float, height: float) -> float | None:
    """Height at which a line reaches the right edge, [pt]; None where it does not."""
    if not place.size:
        return None
    x, y = place[-1]
    return float(y) if abs(x - width) < 0.06 * width and -1.0 <= y <= height + 1.0 else None


def _write_end(panel: Axes, line: Line, y: float, at: float, width: float, height: float) -> None:
    """Write a name right of the edge, with a thin line to it where it had to be moved."""
    panel.text(
        1.0 + _BESIDE / width, at / height, line.name, transform=panel.transAxes,
        color=readable(line.colour), va="center", ha="left",
    )  # fmt: skip
    if abs(at - y) > 3.0:
        panel.plot(
            [1.0 + 1.0 / width, 1.0 + (_BESIDE - 1.5) / width], [y / height, at / height], transform=panel.transAxes,
            color=FAINT, linewidth=0.5, clip_on=False,
        )  # fmt: skip


def _write_beside(
    panel: Axes,
    line: Line,
    own: int,
    places: Sequence[Floats],
    taken: list[tuple[float, float, float, float]],
    size: tuple[float, float],
) -> None:
    """Write a name beside its line, where the fewest other lines and names are."""
    width, height = size
    half, tall = 0.5 * (0.62 * POINTS * len(line.name) + 2.0), 0.5 * 1.2 * POINTS
    visible = places[own][(places[own][:, 1] >= 0.0) & (places[own][:, 1] <= height)]
    if not visible.size:
        return
    best: tuple[float, float, float] | None = None
    for x, y in visible[np.linspace(0, len(visible) - 1, _CANDIDATES).astype(int)]:
        for dx, dy in ((0.0, tall + 2.0), (0.0, -tall - 2.0), (half + 4.0, 0.0), (-half - 4.0, 0.0)):
            u, v = x + dx, y + dy
            box = (u - half, v - tall, u + half, v + tall)
            if box[0] < 0.0 or box[2] > width or box[1] < 0.0 or box[3] > height:
                continue
            cost = sum(_inside(place, box) for place in places)
            cost += 100.0 * sum(_overlap(box, other) for other in taken)
            if best is None or cost < best[0]:
                best = cost, u, v
    if best is None:
        return
    _, u, v = best
    taken.append((u - half, v - tall, u + half, v + tall))
    panel.text(
        u / width, v / height, line.name, transform=panel.transAxes, color=readable(line.colour),
        va="center", ha="center", path_effects=[HALO],
    )  # fmt: skip


def _inside(place: Floats, box: tuple[float, float, float, float]) -> float:
    """Count the points of a line that lie in a box."""
    if not place.size:
        return 0.0
    x, y = place.T
    return float(np.count_nonzero((x >= box[0]) & (x <= box[2]) & (y >= box[1]) & (y <= box[3])))


def _overlap(one: tuple[float, float, float, float], two: tuple[float, float, float, float]) -> bool:
    return one[0] < two[2] and two[0] < one[2] and one[1] < two[3] and two[1] < one[3]
