"""The ``[design]`` table of a case file: how the values of the varied inputs are put together."""

from __future__ import annotations

from collections.abc import Sequence
from math import prod
from typing import Annotated, Final

from pydantic import Field, model_validator

from gibbsmin.case.axes import MAX_STATES, Axis
from gibbsmin.case.fields import RuleError, Table
from gibbsmin.studies.designs import RANDOM, Design, Kind

MAX_AXES: Final = 6
"""Largest number of inputs that one case may vary."""


class DesignTable(Table):
    """How the values of the varied inputs are put together."""

    kind: Kind = Field(
        default="grid",
        description=(
            "How the values of the varied inputs go together: grid, each with each; in step, the first of all, then the"
            " second of all; latin hypercube and sobol, points drawn at random that fill the ranges evenly."
        ),
        examples=["in step", "latin hypercube", "sobol"],
    )
    points: Annotated[int, Field(ge=2, le=MAX_STATES)] | None = Field(
        default=None,
        description="Number of points of a random design; of sobol the most even are powers of 2.",
        examples=[1024],
    )
    seed: Annotated[int, Field(ge=0, le=2**63 - 1)] | None = Field(
        default=None,
        description="Any whole number, at random designs: the same seed draws the same points again.",
        examples=[1],
    )

    @model_validator(mode="after")
    def _points_and_seed(self) -> DesignTable:
        given = [key for key in ("points", "seed") if getattr(self, key) is not None]
        if self.kind in RANDOM and len(given) < 2:
            missing = "points and seed" if not given else "seed" if given == ["points"] else "points"
            raise RuleError(f"{self.kind} needs {missing}; for example points = 1024 and seed = 1")
        if self.kind not in RANDOM and given:
            raise RuleError(
                f"{given[0]} goes with a random design only ({' or '.join(RANDOM)}); leave it out, or say its kind",
                given[0],
            )
        return self


def read_design(table: DesignTable, axes: Sequence[Axis]) -> Design:
    """Put the varied inputs together.

    Parameters
    ----------
    table : DesignTable
        The ``[design]`` table.
    axes : sequence of Axis
        The ``[[sweep]]`` tables.

    Returns
    -------
    Design

    Raises
    ------
    RuleError
        The inputs do not suit the design, or there are too many of them or of states; with the key.
    """
    kind = table.kind
    if kind != "grid" and not axes:
        raise RuleError(f"nothing is varied {kind}; add a [[sweep]] table for each input", "design")
    if len(axes) > MAX_AXES:
        raise RuleError(f"{len(axes)} inputs are varied; at most {MAX_AXES} can be", "sweep", MAX_AXES)
    if kind in RANDOM:
        for number, axis in enumerate(axes):
            if axis.values is not None:
                message = f"{kind} draws from a range; give from and to in place of values"
                raise RuleError(message, "sweep", number, "values")
            if axis.points is not None:
                raise RuleError(f"{kind} has its points in [design]; leave them out here", "sweep", number, "points")
        return Design((table.points or 0,) * len(axes), kind, table.seed or 0)  # the table was checked: it has both
    for number, axis in enumerate(axes):
        if axis.values is None and axis.points is None:
            raise RuleError("give from, to and points, or a list of values", "sweep", number)
    sizes = tuple(axis.points or len(axis.values or []) for axis in axes)
    for number, (axis, size) in enumerate(zip(axes, sizes, strict=True)):
        if kind == "in step" and size != sizes[0]:
            raise RuleError(
                f"inputs in step have as many values each; {axes[0].vary} has {sizes[0]}, {axis.vary} has {size}",
                *("sweep", number),
            )
    states = prod(sizes) if kind == "grid" else sizes[0]
    if states > MAX_STATES:
        raise RuleError(f"the sweep has {states:,} states; at most {MAX_STATES:,} can be solved", "sweep", 0)
    return Design(sizes, kind)
