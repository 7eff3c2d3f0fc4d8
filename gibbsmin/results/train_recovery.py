"""Where the elements fed to a train leave it: the part of each that a product carries away.

With b_in what all feeds bring of an element and b_p what the product p holds of it, the part is b_p/b_in; over all
products it sums to 1. Of sulfur in the sulfur drawn off it is the sulfur recovery, of carbon in a fuel gas the carbon
recovery. Common practice, no source.
"""

from __future__ import annotations

from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.studies.train.train import Solved

Floats = NDArray[np.float64]

LEAST: Final = 1e-5
"""Part of an element that a second product must carry away for the element to be reported, [-]."""

TRACE: Final = 1e-6
"""Part of all atoms fed below which an element is not reported, [-]."""

_PASSING: Final = frozenset({"O", "He", "Ne", "Ar", "Kr", "Xe"})
"""Elements that nobody recovers by name: oxygen comes and goes with air and water, the others take no part."""


def recoveries(solved: Solved) -> dict[str, dict[str, Floats]]:
    """Work out where the elements leave.

    Parameters
    ----------
    solved : Solved

    Returns
    -------
    dict of str to dict of str to array (states,)
        Part of an element, [-], by element and product, the product with most first; nan where a state does not hold.
        Elements that leave by one product only are left out.
    """
    good = np.array([not reason for reason in solved.reasons])
    feeds = list(solved.feeds.values())
    streams = solved.streams
    symbols = dict.fromkeys(s for one in feeds for s in (*one.substances.elements, *one.atoms))
    fed = {s: np.sum([one.element(s) for one in feeds], axis=0) for s in symbols}
    atoms = np.sum(list(fed.values()), axis=0)
    found: dict[str, dict[str, Floats]] = {}
    for symbol, brought in fed.items():
        if symbol in _PASSING or not np.any(brought > TRACE * atoms):
            continue
        parts = {}
        for name in solved.products:
            part = np.divide(streams[name].element(symbol), brought, out=np.full(len(good), np.nan), where=brought > 0)
            part = np.where(good, part, np.nan)
            if np.any(part >= LEAST):
                parts[name] = part
        if len(parts) > 1:
            found[symbol] = dict(sorted(parts.items(), key=lambda one: -float(np.nanmax(one[1]))))
    return found
