"""A train drawn as boxes and lines: the drawing that ``gibbsmin check`` prints, as a figure."""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from typing import Any, Final

from matplotlib.collections import LineCollection

from gibbsmin.report.figures.drawn import Drawn, listed
from gibbsmin.report.figures.source import Source
from gibbsmin.report.figures.style import INK, canvas
from gibbsmin.report.train_drawing import train_drawing
from gibbsmin.report.train_explained import brief
from gibbsmin.report.words import WIDTH as LETTERS

_POINTS: Final = 8.5  # at 0.6 of that a letter, 80 letters fill the width of the figure
_LINE: Final = 1.2 * _POINTS / 72.0  # inch from line to line
_ACROSS: Final = "-+|<>"
_DOWN: Final = "|+^v"
_HEADS: Final = "<>v^"
_WORDS: Final = re.compile(r"\S+(?: \S+)*")
_HEAD: Final = 0.45  # inch of the title


def train_plan(source: Source) -> Iterator[Drawn]:
    """Draw the steps of a train and the streams between them.

    Parameters
    ----------
    source : Source

    Yields
    ------
    Drawn
        Nothing where the result does not hold the steps of its case.
    """
    by_name = {stage["name"]: stage for stage in source.case.get("stage", ())}
    stages: list[dict[str, Any]] = [
        {
            "name": name,
            "inlets": by_name[name].get("inlets", []),
            "recycled": by_name[name].get("recycled", []),
            "held": by_name[name].get("held"),
            "frozen": by_name[name].get("frozen", False),
            "sides": by_name[name].get("take", {}),
        }
        for name in source.head["order"]
        if name in by_name
    ]
    if not stages:
        return
    told = {"stages": stages, "feeds": [{"name": name} for name in source.case.get("feeds", {})]}
    lines = train_drawing(told, {stage["name"]: brief(stage) for stage in stages})
    while lines and not lines[0].strip():
        lines = lines[1:]
    title = "Steps and streams"
    figure, panels = canvas(title, height=_HEAD + _LINE * len(lines))
    panel = panels[0, 0]
    panel.set_axis_off()
    panel.set_xlim(0.0, LETTERS)
    panel.set_ylim(len(lines), 0.0)
    _trace(panel, [line.ljust(LETTERS) for line in lines])
    ways = [
        (stream, stage["name"], "recycled" if stream in stage["recycled"] else "")
        for stage in stages
        for stream in (*stage["inlets"], *stage["recycled"])
    ]
    yield Drawn(
        "steps",
        title,
        f"The steps of the train in the order in which they are solved: {listed([stage['name'] for stage in stages])}.",
        figure,
        {head: [way[k] for way in ways] for k, head in enumerate(("stream", "to", "recycled"))},
        ("Of varied inputs the values of the case itself are shown.",) if source.inputs else (),
    )


def _trace(panel: Any, lines: Sequence[str]) -> None:
    """Turn the strokes of a drawing in text into lines and arrow heads, and leave its words; a letter is 1 by 1."""
    strokes: list[list[tuple[float, float]]] = []
    words: list[list[str]] = []
    for y, line in enumerate(lines):
        rest = list(line)
        for x, sign in enumerate(line):
            around = _around(lines, x, y)
            if sign not in "-|+<>v^" or not _is_stroke(sign, *around):
                continue
            rest[x] = " "
            left, right, above, below = around
            middle = (x + 0.5, y + 0.5)
            if sign in "-<>" or (sign == "+" and left == "-"):
                strokes.append([(x - 0.5 if left == "|" else x, y + 0.5), middle])
            if sign in "-<>" or (sign == "+" and right == "-"):
                strokes.append([middle, (x + 1.5 if right == "|" else x + 1.0, y + 0.5)])
            if sign in "|v^" or (sign == "+" and above in ("|", "^")):
                strokes.append([(x + 0.5, y), middle])
            if sign in "|v^" or (sign == "+" and below in ("|", "v")):
                strokes.append([middle, (x + 0.5, y + 1.5 if below == "-" else y + 1.0)])
            if sign in _HEADS:
                panel.plot(*middle, marker=sign, color=INK, markersize=_POINTS / 2.0, linestyle="none")
        words.append(rest)
    panel.add_collection(LineCollection(strokes, colors=INK, linewidths=0.7, capstyle="projecting"))
    for y, rest in enumerate(words):
        for found in _WORDS.finditer("".join(rest)):
            place = (found.start(), y + 0.5)
            panel.text(*place, found.group(), family="monospace", fontsize=_POINTS, color=INK, va="center_baseline")


def _around(lines: Sequence[str], x: int, y: int) -> tuple[str, str, str, str]:
    """Signs to the left, to the right, above and below; blanks beyond the edge."""

    def at(x: int, y: int) -> str:
        return lines[y][x] if 0 <= y < len(lines) and 0 <= x < len(lines[y]) else " "

    return at(x - 1, y), at(x + 1, y), at(x, y - 1), at(x, y + 1)


def _is_stroke(sign: str, left: str, right: str, above: str, below: str) -> bool:
    """Tell a stroke from a sign within a word."""
    if sign == "-":
        return left in _ACROSS or right in _ACROSS
    if sign in "<>":
        return "-" in (left, right)
    if sign in "v^":
        return left == right == " " and (above in _DOWN or below in _DOWN)
    return True
