"""How much there is of each feed: flows and amounts as given, ratios solved against the other feeds."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.case.feed_schema import OXYGEN_RATIOS, PLAIN_RATIOS, RATIOS, Feed
from gibbsmin.case.fields import RuleError
from gibbsmin.case.recipe import ANY_SIZE, Recipe, feed_size
from gibbsmin.errors import FeedError, nearest
from gibbsmin.practice.feeds.ratios import supply_and_need
from gibbsmin.units import one_of

Floats = NDArray[np.float64]

_ASKED_FOR: Final = {
    **dict.fromkeys(("steam_to_carbon", "oxygen_to_carbon"), "carbon that counts"),
    "mole_ratio": "amount",
    "mass_ratio": "mass",
}


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
    A feed k sized by a ratio r_k sets one linear equation, sum_j (b_j - r_k c_j) s_j = 0: what the feeds bring, b, and
    what they ask for, c, a unit. Feed k alone brings, and the others alone ask for it, save for the air ratio: there
    every oxidant brings its O2, and all feeds ask for what they need to burn. The feeds so sized follow together.
    In a train only feeds that go into the same stage count, if there are any.
    """
    size = np.stack(np.broadcast_arrays(*(np.atleast_1d(np.asarray(sizes[r.name], float)) for r in recipes)), axis=1)
    sized = [k for k, recipe in enumerate(recipes) if recipe.sized_by in RATIOS]
    if not sized:
        return size
    known = [k for k in range(len(recipes)) if k not in sized]
    brings, asks = (np.array(one) for one in zip(*(_brought_and_asked(recipes, k) for k in sized), strict=True))
    together = np.array([_together(recipes, k) for k in sized])
    brings, asks = brings * together, asks * together
    ratio = np.stack([_ratio(recipes[k].sized_by, size[:, k]) for k in sized], axis=1)
    rows = brings - ratio[:, :, None] * asks  # (states, ratios, F)
    try:
        solved = np.linalg.solve(rows[:, :, sized], -(rows[:, :, known] @ size[:, known, None]))[:, :, 0]
    except np.linalg.LinAlgError:
        solved = np.full((len(size), len(sized)), np.nan)
    units = size.copy()
    units[:, sized] = solved
    for place, k in enumerate(sized):
        _check(recipes, k, units, brings[place], asks[place])
    return units


def _together(recipes: Sequence[Recipe], k: int) -> list[bool]:
    """Tell which feeds count for the ratio of feed ``k``: those of its stage, all where it is alone or names one."""
    own = [one.group == recipes[k].group for one in recipes]
    return [True] * len(recipes) if recipes[k].to or sum(own) == 1 else own


def _check(recipes: Sequence[Recipe], k: int, units: Floats, brings: Floats, asks: Floats) -> None:
    """Refuse a ratio that no size of its feed meets."""
    name, key = recipes[k].name, recipes[k].sized_by
    others = [j for j in range(len(recipes)) if j != k]
    if not np.all(np.isfinite(units)):
        raise RuleError("the ratios of the feeds contradict each other", name, key)
    asked, brought = units[:, others] @ asks[others], units[:, others] @ brings[others]
    if np.any(asked <= 0.0):
        what = _ASKED_FOR.get(key, "need of oxygen")
        raise RuleError(f"the other feeds have no {what}, so there is no ratio", name, key)
    if np.any(units[:, k] < 0.0):
        worst = int(np.argmin(units[:, k]))
        if brought[worst] > 0.0:
            rivals = " and ".join(recipes[j].name for j in others if brings[j] > 0.0)
            raise RuleError(
                f"{rivals} alone gives an air ratio of {brought[worst] / asked[worst]:.4g}, more than is asked for",
                name,
                key,
            )
        raise RuleError("the ratios of the feeds contradict each other", name, key)


def _ratio(key: str, value: Floats) -> Floats:
    """Turn the value of a key into what is brought over what is asked for."""
    if key == "excess_air":
        return 1.0 + value / 100.0
    return 1.0 / value if key == "equivalence_ratio" else value


def _brought_and_asked(recipes: Sequence[Recipe], k: int) -> tuple[Floats, Floats]:
    """Give what a unit of each feed brings to the ratio of feed ``k``, and what it asks for, (F,) each."""
    one, key = recipes[k], recipes[k].sized_by
    if key in OXYGEN_RATIOS:
        return _oxygen(recipes, k)
    brings, asks = np.zeros(len(recipes)), np.zeros(len(recipes))
    if key in PLAIN_RATIOS:
        counted = _counted(recipes, k)
        if key == "mole_ratio":
            massive = next((recipes[j].name for j in (k, *counted) if recipes[j].by_mass), "")
            if massive:
                raise RuleError(f"{massive} is known by an analysis and has no moles; use mass_ratio", one.name, key)
        brings[k] = 1.0 if key == "mole_ratio" else one.mass
        asks[counted] = [1.0 if key == "mole_ratio" else recipes[j].mass_per(one.per) for j in counted]
        return brings, asks
    what, atoms = ("H2O", {"H": 2.0, "O": 1.0}) if key == "steam_to_carbon" else ("O2", {"O": 2.0})
    brings[k] = one.reacting.of_composition(**atoms)
    if not brings[k] > 0.0:
        raise RuleError(f"the feed holds no {what}, so {key} cannot size it", one.name, key)
    asks[:] = [0.0 if other is one else other.reacting.carbon for other in recipes]
    return brings, asks


def _oxygen(recipes: Sequence[Recipe], k: int) -> tuple[Floats, Floats]:
    """Give the O2 that a unit of each feed supplies, and what it needs to burn, (F,) each."""
    name, key = recipes[k].name, recipes[k].sized_by
    rivals = [recipe.name for recipe in recipes if recipe.sized_by in OXYGEN_RATIOS]
    if len(rivals) > 1:
        raise RuleError(f"{' and '.join(rivals)} are both sized by the need of oxygen; only one can be", name, key)
    try:
        live = [recipe.reacting for recipe in recipes]
        balances = [supply_and_need(one.elements, one.of_composition(O=2.0)) for one in live]
    except FeedError as error:
        raise RuleError(str(error), name, key) from None
    supply, need = (np.array(one) for one in zip(*balances, strict=True))
    if not supply[k] > 0.0:
        without = recipes[k].reacting.of_composition(O=2.0) == 0.0
        why = "holds no O2" if without else "needs more oxygen to burn than it holds"
        raise RuleError(f"the feed {why}, so {key} cannot size it", name, key)
    return supply, need


def _counted(recipes: Sequence[Recipe], k: int) -> list[int]:
    """Say which feeds the ratio of feed ``k`` counts."""
    one, names = recipes[k], [recipe.name for recipe in recipes]
    if not one.to:
        return [j for j in range(len(recipes)) if j != k]
    if one.to == one.name or one.to not in names:
        others = [name for name in names if name != one.name]
        found = "is this feed itself" if one.to == one.name else f"is no feed{nearest(one.to, others)}"
        raise RuleError(f"{one.to!r} {found}; the others are {', '.join(others) or 'none'}", one.name, "to")
    return [names.index(one.to)]
