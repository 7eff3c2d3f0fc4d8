"""Heating values, relative density and Wobbe index of a gas, by the method of ISO 6976.

    H = Σ x_j H_j(T1),   Z = 1 - (Σ x_j s_j(T2))²,   M = Σ x_j M_j                                        (1)
    H_v = H p/(R T2 Z),   d = (M/M_air)(Z_air/Z),   W = H_v/√d                                            (2)

T1 is the temperature of combustion, T2 that of metering, p = 101325 Pa. Mole fractions x are those of the gas as it is
given, water included if there is any.

Heats of combustion H_j and molar masses are those of the project's own data: they differ from the standard's table by
less than 0.02 % for the usual components. Summation factors s_j and the figures of air are those of ISO 6976:2016 (from
memory; for acetylene, benzene and toluene of the edition of 1995), tested against second virial coefficients. A species
without a factor counts as an ideal gas, and how much of the gas that is is told.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import lru_cache
from typing import Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

from gibbsmin.constants import ATMOSPHERE, R
from gibbsmin.errors import FeedError, InputError
from gibbsmin.practice.feeds.heating import heating_value
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.practice.figures.tally import known
from gibbsmin.thermo.database import load
from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]

COMBUSTION: Final = (273.15, 288.15, 293.15, 298.15)
"""Temperatures of combustion, [K]."""
METERING: Final = (273.15, 288.15, 293.15)
"""Temperatures of metering, [K], in the order of the table below."""

FACTORS: Final[Mapping[str, tuple[float, float, float]]] = {
    "CH4": (0.04886, 0.04452, 0.04317),
    "C2H6": (0.0997, 0.0919, 0.0895),
    "C3H8": (0.1465, 0.1344, 0.1308),
    "C4H10:n-butane": (0.2022, 0.1840, 0.1785),
    "C4H10:isobutane": (0.1885, 0.1722, 0.1673),
    "C5H12:n-pentane": (0.2586, 0.2361, 0.2295),
    "C5H12:isopentane": (0.2458, 0.2251, 0.2189),
    "C5H12:neopentane": (0.2245, 0.2040, 0.1979),
    "C6H14:n-hexane": (0.3319, 0.3001, 0.2907),
    "C7H16:n-heptane": (0.4076, 0.3668, 0.3547),
    "C8H18:n-octane": (0.4845, 0.4346, 0.4198),
    "C2H4": (0.0868, 0.0799, 0.0777),
    "C3H6:propene": (0.1381, 0.1267, 0.1232),
    "C2H2:acetylene": (0.0949, 0.0837, 0.0837),
    "C6H6:benzene": (0.3017, 0.2720, 0.2530),
    "C7H8:toluene": (0.3886, 0.3421, 0.3286),
    "H2": (-0.0100, -0.0100, -0.0100),
    "H2O": (0.3093, 0.2562, 0.2419),
    "H2S": (0.1006, 0.0923, 0.0898),
    "NH3": (0.1230, 0.1100, 0.1062),
    "CO": (0.0258, 0.0217, 0.0203),
    "COS": (0.1211, 0.1114, 0.1082),
    "CS2": (0.2182, 0.1958, 0.1894),
    "SO2": (0.1579, 0.1406, 0.1354),
    "CO2": (0.0821, 0.0752, 0.0730),
    "N2": (0.0214, 0.0170, 0.0156),
    "O2": (0.0311, 0.0276, 0.0265),
    "Ar": (0.0307, 0.0273, 0.0262),
    "He": (-0.0100, -0.0100, -0.0100),
    "Ne": (-0.0100, -0.0100, -0.0100),
}
"""Summation factors s at the temperatures of metering, [-]."""

_AIR_MOLAR_MASS: Final = 0.02896546
_AIR_COMPRESSION: Final = (0.999419, 0.999595, 0.999645)
_LEAST_COMPRESSION: Final = 0.9  # of a gas that the standard is for
_TRACE: Final = 1e-7  # mole fraction below which a species of a product gas is not looked at
_TOLD: Final = 1e-4  # mole fraction from which what was left out is told
_LEAST_FUEL: Final = 1.0e6  # J/m3 from which a gas is a fuel; common practice, no source
_SUM: Final = 1e-6


@dataclass(frozen=True)
class GasQuality:
    """What a gas is worth as a fuel, (states,) each.

    Attributes
    ----------
    superior_molar, inferior_molar : array
        Heating values with water as a liquid and as a gas, [J/mol].
    superior_mass, inferior_mass : array
        [J/kg].
    superior, inferior : array
        Of the real gas at the temperature of metering and 101325 Pa, [J/m3].
    compression : array
        Z, [-]; nan where it is not above 0.9, for which the method is not made, and with it all that rests on it.
    density : array
        Of the real gas, [kg/m3].
    relative_density : array
        Against dry air at the same conditions, [-].
    wobbe_superior, wobbe_inferior : array
        [J/m3].
    without_factor, without_heat : array
        Mole fraction that counted as an ideal gas, and that counted as not burning, for want of a value, [-].
    """

    superior_molar: Floats
    inferior_molar: Floats
    superior_mass: Floats
    inferior_mass: Floats
    superior: Floats
    inferior: Floats
    compression: Floats
    density: Floats
    relative_density: Floats
    wobbe_superior: Floats
    wobbe_inferior: Floats
    without_factor: Floats
    without_heat: Floats


def gas_quality(
    fractions: Mapping[str, ArrayLike],
    combustion: float = 298.15,
    metering: float = 273.15,
    records: Mapping[str, Species] | None = None,
) -> GasQuality:
    """Heating values, relative density and Wobbe index of a gas, eq. (1) and (2).

    Parameters
    ----------
    fractions : mapping of str to array (states,) or float
        Mole fractions by species, [-]; they sum to one, or are nan where there is no gas.
    combustion, metering : float
        Temperatures of reference, [K]: 25 and 0 °C, or another pair of the standard.
    records : mapping of str to Species, optional
        Records that go before those of the database.

    Returns
    -------
    GasQuality

    Raises
    ------
    InputError
        Fractions that do not sum to one, or a temperature that is not one of the standard.

    Examples
    --------
    >>> methane = gas_quality({"CH4": 1.0}, 288.15, 288.15)
    >>> (methane.superior / 1e6).round(2).tolist(), (methane.wobbe_superior / 1e6).round(1).tolist()
    ([37.78], [50.7])
    """
    for what, value, allowed in (("combustion", combustion, COMBUSTION), ("metering", metering, METERING)):
        if value not in allowed:
            listed = ", ".join(f"{each:g}" for each in allowed)
            raise InputError(f"temperature of {what}: {value:g} K is not one of ISO 6976 here; expected {listed} K")
    if not fractions:
        raise InputError("a gas needs at least one species")
    x = dict(zip(fractions, np.broadcast_arrays(*map(np.atleast_1d, fractions.values())), strict=True))
    total = np.asarray(sum(x.values()), float)
    if np.any(np.abs(total - 1.0) > _SUM):
        raise InputError(f"mole fractions must sum to 1; they miss it by {float(np.nanmax(np.abs(total - 1.0))):.3g}")
    if below := [name for name, part in x.items() if np.any(part < 0.0)]:
        raise InputError(f"mole fractions must not be negative; got one of {below[0]}")
    mine = records or {}
    at = METERING.index(metering)
    zero = np.zeros(np.shape(total))
    superior, inferior, molar_mass, s, no_factor, no_heat = (zero.copy() for _ in range(6))
    for name, part in x.items():
        record = mine[name] if name in mine else load().get(name)
        heat = np.nan_to_num(heat_of_burning(record, combustion))
        superior, inferior = superior + part * heat[0], inferior + part * heat[1]
        molar_mass = molar_mass + part * record.molar_mass
        s = s + part * FACTORS.get(name, (0.0,) * 3)[at]
        no_factor = no_factor + (part if name not in FACTORS else 0.0)
        no_heat = no_heat + (part if np.isnan(heat_of_burning(record, combustion)[0]) else 0.0)
    Z = 1.0 - s**2
    Z = np.where(Z > _LEAST_COMPRESSION, Z, np.nan)
    moles = ATMOSPHERE / (R * metering * Z)
    d = molar_mass / _AIR_MOLAR_MASS * _AIR_COMPRESSION[at] / Z
    return GasQuality(
        superior_molar=superior,
        inferior_molar=inferior,
        superior_mass=superior / molar_mass,
        inferior_mass=inferior / molar_mass,
        superior=superior * moles,
        inferior=inferior * moles,
        compression=Z,
        density=molar_mass * moles,
        relative_density=d,
        wobbe_superior=superior * moles / np.sqrt(d),
        wobbe_inferior=inferior * moles / np.sqrt(d),
        without_factor=no_factor,
        without_heat=no_heat,
    )


@lru_cache(4096)
def heat_of_burning(record: Species, temperature: float = 298.15) -> tuple[float, float]:
    """Superior and inferior heating value of one species.

    Parameters
    ----------
    record : Species
        A gas, a solid or a liquid.
    temperature : float
        Of combustion, [K].

    Returns
    -------
    tuple of float
        [J/mol]; nan where the products of its combustion are a matter of choice.
    """
    try:
        return heating_value([record], [1.0], temperature).per_mole
    except FeedError:
        return np.nan, np.nan


def fuel_gas(settled: Settled, combustion: float = 298.15, metering: float = 273.15) -> list[KeyFigure]:
    """Tell what the gas, dried, is worth as a fuel, by ISO 6976.

    Parameters
    ----------
    settled : Settled
        Feeds and what they settle to.
    combustion, metering : float
        Temperatures of reference, [K].

    Returns
    -------
    list of KeyFigure
        None where the gas hardly burns: below 1 MJ/m3.
    """
    dry = {name: settled.dry(name) for name in settled.gases if name in settled.amounts and name != "H2O"}
    gas = {name: x for name, x in dry.items() if np.any(x > _TRACE)}
    if not gas:
        return []
    rest = np.asarray(sum(gas.values()), float)
    found = gas_quality({name: x / rest for name, x in gas.items()}, combustion, metering, settled.records)
    fuel = found.superior_molar * ATMOSPHERE / (R * metering) >= _LEAST_FUEL
    at = f"ISO 6976, {combustion - 273.15:g}/{metering - 273.15:g} degC, 101325 Pa; gas without its water"
    note = f"{at}{_left_out(found, fuel)}."
    rows = (
        ("wobbe_superior", "Wobbe index, superior, dry", found.wobbe_superior, "J/m3", "MJ/m3"),
        ("wobbe_inferior", "Wobbe index, inferior, dry", found.wobbe_inferior, "J/m3", "MJ/m3"),
        ("heating_value_superior", "heating value, superior, dry", found.superior, "J/m3", "MJ/m3"),
        ("heating_value_inferior", "heating value, inferior, dry", found.inferior, "J/m3", "MJ/m3"),
        ("heating_value_superior_mass", "heating value by mass, superior", found.superior_mass, "J/kg", "MJ/kg"),
        ("heating_value_inferior_mass", "heating value by mass, inferior", found.inferior_mass, "J/kg", "MJ/kg"),
        ("relative_density", "relative density, dry", found.relative_density, "1", ""),
        ("compression_factor", "compression factor, dry", found.compression, "1", ""),
        ("density_at_metering", "density at metering, dry", found.density, "kg/m3", ""),
    )
    return known(
        KeyFigure(name, label, np.where(fuel, value, np.nan), unit, shown, note)
        for name, label, value, unit, shown in rows
    )


def _left_out(found: GasQuality, fuel: NDArray[np.bool_]) -> str:
    """Say how much of the gas had no value, at most, where it is a fuel."""
    words = []
    for share, what in (
        (found.without_factor, "taken as an ideal gas for want of a summation factor"),
        (found.without_heat, "taken as not burning for want of defined products"),
    ):
        most = float(np.max(share[fuel], initial=0.0))
        if most > _TOLD:
            words.append(f"; up to {100.0 * most:.2g} % {what}")
    return "".join(words)
