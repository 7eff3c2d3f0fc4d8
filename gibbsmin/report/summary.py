"""What ``gibbsmin run`` prints of a result: its table, its cautions, and where it was written."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path
from typing import TYPE_CHECKING

from gibbsmin.practice.safety.cautions import CLOSING, Caution, gather
from gibbsmin.report.key_figure_table import state_key_figures, sweep_key_figures
from gibbsmin.report.rule_words import rule_lines
from gibbsmin.report.sweep_table import sweep_table
from gibbsmin.report.table import THRESHOLD, state_table
from gibbsmin.report.view import view
from gibbsmin.report.words import labelled
from gibbsmin.results.judge import peaks
from gibbsmin.results.left_out import left_out

if TYPE_CHECKING:
    from gibbsmin.results.result import Result


def summary(result: Result, judged: Sequence[Sequence[Caution]], folder: Path) -> list[str]:
    """Lines for the terminal.

    Parameters
    ----------
    result : Result
    judged : sequence of sequences of Caution
        The cautions of each state.
    folder : Path
        Where the result was written.

    Returns
    -------
    list of str
        None longer than 80 columns, but for the name of the folder.
    """
    if len(result.batch) > 1:
        lines = sweep_table(result)
        lines[-1:] = [*rule_lines(result.case), *lines[-1:], *sweep_key_figures(result.key_figures)]
    else:
        show = result.case.get("show", {})
        threshold, by_name = float(show.get("threshold") or THRESHOLD), show.get("sort") == "name"
        lines = state_table(result.title, view(result, 0), result.basis, result.display_units, threshold, by_name)
        if result.batch.certified[0]:
            lines[-1:] = [*rule_lines(result.case, left_out(result, 0)), *lines[-1:]]
            lines += state_key_figures(result.key_figures, 0)
    if result.key_figures:
        lines.append("")
    found = gather(judged, peaks(result))
    for caution in found:
        lines += labelled("caution", caution.text)
    if found:
        lines += labelled("note", CLOSING)
    return [*lines, f"{'written':<15}{folder}/"]
