"""Columns of a train's tables: heads of several lines from the names of steps, and as many columns as fit."""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator, Sequence
from typing import Final, TypeVar

from gibbsmin.report.words import WIDTH, shortened

CELL: Final = 12
"""Characters of a column, the gap on its left included."""

LABEL: Final = 20
"""Characters of the labels on the left."""

ACROSS: Final = (WIDTH - LABEL) // CELL
"""Columns that stand side by side."""

_Thing = TypeVar("_Thing")
_PARTS: Final = re.compile(r"\.?[^._-]*[_-]*")
_LINES: Final = 3


def blocks(things: Sequence[_Thing]) -> Iterator[Sequence[_Thing]]:
    """Take things in groups that fit side by side."""
    for start in range(0, len(things), ACROSS):
        yield things[start : start + ACROSS]


def row(label: str, cells: Iterable[str]) -> str:
    """Line of a table: its label, and its cells on the right of their columns."""
    return (f"{shortened(label, LABEL - 1):<{LABEL}}" + "".join(f"{cell:>{CELL}}" for cell in cells)).rstrip()


def head_rows(label: str, names: Sequence[str]) -> list[str]:
    """Lines that name columns, long names broken between their words.

    Examples
    --------
    >>> for line in head_rows("streams", ["gas", "lt_shift_cooler", "knock_out.water"]):
    ...     print(line)
    streams                      gas   lt_shift_   knock_out
                                          cooler      .water
    """
    broken = [_broken(name) for name in names]
    return [
        row(label if k == 0 else "", [parts[k] if k < len(parts) else "" for parts in broken])
        for k in range(max(map(len, broken), default=0))
    ]


def _broken(name: str) -> list[str]:
    """Break a name into lines that fit a column; what is still too long is cut."""
    room = CELL - 1
    lines = [""]
    for part in _PARTS.findall(name):
        if part.startswith(".") and len(name) > room and lines[-1]:
            lines.append(part)
        elif len(lines[-1] + part) <= room or not lines[-1]:
            lines[-1] += part
        else:
            lines.append(part)
    if len(lines) > _LINES:
        lines = [*lines[: _LINES - 1], "".join(lines[_LINES - 1 :])]
    return [shortened(line, room) for line in lines]
