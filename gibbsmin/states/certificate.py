"""The proof that a state carries."""

from __future__ import annotations

from dataclasses import dataclass

from gibbsmin.solver.status import AFFINITY_LIMIT, GAP_LIMIT, HELD_LIMIT, RESIDUAL_LIMIT


@dataclass(frozen=True)
class Certificate:
    """What proves that a state is the global minimum, each with its tolerance; all dimensionless.

    Attributes
    ----------
    element_residual : float
        Largest imbalance of an element, relative to its own amount in the feed.
    gap : float
        Duality gap: G/RT minus the sum of element amounts times element potentials, a mole of mixture.
    worst_affinity : float
        Largest ln activity (in units of RT) by which a species or phase that is absent would like to appear, or by
        which a present one is off its potential.
    held_residual : float
        What the held energy or entropy leaves unmet, as a relative error of the temperature; zero where T is held.
    """

    element_residual: float
    gap: float
    worst_affinity: float
    held_residual: float = 0.0

    @property
    def ok(self) -> bool:
        """True where all lie within their tolerances."""
        return (
            self.element_residual <= RESIDUAL_LIMIT
            and self.gap <= GAP_LIMIT
            and self.worst_affinity <= AFFINITY_LIMIT
            and self.held_residual <= HELD_LIMIT
        )

    def __str__(self) -> str:
        verdict = "certified" if self.ok else "NOT certified"
        return (
            f"{verdict}: elements closed to {self.element_residual:.0e} (limit {RESIDUAL_LIMIT:.0e}), duality gap "
            f"{self.gap:.0e} ({GAP_LIMIT:.0e}), worst affinity {self.worst_affinity:.0e} ({AFFINITY_LIMIT:.0e}), "
            f"held to {self.held_residual:.0e} ({HELD_LIMIT:.0e})"
        )
