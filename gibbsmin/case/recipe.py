"""What a unit of each feed is made of.

A unit is a mole where the feed is known by species, a kilogram where it is a fuel known by its analysis.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from functools import cached_property
from typing import Final

from gibbsmin.case.air_schema import MOISTURES
from gibbsmin.case.analysis_schema import AnalysisTable
from gibbsmin.case.feed_schema import Feed
from gibbsmin.case.fields import RuleError, in_si
from gibbsmin.case.fuel_recipe import Fuel, read_fuel
from gibbsmin.case.moist_gas import air_as_fed, moistened, pressure_of
from gibbsmin.elements import ATOMIC_WEIGHT
from gibbsmin.errors import FeedError, SpeciesError
from gibbsmin.practice.feeds.heating import heating_value
from gibbsmin.practice.feeds.ratios import counted_carbon, oxygen_need
from gibbsmin.thermo.record import Species
from gibbsmin.units import one_of

ANY_SIZE: Final = ("mol", "kg", "mol/s", "kg/s")
"""SI units of amounts and flows."""


Find = Callable[[str], Species]


@dataclass(frozen=True)
class Recipe:
    """What a feed is made of.

    Attributes
    ----------
    name : str
        Name of the feed.
    species : dict of Species to float
        Amount of each species in one unit, [mol].
    atoms : dict of str to float
        Atoms in one unit that are known by element only, [mol].
    by_mass : bool
        Whether a unit is a kilogram; else it is a mole.
    made_of, sized_by : str
        Keys that give the composition and the size.
    size : float
        Units [mol, kg, or either per second]; for a ratio its own value.
    temperature, pressure : float or None
        Of the feed, [K] and [Pa].
    inert : frozenset of str
        Names of those of its species that take no part.
    to, per : str
        Feed that a ratio of amount or mass counts, none for all others, and what of it: ``"as received"``, ``"dry"``
        or ``"dry ash-free"``.
    group : str
        Stage of a train that takes the feed, within which its ratio counts; nothing for a single mixture.
    fuel : Fuel or None
        A fuel known by its analysis, of which a unit is a kilogram as received; its atoms are those of ``atoms``.
    """

    name: str
    species: Mapping[Species, float]
    atoms: Mapping[str, float]
    by_mass: bool
    made_of: str
    sized_by: str
    size: float
    temperature: float | None
    pressure: float | None
    inert: frozenset[str] = frozenset()
    to: str = ""
    per: str = "as received"
    fuel: Fuel | None = None
    group: str = ""

    @property
    def elements(self) -> dict[str, float]:
        """Atoms of each element in one unit, [mol]."""
        found = dict(self.atoms)
        for record, n in self.species.items():
            for element, atoms in record.elements.items():
                found[element] = found.get(element, 0.0) + n * atoms
        return found

    @property
    def mass(self) -> float:
        """Mass of one unit, [kg]."""
        known = sum(n * record.molar_mass for record, n in self.species.items())
        return known + sum(n * ATOMIC_WEIGHT[element] for element, n in self.atoms.items())

    @property
    def gas(self) -> float:
        """Amount of gas in one unit, [mol]."""
        return sum(n for record, n in self.species.items() if not record.condensed)

    def of_species(self, name: str) -> float:
        """Amount in one unit of the species of this name, [mol]."""
        return sum(n for record, n in self.species.items() if record.name == name)

    def of_composition(self, **elements: float) -> float:
        """Amount in one unit of species that are made of just these atoms, [mol]."""
        return sum(n for record, n in self.species.items() if dict(record.elements) == elements and not record.charge)

    @property
    def carbon(self) -> float:
        """Carbon in one unit that counts for steam to carbon, [mol]."""
        known = sum(n * counted_carbon(record.elements) for record, n in self.species.items())
        return known + self.atoms.get("C", 0.0)

    @cached_property
    def heating_value(self) -> tuple[float, float] | None:
        """Higher and lower heating value of one unit at 25 °C, [J]; None where they are not defined."""
        if self.fuel is not None:
            return self.fuel.heat.higher, self.fuel.heat.lower
        try:
            value = heating_value(list(self.species), list(self.species.values()))
        except FeedError:
            return None
        return value.higher, value.lower

    @property
    def reacting(self) -> Recipe:
        """What is left of it without the species that take no part."""
        return replace(self, species={one: n for one, n in self.species.items() if one.name not in self.inert})

    def mass_per(self, basis: str) -> float:
        """Mass of one unit as received, dry or dry ash-free, [kg]; ash is what is solid and neither water nor fuel."""
        left_out = {"as received": (), "dry": ("water",), "dry ash-free": ("water", "ash")}[basis]
        return self.mass - sum(n * one.molar_mass for one, n in self.species.items() if _kind(one) in left_out)

    def units(self, value: float, unit: str) -> float:
        """Convert a size to a number of units; ``unit`` is mol, kg, or either per second."""
        massive = unit.startswith("kg")
        if self.by_mass and not massive and unit != "1":
            raise FeedError("a fuel by analysis has no molar mass; give the size as a mass, for example '10 t/h'")
        return value / self.mass if massive and not self.by_mass else value


def read_recipe(name: str, feed: Feed, find: Find) -> Recipe:
    """Work out what a feed is made of.

    Parameters
    ----------
    name : str
        Name of the feed.
    feed : Feed
        Its table.
    find : callable
        Gives the species of a name, or raises SpeciesError.

    Returns
    -------
    Recipe

    Raises
    ------
    RuleError
        A species is not known, is named twice, or the size does not suit; with the key.
    """
    key = feed.made_of
    if feed.analysis is not None:
        return _by_analysis(name, feed, feed.analysis, find)
    given = _given(feed)
    records: dict[Species, float] = {}
    for label, share in given.items():
        at = (key,) if key in ("species", "composition") else (key, label)
        if label in (feed.enriched_with or {}):
            at = ("enriched_with", label)
        try:
            record = find(label)
        except SpeciesError as error:
            raise RuleError(str(error), *at) from None
        if record in records:
            raise RuleError(f"{label!r} names {record.name!r}, which is named before; give each species once", *at)
        if key == "volume_percent" and record.condensed:
            raise RuleError(f"a volume percent is that of a gas, and {label} is none; give mole or mass percent", *at)
        records[record] = share / record.molar_mass if _by_weight(feed, label) else share
    whole = sum(records.values())
    if not whole > 0.0:
        raise RuleError("holds nothing; at least one amount must be above zero", key)
    recipe = Recipe(
        name,
        moistened(feed, {record: n / whole for record, n in records.items() if n > 0.0}, find),
        {},
        False,
        key,
        feed.sized_by,
        whole,
        None if feed.temperature is None else in_si(feed.temperature, "K"),
        pressure_of(feed),
        to=feed.to or "",
        per=feed.per or "as received",
    )
    if feed.frozen:
        recipe = _frozen(recipe)
    return recipe if feed.sized_by == "amounts" else _sized(recipe, feed)


def _by_analysis(name: str, feed: Feed, table: AnalysisTable, find: Find) -> Recipe:
    """Work out what a fuel known by its analysis is made of."""
    if feed.frozen:
        raise RuleError("a fuel known by its analysis cannot be frozen; give it by species", "frozen")
    if moist := feed.given(MOISTURES):
        raise RuleError(f"{moist[0]} is for gases; a fuel has its moisture in the table analysis", moist[0])
    try:
        fuel = read_fuel(table, find)
    except RuleError as error:
        raise RuleError(error.message, feed.made_of, *error.key) from None
    temperature = None if feed.temperature is None else in_si(feed.temperature, "K")
    recipe = Recipe(
        name, fuel.species, fuel.atoms, True, feed.made_of, feed.sized_by, 1.0, temperature, pressure_of(feed),
        fuel.inert, feed.to or "", feed.per or "as received", fuel,
    )  # fmt: skip
    return _sized(recipe, feed)


def _sized(recipe: Recipe, feed: Feed) -> Recipe:
    """Give a recipe the size that its table has; air for a wanted oxygen begins with the air ratio of dry air."""
    if feed.flue_gas_oxygen_percent is not None:
        short = 20.95 / (20.95 - min(feed.flue_gas_oxygen_percent, 15.0))
        return replace(recipe, sized_by="air_ratio", size=short)
    try:
        return replace(recipe, size=recipe.units(*feed_size(feed)))
    except FeedError as error:
        raise RuleError(str(error), feed.sized_by) from None


def _kind(record: Species) -> str:
    """Tell water and ash, as analyses count them, from the rest."""
    if dict(record.elements) == {"H": 2.0, "O": 1.0}:
        return "water"
    try:
        return "ash" if record.condensed and oxygen_need(record.elements) <= 0.0 else "fuel"
    except FeedError:  # made of something whose oxide is a matter of choice
        return "ash"


def _frozen(recipe: Recipe) -> Recipe:
    """Give the species of a frozen feed names of their own, so that they are balanced by themselves."""
    species = {record.frozen(): n for record, n in recipe.species.items()}
    return replace(recipe, species=species, inert=frozenset(record.name for record in species))


def feed_size(feed: Feed) -> tuple[float, str]:
    """Size of a feed as its table has it, and its SI unit; ``"1"`` for a ratio."""
    if feed.flow is not None:
        return one_of(feed.flow, ("mol/s", "kg/s"), "flow")
    if feed.amount is not None:
        return one_of(feed.amount, ("mol", "kg"), "amount")
    return float(getattr(feed, feed.sized_by)), "1"


def _given(feed: Feed) -> dict[str, float]:
    """Shares or amounts by species as the table has them, in SI."""
    if feed.species is not None:
        return {feed.species: 1.0}
    if feed.composition is not None:
        return air_as_fed(feed)[0]
    if feed.amounts is not None:
        return {label: in_si(value, *ANY_SIZE) for label, value in feed.amounts.items()}
    shares: dict[str, float] = getattr(feed, feed.made_of)
    return dict(shares)


def _by_weight(feed: Feed, label: str) -> bool:
    """Tell whether the share or amount of a species is a mass."""
    if feed.amounts is not None:
        return one_of(feed.amounts[label], ANY_SIZE, label)[1].startswith("kg")
    return feed.made_of.startswith("mass")
