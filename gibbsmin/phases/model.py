"""What every phase answers, whatever its mixing model.

A new model is one file beside this one with a class of these members, and one line in `states.system` that says
which species it gathers. Arrays run over the species of the phase alone.
"""

from __future__ import annotations

from typing import Any, Protocol


class Phase(Protocol):
    """A set of species that mix, or one pure solid or liquid."""

    @property
    def name(self) -> str:
        """Name in results."""

    @property
    def members(self) -> tuple[int, ...]:
        """Numbers of its species in the system."""

    def ln_activity(self, x: Any, pressure: float) -> Any:
        """Logarithm of the activities, standard state 1 bar, at mole fractions ``x`` [-] and ``pressure`` [Pa]."""

    def volume(self, amount: Any, temperature: Any, pressure: Any) -> Any:
        """Volume [m3] of ``amount`` [mol] at ``temperature`` [K] and ``pressure`` [Pa]."""
