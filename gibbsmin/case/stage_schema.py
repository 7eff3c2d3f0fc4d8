"""The ``[[stage]]`` tables of a train: what a step takes, what it holds, what may form, what it parts from it."""

from __future__ import annotations

from typing import Annotated, Final, Literal

from pydantic import Field, model_validator

from gibbsmin.case.fields import Flow, Heat, Pressure, Ratio, RuleError, Table, Temperature, Text
from gibbsmin.case.flue_gas_schema import FlueGasTable
from gibbsmin.case.key_sets import KeySet
from gibbsmin.case.rules_schema import Approach, Constraint, Percent
from gibbsmin.case.species_schema import SpeciesTable

THERMAL: Final = ("temperature", "adiabatic", "heat", "entropy")
AMOUNTS: Final = ("percent", "flow", "ratio")
"""Keys that say how much a side stream takes."""


class StageHeld(Table):
    """What a step holds."""

    temperature: Temperature | None = Field(
        default=None, description="Temperature of the outlet. A bare number is K.", examples=["870 degC"]
    )
    adiabatic: bool | None = Field(default=None, description="true where no heat is moved.", examples=[True])
    heat: Heat | None = Field(
        default=None,
        description="Heat put in, negative where it is taken away: a power where feeds are flows, else an energy.",
        examples=["-5 MW"],
    )
    entropy: Literal["from inlets"] | None = Field(
        default=None,
        description="'from inlets': an ideal expansion or compression, with isentropic_efficiency a real one.",
        examples=["from inlets"],
    )
    isentropic_efficiency: Annotated[float, Field(gt=0.0, le=1.0, allow_inf_nan=False)] | None = Field(
        default=None,
        description="Work gained over that of the ideal expansion, or work of the ideal compression over that spent.",
        examples=[0.88],
    )
    pressure: Pressure | None = Field(
        default=None,
        description="Pressure of the outlet, absolute; that of the inlet unless given (of several the lowest).",
        examples=["24 bar"],
    )
    pressure_drop: Pressure | None = Field(
        default=None,
        description="How far the pressure of the outlet is below that of the inlet. A bare number is Pa.",
        examples=["1 bar"],
    )

    @model_validator(mode="after")
    def _one_thermal(self) -> StageHeld:
        if self.adiabatic is False:
            raise RuleError("false says nothing; leave it out, or give the heat that is moved", "adiabatic")
        thermal = [key for key in THERMAL if getattr(self, key) is not None]
        if len(thermal) != 1:
            found = f"has {' and '.join(thermal)}" if thermal else "does not say how hot the outlet is"
            raise RuleError(f"the step {found}; hold exactly one of {', '.join(THERMAL)}", *thermal[1:2])
        if self.pressure is not None and self.pressure_drop is not None:
            raise RuleError("pressure and pressure_drop say the same thing; give one", "pressure_drop")
        if self.isentropic_efficiency is not None and self.entropy is None:
            raise RuleError('an isentropic efficiency goes with entropy = "from inlets"', "isentropic_efficiency")
        if self.entropy is not None and self.pressure is None and self.pressure_drop is None:
            raise RuleError("an expansion or compression needs the pressure that it goes to", "entropy")
        return self

    @property
    def thermal(self) -> str:
        """The one of ``THERMAL`` that is held."""
        return next(key for key in THERMAL if getattr(self, key) is not None)


class TakeTable(Table):
    """A side stream, which is called STAGE.NAME."""

    of: Literal["all", "gas", "condensed"] | list[Text] = Field(
        default="all",
        description="What it takes from: all, the gas, what is condensed, or the species of a list.",
        examples=["condensed", ["H2O(l)"], "all"],
    )
    percent: Percent | None = Field(default=None, description="How much of it, in percent.", examples=[5.0])
    flow: Flow | None = Field(
        default=None, description="How much of it, as an amount of substance per time; all where there is less.",
        examples=["10 kmol/h"],
    )  # fmt: skip
    ratio: Ratio | None = Field(default=None, description="What it takes over what it leaves.", examples=[4.0])

    @model_validator(mode="after")
    def _one_amount(self) -> TakeTable:
        given = [key for key in AMOUNTS if getattr(self, key) is not None]
        if len(given) != 1:
            found = f"has {' and '.join(given)}" if given else "does not say how much it takes"
            raise RuleError(f"the side stream {found}; give exactly one of {', '.join(AMOUNTS)}", *given[1:2])
        return self


class Stage(Table):
    """One step of a train."""

    name: Text = Field(description="Name of the step and of the stream that leaves it.", examples=["reformer"])
    inlets: list[Text] = Field(
        default=[],
        description=(
            "Streams that it takes: feeds, steps, or side streams as STAGE.NAME. They mix first. Ratios of feeds count "
            "within one stage, unless `to` names another feed or the stage takes no other."
        ),
        examples=[["gas", "steam"]],
    )
    recycled: list[Text] = Field(
        default=[],
        description="Streams that it takes from a later step, so that they go round.",
        examples=[["splitter"]],
    )
    held: StageHeld | None = Field(
        default=None,
        description="What is held while the inlet settles; without it the inlets only mix.",
        examples=[{"temperature": "870 degC", "pressure": "24 bar"}],
    )
    frozen: bool = Field(
        default=False,
        description="true where nothing reacts: a heater, cooler, compressor or expander.",
        examples=[True],
    )
    species: SpeciesTable = Field(
        default=SpeciesTable(),
        description="What may form in this step; what it excludes and lets pass is added to the table [species].",
        examples=[{"inert": ["CH4"]}],
    )
    approach: dict[str, Approach] = Field(
        default={},
        description="Reactions of this step that stop short of equilibrium, by name.",
        examples=[{"shift": {"reaction": "CO + H2O = CO2 + H2", "temperature": "10 K"}}],
    )
    constraint: dict[str, Constraint] = Field(
        default={},
        description="Sums of amounts that are held in this step, by name; percent_of_feeds counts its inlets.",
        examples=[{"slip": {"amounts": {"CH4": 1.0}, "percent_of_feeds": 5.0}}],
    )
    take: dict[str, TakeTable] = Field(
        default={},
        description="Side streams, by name, parted one after the other; the rest is the stream of the step.",
        examples=[{"water": {"of": ["H2O(l)"], "percent": 100.0}}],
    )
    flue_gas: FlueGasTable | None = Field(
        default=None,
        description=(
            "How the flue gas of this step is reported: what all feeds before it burn to, less what goes back. Its "
            "composition is that of the step, so that frozen_at has no place here."
        ),
        examples=[{"application": "solid fuel", "stack_temperature": "140 degC"}],
    )
    key_figures: list[KeySet] = Field(
        default=[], description="Sets of the trade's numbers that are reported of this step.", examples=[["shift"]]
    )

    @model_validator(mode="after")
    def _what_goes_together(self) -> Stage:
        if self.frozen and self.held is None:
            raise RuleError("a step in which nothing reacts holds a temperature, heat or entropy; give held", "frozen")
        if not self.inlets and not self.recycled:
            raise RuleError("the step takes no stream; name its inlets", "inlets")
        if self.species.files:
            raise RuleError("files of own species are named in the table [species]", "species", "files")
        if self.flue_gas is not None and self.flue_gas.frozen_at is not None:
            text = "in a train a step of its own holds the temperature at which a composition is frozen"
            raise RuleError(text, "flue_gas", "frozen_at")
        if self.frozen or self.held is None:
            rules = [key for key in ("approach", "constraint", "key_figures", "flue_gas") if getattr(self, key)]
            if rules:
                raise RuleError(f"nothing reacts in this step, so {rules[0]} says nothing", rules[0])
        return self
