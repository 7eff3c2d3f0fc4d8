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
    case.write_text(before + blocks("toml")[4], encoding="utf-8")
    found = CliRunner().invoke(app, ["run", str(case), "--out", str(tmp_path / "out")], catch_exceptions=False)
    assert found.exit_code == 0, found.stderr
    assert found.stdout.splitlines()[2].startswith("settles at ")


def test_the_flue_gas_and_the_stage_shown_are_read(tmp_path: Path) -> None:
    case = tmp_path / "shown.toml"
    case.write_text("\n".join((blocks("toml")[0], blocks("toml")[2])), encoding="utf-8")
    found = CliRunner().invoke(app, ["check", str(case)], catch_exceptions=False)
    assert found.exit_code == 0, found.stderr
    feed = '[feeds.make_up]\nmole_percent = { CO = 28.0, CO2 = 4.0, H2 = 68.0 }\nflow = "1 kmol/h"\n'
    feed += 'temperature = "40 degC"\npressure = "80 bar"\n'
    rest = '[[stage]]\nname = "separator"\ninlets = ["converter"]\nfrozen = true\nheld = { temperature = "40 degC" }\n'
    rest += 'take = { methanol = { of = ["CH3OH"], percent = 99.0 }, purge = { percent = 5.0 } }\n'
    case.write_text('title = "shown"\n' + feed + blocks("toml")[3] + rest, encoding="utf-8")
    found = CliRunner().invoke(app, ["run", str(case), "--out", str(tmp_path / "out")], catch_exceptions=False)
    assert found.exit_code == 0, found.stderr


def test_every_case_named_is_shipped() -> None:
    named = set(re.findall(r"`(\w+)`", TEXT.split("`cases/` has one of each:")[1].split(".")[0]))
    listed = set(re.findall(r"`(\w+)`", TEXT.split("## Cases")[1].split("## Commands")[0]))
    shipped = {path.stem for path in (ROOT / "cases").glob("*.toml")}
    assert named <= shipped
    assert listed == shipped


def test_the_answer_shown_is_the_answer(tmp_path: Path) -> None:
    out = tmp_path / "out"
    case = ROOT / "cases" / "steam_reformer.toml"
    found = CliRunner().invoke(app, ["run", str(case), "--out", str(out)], catch_exceptions=False)
    shown = [line for line in blocks("text")[0].splitlines() if not line.startswith("certificate")]
    said = [line for line in found.stdout.splitlines() if not line.startswith("certificate")]
    assert said[: len(shown)] == shown  # the last digits of the proof differ between machines


def test_the_python_shown_runs() -> None:
    names: dict[str, object] = {}
    exec(compile(blocks("python")[0], "README.md", "exec"), names)
    state = names["state"]
    assert state.certificate.ok  # type: ignore[attr-defined]
    assert 1900.0 < names["flame"].temperature < 2200.0  # type: ignore[attr-defined]


@pytest.mark.parametrize("command", ["run", "check", "species", "reaction", "begin", "schema"])
def test_every_command_is_named(command: str) -> None:
    assert f"`gibbsmin {command}" in TEXT
