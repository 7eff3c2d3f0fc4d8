"""Where condensed phases come and go along a sweep, read between its states."""

from __future__ import annotations

from collections.abc import Mapping
from itertools import pairwise
from typing import TYPE_CHECKING, NamedTuple

import numpy as np

if TYPE_CHECKING:
    from gibbsmin.results.result import Result


class Onset(NamedTuple):
    """A phase that is there at one state of a sweep and not at the next.

    Attributes
    ----------
    phase : str
        Name of the phase.
    axis : str
        The input that changes.
    low, high : float
        The two values between which it changes, in the typed unit, low before high.
    appears : bool
        True where the phase is there at ``high``.
    others : mapping of str to float
        The other inputs, which stay the same, in typed units.
    """

    phase: str
    axis: str
    low: float
    high: float
    appears: bool
    others: Mapping[str, float]


def onsets(result: Result) -> list[Onset]:
    """Find the onsets along the temperature where it is varied, else along the last input of a sweep.

    Parameters
    ----------
    result : Result

    Returns
    -------
    list of Onset
        In the order of the other inputs, then of that one. States that are not certified end a line.
    """
    names = list(result.inputs)
    if not names:
        return []
    axis = "held.temperature" if "held.temperature" in names else names[-1]
    rest = [name for name in names if name != axis]
    values = np.asarray(result.inputs[axis], float)  # (states,)
    groups: dict[tuple[float, ...], list[int]] = {}
    for i in range(len(values)):
        groups.setdefault(tuple(float(result.inputs[name][i]) for name in rest), []).append(i)
    system, amounts, certified = result.system, result.batch.amounts, result.batch.certified
    condensed = [(k, name) for k, name in enumerate(system.species) if not system.gas[k]]
    changing = [(k, name) for k, name in condensed if np.unique(amounts[certified, k] > 0.0).size == 2]
    found = []
    for key, members in groups.items():
        order = sorted(members, key=lambda i: values[i])
        for k, name in changing:
            for i, j in pairwise(order):
                here, there = amounts[i, k] > 0.0, amounts[j, k] > 0.0
                if here != there and certified[i] and certified[j]:
                    others = dict(zip(rest, key, strict=True))
                    found.append(Onset(name, axis, float(values[i]), float(values[j]), bool(there), others))
    return found
