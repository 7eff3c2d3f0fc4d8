"""The ``[[sweep]]`` tables of a case file: which inputs are varied, and the values that they take."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace
from typing import Annotated, Any, Final, Literal

import numpy as np
from numpy.typing import ArrayLike, NDArray
from pydantic import Field, field_validator, model_validator

from gibbsmin.case.feed_schema import Feed
from gibbsmin.case.fields import RuleError, Table, Text
from gibbsmin.case.inputs import Limits, limits_of
from gibbsmin.case.rules_schema import difference
from gibbsmin.errors import InputError
from gibbsmin.units import from_si, one_of, unit_of

Floats = NDArray[np.float64]

MAX_STATES: Final = 10_000_000
"""Largest number of states that one case may ask for."""


class Axis(Table):
    """One input that is varied: from, to and points, or a list of values; of a random design from and to alone."""

    vary: Text = Field(
        description=(
            "What is varied, by its dotted name: a number that [held] holds, as held.KEY; the size, temperature or "
            "pressure of a feed, as feeds.NAME.KEY; a conversion, as species.carbon_conversion; an approach "
            "temperature, as approach.NAME.temperature; what a constraint holds; flue_gas.frozen_at."
        ),
        examples=["held.temperature", "feeds.steam.steam_to_carbon", "feeds.air.temperature"],
    )
    start: float | str | None = Field(
        default=None, alias="from", description="First value.", examples=["600 degC", 2.0]
    )
    to: float | str | None = Field(default=None, description="Last value, included.", examples=["1000 degC", 4.0])
    points: Annotated[int, Field(ge=2, le=MAX_STATES)] | None = Field(
        default=None,
        description="Number of values from first to last, both counted; left out where [design] draws at random.",
        examples=[81],
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
        if self.values is None and (self.start is None or self.to is None):
            raise RuleError("give from, to and points, or a list of values")
        if self.values is not None and not self.values:
            raise RuleError("lists no values; give at least one", "values")
        return self


@dataclass(frozen=True, eq=False)
class AxisValues:
    """What one input takes in turn.

    Attributes
    ----------
    vary : str
        Path of the input, as in the case file.
    listed : array (n,)
        Values in ``unit``: all of them, or the first and the last.
    unit, typed_unit : str
        An SI unit, ``"1"`` for ratios; and the one that was typed.
    logarithmic : bool
        Whether equal ratios lie between equal steps, rather than equal differences.
    count : int
        Number of values from the first to the last; 0 where all are listed, or any may be drawn.
    """

    vary: str
    listed: Floats
    unit: str
    typed_unit: str
    logarithmic: bool = False
    count: int = 0

    @property
    def values(self) -> Floats:
        """All values in ``unit``, (n,)."""
        return self.at(np.arange(self.count)) if self.count else self.listed

    @property
    def typed_values(self) -> Floats:
        """The values in the unit that was typed, (n,)."""
        return self.typed(self.values)

    def at(self, places: NDArray[np.intp] | Floats) -> Floats:
        """Values of some states.

        Parameters
        ----------
        places : array (states,)
            Numbers of values, from 0; or, where they are not whole numbers, shares of the range.

        Returns
        -------
        array (states,)
            In ``unit``.
        """
        numbers = np.issubdtype(places.dtype, np.integer)
        if numbers and not self.count:
            return np.asarray(self.listed[places])
        first, last = self.listed[0], self.listed[-1]
        share = places / (self.count - 1) if numbers else places
        between = first * (last / first) ** share if self.logarithmic else first + (last - first) * share
        between = np.where(share == 1.0, last, between)
        return np.asarray(np.clip(between, min(first, last), max(first, last)))  # rounding must not lead beyond

    def typed(self, values: Floats) -> Floats:
        """Turn values of the input into the unit that was typed, to twelve figures."""
        if self.typed_unit == self.unit:
            return values
        zero = from_si(0.0, self.typed_unit)
        raw = zero + values * ((from_si(1e3, self.typed_unit) - zero) / 1e3)
        size = np.where(raw == 0.0, 1.0, np.abs(raw))
        decimals = 11 - np.floor(np.log10(size))
        scale = 10.0 ** np.abs(decimals)  # whole up to 1e22, so that dividing by it gives the nearest decimal
        return np.asarray(np.where(decimals >= 0.0, np.round(raw * scale) / scale, np.round(raw / scale) * scale))

    def only(self, values: ArrayLike) -> AxisValues:
        """Return the same input with other values, in ``unit``."""
        return replace(self, listed=np.asarray(values, float), count=0)


def axis_values(axis: Axis, inputs: Mapping[str, Limits], feeds: Mapping[str, Feed]) -> AxisValues:
    """Work out the values of one varied input.

    Parameters
    ----------
    axis : Axis
        The ``[[sweep]]`` table.
    inputs : mapping of str to Limits
        What can be varied.
    feeds : mapping of str to Feed
        Tables of the feeds.

    Returns
    -------
    AxisValues

    Raises
    ------
    RuleError
        There is no such input, or a value does not suit it.
    """
    limits = limits_of(axis.vary, inputs, feeds)
    if axis.values is None:
        found = [_read(axis.start, limits, "from"), _read(axis.to, limits, "to")]
        first = axis.start
    else:
        found = [_read(value, limits, "values", k) for k, value in enumerate(axis.values)]
        first = axis.values[0]
    listed, unit = [value for value, _ in found], found[0][1]
    if any(other != unit for _, other in found):
        raise RuleError("the values are part amounts of substance, part masses; use one kind")
    if len(set(listed)) < len(listed):
        raise RuleError("two values are the same; give each once", "to" if axis.values is None else "values")
    typed_unit = unit if limits.difference else (unit_of(first) if first is not None else "") or unit
    logarithmic = axis.spacing == "logarithmic"
    if logarithmic and min(listed) <= 0.0:
        raise RuleError("logarithmic spacing needs values above zero", "spacing")
    return AxisValues(axis.vary, np.array(listed), unit, typed_unit, logarithmic, axis.points or 0)


def _read(value: float | str | None, limits: Limits, *key: str | int) -> tuple[float, str]:
    """Read one value of an axis and check that the input takes it."""
    given = 0.0 if value is None else value
    try:
        found, unit = (difference(given), "K") if limits.difference else one_of(given, limits.units, "value")
    except ValueError as error:
        raise RuleError(str(error), *key) from None
    except InputError as error:
        raise RuleError(str(error).removeprefix("value: "), *key) from None
    shown = "" if unit == "1" else f" {unit}"
    if found < limits.lowest or (limits.above and found == limits.lowest):
        least = f"{'more than' if limits.above else 'at least'} {limits.lowest:g}"
        raise RuleError(f"{value} is too low; expected {least}{shown}", *key)
    if found > limits.highest:
        raise RuleError(f"{value} is too high; expected at most {limits.highest:g}{shown}", *key)
    return found, unit
