"""Trains on the command line: data to standard output, words to standard error, the promised exit codes."""

from __future__ import annotations

import json
from pathlib import Path

import pytest
import train_texts
from typer.testing import CliRunner

from gibbsmin.cli.main import app

SOUND = train_texts.TOO_COLD.replace("-50 MW", "-0.2 MW")


@pytest.fixture
def here(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    monkeypatch.chdir(tmp_path)
    return tmp_path


def ask(*words: str) -> tuple[int, str, str]:
    """Run the command; exit code, standard output, standard error."""
    found = CliRunner().invoke(app, list(words), catch_exceptions=False)
    return found.exit_code, found.stdout, found.stderr


def test_run_prints_the_streams_and_writes_the_files(here: Path) -> None:
    (here / "case.toml").write_text(train_texts.SHIFT)
    code, out, err = ask("run", "case.toml")
    assert (code, err) == (0, "")
    assert "streams " in out
    assert "certificate " in out
    assert max(map(len, out.splitlines())) <= 80
    assert sorted(p.name for p in Path("results/case").iterdir()) == [
        "figures", "result.json", "steps.csv", "streams.csv", "table.csv",
    ]  # fmt: skip


def test_json_is_all_that_is_printed_and_is_the_file(here: Path) -> None:
    (here / "case.toml").write_text(train_texts.LOOP + train_texts.PURGES)
    code, out, _ = ask("run", "case.toml", "--json")
    assert code == 1  # one of its states is not certified
    data = json.loads(out, parse_constant=lambda word: pytest.fail(f"{word} is no JSON"))
    assert data == json.loads(Path("results/case/result.json").read_text())
    assert data["products"] == ["condenser.ammonia", "condenser.purge"]
    assert data["order"] == ["compressor", "heater", "converter", "condenser"]


def test_quiet_prints_nothing(here: Path) -> None:
    (here / "case.toml").write_text(SOUND)
    assert ask("run", "case.toml", "-q")[:2] == (0, "")


@pytest.mark.parametrize("sweep", ["", train_texts.COOLING])
def test_a_state_that_fails_is_told_with_its_stage_and_its_reason(here: Path, sweep: str) -> None:
    (here / "case.toml").write_text(train_texts.TOO_COLD + sweep)
    code, out, err = ask("run", "case.toml")
    assert code == 1
    assert f"1 of {3 if sweep else 1} states could not be certified" in err
    flat = " ".join(out.split())
    assert "freezer: What is held asks for a temperature below all data" in flat
    assert Path("results/case/result.json").is_file()


def test_a_wrong_train_is_refused_before_anything_is_solved(here: Path) -> None:
    (here / "case.toml").write_text(SOUND.replace('inlets = ["bed"]', 'inlets = ["bad"]'))
    for command in ("run", "check"):
        code, out, err = ask(command, "case.toml")
        assert (code, out) == (2, "")
        assert "there is no stream 'bad'" in err
        assert "line 16" in err
    assert not Path("results").exists()


def test_a_place_that_is_taken_is_refused(here: Path) -> None:
    (here / "case.toml").write_text(SOUND)
    (here / "out").mkdir()
    (here / "out" / "mine.txt").write_text("mine")
    code, out, err = ask("run", "case.toml", "--out", "out")
    assert (code, out) == (2, "")
    assert "did not write" in err
    assert [p.name for p in (here / "out").iterdir()] == ["mine.txt"]


def test_check_draws_the_train(here: Path) -> None:
    (here / "case.toml").write_text(train_texts.LOOP)
    code, out, err = ask("check", "case.toml")
    assert (code, err) == (0, "")
    assert "| converter" in out
    assert "|<---" in out
    assert max(map(len, out.splitlines())) <= 80
    assert not Path("results").exists()


def test_a_train_and_a_mixture_in_one_call(here: Path) -> None:
    (here / "one.toml").write_text(SOUND)
    (here / "two.toml").write_text(
        'title = "CO and steam"\n[feeds.gas]\namounts = { CO = 1.0, H2O = 1.0 }\n'
        '[held]\ntemperature = "600 K"\npressure = "1 bar"\n[species]\nsettling = ["CO", "H2O", "CO2", "H2"]\n'
    )
    code, out, _ = ask("run", "one.toml", "two.toml", "--json", "--out", "both")
    assert code == 0
    assert [data["title"] for data in json.loads(out)] == ["A cooler that takes too much (invented)", "CO and steam"]
    assert Path("both/one/streams.csv").is_file()
    assert not Path("both/two/streams.csv").exists()
