"""What the trade's numbers are computed from: feeds and the settled mixture, by name, as arrays over the states."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class FeedFacts:
    """A feed in every state.

    Attributes
    ----------
    amounts : mapping of str to array (states,)
        Amount of each species, [mol or mol/s].
    elements : mapping of str to array (states,)
        Atoms of each element, those of an analysis among them, [mol or mol/s].
    mass : array (states,)
        [kg or kg/s].
    higher, lower : array (states,) or None
        Heating values at 25 °C, [J or W]; None where they are not defined.
    by_analysis : bool
        Whether it is a fuel known by its analysis.
    temperature : array (states,) or None
        [K].
    """

    amounts: Mapping[str, Floats]
    elements: Mapping[str, Floats]
    mass: Floats
    higher: Floats | None = None
    lower: Floats | None = None
    by_analysis: bool = False
    temperature: Floats | None = None


@dataclass(frozen=True)
class Settled:
    """Feeds and what they settle to.

    Attributes
    ----------
    amounts : mapping of str to array (states,)
        Amount of each species of the system, [mol or mol/s]; nan where a state was not certified.
    records : mapping of str to Species
        The record of each of them.
    temperature, pressure : array (states,)
        [K], [Pa].
    element_potentials : mapping of str to array (states,)
        Divided by RT, [-]; minus infinity where an element is absent.
    feeds : mapping of str to FeedFacts
        By name.
    heat : array (states,) or None
        Heat put in, [J or W]; negative where it is taken away.
    is_flow : bool
        Whether amounts are per second.
    """

    amounts: Mapping[str, Floats]
    records: Mapping[str, Species]
    temperature: Floats
    pressure: Floats
    element_potentials: Mapping[str, Floats]
    feeds: Mapping[str, FeedFacts]
    heat: Floats | None = None
    is_flow: bool = False

    @property
    def zero(self) -> Floats:
        """Nothing, (states,)."""
        return np.zeros(len(self.temperature))

    def amount(self, *names: str) -> Floats:
        """Amount of the species named, summed, (states,), [mol or mol/s]; zero for one that cannot form."""
        return np.asarray(sum((self.amounts[name] for name in names if name in self.amounts), self.zero))

    @cached_property
    def gases(self) -> list[str]:
        """Names of the species of the gas."""
        return [name for name, record in self.records.items() if not record.condensed]

    @cached_property
    def gas(self) -> Floats:
        """Amount of gas, (states,), [mol or mol/s]."""
        return self.amount(*self.gases)

    @cached_property
    def dry_gas(self) -> Floats:
        """Amount of gas without water vapour, (states,), [mol or mol/s]."""
        return self.gas - self.amount("H2O")

    def wet(self, *names: str) -> Floats:
        """Mole fraction in the gas, summed, (states,), [-]; nan where there is no gas."""
        return _share(self.amount(*names), self.gas)

    def dry(self, *names: str) -> Floats:
        """Mole fraction in the gas without its water, summed, (states,), [-]; nan where nothing is left."""
        return _share(self.amount(*names), self.dry_gas)

    def element(self, symbol: str, names: Iterable[str] | None = None) -> Floats:
        """Atoms of an element in the settled mixture, or in those species of it that are named, (states,)."""
        chosen = self.amounts if names is None else names
        held = ((self.records[name].elements.get(symbol, 0.0), name) for name in chosen if name in self.amounts)
        return np.asarray(sum((count * self.amounts[name] for count, name in held if count), self.zero))

    def fed(self, *names: str) -> Floats:
        """Amount of the species named in all feeds, summed, (states,), [mol or mol/s]."""
        parts = (feed.amounts[name] for feed in self.feeds.values() for name in names if name in feed.amounts)
        return np.asarray(sum(parts, self.zero))

    def fed_element(self, symbol: str) -> Floats:
        """Atoms of an element in all feeds, (states,), [mol or mol/s]."""
        parts = (feed.elements[symbol] for feed in self.feeds.values() if symbol in feed.elements)
        return np.asarray(sum(parts, self.zero))


def _share(part: Floats, whole: Floats) -> Floats:
    """Part of a whole; nan where there is no whole."""
    return np.asarray(np.divide(part, whole, out=np.full(np.shape(whole), np.nan), where=whole > 0.0))
