"""A gas as it is fed: air enriched with oxygen, water vapour added to what was given dry, pressure by the altitude."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from typing import Final

from gibbsmin.case.air_schema import MOISTURES
from gibbsmin.case.feed_schema import Feed
from gibbsmin.case.fields import RuleError, in_si
from gibbsmin.constants import ATMOSPHERE
from gibbsmin.errors import FeedError
from gibbsmin.practice.feeds.air import (
    dry_air,
    enriched,
    pressure_at_altitude,
    water_of_dew_point,
    water_of_humidity_ratio,
    water_of_relative_humidity,
    water_of_wet_bulb,
)
from gibbsmin.thermo.record import Species

WARMEST: Final = 328.15
"""A feed above this temperature is no outside air: no weather is that warm, [K]."""

DENSEST: Final = 1.1e5
"""A feed above this pressure is no outside air, [Pa]."""


def air_as_fed(feed: Feed) -> tuple[dict[str, float], float]:
    """Make dry air, enriched where the table says so.

    Parameters
    ----------
    feed : Feed
        A table with ``composition = "air"``.

    Returns
    -------
    shares : dict of str to float
        Mole fractions of the dry gas, [-].
    share : float
        Mole of outside air in a mole of it, [-].

    Raises
    ------
    RuleError
        The air cannot be enriched that far, or what is added is not dry; with the key.
    """
    air = dry_air(feed.carbon_dioxide_in_air)
    if feed.oxygen_mole_percent is None:
        return air, 1.0
    added = feed.enriched_with or {"O2": 100.0}
    if "H2O" in added:
        raise RuleError("what air is enriched with is given dry; leave its water out", "enriched_with", "H2O")
    whole = sum(added.values())
    try:
        return enriched(air, {name: x / whole for name, x in added.items()}, feed.oxygen_mole_percent / 100.0)
    except FeedError as error:
        raise RuleError(str(error), "oxygen_mole_percent") from None


def moistened(feed: Feed, dry: Mapping[Species, float], find: Callable[[str], Species]) -> dict[Species, float]:
    """Add the water vapour of a gas whose composition is given dry.

    Parameters
    ----------
    feed : Feed
        Its table.
    dry : mapping of Species to float
        Mole fractions without water, [-].
    find : callable
        Gives the species of a name.

    Returns
    -------
    dict of Species to float
        Mole fractions, [-]; those given where the table says nothing of water.

    Raises
    ------
    RuleError
        The feed is no gas, holds water already, or does not say where its humidity was measured; with the key.
    """
    said = feed.given(MOISTURES)
    if not said:
        return dict(dry)
    key, water = said[0], find("H2O")
    if water in dry:
        raise RuleError(f"the composition holds H2O already; give it dry, or leave {key} out", key)
    if odd := next((record.name for record in dry if record.condensed), ""):
        raise RuleError(f"{key} is that of a gas, and the feed holds {odd}", key)
    try:
        x, share = _water(feed, key, dry, find)
    except FeedError as error:
        raise RuleError(str(error), key) from None
    added = share * x / (1.0 - x)  # mol for a mole of dry feed
    return {**{record: n / (1.0 + added) for record, n in dry.items()}, water: added / (1.0 + added)}


def pressure_of(feed: Feed) -> float | None:
    """Pressure of a feed, its own or that of the altitude, [Pa]; None where it says neither."""
    return in_si(feed.pressure, "Pa") if feed.pressure is not None else _at_altitude(feed)


def _water(feed: Feed, key: str, dry: Mapping[Species, float], find: Callable[[str], Species]) -> tuple[float, float]:
    """Mole fraction of water in the gas that was measured, and mole of that gas, dry, in a mole of the dry feed."""
    if feed.moisture_mole_percent is not None:
        return feed.moisture_mole_percent / 100.0, 1.0
    measured, share = dry, 1.0
    if feed.oxygen_mole_percent is not None:
        measured = {find(name): x for name, x in dry_air(feed.carbon_dioxide_in_air).items()}
        share = air_as_fed(feed)[1]
    if feed.humidity_ratio is not None:
        molar_mass = sum(n * record.molar_mass for record, n in measured.items())
        return water_of_humidity_ratio(feed.humidity_ratio, molar_mass), share
    P = _measured_pressure(feed, key)
    if feed.dew_point is not None:
        return water_of_dew_point(in_si(feed.dew_point, "K"), P), share
    T = _measured_temperature(feed, key)
    if feed.wet_bulb is not None:
        return water_of_wet_bulb(measured, T, in_si(feed.wet_bulb, "K"), P), share
    assert feed.relative_humidity is not None, "one of the keys is given"
    return water_of_relative_humidity(feed.relative_humidity, T, P), share


def _measured_temperature(feed: Feed, key: str) -> float:
    """Temperature at which a humidity was measured, [K]."""
    if feed.humidity_temperature is not None:
        return in_si(feed.humidity_temperature, "K")
    T = None if feed.temperature is None else in_si(feed.temperature, "K")
    if T is None or T > WARMEST:
        why = (
            "the feed has no temperature" if T is None else f"the feed is warmer ({feed.temperature}) than outside air"
        )
        raise RuleError(f'{key} holds at one temperature, and {why}; add humidity_temperature = "15 degC", say', key)
    return T


def _measured_pressure(feed: Feed, key: str) -> float:
    """Pressure at which a humidity was measured, [Pa]; that of the sea level where nothing else is said."""
    if feed.humidity_pressure is not None:
        return in_si(feed.humidity_pressure, "Pa")
    P = _at_altitude(feed)
    if P is None and feed.pressure is not None:
        P = in_si(feed.pressure, "Pa")
        if P > DENSEST:
            raise RuleError(
                f"{key} holds at one pressure, and the feed is compressed ({feed.pressure}); add humidity_pressure: "
                f'"101325 Pa" if it was measured outside, "{feed.pressure}" if in the feed',
                key,
            )
    return ATMOSPHERE if P is None else P


def _at_altitude(feed: Feed) -> float | None:
    """Pressure of the altitude, [Pa]; None where the table gives none."""
    if feed.altitude is None:
        return None
    try:
        return pressure_at_altitude(in_si(feed.altitude, "m"))
    except FeedError as error:
        raise RuleError(str(error), "altitude") from None
