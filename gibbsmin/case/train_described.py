"""What a train asks for, in plain words and numbers, before anything is solved."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from gibbsmin.case.shown import shown_units

if TYPE_CHECKING:
    from gibbsmin.case.train_study import TrainStudy


def describe_train(study: TrainStudy) -> dict[str, Any]:
    """Say what a train asks for.

    Parameters
    ----------
    study : TrainStudy

    Returns
    -------
    dict
        ``title``, ``file``, ``basis``; ``feeds`` (a dict each: ``name``, ``amounts``, ``atoms``, ``mass``,
        ``temperature``, ``pressure``), ``stages`` (a dict each, in the order in which they are solved: ``name``,
        ``inlets``, ``recycled``, ``held`` (as typed) or None, ``frozen``, ``sides``, ``species`` (number of gases and
        of condensed species that may form)), ``products``, ``sweep``, ``states``, ``units``. SI throughout, save for
        what is typed.
    """
    case = study.case
    by_name = {stage.name: stage for stage in case.stage}
    streams = study.feed_streams()
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
                "species": None if system is None else (int(system.gas.sum()), int((~system.gas).sum())),
            }
        )
    return {
        "title": case.title,
        "file": study.path,
        "basis": study.basis,
        "feeds": [
            {
                "name": name,
                "amounts": {
                    record.name: float(n)
                    for record, n in zip(stream.substances.records, stream.amounts[0], strict=True)
                    if n > 0.0
                },
                "atoms": {symbol: float(n[0]) for symbol, n in stream.atoms.items()},
                "mass": float(stream.mass[0]),
                "temperature": float(stream.temperature[0]),
                "pressure": float(stream.pressure[0]),
            }
            for name, stream in streams.items()
        ],
        "stages": stages,
        "products": [name for name in outlets if name not in taken],
        "sweep": [
            {
                "vary": axis.vary,
                "first": axis.typed_values[0],
                "last": axis.typed_values[-1],
                "unit": axis.typed_unit,
                "points": len(axis.values),
            }
            for axis in study.axes
        ],
        "states": study.states,
        "units": shown_units(case, study.basis),
    }
