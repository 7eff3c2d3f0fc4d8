"""The columns of a sweep's table: varied inputs, heat, gas species, solids and liquids."""

from __future__ import annotations

from collections.abc import Sequence
from math import isfinite
from string import ascii_uppercase
from typing import TYPE_CHECKING, Final, NamedTuple

import numpy as np
from numpy.typing import NDArray

from gibbsmin.report.key_figure_table import shown_unit, shown_value
from gibbsmin.report.numbers import MISSING, figures, plain
from gibbsmin.report.words import WIDTH, shortened
from gibbsmin.results.fractions import gas_fractions
from gibbsmin.units import from_si

if TYPE_CHECKING:
    from gibbsmin.results.result import Result

_GAP: Final = 2
_NAMES: Final = 48  # columns of a row that the varied inputs may take by their names; wider, letters stand for them
_IN_PPM: Final = 1e-3  # a gas species that stays below it is shown in ppm
_SHOWN: Final = 1e-6  # one that stays below this is not shown


class Column(NamedTuple):
    """A column: its ``head``, its ``unit``, and a cell for each state shown."""

    head: str
    unit: str
    cells: Sequence[str]

    @property
    def width(self) -> int:
        """Characters it takes, the gap on its left included."""
        return max(len(self.head), len(self.unit), *(len(cell) for cell in self.cells)) + _GAP


def short(name: str) -> str:
    """Last part of a dotted input, with its feed where a feed shares the name of a result.

    Examples
    --------
    >>> short("feeds.air.air_ratio"), short("feeds.air.temperature"), short("held.isentropic_efficiency")
    ('air_ratio', 'air temperature', 'efficiency')
    """
    *table, key = name.split(".")
    if key in ("temperature", "pressure") and table[:1] == ["feeds"]:
        return f"{shortened(table[-1], 10)} {key}"
    return key.removeprefix("isentropic_")


def unit_word(unit: str) -> str:
    """Write a unit as it is shown: nothing for a plain number."""
    return "" if unit == "1" else unit


def fitting(first: Sequence[Column], rest: Sequence[Column]) -> list[Column]:
    """All of ``first``, and of ``rest`` what 80 columns have room for, up to the first that has none."""
    kept, used = list(first), sum(column.width for column in first)
    for column in rest:
        if used + column.width > WIDTH:
            break
        kept.append(column)
        used += column.width
    return kept


def drawn(columns: Sequence[Column]) -> list[str]:
    """Lines of a table: head, unit, and a row a state."""
    rows = [[column.head for column in columns], [column.unit for column in columns]]
    rows += [list(cells) for cells in zip(*(column.cells for column in columns), strict=True)]
    return [
        "".join(f"{text:>{column.width}}" for text, column in zip(row, columns, strict=True)).rstrip() for row in rows
    ]


def lettered(columns: Sequence[Column]) -> tuple[list[Column], list[str]]:
    """Put letters in place of the names of inputs where these leave too little room for what is found.

    Parameters
    ----------
    columns : sequence of Column
        The varied inputs.

    Returns
    -------
    columns : list of Column
    letters : list of str
        The letter of each; empty where it keeps its name.
    """
    if sum(column.width for column in columns) <= _NAMES:
        return list(columns), [""] * len(columns)
    letters = list(ascii_uppercase[: len(columns)])
    return [column._replace(head=letter) for column, letter in zip(columns, letters, strict=True)], letters


def input_columns(result: Result, shown: NDArray[np.intp]) -> list[Column]:
    """Show the varied inputs in the units that were typed."""
    return [
        Column(short(name), unit_word(result.input_units.get(name, "")), [plain(float(values[i])) for i in shown])
        for name, values in result.inputs.items()
    ]


def settled_columns(result: Result, shown: NDArray[np.intp]) -> list[Column]:
    """Temperature and pressure where they are results: temperature to the degree, pressure to four figures."""
    columns = []
    for key, si in (("temperature", "K"), ("pressure", "Pa")):
        if key not in result.held:
            unit = result.display_units.get(key, si)
            values = [from_si(float(getattr(result.batch, key)[i]), unit) for i in shown]
            write = (lambda value: f"{value:.0f}") if key == "temperature" else figures
            columns.append(Column(key, unit, [write(value) if isfinite(value) else MISSING for value in values]))
    return columns


def energy_columns(result: Result, shown: NDArray[np.intp]) -> list[Column]:
    """Work where something expands, else heat, where it is known and not held."""
    if result.account.given_heat is not None:
        return []
    head, ask = ("work", result.work) if result.account.shaft else ("heat", result.heat)
    heats = [ask(int(i)) for i in shown]
    known = [heat for heat in heats if heat is not None]
    if not known:
        return []
    watt = "W" if result.basis == "mol/s" else "J"
    largest = max(map(abs, known))
    scale, prefix = next(((s, p) for s, p in ((1e6, "M"), (1e3, "k")) if largest >= s), (1.0, ""))
    return [Column(head, prefix + watt, [MISSING if h is None else figures(h / scale, 3) for h in heats])]


def chosen_columns(result: Result, shown: NDArray[np.intp]) -> list[Column]:
    """Key figures that the case names for its table."""
    wanted = result.case.get("show", {}).get("columns") or []
    known = {f"{group}.{one.name}": one for group, figures in result.key_figures.items() for one in figures}
    return [
        Column(shortened(one.label, 16), shown_unit(one), [shown_value(one, float(one.value[i])) for i in shown])
        for name in wanted
        if (one := known.get(name)) is not None
    ]


def gas_columns(result: Result, shown: NDArray[np.intp]) -> list[Column]:
    """Gas species by their largest share, in mole percent, or in ppm where they stay below 0.1 %."""
    good = np.asarray(result.batch.certified, bool)
    gas = np.asarray(result.system.gas, bool)
    fractions = gas_fractions(result.batch.amounts, gas)  # (states, S)
    largest = np.where(gas, fractions[good].max(axis=0, initial=0.0), -1.0)
    columns = []
    for k in [int(k) for k in np.argsort(-largest) if largest[k] >= _SHOWN]:
        ppm = bool(largest[k] < _IN_PPM)
        cells = [_share(float(fractions[i, k]), ppm) if good[i] else MISSING for i in shown]
        columns.append(Column(result.system.species[k], "ppm" if ppm else "%", cells))
    return columns


def condensed_columns(result: Result, shown: NDArray[np.intp]) -> list[Column]:
    """Solids and liquids that occur: those that come or go along the sweep first, then by amount."""
    good = np.asarray(result.batch.certified, bool)
    amounts = result.batch.amounts  # (states, S)
    unit = result.display_units.get("amount", result.basis)
    occurring = [k for k in np.flatnonzero(~np.asarray(result.system.gas, bool)) if amounts[good, k].any()]
    occurring.sort(key=lambda k: (bool((amounts[good, k] > 0.0).all()), -float(amounts[good, k].max())))
    return [
        Column(
            result.system.species[k],
            unit,
            [figures(from_si(float(amounts[i, k]), unit), 3) if good[i] else MISSING for i in shown],
        )
        for k in occurring
    ]


def _share(x: float, ppm: bool) -> str:
    """Write a share of the gas; what rounds to nothing and is not says so."""
    scaled, least = (1e6 * x, 0.01) if ppm else (100.0 * x, 0.005)
    if 0.0 < scaled < least:
        return "<0.01"
    if ppm:
        return f"{scaled:.2f}" if scaled < 10.0 else figures(scaled, 3)
    return f"{scaled:.2f}"
