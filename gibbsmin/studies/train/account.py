"""What each step of a train, and all of it, balances to: energy, entropy, lost work.

For a step with heat Q and work W put in, and T_s the temperature of what gives or takes the heat:

    H_out = H_in + Q + W                                                                                    (1)
    S_gen = S_out - S_in - Q/T_s,    lost work = T0 S_gen                                                   (2)

T_s is the least that loses: see `gibbsmin.practice.audit`. The whole train has the sums of its steps.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.studies.train.stream import Stream
from gibbsmin.studies.train.train import Solved, StepResult, element_balance

Floats = NDArray[np.float64]

WHOLE: Final = "whole train"
"""Stands for all steps together; no step can have a name with a blank in it."""


@dataclass(frozen=True)
class StepAccount:
    """Balances of a step, or of the whole train, in every state.

    Attributes
    ----------
    heat, work : array (states,)
        Put in, [J or W].
    energy_open : array (states,)
        What equation (1) leaves open, over the largest of its enthalpies, heat and work, [-].
    element_open : array (states,)
        Largest part of an element that does not come out again, [-].
    entropy_generated : array (states,)
        [J/K or W/K]; nan where the entropy of an inlet is not known.
    lost_work : array (states,)
        [J or W].
    """

    heat: Floats
    work: Floats
    energy_open: Floats
    element_open: Floats
    entropy_generated: Floats
    lost_work: Floats


def accounts(solved: Solved, surroundings_temperature: float) -> dict[str, StepAccount]:
    """Draw up the accounts of a train.

    Parameters
    ----------
    solved : Solved
    surroundings_temperature : float
        T0, [K].

    Returns
    -------
    dict of str to StepAccount
        By step, in the order of the train, and for `WHOLE`.
    """
    found = {name: _of_step(step, surroundings_temperature) for name, step in solved.steps.items()}
    streams = solved.streams
    heat = np.sum([one.heat for one in found.values()], axis=0)
    work = np.sum([one.work for one in found.values()], axis=0)
    made = np.sum([one.entropy_generated for one in found.values()], axis=0)
    products = [streams[name] for name in solved.products]
    worst = np.max([np.abs(part) for part in element_balance(solved).values()], axis=0)
    found[WHOLE] = StepAccount(
        heat, work, _energy_open(solved.feeds.values(), products, heat, work), worst, made,
        surroundings_temperature * made,
    )  # fmt: skip
    return found


def _of_step(step: StepResult, surroundings: float) -> StepAccount:
    """Account of one step."""
    heat, work = step.changed.heat, step.changed.work
    inlets, outlets = list(step.inlets.values()), list(step.outlets.values())
    T = step.changed.outlet.temperature
    T = np.where(np.isfinite(T), T, surroundings)
    T_s = np.where(heat > 0.0, np.maximum(T, surroundings), np.minimum(T, surroundings))
    S_in, S_out = (np.sum([one.entropy for one in streams], axis=0) for streams in (inlets, outlets))
    made = S_out - S_in - heat / T_s
    return StepAccount(
        heat, work, _energy_open(inlets, outlets, heat, work), _element_open(inlets, outlets), made, surroundings * made
    )


def _energy_open(inlets: Iterable[Stream], outlets: Iterable[Stream], heat: Floats, work: Floats) -> Floats:
    """Work out what equation (1) leaves open, relative to its largest term, (states,)."""
    terms = [*(one.enthalpy for one in inlets), *(-one.enthalpy for one in outlets), heat, work]
    largest = np.max(np.abs(terms), axis=0)
    open_part = np.abs(np.sum(terms, axis=0))
    return np.asarray(np.divide(open_part, largest, out=np.zeros_like(largest), where=largest > 0.0))


def _element_open(inlets: list[Stream], outlets: list[Stream]) -> Floats:
    """Largest part of an element that does not come out again, (states,)."""
    symbols = dict.fromkeys(symbol for one in inlets for symbol in (*one.substances.elements, *one.atoms))
    worst = np.zeros(len(inlets[0]))
    for symbol in symbols:
        brought = np.sum([one.element(symbol) for one in inlets], axis=0)
        gone = np.sum([one.element(symbol) for one in outlets], axis=0)
        part = np.divide(np.abs(brought - gone), brought, out=np.zeros_like(brought), where=brought > 0.0)
        worst = np.maximum(worst, part)
    return worst
