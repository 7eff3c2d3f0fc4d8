"""Furnace atmospheres: carbon in steel against the phase diagram, dew point against steam tables."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from settled_from import by_hand, figures, settle

from gibbsmin.practice.figures.atmosphere import atmosphere, carbon_in_austenite
from gibbsmin.states.system import System


def test_carbon_at_the_ends_of_the_austenite_field() -> None:
    """Austenite with graphite holds 0.68 % at 738 degC and 2.08 % at 1153 degC: iron-graphite diagram, ASM (memory).

    The fit ends at 1420 K, six kelvin short of the eutectic.
    """
    found = carbon_in_austenite(1.0, [738.0 + 273.15, 1420.0])
    assert found == pytest.approx([0.68, 2.08], rel=0.06)


@given(st.floats(0.02, 1.9), st.floats(1000.0, 1420.0))
def test_carbon_goes_there_and_back(w: float, T: float) -> None:
    a = 10.0 ** (2300.0 / T - 2.21 + 0.15 * w + np.log10(w))
    found = float(carbon_in_austenite(a, T))
    assert found == pytest.approx(w) if a <= 1.0 else np.isnan(found) or a < 1.0 + 1e-5


def test_carbon_is_told_only_where_the_fit_holds() -> None:
    found = carbon_in_austenite([0.5, 0.5, 1.5, 0.0, np.nan], [900.0, 1500.0, 1200.0, 1200.0, 1200.0])
    assert np.isnan(found).all()


def test_by_hand() -> None:
    gas = by_hand({"NH3": 1.0, "H2": 2.0, "N2": 5.0, "H2O": 0.1, "CO2": 0.05}, {}, 800.0, 2.0e5)
    found = figures(atmosphere(gas))
    whole = 8.15
    assert found["nitriding_potential"] == pytest.approx(2.0 / whole / (4.0 / whole) ** 1.5)
    assert found["co2_wet"] == pytest.approx(0.05 / whole)


def test_dew_point_by_the_steam_table() -> None:
    """1.228 kPa at 10 degC, 2.339 kPa at 20 degC: steam tables, IAPWS-IF97 (from memory)."""
    for vapour, celsius in ((1228.0, 10.0), (2339.0, 20.0)):
        found = figures(atmosphere(by_hand({"H2O": vapour, "N2": 1e5 - vapour}, {}, 1200.0, 1e5)))
        assert found["water_dew_point"] == pytest.approx(celsius + 273.15, abs=0.05)


def test_an_endothermic_gas_at_its_sooting_limit() -> None:
    """Where graphite is present, steel takes up what austenite holds beside graphite, whatever the gas."""
    system = System.from_elements("C H O N")
    gas = {"CO": 25.0, "H2": 40.0, "N2": 35.0, "CH4": np.array([1.0, 5.0])}
    settled = settle(system, {"gas": gas}, 1198.15)
    assert (settled.amount("C(s):graphite") > 0.0).all()
    found = figures(atmosphere(settled))
    assert found["carbon_activity"] == pytest.approx(1.0)
    assert (found["oxygen_potential"] < -4.0e5).all()  # reducing: half a per cent of water at most
    assert found["carbon_in_austenite"] * 100.0 == pytest.approx(float(carbon_in_austenite(1.0, 1198.15)), rel=1e-5)


def test_without_ammonia_there_is_no_nitriding_potential() -> None:
    assert "nitriding_potential" not in figures(atmosphere(by_hand({"H2": 1.0, "N2": 1.0}, {})))
