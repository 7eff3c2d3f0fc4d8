"""What is held, in words, as the case has it."""

from __future__ import annotations

from collections.abc import Collection, Mapping
from typing import Any, Final

_WORDS: Final = {"isentropic_efficiency": "isentropic efficiency"}


def held_words(held: Mapping[str, Any], varied: Collection[str] = ()) -> str:
    """Put the table ``[held]`` in words.

    Parameters
    ----------
    held : mapping
        Keys and values as typed.
    varied : collection of str
        Inputs that are varied, as ``held.KEY``; they are left out.

    Returns
    -------
    str
        Empty where nothing is left.

    Examples
    --------
    >>> held_words({"adiabatic": True, "pressure": "1 bar"})
    'adiabatic, pressure 1 bar'
    """
    told = []
    for key, value in held.items():
        if value is not None and f"held.{key}" not in varied:
            told.append(key if value is True else f"{_WORDS.get(key, key)} {value}")
    return ", ".join(told)
