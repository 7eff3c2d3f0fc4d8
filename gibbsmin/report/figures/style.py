"""How every figure looks: colours, letters, sizes, and how formulas and units are written.

Seven line colours, searched for so that any two differ by at least 24 CIELAB units to usual eyes and to the three kinds
of colour-blindness (simulated after Machado, Oliveira & Fernandes 2009), by 7 in lightness, so that they stay apart in
grey, and so that each has a contrast of 3 on white. What has an order (the values of an input) is drawn in shades of
one colour, light to dark.
"""

from __future__ import annotations

import re
import textwrap
import warnings
from collections.abc import Iterator
from contextlib import contextmanager
from typing import Any, Final

import matplotlib as mpl
from matplotlib.colors import LinearSegmentedColormap, to_hex, to_rgb
from matplotlib.figure import Figure

PALETTE: Final = ("#0d77f9", "#e66c1d", "#4a0402", "#07605b", "#3f05d0", "#70683f", "#4d1371")
"""Line colours; a species keeps its own in all figures of a result."""

INK: Final = "#1a1a1a"
"""Words, axes and condensed phases."""

FAINT: Final = "#595959"
"""Second lines and marks."""

SCALE: Final = LinearSegmentedColormap.from_list("map", ["#f6f4ee", "#e1d6de", "#ccb9ce", "#b79dbe", "#a281af"])
"""Colours of a map, in even steps of lightness from light to middle, so that ink can be read on all of them."""

_FAMILY: Final = LinearSegmentedColormap.from_list("family", ["#a281af", "#784b90", "#4d1371", "#1c0030"])

DASHES: Final = ("--", (0, (1.2, 1.2)), (0, (6, 1.5, 1.2, 1.5)), (0, (8, 3)), (0, (3, 1.2, 1, 1.2, 1, 1.2)))
"""Strokes of condensed phases, which are drawn in ink."""

WIDTH: Final = 6.3
"""Width of a figure, [inch]."""

HEIGHT: Final = 3.6
"""Height of a figure of one panel, [inch]."""

DPI: Final = 200
"""Dots per inch of the PNG file."""

POINTS: Final = 9.0
"""Size of the letters, [pt]."""

_LOOK: Final[Any] = {
    "font.family": "DejaVu Sans",
    "font.size": POINTS,
    "text.color": INK,
    "text.parse_math": False,
    "axes.edgecolor": FAINT,
    "axes.labelcolor": INK,
    "axes.labelsize": POINTS,
    "axes.linewidth": 0.6,
    "axes.spines.top": False,
    "axes.spines.right": False,
    "axes.axisbelow": True,
    "axes.formatter.useoffset": False,
    "axes.formatter.limits": (-4, 6),
    "xtick.color": FAINT,
    "ytick.color": FAINT,
    "xtick.labelcolor": INK,
    "ytick.labelcolor": INK,
    "xtick.labelsize": POINTS - 1.0,
    "ytick.labelsize": POINTS - 1.0,
    "grid.color": "#d9d9d9",
    "grid.linewidth": 0.5,
    "lines.linewidth": 1.6,
    "svg.hashsalt": "gibbsmin",
    "svg.fonttype": "path",
    "path.simplify": True,
}
_DIGITS: Final = str.maketrans("0123456789+-", "₀₁₂₃₄₅₆₇₈₉⁺⁻")
_RAISED: Final = str.maketrans("0123456789", "⁰¹²³⁴⁵⁶⁷⁸⁹")
_UNITS: Final = {"degC": "°C", "degF": "°F", "1": "", "-": ""}
_TITLE: Final = 76  # letters of a line of a title
_READABLE: Final = 4.5  # contrast that words need


@contextmanager
def styled() -> Iterator[None]:
    """Draw and write in the look of the project, whatever the reader's own settings are.

    A sign that the letters do not have comes out as an empty box, and no more is made of it.
    """
    with mpl.rc_context(), warnings.catch_warnings():
        warnings.filterwarnings("ignore", message="Glyph .* missing from font")
        mpl.rcdefaults()
        mpl.rcParams.update(_LOOK)
        yield


def canvas(title: str, rows: int = 1, columns: int = 1, height: float = HEIGHT, **shared: Any) -> tuple[Figure, Any]:
    """Make a figure with its title on the left and panels that have a faint horizontal grid.

    Parameters
    ----------
    title : str
        What is drawn, and what is held.
    rows, columns : int
        Panels.
    height : float
        [inch].
    **shared
        ``sharex``, ``sharey``, ``height_ratios`` for the panels.

    Returns
    -------
    figure, panels
        ``panels`` is an array of axes (rows, columns).
    """
    figure = Figure(figsize=(WIDTH, height), layout="constrained")
    wrapped = "\n".join(textwrap.wrap(title, _TITLE))
    figure.suptitle(wrapped, x=0.008, ha="left", fontsize=POINTS, fontweight="bold")
    panels = figure.subplots(rows, columns, squeeze=False, **shared)
    for panel in panels.flat:
        panel.grid(axis="y")
    return figure, panels


def readable(colour: str) -> str:
    """Darken a colour until words in it have the contrast on white that reading needs (WCAG 2.2: 4.5).

    Examples
    --------
    >>> readable("#4d1371")
    '#4d1371'
    """
    red, green, blue = to_rgb(colour)
    while contrast(colour) < _READABLE:
        red, green, blue = 0.95 * red, 0.95 * green, 0.95 * blue
        colour = to_hex((red, green, blue))
    return colour


def contrast(colour: str) -> float:
    """Contrast of a colour on white, by the relative luminance of WCAG 2.2, [-]."""
    linear = [c / 12.92 if c <= 0.04045 else ((c + 0.055) / 1.055) ** 2.4 for c in to_rgb(colour)]
    return 1.05 / (0.2126 * linear[0] + 0.7152 * linear[1] + 0.0722 * linear[2] + 0.05)


def shades(count: int) -> list[str]:
    """Colours of ``count`` ordered values, from a middle shade to the darkest."""
    return [to_hex(_FAMILY(k / (count - 1) if count > 1 else 0.5)) for k in range(count)]


def formula(name: str) -> str:
    """Write the name of a species as chemists do.

    Examples
    --------
    >>> formula("CH4"), formula("C(s):graphite"), formula("SO4--"), formula("H2O(l)"), formula("HCO3-")
    ('CH₄', 'C(s) graphite', 'SO₄²⁻', 'H₂O(l)', 'HCO₃⁻')
    """
    body, _, form = name.partition(":")
    lowered = re.sub(r"(?<=[A-Za-z)\]])\d+(?:\.\d+)?", lambda match: match[0].translate(_DIGITS), body)
    charged = re.sub(r"(\+|-)\1*$", lambda match: _charge(match[0]), lowered)
    return f"{charged} {form.replace('_', ' ')}".strip()


def _charge(signs: str) -> str:
    count = "" if len(signs) == 1 else str(len(signs)).translate(_RAISED)
    return count + signs[0].translate(_DIGITS)


def in_formulas(text: str) -> str:
    """Lower the digits of the formulas in a sentence; other words and numbers stay.

    Examples
    --------
    >>> in_formulas("NOx at 6 % O2, dry"), in_formulas("2 S/Cl fed"), in_formulas("H2/CO")
    ('NOx at 6 % O₂, dry', '2 S/Cl fed', 'H₂/CO')
    """
    part = r"[A-Z][a-z]?(?:\d+(?:\.\d+)?)?"
    found = rf"(?<![A-Za-z0-9])(?:{part}|\((?:{part})+\)\d*)+(?![a-z])"
    return re.sub(found, lambda match: match[0].translate(_DIGITS), text)


def unit_word(unit: str) -> str:
    """Write a unit as people do; nothing for a plain number.

    Examples
    --------
    >>> unit_word("degC"), unit_word("Nm3/h"), unit_word("J/K"), unit_word("1")
    ('°C', 'Nm³/h', 'J/K', '')
    """
    if unit in _UNITS:
        return _UNITS[unit]
    return re.sub(r"(?<=m)[23]\b", lambda match: match[0].translate(_RAISED), unit)


def with_unit(label: str, unit: str) -> str:
    """Title of an axis: words, and the unit after a comma; ``unit`` as people write it."""
    return f"{label}, {unit}" if unit else label


def in_unit(label: str, unit: str) -> str:
    """Title of what is shown: words, and the unit; ``unit`` as people write it."""
    return f"{label}{',' if ',' in label else ''} in {unit}" if unit else label


def value_with_unit(text: str, unit: str) -> str:
    """Write a number with its unit; ``unit`` as people write it."""
    return f"{text} {unit}" if unit else text
