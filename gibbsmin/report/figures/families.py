"""A result over one input, a line for each value of a second one that takes few."""

from __future__ import annotations

from dataclasses import replace
from typing import Final

import numpy as np
from matplotlib.axes import Axes

from gibbsmin.report.figures.axes import draw_values, input_axis, linear_axis, log_axis
from gibbsmin.report.figures.choice import floor_of, is_logarithmic
from gibbsmin.report.figures.drawn import Drawn, capital, columns, input_span, input_value, listed, span_words
from gibbsmin.report.figures.files import file_name
from gibbsmin.report.figures.labels import Line, label_lines
from gibbsmin.report.figures.onsets import marks_of, sentence
from gibbsmin.report.figures.quantities import Quantity
from gibbsmin.report.figures.source import Input, Source
from gibbsmin.report.figures.style import canvas, shades, with_unit

SHORT: Final = 5
"""Most values of the second input."""


def short_axis(source: Source) -> int | None:
    """Place of the input whose values are lines; None where both take many values."""
    sizes = [one.values.size for one in source.inputs[:2]]
    place = 0 if sizes[0] <= sizes[1] else 1
    return place if sizes[place] <= SHORT else None


def family(source: Source, quantity: Quantity, place: int) -> Drawn:
    """Draw one result over the longer input, a line a value of the other.

    Parameters
    ----------
    source : Source
        A sweep over two inputs.
    quantity : Quantity
    place : int
        Which input takes few values.

    Returns
    -------
    Drawn
    """
    few, one = source.inputs[place], source.inputs[1 - place]
    title = f"{capital(quantity.label)}{source.held}, a line for each {few.label}"
    figure, panels = canvas(title)
    panel = panels[0, 0]
    lines = family_panel(panel, source, quantity, place)
    panel.set_ylabel(with_unit(quantity.label, quantity.unit))
    figure.draw_without_rendering()
    label_lines(panel, lines)
    values = listed([input_value(few, float(value)) for value in few.values])
    return Drawn(
        file_name(quantity.name.rpartition(" [")[0]),
        title,
        f"Lines of {span_words(quantity)} over {input_span(one)}{source.held}, one for each {few.label}: {values}.",
        figure,
        columns(source, [quantity]),
        (*_come_and_go(few, one, quantity, place), *source.notes),
    )


def family_panel(
    panel: Axes, source: Source, quantity: Quantity, place: int, within: tuple[int, ...] = ()
) -> list[Line]:
    """Draw the lines of one panel, the scale chosen for the whole of the result.

    Parameters
    ----------
    panel : Axes
    source : Source
    quantity : Quantity
    place : int
        Which of the first two inputs takes few values.
    within : tuple of int, optional
        Where a third input, and more, stand.

    Returns
    -------
    list of Line
    """
    few, one = source.inputs[place], source.inputs[1 - place]
    floor = floor_of(source, [quantity])
    if is_logarithmic([quantity], floor):
        log_axis(panel, floor, quantity.span[1], shares=quantity.kind == "gas")
    else:
        linear_axis(panel, [quantity])
    part: tuple[int | slice, ...] = (slice(None), slice(None), *within)
    values = np.moveaxis(quantity.shown[part], place, 0)
    lines = []
    order = np.argsort(few.values, kind="stable")
    for k, colour in zip(order, shades(few.values.size), strict=True):
        label = input_value(few, float(few.values[k]))
        lines.append(draw_values(panel, one.values, values[k], label, colour))
    input_axis(panel, one)
    return lines


def _come_and_go(few: Input, one: Input, quantity: Quantity, place: int) -> list[str]:
    """Tell where a phase comes and goes along each line."""
    if quantity.kind != "condensed":
        return []
    told = []
    for k, value in enumerate(few.values):
        line = replace(quantity, values=np.take(quantity.values, k, axis=place))
        if text := sentence(marks_of(one, [line]), one.unit):
            told.append(f"At {input_value(few, float(value))}: {text}")
    return told
