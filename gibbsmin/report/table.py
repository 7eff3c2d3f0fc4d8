"""The terminal table of one state, 80 columns wide, plain ASCII."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from math import exp, isfinite, isinf
from typing import Final

from gibbsmin.practice.gas import dry
from gibbsmin.report.numbers import MISSING, figures, level, plain, prefixed, share
from gibbsmin.report.view import Phase, View
from gibbsmin.report.words import WIDTH, labelled, shortened
from gibbsmin.units import from_si

THRESHOLD: Final = 1e-6
"""Mole fraction down to which species are listed unless the case says otherwise, [-]."""

_NEAREST: Final = 4
_FAR: Final = 20.0  # RT; phases farther from forming than this are not told, save the nearest
_NAME: Final = 30
_CELL: Final = 16


def state_table(
    title: str,
    view: View,
    basis: str,
    units: Mapping[str, str],
    threshold: float = THRESHOLD,
    by_name: bool = False,
) -> list[str]:
    """Lines that show one state.

    Parameters
    ----------
    title : str
        First line.
    view : View
        The state.
    basis : str
        Unit of the amounts, ``mol`` or ``mol/s``.
    units : mapping of str to str
        Units to show in, by quantity (``temperature``, ``pressure``, ``amount``), as they were typed.
    threshold : float
        Mole fraction below which species are summed up in one line, [-].
    by_name : bool
        Whether species are in the order of their names, not of their amounts.

    Returns
    -------
    list of str
        None longer than 80 columns.
    """
    unit = units.get("amount", basis)
    lines = [*heading(title), *held_lines(view, units), ""]
    if not view.certified:
        return [*lines, *labelled("NOT CERTIFIED", view.reason)]
    for phase in view.phases:
        if phase.name == "gas":
            lines += _gas(phase, unit, threshold, by_name)
    lines += _condensed(view.phases, unit, by_name)
    lines.append("")
    if isfinite(view.density):
        lines += labelled(
            "density", f"{figures(view.density)} kg/m3, mean molar mass of the gas {_molar_mass(view)} g/mol"
        )
    lines += energy_lines(view, basis)
    if view.absent:
        lines += labelled("nearly formed", nearest_line(view.absent))
    return [*lines, *labelled("certificate", certificate_line(view))]


def heading(title: str) -> list[str]:
    """Title with a rule under it."""
    text = shortened(title, WIDTH)
    return [text, "-" * len(text)]


def held_lines(view: View, units: Mapping[str, str]) -> list[str]:
    """Temperature and pressure in the units that were typed, and where they are results what was held instead."""
    temperature, pressure = units.get("temperature", "K"), units.get("pressure", "Pa")
    T, P = from_si(view.temperature, temperature), from_si(view.pressure, pressure)
    if not view.held:
        return [f"at {plain(T)} {temperature} and {P:.6g} {pressure} absolute"]
    settled = [f"settles at {T:.1f} {temperature} and {P:.6g} {pressure} absolute"] if view.certified else []
    return [*settled, *labelled("held", view.held)]


def energy_lines(view: View, basis: str) -> list[str]:
    """Say what heat and work go in or out, what the mixture is like, and what the second law has to say."""
    unit = "W" if basis == "mol/s" else "J"
    lines = []
    if view.shaft and view.work is not None:
        way = "to be spent" if view.work >= 0.0 else "gained"
        lines += labelled("work", f"{prefixed(abs(view.work), unit)} {way}, without heat")
    elif view.given and view.heat is not None:
        way = "supplied" if view.heat >= 0.0 else "removed"
        lines += labelled("heat", f"{prefixed(abs(view.heat), unit)} {way}" if view.heat else "none: adiabatic")
    elif view.heat is not None:
        way = "to be supplied" if view.heat >= 0.0 else "to be removed"
        lines += labelled("heat", f"{prefixed(abs(view.heat), unit)} {way}")
    if view.properties:
        lines += labelled("properties", properties_line(view))
    if view.second_law:
        lines += labelled("second law", view.second_law)
    if view.remark:
        lines += labelled("feeds", view.remark)
    return lines


def properties_line(view: View) -> str:
    """Heat capacity, isentropic exponent and sound speed, with those of a frozen composition in brackets."""

    def pair(name: str, scale: float, unit: str) -> str:
        moving, frozen = (view.properties[key] * scale for key in (name, f"frozen_{name}"))
        text = "infinite" if isinf(moving) else figures(moving)
        return f"{text} ({figures(frozen)}){unit}"

    told = [f"cp {pair('heat_capacity', 1e-3 / view.mass, ' kJ/kg/K')}"]
    if isfinite(view.properties["frozen_sound_speed"]):
        told.append(f"isentropic exponent {pair('isentropic_exponent', 1.0, '')}")
        told.append(f"sound speed {pair('sound_speed', 1.0, ' m/s')}")
    return f"{', '.join(told)}; in brackets: composition frozen"


def nearest_line(absent: Mapping[str, float]) -> str:
    """List the absent phases nearest to forming, with their affinity and saturation."""
    rows = [(name, value) for k, (name, value) in enumerate(absent.items()) if k == 0 or value > -_FAR][:_NEAREST]
    told = [
        f"{name} {_rt(value)} RT" + (f" (saturation {exp(value):.2g})" if value > -7.0 else "") for name, value in rows
    ]
    return "; ".join(told)


def _rt(affinity: float) -> str:
    """Write an affinity: two decimals, more where it is all but zero."""
    if abs(affinity) < 5e-5:
        return "0"
    return f"{affinity:.2f}" if affinity < -0.05 else f"{affinity:.4f}"


def certificate_line(view: View) -> str:
    """Put the proof in one line."""
    return certificate(view.element_residual, view.gap, view.worst_affinity)


def certificate(residual: float, gap: float, affinity: float) -> str:
    """Say how well global minima are proved: the worst numbers of one state or of many."""
    return (
        f"proved (elements {residual:.0e}, gap {abs(gap):.0e},"
        f" affinity {affinity if affinity > 0.0 else 0.0:.0e})".replace("0e+00", "0")
    )


def _molar_mass(view: View) -> str:
    return figures(1e3 * view.mean_molar_mass) if view.mean_molar_mass > 0.0 else MISSING


def _row(name: str, cells: Iterable[str]) -> str:
    return f"  {shortened(name, _NAME):<{_NAME}}" + "".join(f"{cell:>{_CELL}}" for cell in cells)


def _percent(x: float) -> str:
    text = share(x)
    return text if text.endswith("ppm") else text + "    "


def _gas(phase: Phase, unit: str, threshold: float, by_name: bool) -> list[str]:
    """Show the gas: amount, mole percent wet and, where there is water, dry."""
    fractions = {name: x for name, (_, x) in phase.species.items()}
    wet = fractions.get("H2O", 0.0) >= threshold
    without_water = dry(fractions) if wet else {}
    heads = [unit, "mole % wet    ", "mole % dry    "] if wet else [unit, "mole %    "]
    lines = [f"{'gas':<{_NAME + 2}}" + "".join(f"{head:>{_CELL}}" for head in heads).rstrip()]
    large = [name for name, x in fractions.items() if x >= threshold]
    shown = sorted(large) if by_name else sorted(large, key=lambda name: -fractions[name])
    for name in shown:
        cells = [figures(from_si(phase.species[name][0], unit)), _percent(fractions[name])]
        if wet:
            cells.append(_percent(without_water[name]) if name in without_water else "")
        lines.append(_row(name, cells).rstrip())
    hidden = len(fractions) - len(shown)
    if hidden:
        lines.append(f"  {hidden} more below {level(threshold)}")
    return [*lines, _row("total", [figures(from_si(phase.amount, unit))]).rstrip()]


def _condensed(phases: Iterable[Phase], unit: str, by_name: bool) -> list[str]:
    """Solids and liquids, with their share of all moles."""
    all_phases = list(phases)
    rows = [phase for phase in all_phases if phase.name != "gas"]
    rows = sorted(rows, key=lambda phase: phase.name) if by_name else rows
    if not rows:
        return ["no solid, no liquid"]
    lines = [f"{'solids and liquids':<{_NAME + 2}}{unit:>{_CELL}}"]
    return lines + [_row(phase.name, [figures(from_si(phase.amount, unit))]) for phase in rows]
