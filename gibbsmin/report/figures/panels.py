"""Three and more inputs: small panels, one a value of the third input; further ones stand at their middle value."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.report.figures.axes import panel_title
from gibbsmin.report.figures.drawn import Drawn, capital, columns, input_span, input_value, span_words
from gibbsmin.report.figures.families import SHORT, family_panel
from gibbsmin.report.figures.labels import label_lines
from gibbsmin.report.figures.maps import levels_of, map_panel
from gibbsmin.report.figures.quantities import Quantity
from gibbsmin.report.figures.source import Source
from gibbsmin.report.figures.style import WIDTH, canvas, in_unit, with_unit

_MOST: Final = 6
_FIGURES: Final = 6


def slices(source: Source, quantities: Sequence[Quantity]) -> Iterator[Drawn]:
    """Draw each result in panels.

    Parameters
    ----------
    source : Source
        A grid over three inputs or more.
    quantities : sequence of Quantity
        The first six are drawn.

    Yields
    ------
    Drawn
    """
    sizes = [one.values.size for one in source.inputs]
    order = sorted(range(len(sizes)), key=lambda k: -sizes[k])
    one, few, third, *rest = order
    chosen = np.unique(np.linspace(0, sizes[third] - 1, min(sizes[third], _MOST)).astype(int))
    part: list[int | NDArray[np.intp]] = [0] * len(sizes)
    for k in rest:
        part[k] = sizes[k] // 2
    for k in (one, few):
        part[k] = np.arange(sizes[k])
    part[third] = chosen
    fixed = [
        f"{source.inputs[k].label} {input_value(source.inputs[k], float(source.inputs[k].values[sizes[k] // 2]))}"
        for k in rest
    ]
    inputs = tuple(
        replace(a, values=a.values[chosen] if k == third else a.values[[sizes[k] // 2]] if k in rest else a.values)
        for k, a in enumerate(source.inputs)
    )
    cut = np.ix_(*(np.atleast_1d(at) for at in part))
    small = replace(source, inputs=inputs)
    for quantity in quantities[:_FIGURES]:
        drawn = replace(quantity, values=quantity.values[cut])
        yield _panels(small, drawn, (few, one, third), fixed)


def _panels(source: Source, quantity: Quantity, order: tuple[int, int, int], fixed: Sequence[str]) -> Drawn:
    """Draw one result; ``order`` are the places of the inputs within, over the lines, and from panel to panel."""
    a, b, c = (source.inputs[k] for k in order)
    values = np.moveaxis(quantity.values, order, (0, 1, 2)).reshape(a.values.size, b.values.size, c.values.size)
    flat = replace(source, inputs=(a, b))
    whole = replace(quantity, values=values)
    count = c.values.size
    across = 2 if count in (2, 4) else min(count, 3)
    down = -(-count // across)
    at = f", {', '.join(fixed)}" if fixed else ""
    is_family = a.values.size <= SHORT
    each = f", a line for each {a.label}" if is_family else ""
    title = f"{capital(in_unit(quantity.label, quantity.unit))}{source.held}{at}{each}"
    figure, axes = canvas(title, down, across, 2.3 * down + 0.7, sharex=True, sharey=True)
    lines = []
    levels = levels_of(source, whole)
    for k, panel in enumerate(axes.flat):
        if k >= count:
            panel.remove()
            continue
        if is_family:
            lines.append((panel, family_panel(panel, flat, whole, 0, (k,))))
        else:
            map_panel(panel, b, a, whole.shown[:, :, k], levels)
        panel_title(panel, f"{c.label} {input_value(c, float(c.values[k]))}", WIDTH * 72.0 / across - 30.0)
        panel.label_outer()
        if k % across == 0:
            panel.set_ylabel(
                with_unit(quantity.label if is_family else a.label, quantity.unit if is_family else a.unit)
            )
    figure.draw_without_rendering()
    for panel, named in lines:
        label_lines(panel, named)
    what = "Lines" if is_family else "Maps"
    return Drawn(
        f"panels_{quantity.name.rpartition(' [')[0]}",
        title,
        f"{what} of {span_words(whole)} over {input_span(b)} and {input_span(a)}{source.held}{at}, a panel for each "
        f"{c.label}: {', '.join(input_value(c, float(value)) for value in c.values)}.",
        figure,
        columns(source, [quantity]),
        source.notes,
    )
