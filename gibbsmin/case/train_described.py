"""What a train asks for, in plain words and numbers, before anything is solved."""

from __future__ import annotations

from math import isfinite
from typing import TYPE_CHECKING, Any

from gibbsmin.case.described import describe_recipes, describe_sweep
from gibbsmin.case.shown import shown_units
from gibbsmin.states.system import System
from gibbsmin.studies.train.stream import Stream

if TYPE_CHECKING:
    from gibbsmin.case.stage_schema import Stage
    from gibbsmin.case.train_schema import TrainCase
    from gibbsmin.case.train_study import TrainStudy


def describe_train(study: TrainStudy) -> dict[str, Any]:
    """Say what a train asks for.

    Parameters
    ----------
    study : TrainStudy

    Returns
    -------
    dict
        ``title``, ``file``, ``basis``, ``elements`` (name to amount), ``feeds`` (a dict each: ``name``, ``amounts``,
        ``atoms``, ``mass``, ``temperature``, ``pressure``), ``heating_values``, ``fuels``, ``ratios``, ``moisture``
        (as `gibbsmin.case.described.describe` has them), ``stages`` (a dict each, in the order in which they are
        solved: ``name``, ``inlets``, ``recycled``, ``held`` (as typed) or None, ``frozen``, ``sides``, ``approach``
        and ``constraint`` (as typed), ``settling`` (the list that says what takes part) or None, ``species`` (names:
        ``gas`` and ``condensed`` that may form, and what ``passes``) or None where nothing settles), ``products``,
        ``sweep``, ``design``, ``states``, ``units``.
        SI throughout, save for what is typed.
    """
    case = study.case
    by_name = {stage.name: stage for stage in case.stage}
    streams = study.beginning().feed_streams()
    feeds = list(streams.values())
    symbols = dict.fromkeys(symbol for stream in feeds for symbol in (*stream.substances.elements, *stream.atoms))
    taken = {name for stage in case.stage for name in (*stage.inlets, *stage.recycled)}
    outlets = [name for stage in case.stage for name in (stage.name, *(f"{stage.name}.{side}" for side in stage.take))]
    stages = []
    for name in study.order:
        stage = by_name[name]
        system = study.systems.get(name)
        stages.append(
            {
                "name": name,
                "inlets": list(stage.inlets),
                "recycled": list(stage.recycled),
                "held": None if stage.held is None else stage.held.model_dump(exclude_none=True),
                "frozen": stage.frozen,
                "sides": {side: take.model_dump(exclude_none=True) for side, take in stage.take.items()},
                "approach": {key: one.model_dump() for key, one in stage.approach.items()},
                "constraint": {key: one.model_dump(exclude_none=True) for key, one in stage.constraint.items()},
                "settling": None if system is None else _settling(case, stage),
                "species": None if system is None else _species(system),
            }
        )
    return {
        "title": case.title,
        "file": study.path,
        "basis": study.basis,
        "elements": {symbol: n for symbol in symbols if (n := sum(float(s.element(symbol)[0]) for s in feeds)) > 0.0},
        **describe_recipes(study.recipes),
        "feeds": [
            {
                "name": name,
                "amounts": _amounts(stream),
                "atoms": {symbol: float(n[0]) for symbol, n in stream.atoms.items()},
                "mass": float(stream.mass[0]),
                "temperature": _known(stream.temperature[0]),
                "pressure": float(stream.pressure[0]),
            }
            for name, stream in streams.items()
        ],
        "stages": stages,
        "products": [name for name in outlets if name not in taken],
        **describe_sweep(study),
        "units": shown_units(case, study.basis),
    }


def _settling(case: TrainCase, stage: Stage) -> list[str] | None:
    """Return the list of what takes part in a stage: its own, else that of the case."""
    if stage.species.model_fields_set & {"settling", "allow", "elements"}:
        return stage.species.settling
    return case.species.settling


def _species(system: System) -> dict[str, list[str]]:
    """Name what may form in a stage, and what passes."""
    found: dict[str, list[str]] = {"gas": [], "condensed": [], "passes": []}
    for record in system.records:
        kind = "passes" if record.name != record.substance else "condensed" if record.condensed else "gas"
        found[kind].append(record.substance)
    return found


def _amounts(stream: Stream) -> dict[str, float]:
    """Amount of each substance of a feed in the first state."""
    found: dict[str, float] = {}
    for record, n in zip(stream.substances.records, stream.amounts[0], strict=True):
        if n > 0.0:
            found[record.substance] = found.get(record.substance, 0.0) + float(n)
    return found


def _known(value: float) -> float | None:
    """Return a number; None where it is not known."""
    return float(value) if isfinite(value) else None
