"""Inputs, and what is held, in the words of axes and titles."""

from __future__ import annotations

from collections.abc import Collection, Mapping
from typing import Any, Final

from gibbsmin.report.figures.style import in_formulas, unit_word
from gibbsmin.report.numbers import plain
from gibbsmin.units import unit_of

_ALONE: Final = ("air_ratio", "equivalence_ratio", "excess_air", "steam_to_carbon", "oxygen_to_carbon")
_WORDS: Final = {
    "pressure": "absolute pressure",
    "percent": "share",
    "recirculated_percent": "recirculated",
    "percent_of_feeds": "share of feeds",
    "flue_gas_oxygen_percent": "oxygen in flue gas",
    "sum": "sum held",
    "frozen_at": "freezing temperature",
}
_SI: Final = {"temperature": "K", "pressure": "Pa", "volume": "m3", "heat": ""}


def input_words(name: str) -> str:
    """Put the dotted name of an input in words.

    Examples
    --------
    >>> input_words("held.temperature"), input_words("feeds.air.air_ratio"), input_words("feeds.air.temperature")
    ('temperature', 'air ratio', 'temperature of air')
    >>> input_words("stages.purge_point.take.purge.percent"), input_words("species.conversion.CH4")
    ('purge taken at purge point', 'conversion of CH₄')
    >>> input_words("approach.shift.temperature"), input_words("species.carbon_conversion")
    ('approach temperature of shift', 'carbon conversion')
    """
    table, *middle, key = name.split(".") if "." in name else ("", name)
    words = _WORDS.get(key, key.replace("_", " "))
    if not middle:
        return words
    if table == "feeds" and key in _ALONE:
        return words
    if "take" in middle:
        side = middle[-1].replace("_", " ")
        at = f"{side} taken at {middle[0].replace('_', ' ')}"
        return f"flow of {at}" if key == "flow" else at
    if "conversion" in middle:
        return f"conversion of {in_formulas(key)}"
    if table == "approach" or "approach" in middle:
        return f"approach {words} of {middle[-1].replace('_', ' ')}"
    owner = next((part for part in reversed(middle) if part not in ("held", "species", "conversion")), "")
    return f"{words} of {owner.replace('_', ' ')}" if owner else words


def input_unit(name: str, unit: str) -> str:
    """Write the unit of an input as people do; percentages are plain numbers in the case.

    Examples
    --------
    >>> input_unit("held.temperature", "degC"), input_unit("species.carbon_conversion", "1")
    ('°C', '%')
    """
    key = name.rpartition(".")[2]
    percent = "percent" in key or key in ("excess_air", "carbon_conversion") or ".conversion." in name
    return "%" if percent and unit in ("1", "") else unit_word(unit)


def held_title(case: Mapping[str, Any], varied: Collection[str]) -> str:
    """Say what is held, for a title: ``" at 870 °C and 24 bar absolute"``.

    Parameters
    ----------
    case : mapping
        The case as a result has it; trains hold nothing as a whole.
    varied : collection of str
        Inputs that are varied, which are not held.

    Returns
    -------
    str
        With a blank before it; empty where nothing is held.

    Examples
    --------
    >>> held_title({"held": {"temperature": "870 degC", "pressure": "24 bar"}}, ["held.temperature"])
    ' at 24 bar absolute'
    >>> held_title({"held": {"adiabatic": True, "pressure": 1e5}}, [])
    ', adiabatic, at 100000 Pa absolute'
    """
    held = {key: value for key, value in (case.get("held") or {}).items() if value is not None}
    kept = {key: value for key, value in held.items() if f"held.{key}" not in varied}
    told = []
    if kept.get("adiabatic"):
        told.append("adiabatic")
    if "heat" in kept:
        told.append(f"heat {_typed('heat', kept['heat'])}")
    if "entropy" in kept:
        told.append("entropy of the feeds")
    if "isentropic_efficiency" in kept:
        told.append(f"isentropic efficiency {plain(float(kept['isentropic_efficiency']))}")
    if "volume" in kept:
        volume = kept["volume"]
        told.append("volume of the feeds" if volume == "of feeds" else f"volume {_typed('volume', volume)}")
    at = [_typed(key, kept[key]) for key in ("temperature", "pressure") if key in kept]
    place = f" at {' and '.join(at)}{' absolute' if 'pressure' in kept else ''}" if at else ""
    if not told:
        return place
    return ", " + ", ".join([*told, place.strip()] if place else told)


def typed_units(case: Mapping[str, Any], basis: str) -> dict[str, str]:
    """Find the units that temperatures, pressures and amounts were typed in; SI where none was."""
    found = {"temperature": "", "pressure": "", "amount": ""}
    tables = [case.get("held"), *(stage.get("held") for stage in case.get("stage", []))]
    feeds = list((case.get("feeds") or {}).values())
    for table in [*tables, *feeds]:
        for key in ("temperature", "pressure"):
            found[key] = found[key] or unit_of((table or {}).get(key) or "")
    sizes = [unit for feed in feeds for key in ("flow", "amount") if (unit := unit_of(feed.get(key) or ""))]
    molar = [unit for unit in sizes if "mol" in unit]
    if molar:
        found["amount"] = molar[0]
    elif basis == "mol/s" and sizes and "/" in sizes[0]:
        found["amount"] = f"kmol/{sizes[0].rpartition('/')[2]}"
    si = {"temperature": "K", "pressure": "Pa", "amount": basis}
    return {key: unit or si[key] for key, unit in found.items()}


def _typed(key: str, value: Any) -> str:
    """Write what was typed, with its unit as people write it; a bare number is SI."""
    if not isinstance(value, str):
        return f"{plain(float(value))} {_SI[key]}".strip()
    unit = unit_of(value)
    return f"{value.removesuffix(unit).strip()} {unit_word(unit)}".strip()
