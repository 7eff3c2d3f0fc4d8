"""The ``[feeds.NAME.analysis]`` table of a case file: a solid or liquid fuel as a lab reports it."""

from __future__ import annotations

from typing import Annotated, Final, Literal

from pydantic import Field, field_validator, model_validator

from gibbsmin.case.fields import Density, HeatOfMass, RuleError, Share, Table
from gibbsmin.practice.feeds.fuel_analysis import AIR_DRIED, AS_RECEIVED, ASH, DRY_ASH_FREE, Basis
from gibbsmin.practice.feeds.fuel_correlations import CorrelationName
from gibbsmin.practice.feeds.fuel_heat import HeldAt

Percent = Annotated[float, Field(ge=0.0, lt=100.0, allow_inf_nan=False)]
PercentOfAll = Annotated[float, Field(ge=0.0, le=100.0, allow_inf_nan=False)]
PercentOfDry = Annotated[float, Field(ge=0.0, le=1e4, allow_inf_nan=False)]

STATED: Final = ("higher_heating_value", "lower_heating_value")
"""Keys of a heating value; a fuel has at most one of them."""


class Proximate(Table):
    """A proximate analysis, for checks and for correlations made of it."""

    volatile_matter: PercentOfAll = Field(description="Volatile matter, mass percent.", examples=[33.0])
    fixed_carbon: PercentOfAll | None = Field(
        default=None, description="Fixed carbon, mass percent; by difference unless given.", examples=[50.0]
    )
    ash: Percent | None = Field(
        default=None, description="Ash, mass percent; that of the ultimate analysis unless given.", examples=[9.0]
    )
    moisture: Percent | None = Field(
        default=None, description="Moisture, mass percent; that of the analysis unless given.", examples=[8.0]
    )


class AnalysisTable(Table):
    """A fuel by its ultimate analysis, with its moisture, its ash and its heating value."""

    ultimate_percent: dict[str, Share] = Field(
        description=(
            "Ultimate analysis in mass percent on the basis: elements by symbol, 'ash', and whatever is known as a "
            "substance by its species name. With the moisture it must sum to 100 within 0.5 and is then brought to it."
        ),
        examples=[{"C": 69.0, "H": 4.6, "O": 7.36, "N": 1.38, "S": 0.92, "ash": 8.74}],
    )
    basis: Basis = Field(
        default=AS_RECEIVED,
        description="What the percentages are of: fuel as received, air-dried, dry, or dry and free of ash.",
        examples=["as received", "dry"],
    )
    moisture_percent: Percent | None = Field(
        default=None,
        description="Moisture of the fuel as received, mass percent; none unless given.",
        examples=[8.0],
    )
    moisture_percent_dry: PercentOfDry | None = Field(
        default=None,
        description="Moisture as the wood trade has it, kg per 100 kg of dry fuel; in place of moisture_percent.",
        examples=[81.8],
    )
    air_dried_moisture_percent: Percent | None = Field(
        default=None, description="Moisture of the air-dried sample, mass percent.", examples=[2.5]
    )
    ash_percent_dry: Percent | None = Field(
        default=None,
        description="Ash of the dry fuel, mass percent, where the basis is dry ash-free.",
        examples=[9.5],
    )
    moisture_in_hydrogen: bool = Field(
        default=False,
        description="Whether H and O count those of the moisture, as in some older reports.",
        examples=[False],
    )
    oxygen_by_difference: bool = Field(
        default=False, description="Whether O is what is left to 100; it is then not given.", examples=[True]
    )
    ash_oxides_percent: dict[str, Share] | None = Field(
        default=None,
        description=(
            "Ash by its oxides, mass percent; must sum to 95 to 105 and is then brought to 100. SO3 and CO2 are S and "
            "C of the fuel already and leave the ash."
        ),
        examples=[{"SiO2": 52.0, "Al2O3": 27.0, "Fe2O3": 9.0, "CaO": 6.0, "MgO": 2.0, "K2O": 2.0, "SO3": 2.0}],
    )
    ash: Literal["inert", "reacts"] | None = Field(
        default=None,
        description=(
            "Whether the ash takes part: 'reacts' where its oxides are given, else 'inert', with the heat content of "
            "quartz."
        ),
        examples=["inert"],
    )
    proximate_percent: Proximate | None = Field(
        default=None,
        description=(
            "Proximate analysis in mass percent on the same basis: for checks and for correlations made of it, never "
            "for elements."
        ),
        examples=[{"volatile_matter": 33.0, "ash": 8.74}],
    )
    higher_heating_value: HeatOfMass | None = Field(
        default=None,
        description="Higher (gross) heating value; it wins over any correlation. A bare number is J/kg.",
        examples=["28.8 MJ/kg"],
    )
    lower_heating_value: HeatOfMass | None = Field(
        default=None,
        description="Lower (net) heating value; it wins over any correlation. A bare number is J/kg.",
        examples=["27.6 MJ/kg"],
    )
    heating_value_basis: Basis | None = Field(
        default=None,
        description="Basis of the stated heating value; that of the analysis unless given.",
        examples=["as received"],
    )
    heating_value_at: HeldAt | None = Field(
        default=None,
        description="What was held while it was measured; constant pressure unless given. A bomb holds the volume.",
        examples=["constant volume"],
    )
    heating_value_from: CorrelationName | None = Field(
        default=None,
        description=(
            "Correlation that gives the heating value where none is stated, or that a stated one is compared with; "
            "Channiwala and Parikh unless given."
        ),
        examples=["Channiwala and Parikh", "Milne"],
    )
    density: Density | None = Field(
        default=None,
        description="Density of a liquid fuel at 15 degC, for the correlation of ISO 8217. A bare number is kg/m3.",
        examples=["960 kg/m3"],
    )

    @field_validator("ultimate_percent", "ash_oxides_percent")
    @classmethod
    def _holds_something(cls, value: dict[str, float]) -> dict[str, float]:
        if not sum(value.values()) > 0.0:
            raise ValueError("holds nothing; at least one percentage must be above zero")
        return value

    @model_validator(mode="after")
    def _moisture_and_basis(self) -> AnalysisTable:
        if self.moisture_percent is not None and self.moisture_percent_dry is not None:
            raise RuleError(
                "moisture_percent and moisture_percent_dry say the same; leave one out", "moisture_percent_dry"
            )
        bases = (self.basis, self.heating_value_basis)
        if AIR_DRIED in bases and self.air_dried_moisture_percent is None:
            raise RuleError("an air-dried basis needs air_dried_moisture_percent, the moisture of that sample")
        if self.basis == AIR_DRIED and self.moisture_percent is None and self.moisture_percent_dry is None:
            raise RuleError("an air-dried analysis needs moisture_percent too, the moisture of the fuel as received")
        if self.moisture_in_hydrogen and self.basis not in (AS_RECEIVED, AIR_DRIED):
            raise RuleError(
                f"a {self.basis} analysis holds no moisture that H and O could count", "moisture_in_hydrogen"
            )
        return self

    @model_validator(mode="after")
    def _ash_and_oxygen(self) -> AnalysisTable:
        free = self.basis == DRY_ASH_FREE
        if free and self.ash_percent_dry is None:
            raise RuleError("a dry ash-free analysis needs ash_percent_dry, the ash of the dry fuel; 0 if it has none")
        if free and ASH in self.ultimate_percent:
            raise RuleError("a dry ash-free analysis holds no ash; give ash_percent_dry", "ultimate_percent", ASH)
        if not free and self.ash_percent_dry is not None:
            raise RuleError(
                f"on a basis that is {self.basis} the ash stands in ultimate_percent, as ash = ...", "ash_percent_dry"
            )
        if self.ash == "reacts" and self.ash_oxides_percent is None:
            raise RuleError("what the ash is made of is not known; give ash_oxides_percent", "ash")
        if self.ash_oxides_percent is not None and not (self.ash_percent_dry or self.ultimate_percent.get(ASH)):
            raise RuleError("the analysis has no ash that these oxides could be of", "ash_oxides_percent")
        if self.oxygen_by_difference and "O" in self.ultimate_percent:
            raise RuleError("O is given, so it is not by difference; leave one out", "oxygen_by_difference")
        return self

    @model_validator(mode="after")
    def _one_heating_value(self) -> AnalysisTable:
        stated = [key for key in STATED if getattr(self, key) is not None]
        if len(stated) > 1:
            raise RuleError(f"{' and '.join(stated)} belong together; give one, the other follows", stated[1])
        for key in ("heating_value_basis", "heating_value_at"):
            if not stated and getattr(self, key) is not None:
                raise RuleError(f"{key} goes with {' or '.join(STATED)}, and the fuel has none", key)
        return self
