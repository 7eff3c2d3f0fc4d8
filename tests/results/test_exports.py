"""Excel and Parquet say the same as the CSV files."""

from __future__ import annotations

import csv
from pathlib import Path
from typing import Any

import numpy as np
import openpyxl
import pyarrow.parquet
import pytest
from report_fakes import FakeResult

from gibbsmin.errors import InputError
from gibbsmin.results import exports
from gibbsmin.results.exports import PARQUET, WORKBOOK, check_exports, export
from gibbsmin.results.folder import write_folder
from gibbsmin.results.judge import judge

ABOUT = {"title": "=a train", "gibbsmin": "0", "states": []}


@pytest.fixture
def swept(tmp_path: Path) -> Path:
    """Folder of five states, the third without a certificate, in all formats."""
    result: Any = FakeResult(5)
    result.batch.certified[2] = False
    write_folder(result, judge(result), tmp_path / "out", ["excel", "parquet"])
    return tmp_path / "out"


def rows_of(folder: Path, file: str = "table.csv") -> list[dict[str, str]]:
    with (folder / file).open(newline="") as text:
        return list(csv.DictReader(text))


def test_workbook_has_every_number_of_the_csv(swept: Path) -> None:
    book = openpyxl.load_workbook(swept / WORKBOOK)
    head, *cells = book["states"].iter_rows(values_only=True)
    rows = rows_of(swept)
    assert list(head) == list(rows[0])
    assert len(cells) == len(rows)
    for found, row in zip(cells, rows, strict=True):
        for value, text in zip([*found, *[None] * (len(head) - len(found))], row.values(), strict=True):
            assert (value is None) if text == "" else value in (text, pytest.approx(float(text), rel=1e-15))


def test_workbook_says_what_it_is(swept: Path) -> None:
    sheet = openpyxl.load_workbook(swept / WORKBOOK)["about"]
    told = [(str(row[0]), str(row[1])) for row in sheet.iter_rows(values_only=True)]
    assert ("states certified", "4 of 5; rows of the others are empty and give the reason") in told
    assert [text for what, text in told if what == "caution"]


def test_parquet_has_every_number_of_the_csv(swept: Path) -> None:
    table = pyarrow.parquet.read_table(swept / PARQUET).to_pandas()
    for name, column in table.items():
        texts = [row[str(name)] for row in rows_of(swept)]
        if name == "reason":
            assert [text or "" for text in column.fillna("")] == texts
        else:
            assert np.array_equal(column, [float(text or "nan") for text in texts], equal_nan=True)


def test_a_result_with_exports_is_replaced(swept: Path) -> None:
    result: Any = FakeResult()
    write_folder(result, judge(result), swept)
    assert not (swept / WORKBOOK).exists()
    assert not (swept / PARQUET).exists()


def test_long_tables_go_on_on_a_further_sheet(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(exports, "SHEET_ROWS", 4)
    (tmp_path / "steps.csv").write_text("step,heat [W]\r\n" + "".join(f"s{k},{k}\r\n" for k in range(7)))
    export(tmp_path, ["excel"], ABOUT)
    book = openpyxl.load_workbook(tmp_path / WORKBOOK)
    assert book.sheetnames == ["about", "steps", "steps 2", "steps 3"]
    found = [row for name in book.sheetnames[1:] for row in list(book[name].values)[1:]]
    assert found == [(f"s{k}", k) for k in range(7)]
    assert book["about"]["B1"].data_type == "s"  # a title is a text, whatever it begins with


def test_parquet_of_a_column_that_is_empty_at_first(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(exports, "_BLOCK", 64)
    lines = [*([",1,"] * 200), '2.5,0,"late, and why"']
    (tmp_path / "table.csv").write_text("a [-],certified [-],reason\r\n" + "\r\n".join(lines) + "\r\n")
    export(tmp_path, ["parquet"], ABOUT)
    table = pyarrow.parquet.read_table(tmp_path / PARQUET)
    assert table["a [-]"].to_pylist()[-2:] == [None, 2.5]
    assert table["reason"].to_pylist()[-1] == "late, and why"


@pytest.mark.parametrize(
    ("formats", "states", "told"),
    [
        (["excel"], 1_048_576, "do not fit"),
        (["paper"], 1, "no format 'paper'"),
    ],
)
def test_what_cannot_be_written_is_refused(formats: list[str], states: int, told: str) -> None:
    with pytest.raises(InputError, match=told):
        check_exports(formats, states)


@pytest.mark.parametrize("name", ["excel", "parquet"])
def test_the_extra_that_is_missing_is_named(name: str, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr("importlib.util.find_spec", lambda _: None)
    with pytest.raises(InputError, match=rf"gibbsmin\[{name}\]"):
        check_exports([name], 1)
