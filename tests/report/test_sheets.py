"""Data sheets and explained cases: published figures in the right places, 80 columns."""

from __future__ import annotations

import re
from math import nan

import pytest

from gibbsmin.report.explained import explained
from gibbsmin.report.species_sheet import species_list, species_sheet
from gibbsmin.report.words import labelled, shortened
from gibbsmin.thermo.database import load


def test_every_species_has_a_sheet_of_80_columns() -> None:
    database = load()
    for name in database.names[::7]:
        lines = species_sheet(database.get(name))
        assert max(map(len, lines)) <= 80, name
        assert not any("nan" in line for line in lines), name


def test_list_of_all_species_fits() -> None:
    database = load()
    lines = species_list([database.get(name) for name in database.names])
    assert len(lines) == len(database) + 2
    assert max(map(len, lines)) <= 80


def test_sheet_of_water_vapour_against_janaf() -> None:
    # NIST-JANAF H-064 (Chase 1998), 1000 K: Cp 41.268, S 232.738 J/mol/K; H-H298 26.000, dfH298 -241.826 kJ/mol
    rows = [line.split() for line in species_sheet(load().get("H2O"))]
    cp, h, s, g = (float(cell) for cell in next(row for row in rows if row[:1] == ["1000"])[1:5])
    assert cp == pytest.approx(41.268, abs=0.1)
    assert h == pytest.approx(26.000 - 241.826, abs=0.1)
    assert s == pytest.approx(232.738, abs=0.1)
    assert g == pytest.approx(h - 1000 * s / 1000, abs=0.02)


def test_sheet_of_quartz_names_its_transitions() -> None:
    text = " ".join(" ".join(species_sheet(load().get("SiO2(s)"))).split())
    assert "low-quartz to high-quartz at 847 K" in text


def test_sheet_of_a_species_that_starts_above_room_temperature_gives_no_value_there() -> None:
    (row,) = species_list([load().get("FeO(l)")])[2:]
    assert row.split()[-2:] == ["-", "-"]


def test_words() -> None:
    assert shortened("abcdef", 4) == "ab.."
    assert shortened("abcd", 4) == "abcd"
    lines = labelled("caution", "word " * 12 + "CO 9.7 % and so on")
    assert all(len(line) <= 80 for line in lines)
    assert any("9.7 %" in line for line in lines), "a number and its unit stay together"


def test_explained() -> None:
    feed = {
        "name": "gas",
        "mass": 0.45,
        "temperature": 823.15,
        "pressure": None,
        "amounts": {"CH4": 25.0, "N2": 0.5},
        "atoms": {"C": 3.0},
    }
    told = {
        "title": "A case",
        "basis": "mol/s",
        "feeds": [feed],
        "elements": {"C": 28.0, "H": 100.0, "N": 1.0},
        "units": {"temperature": "degC", "pressure": "bar"},
        "species": {"gas": ["CH4"] * 100, "condensed": ["C(s):graphite"], "exclude": ["C2H2:acetylene"], "inert": []},
        "held": {"adiabatic": True, "pressure": "24 bar"},
        "remark": "taken at the held pressure: gas",
        "heating_values": {
            "gas": {
                298.15: {"per_mole": (8.906e5, 8.026e5), "per_mass": (55.5e6, 50e6), "per_normal_volume": (nan, nan)}
            }
        },
        "fuels": {},
        "moisture": {
            "gas": {"mole_fraction": 0.01, "humidity_ratio": 0.0063, "dew_point": 280.45, "pressure": 101325.0}
        },
        "ratios": {
            "gas": {"air_ratio": 1.15, "excess_air": 0.15, "equivalence_ratio": 1 / 1.15},
            "all feeds": {"air_ratio": 0.25, "excess_air": -0.75, "equivalence_ratio": 4.0, "steam_to_carbon": 3.0},
        },
        "sweep": [
            {
                "vary": "held.temperature",
                "first": 600.0,
                "last": 1000.0,
                "unit": "degC",
                "points": 81,
                "logarithmic": False,
            }
        ],
        "design": {"kind": "grid"},
        "states": 81,
    }
    lines = explained(told)
    text = "\n".join(lines)
    assert max(map(len, lines)) <= 80
    assert "0.4500 kg/s, 550 degC" in text
    assert "C (element)" in text
    assert "100 may form" in text
    assert re.search(r"^held +adiabatic, pressure 24 bar$", text, re.MULTILINE)
    assert "higher / lower at 25 degC: 890.6 / 802.6 kJ/mol, 55.50 / 50.00" in text
    assert "Nm3" not in text, "a feed that is in part condensed has no gas volume"
    assert "and 60 more" in text
    assert "C2H2:acetylene" in text
    assert "81 values from 600 to 1000 degC" in text
    words = " ".join(text.split())
    assert "1.000 mole % of water vapour, 6.300 g/kg dry gas, dew point 7.3 degC at 1.013 bar" in words
    assert "ratios air ratio 1.150 (excess air 15 %, equivalence ratio 0.8696)" in words
    assert "all feeds air ratio 0.2500 (the ER of gasification; equivalence ratio of burners 4.000), steam" in words
    assert "steam to carbon 3.000 mol/mol" in words
    assert "81 states" in text
