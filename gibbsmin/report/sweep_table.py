"""The terminal table of a sweep: one row a state, the major species as columns, 80 columns wide."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from math import prod
from typing import TYPE_CHECKING, Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.report.columns import (
    chosen_columns,
    condensed_columns,
    drawn,
    energy_columns,
    fitting,
    gas_columns,
    input_columns,
    lettered,
    settled_columns,
    short,
    unit_word,
)
from gibbsmin.report.design_words import listed, varied_lines
from gibbsmin.report.held_words import held_words
from gibbsmin.report.numbers import plain, prefixed
from gibbsmin.report.onsets import Onset, onsets
from gibbsmin.report.table import certificate, heading
from gibbsmin.report.words import labelled
from gibbsmin.studies.designs import RANDOM
from gibbsmin.studies.labelled import dimensions

if TYPE_CHECKING:
    from gibbsmin.results.result import Result

ROWS: Final = 40
"""States shown at most; a longer sweep shows evenly spaced ones."""

_TOGETHER: Final = 2  # solids and liquids that still stand beside the gas; more get a table of their own
_GROUPS: Final = 6


def sweep_table(result: Result) -> list[str]:
    """Lines that show a sweep.

    Parameters
    ----------
    result : Result
        With at least one varied input.

    Returns
    -------
    list of str
        None longer than 80 columns.
    """
    count = len(result.batch)
    design = result.case.get("design", {})
    shown = chosen(list(dimensions(result.axes).values()))
    varied, letters = lettered(input_columns(result, shown))
    inputs = fitting(varied, [*settled_columns(result, shown), *chosen_columns(result, shown)])
    energy = energy_columns(result, shown)
    gas, condensed = gas_columns(result, shown), condensed_columns(result, shown)
    lines = [*heading(result.title), *varied_lines(dict(zip(result.inputs, letters, strict=True)), design)]
    lines += [*_held(result, bool(gas), bool(energy)), ""]
    if len(condensed) <= _TOGETHER:
        lines += drawn(fitting(inputs, [*energy, *condensed, *gas]))
    else:
        if gas:
            lines += [*drawn(fitting(inputs, [*energy, *gas])), ""]
        columns = fitting(inputs, condensed)
        lines += ["solids and liquids", *drawn(columns)]
        hidden = [column.head for column in condensed if column not in columns]
        if hidden:
            lines += labelled("and", ", ".join(hidden))
    if len(shown) < count:
        lines.append(f"  {len(shown)} of {count:,} states; table.csv has them all")
    lines.append("")
    lines += _occurrence(result) if design.get("kind") in RANDOM else onset_lines(onsets(result), result.input_units)
    lines += lost_work_lines(result)
    return [*lines, *labelled("certificate", _certificate(result))]


def chosen(sizes: Sequence[int]) -> NDArray[np.intp]:
    """Choose the states to show: all where they fit, else evenly spaced values of each input, or of many inputs states.

    Parameters
    ----------
    sizes : sequence of int
        Number of values of each input; the last varies fastest.

    Returns
    -------
    array (at most ROWS,)
        Indices of states.
    """
    states = prod(sizes)
    if states <= ROWS or 2 ** len(sizes) > ROWS:  # of so many inputs not even the ends can all be shown
        return np.unique(np.linspace(0, states - 1, min(states, ROWS)).round().astype(np.intp))
    left = ROWS
    places = []
    for place, size in enumerate(sizes):
        kept = min(size, left if place == len(sizes) - 1 else max(2, int(left ** (1.0 / (len(sizes) - place)))))
        places.append(np.unique(np.linspace(0, size - 1, kept).round().astype(int)))
        left //= kept
    return np.ravel_multi_index(np.ix_(*places), tuple(sizes)).ravel()


def _held(result: Result, gas: bool, heat: bool) -> list[str]:
    """Say what stays the same in all states, and what the columns are."""
    same = held_words(result.case.get("held", {}), result.inputs)
    lines = labelled("held", same) if same else []
    told = [f"gas in mole %{', wet' if 'H2O' in result.system.species else ''}"] if gas else []
    if heat:
        told.append(f"{'work' if result.account.shaft else 'heat'} to be supplied (minus: given off)")
    return lines + (labelled("columns", "; ".join(told)) if told else [])


def _occurrence(result: Result) -> list[str]:
    """Say in how many states each solid and liquid is there, where the states have no order."""
    good = np.asarray(result.batch.certified, bool)
    present = (result.batch.amounts[good] > 0.0).sum(axis=0)
    found = {name: present[k] for k, name in enumerate(result.system.species) if not result.system.gas[k]}
    told = [f"{name} {n:,}" for name, n in sorted(found.items(), key=lambda item: -item[1]) if n]
    return labelled("states with", ", ".join(told)) if told else []


def lost_work_lines(result: Result) -> list[str]:
    """Say between what the lost work lies along the sweep."""
    known = [(audit.lost_work, i) for i, audit in enumerate(result.audits) if audit is not None]
    if not known:
        return []
    unit = "W" if result.basis == "mol/s" else "J"
    least, most = min(known), max(known)
    told = " and ".join(f"{prefixed(lost, unit)} (state {i + 1})" for lost, i in (least, most))
    surroundings = result.account.surroundings_temperature - 273.15
    lines = labelled("lost work", f"between {told}, with surroundings at {plain(surroundings)} degC")
    return lines + (labelled("feeds", result.account.remark) if result.account.remark else [])


def onset_lines(found: Sequence[Onset], units: Mapping[str, str]) -> list[str]:
    """Say along one input where each phase comes and goes: ``from`` and ``to`` between which two states.

    Parameters
    ----------
    found : sequence of Onset
    units : mapping of str to str
        Unit of each input.

    Returns
    -------
    list of str
        A paragraph for each value of the other inputs.
    """
    groups: dict[tuple[tuple[str, float], ...], dict[str, list[str]]] = {}
    for onset in found:
        ends = groups.setdefault(tuple(onset.others.items()), {}).setdefault(onset.phase, [])
        ends.append(f"{'from' if onset.appears else 'to'} {plain(onset.low)}..{plain(onset.high)}")
    lines = []
    for others, phases in list(groups.items())[:_GROUPS]:
        told = "; ".join(f"{phase} {', '.join(ends)}" for phase, ends in phases.items())
        unit = f" {unit_word(units.get(found[0].axis, ''))}".rstrip()
        fixed = [f"{short(name)} {plain(value)} {unit_word(units.get(name, ''))}".rstrip() for name, value in others]
        where = f" at {listed(fixed)}" if fixed else ""
        lines += labelled("onsets", f"along {short(found[0].axis)}{where}: {told}{unit}")
    if len(groups) > _GROUPS:
        lines += labelled("", f"and {len(groups) - _GROUPS} lines of states more")
    return lines


def _certificate(result: Result) -> str:
    """Put the proof of all states, or what failed, in one line."""
    batch = result.batch
    good = np.asarray(batch.certified, bool)
    if good.all():
        worst = certificate(
            float(batch.element_residual.max()), float(np.abs(batch.gap).max()), float(batch.worst_affinity.max())
        )
        return f"all {len(good)} {worst}"
    first = int(np.flatnonzero(~good)[0])
    bad = int((~good).sum())
    return f"{bad} of {len(good)} states NOT certified; the first is state {first + 1}: {batch.reason[first]}"
