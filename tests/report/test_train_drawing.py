"""`gibbsmin check` of a train: the drawing has every step and stream, its lines lead where they should."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest
import train_texts
from hypothesis import given
from hypothesis import strategies as st

from gibbsmin.case.read import read_case
from gibbsmin.report.train_drawing import train_drawing
from gibbsmin.report.train_explained import brief, train_explained


def stage(
    name: str, inlets: list[str], recycled: list[str] | None = None, sides: list[str] | None = None
) -> dict[str, Any]:
    return {"name": name, "inlets": inlets, "recycled": recycled or [], "sides": {key: {} for key in sides or []}}


def told(stages: list[dict[str, Any]], feeds: list[str]) -> dict[str, Any]:
    return {"stages": stages, "feeds": [{"name": name} for name in feeds]}


def drawn(stages: list[dict[str, Any]], feeds: list[str]) -> list[str]:
    return train_drawing(told(stages, feeds), {one["name"]: "mixes" for one in stages})


def follow(lines: list[str], row: int) -> int:
    """Follow a line that leaves a box on the right to the row where it comes in, as an eye would."""
    page = [line.ljust(80) for line in lines]
    column = max(k for k, cell in enumerate(page[row]) if cell == "+")
    corners = [y for y in range(len(page)) if page[y][column] == "+" and y != row]
    # a rail runs on as long as its column is drawn
    for y in corners:
        low, high = sorted((row, y))
        if all(page[k][column] in "|^v" for k in range(low + 1, high)):
            return y
    raise AssertionError("the line leads nowhere")


def test_a_line_of_steps_runs_down_the_middle() -> None:
    lines = drawn([stage("a", ["gas"]), stage("b", ["a"]), stage("c", ["b"])], ["gas"])
    assert lines[1].startswith("gas ------")
    assert ">| a " in lines[1]
    arrows = [line for line in lines if line.strip() == "v"]
    assert len(arrows) == 2
    assert any("---> c" in line for line in lines)
    assert not any("<" in line for line in lines)


def test_a_recycle_is_drawn_back_to_its_step() -> None:
    lines = drawn([stage("a", ["gas"], ["c.back"]), stage("b", ["a"]), stage("c", ["b"], sides=["back"])], ["gas"])
    (start,) = [k for k, line in enumerate(lines) if "-- back -" in line]
    stop = follow(lines, start)
    assert "| a " in lines[stop]
    assert "|<---" in lines[stop]
    assert stop < start
    assert any("^" in line for line in lines[stop:start])


def test_a_step_that_recycles_to_itself() -> None:
    lines = drawn([stage("a", ["gas"], ["a.back"], ["back"])], ["gas"])
    (start,) = [k for k, line in enumerate(lines) if "-- back -" in line]
    assert "|<---" in lines[follow(lines, start)]


def test_side_streams_that_leave_have_their_names() -> None:
    lines = drawn([stage("a", ["gas"], sides=["purge", "water"]), stage("b", ["a"])], ["gas"])
    assert any("---> purge" in line for line in lines)
    assert any("---> water" in line for line in lines)


def test_more_lines_than_room_are_told_in_words_and_the_recycle_is_drawn() -> None:
    sides = ["one", "two", "three", "four", "five", "six", "seven", "eight"]
    steps = [
        stage("split", ["gas"], ["mix.back"], sides), stage("mid", ["split"]),
        stage("mix", ["mid", *(f"split.{side}" for side in sides)], sides=["back"]),
    ]  # fmt: skip
    lines = drawn(steps, ["gas"])
    assert max(map(len, lines)) <= 80
    (start,) = [k for k, line in enumerate(lines) if "-- back -" in line]
    assert "| split" in lines[follow(lines, start)]
    assert sum("---> to mix" in line for line in lines) == sum("<--- split." in line for line in lines) > 0


@st.composite
def trains(draw: st.DrawFn) -> list[dict[str, Any]]:
    """Trains of 3 to 12 steps in order, some streams forward past others, some back."""
    count = draw(st.integers(3, 12))
    steps = [stage(f"step_{k}", ["feed"] if k == 0 else [f"step_{k - 1}"]) for k in range(count)]
    for number in range(draw(st.integers(0, 8))):
        source, target = draw(st.integers(0, count - 1)), draw(st.integers(0, count - 1))
        side = f"s{number}"
        steps[source]["sides"][side] = {}
        steps[target]["inlets" if target > source else "recycled"].append(f"step_{source}.{side}")
    return steps


@given(trains())
def test_every_stream_is_drawn_to_its_end_within_80_columns(steps: list[dict[str, Any]]) -> None:
    lines = drawn(steps, ["feed"])
    assert max(map(len, lines)) <= 80
    assert "\n".join(lines).isascii()
    boxes = {k: line.split("|")[1].strip() for k, line in enumerate(lines) if "| step_" in line}
    assert [boxes[k] for k in sorted(boxes)] == [one["name"] for one in steps]
    first = sorted(boxes)

    def owner(row: int) -> str:
        return boxes[max(k for k in first if k <= row)]

    target = {stream: one["name"] for one in steps for stream in (*one["inlets"], *one["recycled"])}
    for k, line in enumerate(lines):
        for part in line.split():
            if part.startswith("s") and part[1:].isdigit() and f"-- {part} -" in line:
                assert owner(follow(lines, k)) == target[f"{owner(k)}.{part}"]


@pytest.mark.parametrize(
    ("held", "frozen", "words"),
    [
        ({"temperature": "870 degC", "pressure": "24 bar"}, False, "settles at 870 degC, 24 bar"),
        ({"temperature": "350 degC", "pressure_drop": "0.5 bar"}, True, "to 350 degC, 0.5 bar less"),
        ({"adiabatic": True}, False, "settles, adiabatic"),
        ({"adiabatic": True, "pressure": "1 bar"}, True, "adiabatic, 1 bar"),
        ({"heat": "-5 MW"}, False, "settles with -5 MW put in"),
        ({"entropy": "from inlets", "isentropic_efficiency": 0.8, "pressure": "9 bar"}, True,
         "shaft work, efficiency 0.8, to 9 bar"),
        ({"entropy": "from inlets", "pressure": "9 bar"}, False, "settles, ideal shaft work, to 9 bar"),
        (None, False, "mixes"),
    ],
)  # fmt: skip
def test_what_a_step_does_in_words(held: dict[str, Any] | None, frozen: bool, words: str) -> None:
    assert brief({"held": held, "frozen": frozen, "inlets": ["a", "b"], "recycled": [], "sides": {}}) == words


@pytest.mark.parametrize("text", [train_texts.SHIFT, train_texts.LOOP + train_texts.PURGES, train_texts.BURNER])
def test_check_tells_feeds_steps_and_states_on_80_columns(tmp_path: Path, text: str) -> None:
    (tmp_path / "case.toml").write_text(text)
    study = read_case(tmp_path / "case.toml")
    lines = train_explained(study.describe())
    assert max(map(len, lines)) <= 80
    assert "\n".join(lines).isascii()
    flat = " ".join(" ".join(lines).split())
    for one in study.case.stage:
        assert f"{one.name}: takes " in flat
    for feed in study.case.feeds:
        assert f"feed {feed}:" in flat
    assert "nothing was solved yet" in flat
    assert flat.index("all feeds, by element") < flat.index(f"{study.order[0]}: takes ")


def test_check_names_what_takes_part_and_what_leaves(tmp_path: Path) -> None:
    (tmp_path / "case.toml").write_text(train_texts.SHIFT)
    flat = " ".join(" ".join(train_explained(read_case(tmp_path / "case.toml").describe())).split())
    assert "H2O and H2O(l) settle, all else passes; takes off 100 % of H2O(l) as knock_out.water" in flat
    assert "leave knock_out, knock_out.water" in flat
