"""``gibbsmin run`` draws sweeps, ``gibbsmin report`` draws again; both say plainly what is wrong."""

from __future__ import annotations

import json
import shutil
import subprocess
import sys
from pathlib import Path

import pytest
from figure_folders import sweep_folder
from typer.testing import CliRunner

from gibbsmin.cli.main import app

CASE = """
title = "Methane and oxygen"
[feeds.gas]
amounts = { CH4 = 1.0, O2 = 2.0 }
[held]
temperature = "1500 K"
pressure = "1 bar"
"""
SWEEP = '[[sweep]]\nvary = "held.temperature"\nvalues = ["1000 K", "1500 K", "2000 K"]\n'


@pytest.fixture
def here(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    monkeypatch.chdir(tmp_path)
    (tmp_path / "one.toml").write_text(CASE)
    (tmp_path / "sweep.toml").write_text(CASE + SWEEP)
    return tmp_path


def ask(*words: str) -> tuple[int, str, str]:
    """Run the command in this process; exit code, standard output, standard error."""
    found = CliRunner().invoke(app, list(words), catch_exceptions=False)
    return found.exit_code, found.stdout, found.stderr


def test_a_sweep_is_drawn_and_drawn_again(here: Path) -> None:
    code, out, err = ask("run", "sweep.toml")
    assert (code, err) == (0, "")
    place = here / "results" / "sweep" / "figures"
    assert "figures        results/sweep/figures: composition" in out
    first = {path.name: path.read_bytes() for path in place.iterdir()}
    assert "composition.svg" in first
    shutil.rmtree(place)
    assert ask("report", "results/sweep", "--quiet") == (0, "", "")
    assert {path.name: path.read_bytes() for path in place.iterdir()} == first
    assert ask("run", "sweep.toml", "--no-figures", "--quiet")[0] == 0  # a folder with figures may be replaced
    assert not place.exists()


def test_a_single_state_is_drawn_when_asked(here: Path) -> None:
    assert ask("run", "one.toml")[0] == 0
    place = here / "results" / "one" / "figures"
    assert not place.exists()
    assert ask("run", "one.toml", "--figures", "--quiet") == (0, "", "")
    assert json.loads((place / "index.json").read_text(encoding="utf-8"))["figures"][0]["name"] == "composition"


def test_json_stays_json(here: Path) -> None:
    code, out, _ = ask("run", "sweep.toml", "--json")
    assert code == 0
    assert len(json.loads(out)["states"]) == 3
    assert (here / "results" / "sweep" / "figures" / "index.json").is_file()


def test_a_single_state_does_not_wait_for_the_drawing_library(here: Path) -> None:
    program = "import sys; from gibbsmin.cli.main import app; app(['run', 'one.toml', '-q'], standalone_mode=False)"
    program += "; assert 'matplotlib' not in sys.modules"
    subprocess.run([sys.executable, "-c", program], check=True, cwd=here)


def test_what_is_no_result(here: Path) -> None:
    (here / "empty").mkdir()
    for words in (["report", "empty"], ["report", "nowhere"], ["report", "sweep.toml"]):
        code, out, err = ask(*words)
        assert code == 2
        assert out == ""
        assert err.startswith("gibbsmin: ")
        assert "Traceback" not in err


def test_a_torn_result(here: Path) -> None:
    sweep_folder(here / "out", {"held.temperature": ([500.0, 600.0], "degC")})
    whole = (here / "out" / "result.nc").read_bytes()
    (here / "out" / "result.nc").write_bytes(whole[: len(whole) // 2])
    code, _, err = ask("report", "out")
    assert code == 2
    assert "run the case again" in err
