"""The shipped cases, each run once: what result.json holds, and what is printed."""

from __future__ import annotations

import json
from collections.abc import Callable
from functools import cache
from pathlib import Path
from typing import Any, NamedTuple

import pytest
from typer.testing import CliRunner

from gibbsmin.cli.main import app

CASES = Path(__file__).parents[2] / "cases"


class Run(NamedTuple):
    """A case that was run: ``data`` of result.json, and the ``screen``."""

    data: dict[str, Any]
    screen: str

    def state(self, index: int = 0) -> dict[str, Any]:
        """Return one state of result.json."""
        found: dict[str, Any] = self.data["states"][index]
        return found

    def figure(self, group: str, name: str, index: int = 0) -> float:
        """Return a key figure of one state."""
        return float(self.state(index)["key_figures"][group][name])


@pytest.fixture(scope="session")
def shipped(tmp_path_factory: pytest.TempPathFactory) -> Callable[[str], Run]:
    """Run a shipped case by its name, once a session."""
    folder = tmp_path_factory.mktemp("shipped")

    @cache
    def run(name: str) -> Run:
        answer = CliRunner().invoke(
            app, ["run", str(CASES / f"{name}.toml"), "--out", str(folder / name)], catch_exceptions=False
        )
        assert answer.exit_code == 0, answer.stderr
        return Run(json.loads((folder / name / "result.json").read_text(encoding="utf-8")), answer.stdout)

    return run
