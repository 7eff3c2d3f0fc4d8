"""What a caution is, how grave it is, and how numbers stand in it."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from typing import Final

GRAVE: Final = 0
"""Grade of what can kill, or of an answer that cannot be right: never left out of a list."""
HARMFUL: Final = 1
"""Grade of what harms people."""
PLANT: Final = 2
"""Grade of what harms the plant, or misleads who reads the numbers."""
DATA: Final = 3
"""Grade of doubts about data."""

MOST: Final = 6
"""How many cautions a list shows, unless more are grave."""


@dataclass(frozen=True, slots=True)
class Caution:
    """A caution: ``kind`` in a word or two, ``text`` for people, ``weight`` among those of its kind, and ``grade``."""

    kind: str
    text: str
    weight: float = 0.0
    grade: int = GRAVE


@dataclass(frozen=True, slots=True)
class Fed:
    """A feed as cautions see it: ``name``, ``amounts`` of species [mol], ``temperature`` [K] or None."""

    name: str
    amounts: Mapping[str, float]
    temperature: float | None


def foremost(found: Iterable[Caution], most: int = MOST) -> list[Caution]:
    """Cautions for a list that people read: gravest first, and not so many that none is read.

    Parameters
    ----------
    found : iterable of Caution
    most : int
        How many are shown.

    Returns
    -------
    list of Caution
        All that are grave, and of the others what there is room for, in their order. What is left out is named in a
        last one, so that nothing is hidden.
    """
    ordered = sorted(found, key=lambda caution: caution.grade)
    grave = sum(caution.grade == GRAVE for caution in ordered)
    shown = max(most, grave)
    if len(ordered) <= shown:
        return ordered
    named = ", ".join(caution.kind for caution in ordered[shown:])
    return [*ordered[:shown], Caution("more", f"There is more, in full in result.json: {named}.", grade=DATA)]


def share(x: float) -> str:
    """Mole fraction as people say it: percent from 0.1 % up, else ppm by volume, two figures.

    Examples
    --------
    >>> share(0.0967), share(0.00123), share(8.21e-4), share(4.5e-6), share(1.0)
    ('9.7 %', '0.12 %', '820 ppmv', '4.5 ppmv', '100 %')
    """
    value, unit = (100.0 * x, "%") if x >= 1e-3 else (1e6 * x, "ppmv")
    return f"{float(f'{value:.2g}'):g} {unit}"


def celsius(temperature: float) -> str:
    """Temperature as people say it: ``celsius(493.15)`` is ``'220 degC'``."""
    return f"{temperature - 273.15:.0f} degC"


def largest(parts: Mapping[str, float], count: int) -> str:
    """Name the ``count`` largest parts of a gas, largest first."""
    return ", ".join(f"{name} {share(x)}" for name, x in sorted(parts.items(), key=lambda item: -item[1])[:count])
