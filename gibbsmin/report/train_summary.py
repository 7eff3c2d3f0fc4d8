"""What ``gibbsmin run`` prints of a train: its stream table, its steps, the numbers of its stages, its cautions."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path

import numpy as np

from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.safety.cautions import CLOSING, Caution, gather
from gibbsmin.report.key_figure_table import state_key_figures, sweep_key_figures
from gibbsmin.report.table import heading
from gibbsmin.report.train_steps import conversion_table, recovery_table, step_table, train_certificate
from gibbsmin.report.train_streams import stream_tables
from gibbsmin.report.train_sweep import base_state, conversion_figures, state_words, train_sweep
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
    if len(result) > 1:
        lines += [*train_sweep(result), *sweep_key_figures({**conversion_figures(result), **_key_figures(result)})]
        base = base_state(result)
        if result.certified[base]:
            lines += ["", *labelled("streams of", state_words(result, base)), *_state(result, base)]
    elif result.certified[0]:
        lines += [*_state(result, 0), *state_key_figures(_key_figures(result), 0)]
    else:
        lines += labelled("NOT CERTIFIED", result.solved.reasons[0])
        if any(np.isfinite(result.sheet.streams[name].mass[0]) for name in result.solved.steps):
            lines += stream_tables(result, 0)
    lines.append("")
    if len(result) > 1 or result.certified[0]:
        lines += labelled("certificate", train_certificate(result))
    found = gather(judged, train_peaks(result))
    for caution in found:
        lines += labelled("caution", caution.text)
    if found:
        lines += labelled("note", CLOSING)
    return [*lines, f"{'written':<15}{folder}/"]


def _state(result: TrainResult, index: int) -> list[str]:
    """Streams, steps, conversions of one state, and where its elements leave."""
    parts = (stream_tables, step_table, conversion_table, recovery_table)
    return [line for part in parts for line in part(result, index)]


def _key_figures(result: TrainResult) -> dict[str, Sequence[KeyFigure]]:
    """Key figures of all stages, by stage and set."""
    return {
        f"{name}: {group}": figures
        for name, stage in result.stages.items()
        for group, figures in stage.key_figures.items()
    }
