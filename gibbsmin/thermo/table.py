"""The standard-state functions of many species at once, as arrays that compiled code reads."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any, NamedTuple

import numpy as np

from gibbsmin.compiled import inlined
from gibbsmin.constants import R
from gibbsmin.thermo.polynomial import COEFFICIENTS, enthalpy_RT, entropy_R, heat_capacity_R
from gibbsmin.thermo.record import Species

_heat_capacity_R = inlined(heat_capacity_R)
_enthalpy_RT = inlined(enthalpy_RT)
_entropy_R = inlined(entropy_R)


class Table(NamedTuple):
    """Pieces of S species in one row of arrays.

    R of the fit over R of today (``scale``) keeps H° and S° in J as they were published.
    """

    start: Any  # (S + 1,) int, first piece of each species
    high: Any  # (pieces,) upper end, K
    coefficients: Any  # (pieces, 9)
    scale: Any  # (S,) R of the fit / R
    shift: Any  # (S,) what takes S°/R to 1 bar
    low: Any  # (S,) lowest T at which the species is a candidate, K
    top: Any  # (S,) highest


def make_table(species: Sequence[Species]) -> Table:
    """Gather the extended pieces of ``species`` into arrays."""
    pieces = [piece for record in species for piece in record.extended_pieces]
    counts = [len(record.extended_pieces) for record in species]
    return Table(
        np.concatenate(([0], np.cumsum(counts))).astype(np.int64),
        np.array([piece.high for piece in pieces], float),
        np.array([piece.coefficients for piece in pieces], float).reshape(-1, COEFFICIENTS),
        np.array([record.gas_constant / R for record in species], float),
        np.array([record.pressure_entropy_R for record in species], float),
        np.array([record.usable[0] for record in species], float),
        np.array([record.usable[1] for record in species], float),
    )


@inlined
def standard_state(T: float, table: Table, h: Any, s: Any) -> None:
    """Fill ``h`` (S,) with H°/RT and ``s`` (S,) with S°/R of all species at ``T`` [K] and 1 bar."""
    lnT = np.log(T)
    for j in range(h.size):
        piece = table.start[j]
        while table.high[piece] < T:
            piece += 1
        a = table.coefficients[piece]
        h[j] = table.scale[j] * _enthalpy_RT(a, T, lnT)
        s[j] = table.scale[j] * (_entropy_R(a, T, lnT) + table.shift[j])


@inlined
def standard_heat_capacity(T: float, table: Table, cp: Any) -> None:
    """Fill ``cp`` (S,) with Cp°/R of all species at ``T`` [K]."""
    for j in range(cp.size):
        piece = table.start[j]
        while table.high[piece] < T:
            piece += 1
        cp[j] = table.scale[j] * _heat_capacity_R(table.coefficients[piece], T)
