"""The terminal tables: 80 columns, the right numbers, nothing about states that are not certified."""

from __future__ import annotations

from pathlib import Path
from typing import Any
from unittest import mock

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from report_fakes import FakeResult

from gibbsmin.report.onsets import onsets
from gibbsmin.report.summary import summary
from gibbsmin.report.sweep_table import ROWS, chosen
from gibbsmin.results.judge import judge
from gibbsmin.studies.labelled import Axis


def shown(result: Any) -> list[str]:
    return summary(result, judge(result), Path("results/x"))


def test_one_state_says_what_a_reader_asks() -> None:
    text = "\n".join(shown(FakeResult()))
    assert "A made-up reformer outlet" in text
    assert "870 degC and 24 bar absolute" in text
    # dry: 2.61 / (1 - 0.325) = 3.867
    row = next(line for line in text.splitlines() if line.startswith("  CH4"))
    assert row.split() == ["CH4", "2.610", "2.61", "3.87"]
    assert "1 more below 1 ppm" in text
    assert "6.800 MW to be supplied" in text
    assert "C(s):graphite -1.72 RT (saturation 0.18)" in text
    assert "results/x/" in text


@pytest.mark.parametrize("count", [1, 2, 12, 300])
def test_tables_fit_80_columns(count: int) -> None:
    result = FakeResult(count)
    result.title = "A title that somebody made much longer than any terminal is wide, for reasons of their own, truly"
    assert max(len(line) for line in shown(result)) <= 80


def test_only_ascii_is_printed() -> None:
    assert "\n".join(shown(FakeResult(5))).isascii()


def test_long_sweep_shows_some_states_and_says_so() -> None:
    lines = shown(FakeResult(300))
    rows = [line for line in lines if line.split() and line.split()[0].isdigit() and len(line.split()) == 9]
    assert len(rows) == ROWS
    assert any(f"{ROWS} of 300 states" in line for line in lines)


@pytest.mark.parametrize(
    "sizes",
    [[1], [40], [41], [1000], [5, 8], [40, 50], [3, 1000], [1000, 3], [2, 25], [9, 4, 5], [10] * 5, [3] * 6, [15] * 6],
)
def test_states_shown_are_few_and_span_every_input(sizes: list[int]) -> None:
    shown = chosen(sizes)
    assert 1 <= len(shown) <= ROWS
    assert len(set(shown.tolist())) == len(shown)
    assert (shown[0], shown[-1]) == (0, np.prod(sizes) - 1)
    assert all(
        len(set(places.tolist())) > 1
        for places, size in zip(np.unravel_index(shown, sizes), sizes, strict=True)
        if size > 1
    )
    if np.prod(sizes) <= ROWS:
        assert len(shown) == np.prod(sizes)


def test_onset_between_the_states_where_a_solid_comes() -> None:
    (found,) = onsets(FakeResult(12))  # temperatures 870 ... 881 degC, graphite from the seventh on
    assert (found.phase, found.appears) == ("C(s):graphite", True)
    assert (found.low, found.high) == pytest.approx((875.0, 876.0))


def test_onset_on_a_falling_axis_is_told_rising() -> None:
    result = FakeResult(12)
    result.inputs = {"held.temperature": result.inputs["held.temperature"][::-1].copy()}
    (found,) = onsets(result)
    assert not found.appears
    assert found.low < found.high


def test_onsets_in_step_follow_the_points() -> None:
    result = FakeResult(12)  # graphite from the seventh point on
    result.case["design"] = {"kind": "in step"}
    pressure = np.linspace(30.0, 19.0, 12)
    result.inputs = {"feeds.gas.flow": np.arange(12.0), "held.pressure": pressure}
    result.input_units = {"feeds.gas.flow": "kmol/h", "held.pressure": "bar"}
    (found,) = onsets(result)
    assert (found.axis, found.low, found.high, found.appears) == ("held.pressure", 24.0, 25.0, False)
    assert not found.others
    assert any("along pressure: C(s):graphite to 24..25 bar" in line for line in shown(result))


@given(st.lists(st.integers(2, 4), min_size=1, max_size=3), st.integers(0, 2**32 - 1))
def test_onsets_of_a_grid_are_where_neighbours_differ(sizes: list[int], seed: int) -> None:
    drawn = np.random.default_rng(seed)
    count = int(np.prod(sizes))
    result = FakeResult(count)
    grid = [np.arange(size, dtype=float) for size in sizes]
    axes = tuple(Axis(f"feeds.f{k}.flow", values, "mol/s") for k, values in enumerate(grid))
    result.inputs = dict(zip((one.name for one in axes), map(np.ravel, np.meshgrid(*grid, indexing="ij")), strict=True))
    result.batch.amounts[:, 7] = drawn.integers(0, 2, count)
    result.batch.certified = drawn.random(count) < 0.9
    present, good = result.batch.amounts[:, 7].reshape(sizes) > 0.0, result.batch.certified.reshape(sizes)
    expected = [
        (*place, bool(present[(*place[:-1], place[-1] + 1)]))
        for place in np.ndindex(*sizes[:-1], sizes[-1] - 1)
        if present[place] != present[(*place[:-1], place[-1] + 1)]
        and good[place]
        and good[(*place[:-1], place[-1] + 1)]
    ]
    with mock.patch.object(FakeResult, "axes", axes):
        found = onsets(result)
    assert [(*map(int, one.others.values()), int(one.low), one.appears) for one in found] == expected
    assert all(one.high == one.low + 1.0 for one in found)


def test_no_onset_is_read_across_a_state_without_certificate() -> None:
    result = FakeResult(12)
    result.batch.certified[6] = False
    result.batch.reason[6] = "did not converge"
    assert onsets(result) == []


def test_state_without_certificate_shows_no_numbers() -> None:
    result = FakeResult()
    result.batch.certified[0] = False
    result.batch.reason[0] = "the element balance of N did not close."
    text = "\n".join(shown(result))
    assert "NOT CERTIFIED" in text
    assert "balance of N" in text
    assert "49.40" not in text
    assert "caution" not in text


def test_sweep_with_a_state_without_certificate_marks_it() -> None:
    result = FakeResult(4)
    result.batch.certified[1] = False
    result.batch.reason[1] = "did not converge."
    lines = shown(result)
    assert any("1 of 4 states NOT certified; the first is state 2" in line for line in lines)
    row = next(line for line in lines if line.split()[:1] == ["871"])
    assert row.split()[2:] == ["-"] * len(row.split()[2:])


def test_no_gas_at_all() -> None:
    result = FakeResult()
    result.batch.amounts[0] = np.where(result.system.gas, 0.0, 2.0)
    text = "\n".join(shown(result))
    assert "solids and liquids" in text
    assert "mole %" not in text


def test_excluded_graphite_is_still_watched() -> None:
    result = FakeResult()
    result.batch.element_potentials[0, 0] += np.log(0.8 / 0.18)  # carbon activity 0.8
    assert any(caution.kind == "carbon" and "0.80" in caution.text for caution in judge(result)[0])
