"""``gibbsmin report``: draw the figures of a result folder, again or for the first time."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from gibbsmin.cli.messages import guarded


@guarded
def report(
    folders: Annotated[list[Path], typer.Argument(metavar="FOLDER", help="Result folders, as run has written them.")],
    quiet: Annotated[bool, typer.Option("--quiet", "-q", help="Print nothing; errors still show.")] = False,
) -> None:
    """Draw the figures of result folders into FOLDER/figures, in the place of earlier ones.

    Each figure is an SVG, a PNG and a CSV file; index.json lists them, with their titles, a sentence that tells what
    is to be seen, and notes. Exit code 2: a folder holds no whole result, or cannot be written.
    """
    for folder in folders:
        draw_figures(folder, show=not quiet)


def draw_figures(folder: Path, show: bool) -> None:
    """Draw the figures of a result folder and say what was drawn.

    Parameters
    ----------
    folder : Path
    show : bool
        Whether anything is said.
    """
    import logging

    # The first drawing on a machine lists its fonts; that it does, and where it keeps the list, is not worth a word.
    logging.getLogger("matplotlib").setLevel(logging.ERROR)
    from gibbsmin.report.figures.make import figures
    from gibbsmin.report.words import labelled
    from gibbsmin.results.folder import FIGURES

    made = figures(folder)
    if show:
        told = f"{folder / FIGURES}: {', '.join(one.name for one in made)}" if made else "none to draw"
        for line in labelled("figures", told):
            typer.echo(line)
