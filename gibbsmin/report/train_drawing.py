"""A train drawn in text: a box a step, one under the other; feeds on the left, side streams and products on the right.

What a step gives to the next one runs down the middle. Any other stream between two steps leaves on the right, runs
along a rail, down or, where it is recycled, up, and comes in on the right. Rails cross other lines; they meet none.
"""

from __future__ import annotations

import re
import textwrap
from collections.abc import Collection, Mapping, Sequence
from dataclasses import dataclass
from typing import Any, Final

from gibbsmin.report.words import WIDTH, shortened

_BOX: Final = 15  # where boxes begin
_END: Final = 42  # where they end, itself not in it
_RAILS: Final = range(63, WIDTH, 3)  # where rails may run
_TEXT: Final = _END - _BOX - 4
_LABEL: Final = _RAILS[0] - _END - 6
_BRIEF: Final = 3  # lines of what a step does
_MIDDLE: Final = (_BOX + _END) // 2
_TIED: Final = re.compile(r"(?<=\d) (?=\S)")  # a number and its unit stay on one line


@dataclass(frozen=True)
class _Line:
    """A stream on the right of a box: its name, the ``text`` at the box, whether it comes in, and its rail, if any."""

    stream: str
    text: str
    inward: bool
    rail: int | None


def train_drawing(told: Mapping[str, Any], brief: Mapping[str, str]) -> list[str]:
    """Draw a train.

    Parameters
    ----------
    told : mapping
        What ``TrainStudy.describe`` returns.
    brief : mapping of str to str
        What each step does, in a few words.

    Returns
    -------
    list of str
        None longer than 80 columns, in ASCII.
    """
    stages = told["stages"]
    feeds = {feed["name"] for feed in told["feeds"]}
    rights = _rights(stages)
    canvas: list[list[str]] = []
    ends: dict[str, dict[bool, tuple[int, int]]] = {}
    for k, stage in enumerate(stages):
        down = k + 1 < len(stages) and stage["name"] in _taken(stages[k + 1])
        left = [name for name in stage["inlets"] if name in feeds]
        for row, line in enumerate(rights[k], len(canvas) + 1):
            if line.rail is not None:
                ends.setdefault(line.stream, {})[line.inward] = row, _END + len(line.text)
        canvas += _box(stage["name"], brief[stage["name"]], left, rights[k], down)
    rails = {line.stream: line.rail for lines in rights for line in lines if line.rail is not None}
    for stream, column in rails.items():
        _draw_rail(canvas, ends[stream][False], ends[stream][True], column)
    return ["".join(row).rstrip() for row in canvas]


def _taken(stage: Mapping[str, Any]) -> list[str]:
    return [*stage["inlets"], *stage["recycled"]]


def _rights(stages: Sequence[Mapping[str, Any]]) -> list[list[_Line]]:
    """List what is drawn on the right of each box: what comes in by rail, then what goes out."""
    owner = {stream: k for k, stage in enumerate(stages) for stream in _outlets(stage)}
    target = {stream: k for k, stage in enumerate(stages) for stream in _taken(stage)}
    sent = [s for s, k in owner.items() if s in target and not (target[s] == k + 1 and s == stages[k]["name"])]
    spans = {s: (min(owner[s], target[s]), max(owner[s], target[s])) for s in sent}
    back = [s for s in sent if target[s] <= owner[s]]
    rails = _rails(spans, [])
    if not rails.keys() >= set(back):
        rails = _rails(spans, back)
    rights: list[list[_Line]] = []
    for stage in stages:
        lines = []
        for stream in _taken(stage):
            if stream in sent:
                rail = rails.get(stream)
                lines.append(_Line(stream, f"<--- {_label(stream)}" if rail is None else "<--", True, rail))
        for stream in _outlets(stage):
            rail, side = rails.get(stream), stream.rpartition(".")[2]
            if stream not in target:
                text = f"---> {_label(side)}"
            elif rail is None:
                text = f"---> {_label('to ' + stages[target[stream]]['name'])}"
            else:
                text = f"-- {_label(side)} " if stream != stage["name"] else "---"
            if stream in sent or stream not in target:
                lines.append(_Line(stream, text, False, rail))
        rights.append(lines)
    return rights


def _label(text: str) -> str:
    return shortened(text, _LABEL)


def _outlets(stage: Mapping[str, Any]) -> list[str]:
    return [stage["name"], *(f"{stage['name']}.{side}" for side in stage["sides"])]


def _rails(spans: Mapping[str, tuple[int, int]], foremost: Collection[str]) -> dict[str, int]:
    """Give streams that run beside steps ``(first, last)`` their rails: ``foremost``, then short ones; none if full."""
    busy: dict[int, list[tuple[int, int]]] = {column: [] for column in _RAILS}
    rails = {}
    for stream in sorted(spans, key=lambda s: (s not in foremost, spans[s][1] - spans[s][0])):
        first, last = spans[stream]
        free = [c for c in _RAILS if all(last < a or first > b for a, b in busy[c])]
        if free:
            busy[free[0]].append((first, last))
            rails[stream] = free[0]
    return rails


def _box(name: str, brief: str, left: Sequence[str], right: Sequence[_Line], down: bool) -> list[list[str]]:
    """Rows of one box, with its feeds, its lines on the right and the way down."""
    wrapped = textwrap.wrap(_TIED.sub("\xa0", brief), _TEXT, break_on_hyphens=False)
    told = [line.replace("\xa0", " ") for line in wrapped]
    if len(told) > _BRIEF:
        told = [*told[: _BRIEF - 1], shortened(" ".join(told[_BRIEF - 1 :]), _TEXT)]
    text = [shortened(name, _TEXT), *told]
    edge = "+" + "-" * (_END - _BOX - 2) + "+"
    rows = [_blank(edge)]
    for k in range(max(len(text), len(left), len(right))):
        row = _blank(f"| {text[k] if k < len(text) else '':<{_TEXT}} |")
        if k < len(left):
            arrow = f"{shortened(left[k], _BOX - 4)} "
            _write(row, 0, arrow + "-" * (_BOX - 1 - len(arrow)) + ">")
        if k < len(right):
            _write(row, _END, right[k].text)
        rows.append(row)
    rows.append(_blank(edge))
    if down:
        rows[-1][_MIDDLE] = "+"
    rows.append(_blank(""))
    if down:
        rows[-1][_MIDDLE] = "v"
    return rows


def _draw_rail(canvas: list[list[str]], start: tuple[int, int], stop: tuple[int, int], column: int) -> None:
    """Draw a stream from where it leaves a box (row, column) to where it comes in; rails that it crosses stay whole."""
    low, high = sorted((start[0], stop[0]))
    for y in range(low + 1, high):
        canvas[y][column] = "|"
    canvas[(low + high) // 2][column] = "^" if stop < start else "v"
    for y, first in (start, stop):
        canvas[y][column] = "+"
        for x in range(first, column):
            if canvas[y][x] == " ":
                canvas[y][x] = "-"


def _blank(text: str) -> list[str]:
    row = [" "] * WIDTH
    _write(row, _BOX, text)
    return row


def _write(row: list[str], start: int, text: str) -> None:
    row[start : start + len(text)] = list(text)
