"""What ``gibbsmin check`` prints: a case in words and numbers, before anything is solved."""

from __future__ import annotations

from collections.abc import Mapping
from math import isfinite
from typing import Any, Final

from gibbsmin.report.design_words import design_words
from gibbsmin.report.fuel_sheet import fuel_sheet
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
    lines = [*heading(told["title"]), *feeds_explained(told), *_species(told["species"])]
    lines += labelled("held", held_words(told["held"]))
    if told["remark"]:
        lines += labelled("feeds", told["remark"])
    return lines + states_explained(told)


def feeds_explained(told: Mapping[str, Any]) -> list[str]:
    """Put the feeds in lines, each and all together.

    Parameters
    ----------
    told : mapping
        What a study returns by ``describe``.

    Returns
    -------
    list of str
        With a blank line at the end.
    """
    mass = "kg/s" if told["basis"] == "mol/s" else "kg"
    units = told["units"]
    lines = []
    for feed in told["feeds"]:
        lines += _feed(feed, told["basis"], mass, units)
        lines += fuel_sheet(told["fuels"][feed["name"]]) if feed["name"] in told["fuels"] else []
        lines += _moisture(told["moisture"].get(feed["name"]), units)
        lines += _ratios("ratios", told["ratios"].get(feed["name"], {}))
        lines += [*_heating(told["heating_values"].get(feed["name"], {})), ""]
    lines.append(f"{'all feeds, by element':<32}{told['basis']:>16}")
    lines += [f"  {element:<30}{figures(n):>16}" for element, n in told["elements"].items()]
    lines.append("")
    if ratios := _ratios("all feeds", told["ratios"].get("all feeds", {})):
        lines += [*ratios, ""]
    return lines


def states_explained(told: Mapping[str, Any]) -> list[str]:
    """Say what is varied and how, and how many states there are to solve; ``told`` as for `feeds_explained`."""
    lines = []
    design = told["design"]
    drawn = "seed" in design
    for axis in told["sweep"]:
        span = f"{plain(axis['first'])} to {plain(axis['last'])} {axis['unit']}".removesuffix(" 1")
        values = f"from {span}" if drawn else f"{axis['points']:,} values from {span}"
        lines += labelled("varied", f"{axis['vary']}, {values}{', logarithmic' if axis['logarithmic'] else ''}")
    sizes = " x ".join(f"{axis['points']:,}" for axis in told["sweep"])
    how = design_words(design) or f"grid of {sizes}: each value with each"
    if len(told["sweep"]) > 1 or drawn:
        lines += labelled("design", how)
    count = told["states"]
    return [*lines, *labelled("to solve", f"{count:,} state{'s' if count != 1 else ''}; nothing was solved yet")]


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


def _moisture(moist: Mapping[str, float] | None, units: Mapping[str, str]) -> list[str]:
    """Water vapour of a gas."""
    if moist is None:
        return []
    x = moist["mole_fraction"]
    told = f"{figures(100.0 * x)} mole %" if x >= 1e-3 else f"{figures(1e6 * x)} ppmv"
    told += f" of water vapour, {figures(1e3 * moist['humidity_ratio'])} g/kg dry gas"
    if isfinite(moist["dew_point"]):
        temperature, pressure = (units.get(key, si) for key, si in (("temperature", "K"), ("pressure", "Pa")))
        told += (
            f", dew point {from_si(moist['dew_point'], temperature):.1f} {temperature} at "
            f"{figures(from_si(moist['pressure'], pressure))} {pressure}"
        )
    return labelled("moisture", told)


def _ratios(label: str, ratios: Mapping[str, float]) -> list[str]:
    """Air ratio in its three forms, steam and oxygen to carbon, as far as there are any."""
    told = []
    if "air_ratio" in ratios:
        inverse = figures(ratios["equivalence_ratio"])
        if ratios["excess_air"] > -1e-9:
            more = f"excess air {100.0 * ratios['excess_air']:.4g} %, equivalence ratio {inverse}"
        else:
            more = f"the ER of gasification; equivalence ratio of burners {inverse}"
        told.append(f"air ratio {figures(ratios['air_ratio'])} ({more})")
    if "steam_to_carbon" in ratios:
        told.append(f"steam to carbon {figures(ratios['steam_to_carbon'])} mol/mol")
    if "oxygen_to_carbon" in ratios:
        told.append(f"O2 to carbon {figures(ratios['oxygen_to_carbon'])} mol/mol")
    return labelled(label, ", ".join(told)) if told else []


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
