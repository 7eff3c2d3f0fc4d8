"""Approach temperatures: named reactions that stop short of equilibrium, or run past it.

A reaction r with coefficients nu_rj (products positive) leaves the reactor with the composition that is equilibrium at
T + dT_r (common practice for reformers, shift and synthesis reactors):

    sum_j nu_rj mu_j/RT = ln K_r(T) - ln K_r(T + dT_r),    ln K_r(T) = -sum_j nu_rj G°_j(T)/RT                  (1)

Only as many equations of equilibrium are changed as there are named reactions. Each is tied to its key species k_r, the
first that it names, and a constant delta is added to the potentials of the key species such that

    sum_k nu_rk delta_k = ln K_r(T) - ln K_r(T + dT_r)        for every named reaction r                       (2)

so that reactions without key species keep their constants at T: methane may lag behind while the shift does not.
"""

from __future__ import annotations

from collections.abc import Mapping
from typing import Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

from gibbsmin.constants import R
from gibbsmin.errors import InputError
from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]

BALANCE: Final = 1e-9
"""Atoms that a reaction may leave over, relative to its largest coefficient."""


class Approaches:
    """The named reactions of a system.

    Parameters
    ----------
    reactions : mapping of str to mapping of str to float
        For each reaction its coefficients by species, products positive; the first species is its key.
    records : mapping of str to Species
        The species of the system.

    Raises
    ------
    InputError
        A species that the system does not have, a reaction that does not balance, or reactions that do not determine
        their key species.
    """

    def __init__(self, reactions: Mapping[str, Mapping[str, float]], records: Mapping[str, Species]) -> None:
        self.reactions = {name: dict(parts) for name, parts in reactions.items()}
        self._records = records
        for name, parts in self.reactions.items():
            _check(name, parts, records)
        self.keys = {name: next(iter(parts)) for name, parts in self.reactions.items()}
        twice = [key for key in self.keys.values() if list(self.keys.values()).count(key) > 1]
        if twice:
            raise InputError(
                f"two reactions with an approach temperature have {twice[0]} as their first species; begin each with "
                "one of its own"
            )
        matrix = np.array([[parts.get(key, 0.0) for key in self.keys.values()] for parts in self.reactions.values()])
        if matrix.size and np.linalg.matrix_rank(matrix) < len(matrix):
            raise InputError("the reactions with an approach temperature depend on one another; leave one out")
        self._inverse = np.linalg.inv(matrix) if matrix.size else matrix

    def __len__(self) -> int:
        return len(self.reactions)

    def offsets(self, temperature: Floats, approach: Mapping[str, ArrayLike]) -> Floats:
        """Constants added to the potentials of the species.

        Parameters
        ----------
        temperature : array (states,)
            T [K].
        approach : mapping of str to array (states,) or float
            dT of reactions by name [K]; zero for one that is not there.

        Returns
        -------
        array (states, S)
            [-], by eq. (2).

        Raises
        ------
        InputError
            A reaction that is not known, or T + dT that is not above zero.
        """
        found = np.zeros((len(temperature), len(self._records)))
        unknown = [name for name in approach if name not in self.reactions]
        if unknown:
            known = ", ".join(self.reactions) or "none"
            raise InputError(f"the system has no reaction {unknown[0]!r} with an approach temperature; it has {known}")
        if not approach:
            return found
        right = np.zeros((len(self), len(temperature)))
        for row, (name, parts) in enumerate(self.reactions.items()):
            change = np.broadcast_to(np.asarray(approach.get(name, 0.0), float), temperature.shape)
            if not np.all(np.isfinite(change) & (temperature + change > 0.0)):
                raise InputError(f"the approach temperature of {name} leaves no temperature above 0 K")
            right[row] = self._ln_k(parts, temperature) - self._ln_k(parts, temperature + change)
        place = {name: j for j, name in enumerate(self._records)}
        found[:, [place[key] for key in self.keys.values()]] = (self._inverse @ right).T
        return found

    def _ln_k(self, parts: Mapping[str, float], T: Floats) -> Floats:
        """Logarithm of K by eq. (1) at 1 bar, (states,)."""
        total = np.zeros(len(T))
        for name, nu in parts.items():
            total -= nu * np.asarray(self._records[name].gibbs_energy(T)) / (R * T)
        return total


def _check(name: str, parts: Mapping[str, float], records: Mapping[str, Species]) -> None:
    """Refuse a reaction whose species are not there or which does not balance."""
    if len(parts) < 2:
        raise InputError(f"the reaction {name} needs at least two species")
    missing = [species for species in parts if species not in records]
    if missing:
        raise InputError(f"the reaction {name} has {missing[0]}, which is not among the species that may form")
    left: dict[str, float] = {}
    for species, nu in parts.items():
        for element, count in records[species].elements.items():
            left[element] = left.get(element, 0.0) + nu * count
    worst = max(left, key=lambda element: abs(left[element]))
    if abs(left[worst]) > BALANCE * max(map(abs, parts.values())):
        raise InputError(f"the reaction {name} does not balance: {left[worst]:+.3g} {worst}")
