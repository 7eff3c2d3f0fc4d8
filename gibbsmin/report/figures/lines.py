"""Results along one input: the gas, condensed phases, temperature and heat, key figures."""

from __future__ import annotations

import textwrap
from collections.abc import Sequence
from dataclasses import replace
from typing import Final

import numpy as np
from matplotlib.axes import Axes

from gibbsmin.report.figures.axes import (
    UNIT_WORDS,
    draw_line,
    input_axis,
    linear_axis,
    log_axis,
    panel_title,
)
from gibbsmin.report.figures.choice import MOST_LINES, floor_of, is_logarithmic, main_species
from gibbsmin.report.figures.drawn import Colours, Drawn, capital, columns, input_span, listed, span_words
from gibbsmin.report.figures.labels import Line, label_lines
from gibbsmin.report.figures.onsets import draw_marks, marks_of, sentence
from gibbsmin.report.figures.quantities import Quantity, condensed_quantities, gas_quantities
from gibbsmin.report.figures.source import Input, Source
from gibbsmin.report.figures.style import DASHES, HEIGHT, INK, WIDTH, canvas, shades, with_unit

_NAMED: Final = 12  # species left out that are named one by one
_MOST_PANELS: Final = 6
_LETTER: Final = 7.0  # pixels that a letter of an axis title takes


def axis_input(source: Source) -> Input:
    """Find the input that lines run over: the first that moves where all move in step."""
    moving = [one for one in source.inputs if np.ptp(one.values) > 0.0]
    return (moving or list(source.inputs))[0]


def composition(source: Source, colours: Colours, stream: str = "", title: str = "") -> Drawn | None:
    """Draw what the gas is made of, and below it the solids and liquids that occur.

    Parameters
    ----------
    source : Source
        A sweep over one input.
    colours : Colours
    stream : str
        Which stream of a train; empty for a case of one mixture.
    title : str, optional
        Instead of what is said of a case.

    Returns
    -------
    Drawn or None
        None where there is neither gas nor anything else.
    """
    one = axis_input(source)
    gas, left = main_species(source, gas_quantities(source, stream))
    phases = condensed_quantities(source, stream)
    drawn, more = phases[: len(DASHES)], phases[len(DASHES) :]
    if not gas and not drawn:
        return None
    rows = [part for part in (gas, drawn) if part]
    heading = title or f"What the mixture settles to{source.held}"
    figure, panels = canvas(
        heading, len(rows), 1, HEIGHT + (1.5 if len(rows) > 1 else 0.0), sharex=True,
        height_ratios=[1.7, 1.0] if len(rows) > 1 else [1.0],
    )  # fmt: skip
    lines: list[tuple[Axes, list[Line]]] = []
    if gas:
        lines.append((panels[0, 0], _gas_panel(panels[0, 0], source, one, gas, colours)))
    if drawn:
        panel = panels[-1, 0]
        linear_axis(panel, drawn)
        panel.set_ylim(bottom=0.0)
        panel.set_ylabel(with_unit("solids and liquids", drawn[0].unit))
        strokes = [
            draw_line(panel, one, present(quantity), INK, linestyle=dash)
            for quantity, dash in zip(drawn, DASHES, strict=False)
        ]
        lines.append((panel, strokes))
    input_axis(panels[-1, 0], one)
    _name_axis(panels[-1, 0], source, one)
    figure.draw_without_rendering()
    marks = marks_of(one, drawn)
    if drawn:
        draw_marks(panels[-1, 0], marks, one.unit)
        figure.draw_without_rendering()
    for panel, named in lines:
        label_lines(panel, named)
    told = [span_words(quantity) for quantity in (*gas, *drawn)]
    notes = [*_left_out(left, "species above the threshold"), *_left_out(more, "solids and liquids")]
    if text := sentence(marks, one.unit):
        notes.append(text)
    where = f" of {stream.replace('_', ' ')}" if stream else ""
    return Drawn(
        f"composition_{stream}" if stream else "composition",
        heading,
        f"Lines of the composition{where} over {over(source)}{source.held}: {listed(told)}.",
        figure,
        columns(source, [*gas, *drawn]),
        (*notes, *source.notes),
    )


def _gas_panel(panel: Axes, source: Source, one: Input, gas: Sequence[Quantity], colours: Colours) -> list[Line]:
    """Draw the shares of the gas."""
    floor = floor_of(source, gas)
    if is_logarithmic(gas, floor):
        log_axis(panel, floor, max(quantity.span[1] for quantity in gas), shares=True)
        panel.set_ylabel("share of the gas by moles, wet")
    else:
        linear_axis(panel, gas)
        panel.set_ylabel("mole percent of the gas, wet")
    return [draw_line(panel, one, quantity, colours.of(quantity.species) or INK) for quantity in gas]


def result_panels(source: Source, quantities: Sequence[Quantity], name: str, title: str) -> Drawn | None:
    """Draw results along one input, a panel a unit; plain numbers have a panel each.

    Parameters
    ----------
    source : Source
        A sweep over one input.
    quantities : sequence of Quantity
    name, title : str
        Of the figure.

    Returns
    -------
    Drawn or None
        None where there is nothing to draw.
    """
    groups = _by_unit(quantities)
    shown, rest = groups[:_MOST_PANELS], [one for group in groups[_MOST_PANELS:] for one in group]
    if not shown:
        return None
    one = axis_input(source)
    several = any(len(group) > 1 for group in shown)
    across = 1 if len(shown) == 1 else 2 if several or len(shown) in (2, 4) else 3
    down = -(-len(shown) // across)
    if len(shown) == len(shown[0]) == 1:
        title = f"{capital(shown[0][0].label)}{source.held}"
    figure, panels = canvas(title, down, across, 2.5 * down + 0.4)
    lines = []
    for panel, group in zip(panels.flat, shown, strict=False):
        lines.append((panel, group, _result_panel(panel, source, one, group, across)))
    for panel in panels.flat[len(shown) :]:
        panel.remove()
    figure.draw_without_rendering()
    for panel, group, named in lines:
        if len(group) > 1:
            label_lines(panel, named)
    drawn = [quantity for group in shown for quantity in group]
    return Drawn(
        name,
        title,
        f"Lines over {over(source)}{source.held} of {listed([span_words(quantity) for quantity in drawn])}.",
        figure,
        columns(source, drawn),
        (*_left_out(rest, "results"), *source.notes),
    )


def _result_panel(panel: Axes, source: Source, one: Input, group: Sequence[Quantity], across: int) -> list[Line]:
    """Draw the lines of a panel; a single result is named over it, several at their ends."""
    floor = floor_of(source, group)
    if is_logarithmic(group, floor):
        log_axis(panel, floor, max(quantity.span[1] for quantity in group), shares=group[0].kind == "gas")
    else:
        linear_axis(panel, group)
    kept = [present(quantity) for quantity in group] if len(group) > 1 else group
    lines = [draw_line(panel, one, q, colour) for q, colour in zip(kept, shades(len(group)), strict=True)]
    unit = group[0].unit
    if len(group) > 1:
        panel.set_ylabel(UNIT_WORDS.get(unit, unit))
    elif across == 1:
        panel.set_ylabel(with_unit(group[0].label, unit))
    else:
        panel_title(panel, with_unit(group[0].label, unit), WIDTH * 72.0 / across - 40.0)
    input_axis(panel, one, 9 - 2 * across)
    _name_axis(panel, source, one)
    return lines


def present(quantity: Quantity) -> Quantity:
    """Leave out where something is not there, but for the states beside those where it is, so that lines reach zero."""
    there = quantity.values > 0.0
    near = there.copy()
    near[1:] |= there[:-1]
    near[:-1] |= there[1:]
    return replace(quantity, values=np.where(near | (quantity.values != 0.0), quantity.values, np.nan))


def over(source: Source) -> str:
    """Say what the lines run over; where inputs move in step, all of them."""
    return listed([input_span(one) for one in source.inputs])


def _name_axis(panel: Axes, source: Source, one: Input) -> None:
    """Add to the title of the horizontal axis the inputs that move in step with it."""
    others = [input_span(other) for other in source.inputs if other is not one]
    if others:
        wrapped = textwrap.wrap(f"in step with {listed(others)}", int(panel.get_window_extent().width / _LETTER))
        panel.set_xlabel("\n".join([panel.get_xlabel(), *wrapped]))


def _by_unit(quantities: Sequence[Quantity]) -> list[list[Quantity]]:
    """Put results of one unit together, seven at most; plain numbers stand alone."""
    groups: list[list[Quantity]] = []
    for one in quantities:
        for group in groups:
            if one.unit and group[0].unit == one.unit and len(group) < MOST_LINES:
                group.append(one)
                break
        else:
            groups.append([one])
    return groups


def _left_out(quantities: Sequence[Quantity], what: str) -> list[str]:
    """Name what is not drawn, the first dozen one by one."""
    if not quantities:
        return []
    named = [quantity.label for quantity in quantities[:_NAMED]]
    more = f" and {len(quantities) - _NAMED} more" if len(quantities) > _NAMED else ""
    return [f"Not drawn, but in the table: {', '.join(named)}{more} ({what})."]
