"""What every study has: its feeds, and the values of its inputs in every state."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from typing import Final, Self

import numpy as np
from numpy.typing import ArrayLike, NDArray

from gibbsmin.case.axes import AxisValues, axis_values
from gibbsmin.case.design_schema import read_design
from gibbsmin.case.feed_states import FeedStates
from gibbsmin.case.fields import RuleError
from gibbsmin.case.recipe import Find, Recipe, read_recipe
from gibbsmin.case.schema import CaseFrame
from gibbsmin.case.sizes import read_basis
from gibbsmin.errors import InputError
from gibbsmin.studies.designs import RANDOM, Design
from gibbsmin.studies.labelled import POINT, Axis

Floats = NDArray[np.float64]

TRIED: Final = 10_000
"""Up to so many states of a grid are all looked at before any is solved; of more, those at the ends of the ranges."""


@dataclass(frozen=True, kw_only=True)
class StudyFrame:
    """A case in numbers, as far as feeds and varied inputs go.

    Attributes
    ----------
    recipes : tuple of Recipe
        What each feed is made of.
    axes : tuple of AxisValues
        The varied inputs.
    design : Design
        How their values are put together.
    basis : str
        ``"mol"``, or ``"mol/s"`` where the feeds are flows.
    path, sha256 : str
        The file and its checksum; empty where there is none.
    window : (int, int) or None
        The first state and the one behind the last, where this is a part of the study.
    """

    recipes: tuple[Recipe, ...]
    axes: tuple[AxisValues, ...]
    design: Design
    basis: str
    path: str = ""
    sha256: str = ""
    window: tuple[int, int] | None = None

    @property
    def all_states(self) -> int:
        """Number of states of the whole study."""
        return self.design.states

    @property
    def shape(self) -> tuple[int, ...]:
        """Number of values of each input, in the whole study; of what is not a grid the number of points alone."""
        return self.design.shape

    @property
    def bounds(self) -> tuple[int, int]:
        """The first state, counted from 0, and the one behind the last."""
        return self.window or (0, self.all_states)

    @property
    def states(self) -> int:
        """Number of states, of the part if this is one."""
        start, stop = self.bounds
        return stop - start

    def part(self, start: int, stop: int) -> Self:
        """Return the same study for some of its states only.

        Parameters
        ----------
        start, stop : int
            The first state of the whole study, counted from 0, and the one behind the last.

        Returns
        -------
        StudyFrame
            Of the same kind. It never makes arrays longer than itself, but for a Latin hypercube (see `Design.places`).

        Raises
        ------
        InputError
            There are no such states.
        """
        if not 0 <= start < stop <= self.all_states:
            raise InputError(f"there are no states {start} to {stop}; the study has 0 to {self.all_states}")
        return replace(self, window=(start, stop))

    def beginning(self) -> Self:
        """Return the same study for the first value of each input only, one state."""
        return self._only([axis.listed[:1] for axis in self.axes])

    def tried(self) -> Self:
        """Return the states that are looked at before any is solved.

        All of a few; of many, and of random designs, those at the ends of the ranges: each with each, but the ends of
        inputs in step together.
        """
        if self.all_states <= TRIED and self.design.kind not in RANDOM:
            return self
        if self.design.kind == "in step":
            return self._only([axis.listed[[0, -1]] for axis in self.axes], Design((2,) * len(self.axes), "in step"))
        return self._only([np.unique([axis.listed.min(), axis.listed.max()]) for axis in self.axes])

    def _only(self, values: Sequence[ArrayLike], design: Design | None = None) -> Self:
        """Return the same study with other values of its inputs, each with each unless ``design`` says how."""
        axes = tuple(axis.only(one) for axis, one in zip(self.axes, values, strict=True))
        return replace(self, axes=axes, design=design or Design(tuple(len(one.values) for one in axes)), window=None)

    @cached_property
    def columns(self) -> dict[str, Floats]:
        """Value of each varied input in every state, in SI."""
        places = self.design.places(*self.bounds)
        return {axis.vary: axis.at(place) for axis, place in zip(self.axes, places, strict=True)}

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
        return {axis.vary: axis.typed(self.columns[axis.vary]) for axis in self.axes}

    @property
    def typed_axes(self) -> tuple[Axis, ...]:
        """The varied inputs in the unit that was typed: each with its own values in a whole grid, else by the point."""
        if self.design.kind == "grid" and self.window is None:
            return tuple(Axis(axis.vary, axis.typed_values, axis.typed_unit) for axis in self.axes)
        typed = self.typed_inputs
        return tuple(Axis(axis.vary, typed[axis.vary], axis.typed_unit, POINT) for axis in self.axes)


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


def read_varied(case: CaseFrame) -> tuple[tuple[AxisValues, ...], Design]:
    """Work out the values of the varied inputs of a case that was checked, and how they are put together."""
    axes = tuple(axis_values(axis, case.inputs(), case.feeds) for axis in case.sweep)
    return axes, read_design(case.design, case.sweep)


def read_feed_basis(case: CaseFrame) -> str:
    """Tell whether the feeds are amounts or flows; RuleError, with the key, where they are both."""
    try:
        return read_basis(case.feeds)
    except RuleError as error:
        raise RuleError(error.message, "feeds", *error.key) from None
