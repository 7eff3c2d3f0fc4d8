"""Arithmetic of limit values: the formulas of the rules, worked by hand."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from gibbsmin.errors import InputError
from gibbsmin.practice.flue_gas.emissions import (
    REFERENCE_OXYGEN,
    at_reference_oxygen,
    mass_concentration,
    reference_oxygen,
)

oxygen = st.floats(0.0, 0.16)


@pytest.mark.parametrize(("air", "expected"), [(0.2095, 192.90), (0.21, 192.86), (0.209, 192.93)])
def test_reference_oxygen_worked_by_hand(air: float, expected: float) -> None:
    """E_S = E_M (21 - O_S) / (21 - O_M) of Directive 2010/75/EU, annexes V and VI, with three oxygens of air.

    180 mg at 4.2 %, turned to 3 %.
    """
    assert float(at_reference_oxygen(180.0, 0.042, 0.03, air)) == pytest.approx(expected, abs=0.005)


def test_carbon_monoxide_from_volume_to_mass_at_reference() -> None:
    """100 ppmv dry at 5 % O2: 100 · 28.010/22.414 · (20.95 - 3)/(20.95 - 5) = 140.6 mg/Nm3."""
    mass = mass_concentration(100e-6, 28.010e-3)
    assert 1e6 * float(at_reference_oxygen(mass, 0.05, 0.03)) == pytest.approx(140.6, abs=0.05)


@pytest.mark.parametrize(
    ("weight", "factor"),
    [(46.006, 2.0525), (30.006, 1.3387), (64.058, 2.8579), (36.458, 1.6266), (20.006, 0.8926), (17.031, 0.7598)],
)
def test_mass_of_one_ppmv(weight: float, factor: float) -> None:
    """M / 22.414 for NO2, NO, SO2, HCl, HF, NH3; 22.414 L/mol at 0 °C and 101325 Pa (CODATA)."""
    assert 1e6 * float(mass_concentration(1e-6, 1e-3 * weight)) == pytest.approx(factor, abs=1e-4)


@given(st.floats(0.0, 1e3), oxygen)
def test_reference_is_identity_where_it_is_met(value: float, x: float) -> None:
    assert float(at_reference_oxygen(value, x, x)) == pytest.approx(value)


@given(st.floats(1e-3, 1e3), oxygen, oxygen, st.floats(0.0, 3.0))
def test_dilution_with_air_changes_nothing(value: float, x: float, reference: float, air: float) -> None:
    """One part of dry gas and ``air`` parts of air: less of it, more oxygen, the same at the reference."""
    diluted, mixed = value / (1.0 + air), (x + 0.2095 * air) / (1.0 + air)
    before = float(at_reference_oxygen(value, x, reference))
    assert float(at_reference_oxygen(diluted, mixed, reference)) == pytest.approx(before, rel=1e-9)


def test_gas_below_the_reference_may_stay_as_it_is() -> None:
    """Annex VI of the same directive, for hazardous waste."""
    found = at_reference_oxygen([100.0, 100.0], [0.07, 0.13], 0.11, only_above=True)
    assert found == pytest.approx([100.0, 100.0 * (20.95 - 11.0) / (20.95 - 13.0)])
    assert at_reference_oxygen(100.0, 0.07, 0.11) < 100.0


def test_no_reference_where_the_gas_holds_as_much_oxygen_as_air() -> None:
    assert np.isnan(at_reference_oxygen([1.0, 1.0, 1.0], [0.2095, 0.5, np.nan], 0.03)).all()


@pytest.mark.parametrize(("application", "percent"), [("solid fuel", 6), ("Waste", 11), ("turbine or engine", 15)])
def test_usual_references(application: str, percent: float) -> None:
    """Directives 2010/75/EU and (EU) 2015/2193."""
    assert reference_oxygen(application).oxygen == pytest.approx(percent / 100.0)


def test_every_usual_reference_names_its_source_and_is_found() -> None:
    assert all(reference_oxygen(name) is row and row.source for name, row in REFERENCE_OXYGEN.items())


def test_bad_input_says_what_would_be_right() -> None:
    with pytest.raises(InputError, match="did you mean 'solid fuel'"):
        reference_oxygen("solid fuels")
    with pytest.raises(InputError, match=r"reference oxygen: expected a mole fraction .* got 3"):
        at_reference_oxygen(1.0, 0.05, 3.0)
    with pytest.raises(InputError, match=r"oxygen of air: .* got 20.95"):
        at_reference_oxygen(1.0, 0.05, 0.03, 20.95)
    with pytest.raises(InputError, match="molar mass"):
        mass_concentration(1.0, 0.0)
