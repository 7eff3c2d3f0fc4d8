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


def pieces_at(table: Table, T: float) -> Any:
    """Place of the piece of every species that holds at ``T`` [K], (S,)."""
    first = table.start[:-1]
    return first + np.add.reduceat(table.high < T, first, dtype=np.int64)


def potentials_at(table: Table, T: float) -> Any:
    """G°/RT of every species, (S,) [-], at ``T`` [K] and 1 bar."""
    a, lnT = table.coefficients[pieces_at(table, T)].T, np.log(T)
    return table.scale * (enthalpy_RT(a, T, lnT) - entropy_R(a, T, lnT) - table.shift)


class Pieces(NamedTuple):
    """The piece of every species for one range of temperature, side by side, so that loops over species are vectors."""

    coefficients: Any  # (9, S) times ``scale``, with ``shift`` in the last
    reach: Any  # (2,) the range, K: above the first, up to the second


def new_pieces(S: int) -> Pieces:
    """Allocate the pieces of ``S`` species, for no range yet."""
    return Pieces(np.zeros((COEFFICIENTS, S)), np.zeros(2))


@inlined
def gather(T: float, table: Table, here: Pieces) -> None:
    """Gather the pieces for ``T`` [K], unless they are there."""
    if here.reach[0] < T <= here.reach[1]:
        return
    here.reach[0], here.reach[1] = -np.inf, np.inf
    for j in range(table.scale.size):
        piece = table.start[j]
        while table.high[piece] < T:
            piece += 1
        for k in range(COEFFICIENTS):
            here.coefficients[k, j] = table.scale[j] * table.coefficients[piece, k]
        here.coefficients[COEFFICIENTS - 1, j] += table.scale[j] * table.shift[j]
        here.reach[1] = min(here.reach[1], table.high[piece])
        if piece > table.start[j]:
            here.reach[0] = max(here.reach[0], table.high[piece - 1])


@inlined
def standard_state(T: float, table: Table, here: Pieces, h: Any, s: Any) -> None:
    """Fill ``h`` (S,) with H°/RT and ``s`` (S,) with S°/R of all species at ``T`` [K] and 1 bar."""
    gather(T, table, here)
    lnT, c = np.log(T), here.coefficients
    for j in range(h.size):
        a = (c[0, j], c[1, j], c[2, j], c[3, j], c[4, j], c[5, j], c[6, j], c[7, j], c[8, j])
        h[j] = _enthalpy_RT(a, T, lnT)
        s[j] = _entropy_R(a, T, lnT)


@inlined
def standard_heat_capacity(T: float, table: Table, here: Pieces, cp: Any) -> None:
    """Fill ``cp`` (S,) with Cp°/R of all species at ``T`` [K]."""
    gather(T, table, here)
    c = here.coefficients
    for j in range(cp.size):
        a = (c[0, j], c[1, j], c[2, j], c[3, j], c[4, j], c[5, j], c[6, j], c[7, j], c[8, j])
        cp[j] = _heat_capacity_R(a, T)
