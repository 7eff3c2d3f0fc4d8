"""The record of one species: what it is, its standard-state functions, and where they come from."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from functools import cached_property
from math import log
from typing import Any, Final, NamedTuple

import numpy as np
from numpy.typing import ArrayLike, NDArray

from gibbsmin.constants import STANDARD_PRESSURE, STANDARD_TEMPERATURE
from gibbsmin.elements import molar_mass
from gibbsmin.thermo.polynomial import (
    constant_heat_capacity,
    enthalpy_RT,
    entropy_R,
    heat_capacity_R,
)

R_OF_FIT: Final = 8.31451
"""Gas constant that the polynomials of NASA TM-4513 were fitted with, [J/mol/K]; H and S come back exact with it."""


FROZEN: Final = " [frozen]"
"""Ends the name of a species that stands for the part of a substance that does not react."""


class Piece(NamedTuple):
    """Cp° over one range of temperature: ``low``, ``high`` [K], nine coefficients, and the crystal form it is for."""

    low: float
    high: float
    coefficients: tuple[float, ...]
    form: str = ""


@dataclass(frozen=True)
class Species:
    """One chemical substance in one physical form.

    Attributes
    ----------
    name : str
        Unique name: formula, ``(s)`` or ``(l)`` where condensed, ``:form`` where the formula is not enough.
    formula, phase, form : str
        Phase is ``gas``, ``liquid`` or ``solid``; form names the isomer or crystal and may be empty.
    elements : mapping of str to float
        Atoms of each element in one formula unit, [-].
    charge : int
        Electric charge, [-].
    pieces : tuple of Piece
        Cp° pieces in rising order, ends touching. A first-order transition is a break at which H° and S° jump.
    usable : tuple of float
        Range in which the species may be a candidate, [K]; wider than that of the pieces by what the range rules
        allow.
    aliases : tuple of str
        Other names by which it is found.
    reference_pressure : float
        Standard pressure of the record's own entropies, [Pa].
    gas_constant : float
        R that the coefficients were fitted with, [J/mol/K].
    source, note : str
        Where the data come from, and what was changed with its reason.
    enthalpy_uncertainty, entropy_uncertainty : float
        Uncertainty of H°(298.15 K) [J/mol] and of S°(298.15 K) [J/mol/K], at 95 %.
    uncertainty_source : str
        Where the uncertainty of H° comes from.
    uncertainty_assumed : bool
        True where it is a default of the species' class and not a published figure.

    Notes
    -----
    Beyond the pieces Cp° stays constant and H°, S° go on from the end. All functions are at 1 bar, with the
    elements at 298.15 K as the zero of enthalpy, whatever the record's own standard pressure.
    """

    name: str
    formula: str
    phase: str
    form: str
    elements: Mapping[str, float]
    charge: int
    pieces: tuple[Piece, ...]
    usable: tuple[float, float]
    aliases: tuple[str, ...] = ()
    reference_pressure: float = STANDARD_PRESSURE
    gas_constant: float = R_OF_FIT
    source: str = ""
    note: str = ""
    enthalpy_uncertainty: float = 0.0
    entropy_uncertainty: float = 0.0
    uncertainty_source: str = ""
    uncertainty_assumed: bool = False

    def __hash__(self) -> int:
        return hash(self.name)

    def frozen(self) -> Species:
        """Return the same substance as a species of its own, for a part that does not react."""
        return replace(self, name=self.substance + FROZEN, aliases=())

    @property
    def substance(self) -> str:
        """Name without the mark of a frozen part."""
        return self.name.removesuffix(FROZEN)

    @property
    def condensed(self) -> bool:
        """True for a solid or liquid."""
        return self.phase != "gas"

    @property
    def temperature_range(self) -> tuple[float, float]:
        """Range of the data themselves, [K]."""
        return self.pieces[0].low, self.pieces[-1].high

    @cached_property
    def molar_mass(self) -> float:
        """Molar mass, [kg/mol]."""
        return molar_mass(self.elements, self.charge)

    @cached_property
    def extended_pieces(self) -> tuple[Piece, ...]:
        """The pieces with one of constant Cp° before the first and one after the last."""
        first, last = self.pieces[0], self.pieces[-1]
        below = Piece(0.0, first.low, constant_heat_capacity(first.coefficients, first.low), first.form)
        above = Piece(last.high, np.inf, constant_heat_capacity(last.coefficients, last.high), last.form)
        return (below, *self.pieces, above)

    @property
    def pressure_entropy_R(self) -> float:
        """What takes S°/R from the record's own standard pressure to 1 bar (zero for condensed species)."""
        return 0.0 if self.condensed else log(self.reference_pressure / STANDARD_PRESSURE)

    def form_at(self, T: float) -> str:
        """Name of the crystal form that the data stand for at ``T`` [K]; empty where there is one only."""
        return next(piece.form for piece in self.extended_pieces if piece.high >= T)

    def heat_capacity(self, T: ArrayLike) -> Any:
        """Cp° [J/mol/K] at ``T`` [K], by eq. (1) of ``polynomial``."""
        return self.gas_constant * self._evaluate(T, lambda a, t: heat_capacity_R(a, t))

    def enthalpy(self, T: ArrayLike) -> Any:
        """H° [J/mol] at ``T`` [K], elements at 298.15 K as zero, by eq. (2) of ``polynomial``."""
        return self.gas_constant * self._evaluate(T, lambda a, t: t * enthalpy_RT(a, t, np.log(t)))

    def entropy(self, T: ArrayLike) -> Any:
        """S° [J/mol/K] at ``T`` [K] and 1 bar, by eq. (3) of ``polynomial``."""
        shift = self.pressure_entropy_R
        return self.gas_constant * self._evaluate(T, lambda a, t: entropy_R(a, t, np.log(t)) + shift)

    def gibbs_energy(self, T: ArrayLike) -> Any:
        """G° = H° - T S° [J/mol] at ``T`` [K] and 1 bar."""
        return self.enthalpy(T) - np.asarray(T, float) * self.entropy(T)

    @property
    def standard_enthalpy(self) -> float:
        """H° [J/mol] at 298.15 K: the enthalpy of formation."""
        return float(self.enthalpy(STANDARD_TEMPERATURE))

    @property
    def standard_entropy(self) -> float:
        """S° [J/mol/K] at 298.15 K and 1 bar."""
        return float(self.entropy(STANDARD_TEMPERATURE))

    def _evaluate(self, T: ArrayLike, function: Callable[[Any, Any], Any]) -> Any:
        """Apply ``function(coefficients, T)`` piece by piece; a break belongs to the piece below it."""
        t = np.asarray(T, dtype=float)
        if not np.all(t > 0.0):
            raise ValueError(f"temperature must be above 0 K, got {T!r}")
        pieces = self.extended_pieces
        index = np.searchsorted([piece.high for piece in pieces], t, side="left")
        result: NDArray[np.float64] = np.empty_like(t)
        for k in np.unique(index):
            mask = index == k
            result[mask] = function(pieces[k].coefficients, t[mask])
        return result if result.ndim else float(result)
