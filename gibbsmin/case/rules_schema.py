"""The tables ``[approach.NAME]`` and ``[constraint.NAME]``, and the conversions of ``[species]``."""

from __future__ import annotations

import re
from typing import Annotated, Any, Final

from pydantic import BeforeValidator, Field, WithJsonSchema, model_validator

from gibbsmin.case.fields import AmountOrFlow, RuleError, Table, Text

LARGEST_APPROACH: Final = 500.0
"""Largest approach temperature, [K]; the trade's own lie below 50."""

_DIFFERENCE: Final = re.compile(r"\s*([+-]?\d+(?:\.\d*)?)\s*K\s*")


def difference(value: Any) -> float:
    """Read a difference of temperatures: a number or a text in kelvin, because 10 degC would be a temperature."""
    if isinstance(value, str):
        match = _DIFFERENCE.fullmatch(value)
        if match is None:
            raise ValueError(f"got {value!r}; expected a difference of temperatures in kelvin, such as '-10 K'")
        value = float(match[1])
    if isinstance(value, bool) or not isinstance(value, int | float):
        raise ValueError(f"got {value!r}; expected a difference of temperatures in kelvin, such as '-10 K'")
    if not abs(value) <= LARGEST_APPROACH:
        raise ValueError(f"{value:g} K is too far; expected -{LARGEST_APPROACH:g} to {LARGEST_APPROACH:g} K")
    return float(value)


Difference = Annotated[
    float, BeforeValidator(difference), WithJsonSchema({"anyOf": [{"type": "number"}, {"type": "string"}]})
]
Percent = Annotated[float, Field(ge=0.0, le=100.0, allow_inf_nan=False)]


class Approach(Table):
    """A reaction that leaves the reactor as if it had settled at another temperature."""

    reaction: Text = Field(
        description=(
            "The reaction, by species that may form. Its first species is the one that lags behind: reactions without "
            "it stay at equilibrium."
        ),
        examples=["CH4 + H2O = CO + 3 H2"],
    )
    temperature: Difference = Field(
        description=(
            "Approach temperature in kelvin: the equilibrium constant is taken at the temperature of the mixture plus "
            "this. Less converted than equilibrium is negative for reactions that take up heat (reforming), positive "
            "for those that give it off (shift, syntheses)."
        ),
        examples=["-10 K", 15.0],
    )


class Constraint(Table):
    """A sum of amounts that is held."""

    amounts: dict[str, Annotated[float, Field(allow_inf_nan=False)]] = Field(
        description="Coefficient of each species in the sum.", examples=[{"CH4": 1.0, "C2H6": 2.0}]
    )
    sum: AmountOrFlow | None = Field(
        default=None,
        description="What the sum is held at, as an amount or flow of substance. A bare number is mol, or mol/s.",
        examples=["5 kmol/h"],
    )
    percent_of_feeds: Percent | None = Field(
        default=None, description="What the sum is held at, in percent of what the feeds have of it.", examples=[15.0]
    )

    @model_validator(mode="after")
    def _one_right_side(self) -> Constraint:
        if not any(self.amounts.values()):
            raise RuleError("holds no species; name at least one with a coefficient that is not zero", "amounts")
        if (self.sum is None) == (self.percent_of_feeds is None):
            raise RuleError("give either sum or percent_of_feeds")
        return self
