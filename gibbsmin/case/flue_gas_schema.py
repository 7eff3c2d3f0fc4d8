"""The table ``[flue_gas]``: at which temperature its composition is frozen, and how its numbers are reported."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import Field, model_validator

from gibbsmin.case.fields import Pressure, RuleError, Table, Temperature
from gibbsmin.case.rules_schema import Percent

Application = Literal[
    "gas or liquid fuel",
    "solid fuel",
    "turbine or engine",
    "waste",
    "cement",
    "waste, United States",
    "glass",
]
SiegertFuel = Literal["natural gas", "light oil", "liquefied petroleum gas", "coke oven gas", "town gas"]
OxygenPercent = Annotated[float, Field(ge=0.0, lt=20.0, allow_inf_nan=False)]


class FlueGasTable(Table):
    """The flue gas and its report."""

    frozen_at: Temperature | None = Field(
        default=None,
        description=(
            "Temperature at which the composition of the flue gas is taken, on its way to the stack. Without it the "
            "flue gas is the mixture as it settles. A bare number is K."
        ),
        examples=["1000 degC"],
    )
    application: Application | None = Field(
        default=None,
        description="What is fired, for the usual reference oxygen: 3, 6, 15, 11, 10, 7 or 8 %. The permit decides.",
        examples=["gas or liquid fuel"],
    )
    reference_oxygen_percent: OxygenPercent | None = Field(
        default=None,
        description="O2 of the dry gas that mass concentrations refer to, in mole percent.",
        examples=[3.0],
    )
    air_oxygen_percent: Annotated[float, Field(ge=20.0, le=21.5, allow_inf_nan=False)] = Field(
        default=20.95, description="O2 of dry air in the formula of reference oxygen, in mole percent.", examples=[21.0]
    )
    only_above_reference: bool = Field(
        default=False,
        description="true where a gas with less O2 than the reference is not converted.",
        examples=[True],
    )
    stack_temperature: Temperature | None = Field(
        default=None,
        description="Temperature of the gas in the stack, for losses and dew points. A bare number is K.",
        examples=["140 degC"],
    )
    stack_pressure: Pressure | None = Field(
        default=None,
        description="Pressure in the stack, absolute; that of the mixture unless given. A bare number is Pa.",
        examples=["1.013 bar"],
    )
    loss_reference_temperature: Temperature = Field(
        default="25 degC",
        description="Temperature from which losses count. A bare number is K.",
        examples=["15 degC"],
        validate_default=False,
    )
    wall_loss_percent: Percent = Field(
        default=0.0, description="Heat lost through walls, in percent of the lower heating value.", examples=[0.5]
    )
    siegert_fuel: SiegertFuel | None = Field(
        default=None, description="Fuel of Siegert's formula, to compare the loss with.", examples=["natural gas"]
    )
    dust_percent: Percent | None = Field(
        default=None, description="Share of all solids that leaves with the gas, in percent.", examples=[20.0]
    )
    sulfur_trioxide_percent: Percent | None = Field(
        default=None,
        description="Share of SOx that is SO3, for the acid dew point; that of the flue gas unless given.",
        examples=[2.0],
    )

    @model_validator(mode="after")
    def _one_reference(self) -> FlueGasTable:
        if self.application is not None and self.reference_oxygen_percent is not None:
            raise RuleError("application already says the reference oxygen; leave one out", "reference_oxygen_percent")
        return self
