"""A train turned into numbers: its feeds as streams, its stages as steps, the states to solve."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field, replace
from functools import cached_property
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

from gibbsmin.case.feed_states import FeedStates
from gibbsmin.case.fields import RuleError, in_si
from gibbsmin.case.flue_gas import air_ratio, dry_oxygen, setting
from gibbsmin.case.recipe import Find, Recipe
from gibbsmin.case.rules import UNCONVERTED, Rules, read_rules
from gibbsmin.case.selection import choose_system, finder
from gibbsmin.case.shown import shown_units
from gibbsmin.case.source import dotted
from gibbsmin.case.species_schema import SpeciesTable
from gibbsmin.case.stage_schema import Stage, StageHeld
from gibbsmin.case.study_frame import StudyFrame, read_feed_basis, read_feeds, read_varied
from gibbsmin.case.train_described import describe_train
from gibbsmin.case.train_schema import TrainCase, nodes
from gibbsmin.errors import CaseError, InputError, nearest
from gibbsmin.practice.feeds.ratios import counted_carbon
from gibbsmin.results.exports import check_exports
from gibbsmin.results.folder import check_place, write_folder
from gibbsmin.results.judge_train import judge_train
from gibbsmin.results.train_result import TrainResult
from gibbsmin.states.system import System
from gibbsmin.studies.sweep import Progress
from gibbsmin.studies.train.change import CARBON, Change, Conditions, Settling, Unreacted
from gibbsmin.studies.train.graph import ordered
from gibbsmin.studies.train.stream import Stream, Substances
from gibbsmin.studies.train.takes import Take
from gibbsmin.studies.train.train import Step, solve_train
from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]

PASSES = 50
"""Rounds in which the species of all streams are found; each adds those of one more step of a loop."""


@dataclass(frozen=True)
class Possible:
    """What a stream may hold: ``species``, elements (``atoms``) beside them, names of species that stay ``inert``."""

    species: tuple[Species, ...] = ()
    atoms: tuple[str, ...] = ()
    inert: frozenset[str] = frozenset()


@dataclass(frozen=True, kw_only=True)
class TrainStudy(StudyFrame):
    """A train that was checked and can be run.

    Attributes
    ----------
    case : TrainCase
        What the file says.
    systems : dict of str to System
        What may form in each stage that settles.
    rules : dict of str to Rules
        Its rules.
    substances : Substances
        The species of all streams.
    ratios : dict of str to array (states,)
        Air ratios that were found for feeds that the oxygen of a flue gas sizes.
    """

    case: TrainCase
    systems: Mapping[str, System]
    rules: Mapping[str, Rules]
    substances: Substances
    ratios: Mapping[str, Floats] = field(default_factory=dict)

    @classmethod
    def of(cls, case: TrainCase, own: Sequence[Species] = (), path: str = "", sha256: str = "") -> TrainStudy:
        """Turn a case into a study.

        Parameters
        ----------
        case : TrainCase
        own : sequence of Species
            Species of the user's own files.
        path, sha256 : str
            The file and its checksum.

        Returns
        -------
        TrainStudy

        Raises
        ------
        RuleError
            A name is not known, an element has no place, or a feed cannot be sized; with the key.
        """
        find = finder(own)
        goes_to = {name: stage.name for stage in case.stage for name in stage.inlets}
        recipes = tuple(replace(one, group=goes_to[one.name]) for one in read_feeds(case, find))
        (axes, design), basis = read_varied(case), read_feed_basis(case)
        rules: dict[str, Rules] = {}
        for k, stage in enumerate(case.stage):
            try:
                rules[stage.name] = read_rules(stage, find, own, f"stages.{stage.name}.")
            except RuleError as error:
                raise RuleError(error.message, "stage", k, *error.key) from None
        systems, present = _systems(case, recipes, rules, own)
        study = cls(
            case=case, systems=systems, rules=rules, substances=Substances(present),
            recipes=recipes, axes=axes, design=design, basis=basis, path=path, sha256=sha256,
        )  # fmt: skip
        tried = study.tried()
        try:
            tried.units  # noqa: B018 - made here so that what is wrong shows before anything runs
        except RuleError as error:
            raise RuleError(error.message, "feeds", *error.key) from None
        tried.steps(find)
        tried._check_temperatures()
        return study

    @property
    def order(self) -> list[str]:
        """Names of the stages in the order in which they are solved."""
        return ordered(nodes(self.case), self.case.feeds)

    @cached_property
    def feed_states(self) -> FeedStates:
        """The feeds in every state."""
        return replace(super().feed_states, ratios=self.ratios)

    def sized(self) -> TrainStudy:
        """Find the air that gives a flue gas its oxygen; the study itself where there is none to find."""
        airs = [one for one in self.recipes if self.case.feeds[one.name].flue_gas_oxygen_percent is not None]
        if not airs:
            return self
        (air,), (stage,) = airs, [one.name for one in self.case.stage if one.flue_gas is not None]
        find = finder(self._own())

        def oxygen(ratio: Floats) -> Floats:
            tried = replace(self, ratios={air.name: ratio})
            batch = solve_train(tried.steps(find), tried.feed_streams()).steps[stage].changed.batch
            assert batch is not None, "a step with a flue gas settles"
            return dry_oxygen(batch)

        try:
            return replace(self, ratios={air.name: air_ratio(self, air, oxygen)})
        except InputError as error:
            raise RuleError(str(error), "feeds", air.name, "flue_gas_oxygen_percent") from None

    def steps(self, find: Find) -> list[Step]:
        """Make the steps of the train, in the order of the file."""
        made = []
        for k, (stage, node) in enumerate(zip(self.case.stage, nodes(self.case), strict=True)):
            try:
                takes = tuple(self._take(stage, side, find) for side in stage.take)
                made.append(Step(node, self._change(stage), takes))
            except RuleError as error:
                raise RuleError(error.message, "stage", k, *error.key) from None
        return made

    def feed_streams(self) -> dict[str, Stream]:
        """Put down the feeds as streams, by name; one without a pressure has that of the step it goes to."""
        found = {}
        for k, one in enumerate(self.recipes):
            P = self.feed_states.pressure(one)
            if P is None:
                stage = next(stage for stage in self.case.stage if one.name in stage.inlets)
                P = None if stage.held is None else self._number(stage, "held.pressure", stage.held.pressure, "Pa")
            found[one.name] = _feed_stream(self.feed_states, k, self.substances, 1e5 if P is None else P)
        return found

    def run(
        self, out: str | Path | None = None, progress: Progress | None = None, *, also: Sequence[str] = ()
    ) -> TrainResult:
        """Solve all states.

        Parameters
        ----------
        out : str or Path, optional
            Result folder to write, as the command line does.
        progress : callable, optional
            Called with the states done and all states, at the end.
        also : sequence of str
            Formats to write the spreadsheets in besides CSV: ``excel``, ``parquet``.

        Returns
        -------
        TrainResult

        Raises
        ------
        InputError
            The folder cannot be written, or holds something that is not a result.
        CaseError
            A step cannot do what it is to do.
        """
        if out is not None:
            check_place(Path(out))
            check_exports(also, self.states)
        try:
            study = self.sized()
            solved = solve_train(study.steps(finder(self._own())), study.feed_streams())
        except RuleError as error:
            raise CaseError(error.message, self.path, dotted(error.key)) from None
        except InputError as error:
            raise CaseError(str(error), self.path, "stage") from None
        if progress is not None:
            progress(self.states, self.states)
        result = TrainResult(
            title=self.case.title,
            case=self.case.model_dump(by_alias=True, exclude_none=True),
            case_path=self.path,
            case_sha256=self.sha256,
            basis=self.basis,
            inputs=self.typed_inputs,
            input_units={axis.vary: axis.typed_unit for axis in self.axes},
            axes=self.typed_axes,
            display_units=shown_units(self.case, self.basis),
            solved=solved,
            key_sets={stage.name: tuple(stage.key_figures) for stage in self.case.stage},
            flue_gas={
                stage.name: setting(stage.flue_gas, self.columns, f"stages.{stage.name}.flue_gas.")
                for stage in self.case.stage
                if stage.flue_gas is not None
            },
            surroundings_temperature=in_si(self.case.surroundings.temperature, "K"),
            heating_values={one.name: one.heating_value for one in self.recipes},
            units=study.units,
        )
        known = result.figures if self.case.show.columns else {}
        for name in self.case.show.columns:
            if name not in known:
                asked = f"{nearest(name, known) or ';'} names are STAGE.SET.NAME, as in table.csv"
                raise CaseError(f"there is no key figure {name!r}{asked}", self.path, "show.columns")
        if out is not None:
            write_folder(result, judge_train(result), Path(out), also)
        return result

    def describe(self) -> dict[str, Any]:
        """Say what the case asks for, without solving it; see `gibbsmin.case.train_described.describe_train`."""
        return describe_train(self)

    def _own(self) -> list[Species]:
        """List the records of the streams, so that names are found among them."""
        return list(self.substances.records)

    def _change(self, stage: Stage) -> Change | None:
        """Tell what a stage does to its inlet."""
        if stage.held is None:
            return None
        conditions = self._conditions(stage, stage.held)
        if stage.frozen:
            return Unreacted(conditions)
        rules, columns, states = self.rules[stage.name], self.columns, self.states
        if stage.held.thermal == "entropy" and stage.approach:
            raise RuleError("an approach temperature does not go with held entropy", "approach")
        shares = {}
        for name, share in rules.shares(columns, states).items():
            parts = rules.constraints[name]
            if name == UNCONVERTED:
                counted = {one.name: counted_carbon(one.elements) for one in self.substances.records}
                parts = {**{key: count for key, count in counted.items() if count}, CARBON: 1.0}
            shares[name] = (parts, share)
        sums = rules.sums(columns, states, self.basis)
        return Settling(self.systems[stage.name], conditions, shares, sums, rules.approach(columns, states))

    def _conditions(self, stage: Stage, held: StageHeld) -> Conditions:
        """Tell what a stage holds, in every state."""
        pressure = self._number(stage, "held.pressure", held.pressure, "Pa")
        drop = self._number(stage, "held.pressure_drop", held.pressure_drop, "Pa")
        if held.thermal == "temperature":
            value = self._number(stage, "held.temperature", held.temperature, "K")
        elif held.thermal == "entropy":
            efficiency = 1.0 if held.isentropic_efficiency is None else held.isentropic_efficiency
            value = self._number(stage, "held.isentropic_efficiency", efficiency, "1")
        else:
            heat = 0.0 if held.heat is None else held.heat
            value = self._number(stage, "held.heat", heat, "W" if self.basis == "mol/s" else "J")
        assert value is not None, "one of them is held"
        thermal = "heat" if held.thermal == "adiabatic" else held.thermal
        return Conditions(thermal, value, pressure, drop)

    def _take(self, stage: Stage, side: str, find: Find) -> Take:
        """Make a side stream of a stage."""
        table = stage.take[side]
        if table.of == "all":
            of = np.ones(len(self.substances), bool)
        elif table.of in ("gas", "condensed"):
            of = self.substances.gas == (table.of == "gas")
        else:
            of = np.zeros(len(self.substances), bool)
            for number, label in enumerate(table.of):
                try:
                    name = find(label).name
                except InputError as error:
                    raise RuleError(str(error), "take", side, "of", number) from None
                if name not in self.substances.index:
                    raise RuleError(f"no stream of the train holds {name}", "take", side, "of", number)
                of[self.substances.index[name]] = True
        percent = self._number(stage, f"take.{side}.percent", table.percent, "1")
        flow = self._number(stage, f"take.{side}.flow", table.flow, self.basis)
        ratio = self._number(stage, f"take.{side}.ratio", table.ratio, "1")
        return Take(side, of, None if percent is None else percent / 100.0, flow, ratio)

    def _number(self, stage: Stage, key: str, value: float | str | None, unit: str) -> Floats | None:
        """Value of a key of a stage in every state, in SI; None where it is not given."""
        if value is None:
            return None
        try:
            number = in_si(value, unit)
        except InputError as error:
            kind = "flows" if self.basis == "mol/s" else "amounts"
            text = f"{str(error).removeprefix('value: ')}, because the feeds are {kind}"
            raise RuleError(text, *key.split(".")) from None
        return np.asarray(self.columns.get(f"stages.{stage.name}.{key}", np.full(self.states, number)))

    def _check_temperatures(self) -> None:
        """Refuse steps that need the energy of their inlets, where that of a feed is not known."""
        feeds = self.feed_states
        for one in feeds.without_pressure:
            k, stage = next((k, stage) for k, stage in enumerate(self.case.stage) if one.name in stage.inlets)
            if stage.held is None or stage.held.pressure is None:
                raise RuleError(
                    f"the pressure of the feed is not known, and the step {stage.name} holds none; give one of them",
                    *("feeds", one.name),
                )
        reached = _reached(self.case, [one.name for one in feeds.without_enthalpy])
        for k, stage in enumerate(self.case.stage):
            if stage.name in reached and (stage.held is None or stage.frozen or stage.held.thermal != "temperature"):
                what = "mixes" if stage.held is None else "needs the energy of its inlets"
                raise RuleError(
                    f"the step {what}, and the feed {reached[stage.name]} has no temperature; give it one",
                    *("stage", k),
                )


def _reached(case: TrainCase, feeds: Sequence[str]) -> dict[str, str]:
    """Stages that feeds reach before anything settles at a held temperature, with the feed."""
    found: dict[str, str] = {}
    unknown = {name: name for name in feeds}
    by_name = {stage.name: stage for stage in case.stage}
    for name in ordered(nodes(case), case.feeds):
        stage = by_name[name]
        hit = next((unknown[stream] for stream in stage.inlets if stream in unknown), None)
        if hit is None:
            continue
        found[name] = hit
        if stage.held is None or stage.held.thermal != "temperature":
            unknown |= dict.fromkeys([name, *(f"{name}.{side}" for side in stage.take)], hit)
    return found


def _systems(
    case: TrainCase, recipes: Sequence[Recipe], rules: Mapping[str, Rules], own: Sequence[Species]
) -> tuple[dict[str, System], list[Species]]:
    """Choose what may form in every stage, from what its inlets may hold; and list all species of the train."""
    holds = {one.name: Possible(tuple(one.species), tuple(one.atoms), one.inert) for one in recipes}
    by_name = {stage.name: (k, stage) for k, stage in enumerate(case.stage)}
    order = ordered(nodes(case), case.feeds)
    systems: dict[str, System] = {}
    done: dict[str, Possible] = {}
    for _ in range(PASSES):
        before = dict(done)
        for name in order:
            k, stage = by_name[name]
            inlets = [holds[stream] for stream in (*stage.inlets, *stage.recycled) if stream in holds]
            species = tuple(dict.fromkeys(record for one in inlets for record in one.species))
            atoms = tuple(dict.fromkeys(symbol for one in inlets for symbol in one.atoms))
            out = Possible(species, atoms, frozenset().union(*(one.inert for one in inlets)))
            if out == done.get(name):
                continue
            done[name] = out
            if stage.held is not None and not stage.frozen:
                try:
                    systems[name] = _system(_merged(case.species, stage.species), out, own, rules[name])
                except RuleError as error:
                    raise RuleError(error.message, "stage", k, *error.key) from None
                out = Possible(tuple(systems[name].records), inert=out.inert)
            elif atoms:
                raise RuleError("a fuel by analysis can go only into a step that settles", "stage", k, "inlets")
            holds |= dict.fromkeys([name, *(f"{name}.{side}" for side in stage.take)], out)
        if done == before:
            break
    everything = dict.fromkeys(record for one in holds.values() for record in one.species)
    return systems, list(everything)


def _system(table: SpeciesTable, brought: Possible, own: Sequence[Species], rules: Rules) -> System:
    """Choose what may form in a stage; what it has no elements for passes through."""
    system = choose_system(table, [brought], own, rules)
    strange = [
        record.name
        for record in brought.species
        if record.name not in system.index and not record.elements.keys() <= set(system.elements)
    ]
    if not strange:
        return system
    known = {record.name: record for record in (*own, *brought.species)}
    inert = [*table.inert, *strange]
    return choose_system(table.model_copy(update={"inert": inert}), [brought], list(known.values()), rules)


def _merged(common: SpeciesTable, own: SpeciesTable) -> SpeciesTable:
    """Put the rules of a stage on top of those of the case: lists add up, what the stage says itself counts.

    A stage that lists what settles or may form, or says of which elements, has its own choice instead of that of the
    case.
    """
    said = {key: getattr(own, key) for key in own.model_fields_set}
    for key in ("exclude", "inert"):
        said[key] = list(dict.fromkeys([*getattr(common, key), *getattr(own, key)]))
    if own.settling is not None or own.allow is not None:
        said |= {"exclude": own.exclude, "settling": own.settling, "allow": own.allow}
        return SpeciesTable().model_copy(update=said)
    if "elements" in said:
        said |= {"settling": None, "allow": None}
    return common.model_copy(update={**said, "files": []})


def _feed_stream(feeds: FeedStates, k: int, substances: Substances, P: Floats | float) -> Stream:
    """Put down a feed as a stream of pressure ``P`` [Pa]."""
    one, units = feeds.recipes[k], feeds.units[:, k]
    amounts = np.zeros((feeds.states, len(substances)))
    for record, n in one.species.items():
        amounts[:, substances.index[record.name]] += n * units
    T = feeds.temperature(one)
    unknown = np.full(feeds.states, np.nan)
    temperature = unknown if T is None else np.broadcast_to(np.asarray(T, float), unknown.shape)
    pressure = np.broadcast_to(np.asarray(P, float), unknown.shape)
    atoms = {symbol: n * units for symbol, n in one.atoms.items()}
    if T is None:
        return Stream(substances, amounts, temperature, pressure, unknown, unknown, atoms)
    enthalpy, entropy = feeds.unit_enthalpy(one) * units, feeds.unit_entropy(one, pressure) * units
    return Stream(substances, amounts, temperature, pressure, enthalpy, entropy, atoms)
