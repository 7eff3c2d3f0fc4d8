"""The result folder is whole or absent, and never eats what it did not write."""

from __future__ import annotations

import csv
import json
import os
from pathlib import Path
from typing import Any

import pytest
from report_fakes import FakeResult

from gibbsmin.errors import InputError
from gibbsmin.practice.safety.cautions import CLOSING
from gibbsmin.results.folder import write_folder
from gibbsmin.results.judge import judge


def write(result: Any, folder: Path) -> dict[str, Any]:
    return write_folder(result, judge(result), folder)


def test_single_state_folder(tmp_path: Path) -> None:
    data = write(FakeResult(), tmp_path / "deep" / "out")
    assert sorted(path.name for path in (tmp_path / "deep").iterdir()) == ["out"]
    assert sorted(path.name for path in (tmp_path / "deep" / "out").iterdir()) == ["result.json", "table.csv"]
    assert json.loads((tmp_path / "deep" / "out" / "result.json").read_text()) == data
    assert data["states"][0]["cautions"][-1] == CLOSING
    assert {"case_sha256", "data_version", "constants", "created", "packages"} <= data["provenance"].keys()


def test_sweep_folder_holds_a_dataset_that_xarray_opens(tmp_path: Path) -> None:
    import xarray as xr

    result = FakeResult(5)
    write(result, tmp_path / "out")
    with xr.open_dataset(tmp_path / "out" / "result.nc", engine="h5netcdf") as found:
        assert found["temperature"].values == pytest.approx(result.batch.temperature)


def test_spreadsheet_reads_back_to_the_last_digit(tmp_path: Path) -> None:
    result = FakeResult(5)
    result.batch.certified[2] = False
    write(result, tmp_path / "out")
    with (tmp_path / "out" / "table.csv").open(newline="") as file:
        rows = list(csv.DictReader(file))
    assert len(rows) == 5
    assert [float(row["temperature [K]"]) for row in rows] == list(result.batch.temperature)
    assert float(rows[0]["CO [mol/s]"]) == result.batch.amounts[0, 2]
    assert float(rows[4]["CO [mol/mol gas]"]) == pytest.approx(9.67 / 100.0)
    assert float(rows[0]["lost_work [W]"]) == result.audits[0].lost_work
    assert float(rows[0]["heat [W]"]) == 6.8e6
    assert rows[2]["lost_work [W]"] == rows[2]["heat [W]"] == ""
    assert rows[2]["CO [mol/s]"] == ""
    assert rows[2]["certified [-]"] == "0"
    assert all("[" in head or head == "reason" for head in rows[0])


def test_earlier_result_is_replaced(tmp_path: Path) -> None:
    write(FakeResult(3), tmp_path / "out")
    write(FakeResult(), tmp_path / "out")
    assert sorted(path.name for path in (tmp_path / "out").iterdir()) == ["result.json", "table.csv"]
    assert [path.name for path in tmp_path.iterdir()] == ["out"]


@pytest.mark.parametrize("name", ["notes.txt", "result.json"])
def test_what_gibbsmin_did_not_write_is_left_alone(tmp_path: Path, name: str) -> None:
    (tmp_path / name).write_text("{}")
    with pytest.raises(InputError, match="did not write"):
        write(FakeResult(), tmp_path)
    assert (tmp_path / name).read_text() == "{}"


def test_notes_put_into_a_result_folder_save_it(tmp_path: Path) -> None:
    write(FakeResult(), tmp_path / "out")
    (tmp_path / "out" / "notes.txt").write_text("mine")
    with pytest.raises(InputError, match="did not write"):
        write(FakeResult(), tmp_path / "out")
    assert (tmp_path / "out" / "notes.txt").read_text() == "mine"


def test_a_file_in_the_way(tmp_path: Path) -> None:
    (tmp_path / "out").write_text("x")
    with pytest.raises(InputError, match="not a folder"):
        write(FakeResult(), tmp_path / "out")


@pytest.mark.skipif(not hasattr(os, "geteuid") or os.geteuid() == 0, reason="root may write anywhere")
def test_unwritable_parent(tmp_path: Path) -> None:
    tmp_path.chmod(0o500)
    with pytest.raises(InputError, match="cannot be written"):
        write(FakeResult(), tmp_path / "out")


def test_failure_half_way_leaves_the_earlier_result(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    write(FakeResult(), tmp_path / "out")
    before = (tmp_path / "out" / "result.json").read_text()

    def full_disk(_: Any) -> dict[str, str]:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(FakeResult, "tables", full_disk)
    with pytest.raises(InputError, match="No space left"):
        write(FakeResult(3), tmp_path / "out")
    assert (tmp_path / "out" / "result.json").read_text() == before
    assert [path.name for path in tmp_path.iterdir()] == ["out"]


def test_failed_rename_brings_the_earlier_result_back(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    write(FakeResult(), tmp_path / "out")
    before = (tmp_path / "out" / "result.json").read_text()
    rename = Path.rename

    def fail_on_new(self: Path, target: Any) -> Path:
        if self.name == "new":
            raise OSError(5, "Input/output error")
        return rename(self, target)

    monkeypatch.setattr(Path, "rename", fail_on_new)
    with pytest.raises(InputError, match="Input/output"):
        write(FakeResult(3), tmp_path / "out")
    assert (tmp_path / "out" / "result.json").read_text() == before
