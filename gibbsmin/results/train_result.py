"""What a train came to: its streams, the settled state of each stage, the accounts."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.settled import FeedFacts, Settled
from gibbsmin.practice.flue_gas.flue_gas import FlueGasSetting, flue_gas
from gibbsmin.results.account import Account
from gibbsmin.results.key_figures import SETS, settled
from gibbsmin.results.plain import plain
from gibbsmin.results.result import FeedAmounts, Result
from gibbsmin.results.stage_flue_gas import before, leaving
from gibbsmin.results.stream_sheet import Entry, StreamSheet, stream_sheet
from gibbsmin.results.train_conversion import Conversion, conversions
from gibbsmin.results.train_recovery import recoveries
from gibbsmin.results.train_spreadsheet import train_spreadsheets
from gibbsmin.solver.status import UNSETTLED
from gibbsmin.states.batch import Batch
from gibbsmin.studies.labelled import Axis, coordinates, dimensions
from gibbsmin.studies.train.account import WHOLE, StepAccount, accounts
from gibbsmin.studies.train.stream import Stream
from gibbsmin.studies.train.train import Solved, StepResult

if TYPE_CHECKING:
    import xarray

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class TrainResult:
    """The states of a train.

    Attributes
    ----------
    title : str
        Title of the case.
    case : dict
        The case as read, with defaults.
    case_path, case_sha256 : str
        The file and its checksum; empty where there is none.
    basis : str
        ``"mol"``, or ``"mol/s"`` where the feeds are flows; energies are then W.
    inputs : dict of str to array (states,)
        Varied inputs, in the units that were typed.
    input_units : dict of str to str
        Those units; ``"1"`` for a ratio.
    axes : tuple of Axis
        The varied inputs, each with its own values only.
    display_units : dict of str to str
        Units that were typed, for ``temperature``, ``pressure`` and ``amount``.
    solved : Solved
        Streams and steps.
    key_sets : dict of str to tuple of str
        Sets of key figures that are asked of each stage.
    flue_gas : dict of str to FlueGasSetting
        How the flue gas of a stage is reported, by the name of the stage.
    surroundings_temperature : float
        [K].
    heating_values : dict of str to (float, float) or None
        Higher and lower, of a unit of each feed, [J].
    units : array (states, F)
        Units of each feed.
    """

    title: str
    case: dict[str, Any]
    case_path: str
    case_sha256: str
    basis: str
    inputs: dict[str, Floats]
    input_units: dict[str, str]
    axes: tuple[Axis, ...]
    display_units: dict[str, str]
    solved: Solved
    key_sets: Mapping[str, Sequence[str]]
    flue_gas: Mapping[str, FlueGasSetting]
    surroundings_temperature: float
    heating_values: Mapping[str, tuple[float, float] | None]
    units: Floats

    def __len__(self) -> int:
        return len(self.solved.reasons)

    @property
    def streams(self) -> dict[str, Stream]:
        """All streams by name: feeds, then what each step gives."""
        return self.solved.streams

    @property
    def certified(self) -> NDArray[np.bool_]:
        """Whether every stage of a state is certified, its recycles are steady and its elements close, (states,)."""
        return np.array([not reason for reason in self.solved.reasons])

    @cached_property
    def sheet(self) -> StreamSheet:
        """The streams as people read them, as far as they are vouched for."""
        return stream_sheet(self.solved)

    @property
    def recycled(self) -> list[str]:
        """Names of the streams that come back from a later step."""
        return [name for stage in self.case.get("stage", []) for name in stage.get("recycled", [])]

    @cached_property
    def conversions(self) -> dict[str, Conversion]:
        """How much of what is fed reacts, by substance."""
        return conversions(self.solved, self.recycled)

    @cached_property
    def recoveries(self) -> dict[str, dict[str, Floats]]:
        """Part of each element that is fed, by the product that carries it away."""
        return recoveries(self.solved)

    @cached_property
    def accounts(self) -> dict[str, StepAccount]:
        """Balances of each step and of the whole train; nan where not all of it is known."""
        found = accounts(self.solved, self.surroundings_temperature)
        good = {name: np.isfinite(self.sheet.streams[name].mass) for name in self.solved.steps}
        good[WHOLE] = self.certified
        return {
            name: StepAccount(**{key: np.where(good[name], values, np.nan) for key, values in vars(one).items()})
            for name, one in found.items()
        }

    @cached_property
    def proof(self) -> dict[str, Floats]:
        """The worst of the proofs of all stages that settle, (states,), [-, RT, RT]; zero where none does."""
        batches = [stage.batch for stage in self.stages.values()]
        zero = np.zeros(len(self))
        return {
            key: np.max([zero, *(np.abs(getattr(batch, key)) for batch in batches)], axis=0)
            for key in ("element_residual", "gap", "worst_affinity")
        }

    @cached_property
    def stages(self) -> dict[str, Result]:
        """The stages that settle, each as a result of its own, by name."""
        return {
            name: self._stage(name, step) for name, step in self.solved.steps.items() if step.changed.batch is not None
        }

    @property
    def figures(self) -> dict[str, KeyFigure]:
        """Key figures of all stages, by STAGE.SET.NAME."""
        return {
            f"{name}.{group}.{one.name}": one
            for name, stage in self.stages.items()
            for group, ones in stage.key_figures.items()
            for one in ones
        }

    def _stage(self, name: str, step: StepResult) -> Result:
        """Make a result of a stage that settles, whose feeds are its inlets."""
        batch, inlet = self._vouched(step.changed.batch), step.inlet
        entropy = np.sum([one.entropy for one in step.inlets.values()], axis=0)
        facts = {stream: self._facts(stream, one) for stream, one in step.inlets.items()}
        is_flow = self.basis == "mol/s"
        here = settled(batch, facts, step.changed.heat, is_flow)
        shaft = bool(np.any(step.changed.work))
        return Result(
            title=f"{self.title}: {name}",
            case={},
            case_path=self.case_path,
            case_sha256=self.case_sha256,
            system=batch.system,
            basis=self.basis,
            inputs=self.inputs,
            input_units=self.input_units,
            axes=self.axes,
            batch=batch,
            display_units=self.display_units,
            feeds={stream: _amounts(stream, one) for stream, one in step.inlets.items()},
            held={"temperature": batch.temperature, "pressure": batch.pressure},
            account=Account(
                feed_enthalpy=inlet.enthalpy,
                feed_entropy=entropy,
                shaft=shaft,
                surroundings_temperature=self.surroundings_temperature,
            ),
            key_figures={
                group: [replace(one, value=np.where(batch.certified, one.value, np.nan)) for one in figures]
                for group, figures in self._key_figures(name, here).items()
            },
        )

    def _key_figures(self, name: str, here: Settled) -> dict[str, list[KeyFigure]]:
        """Work out the numbers of the trade that are asked of a stage, by set."""
        found: dict[str, list[KeyFigure]] = {}
        if name in self.flue_gas:
            feeds, back = before(self.solved, self.recycled, name)
            facts = {feed: self._facts(feed, self.solved.feeds[feed]) for feed in feeds}
            gas = leaving(self.solved, back, here, facts)
            found["flue gas"] = flue_gas(gas, self.flue_gas[name], gas)
        return found | {group: SETS[group](here) for group in self.key_sets.get(name, ())}

    def _vouched(self, batch: Batch | None) -> Batch:
        """Return settled states, without those in which recycles are not steady: their inlets are none of the train."""
        assert batch is not None, "it settles"
        if self.solved.steady is None:
            return batch
        status = np.where(self.certified | ~batch.certified, batch.outcome.status, UNSETTLED)
        return replace(batch, outcome=batch.outcome._replace(status=status))

    def _facts(self, name: str, stream: Stream) -> FeedFacts:
        """Put down what the trade's numbers need of an inlet."""
        substances = stream.substances
        amounts: dict[str, Floats] = {}
        for k, record in enumerate(substances.records):
            amounts[record.substance] = amounts.get(record.substance, 0.0) + stream.amounts[:, k]
        symbols = dict.fromkeys((*substances.elements, *stream.atoms))
        heat = self.heating_values.get(name)
        feeds = list(self.solved.feeds)
        size = self.units[:, feeds.index(name)] if name in feeds else None
        higher, lower = (None, None) if heat is None or size is None else (heat[0] * size, heat[1] * size)
        return FeedFacts(
            {key: n for key, n in amounts.items() if n.any()},
            {symbol: stream.element(symbol) for symbol in symbols},
            stream.mass,
            higher,
            lower,
            bool(stream.atoms),
            stream.temperature,
        )

    def to_dict(self) -> dict[str, Any]:
        """Return the result as result.json has it.

        Returns
        -------
        dict
            Safe for JSON. Each state has ``streams``, ``stages`` (as the states of a case of one mixture) and
            ``steps`` (heat, work, what is lost), and ``train`` (the whole, with the conversions, where the elements
            leave, and the residual of the recycles). A stream holds each substance with its frozen part.
            ``certificate`` is the worst of those of the stages.
        """
        stages = {name: result.to_dict()["states"] for name, result in self.stages.items()}
        legend = {name: result.legend() for name, result in self.stages.items() if result.key_figures}
        return {
            "schema": 1,
            "title": self.title,
            "basis": self.basis,
            "case": self.case,
            "input_units": self.input_units,
            "order": list(self.solved.steps),
            "products": list(self.solved.products),
            **({"key_figures": legend} if legend else {}),
            "states": [self._state(i, stages) for i in range(len(self))],
        }

    def _state(self, i: int, stages: Mapping[str, Sequence[Mapping[str, Any]]]) -> dict[str, Any]:
        loop, sheet = self.solved.steady, self.sheet
        return {
            "inputs": {name: float(values[i]) for name, values in self.inputs.items()},
            "streams": {name: _stream(sheet, one, i) for name, one in sheet.streams.items()},
            "stages": {name: states[i] for name, states in stages.items()},
            "steps": {name: _account(one, i) for name, one in self.accounts.items() if name != WHOLE},
            "train": {
                **_account(self.accounts[WHOLE], i),
                "recycle_residual": 0.0 if loop is None else plain(loop.residual[i]),
                "recycle_rounds": 0 if loop is None else loop.rounds,
                "conversion": {name: _conversion(one, i) for name, one in self.conversions.items()},
                "recovery": {
                    symbol: {name: plain(values[i]) for name, values in parts.items()}
                    for symbol, parts in self.recoveries.items()
                },
            },
            "certificate": {
                **{key: plain(values[i]) for key, values in self.proof.items()},
                "ok": bool(self.certified[i]),
                "reason": self.solved.reasons[i],
            },
        }

    def tables(self) -> dict[str, str]:
        """Write the spreadsheets, by the name of their file."""
        return train_spreadsheets(self)

    def dataset(self) -> xarray.Dataset:
        """Return the streams with named axes and units.

        Returns
        -------
        xarray.Dataset
            Dimensions are the varied inputs of a grid, else ``point``; ``stream`` and ``species``; and ``step`` for
            heat, work and lost work.
        """
        import xarray

        sizes = dimensions(self.axes)
        names, shape = tuple(sizes), tuple(sizes.values())
        unit, per_K = ("W", "W/K") if self.basis == "mol/s" else ("J", "J/K")
        sheet, steps = self.sheet, self.accounts

        def spread(values: Any) -> Any:
            array = np.asarray(values)  # (things, states, ...)
            return np.moveaxis(array, 0, 1).reshape((*shape, array.shape[0], *array.shape[2:]))

        every = list(sheet.streams.values())
        variables: dict[str, Any] = {
            "amount": (
                (*names, "stream", "species"), spread([one.amounts for one in every]),
                {"units": self.basis, "long_name": "amount of each species in each stream"},
            ),
        }  # fmt: skip
        for key, kind, text in (
            ("temperature", "K", "temperature"), ("pressure", "Pa", "absolute pressure"),
            ("enthalpy", unit, "enthalpy; the elements at 298.15 K are zero"), ("entropy", per_K, "entropy"),
        ):  # fmt: skip
            values = spread([getattr(one, key) for one in every])
            variables[key] = ((*names, "stream"), values, {"units": kind, "long_name": text})
        for key, kind, text in (
            ("heat", unit, "heat to be supplied"), ("work", unit, "shaft work to be supplied"),
            ("entropy_generated", per_K, "entropy generated"), ("lost_work", unit, "lost work"),
        ):  # fmt: skip
            values = spread([getattr(one, key) for one in steps.values()])
            variables[f"step_{key}"] = ((*names, "step"), values, {"units": kind, "long_name": text})
        variables["certified"] = (names, self.certified.reshape(shape), {"long_name": "whether the certificate holds"})
        reasons = np.array(self.solved.reasons, dtype=str).reshape(shape)
        variables["reason"] = (names, reasons, {"long_name": "why it does not"})
        places = {"stream": list(sheet.streams), "step": list(steps), "species": list(sheet.names)}
        return xarray.Dataset(
            variables,
            coordinates(self.axes) | places,
            {"basis": self.basis, "title": self.title, "case_sha256": self.case_sha256},
        )


def _stream(sheet: StreamSheet, stream: Entry, i: int) -> dict[str, Any]:
    """One stream in one state, for JSON."""

    def by_name(values: Floats) -> dict[str, float | None]:
        return {name: plain(x) for name, x in zip(sheet.names, values[i], strict=True) if x > 0.0}

    return {
        "from": stream.source or None,
        "to": stream.target or None,
        "temperature": plain(stream.temperature[i]),
        "pressure": plain(stream.pressure[i]),
        "enthalpy": plain(stream.enthalpy[i]),
        "entropy": plain(stream.entropy[i]),
        "mass": plain(stream.mass[i]),
        "amount": plain(stream.total[i]),
        "gas": plain(stream.gas_total[i]),
        "amounts": by_name(stream.amounts),
        "mole_fractions_wet": by_name(stream.wet),
        "mole_fractions_dry": by_name(stream.dry),
        **({"atoms": {symbol: plain(n[i]) for symbol, n in stream.atoms.items()}} if stream.atoms else {}),
    }


def _conversion(conversion: Conversion, i: int) -> dict[str, Any]:
    """Conversion of a substance in one state, for JSON."""
    found: dict[str, Any] = {"overall": plain(conversion.overall[i])}
    if conversion.per_pass is not None:
        found["per_pass"] = plain(conversion.per_pass[i])
    return {**found, "steps": {name: plain(values[i]) for name, values in conversion.steps.items()}}


def _account(account: StepAccount, i: int) -> dict[str, float | None]:
    """One account in one state, for JSON."""
    return {name: plain(values[i]) for name, values in vars(account).items()}


def _amounts(name: str, stream: Stream) -> FeedAmounts:
    """Put down an inlet in its first state."""
    symbols = dict.fromkeys((*stream.substances.elements, *stream.atoms))
    amounts: dict[str, float] = {}
    for record, n in zip(stream.substances.records, stream.amounts[0], strict=True):
        if n > 0.0:
            amounts[record.substance] = amounts.get(record.substance, 0.0) + float(n)
    return FeedAmounts(
        name,
        amounts,
        {symbol: float(n[0]) for symbol, n in stream.atoms.items()},
        {symbol: float(stream.element(symbol)[0]) for symbol in symbols},
        float(stream.mass[0]),
        float(stream.temperature[0]),
        float(stream.pressure[0]),
    )
