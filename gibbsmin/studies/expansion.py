"""Expansion or compression to a pressure: ideally at held entropy, really with an isentropic efficiency."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from gibbsmin.states.batch import Batch
from gibbsmin.states.system import System
from gibbsmin.studies.sweep import Progress, solve_in_chunks

Floats = NDArray[np.float64]


def expansion(
    system: System,
    element_amounts: Floats,
    entropy: Floats,
    enthalpy: Floats,
    pressure: Floats,
    efficiency: Floats,
    progress: Progress | None = None,
) -> Batch:
    """Find the states in which adiabatic expansions or compressions end.

    Parameters
    ----------
    system : System
        What may form.
    element_amounts : array (states, E)
        Amount of each element, [mol].
    entropy, enthalpy : array (states,)
        Of the inlet, [J/K] and [J].
    pressure : array (states,)
        Of the outlet, [Pa].
    efficiency : array (states,)
        Isentropic efficiency, above 0 and at most 1, [-].
    progress : callable, optional
        Called with the states done and all states.

    Returns
    -------
    Batch
        States at the outlet; where not even the ideal end could be found, that state with its reason.

    Notes
    -----
    With h1 the inlet and h2s the ideal outlet at the entropy of the inlet, the outlet has

        h2 = h1 + eta (h2s - h1)    where work is gained (h2s < h1),    h2 = h1 + (h2s - h1)/eta    where it is spent

    (common practice, no source). The composition follows on the way and at the end.
    """
    ideal = solve_in_chunks(system, element_amounts, {"entropy": entropy, "pressure": pressure}, progress)
    work = ideal.enthalpy - enthalpy  # (states,), nan where there is no ideal end
    outlet = enthalpy + np.where(work < 0.0, efficiency * work, work / efficiency)
    real = np.isfinite(outlet) & (efficiency < 1.0)
    if not real.any():
        return ideal
    held = {"enthalpy": outlet[real], "pressure": pressure[real]}
    found = solve_in_chunks(system, element_amounts[real], held)
    outcome = type(ideal.outcome)(*map(np.array, ideal.outcome))
    for whole, part in zip(outcome, found.outcome, strict=True):
        whole[real] = part
    return Batch(system, outcome)
