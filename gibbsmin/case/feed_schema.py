"""The ``[feeds.NAME]`` tables of a case file."""

from __future__ import annotations

from typing import Annotated, Any, Final, Literal

from pydantic import Field, field_validator, model_validator

from gibbsmin.case.air_schema import MEASURED_AT, MOISTURES, AirKeys
from gibbsmin.case.analysis_schema import AnalysisTable
from gibbsmin.case.fields import (
    LARGEST_RATIO,
    Amount,
    AmountOrFlow,
    Flow,
    Pressure,
    Ratio,
    RuleError,
    Share,
    Temperature,
    Text,
)

COMPOSITIONS: Final = (
    "mole_percent",
    "volume_percent",
    "mole_fraction",
    "mass_percent",
    "mass_fraction",
    "analysis",
    "amounts",
    "species",
    "composition",
)
"""Keys that say what a feed is made of; a feed has one of them."""

OXYGEN_RATIOS: Final = ("air_ratio", "excess_air", "equivalence_ratio")
"""Keys that size an air feed by what all feeds need to burn."""

PLAIN_RATIOS: Final = ("mole_ratio", "mass_ratio")
"""Keys that size a feed by amount or mass of other feeds, those of ``to``."""

RETURNS: Final = ("recirculated_percent", "recirculation_ratio")
"""Keys that size a feed that is flue gas going back."""

RATIOS: Final = (
    "steam_to_carbon",
    "oxygen_to_carbon",
    *OXYGEN_RATIOS,
    "flue_gas_oxygen_percent",
    *PLAIN_RATIOS,
    *RETURNS,
)
"""Keys that size a feed against the other feeds."""

SIZES: Final = ("flow", "amount", *RATIOS)
"""Keys that say how much of a feed there is; a feed has one of them."""

_GO_WITH: Final[dict[str, tuple[str, ...]]] = {
    "to": PLAIN_RATIOS,
    "per": ("mass_ratio",),
    "dried": RETURNS,
    "enriched_with": ("oxygen_mole_percent",),
    **MEASURED_AT,
}
"""Keys that say something only beside one of others."""

TOLERANCE: Final = 0.5
"""By how much the sum of percentages may miss 100."""


class Feed(AirKeys):
    """One feed: what it is made of, how much of it, and where known its temperature and pressure."""

    mole_percent: dict[str, Share] | None = Field(
        default=None,
        description="Composition by species in mole percent; must sum to 100 within 0.5 and is then normalised.",
        examples=[{"CH4": 93.0, "C2H6": 4.0, "N2": 2.0, "CO2": 1.0}],
    )
    volume_percent: dict[str, Share] | None = Field(
        default=None,
        description=(
            "Composition of a gas by species in volume percent: mole percent of an ideal gas. Must sum to 100 "
            "within 0.5 and is then normalised."
        ),
        examples=[{"CH4": 60.0, "CO2": 40.0}],
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
    analysis: AnalysisTable | None = Field(
        default=None,
        description=(
            "The table [feeds.NAME.analysis]: a solid or liquid fuel by its ultimate analysis, with moisture, ash and "
            "heating value. The size must be a mass."
        ),
        examples=[{"ultimate_percent": {"C": 50.0, "H": 6.0, "O": 43.4, "ash": 0.6}, "basis": "dry"}],
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
            "Size by ratio: mol H2O in this feed per mol C in the other feeds; water in other feeds does not count. "
            "Carbon of hydrocarbons, oxygenates, fuels by analysis and pure carbon counts; that of CO, CO2 and other "
            "compounds without hydrogen does not."
        ),
        examples=[3.0],
    )
    oxygen_to_carbon: Ratio | None = Field(
        default=None,
        description=(
            "Size by ratio: mol O2 (not O) in this feed per mol C in the other feeds; oxygen in other feeds does not "
            "count. Carbon counts as for steam_to_carbon."
        ),
        examples=[0.6],
    )
    air_ratio: Ratio | None = Field(
        default=None,
        description=(
            "Size by ratio: O2 that is supplied over O2 that all feeds need to burn to CO2, H2O, SO2, N2, HCl, HF and "
            "the usual oxides of ash. Supplied is the O2 of this feed and of every other oxidant: a feed that holds O2,"
            " and more of it than burns what else it holds. Oxygen in a fuel is taken off its need."
        ),
        examples=[1.15],
    )
    excess_air: Annotated[float, Field(ge=-100.0, le=LARGEST_RATIO, allow_inf_nan=False)] | None = Field(
        default=None, description="Size by ratio, in percent: 100 (air ratio - 1).", examples=[15.0]
    )
    equivalence_ratio: Annotated[Ratio, Field(gt=0.0)] | None = Field(
        default=None,
        description=(
            "Size of the air by ratio, as burners have it: fuel over air, divided by the same at the stoichiometric "
            "point: 1/(air ratio), below 1 where the flame is lean. What gasification calls equivalence ratio is the "
            "inverse, the air_ratio."
        ),
        examples=[0.5],
    )
    flue_gas_oxygen_percent: Annotated[float, Field(gt=0.0, lt=100.0, allow_inf_nan=False)] | None = Field(
        default=None,
        description=(
            "Size of the air by what it leaves: so much that the dry flue gas, as [flue_gas] freezes it, holds this "
            "mole percent of O2."
        ),
        examples=[3.0],
    )
    recirculated_percent: Annotated[float, Field(ge=0.0, lt=100.0, allow_inf_nan=False)] | None = Field(
        default=None,
        description="Size of a returned flue gas: percent of all flue gas that goes back.",
        examples=[65.0],
    )
    recirculation_ratio: Annotated[float, Field(ge=0.0, le=1000.0, allow_inf_nan=False)] | None = Field(
        default=None,
        description="Size of a returned flue gas: what goes back over what leaves.",
        examples=[0.15],
    )
    dried: bool | None = Field(
        default=None, description="true where the water vapour of a returned flue gas is taken out.", examples=[True]
    )
    mole_ratio: Ratio | None = Field(
        default=None,
        description="Size by ratio: mol of this feed per mol of the feed that `to` names, or of all other feeds.",
        examples=[3.0],
    )
    mass_ratio: Ratio | None = Field(
        default=None,
        description="Size by ratio: kg of this feed per kg of the feed that `to` names, or of all other feeds.",
        examples=[0.85],
    )
    to: Text | None = Field(
        default=None,
        description="The feed that mole_ratio or mass_ratio counts; all other feeds unless given.",
        examples=["coal"],
    )
    per: Literal["as received", "dry", "dry ash-free"] | None = Field(
        default=None,
        description=(
            "What mass_ratio counts of the other feed: all of it (as received) unless given, or without its water, or "
            "without its water and ash."
        ),
        examples=["dry"],
    )
    frozen: bool = Field(
        default=False,
        description="Whether the feed keeps its composition: it mixes and takes up heat, but nothing in it reacts.",
        examples=[True],
    )
    temperature: Temperature | None = Field(
        default=None,
        description="Temperature of the feed; needed for a heat balance. A bare number is K.",
        examples=["550 degC", 298.15],
    )
    pressure: Pressure | None = Field(
        default=None, description="Pressure of the feed, absolute. A bare number is Pa.", examples=["26 bar"]
    )

    @field_validator("mole_percent", "volume_percent", "mass_percent", "enriched_with")
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

    @model_validator(mode="after")
    def _returned_gas(self) -> Feed:
        back = self.given(RETURNS)
        if self.composition == "flue gas":
            if not back:
                raise RuleError(f"flue gas that goes back is sized by {' or '.join(RETURNS)}", "composition")
            other = [*self.given(MOISTURES), *(["frozen"] if self.frozen else [])]
            if other:
                raise RuleError(f"{other[0]} does not go with flue gas; it is what the flue gas is", other[0])
        elif back:
            raise RuleError(f'{back[0]} goes with composition = "flue gas"', back[0])
        return self

    @model_validator(mode="after")
    def _keys_that_go_together(self) -> Feed:
        moist = self.given(MOISTURES)
        if len(moist) > 1:
            raise RuleError(f"the feed has {' and '.join(moist)}; one of them says how moist it is", moist[1])
        for key, needed in _GO_WITH.items():
            if self.given((key,)) and not self.given(needed):
                raise RuleError(f"{key} goes with {' or '.join(needed)}, and the feed has none", key)
        for_air = self.given(("carbon_dioxide_in_air", "oxygen_mole_percent"))
        if for_air and self.composition != "air":
            raise RuleError(f'{for_air[0]} goes with composition = "air"', for_air[0])
        if moist and self.amounts is not None:
            raise RuleError(f"amounts says what the feed holds, so {moist[0]} cannot; add its H2O there", moist[0])
        if self.altitude is not None and self.pressure is not None and not self.given(MEASURED_AT["humidity_pressure"]):
            raise RuleError(
                "altitude says nothing here: the feed has its pressure, and no humidity needs it", "altitude"
            )
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
