"""The trade's numbers for the terminal: a block a set, with the basis of each number as a footnote."""

from __future__ import annotations

import textwrap
from collections.abc import Mapping, Sequence
from typing import Final

import numpy as np

from gibbsmin.practice.feeds.heating import NORMAL_MOLAR_VOLUME
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.report.numbers import MISSING, figures, prefixed
from gibbsmin.report.words import WIDTH, shortened

_LABEL: Final = 40
_COUNT: Final = {"ppmv": 3, "mg/Nm3": 3, "degC": 4}
_SCALES: Final = {
    "%": 1e2,
    "ppmv": 1e6,
    "mg/Nm3": 1e6,
    "MJ/kg": 1e-6,
    "MJ/m3": 1e-6,
    "MJ/Nm3": 1e-6,
    "kJ/mol": 1e-3,
    "kg/h": 3600.0,
    "kg/t": 1e3,
    "mg/MJ": 1e12,
    "kg/GJ": 1e9,
    "Nm3/GJ": 1e9,
    "Nm3/h": 3600.0 * NORMAL_MOLAR_VOLUME,
    "Nm3": NORMAL_MOLAR_VOLUME,
}
"""What a value in SI is multiplied with to be shown in a unit."""

_ZERO: Final = {"degC": 273.15}


def shown_value(figure: KeyFigure, value: float) -> str:
    """Write a value in the unit that people read it in.

    Parameters
    ----------
    figure : KeyFigure
    value : float
        In ``figure.unit``.

    Returns
    -------
    str
        The number alone; a dash where there is none.
    """
    if not np.isfinite(value):
        return MISSING
    factor, zero = in_shown_unit(figure.shown)
    scaled = value * factor - zero
    if figure.shown in ("", "W", "J") and figure.unit in ("W", "J"):
        return prefixed(value, figure.unit)
    if figure.shown == "degC":
        return f"{scaled:.1f}"
    if figure.shown == "%":
        return f"{scaled:.2f}" if abs(scaled) >= 0.01 or scaled == 0.0 else f"{scaled:.1e}"
    return figures(scaled, _COUNT.get(figure.shown, 4))


def in_shown_unit(shown: str) -> tuple[float, float]:
    """Tell how a value in SI becomes one in the unit ``shown``: factor, and what is then taken off.

    Examples
    --------
    >>> in_shown_unit("%"), in_shown_unit("degC"), in_shown_unit("")
    ((100.0, 0.0), (1.0, 273.15), (1.0, 0.0))
    """
    return _SCALES.get(shown, 1.0), _ZERO.get(shown, 0.0)


def shown_unit(figure: KeyFigure) -> str:
    """Name the unit that people read a number in; nothing for a plain number, or where it stands with the number."""
    unit = figure.shown or figure.unit
    return "" if unit in ("1", "W", "J") else unit


def state_key_figures(sets: Mapping[str, Sequence[KeyFigure]], index: int) -> list[str]:
    """Lines of the numbers of one state.

    Parameters
    ----------
    sets : mapping of str to sequence of KeyFigure
    index : int
        Which state.

    Returns
    -------
    list of str
    """
    lines: list[str] = []
    for name, numbers in sets.items():
        rows = [(one, shown_value(one, float(one.value[index]))) for one in numbers]
        lines += _block(name, [(one, [text]) for one, text in rows if text != MISSING], [""])
    return lines


def footnotes(notes: Sequence[str]) -> list[str]:
    """Lines of numbered notes."""
    lines = []
    for number, note in enumerate(notes, 1):
        mark = f"  [{number}] "
        lines += textwrap.wrap(note, WIDTH, initial_indent=mark, subsequent_indent=" " * len(mark))
    return lines


def sweep_key_figures(sets: Mapping[str, Sequence[KeyFigure]]) -> list[str]:
    """Lines of the numbers along a sweep: in the first and the last state, the lowest and the highest."""
    lines: list[str] = []
    for name, numbers in sets.items():
        rows = []
        for one in numbers:
            known = one.value[np.isfinite(one.value)]
            if known.size:
                ends = (one.value[0], one.value[-1], known.min(), known.max())
                rows.append((one, [shown_value(one, float(value)) for value in ends]))
        lines += _block(name, rows, ["first", "last", "lowest", "highest"])
    return lines


def _block(name: str, rows: Sequence[tuple[KeyFigure, list[str]]], heads: Sequence[str]) -> list[str]:
    """Lines of one set: its name, a row a number, its footnotes."""
    if not rows:
        return []
    single = len(heads) == 1
    notes = list(dict.fromkeys(one.note for one, _ in rows if one.note)) if single else []
    width, label = (14, _LABEL) if single else (10, 33)
    head = "".join(f"{text:>{width}}" for text in heads)
    lines = ["", f"{name:<{label}}{head}".rstrip()]
    for one, cells in rows:
        mark = f"[{notes.index(one.note) + 1}]" if one.note in notes else ""
        cell = "".join(f"{text:>{width}}" for text in cells)
        unit = shown_unit(one)
        lines.append(f"  {shortened(one.label, label - 2):<{label - 2}}{cell} {unit:<6} {mark}".rstrip())
    return lines + footnotes(notes)
