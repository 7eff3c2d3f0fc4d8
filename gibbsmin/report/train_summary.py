"""What ``gibbsmin run`` prints of a train: its stream table, its steps, the numbers of its stages, its cautions."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path

from gibbsmin.practice.cautions import CLOSING, Caution, gather
from gibbsmin.report.key_figure_table import state_key_figures, sweep_key_figures
from gibbsmin.report.table import heading
from gibbsmin.report.words import labelled
from gibbsmin.results.judge_train import train_peaks
from gibbsmin.results.train_result import TrainResult


def train_summary(result: TrainResult, judged: Sequence[Sequence[Caution]], folder: Path) -> list[str]:
    """Lines for the terminal.

    Parameters
    ----------
    result : TrainResult
    judged : sequence of sequences of Caution
        The cautions of each state.
    folder : Path
        Where the result was written.

    Returns
    -------
    list of str
        None longer than 80 columns, but for the name of the folder.
    """
    lines = heading(result.title)
    for name, stage in result.stages.items():
        sets = {f"{name}: {group}": figures for group, figures in stage.key_figures.items()}
        lines += sweep_key_figures(sets) if len(result) > 1 else state_key_figures(sets, 0)
    found = gather(judged, train_peaks(result))
    lines.append("")
    for caution in found:
        lines += labelled("caution", caution.text)
    if found:
        lines += labelled("note", CLOSING)
    return [*lines, f"{'written':<15}{folder}/"]
