"""What the feeds bring, as ratios of the trade count it: carbon that can be reformed, water, fuel."""

from __future__ import annotations

from collections.abc import Iterable
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.practice.feeds.ratios import counted_carbon
from gibbsmin.practice.figures.potentials import record_of
from gibbsmin.practice.figures.settled import FeedFacts, Settled

Floats = NDArray[np.float64]

WATER: Final = ("H2O", "H2O(l)", "H2O(s)")
"""Water in all its forms."""

_NO_HEAT: Final = 1e3  # J/kg


def hydrocarbon_carbon(settled: Settled) -> Floats:
    """Carbon of hydrocarbons, oxygenates and fuels in all feeds; that of CO, CO2 and carbonates does not count.

    Parameters
    ----------
    settled : Settled
        Feeds and what they settle to.

    Returns
    -------
    array (states,)
        Atoms, [mol or mol/s]. All carbon of a fuel by analysis counts.
    """
    total = settled.zero
    for feed in settled.feeds.values():
        if feed.by_analysis:
            total = total + feed.elements.get("C", 0.0)
            continue
        for name, amount in feed.amounts.items():
            if count := counted_carbon(record_of(settled, name).elements):
                total = total + count * amount
    return total


def fed_amount(settled: Settled) -> Floats:
    """Amount of all species in the feeds, (states,), [mol or mol/s]; what a fuel by analysis is made of is left out."""
    return settled.fed(*dict.fromkeys(name for feed in settled.feeds.values() for name in feed.amounts))


def fuels(settled: Settled) -> list[FeedFacts]:
    """List the feeds that burn: with a lower heating value above nothing in some state, or by analysis and none known.

    Nothing is 1 kJ/kg, so that rounding does not make a fuel of the vapour in moist air.
    """
    return [
        feed
        for feed in settled.feeds.values()
        if (feed.by_analysis if feed.lower is None else bool((feed.lower > _NO_HEAT * feed.mass).any()))
    ]


def moisture(settled: Settled, feeds: Iterable[FeedFacts]) -> Floats:
    """Mass of water in feeds, (states,), [kg or kg/s]."""
    molar_mass = record_of(settled, "H2O").molar_mass
    parts = (molar_mass * feed.amounts[name] for feed in feeds for name in WATER if name in feed.amounts)
    return np.asarray(sum(parts, settled.zero))
