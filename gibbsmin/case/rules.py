"""Rules beside equilibrium, in numbers: conversions and constraints as rows of balances, approach temperatures.

A given conversion X of a species holds its amount at (1 - X) of what the feeds bring; a given carbon conversion holds
graphite at (1 - X) of the carbon of the fuel. Both are linear constraints, as those of ``[constraint.NAME]``.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.case.fields import RuleError, in_si
from gibbsmin.case.inputs import Ruled
from gibbsmin.case.recipe import Find, Recipe
from gibbsmin.errors import InputError, SpeciesError
from gibbsmin.practice.reactions.reactions import reaction
from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]

GRAPHITE: Final = "C(s):graphite"
UNCONVERTED: Final = "unconverted carbon"

CONVERSION: Final = "unconverted "
"""Begins the name of the constraint of a species with a given conversion."""


@dataclass(frozen=True)
class Rules:
    """The rules of a case, or of a stage.

    Attributes
    ----------
    tables : Ruled
        The case or stage.
    at : str
        What its dotted names begin with: nothing, or ``stages.NAME.``.
    constraints : dict of str to dict of str to float
        Coefficients of species by the name of the constraint.
    approaches : dict of str to dict of str to float
        Coefficients of species by the name of the reaction, products positive, the key species first.
    needed : tuple of Species
        Species that must be there for a constraint to hold.
    """

    tables: Ruled
    at: str
    constraints: dict[str, dict[str, float]]
    approaches: dict[str, dict[str, float]]
    needed: tuple[Species, ...] = ()

    def shares(self, columns: Mapping[str, Floats], states: int) -> dict[str, Floats]:
        """Give the part of what is fed that a constraint holds, (states,) each, for those that hold a part, [-]."""
        table, found = self.tables.species, {}
        for name, percent in (table.conversion or {}).items():
            converted = self._column(columns, f"species.conversion.{name}", percent, states)
            found[CONVERSION + name] = 1.0 - converted / 100.0
        if table.carbon_conversion is not None:
            converted = self._column(columns, "species.carbon_conversion", table.carbon_conversion, states)
            found[UNCONVERTED] = 1.0 - converted / 100.0
        for name, one in self.tables.constraint.items():
            if one.percent_of_feeds is not None:
                key = f"constraint.{name}.percent_of_feeds"
                found[name] = self._column(columns, key, one.percent_of_feeds, states) / 100.0
        return found

    def sums(self, columns: Mapping[str, Floats], states: int, basis: str) -> dict[str, Floats]:
        """Give the amount that a constraint holds, (states,) each, for those that hold one, [mol or mol/s]."""
        return {
            name: self._column(columns, f"constraint.{name}.sum", _in_basis(one.sum, basis, name), states)
            for name, one in self.tables.constraint.items()
            if one.sum is not None
        }

    def approach(self, columns: Mapping[str, Floats], states: int) -> dict[str, Floats]:
        """Give the approach temperature of each named reaction, (states,) each, [K]."""
        return {
            name: self._column(columns, f"approach.{name}.temperature", one.temperature, states)
            for name, one in self.tables.approach.items()
        }

    def held(
        self, recipes: Sequence[Recipe], units: Floats, columns: Mapping[str, Floats], basis: str
    ) -> dict[str, Floats]:
        """Work out what each constraint holds of feeds.

        Parameters
        ----------
        recipes : sequence of Recipe
            The F feeds.
        units : array (states, F)
            Units of each feed.
        columns : mapping of str to array (states,)
            Varied inputs, in SI.
        basis : str
            ``"mol"`` or ``"mol/s"``.

        Returns
        -------
        dict of str to array (states,)
            [mol or mol/s].
        """
        found = self.sums(columns, len(units), basis)
        for name, share in self.shares(columns, len(units)).items():
            if name == UNCONVERTED:
                brought = units @ [one.reacting.carbon for one in recipes]
            else:
                parts = self.constraints[name]
                brought = units @ [sum(c * feed.of_species(s) for s, c in parts.items()) for feed in recipes]
            found[name] = share * brought
        return found

    def _column(self, columns: Mapping[str, Floats], key: str, value: float, states: int) -> Floats:
        """Value of a key in every state, varied or not."""
        return np.asarray(columns.get(self.at + key, np.full(states, value)))


def read_rules(tables: Ruled, find: Find, own: Sequence[Species], at: str = "") -> Rules:
    """Read the rules of a case or a stage.

    Parameters
    ----------
    tables : Ruled
        The case or stage.
    find : callable
        Gives the species of a name, or raises SpeciesError.
    own : sequence of Species
        Species of the user's own files.
    at : str
        What its dotted names begin with.

    Returns
    -------
    Rules

    Raises
    ------
    RuleError
        A species or a reaction is not known; with the key.
    """
    constraints: dict[str, dict[str, float]] = {}
    needed: list[Species] = []
    for name in tables.species.conversion or {}:
        constraints[CONVERSION + name] = {_name(name, find, "species", "conversion", name): 1.0}
    if tables.species.carbon_conversion is not None:
        graphite = find(GRAPHITE)
        constraints[UNCONVERTED] = {graphite.name: 1.0}
        needed.append(graphite)
    for name, one in tables.constraint.items():
        key = ("constraint", name, "amounts")
        constraints[name] = {_name(label, find, *key, label): value for label, value in one.amounts.items() if value}
    approaches: dict[str, dict[str, float]] = {}
    for name, step in tables.approach.items():
        try:
            approaches[name] = reaction(step.reaction, extra=own).coefficients
        except InputError as error:
            raise RuleError(str(error), "approach", name, "reaction") from None
    return Rules(tables, at, constraints, approaches, tuple(needed))


def _name(label: str, find: Find, *key: str) -> str:
    """Name of a species in the data."""
    try:
        return find(label).name
    except SpeciesError as error:
        raise RuleError(str(error), *key) from None


def _in_basis(value: float | str, basis: str, name: str) -> float:
    """Value of a sum, which must be an amount or a flow as the feeds are."""
    try:
        return in_si(value, basis)
    except InputError as error:
        kind = "flows" if basis == "mol/s" else "amounts"
        text = f"{str(error).removeprefix('value: ')}, because the feeds are {kind}"
        raise RuleError(text, "constraint", name, "sum") from None
