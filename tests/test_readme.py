"""What the README shows is what happens."""

from __future__ import annotations

import re
import tomllib
from pathlib import Path

import pytest
from typer.testing import CliRunner

from gibbsmin.cli.main import app

ROOT = Path(__file__).parents[1]
TEXT = (ROOT / "README.md").read_text(encoding="utf-8")


def blocks(language: str) -> list[str]:
    return re.findall(rf"```{language}\n(.*?)```", TEXT, re.DOTALL)


def test_the_case_shown_is_the_case_shipped() -> None:
    shipped = tomllib.loads((ROOT / "cases" / "steam_reformer.toml").read_text(encoding="utf-8"))
    assert tomllib.loads(blocks("toml")[0]) == shipped


def test_the_sweep_shown_works(tmp_path: Path) -> None:
    case = tmp_path / "swept.toml"
    case.write_text("\n".join(blocks("toml")[:2]), encoding="utf-8")
    found = CliRunner().invoke(app, ["check", str(case)], catch_exceptions=False)
    assert found.exit_code == 0, found.stderr
    assert "11 states" in found.stdout


def test_the_held_heat_shown_works(tmp_path: Path) -> None:
    case = tmp_path / "heated.toml"
    before = blocks("toml")[0].split("[held]")[0]
    case.write_text(before + blocks("toml")[2], encoding="utf-8")
    found = CliRunner().invoke(app, ["run", str(case), "--out", str(tmp_path / "out")], catch_exceptions=False)
    assert found.exit_code == 0, found.stderr
    assert found.stdout.splitlines()[2].startswith("settles at ")


def test_every_case_named_is_shipped() -> None:
    named = set(re.findall(r"`(\w+)`", TEXT.split("`cases/` has one of each:")[1].split(".")[0]))
    assert named == {"combustor_preheat", "vessel_explosion", "autothermal_reformer", "quench", "expansion"}
    assert named <= {path.stem for path in (ROOT / "cases").glob("*.toml")}


def test_the_answer_shown_is_the_answer(tmp_path: Path) -> None:
    out = tmp_path / "out"
    case = ROOT / "cases" / "steam_reformer.toml"
    found = CliRunner().invoke(app, ["run", str(case), "--out", str(out)], catch_exceptions=False)
    shown = blocks("text")[0].splitlines()
    # the last digits of the proof differ between machines, the folder between runs
    varying = ("certificate", "written")
    assert [line for line in found.stdout.splitlines() if not line.startswith(varying)] == [
        line for line in shown if not line.startswith(varying)
    ]


def test_the_python_shown_runs() -> None:
    names: dict[str, object] = {}
    exec(compile(blocks("python")[0], "README.md", "exec"), names)
    state = names["state"]
    assert state.certificate.ok  # type: ignore[attr-defined]
    assert 1900.0 < names["flame"].temperature < 2200.0  # type: ignore[attr-defined]


@pytest.mark.parametrize("command", ["run", "check", "species", "reaction", "begin", "schema"])
def test_every_command_is_named(command: str) -> None:
    assert f"`gibbsmin {command}" in TEXT
