"""The stream table of a train for the terminal: a column a stream, in blocks of as many as 80 columns hold."""

from __future__ import annotations

from collections.abc import Sequence
from math import isfinite
from typing import Final

import numpy as np

from gibbsmin.practice.feeds.heating import NORMAL_MOLAR_VOLUME
from gibbsmin.report.numbers import MISSING, figures, level, share
from gibbsmin.report.table import THRESHOLD
from gibbsmin.report.train_heads import blocks, head_rows, row
from gibbsmin.report.words import labelled
from gibbsmin.results.stream_sheet import Entry, StreamSheet
from gibbsmin.results.train_result import TrainResult
from gibbsmin.units import from_si

SPECIES: Final = 14
"""Gas species that a block lists at most; the rest is summed in one row."""

_PERCENT: Final = 4  # blanks behind a number in percent, so that it stands over one in ppm


def stream_tables(result: TrainResult, index: int) -> list[str]:
    """Lines of the stream table of one state.

    Parameters
    ----------
    result : TrainResult
    index : int
        Which state.

    Returns
    -------
    list of str
        None longer than 80 columns.
    """
    sheet = result.sheet
    lines: list[str] = []
    for names in blocks(list(sheet.streams)):
        lines += ["", *_block(result, names, index)]
    return [*lines, *_foot(result, index)]


def _block(result: TrainResult, names: Sequence[str], i: int) -> list[str]:
    """Lines of some streams side by side."""
    sheet, units, flow = result.sheet, result.display_units, result.basis == "mol/s"
    every = [sheet.streams[name] for name in names]
    T, P, amount = units.get("temperature", "K"), units.get("pressure", "Pa"), units.get("amount", result.basis)
    mass, gas, hour = ("kg/h", "Nm3/h", 3600.0) if flow else ("kg", "Nm3", 1.0)
    lines = head_rows("streams", names)
    lines.append(row("", [_mark(name, one, result.recycled) for name, one in zip(names, every, strict=True)]))
    lines.append(row(f"temperature, {T}", [_number(from_si(one.temperature[i], T), "1") for one in every]))
    lines.append(row(f"pressure, {P} abs", [_number(from_si(one.pressure[i], P)) for one in every]))
    lines.append(row(f"amount, {amount}", [_number(from_si(one.total[i], amount)) for one in every]))
    lines.append(row(f"mass, {mass}", [_number(hour * one.mass[i]) for one in every]))
    volumes = [hour * NORMAL_MOLAR_VOLUME * one.gas_total[i] for one in every]
    lines.append(row(f"gas, {gas}", [_number(volume) for volume in volumes]))
    lines += _gas(sheet, every, i, result.case.get("show", {}))
    return lines + _condensed(sheet, every, i, mass, hour)


def _mark(name: str, stream: Entry, recycled: Sequence[str]) -> str:
    """Say where a stream stands in the train."""
    if not stream.source:
        return "feed"
    if not stream.target:
        return "leaves"
    return "recycled" if name in recycled else ""


def _gas(sheet: StreamSheet, every: Sequence[Entry], i: int, show: dict[str, object]) -> list[str]:
    """Rows of the gas: mole percent wet, and dry where one of the streams holds water vapour."""
    threshold = float(str(show.get("threshold") or THRESHOLD))
    wet = np.array([one.wet[i] for one in every])  # (streams, S)
    largest = np.nan_to_num(wet).max(axis=0, initial=0.0)
    if not largest.any():
        return []
    order = [int(k) for k in np.argsort(-largest, kind="stable") if largest[k] >= threshold]
    anywhere = np.nan_to_num([one.wet[i] for one in sheet.streams.values()]).sum(axis=0)
    by_name = show.get("sort") == "name"
    kept = sorted(order[:SPECIES], key=lambda k: sheet.names[k] if by_name else -anywhere[k])
    water = [k for k in kept if sheet.names[k] == "H2O"]
    lines = [row(f"mole %{' wet' if water else ''}", [])]
    lines += _shares(sheet, wet, kept, threshold)
    if water:
        dry = np.array([one.dry[i] for one in every])
        lines += [row("mole % dry", []), *_shares(sheet, dry, [k for k in kept if k not in water], threshold)]
    return lines


def _shares(sheet: StreamSheet, x: np.ndarray, kept: Sequence[int], threshold: float) -> list[str]:
    """Rows of mole fractions (streams, S), with what is not listed and the sum."""
    lines = [row(f"  {sheet.names[k]}", [_share(value, threshold) for value in x[:, k]]) for k in kept]
    there = np.isfinite(x).any(axis=1)
    rest = np.where(there, 1.0 - np.nan_to_num(x[:, list(kept)]).sum(axis=1), np.nan)
    if np.nanmax(rest) > 5e-5:
        lines.append(row("  all others", [_share(value, threshold) for value in rest]))
    total = np.where(there, np.nan_to_num(x).sum(axis=1), np.nan)
    return [*lines, row("  total", [_share(value, threshold) for value in total])]


def _condensed(sheet: StreamSheet, every: Sequence[Entry], i: int, mass: str, hour: float) -> list[str]:
    """Rows of solids and liquids, by mass."""
    amounts = np.array([one.amounts[i] for one in every])  # (streams, S)
    here = np.flatnonzero(~sheet.gas & (np.nan_to_num(amounts) > 0.0).any(axis=0))
    if not here.size:
        return []
    lines = [row(f"condensed, {mass}", [])]
    for k in here:
        cells = [_number(hour * sheet.molar_masses[k] * n, zero="") for n in amounts[:, k]]
        lines.append(row(f"  {sheet.names[k]}", cells))
    return lines


def _foot(result: TrainResult, i: int) -> list[str]:
    """Say what comes in and goes out in all, and what the table does not show."""
    sheet, (mass, hour) = result.sheet, ("kg/h", 3600.0) if result.basis == "mol/s" else ("kg", 1.0)
    lines = []
    coming, going = (
        sum(hour * sheet.streams[name].mass[i] for name in names) for names in (sheet.feeds, sheet.products)
    )
    if isfinite(going):
        told = f"{figures(coming, 6)} {mass} come in, {figures(going, 6)} {mass} leave"
        lines += labelled("mass", told)
    fuels = [name for name, one in sheet.streams.items() if one.atoms and any(n[i] > 0.0 for n in one.atoms.values())]
    if fuels:
        lines += labelled("fuel", f"{', '.join(fuels)}: by analysis; amount and mole % are those of its species only")
    threshold = float(result.case.get("show", {}).get("threshold") or THRESHOLD)
    told = f"mole % of the gas; <{level(threshold)} below what is shown; Nm3 at 0 degC and 101325 Pa"
    return lines + labelled("streams", told)


def _number(value: float, decimals: str = "", zero: str = "0") -> str:
    """Write a number; temperatures with ``decimals``."""
    if not isfinite(value):
        return MISSING
    if decimals:
        return f"{value:.{decimals}f}"
    return zero if value == 0.0 else figures(value)


def _share(x: float, threshold: float) -> str:
    """Write a mole fraction: percent, or ppm below 0.1 %."""
    if not isfinite(x):
        return MISSING + " " * _PERCENT
    if abs(x) < 1e-12:
        return "0" + " " * _PERCENT
    if x < threshold:
        return f"<{level(threshold)}"
    text = share(x)
    return text if text.endswith("ppm") else text + " " * _PERCENT
