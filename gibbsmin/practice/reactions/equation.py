"""The text of a chemical equation: taken apart into terms, and written again.

A plus that touches the formula before it and nothing after it is a charge (``Na+ + e- = Na``); every other plus joins
two terms. What would be guesswork (``CO+ H2O``) is an error.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable
from fractions import Fraction
from typing import Final, NamedTuple

from gibbsmin.errors import InputError

_LONGEST: Final = 2000  # characters
_MOST_TERMS: Final = 40
_LARGEST: Final = 10**6  # coefficient; the smallest is its inverse
_FRACTION_UP_TO: Final = 12  # denominators that are written as a fraction, others as decimals

_ALIKE: Final = str.maketrans(
    {
        **{subscript: str(digit) for digit, subscript in enumerate("₀₁₂₃₄₅₆₇₈₉")},
        **dict(zip("½⅓⅔¼¾", ("1/2", "1/3", "2/3", "1/4", "3/4"), strict=True)),
        **dict(zip("⁺⁻−–·×", "+---**", strict=True)),
    }
)
_MIXED = re.compile(r"\d\s*[½⅓⅔¼¾]")
_ARROW = re.compile(r"<=+>|<-+>|⇌|⇄|→|(?<=\s)-+>|->|=+>?")
_JOIN = re.compile(r"(?<![^\s])\+|\+(?![\s+]|$|\([gsl]\))")
_SPACED_PHASE = re.compile(r"(?<=[\w)+-])\s+(?=\((?:g|s|l|aq)\))")
_TERM = re.compile(r"(?P<count>\d+\s*/\s*\d+|\d+\.?\d*|\.\d+)?\s*\*?\s*(?P<name>\S.*)")


class Term(NamedTuple):
    """One term of an equation: its ``coefficient`` [-] and the ``name`` as it was typed."""

    coefficient: Fraction
    name: str


def read_equation(text: str, known: Callable[[str], bool]) -> tuple[list[Term], list[Term]]:
    """Take an equation apart.

    Parameters
    ----------
    text : str
        Two sides with ``=``, ``->``, ``<=>`` or the like between them; terms joined by ``+``; coefficients are
        integers, decimals or fractions.
    known : callable
        Tells whether a whole term is the name of a species, as of those that begin with a digit.

    Returns
    -------
    left, right : list of Term

    Raises
    ------
    InputError
        Not two sides, an empty term, or a coefficient that is none.

    Examples
    --------
    >>> read_equation("Na+ + e- = Na", lambda name: False)[0]
    [Term(coefficient=Fraction(1, 1), name='Na+'), Term(coefficient=Fraction(1, 1), name='e-')]
    """
    if not text.strip():
        raise InputError(f"equation: expected a text like 'CO + H2O = CO2 + H2', got {text!r}")
    if len(text) > _LONGEST:
        raise InputError(f"equation: {len(text)} characters are more than the {_LONGEST} that an equation may have")
    if mixed := _MIXED.search(text):
        raise InputError(f"equation: {mixed[0]!r} can be read in two ways; write a decimal like 1.5 or a fraction 3/2")
    plain = _SPACED_PHASE.sub("", text.translate(_ALIKE).strip())
    sides = _ARROW.split(plain)
    if len(sides) != 2:
        found = "no sign between its two sides" if len(sides) == 1 else f"{len(sides) - 1} signs between sides"
        raise InputError(f"equation {text.strip()!r} has {found}; expected one '=' (or '->' or '<=>')")
    left, right = (_terms(side, known) for side in sides)
    if len(left) + len(right) > _MOST_TERMS:
        raise InputError(f"equation: {len(left) + len(right)} terms are more than the {_MOST_TERMS} there may be")
    return left, right


def _terms(side: str, known: Callable[[str], bool]) -> list[Term]:
    """Read one side."""
    parts = [part.strip() for part in _JOIN.split(side)]
    if not all(parts):
        where = f"in {side.strip()!r} a term is empty" if side.strip() else "one side is empty"
        raise InputError(f"equation: {where}; expected species joined by ' + ' on both sides")
    return [_term(part, known) for part in parts]


def _term(text: str, known: Callable[[str], bool]) -> Term:
    """Read coefficient and name."""
    if known(text):
        return Term(Fraction(1), text)
    match = _TERM.fullmatch(text)
    if match is None or not any(map(str.isalpha, text)):
        raise InputError(f"equation: the term {text!r} holds no species")
    name = match["name"].strip()
    if name[0] in ",./^-":
        raise InputError(
            f"equation: the coefficient of {text!r} cannot be read; expected a positive number like 2, 0.5 or 1/2,"
            " and species that are used up on the left"
        )
    if " " in name and not known(name):
        raise InputError(
            f"equation: {text!r} is not one term; give one coefficient and one species, and between two species a plus"
            " with a space on both sides (a plus that touches a formula is its charge)"
        )
    return Term(_coefficient(match["count"], text), name)


def _coefficient(count: str | None, text: str) -> Fraction:
    """Read a coefficient exactly."""
    if count is None:
        return Fraction(1)
    over, _, under = count.partition("/")
    divisor = Fraction(under.strip() or 1)
    value = Fraction(over.strip()) / divisor if divisor else Fraction(0)
    if not Fraction(1, _LARGEST) <= value <= _LARGEST:
        raise InputError(f"equation: the coefficient of {text!r} is not between 1e-6 and 1e6")
    return value


def number(value: Fraction) -> str:
    """Write a coefficient: an integer, a simple fraction, else a decimal.

    Examples
    --------
    >>> number(Fraction(2)), number(Fraction(1, 2)), number(Fraction(947, 1000))
    ('2', '1/2', '0.947')
    """
    return str(value) if value.denominator <= _FRACTION_UP_TO else f"{float(value):.10g}"


def written(terms: Iterable[tuple[Fraction, str]]) -> str:
    """Write an equation.

    Parameters
    ----------
    terms : iterable of (Fraction, str)
        Coefficient, positive for products, and name of each species.

    Returns
    -------
    str

    Examples
    --------
    >>> written([(Fraction(-2), "H2"), (Fraction(-1), "O2"), (Fraction(2), "H2O(g)")])
    '2 H2 + O2 = 2 H2O(g)'
    """
    sides: tuple[list[str], list[str]] = ([], [])
    for coefficient, name in terms:
        if coefficient:
            count = "" if abs(coefficient) == 1 else f"{number(abs(coefficient))} "
            sides[coefficient > 0].append(count + name)
    return " = ".join(" + ".join(side) for side in sides)
