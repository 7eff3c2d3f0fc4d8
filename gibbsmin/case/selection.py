"""Which species may form, from the ``[species]`` table and the feeds."""

from __future__ import annotations

from collections.abc import Collection, Iterable, Sequence
from typing import Protocol

import numpy as np
from numpy.typing import NDArray

from gibbsmin.case.fields import RuleError
from gibbsmin.case.recipe import Find, Recipe
from gibbsmin.case.rules import Rules
from gibbsmin.case.species_schema import FROM_FEEDS, SpeciesTable
from gibbsmin.elements import ATOMIC_WEIGHT, CHARGE
from gibbsmin.errors import InputError, SpeciesError, nearest
from gibbsmin.states.system import System
from gibbsmin.thermo.database import load
from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]


def finder(own: Sequence[Species]) -> Find:
    """Give a look-up that knows the user's own species before those of the database."""
    named = {label: record for record in own for label in (record.name, *record.aliases)}

    def find(name: str) -> Species:
        return named[name] if name in named else load().get(name)

    return find


class Brought(Protocol):
    """A feed or stream, as far as the choice of species goes."""

    @property
    def species(self) -> Iterable[Species]:
        """What it may hold."""

    @property
    def atoms(self) -> Iterable[str]:
        """Elements that it holds beside species."""

    @property
    def inert(self) -> Collection[str]:
        """Names of those of its species that take no part."""


def choose_system(table: SpeciesTable, feeds: Sequence[Brought], own: Sequence[Species], rules: Rules) -> System:
    """Make the system that a case asks for.

    Parameters
    ----------
    table : SpeciesTable
        The ``[species]`` table.
    feeds : sequence of Brought
        The feeds, for their elements.
    own : sequence of Species
        Species of the user's own files.
    rules : Rules
        Conversions, constraints and approach temperatures.

    Returns
    -------
    System

    Raises
    ------
    RuleError
        A name or an element is not known, or nothing is left to react.
    """
    find = finder(own)
    allow = _found(table.allow or [], "allow", find)
    exclude = _found(table.exclude, "exclude", find)
    inert = _found(table.inert, "inert", find)
    inert += [record for feed in feeds for record in feed.species if record.name in feed.inert]
    if table.settling is not None:
        settling = _found(table.settling, "settling", find)
        inert += [record for feed in feeds for record in feed.species if record not in settling]
        listed = {record.name: record for record in (*settling, *inert, *rules.needed)}
        names = list(dict.fromkeys(record.name for record in inert))
        return _system(list(listed.values()), names, rules)
    inert_names = list(dict.fromkeys(record.name for record in inert))
    added = {record.name: record for record in (*inert, *rules.needed)}
    rows = {"constraints": rules.constraints, "approaches": rules.approaches}
    try:
        if allow:
            listed = {record.name: record for record in allow} | added
            return System.from_species(list(listed.values()), inert_names, **rows)
        elements = _elements(table, feeds, inert)
        names = [record.name for record in exclude if record not in rules.needed]
        ours = [*(record for record in own if _wanted(record, table, elements)), *added.values()]
        return System.from_elements(
            elements, condensed=table.condensed, ions=table.ions, exclude=names, inert=inert_names, extra=ours, **rows
        )
    except RuleError:
        raise
    except InputError as error:
        raise RuleError(str(error), "species") from None


def element_row(recipe: Recipe, system: System) -> Floats:
    """Count the elements in one unit of a feed.

    Parameters
    ----------
    recipe : Recipe
        The feed.
    system : System
        The system it goes into.

    Returns
    -------
    array (E,)
        Amount of each element of the system, [mol].

    Raises
    ------
    RuleError
        The feed holds an element that the system has no place for.
    """
    row = np.zeros(len(system.elements))
    place = {name: k for k, name in enumerate(system.elements)}
    column = {name: k for k, name in enumerate(system.species)}
    parts: list[tuple[str, dict[str, float], float]] = []
    for record, n in recipe.species.items():
        if record.name in column:
            row += n * np.asarray(system.element_matrix)[:, column[record.name]]
        else:
            charge = {CHARGE: float(record.charge)} if record.charge else {}
            parts.append((record.name, {**record.elements, **charge}, n))
    parts += [(element, {element: 1.0}, n) for element, n in recipe.atoms.items()]
    for name, counts, n in parts:
        missing = sorted(counts.keys() - place.keys())
        if missing:
            within = "" if missing == [name] else f" (in {name})"
            raise RuleError(
                f"the feed holds {' and '.join(missing)}{within}, which the species of the case have no place for: "
                f"they are made of {', '.join(system.elements)}; change [species], or take it out of the feed",
                recipe.name,
                recipe.made_of,
            )
        for element, atoms in counts.items():
            row[place[element]] += n * atoms
    return row


def _found(names: Sequence[str], key: str, find: Find) -> list[Species]:
    """Look up the names of a list."""
    records = []
    for number, name in enumerate(names):
        try:
            record = find(name)
        except SpeciesError as error:
            raise RuleError(str(error), "species", key, number) from None
        if record in records:
            raise RuleError(f"{name!r} names {record.name!r}, which is named before", "species", key, number)
        records.append(record)
    return records


def _wanted(record: Species, table: SpeciesTable, elements: Sequence[str]) -> bool:
    """Tell whether a species of the user's own is one of those that the table asks for."""
    kind = (table.condensed or not record.condensed) and (table.ions or not record.charge)
    return kind and set(record.elements) <= set(elements)


def _system(records: Sequence[Species], inert: Sequence[str], rules: Rules) -> System:
    """Make a system of just these species."""
    try:
        return System.from_species(records, inert, rules.constraints, rules.approaches)
    except InputError as error:
        raise RuleError(str(error), "species") from None


def _elements(table: SpeciesTable, feeds: Sequence[Brought], inert: Sequence[Species]) -> list[str]:
    """List the elements that take part."""
    if table.elements != FROM_FEEDS:
        symbols = table.elements.replace(",", " ").split()
        for symbol in symbols:
            if symbol not in ATOMIC_WEIGHT:
                near = nearest(symbol, [FROM_FEEDS, *ATOMIC_WEIGHT])
                raise RuleError(f"there is no element {symbol!r}{near}", "species", "elements")
        return list(dict.fromkeys(symbols))
    found: dict[str, None] = {}
    for feed in feeds:
        for record in feed.species:
            found.update(dict.fromkeys(record.elements) if record not in inert else {})
        found.update(dict.fromkeys(feed.atoms))
    if not found:
        raise RuleError("the feeds hold nothing but inert species, so nothing can react", "species", "inert")
    return list(found)
