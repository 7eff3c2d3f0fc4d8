"""Many answers at once, as arrays."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from gibbsmin.constants import STANDARD_PRESSURE, R
from gibbsmin.errors import NotCertified
from gibbsmin.solver.outcome import Outcome
from gibbsmin.solver.status import MEANING, SOLVED
from gibbsmin.states.certificate import Certificate
from gibbsmin.states.state import State
from gibbsmin.states.system import Array, System


@dataclass(frozen=True)
class Batch:
    """States of one system, first axis throughout; nan where a state was not found.

    Attributes
    ----------
    system : System
    outcome : Outcome
        What the solver gave.
    offset : (states, S) array or None
        What approach temperatures add to the potentials of the species [-]; None where there are none.
    """

    system: System
    outcome: Outcome
    offset: Array | None = None

    def __len__(self) -> int:
        return int(self.outcome.status.size)

    @property
    def temperature(self) -> Array:
        """Temperature, (states,) [K]."""
        return self._found(self.outcome.temperature)

    @property
    def pressure(self) -> Array:
        """Pressure, (states,) [Pa]."""
        return self._found(STANDARD_PRESSURE * self.outcome.pressure)

    @property
    def certified(self) -> NDArray[np.bool_]:
        """Whether the certificate of each state holds, (states,)."""
        certified: NDArray[np.bool_] = self.outcome.status == SOLVED
        return certified

    @property
    def reason(self) -> list[str]:
        """Why a state is not certified and what to try, one text a state; empty where it is certified."""
        return [" ".join(MEANING[int(status)]).strip() for status in self.outcome.status]

    @property
    def amounts(self) -> Array:
        """Amount of every species, (states, S) [mol]."""
        return self._found(self.outcome.n)

    @property
    def element_potentials(self) -> Array:
        """Multiplier of every element balance, divided by RT, (states, E) [-]."""
        return self._found(self.outcome.lam)

    @property
    def element_residual(self) -> Array:
        """Largest imbalance of an element, relative to its own amount, (states,) [-]."""
        return self._found(self.outcome.residual)

    @property
    def gap(self) -> Array:
        """Duality gap a mole of mixture, (states,) [RT]."""
        return self._found(self.outcome.gap)

    @property
    def held_residual(self) -> Array:
        """What the held energy or entropy leaves unmet, as a relative error of T, (states,) [-]; zero for held T."""
        return self._found(self.outcome.held)

    @property
    def worst_affinity(self) -> Array:
        """Largest violation of a phase's or species' condition, (states,) [RT]."""
        return self._found(self.outcome.affinity)

    @property
    def steps(self) -> NDArray[np.int64]:
        """Newton steps of each state, (states,)."""
        steps: NDArray[np.int64] = self.outcome.steps
        return steps

    @property
    def enthalpy(self) -> Array:
        """Enthalpy, (states,) [J]; elements at 298.15 K are its zero."""
        return self._found(R * self.outcome.enthalpy)

    @property
    def entropy(self) -> Array:
        """Entropy, (states,) [J/K]."""
        return self._found(R * self.outcome.entropy)

    @property
    def gibbs_energy(self) -> Array:
        """Gibbs energy H - TS, (states,) [J]."""
        return self.enthalpy - self.temperature * self.entropy

    @cached_property
    def volume(self) -> Array:
        """Volume, (states,) [m3]; that of condensed phases is neglected."""
        total = np.zeros(len(self))
        for phase in self.system.phase_models:
            amount = self.amounts[:, list(phase.members)].sum(axis=1)
            total = total + phase.volume(amount, self.temperature, self.pressure)
        return total

    @property
    def internal_energy(self) -> Array:
        """Internal energy H - PV, (states,) [J]."""
        return self.enthalpy - self.pressure * self.volume

    def state(self, i: int) -> State:
        """Return state ``i``; NotCertified if it was not found or not proved."""
        out = self.outcome
        status = int(out.status[i])
        if status != SOLVED:
            raise NotCertified(*MEANING[status])
        return State(
            self.system,
            float(out.temperature[i]),
            STANDARD_PRESSURE * float(out.pressure[i]),
            out.n[i],
            out.lam[i],
            R * float(out.enthalpy[i]),
            R * float(out.entropy[i]),
            Certificate(float(out.residual[i]), float(out.gap[i]), float(out.affinity[i]), float(out.held[i])),
            None if self.offset is None else self.offset[i],
        )

    def _found(self, values: Array) -> Array:
        """Replace the rows of states that were not found or not proved by nan."""
        if self.certified.all():
            return values
        kept = self.certified.reshape(-1, *[1] * (values.ndim - 1))
        return np.where(kept, values, np.nan)
