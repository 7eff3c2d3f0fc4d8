from pathlib import Path

import pytest

from gibbsmin.constants import R
from gibbsmin.errors import CaseError
from gibbsmin.thermo.checkup import check
from gibbsmin.thermo.database import load
from gibbsmin.thermo.own import read_species
from gibbsmin.thermo.record import Species

GLYCOL = """
[[species]]
name = "C3H8O2:propylene-glycol"
enthalpy_of_formation = "-429.8 kJ/mol"
standard_entropy = "352 J/mol/K"
heat_capacity = { temperatures = [300, 500, 1000], values = [103, 151, 224], unit = "J/mol/K" }
source = "an invented table"
uncertainty = "4 kJ/mol"
aliases = ["glycol"]
"""

SALT = """
[[species]]
name = "NaCl(s):mine"
enthalpy_of_formation = -411000
standard_entropy = 72.1
heat_capacity = "50.5 J/mol/K"
range = ["298.15 K", "1000 K"]
source = "a handbook"
"""


@pytest.fixture
def read(tmp_path: Path):
    def reader(text: str, strict: bool = True) -> list[Species]:
        path = tmp_path / "own.toml"
        path.write_text(text, "utf-8")
        return read_species(path, strict)

    return reader


def test_a_table_of_heat_capacity(read) -> None:
    (species,) = read(GLYCOL)
    assert species.standard_enthalpy == pytest.approx(-429800.0, abs=1e-6)
    assert species.standard_entropy == pytest.approx(352.0, abs=1e-9)
    assert species.heat_capacity([300.0, 400.0, 500.0, 750.0, 1000.0]) == pytest.approx([103, 127, 151, 187.5, 224])
    # Trapezoids are exact between the points.
    assert species.enthalpy(1000.0) - species.enthalpy(300.0) == pytest.approx(127.0 * 200.0 + 187.5 * 500.0)
    assert species.aliases == ("glycol",)
    assert species.elements == {"C": 3.0, "H": 8.0, "O": 2.0}
    assert (species.enthalpy_uncertainty, species.uncertainty_assumed) == (4000.0, False)
    assert species.usable == (150.0, 20000.0)
    assert check([species]) == []


def test_a_constant_heat_capacity(read) -> None:
    (species,) = read(SALT)
    assert species.phase == "solid"
    assert species.standard_enthalpy == pytest.approx(-411000.0)
    assert species.enthalpy(500.0) == pytest.approx(-411000.0 + 50.5 * 201.85)
    assert species.usable == (150.0, 1200.0)
    assert species.uncertainty_assumed


def test_it_stands_for_the_shipped_species(read) -> None:
    (own,) = read(SALT)
    shipped = load().get("NaCl(s)")
    assert own.gibbs_energy(600.0) == pytest.approx(shipped.gibbs_energy(600.0), abs=600.0)


def test_a_polynomial_of_seven_is_the_shipped_one(read) -> None:
    water = load().get("H2O")
    parts = ", ".join(
        f"{{ range = [{piece.low}, {piece.high}], coefficients = {list(piece.coefficients[2:])} }}"
        for piece in water.pieces
    )
    (own,) = read(
        f'[[species]]\nname = "H2O"\nsource = "copied"\ngas_constant = "8.31451 J/mol/K"\npolynomial = [{parts}]\n'
        'enthalpy_of_formation = "-241.8 kJ/mol"\n'
    )
    for T in (200.0, 298.15, 1000.0, 3000.0):
        assert own.gibbs_energy(T) == pytest.approx(water.gibbs_energy(T), abs=1e-9)


def test_a_polynomial_of_nine(read) -> None:
    (own,) = read(
        '[[species]]\nname = "CO:x"\nsource = "s"\n'
        "polynomial = [{ range = [200, 1000], coefficients = [1e2, 1.0, 3.5, 0, 0, 0, 0, -1.43e4, 3.8] }]\n"
    )
    assert own.heat_capacity(500.0) == pytest.approx(R * (1e2 / 500.0**2 + 1.0 / 500.0 + 3.5))


def test_a_record_at_one_atmosphere(read) -> None:
    text = GLYCOL + 'reference_pressure = "1 atm"\n'
    (species,) = read(text)
    # S at 1 bar is higher by R ln(101325/100000) = 0.1094 J/mol/K.
    assert species.standard_entropy == pytest.approx(352.0 + 0.10944, abs=1e-4)


def test_a_range_of_its_own(read) -> None:
    (species,) = read(SALT + 'usable = ["300 K", "900 K"]\n')
    assert species.usable == (300.0, 900.0)


@pytest.mark.parametrize(
    ("old", "new", "message"),
    [
        ("-429.8 kJ/mol", "-429.8 J/mol", r"'-429.8 J/mol' is -429.8 J/mol, hardly anything; if kJ/mol were meant"),
        ('"-429.8 kJ/mol"', "-429.8", r"enthalpy_of_formation: -429.8 is -429.8 J/mol"),
        (
            "-429.8 kJ/mol",
            "-429800 kJ/mol",
            r"enthalpy_of_formation: the enthalpy of formation is -3.\d+e\+07 J per mole",
        ),
        ("352 J/mol/K", "352 kJ/mol/K", r"standard_entropy: the entropy at 298.15 K is 2.7"),
        ("352 J/mol/K", "0.352 J/mol/K", r"standard_entropy: .*is it in kJ/mol/K"),
        ("-429.8 kJ/mol", "-429.8 kJ", r"enthalpy_of_formation: .*expected an energy per mole"),
        ('name = "C3H8O2:propylene-glycol"\n', "", r"species 1, name: is missing"),
        ("C3H8O2", "C3Xy8O2", r"name: .*no element 'Xy'"),
        ("C3H8O2:propylene-glycol", "", r"name: expected a text"),
        ('source = "an invented table"\n', "", r"source: is missing"),
        ('"an invented table"', '" "', r"source: expected a text, got ' '"),
        (
            "standard_entropy",
            "standart_entropy",
            r"standart_entropy: there is no such key; did you mean 'standard_entropy'",
        ),
        ("[300, 500, 1000]", "[300, 1000, 500]", r"heat_capacity.temperatures: expected rising"),
        ("[300, 500, 1000]", "[300, 500]", r"heat_capacity: expected temperatures and values"),
        ("[103, 151, 224]", "[103, 151, -224]", r"heat_capacity: Cp° is -224 J/mol/K at 1000 K"),
        ("[103, 151, 224]", "[1, 1, 1]", r"heat_capacity: Cp°/R is 0.12"),
        ("temperatures = ", "temperature = ", r"heat_capacity: has no key 'temperature'"),
        ('["glycol"]', '"glycol"', r"aliases: expected a list of texts"),
        ('"4 kJ/mol"', '"-4 kJ/mol"', r"uncertainty: must not be negative"),
        ("heat_capacity = {", "uncertain = {", r"uncertain: there is no such key"),
    ],
)
def test_what_is_wrong_is_said(read, old: str, new: str, message: str) -> None:
    assert old in GLYCOL
    with pytest.raises(CaseError, match=message) as caught:
        read(GLYCOL.replace(old, new))
    assert "own.toml: species" in str(caught.value)


@pytest.mark.parametrize(
    ("old", "new", "message"),
    [
        ('range = ["298.15 K", "1000 K"]\n', "", r"range: is missing"),
        ('["298.15 K", "1000 K"]', '["1000 K", "298.15 K"]', r"range: expected two rising temperatures"),
        ('["298.15 K", "1000 K"]', '"1000 K"', r"range: expected two temperatures"),
        ("heat_capacity", "note", r"heat_capacity: is missing"),
        ("enthalpy_of_formation = -411000\n", "", r"enthalpy_of_formation: is missing; a bare number is in J/mol"),
    ],
)
def test_what_is_wrong_with_a_constant(read, old: str, new: str, message: str) -> None:
    with pytest.raises(CaseError, match=message):
        read(SALT.replace(old, new))


@pytest.mark.parametrize(
    ("polynomial", "message"),
    [
        ("3", "expected a list"),
        ("[3]", r"expected \{ range"),
        ("[{ range = [200, 1000], coefficients = [1, 2] }]", "expected 7 or 9 numbers"),
        (
            "[{ range = [200, 900], coefficients = [3.5, 0, 0, 0, 0, 0, 4] },"
            " { range = [1000, 2000], coefficients = [3.5, 0, 0, 0, 0, 0, 4] }]",
            "one range ends at 900 K, the next starts at 1000 K",
        ),
    ],
)
def test_a_wrong_polynomial(read, polynomial: str, message: str) -> None:
    with pytest.raises(CaseError, match=message):
        read(f'[[species]]\nname = "CO"\nsource = "s"\npolynomial = {polynomial}\n')


@pytest.mark.parametrize(
    ("line", "message"),
    [
        ('enthalpy_of_formation = "-50 kJ/mol"', "but at 298.15 K the polynomial gives -110"),
        ('heat_capacity = "29 J/mol/K"', "does not go with polynomial"),
    ],
)
def test_a_polynomial_and_what_contradicts_it(read, line: str, message: str) -> None:
    with pytest.raises(CaseError, match=message):
        read(
            '[[species]]\nname = "CO"\nsource = "s"\n'
            f"polynomial = [{{ range = [200, 1000], coefficients = [3.5, 0, 0, 0, 0, -14300, 3.8] }}]\n{line}\n"
        )


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("", r"no \[\[species\]\]"),
        ("species = 3", r"no \[\[species\]\]"),
        ("species = [3]", "species 1: expected a table"),
        ("[[species]", "not a TOML file"),
        ("title = 'x'\n" + GLYCOL, "title: does not belong"),
        (GLYCOL + GLYCOL, "stands twice"),
    ],
)
def test_a_wrong_file(read, text: str, message: str) -> None:
    with pytest.raises(CaseError, match=message):
        read(text)


def test_a_missing_file(tmp_path: Path) -> None:
    with pytest.raises(CaseError, match="cannot be read"):
        read_species(tmp_path / "none.toml")


def test_the_implausible_can_be_kept(read) -> None:
    text = GLYCOL.replace("-429.8 kJ/mol", "-429.8 J/mol")
    assert read(text + "plausible = true\n")[0].standard_enthalpy == pytest.approx(-429.8)
    assert read(text, strict=False)[0].standard_enthalpy == pytest.approx(-429.8)


def test_the_checkup_reads_what_is_refused(read) -> None:
    species = read(GLYCOL.replace("352 J/mol/K", "352 kJ/mol/K"), strict=False)
    assert {finding.test for finding in check(species)} == {"units"}
