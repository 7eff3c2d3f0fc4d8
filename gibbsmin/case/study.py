"""A case turned into numbers: the system, the feeds, the states to solve."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

from gibbsmin.case.axes import AxisValues, axis_values
from gibbsmin.case.fields import RuleError, in_si
from gibbsmin.case.recipe import Recipe, read_recipe
from gibbsmin.case.schema import Case
from gibbsmin.case.selection import choose_system, element_row, finder
from gibbsmin.case.shown import shown_units
from gibbsmin.case.sizes import feed_units, read_basis
from gibbsmin.results.folder import check_place, write_folder
from gibbsmin.results.judge import judge
from gibbsmin.results.result import FeedAmounts, Result
from gibbsmin.states.solve import COLDEST, HOTTEST
from gibbsmin.states.system import System
from gibbsmin.studies.labelled import Axis
from gibbsmin.studies.sweep import Progress, grid, solve_in_chunks
from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class Study:
    """A case that was checked and can be run.

    Attributes
    ----------
    case : Case
        What the file says.
    system : System
        What may form.
    recipes : tuple of Recipe
        What each feed is made of.
    axes : tuple of AxisValues
        The varied inputs.
    basis : str
        ``"mol"``, or ``"mol/s"`` where the feeds are flows.
    path, sha256 : str
        The file and its checksum; empty where there is none.
    """

    case: Case
    system: System
    recipes: tuple[Recipe, ...]
    axes: tuple[AxisValues, ...]
    basis: str
    path: str = ""
    sha256: str = ""

    @classmethod
    def of(cls, case: Case, own: Sequence[Species] = (), path: str = "", sha256: str = "") -> Study:
        """Turn a case into a study.

        Parameters
        ----------
        case : Case
            The case.
        own : sequence of Species
            Species of the user's own files.
        path, sha256 : str
            The file and its checksum.

        Returns
        -------
        Study

        Raises
        ------
        RuleError
            A name is not known, an element has no place, or a feed cannot be sized; with the key.
        """
        find = finder(own)
        recipes = []
        for name, feed in case.feeds.items():
            try:
                recipes.append(read_recipe(name, feed, find))
            except RuleError as error:
                raise RuleError(error.message, "feeds", name, *error.key) from None
        axes = tuple(axis_values(axis, case.feeds) for axis in case.sweep)
        system = choose_system(case.species, recipes, own)
        try:
            study = cls(case, system, tuple(recipes), axes, read_basis(case.feeds), path, sha256)
            study.element_rows, study.units  # noqa: B018 - made here so that what is wrong shows before anything runs
        except RuleError as error:
            raise RuleError(error.message, "feeds", *error.key) from None
        study._check_temperature()
        return study

    def _check_temperature(self) -> None:
        """Refuse held temperatures beyond all data."""
        T = self.held("temperature", "K")
        beyond = T[(T < COLDEST) | (T > HOTTEST)]
        if beyond.size:
            varied = [number for number, axis in enumerate(self.axes) if axis.vary == "held.temperature"]
            key = ("sweep", varied[0]) if varied else ("held", "temperature")
            raise RuleError(f"{beyond[0]:.6g} K is beyond all data; expected {COLDEST:g} to {HOTTEST:g} K", *key)

    @cached_property
    def columns(self) -> dict[str, Floats]:
        """Value of each varied input in every state, in SI."""
        return dict(zip((axis.vary for axis in self.axes), grid([axis.values for axis in self.axes]), strict=True))

    @property
    def states(self) -> int:
        """Number of states."""
        return int(np.prod([len(axis.values) for axis in self.axes], dtype=int))

    @cached_property
    def units(self) -> Floats:
        """Units of each feed in every state, (states, F), [mol, kg, or either per second]."""
        sizes: dict[str, Floats | float] = {recipe.name: recipe.size for recipe in self.recipes}
        for axis in self.axes:
            name = axis.vary.removeprefix("feeds.").rpartition(".")[0]
            recipe = next((one for one in self.recipes if one.name == name), None)
            if recipe is not None and axis.vary.startswith("feeds."):
                sizes[name] = self.columns[axis.vary] * recipe.units(1.0, axis.unit)
        return np.broadcast_to(feed_units(self.recipes, sizes), (self.states, len(self.recipes)))

    @cached_property
    def element_rows(self) -> Floats:
        """Element amounts in one unit of each feed, (F, E), [mol]."""
        return np.array([element_row(recipe, self.system) for recipe in self.recipes])

    @cached_property
    def feeds(self) -> dict[str, FeedAmounts]:
        """Each feed as its table has it, without the sweep, by name."""
        return {
            recipe.name: FeedAmounts(
                recipe.name,
                {record.name: n * units for record, n in recipe.species.items()},
                {element: n * units for element, n in recipe.atoms.items()},
                {name: float(n) * units for name, n in zip(self.system.elements, row, strict=True) if n},
                recipe.mass * units,
                recipe.temperature,
                recipe.pressure,
            )
            for recipe, row, units in zip(self.recipes, self.element_rows, map(float, self._base_units), strict=True)
        }

    @property
    def _base_units(self) -> Floats:
        """Units of each feed as the tables have them, without the sweep, (F,)."""
        return np.asarray(feed_units(self.recipes, {recipe.name: recipe.size for recipe in self.recipes})[0])

    @property
    def feed_enthalpy(self) -> Floats | None:
        """Enthalpy of all feeds in every state, (states,), [J or W]; None where one is not known."""
        known = [recipe.enthalpy for recipe in self.recipes]
        if any(enthalpy is None for enthalpy in known):
            return None
        return np.asarray(self.units @ np.array(known, float))

    def held(self, name: str, unit: str) -> Floats:
        """Held temperature or pressure in every state, (states,), in ``unit``."""
        value = in_si(getattr(self.case.held, name), unit)
        return np.asarray(self.columns.get(f"held.{name}", np.full(self.states, value)))

    def run(self, out: str | Path | None = None, progress: Progress | None = None) -> Result:
        """Solve all states.

        Parameters
        ----------
        out : str or Path, optional
            Result folder to write, as the command line does.
        progress : callable, optional
            Called with the states done and all states.

        Returns
        -------
        Result

        Raises
        ------
        InputError
            The folder cannot be written, or holds something that is not a result.
        """
        if out is not None:
            check_place(Path(out))
        result = self._solve(progress)
        if out is not None:
            write_folder(result, judge(result), Path(out))
        return result

    def _solve(self, progress: Progress | None) -> Result:
        """Solve all states."""
        batch = solve_in_chunks(
            self.system,
            self.units @ self.element_rows,
            self.held("temperature", "K"),
            self.held("pressure", "Pa"),
            progress,
        )
        typed = grid([axis.typed_values for axis in self.axes])
        return Result(
            title=self.case.title,
            case=self.case.model_dump(by_alias=True, exclude_none=True),
            case_path=self.path,
            case_sha256=self.sha256,
            system=self.system,
            basis=self.basis,
            inputs={axis.vary: values for axis, values in zip(self.axes, typed, strict=True)},
            input_units={axis.vary: axis.typed_unit for axis in self.axes},
            axes=tuple(Axis(axis.vary, np.array(axis.typed_values), axis.typed_unit) for axis in self.axes),
            batch=batch,
            display_units=shown_units(self.case, self.basis),
            feeds=self.feeds,
            feed_enthalpy=self.feed_enthalpy,
        )

    def describe(self) -> dict[str, Any]:
        """Say what the case asks for, without solving it.

        Returns
        -------
        dict
            ``title``, ``file``, ``basis``; ``elements`` (name to amount), ``species`` (``gas``, ``condensed``: names;
            ``exclude``, ``inert``), ``phases`` (names), ``feeds`` (a dict each: ``name``, ``amounts``, ``atoms``,
            ``element_amounts``, ``mass``, ``temperature``, ``pressure``), ``held`` (as typed), ``sweep`` (a dict each:
            ``vary``, ``first``, ``last``, ``unit``, ``points``), ``states``, ``units`` (as typed). SI throughout,
            save for what is typed.
        """
        gas = list(map(bool, self.system.gas))
        names = list(self.system.species)
        total: dict[str, float] = {}
        for feed in self.feeds.values():
            for element, n in feed.element_amounts.items():
                total[element] = total.get(element, 0.0) + n
        return {
            "title": self.case.title,
            "file": self.path,
            "basis": self.basis,
            "elements": total,
            "species": {
                "gas": [name for name, flag in zip(names, gas, strict=True) if flag],
                "condensed": [name for name, flag in zip(names, gas, strict=True) if not flag],
                "exclude": list(self.case.species.exclude),
                "inert": list(self.case.species.inert),
            },
            "phases": list(self.system.phases),
            "feeds": [feed.to_dict() for feed in self.feeds.values()],
            "held": self.case.held.model_dump(),
            "sweep": [
                {
                    "vary": axis.vary,
                    "first": axis.typed_values[0],
                    "last": axis.typed_values[-1],
                    "unit": axis.typed_unit,
                    "points": len(axis.values),
                }
                for axis in self.axes
            ],
            "states": self.states,
            "units": shown_units(self.case, self.basis),
        }
