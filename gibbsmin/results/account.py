"""What crosses the boundary of a study: energy of the feeds, heat, work, and the second-law account of each state."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from gibbsmin.constants import STANDARD_TEMPERATURE
from gibbsmin.practice.audit import ROUNDING, Audit, audit
from gibbsmin.states.batch import Batch

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class Account:
    """What the feeds of every state bring, and in which form energy is exchanged.

    Attributes
    ----------
    feed_enthalpy, feed_internal_energy, feed_entropy : array (states,) or None
        Of all feeds, each at its own temperature and pressure, [J, J, J/K, or per second]; None where not known.
    lower_heating_value : array (states,) or None
        Of all feeds at 25 degC, [J or W]; None where it is not defined.
    closed : bool
        Whether the mixture is shut in a vessel: its internal energy then counts, else its enthalpy.
    shaft : bool
        Whether the energy that is exchanged is work, as in an expansion; else it is heat.
    given_heat : array (states,) or None
        Heat that is held, [J or W].
    surroundings_temperature : float
        [K].
    source_temperature : float or None
        Of what gives or takes the heat, [K].
    remark : str
        What was assumed of the feeds, or why there is no second-law account; empty where there is nothing to say.
    """

    feed_enthalpy: Floats | None = None
    feed_internal_energy: Floats | None = None
    feed_entropy: Floats | None = None
    lower_heating_value: Floats | None = None
    closed: bool = False
    shaft: bool = False
    given_heat: Floats | None = None
    surroundings_temperature: float = STANDARD_TEMPERATURE
    source_temperature: float | None = None
    remark: str = ""

    @property
    def feed_energy(self) -> Floats | None:
        """Energy of the feeds that counts, (states,), [J or W]."""
        return self.feed_internal_energy if self.closed else self.feed_enthalpy

    def exchanged(self, batch: Batch) -> Floats | None:
        """Energy that the mixture takes up as heat or work, (states,), [J or W]; nan where a state is not certified."""
        if self.feed_energy is None:
            return None
        return np.asarray((batch.internal_energy if self.closed else batch.enthalpy) - self.feed_energy)

    def heat(self, batch: Batch) -> Floats | None:
        """Heat put into the mixture, (states,), [J or W]; None where it is not known."""
        if self.shaft or self.given_heat is not None:
            given = np.zeros(len(batch)) if self.given_heat is None else self.given_heat
            return np.where(batch.certified, given, np.nan)
        return self.exchanged(batch)

    def work(self, batch: Batch) -> Floats | None:
        """Shaft work put into the mixture, (states,), [J or W]; None where it is not known."""
        return self.exchanged(batch) if self.shaft else np.where(batch.certified, 0.0, np.nan)

    def entropies_generated(self, batch: Batch) -> Floats | None:
        """Entropy that every state generates, with its surroundings, (states,), [J/K or W/K]; as `audits` has it."""
        heat = self.heat(batch)
        if self.feed_entropy is None or heat is None or self.work(batch) is None:
            return None
        T, T0 = batch.temperature, self.surroundings_temperature
        T_s = np.where(heat > 0.0, np.maximum(T, T0), np.minimum(T, T0))
        T_s = T_s if self.source_temperature is None else np.full_like(T, self.source_temperature)
        made = batch.entropy - self.feed_entropy - heat / T_s
        turnover = np.abs(batch.entropy) + np.abs(self.feed_entropy) + np.abs(heat / T_s)
        return np.where(np.abs(made) < ROUNDING * turnover, 0.0, made)

    def audits(self, batch: Batch, basis: str) -> list[Audit | None]:
        """Second-law account of every state; None where it is not certified, or a feed is not known.

        Parameters
        ----------
        batch : Batch
            The states.
        basis : str
            ``"mol"`` or ``"mol/s"``.
        """
        heat, work = self.heat(batch), self.work(batch)
        if self.feed_entropy is None or heat is None or work is None:
            return [None] * len(batch)
        entropy, temperature, value = batch.entropy, batch.temperature, self.lower_heating_value
        return [
            audit(
                float(self.feed_entropy[i]),
                float(entropy[i]),
                float(heat[i]),
                float(temperature[i]),
                work=float(work[i]),
                surroundings_temperature=self.surroundings_temperature,
                source_temperature=self.source_temperature,
                heating_value=None if value is None else float(value[i]),
                flow=basis == "mol/s",
            )
            if certified
            else None
            for i, certified in enumerate(batch.certified)
        ]
