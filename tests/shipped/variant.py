"""A shipped case with a few of its lines changed, run once more."""

from __future__ import annotations

import json
from pathlib import Path

from shipped.conftest import CASES, Run
from typer.testing import CliRunner

from gibbsmin.cli.main import app


def variant(name: str, folder: Path, *changes: tuple[str, str]) -> Run:
    """Run a case with texts replaced, each of which must be there."""
    text = (CASES / f"{name}.toml").read_text(encoding="utf-8")
    for old, new in changes:
        assert old in text, old
        text = text.replace(old, new)
    case, out = folder / f"{name}.toml", folder / "out"
    case.write_text(text, encoding="utf-8")
    answer = CliRunner().invoke(app, ["run", str(case), "--out", str(out)], catch_exceptions=False)
    assert answer.exit_code == 0, answer.stderr
    return Run(json.loads((out / "result.json").read_text(encoding="utf-8")), answer.stdout)


def without_sweep(name: str) -> tuple[str, str]:
    """Change that takes the [[sweep]] of a case away, up to the next empty line or the end."""
    text = (CASES / f"{name}.toml").read_text(encoding="utf-8")
    sweep = text[text.index("[[sweep]]") :].split("\n\n")[0]
    return sweep, ""
