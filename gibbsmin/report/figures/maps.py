"""A result over two inputs as a map: contour lines with their values, and the regions of condensed phases, named."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Final, Literal

import numpy as np
from matplotlib.axes import Axes
from matplotlib.colors import LogNorm
from matplotlib.ticker import LogLocator, MaxNLocator
from numpy.typing import NDArray

from gibbsmin.report.figures.axes import input_axis, scale_input
from gibbsmin.report.figures.choice import floor_of, is_logarithmic
from gibbsmin.report.figures.drawn import Drawn, capital, columns, input_span, listed, number, span_words
from gibbsmin.report.figures.labels import HALO
from gibbsmin.report.figures.quantities import Quantity, comes_or_goes, condensed_quantities
from gibbsmin.report.figures.source import Input, Source
from gibbsmin.report.figures.style import INK, POINTS, SCALE, canvas, in_unit, with_unit

Floats = NDArray[np.float64]

_LEVELS: Final = 8
_DECADES: Final = 2.0  # over so many the contours are those of decades
_PHASES: Final = 5
_DEPTH: Final = 0.03  # of the map that a region must be deep to be named in
_EDGE: Final = 0.025  # of the map, where no value is written
_WIDE: Final = 2.5  # how much wider than high a word is kept free


def across(source: Source) -> int:
    """Place of the input on the horizontal axis: the temperature where it is varied, else the last."""
    names = [one.name for one in source.inputs[:2]]
    return names.index("held.temperature") if "held.temperature" in names else 1


def result_map(source: Source, quantity: Quantity) -> Drawn:
    """Draw a map of one result.

    Parameters
    ----------
    source : Source
        A sweep over two inputs.
    quantity : Quantity

    Returns
    -------
    Drawn
    """
    place = across(source)
    x, y = source.inputs[place], source.inputs[1 - place]
    phases = (
        [one for one in condensed_quantities(source) if comes_or_goes(one)][:_PHASES] if not source.is_train else []
    )
    title = f"{capital(in_unit(quantity.label, quantity.unit))}{source.held}"
    figure, panels = canvas(title, height=4.0)
    panel = panels[0, 0]
    values = quantity.shown if place == 1 else quantity.shown.T
    map_panel(panel, x, y, values, levels_of(source, quantity), quantity.span[0] != 0.0)
    panel.set_ylabel(with_unit(y.label, y.unit))
    figure.draw_without_rendering()
    outlines(panel, x, y, [(one.label, one.values if place == 1 else one.values.T) for one in phases])
    notes = list(source.notes)
    if not np.isfinite(quantity.values).all():
        notes.append("White: not certified, or there is no such number.")
    dashed = f"; dashed the regions of {listed([one.label for one in phases])}" if phases else ""
    return Drawn(
        f"map_{quantity.name.rpartition(' [')[0]}",
        title,
        f"Map of {span_words(quantity)} over {input_span(x)} and {input_span(y)}{source.held}{dashed}.",
        figure,
        columns(source, [quantity, *(one for one in phases if one.name != quantity.name)]),
        tuple(notes),
    )


def levels_of(source: Source, quantity: Quantity) -> tuple[Floats, bool]:
    """Choose the values of the contour lines, and whether they are decades.

    Returns
    -------
    levels : array
        As shown; empty where the result takes one value only.
    logarithmic : bool
    """
    floor = floor_of(source, [quantity])
    low, high = quantity.span
    if is_logarithmic([quantity], floor, _DECADES):
        first, last = np.log10(max(low, floor)), np.log10(high)
        subs = (1.0,) if last - first > 4.0 else (1.0, 3.0) if last - first > 2.5 else (1.0, 2.0, 5.0)
        return np.asarray(LogLocator(10.0, subs=subs, numticks=20).tick_values(10.0**first, 10.0**last), float), True
    if not np.isfinite(low) or not quantity.varies:
        return np.empty(0), False
    return np.asarray(MaxNLocator(_LEVELS, steps=[1, 2, 2.5, 5, 10]).tick_values(low, high), float), False


def map_panel(panel: Axes, x: Input, y: Input, values: Floats, levels: tuple[Floats, bool], zero: bool = True) -> None:
    """Fill a panel with a map.

    Parameters
    ----------
    panel : Axes
    x, y : Input
    values : array (y, x)
        As shown.
    levels : (array, bool)
        From `levels_of`.
    zero : bool
        Whether a contour at zero is drawn; where nothing lies below, it would only follow the grid.
    """
    at, logarithmic = levels
    panel.grid(visible=False)
    scale_input(panel.yaxis, y)
    input_axis(panel, x)
    panel.set_ylim(float(y.values.min()), float(y.values.max()))
    if at.size < 2:
        return
    field = np.ma.masked_invalid(np.maximum(values, at[0]) if logarithmic else values)
    beyond: Literal["both", "neither"] = "both" if logarithmic else "neither"
    norm = LogNorm(at[0], at[-1]) if logarithmic else None
    panel.contourf(x.values, y.values, field, levels=at, cmap=SCALE, norm=norm, extend=beyond)
    lines = at if zero else at[at > 0.0]
    drawn = panel.contour(x.values, y.values, field, levels=lines, colors=INK, linewidths=0.6)
    for text in panel.clabel(drawn, fmt=number, fontsize=POINTS - 1.0, inline_spacing=3):
        u, v = panel.transAxes.inverted().transform(panel.transData.transform(text.get_position()))
        if not (_EDGE < u < 1.0 - _EDGE and _EDGE < v < 1.0 - _EDGE):
            text.remove()


def outlines(panel: Axes, x: Input, y: Input, regions: Sequence[tuple[str, Floats]]) -> None:
    """Outline where each phase is, by its amounts (y, x), and name it where its region is deepest and free of words."""
    size = panel.get_window_extent()
    whole = np.array([1.0, size.height / size.width])
    place = (
        _places(panel, [(u, v) for v in y.values for u in x.values]).reshape(y.values.size, x.values.size, 2) * whole
    )
    taken = [_places(panel, [text.get_position()])[0] * whole for text in panel.texts]
    for label, amounts in regions:
        field = np.ma.masked_invalid(beyond_zero(amounts))
        panel.contour(x.values, y.values, field, levels=[0.0], colors=INK, linewidths=1.4, linestyles="--")
        depth = _depth(amounts > 0.0) / max(amounts.shape)
        for spot in taken:
            away = (place - spot) / (_WIDE, 1.0)
            depth = np.minimum(depth, np.hypot(away[..., 0], away[..., 1]))
        j, i = np.unravel_index(int(np.argmax(depth)), depth.shape)
        if depth[j, i] > _DEPTH:
            taken.append(place[j, i])
            panel.text(
                float(x.values[i]), float(y.values[j]), label, ha=_side(place[j, i, 0]), va="center",
                fontweight="bold", path_effects=[HALO],
            )  # fmt: skip


def beyond_zero(amounts: Floats) -> Floats:
    """Carry the amounts of a phase on to below zero where it is absent, so that its outline runs between the states.

    Along each row and column the line of the last two amounts is carried one state further. Where that is not
    below zero, because the phase goes at a stroke, the outline is half way.

    Parameters
    ----------
    amounts : array (m, n)
        Zero where the phase is absent.

    Returns
    -------
    array (m, n)
        The same where it is there; negative where it is not.

    Examples
    --------
    >>> beyond_zero(np.array([[3.0, 1.0, 0.0, 0.0]]))
    array([[ 3.,  1., -1., -3.]])
    """
    there = amounts > 0.0
    total, count = np.zeros(amounts.shape), np.zeros(amounts.shape)
    for axis in (0, 1):
        for step in (1, -1):
            one, two = _shifted(amounts, axis, step), _shifted(amounts, axis, 2 * step)
            ahead = np.where(two > 0.0, 2.0 * one - two, -one)
            reached = ~there & (one > 0.0)
            total += np.where(reached, np.where(ahead < 0.0, ahead, -one), 0.0)
            count += reached
    far = -float(np.nanmax(amounts, initial=0.0))
    edge = np.divide(total, count, out=np.full(amounts.shape, far), where=count > 0)
    return np.where(np.isnan(amounts), np.nan, np.where(there, amounts, edge))


def _depth(inside: NDArray[np.bool_]) -> Floats:
    """How many states lie between each state and the rim of its region, (m, n); the rim of the map is one."""
    depth = np.zeros(inside.shape)
    left = np.pad(inside, 1)
    while left.any():
        depth += left[1:-1, 1:-1]
        core = left[1:-1, 1:-1] & left[2:, 1:-1] & left[:-2, 1:-1] & left[1:-1, 2:] & left[1:-1, :-2]
        left = np.pad(core, 1)
    return depth


def _shifted(amounts: Floats, axis: int, step: int) -> Floats:
    """Amounts of the neighbour ``step`` states on; zero beyond the edge."""
    found = np.zeros(amounts.shape)
    size = amounts.shape[axis]
    here = [slice(None), slice(None)]
    there = [slice(None), slice(None)]
    here[axis], there[axis] = slice(max(-step, 0), size - max(step, 0)), slice(max(step, 0), size - max(-step, 0))
    if size > abs(step):
        found[tuple(here)] = amounts[tuple(there)]
    return np.nan_to_num(found)


def _places(panel: Axes, points: Sequence[tuple[float, float]]) -> Floats:
    """Where points lie in the panel, (n, 2), from 0 to 1."""
    found: Floats = panel.transAxes.inverted().transform(panel.transData.transform(np.array(points, float)))
    return found


def _side(at: float) -> Literal["left", "center", "right"]:
    """Side of a word that stands at a place, so that it stays in the picture."""
    return "left" if at < 0.15 else "right" if at > 0.85 else "center"
