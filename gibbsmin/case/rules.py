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
from gibbsmin.case.recipe import Find, Recipe
from gibbsmin.case.schema import Case
from gibbsmin.errors import InputError, SpeciesError
from gibbsmin.practice.reactions import reaction
from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]

GRAPHITE: Final = "C(s):graphite"
UNCONVERTED: Final = "unconverted carbon"

CONVERSION: Final = "unconverted "
"""Begins the name of the constraint of a species with a given conversion."""


@dataclass(frozen=True)
class Rules:
    """The rules of a case.

    Attributes
    ----------
    case : Case
    constraints : dict of str to dict of str to float
        Coefficients of species by the name of the constraint.
    approaches : dict of str to dict of str to float
        Coefficients of species by the name of the reaction, products positive, the key species first.
    needed : tuple of Species
        Species that must be there for a constraint to hold.
    """

    case: Case
    constraints: dict[str, dict[str, float]]
    approaches: dict[str, dict[str, float]]
    needed: tuple[Species, ...] = ()

    def held(
        self, recipes: Sequence[Recipe], units: Floats, columns: Mapping[str, Floats], basis: str
    ) -> dict[str, Floats]:
        """Work out what each constraint holds.

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
        table, found = self.case.species, {}
        for name, percent in (table.conversion or {}).items():
            brought = units @ [one.of_species(self._single(CONVERSION + name)) for one in recipes]
            converted = columns.get(f"species.conversion.{name}", np.full(len(units), percent))
            found[CONVERSION + name] = (1.0 - converted / 100.0) * brought
        if table.carbon_conversion is not None:
            carbon = units @ [one.carbon for one in recipes]
            converted = columns.get("species.carbon_conversion", np.full(len(units), table.carbon_conversion))
            found[UNCONVERTED] = (1.0 - converted / 100.0) * carbon
        for name, one in self.case.constraint.items():
            if one.sum is not None:
                value = _in_basis(one.sum, basis, name)
                found[name] = np.asarray(columns.get(f"constraint.{name}.sum", np.full(len(units), value)))
                continue
            parts = self.constraints[name]
            brought = units @ [sum(c * feed.of_species(s) for s, c in parts.items()) for feed in recipes]
            share = columns.get(f"constraint.{name}.percent_of_feeds", np.full(len(units), one.percent_of_feeds))
            found[name] = share / 100.0 * brought
        return found

    def approach(self, columns: Mapping[str, Floats], states: int) -> dict[str, Floats]:
        """Approach temperature of each named reaction, (states,) each, [K]."""
        return {
            name: np.asarray(columns.get(f"approach.{name}.temperature", np.full(states, one.temperature)))
            for name, one in self.case.approach.items()
        }

    def _single(self, constraint: str) -> str:
        """Name the one species of a constraint."""
        return next(iter(self.constraints[constraint]))


def read_rules(case: Case, find: Find, own: Sequence[Species]) -> Rules:
    """Read the rules of a case.

    Parameters
    ----------
    case : Case
    find : callable
        Gives the species of a name, or raises SpeciesError.
    own : sequence of Species
        Species of the user's own files.

    Returns
    -------
    Rules

    Raises
    ------
    RuleError
        A species or a reaction is not known, or a rule does not go with what is held; with the key.
    """
    constraints: dict[str, dict[str, float]] = {}
    needed: list[Species] = []
    for name in case.species.conversion or {}:
        constraints[CONVERSION + name] = {_name(name, find, "species", "conversion", name): 1.0}
    if case.species.carbon_conversion is not None:
        graphite = find(GRAPHITE)
        constraints[UNCONVERTED] = {graphite.name: 1.0}
        needed.append(graphite)
    for name, one in case.constraint.items():
        key = ("constraint", name, "amounts")
        constraints[name] = {_name(label, find, *key, label): value for label, value in one.amounts.items() if value}
    approaches: dict[str, dict[str, float]] = {}
    for name, step in case.approach.items():
        try:
            approaches[name] = reaction(step.reaction, extra=own).coefficients
        except InputError as error:
            raise RuleError(str(error), "approach", name, "reaction") from None
    if approaches and case.held.thermal == "entropy":
        raise RuleError(
            "an approach temperature does not go with held entropy; hold another condition", "approach",
            next(iter(approaches)),
        )  # fmt: skip
    return Rules(case, constraints, approaches, tuple(needed))


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
