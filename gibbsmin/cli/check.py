"""``gibbsmin check``: read cases and say what they ask for, without solving."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from gibbsmin.cli.messages import WRONG, guarded, say
from gibbsmin.errors import GibbsminError


@guarded
def check(
    cases: Annotated[list[Path], typer.Argument(metavar="CASE", help="Case files (TOML).")],
) -> None:
    """Read and explain each case without solving: species, phases, feeds in mol and kg, size of the sweep."""
    from gibbsmin.case.read import read_case
    from gibbsmin.case.train_study import TrainStudy
    from gibbsmin.report.explained import explained
    from gibbsmin.report.train_explained import train_explained

    wrong = False
    for number, case in enumerate(cases):
        try:
            study = read_case(case)
            lines = (train_explained if isinstance(study, TrainStudy) else explained)(study.describe())
        except GibbsminError as error:
            say(f"gibbsmin: {error}")
            wrong = True
        else:
            typer.echo("\n".join([""] * (number > 0) + lines))
    if wrong:
        raise typer.Exit(WRONG)
