"""One answer: amounts, potentials, properties and certificate."""

from __future__ import annotations

from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np

from gibbsmin.constants import STANDARD_PRESSURE
from gibbsmin.states.certificate import Certificate
from gibbsmin.states.response import Response, response
from gibbsmin.states.system import GAS, Array, System

if TYPE_CHECKING:
    import pandas as pd

    from gibbsmin.thermo.record import Species

TRACE = 1.0e-6
"""Share of all amounts above which the use of a species outside the range of its data is worth a warning."""


class State:
    """A state at equilibrium. Arrays end in ``_array``; their named forms are pandas Series.

    Parameters
    ----------
    system : System
    temperature, pressure : float
        [K], [Pa].
    amounts : (S,) array
        [mol].
    element_potentials : (E,) array
        Divided by RT [-].
    enthalpy, entropy : float
        [J], [J/K]; elements at 298.15 K are the zero of enthalpy.
    certificate : Certificate
    offset : (S,) array or None
        What approach temperatures add to the potentials of the species [-].
    """

    def __init__(
        self,
        system: System,
        temperature: float,
        pressure: float,
        amounts: Array,
        element_potentials: Array,
        enthalpy: float,
        entropy: float,
        certificate: Certificate,
        offset: Array | None = None,
    ) -> None:
        self.system = system
        self.temperature = temperature
        self.pressure = pressure
        self.amounts_array = amounts
        self.element_potentials_array = element_potentials
        self.enthalpy = enthalpy
        self.entropy = entropy
        self.certificate = certificate
        self.offset = np.zeros(len(system.species)) if offset is None else offset

    @property
    def amounts(self) -> pd.Series[float]:
        """Amount of every species [mol]; 0.0 where absent."""
        return _named(self.amounts_array, self.system.species, "amount, mol")

    @cached_property
    def mole_fractions_array(self) -> Array:
        """Mole fraction of every species within its phase, (S,) [-]; 0.0 where absent."""
        x = np.zeros_like(self.amounts_array)
        for phase in self.system.phase_models:
            members = list(phase.members)
            total = self.amounts_array[members].sum()
            if total > 0.0:
                x[members] = self.amounts_array[members] / total
        return x

    @property
    def mole_fractions(self) -> pd.Series[float]:
        """Mole fraction of every species within its phase [-]; 0.0 where absent."""
        return _named(self.mole_fractions_array, self.system.species, "mole fraction")

    @cached_property
    def ln_activity_array(self) -> Array:
        """Logarithm of the activity of every species, (S,) [-], for gases that of x P/P°; standard state 1 bar.

        From the element potentials, so that it is finite however rare or absent the species is; minus infinity only
        where the system holds none of one of its elements.
        """
        lam = self.element_potentials_array
        A = self.system.element_matrix
        known = np.isfinite(lam)
        ln_a: Array = lam[known] @ A[known] - self.system.standard_potentials(self.temperature) - self.offset
        ln_a[np.any(A[~known] != 0.0, axis=0)] = -np.inf
        return ln_a

    @property
    def ln_activity(self) -> pd.Series[float]:
        """Logarithm of the activity of every species [-]; for gases that of x P/P°, standard state 1 bar."""
        return _named(self.ln_activity_array, self.system.species, "ln activity")

    @property
    def element_potentials(self) -> pd.Series[float]:
        """Multiplier of every element balance, divided by RT [-]; minus infinity for an element that is absent."""
        return _named(self.element_potentials_array, self.system.elements, "element potential")

    @property
    def phase_amounts(self) -> pd.Series[float]:
        """Amount of every phase [mol]; 0.0 where absent."""
        models = self.system.phase_models
        totals = np.array([self.amounts_array[list(phase.members)].sum() for phase in models])
        return _named(totals, self.system.phases, "amount, mol")

    @cached_property
    def affinities_array(self) -> dict[str, float]:
        """Affinity of every absent phase that its data allow at this temperature, nearest to forming first."""
        ln_a, gas, n = self.ln_activity_array, self.system.gas, self.amounts_array
        found: dict[str, float] = {}
        for j in np.flatnonzero(~gas & (n == 0.0)):
            low, high = self.system.records[j].usable
            if low <= self.temperature <= high and np.isfinite(ln_a[j]):
                found[self.system.species[j]] = float(ln_a[j])
        if gas.any() and not n[gas].any():
            ln_x = ln_a[gas] - np.log(self.pressure / STANDARD_PRESSURE)
            found[GAS] = float(np.log(np.exp(ln_x).sum()))
        return dict(sorted(found.items(), key=lambda item: -item[1]))

    @property
    def affinities(self) -> pd.Series[float]:
        """How far each absent phase is from appearing [RT]: ln of its saturation, zero at the edge, negative below.

        For a gas that is absent it is the logarithm of the sum of its partial pressures over the pressure.
        """
        return _named(np.array(list(self.affinities_array.values())), list(self.affinities_array), "affinity, RT")

    @property
    def gas_amount(self) -> float:
        """Amount of the gas [mol]."""
        return float(self.amounts_array[self.system.gas].sum())

    @property
    def mass(self) -> float:
        """Mass of everything [kg]."""
        return float(self.amounts_array @ self.system.molar_masses)

    @cached_property
    def volume(self) -> float:
        """Volume [m3]; that of condensed phases is neglected."""
        T, P, n = self.temperature, self.pressure, self.amounts_array
        return float(sum(phase.volume(n[list(phase.members)].sum(), T, P) for phase in self.system.phase_models))

    @property
    def internal_energy(self) -> float:
        """H - PV [J]."""
        return self.enthalpy - self.pressure * self.volume

    @property
    def gibbs_energy(self) -> float:
        """H - TS [J]."""
        return self.enthalpy - self.temperature * self.entropy

    @property
    def density(self) -> float:
        """Mass of everything over the volume of the gas [kg/m3]; infinite where there is no gas."""
        return self.mass / self.volume if self.volume > 0.0 else np.inf

    @property
    def mean_molar_mass(self) -> float:
        """Mass over amount of the gas, or of everything where there is no gas [kg/mol]."""
        part = self.system.gas if self.gas_amount > 0.0 else np.ones_like(self.system.gas)
        n = self.amounts_array[part]
        return float(n @ self.system.molar_masses[part] / n.sum())

    @cached_property
    def response(self) -> Response:
        """How the state answers small changes: all properties from here to `frozen_sound_speed` in one."""
        return response(self.system, self.temperature, self.pressure, self.amounts_array, self.enthalpy)

    @property
    def heat_capacity(self) -> float:
        """(dH/dT)_P with the composition following [J/K]; infinite on a plateau (melting, boiling)."""
        return self.response.heat_capacity

    @property
    def frozen_heat_capacity(self) -> float:
        """(dH/dT)_P with the composition frozen [J/K]."""
        return self.response.frozen_heat_capacity

    @property
    def heat_capacity_constant_volume(self) -> float:
        """(dU/dT)_V with the composition following [J/K]; nan without a gas."""
        return self.response.heat_capacity_constant_volume

    @property
    def heat_capacity_ratio(self) -> float:
        """Cp/Cv with the composition following [-]; nan without a gas. Not the isentropic exponent, unless frozen."""
        return self.heat_capacity / self.heat_capacity_constant_volume

    @property
    def thermal_expansion(self) -> float:
        """(d ln V/dT)_P [1/K]; infinite where a liquid boils, nan without a gas or where something melts."""
        return self.response.thermal_expansion

    @property
    def compressibility(self) -> float:
        """-(d ln V/dP)_T [1/Pa]; infinite where a liquid boils, nan without a gas."""
        return self.response.compressibility

    @property
    def isentropic_exponent(self) -> float:
        """(d ln P/d ln rho)_S with the composition following [-]; nan without a gas."""
        return self.response.isentropic_exponent

    @property
    def frozen_isentropic_exponent(self) -> float:
        """(d ln P/d ln rho)_S with the composition frozen, which is the ratio of the frozen heat capacities [-]."""
        return self.response.frozen_isentropic_exponent

    @property
    def sound_speed(self) -> float:
        """Speed of sound with the composition following [m/s]; condensed phases move along with the gas."""
        return self.response.sound_speed

    @property
    def frozen_sound_speed(self) -> float:
        """Speed of sound with the composition frozen [m/s]; condensed phases move along with the gas."""
        return self.response.frozen_sound_speed

    @cached_property
    def warnings(self) -> list[str]:
        """Sentences on what the answer rests on: species above a trace used outside the range of their data."""
        total = self.amounts_array.sum()
        found = []
        for j in np.flatnonzero(self.amounts_array > TRACE * total):
            record = self.system.records[j]
            low, high = record.temperature_range
            if not low - 2.0 <= self.temperature <= high:  # many records begin at 300 K, not at 298.15 K
                found.append(
                    f"{record.name} is used at {self.temperature:.0f} K, outside the {low:.0f} to {high:.0f} K of its "
                    "data: its heat capacity is taken as constant beyond."
                )
        for j in np.flatnonzero(~self.system.gas & (self.ln_activity_array > 0.0) & (self.amounts_array == 0.0)):
            record = self.system.records[j]
            low, high = record.usable
            if not low <= self.temperature <= high and not self._follower(record):
                found.append(
                    f"{record.name} would be there if its data reached so far; they may be used from {low:.0f} to "
                    f"{high:.0f} K only. Where energy or entropy is held, another temperature may then meet it as well."
                )
        return found

    def _follower(self, record: Species) -> bool:
        """Tell whether another condensed species of the same composition may be used at this temperature."""
        return any(
            other.condensed
            and other.elements == record.elements
            and other.usable[0] <= self.temperature <= other.usable[1]
            for other in self.system.records
        )

    def __repr__(self) -> str:
        verdict = "certified" if self.certificate.ok else "not certified"
        return f"State({self.temperature:.2f} K, {self.pressure:.5g} Pa, {verdict})"


def _named(values: Array, names: list[str], title: str) -> pd.Series[float]:
    """Make a pandas Series; pandas is imported only when one is asked for."""
    import pandas as pd

    return pd.Series(values, index=names, name=title)
