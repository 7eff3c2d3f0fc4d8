"""Air as it comes: what it is made of, its pressure at altitude, the water in it, and enrichment with oxygen.

Water vapour is an ideal gas beside the dry gas, so that relative humidity, dew point and the rest are ways to say its
partial pressure p_w, with that of saturation p_s from `gibbsmin.practice.feeds.saturation`, over ice below 0.01 degC:

    p_w = RH p_s(T) = p_s(T_dew),   x = p_w/P,   Y = (M_w/M_dry) x/(1 - x)                                 (1)

The wet bulb is taken as the temperature of adiabatic saturation T*, the thermodynamic wet bulb of ASHRAE, Fundamentals
(Psychrometrics); a kilogram of dry gas that takes up water at T* until it is saturated there keeps its enthalpy:

    h(T) + Y h_v(T) + (Y* - Y) h_l(T*) = h(T*) + Y* h_v(T*),   Y* = Y at p_w = p_s(T*)                     (2)
"""

from __future__ import annotations

from collections.abc import Mapping
from typing import Final

from gibbsmin.constants import ATMOSPHERE
from gibbsmin.elements import ATOMIC_WEIGHT
from gibbsmin.errors import FeedError
from gibbsmin.practice.feeds.saturation import CRITICAL_TEMPERATURE, TRIPLE_POINT, dew_temperature, saturation_pressure
from gibbsmin.thermo.database import load
from gibbsmin.thermo.record import Species

DRY_AIR: Final = {"N2": 0.78087, "O2": 0.209476, "Ar": 0.00934, "CO2": 0.000314}
"""Mole fractions of dry air, [-]; ISO 2533:1975, whose traces (3e-5: Ne, He, Kr, CH4, H2) are counted as N2."""

LOWEST, HIGHEST = -2000.0, 11000.0
"""Altitudes between which the standard atmosphere has one gradient of temperature, [m]; ISO 2533:1975."""

WATER_MOLAR_MASS: Final = 2.0 * ATOMIC_WEIGHT["H"] + ATOMIC_WEIGHT["O"]
"""[kg/mol]."""


def dry_air(carbon_dioxide: float | None = None) -> dict[str, float]:
    """Composition of dry air.

    Parameters
    ----------
    carbon_dioxide : float, optional
        Mole fraction of CO2, [-]; that of ISO 2533:1975, 314 ppmv, unless given. The rest keeps its proportions.

    Returns
    -------
    dict of str to float
        Mole fractions, [-], which sum to one.
    """
    if carbon_dioxide is None:
        return dict(DRY_AIR)
    kept = (1.0 - carbon_dioxide) / (1.0 - DRY_AIR["CO2"])
    return {name: carbon_dioxide if name == "CO2" else x * kept for name, x in DRY_AIR.items()}


def pressure_at_altitude(altitude: float) -> float:
    """Pressure of the standard atmosphere, ISO 2533:1975.

    Parameters
    ----------
    altitude : float
        Above mean sea level, [m]; that it is geometric and not geopotential makes 0.05 % at 5000 m.

    Returns
    -------
    float
        [Pa].

    Raises
    ------
    FeedError
        Below -2000 m or above 11000 m.

    Examples
    --------
    >>> round(pressure_at_altitude(1000.0), -1)
    89870.0
    """
    if not LOWEST <= altitude <= HIGHEST:
        raise FeedError(f"{altitude:g} m is outside the standard atmosphere; expected {LOWEST:g} to {HIGHEST:g} m")
    return float(ATMOSPHERE * (1.0 - 0.0065 / 288.15 * altitude) ** (9.80665 / (287.05287 * 0.0065)))


def enriched(air: Mapping[str, float], oxygen: Mapping[str, float], wanted: float) -> tuple[dict[str, float], float]:
    """Mix dry air with oxygen until the mixture holds the O2 that is wanted.

    Parameters
    ----------
    air, oxygen : mapping of str to float
        Mole fractions of the dry air and of what is added, [-]; each sums to one.
    wanted : float
        Mole fraction of O2 in the dry mixture, [-].

    Returns
    -------
    mixture : dict of str to float
        Its mole fractions, [-].
    share : float
        Mole of air in a mole of mixture, [-].

    Raises
    ------
    FeedError
        The wanted O2 does not lie between that of air and that of the added gas.
    """
    least, most = air.get("O2", 0.0), oxygen.get("O2", 0.0)
    if not least < most or not least <= wanted <= most:
        raise FeedError(
            f"{100.0 * wanted:.6g} mole % O2 cannot be made of air with {100.0 * least:.6g} % and a gas with "
            f"{100.0 * most:.6g} %; expected a value between the two"
        )
    share = (most - wanted) / (most - least)
    names = dict.fromkeys([*air, *oxygen])
    return {name: share * air.get(name, 0.0) + (1.0 - share) * oxygen.get(name, 0.0) for name in names}, share


def water_of_relative_humidity(humidity: float, temperature: float, pressure: float) -> float:
    """Mole fraction of water in a gas of known relative humidity, eq. (1).

    Parameters
    ----------
    humidity : float
        Partial pressure of water over its saturation pressure (over ice below 0.01 degC), [-].
    temperature, pressure : float
        At which it was measured, [K], [Pa].

    Returns
    -------
    float
        [-], of the moist gas.

    Raises
    ------
    FeedError
        Water would fill the gas at that pressure, or there is no saturation above the critical temperature.
    """
    return _water(humidity * _saturation(temperature), pressure, f"at {temperature:.6g} K")


def water_of_dew_point(dew_point: float, pressure: float) -> float:
    """Mole fraction of water in a gas of known dew point, or frost point below 0.01 degC, eq. (1).

    Parameters
    ----------
    dew_point, pressure : float
        [K], and the pressure at which it was measured, [Pa].

    Returns
    -------
    float
        [-], of the moist gas.

    Raises
    ------
    FeedError
        As for `water_of_relative_humidity`.
    """
    return _water(_saturation(dew_point), pressure, f"with a dew point of {dew_point:.6g} K")


def water_of_humidity_ratio(ratio: float, dry_molar_mass: float) -> float:
    """Mole fraction of water in a gas of known humidity ratio, eq. (1).

    Parameters
    ----------
    ratio : float
        Mass of water for each mass of dry gas, [kg/kg].
    dry_molar_mass : float
        Of the dry gas, [kg/mol].

    Returns
    -------
    float
        [-], of the moist gas.
    """
    moles = ratio * dry_molar_mass / WATER_MOLAR_MASS
    return moles / (1.0 + moles)


def water_of_wet_bulb(dry: Mapping[Species, float], temperature: float, wet_bulb: float, pressure: float) -> float:
    """Mole fraction of water in a gas of known dry-bulb and wet-bulb temperature, eq. (2).

    Parameters
    ----------
    dry : mapping of Species to float
        Mole fractions of the dry gas, [-].
    temperature, wet_bulb : float
        Of the dry and the wet bulb, [K].
    pressure : float
        [Pa].

    Returns
    -------
    float
        [-], of the moist gas.

    Raises
    ------
    FeedError
        The wet bulb is below freezing, above the dry bulb, or lower than that of bone-dry gas.
    """
    if not TRIPLE_POINT <= wet_bulb <= temperature:
        raise FeedError(
            f"a wet bulb of {wet_bulb:.6g} K does not suit a dry bulb of {temperature:.6g} K; expected it between "
            f"{TRIPLE_POINT:.6g} K, where the wick freezes, and the dry bulb"
        )
    vapour, liquid = load().get("H2O"), load().get("H2O(l)")
    x = water_of_dew_point(wet_bulb, pressure)
    lost = sum(n * (float(one.enthalpy(temperature)) - float(one.enthalpy(wet_bulb))) for one, n in dry.items())
    taken_up = float(liquid.enthalpy(wet_bulb))
    saturated = x / (1.0 - x)  # mol of water for a mole of dry gas
    moles = (saturated * (float(vapour.enthalpy(wet_bulb)) - taken_up) - lost) / (
        float(vapour.enthalpy(temperature)) - taken_up
    )
    if moles < 0.0:
        raise FeedError(
            f"a wet bulb of {wet_bulb:.6g} K is colder than that of gas without any water at {temperature:.6g} K"
        )
    return moles / (1.0 + moles)


def humidity_ratio(water: float, dry_molar_mass: float) -> float:
    """Mass of water for each mass of dry gas, eq. (1).

    Parameters
    ----------
    water : float
        Mole fraction in the moist gas, [-].
    dry_molar_mass : float
        Of the dry gas, [kg/mol].

    Returns
    -------
    float
        [kg/kg].
    """
    return WATER_MOLAR_MASS / dry_molar_mass * water / (1.0 - water)


def dew_point(water: float, pressure: float) -> float:
    """Temperature to which a gas can be cooled before water drops out, as ice below 0.01 degC.

    Parameters
    ----------
    water : float
        Mole fraction in the moist gas, [-].
    pressure : float
        [Pa].

    Returns
    -------
    float
        [K]; nan without water.
    """
    return float(dew_temperature(water * pressure))


def _saturation(temperature: float) -> float:
    if temperature > CRITICAL_TEMPERATURE:
        raise FeedError(
            f"{temperature:.6g} K is above the critical temperature of water, {CRITICAL_TEMPERATURE:g} K, where "
            "nothing is saturated"
        )
    return float(saturation_pressure(temperature))


def _water(vapour_pressure: float, pressure: float, where: str) -> float:
    """Mole fraction of a vapour of known pressure; it must leave room for the gas."""
    if not vapour_pressure < pressure:
        raise FeedError(
            f"water {where} would have {vapour_pressure:.6g} Pa, and the gas as a whole has {pressure:.6g} Pa only; "
            "give temperature and pressure at which the humidity was measured"
        )
    return vapour_pressure / pressure
