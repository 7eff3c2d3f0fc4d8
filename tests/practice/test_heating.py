"""Heating values against printed ones, and their traps."""

import numpy as np
import pytest

from gibbsmin.errors import FeedError, InputError
from gibbsmin.practice.feeds.heating import AT_15_CELSIUS, HeatingValue, heating_value
from gibbsmin.thermo.database import load
from gibbsmin.thermo.making.sources import atct


def of(temperature: float = 298.15, **amounts: float) -> HeatingValue:
    """Heating value of a mixture by names, with (l) and (s) written _l and _s."""
    names = [name.replace("_l", "(l)").replace("_s", "(s)") for name in amounts]
    return heating_value([load().get(name) for name in names], list(amounts.values()), temperature)


# kJ/mol, higher, ISO 6976:1995 and 2016 (from memory); the two editions differ by up to 0.05 (CH4) and 0.2 (H2S).
ISO_25 = {"CH4": 890.60, "C2H6": 1560.69, "C3H8": 2219.17, "H2": 285.83, "CO": 282.98, "H2S": 562.01}
ISO_15 = {"CH4": 891.53, "C2H6": 1562.14, "C3H8": 2221.10}

# kJ/mol, higher, CRC Handbook of Chemistry and Physics, section 5, heat of combustion (from memory).
CRC = {
    "C2H4": 1411.2, "C2H2": 1301.1, "NH3": 382.8, "CO": 283.0, "H2": 285.8, "CH4": 890.8, "C3H8": 2219.2,
    "C(s):graphite": 393.5,
}  # fmt: skip


@pytest.mark.parametrize("name", ISO_25)
def test_iso_6976_at_25_celsius(name: str) -> None:
    assert of(**{name: 1.0}).higher / 1e3 == pytest.approx(ISO_25[name], abs=0.05 if name != "H2S" else 0.3)


@pytest.mark.parametrize("name", ISO_15)
def test_iso_6976_at_15_celsius(name: str) -> None:
    assert of(AT_15_CELSIUS, **{name: 1.0}).higher / 1e3 == pytest.approx(ISO_15[name], abs=0.05)


@pytest.mark.parametrize("name", CRC)
def test_crc(name: str) -> None:
    record = load().get(name)
    assert heating_value([record], [1.0]).higher / 1e3 == pytest.approx(CRC[name], rel=4.0e-4)


CO2, WATER = "124-38-9 g", "7732-18-5 "

COMBUSTION = {
    "CH4": ("74-82-8 g", 1.0, 2.0),
    "CH3OH": ("67-56-1 g", 1.0, 2.0),
    "HCN": ("74-90-8 g", 1.0, 0.5),
}
"""Key in the Active Thermochemical Tables; CO2 and H2O of its combustion."""


@pytest.mark.parametrize("name", COMBUSTION)
def test_active_thermochemical_tables(name: str) -> None:
    """ATcT 1.112, read from the package ``chemicals``; within twice their 95 % uncertainty and that of the products."""
    key, carbon, water = COMBUSTION[name]
    table = atct()
    found = of(**{name: 1.0})
    for value, phase in ((found.higher, "l"), (found.lower, "g")):
        expected = table[key][0] - carbon * table[CO2][0] - water * table[WATER + phase][0]
        uncertainty = table[key][1] + carbon * table[CO2][1] + water * table[WATER + phase][1]
        assert value == pytest.approx(expected, abs=2.0 * uncertainty)


def test_natural_gas_by_the_values_of_iso_6976() -> None:
    """Sum of x times the standard's values at 15 °C (1995, from memory), and 44.431 kJ/mol of water."""
    x = {"CH4": 0.92, "C2H6": 0.04, "C3H8": 0.01, "N2": 0.022, "CO2": 0.008}
    found = of(AT_15_CELSIUS, **x)
    higher = 0.92 * 891.56 + 0.04 * 1562.14 + 0.01 * 2221.10
    water = 0.92 * 2.0 + 0.04 * 3.0 + 0.01 * 4.0
    assert found.per_mole[0] / 1e3 == pytest.approx(higher, abs=0.06)
    assert found.per_mole[1] / 1e3 == pytest.approx(higher - 44.431 * water, abs=0.08)
    assert found.amount == pytest.approx(1.0, rel=1.0e-12)


def test_what_it_is_counted_by() -> None:
    """Methane: 39.8 MJ/Nm3 and 55.5 MJ/kg higher, 35.8 and 50.0 lower (textbook values, from memory)."""
    methane = of(CH4=3.0)
    assert methane.per_mass == pytest.approx((55.5e6, 50.0e6), rel=2.0e-3)
    assert methane.per_normal_volume == pytest.approx((39.8e6, 35.8e6), rel=3.0e-3)
    assert methane.per_mole[0] == pytest.approx(methane.higher / 3.0, rel=1.0e-14)
    assert methane.normal_volume == pytest.approx(3.0 * 0.022413969, rel=1.0e-7)


def test_hydrogen_differs_by_the_evaporation_of_its_water() -> None:
    """2.4417 MJ/kg at 25 °C (IAPWS-95) for real vapour; an ideal one takes 0.03 % more."""
    hydrogen = of(H2=1.0)
    per_kg = (hydrogen.higher - hydrogen.lower) / load().get("H2O").molar_mass
    assert per_kg == pytest.approx(2.4417e6, rel=5.0e-4)


def test_moisture_takes_from_the_lower_value_only() -> None:
    dry, wet = of(CH3OH=1.0), of(CH3OH=1.0, H2O_l=0.5)
    evaporation = load().get("H2O").standard_enthalpy - load().get("H2O(l)").standard_enthalpy
    assert wet.higher == pytest.approx(dry.higher, rel=1.0e-12)
    assert wet.lower == pytest.approx(dry.lower - 0.5 * evaporation, rel=1.0e-12)
    assert np.isnan(wet.per_normal_volume).all()
    assert np.isfinite(of(CH3OH=1.0, H2O_l=0.0).normal_volume)


def test_what_does_not_burn_has_no_heating_value() -> None:
    for name in ("N2", "O2", "CO2", "SO2", "HCl", "Ar", "SiO2_s", "CaCO3_s", "CaSO4_s", "Fe2O3_s"):
        inert = of(**{name: 2.0})
        assert inert.higher == pytest.approx(0.0, abs=1.0e-6), name
        assert inert.lower == pytest.approx(0.0, abs=1.0e-6), name
    diluted = of(CH4=1.0, N2=3.0, O2=0.5, Ar=0.1)
    assert diluted.higher == pytest.approx(of(CH4=1.0).higher, rel=1.0e-12)
    assert of(AT_15_CELSIUS, Ar=1.0).higher == pytest.approx(0.0, abs=1.0e-6)


def test_heating_values_add_up() -> None:
    parts = {"CH4": 0.4, "CO": 0.2, "H2S": 0.05, "NH3": 0.1, "CH3Cl": 0.1, "O2": 0.3}
    whole = of(**parts)
    assert whole.higher == pytest.approx(sum(of(**{name: n}).higher for name, n in parts.items()), rel=1.0e-12)
    assert whole.lower == pytest.approx(sum(of(**{name: n}).lower for name, n in parts.items()), rel=1.0e-12)


def test_chlorine_takes_hydrogen_from_water() -> None:
    """CH3Cl + 3/2 O2 = CO2 + H2O + HCl, by the formation enthalpies of the data."""
    H = {name: load().get(name).standard_enthalpy for name in ("CH3Cl", "CO2", "H2O(l)", "HCl")}
    assert of(CH3Cl=1.0).higher == pytest.approx(H["CH3Cl"] - H["CO2"] - H["H2O(l)"] - H["HCl"], rel=1.0e-9)
    with pytest.raises(FeedError, match=r"more Cl and F than H"):
        of(CCl4=1.0)
    assert of(CCl4=1.0, H2=2.0).lower > 0.0


def test_what_has_no_heating_value_is_refused() -> None:
    for name in ("Fe_s", "CaS_s"):
        with pytest.raises(FeedError, match=r"heating value of .* is not defined"):
            of(**{name: 1.0})
    of(CH4=1.0, Fe_s=0.0)  # not there, so of no consequence


@pytest.mark.parametrize("amounts", [[1.0], [1.0, -0.1], [np.nan, 1.0], [0.0, 0.0], [[1.0, 1.0]]])
def test_bad_amounts(amounts: list[float]) -> None:
    with pytest.raises(InputError, match="amounts"):
        heating_value([load().get("CH4"), load().get("H2")], amounts)
