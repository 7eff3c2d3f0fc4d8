"""What tables show: order of species, chosen columns."""

from pathlib import Path

import pytest
from typer.testing import CliRunner

from gibbsmin.cli.main import app

CASE = """
title = "show"
key_figures = ["reforming"]
[species]
condensed = false
[feeds.gas]
amounts = {{ CH4 = "10 kmol/h", H2O = "30 kmol/h" }}
temperature = "500 degC"
[held]
temperature = "800 degC"
pressure = "20 bar"
[show]
{show}
{sweep}
"""
SWEEP = '[[sweep]]\nvary = "held.temperature"\nvalues = ["800 degC", "900 degC"]\n'


def screen(tmp_path: Path, show: str, sweep: str = "") -> tuple[int, str]:
    """Run the case; exit code and what was printed."""
    path = tmp_path / "case.toml"
    path.write_text(CASE.format(show=show, sweep=sweep), encoding="utf-8")
    answer = CliRunner().invoke(app, ["run", str(path), "--out", str(tmp_path / "out")])
    return answer.exit_code, answer.stdout + answer.stderr


def species(text: str) -> list[str]:
    """Names in the table of the gas, in their order."""
    lines = iter(text.splitlines())
    while not next(lines).startswith("gas "):
        pass
    found = []
    for line in lines:
        if "more below" in line or "total" in line:
            return found
        found.append(line.split()[0])
    return found


def test_species_by_amount_or_by_name(tmp_path: Path) -> None:
    _, by_amount = screen(tmp_path, 'sort = "amount"')
    _, by_name = screen(tmp_path, 'sort = "name"')
    assert species(by_amount)[:3] == ["H2", "H2O", "CO"]
    assert species(by_name) == sorted(species(by_name))
    assert set(species(by_name)) == set(species(by_amount))


def test_amounts_are_shown_in_the_unit_they_were_typed_in(tmp_path: Path) -> None:
    assert "kmol/h" in screen(tmp_path, "")[1]


def test_a_key_figure_as_a_column_of_a_sweep(tmp_path: Path) -> None:
    code, text = screen(tmp_path, 'columns = ["reforming.h2_to_co"]', SWEEP)
    assert code == 0
    assert "H2/CO" in text.split("certificate")[0]


@pytest.mark.parametrize("name", ["reforming.h2_to_c0", "shift.co_dry"])
def test_a_column_that_there_is_not(tmp_path: Path, name: str) -> None:
    code, text = screen(tmp_path, f'columns = ["{name}"]', SWEEP)
    assert code == 2
    assert f"there is no key figure '{name}'" in text
