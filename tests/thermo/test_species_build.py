"""The build of ``species.json``: it remakes the shipped file, and its parts do what they say."""

import csv
import math
from importlib.resources import files
from itertools import pairwise

import pytest

from gibbsmin.elements import parse_formula, split_name
from gibbsmin.thermo import build as script
from gibbsmin.thermo.database import load
from gibbsmin.thermo.making.additions import melted
from gibbsmin.thermo.making.assemble import doubt_as_published, read_names, read_toml
from gibbsmin.thermo.making.draft import Draft, moved
from gibbsmin.thermo.making.fit import Segment, fit
from gibbsmin.thermo.making.sources import Row, burcat, crc, janaf, janaf_enthalpy, package_file, perry, tm4513
from gibbsmin.thermo.making.steps import STEPS
from gibbsmin.thermo.making.write import build, made_from
from gibbsmin.thermo.record import Piece

DATA = files("gibbsmin.thermo").joinpath("data")


def test_the_shipped_file_is_remade_byte_by_byte() -> None:
    shipped = DATA.joinpath("species.json").read_text("utf-8")
    if load().made_from != made_from():
        pytest.fail(f"species.json was made from {dict(load().made_from)}, but {made_from()} is installed")
    assert script.difference(shipped, build()) == ""


def test_the_script_names_the_line_that_differs() -> None:
    shipped = DATA.joinpath("species.json").read_text("utf-8")
    lines = shipped.splitlines()
    lines[4] = lines[4].replace('"u_S"', '"u_T"')
    assert script.difference(shipped, "\n".join(lines) + "\n").startswith("line 5 differs")


def test_the_script_blames_other_packages_first(monkeypatch: pytest.MonkeyPatch) -> None:
    shipped = DATA.joinpath("species.json").read_text("utf-8")
    monkeypatch.setattr(script, "made_from", lambda: {"cantera": "9.9"})
    assert "made from {'cantera'" in script.difference(shipped, shipped + " ")


def test_the_script_checks_and_writes(
    tmp_path: object, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    from pathlib import Path

    path = Path(str(tmp_path)) / "species.json"
    monkeypatch.setattr(script, "PATH", path)
    monkeypatch.setattr(script, "build", lambda: '{"made_from": {}}\n')
    assert script.main([]) == 0
    assert path.read_text("utf-8") == '{"made_from": {}}\n'
    assert script.main(["--check"]) == 0
    path.write_text('{"made_from": {"x": "1"}}\n', "utf-8")
    assert script.main(["--check"]) == 1
    assert "install those versions" in capsys.readouterr().err


def test_every_record_of_the_report_has_a_name() -> None:
    named = {(row["file"], row["record"]) for row in read_names()}
    assert named == {(file, record) for file in ("gas", "condensed") for record in tm4513(file)}
    assert len(named) == 1130


def test_names_can_be_read() -> None:
    for row in read_names():
        name = split_name(row["name"])
        parse_formula(name.formula)
        assert not row["species"] or row["name"].startswith(row["species"])


def test_every_repair_has_its_reason_and_source() -> None:
    repairs = read_toml("repairs.toml")
    assert set(repairs) == {*STEPS, "class"}
    left_out = {entry["name"] for entry in repairs["leave_out"]}
    for kind in STEPS:
        for entry in repairs[kind]:
            assert entry["name"] in left_out or entry["name"] in load()
            if kind not in ("uncertainty", "off"):
                assert len(entry["reason"]) > 5
            if kind != "off":
                assert entry["source"]


def test_tables_of_the_project_are_well_formed() -> None:
    widths = {len(row) for row in csv.reader(DATA.joinpath("names.csv").read_text("utf-8").splitlines())}
    assert len(widths) == 1
    assert all(entry["class"] in read_toml("repairs.toml")["class"] for entry in read_toml("additions.toml")["species"])


def test_untouched_records_keep_their_coefficients() -> None:
    for name, record in {"H2O": "H2O", "CO2": "CO2", "Al2O3(s):alpha": "AL2O3(a)"}.items():
        pieces, _, _ = tm4513("condensed" if "(s)" in name else "gas")[record]
        assert [tuple(piece[:3]) for piece in load().get(name).pieces] == [tuple(piece[:3]) for piece in pieces]


def test_the_standard_pressure_is_one_bar_whatever_the_package_says() -> None:
    import cantera

    # Cantera loads the files of the report with 1 atm; the figures are for 1 bar.
    hydrogen = next(s for s in cantera.Species.list_from_file("nasa_gas.yaml") if s.name == "H2")
    assert hydrogen.thermo.reference_pressure == pytest.approx(101325.0)
    S = hydrogen.thermo.s(298.15) / 1e3 / 8.314462618 * 8.31451
    assert load().get("H2").standard_entropy == pytest.approx(S, rel=1e-9)
    assert load().get("H2").reference_pressure == 1e5


@pytest.mark.parametrize("name", ["CH4", "N2", "C6H6:benzene", "MgO(s)", "SiO2(l)", "NaCl"])
def test_functions_agree_with_cantera(name: str) -> None:
    import cantera

    row = next(row for row in read_names() if row["name"] == name)
    found = next(s for s in cantera.Species.list_from_file(f"nasa_{row['file']}.yaml") if s.name == row["record"])
    species, ratio = load().get(name), 8.31451 / 8.31446261815324
    for T in (1100.0, 1500.0, 2000.0):
        # Cantera's polynomials are per kmol, with today's R.
        assert species.heat_capacity(T) == pytest.approx(found.thermo.cp(T) / 1e3 * ratio, rel=1e-9)
        if name != "SiO2(l)":  # moved to melt at the published temperature
            assert species.enthalpy(T) == pytest.approx(found.thermo.h(T) / 1e3 * ratio, rel=1e-8)
        assert species.entropy(T) == pytest.approx(found.thermo.s(T) / 1e3 * ratio, rel=1e-9)


def rows(Cp: object, low: float, high: float, step: float, H: float, S: float) -> list[Row]:
    """Make a table from Cp(T) by fine trapezoids."""
    assert callable(Cp)
    result, T = [], low
    while high + 1e-9 >= T:
        result.append(Row(T, Cp(T), S, H))
        n = 400
        grid = [T + step * i / n for i in range(n + 1)]
        H += sum((Cp(a) + Cp(b)) / 2.0 * (b - a) for a, b in pairwise(grid))
        S += sum((Cp(a) / a + Cp(b) / b) / 2.0 * (b - a) for a, b in pairwise(grid))
        T += step
    return result


def test_fit_finds_a_polynomial_again() -> None:
    table = rows(lambda T: 30.0 + 0.01 * T - 4.0e5 / T**2, 300.0, 1000.0, 100.0, -1.0e5, 50.0)
    (piece,), deviation = fit([Segment(300.0, 1000.0, table)], (300.0, -1.0e5, 50.0))
    assert deviation < 1e-3
    assert 8.31451 * piece.coefficients[2] == pytest.approx(30.0, rel=1e-3)
    assert 8.31451 * piece.coefficients[3] == pytest.approx(0.01, rel=1e-3)
    draft = Draft("", [piece], "", "")
    assert draft.enthalpy(300.0) == pytest.approx(-1.0e5, abs=1e-5)
    assert draft.entropy(300.0) == pytest.approx(50.0, abs=1e-8)
    assert draft.enthalpy(1000.0) == pytest.approx(table[-1].H, abs=1.0)


def test_fit_joins_smoothly_and_by_a_jump() -> None:
    first = rows(lambda T: 30.0 + 0.02 * T, 300.0, 1000.0, 100.0, 0.0, 40.0)
    end = first[-1]
    second = rows(lambda T: 55.0, 1000.0, 1600.0, 100.0, end.H + 5000.0, end.S + 5.0)
    third = [row for row in second if row.T >= 1300.0]
    segments = [
        Segment(300.0, 1000.0, first, form="a"),
        Segment(1000.0, 1300.0, [row for row in second if row.T <= 1300.0], "jump", "b"),
        Segment(1300.0, 1600.0, third, "smooth", "b"),
    ]
    pieces, _ = fit(segments, (300.0, 0.0, 40.0))
    draft = Draft("", pieces, "", "")
    assert draft.enthalpy(1000.0, upper=True) - draft.enthalpy(1000.0) == pytest.approx(5000.0, abs=2.0)
    assert draft.gibbs_energy(1000.0, upper=True) == pytest.approx(draft.gibbs_energy(1000.0), abs=1e-4)
    for function in (draft.enthalpy, draft.entropy, draft.heat_capacity):
        assert function(1300.0, upper=True) == pytest.approx(function(1300.0), rel=1e-9)


def test_moving_a_piece_moves_h_and_s_only() -> None:
    piece = Piece(300.0, 1000.0, (0.0, 0.0, 4.0, 1e-3, 0.0, 0.0, 0.0, -1.0e4, 3.0))
    draft, shifted = Draft("", [piece], "", ""), Draft("", [moved(piece, 1000.0, -2.0)], "", "")
    assert shifted.enthalpy(500.0) - draft.enthalpy(500.0) == pytest.approx(1000.0, abs=1e-5)
    assert shifted.entropy(500.0) - draft.entropy(500.0) == pytest.approx(-2.0, abs=1e-9)
    assert shifted.heat_capacity(500.0) == draft.heat_capacity(500.0)


def test_readers() -> None:
    # One figure from each source, as printed there.
    assert crc()["1314-13-2"]["Hfs"] == -350500.0
    assert perry()["ZnO"][0] == pytest.approx(11.4 * 4.184)
    assert janaf_enthalpy("H-064") == pytest.approx(-241826.0)
    assert next(row for row in janaf("H-064") if row.T == 1000.0).Cp == 41.268
    assert burcat()["H2SO4", 200.0][0].low == 200.0
    pieces, composition, note = tm4513("gas")["H2O"]
    assert (pieces[0].low, composition, note) == (200.0, {"H": 2.0, "O": 1.0}, "L 8/89")
    assert math.isclose(pieces[0].coefficients[2], 4.19864056)


def test_a_missing_package_is_named() -> None:
    with pytest.raises(ModuleNotFoundError, match="'no_such_package'"):
        package_file("no_such_package", "x")


def test_an_adjustment_keeps_the_species_beside_it_and_its_own_entropy() -> None:
    draft = Draft("X", [Piece(200.0, 1000.0, (0.0, 0.0, 4.0, 0.0, 0.0, 0.0, 0.0, -1.0e4, 3.0))], "", "")
    before = [draft.enthalpy(298.15), draft.entropy(298.15), draft.heat_capacity(700.0), draft.enthalpy(700.0)]
    STEPS["adjust"]({"X": draft}, {"name": "X", "Cp_J_K": 10.0, "H_J": 500.0})
    assert draft.enthalpy(298.15) == pytest.approx(before[0] + 500.0, abs=1e-5)
    assert draft.entropy(298.15) == pytest.approx(before[1], abs=1e-9)
    assert draft.heat_capacity(700.0) == pytest.approx(before[2] + 10.0)
    assert draft.enthalpy(700.0) == pytest.approx(before[3] + 500.0 + 10.0 * (700.0 - 298.15), abs=1e-5)


def test_a_liquid_is_made_of_its_solid() -> None:
    solid = Draft("X(s)", [Piece(298.15, 600.0, (0.0, 0.0, 6.0, 1e-3, 0.0, 0.0, 0.0, -5.0e4, 3.0))], "", "")
    piece = melted(solid, {"range_K": [600.0, 900.0], "melting_kJ": 12.0, "Cp_J_K": 80.0})
    liquid = Draft("X(l)", [piece], "", "")
    assert liquid.enthalpy(600.0) - solid.enthalpy(600.0) == pytest.approx(12000.0, abs=1e-4)
    assert liquid.gibbs_energy(600.0) == pytest.approx(solid.gibbs_energy(600.0), abs=1e-4)
    assert liquid.heat_capacity(800.0) == pytest.approx(80.0)


def test_uncertainty_is_widened_to_the_distance() -> None:
    def doubted(H_kJ: str) -> Draft:
        draft = Draft("X", [Piece(200.0, 1000.0, (0.0, 0.0, 4.0, 0.0, 0.0, 0.0, 0.0, -1.0e4, 3.0))], "", "")
        draft.shift(H=-1e5 - draft.enthalpy(298.15), S=50.0 - draft.entropy(298.15))
        row = {"name": "X", "H_kJ": H_kJ, "u_H_kJ": "0.5", "S_J_K": "51", "u_S_J_K": "0.2", "source": "a book"}
        doubt_as_published({"X": draft}, [row])
        return draft

    near, far = doubted("-100.1"), doubted("-103")
    assert (near.enthalpy_uncertainty, near.uncertainty_source) == (500.0, "a book")
    assert (far.enthalpy_uncertainty, far.uncertainty_source) == (3000.0, "distance from a book")
    assert far.entropy_uncertainty == pytest.approx(1.0)


def test_a_species_is_moved_to_meet_a_mixture() -> None:
    def plain(name: str, H: float) -> Draft:
        return Draft(name, [Piece(200.0, 2000.0, (0.0, 0.0, 4.0, 0.0, 0.0, 0.0, 0.0, H, 3.0))], "", "")

    drafts = {name: plain(name, H) for name, H in (("X", -1.0e4), ("Y", -2.0e4), ("Z", 500.0))}
    S = drafts["X"].entropy(900.0)
    STEPS["meet"](drafts, {"name": "X", "with": {"Y": 0.5, "Z": 0.25}, "T_K": 900.0})
    G = {name: draft.gibbs_energy(900.0) for name, draft in drafts.items()}
    assert G["X"] == pytest.approx(0.5 * G["Y"] + 0.25 * G["Z"], abs=1e-4)
    assert drafts["X"].entropy(900.0) == S
    STEPS["meet"](drafts, {"name": "X", "with": "Y", "T_K": 900.0})
    assert drafts["X"].gibbs_energy(900.0) == pytest.approx(G["Y"], abs=1e-4)
