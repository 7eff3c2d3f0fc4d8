"""How much there is of each feed: flows and amounts as given, ratios solved against the other feeds."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np
from numpy.typing import NDArray

from gibbsmin.case.feed_schema import RATIOS, Feed
from gibbsmin.case.fields import RuleError
from gibbsmin.case.recipe import ANY_SIZE, Recipe, feed_size
from gibbsmin.errors import FeedError
from gibbsmin.practice.ratios import oxygen_need
from gibbsmin.units import one_of

Floats = NDArray[np.float64]


def read_basis(feeds: Mapping[str, Feed]) -> str:
    """Tell whether the feeds are amounts or flows.

    Parameters
    ----------
    feeds : mapping of str to Feed
        Tables of all feeds.

    Returns
    -------
    str
        ``"mol"`` or ``"mol/s"``.

    Raises
    ------
    RuleError
        Some are amounts and some are flows, or all are sized by ratios.
    """
    first = ""
    for name, feed in feeds.items():
        if feed.sized_by in RATIOS:
            continue
        units = {unit for _, unit in (one_of(value, ANY_SIZE, "amounts") for value in (feed.amounts or {}).values())}
        units |= set() if feed.amounts is not None else {feed_size(feed)[1]}
        for unit in sorted(units):
            basis = "mol/s" if unit.endswith("/s") else "mol"
            if first and basis != first:
                raise RuleError("some feeds are amounts and some are flows; use one kind", name, feed.sized_by)
            first = basis
    if not first:
        name, feed = next(iter(feeds.items()))
        raise RuleError("every feed is sized by a ratio; at least one needs a flow or an amount", name, feed.sized_by)
    return first


def feed_units(recipes: Sequence[Recipe], sizes: Mapping[str, Floats | float]) -> Floats:
    """Work out how many units of each feed there are.

    Parameters
    ----------
    recipes : sequence of Recipe
        The F feeds.
    sizes : mapping of str to array (states,) or float
        For each feed its size in units, or its ratio.

    Returns
    -------
    array (states, F)
        Units of each feed, [mol, kg, or either per second].

    Raises
    ------
    RuleError
        A ratio has nothing to be sized against.

    Notes
    -----
    A feed k sized by a ratio r_k brings q_k of the wanted substance a unit and answers to the needs c_j of the other
    feeds: q_k s_k - r_k sum_{j != k} c_j s_j = 0. The feeds that are so sized follow from one linear system.
    """
    size = np.stack(np.broadcast_arrays(*(np.atleast_1d(np.asarray(sizes[r.name], float)) for r in recipes)), axis=1)
    ratio_of = [k for k, recipe in enumerate(recipes) if recipe.sized_by in RATIOS]
    if not ratio_of:
        return size
    known = [k for k in range(len(recipes)) if k not in ratio_of]
    matrix = np.zeros((len(size), len(ratio_of), len(ratio_of)))
    right = np.zeros((len(size), len(ratio_of), 1))
    for row, k in enumerate(ratio_of):
        key = recipes[k].sized_by
        ratio = size[:, k] if key != "excess_air" else 1.0 + size[:, k] / 100.0
        brings, needs = _brings_and_needs(recipes, k)
        matrix[:, row, row] = brings
        for column, j in enumerate(ratio_of):
            if j != k:
                matrix[:, row, column] = -ratio * needs[j]
        right[:, row, 0] = ratio * (size[:, known] @ needs[known])
    try:
        solved = np.linalg.solve(matrix, right)[:, :, 0]  # (states, ratios)
    except np.linalg.LinAlgError:
        solved = np.full(right.shape[:2], np.nan)
    if not np.all(np.isfinite(solved) & (solved >= 0.0)):
        raise RuleError("the ratios of the feeds contradict each other", recipes[ratio_of[0]].name)
    units = size.copy()
    units[:, ratio_of] = solved
    for k in ratio_of:
        _, needs = _brings_and_needs(recipes, k)
        others = np.delete(np.arange(len(recipes)), k)
        if np.any(units[:, others] @ needs[others] <= 0.0):
            what = "carbon that counts" if recipes[k].sized_by == "steam_to_carbon" else "need of oxygen"
            raise RuleError(
                f"the other feeds have no {what}, so there is no ratio", recipes[k].name, recipes[k].sized_by
            )
    return units


def _brings_and_needs(recipes: Sequence[Recipe], k: int) -> tuple[float, Floats]:
    """Give what a unit of feed ``k`` brings, and what a unit of each feed needs of it, [mol]."""
    name, key = recipes[k].name, recipes[k].sized_by
    if key == "steam_to_carbon":
        brings, needs = recipes[k].of_composition(H=2.0, O=1.0), [recipe.carbon for recipe in recipes]
        what = "H2O"
    else:
        rivals = [recipe.name for recipe in recipes if recipe.sized_by in ("air_ratio", "excess_air")]
        if len(rivals) > 1:
            raise RuleError(f"{' and '.join(rivals)} are both sized by the need of oxygen; only one can be", name, key)
        brings = recipes[k].of_composition(O=2.0)
        needs = [0.0 if j == k else _need(recipe, name, key) for j, recipe in enumerate(recipes)]
        what = "O2"
    if not brings > 0.0:
        raise RuleError(f"the feed holds no {what}, so {key} cannot size it", name, key)
    return brings, np.array(needs)


def _need(recipe: Recipe, name: str, key: str) -> float:
    try:
        return oxygen_need(recipe.elements)
    except FeedError as error:
        raise RuleError(str(error), name, key) from None
