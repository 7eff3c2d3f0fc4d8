"""A small good case, and the means to spoil it."""

from collections.abc import Callable
from pathlib import Path

import pytest

GOOD = """\
title = "Tube outlet of an invented reformer"

[species]
elements = "from feeds"

[feeds.gas]
mole_percent = { CH4 = 93.0, C2H6 = 4.0, N2 = 2.0, CO2 = 1.0 }
flow = "100 kmol/h"
temperature = "550 degC"

[feeds.steam]
species = "H2O"
steam_to_carbon = 3.0
temperature = "550 degC"

[held]
temperature = "870 degC"
pressure = "24 bar"

[[sweep]]
vary = "held.temperature"
from = "800 degC"
to = "900 degC"
points = 3

[show]
threshold = "1 ppm"
"""

Write = Callable[..., Path]


@pytest.fixture
def write(tmp_path: Path) -> Write:
    """Write the good case with replacements made in it, and return its path."""

    def made(*replacements: tuple[str, str]) -> Path:
        text = GOOD
        for old, new in replacements:
            assert text.count(old) >= 1, f"the good case has no {old!r}"
            text = text.replace(old, new, 1)
        path = tmp_path / "case.toml"
        path.write_text(text, encoding="utf-8")
        return path

    return made
