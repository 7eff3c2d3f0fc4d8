"""``gibbsmin run``: solve cases, print their tables, write their result folders."""

from __future__ import annotations

from collections.abc import Sequence
from enum import StrEnum
from pathlib import Path
from typing import TYPE_CHECKING, Annotated, Any

import typer

from gibbsmin.cli.messages import INTERRUPTED, NOT_CERTIFIED, WRONG, Progress, guarded, say
from gibbsmin.cli.messages import show as show_lines
from gibbsmin.cli.report import draw_figures
from gibbsmin.errors import GibbsminError, InputError

if TYPE_CHECKING:
    from gibbsmin.case.study import Study
    from gibbsmin.case.train_study import TrainStudy

_MANY = 10_000  # states from which writing takes so long that it is announced


class Also(StrEnum):
    """Formats of spreadsheets besides CSV."""

    EXCEL = "excel"
    PARQUET = "parquet"


@guarded
def run(
    cases: Annotated[list[Path], typer.Argument(metavar="CASE", help="Case files (TOML).")],
    out: Annotated[
        Path | None,
        typer.Option(
            metavar="DIR", help="Result folder; for several cases the folder of their folders. Default: results/CASE."
        ),
    ] = None,
    as_json: Annotated[bool, typer.Option("--json", help="Print the result as JSON and nothing else.")] = False,
    workers: Annotated[
        int | None,
        typer.Option(min=1, max=256, help="Processes for more than 20,000 states. Default: all processors."),
    ] = None,
    resume: Annotated[
        bool, typer.Option("--resume", help="Go on with an interrupted run of more than 20,000 states.")
    ] = False,
    cluster: Annotated[
        str, typer.Option(metavar="ADDRESS", help="Solve them on the Dask cluster of this scheduler.")
    ] = "",
    figures: Annotated[
        bool | None,
        typer.Option("--figures/--no-figures", help="Draw figures into DIR/figures. Default: of sweeps and trains."),
    ] = None,
    also: Annotated[
        list[Also] | None, typer.Option("--also", help="Write the spreadsheets as this too; may be given twice.")
    ] = None,
    quiet: Annotated[bool, typer.Option("--quiet", "-q", help="Print no tables; errors still show.")] = False,
) -> None:
    """Solve each case, print its table, and write its result folder.

    Exit code 0: all states solved and certified. 1: some state could not be certified, the rest is written. 2: a
    case or the call is wrong, and nothing is solved.
    """
    folders = _folders(cases, out)
    studies = _read(cases)
    from gibbsmin.results.exports import check_exports
    from gibbsmin.results.folder import as_json as written
    from gibbsmin.results.folder import check_place

    for study, folder in zip(studies, folders, strict=True):
        check_place(folder)
        check_exports(also or (), study.all_states)
    documents = []
    certified = True
    for number, (study, folder) in enumerate(zip(studies, folders, strict=True)):
        if number and not as_json and not quiet:
            typer.echo("")
        show = not as_json and not quiet
        if getattr(study, "is_large", False):
            data, good = _solve_large(study, folder, show, workers, resume, cluster, also or ())
        else:
            data, good = _solve(study, folder, show, also or ())
        is_sweep_or_train = any((folder / name).is_file() for name in ("result.nc", "streams.csv"))
        if figures or (figures is None and is_sweep_or_train):
            draw_figures(folder, show)
        documents.append(data)
        certified = certified and good
    if as_json:
        typer.echo(written(documents[0] if len(documents) == 1 else documents), nl=False)
    if not certified:
        raise typer.Exit(NOT_CERTIFIED)


def _folders(cases: list[Path], out: Path | None) -> list[Path]:
    """Where each case's result goes."""
    if out is not None and len(cases) == 1:
        return [out]
    folders = [(out or Path("results")) / case.stem for case in cases]
    twice = sorted({str(folder) for folder in folders if folders.count(folder) > 1})
    if twice:
        raise InputError(f"several cases would write to {twice[0]}; run them apart, each with its own --out")
    return folders


def _read(cases: list[Path]) -> list[Study | TrainStudy]:
    """Read all cases before any is solved, and say all that is wrong."""
    from gibbsmin.case.read import read_case

    studies, wrong = [], 0
    for case in cases:
        try:
            studies.append(read_case(case))
        except GibbsminError as error:
            say(f"gibbsmin: {error}")
            wrong += 1
    if wrong:
        raise typer.Exit(WRONG)
    return studies


def _solve_large(
    study: Any, folder: Path, show: bool, workers: int | None, resume: bool, cluster: str, also: Sequence[str]
) -> tuple[dict[str, Any], bool]:
    """Solve a study whose states are kept on disk; the document, and whether all states are certified."""
    from gibbsmin.case.large import cores
    from gibbsmin.report.large_summary import large_summary

    progress = Progress("solving")
    try:
        done = study.run_into(
            folder, progress, workers=cores() if workers is None else workers, resume=resume, cluster=cluster, also=also
        )
    except KeyboardInterrupt:
        say("gibbsmin: stopped; what is solved is kept, run again with --resume to go on")
        raise typer.Exit(INTERRUPTED) from None
    finally:
        progress.close()
    if show:
        show_lines(large_summary(done.document, folder))
    if not done.all_certified:
        failed = done.document["count"] - done.document["certified"]
        say(f"gibbsmin: {failed} of {done.document['count']} states could not be certified; the rest is written")
    return done.document, done.all_certified


def _solve(study: Study | TrainStudy, folder: Path, show: bool, also: Sequence[str]) -> tuple[dict[str, Any], bool]:
    """Solve one case, write its folder, show it; the document, and whether all states are certified."""
    from gibbsmin.compiled import cache_is_cold
    from gibbsmin.report.summary import summary
    from gibbsmin.report.train_summary import train_summary
    from gibbsmin.results.folder import write_folder
    from gibbsmin.results.judge import judge
    from gibbsmin.results.judge_train import judge_train
    from gibbsmin.results.train_result import TrainResult

    if cache_is_cold():
        say("Compiling the solver for this machine, once; 10 to 15 s ...")
    progress = Progress("solving")
    try:
        result = study.run(progress=progress)
    finally:
        progress.close()
    judged = judge_train(result) if isinstance(result, TrainResult) else judge(result)
    if len(judged) > _MANY:
        say(f"Writing {len(judged)} states to {folder} ...")
    data = write_folder(result, judged, folder, also)
    if isinstance(result, TrainResult):
        lines, certified = train_summary(result, judged, folder), result.certified
    else:
        lines, certified = summary(result, judged, folder), result.batch.certified
    if show:
        show_lines(lines)
    good = [bool(flag) for flag in certified]
    if not all(good):
        say(f"gibbsmin: {good.count(False)} of {len(good)} states could not be certified; the rest is written")
    return data, all(good)
