"""What a case asks for, in plain words and numbers, before anything is solved."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any, Final

from gibbsmin.case.recipe import Recipe
from gibbsmin.case.shown import shown_units
from gibbsmin.constants import STANDARD_TEMPERATURE
from gibbsmin.errors import FeedError
from gibbsmin.practice.heating import AT_15_CELSIUS, heating_value

if TYPE_CHECKING:
    from gibbsmin.case.study import Study

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
        a dict each, by reference temperature in K), ``held`` (as typed), ``remark``, ``sweep`` (a dict each: ``vary``,
        ``first``, ``last``, ``unit``, ``points``), ``states``, ``units`` (as typed). SI throughout, save for what is
        typed.
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
        "heating_values": {one.name: found for one in study.recipes if (found := _heating_values(one))},
        "held": case.held.model_dump(exclude_none=True),
        "remark": study.conditions.account.remark,
        "sweep": [
            {
                "vary": axis.vary,
                "first": axis.typed_values[0],
                "last": axis.typed_values[-1],
                "unit": axis.typed_unit,
                "points": len(axis.values),
            }
            for axis in study.axes
        ],
        "states": study.states,
        "units": shown_units(case, study.basis),
    }


def _heating_values(recipe: Recipe) -> dict[float, dict[str, tuple[float, float]]]:
    """Higher and lower heating value of a feed that burns, by reference temperature [K]: a mole, a kilogram, a Nm3."""
    if recipe.atoms:
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
