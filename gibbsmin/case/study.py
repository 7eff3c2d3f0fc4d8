"""A case turned into numbers: the system, the feeds, the states to solve."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

from gibbsmin.case.conditions import Conditions, number, read_conditions
from gibbsmin.case.described import describe
from gibbsmin.case.feed_states import FeedStates, feed_facts
from gibbsmin.case.fields import RuleError
from gibbsmin.case.flue_gas import closed_feeds, frozen, recirculated, setting
from gibbsmin.case.large import LARGE, Archived, Ways, run_large
from gibbsmin.case.rules import Rules, read_rules
from gibbsmin.case.schema import Case
from gibbsmin.case.selection import choose_system, element_row, finder
from gibbsmin.case.shown import shown_units
from gibbsmin.case.sizes import feed_units
from gibbsmin.case.source import dotted
from gibbsmin.case.study_frame import StudyFrame, read_feed_basis, read_feeds, read_varied
from gibbsmin.errors import CaseError, InputError, nearest
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.flue_gas.flue_gas import flue_gas
from gibbsmin.results.exports import check_exports
from gibbsmin.results.folder import check_place, write_folder
from gibbsmin.results.judge import judge
from gibbsmin.results.key_figures import SETS, settled
from gibbsmin.results.result import FeedAmounts, Result
from gibbsmin.states.system import System, constraint_row
from gibbsmin.studies.expansion import expansion
from gibbsmin.studies.sweep import Progress, solve_in_chunks
from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]


@dataclass(frozen=True, kw_only=True)
class Study(StudyFrame):
    """A case of one mixture that was checked and can be run.

    Attributes
    ----------
    case : Case
        What the file says.
    system : System
        What may form.
    rules : Rules
        Conversions, constraints and approach temperatures.
    """

    case: Case
    system: System
    rules: Rules

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
        recipes, basis = read_feeds(case, find), read_feed_basis(case)
        axes, design = read_varied(case)
        rules = read_rules(case, find, own)
        system = choose_system(case.species, recipes, own, rules)
        study = cls(
            case=case, system=system, rules=rules,
            recipes=recipes, axes=axes, design=design, basis=basis, path=path, sha256=sha256,
        )  # fmt: skip
        tried = study.tried()
        try:
            tried.element_rows, tried.units  # noqa: B018 - made here so that what is wrong shows before anything runs
        except RuleError as error:
            raise RuleError(error.message, "feeds", *error.key) from None
        tried.conditions, tried.element_amounts  # noqa: B018 - likewise
        return study

    @cached_property
    def conditions(self) -> Conditions:
        """What is held in every state, and what the feeds bring."""
        return read_conditions(self.case, self.feed_states, self.basis)

    @cached_property
    def element_rows(self) -> Floats:
        """Element amounts in one unit of each feed, (F, E), [mol]."""
        return np.array([element_row(recipe, self.system) for recipe in self.recipes])

    @cached_property
    def element_amounts(self) -> Floats:
        """Amount of each element, and what each constraint holds, in every state, (states, E), [mol or mol/s]."""
        return self.elements_of(self.feed_states)

    def elements_of(self, feeds: FeedStates) -> Floats:
        """Amount of each element, and what each constraint holds, of feeds, (states, E), [mol or mol/s]."""
        amounts = feeds.units @ self.element_rows
        if feeds.returned is not None:
            at = [self.system.index[record.name] for record in feeds.returned.records]
            amounts = amounts + feeds.returned.amounts @ self.system.element_matrix[:, at].T
        for name, values in self.rules.held(self.recipes, feeds.units, self.columns, self.basis).items():
            amounts[:, self.system.elements.index(constraint_row(name))] = values
        return amounts

    @cached_property
    def feeds(self) -> dict[str, FeedAmounts]:
        """Each feed as its table has it, without the sweep, by name."""
        return self._feed_amounts(self._base_units)

    def _feed_amounts(self, base_units: Floats) -> dict[str, FeedAmounts]:
        """Put down the feeds by name, for so many units of each, (F,)."""
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
            for recipe, row, units in zip(self.recipes, self.element_rows, map(float, base_units), strict=True)
        }

    @property
    def _base_units(self) -> Floats:
        """Units of each feed as the tables have them, without the sweep, (F,)."""
        return np.asarray(feed_units(self.recipes, {recipe.name: recipe.size for recipe in self.recipes})[0])

    def held(self, name: str, unit: str) -> Floats:
        """Value of a key of ``[held]`` in every state, (states,), in ``unit``."""
        return number(self.case.held, name, self.feed_states, unit)

    def run(
        self, out: str | Path | None = None, progress: Progress | None = None, *, also: Sequence[str] = ()
    ) -> Result:
        """Solve all states.

        Parameters
        ----------
        out : str or Path, optional
            Result folder to write, as the command line does.
        progress : callable, optional
            Called with the states done and all states.
        also : sequence of str
            Formats to write the spreadsheets in besides CSV: ``excel``, ``parquet``.

        Returns
        -------
        Result

        Raises
        ------
        InputError
            The folder cannot be written, or holds something that is not a result; or there are more states than are
            kept in memory: see `run_into`.
        CaseError
            No air gives the flue gas its oxygen, or no returned flue gas is steady.
        """
        if self.is_large:
            raise InputError(f"{self.all_states:,} states are kept on disk, not in memory; use run_into(folder)")
        if out is not None:
            check_place(Path(out))
            check_exports(also, self.all_states)
        result = self.solved(progress)
        if out is not None:
            write_folder(result, judge(result), Path(out), also)
        return result

    @property
    def is_large(self) -> bool:
        """Whether there are more states than are kept in memory."""
        return self.all_states > LARGE

    def run_into(
        self,
        out: str | Path,
        progress: Progress | None = None,
        *,
        workers: int = 1,
        resume: bool = False,
        cluster: str = "",
        also: Sequence[str] = (),
    ) -> Archived:
        """Solve a study of any size part by part, its states kept on disk.

        Parameters
        ----------
        out : str or Path
            Result folder.
        progress : callable, optional
            Called with the states done and all states.
        workers : int
            Processes on this machine.
        resume : bool
            Whether to go on from the parts of a run that was interrupted.
        cluster : str
            Address of the scheduler of a Dask cluster to solve on; empty for this machine.
        also : sequence of str
            Formats to write the states in besides CSV and NetCDF: ``excel``, ``parquet``.

        Returns
        -------
        Archived

        Raises
        ------
        InputError
            The folder cannot be written, or holds something that is not a result; parts of another study are there;
            the cluster does not answer.
        """
        return run_large(self, Path(out), Ways(workers, resume, cluster, tuple(also)), progress)

    def solved(self, progress: Progress | None = None) -> Result:
        """Solve all states in memory; as `run`, without a folder."""
        try:
            return self._solve(progress)
        except RuleError as error:  # what only solving tells
            raise CaseError(error.message, self.path, dotted(error.key)) from None

    def _solve(self, progress: Progress | None) -> Result:
        """Solve all states."""
        feeds = closed_feeds(self)
        elements = self.elements_of(feeds)
        conditions = read_conditions(self.case, feeds, self.basis)
        held = conditions.held
        if conditions.efficiency is None:
            approach = self.rules.approach(self.columns, self.states)
            batch = solve_in_chunks(self.system, elements, held, progress, approach)
        else:
            inlet = conditions.account.feed_enthalpy
            assert inlet is not None, "the feeds were checked"
            batch = expansion(
                self.system, elements, held["entropy"], inlet, held["pressure"], conditions.efficiency, progress
            )
        result = Result(
            title=self.case.title,
            case=self.case.model_dump(by_alias=True, exclude_none=True),
            case_path=self.path,
            case_sha256=self.sha256,
            system=self.system,
            basis=self.basis,
            inputs=self.typed_inputs,
            input_units={axis.vary: axis.typed_unit for axis in self.axes},
            axes=self.typed_axes,
            batch=batch,
            display_units=shown_units(self.case, self.basis),
            feeds=self._feed_amounts(feeds.units[0]) if self.all_states == 1 else self.feeds,
            held=held,
            account=conditions.account,
        )
        return replace(result, key_figures=self._key_figures(result, feeds, elements))

    def _key_figures(self, result: Result, feeds: FeedStates, elements: Floats) -> dict[str, list[KeyFigure]]:
        """Work out the numbers of the trade that the case asks for, by set."""
        is_flow = self.basis == "mol/s"
        found: dict[str, list[KeyFigure]] = {}
        if self.case.flue_gas is not None:
            fresh = feed_facts(feeds, returned=False)
            here = settled(result.batch, fresh, result.heats, is_flow)
            gas = settled(frozen(self, result.batch, elements), fresh, result.heats, is_flow)
            told = setting(self.case.flue_gas, feeds.columns, "flue_gas.", recirculated(self.case, feeds))
            found["flue gas"] = flue_gas(here, told, gas)
        if self.case.key_figures:
            here = settled(result.batch, feed_facts(feeds, returned=True), result.heats, is_flow)
            found |= {name: SETS[name](here) for name in self.case.key_figures}
        known = [f"{group}.{one.name}" for group, figures in found.items() for one in figures]
        for place, name in enumerate(self.case.show.columns):
            if name not in known:
                asked = f"{nearest(name, known) or ';'} the case has {', '.join(found) or 'no sets of key figures'}"
                raise RuleError(f"there is no key figure {name!r}{asked}", "show", "columns", place)
        return found

    def describe(self) -> dict[str, Any]:
        """Say what the case asks for, without solving it; see `gibbsmin.case.described.describe`."""
        return describe(self)
