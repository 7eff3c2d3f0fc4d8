"""What every study has: its feeds, and the values of its inputs in every state."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from gibbsmin.case.axes import AxisValues, axis_values
from gibbsmin.case.feed_states import FeedStates
from gibbsmin.case.fields import RuleError
from gibbsmin.case.recipe import Find, Recipe, read_recipe
from gibbsmin.case.schema import CaseFrame
from gibbsmin.case.sizes import read_basis
from gibbsmin.studies.labelled import Axis
from gibbsmin.studies.sweep import grid

Floats = NDArray[np.float64]


@dataclass(frozen=True, kw_only=True)
class StudyFrame:
    """A case in numbers, as far as feeds and varied inputs go.

    Attributes
    ----------
    recipes : tuple of Recipe
        What each feed is made of.
    axes : tuple of AxisValues
        The varied inputs.
    basis : str
        ``"mol"``, or ``"mol/s"`` where the feeds are flows.
    path, sha256 : str
        The file and its checksum; empty where there is none.
    """

    recipes: tuple[Recipe, ...]
    axes: tuple[AxisValues, ...]
    basis: str
    path: str = ""
    sha256: str = ""

    @cached_property
    def columns(self) -> dict[str, Floats]:
        """Value of each varied input in every state, in SI."""
        return dict(zip((axis.vary for axis in self.axes), grid([axis.values for axis in self.axes]), strict=True))

    @property
    def states(self) -> int:
        """Number of states."""
        return int(np.prod([len(axis.values) for axis in self.axes], dtype=int))

    @cached_property
    def feed_states(self) -> FeedStates:
        """The feeds in every state."""
        return FeedStates(self.recipes, self.axes, self.columns, self.states)

    @property
    def units(self) -> Floats:
        """Units of each feed in every state, (states, F), [mol, kg, or either per second]."""
        return self.feed_states.units

    @property
    def typed_inputs(self) -> dict[str, Floats]:
        """Value of each varied input in every state, in the unit that was typed."""
        typed = grid([axis.typed_values for axis in self.axes])
        return {axis.vary: values for axis, values in zip(self.axes, typed, strict=True)}

    @property
    def typed_axes(self) -> tuple[Axis, ...]:
        """The varied inputs, in the unit that was typed."""
        return tuple(Axis(axis.vary, np.array(axis.typed_values), axis.typed_unit) for axis in self.axes)


def read_feeds(case: CaseFrame, find: Find) -> tuple[Recipe, ...]:
    """Read what the feeds of a case are made of; flue gas that goes back is not among them.

    Parameters
    ----------
    case : CaseFrame
    find : callable
        Gives the species of a name, or raises SpeciesError.

    Returns
    -------
    tuple of Recipe

    Raises
    ------
    RuleError
        A name is not known, or a size does not suit; with the key.
    """
    recipes = []
    for name, feed in case.feeds.items():
        if feed.composition == "flue gas":
            continue
        try:
            recipes.append(read_recipe(name, feed, find))
        except RuleError as error:
            raise RuleError(error.message, "feeds", name, *error.key) from None
    return tuple(recipes)


def read_axes(case: CaseFrame) -> tuple[AxisValues, ...]:
    """Work out the values of the varied inputs of a case that was checked."""
    return tuple(axis_values(axis, case.inputs(), case.feeds) for axis in case.sweep)


def read_feed_basis(case: CaseFrame) -> str:
    """Tell whether the feeds are amounts or flows; RuleError, with the key, where they are both."""
    try:
        return read_basis(case.feeds)
    except RuleError as error:
        raise RuleError(error.message, "feeds", *error.key) from None
