"""The species and phases that may form, and their element matrix."""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping, Sequence
from functools import cached_property
from typing import Final, TypeAlias

import numpy as np
from numpy.typing import NDArray

from gibbsmin.elements import ATOMIC_WEIGHT, CHARGE
from gibbsmin.errors import FeedError, InputError, SpeciesError, nearest
from gibbsmin.phases.ideal_gas import IdealGas
from gibbsmin.phases.model import Phase
from gibbsmin.phases.pure import Pure
from gibbsmin.states.approach import Approaches
from gibbsmin.thermo.database import load
from gibbsmin.thermo.record import Species
from gibbsmin.thermo.table import Table, make_table, potentials_at
from gibbsmin.units import Measurable, quantity

Array: TypeAlias = NDArray[np.float64]
GAS: Final = "gas"
Coefficients: TypeAlias = Mapping[str, Mapping[str, float]]


class System:
    """The species and phases that may form.

    Parameters
    ----------
    records : sequence of Species
        The species, in the order that all arrays keep.
    inert : iterable of str
        Names of species that take no part: each is balanced as if it were an element of its own.
    constraints : mapping of str to mapping of str to float
        Linear constraints by name: coefficients of the amounts of species whose sum is held, beside the elements.
    approaches : mapping of str to mapping of str to float
        Reactions by name that may be given an approach temperature: coefficients of species, products positive, the
        first being the key species (see `gibbsmin.states.approach`).

    Attributes
    ----------
    records : tuple of Species
    species, elements, phases : list of str
        Names, in the order of the arrays. Rows of ``elements`` beyond the chemical ones are ``charge`` where a species
        is charged, one row for each inert species, and one for each constraint.
    element_matrix : (E, S) array
        Atoms of each element in each species [-].
    molar_masses : (S,) array
        [kg/mol].
    gas, is_inert : (S,) bool array
        True for the species of the gas, and for those that take no part.
    """

    def __init__(
        self,
        records: Sequence[Species],
        inert: Iterable[str] = (),
        constraints: Coefficients | None = None,
        approaches: Coefficients | None = None,
    ) -> None:
        self.records = tuple(records)
        self.species = [record.name for record in self.records]
        if not self.records:
            raise InputError("a system needs at least one species that may form")
        self.index = {name: j for j, name in enumerate(self.species)}
        if len(self.index) < len(self.species):
            twice = sorted({name for name in self.species if self.species.count(name) > 1})
            raise SpeciesError(f"species {', '.join(twice)} given more than once")
        self.inert = tuple(dict.fromkeys(self.name_of(name) for name in inert))
        self.constraints = {name: self._known(parts) for name, parts in (constraints or {}).items()}
        named = {name: self._known(parts) for name, parts in (approaches or {}).items()}
        self.approaches = Approaches(named, dict(zip(self.species, self.records, strict=True)))
        held = set(self.inert)
        self.is_inert = np.array([name in held for name in self.species], bool)
        self.elements = self._rows()
        self._row = {row: e for e, row in enumerate(self.elements)}
        self.element_matrix = np.column_stack([self._column(record) for record in self.records])
        self.molar_masses = np.array([record.molar_mass for record in self.records])
        self.gas = np.array([not record.condensed for record in self.records])

    @classmethod
    def from_elements(
        cls,
        elements: str | Iterable[str],
        condensed: bool = True,
        ions: bool = False,
        exclude: Iterable[str] = (),
        inert: Iterable[str] = (),
        extra: Iterable[Species] = (),
        constraints: Coefficients | None = None,
        approaches: Coefficients | None = None,
    ) -> System:
        """Take every species of the data that is made of ``elements`` only.

        Parameters
        ----------
        elements : str or iterable of str
            Symbols, apart by blanks or commas where a text. ``D`` is an element of its own.
        condensed : bool
            Whether solids and liquids may form.
        ions : bool
            Whether charged species and the electron may form.
        exclude : iterable of str
            Names of species that may not form.
        inert : iterable of str
            Names of species that take no part.
        extra : iterable of Species
            Own species beside, or instead of (by the same name), those of the data.
        constraints, approaches : mapping of str to mapping of str to float
            See `System`.

        Returns
        -------
        System

        Raises
        ------
        SpeciesError
            An unknown element or species.
        """
        symbols = re.split(r"[\s,;]+", elements.strip()) if isinstance(elements, str) else list(elements)
        own = {record.name: record for record in extra}
        unknown = [symbol for symbol in symbols if symbol not in ATOMIC_WEIGHT]
        if unknown:
            raise SpeciesError(f"there is no element {unknown[0]!r}{nearest(unknown[0], ATOMIC_WEIGHT)}")
        data = load()
        found = {record.name: record for record in data.with_elements(set(symbols), condensed, ions)}
        records = {**found, **own}
        held = [name if name in own else data.get(name).name for name in inert]
        for name in held:
            records.setdefault(name, own.get(name) or data.get(name))
        left_out = {name if name in own else data.get(name).name for name in exclude}
        if clash := sorted(left_out.intersection(held)):
            raise InputError(
                f"{clash[0]} is both inert and excluded; an inert species is there, an excluded one is not"
            )
        kept = [record for name, record in records.items() if name not in left_out]
        return cls(kept, held, constraints, approaches)

    @classmethod
    def from_species(
        cls,
        species: Iterable[str | Species],
        inert: Iterable[str] = (),
        constraints: Coefficients | None = None,
        approaches: Coefficients | None = None,
    ) -> System:
        """Take just the species named.

        Parameters
        ----------
        species : iterable of str or Species
            Names or aliases in the data, or records of your own.
        inert : iterable of str
            Those of them that take no part.
        constraints, approaches : mapping of str to mapping of str to float
            See `System`.

        Returns
        -------
        System

        Raises
        ------
        SpeciesError
            A name that is not in the data, or one that is there twice.
        """
        if isinstance(species, str):
            species = species.split()
        records = [load().get(item) if isinstance(item, str) else item for item in species]
        return cls(records, inert, constraints, approaches)

    def _rows(self) -> list[str]:
        """Names of the balances: elements in the order of their first use, charge, inert species, constraints."""
        active = [record for record in self.records if record.name not in self.inert]
        symbols = dict.fromkeys(symbol for record in active for symbol in record.elements)
        charge = [CHARGE] if any(record.charge for record in active) else []
        return [*symbols, *charge, *(f"inert {name}" for name in self.inert), *map(constraint_row, self.constraints)]

    def _known(self, parts: Mapping[str, float]) -> dict[str, float]:
        """Coefficients by the names of this system, without those that are zero."""
        return {self.name_of(name): float(value) for name, value in parts.items() if value}

    def _column(self, record: Species) -> Array:
        """Column of the element matrix, (E,): an inert species counts in its own row and in constraints only."""
        column = np.zeros(len(self.elements))
        if record.name in self.inert:
            column[self._row[f"inert {record.name}"]] = 1.0
        else:
            for symbol, count in record.elements.items():
                if symbol in self._row:
                    column[self._row[symbol]] = count
            if record.charge and CHARGE in self._row:
                column[self._row[CHARGE]] = record.charge
        for name, parts in self.constraints.items():
            column[self._row[constraint_row(name)]] = parts.get(record.name, 0.0)
        return column

    @cached_property
    def table(self) -> Table:
        """Standard-state functions as arrays, in the order of the species; what is inert is there at any T."""
        table = make_table(self.records)
        if self.inert and len(self.inert) < len(self.species):
            free = np.array([name not in self.inert for name in self.species])
            low, top = table.low[free].min(), table.top[free].max()
            table.low[~free] = np.minimum(table.low[~free], low)
            table.top[~free] = np.maximum(table.top[~free], top)
        return table

    @cached_property
    def phase_models(self) -> tuple[Phase, ...]:
        """The gas, if there is one, and every condensed species as a phase of its own."""
        gas = tuple(int(j) for j in np.flatnonzero(self.gas))
        pure = [Pure(self.species[j], (int(j),)) for j in np.flatnonzero(~self.gas)]
        return (IdealGas(GAS, gas), *pure) if gas else tuple(pure)

    @property
    def phases(self) -> list[str]:
        """Names of the phases, the gas first."""
        return [phase.name for phase in self.phase_models]

    def name_of(self, name: str) -> str:
        """Name in this system of a species given by name or alias; SpeciesError if it is not here."""
        if name in self.index:
            return name
        known = load().get(name).name
        if known not in self.index:
            raise SpeciesError(f"{known} is not among the species of this system{nearest(name, self.index)}")
        return known

    def standard_potentials(self, T: float) -> Array:
        """G°/RT of every species, (S,) [-], at ``T`` [K] and 1 bar."""
        potentials: Array = potentials_at(self.table, T)
        return potentials

    def feed(self, amounts: Mapping[str, Measurable]) -> Array:
        """Element amounts of a feed.

        Parameters
        ----------
        amounts : mapping of str to float or quantity
            Amount of each species [mol]. Any species of the data whose elements the system has, whether or not it may
            form.

        Returns
        -------
        (E,) array
            Amount of each element, [mol], in the order of ``elements``; of a constraint what the feed itself has.

        Raises
        ------
        FeedError
            An amount that is negative or not finite, or an element that no species of the system holds.
        """
        total = np.zeros(len(self.elements))
        for name, value in amounts.items():
            amount = quantity(value, "mol", f"the amount of {name}")
            if amount < 0.0:
                raise FeedError(f"the amount of {name} is negative: {value}")
            if name in self.index:
                total += amount * self.element_matrix[:, self.index[name]]
            else:
                total += amount * self._column_of_other(load().get(name), name, amount > 0.0)
        return total

    def _column_of_other(self, record: Species, name: str, is_fed: bool) -> Array:
        """Column of a species that is fed, whether or not it may form; see `feed`."""
        parts = [*record.elements, CHARGE] if record.charge else list(record.elements)
        missing = [] if record.name in self.inert else [part for part in parts if part not in self.elements]
        if is_fed and missing:
            raise FeedError(f"the feed holds {name}, but no species of the system holds {' and '.join(missing)}")
        return self._column(record)

    def __repr__(self) -> str:
        gases = int(self.gas.sum())
        condensed = len(self.species) - gases
        return f"System({' '.join(self.elements)}: {gases} gases, {condensed} condensed)"


def constraint_row(name: str) -> str:
    """Name of the balance that a constraint is."""
    return f"constraint {name}"
