"""Feeds that mix before anything reacts: one temperature and pressure, no heat, composition as it came.

Gases mix ideally, solids and liquids stay pure. The temperature follows from the balance of enthalpy, which rises with
temperature for every species, so that bisection cannot miss it.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.practice.audit import feed_enthalpy, feed_entropy
from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]

_HALVINGS: Final = 60


def mixed_entropy(
    records: Sequence[Species], amounts: Floats, enthalpy: Floats, pressure: Floats, coldest: Floats, hottest: Floats
) -> Floats:
    """Entropy of feeds that have mixed without heat and without reaction.

    Parameters
    ----------
    records : sequence of Species
        What all feeds together are made of.
    amounts : (states, S) array
        [mol], in the order of ``records``.
    enthalpy : (states,) array
        Of all feeds together [J].
    pressure : (states,) array
        At which they mix [Pa].
    coldest, hottest : (states,) arrays
        Temperatures of the coldest and the hottest feed [K]; the mixture lies between.

    Returns
    -------
    (states,) array
        [J/K].

    Notes
    -----
    What the bisection leaves of the enthalpy counts with its entropy dH/T: all of it where a species changes its form
    just at that temperature, rounding elsewhere.
    """
    low, high = np.array(coldest, float), np.array(hottest, float)
    for _ in range(_HALVINGS):
        middle = 0.5 * (low + high)
        too_hot = feed_enthalpy(records, amounts, middle) > enthalpy
        low, high = np.where(too_hot, low, middle), np.where(too_hot, middle, high)
    rest = enthalpy - feed_enthalpy(records, amounts, low)
    return np.asarray(feed_entropy(records, amounts, low, pressure) + rest / low, float)
