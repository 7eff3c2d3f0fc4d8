"""What a case asks for, in plain words and numbers, before anything is solved."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING, Any, Final

from gibbsmin.case.feed_ratios import feed_ratios
from gibbsmin.case.fuel_described import describe_fuel
from gibbsmin.case.recipe import Recipe
from gibbsmin.case.shown import shown_units
from gibbsmin.case.sizes import feed_units
from gibbsmin.constants import ATMOSPHERE, STANDARD_TEMPERATURE
from gibbsmin.errors import FeedError
from gibbsmin.practice.feeds.air import WATER_MOLAR_MASS, dew_point, humidity_ratio
from gibbsmin.practice.feeds.heating import AT_15_CELSIUS, heating_value
from gibbsmin.studies.designs import RANDOM

if TYPE_CHECKING:
    from gibbsmin.case.study import Study
    from gibbsmin.case.study_frame import StudyFrame

_WATER: Final = {"H": 2.0, "O": 1.0}
_BURNS: Final = 1e3  # J/mol; a lower heating value below it is rounding, or the evaporation of water


def describe(study: Study) -> dict[str, Any]:
    """Say what a case asks for.

    Parameters
    ----------
    study : Study

    Returns
    -------
    dict
        ``title``, ``file``, ``basis``; ``elements`` (name to amount), ``species`` (``gas``, ``condensed``: names;
        ``exclude``, ``inert``), ``phases`` (names), ``feeds`` (a dict each: ``name``, ``amounts``, ``atoms``,
        ``element_amounts``, ``mass``, ``temperature``, ``pressure``), ``heating_values`` (of feeds that burn: name to
        a dict each, by reference temperature in K), ``fuels`` (by analysis: name to what
        `describe_fuel` gives), ``ratios`` (see `feed_ratios`), ``moisture`` (of gas with water
        vapour in it, by feed: ``mole_fraction``, ``humidity_ratio``, ``dew_point`` and the ``pressure`` that it is
        at), ``held`` (as typed), ``remark``, ``sweep``, ``design`` and ``states`` (see `describe_sweep`), ``units``
        (as typed). SI throughout, save for what is typed.
    """
    system, case = study.system, study.case
    gas = list(map(bool, system.gas))
    names = list(system.species)
    total: dict[str, float] = {}
    for feed in study.feeds.values():
        for element, n in feed.element_amounts.items():
            total[element] = total.get(element, 0.0) + n
    return {
        "title": case.title,
        "file": study.path,
        "basis": study.basis,
        "elements": total,
        "species": {
            "gas": [name for name, flag in zip(names, gas, strict=True) if flag],
            "condensed": [name for name, flag in zip(names, gas, strict=True) if not flag],
            "exclude": list(case.species.exclude),
            "inert": list(case.species.inert),
        },
        "phases": list(system.phases),
        "feeds": [feed.to_dict() for feed in study.feeds.values()],
        **describe_recipes(study.recipes),
        "held": case.held.model_dump(exclude_none=True),
        "remark": study.beginning().conditions.account.remark,
        **describe_sweep(study),
        "units": shown_units(case, study.basis),
    }


def describe_sweep(study: StudyFrame) -> dict[str, Any]:
    """Say what is varied, and how.

    Parameters
    ----------
    study : StudyFrame

    Returns
    -------
    dict
        ``sweep`` (a dict each: ``vary``, ``first``, ``last``, ``unit``, ``points`` - how many values there are, all
        those of the design where they are drawn at random - and ``logarithmic``), ``design`` (``kind``, and of a random
        one ``points`` and ``seed``), ``states``.
    """
    design = study.design
    drawn = {"points": study.all_states, "seed": design.seed} if design.kind in RANDOM else {}
    return {
        "sweep": [
            {
                "vary": axis.vary,
                "first": float(axis.typed(axis.listed)[0]),
                "last": float(axis.typed(axis.listed)[-1]),
                "unit": axis.typed_unit,
                "points": points,
                "logarithmic": axis.logarithmic,
            }
            for axis, points in zip(study.axes, design.sizes, strict=True)
        ],
        "design": {"kind": design.kind, **drawn},
        "states": study.all_states,
    }


def describe_recipes(recipes: Sequence[Recipe]) -> dict[str, Any]:
    """Say what the trade wants to know of feeds: ``heating_values``, ``fuels``, ``ratios``, ``moisture``.

    Parameters
    ----------
    recipes : sequence of Recipe

    Returns
    -------
    dict
        As `describe` has them.
    """
    sizes = {one.name: one.size for one in recipes}
    return {
        "heating_values": {one.name: found for one in recipes if (found := _heating_values(one))},
        "fuels": {one.name: describe_fuel(one.fuel) for one in recipes if one.fuel is not None},
        "ratios": feed_ratios(recipes, feed_units(recipes, sizes)[0]),
        "moisture": {one.name: water for one in recipes if (water := _moisture(one))},
    }


def _moisture(recipe: Recipe) -> dict[str, float]:
    """Water vapour of a gas, and its dew point at the pressure of the feed, else at 101325 Pa."""
    water = sum(n for one, n in recipe.species.items() if not one.condensed and dict(one.elements) == _WATER)
    dry = recipe.gas - water
    if recipe.fuel is not None or not (water > 0.0 and dry > 0.0):
        return {}
    pressure = ATMOSPHERE if recipe.pressure is None else recipe.pressure
    dry_mass = sum(n * one.molar_mass for one, n in recipe.species.items() if not one.condensed)
    return {
        "mole_fraction": water / recipe.gas,
        "humidity_ratio": humidity_ratio(water / recipe.gas, dry_mass / dry - water / dry * WATER_MOLAR_MASS),
        "dew_point": dew_point(water / recipe.gas, pressure),
        "pressure": pressure,
    }


def _heating_values(recipe: Recipe) -> dict[float, dict[str, tuple[float, float]]]:
    """Higher and lower heating value of a feed that burns, by reference temperature [K]: a mole, a kilogram, a Nm3."""
    if recipe.fuel is not None:  # told with its analysis
        return {}
    found = {}
    for T in (STANDARD_TEMPERATURE, AT_15_CELSIUS):
        try:
            value = heating_value(list(recipe.species), list(recipe.species.values()), T)
        except FeedError:
            return {}
        if value.per_mole[1] < _BURNS:
            return {}
        found[T] = {
            "per_mole": value.per_mole,
            "per_mass": value.per_mass,
            "per_normal_volume": value.per_normal_volume,
        }
    return found
