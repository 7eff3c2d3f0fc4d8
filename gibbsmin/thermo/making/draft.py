"""A species while it is being made: pieces, notes and uncertainty, all of which the repairs may change."""

from __future__ import annotations

from dataclasses import dataclass, field
from math import inf, log

from gibbsmin.thermo.polynomial import enthalpy_RT, entropy_R, heat_capacity_R
from gibbsmin.thermo.record import R_OF_FIT, Piece

DIGITS = 12
"""Significant digits of a changed b1 or b2: 1e-7 J/mol, and the last bits of the logarithm cannot show."""


@dataclass
class Draft:
    """A record on its way to ``species.json``; the attributes are those of the file."""

    name: str
    pieces: list[Piece]
    source: str
    species_class: str
    aliases: list[str] = field(default_factory=list)
    notes: list[str] = field(default_factory=list)
    enthalpy_uncertainty: float = 0.0
    uncertainty_source: str = ""
    uncertainty_assumed: bool = False
    entropy_uncertainty: float = 0.0
    default: bool = True
    joined: str = ""
    limit: float = inf
    records: list[str] = field(default_factory=list)

    def enthalpy(self, T: float, upper: bool = False) -> float:
        """H° [J/mol] at ``T`` [K]; at a break of the piece above it if ``upper``."""
        return R_OF_FIT * T * float(enthalpy_RT(self._at(T, upper).coefficients, T, log(T)))

    def entropy(self, T: float, upper: bool = False) -> float:
        """S° [J/mol/K] at ``T`` [K]."""
        return R_OF_FIT * float(entropy_R(self._at(T, upper).coefficients, T, log(T)))

    def heat_capacity(self, T: float, upper: bool = False) -> float:
        """Cp° [J/mol/K] at ``T`` [K]."""
        return R_OF_FIT * float(heat_capacity_R(self._at(T, upper).coefficients, T))

    def gibbs_energy(self, T: float, upper: bool = False) -> float:
        """G° [J/mol] at ``T`` [K]."""
        return self.enthalpy(T, upper) - T * self.entropy(T, upper)

    def shift(self, H: float = 0.0, S: float = 0.0, from_T: float = 0.0) -> None:
        """Add constants to H° [J/mol] and S° [J/mol/K] of the pieces that start at ``from_T`` [K] or above."""
        self.pieces = [moved(piece, H, S) if piece.low >= from_T else piece for piece in self.pieces]

    def doubt(self, u_H: float, source: str, assumed: bool = False) -> None:
        """Set the uncertainty of H [J/mol] and where it comes from."""
        self.enthalpy_uncertainty, self.uncertainty_source, self.uncertainty_assumed = u_H, source, assumed

    def reaches_298(self) -> bool:
        """Tell whether the record starts at 300 K or below: 1.85 K of extrapolation does no harm."""
        return self.pieces[0].low <= 300.0 and self.pieces[-1].high >= 298.15

    def _at(self, T: float, upper: bool) -> Piece:
        for piece in self.pieces:
            if piece.high > T or (piece.high == T and not upper):
                return piece
        return self.pieces[-1]


def moved(piece: Piece, H: float, S: float) -> Piece:
    """Return the piece with constants added to H° [J/mol] and S° [J/mol/K]."""
    *heat, b1, b2 = piece.coefficients
    b1 = b1 + H / R_OF_FIT if H else b1
    b2 = b2 + S / R_OF_FIT if S else b2
    return piece._replace(coefficients=(*heat, rounded(b1), rounded(b2)))


def rounded(value: float) -> float:
    """Return the value rounded to the digits that are shipped."""
    return float(f"{value:.{DIGITS}g}")
