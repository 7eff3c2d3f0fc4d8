"""Figures on disk: the same again, replaced whole, and plain words where a folder is no result or cannot be written."""

from __future__ import annotations

import csv
import json
import os
from pathlib import Path

import numpy as np
import pytest
from figure_folders import case_of, state_folder, sweep_folder, train_folder, write_head
from hypothesis import given
from hypothesis import strategies as st
from hypothesis.extra.numpy import arrays

from gibbsmin.errors import InputError
from gibbsmin.report.figures import files
from gibbsmin.report.figures.make import figures
from gibbsmin.report.figures.maps import beyond_zero
from gibbsmin.report.figures.onsets import Mark, interval, marks_of
from gibbsmin.report.figures.quantities import Quantity
from gibbsmin.report.figures.source import Input, read_head, stride
from gibbsmin.results.folder import check_place

AXES = {"held.temperature": (np.linspace(500.0, 900.0, 11), "degC")}


def test_single_state_is_drawn_as_bars(tmp_path: Path) -> None:
    state_folder(tmp_path)
    (made,) = figures(tmp_path)
    assert made.alternative == (
        "Bars of what the mixture settles to at 870 °C and 24 bar absolute: H₂ (60.00 %), CH₄ (39.99 %), "
        "NO (100 ppm) and C(s) graphite (10.8 kmol/h)."
    )
    with (tmp_path / "figures" / "composition.csv").open(newline="", encoding="utf-8") as file:
        rows = list(csv.DictReader(file))
    assert [row["species"] for row in rows] == ["H2", "CH4", "NO", "C(s):graphite"]
    assert [row["mole fraction of the gas [mol/mol gas]"] for row in rows] == ["0.6", "0.3999", "0.0001", ""]
    assert float(rows[3]["amount [mol/s]"]) == 3.0


def test_single_state_without_certificate_is_not_drawn(tmp_path: Path) -> None:
    state_folder(tmp_path, certificate={"ok": False})
    assert figures(tmp_path) == []


def test_streams_of_a_train(tmp_path: Path) -> None:
    train_folder(tmp_path, 1)
    _, made = figures(tmp_path)
    assert made.name == "streams"
    with (tmp_path / "figures" / "streams.csv").open(newline="", encoding="utf-8") as file:
        rows = list(csv.DictReader(file))
    assert [row["stream"] for row in rows] == ["feed", "hot.side"]
    assert [float(row["amount [mol/s]"]) for row in rows] == pytest.approx([1.1, 1.25])
    assert float(rows[1]["H2O(l) [mol/s]"]) == 0.05


def test_the_same_again(tmp_path: Path) -> None:
    sweep_folder(tmp_path, AXES)
    figures(tmp_path)
    first = {path.name: path.read_bytes() for path in (tmp_path / "figures").iterdir()}
    figures(tmp_path)
    assert {path.name: path.read_bytes() for path in (tmp_path / "figures").iterdir()} == first


def test_earlier_figures_are_replaced_whole(tmp_path: Path) -> None:
    folder = tmp_path / "out"
    train_folder(folder, 1)
    figures(folder)
    state_folder(folder)
    figures(folder)
    assert {path.stem for path in (folder / "figures").iterdir()} == {"index", "composition"}
    assert [path.name for path in tmp_path.iterdir()] == ["out"]


@pytest.mark.parametrize("earlier", [True, False])
@pytest.mark.parametrize("error", [OSError(28, "No space left on device"), KeyboardInterrupt()])
def test_failure_half_way_leaves_what_was_there(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, earlier: bool, error: BaseException
) -> None:
    folder = tmp_path / "out"
    state_folder(folder)
    if earlier:
        figures(folder)
    before = {path: path.read_bytes() for path in folder.rglob("*.*") if path.is_file()}

    def fail(*_: object) -> str:
        raise error

    monkeypatch.setattr(files, "_table", fail)
    with pytest.raises((InputError, KeyboardInterrupt)) as raised:
        figures(folder)
    assert isinstance(error, KeyboardInterrupt) or "No space left" in str(raised.value)
    assert {path: path.read_bytes() for path in folder.rglob("*.*") if path.is_file()} == before
    assert [path.name for path in tmp_path.iterdir()] == ["out"]


def test_a_result_with_figures_may_be_replaced_and_one_with_notes_not(tmp_path: Path) -> None:
    state_folder(tmp_path)
    figures(tmp_path)
    check_place(tmp_path)
    (tmp_path / "figures" / "mine.txt").write_text("x")
    with pytest.raises(InputError, match="did not write"):
        check_place(tmp_path)


def test_a_file_in_the_place_of_the_figures(tmp_path: Path) -> None:
    state_folder(tmp_path)
    (tmp_path / "figures").write_text("mine")
    with pytest.raises(InputError, match="not a folder"):
        figures(tmp_path)
    assert (tmp_path / "figures").read_text() == "mine"


@pytest.mark.skipif(not hasattr(os, "geteuid") or os.geteuid() == 0, reason="root may write anywhere")
def test_unwritable(tmp_path: Path) -> None:
    state_folder(tmp_path / "out")
    tmp_path.chmod(0o500)
    with pytest.raises(InputError, match="cannot write figures"):
        figures(tmp_path / "out")


def test_folders_that_are_no_results(tmp_path: Path) -> None:
    with pytest.raises(InputError, match=r"holds no result\.json"):
        figures(tmp_path)
    with pytest.raises(InputError, match=r"holds no result\.json"):
        figures(tmp_path / "nowhere")
    for text in ("", "[]", '{"schema": 1', '{"gibbsmin": "0", "case": {}, "states"'):
        (tmp_path / "result.json").write_text(text)
        with pytest.raises(InputError, match="not whole"):
            figures(tmp_path)
    (tmp_path / "result.json").write_text('{"other": 1}')
    with pytest.raises(InputError, match="no result of gibbsmin"):
        figures(tmp_path)
    write_head(tmp_path, case_of([]), states=[{}, {}])
    with pytest.raises(InputError, match=r"2 states but no result\.nc"):
        figures(tmp_path)
    write_head(tmp_path, case_of(["held.temperature"]), states=[{}, {}])
    (tmp_path / "result.nc").write_bytes(b"torn")
    with pytest.raises(InputError, match=r"result\.nc cannot be read"):
        figures(tmp_path)


@pytest.mark.parametrize("indent", [None, 1])
def test_head_is_read_without_the_states(tmp_path: Path, indent: int | None) -> None:
    (tmp_path / "result.nc").touch()
    long = {"text": 'states": [{ "é' + "x" * 400_000, "feeds": {"states": [1, 2.5]}, "number": 123456789}
    (tmp_path / "result.json").write_text(json.dumps({**long, "states": [{}], "after": 1}, indent=indent))
    assert read_head(tmp_path / "result.json") == (long, [])
    (tmp_path / "result.json").write_text(json.dumps({**long, "states": [], "after": 1}, indent=indent))
    assert read_head(tmp_path / "result.json") == ({**long, "states": [], "after": 1}, [])


@given(st.integers(2, 100_000), st.integers(2, 500))
def test_thinning_keeps_enough_and_not_too_many(count: int, most: int) -> None:
    step = stride(count, most)
    left = len(range(0, count, step))
    assert left <= most
    assert left >= min(count, most) // 4


@given(arrays(float, (5, 6), elements=st.one_of(st.just(0.0), st.floats(1e-3, 1e3))))
def test_outlines_keep_to_the_states(amounts: np.ndarray) -> None:
    field = beyond_zero(amounts)
    assert ((field > 0.0) == (amounts > 0.0)).all()
    assert (field[amounts > 0.0] == amounts[amounts > 0.0]).all()
    assert amounts.max() == 0.0 or (field[amounts == 0.0] < 0.0).all()


def test_outline_of_a_straight_boundary_is_exact() -> None:
    x, y = np.meshgrid(np.arange(12.0), np.arange(9.0))
    true = 7.3 - x - 0.5 * y
    field = beyond_zero(np.maximum(true, 0.0))
    for row in range(8):
        at = int(np.flatnonzero(true[row] > 0.0)[-1])
        crossing = at + field[row, at] / (field[row, at] - field[row, at + 1])
        assert crossing == pytest.approx(7.3 - 0.5 * row, abs=0.1)


def test_marks_lie_between_states() -> None:
    one = Input("held.temperature", "temperature", "°C", np.array([700.0, 500.0, 600.0, 800.0]), "degC")
    there = Quantity("", "C(s)", np.array([0.0, 2.0, 1.0, np.nan]), kind="condensed")
    assert marks_of(one, [there]) == [Mark("C(s)", 600.0, 700.0, False)]
    assert interval(Mark("C(s)", 612.2, 612.9, True), "°C") == "613 °C"
    assert interval(Mark("C(s)", 1.0, 1.5, True), "") == "1–1.5"


def test_names_of_files_differ_whatever_the_case() -> None:
    from matplotlib.figure import Figure

    from gibbsmin.report.figures.drawn import Drawn

    drawn = [Drawn(name, "", "", Figure(), {}) for name in ("NO", "no", "N O", "N/O", "")]
    names = files._names(drawn)
    assert len({name.casefold() for name in names}) == 5
    assert all(name == files.file_name(name) for name in names)
