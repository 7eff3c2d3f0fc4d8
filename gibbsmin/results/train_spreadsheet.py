"""A train as spreadsheets: a row a state, a row a step, and a stream table with a column a stream.

CSV by RFC 4180, comma, point as decimal sign, full precision; cells are empty where nothing is known or vouched for.
"""

from __future__ import annotations

import csv
from collections.abc import Iterable, Sequence
from io import StringIO
from typing import TYPE_CHECKING, Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.results.stream_sheet import StreamSheet
from gibbsmin.results.stream_table import listed, stream_table
from gibbsmin.studies.train.account import WHOLE

if TYPE_CHECKING:
    from gibbsmin.results.train_result import TrainResult

Floats = NDArray[np.float64]

ENDS: Final = ("all feeds", "all products", "products less feeds")
"""Columns of the stream table behind the streams; no stream can have a name with a blank in it."""


def train_spreadsheets(result: TrainResult) -> dict[str, str]:
    """Write the CSV texts.

    Parameters
    ----------
    result : TrainResult

    Returns
    -------
    dict of str to str
        ``table.csv``: a row a state, with what each step holds, takes and gives. ``steps.csv``: for each state a row a
        step and one for all, with what they take and give and how that closes. ``streams.csv``: for each state the
        stream table, SI and trade units side by side.
    """
    return {"table.csv": _states(result), "steps.csv": _steps(result), "streams.csv": _streams(result)}


def _states(result: TrainResult) -> str:
    """Write a row a state."""
    unit, per_K = ("W", "W/K") if result.basis == "mol/s" else ("J", "J/K")
    sheet, accounts, good = result.sheet, result.accounts, result.certified
    columns: list[tuple[str, Sequence[object]]] = []

    def add(head: str, kind: str, values: Floats) -> None:
        columns.append((f"{head} [{_unit(kind)}]", _cells(values)))

    for name, values in result.inputs.items():
        add(name, result.input_units.get(name, ""), values)
    for name, account in accounts.items():
        at = "train" if name == WHOLE else name
        if name != WHOLE:
            add(f"{at}.temperature", "K", sheet.streams[name].temperature)
            add(f"{at}.pressure", "Pa", sheet.streams[name].pressure)
        for key, kind in (("heat", unit), ("work", unit), ("entropy_generated", per_K), ("lost_work", unit)):
            add(f"{at}.{key}", kind, getattr(account, key))
    for name, one in result.conversions.items():
        add(f"train.{name}.conversion", "1", one.overall)
        if one.per_pass is not None:
            add(f"train.{name}.conversion_per_pass", "1", one.per_pass)
        for step, values in one.steps.items():
            add(f"{step}.{name}.conversion", "1", values)
    for symbol, parts in result.recoveries.items():
        for product, values in parts.items():
            add(f"{product}.{symbol}.recovery", "1", values)
    for name, stage in result.stages.items():
        for group, figures in stage.key_figures.items():
            for figure in figures:
                add(f"{name}.{group}.{figure.name}", figure.unit, np.where(good, figure.value, np.nan))
    for name in sheet.products:
        stream = sheet.streams[name]
        for k in listed([stream]):
            add(f"{name}.{sheet.names[k]}", result.basis, stream.amounts[:, k])
    if result.solved.steady is not None:
        add("train.recycle_residual", "1", result.solved.steady.residual)
    columns.append(("certified [-]", [int(flag) for flag in good]))
    columns.append(("reason", list(result.solved.reasons)))
    return _text([head for head, _ in columns], zip(*(cells for _, cells in columns), strict=True))


def _steps(result: TrainResult) -> str:
    """Write for each state a row a step, and one for the whole train."""
    flow = result.basis == "mol/s"
    unit, per_K, many, mass = ("W", "W/K", "kW", "kg/h") if flow else ("J", "J/K", "kJ", "kg")
    hour = 3600.0 if flow else 1.0
    sheet, accounts = result.sheet, result.accounts
    heads = [
        "state", *_input_heads(result), "step", "takes", "gives", "temperature [K]", "temperature [degC]",
        "pressure, absolute [Pa]", "pressure, absolute [bar]", f"mass in [{mass}]", f"mass out [{mass}]",
        f"enthalpy in [{unit}]", f"enthalpy out [{unit}]", f"heat [{unit}]", f"heat [{many}]", f"work [{unit}]",
        f"work [{many}]", f"entropy generated [{per_K}]", f"lost work [{unit}]", "lost work [% of all]",
        "energy left open [-]", "elements left open [-]",
    ]  # fmt: skip
    rows: list[list[object]] = []
    for i in range(len(result)):
        all_lost = accounts[WHOLE].lost_work[i]
        for name, account in accounts.items():
            inlets, outlets = (
                (sheet.feeds, sheet.products)
                if name == WHOLE
                else (list(result.solved.steps[name].inlets), list(result.solved.steps[name].outlets))
            )
            (m_in, h_in), (m_out, h_out) = _brought(sheet, inlets, i), _brought(sheet, outlets, i)
            T, P = np.nan, np.nan
            if name != WHOLE:
                T, P = sheet.streams[name].temperature[i], sheet.streams[name].pressure[i]
            heat, work, lost = account.heat[i], account.work[i], account.lost_work[i]
            numbers = [
                T, T - 273.15, P, P / 1e5, hour * m_in, hour * m_out, h_in, h_out, heat, heat / 1e3, work, work / 1e3,
                account.entropy_generated[i], lost, 100.0 * lost / all_lost if all_lost > 0.0 else np.nan,
                account.energy_open[i], account.element_open[i],
            ]  # fmt: skip
            rows.append(
                [i + 1, *_inputs(result, i), name, " + ".join(inlets), " + ".join(outlets), *_cells(np.array(numbers))]
            )
    return _text(heads, rows)


def _brought(sheet: StreamSheet, streams: Sequence[str], i: int) -> tuple[float, float]:
    """Mass and enthalpy of some streams together, [kg, J, or either per second]."""
    every = [sheet.streams[name] for name in streams]
    return sum(float(one.mass[i]) for one in every), sum(float(one.enthalpy[i]) for one in every)


def _streams(result: TrainResult) -> str:
    """Write the stream table of every state, one under the other."""
    table = stream_table(result.solved, result.sheet, result.basis)
    streams = result.sheet.streams
    heads = ["state", *_input_heads(result), "what", "unit", *streams, *ENDS]
    rows: list[list[object]] = []
    for i in range(len(result)):
        front = [i + 1, *_inputs(result, i)]
        rows.append([*front, "from", "", *(one.source for one in streams.values()), "", "", ""])
        rows.append([*front, "to", "", *(one.target for one in streams.values()), "", "", ""])
        for row in table:
            ends = [np.nan, np.nan, np.nan] if row.ends is None else [*row.ends[:, i], row.ends[1, i] - row.ends[0, i]]
            rows.append([*front, row.what, row.unit, *_cells(np.array([*row.values[:, i], *ends]))])
    return _text(heads, rows)


def _input_heads(result: TrainResult) -> list[str]:
    return [f"{name} [{_unit(result.input_units.get(name, ''))}]" for name in result.inputs]


def _inputs(result: TrainResult, i: int) -> list[object]:
    return _cells(np.array([values[i] for values in result.inputs.values()]))


def _unit(typed: str) -> str:
    """Write a unit for a head; a dash for a plain number."""
    return "-" if typed in ("", "1") else typed


def _cells(values: Floats) -> list[object]:
    """Shortest text of each number that reads back the same; empty where there is none."""
    return [repr(value) if np.isfinite(value) else "" for value in values.tolist()]


def _text(heads: Sequence[str], rows: Iterable[Sequence[object]]) -> str:
    """Write a table."""
    text = StringIO()
    writer = csv.writer(text, lineterminator="\r\n")
    writer.writerow(heads)
    writer.writerows(rows)
    return text.getvalue()
