"""The command line as people use it: data to standard output, words to standard error, the promised exit codes."""

from __future__ import annotations

import json
import os
import signal
import subprocess
import sys
import time
from pathlib import Path
from typing import Any

import pytest
from typer.testing import CliRunner

from gibbsmin.case.study import Study
from gibbsmin.cli.main import app
from gibbsmin.cli.messages import Progress
from gibbsmin.solver.status import MEANING

SWEEP = """
title = "Methane and oxygen"
[feeds.gas]
amounts = { CH4 = 1.0, O2 = 2.0 }
[held]
temperature = "1500 K"
pressure = "1 bar"
[[sweep]]
vary = "held.temperature"
values = ["1000 K", "1500 K", "2000 K"]
"""


@pytest.fixture
def here(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    monkeypatch.chdir(tmp_path)
    return tmp_path


def ask(*words: str) -> tuple[int, str, str]:
    """Run the command in this process; exit code, standard output, standard error."""
    found = CliRunner().invoke(app, list(words), catch_exceptions=False)
    return found.exit_code, found.stdout, found.stderr


def call(*words: str, **options: Any) -> subprocess.CompletedProcess[str]:
    """Run the command in a process of its own."""
    program = "from gibbsmin.cli.main import main; main()"
    return subprocess.run(
        [sys.executable, "-c", program, *words], capture_output=True, text=True, check=False, timeout=300, **options
    )


@pytest.mark.parametrize("words", [["--help"], ["run", "--help"], ["species", "-h"]])
def test_help_is_plain(words: list[str]) -> None:
    code, out, err = ask(*words)
    assert code == 0
    assert "Usage" in out
    assert err == ""
    assert max(map(len, out.splitlines())) <= 80


def test_help_needs_nothing_heavy() -> None:
    program = (
        "import sys; import gibbsmin.cli.main; "
        "print([m for m in ('numpy', 'numba', 'pydantic', 'pandas', 'xarray', 'pint', 'rich') if m in sys.modules])"
    )
    found = subprocess.run([sys.executable, "-c", program], capture_output=True, text=True, check=True)
    assert found.stdout.strip() == "[]"


def test_help_answers_within_0_3_seconds() -> None:
    def once() -> float:
        start = time.perf_counter()
        assert call("--help").returncode == 0
        return time.perf_counter() - start

    assert min(once() for _ in range(5)) < 0.3


@pytest.mark.parametrize("kind", ["reformer", "furnace", "gasifier", "sweep"])
def test_every_beginning_checks_and_runs(here: Path, kind: str) -> None:
    code, out, err = ask("begin", "mine", kind)
    assert (code, out) == (0, "")
    assert "mine.toml" in err
    code, out, err = ask("check", "mine.toml")
    assert code == 0, err
    assert "may form" in out
    code, out, err = ask("run", "mine.toml")
    assert code == 0, err
    assert "certificate" in out
    assert max(map(len, out.splitlines())) <= 80
    assert Path("results/mine/result.json").is_file()


def test_json_is_all_that_is_printed_and_is_the_file(here: Path) -> None:
    Path("case.toml").write_text(SWEEP)
    code, out, _ = ask("run", "case.toml", "--json")
    assert code == 0
    assert json.loads(out) == json.loads(Path("results/case/result.json").read_text())


def test_json_of_several_cases_is_a_list(here: Path) -> None:
    Path("one.toml").write_text(SWEEP)
    Path("two.toml").write_text(SWEEP)
    code, out, _ = ask("run", "one.toml", "two.toml", "--json", "--out", "both")
    assert code == 0
    assert len(json.loads(out)) == 2
    assert Path("both/one/table.csv").is_file()
    assert Path("both/two/table.csv").is_file()


def test_quiet_prints_nothing(here: Path) -> None:
    Path("case.toml").write_text(SWEEP)
    code, out, _ = ask("run", "case.toml", "--quiet")
    assert (code, out) == (0, "")
    assert Path("results/case/result.nc").is_file()


def test_running_twice_gives_the_same_numbers(here: Path) -> None:
    Path("case.toml").write_text(SWEEP)
    first = json.loads(ask("run", "case.toml", "--json")[1])
    second = json.loads(ask("run", "case.toml", "--json")[1])
    assert first["states"] == second["states"]
    assert first["provenance"]["case_sha256"] == second["provenance"]["case_sha256"]


def test_state_without_certificate_gives_exit_code_1_and_the_rest_is_written(
    here: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    solve = Study.run

    def spoiled(self: Study, *args: Any, **kwargs: Any) -> Any:
        result = solve(self, *args, **kwargs)
        result.batch.outcome.status[1] = max(MEANING)
        return result

    monkeypatch.setattr(Study, "run", spoiled)
    Path("case.toml").write_text(SWEEP)
    code, out, err = ask("run", "case.toml")
    assert code == 1
    assert "NOT certified" in out
    assert "1 of 3 states" in err
    assert len(json.loads(Path("results/case/result.json").read_text())["states"]) == 3


@pytest.mark.parametrize("words", [["CO2"], ["methane"], ["graphite"], ["SiO2(s)"], ["H2O(l)"], ["Fe(s)"], ["e-"]])
def test_species_sheet(words: list[str]) -> None:
    code, out, _ = ask("species", *words)
    assert code == 0
    assert "kJ/mol" in out
    assert "source" in out
    assert max(map(len, out.splitlines())) <= 80


def test_species_sheet_shows_the_published_heat_of_formation() -> None:
    # CODATA key values (Cox, Wagman & Medvedev 1989): H(CO2) = -393.51 kJ/mol, S(CO2) = 213.785 J/mol/K
    _, out, _ = ask("species", "CO2")
    assert "-393.51" in out
    assert "213.7" in out


def test_species_search_lists() -> None:
    code, out, _ = ask("species", "C4H10")
    assert code == 0
    assert "C4H10:isobutane" in out
    assert "C4H10:n-butane" in out
    assert ask("species")[0] == 0


def test_schema_is_json() -> None:
    code, out, _ = ask("schema")
    assert code == 0
    assert "feeds" in json.loads(out)["properties"]


def test_version() -> None:
    code, out, _ = ask("--version")
    assert code == 0
    assert out.startswith("gibbsmin ")


def test_output_into_a_closed_pipe_is_no_error(here: Path) -> None:
    program = f"{sys.executable} -c 'from gibbsmin.cli.main import main; main()' schema | head -1"
    found = subprocess.run(["bash", "-c", program], capture_output=True, text=True, check=False)
    assert found.stderr == ""
    assert found.stdout == "{\n"


def test_a_real_process_reports_a_missing_file_plainly(here: Path) -> None:
    found = call("run", "missing.toml")
    assert found.returncode == 2
    assert found.stdout == ""
    assert "missing.toml" in found.stderr
    assert "Traceback" not in found.stderr


@pytest.mark.skipif(os.name == "nt", reason="signals of POSIX")
def test_ctrl_c_stops_with_130_and_a_plain_line(here: Path) -> None:
    program = (
        "import os, signal, gibbsmin.case.read as read\n"
        "def interrupt(path): os.kill(os.getpid(), signal.SIGINT)\n"
        "read.read_case = interrupt\n"
        "from gibbsmin.cli.main import main; main()"
    )
    found = subprocess.run(
        [sys.executable, "-c", program, "run", "case.toml"], capture_output=True, text=True, check=False, timeout=60
    )
    assert found.returncode == 128 + signal.SIGINT
    assert "stopped" in found.stderr
    assert "Traceback" not in found.stderr


def test_progress_is_silent_where_no_terminal_listens(capsys: pytest.CaptureFixture[str]) -> None:
    progress = Progress("solving")
    progress(1, 10)
    progress.close()
    assert capsys.readouterr() == ("", "")


OWN = """
[[species]]
name = "C3H8O2:propylene-glycol"
enthalpy_of_formation = "-429.8 kJ/mol"
standard_entropy = "352 J/mol/K"
heat_capacity = { temperatures = [300, 500, 1000], values = [103, 151, 224], unit = "J/mol/K" }
source = "made up for this test"
"""


def test_check_of_own_species(here: Path) -> None:
    Path("own.toml").write_text(OWN)
    code, out, err = ask("species", "--check", "own.toml")
    assert (code, err) == (0, "")
    assert "C3H8O2:propylene-glycol" in out
    assert "nothing to object to" in out


def test_check_of_own_species_finds_kilojoules_taken_for_joules(here: Path) -> None:
    Path("own.toml").write_text(OWN.replace('"-429.8 kJ/mol"', "-429.8"))
    code, out, err = ask("species", "--check", "own.toml")
    assert code == 2
    assert "kJ" in out + err
