from dataclasses import replace

import pytest

from gibbsmin.thermo.checkup import check, translation_entropy
from gibbsmin.thermo.database import load
from gibbsmin.thermo.record import Piece, Species


def shifted(species: Species, H: float = 0.0, S: float = 0.0, from_T: float = 0.0) -> Species:
    scale = species.gas_constant
    pieces = tuple(
        piece._replace(coefficients=(*a[:7], a[7] + H / scale, a[8] + S / scale)) if piece.low >= from_T else piece
        for piece in species.pieces
        for a in [piece.coefficients]
    )
    return replace(species, pieces=pieces)


def found_in(species: Species) -> set[str]:
    assert check([load().get(species.name)]) == []
    return {finding.test for finding in check([species])}


def test_a_wrong_charge() -> None:
    assert found_in(replace(load().get("Zn+"), charge=0)) >= {"composition"}


def test_a_wrong_composition() -> None:
    assert found_in(replace(load().get("CO2"), elements={"C": 1.0, "O": 1.0})) >= {"composition"}


def test_a_name_that_is_no_formula() -> None:
    assert {f.test for f in check([replace(load().get("CO2"), name="carbon")])} == {"composition"}


def test_kilojoules_taken_for_joules() -> None:
    water = load().get("H2O")
    a_thousand_times = shifted(water, H=999.0 * water.standard_enthalpy)
    assert "units" in found_in(a_thousand_times)


def test_entropy_in_kilojoules() -> None:
    salt = load().get("NaCl(s)")
    finding = next(f for f in check([shifted(salt, S=-0.999 * salt.standard_entropy)]) if f.test == "units")
    assert finding.species == "NaCl(s)"
    assert "kJ/mol/K" in finding.message


def test_negative_entropy() -> None:
    assert "third_law" in found_in(shifted(load().get("NaCl(s)"), S=-100.0))


def test_negative_heat_capacity() -> None:
    bad = Piece(200.0, 1000.0, (0.0, 0.0, 3.0, -4.0e-3, 0.0, 0.0, 0.0, -5.0e4, 5.0))
    assert "heat_capacity" in found_in(replace(load().get("NaCl(s)"), pieces=(bad,)))


def test_a_gas_with_too_little_heat_capacity() -> None:
    bad = Piece(200.0, 1000.0, (0.0, 0.0, 2.0, 0.0, 0.0, 0.0, 0.0, 0.0, 20.0))
    assert "gas_heat_capacity" in found_in(replace(load().get("CO2"), pieces=(bad,)))


def test_a_solid_with_too_much() -> None:
    bad = Piece(200.0, 1000.0, (0.0, 0.0, 20.0, 0.0, 0.0, 0.0, 0.0, -5.5e4, -105.0))
    assert "condensed_heat_capacity" in found_in(replace(load().get("NaCl(s)"), pieces=(bad,)))


def test_a_gap() -> None:
    water = load().get("H2O")
    first, second = water.pieces
    assert found_in(replace(water, pieces=(first._replace(high=900.0), second))) >= {"gap"}


def test_a_piece_of_no_width() -> None:
    water = load().get("H2O")
    assert "gap" in found_in(replace(water, pieces=(*water.pieces, water.pieces[-1]._replace(low=6000.0))))


def test_a_step_inside() -> None:
    assert found_in(shifted(load().get("H2O"), H=300.0, from_T=1000.0)) == {"breaks"}


def test_a_step_at_a_join() -> None:
    assert found_in(shifted(load().get("SiO2(s)"), H=20.0, from_T=847.0)) == {"joins"}


def test_a_transition_that_gives_heat_back() -> None:
    quartz = load().get("SiO2(s)")
    # H falls by 2 kJ and G stays: S falls with it.
    assert found_in(shifted(quartz, H=-2000.0, S=-2000.0 / 847.0, from_T=847.0)) == {"joins"}


def test_an_atom_with_too_many_states() -> None:
    assert found_in(shifted(load().get("Cu+"), S=61.7)) >= {"degeneracy"}


def test_a_form_below_the_reference_state() -> None:
    assert found_in(shifted(load().get("O3"), H=-5.0e5)) == {"reference_state"}


def test_a_substance_that_stands_twice() -> None:
    twice = [load().get("CH4"), replace(load().get("CH4"), name="CH4:again", form="again")]
    assert [(f.species, f.test) for f in check(twice)] == [("CH4:again", "duplicates")]


def test_no_source() -> None:
    assert found_in(replace(load().get("CH4"), source=" ")) == {"source"}


def test_a_finding_carries_its_figure() -> None:
    finding = check([shifted(load().get("H2O"), H=300.0, from_T=1000.0)])[-1]
    assert finding.figure == pytest.approx(300.0, abs=0.1)
    assert "1000 K" in finding.message


def test_translation_of_argon() -> None:
    # 154.846 J/mol/K at 298.15 K and 1 bar (CODATA key values).
    assert translation_entropy(39.948e-3) == pytest.approx(154.846, abs=0.003)
