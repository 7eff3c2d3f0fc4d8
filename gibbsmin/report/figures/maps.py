"""A result over two inputs as a map: contour lines with their values, and the regions of condensed phases, named."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Final

import numpy as np
from matplotlib.axes import Axes
from matplotlib.colors import LogNorm
from matplotlib.ticker import LogLocator, MaxNLocator
from numpy.typing import NDArray
from scipy.ndimage import distance_transform_edt

from gibbsmin.report.figures.axes import input_axis, scale_input
from gibbsmin.report.figures.choice import floor_of, is_logarithmic
from gibbsmin.report.figures.drawn import Drawn, capital, columns, input_span, listed, number, span_words
from gibbsmin.report.figures.labels import HALO
from gibbsmin.report.figures.quantities import Quantity, comes_or_goes, condensed_quantities
from gibbsmin.report.figures.source import Input, Source
from gibbsmin.report.figures.style import INK, POINTS, SCALE, canvas, with_unit

Floats = NDArray[np.float64]

_LEVELS: Final = 8
_PHASES: Final = 5
_DEPTH: Final = 0.03  # of the map that a region must be deep to be named in


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
    phases = [one for one in condensed_quantities(source) if comes_or_goes(one)][:_PHASES] if not source.is_train else []
    title = f"{capital(with_unit(quantity.label, quantity.unit))}{source.held}"
    figure, panels = canvas(title, height=4.0)
    panel = panels[0, 0]
    values = quantity.shown if place == 1 else quantity.shown.T
    map_panel(panel, x, y, values, levels_of(source, quantity))
    panel.set_ylabel(with_unit(y.label, y.unit))
    figure.draw_without_rendering()
    outlines(panel, x, y, [(one.label, (one.values if place == 1 else one.values.T) > 0.0) for one in phases])
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
    if is_logarithmic([quantity], floor):
        first, last = np.log10(max(low, floor)), np.log10(high)
        subs = (1.0,) if last - first > 4.0 else (1.0, 3.0)
        return np.asarray(LogLocator(10.0, subs=subs, numticks=20).tick_values(10.0**first, 10.0**last), float), True
    if not np.isfinite(low) or not quantity.varies:
        return np.empty(0), False
    return np.asarray(MaxNLocator(_LEVELS, steps=[1, 2, 2.5, 5, 10]).tick_values(low, high), float), False


def map_panel(panel: Axes, x: Input, y: Input, values: Floats, levels: tuple[Floats, bool]) -> None:
    """Fill a panel with the map of ``values`` (y, x), as shown."""
    at, logarithmic = levels
    panel.grid(visible=False)
    scale_input(panel.yaxis, y)
    input_axis(panel, x)
    panel.set_ylim(float(y.values.min()), float(y.values.max()))
    if at.size < 2:
        return
    field = np.ma.masked_invalid(np.maximum(values, at[0]) if logarithmic else values)
    norm = LogNorm(at[0], at[-1]) if logarithmic else None
    panel.contourf(x.values, y.values, field, levels=at, cmap=SCALE, norm=norm, extend="both" if logarithmic else "neither")
    drawn = panel.contour(x.values, y.values, field, levels=at, colors=INK, linewidths=0.6)
    panel.clabel(drawn, fmt=number, fontsize=POINTS - 1.0, inline_spacing=3)


def outlines(panel: Axes, x: Input, y: Input, regions: Sequence[tuple[str, NDArray[np.bool_]]]) -> None:
    """Outline where each phase is, (y, x), and name it where its region is deepest and no other name stands."""
    size = panel.get_window_extent()
    place = panel.transAxes.inverted().transform(
        panel.transData.transform(np.array([(u, v) for v in y.values for u in x.values]))
    )
    place = place.reshape(y.values.size, x.values.size, 2) * (1.0, size.height / size.width)
    names: list[Floats] = []
    for label, inside in regions:
        panel.contour(x.values, y.values, inside.astype(float), levels=[0.5], colors=INK, linewidths=1.4, linestyles="--")
        depth = distance_transform_edt(np.pad(inside, 1))[1:-1, 1:-1] / max(inside.shape)
        for name in names:
            depth = np.minimum(depth, 0.6 * np.hypot(*np.moveaxis(place - name, -1, 0)))
        j, i = np.unravel_index(int(np.argmax(depth)), depth.shape)
        if depth[j, i] > _DEPTH:
            names.append(place[j, i])
            panel.text(
                float(x.values[i]), float(y.values[j]), label, ha=_side(place[j, i, 0], 1.0), va="center",
                fontweight="bold", path_effects=[HALO],
            )  # fmt: skip


def _side(at: float, whole: float) -> str:
    """Side of a word that stands at a place, so that it stays in the picture."""
    return "left" if at < 0.15 * whole else "right" if at > 0.85 * whole else "center"
