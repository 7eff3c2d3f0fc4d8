"""Where condensed phases come and go along a sweep, read between its states."""

from __future__ import annotations

from collections.abc import Mapping
from typing import TYPE_CHECKING, NamedTuple

import numpy as np
from numpy.typing import NDArray

from gibbsmin.studies.labelled import dimensions

if TYPE_CHECKING:
    from gibbsmin.results.result import Result

Bools = NDArray[np.bool_]


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
        Of a grid, or of inputs in step.

    Returns
    -------
    list of Onset
        In the order of the other inputs, then of that one. States that are not certified end a line. Where inputs go
        in step, the line is that of the points, and no other input stays the same.
    """
    sizes = dimensions(result.axes)
    if not sizes:
        return []
    names = [axis.name for axis in result.axes]
    axis = "held.temperature" if "held.temperature" in names else names[-1]
    along = result.axes[names.index(axis)]
    place = list(sizes).index(along.dimension)
    rest = [other for other in result.axes if other.dimension != along.dimension]
    values = np.asarray(along.values, float)
    order = np.argsort(values, kind="stable") if len(sizes) == len(names) else np.arange(len(values))

    def lines(states: Bools) -> Bools:
        grid = np.moveaxis(states.reshape(tuple(sizes.values())), place, -1)
        return grid.reshape(-1, len(values))[:, order]  # (lines, values)

    values = values[order]
    known = lines(np.asarray(result.batch.certified, bool))
    found = []
    for k, name in enumerate(result.system.species):
        if result.system.gas[k] or not result.batch.amounts[:, k].any():
            continue
        here = lines(result.batch.amounts[:, k] > 0.0)
        changes = (here[:, :-1] != here[:, 1:]) & known[:, :-1] & known[:, 1:]
        found += [(int(line), k, int(i), name, bool(here[line, i + 1])) for line, i in np.argwhere(changes)]
    told = []
    for line, _, i, name, appears in sorted(found):
        index = np.unravel_index(line, tuple(len(other.values) for other in rest))
        others = {other.name: float(other.values[at]) for other, at in zip(rest, index, strict=True)}
        low, high = float(values[i]), float(values[i + 1])
        rising = low < high
        told.append(Onset(name, axis, *((low, high) if rising else (high, low)), appears == rising, others))
    return told
