"""A pure solid or liquid: activity one at every pressure, its volume neglected beside that of a gas."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np


@dataclass(frozen=True)
class Pure:
    """One condensed species as a phase of its own.

    Attributes
    ----------
    name : str
        Name in results: that of the species.
    members : tuple of int
        Number of its species in the system.
    """

    name: str
    members: tuple[int, ...]

    def ln_activity(self, x: Any, pressure: float) -> Any:
        """Zero: the effect of pressure (about 1e-3 RT a bar and litre) is neglected."""
        return np.zeros_like(np.asarray(x, float))

    def volume(self, amount: Any, temperature: Any, pressure: Any) -> Any:
        """Zero [m3]: molar volumes of condensed species are not in the data."""
        return np.zeros_like(np.asarray(amount * temperature, float))
