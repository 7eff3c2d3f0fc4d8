"""What flows between the steps of a train: amounts by species, temperature, pressure, enthalpy and entropy."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from gibbsmin.elements import ATOMIC_WEIGHT
from gibbsmin.practice.audit import feed_enthalpy, feed_entropy
from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]


class Substances:
    """The species of all streams of a train, in the order of their arrays.

    Parameters
    ----------
    records : sequence of Species
        Each once.

    Attributes
    ----------
    records : tuple of Species
    index : dict of str to int
        Place of each by name.
    gas : (S,) bool array
    molar_masses : (S,) array
        [kg/mol].
    """

    def __init__(self, records: Sequence[Species]) -> None:
        self.records = tuple(records)
        self.index = {record.name: k for k, record in enumerate(self.records)}
        self.gas = np.array([not record.condensed for record in self.records], bool)
        self.molar_masses = np.array([record.molar_mass for record in self.records])

    def __len__(self) -> int:
        return len(self.records)

    @cached_property
    def elements(self) -> dict[str, Floats]:
        """Atoms of each element in each species, (S,) each."""
        symbols = dict.fromkeys(symbol for record in self.records for symbol in record.elements)
        return {s: np.array([record.elements.get(s, 0.0) for record in self.records]) for s in symbols}

    def enthalpy(self, amounts: Floats, temperature: Floats) -> Floats:
        """Enthalpy of amounts (states, S) at temperatures (states,), [J]; nan where they are not known."""
        n, T, blank = _known(amounts, temperature)
        here = np.flatnonzero(n.any(axis=0))
        if not here.size:
            return blank
        return np.asarray(feed_enthalpy([self.records[k] for k in here], n[:, here], T)) + blank

    def entropy(self, amounts: Floats, temperature: Floats, pressure: Floats) -> Floats:
        """Entropy of amounts (states, S), the gases mixed, at temperatures and pressures (states,), [J/K]; or nan."""
        n, T, blank = _known(amounts, temperature)
        here = np.flatnonzero(n.any(axis=0))
        if not here.size:
            return blank
        P = np.where(np.isnan(blank), 1e5, pressure)
        return np.asarray(feed_entropy([self.records[k] for k in here], n[:, here], T, P)) + blank

    def heat_capacity(self, amounts: Floats, temperature: Floats) -> Floats:
        """Heat capacity of amounts (states, S) at temperatures (states,), composition frozen, [J/K]."""
        here = np.flatnonzero(amounts.any(axis=0))
        total = np.zeros(len(amounts))
        for k in here:
            total += amounts[:, k] * np.asarray(self.records[k].heat_capacity(temperature))
        return total


def _known(amounts: Floats, temperature: Floats) -> tuple[Floats, Floats, Floats]:
    """Replace what is not known by nothing at 298.15 K; with an array (states,) that is nan there and else zero."""
    known = np.isfinite(amounts).all(axis=1) & np.isfinite(temperature)
    blank = np.where(known, 0.0, np.nan)
    return np.where(known[:, None], amounts, 0.0), np.where(known, temperature, 298.15), blank


@dataclass(frozen=True)
class Stream:
    """A stream in every state.

    Attributes
    ----------
    substances : Substances
        What the columns of ``amounts`` are.
    amounts : array (states, S)
        [mol or mol/s]; nan where a step before was not certified.
    temperature, pressure : array (states,)
        [K], [Pa]; nan where not known.
    enthalpy, entropy : array (states,)
        [J, J/K, or per second].
    atoms : mapping of str to array (states,)
        What a fuel by analysis brings beside species, [mol or mol/s].
    """

    substances: Substances
    amounts: Floats
    temperature: Floats
    pressure: Floats
    enthalpy: Floats
    entropy: Floats
    atoms: Mapping[str, Floats] = field(default_factory=dict)

    @classmethod
    def of(cls, substances: Substances, amounts: Floats, temperature: Floats, pressure: Floats) -> Stream:
        """Make a stream of these amounts at this temperature and pressure."""
        return cls(
            substances, amounts, temperature, pressure,
            substances.enthalpy(amounts, temperature), substances.entropy(amounts, temperature, pressure),
        )  # fmt: skip

    def __len__(self) -> int:
        return len(self.amounts)

    def part(self, states: NDArray[np.intp]) -> Stream:
        """Return some of the states."""
        atoms = {symbol: values[states] for symbol, values in self.atoms.items()}
        T, P, H, S = (values[states] for values in (self.temperature, self.pressure, self.enthalpy, self.entropy))
        return Stream(self.substances, self.amounts[states], T, P, H, S, atoms)

    def named(self, name: str) -> Floats:
        """Amount of a species, (states,), [mol or mol/s]; zero for one that no stream has."""
        k = self.substances.index.get(name)
        return np.zeros(len(self)) if k is None else self.amounts[:, k]

    @cached_property
    def gas(self) -> Floats:
        """Amount of gas, (states,), [mol or mol/s]."""
        return np.asarray(self.amounts[:, self.substances.gas].sum(axis=1))

    @cached_property
    def total(self) -> Floats:
        """Amount of all species, (states,), [mol or mol/s]."""
        return np.asarray(self.amounts.sum(axis=1))

    @cached_property
    def mass(self) -> Floats:
        """Mass, (states,), [kg or kg/s]."""
        mass = self.amounts @ self.substances.molar_masses
        return np.asarray(mass + sum(ATOMIC_WEIGHT[symbol] * n for symbol, n in self.atoms.items()))

    def element(self, symbol: str) -> Floats:
        """Atoms of an element, (states,), [mol or mol/s]."""
        held = self.substances.elements.get(symbol)
        known = np.zeros(len(self)) if held is None else self.amounts @ held
        return np.asarray(known + self.atoms.get(symbol, 0.0))
