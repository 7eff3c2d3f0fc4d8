"""The case file: its tables and keys, the rules between them, and their JSON Schema."""

from __future__ import annotations

import re
from typing import Any, Final, Literal

from pydantic import Field, model_validator

from gibbsmin.case.axes import MAX_STATES, Axis, axis_values
from gibbsmin.case.feed_schema import Feed
from gibbsmin.case.fields import Number, RuleError, Table, Text
from gibbsmin.case.flue_gas_schema import FlueGasTable
from gibbsmin.case.held_schema import Held, Surroundings
from gibbsmin.case.rules_schema import Approach, Constraint, Percent

FROM_FEEDS: Final = "from feeds"
MAX_AXES: Final = 2
"""Largest number of inputs that one case may vary."""

Names = list[Text]
KeySet = Literal[
    "reforming",
    "shift",
    "synthesis gas",
    "methanation",
    "ammonia",
    "methanol",
    "gasification",
    "fuel gas",
    "sulfur",
    "sulfuric acid",
    "reduction",
    "furnace atmosphere",
    "catalyst",
    "kiln",
    "salts",
    "halogens",
    "deposition",
]
"""Sets of key figures, those of `gibbsmin.results.key_figures`."""

NAME: Final = r"^[A-Za-z0-9_-]{1,40}$"
"""What the name of a feed, a reaction or a constraint may be."""


class SpeciesTable(Table):
    """Which species may form."""

    elements: Text = Field(
        default=FROM_FEEDS,
        description="Elements whose species may form: 'from feeds', or symbols with blanks between them.",
        examples=["from feeds", "C H O N"],
    )
    allow: Names | None = Field(
        default=None,
        description="The species that may form, one by one; then elements, condensed, ions and exclude are not given.",
        examples=[["CH4", "H2O", "CO", "CO2", "H2", "N2"]],
    )
    condensed: bool = Field(default=True, description="Whether solids and liquids may form.", examples=[True])
    ions: bool = Field(default=False, description="Whether ions and electrons may form.", examples=[False])
    exclude: Names = Field(default=[], description="Species that must not form.", examples=[["C(s):graphite", "C2H2"]])
    inert: Names = Field(
        default=[],
        description="Species that pass through without reacting; their atoms take no part.",
        examples=[["Ar"]],
    )
    conversion: dict[Text, Percent] | None = Field(
        default=None,
        description=(
            "Given conversion of a species, in percent of what the feeds bring: the rest of it leaves as it came, and "
            "no more of it forms."
        ),
        examples=[{"CH4": 85.0}],
    )
    carbon_conversion: Percent | None = Field(
        default=None,
        description=(
            "Given conversion of the carbon of fuels, in percent: the rest leaves as graphite of the temperature of "
            "the mixture and takes no part. Carbon counts as for steam_to_carbon."
        ),
        examples=[98.0],
    )
    files: Names = Field(
        default=[],
        description="Files of own species (TOML), in the folder of the case.",
        examples=[["my_species.toml"]],
    )

    @model_validator(mode="after")
    def _allow_stands_alone(self) -> SpeciesTable:
        usual = {"elements": FROM_FEEDS, "condensed": True, "ions": False, "exclude": []}
        clash = [key for key, value in usual.items() if getattr(self, key) != value]
        if self.allow is not None and clash:
            raise RuleError(f"allow lists every species that may form; leave out {' and '.join(clash)}", clash[0])
        twice = [name for name in self.conversion or {} if name in (*self.inert, *self.exclude)]
        if twice:
            raise RuleError(f"{twice[0]} has a given conversion and is inert or excluded; choose one", "conversion")
        if self.allow is not None and not self.allow:
            raise RuleError("lists no species; name at least one, or leave allow out", "allow")
        return self


class Show(Table):
    """What the tables show; the files always hold everything."""

    threshold: Number = Field(
        default=1e-6,
        gt=0.0,
        lt=1.0,
        description="Species below this mole fraction of their phase are summed in one line.",
        examples=["1 ppm", 1e-4],
        validate_default=False,
    )
    sort: Literal["amount", "name"] = Field(
        default="amount", description="Order of the species in tables.", examples=["name"]
    )


class Case(Table):
    """A study: what goes in, what may form, what is held, and what is varied."""

    title: Text = Field(description="One line that says what the case is about.", examples=["Reformer, tube outlet"])
    species: SpeciesTable = Field(
        default=SpeciesTable(),
        description="The table [species]: which species may form.",
        examples=[{"elements": "from feeds", "condensed": True}],
    )
    feeds: dict[str, Feed] = Field(
        json_schema_extra={"propertyNames": {"pattern": NAME}},
        description="What goes in: a table a feed, [feeds.NAME].",
        examples=[{"steam": {"species": "H2O", "flow": "300 kmol/h", "temperature": "550 degC"}}],
    )
    held: Held = Field(
        description="The table [held]: the two conditions that stay fixed while the mixture settles.",
        examples=[{"temperature": "870 degC", "pressure": "24 bar"}, {"adiabatic": True, "pressure": "1 bar"}],
    )
    approach: dict[str, Approach] = Field(
        default={},
        json_schema_extra={"propertyNames": {"pattern": NAME}},
        description="Reactions that stop short of equilibrium: a table each, [approach.NAME].",
        examples=[{"reforming": {"reaction": "CH4 + H2O = CO + 3 H2", "temperature": "-10 K"}}],
    )
    constraint: dict[str, Constraint] = Field(
        default={},
        json_schema_extra={"propertyNames": {"pattern": NAME}},
        description="Sums of amounts that are held: a table each, [constraint.NAME].",
        examples=[{"slip": {"amounts": {"CH4": 1.0}, "sum": "5 kmol/h"}}],
    )
    flue_gas: FlueGasTable | None = Field(
        default=None,
        description="The table [flue_gas]: asks for the numbers of a flue gas, and says how they are reported.",
        examples=[{"frozen_at": "1000 degC", "application": "gas or liquid fuel", "stack_temperature": "140 degC"}],
    )
    key_figures: list[KeySet] = Field(
        default=[],
        description="Sets of the trade's numbers that are reported; written before the first table.",
        examples=[["reforming", "catalyst"]],
    )
    surroundings: Surroundings = Field(
        default=Surroundings(),
        description="The table [surroundings]: the place around, for the second-law account.",
        examples=[{"temperature": "25 degC"}],
    )
    sweep: list[Axis] = Field(
        default=[],
        description="Inputs that are varied, one [[sweep]] table each; the last one varies fastest.",
        examples=[[{"vary": "held.temperature", "from": "600 degC", "to": "1000 degC", "points": 81}]],
    )
    show: Show = Field(
        default=Show(),
        description="The table [show]: what the tables show; the files hold everything.",
        examples=[{"threshold": "1 ppm"}],
    )

    @model_validator(mode="after")
    def _rules_between_tables(self) -> Case:
        if not self.feeds:
            raise RuleError("there are no feeds; add at least one table [feeds.NAME]", "feeds")
        if len(self.sweep) > MAX_AXES:
            raise RuleError(f"{len(self.sweep)} inputs are varied; at most {MAX_AXES} can be", "sweep", MAX_AXES)
        tables = (("feeds", "feed", self.feeds), ("approach", "reaction", self.approach))
        for table, kind, named in (*tables, ("constraint", "constraint", self.constraint)):
            for name in named:
                if not re.search(NAME, name):
                    message = f"{name!r} will not do as the name of a {kind}; use up to 40 letters, digits, _ and -"
                    raise RuleError(message, table, name)
        for number, axis in enumerate(self.sweep):
            if axis.vary in [earlier.vary for earlier in self.sweep[:number]]:
                raise RuleError(f"{axis.vary} is varied twice", "sweep", number, "vary")
            try:
                axis_values(axis, self)
            except RuleError as error:
                raise RuleError(error.message, "sweep", number, *error.key) from None
        self._check_flue_gas()
        states = 1
        for axis in self.sweep:
            states *= axis.points or len(axis.values or [])
        if states > MAX_STATES:
            raise RuleError(f"the sweep has {states:,} states; at most {MAX_STATES:,} can be solved", "sweep", 0)
        return self

    def _check_flue_gas(self) -> None:
        """Refuse a flue gas that goes back, or is to hold so much oxygen, where nothing says what it is."""
        back = [name for name, feed in self.feeds.items() if feed.composition == "flue gas"]
        if len(back) > 1:
            raise RuleError(f"{' and '.join(back)} are both flue gas that goes back; one can be", "feeds", back[1])
        if back and len(back) == len(self.feeds):
            raise RuleError("only flue gas is fed; something must burn", "feeds", back[0])
        air = [name for name, feed in self.feeds.items() if feed.flue_gas_oxygen_percent is not None]
        if len(air) > 1:
            raise RuleError(f"{' and '.join(air)} both give the flue gas its oxygen; one can", "feeds", air[1])
        for name in [*back, *air]:
            if self.held.mechanical == "volume" or self.held.thermal == "entropy":
                raise RuleError(
                    "flue gas that goes back, or that is to hold so much oxygen, goes with a held pressure and"
                    " temperature or heat",
                    *("feeds", name),
                )
            if self.held.thermal != "temperature" and (self.flue_gas is None or self.flue_gas.frozen_at is None):
                raise RuleError(
                    "say at which temperature the composition of the flue gas is frozen, for example [flue_gas]"
                    ' frozen_at = "1000 degC"',
                    *("feeds", name),
                )


def case_schema() -> dict[str, Any]:
    """Return the JSON Schema of case files.

    Returns
    -------
    dict
        Draft 2020-12, with a description and examples for every key.
    """
    schema = Case.model_json_schema(by_alias=True)
    return {"$schema": "https://json-schema.org/draft/2020-12/schema", **schema, "title": "gibbsmin case file"}
