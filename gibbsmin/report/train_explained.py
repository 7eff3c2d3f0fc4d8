"""What ``gibbsmin check`` prints of a train: its feeds, its steps drawn, and each of them in words."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any, Final

from gibbsmin.report.explained import feeds_explained, states_explained
from gibbsmin.report.table import heading
from gibbsmin.report.train_drawing import train_drawing
from gibbsmin.report.words import labelled

_NAMED: Final = 12


def train_explained(told: Mapping[str, Any]) -> list[str]:
    """Put a train's description in lines.

    Parameters
    ----------
    told : mapping
        What ``TrainStudy.describe`` returns.

    Returns
    -------
    list of str
        None longer than 80 columns.
    """
    lines = [*heading(told["title"]), *feeds_explained(told)]
    lines += train_drawing(told, {stage["name"]: brief(stage) for stage in told["stages"]})
    for number, stage in enumerate(told["stages"], 1):
        lines += labelled(f"step {number}", _step(stage, told["products"]))
    lines += labelled("leave", ", ".join(told["products"]) or "nothing")
    return lines + states_explained(told)


def brief(stage: Mapping[str, Any]) -> str:
    """Say in a few words what a step does.

    Examples
    --------
    >>> brief({"held": {"temperature": "870 degC", "pressure": "24 bar"}, "frozen": False, "inlets": ["gas"],
    ...        "recycled": [], "sides": {}})
    'settles at 870 degC, 24 bar'
    """
    held = stage["held"]
    if held is None:
        if len([*stage["inlets"], *stage["recycled"]]) > 1:
            return "mixes"
        return "parts" if stage["sides"] else "passes on"
    doing = "" if stage["frozen"] else "settles"
    if "temperature" in held:
        told = f"to {held['temperature']}" if stage["frozen"] else f"settles at {held['temperature']}"
    elif "heat" in held:
        told = f"{doing} with {held['heat']} put in".strip()
    elif "entropy" in held:
        efficiency = held.get("isentropic_efficiency")
        told = "ideal shaft work" if efficiency is None else f"shaft work, efficiency {efficiency:g}"
        told = f"{doing}, {told}" if doing else told
    else:
        told = f"{doing}, adiabatic" if doing else "adiabatic"
    if "pressure" in held:
        told += f", to {held['pressure']}" if "entropy" in held else f", {held['pressure']}"
    if "pressure_drop" in held:
        told += f", {held['pressure_drop']} less"
    return told


def _step(stage: Mapping[str, Any], products: Sequence[str]) -> str:
    """Tell a step in sentences."""
    inlets = [*stage["inlets"], *(f"{name} (recycled)" for name in stage["recycled"])]
    told = [f"{stage['name']}: takes {_listed(inlets)}; {brief(stage)}{'; nothing reacts' if stage['frozen'] else ''}"]
    if stage["settling"]:
        told.append(f"{_listed(stage['settling'])} settle, all else passes")
    elif stage["species"] is not None:
        gas, condensed, passing = (stage["species"][key] for key in ("gas", "condensed", "passes"))
        told.append(f"{len(gas)} gases and {len(condensed)} solids and liquids may form")
        if passing:
            told.append(f"{_listed(passing)} pass{'es' if len(passing) == 1 else ''}")
    told += [f"{one['reaction']} as if {one['temperature']:+g} K away" for one in stage["approach"].values()]
    for name, one in stage["constraint"].items():
        parts = " + ".join(f"{count:g} {species}" for species, count in one["amounts"].items())
        held = f"{one['percent_of_feeds']:g} % of its inlets" if "percent_of_feeds" in one else one["sum"]
        told.append(f"{name}: {parts} held at {held}")
    for side, take in stage["sides"].items():
        told.append(f"{_take(take)} as {stage['name']}.{side}")
    if stage["name"] in products:
        told.append("the rest leaves" if stage["sides"] else "leaves")
    return "; ".join(told)


def _take(take: Mapping[str, Any]) -> str:
    """Say what a side stream takes."""
    of = take["of"] if isinstance(take["of"], str) else _listed(take["of"])
    what = {"all": "of it", "gas": "of the gas", "condensed": "of what is condensed"}.get(of, f"of {of}")
    if "percent" in take:
        return f"takes off {take['percent']:g} % {what}"
    if "flow" in take:
        return f"takes off {take['flow']} {what}"
    return f"takes off {take['ratio']:g} times what is left {what}"


def _listed(names: Sequence[str]) -> str:
    """Names with commas and an 'and', so many as have room."""
    if len(names) > _NAMED:
        return f"{', '.join(names[:_NAMED])} and {len(names) - _NAMED} more"
    return " and ".join([", ".join(names[:-1]), names[-1]] if len(names) > 1 else names)
