"""The ideal gas: a_j = x_j P/P°, V = N R T/P (IUPAC Green Book, 3rd ed., 2007, section 2.11)."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np

from gibbsmin.constants import STANDARD_PRESSURE, R


@dataclass(frozen=True)
class IdealGas:
    """A mixture of ideal gases.

    Attributes
    ----------
    name : str
        Name in results.
    members : tuple of int
        Numbers of its species in the system.
    """

    name: str
    members: tuple[int, ...]

    def ln_activity(self, x: Any, pressure: float) -> Any:
        """ln(x P/P°) at mole fractions ``x`` [-] and ``pressure`` [Pa]."""
        with np.errstate(divide="ignore"):
            return np.log(x) + np.log(pressure / STANDARD_PRESSURE)

    def volume(self, amount: Any, temperature: Any, pressure: Any) -> Any:
        """Volume N R T/P [m3] of ``amount`` [mol] at ``temperature`` [K] and ``pressure`` [Pa]."""
        return amount * R * temperature / pressure
