"""From a name in an equation to one species: no phase is taken silently where the data have several.

A bare formula is the gas, as in all names. Where that gas hardly exists at room temperature (carbon, iron, common
salt), a bare formula is more likely a slip than a gas, and an error asks for the phase.
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from functools import cache
from math import exp
from typing import Final, NamedTuple

from gibbsmin.constants import STANDARD_TEMPERATURE, R
from gibbsmin.elements import parse_formula, split_name
from gibbsmin.errors import FormulaError, SpeciesError
from gibbsmin.thermo.database import load
from gibbsmin.thermo.record import Species

_VOLATILE: Final = 1e-3
"""Saturation pressure at 298.15 K over 1 bar above which a bare formula is taken for the gas: steam is, mercury is not
(a choice of this project)."""

_GAS = re.compile(r"(?P<formula>.*)\(g\)(?P<form>:\S+)?")
_ENDING = re.compile(r"\([a-zA-Z]{1,2}\)$")
_OTHER_ENDINGS: Final = {
    "(aq)": "there are no species in water in the data",
    "(c)": "write (s) for a solid",
    "(cr)": "write (s) for a solid",
    "(gr)": "write (s) for a solid",
    "(L)": "write (l) for a liquid",
    "(S)": "write (s) for a solid",
    "(G)": "write (g) for a gas",
}


class Participant(NamedTuple):
    """A species of an equation.

    Attributes
    ----------
    species : Species
    label : str
        Its name, with ``(g)`` where the same substance may also be condensed.
    others : tuple of Species
        The same substance in its other phases.
    note : str
        What was taken for granted; may be empty.
    """

    species: Species
    label: str
    others: tuple[Species, ...]
    note: str


def participant(name: str, extra: Mapping[str, Species]) -> Participant:
    """Find the species that a name in an equation means.

    Parameters
    ----------
    name : str
        As in the database; ``(g)`` may be said of a gas.
    extra : mapping of str to Species
        Own species by name, which go before those of the database.

    Returns
    -------
    Participant

    Raises
    ------
    SpeciesError
        No such species, or the phase must be said; the text lists the choices.
    """
    said = _GAS.fullmatch(name)
    bare = said["formula"] + (said["form"] or "") if said else name
    species = extra[bare] if bare in extra else _shipped(bare, name)
    if said and species.condensed:
        raise SpeciesError(f"{name!r} says gas, and {bare!r} is {species.name}, a {species.phase}; leave one of them")
    others = _other_phases(species)
    condensed = [other for other in others if other.condensed]
    label = phase_label(species) if condensed else species.name
    if said or species.condensed or not condensed or bare in extra or not _is_formula(bare):
        return Participant(species, label, others, "")
    choices = ", ".join(other.name for other in condensed)
    if _saturation(species, condensed) < _VOLATILE:
        raise SpeciesError(
            f"{name!r} alone would be the gas, of which there is hardly any at 25 degC; say which is meant: "
            f"{choices}, or {label} for the gas"
        )
    return Participant(species, label, others, f"{bare} is taken as the gas; {choices} would have to be said")


def _shipped(name: str, typed: str) -> Species:
    """Find a species of the database, or say which of the same composition there are."""
    try:
        return load().get(name)
    except SpeciesError as error:
        for ending, remedy in _OTHER_ENDINGS.items():
            if name.endswith(ending):
                raise SpeciesError(f"there is no species {typed!r}: {remedy}{_there_is(name)}") from None
        names = _of_composition(name)
        phase = "" if not names else split_name(name).phase
        if names and all(load().get(other).phase != phase for other in names):
            raise SpeciesError(f"there is no {phase} {typed!r}{_there_is(name)}") from None
        hint = "; a charge is trailing signs, one each: Ca++" if re.search(r"\d[+-]$|\^", name) else ""
        raise SpeciesError(f"{error}{hint}") from None


def _of_composition(name: str) -> list[str]:
    """Names of the species that have the composition of ``name``; empty where it is no formula."""
    try:
        formula = _ENDING.sub("", split_name(name).formula)
        composition = parse_formula(formula)
    except FormulaError:
        return []
    return [s.name for s in load().search(formula) if (dict(s.elements), s.charge) == composition]


def _there_is(name: str) -> str:
    """List what there is of the composition of ``name``."""
    names = _of_composition(name)
    return f"; of this composition there is {', '.join(names)}" if names else ""


def _is_formula(name: str) -> bool:
    """Tell a formula from a word (``steam``)."""
    try:
        parse_formula(split_name(name).formula)
    except FormulaError:
        return False
    return True


def _other_phases(species: Species) -> tuple[Species, ...]:
    """Find the same substance in its other phases."""
    found = (load().get(name) for name in _by_formula().get(species.formula, ()))
    return tuple(
        other
        for other in found
        if other.phase != species.phase
        and (other.elements, other.charge) == (species.elements, species.charge)
        and (other.form == species.form or not other.form or not species.form)
    )


@cache
def _by_formula() -> dict[str, list[str]]:
    """Names of the species of each formula."""
    names: dict[str, list[str]] = {}
    for record in load().to_records():
        names.setdefault(record["formula"], []).append(record["name"])
    return names


def phase_label(species: Species) -> str:
    """Name a species with its phase, that of a gas too."""
    if species.condensed:
        return species.name
    return f"{species.formula}(g)" + (f":{species.form}" if species.form else "")


def _saturation(gas: Species, condensed: list[Species]) -> float:
    """Pressure of the gas over its most stable condensed form at 298.15 K, [bar]."""
    T = STANDARD_TEMPERATURE
    least = min(
        (float(other.gibbs_energy(T)) for other in condensed if other.usable[0] <= T <= other.usable[1]),
        default=float("inf"),
    )
    return exp(min((least - float(gas.gibbs_energy(T))) / (R * T), 700.0))
