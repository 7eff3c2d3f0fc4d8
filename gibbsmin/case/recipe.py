"""What a unit of each feed is made of.

A unit is a mole where the feed is known by species, a kilogram where it is known by an ultimate analysis.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from typing import Final

from gibbsmin.case.feed_schema import Feed
from gibbsmin.case.fields import RuleError, in_si
from gibbsmin.elements import ATOMIC_WEIGHT
from gibbsmin.errors import FeedError, SpeciesError
from gibbsmin.practice.ratios import counted_carbon
from gibbsmin.thermo.record import Species
from gibbsmin.units import one_of

DRY_AIR: Final = {"N2": 0.78084, "O2": 0.209476, "Ar": 0.00934, "CO2": 0.000314}
"""Mole fractions of dry air, [-]; ISO 2533:1975, without its traces, which sum to 3e-5; normalised before use."""

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

    def of_composition(self, **elements: float) -> float:
        """Amount in one unit of species that are made of just these atoms, [mol]."""
        return sum(n for record, n in self.species.items() if dict(record.elements) == elements and not record.charge)

    @property
    def carbon(self) -> float:
        """Carbon in one unit that counts for steam to carbon, [mol]."""
        known = sum(n * counted_carbon(record.elements) for record, n in self.species.items())
        return known + self.atoms.get("C", 0.0)

    def units(self, value: float, unit: str) -> float:
        """Convert a size to a number of units; ``unit`` is mol, kg, or either per second."""
        massive = unit.startswith("kg")
        if self.by_mass and not massive and unit != "1":
            raise FeedError("an ultimate analysis has no molar mass; give the size as a mass, for example '10 t/h'")
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
    given = _given(feed)
    by_mass = key == "ultimate_percent"
    atoms = {
        label: share / ATOMIC_WEIGHT[label] for label, share in given.items() if by_mass and label in ATOMIC_WEIGHT
    }
    records: dict[Species, float] = {}
    for label, share in given.items():
        if label in atoms:
            continue
        at = (key,) if key in ("species", "composition") else (key, label)
        try:
            record = find(label)
        except SpeciesError as error:
            raise RuleError(str(error), *at) from None
        if record in records:
            raise RuleError(f"{label!r} names {record.name!r}, which is named before; give each species once", *at)
        records[record] = share / record.molar_mass if _by_weight(feed, label) else share
    whole = sum(given.values()) if by_mass else sum(records.values())
    if not whole > 0.0:
        raise RuleError("holds nothing; at least one amount must be above zero", key)
    recipe = Recipe(
        name,
        {record: n / whole for record, n in records.items() if n > 0.0},
        {symbol: n / whole for symbol, n in atoms.items() if n > 0.0},
        by_mass,
        key,
        feed.sized_by,
        whole,
        None if feed.temperature is None else in_si(feed.temperature, "K"),
        None if feed.pressure is None else in_si(feed.pressure, "Pa"),
    )
    if feed.sized_by == "amounts":
        return recipe
    try:
        return replace(recipe, size=recipe.units(*feed_size(feed)))
    except FeedError as error:
        raise RuleError(str(error), feed.sized_by) from None


def feed_size(feed: Feed) -> tuple[float, str]:
    """Size of a feed as its table has it, and its SI unit; ``"1"`` for a ratio."""
    if feed.flow is not None:
        return one_of(feed.flow, ("mol/s", "kg/s"), "flow")
    if feed.amount is not None:
        return one_of(feed.amount, ("mol", "kg"), "amount")
    return float(getattr(feed, feed.sized_by)), "1"


def _given(feed: Feed) -> dict[str, float]:
    """Shares or amounts by species (or element) as the table has them, in SI."""
    if feed.species is not None:
        return {feed.species: 1.0}
    if feed.composition is not None:
        return dict(DRY_AIR)
    if feed.amounts is not None:
        return {label: in_si(value, *ANY_SIZE) for label, value in feed.amounts.items()}
    shares: dict[str, float] = getattr(feed, feed.made_of)
    return dict(shares)


def _by_weight(feed: Feed, label: str) -> bool:
    """Tell whether the share or amount of a species is a mass."""
    if feed.amounts is not None:
        return one_of(feed.amounts[label], ANY_SIZE, label)[1].startswith("kg")
    return feed.made_of.startswith(("mass", "ultimate"))
