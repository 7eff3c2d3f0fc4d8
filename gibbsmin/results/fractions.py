"""Mole fractions of the gas in many states at once."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray


def gas_fractions(amounts: NDArray[np.float64], gas: NDArray[np.bool_]) -> NDArray[np.float64]:
    """Amounts over the amount of the gas.

    Parameters
    ----------
    amounts : array (states, S)
        Amount of every species, [mol].
    gas : array (S,)
        Which species are gases.

    Returns
    -------
    array (states, S)
        [-]; zero where there is no gas, and for what is no gas.
    """
    total = amounts[:, gas].sum(axis=1, keepdims=True)  # (states, 1)
    part = np.where(gas, amounts, 0.0)
    fractions: NDArray[np.float64] = np.divide(part, total, out=np.zeros_like(amounts), where=total > 0.0)
    return fractions
