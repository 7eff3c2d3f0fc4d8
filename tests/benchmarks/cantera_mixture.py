"""A system of gibbsmin as Cantera objects: the same species with the same standard-state functions."""

from __future__ import annotations

import cantera as ct
import numpy as np

from gibbsmin.solver.status import GAP_LIMIT
from gibbsmin.states.system import System
from gibbsmin.thermo.record import Species

CLOSE = 1.0e-6
"""Excess of Gibbs energy, in RT a mole, and relative error of an element up to which Cantera's answer is the same."""
SMALL = 1.0e-9  # m3/kmol: a condensed species without volume, as in gibbsmin


def solution_of(records: list[Species]) -> ct.Solution:
    """Make an ideal gas of some species."""
    return ct.Solution(thermo="ideal-gas", species=[_species(record) for record in records])


def mixture_of(system: System) -> ct.Mixture:
    """Make a mixture: the gas, and every condensed species as a phase of its own, in the order of the system."""
    gases = [record for record in system.records if not record.condensed]
    condensed = [record for record in system.records if record.condensed]
    if [*gases, *condensed] != list(system.records):
        raise ValueError("the gases of the system must come first")
    pure = [ct.Solution(thermo="fixed-stoichiometry", species=[_species(record)]) for record in condensed]
    return ct.Mixture([solution_of(gases), *pure])


def _species(record: Species) -> ct.Species:
    """Nine coefficients a range, with the pieces of constant Cp beyond the data, as far as the species may be used."""
    low, high = record.usable
    scale = record.gas_constant / (ct.gas_constant / 1000.0)
    pieces = [
        (max(piece.low, low), min(piece.high, high), *(scale * a for a in piece.coefficients))
        for piece in record.extended_pieces
        if max(piece.low, low) < min(piece.high, high)
    ]
    coefficients = [float(len(pieces)), *(number for piece in pieces for number in piece)]
    species = ct.Species(record.name, dict(record.elements))
    species.thermo = ct.Nasa9PolyMultiTempRegion(low, high, record.reference_pressure, coefficients)
    if not record.condensed:
        return species
    data = {**species.input_data, "equation-of-state": {"model": "constant-volume", "molar-volume": SMALL}}
    return ct.Species.from_dict(data)


def verdict(system: System, T: float, P: float, lam: np.ndarray, feed: np.ndarray, theirs: np.ndarray) -> str:
    """Judge amounts (S,) [mol] that Cantera found by the certified element potentials of the state.

    Returns
    -------
    str
        ``"same"``; ``"beyond"`` if it made use of a species where its data do not reach, which is another problem;
        ``"wrong"`` if the elements do not balance or the Gibbs energy is not the lowest.
    """
    low, high = np.array([record.usable for record in system.records]).T
    if (theirs[(low > T) | (high < T)] > CLOSE * theirs.sum()).any():
        return "beyond"
    A, b = system.element_matrix, system.element_matrix @ feed
    there = theirs > 0.0
    ln_a = np.where(system.gas, np.log(P / 1.0e5), 0.0)[there]
    gas = np.maximum(theirs, 1.0e-300) / theirs[system.gas].sum()
    ln_a += np.where(system.gas, np.log(gas), 0.0)[there]
    above = theirs[there] @ (system.standard_potentials(T)[there] + ln_a - lam @ A[:, there]) / theirs.sum()
    unbalanced = np.abs(A @ theirs - b).max() / b.min()
    return "same" if -GAP_LIMIT * 100.0 < above < CLOSE and unbalanced < CLOSE else "wrong"
