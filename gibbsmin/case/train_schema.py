"""The case file of a train: feeds, and a ``[[stage]]`` table for each step."""

from __future__ import annotations

import re
from collections.abc import Iterable

from pydantic import Field

from gibbsmin.case.fields import RuleError
from gibbsmin.case.inputs import Limits, train_inputs
from gibbsmin.case.schema import NAME, CaseFrame
from gibbsmin.case.stage_schema import Stage
from gibbsmin.studies.train.graph import GraphError, Node, ordered


class TrainCase(CaseFrame):
    """A study of several steps in series."""

    stage: list[Stage] = Field(
        description="The steps of a train, a [[stage]] table each, in any order.",
        examples=[[{"name": "reformer", "inlets": ["gas", "steam"], "held": {"temperature": "870 degC"}}]],
    )

    def inputs(self) -> dict[str, Limits]:
        """List what can be varied, by dotted name."""
        return train_inputs(self)

    def typed(self, key: str) -> list[float | str | None]:
        """List what is held of a key, as typed."""
        return [getattr(stage.held, key) for stage in self.stage if stage.held is not None]

    def check(self) -> None:
        """Refuse names and connections that cannot be."""
        if not self.stage:
            raise RuleError("there are no stages; add at least one table [[stage]]", "stage")
        places = {stage.name: k for k, stage in enumerate(self.stage)}
        for k, stage in enumerate(self.stage):
            free: list[tuple[str, str, Iterable[str]]] = [
                ("name", "stage", [stage.name]),
                ("take", "side stream", stage.take),
                ("approach", "reaction", stage.approach),
                ("constraint", "constraint", stage.constraint),
            ]
            for key, kind, names in free:
                for name in names:
                    if not re.search(NAME, name):
                        message = f"{name!r} will not do as the name of a {kind}; use up to 40 letters, digits, _ and -"
                        raise RuleError(message, "stage", k, key)
        for name, feed in self.feeds.items():
            if feed.composition == "flue gas":
                text = "in a train flue gas goes back as a recycled stream; give the feed another composition"
                raise RuleError(text, "feeds", name)
        airs = [name for name, feed in self.feeds.items() if feed.flue_gas_oxygen_percent is not None]
        if len(airs) > 1:
            text = f"{airs[0]} is sized by the oxygen of the flue gas already; one feed can be"
            raise RuleError(text, "feeds", airs[1], "flue_gas_oxygen_percent")
        if airs and sum(stage.flue_gas is not None for stage in self.stage) != 1:
            text = "say which step has the flue gas that is meant: give exactly one of them a table flue_gas"
            raise RuleError(text, "feeds", airs[0], "flue_gas_oxygen_percent")
        try:
            ordered(nodes(self), self.feeds)
        except GraphError as error:
            raise RuleError(error.message, "stage", places.get(error.step, 0), error.key) from None


def nodes(case: TrainCase) -> list[Node]:
    """List the stages as the graph sees them, in the order of the file."""
    return [
        Node(stage.name, (*stage.inlets, *stage.recycled), tuple(stage.recycled), tuple(stage.take))
        for stage in case.stage
    ]
