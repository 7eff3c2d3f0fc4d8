"""The rules of a case in words: what passes, what is left out, which reactions stop short."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any, Final

from gibbsmin.report.numbers import figures, level
from gibbsmin.report.words import labelled
from gibbsmin.thermo.database import load

_NAMED: Final = 12


def rule_lines(case: Mapping[str, Any], left_out: Mapping[str, float] | None = None) -> list[str]:
    """Lines that tell the rules.

    Parameters
    ----------
    case : mapping
        The case as read.
    left_out : mapping of str to float, optional
        Activity or mole fraction that excluded species would have in the state shown.

    Returns
    -------
    list of str
        None where there is no rule.
    """
    species = case.get("species", {})
    lines: list[str] = []
    for key, text in (("allow", "may form"), ("settling", "settle, all else passes"), ("inert", "take no part")):
        if species.get(key):
            lines += labelled("rule", f"{_list(species[key])} {text}")
    if left_out:
        lines += labelled("left out", "; ".join(_told(name, value) for name, value in left_out.items()))
    elif species.get("exclude"):
        lines += labelled("left out", _list(species["exclude"]))
    for name, percent in (species.get("conversion") or {}).items():
        lines += labelled("rule", f"{percent:g} % of the {name} of the feeds is converted")
    if species.get("carbon_conversion") is not None:
        lines += labelled("rule", f"{species['carbon_conversion']:g} % of the carbon of the fuel is converted")
    for one in case.get("approach", {}).values():
        lines += labelled("approach", f"{one['reaction']} as if {one['temperature']:+g} K from the temperature here")
    for name, one in case.get("constraint", {}).items():
        parts = " + ".join(f"{value:g} {label}" for label, value in one["amounts"].items())
        held = one["sum"] if "sum" in one else f"{one['percent_of_feeds']:g} % of what the feeds have"
        lines += labelled("constraint", f"{name}: {parts} = {held}")
    return lines


def _list(names: list[str]) -> str:
    """Names, so many as have room."""
    more = f" and {len(names) - _NAMED} more" if len(names) > _NAMED else ""
    return ", ".join(names[:_NAMED]) + more


def _told(name: str, value: float) -> str:
    """Tell of a species left out, with how much of it there would be."""
    if load().get(name).condensed:
        return f"{name} ({'would form, ' if value > 1.0 else ''}activity {figures(value, 2)})"
    return f"{name} ({level(float(f'{value:.2g}')) if value >= 1e-9 else 'below 1 ppbv'} of the gas)"
