"""The rows of the stream table in files: what each stream is and holds, in SI and in the units of the trade."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.constants import R
from gibbsmin.practice.feeds.heating import NORMAL_MOLAR_VOLUME
from gibbsmin.results.stream_sheet import Entry, StreamSheet
from gibbsmin.studies.train.train import Solved

Floats = NDArray[np.float64]

TRACE: Final = 1e-9
"""Species that never reach this share of a stream are left to result.json, [-]."""


@dataclass(frozen=True)
class Row:
    """A row: ``what`` in which ``unit``, ``values`` (streams, states), and their sums over feeds and products."""

    what: str
    unit: str
    values: Floats
    ends: Floats | None = None


def stream_table(solved: Solved, sheet: StreamSheet, basis: str) -> list[Row]:
    """Make the rows of the stream table.

    Parameters
    ----------
    solved : Solved
    sheet : StreamSheet
        Its streams.
    basis : str
        ``"mol"`` or ``"mol/s"``.

    Returns
    -------
    list of Row
        What adds up has ``ends`` (2, states): all feeds, all products.
    """
    every = list(sheet.streams.values())
    flow = basis == "mol/s"
    T, P = (np.array([getattr(one, key) for one in every]) for key in ("temperature", "pressure"))
    gas = np.array([one.gas_total for one in every])
    rows = [
        Row("temperature", "K", T), Row("temperature", "degC", T - 273.15),
        Row("pressure, absolute", "Pa", P), Row("pressure, absolute", "bar", P / 1e5),
    ]  # fmt: skip

    def add(what: str, values: Floats, *units: tuple[str, float]) -> None:
        for unit, factor in units:
            scaled = factor * values
            rows.append(Row(what, unit, scaled, _ends(sheet, scaled)))

    mole, mass, normal, real, energy, entropy = _units(flow)
    add("amount", np.array([one.total for one in every]), *mole)
    add("mass", np.array([one.mass for one in every]), *mass)
    add("gas at 0 degC and 101325 Pa", NORMAL_MOLAR_VOLUME * gas, *normal)
    rows += [Row("gas at its temperature and pressure", unit, factor * gas * R * T / P) for unit, factor in real]
    add("enthalpy", np.array([one.enthalpy for one in every]), *energy)
    add("entropy", np.array([one.entropy for one in every]), *entropy)
    kept = listed(every)
    n = np.array([one.amounts for one in every])  # (streams, states, S)
    for unit in mole:
        for k in kept:
            add(sheet.names[k], n[:, :, k], unit)
    for k in kept:
        add(sheet.names[k], sheet.molar_masses[k] * n[:, :, k], mass[-1])
    for name, key in (("wet", "wet"), ("dry", "dry")):
        rows += _shares(sheet, np.array([getattr(one, key) for one in every]), kept, f"mole % of the gas, {name}")
    return rows + _elements(solved, sheet, basis)


def listed(streams: Sequence[Entry]) -> list[int]:
    """Places of the species that reach a share worth a line in one of the streams, the largest first."""
    shares = [np.nan_to_num(one.amounts) / np.maximum(np.nan_to_num(one.total), 1e-300)[:, None] for one in streams]
    largest, all_of_them = np.max(shares, axis=(0, 1)), np.sum(shares, axis=(0, 1))
    return [int(k) for k in np.argsort(-all_of_them, kind="stable") if largest[k] >= TRACE]


def _units(flow: bool) -> list[list[tuple[str, float]]]:
    """Units, with their factors from SI, of amounts, masses, normal volumes, volumes, energies and entropies."""
    if flow:
        return [
            [("mol/s", 1.0), ("kmol/h", 3.6)], [("kg/s", 1.0), ("kg/h", 3600.0)], [("Nm3/h", 3600.0)],
            [("m3/s", 1.0), ("m3/h", 3600.0)], [("W", 1.0), ("kW", 1e-3)], [("W/K", 1.0), ("kW/K", 1e-3)],
        ]  # fmt: skip
    return [
        [("mol", 1.0), ("kmol", 1e-3)], [("kg", 1.0)], [("Nm3", 1.0)],
        [("m3", 1.0)], [("J", 1.0), ("kJ", 1e-3)], [("J/K", 1.0), ("kJ/K", 1e-3)],
    ]  # fmt: skip


def _shares(sheet: StreamSheet, x: Floats, kept: Sequence[int], unit: str) -> list[Row]:
    """Rows of mole fractions (streams, states, S), what is not listed, and the sum."""
    there = np.isfinite(x).any(axis=2)
    gases = [k for k in kept if np.isfinite(x[:, :, k]).any()]
    total = np.where(there, 100.0 * np.nan_to_num(x).sum(axis=2), np.nan)
    shown = 100.0 * np.nan_to_num(x[:, :, gases]).sum(axis=2)
    rows = [Row(sheet.names[k], unit, 100.0 * x[:, :, k]) for k in gases]
    return [*rows, Row("all others", unit, np.maximum(total - shown, 0.0)), Row("total", unit, total)]


def _elements(solved: Solved, sheet: StreamSheet, unit: str) -> list[Row]:
    """Rows of the elements, those of fuels by analysis with them."""
    streams = solved.streams
    symbols = dict.fromkeys(s for one in streams.values() for s in (*one.substances.elements, *one.atoms))
    known = np.array([np.isfinite(one.mass) for one in sheet.streams.values()])
    rows = []
    for symbol in symbols:
        n = np.where(known, [streams[name].element(symbol) for name in sheet.streams], np.nan)
        rows.append(Row(f"element {symbol}", unit, n, _ends(sheet, n)))
    return rows


def _ends(sheet: StreamSheet, values: Floats) -> Floats:
    """Sum over all feeds, and over all products, of values (streams, states); (2, states)."""
    names = list(sheet.streams)
    return np.array(
        [values[[names.index(name) for name in some]].sum(axis=0) for some in (sheet.feeds, sheet.products)]
    )
