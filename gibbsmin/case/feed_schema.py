"""The ``[feeds.NAME]`` tables of a case file."""

from __future__ import annotations

from typing import Annotated, Any, Final, Literal

from pydantic import Field, field_validator, model_validator

from gibbsmin.case.fields import (
    LARGEST_RATIO,
    Amount,
    AmountOrFlow,
    Flow,
    Pressure,
    Ratio,
    RuleError,
    Share,
    Table,
    Temperature,
)

COMPOSITIONS: Final = (
    "mole_percent",
    "mole_fraction",
    "mass_percent",
    "mass_fraction",
    "ultimate_percent",
    "amounts",
    "species",
    "composition",
)
"""Keys that say what a feed is made of; a feed has one of them."""

RATIOS: Final = ("steam_to_carbon", "air_ratio", "excess_air")
"""Keys that size a feed against the other feeds."""

SIZES: Final = ("flow", "amount", *RATIOS)
"""Keys that say how much of a feed there is; a feed has one of them."""

TOLERANCE: Final = 0.5
"""By how much the sum of percentages may miss 100."""


class Feed(Table):
    """One feed: what it is made of, how much of it, and where known its temperature and pressure."""

    mole_percent: dict[str, Share] | None = Field(
        default=None,
        description="Composition by species in mole percent; must sum to 100 within 0.5 and is then normalised.",
        examples=[{"CH4": 93.0, "C2H6": 4.0, "N2": 2.0, "CO2": 1.0}],
    )
    mole_fraction: dict[str, Share] | None = Field(
        default=None,
        description="Composition by species in mole fractions; must sum to 1 within 0.005 and is then normalised.",
        examples=[{"CO": 0.5, "H2": 0.5}],
    )
    mass_percent: dict[str, Share] | None = Field(
        default=None,
        description="Composition by species in mass percent; must sum to 100 within 0.5 and is then normalised.",
        examples=[{"SiO2(s)": 60.0, "CaCO3(s):calcite": 40.0}],
    )
    mass_fraction: dict[str, Share] | None = Field(
        default=None,
        description="Composition by species in mass fractions; must sum to 1 within 0.005 and is then normalised.",
        examples=[{"CH4": 0.2, "O2": 0.8}],
    )
    ultimate_percent: dict[str, Share] | None = Field(
        default=None,
        description=(
            "Ultimate analysis in mass percent: elements by symbol, and whatever is known as a substance (moisture, "
            "minerals of the ash) by its species name. Must sum to 100 within 0.5 and is then normalised. "
            "The size must be a mass."
        ),
        examples=[{"C": 69.0, "H": 4.6, "O": 7.4, "N": 1.4, "S": 0.9, "H2O(l)": 8.0, "SiO2(s)": 8.7}],
    )
    amounts: dict[str, AmountOrFlow] | None = Field(
        default=None,
        description=(
            "Composition and size in one: amount (a bare number is mol) or flow of each species. "
            "No other size is given with it."
        ),
        examples=[{"CH4": "3 kmol/h", "O2": "6 kmol/h"}, {"CO": 1.0, "H2": 2.0}],
    )
    species: str | None = Field(default=None, description="The one species that the feed is.", examples=["H2O"])
    composition: Literal["air"] | None = Field(
        default=None,
        description="Named composition. air: dry air of ISO 2533, N2 78.084, O2 20.9476, Ar 0.934, CO2 0.0314 mole %.",
        examples=["air"],
    )
    flow: Flow | None = Field(
        default=None,
        description="Size as a flow of substance or mass; a bare number is mol/s. Nm3 is at 0 degC and 101325 Pa.",
        examples=["100 kmol/h", "2.5 t/h", "1000 Nm3/h"],
    )
    amount: Amount | None = Field(
        default=None,
        description="Size as an amount of substance or mass; a bare number is mol.",
        examples=["1 kmol", "1 kg", 2.0],
    )
    steam_to_carbon: Ratio | None = Field(
        default=None,
        description=(
            "Size by ratio: mol H2O in this feed per mol C in the other feeds. Carbon of hydrocarbons, oxygenates, "
            "ultimate analyses and pure carbon counts; that of CO, CO2 and other compounds without hydrogen does not."
        ),
        examples=[3.0],
    )
    air_ratio: Ratio | None = Field(
        default=None,
        description=(
            "Size by ratio: O2 in this feed over what the other feeds need to burn to CO2, H2O, SO2, N2, HCl, HF and "
            "the usual oxides of ash. Oxygen that the other feeds hold is taken off their need."
        ),
        examples=[1.15],
    )
    excess_air: Annotated[float, Field(ge=-100.0, le=LARGEST_RATIO, allow_inf_nan=False)] | None = Field(
        default=None, description="Size by ratio, in percent: 100 (air ratio - 1).", examples=[15.0]
    )
    temperature: Temperature | None = Field(
        default=None,
        description="Temperature of the feed; needed for a heat balance. A bare number is K.",
        examples=["550 degC", 298.15],
    )
    pressure: Pressure | None = Field(
        default=None, description="Pressure of the feed, absolute. A bare number is Pa.", examples=["26 bar"]
    )

    @field_validator("mole_percent", "mass_percent", "ultimate_percent")
    @classmethod
    def _sums_to_100(cls, value: dict[str, float]) -> dict[str, float]:
        return _sums(value, 100.0)

    @field_validator("mole_fraction", "mass_fraction")
    @classmethod
    def _sums_to_1(cls, value: dict[str, float]) -> dict[str, float]:
        return _sums(value, 1.0)

    @field_validator("amounts")
    @classmethod
    def _holds_something(cls, value: dict[str, Any]) -> dict[str, Any]:
        if not value:
            raise ValueError("holds no species; expected at least one, as in { CH4 = 1.0 }")
        return value

    @model_validator(mode="after")
    def _one_composition_one_size(self) -> Feed:
        made_of = self.given(COMPOSITIONS)
        if len(made_of) != 1:
            found = f"has {' and '.join(made_of)}" if made_of else "does not say what it is made of"
            raise RuleError(f"the feed {found}; give exactly one of {', '.join(COMPOSITIONS)}", *made_of[1:2])
        sized = self.given(SIZES)
        if self.amounts is not None:
            if sized:
                raise RuleError(f"amounts already says how much there is; leave out {' and '.join(sized)}", sized[0])
        elif len(sized) != 1:
            found = f"has {' and '.join(sized)}" if sized else "does not say how much of it there is"
            raise RuleError(f"the feed {found}; give exactly one of {', '.join(SIZES)}", *sized[1:2])
        return self

    def given(self, keys: tuple[str, ...]) -> list[str]:
        """Those of ``keys`` that the table holds."""
        return [key for key in keys if getattr(self, key) is not None]

    @property
    def made_of(self) -> str:
        """Key that says what the feed is made of."""
        return self.given(COMPOSITIONS)[0]

    @property
    def sized_by(self) -> str:
        """Key that says how much of the feed there is."""
        return (*self.given(SIZES), "amounts")[0]


def _sums(shares: dict[str, float], whole: float) -> dict[str, float]:
    """Check that shares sum to the whole."""
    total = sum(shares.values())
    if abs(total - whole) > TOLERANCE / 100.0 * whole * (1.0 + 1e-12):
        raise ValueError(f"sums to {total:.6g}; expected {whole:g} within {TOLERANCE / 100.0 * whole:g}")
    return shares
