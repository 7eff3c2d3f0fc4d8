"""The arithmetic of limit values: mass concentrations, reference oxygen, mass per energy.

A concentration refers to dry gas at 0 °C and 101325 Pa and to a stated share of oxygen, so that it cannot be met by
blowing in air. With y the oxygen of air, and dilution by air taken for granted,

    c_ref = c (y - O2_ref) / (y - O2)                                                                   (1)

y is 20.95 % (ISO 2533); European rules also write 21, United States ones 20.9. Where the oxidant is no air, equation
(1) says nothing: then mass per energy is what can be compared.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

from gibbsmin.errors import InputError, nearest
from gibbsmin.practice.feeds.heating import NORMAL_MOLAR_VOLUME

Floats = NDArray[np.float64]

AIR_OXYGEN: Final = 0.2095
"""Oxygen of dry air in equation (1), mole fraction, [-] (ISO 2533, rounded)."""

DILUTED: Final = 0.17
"""Measured oxygen above which equation (1) multiplies the errors of the measurement by more than 4, mole fraction,
[-]; common practice, no source."""

ENRICHED: Final = 0.215
"""Oxygen of the dry oxidant above which it is no air, mole fraction, [-]; common practice, no source."""


@dataclass(frozen=True, slots=True)
class ReferenceOxygen:
    """Reference oxygen of an application: dry mole fraction ``oxygen`` [-], and the ``source`` of the rule."""

    oxygen: float
    source: str


_EU: Final = "Directive 2010/75/EU and Directive (EU) 2015/2193, from memory"

REFERENCE_OXYGEN: Final[Mapping[str, ReferenceOxygen]] = {
    "gas or liquid fuel": ReferenceOxygen(0.03, _EU),
    "solid fuel": ReferenceOxygen(0.06, _EU),
    "turbine or engine": ReferenceOxygen(0.15, _EU),
    "waste": ReferenceOxygen(0.11, "Directive 2010/75/EU, annex VI, from memory"),
    "cement": ReferenceOxygen(0.10, "Directive 2010/75/EU, annex VI, from memory"),
    "waste, United States": ReferenceOxygen(0.07, "40 CFR 60, from memory"),
    "glass": ReferenceOxygen(0.08, "common practice, no source"),
}
"""Reference oxygen by application. The permit decides; these are the usual ones."""


def reference_oxygen(application: str) -> ReferenceOxygen:
    """Look up the usual reference oxygen of an application.

    Parameters
    ----------
    application : str
        One of ``REFERENCE_OXYGEN``.

    Returns
    -------
    ReferenceOxygen

    Raises
    ------
    InputError
        No such application; the text lists them.

    Examples
    --------
    >>> reference_oxygen("solid fuel").oxygen
    0.06
    """
    found = REFERENCE_OXYGEN.get(application.strip().lower().replace("united states", "United States"))
    if found is None:
        near = nearest(application, REFERENCE_OXYGEN)
        raise InputError(
            f"no reference oxygen is known for {application!r}{near}; known are {', '.join(REFERENCE_OXYGEN)}; any"
            " other is given as a number"
        )
    return found


def at_reference_oxygen(
    value: ArrayLike,
    measured: ArrayLike,
    reference: float,
    air_oxygen: float = AIR_OXYGEN,
    *,
    only_above: bool = False,
) -> Floats:
    """Concentration in dry gas, turned to the reference oxygen by equation (1).

    Parameters
    ----------
    value : array (states,)
        Concentration in the dry gas, any unit of mass or amount per volume.
    measured : array (states,)
        O2 of the dry gas, mole fraction, [-].
    reference : float
        O2 of the reference, mole fraction, [-].
    air_oxygen : float
        O2 of dry air, mole fraction, [-].
    only_above : bool
        Whether gas with less O2 than the reference stays as it is: the rule for hazardous waste whose gas is cleaned
        (Directive 2010/75/EU, annex VI, from memory).

    Returns
    -------
    array (states,)
        In the unit of ``value``; nan where the gas holds as much O2 as air.

    Raises
    ------
    InputError
        Oxygen of air or reference that cannot be.

    Examples
    --------
    >>> round(float(at_reference_oxygen(180.0, 0.042, 0.03)), 2)
    192.9
    """
    check_oxygen(reference, air_oxygen)
    c, oxygen = np.asarray(value, float), np.asarray(measured, float)
    oxygen = np.maximum(oxygen, reference) if only_above else oxygen
    factor = np.full(oxygen.shape, np.nan)
    np.divide(air_oxygen - reference, air_oxygen - oxygen, out=factor, where=oxygen < air_oxygen)
    return c * factor


def check_oxygen(reference: float | None, air_oxygen: float) -> None:
    """Refuse an oxygen of air, or a reference, that cannot be meant."""
    if not 0.20 <= air_oxygen <= 0.22:
        raise InputError(f"oxygen of air: expected a mole fraction of 0.209 to 0.21, got {air_oxygen:g}")
    if reference is not None and not 0.0 <= reference < 0.20:
        raise InputError(f"reference oxygen: expected a mole fraction from 0 to below 0.2, got {reference:g}")


def mass_concentration(fraction: ArrayLike, molar_mass: float) -> Floats:
    """Mass in a normal cubic metre of ideal gas.

    Parameters
    ----------
    fraction : array (states,)
        Mole fraction, [-].
    molar_mass : float
        [kg/mol].

    Returns
    -------
    array (states,)
        [kg/Nm3], at 0 °C and 101325 Pa.

    Examples
    --------
    >>> round(1e6 * float(mass_concentration(100e-6, 28.010e-3)), 1)  # 100 ppmv of CO, in mg/Nm3
    125.0
    """
    if not molar_mass > 0.0:
        raise InputError(f"molar mass: expected above zero, got {molar_mass:g} kg/mol")
    return np.asarray(fraction, float) * (molar_mass / NORMAL_MOLAR_VOLUME)
