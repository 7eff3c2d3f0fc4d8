"""Dew points against the printed correlations, in other units and other forms, and against each other."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from gibbsmin.errors import InputError
from gibbsmin.practice.feeds.saturation import dew_temperature, saturation_pressure
from gibbsmin.practice.flue_gas.dew_points import SULFURIC, dew_points, kiang, okkes, verhoff_banchero, zarenezhad

ATM = 101325.0
water = st.floats(0.02, 0.40)
acid = st.floats(1e-6, 3e-4)


@pytest.mark.parametrize(
    ("x_water", "x_acid", "expected"),
    [(0.10, 10e-6, (137.3, 133.3, 136.4)), (0.08, 20e-6, (142.2, 136.6, 141.2)), (0.12, 1e-6, (117.7, 117.7, 115.4))],
)
def test_sulfuric_acid_worked_by_hand(x_water: float, x_acid: float, expected: tuple[float, ...]) -> None:
    """The three formulas of Verhoff & Banchero (1974), Okkes (1987) and ZareNezhad (2009), with a pocket calculator."""
    found = [float(f(x_water * ATM, x_acid * ATM)) - 273.15 for f in (verhoff_banchero, okkes, zarenezhad)]
    assert found == pytest.approx(expected, abs=0.06)


@given(water, acid)
def test_both_printed_forms_of_verhoff_and_banchero_agree(x_water: float, x_acid: float) -> None:
    """Pierce (1977) prints them in atm and decimal logarithms, too; four digits let 1 K of difference stand."""
    w, a = np.log10(x_water), np.log10(x_acid)
    pierce = 1000.0 / (1.7842 + 0.0269 * w - 0.1029 * a + 0.0329 * w * a)
    assert float(verhoff_banchero(x_water * ATM, x_acid * ATM)) == pytest.approx(pierce, abs=1.0)


@given(st.floats(0.05, 0.20), st.floats(1e-6, 1e-4))
def test_correlations_differ_by_less_than_measurements_scatter(x_water: float, x_acid: float) -> None:
    found = [float(function(x_water * ATM, x_acid * ATM)) for _, function in SULFURIC.values()]
    assert max(found) - min(found) < 10.0


@given(water, acid, st.floats(1.01, 3.0))
def test_more_acid_or_more_water_never_lowers_a_dew_point(x_water: float, x_acid: float, more: float) -> None:
    for _, function in SULFURIC.values():
        here = float(function(x_water * ATM, x_acid * ATM))
        assert float(function(x_water * ATM, more * x_acid * ATM)) > here
        assert float(function(more * x_water * ATM, x_acid * ATM)) > here


def test_kiang_worked_by_hand() -> None:
    """Kiang (1981) at 18 % water: 1000 ppmv of HCl, 100 of HBr; 50 of HNO3 lie below the dew point of water."""
    assert float(kiang("HCl", 0.18 * ATM, 1e-3 * ATM)) - 273.15 == pytest.approx(64.7, abs=0.06)
    assert float(kiang("HBr", 0.18 * ATM, 1e-4 * ATM)) - 273.15 == pytest.approx(63.2, abs=0.06)
    assert np.isnan(kiang("HNO3", 0.18 * ATM, 50e-6 * ATM))


def test_water_boils_at_one_atmosphere() -> None:
    """99.974 °C (IAPWS-95, W. Wagner and A. Pruss, J. Phys. Chem. Ref. Data 31 (2002) 387)."""
    assert float(dew_temperature(ATM)) - 273.15 == pytest.approx(99.974, abs=0.002)


@given(st.floats(10.0, 22e6))
def test_dew_point_of_water_round_trip(pressure: float) -> None:
    assert float(saturation_pressure(dew_temperature(pressure))) == pytest.approx(pressure, rel=1e-9)


def test_what_cannot_be_is_refused_and_what_is_not_there_is_nan() -> None:
    assert np.isnan(verhoff_banchero([0.0, 1e4], [1.0, 0.0])).all()
    assert np.isnan(okkes(1e4, 1e-9 * ATM))  # below the root of its last term
    assert np.isnan(zarenezhad(np.nan, 1.0))
    with pytest.raises(InputError, match="partial pressure of the acid: expected zero or above, got -1 Pa"):
        zarenezhad(1e4, -1.0)
    with pytest.raises(InputError, match="expected HCl, HBr, HNO3, got 'HF'"):
        kiang("HF", 1e4, 1.0)


def test_figures_are_those_that_a_state_has() -> None:
    """A gas without acid, one with both, and one whose acid water takes first."""
    x_water, x_acid = np.array([0.18, 0.10, 0.10]), np.array([0.0, 10e-6, 1e-12])
    found = {
        figure.name: figure
        for figure in dew_points(np.full(3, ATM), x_water, x_acid, {"HCl": np.array([1e-3, 0.0, 0.0])}, "as given")
    }
    assert next(iter(found)) == "dew_point_water"
    assert found["dew_point_water"].value - 273.15 == pytest.approx([58.08, 46.06, 46.06], abs=0.01)
    sulfuric = found["dew_point_sulfuric_acid_verhoff_banchero"]
    assert np.isfinite(sulfuric.value).tolist() == [False, True, False]
    assert np.isfinite(found["dew_point_hcl"].value).tolist() == [True, False, False]
    assert "as given" in sulfuric.note
    assert all(len(figure.label) <= 34 and figure.unit == "K" for figure in found.values())
    assert len(dew_points(np.array([ATM]), np.array([0.1]), np.array([0.0]), {}, "")) == 1
