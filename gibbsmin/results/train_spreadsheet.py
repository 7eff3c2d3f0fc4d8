"""A train as spreadsheets: the steps of each state in one row, and a stream table with a column a stream."""

from __future__ import annotations

import csv
from collections.abc import Sequence
from io import StringIO
from typing import TYPE_CHECKING, Final

import numpy as np

from gibbsmin.practice.heating import NORMAL_MOLAR_VOLUME
from gibbsmin.studies.train.stream import Stream

if TYPE_CHECKING:
    from gibbsmin.results.train_result import TrainResult

TRACE: Final = 1e-9
"""Species that never reach this share of a stream are left to result.json, [-]."""


def train_spreadsheets(result: TrainResult) -> dict[str, str]:
    """Write the CSV texts (RFC 4180, comma, point as decimal sign).

    Parameters
    ----------
    result : TrainResult

    Returns
    -------
    dict of str to str
        ``table.csv``: a row a state, with what each step holds, takes and gives. ``streams.csv``: for each state the
        stream table as the trade reads it, a column a stream, SI and trade units side by side.
    """
    return {"table.csv": _steps(result), "streams.csv": _streams(result)}


def _steps(result: TrainResult) -> str:
    """Write a row a state."""
    unit, per_K = ("W", "W/K") if result.basis == "mol/s" else ("J", "J/K")
    heads = [f"{name} [{_unit(result.input_units.get(name, ''))}]" for name in result.inputs]
    columns: list[Sequence[float]] = [values.tolist() for values in result.inputs.values()]
    for name, step in result.solved.steps.items():
        out = step.changed.outlet
        account = result.accounts[name]
        for label, kind, values in (
            ("temperature", "K", out.temperature), ("pressure", "Pa", out.pressure), ("heat", unit, account.heat),
            ("work", unit, account.work), ("entropy_generated", per_K, account.entropy_generated),
            ("lost_work", unit, account.lost_work),
        ):  # fmt: skip
            heads.append(f"{name}.{label} [{kind}]")
            columns.append(values.tolist())
    for name, stage in result.stages.items():
        for group, figures in stage.key_figures.items():
            for one in figures:
                heads.append(f"{name}.{group}.{one.name} [{_unit(one.unit)}]")
                columns.append(one.value.tolist())
    for name in result.solved.products:
        stream = result.streams[name]
        for k in _listed([stream]):
            heads.append(f"{name}.{stream.substances.records[k].name} [{result.basis}]")
            columns.append(stream.amounts[:, k].tolist())
    rows = [[_cell(column[i]) for column in columns] for i in range(len(result))]
    ends = [[int(good), reason] for good, reason in zip(result.certified, result.solved.reasons, strict=True)]
    return _text([*heads, "certified [-]", "reason"], [row + end for row, end in zip(rows, ends, strict=True)])


def _streams(result: TrainResult) -> str:
    """Write the stream table of every state, one under the other."""
    streams = result.streams
    records = next(iter(streams.values())).substances.records
    listed = _listed(list(streams.values()))
    flow = result.basis == "mol/s"
    unit, per_K = ("W", "W/K") if flow else ("J", "J/K")
    per_hour, mole, mass = (3.6, "kmol/h", "kg/h") if flow else (1.0, "mol", "kg")
    gas, hour = ("Nm3/h", 3600.0) if flow else ("Nm3", 1.0)
    rows: list[list[object]] = []
    for i in range(len(result)):
        inputs = [_cell(float(values[i])) for values in result.inputs.values()]

        def add(what: str, kind: str, values: Sequence[float], inputs: list[object] = inputs, state: int = i) -> None:
            rows.append([state + 1, *inputs, what, kind, *map(_cell, values)])

        every = list(streams.values())
        add("temperature", "K", [one.temperature[i] for one in every])
        add("temperature", "degC", [one.temperature[i] - 273.15 for one in every])
        add("pressure, absolute", "Pa", [one.pressure[i] for one in every])
        add("pressure, absolute", "bar", [one.pressure[i] / 1e5 for one in every])
        add("amount", result.basis, [one.total[i] for one in every])
        add("amount", mole, [one.total[i] * per_hour for one in every])
        add("mass", mass, [one.mass[i] * hour for one in every])
        add("gas, 0 degC and 101325 Pa", gas, [one.gas[i] * NORMAL_MOLAR_VOLUME * hour for one in every])
        add("enthalpy", unit, [one.enthalpy[i] for one in every])
        add("entropy", per_K, [one.entropy[i] for one in every])
        for k in listed:
            add(records[k].name, result.basis, [one.amounts[i, k] for one in every])
        for k in listed:
            add(f"{records[k].name}, of all", "mole %, wet", [_share(one.amounts[i, k], one.total[i]) for one in every])
        water = [k for k in listed if records[k].substance in ("H2O", "H2O(l)")]
        for k in [k for k in listed if k not in water]:
            dry = [_share(one.amounts[i, k], one.total[i] - one.amounts[i, water].sum()) for one in every]
            add(f"{records[k].name}, of all but water", "mole %, dry", dry)
    return _text(["state", *result.inputs, "what", "unit", *streams], rows)


def _listed(streams: Sequence[Stream]) -> list[int]:
    """Places of the species that reach a share worth a line in one of the streams."""
    found = np.zeros(len(streams[0].substances), bool)
    for one in streams:
        total = np.nan_to_num(one.total)[:, None]
        share = np.divide(np.nan_to_num(one.amounts), total, out=np.zeros_like(one.amounts), where=total > 0.0)
        found |= share.max(axis=0, initial=0.0) >= TRACE
    return [int(k) for k in np.flatnonzero(found)]


def _share(part: float, whole: float) -> float:
    return 100.0 * part / whole if whole > 0.0 else float("nan")


def _unit(typed: str) -> str:
    """Write a unit for a head; a dash for a plain number."""
    return "-" if typed in ("", "1") else typed


def _cell(value: float) -> object:
    """Shortest text of a number that reads back the same; empty where there is none."""
    return repr(float(value)) if np.isfinite(value) else ""


def _text(heads: Sequence[str], rows: Sequence[Sequence[object]]) -> str:
    """Write a table."""
    text = StringIO()
    writer = csv.writer(text, lineterminator="\r\n")
    writer.writerow(heads)
    writer.writerows(rows)
    return text.getvalue()
