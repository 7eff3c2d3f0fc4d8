"""The case file: its tables and keys, the rules between them, and their JSON Schema."""

from __future__ import annotations

import re
from collections.abc import Iterable
from typing import Final, Literal

from pydantic import Field, model_validator

from gibbsmin.case.axes import Axis, axis_values
from gibbsmin.case.design_schema import DesignTable, read_design
from gibbsmin.case.feed_schema import Feed
from gibbsmin.case.fields import Number, RuleError, Table, Text
from gibbsmin.case.flue_gas_schema import FlueGasTable
from gibbsmin.case.held_schema import Held, Surroundings
from gibbsmin.case.inputs import Limits, inputs
from gibbsmin.case.key_sets import KeySet
from gibbsmin.case.rules_schema import Approach, Constraint
from gibbsmin.case.species_schema import SpeciesTable

NAME: Final = r"^[A-Za-z0-9_-]{1,40}$"
"""What the name of a feed, a reaction or a constraint may be."""


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
    columns: list[Text] = Field(
        default=[],
        description=(
            "Key figures that stand as columns in the table of a sweep, as SET.NAME, of a train as STAGE.SET.NAME; the "
            "names are those of table.csv."
        ),
        examples=[["reforming.ch4_dry", "flue gas.nox_dry"]],
    )


class CaseFrame(Table):
    """What every study has: what goes in, what may form, and what is varied."""

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
    surroundings: Surroundings = Field(
        default=Surroundings(),
        description="The table [surroundings]: the place around, for the second-law account.",
        examples=[{"temperature": "25 degC"}],
    )
    sweep: list[Axis] = Field(
        default=[],
        description="Inputs that are varied, one [[sweep]] table each; in a grid the last one varies fastest.",
        examples=[[{"vary": "held.temperature", "from": "600 degC", "to": "1000 degC", "points": 81}]],
    )
    design: DesignTable = Field(
        default=DesignTable(),
        description="The table [design]: how the values of the varied inputs are put together.",
        examples=[{"kind": "latin hypercube", "points": 1000, "seed": 1}],
    )
    show: Show = Field(
        default=Show(),
        description="The table [show]: what the tables show; the files hold everything.",
        examples=[{"threshold": "1 ppm"}],
    )

    def inputs(self) -> dict[str, Limits]:
        """List what can be varied, by dotted name."""
        raise NotImplementedError

    def typed(self, key: str) -> list[float | str | None]:
        """List what is held of ``key`` (``temperature``, ``pressure``), as typed."""
        raise NotImplementedError

    def named(self) -> list[tuple[str, str, Iterable[str]]]:
        """List the tables whose names are free: their key, what a name stands for, and the names."""
        return [("feeds", "feed", self.feeds)]

    def check(self) -> None:
        """Refuse what only this kind of study cannot be."""

    @model_validator(mode="after")
    def _rules_between_tables(self) -> CaseFrame:
        if not self.feeds:
            raise RuleError("there are no feeds; add at least one table [feeds.NAME]", "feeds")
        for table, kind, names in self.named():
            for name in names:
                if not re.search(NAME, name):
                    message = f"{name!r} will not do as the name of a {kind}; use up to 40 letters, digits, _ and -"
                    raise RuleError(message, table, name)
        self.check()
        read_design(self.design, self.sweep)
        for number, axis in enumerate(self.sweep):
            if axis.vary in [earlier.vary for earlier in self.sweep[:number]]:
                raise RuleError(f"{axis.vary} is varied twice", "sweep", number, "vary")
            try:
                axis_values(axis, self.inputs(), self.feeds)
            except RuleError as error:
                raise RuleError(error.message, "sweep", number, *error.key) from None
        return self


class Case(CaseFrame):
    """A study of one mixture: what goes in, what may form, what is held, and what is varied."""

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

    def inputs(self) -> dict[str, Limits]:
        """List what can be varied, by dotted name."""
        return inputs(self)

    def typed(self, key: str) -> list[float | str | None]:
        """List what is held of a key, as typed."""
        return [getattr(self.held, key)]

    def named(self) -> list[tuple[str, str, Iterable[str]]]:
        """List the tables whose names are free."""
        found = super().named()
        found.append(("approach", "reaction", self.approach))
        found.append(("constraint", "constraint", self.constraint))
        return found

    def check(self) -> None:
        """Refuse rules that do not go with what is held, and flue gas that is not said what it is."""
        if self.approach and self.held.thermal == "entropy":
            raise RuleError(
                "an approach temperature does not go with held entropy; hold another condition",
                *("approach", next(iter(self.approach))),
            )
        self._check_flue_gas()

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
