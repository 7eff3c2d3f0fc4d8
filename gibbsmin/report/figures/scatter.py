"""A design that is no grid: each result over each input, a point a state."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.report.figures.axes import input_axis, linear_axis, log_axis, panel_title
from gibbsmin.report.figures.choice import floor_of, is_logarithmic
from gibbsmin.report.figures.drawn import Drawn, columns, input_span, listed, span_words
from gibbsmin.report.figures.quantities import Quantity
from gibbsmin.report.figures.source import Input, Source
from gibbsmin.report.figures.style import WIDTH, canvas, shades, with_unit

Floats = NDArray[np.float64]

_ACROSS: Final = 3
_DOWN: Final = 3
_FIGURES: Final = 3


def scatter(source: Source, quantities: Sequence[Quantity]) -> Iterator[Drawn]:
    """Draw results over inputs, nine panels a figure at most; where there are more inputs, the three that matter most.

    Parameters
    ----------
    source : Source
        A design whose states are points.
    quantities : sequence of Quantity

    Yields
    ------
    Drawn
    """
    for k in range(0, min(len(quantities), _DOWN * _FIGURES), _DOWN):
        rows = list(quantities[k : k + _DOWN])
        places = _strongest(source, rows)
        yield _figure(source, rows, places, f"results_{k // _DOWN + 1}")


def _strongest(source: Source, rows: Sequence[Quantity]) -> list[int]:
    """Places of the inputs that some result follows most, by the rank correlation of Spearman (1904)."""

    def strength(one: Input) -> float:
        found = [0.0]
        for quantity in rows:
            known = np.isfinite(quantity.values)
            if known.sum() > 2 and quantity.varies:
                found.append(abs(float(np.corrcoef(_ranks(one.values[known]), _ranks(quantity.values[known]))[0, 1])))
        return max(found)

    order = sorted(range(len(source.inputs)), key=lambda k: -strength(source.inputs[k]))[:_ACROSS]
    return sorted(order)


def _ranks(values: Floats) -> NDArray[np.intp]:
    """Place of each value in their order, (n,)."""
    return np.argsort(np.argsort(values, kind="stable"), kind="stable")


def _figure(source: Source, rows: Sequence[Quantity], places: Sequence[int], name: str) -> Drawn:
    """Draw one figure, a row a result and a column an input."""
    title = f"Results over inputs, {source.shape[0]} states of a design{source.held}"
    inputs = [source.inputs[k] for k in places]
    figure, panels = canvas(title, len(rows), len(inputs), 1.9 * len(rows) + 0.7, sharex="col", sharey="row")
    for quantity, line in zip(rows, panels, strict=True):
        floor = floor_of(source, [quantity])
        for one, panel in zip(inputs, line, strict=True):
            if is_logarithmic([quantity], floor):
                log_axis(panel, floor, quantity.span[1], shares=quantity.kind == "gas")
            else:
                linear_axis(panel, [quantity])
            y = (
                np.where(quantity.shown > 0.0, quantity.shown, np.nan)
                if panel.get_yscale() == "log"
                else quantity.shown
            )
            panel.plot(one.values, y, linestyle="", marker="o", markersize=2.2, markeredgewidth=0.0, color=shades(1)[0])
            input_axis(panel, one)
            panel.label_outer()
        panel_title(line[0], with_unit(quantity.label, quantity.unit), WIDTH * 72.0)
    left = [one.label for k, one in enumerate(source.inputs) if k not in places]
    notes = [f"Not drawn, since the results follow them less: {', '.join(left)}."] if left else []
    return Drawn(
        name,
        title,
        f"Points of {listed([span_words(quantity) for quantity in rows])} over "
        f"{listed([input_span(one) for one in inputs])}{source.held}.",
        figure,
        columns(source, rows),
        (*notes, *source.notes),
    )
