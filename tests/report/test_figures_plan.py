"""The figure of a train's steps has every step and stream, and lines that join them."""

from __future__ import annotations

from typing import Any

import pytest
from matplotlib.collections import LineCollection

from gibbsmin.report.figures.make import draw
from gibbsmin.report.figures.plan import train_plan
from gibbsmin.report.figures.source import Source

LOOP = [
    {"name": "mixer", "inlets": ["make-up"], "recycled": ["splitter"]},
    {"name": "converter", "inlets": ["mixer"], "held": {"temperature": "300 degC"}},
    {"name": "splitter", "inlets": ["converter"], "take": {"purge-v": {"percent": 5.0}}},
]


def source(stages: list[dict[str, Any]], order: list[str] | None = None) -> Source:
    head = {"order": order or [one["name"] for one in stages], "case": {"stage": stages, "feeds": {"make-up": {}}}}
    return Source({**head, "basis": "mol"}, {"streams": {}}, "grid", (), None)


def segments(panel: Any) -> list[Any]:
    (lines,) = [one for one in panel.collections if isinstance(one, LineCollection)]
    return [[tuple(map(float, end)) for end in one] for one in lines.get_segments()]


def test_words_stay_words_and_strokes_become_lines() -> None:
    (drawn,) = train_plan(source(LOOP))
    panel = drawn.figure.axes[0]
    words = {text.get_text() for text in panel.texts}
    assert {"make-up", "mixer", "converter", "splitter", "purge-v", "settles at 300 degC", "mixes", "parts"} <= words
    assert not any(set("+|<>") & set(word) for word in words)
    assert len(segments(panel)) > 100
    assert sorted(line.get_marker() for line in panel.lines).count("v") == 2


def test_the_recycle_runs_from_its_step_up_to_the_first() -> None:
    (drawn,) = train_plan(source(LOOP))
    panel = drawn.figure.axes[0]
    rail = max(x for one in segments(panel) for x, _ in one)
    ys = sorted(y for one in segments(panel) for x, y in one if x == rail)
    rows = {text.get_text(): text.get_position()[1] for text in panel.texts}
    assert ys[0] == pytest.approx(rows["mixer"], abs=1.0)
    assert ys[-1] > rows["converter"]
    covered = {round(y, 1) for y in ys}
    assert {k + 0.5 for k in range(int(ys[0]), int(ys[-1]))} <= covered  # without a gap


def test_steps_stand_in_the_order_of_solution_and_the_data_name_all_ways() -> None:
    (drawn,) = train_plan(source(LOOP[::-1], ["mixer", "converter", "splitter"]))
    rows = {text.get_text(): text.get_position()[1] for text in drawn.figure.axes[0].texts}
    assert rows["mixer"] < rows["converter"] < rows["splitter"]
    ways = list(zip(drawn.data["stream"], drawn.data["to"], drawn.data["recycled"], strict=True))
    assert ("splitter", "mixer", "recycled") in ways
    assert ("make-up", "mixer", "") in ways


def test_the_steps_come_first_among_the_figures_of_a_train() -> None:
    assert next(draw(source(LOOP))).name == "steps"
