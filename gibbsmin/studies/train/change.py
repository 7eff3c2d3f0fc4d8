"""What a step does to its inlet: it settles, or it changes its temperature and pressure without reacting."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Final, Protocol

import numpy as np
from numpy.typing import NDArray

from gibbsmin.errors import InputError
from gibbsmin.states.batch import Batch
from gibbsmin.states.system import System, constraint_row
from gibbsmin.studies.expansion import expansion
from gibbsmin.studies.sweep import solve_in_chunks
from gibbsmin.studies.train.mixing import temperature_of_enthalpy, temperature_of_entropy
from gibbsmin.studies.train.stream import Stream, Substances

Floats = NDArray[np.float64]
States = NDArray[np.intp]


@dataclass(frozen=True)
class Conditions:
    """What a step holds, in every state.

    Attributes
    ----------
    thermal : str
        ``"temperature"``, ``"heat"`` or ``"entropy"``; adiabatic is no heat.
    value : array (states,)
        Temperature [K], heat put in [J or W], or isentropic efficiency [-].
    pressure : array (states,) or None
        Of the outlet, [Pa]; None for that of the inlet.
    drop : array (states,) or None
        How far the pressure of the outlet is below that of the inlet, [Pa]; None for not at all.
    """

    thermal: str
    value: Floats
    pressure: Floats | None = None
    drop: Floats | None = None

    def outlet_pressure(self, inlet: Stream, states: States) -> Floats:
        """Pressure of the outlet, (states,), [Pa]; InputError where nothing is left of it."""
        if self.pressure is not None:
            return self.pressure[states]
        P = inlet.pressure if self.drop is None else inlet.pressure - self.drop[states]
        if np.any(P <= 0.0):
            raise InputError("a pressure drop takes more than the pressure of the inlet")
        return P


@dataclass(frozen=True)
class Changed:
    """What comes out of a change.

    Attributes
    ----------
    outlet : Stream
    heat, work : array (states,)
        Put in, [J or W].
    batch : Batch or None
        The settled states; None for a change without reaction.
    """

    outlet: Stream
    heat: Floats
    work: Floats
    batch: Batch | None = None


class Change(Protocol):
    """What a step does to its inlet."""

    def __call__(self, inlet: Stream, states: States) -> Changed:
        """Change the inlet of these states."""


@dataclass(frozen=True)
class Unreacted:
    """A change of temperature and pressure with the composition kept."""

    conditions: Conditions

    def __call__(self, inlet: Stream, states: States) -> Changed:
        """Change the inlet of these states.

        Raises
        ------
        InputError
            It holds a fuel by analysis, or its temperature is not known.
        """
        if inlet.atoms or np.isnan(inlet.enthalpy[inlet.total > 0.0]).any():
            raise InputError(
                "a stream that is to change without reacting holds a fuel by analysis, or is of unknown temperature"
            )
        thermal, value = self.conditions.thermal, self.conditions.value[states]
        P = self.conditions.outlet_pressure(inlet, states)
        zero = np.zeros(len(states))
        if thermal == "temperature":
            outlet = Stream.of(inlet.substances, inlet.amounts, value, P)
            return Changed(outlet, outlet.enthalpy - inlet.enthalpy, zero)
        if thermal == "heat":
            H = inlet.enthalpy + value
            T = temperature_of_enthalpy(inlet.substances, inlet.amounts, H, inlet.temperature)
            S = inlet.substances.entropy(inlet.amounts, T, P)
            return Changed(Stream(inlet.substances, inlet.amounts, T, P, H, S), value, zero)
        guess = inlet.temperature * (P / inlet.pressure) ** 0.25
        ideal = temperature_of_entropy(inlet.substances, inlet.amounts, inlet.entropy, P, guess)
        work = inlet.substances.enthalpy(inlet.amounts, ideal) - inlet.enthalpy
        work = np.where(work < 0.0, work * value, work / value)
        T = temperature_of_enthalpy(inlet.substances, inlet.amounts, inlet.enthalpy + work, ideal)
        outlet = Stream.of(inlet.substances, inlet.amounts, T, P)
        return Changed(outlet, zero, outlet.enthalpy - inlet.enthalpy)


@dataclass(frozen=True)
class Settling:
    """A mixture that settles.

    Attributes
    ----------
    system : System
        What may form, and the constraints and reactions with an approach temperature.
    conditions : Conditions
    held_shares : mapping of str to (mapping of str to float, array (states,))
        For a constraint by name: what of the inlet it counts, by species or `CARBON`, and the part that it holds, [-].
    held_sums : mapping of str to array (states,)
        For a constraint by name: the amount that it holds, [mol or mol/s].
    approach : mapping of str to array (states,)
        Approach temperatures, [K].
    """

    system: System
    conditions: Conditions
    held_shares: Mapping[str, tuple[Mapping[str, float], Floats]] = field(default_factory=dict)
    held_sums: Mapping[str, Floats] = field(default_factory=dict)
    approach: Mapping[str, Floats] = field(default_factory=dict)

    def __call__(self, inlet: Stream, states: States) -> Changed:
        """Settle the inlet of these states; where it is not certified the outlet is nan."""
        thermal, value = self.conditions.thermal, self.conditions.value[states]
        P = self.conditions.outlet_pressure(inlet, states)
        b = self.elements(inlet, states)
        lost = np.asarray(np.isnan(b).any(axis=1))  # a step before was not certified: a feed of nothing is not, either
        b, P = np.where(lost[:, None], 0.0, b), np.where(lost, 1e5, P)
        H_in, S_in = np.where(lost, 0.0, inlet.enthalpy), np.where(lost, 0.0, inlet.entropy)
        zero = np.zeros(len(states))
        system = self.system
        approach = {name: values[states] for name, values in self.approach.items()}
        if thermal == "temperature":
            batch = solve_in_chunks(system, b, {"temperature": value, "pressure": P}, approach=approach)
            return Changed(outlet_of(batch, inlet.substances), batch.enthalpy - inlet.enthalpy, zero, batch)
        if thermal == "heat":
            H = H_in + value
            batch = solve_in_chunks(system, b, {"enthalpy": H, "pressure": P}, approach=approach)
            return Changed(outlet_of(batch, inlet.substances), value, zero, batch)
        batch = expansion(system, b, S_in, H_in, P, value)
        return Changed(outlet_of(batch, inlet.substances), zero, batch.enthalpy - inlet.enthalpy, batch)

    def elements(self, inlet: Stream, states: States) -> Floats:
        """Amount of each element of the inlet, and what each constraint holds, (states, E), [mol or mol/s]."""
        rows = _rows(self.system, inlet.substances)
        b = inlet.amounts @ rows
        at = {name: k for k, name in enumerate(self.system.elements)}
        for symbol, n in inlet.atoms.items():
            b[:, at[symbol]] += n
        for name, (parts, share) in self.held_shares.items():
            brought = sum(c * _brought(inlet, what) for what, c in parts.items())
            b[:, at[constraint_row(name)]] = share[states] * brought
        for name, values in self.held_sums.items():
            b[:, at[constraint_row(name)]] = values[states]
        return b


DUST: Final = 1e-24
"""Share of a stream below which a species does not go on: less than a molecule in a mole."""

CARBON = "carbon of fuels"
"""Stands for the carbon of fuels by analysis among what a constraint counts."""


def _brought(inlet: Stream, what: str) -> Floats:
    """Amount of a species of the inlet, or the carbon of its fuels."""
    if what == CARBON:
        return np.asarray(inlet.atoms.get("C", np.zeros(len(inlet))))
    return inlet.named(what)


def outlet_of(batch: Batch, substances: Substances) -> Stream:
    """Stream of settled states, without what no step further on could tell from nothing."""
    amounts = np.zeros((len(batch), len(substances)))
    dust = DUST * batch.amounts.sum(axis=1, keepdims=True)
    amounts[:, [substances.index[name] for name in batch.system.species]] = np.where(
        batch.amounts < dust, 0.0, batch.amounts
    )
    return Stream(substances, amounts, batch.temperature, batch.pressure, batch.enthalpy, batch.entropy)


def _rows(system: System, substances: Substances) -> Floats:
    """Contribution of each substance to each balance of a system, (S, E)."""
    rows = np.zeros((len(substances), len(system.elements)))
    for k, record in enumerate(substances.records):
        j = system.index.get(record.name)
        if j is not None:
            rows[k] = system.element_matrix[:, j]
            continue
        for e, symbol in enumerate(system.elements):
            rows[k, e] = record.elements.get(symbol, 0.0)
    return rows
