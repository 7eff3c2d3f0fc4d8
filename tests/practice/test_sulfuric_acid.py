"""Sulfuric acid: arithmetic by hand, a published emission rule, a published constant."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from settled_from import by_hand, figures, settle

from gibbsmin.practice.figures.sulfuric_acid import sulfuric_acid
from gibbsmin.states.system import System


def test_by_hand() -> None:
    """10 SO2, 11 O2, 79 N2 of which 7 SO2 react: 3 SO2, 7 SO3, 7.5 O2, 79 N2, 96.5 in all."""
    bed = by_hand({"SO2": 3.0, "SO3": 7.0, "O2": 7.5, "N2": 79.0}, {"gas": {"SO2": 10.0, "O2": 11.0, "N2": 79.0}})
    found = figures(sulfuric_acid(bed))
    assert found["o2_to_so2_fed"] == pytest.approx(1.1)
    assert found["so2_fed"] == pytest.approx(0.10)
    assert found["so2_conversion"] == pytest.approx(0.7)
    assert "so2_conversion_of_all_sulfur" not in found  # it would say the same: all sulfur came as SO2
    assert found["so3_wet"] == pytest.approx(7.0 / 96.5)
    assert found["so2_after_absorption"] == pytest.approx(3.0 / 89.5)
    assert found["acid_made"] == pytest.approx(7.0 * 0.09807, rel=1e-3)
    # 2.8579 mg/Nm3 for each ppmv of SO2: 64.06/22.414
    assert found["so2_concentration_after_absorption"] * 1e6 == pytest.approx(3.0 / 89.5 * 1e6 * 2.858, rel=1e-3)


def test_a_second_bed_counts_its_own_step_and_the_whole() -> None:
    bed = by_hand({"SO2": 1.0, "SO3": 9.0, "N2": 90.0}, {"gas": {"SO2": 4.0, "SO3": 6.0, "O2": 9.0, "N2": 90.0}})
    found = figures(sulfuric_acid(bed))
    assert found["so2_conversion"] == pytest.approx(0.75)
    assert found["so2_conversion_of_all_sulfur"] == pytest.approx(0.90)


def test_sulfur_that_is_burnt_has_no_dioxide_fed() -> None:
    burner = by_hand({"SO2": 1.0, "O2": 1.0, "N2": 8.0}, {"sulfur": {"S(l)": 1.0}, "air": {"O2": 2.0, "N2": 8.0}})
    found = figures(sulfuric_acid(burner))
    assert "so2_conversion" not in found
    assert found["so2_conversion_of_all_sulfur"] == pytest.approx(0.0)


# kg a tonne: US EPA, AP-42, section 8.10 (from memory): in lb/ton 1365 - 13.65 X, which is 682.5 - 6.825 X in kg/t.
@pytest.mark.parametrize("percent", [96.0, 98.0, 99.0, 99.7])
def test_dioxide_of_a_tonne_of_acid(percent: float) -> None:
    x = percent / 100.0
    found = figures(sulfuric_acid(by_hand({"SO2": 1.0 - x, "SO3": x, "N2": 9.0}, {"gas": {"SO2": 1.0, "N2": 9.0}})))
    assert found["so2_of_acid"] * 1e3 == pytest.approx(682.5 - 6.825 * percent, rel=0.06)


@given(st.floats(0.01, 0.999), st.floats(0.0, 0.9))
def test_dioxide_of_acid_is_that_of_the_masses(converted: float, as_acid: float) -> None:
    """The same from kilograms: what is left, over what absorption makes of the rest; water does not matter."""
    gas = {"SO2": 1.0 - converted, "SO3": converted * (1.0 - as_acid), "H2SO4": converted * as_acid, "N2": 9.0}
    found = figures(sulfuric_acid(by_hand(gas, {"gas": {"SO2": 1.0, "N2": 9.0}})))
    left = (1.0 - converted) * 0.064058
    assert found["so2_of_acid"] == pytest.approx(left / found["acid_made"], rel=1e-3)


def test_equilibrium_conversion_by_a_published_constant() -> None:
    """log10 K = 4956/T - 4.678, atm: M. Bodenstein and W. Pohl, Z. Elektrochem. 11 (1905) 373 (from memory)."""
    T, bar = np.array([700.0, 770.0, 840.0]), 1.2
    system = System.from_species("SO2 SO3 O2 N2")
    found = figures(sulfuric_acid(settle(system, {"gas": {"SO2": 9.0, "O2": 12.0, "N2": 79.0}}, T, bar * 1e5)))
    for kelvin, conversion in zip(T, found["so2_conversion"], strict=True):
        K, low, high = 10.0 ** (4956.0 / kelvin - 4.678), 0.0, 1.0
        for _ in range(60):
            x = 0.5 * (low + high)
            oxygen = (12.0 - 4.5 * x) / (100.0 - 4.5 * x) * bar / 1.01325
            low, high = (x, high) if x / (1.0 - x) < K * oxygen**0.5 else (low, x)
        assert conversion == pytest.approx(low, abs=0.012)


def test_a_gas_without_sulfur_has_no_conversion() -> None:
    found = figures(sulfuric_acid(by_hand({"N2": 1.0, "O2": 1.0}, {"gas": {"N2": 1.0, "O2": 1.0}})))
    assert "so2_of_acid" not in found
    assert "so2_conversion" not in found
