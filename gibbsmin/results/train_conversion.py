"""How much of what is fed to a train reacts: overall, in one pass, and in each step.

With n_in, n_out what feeds bring and products carry away of a substance, n_back what recycled streams bring back, and
n_1, n_2 before and behind a step that settles:

    overall = 1 - n_out/n_in,   per pass = (n_in - n_out)/(n_in + n_back),   in a step = 1 - n_2/n_1

Common practice, no source. The second is what a converter makes of its inlet where the recycle joins the fresh feed
before it and all of both reaches it. The forms of a substance (vapour, liquid, solid) count together, so that what only
condenses does not count as converted.
"""

from __future__ import annotations

import re
from collections.abc import Collection, Mapping
from dataclasses import dataclass
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.studies.train.stream import Stream
from gibbsmin.studies.train.train import Solved

Floats = NDArray[np.float64]

SHARE: Final = 1e-3
"""Part of all that is fed below which a substance is not reported, [-]."""

LEAST: Final = 1e-2
"""Conversion that a substance must reach overall, or in a step, to be reported of it, [-]."""

MOST: Final = 6
"""Substances that are reported at most: those of which most reacts."""

_FORM: Final = re.compile(r"\([sl]\)(?::.*)?$")


@dataclass(frozen=True)
class Conversion:
    """Of one substance, in every state: ``overall``, ``per_pass`` (None without a recycle), ``steps`` by name; [-]."""

    overall: Floats
    per_pass: Floats | None
    steps: Mapping[str, Floats]


def conversions(solved: Solved, recycled: Collection[str]) -> dict[str, Conversion]:
    """Work out the conversions of a train.

    Parameters
    ----------
    solved : Solved
    recycled : collection of str
        Streams that come back from a later step.

    Returns
    -------
    dict of str to Conversion
        By substance, that of which most reacts first; of a step only where less of it leaves than enters.
    """
    streams, good = solved.streams, np.array([not reason for reason in solved.reasons])
    records = next(iter(solved.feeds.values())).substances.records
    groups: dict[str, list[int]] = {}
    for k, record in enumerate(records):
        groups.setdefault(_FORM.sub("", record.substance), []).append(k)

    def amount(which: list[int], some: Collection[Stream]) -> Floats:
        return np.where(good, np.sum([one.amounts[:, which].sum(axis=1) for one in some], axis=0), np.nan)

    products, back = ([streams[name] for name in names] for names in (solved.products, recycled))
    fed = np.sum([one.total for one in solved.feeds.values()], axis=0)
    found: dict[str, tuple[float, Conversion]] = {}
    for name, which in groups.items():
        brought = amount(which, list(solved.feeds.values()))
        if not np.any(brought > SHARE * fed):
            continue
        reacted = brought - amount(which, products)
        overall = _over(reacted, brought)
        if not np.any(overall >= LEAST):
            continue
        per_pass = _over(reacted, brought + amount(which, back)) if back else None
        steps = {}
        for step, one in solved.steps.items():
            before, after = amount(which, [one.inlet]), amount(which, [one.changed.outlet])
            part = _over(before - after, np.where(before > SHARE * fed * LEAST, before, 0.0))
            if one.changed.batch is not None and np.any(part >= LEAST):
                steps[step] = np.where(part > 0.0, part, np.nan)
        found[name] = float(np.nanmax(reacted)), Conversion(overall, per_pass, steps)
    first = sorted(found, key=lambda name: -found[name][0])[:MOST]
    return {name: found[name][1] for name in first}


def _over(part: Floats, whole: Floats) -> Floats:
    """Part of a whole, (states,), nan where there is none."""
    return np.asarray(np.divide(part, whole, out=np.full_like(part, np.nan), where=whole > 0.0))
