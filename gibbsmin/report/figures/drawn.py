"""A figure that is drawn and not yet written: picture, data, and words for those who do not see it."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from math import isfinite
from typing import Final

import numpy as np
from matplotlib.figure import Figure
from numpy.typing import NDArray

from gibbsmin.report.figures.quantities import Quantity
from gibbsmin.report.figures.source import Input, Source
from gibbsmin.report.figures.style import PALETTE, value_with_unit
from gibbsmin.report.numbers import MISSING, figures, plain

Cells = NDArray[np.float64] | Sequence[str]

_ROUND: Final = 4  # figures of a number in words


@dataclass(frozen=True)
class Drawn:
    """A figure.

    Attributes
    ----------
    name : str
        Of its files, without ending.
    title : str
        As it stands over the picture.
    alternative : str
        One sentence that tells what is to be seen, with units.
    figure : Figure
    data : mapping of str to array (rows,) or sequence of str
        Columns of its CSV file, by head.
    notes : tuple of str
        What stands under the figure: what is left out, what the lines rest on.
    """

    name: str
    title: str
    alternative: str
    figure: Figure
    data: Mapping[str, Cells]
    notes: tuple[str, ...] = ()


@dataclass
class Colours:
    """Gives each species its colour, the same in all figures of a result; the first come, the first served."""

    given: dict[str, str] = field(default_factory=dict)

    def of(self, species: str) -> str | None:
        """Colour of a species; None where all are taken."""
        if species not in self.given and len(self.given) < len(PALETTE):
            self.given[species] = PALETTE[len(self.given)]
        return self.given.get(species)


def columns(source: Source, quantities: Sequence[Quantity]) -> dict[str, Cells]:
    """Lay out the data of a figure, a row a point: inputs as typed, results in SI.

    Parameters
    ----------
    source : Source
    quantities : sequence of Quantity

    Returns
    -------
    dict of str to array (points,)
    """
    grid = source.kind == "grid"
    mesh = np.meshgrid(*(one.values for one in source.inputs), indexing="ij") if grid else None
    found: dict[str, Cells] = {}
    for k, one in enumerate(source.inputs):
        values = one.values if mesh is None else mesh[k]
        found[f"{one.name} [{one.typed_unit if one.typed_unit not in ('', '1') else '-'}]"] = values.ravel()
    for quantity in quantities:
        found[quantity.name] = quantity.values.ravel()
    return found


def span_words(quantity: Quantity) -> str:
    """Say what a quantity ranges over: ``"CH₄ 0.3 to 4.2 %"``.

    Examples
    --------
    >>> span_words(Quantity("", "CO", np.array([0.1, 0.2]), "%", 100.0))
    'CO (10 to 20 %)'
    """
    low, high = (number(value) for value in quantity.span)
    told = low if low == high else f"{low} to {high}"
    return f"{quantity.label} ({value_with_unit(told, quantity.unit)})"


def input_span(one: Input) -> str:
    """Say what an input ranges over: ``"temperature from 600 to 900 °C"``."""
    low, high = (number(float(value)) for value in (one.values.min(), one.values.max()))
    return f"{one.label} from {low} to {value_with_unit(high, one.unit)}"


def number(value: float) -> str:
    """Write a number in words or at a line: four figures at most, no idle zeros.

    Examples
    --------
    >>> number(600.0), number(0.12345), number(1.0e-9), number(-12.5)
    ('600', '0.1235', '1e-09', '-12.5')
    """
    if not isfinite(value):
        return MISSING
    text = figures(value, _ROUND)
    if "e" in text:
        return f"{value:.3g}"
    return text.rstrip("0").rstrip(".") if "." in text else text


def input_value(one: Input, value: float) -> str:
    """Write a value of an input with its unit."""
    return value_with_unit(plain(value) if 1e-3 <= abs(value) < 1e7 or value == 0.0 else number(value), one.unit)


def listed(words: Sequence[str]) -> str:
    """Join words as in a sentence.

    Examples
    --------
    >>> listed(["a"]), listed(["a", "b"]), listed(["a", "b", "c"])
    ('a', 'a and b', 'a, b and c')
    """
    return words[0] if len(words) == 1 else f"{', '.join(words[:-1])} and {words[-1]}"


def capital(text: str) -> str:
    """Begin with a capital, unless a symbol would suffer.

    Examples
    --------
    >>> capital("heat to be supplied"), capital("pH"), capital("n-butane")
    ('Heat to be supplied', 'pH', 'n-butane')
    """
    first = text.split(" ", maxsplit=1)[0]
    return text[:1].upper() + text[1:] if first.isalpha() and first.islower() and len(first) > 1 else text
