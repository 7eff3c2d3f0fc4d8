"""Activities of what may be absent, from the element potentials of a settled mixture.

At equilibrium the chemical potential of any substance made of the elements that take part is the sum of their
potentials (W. B. White, S. M. Johnson and G. B. Dantzig, J. Chem. Phys. 28 (1958) 751):

    ln a_j = Σ_e a_ej λ_e - G°_j/RT                                                                       (1)

so that it is known where the substance has not formed, was left out, or is rarer than any number can say.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from gibbsmin.constants import STANDARD_TEMPERATURE, R
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.thermo.database import load
from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]


def record_of(settled: Settled, name: str) -> Species:
    """Record of a species: that of the study where it has one, else that of the data."""
    return settled.records[name] if name in settled.records else load().get(name)


def ln_activity(settled: Settled, species: Species) -> Floats:
    """Logarithm of the activity of a species, by eq. (1).

    Parameters
    ----------
    settled : Settled
        The mixture.
    species : Species
        It need not be among those that may form.

    Returns
    -------
    array (states,)
        [-]; for a gas that of its partial pressure over 1 bar. nan where the mixture lacks one of its elements, or
        was not certified.
    """
    T = given_temperature(settled)
    nothing = np.full(len(T), np.nan)
    total = -np.asarray(species.gibbs_energy(T)) / (R * T)
    for symbol, count in species.elements.items():
        potential = np.asarray(settled.element_potentials.get(symbol, nothing), float)
        total = total + count * np.where(np.isfinite(potential), potential, np.nan)
    return np.where(np.isfinite(settled.temperature), total, np.nan)


def given_temperature(settled: Settled) -> Floats:
    """Temperature, (states,), [K]; 298.15 K where a state was not certified, so that functions of it can be called."""
    return np.where(np.isfinite(settled.temperature), settled.temperature, STANDARD_TEMPERATURE)


def usable(species: Species, temperature: Floats) -> NDArray[np.bool_]:
    """Whether the data of a species may be used, (states,)."""
    low, high = species.usable
    return np.asarray((temperature >= low) & (temperature <= high), bool)
