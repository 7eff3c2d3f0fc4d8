"""The feeds in every state of a study: how much, how hot, and what they bring of enthalpy, entropy and volume."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import NDArray

from gibbsmin.case.axes import AxisValues
from gibbsmin.case.recipe import Recipe
from gibbsmin.case.sizes import feed_units
from gibbsmin.constants import R
from gibbsmin.practice.audit import feed_enthalpy, feed_entropy
from gibbsmin.practice.feeds.mixing import mixed_entropy
from gibbsmin.practice.figures.settled import FeedFacts
from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class ReturnedGas:
    """Flue gas that goes back to the fire.

    Attributes
    ----------
    name : str
        Name of the feed.
    records : tuple of Species
        What it is made of.
    amounts : array (states, S)
        Amount of each, [mol or mol/s].
    temperature, pressure : array (states,)
        [K], [Pa].
    """

    name: str
    records: tuple[Species, ...]
    amounts: Floats
    temperature: Floats
    pressure: Floats

    @property
    def enthalpy(self) -> Floats:
        """Enthalpy, (states,), [J or W]."""
        return np.asarray(feed_enthalpy(self.records, self.amounts, self.temperature))

    @property
    def entropy(self) -> Floats:
        """Entropy, (states,), [J/K or W/K]."""
        return np.asarray(feed_entropy(self.records, self.amounts, self.temperature, self.pressure))


@dataclass(frozen=True)
class FeedStates:
    """The feeds of a study, state by state.

    Attributes
    ----------
    recipes : tuple of Recipe
        What each feed is made of.
    axes : tuple of AxisValues
        The varied inputs.
    columns : dict of str to array (states,)
        Value of each varied input in every state, in SI.
    states : int
        Number of states.
    ratios : dict of str to array (states,)
        Ratios that were found, by the name of the feed that they size.
    returned : ReturnedGas or None
        Flue gas that goes back.
    """

    recipes: tuple[Recipe, ...]
    axes: tuple[AxisValues, ...]
    columns: Mapping[str, Floats]
    states: int
    ratios: Mapping[str, Floats] = field(default_factory=dict)
    returned: ReturnedGas | None = None

    @cached_property
    def units(self) -> Floats:
        """Units of each feed in every state, (states, F), [mol, kg, or either per second]."""
        sizes: dict[str, Floats | float] = {recipe.name: recipe.size for recipe in self.recipes}
        sizes |= self.ratios
        for axis in self.axes:
            table, _, key = axis.vary.rpartition(".")
            recipe = next((one for one in self.recipes if f"feeds.{one.name}" == table), None)
            if recipe is not None and key == recipe.sized_by:
                sizes[recipe.name] = self.columns[axis.vary] * recipe.units(1.0, axis.unit)
        return np.broadcast_to(feed_units(self.recipes, sizes), (self.states, len(self.recipes)))

    def temperature(self, recipe: Recipe) -> Floats | float | None:
        """Temperature of a feed, (states,) where it is varied, [K]; None where it is not known."""
        return self.columns.get(f"feeds.{recipe.name}.temperature", recipe.temperature)

    def pressure(self, recipe: Recipe) -> Floats | float | None:
        """Pressure of a feed, (states,) where it is varied, [Pa]; None where it is not known."""
        return self.columns.get(f"feeds.{recipe.name}.pressure", recipe.pressure)

    @property
    def without_enthalpy(self) -> list[Recipe]:
        """Feeds whose enthalpy is not known, because their temperature is not."""
        return [one for one in self.recipes if self.temperature(one) is None]

    @property
    def fuels(self) -> list[Recipe]:
        """Feeds known by an analysis, whose entropy is an estimate."""
        return [one for one in self.recipes if one.fuel is not None]

    @property
    def without_pressure(self) -> list[Recipe]:
        """Feeds that hold gas and do not say at which pressure."""
        return [one for one in self.recipes if self.pressure(one) is None and one.gas > 0.0]

    @cached_property
    def enthalpy(self) -> Floats | None:
        """Enthalpy of all feeds, (states,), [J or W]; None where that of one is not known."""
        if self.without_enthalpy:
            return None
        fresh = self._summed([self.unit_enthalpy(one) for one in self.recipes])
        return fresh if self.returned is None else fresh + self.returned.enthalpy

    @cached_property
    def internal_energy(self) -> Floats | None:
        """Enthalpy less PV of the gas, which is nRT, (states,), [J or W]; None where a feed is not known."""
        if self.enthalpy is None:
            return None
        return self.enthalpy - self._summed([one.gas * R * self._temperature(one) for one in self.recipes])

    @property
    def volume(self) -> Floats:
        """Volume that the gas of the feeds fills at its own temperature and pressure, (states,), [m3].

        Asked for only where every feed has a temperature, and every one that holds gas a pressure.
        """
        return self._summed([one.gas * R * self._temperature(one) / self._pressure(one, None) for one in self.recipes])

    def entropy(self, otherwise: Floats | None) -> Floats | None:
        """Entropy of all feeds, each at its own temperature and pressure, before they mix.

        Parameters
        ----------
        otherwise : array (states,) or None
            Pressure of a gas that does not say its own, [Pa].

        Returns
        -------
        array (states,) or None
            [J/K or W/K]; None where a feed is not known.
        """
        if self.without_enthalpy or (otherwise is None and self.without_pressure):
            return None
        fresh = self._summed([self.unit_entropy(one, otherwise) for one in self.recipes])
        return fresh if self.returned is None else fresh + self.returned.entropy

    def mixed_entropy(self, otherwise: Floats | None) -> Floats | None:
        """Entropy of all feeds after they mix, without heat or reaction, at the lowest pressure among them.

        Parameters and result as for `entropy`; one feed alone does not change.
        """
        apart = self.entropy(otherwise)
        if apart is None or self.enthalpy is None or len(self.recipes) == 1:
            return apart
        records = list(dict.fromkeys(record for one in self.recipes for record in one.species))
        in_unit = np.array([[one.species.get(record, 0.0) for record in records] for one in self.recipes])  # (F, S)
        T = np.stack([np.broadcast_to(self._temperature(one), self.states) for one in self.recipes])  # (F, states)
        P = np.stack(
            [
                np.broadcast_to(self._pressure(one, otherwise) if one.gas > 0.0 else np.inf, self.states)
                for one in self.recipes
            ]
        ).min(axis=0)
        P = np.where(np.isfinite(P), P, 1.0)  # of liquids and solids alone it does not matter
        return mixed_entropy(records, self.units @ in_unit, self.enthalpy, P, T.min(axis=0), T.max(axis=0))

    @cached_property
    def lower_heating_value(self) -> Floats | None:
        """Lower heating value of all feeds at 25 degC, (states,), [J or W]; None where it is not defined."""
        values = [one.heating_value for one in self.recipes]
        return self._summed([value[1] for value in values if value]) if all(values) else None

    def _summed(self, values: Sequence[Floats | float]) -> Floats:
        """Sum over the feeds of what a unit of each has, (states,)."""
        total = np.zeros(self.states)
        for k, value in enumerate(values):
            total += self.units[:, k] * value
        return total

    def unit_enthalpy(self, recipe: Recipe) -> Any:
        """Enthalpy of a unit of a feed that has a temperature, (states,) or one for all."""
        T = self._temperature(recipe)
        known = feed_enthalpy(*_parts(recipe), T) if recipe.species else 0.0
        return known if recipe.fuel is None else known + recipe.fuel.enthalpy(T)

    def unit_entropy(self, recipe: Recipe, otherwise: Floats | None) -> Any:
        """Entropy of a unit of a feed that has a temperature, (states,) or one for all."""
        T = self._temperature(recipe)
        known = feed_entropy(*_parts(recipe), T, self._pressure(recipe, otherwise)) if recipe.species else 0.0
        return known if recipe.fuel is None else known + recipe.fuel.entropy(T)

    def _temperature(self, recipe: Recipe) -> Floats | float:
        """Temperature of a feed that has one."""
        T = self.temperature(recipe)
        return np.nan if T is None else T

    def _pressure(self, recipe: Recipe, otherwise: Floats | None) -> Floats | float:
        """Pressure of a feed, else ``otherwise``; of what holds no gas it does not matter."""
        P = self.pressure(recipe)
        P = otherwise if P is None else P
        return 1.0 if P is None else P


def feed_facts(feeds: FeedStates, returned: bool) -> dict[str, FeedFacts]:
    """Put down what the trade's numbers need of the feeds, by name; the gas that goes back only where asked for."""
    found = {}
    for k, one in enumerate(feeds.recipes):
        units, T = feeds.units[:, k], feeds.temperature(one)
        value = one.heating_value
        found[one.name] = FeedFacts(
            {record.substance: n * units for record, n in one.species.items()},
            {element: n * units for element, n in one.elements.items()},
            one.mass * units,
            None if value is None else value[0] * units,
            None if value is None else value[1] * units,
            one.fuel is not None,
            None if T is None else np.broadcast_to(np.asarray(T, float), units.shape),
        )
    back = feeds.returned
    if returned and back is not None:
        symbols = dict.fromkeys(symbol for record in back.records for symbol in record.elements)
        held = {s: np.array([record.elements.get(s, 0.0) for record in back.records]) for s in symbols}
        found[back.name] = FeedFacts(
            {record.substance: back.amounts[:, k] for k, record in enumerate(back.records)},
            {symbol: back.amounts @ counts for symbol, counts in held.items()},
            back.amounts @ np.array([record.molar_mass for record in back.records]),
            temperature=back.temperature,
        )
    return found


def _parts(recipe: Recipe) -> tuple[list[Species], list[float]]:
    """Species of a feed and their amounts in one unit."""
    return list(recipe.species), list(recipe.species.values())
