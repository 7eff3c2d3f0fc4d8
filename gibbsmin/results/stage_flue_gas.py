"""The flue gas of a stage of a train: what is fired anywhere before it, less what goes back."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from gibbsmin.practice.figures.settled import FeedFacts, Settled
from gibbsmin.studies.train.train import Solved

Floats = NDArray[np.float64]


def before(solved: Solved, recycled: Sequence[str], stage: str) -> tuple[list[str], list[str]]:
    """Find what a stage's gas is made from.

    Parameters
    ----------
    solved : Solved
    recycled : sequence of str
        Streams that come back from a later step.
    stage : str

    Returns
    -------
    feeds : list of str
        Feeds that reach the stage.
    back : list of str
        Streams that leave behind the stage and come back to it or before it.
    """
    feeds, joined = _upstream(solved, recycled, stage)
    source = _sources(solved)
    back = [name for name in joined if source[name] == stage or stage in _steps_before(solved, recycled, source[name])]
    return feeds, back


def leaving(solved: Solved, back: Sequence[str], here: Settled, facts: Mapping[str, FeedFacts]) -> Settled:
    """Take off a stage's gas what goes back, species by species.

    Parameters
    ----------
    solved : Solved
    back : sequence of str
        Streams that go back.
    here : Settled
        What the stage settles to.
    facts : mapping of str to FeedFacts
        What is fired.

    Returns
    -------
    Settled
        With ``facts`` as its feeds.
    """
    amounts = dict(here.amounts)
    for name in back:
        stream = solved.streams[name]
        for k, record in enumerate(stream.substances.records):
            if record.substance in amounts:
                amounts[record.substance] = np.maximum(amounts[record.substance] - stream.amounts[:, k], 0.0)
    return replace(here, amounts=amounts, feeds=facts)


def _sources(solved: Solved) -> dict[str, str]:
    """Name the step that gives each stream."""
    return {stream: name for name, step in solved.steps.items() for stream in step.outlets}


def _steps_before(solved: Solved, recycled: Sequence[str], stage: str) -> set[str]:
    """Find the steps that a stage's inlets come through, not counting the way round."""
    source = _sources(solved)
    found: set[str] = set()
    waiting = [stage]
    while waiting:
        for name in solved.steps[waiting.pop()].inlets:
            step = source.get(name)
            if step is not None and name not in recycled and step not in found:
                found.add(step)
                waiting.append(step)
    return found


def _upstream(solved: Solved, recycled: Sequence[str], stage: str) -> tuple[list[str], list[str]]:
    """List feeds and recycled streams that join on the way to a stage."""
    steps = {stage, *_steps_before(solved, recycled, stage)}
    inlets = [name for step in solved.steps if step in steps for name in solved.steps[step].inlets]
    return [name for name in solved.feeds if name in inlets], [name for name in recycled if name in inlets]
