"""Studies whose states are kept on disk: parts, resumption, processes, a cluster."""

from __future__ import annotations

import csv
import json
import os
import signal
import subprocess
import sys
import time
from collections.abc import Iterator
from itertools import pairwise
from pathlib import Path
from typing import Any

import numpy as np
import pytest
import xarray

import gibbsmin as gm
from gibbsmin.case import large
from gibbsmin.case.study import Study
from gibbsmin.errors import InputError
from gibbsmin.results.archive import cuts, slab

CASE = """
title = "large"
key_figures = ["reforming"]
[species]
allow = ["CH4", "H2O", "CO", "CO2", "H2", "N2"]
[feeds.gas]
mole_percent = { CH4 = 90.0, N2 = 10.0 }
flow = "100 kmol/h"
temperature = "500 degC"
[feeds.steam]
species = "H2O"
steam_to_carbon = 3.0
temperature = "500 degC"
[held]
temperature = "800 degC"
pressure = "20 bar"
[[sweep]]
vary = "held.pressure"
from = "1 bar"
to = "40 bar"
points = 50
[[sweep]]
vary = "held.temperature"
from = "600 degC"
to = "1000 degC"
points = 80
"""
STATES = 4000


@pytest.fixture(autouse=True)
def _small_parts(monkeypatch: pytest.MonkeyPatch) -> None:
    """Call a study large from 1000 states on, in parts of 500."""
    monkeypatch.setattr("gibbsmin.case.study.LARGE", 1000)
    monkeypatch.setattr(large, "PART", 500)


@pytest.fixture
def case(tmp_path: Path) -> Path:
    """Write a case of 4000 states."""
    path = tmp_path / "case.toml"
    path.write_text(CASE, encoding="utf-8")
    return path


def read(path: Path) -> Study:
    """Read the case, which is one of a mixture."""
    study = gm.read_case(path)
    assert isinstance(study, Study)
    return study


@pytest.fixture
def whole(case: Path) -> Iterator[gm.Result]:
    """All of it solved at once."""
    return read(case).solved()


def equal(found: xarray.Dataset, whole: gm.Result) -> None:
    """Compare states on disk with those solved at once; each starts from other neighbours."""
    ref = whole.dataset()
    for name in ("temperature", "enthalpy", "heat", "entropy_generated", "reforming.ch4_slip"):
        assert found[name].dims == ref[name].dims
        np.testing.assert_allclose(found[name], ref[name], rtol=1e-9, atol=1e-9)
        assert found[name].attrs["units"] == ref[name].attrs["units"]
    for species in map(str, found.species.values):
        wanted = ref.amount.sel(species=species)
        np.testing.assert_allclose(found.amount.sel(species=species), wanted, rtol=1e-8, atol=1e-12)
    assert bool(found.certified.all())


def test_on_disk_it_is_what_it_is_in_memory(case: Path, whole: Any, tmp_path: Path) -> None:
    told: list[tuple[int, int]] = []
    done = read(case).run_into(tmp_path / "out", lambda *progress: told.append(progress))
    assert done.all_certified
    equal(done.dataset(), whole)
    assert told[0] == (0, STATES)
    assert told[-1] == (STATES, STATES)
    assert sorted(path.name for path in (tmp_path / "out").iterdir()) == ["result.json", "result.nc", "table.csv"]
    assert not (tmp_path / ".out-parts").exists()
    with (tmp_path / "out" / "table.csv").open(newline="") as file:
        rows = list(csv.reader(file))
    assert len(rows) == STATES + 1
    assert all(len(row) == len(rows[0]) for row in rows)
    column = rows[0].index("CH4 [mol/mol gas]")
    ref = whole.dataset().mole_fraction.sel(species="CH4").values.ravel()
    assert [float(row[column]) for row in rows[1:]] == pytest.approx(list(ref), rel=1e-8)
    document = json.loads((tmp_path / "out" / "result.json").read_text())
    assert document["count"] == document["certified"] == STATES
    assert document["ranges"]["temperature"]["highest"] == pytest.approx(1273.15)
    assert any("Toxic" in caution for caution in document["cautions"])


def test_in_memory_it_is_refused(case: Path) -> None:
    with pytest.raises(InputError, match="run_into"):
        read(case).run()


def test_an_interrupted_run_goes_on(case: Path, whole: Any, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Ctrl-C after three parts; what is done is not solved again, and the result is the same."""
    solve, solved = large.solve_part, []

    def three(study: Any, layout: Any, window: Any) -> Any:
        if len(solved) == 3:
            raise KeyboardInterrupt
        solved.append(window)
        return solve(study, layout, window)

    monkeypatch.setattr(large, "solve_part", three)
    with pytest.raises(KeyboardInterrupt):
        read(case).run_into(tmp_path / "out")
    assert not (tmp_path / "out").exists()
    first, solved = list(solved), []
    monkeypatch.setattr(large, "solve_part", lambda *args: (solved.append(args[2]), solve(*args))[1])
    done = read(case).run_into(tmp_path / "out", resume=True)
    assert not set(first) & set(solved)
    assert len(first) + len(solved) == 9, "six rows of the grid in a part of 500"
    equal(done.dataset(), whole)


def test_parts_of_another_case_are_not_mixed_in(case: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    def stop(*_: Any) -> None:
        raise KeyboardInterrupt

    with monkeypatch.context() as patched:
        patched.setattr(large, "put", stop)
        with pytest.raises(KeyboardInterrupt):
            read(case).run_into(tmp_path / "out")
    case.write_text(CASE.replace("steam_to_carbon = 3.0", "steam_to_carbon = 2.5"), encoding="utf-8")
    with pytest.raises(InputError, match="another study"):
        read(case).run_into(tmp_path / "out", resume=True)
    assert read(case).run_into(tmp_path / "out").all_certified, "without --resume they are thrown away"


def test_a_part_that_is_half_written_is_not_there(case: Path, tmp_path: Path) -> None:
    study = read(case)
    parts = tmp_path / ".out-parts"
    parts.mkdir()
    (parts / "part-000000.99.tmp").write_bytes(b"PK half")
    assert study.run_into(tmp_path / "out").all_certified


def test_states_that_fail_are_marked_and_the_rest_goes_on(case: Path, tmp_path: Path) -> None:
    """No CO2 and no CO beyond a slip that cannot be: states with too little carbon for it fail."""
    text = CASE.replace("points = 80", "points = 40").replace(
        "[held]", '[constraint.slip]\namounts = { CH4 = 1.0 }\nsum = "80 kmol/h"\n\n[held]'
    )
    text = text.replace(
        'vary = "held.pressure"\nfrom = "1 bar"\nto = "40 bar"',
        'vary = "feeds.gas.flow"\nfrom = "50 kmol/h"\nto = "200 kmol/h"',
    )
    case.write_text(text, encoding="utf-8")
    done = read(case).run_into(tmp_path / "out")
    data = done.dataset()
    good = data.certified.values.astype(bool)
    assert 0 < good.sum() < good.size
    assert np.isnan(data.amount.values[~good]).all()
    assert np.isfinite(data.amount.values[good]).all()
    assert not done.all_certified
    assert "constraints" in done.document["failed"][0]["reason"]
    assert done.document["certified"] == good.sum()


@pytest.mark.slow
def test_two_processes(case: Path, whole: Any, tmp_path: Path) -> None:
    equal(read(case).run_into(tmp_path / "out", workers=2).dataset(), whole)


@pytest.mark.slow
def test_killed_in_the_middle_and_resumed(case: Path, whole: Any, tmp_path: Path) -> None:
    """The whole process is killed with signal 9, then the run goes on."""
    script = (
        "import sys; from pathlib import Path; from gibbsmin.case import large; import gibbsmin.case.study as study\n"
        "study.LARGE, large.PART = 1000, 250\nimport gibbsmin as gm\n"
        "done = gm.read_case(sys.argv[1]).run_into(sys.argv[2], resume=sys.argv[3] == '1')\n"
    )
    call = [sys.executable, "-c", script, str(case), str(tmp_path / "out")]
    parts = tmp_path / ".out-parts"
    with subprocess.Popen([*call, "0"], env=os.environ) as running:
        deadline = time.monotonic() + 120.0
        while len(list(parts.glob("part-*.npz"))) < 2 and time.monotonic() < deadline and running.poll() is None:
            time.sleep(0.002)
        running.send_signal(signal.SIGKILL)
    kept = {path.name: path.stat().st_mtime_ns for path in parts.glob("part-*.npz")}
    assert 2 <= len(kept) < 16, "killed too late to tell"
    assert not (tmp_path / "out").exists()
    subprocess.run([*call, "1"], check=True, env=os.environ)
    equal(xarray.open_dataset(tmp_path / "out" / "result.nc", engine="h5netcdf"), whole)


@pytest.mark.slow
def test_on_a_cluster_of_which_a_worker_dies(
    case: Path, whole: Any, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    from distributed import LocalCluster

    killed: list[int] = []
    with LocalCluster(
        n_workers=2, threads_per_worker=1, processes=True, dashboard_address=None, silence_logs=50
    ) as local:
        keep = large.put

        def put(parts: Path, number: int, piece: Any) -> None:
            keep(parts, number, piece)
            if not killed:
                victim = next(iter(local.workers.values()))
                killed.append(victim.pid)
                os.kill(victim.pid, signal.SIGKILL)

        monkeypatch.setattr(large, "put", put)
        done = read(case).run_into(tmp_path / "out", cluster=local.scheduler_address)
    assert killed
    equal(done.dataset(), whole)


def test_a_cluster_that_does_not_answer(case: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    import distributed

    def none(*_: Any, **__: Any) -> None:
        raise OSError("timed out")

    monkeypatch.setattr(distributed, "Client", none)
    with pytest.raises(InputError, match="no Dask scheduler answers at tcp://nowhere:1"):
        read(case).run_into(tmp_path / "out", cluster="tcp://nowhere:1")


@pytest.mark.parametrize("shape", [(10,), (1000,), (7, 50, 30), (3, 1000), (1, 5, 1), (1, 1), (20, 1, 300)])
@pytest.mark.parametrize("largest", [1, 7, 100, 20000])
def test_parts_are_blocks_that_cover_the_grid_once(shape: tuple[int, ...], largest: int) -> None:
    bounds = cuts(shape, largest)
    found = np.full(shape, -1)
    for start, stop in pairwise(bounds):
        assert 0 < stop - start <= max(largest, 1)
        place, block = slab(shape, start, stop)
        found[place] = np.arange(start, stop).reshape(block)
    assert found.ravel().tolist() == list(range(found.size))


def test_points_that_form_no_grid(case: Path, tmp_path: Path) -> None:
    """A Sobol design: one dimension, with the inputs along it; each state is the one solved by itself."""
    text = CASE.replace("points = 50\n", "").replace("points = 80\n", "")
    case.write_text(text + '[design]\nkind = "sobol"\npoints = 2048\nseed = 7\n', encoding="utf-8")
    study = read(case)
    data = study.run_into(tmp_path / "out").dataset()
    assert data.temperature.dims == ("point",)
    assert data.sizes["point"] == 2048
    whole = study.solved()
    for name, values in whole.inputs.items():
        np.testing.assert_allclose(data[name], values)
    np.testing.assert_allclose(data.heat, whole.heats, rtol=1e-9)
