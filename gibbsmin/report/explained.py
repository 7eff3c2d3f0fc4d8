"""What ``gibbsmin check`` prints: a case in words and numbers, before anything is solved."""

from __future__ import annotations

from collections.abc import Mapping
from math import isfinite
from typing import Any, Final

from gibbsmin.report.held_words import held_words
from gibbsmin.report.numbers import figures, plain
from gibbsmin.report.table import heading
from gibbsmin.report.words import labelled, shortened
from gibbsmin.units import from_si

_NAMED: Final = 40
_ROWS: Final = 12
_PER_VOLUME: Final = ("per_normal_volume", "MJ/Nm3", 1e6)


def explained(told: Mapping[str, Any]) -> list[str]:
    """Put a case's description in lines.

    Parameters
    ----------
    told : mapping
        What ``Study.describe`` returns.

    Returns
    -------
    list of str
        None longer than 80 columns.
    """
    mass = "kg/s" if told["basis"] == "mol/s" else "kg"
    units = told["units"]
    lines = heading(told["title"])
    for feed in told["feeds"]:
        lines += _feed(feed, told["basis"], mass, units)
        lines += [*_heating(told["heating_values"].get(feed["name"], {})), ""]
    lines.append(f"{'all feeds, by element':<32}{told['basis']:>16}")
    lines += [f"  {element:<30}{figures(n):>16}" for element, n in told["elements"].items()]
    lines.append("")
    lines += _species(told["species"])
    lines += labelled("held", held_words(told["held"]))
    if told["remark"]:
        lines += labelled("feeds", told["remark"])
    for axis in told["sweep"]:
        span = f"{plain(axis['first'])} to {plain(axis['last'])} {axis['unit']}".removesuffix(" 1")
        lines += labelled("varied", f"{axis['vary']}, {axis['points']} values from {span}")
    count = told["states"]
    return [*lines, *labelled("to solve", f"{count} state{'s' if count != 1 else ''}; nothing was solved yet")]


def _feed(feed: Mapping[str, Any], basis: str, mass: str, units: Mapping[str, str]) -> list[str]:
    """Amounts of one feed, by species where they are known, else by element."""
    conditions = []
    for name, si in (("temperature", "K"), ("pressure", "Pa")):
        if feed[name] is not None:
            unit = units.get(name, si)
            conditions.append(f"{plain(from_si(feed[name], unit))} {unit}")
    lines = [
        shortened(f"feed {feed['name']}: {figures(feed['mass'])} {mass}{''.join(', ' + c for c in conditions)}", 80)
    ]
    parts = {**feed["amounts"], **{f"{element} (element)": n for element, n in feed["atoms"].items()}}
    shown = sorted(parts.items(), key=lambda item: -item[1])
    lines += [f"  {shortened(name, 30):<30}{figures(n):>16} {basis}" for name, n in shown[:_ROWS]]
    if len(shown) > _ROWS:
        lines.append(f"  {len(shown) - _ROWS} more")
    return lines


def _heating(values: Mapping[float, Mapping[str, tuple[float, float]]]) -> list[str]:
    """Heating values of a feed, higher before lower, at each reference temperature."""
    lines = []
    for T, value in values.items():
        told = []
        for key, unit, scale in (("per_mole", "kJ/mol", 1e3), ("per_mass", "MJ/kg", 1e6), _PER_VOLUME):
            higher, lower = value[key]
            if isfinite(higher):
                told.append(f"{figures(higher / scale)} / {figures(lower / scale)} {unit}")
        lines += labelled("heating value", f"higher / lower at {T - 273.15:.0f} degC: {', '.join(told)}")
    return lines


def _species(species: Mapping[str, list[str]]) -> list[str]:
    """How many species may form, and which as far as there is room."""
    lines = []
    for phase, label in (("gas", "gas"), ("condensed", "solid, liquid")):
        names = species[phase]
        if names:
            simple = sorted(names, key=lambda name: (len(name), name))[:_NAMED]
            told = " ".join(simple) + (f" and {len(names) - _NAMED} more" if len(names) > _NAMED else "")
            lines += labelled(label, f"{len(names)} may form: {told}")
    for key, label in (("exclude", "left out"), ("inert", "inert")):
        if species[key]:
            lines += labelled(label, " ".join(species[key]))
    return lines
