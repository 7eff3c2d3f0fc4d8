"""Alkali salts: shares by hand, sums, and the way sulfur moves alkali from chloride to sulfate."""

from __future__ import annotations

import numpy as np
import pytest
from settled_from import by_hand, figures, settle

from gibbsmin.practice.figures.salts import salts
from gibbsmin.states.system import System

SYSTEM = System.from_elements("K Cl S O H C N", exclude=["C(s):graphite"])
FLUE = {"CO2": 12.0, "H2O": 12.0, "O2": 5.0, "N2": 71.0}


def test_by_hand() -> None:
    """6 K and 2 Na: 2 K in KCl and K2Cl2 vapour, 2 in K2SO4(s), 2 in KOH; 1 Na in NaCl(s), 1 in NaOH."""
    mixture = {"KCl": 1.0, "K2Cl2": 0.5, "K2SO4(s)": 1.0, "KOH": 2.0, "NaCl(s)": 1.0, "NaOH": 1.0, "N2": 94.5}
    found = figures(salts(by_hand(mixture, {"fuel": {"KCl(s)": 3.0, "K2SO4(s)": 1.0, "KOH": 1.0, "NaOH": 2.0}})))
    assert found["alkali_as_sulfate"] == pytest.approx(2.0 / 8.0)
    assert found["alkali_as_chloride"] == pytest.approx(3.0 / 8.0)
    assert found["alkali_in_gas"] == pytest.approx(5.0 / 8.0)
    assert found["alkali_chlorides_wet"] == pytest.approx(2.0 / 99.0)
    assert found["k_in_k2so4_s"] == pytest.approx(2.0 / 6.0)
    assert found["cl_in_nacl_s"] == pytest.approx(1.0 / 3.0)
    assert found["chlorine_in_deposit"] == pytest.approx(35.45 / (174.259 + 58.44), rel=1e-3)
    assert found["s_to_cl_fed"] == pytest.approx(1.0 / 3.0)
    assert found["sulfate_to_chloride_fed"] == pytest.approx(2.0 / 3.0)
    assert found["alkali_to_acid_fed"] == pytest.approx(8.0 / 5.0)


def test_places_of_an_element_sum_to_one() -> None:
    feeds = {"gas": FLUE, "fuel": {"KCl": 0.03, "KOH": 0.02, "SO2": 0.02}}
    found = figures(salts(settle(SYSTEM, feeds, np.array([1500.0, 1200.0, 900.0]))))
    for symbol in ("k", "cl", "s"):
        places = [value for name, value in found.items() if name.startswith(f"{symbol}_in_")]
        assert sum(places) == pytest.approx(1.0, abs=0.04)  # below one per cent everywhere is not named
        assert all((value >= 0.0).all() and (value <= 1.0 + 1e-9).all() for value in places)


def test_more_sulfur_binds_more_alkali_as_sulfate() -> None:
    feeds = {"gas": FLUE, "fuel": {"KCl": 0.03, "SO2": np.array([0.001, 0.005, 0.012, 0.05])}}
    found = figures(salts(settle(SYSTEM, feeds, 1050.0)))
    assert (np.diff(found["alkali_as_sulfate"]) > 0.0).all()
    assert (np.diff(found["alkali_as_chloride"]) < 0.0).all()


def test_without_alkali_there_are_no_salts() -> None:
    assert salts(by_hand({"HCl": 1.0, "N2": 1.0}, {"gas": {"HCl": 1.0, "N2": 1.0}})) == []
