"""Connections that cannot be: each is told with the step, and in a case file with line and key."""

from __future__ import annotations

from pathlib import Path

import pytest

from gibbsmin import read_case
from gibbsmin.errors import CaseError
from gibbsmin.studies.train.graph import GraphError, Node, ordered


def node(name: str, inlets: str, recycled: str = "", sides: str = "") -> Node:
    return Node(name, (*inlets.split(), *recycled.split()), tuple(recycled.split()), tuple(sides.split()))


LINE = [node("a", "feed"), node("b", "a", sides="s"), node("c", "b")]


@pytest.mark.parametrize(
    ("nodes", "feeds", "step", "key", "parts"),
    [
        ([node("a", "fed")], "feed", "a", "inlets", ["'fed'", "feed"]),
        ([*LINE, node("d", "b.t")], "feed", "d", "inlets", ["b.t", "b.s"]),
        ([*LINE, node("d", "a")], "feed", "d", "inlets", ["a is taken by b and d", "take"]),
        ([node("a", "feed feed")], "feed", "a", "inlets", ["a twice"]),
        ([node("a", "feed b"), node("b", "a")], "feed", "a", "inlets", ["go round", "a <- b <- a", "recycled"]),
        (
            [node("a", "feed d"), node("b", "a"), node("c", "b"), node("d", "c")],
            *("feed", "a", "inlets", ["a <- d <- c <- b <- a"]),
        ),
        ([node("a", "feed"), node("b", "", "a")], "feed", "b", "recycled", ["a is no recycle"]),
        ([node("a", "", "feed")], "feed", "a", "recycled", ["feed is a feed"]),
        (LINE, "feed other", "a", "inlets", ["no step takes the feed other"]),
        ([*LINE, node("b", "c")], "feed", "b", "name", ["two steps"]),
        ([node("feed", "feed")], "feed", "feed", "name", ["a step and a feed"]),
        ([*LINE, node("d", "")], "feed", "d", "inlets", ["takes no stream"]),
        ([node("a", "feed", "a.x"), node("b", "a")], "feed", "a", "recycled", ["a.x"]),
    ],
)
def test_each_is_told_where_it_is(nodes: list[Node], feeds: str, step: str, key: str, parts: list[str]) -> None:
    with pytest.raises(GraphError) as caught:
        ordered(nodes, feeds.split())
    assert (caught.value.step, caught.value.key) == (step, key)
    for part in parts:
        assert part in caught.value.message


def test_order_follows_the_streams_and_else_the_file() -> None:
    nodes = [node("c", "b"), node("b", "a", "c.back"), node("x", "other"), node("a", "feed")]
    nodes[0] = node("c", "b", sides="back")
    assert ordered(nodes, ["feed", "other"]) == ["x", "a", "b", "c"]


def test_a_step_may_take_back_a_part_of_its_own() -> None:
    assert ordered([node("a", "feed", "a.back", "back")], ["feed"]) == ["a"]


CASE = """title = "bad"
[species]
settling = ["H2O", "H2O(l)"]
[feeds.gas]
mole_percent = {{ N2 = 90.0, H2O = 10.0 }}
flow = "1 kmol/h"
temperature = "90 degC"
pressure = "2 bar"
[[stage]]
name = "cooler"
inlets = ["gas"]
held = {{ temperature = "40 degC" }}
take = {{ water = {{ of = ["H2O(l)"], percent = 100.0 }} }}
[[stage]]
name = "{name}"
{key} = {streams}
"""


@pytest.mark.parametrize(
    ("name", "key", "streams", "line", "parts"),
    [
        ("last", "inlets", '["coler"]', 16, ["coler", "cooler"]),
        ("last", "inlets", '["cooler", "cooler.steam"]', 16, ["cooler.steam", "cooler.water"]),
        ("last", "inlets", '["gas"]', 16, ["gas is taken by cooler and last"]),
        ("last", "recycled", '["cooler"]', 16, ["no recycle"]),
        ("cooler", "inlets", '["cooler.water"]', 15, ["two steps"]),
        ("gas", "inlets", '["cooler"]', 15, ["step and a feed"]),
        ("la st", "inlets", '["cooler"]', 15, ["'la st' will not do"]),
    ],
)
def test_in_a_case_file(name: str, key: str, streams: str, line: int, parts: list[str], tmp_path: Path) -> None:
    path = tmp_path / "bad.toml"
    path.write_text(CASE.format(name=name, key=key, streams=streams), encoding="utf-8")
    with pytest.raises(CaseError) as caught:
        read_case(path)
    text = str(caught.value)
    assert "bad.toml" in text
    assert f"line {line}" in text or f":{line}" in text
    for part in parts:
        assert part in text
