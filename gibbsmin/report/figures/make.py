"""The figures of a result folder, chosen by what is varied in it."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

from gibbsmin.report.figures.bars import state_bars
from gibbsmin.report.figures.choice import asked_figures, changing_figures, key_results
from gibbsmin.report.figures.drawn import Colours, Drawn
from gibbsmin.report.figures.families import family, short_axis
from gibbsmin.report.figures.files import Made, write_figures
from gibbsmin.report.figures.lines import composition, result_panels
from gibbsmin.report.figures.maps import result_map
from gibbsmin.report.figures.panels import slices
from gibbsmin.report.figures.plan import train_plan
from gibbsmin.report.figures.quantities import state_quantities
from gibbsmin.report.figures.scatter import scatter
from gibbsmin.report.figures.source import Source, read_source
from gibbsmin.report.figures.streams import stream_bars, train_lines, train_results
from gibbsmin.report.figures.style import styled


def figures(folder: Path) -> list[Made]:
    """Draw a result folder and write its figures, in the place of earlier ones.

    Parameters
    ----------
    folder : Path
        What ``gibbsmin run`` has written.

    Returns
    -------
    list of Made
        What was made, in the order of ``figures/index.json``.

    Raises
    ------
    InputError
        It is no result folder, cannot be read, or cannot be written.
    """
    source = read_source(folder)
    with styled():
        return write_figures(list(draw(source)), folder, source.notes)


def draw(source: Source) -> Iterator[Drawn]:
    """Draw what a result has to show.

    Parameters
    ----------
    source : Source

    Yields
    ------
    Drawn
        What answers the case first.
    """
    colours = Colours()
    if source.is_train:
        yield from train_plan(source)
    if source.state is not None:
        yield from stream_bars(source, source.state, colours) if source.is_train else state_bars(source, source.state)
    elif source.kind not in ("grid", "in step"):
        results = train_results(source) if source.is_train else key_results(source)
        yield from scatter(source, results)
    elif len(source.inputs) == 1 or source.kind == "in step":
        yield from train_lines(source, colours) if source.is_train else _lines(source, colours)
    else:
        results = train_results(source) if source.is_train else key_results(source)
        if len(source.inputs) > 2:
            yield from slices(source, results)
        else:
            place = short_axis(source)
            for one in results:
                yield result_map(source, one) if place is None else family(source, one, place)


def _lines(source: Source, colours: Colours) -> Iterator[Drawn]:
    """Figures of a case of one mixture along one input."""
    asked = asked_figures(source)
    for one in (
        composition(source, colours),
        result_panels(source, state_quantities(source), "energy", f"What comes out besides{source.held}"),
        result_panels(source, asked or changing_figures(source), "key_figures", f"Key figures{source.held}"),
    ):
        if one is not None:
            yield one
