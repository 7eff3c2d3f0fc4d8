"""The lines of ``gibbsmin check`` on a fuel known by its analysis."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from gibbsmin.report.numbers import figures
from gibbsmin.report.words import labelled, shortened

_WIDE = 13


def fuel_sheet(fuel: Mapping[str, Any]) -> list[str]:
    """Put what is known of a fuel in lines.

    Parameters
    ----------
    fuel : mapping
        What ``describe_fuel`` returns.

    Returns
    -------
    list of str
        None longer than 80 columns.
    """
    bases = fuel["bases"]
    lines = [f"  {'mass percent':<20}" + "".join(f"{name:>{_WIDE}}" for name in bases)]
    for part in next(iter(bases.values()))["percent"]:
        cells = [_cell(basis["percent"].get(part, 0.0), 2) for basis in bases.values()]
        lines.append(f"  {shortened(part, 20):<20}" + "".join(f"{cell:>{_WIDE}}" for cell in cells))
    for key in ("higher", "lower"):
        cells = [_cell(basis[key] / 1e6, 3) for basis in bases.values()]
        lines.append(f"  {f'{key} value, MJ/kg':<20}" + "".join(f"{cell:>{_WIDE}}" for cell in cells))
    lines += labelled("heating value", _heat(fuel))
    if fuel["oxygen_need"] is not None:
        volume, mass = fuel["air_need"]
        lines += labelled(
            "to burn",
            f"{figures(fuel['oxygen_need'])} mol O2, {figures(volume)} Nm3 or {figures(mass)} kg of dry air (ISO 2533; "
            "Nm3 at 0 degC and 101325 Pa) a kg as received",
        )
    if fuel["moisture_dry"]:
        lines += labelled("moisture", f"{figures(fuel['moisture_dry'])} % of the dry fuel")
    if fuel["base_to_acid"] is not None:
        lines += labelled(
            "ash",
            f"base to acid {figures(fuel['base_to_acid'], 3)}; alkali index {figures(fuel['alkali_index'] * 1e9, 3)} "
            "kg K2O and Na2O a GJ of higher value (fouling probable above 0.17, certain above 0.34: Miles et al. 1995)",
        )
    for note in fuel["notes"]:
        lines += labelled("note", note)
    return lines


def _heat(fuel: Mapping[str, Any]) -> str:
    """Where the heating value comes from, and what hangs on it."""
    source, estimate = fuel["correlation"], fuel["estimate"] / 1e6
    if not fuel["stated"]:
        told = f"from the correlation of {source}, {fuel['correlation_error']}"
    elif estimate == estimate:
        told = f"stated; the correlation of {source} gives {figures(estimate)} MJ/kg, higher, as received"
    else:
        told = f"stated; the correlation of {source} cannot be compared"
    formation = figures(fuel["formation_enthalpy"] / 1e6)
    return (
        f"{told}. 25 degC, constant pressure. What burns of a kg as received has from it an enthalpy of formation of "
        f"{formation} MJ; sensible heat by Merrick 1983"
    )


def _cell(value: float, decimals: int) -> str:
    return f"{value:.{decimals}f}" if value >= 0.5 * 10.0**-decimals or value <= 0.0 else f"{value:.2g}"
