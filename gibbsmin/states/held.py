"""Which two conditions may be held, and how they reach the solver."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any, Final, NamedTuple

from gibbsmin.errors import InputError
from gibbsmin.solver.layout import ENERGY, ENTROPY, TEMPERATURE

UNIT: Final = {
    "temperature": "K",
    "pressure": "Pa",
    "volume": "m3",
    "enthalpy": "J",
    "internal_energy": "J",
    "entropy": "J/K",
}
"""SI unit of every condition that can be held."""


class Pair(NamedTuple):
    """One of the six pairs: the first condition is a pressure or volume, the second decides the temperature."""

    first: str
    second: str
    mode: int
    volume: bool


PAIRS: Final = (
    Pair("pressure", "temperature", TEMPERATURE, False),
    Pair("pressure", "enthalpy", ENERGY, False),
    Pair("pressure", "entropy", ENTROPY, False),
    Pair("volume", "temperature", TEMPERATURE, True),
    Pair("volume", "internal_energy", ENERGY, True),
    Pair("volume", "entropy", ENTROPY, True),
)

_WHY: Final = {
    frozenset({"temperature", "entropy"}): "pressure or volume would have to be found, and there may be two or none",
    frozenset({"temperature", "enthalpy"}): "the enthalpy of ideal gases hardly depends on pressure, which stays open",
    frozenset({"temperature", "internal_energy"}): "the energy of ideal gases hardly depends on volume, which is open",
    frozenset({"enthalpy", "entropy"}): "pressure and temperature would both have to be found, and there may be none",
    frozenset({"pressure", "volume"}): "the temperature may then have several answers",
    frozenset({"volume", "enthalpy"}): "at held volume the balance is one of internal energy; hold internal_energy",
    frozenset({"pressure", "internal_energy"}): "at held pressure the balance is one of enthalpy; hold enthalpy",
}


def which_pair(given: Mapping[str, Any]) -> tuple[Pair, Any, Any]:
    """Find the pair that is held.

    Parameters
    ----------
    given : mapping of str to value or None
        What each condition was given as.

    Returns
    -------
    pair : Pair
    first, second : value
        The two values, in the order of the pair.

    Raises
    ------
    InputError
        Not exactly two, or two that do not go together; the text says why.
    """
    held = {name: value for name, value in given.items() if value is not None}
    for pair in PAIRS:
        if held.keys() == {pair.first, pair.second}:
            return pair, held[pair.first], held[pair.second]
    known = ", ".join(f"{pair.second} and {pair.first}" for pair in PAIRS)
    found = " and ".join(sorted(held)) or "nothing"
    why = _WHY.get(frozenset(held))
    reason = f": {why}" if why else ""
    raise InputError(f"{found} cannot be held{reason}; hold one of the pairs {known}")
