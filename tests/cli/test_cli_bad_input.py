"""Whatever is typed wrong gives one plain line on standard error, exit code 2, and no traceback."""

from __future__ import annotations

from pathlib import Path

import pytest
from typer.testing import CliRunner

from gibbsmin.cli.main import app

GOOD = """
title = "Small case"
[feeds.gas]
amounts = { CH4 = 1.0, O2 = 2.0 }
[held]
temperature = "1500 K"
pressure = "1 bar"
"""

# what is changed in the good case, into what, and a word that the message must hold
WRONG_CASES = {
    "not toml": ("[held]", "[held", "line"),
    "duplicate key": ('pressure = "1 bar"', 'pressure = "1 bar"\npressure = "2 bar"', "pressure"),
    "unknown key": ("temperature =", "temprature =", "temperature"),
    "unknown table": ("[held]", "[fixed]", "held"),
    "no title": ('title = "Small case"', "", "title"),
    "no feeds": ("[feeds.gas]", "[feed.gas]", "feeds"),
    "no pressure": ('pressure = "1 bar"', "", "pressure"),
    "wrong dimension": ('"1500 K"', '"1500 bar"', "temperature"),
    "unknown unit": ('"1500 K"', '"1500 kelvins_of_mine"', "temperature"),
    "gauge pressure": ('"1 bar"', '"1 barg"', "absolute"),
    "negative temperature": ('"1500 K"', '"-300 degC"', "temperature"),
    "blank": ('"1500 K"', '""', "temperature"),
    "not a number": ('"1500 K"', '"hot"', "temperature"),
    "truth value": ('"1500 K"', "true", "temperature"),
    "infinite": ('"1500 K"', "inf", "temperature"),
    "unknown species": ("CH4 =", "CH44 =", "CH4"),
    "species with wrong capitals": ("CH4 =", "ch4 =", "CH4"),
    "isomers": ("CH4 =", "C4H10 =", "isobutane"),
    "negative amount": ("CH4 = 1.0", "CH4 = -1.0", "CH4"),
    "empty feed": ("{ CH4 = 1.0, O2 = 2.0 }", "{}", "amounts"),
    "two compositions": ("amounts =", 'species = "H2"\namounts =', "species"),
    "percent off 100": ("amounts = { CH4 = 1.0, O2 = 2.0 }", "mole_percent = { CH4 = 90.0 }\nflow = 1.0", "90"),
    "no size": ("amounts = { CH4 = 1.0, O2 = 2.0 }", "mole_percent = { CH4 = 100.0 }", "flow"),
    "excluded unknown": ("[held]", '[species]\nexclude = ["XYZ"]\n[held]', "XYZ"),
    "elements miss one": ("[held]", '[species]\nelements = "C H"\n[held]', "O"),
    "sweep of nothing": ("[held]", '[[sweep]]\nvary = "held.volume"\nvalues = [1]\n[held]', "held.temperature"),
    "sweep without points": (
        "[held]",
        '[[sweep]]\nvary = "held.temperature"\nfrom = "300 K"\nto = "400 K"\n[held]',
        "points",
    ),
    "endless sweep": (
        "[held]",
        '[[sweep]]\nvary = "held.temperature"\nfrom = 300\nto = 400\npoints = 100000000\n[held]',
        "points",
    ),
    "two of a kind": ('pressure = "1 bar"', 'pressure = "1 bar"\nvolume = "1 m3"', "volume"),
    "temperature and heat": ('pressure = "1 bar"', 'pressure = "1 bar"\nheat = "1 kJ"', "one follows from the other"),
    "table of later": ("[held]", "[target]\nx = 1\n[held]", "target"),
    "threshold": ("[held]", "[show]\nthreshold = 2\n[held]", "threshold"),
    "file outside": ("[held]", '[species]\nfiles = ["../../etc/passwd"]\n[held]', "folder"),
    "nested nonsense": ("[feeds.gas]", "[feeds.gas.deeper.still]", "feeds"),
}


@pytest.fixture
def here(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    monkeypatch.chdir(tmp_path)
    return tmp_path


def ask(*words: str) -> tuple[int, str, str]:
    """Run the command in this process; exit code, standard output, standard error."""
    found = CliRunner().invoke(app, list(words), catch_exceptions=False)
    return found.exit_code, found.stdout, found.stderr


@pytest.mark.parametrize("command", ["run", "check"])
@pytest.mark.parametrize(("old", "new", "word"), WRONG_CASES.values(), ids=WRONG_CASES.keys())
def test_wrong_case(here: Path, command: str, old: str, new: str, word: str) -> None:
    assert old in GOOD
    Path("case.toml").write_text(GOOD.replace(old, new, 1))
    code, out, err = ask(command, "case.toml")
    assert code == 2
    assert out == ""
    assert word in err
    assert "case.toml" in err
    assert "Traceback" not in err
    assert "pydantic" not in err
    assert not Path("results").exists()


@pytest.mark.parametrize(
    ("content", "word"),
    [
        (b"\xff\xfe\x00", "UTF-8"),
        (b"", "title"),
        (b"\x00" * 10, "case.toml"),
        (b"# " + b"x" * 2**21, "large"),
        (b"a" * 5000, "line"),
        (b"[" * 5000, "line"),
    ],
)
def test_wrong_file(here: Path, content: bytes, word: str) -> None:
    Path("case.toml").write_bytes(content)
    code, out, err = ask("run", "case.toml")
    assert (code, out) == (2, "")
    assert word in err
    assert len(err) < 1000


@pytest.mark.parametrize(
    ("words", "word"),
    [
        (["run"], "CASE"),
        (["run", "missing.toml"], "missing.toml"),
        (["run", "."], "."),
        (["run", "--nonsense", "case.toml"], "--nonsense"),
        (["run", "case.toml", "--out"], "--out"),
        (["nonsense"], "nonsense"),
        (["check", "missing.toml"], "missing.toml"),
        (["species", "CO3H77"], "CO3H77"),
        (["species", "no such thing at all"], "no such thing"),
        (["species", ""], "species"),
        (["species", "CO2", "--check", "x.toml"], "--check"),
        (["species", "--check", "missing.toml"], "missing.toml"),
        (["begin"], "NAME"),
        (["begin", "x", "airplane"], "airplane"),
        (["begin", "no/such/folder/x"], "no/such/folder/x.toml"),
        (["begin", ""], "NAME"),
        (["schema", "extra"], "extra"),
    ],
)
def test_wrong_call(here: Path, words: list[str], word: str) -> None:
    code, out, err = ask(*words)
    assert code == 2
    assert out == ""
    assert word in err
    assert "Traceback" not in err


def test_all_wrong_cases_are_named_and_none_is_solved(here: Path) -> None:
    Path("good.toml").write_text(GOOD)
    Path("one.toml").write_text(GOOD.replace("title", "titel"))
    Path("two.toml").write_text(GOOD.replace("CH4", "CH44"))
    code, out, err = ask("run", "good.toml", "one.toml", "two.toml")
    assert (code, out) == (2, "")
    assert "one.toml" in err
    assert "two.toml" in err
    assert not Path("results").exists()


def test_two_cases_of_one_name(here: Path) -> None:
    Path("a").mkdir()
    Path("a/case.toml").write_text(GOOD)
    Path("case.toml").write_text(GOOD)
    code, out, err = ask("run", "case.toml", "a/case.toml")
    assert (code, out) == (2, "")
    assert "results/case" in err


def test_occupied_result_folder_is_refused_before_solving(here: Path) -> None:
    Path("case.toml").write_text(GOOD)
    Path("mine").mkdir()
    Path("mine/thesis.txt").write_text("years of work")
    code, out, err = ask("run", "case.toml", "--out", "mine")
    assert (code, out) == (2, "")
    assert "did not write" in err
    assert Path("mine/thesis.txt").read_text() == "years of work"


def test_begin_never_overwrites(here: Path) -> None:
    Path("case.toml").write_text("mine")
    code, _, err = ask("begin", "case")
    assert code == 2
    assert "exists" in err
    assert Path("case.toml").read_text() == "mine"
