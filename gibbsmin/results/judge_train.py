"""Cautions of every state of a train: those of its stages, each with the name of the stage."""

from __future__ import annotations

from dataclasses import replace
from typing import Final

from gibbsmin.practice.safety.cautions import Caution
from gibbsmin.results.judge import judge, peaks
from gibbsmin.results.train_result import TrainResult

OF_MEETING: Final = ("flammable feed", "hot premix")
"""Kinds that warn of fuel and oxygen before they react; gas that has just settled is past that."""


def judge_train(result: TrainResult) -> list[list[Caution]]:
    """Return the cautions of each state.

    Parameters
    ----------
    result : TrainResult

    Returns
    -------
    list of list of Caution
        Of each kind the gravest of all stages.
    """
    found: list[dict[str, Caution]] = [{} for _ in range(len(result))]
    settled = {stream for name in result.stages for stream in result.solved.steps[name].outlets}
    for name, stage in result.stages.items():
        inlets = list(result.solved.steps[name].inlets)
        nothing_meets = len(inlets) == 1 and inlets[0] in settled
        for state, cautions in enumerate(judge(stage)):
            for one in cautions:
                if nothing_meets and one.kind in OF_MEETING:
                    continue
                known = found[state].get(one.kind)
                if known is None or one.weight > known.weight:
                    found[state][one.kind] = replace(one, text=f"Stage {name}: {one.text}")
    return [list(one.values()) for one in found]


def train_peaks(result: TrainResult) -> dict[str, float]:
    """Return the highest mole fraction of each gas in any certified state of any stage, [-]."""
    highest: dict[str, float] = {}
    for stage in result.stages.values():
        for name, x in peaks(stage).items():
            highest[name] = max(highest.get(name, 0.0), x)
    return highest
