"""The ratios that the feeds stand in, whatever key sized them: of each that brings air, oxygen or steam, and of all.

Air ratio as `supply_and_need` counts it. Steam and oxygen to carbon of one feed are over the carbon of the others, as
they size it; those of all feeds count all water, O2 and carbon that takes part, the water of moist air and fuel too.
"""

from __future__ import annotations

from collections.abc import Sequence
from math import isclose
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.case.recipe import Recipe
from gibbsmin.errors import FeedError
from gibbsmin.practice.feeds.ratios import supply_and_need

Floats = NDArray[np.float64]

ALL_FEEDS: Final = "all feeds"
"""Stands for all feeds together; no feed can have a name with a blank in it."""

_LEAST: Final = 1e-3


def feed_ratios(recipes: Sequence[Recipe], units: Floats) -> dict[str, dict[str, float]]:
    """Work out the ratios of the feeds.

    Parameters
    ----------
    recipes : sequence of Recipe
        The F feeds.
    units : array (F,)
        Units of each, [mol, kg, or either per second].

    Returns
    -------
    dict of str to dict of str to float
        By feed, and for `ALL_FEEDS` where that says more: ``air_ratio``, ``excess_air`` (a fraction)
        and ``equivalence_ratio`` of what supplies oxygen; ``steam_to_carbon`` and ``oxygen_to_carbon`` where the
        oxygen does not suffice to burn all. Ratios that are not defined, or below 0.001, are left out.
    """
    live = [recipe.reacting for recipe in recipes]
    amount = np.asarray(units, float)
    try:
        balances = [supply_and_need(one.elements, one.of_composition(O=2.0)) for one in live]
    except FeedError:
        balances = []
    supply, need = (amount * np.array([pair[k] for pair in balances or [(0.0, 0.0)] * len(live)]) for k in (0, 1))
    carbon = amount * np.array([one.carbon for one in live])
    steam = amount * np.array([one.of_composition(H=2.0, O=1.0) for one in live])
    oxygen = amount * np.array([one.of_composition(O=2.0) for one in live])
    short = bool(balances) and supply.sum() < need.sum()
    found: dict[str, dict[str, float]] = {}
    for k, recipe in enumerate(recipes):
        mine = _air(supply[k], need.sum())
        if short:
            others = carbon.sum() - carbon[k]
            mine |= _over(others, steam_to_carbon=steam[k], oxygen_to_carbon=oxygen[k])
        if mine:
            found[recipe.name] = mine
    whole = _air(supply.sum(), need.sum())
    if short:
        whole |= _over(carbon.sum(), steam_to_carbon=steam.sum(), oxygen_to_carbon=oxygen.sum())
    if whole and not any(_same(whole, one) for one in found.values()):
        found[ALL_FEEDS] = whole
    return found


def _same(one: dict[str, float], other: dict[str, float]) -> bool:
    """Tell whether two sets of ratios are equal but for rounding."""
    return one.keys() == other.keys() and all(isclose(one[key], other[key], rel_tol=1e-9) for key in one)


def _air(supply: float, need: float) -> dict[str, float]:
    """Air ratio in its three forms."""
    ratio = _over(need, air_ratio=supply).get("air_ratio")
    return {} if ratio is None else {"air_ratio": ratio, "excess_air": ratio - 1.0, "equivalence_ratio": 1.0 / ratio}


def _over(whole: float, **parts: float) -> dict[str, float]:
    """Parts over a whole, without those that are not worth telling."""
    return {key: float(part / whole) for key, part in parts.items() if whole > 0.0 and part > _LEAST * whole}
