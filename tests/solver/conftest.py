"""Questions to the solver as plain Python."""

import json
import os
import subprocess
import sys
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

HERE = Path(__file__).parent


@pytest.fixture(scope="session")
def in_plain_python() -> Callable[[dict[str, Any]], Any]:
    """Ask ``plain_python.py``."""

    def ask(question: dict[str, Any]) -> Any:
        paths = os.pathsep.join([str(HERE.parent.parent), os.environ.get("PYTHONPATH", "")])
        done = subprocess.run(
            [sys.executable, str(HERE / "plain_python.py")],
            input=json.dumps(question),
            env={**os.environ, "NUMBA_DISABLE_JIT": "1", "PYTHONPATH": paths},
            capture_output=True,
            text=True,
            timeout=300,
            check=False,
        )
        assert done.returncode == 0, done.stderr
        return json.loads(done.stdout)

    return ask
