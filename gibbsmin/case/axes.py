"""The ``[[sweep]]`` tables of a case file: which inputs are varied, and the values that they take."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Annotated, Any, Final, Literal, NamedTuple

from pydantic import Field, field_validator, model_validator

from gibbsmin.case.feed_schema import SIZES, Feed
from gibbsmin.case.fields import LARGEST, LARGEST_RATIO, OF_FEEDS, RuleError, Table, Text
from gibbsmin.case.held_schema import Held
from gibbsmin.case.sizes import read_basis
from gibbsmin.errors import InputError, nearest
from gibbsmin.units import from_si, one_of, unit_of

MAX_STATES: Final = 100_000
"""Largest number of states that one case may ask for."""


class Limits(NamedTuple):
    """What an input may be: SI ``units``, ``lowest`` (itself allowed unless ``above``), ``highest``."""

    units: tuple[str, ...]
    lowest: float = 0.0
    above: bool = False
    highest: float = LARGEST


_LIMITS: Final = {
    "temperature": Limits(("K",), above=True),
    "pressure": Limits(("Pa",), above=True),
    "volume": Limits(("m3",), above=True),
    "isentropic_efficiency": Limits(("1",), above=True, highest=1.0),
    "flow": Limits(("mol/s", "kg/s")),
    "amount": Limits(("mol", "kg")),
    "steam_to_carbon": Limits(("1",), highest=LARGEST_RATIO),
    "air_ratio": Limits(("1",), highest=LARGEST_RATIO),
    "excess_air": Limits(("1",), lowest=-100.0, highest=LARGEST_RATIO),
    "equivalence_ratio": Limits(("1",), above=True, highest=LARGEST_RATIO),
    "oxygen_to_carbon": Limits(("1",), highest=LARGEST_RATIO),
    "mole_ratio": Limits(("1",), highest=LARGEST_RATIO),
    "mass_ratio": Limits(("1",), highest=LARGEST_RATIO),
}


class Axis(Table):
    """One input that is varied: from, to and points, or a list of values."""

    vary: Text = Field(
        description=(
            "What is varied: a number that [held] holds, as held.KEY, or the size, temperature or pressure of a feed, "
            "as feeds.NAME.KEY."
        ),
        examples=["held.temperature", "feeds.steam.steam_to_carbon", "feeds.air.temperature"],
    )
    start: float | str | None = Field(
        default=None, alias="from", description="First value.", examples=["600 degC", 2.0]
    )
    to: float | str | None = Field(default=None, description="Last value, included.", examples=["1000 degC", 4.0])
    points: Annotated[int, Field(ge=2, le=MAX_STATES)] | None = Field(
        default=None, description="Number of values from first to last, both counted.", examples=[81]
    )
    values: list[float | str] | None = Field(
        default=None, description="The values one by one.", examples=[[2.0, 2.5, 3.0], ["1 bar", "10 bar"]]
    )
    spacing: Literal["linear", "logarithmic"] = Field(
        default="linear", description="How values lie between from and to.", examples=["logarithmic"]
    )

    @field_validator("start", "to", "values", mode="before")
    @classmethod
    def _no_switches(cls, value: Any) -> Any:
        if any(isinstance(one, bool) for one in (value if isinstance(value, list) else [value])):
            raise ValueError("expected numbers or texts with a unit, got true or false")
        return value

    @model_validator(mode="after")
    def _one_way_to_say_it(self) -> Axis:
        ends = [
            key for key, value in (("from", self.start), ("to", self.to), ("points", self.points)) if value is not None
        ]
        extra = [*ends, *(["spacing"] if self.spacing != "linear" else [])]
        if self.values is not None and extra:
            raise RuleError(f"values lists every value; leave out {', '.join(extra)}", extra[0])
        if self.values is None and len(ends) < 3:
            raise RuleError("give from, to and points, or a list of values")
        if self.values is not None and not self.values:
            raise RuleError("lists no values; give at least one", "values")
        return self


@dataclass(frozen=True)
class AxisValues:
    """What one input takes in turn.

    Attributes
    ----------
    vary : str
        Path of the input, as in the case file.
    values, unit : list of float, str
        The values in an SI unit; ``"1"`` for ratios.
    typed_values, typed_unit : list of float, str
        The same in the unit that was typed.
    """

    vary: str
    values: list[float]
    unit: str
    typed_values: list[float]
    typed_unit: str


def axis_values(axis: Axis, feeds: Mapping[str, Feed], held: Held) -> AxisValues:
    """Work out the values of one varied input.

    Parameters
    ----------
    axis : Axis
        The ``[[sweep]]`` table.
    feeds : mapping of str to Feed
        The feeds of the case, for what can be varied.
    held : Held
        What is held, for the same.

    Returns
    -------
    AxisValues

    Raises
    ------
    RuleError
        There is no such input, or a value does not suit it.
    """
    limits = _limits(axis.vary, feeds, held)
    if axis.values is None:
        found = [_read(axis.start, limits, "from"), _read(axis.to, limits, "to")]
        values = _between(axis, found[0][0], found[1][0])
        first = axis.start
    else:
        found = [_read(value, limits, "values", k) for k, value in enumerate(axis.values)]
        values = [value for value, _ in found]
        first = axis.values[0]
    unit = found[0][1]
    if any(other != unit for _, other in found):
        raise RuleError("the values are part amounts of substance, part masses; use one kind")
    if len(set(values)) < len(values):
        raise RuleError("two values are the same; give each once", "to" if axis.values is None else "values")
    typed_unit = (unit_of(first) if first is not None else "") or unit
    typed = values if typed_unit == unit else [float(f"{from_si(value, typed_unit):.12g}") for value in values]
    return AxisValues(axis.vary, values, unit, typed, typed_unit)


def _limits(vary: str, feeds: Mapping[str, Feed], held: Held) -> Limits:
    """Say what values of ``vary`` may be; complain if there is nothing of that name to vary."""
    known = _known(feeds, held)
    if vary not in known:
        raise RuleError(f"{vary!r} cannot be varied{nearest(vary, known)} Known here: {', '.join(known)}", "vary")
    key = vary.rpartition(".")[2]
    if key == "heat":
        return Limits(("W" if _are_flows(feeds) else "J",), lowest=-LARGEST)
    return _LIMITS[key]


def _known(feeds: Mapping[str, Feed], held: Held) -> list[str]:
    """List what can be varied: numbers that the case gives, so that it also stands without its sweep."""
    numbers = ("temperature", "heat", "isentropic_efficiency", "pressure", "volume")
    known = [f"held.{key}" for key in numbers if getattr(held, key) not in (None, OF_FEEDS)]
    for name, feed in feeds.items():
        known += [f"feeds.{name}.{key}" for key in SIZES if feed.sized_by == key]
        known += [f"feeds.{name}.{key}" for key in ("temperature", "pressure") if getattr(feed, key) is not None]
    return known


def _are_flows(feeds: Mapping[str, Feed]) -> bool:
    try:
        return read_basis(feeds) == "mol/s"
    except RuleError:  # told where the feeds are sized
        return True


def _read(value: float | str | None, limits: Limits, *key: str | int) -> tuple[float, str]:
    """Read one value of an axis and check that the input takes it."""
    try:
        found, unit = one_of(0.0 if value is None else value, limits.units, "value")
    except InputError as error:
        raise RuleError(str(error).removeprefix("value: "), *key) from None
    shown = "" if unit == "1" else f" {unit}"
    if found < limits.lowest or (limits.above and found == limits.lowest):
        least = f"{'more than' if limits.above else 'at least'} {limits.lowest:g}"
        raise RuleError(f"{value} is too low; expected {least}{shown}", *key)
    if found > limits.highest:
        raise RuleError(f"{value} is too high; expected at most {limits.highest:g}{shown}", *key)
    return found, unit


def _between(axis: Axis, first: float, last: float) -> list[float]:
    """Values from first to last, both included."""
    count = axis.points or 2
    if axis.spacing == "linear":
        return [first + (last - first) * k / (count - 1) for k in range(count - 1)] + [last]
    if first <= 0.0 or last <= 0.0:
        raise RuleError("logarithmic spacing needs values above zero", "spacing")
    return [first * (last / first) ** (k / (count - 1)) for k in range(count - 1)] + [last]
