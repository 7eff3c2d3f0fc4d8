"""Limits that cautions are raised at: toxic gases, flammable gases, oxygen. Every row says where it comes from.

Toxic: IDLH is the concentration immediately dangerous to life or health of the US National Institute for
Occupational Safety and Health (NIOSH, 1994 list as revised); the lower level is the NIOSH recommended limit for 15
minutes, the ceiling, or the 8-hour mean where there is no shorter one. Values in mg/m3 are turned into ppm by volume
at 25 degC and 101325 Pa. Flammable: limits in air at 25 degC and 1 atm, the wider of NFPA 497 (2008) and
IEC 60079-20-1 (2010). What was not read in its source is marked "from memory".
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

from gibbsmin.constants import ATMOSPHERE, STANDARD_TEMPERATURE, R
from gibbsmin.elements import molar_mass, parse_formula

_MEMORY: Final = "NIOSH, from memory"
_NIOSH: Final = "NIOSH"
_PROFILES: Final = "NIOSH, IDLH value profiles of 2025 (read in a notice of AIHA, July 2025)"


@dataclass(frozen=True, slots=True)
class ToxicGas:
    """A gas that harms people.

    Attributes
    ----------
    species : str
        Name of the species.
    dangerous : float or None
        Mole fraction immediately dangerous to life or health (IDLH), [-]; None where none is published.
    limit : float
        Mole fraction at which a caution begins, [-].
    kind : str
        What ``limit`` is: ``ceiling``, ``15 min``, ``10 min`` or ``8 h``.
    source : str
        Where both come from.
    """

    species: str
    dangerous: float | None
    limit: float
    kind: str
    source: str


def _ppm(species: str, dangerous: float | None, limit: float, kind: str, source: str = _MEMORY) -> tuple[str, ToxicGas]:
    """Make a row from limits in ppm by volume."""
    return species, ToxicGas(species, None if dangerous is None else dangerous * 1e-6, limit * 1e-6, kind, source)


def _mg(species: str, dangerous: float, limit: float, kind: str, source: str = _MEMORY) -> tuple[str, ToxicGas]:
    """Make a row from limits in mg/m3 of air at 25 degC and 101325 Pa."""
    per_mole = molar_mass(parse_formula(species)[0]) * 1e6  # mg/mol
    scale = R * STANDARD_TEMPERATURE / ATMOSPHERE / per_mole  # m3/mg
    return species, ToxicGas(species, dangerous * scale, limit * scale, kind, source)


TOXIC: Final[dict[str, ToxicGas]] = dict(
    (
        _ppm("CO", 1200, 200, "ceiling", f"{_NIOSH} (ceiling read in IDLH documentation 630-08-0; IDLH from memory)"),
        _ppm("H2S", 100, 10, "10 min", f"{_NIOSH} (read in IDLH documentation 7783-06-4)"),
        _ppm("HCN", 50, 4.7, "15 min", f"{_NIOSH} (4.7 ppm read in 54 FR 2332; IDLH from memory)"),
        _ppm("NH3", 300, 35, "15 min", f"{_NIOSH} (read in IDLH documentation 7664-41-7; IDLH in state guidance)"),
        _ppm("SO2", 100, 5, "15 min", f"{_NIOSH} (read in IDLH documentation 7446-09-5)"),
        _ppm(
            "NO2", 13, 1, "15 min", f"{_NIOSH} (limit and 20 ppm read in IDLH documentation 10102-44-0; 13 from memory)"
        ),
        _ppm("NO", 100, 25, "8 h", f"{_NIOSH} (read in IDLH documentation 10102-43-9)"),
        _ppm("CO2", 40_000, 30_000, "15 min"),
        _mg("SO3", 15, 1, "8 h", f"{_MEMORY}; as sulfuric acid"),
        _mg("H2SO4", 15, 1, "8 h"),
        _ppm("HCl", 45, 5, "ceiling", f"{_PROFILES}; was 50 ppm in 1994"),
        _ppm("Cl2", 10, 0.5, "ceiling", f"{_NIOSH} (limit read in IDLH documentation 7782-50-5; IDLH from memory)"),
        _ppm("ClO2", 5, 0.3, "15 min"),
        _ppm("HF", 30, 6, "ceiling"),
        _ppm("F2", 25, 0.1, "8 h"),
        _ppm("COCl2", 2, 0.2, "ceiling"),
        _ppm("HBr", 35, 3, "ceiling", _PROFILES),
        _ppm("HI", 45, 3, "ceiling", f"{_PROFILES}; it has no shorter limit, that of HBr is taken"),
        _ppm("Br2", 3, 0.3, "15 min"),
        _ppm("COS", 100, 10, "10 min", "taken as H2S: common practice, no source"),
        _ppm("CS2", 500, 10, "15 min"),
        _ppm("Ni(CO)4", 2, 0.001, "8 h", f"{_NIOSH} (read in IDLH documentation 13463-39-3)"),
        _ppm("Fe(CO)5", None, 0.2, "15 min"),
        _ppm("AsH3", 3, 0.0006, "ceiling"),
        _ppm("PH3", 50, 1, "15 min"),
        _ppm("B2H6", 15, 0.1, "8 h"),
        _ppm("SiH4", None, 5, "8 h"),
        _ppm("H2Se", 1, 0.05, "8 h"),
        _mg("Hg", 10, 0.1, "ceiling"),
        _ppm("CH2O", 20, 0.1, "ceiling"),
        _ppm("C6H6:benzene", 500, 1, "15 min"),
        _ppm("O3", 5, 0.1, "ceiling"),
        _ppm("HNO3", 25, 4, "15 min"),
    )
)
"""Toxic gases by species."""


@dataclass(frozen=True, slots=True)
class FlammableGas:
    """A gas that burns in air.

    Attributes
    ----------
    lower, upper : float
        Flammable limits in air at 25 degC and 1 atm, mole fraction, [-].
    oxygen : float or None
        Limiting oxygen of a mixture diluted with nitrogen, mole fraction, [-].
    ignition : float
        Self-ignition temperature in air, [K].
    source : str
        Where they come from.
    """

    lower: float
    upper: float
    oxygen: float | None
    ignition: float
    source: str


_BOTH: Final = "wider of NFPA 497 (2008) and IEC 60079-20-1 (2010); oxygen and ignition from memory"
_IEC: Final = "IEC 60079-20-1 (2010), from memory"


def _percent(lower: float, upper: float, oxygen: float | None, celsius: float, source: str = _BOTH) -> FlammableGas:
    """Make a row from limits in percent by volume and a temperature in degC."""
    return FlammableGas(lower / 100, upper / 100, None if oxygen is None else oxygen / 100, celsius + 273.15, source)


FLAMMABLE: Final[dict[str, FlammableGas]] = {
    "H2": _percent(4.0, 77, 5.0, 560),
    "CO": _percent(10.9, 74, 5.5, 607),
    "CH4": _percent(4.4, 17, 12, 600),
    "C2H6": _percent(2.4, 15.5, 11, 515),
    "C3H8": _percent(1.7, 10.9, 11.5, 450),
    "C4H10:n-butane": _percent(1.4, 9.3, 12, 372, "IEC 60079-20-1 (2010), NFPA 69; from memory"),
    "C2H4": _percent(2.3, 36, 10, 440),
    "C3H6:propene": _percent(2.0, 11.1, 11.5, 455, "IEC 60079-20-1 (2010), NFPA 69; from memory"),
    "C2H2:acetylene": _percent(2.3, 100, None, 305),
    "H2S": _percent(4.0, 45.5, 7.5, 260),
    "NH3": _percent(15, 33.6, 15, 630),
    "HCN": _percent(5.4, 46, None, 538),
    "COS": _percent(6.5, 28.5, None, 209, _IEC),
    "CS2": _percent(0.6, 60, 5, 90),
    "CH3OH": _percent(6.0, 36, 10, 440),
    "C6H6:benzene": _percent(1.2, 8.6, 11.4, 498),
}
"""Flammable gases by species."""

SELF_IGNITING: Final = {"SiH4": 1e-2, "PH3": 1e-2, "B2H6": 1e-3}
"""Gases that ignite in air by themselves, and the mole fraction a caution begins at; common practice, no source."""

OXYGEN_ENRICHED: Final = 0.235
"""Mole fraction of oxygen above which an atmosphere is enriched, [-] (OSHA, 29 CFR 1910.146)."""

OXYGEN_DEFICIENT: Final = 0.195
"""Mole fraction of oxygen below which an atmosphere is deficient, [-] (OSHA, 29 CFR 1910.146)."""

OXYGEN_DEADLY: Final = 0.10
"""Mole fraction of oxygen below which a few breaths can kill, [-]; common practice, no source."""

AIR_OXYGEN: Final = 0.21
"""Oxygen in the oxidant up to which the limits in air hold, mole fraction, [-]."""

CARBONYL_TEMPERATURE: Final = 230.0 + 273.15
"""Temperature below which nickel, iron and cobalt carbonyls are watched for, [K]; common practice, no source."""

CARBONYL_PRESSURE: Final = 0.1e5
"""Partial pressure of CO above which they are, [Pa]; common practice, no source."""

CARBON_NEAR: Final = 0.7
"""Carbon activity from which the margin is called thin, [-]; common practice, no source."""

REACTIVE: Final = {"F2": 1e-3, "ClF3": 1e-3, "O3": 1e-2, "NCl3": 1e-3, "ClO2": 0.1}
"""Gases that burn most materials or explode by themselves, and the mole fraction a caution begins at; common practice,
no source."""

DUSTING_RANGE: Final = (400.0 + 273.15, 800.0 + 273.15)
"""Temperatures of a metal at which it dusts where carbon may form, [K]; common practice, no source."""

DUSTING_MONOXIDE: Final = 0.01
"""Mole fraction of CO from which it is watched for, [-]; common practice, no source."""

HYDROGEN_ATTACK: Final = (220.0 + 273.15, 3.45e5)
"""Temperature [K] and partial pressure of hydrogen [Pa] above which steel is chosen by API RP 941: the temperature by
common practice, no source; the pressure (50 psi) from memory."""

SULFIDATION: Final = (260.0 + 273.15, 10e-6)
"""Temperature [K] and mole fraction of H2S above which steel scales in it; common practice, no source."""

NITRIDING: Final = (350.0 + 273.15, 1e-3)
"""Temperature [K] and mole fraction of NH3 above which steel takes up nitrogen; common practice, no source."""

DEW_MARGIN: Final = 10.0
"""How far a wall stays above the highest dew point, [K]; common practice, no source."""

DIOXIN_RANGE: Final = (200.0 + 273.15, 450.0 + 273.15)
"""Temperatures at which dioxins form on fly ash, [K]; common practice, no source."""

CHLORINE: Final = ("HCl", "Cl2", "Cl", "KCl", "NaCl")
"""Gases that bring chlorine to fly ash; common practice, no source."""

DIOXIN_TRACE: Final = 1e-6
"""Mole fraction of chlorine gases, and of oxygen, from which they are watched for, [-]; common practice, no source."""

IGNITION_MARGIN: Final = 50.0
"""How far a mixture with air stays below its self-ignition, [K]; common practice, no source."""

FUEL_CRACKS: Final = 550.0 + 273.15
"""Temperature above which hydrocarbons without steam crack to soot, [K]; common practice, no source."""
