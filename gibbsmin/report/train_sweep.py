"""The tables of a varied train: heat and outlet temperatures, then each product, a row a state."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any, Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.errors import UnitError
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.report.columns import Column, drawn, fitting, lettered, short, unit_word
from gibbsmin.report.design_words import varied_lines
from gibbsmin.report.key_figure_table import shown_unit, shown_value
from gibbsmin.report.numbers import MISSING, figures, plain
from gibbsmin.report.sweep_table import chosen
from gibbsmin.report.train_steps import energy_scale, scaled
from gibbsmin.report.words import shortened
from gibbsmin.results.stream_sheet import Entry
from gibbsmin.results.train_result import TrainResult
from gibbsmin.studies.labelled import dimensions
from gibbsmin.studies.train.account import WHOLE
from gibbsmin.units import from_si, quantity

Floats = NDArray[np.float64]
States = NDArray[np.intp]

PRODUCTS: Final = 3
"""Products with gas that have a table of their own at most: those of most mass."""

_HEAD: Final = 16
_IN_PPM: Final = 1e-3
_SHOWN: Final = 1e-6
_MOVES: Final = 0.05  # K; an outlet whose temperature moves by less is held


def train_sweep(result: TrainResult) -> list[str]:
    """Lines that show a varied train.

    Parameters
    ----------
    result : TrainResult
        With at least one varied input.

    Returns
    -------
    list of str
        None longer than 80 columns.
    """
    shown = chosen(list(dimensions(result.axes).values()))
    inputs, letters = lettered(_inputs(result, shown))
    lines = varied_lines(dict(zip(result.inputs, letters, strict=True)), result.case.get("design", {}))
    lines += ["", "whole train, and outlets whose temperature moves"]
    lines += drawn(fitting(inputs, [*_energies(result, shown), *_temperatures(result, shown)]))
    if chosen_figures := _chosen(result, shown):
        lines += ["", "chosen numbers", *drawn(fitting(inputs, chosen_figures))]
    sheet = result.sheet
    by_mass = sorted(sheet.products, key=lambda name: -np.nanmax([0.0, *sheet.streams[name].mass]))
    gases = [name for name in by_mass if np.any(sheet.streams[name].gas_total > 0.0)][:PRODUCTS]
    for name in gases:
        stream = sheet.streams[name]
        water = np.nan_to_num(stream.amounts[:, stream.water]).any()
        lines += ["", f"{name}, gas in mole %{' wet' if water else ''}"]
        lines += drawn(fitting(inputs, [*_flows(result, stream, shown), *_shares(result, stream, shown)]))
    rest = _masses(result, [name for name in by_mass if name not in gases], shown)
    while rest:
        table = fitting(inputs, rest)
        rest = rest[max(1, len(table) - len(inputs)) :]
        lines += ["", f"{'other ' if gases else ''}products, by mass", *drawn(table)]
    if len(shown) < len(result):
        lines += ["", f"{len(shown)} of {len(result):,} states; table.csv has them all"]
    return lines


def conversion_figures(result: TrainResult) -> dict[str, list[KeyFigure]]:
    """Conversions overall and per pass, and where the elements leave, as numbers along a sweep."""
    rows = []
    for name, one in result.conversions.items():
        rows.append(KeyFigure("overall", f"{name}, overall", one.overall, "1", "%"))
        if one.per_pass is not None:
            rows.append(KeyFigure("per_pass", f"{name}, per pass", one.per_pass, "1", "%"))
    leaving = [
        KeyFigure(name, f"{symbol} in {name}", values, "1", "%")
        for symbol, parts in result.recoveries.items()
        for name, values in parts.items()
    ]
    return {title: found for title, found in (("conversion", rows), ("elements leave", leaving)) if found}


def _inputs(result: TrainResult, shown: States) -> list[Column]:
    """Show the varied inputs in the units that were typed."""
    return [
        Column(_input(name), unit_word(result.input_units.get(name, "")), [plain(float(values[i])) for i in shown])
        for name, values in result.inputs.items()
    ]


def _input(name: str) -> str:
    """Last part of a dotted input, with the step or side stream that it belongs to where there is room."""
    parts = name.split(".")
    if parts[0] != "stages":
        return shortened(short(name), 20)
    key = parts[-1].removeprefix("isentropic_")
    owner = parts[-2] if parts[2] == "take" else parts[1]
    return f"{shortened(owner, 10)} {shortened(key, 12)}"


def _chosen(result: TrainResult, shown: States) -> list[Column]:
    """Key figures that the case names for its table, as STAGE.SET.NAME."""
    known = result.figures
    return [
        Column(shortened(one.label, _HEAD), shown_unit(one), [shown_value(one, float(one.value[i])) for i in shown])
        for name in result.case.get("show", {}).get("columns") or []
        if (one := known.get(name)) is not None
    ]


def _energies(result: TrainResult, shown: States) -> list[Column]:
    """Heat, work and lost work of the whole."""
    watt = "W" if result.basis == "mol/s" else "J"
    whole = result.accounts[WHOLE]
    columns = []
    for head, values in (("heat", whole.heat), ("work", whole.work), ("lost work", whole.lost_work)):
        if np.nan_to_num(values).any():
            scale, prefix = energy_scale(values)
            columns.append(Column(head, prefix + watt, scaled(values[shown], scale)))
    return columns


def _temperatures(result: TrainResult, shown: States) -> list[Column]:
    """Outlet temperatures of the steps in which they move along the sweep."""
    unit = result.display_units.get("temperature", "K")
    columns = []
    for name in result.solved.steps:
        T = result.sheet.streams[name].temperature
        known = T[np.isfinite(T)]
        if known.size and np.ptp(known) > _MOVES:
            columns.append(Column(shortened(name, _HEAD), unit, _decimals(T[shown], unit)))
    return columns


def _flows(result: TrainResult, stream: Entry, shown: States) -> list[Column]:
    """Temperature where it moves, amount and mass of a product."""
    units, flow = result.display_units, result.basis == "mol/s"
    temperature, amount = units.get("temperature", "K"), units.get("amount", result.basis)
    mass, hour = ("kg/h", 3600.0) if flow else ("kg", 1.0)
    known = stream.temperature[np.isfinite(stream.temperature)]
    columns = []
    if known.size and np.ptp(known) > _MOVES:
        columns.append(Column("temperature", temperature, _decimals(stream.temperature[shown], temperature)))
    columns.append(Column("amount", amount, [figures(from_si(n, amount)) for n in stream.total[shown]]))
    columns.append(Column("mass", mass, [figures(hour * m) for m in stream.mass[shown]]))
    return columns


def _masses(result: TrainResult, names: Sequence[str], shown: States) -> list[Column]:
    """Mass of each of some products."""
    mass, hour = ("kg/h", 3600.0) if result.basis == "mol/s" else ("kg", 1.0)
    streams = result.sheet.streams
    return [Column(shortened(name, 30), mass, [figures(hour * m) for m in streams[name].mass[shown]]) for name in names]


def base_state(result: TrainResult) -> int:
    """Choose the state whose varied inputs are nearest to those that the case itself gives; of the certified ones.

    Returns
    -------
    int
        The first where none is certified.
    """
    away = np.zeros(len(result))
    for name, values in result.inputs.items():
        span = float(np.ptp(values)) or 1.0
        given = _given(result.case, name.split("."))
        try:
            base = quantity(given, result.input_units[name] or "1", name)
        except UnitError:
            continue
        away += np.abs(values - base) / span
    return int(np.argmin(np.where(result.certified, away, np.inf)))


def state_words(result: TrainResult, index: int) -> str:
    """Say which state of a sweep it is, by its inputs."""
    told = [
        f"{name} {plain(float(values[index]))} {unit_word(result.input_units[name])}".rstrip()
        for name, values in result.inputs.items()
    ]
    return f"state {index + 1}: {', '.join(told)}"


def _given(case: Mapping[str, Any], path: Sequence[str]) -> Any:
    """Return the value that a case gives at a dotted name; nothing where it gives none."""
    place: Any = case
    if path[0] == "stages":
        place = {stage["name"]: stage for stage in case["stage"]}
        path = path[1:]
    for key in path:
        place = place.get(key) if isinstance(place, Mapping) else None
    return place


def _shares(result: TrainResult, stream: Entry, shown: States) -> list[Column]:
    """Gas species of a product by their largest share, in mole percent, or in ppm where they stay below 0.1 %."""
    x = np.nan_to_num(stream.wet)
    largest = x.max(axis=0, initial=0.0)
    columns = []
    for k in [int(k) for k in np.argsort(-largest, kind="stable") if largest[k] >= _SHOWN]:
        ppm = bool(largest[k] < _IN_PPM)
        cells = [_share(float(value), ppm) for value in stream.wet[shown, k]]
        columns.append(Column(result.sheet.names[k], "ppm" if ppm else "%", cells))
    return columns


def _share(x: float, ppm: bool) -> str:
    if not np.isfinite(x):
        return MISSING
    scaled_x, least = (1e6 * x, 0.01) if ppm else (100.0 * x, 0.005)
    if 0.0 < scaled_x < least:
        return "<0.01"
    return f"{scaled_x:.2f}" if not ppm or scaled_x < 10.0 else figures(scaled_x, 3)


def _decimals(values: Floats, unit: str) -> list[str]:
    return [f"{from_si(float(T), unit):.1f}" if np.isfinite(T) else MISSING for T in values]
