"""Pollutants of a flue gas as permits count them: NOx as NO2, SOx as SO2, organic carbon as C, dust from ash.

What stands here is what equilibrium leaves at the temperature where the composition was frozen. Real gas holds less NO,
which forms slowly, and more CO and organics, which burn out slowly; what leaves the stack is measured, not calculated.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.elements import ATOMIC_WEIGHT, molar_mass, parse_formula
from gibbsmin.practice.feeds.heating import NORMAL_MOLAR_VOLUME
from gibbsmin.practice.figures.fed import WATER
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.practice.figures.tally import known, ratio
from gibbsmin.practice.flue_gas.emissions import at_reference_oxygen, mass_concentration

Floats = NDArray[np.float64]

LEAST: Final = 1e-8
"""Dry mole fraction that a pollutant must reach in some state to be listed, [-]."""

_COUNTED: Final = {
    "NOx": ("NO2", ("NO", "NO2")),
    "N2O": ("N2O", ("N2O",)),
    "CO": ("CO", ("CO",)),
    "SOx": ("SO2", ("SO2", "SO3", "H2SO4")),
    "SO3": ("SO3", ("SO3", "H2SO4")),
    "H2S": ("H2S", ("H2S",)),
    "HCl": ("HCl", ("HCl",)),
    "Cl2": ("Cl2", ("Cl2",)),
    "HF": ("HF", ("HF",)),
    "HBr": ("HBr", ("HBr",)),
    "NH3": ("NH3", ("NH3",)),
    "HCN": ("HCN", ("HCN",)),
    "Hg": ("Hg", ("Hg",)),
}
_ORGANIC: Final = "TOC"
_BY_VOLUME: Final = ("NOx", "CO", "NH3")
"""Pollutants that rules for turbines and engines limit by volume, too (common practice, no source)."""
_TURNED: Final = "Dry, 0 degC, 101325 Pa; none where the oxidant is enriched."


@dataclass(frozen=True)
class Basis:
    """What concentrations refer to.

    Attributes
    ----------
    reference : float or None
        O2 of the reference, dry mole fraction, [-]; None to leave it as it is.
    air_oxygen : float
        O2 of dry air, mole fraction, [-].
    only_above : bool
        Whether gas with less O2 than the reference stays as it is.
    enriched : array (states,) of bool
        Where the oxidant is no air, so that no reference oxygen applies.
    lower : array (states,) or None
        Lower heating value of the fuel, [J or W].
    """

    reference: float | None
    air_oxygen: float
    only_above: bool
    enriched: NDArray[np.bool_]
    lower: Floats | None


def pollutants(frozen: Settled, basis: Basis) -> list[KeyFigure]:
    """Pollutants in dry gas: by volume, by mass at the reference oxygen, and by mass per energy.

    Parameters
    ----------
    frozen : Settled
        The mixture whose composition leaves.
    basis : Basis
        What concentrations refer to.

    Returns
    -------
    list of KeyFigure
        Those that reach 10 ppb by volume in some state.
    """
    at = f"equilibrium at T = {spread(frozen.temperature)}; measured stacks decide"
    figures: list[KeyFigure] = []
    for name, (counted, members) in _COUNTED.items():
        present = [member for member in members if member in frozen.amounts]
        if name in ("NOx", "SOx"):
            text = f"{' + '.join(present)} as {counted}, {at}."
        elif len(present) > 1:
            text = f"{' + '.join(present)}, {at}."
        else:
            text = f"Of {at}."
        figures += _rows(frozen, basis, name, frozen.dry(*present), molar_mass(parse_formula(counted)[0]), text)
    carbon = ratio(frozen.element("C", _organic(frozen)), frozen.dry_gas)
    text = f"C of gases with C and H, HCN apart; {at}."
    return figures + _rows(frozen, basis, _ORGANIC, carbon, ATOMIC_WEIGHT["C"], text)


def dust(frozen: Settled, basis: Basis, carry_over: float) -> list[KeyFigure]:
    """Dust: the share of all solids and liquids, water apart, that the gas carries along.

    Parameters
    ----------
    frozen : Settled
        The mixture whose composition leaves.
    basis : Basis
        What concentrations refer to.
    carry_over : float
        Share that leaves with the gas, [-]: an input, no answer of equilibrium.

    Returns
    -------
    list of KeyFigure
    """
    ash = frozen.zero
    for name, record in frozen.records.items():
        if record.condensed and name not in WATER:
            ash = ash + frozen.amounts[name] * record.molar_mass
    mass = carry_over * ash
    value = ratio(mass, frozen.dry_gas * NORMAL_MOLAR_VOLUME)
    text = (
        f"{100.0 * carry_over:.3g} % of all solids and liquids are taken to leave with the gas; given, not calculated."
    )
    return known(_by_mass(frozen, basis, "dust", "dust", value, mass, text))


def spread(temperature: Floats) -> str:
    """Temperature or range of temperatures in words, in degC.

    Examples
    --------
    >>> spread(np.array([1273.15, 1273.15])), spread(np.array([1273.15, 1373.15]))
    ('1000 degC', '1000 to 1100 degC')
    """
    known_ones = temperature[np.isfinite(temperature)] - 273.15
    if not len(known_ones):
        return "unknown"
    low, high = f"{known_ones.min():.0f}", f"{known_ones.max():.0f}"
    return f"{low} degC" if low == high else f"{low} to {high} degC"


def _rows(frozen: Settled, basis: Basis, name: str, fraction: Floats, weight: float, note: str) -> list[KeyFigure]:
    """Make the rows of one pollutant; none where it never reaches ``LEAST``."""
    if not (fraction >= LEAST).any():
        return []
    key, end = name.lower(), ", at equilibrium"
    mass = fraction * frozen.dry_gas * weight
    figures = [KeyFigure(f"{key}_dry", f"{name} dry{end}", fraction, "1", "ppmv", note)]
    if basis.reference is not None and name in _BY_VOLUME:
        label = f"{name} at {_percent(basis.reference)}{end}"
        turned = _at_reference(fraction, frozen, basis, basis.reference)
        figures.append(KeyFigure(f"{key}_volume_at_reference_oxygen", label, turned, "1", "ppmv", f"{note} {_TURNED}"))
    return known([*figures, *_by_mass(frozen, basis, key, name, mass_concentration(fraction, weight), mass, note, end)])


def _by_mass(
    frozen: Settled, basis: Basis, key: str, name: str, value: Floats, mass: Floats, note: str, end: str = ""
) -> list[KeyFigure]:
    """Mass per normal volume of dry gas, at the reference oxygen where there is one, and per energy."""
    if basis.reference is None:
        figures = [KeyFigure(f"{key}_mass", f"{name}{end}, as it is", value, "kg/m3", "mg/Nm3", note)]
    else:
        label = f"{name} at {_percent(basis.reference)}{end}"
        turned = _at_reference(value, frozen, basis, basis.reference)
        figures = [KeyFigure(f"{key}_at_reference_oxygen", label, turned, "kg/m3", "mg/Nm3", f"{note} {_TURNED}")]
    if basis.lower is not None:
        per = ratio(mass, basis.lower)
        figures.append(KeyFigure(f"{key}_per_energy", f"{name} per LHV{end}", per, "kg/J", "mg/MJ", note))
    return figures


def _at_reference(value: Floats, frozen: Settled, basis: Basis, reference: float) -> Floats:
    """Turn a concentration in dry gas to the reference oxygen; nan where the oxidant is enriched."""
    turned = at_reference_oxygen(value, frozen.dry("O2"), reference, basis.air_oxygen, only_above=basis.only_above)
    return np.where(basis.enriched, np.nan, turned)


def _percent(oxygen: float) -> str:
    """Write a reference oxygen."""
    return f"{round(100.0 * oxygen, 1):g} % O2"


def _organic(frozen: Settled) -> list[str]:
    """Gases with carbon and hydrogen."""
    return [name for name in frozen.gases if {"C", "H"} <= frozen.records[name].elements.keys() and name != "HCN"]
