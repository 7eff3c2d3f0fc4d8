"""The database of species: the shipped file, looked up by name, searched by words, chosen by elements.

The file ``data/species.json`` is read once; a `Species` is made when it is asked for the first time.
"""

from __future__ import annotations

import json
from collections.abc import Iterable, Mapping
from functools import cache
from importlib.resources import files
from typing import Any, Final

from gibbsmin.elements import ATOMIC_WEIGHT, parse_formula, split_name
from gibbsmin.errors import FormulaError, SpeciesError, nearest
from gibbsmin.thermo.record import Piece, Species

Record = Mapping[str, Any]
"""One species in the layout of ``species.json``."""

FORMAT: Final = 1


class Database:
    """Species by name.

    Parameters
    ----------
    content : mapping
        ``format``, ``version``, ``made_from`` and ``species``, a list of records, as in ``data/species.json``.

    Examples
    --------
    >>> data = load()
    >>> data.get("methane").name
    'CH4'
    >>> [species.name for species in data.search("butane")]
    ['C4H10:n-butane', 'C4H10:isobutane', 'C4H8:cyclobutane', 'C5H12:isopentane']
    """

    def __init__(self, content: Mapping[str, Any]) -> None:
        if content["format"] != FORMAT:
            raise SpeciesError(f"the species file has format {content['format']!r}; this version reads {FORMAT}")
        self.version: str = content["version"]
        self.made_from: Mapping[str, str] = content["made_from"]
        self._records: dict[str, Record] = {record["name"]: record for record in content["species"]}
        self._aliases: dict[str, str] = {
            alias: name for name, record in self._records.items() for alias in record["aliases"]
        }
        self._made: dict[str, Species] = {}

    @property
    def names(self) -> list[str]:
        """Names of all species, in alphabetical order."""
        return list(self._records)

    def __contains__(self, name: object) -> bool:
        return name in self._records or name in self._aliases

    def __len__(self) -> int:
        return len(self._records)

    def get(self, name: str) -> Species:
        """Return the species of exactly this name or alias.

        Parameters
        ----------
        name : str
            Capitals count: ``CS`` is carbon monosulfide, ``Cs`` is caesium.

        Returns
        -------
        Species

        Raises
        ------
        SpeciesError
            No such species, or a formula that several isomers share; the text lists the choices.
        """
        name = self._aliases.get(name, name)
        if name not in self._made:
            if name not in self._records:
                raise SpeciesError(self._explain(name))
            self._made[name] = from_record(self._records[name])
        return self._made[name]

    def offered(self, name: str) -> bool:
        """Tell whether the species is in choices by element; a few are to be had by name only."""
        return bool(self._records[self.get(name).name]["default"])

    def species_class(self, name: str) -> str:
        """Class of the species, after which uncertainties are assumed where none is published."""
        return str(self._records[self.get(name).name]["class"])

    def with_elements(self, elements: Iterable[str], condensed: bool = True, ions: bool = False) -> list[Species]:
        """Return the species that are made of these elements only.

        Parameters
        ----------
        elements : iterable of str
            Symbols. Deuterium, ``D``, counts as an element of its own.
        condensed : bool
            Whether solids and liquids are wanted.
        ions : bool
            Whether charged species are wanted, the electron among them.

        Returns
        -------
        list of Species
            In alphabetical order. Species that are off by default are left out.
        """
        wanted = set(elements)
        if unknown := sorted(wanted - ATOMIC_WEIGHT.keys()):
            raise SpeciesError(f"there is no element {unknown[0]!r}{nearest(unknown[0], ATOMIC_WEIGHT)}")
        return [
            self.get(name)
            for name, record in self._records.items()
            if record["default"]
            and record["elements"].keys() <= wanted
            and (condensed or record["phase"] == "gas")
            and (ions or not record["charge"])
        ]

    def search(self, words: str) -> list[Species]:
        """Find species by part of a name, alias or older spelling, by composition, or by a set of elements.

        Parameters
        ----------
        words : str
            Capitals do not count. ``C2H6O`` finds ethanol and dimethyl ether; ``Fe O`` all oxides of iron.

        Returns
        -------
        list of Species
            Names that are equal first, then equal formulas, then those that hold all the words.
        """
        query = words.strip().casefold()
        parts = query.split()
        if not parts:
            return []
        elements = {symbol.casefold(): symbol for symbol in ATOMIC_WEIGHT}
        asked = {elements[part] for part in parts if part in elements}
        by_elements = len(asked) == len(parts) > 1
        composition = _composition(words.strip())
        ranks: dict[str, int] = {}
        for name, record in self._records.items():
            labels = [label.casefold() for label in (name, *record["aliases"], *record["records"])]
            if query in labels:
                ranks[name] = 0
            elif record["formula"].casefold() == query or (composition and _same(record, composition)):
                ranks[name] = 1
            elif by_elements and record["elements"].keys() == asked:
                ranks[name] = 2
            elif not by_elements and len(query) > 2 and all(any(part in label for label in labels) for part in parts):
                ranks[name] = 3
        return [self.get(name) for name in sorted(ranks, key=lambda name: ranks[name])]

    def to_records(self) -> list[dict[str, Any]]:
        """Return all species in the layout of the file, as a copy."""
        return [dict(record) for record in self._records.values()]

    def _explain(self, name: str) -> str:
        """Say why a name is not found, and what would be."""
        composition = _composition(name)
        if composition:
            choices = [
                other
                for other, record in self._records.items()
                if _same(record, composition) and split_name(other).phase == split_name(name).phase
            ]
            if len(choices) > 1 and not split_name(name).form:
                return f"{name!r} is not the name of one species; choose from {', '.join(choices)}"
            if choices:
                return f"there is no species {name!r}; of this composition there is {', '.join(choices)}"
        older = [other for other, record in self._records.items() if name in record["records"]]
        if older:
            return f"there is no species {name!r}; it is {older[0]!r} here"
        return f"there is no species {name!r}{nearest(name, [*self._records, *self._aliases])}"


def _composition(name: str) -> tuple[dict[str, float], int] | None:
    """Elements and charge of what may be a name, or None."""
    try:
        return parse_formula(split_name(name).formula)
    except FormulaError:
        return None


def _same(record: Record, composition: tuple[dict[str, float], int]) -> bool:
    return bool(record["elements"] == composition[0] and record["charge"] == composition[1])


def from_record(record: Record) -> Species:
    """Make a species from its record in the layout of ``species.json``."""
    return Species(
        name=record["name"],
        formula=record["formula"],
        phase=record["phase"],
        form=record["form"],
        elements={element: float(atoms) for element, atoms in record["elements"].items()},
        charge=record["charge"],
        pieces=tuple(
            Piece(float(low), float(high), tuple(map(float, a)), *form) for low, high, a, *form in record["pieces"]
        ),
        usable=(float(record["usable"][0]), float(record["usable"][1])),
        aliases=tuple(record["aliases"]),
        reference_pressure=float(record["reference_pressure"]),
        gas_constant=record["R"],
        source=record["source"],
        note=record["note"],
        enthalpy_uncertainty=float(record["u_H"]),
        entropy_uncertainty=float(record["u_S"]),
        uncertainty_source=record["u_H_source"],
        uncertainty_assumed=record["u_H_assumed"],
    )


def to_record(species: Species) -> dict[str, Any]:
    """Return what `from_record` needs to make the species again; plain numbers and text."""
    return {
        "name": species.name,
        "formula": species.formula,
        "phase": species.phase,
        "form": species.form,
        "aliases": list(species.aliases),
        "elements": dict(species.elements),
        "charge": species.charge,
        "R": species.gas_constant,
        "reference_pressure": species.reference_pressure,
        "pieces": [
            [low, high, list(coefficients), *([form] if form else [])]
            for low, high, coefficients, form in species.pieces
        ],
        "usable": list(species.usable),
        "source": species.source,
        "note": species.note,
        "u_H": species.enthalpy_uncertainty,
        "u_H_source": species.uncertainty_source,
        "u_H_assumed": species.uncertainty_assumed,
        "u_S": species.entropy_uncertainty,
    }


@cache
def load() -> Database:
    """Return the shipped database, read once."""
    text = files("gibbsmin.thermo").joinpath("data", "species.json").read_text("utf-8")
    return Database(json.loads(text))


def species(name: str) -> Species:
    """Return the shipped species of exactly this name or alias.

    Parameters
    ----------
    name : str
        As for `Database.get`.

    Returns
    -------
    Species

    Examples
    --------
    >>> round(species("CO2").standard_enthalpy / 1e3, 2)
    -393.51
    """
    return load().get(name)
