"""The inputs of a case that can be varied, by their dotted names, and what their values may be."""

from __future__ import annotations

from collections.abc import Mapping
from typing import TYPE_CHECKING, Final, NamedTuple, Protocol

from gibbsmin.case.air_schema import MEASURED_AT
from gibbsmin.case.feed_schema import SIZES, Feed
from gibbsmin.case.fields import LARGEST, LARGEST_RATIO, OF_FEEDS, RuleError
from gibbsmin.case.rules_schema import LARGEST_APPROACH, Approach, Constraint
from gibbsmin.case.sizes import read_basis
from gibbsmin.case.species_schema import SpeciesTable
from gibbsmin.errors import nearest

if TYPE_CHECKING:
    from gibbsmin.case.schema import Case
    from gibbsmin.case.train_schema import TrainCase


class Limits(NamedTuple):
    """What an input may be: SI ``units``, ``lowest`` (itself allowed unless ``above``), ``highest``.

    ``difference`` tells that it is a difference of temperatures, in kelvin.
    """

    units: tuple[str, ...]
    lowest: float = 0.0
    above: bool = False
    highest: float = LARGEST
    difference: bool = False


class Ruled(Protocol):
    """A case or a stage, as far as its rules go."""

    @property
    def species(self) -> SpeciesTable:
        """What may form."""

    @property
    def approach(self) -> dict[str, Approach]:
        """Reactions with an approach temperature."""

    @property
    def constraint(self) -> dict[str, Constraint]:
        """Sums that are held."""


_TEMPERATURE: Final = Limits(("K",), above=True)
_PRESSURE: Final = Limits(("Pa",), above=True)
_PERCENT: Final = Limits(("1",), highest=100.0)
_RATIO: Final = Limits(("1",), highest=LARGEST_RATIO)
_APPROACH: Final = Limits(("K",), lowest=-LARGEST_APPROACH, highest=LARGEST_APPROACH, difference=True)
_HELD: Final = {
    "temperature": _TEMPERATURE,
    "heat": Limits(("W", "J"), lowest=-LARGEST),
    "isentropic_efficiency": Limits(("1",), above=True, highest=1.0),
    "pressure": _PRESSURE,
    "volume": Limits(("m3",), above=True),
}
_SIZE: Final = {
    **dict.fromkeys(SIZES, _RATIO),
    "flow": Limits(("mol/s", "kg/s")),
    "amount": Limits(("mol", "kg")),
    "excess_air": Limits(("1",), lowest=-100.0, highest=LARGEST_RATIO),
    "equivalence_ratio": Limits(("1",), above=True, highest=LARGEST_RATIO),
    "flue_gas_oxygen_percent": Limits(("1",), above=True, highest=100.0),
    "recirculated_percent": Limits(("1",), highest=99.9),
    "recirculation_ratio": Limits(("1",), highest=1000.0),
}


def inputs(case: Case) -> dict[str, Limits]:
    """List what can be varied: numbers that the case gives, so that it also stands without its sweep.

    Parameters
    ----------
    case : Case
        The case, as far as it is checked.

    Returns
    -------
    dict of str to Limits
        By dotted name: ``held.temperature``, ``feeds.NAME.flow``, ``approach.NAME.temperature`` and so on.
    """
    found: dict[str, Limits] = {}
    for key, limits in _HELD.items():
        if getattr(case.held, key) not in (None, OF_FEEDS):
            found[f"held.{key}"] = limits if key != "heat" else limits._replace(units=(_heat_unit(case.feeds),))
    found |= feed_inputs(case.feeds) | rule_inputs(case, "", case.feeds)
    for key in ("frozen_at", "stack_temperature"):
        if case.flue_gas is not None and getattr(case.flue_gas, key) is not None:
            found[f"flue_gas.{key}"] = _TEMPERATURE
    return found


def train_inputs(case: TrainCase) -> dict[str, Limits]:
    """List what can be varied in a train: feeds, and what each stage holds, takes and is ruled by.

    Parameters
    ----------
    case : TrainCase
        The case, as far as it is checked.

    Returns
    -------
    dict of str to Limits
        By dotted name: ``feeds.NAME.flow``, ``stages.NAME.held.temperature``, ``stages.NAME.take.SIDE.percent``.
    """
    found = feed_inputs(case.feeds)
    heat = _heat_unit(case.feeds)
    for stage in case.stage:
        at = f"stages.{stage.name}"
        for key, limits in {**_HELD, "pressure_drop": Limits(("Pa",))}.items():
            if getattr(stage.held, key, None) is not None:
                found[f"{at}.held.{key}"] = limits if key != "heat" else limits._replace(units=(heat,))
        found |= rule_inputs(stage, f"{at}.", case.feeds)
        if stage.flue_gas is not None and stage.flue_gas.stack_temperature is not None:
            found[f"{at}.flue_gas.stack_temperature"] = _TEMPERATURE
        for side, take in stage.take.items():
            for key, limits in (("percent", _PERCENT), ("ratio", _RATIO), ("flow", Limits((_amount(case.feeds),)))):
                if getattr(take, key) is not None:
                    found[f"{at}.take.{side}.{key}"] = limits
    return found


def feed_inputs(feeds: Mapping[str, Feed]) -> dict[str, Limits]:
    """List what can be varied of feeds."""
    found: dict[str, Limits] = {}
    for name, feed in feeds.items():
        if feed.sized_by in _SIZE:
            found[f"feeds.{name}.{feed.sized_by}"] = _SIZE[feed.sized_by]
        for key, limits in (("temperature", _TEMPERATURE), ("pressure", _PRESSURE)):
            if getattr(feed, key) is not None:
                found[f"feeds.{name}.{key}"] = limits
    return found


def rule_inputs(ruled: Ruled, at: str, feeds: Mapping[str, Feed]) -> dict[str, Limits]:
    """List what can be varied of the rules of a case or a stage, whose dotted name begins with ``at``."""
    found: dict[str, Limits] = {}
    for name in ruled.species.conversion or {}:
        found[f"{at}species.conversion.{name}"] = _PERCENT
    if ruled.species.carbon_conversion is not None:
        found[f"{at}species.carbon_conversion"] = _PERCENT
    for name in ruled.approach:
        found[f"{at}approach.{name}.temperature"] = _APPROACH
    for name, constraint in ruled.constraint.items():
        if constraint.sum is not None:
            found[f"{at}constraint.{name}.sum"] = Limits((_amount(feeds),))
        else:
            found[f"{at}constraint.{name}.percent_of_feeds"] = _PERCENT
    return found


def limits_of(name: str, known: Mapping[str, Limits], feeds: Mapping[str, Feed]) -> Limits:
    """Say what values of an input may be.

    Parameters
    ----------
    name : str
        Dotted name of the input.
    known : mapping of str to Limits
        What can be varied.
    feeds : mapping of str to Feed
        Tables of the feeds.

    Returns
    -------
    Limits

    Raises
    ------
    RuleError
        There is nothing of that name to vary.
    """
    if name not in known:
        raise RuleError(f"{name!r} cannot be varied{nearest(name, known)} Known here: {', '.join(known)}", "vary")
    table, _, key = name.rpartition(".")
    if table.startswith("feeds."):
        _check_humidity(feeds[table.removeprefix("feeds.")], key)
    return known[name]


def _check_humidity(feed: Feed, key: str) -> None:
    """Refuse to vary a temperature or pressure at which a humidity is taken: the composition is one for all states."""
    moist = feed.given(MEASURED_AT.get(f"humidity_{key}", ()))
    said = feed.given((f"humidity_{key}", "altitude") if key == "pressure" else (f"humidity_{key}",)) if moist else []
    if moist and not said:
        raise RuleError(
            f"the {key} of the feed is varied, and its {moist[0]} holds at one {key}; say at which by humidity_{key}",
            "vary",
        )


def _amount(feeds: Mapping[str, Feed]) -> str:
    """Name the unit of amounts where feeds are amounts, of flows where they are flows."""
    return "mol/s" if _heat_unit(feeds) == "W" else "mol"


def _heat_unit(feeds: Mapping[str, Feed]) -> str:
    """Watts where feeds are flows, else joules; what is wrong with the sizes is told where the feeds are sized."""
    try:
        return "W" if read_basis(feeds) == "mol/s" else "J"
    except RuleError:
        return "W"
