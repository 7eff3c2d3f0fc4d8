"""Kinds of values in a case file: quantities that stay as typed, shares, and tables that refuse unknown keys."""

from __future__ import annotations

from typing import Annotated, Any, Final

from pydantic import BaseModel, BeforeValidator, ConfigDict, Field, StringConstraints, ValidationInfo, WithJsonSchema

from gibbsmin.case.lines import Key
from gibbsmin.errors import InputError
from gibbsmin.units import Measurable, one_of, quantity

LARGEST: Final = 1e25
"""Largest quantity that a case may hold, in SI; far beyond any plant, and far below what overflows."""

LARGEST_RATIO: Final = 1e6
"""Largest ratio of feeds that a case may ask for."""

OF_FEEDS: Final = "of feeds"
"""Stands for a held volume that the gas of the feeds fills."""


class Table(BaseModel):
    """A table of the case file: no unknown keys, no silent conversions, not changed once read."""

    model_config = ConfigDict(extra="forbid", frozen=True, strict=True)


class RuleError(InputError):
    """A rule between keys is broken; ``key`` is the path, from the table that found it, of the key to change."""

    def __init__(self, message: str, *key: str | int) -> None:
        self.message = message
        self.key: Key = key
        super().__init__(message)


def _measured(*units: str, above_zero: bool = False, signed: bool = False, word: str = "") -> BeforeValidator:
    """Check that a value reads as a quantity in one of ``units`` and leave it as typed.

    It must not be negative unless ``signed``; ``word`` may stand in its place.
    """

    def check(value: Any, info: ValidationInfo) -> Any:
        what = info.field_name or "value"
        if word and value == word:
            return value
        try:
            found, unit = one_of(value, units, what)
        except InputError as error:
            raise ValueError(str(error).removeprefix(f"{what}: ")) from None
        if not signed and (found < 0.0 or (above_zero and found == 0.0)):
            raise ValueError(f"{value} is too low; expected {'more than' if above_zero else 'at least'} 0 {unit}")
        if abs(found) > LARGEST:
            raise ValueError(f"{value} is too {'high' if found > 0.0 else 'low'}; expected at most {LARGEST:g} {unit}")
        return value

    return BeforeValidator(check)


def _plain_number(value: Any, info: ValidationInfo) -> float:
    """Read a number without dimension; ``"1 ppm"`` and ``"15 %"`` will do."""
    what = info.field_name or "value"
    try:
        return quantity(value, "1", what)
    except InputError as error:
        raise ValueError(str(error).removeprefix(f"{what}: ")) from None


Text = Annotated[str, StringConstraints(min_length=1, strip_whitespace=True)]
Temperature = Annotated[float | str, _measured("K", above_zero=True)]
Pressure = Annotated[float | str, _measured("Pa", above_zero=True)]
Length = Annotated[float | str, _measured("m", signed=True)]
Volume = Annotated[float | str, _measured("m3", above_zero=True, word=OF_FEEDS)]
Heat = Annotated[float | str, _measured("W", "J", signed=True)]
Flow = Annotated[float | str, _measured("mol/s", "kg/s")]
Amount = Annotated[float | str, _measured("mol", "kg")]
AmountOrFlow = Annotated[float | str, _measured("mol", "kg", "mol/s", "kg/s")]
HeatOfMass = Annotated[float | str, _measured("J/kg", above_zero=True)]
Density = Annotated[float | str, _measured("kg/m3", above_zero=True)]
Number = Annotated[
    float, BeforeValidator(_plain_number), WithJsonSchema({"anyOf": [{"type": "number"}, {"type": "string"}]})
]
Share = Annotated[float, Field(ge=0.0, allow_inf_nan=False)]
Ratio = Annotated[float, Field(ge=0.0, le=LARGEST_RATIO, allow_inf_nan=False)]


def in_si(value: Measurable, *units: str) -> float:
    """Convert a value that was checked when it was read to the one of ``units`` that fits."""
    return one_of(value, units, "value")[0]
