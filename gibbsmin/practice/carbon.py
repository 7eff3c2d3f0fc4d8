"""Activity of carbon in a gas, whether or not graphite may form.

Graphite is the reference: ln a_C = mu_C/RT - G°_graphite/RT, and mu_C/RT is the element potential of carbon.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray

from gibbsmin.constants import R
from gibbsmin.thermo.record import Species


def carbon_activity(potential: ArrayLike, graphite: Species, temperature: ArrayLike) -> NDArray[np.float64]:
    """Activity of carbon against graphite.

    Parameters
    ----------
    potential : array (states,)
        Element potential of carbon divided by RT, [-].
    graphite : Species
        The record of graphite.
    temperature : array (states,)
        [K].

    Returns
    -------
    array (states,)
        a_C, [-]: 1 where graphite is present or just about to be.
    """
    T = np.asarray(temperature, float)
    ln_a = np.asarray(potential, float) - np.asarray(graphite.gibbs_energy(T)) / (R * T)
    activity: NDArray[np.float64] = np.exp(np.minimum(ln_a, 700.0))
    return activity
