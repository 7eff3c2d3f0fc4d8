"""The steps of a train for the terminal: outlet, heat, work, lost work; conversions; the proof of the whole."""

from __future__ import annotations

from collections.abc import Sequence
from math import isfinite
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.report.columns import Column, drawn
from gibbsmin.report.numbers import MISSING, figures, plain
from gibbsmin.report.table import certificate
from gibbsmin.report.train_heads import blocks, head_rows, row
from gibbsmin.report.words import labelled, shortened
from gibbsmin.results.train_result import TrainResult
from gibbsmin.studies.train.account import WHOLE
from gibbsmin.units import from_si

Floats = NDArray[np.float64]

_NAME: Final = 18
_ROUNDING: Final = 1e-9  # part of the largest of a column below which a number is rounding


def step_table(result: TrainResult, index: int) -> list[str]:
    """Lines of the steps of one state: what leaves each, what it takes in heat and work, what it loses.

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
    units, accounts, streams = result.display_units, result.accounts, result.sheet.streams
    T, P = units.get("temperature", "K"), units.get("pressure", "Pa")
    names = [name for name in accounts if name != WHOLE]
    every = [*names, WHOLE]
    watt = "W" if result.basis == "mol/s" else "J"
    heat, work, made, lost = (
        np.array([getattr(accounts[name], key)[index] for name in every])
        for key in ("heat", "work", "entropy_generated", "lost_work")
    )
    scale, prefix = energy_scale(np.concatenate([heat, work, lost]))
    unit = prefix + watt
    columns = [
        Column(T, "", [_or_dash(f"{from_si(streams[name].temperature[index], T):.1f}") for name in names] + [""]),
        Column(f"{P} abs", "", [figures(from_si(streams[name].pressure[index], P)) for name in names] + [""]),
        Column("heat", unit, scaled(heat, scale)),
    ]
    if np.nan_to_num(work).any():
        columns.append(Column("work", unit, scaled(work, scale)))
    made_scale, made_prefix = energy_scale(made)
    columns.append(Column("entropy", f"{made_prefix}{watt}/K", scaled(made, made_scale)))
    columns.append(Column("lost work", unit, scaled(lost, scale)))
    if lost[-1] > 0.0:
        columns.append(Column("of all", "", [_or_dash(f"{100.0 * value / lost[-1] + 0.0:.1f} %") for value in lost]))
    lines = ["", *_named("steps", every, columns)]
    surroundings = result.surroundings_temperature - 273.15
    note = (
        "heat and work are put in (minus: given off); entropy is what is generated, with heat at the temperature of"
        f" the outlet or of the surroundings ({plain(surroundings)} degC), whichever loses less"
    )
    return lines + labelled("steps", note)


def conversion_table(result: TrainResult, index: int) -> list[str]:
    """Lines of what is fed and reacts, overall, in one pass and in each step of one state."""
    found = result.conversions
    if not found:
        return []
    whole = ["overall", *(["per pass"] if result.recycled else [])]
    steps = [name for name in result.solved.steps if any(name in one.steps for one in found.values())]
    lines: list[str] = []
    for names in blocks([*whole, *steps]):
        lines += ["", *head_rows("conversion, %", names)]
        for species, one in found.items():
            known = {
                "overall": one.overall,
                **({} if one.per_pass is None else {"per pass": one.per_pass}),
                **one.steps,
            }
            lines.append(row(f"  {species}", [_percent(known[name][index]) if name in known else "" for name in names]))
    told = "of feeds, 1 - out/in"
    if result.recycled:
        told += "; per pass: what reacts over what feeds and recycled streams bring"
    return lines + labelled("conversion", f"{told}; of a step: 1 - out/in of its own")


def recovery_table(result: TrainResult, index: int) -> list[str]:
    """Lines of the products by which the elements leave, in one state."""
    found = result.recoveries
    products = [name for name in result.solved.products if any(name in parts for parts in found.values())]
    lines: list[str] = []
    for names in blocks(products):
        lines += ["", *head_rows("elements leave, %", names)]
        for symbol, parts in found.items():
            lines.append(row(f"  {symbol}", [_percent(parts[name][index]) if name in parts else "" for name in names]))
    return lines


def energy_scale(values: Floats) -> tuple[float, str]:
    """Choose the prefix that keeps the largest of energies handy: its factor and its letter."""
    largest = np.nan_to_num(np.abs(values)).max(initial=0.0)
    return next(((s, p) for s, p in ((1e6, "M"), (1e3, "k")) if largest >= s), (1.0, ""))


def scaled(values: Floats, scale: float) -> list[str]:
    """Write energies in a multiple of their unit; what is rounding as nothing."""
    least = _ROUNDING * np.nan_to_num(np.abs(values)).max(initial=0.0)
    return ["0" if abs(value) <= least else figures(value / scale) for value in values]


def train_certificate(result: TrainResult) -> str:
    """Put the proof of all states of all stages, and how well the whole closes, in one line."""
    good = result.certified
    if not good.all():
        first = int(np.flatnonzero(~good)[0])
        bad = int((~good).sum())
        return (
            f"{bad} of {len(good)} states NOT certified; the first is state {first + 1}: {result.solved.reasons[first]}"
        )
    told = []
    if result.stages:
        residual, gap, affinity = (float(values.max()) for values in result.proof.values())
        states = f"{len(good)} states of " if len(good) > 1 else ""
        steps = _counted(len(result.stages), "settling step")
        told.append(f"{states}{steps} {certificate(residual, gap, affinity)}")
    whole = result.accounts[WHOLE]
    closed = f"the whole closes to {_power(whole.element_open)} in elements"
    energy = _power(whole.energy_open)
    told.append(closed if energy == MISSING else f"{closed}, {energy} in energy")
    loop = result.solved.steady
    if loop is not None:
        told.append(f"recycle steady to {_power(loop.residual)} after {_counted(loop.rounds, 'round')}")
    return "; ".join(told)


def _named(label: str, names: Sequence[str], columns: Sequence[Column]) -> list[str]:
    """Lines of a table whose rows have names."""
    left = [label, "", *(f"  {name}" for name in names)]
    return [
        f"{shortened(name, _NAME - 1):<{_NAME}}{line}".rstrip() for name, line in zip(left, drawn(columns), strict=True)
    ]


def _or_dash(text: str) -> str:
    return MISSING if text.startswith("nan") else text


def _percent(value: float) -> str:
    return f"{100.0 * value:.2f}" if isfinite(value) else MISSING


def _power(values: Floats) -> str:
    """Write the largest of small numbers by its size; a dash where it is not known."""
    largest = float(np.max(values))
    return f"{largest:.0e}".replace("0e+00", "0") if isfinite(largest) else MISSING


def _counted(count: int, what: str) -> str:
    return f"{count} {what}{'s' if count != 1 else ''}"
