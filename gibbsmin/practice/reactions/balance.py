"""Whether an equation balances, and the coefficients with which it would: exact arithmetic on atoms and charge."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from math import gcd, lcm
from typing import Final

from gibbsmin.elements import CHARGE
from gibbsmin.errors import InputError
from gibbsmin.practice.reactions.equation import number, written
from gibbsmin.thermo.record import Species

_SHOWN: Final = 3  # independent equations that are written out


def check_balance(species: Sequence[Species], coefficients: Sequence[Fraction], labels: Sequence[str]) -> None:
    """Raise where atoms or charge do not balance, and propose coefficients with which they do.

    Parameters
    ----------
    species : sequence of Species
    coefficients : sequence of Fraction
        Positive for products, [-].
    labels : sequence of str
        How the species are to be written.

    Raises
    ------
    InputError
        The text has the amounts on both sides of what does not balance, and the equation that does.
    """
    rows = atoms(species)
    open_rows = []
    for element, counts in rows.items():
        left = -sum((c * a for c, a in zip(coefficients, counts, strict=True) if c < 0), Fraction(0))
        right = sum((c * a for c, a in zip(coefficients, counts, strict=True) if c > 0), Fraction(0))
        if left != right:
            open_rows.append(f"{element} {number(left)} on the left, {number(right)} on the right")
    if open_rows:
        typed = written(zip(coefficients, labels, strict=True))
        remedy = _mended(list(rows.values()), coefficients, labels)
        raise InputError(f"{typed} does not balance: {'; '.join(open_rows)}. {remedy}")


def atoms(species: Sequence[Species]) -> dict[str, list[Fraction]]:
    """Atoms of each element in each species, and the charge where there is any; exact."""
    elements = sorted({element for record in species for element in record.elements})
    rows = {element: [Fraction(repr(record.elements.get(element, 0.0))) for record in species] for element in elements}
    if any(record.charge for record in species):
        rows[CHARGE] = [Fraction(record.charge) for record in species]
    return rows


def null_space(rows: Sequence[Sequence[Fraction]]) -> list[list[Fraction]]:
    """Find all independent sets of coefficients that balance every row.

    Parameters
    ----------
    rows : sequence of sequences of Fraction
        Atoms of one element in each species.

    Returns
    -------
    list of list of Fraction
        Each of smallest integers.
    """
    matrix = [list(row) for row in rows]
    count = len(matrix[0])
    pivots: list[int] = []
    for column in range(count):
        rank = len(pivots)
        found = next((r for r in range(rank, len(matrix)) if matrix[r][column]), None)
        if found is None:
            continue
        matrix[rank], matrix[found] = matrix[found], matrix[rank]
        leading = matrix[rank][column]
        matrix[rank] = [value / leading for value in matrix[rank]]
        for r, row in enumerate(matrix):
            if r != rank and row[column]:
                factor = row[column]
                matrix[r] = [a - factor * b for a, b in zip(row, matrix[rank], strict=True)]
        pivots.append(column)
    vectors = []
    for free in sorted(set(range(count)) - set(pivots)):
        vector = [Fraction(0)] * count
        vector[free] = Fraction(1)
        for r, pivot in enumerate(pivots):
            vector[pivot] = -matrix[r][free]
        vectors.append(_smallest_integers(vector))
    return vectors


def _smallest_integers(vector: Sequence[Fraction]) -> list[Fraction]:
    """Scale to integers without a common divisor."""
    scale = lcm(*(value.denominator for value in vector))
    integers = [int(value * scale) for value in vector]
    divisor = gcd(*integers)
    return [Fraction(value // divisor) for value in integers]


def _mended(rows: Sequence[Sequence[Fraction]], typed: Sequence[Fraction], labels: Sequence[str]) -> str:
    """Say which coefficients balance, or why none do."""
    vectors = [_turned(vector, typed) for vector in null_space(rows)]
    if not vectors:
        return "No coefficients balance these species: one is missing, or one is wrong."
    texts = [written(zip(vector, labels, strict=True)) for vector in vectors]
    if len(vectors) > 1:
        listed = "; ".join(texts[:_SHOWN])
        return (
            f"These species balance in more than one way, as sums of {len(vectors)} independent equations: {listed}"
            + (" and others." if len(vectors) > _SHOWN else ".")
        )
    signs = list(zip(vectors[0], typed, labels, strict=True))
    moved = [label for new, old, label in signs if new * old < 0]
    left_out = [label for new, _, label in signs if not new]
    how = [f"{', '.join(moved)} on the other side"] if moved else []
    how += [f"{', '.join(left_out)} left out"] if left_out else []
    return f"It balances as {texts[0]}" + (f" (with {' and '.join(how)})." if how else ".")


def _turned(vector: Sequence[Fraction], typed: Sequence[Fraction]) -> list[Fraction]:
    """Turn a set of coefficients so that as many species as can be stay on the side where they were typed."""
    agreeing = sum((new * old > 0) - (new * old < 0) for new, old in zip(vector, typed, strict=True))
    return [-value for value in vector] if agreeing < 0 else list(vector)
