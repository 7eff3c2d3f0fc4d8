"""``gibbsmin reaction``: its table fits 80 columns with a unit in every head, its JSON is SI and says so."""

from __future__ import annotations

import json

import pytest
from typer.testing import CliRunner

from gibbsmin.cli.main import app
from gibbsmin.practice.reactions.reactions import reaction
from gibbsmin.report.reaction_table import default_temperatures, reaction_table

UNITS = {"K", "degC", "kJ/mol", "J/mol/K", "-"}
LONG = (
    "2 C8H18(l):n-octane + 25 O2 + CaCO3(s):calcite + 2 Al(s) + Fe2O3(s) + SiO2(s) + 3 C(s):graphite = "
    "16 CO2 + 18 H2O(l) + CaO(s) + CO2 + Al2O3(s):alpha + 2 Fe(s) + SiC(s):beta + 2 CO"
)


def ask(*words: str) -> tuple[int, str, str]:
    """Run the command in this process; exit code, standard output, standard error."""
    found = CliRunner().invoke(app, ["reaction", *words], catch_exceptions=False)
    return found.exit_code, found.stdout, found.stderr


def rows_after(out: str, head: str) -> list[list[str]]:
    """Cells of the table whose head starts so, below its line of units."""
    lines = out.splitlines()
    start = next(k for k, line in enumerate(lines) if line.split()[: len(head.split())] == head.split())
    rows = []
    for line in lines[start + 2 :]:
        if not line.strip():
            break
        rows.append(line.split())
    return rows


def test_the_table_of_the_combustion_of_hydrogen() -> None:
    code, out, err = ask("2 H2 + O2 = 2 H2O(l)", "--at", "25 degC")
    assert (code, err) == (0, "")
    assert out.splitlines()[0] == "2 H2 + O2 = 2 H2O(l)"
    (row,) = rows_after(out, "T dH +-")
    # CODATA Key Values (1989): -285.83 kJ/mol; S 69.95, 130.680, 205.152 J/mol/K; surroundings 571660/298.15
    assert float(row[0]) == 298.15
    assert float(row[1]) == pytest.approx(-571.66, abs=0.1)
    assert float(row[3]) == pytest.approx(2 * 69.95 - 2 * 130.680 - 205.152, abs=0.1)
    assert float(row[5]) == pytest.approx(-474.26, abs=0.1)
    (row,) = rows_after(out, "T ln K")
    assert float(row[0]) == 25.0
    assert float(row[3]) == pytest.approx(571660.0 / 298.15, abs=0.5)
    assert float(row[4]) == pytest.approx(float(row[2]) + float(row[3]), abs=0.02)
    assert row[5] == "forward"
    assert "1 bar (the standard" in out


@pytest.mark.parametrize(
    "words",
    [
        ("2 H2 + O2 = 2 H2O(l)",),
        ("CaCO3(s):calcite = CaO(s) + CO2", "--terms"),
        ("H2O(s) = H2O(l)", "--terms"),
        ("Na+ + e- = Na(g)",),
        (LONG, "--terms", "--at", "300"),
        ("1/2 N2 + 1/2 O2 = NO", "--from", "300", "--to", "5727 degC", "--points", "7"),
        ("100000 CH4 + 200000 O2 = 100000 CO2 + 200000 H2O(g)", "--terms"),
    ],
)
def test_no_line_is_longer_than_80_columns(words: tuple[str, ...]) -> None:
    code, out, _ = ask(*words)
    assert code == 0
    assert max(map(len, out.splitlines())) <= 80
    assert out.isascii()
    assert "nan" not in out


def test_every_column_has_its_unit() -> None:
    _, out, _ = ask("CO + H2O = CO2 + H2", "--terms")
    lines = out.splitlines()
    heads = [k for k, line in enumerate(lines) if line.split()[:2] in (["T", "dH"], ["T", "ln"], ["species", "nu"])]
    assert len(heads) == 2 + 5
    for k in heads:
        assert set(lines[k + 1].split()) <= UNITS
    assert len(lines[heads[0] + 1].split()) == 9


def test_terms_add_up_to_the_sums() -> None:
    _, out, _ = ask("CO + H2O = CO2 + H2", "--at", "870 degC", "--terms")
    rows = rows_after(out, "species nu H")
    sums = [float(cell) for cell in rows[-1][-3:]]
    for column, total in zip((3, 5, 6), sums, strict=True):
        assert sum(float(row[column]) for row in rows[:-1]) == pytest.approx(total, abs=0.03)
    for row in rows[:-1]:
        assert float(row[1]) * float(row[2]) == pytest.approx(float(row[3]), abs=0.02)


def test_direction_and_crossover_in_words() -> None:
    _, out, _ = ask("C(s) + CO2 = 2 CO")
    words = " ".join(out.split())
    assert "backward below 973.1 K, forward above 973.1 K" in words
    assert "973.1 K (700.0 degC) +- 1.4 K" in words
    assert "K = p[CO]^2 / p[CO2], p in bar" in words
    assert "Local codes and licensed practice decide." in words


def test_uncertain_direction_has_a_question_mark() -> None:
    _, out, _ = ask("CO + H2O = CO2 + H2", "--at", "1095 K", "--at", "1500 K")
    ways = [row[-1] for row in rows_after(out, "T ln K")]
    assert ways == ["forward?", "backward"]
    assert "could be turned" in " ".join(out.split())


def test_use_outside_the_data_is_a_caution() -> None:
    _, out, _ = ask("CaCO3(s) = CaO(s) + CO2", "--at", "1300 K")
    words = " ".join(out.split())
    assert "caution Outside the data of CaCO3(s):calcite (298.15 to 1200 K) at 1300 K" in words


def test_usual_temperatures_stay_within_the_data() -> None:
    assert default_temperatures(reaction("CO + 1/2 O2 = CO2")) == [298.15, 500.0, 1000.0, 1500.0, 2000.0]
    assert default_temperatures(reaction("H2 + 1/2 O2 = H2O(l)")) == [298.15, 500.0]
    assert default_temperatures(reaction("H2O(s) = H2O(g)")) == [200.0, 273.15]
    assert default_temperatures(reaction("H2O(s) = H2O(l)")) == pytest.approx([273.15], abs=0.1)


def test_json_is_in_J_and_says_so() -> None:
    code, out, _ = ask("CO + H2O = CO2 + H2", "--from", "500", "--to", "1500 K", "--points", "3", "--json", "--terms")
    assert code == 0
    data = json.loads(out)
    r = reaction("CO + H2O(g) = CO2 + H2")
    assert data["equation"] == r.equation
    assert data["coefficients"] == r.coefficients
    assert data["standard_pressure_Pa"] == 1e5
    assert data["crossovers_K"] == pytest.approx(list(r.crossovers))
    assert [row["temperature_K"] for row in data["rows"]] == [500.0, 1000.0, 1500.0]
    for row in data["rows"]:
        T = row["temperature_K"]
        assert row["enthalpy_J_per_mol"] == r.enthalpy(T)
        assert row["gibbs_energy_J_per_mol"] == pytest.approx(
            row["enthalpy_J_per_mol"] - T * row["entropy_J_per_mol_K"]
        )
        assert sum(part["coefficient"] * part["enthalpy_J_per_mol"] for part in row["terms"]) == pytest.approx(
            row["enthalpy_J_per_mol"]
        )


def test_an_equation_needs_no_quotes() -> None:
    assert ask("CO", "+", "H2O", "=", "CO2", "+", "H2")[1] == ask("CO + H2O = CO2 + H2")[1]


@pytest.mark.parametrize(
    ("words", "told"),
    [
        (("H2 + O2 = H2O(l)",), "2 H2 + O2 = 2 H2O(l)"),
        (("C + O2 = CO2",), "C(s):graphite"),
        (("CO + H2O",), "no sign"),
        (("CO = CO2 + Unobtainium",), "Unobtainium"),
        (("2 CO = C(s) + CO2", "--at", "5 bar"), "--at"),
        (("2 CO = C(s) + CO2", "--at", "hot"), "--at"),
        (("2 CO = C(s) + CO2", "--at", "-300 degC"), "0 K"),
        (("2 CO = C(s) + CO2", "--at", "nan"), "finite"),
        (("2 CO = C(s) + CO2", "--at", "500", "--from", "300"), "not both"),
        (("2 CO = C(s) + CO2", "--from", "300"), "--to is missing"),
        (("2 CO = C(s) + CO2", "--to", "300"), "--from is missing"),
        (("2 CO = C(s) + CO2", "--points", "5"), "--from and --to"),
        (("2 CO = C(s) + CO2", "--from", "600", "--to", "500"), "not below"),
        (("2 CO = C(s) + CO2", "--from", "300", "--to", "500", "--points", "1"), "2 to 1000"),
    ],
)
def test_what_is_wrong_is_one_plain_line_and_exit_code_2(words: tuple[str, ...], told: str) -> None:
    code, out, err = ask(*words)
    assert code == 2
    assert out == ""
    assert told in err
    assert err.startswith("gibbsmin: ")
    assert len(err.splitlines()) == 1


def test_a_reaction_without_common_data_is_still_shown() -> None:
    r = reaction("H2O(s) + SiO2(l) = H2O(g) + SiO2(s)")
    lines = reaction_table(r, default_temperatures(r))
    assert max(map(len, lines)) <= 80
    assert any("no temperature in common" in line or "Outside the data" in line for line in lines)
