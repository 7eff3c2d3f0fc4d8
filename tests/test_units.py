"""Quantities at the edge: right values, one meaning each, and messages that say what would be right."""

import math
import subprocess
import sys

import pint
import pytest
from hypothesis import given
from hypothesis import strategies as st

from gibbsmin import units
from gibbsmin.errors import UnitError
from gibbsmin.units import from_si, one_of, quantity, unit_of

# By hand: 870 + 273.15; 1500 degF = (1500 + 459.67) 5/9 K; 100e3/3600; 1 lb = 0.45359237 kg and 1 in = 0.0254 m, exact.
KNOWN = [
    ("870 degC", "K", 1143.15),
    ("870 °C", "K", 1143.15),
    ("870℃", "K", 1143.15),
    ("870 deg C", "K", 1143.15),
    ("-10 degC", "K", 263.15),
    ("1500 degF", "K", 1088.7055555555555),
    ("1500 K", "K", 1500.0),
    ("24 bar", "Pa", 24e5),
    ("24bar", "Pa", 24e5),
    ("24 bara", "Pa", 24e5),
    ("24 bar(a)", "Pa", 24e5),
    ("14.6959487755 psia", "Pa", 101325.0),
    ("1 atm", "Pa", 101325.0),
    ("760 torr", "Pa", 101325.0),
    ("100 kmol/h", "mol/s", 100e3 / 3600.0),
    ("3.6 t/h", "kg/s", 1.0),
    ("2 lb/hr", "kg/s", 2 * 0.45359237 / 3600.0),
    ("-74.6 kJ/mol", "J/mol", -74600.0),
    ("1 kWh", "J", 3.6e6),
    ("5 MW", "W", 5e6),
    ("15 %", "1", 0.15),
    ("1 ppm", "1", 1e-6),
    ("3", "1", 3.0),
    ("1e-3 kmol", "mol", 1.0),
    ("+.5 mol", "mol", 0.5),
]


@pytest.mark.parametrize(("text", "unit", "expected"), KNOWN)
def test_known_values(text, unit, expected):
    assert quantity(text, unit, "x") == pytest.approx(expected, rel=1e-12)


def test_gas_volumes_are_amounts_at_their_conditions():
    # molar volume of an ideal gas, CODATA 2018: 22.413 969 54e-3 m3/mol at 273.15 K and 101325 Pa
    assert quantity("22.41396954e-3 Nm3", "mol", "x") == pytest.approx(1.0, rel=1e-9)
    # the same gas at 288.15 K takes 288.15/273.15 of the room
    assert quantity("1 Nm3", "mol", "x") / quantity("1 Sm3", "mol", "x") == pytest.approx(288.15 / 273.15, rel=1e-12)
    assert quantity("3600 Nm³/h", "mol/s", "x") == quantity("1 Nm3", "mol", "x")


def test_bare_numbers_are_si():
    assert quantity(300, "K", "x") == 300.0
    assert isinstance(quantity(300, "K", "x"), float)


@pytest.mark.parametrize(
    ("value", "unit", "words"),
    [
        ("24 barg", "Pa", "gauge"),
        ("24 bar(g)", "Pa", "add the atmospheric pressure"),
        ("24 bar g", "Pa", "gauge"),
        ("24 bar gauge", "Pa", "gauge"),
        ("350 psig", "Pa", "gauge"),
        ("24 BarG", "Pa", "gauge"),
        ("3 kPag", "Pa", "gauge"),
        ("10 scf", "mol", "Nm3"),
        ("10 MMSCFD", "mol/s", "reference conditions"),
        ("10 scfm", "mol/s", "reference conditions"),
        ("500 sccm", "mol/s", "Sm3"),
        ("10 standard m3", "mol", "reference conditions"),
        ("10 normal m3", "mol", "reference conditions"),
        ("10 ton/h", "kg/s", "short_ton"),
        ("870 bar", "K", "870 bar is a pressure, expected a temperature"),
        ("100 kg/h", "mol/s", "mass flow, expected a flow of substance"),
        ("100 kmol", "mol/s", "an amount of substance"),
        ("870 C", "K", "written degC"),
        ("870 F", "K", "written degF"),
        ("870", "K", "no unit"),
        ("1,5 bar", "Pa", "point"),
        ("", "K", "empty"),
        ("  ", "K", "empty"),
        ("hot", "K", "'hot'"),
        ("nan K", "K", "expected a number"),
        ("5 Bar", "Pa", "'bar'"),
        ("5 Kmol/h", "mol/s", "'kmol/h'"),
        ("5 nonsense", "Pa", "cannot be read"),
        ("5 bar + 3 bar", "Pa", "cannot be read"),
        ("5 __import__('os')", "Pa", "cannot be read"),
        ("1e400 K", "K", "finite"),
        (float("nan"), "K", "finite"),
        (float("inf"), "K", "finite"),
        (10**400, "K", "finite"),
        (True, "K", "bool True"),
        (1j, "K", "complex"),
        (None, "K", "NoneType"),
        ([1.0], "K", "list"),
        ("x" * 5000, "K", "..."),
    ],
)
def test_refused_and_told_why(value, unit, words):
    with pytest.raises(UnitError) as caught:
        quantity(value, unit, "held.temperature")
    assert words in str(caught.value)
    assert str(caught.value).startswith("held.temperature: ")
    assert len(str(caught.value)) < 300


@pytest.mark.parametrize("unit", ["m**9**9**9", "m^99999999", "(m)**9", "m" * 100])
def test_unit_texts_that_would_run_long_are_refused(unit):
    with pytest.raises(UnitError, match="cannot be read"):
        quantity(f"5 {unit}", "Pa", "x")


def test_usual_units_do_not_import_pint():
    code = (
        "import sys; from gibbsmin.units import from_si, quantity; quantity('870 degC', 'K', 'T'); "
        "quantity('100 Nm3/h', 'mol/s', 'F'); from_si(300.0, 'degF'); sys.exit('pint' in sys.modules)"
    )
    assert subprocess.run([sys.executable, "-c", code], check=False).returncode == 0


REGISTRY = pint.UnitRegistry()


@pytest.mark.parametrize("unit", [unit for unit in units._ATOMS if unit not in ("1", "Nm3", "Sm3", "lbmol")])
def test_the_table_agrees_with_pint(unit):
    dimension, factor = units._ATOMS[unit]
    by_pint = REGISTRY.Quantity(1.0, {"m3": "m**3", "cm3": "cm**3"}.get(unit, unit))
    assert by_pint.to(units._SI(dimension) or "").magnitude == pytest.approx(factor, rel=1e-12)


@given(st.floats(-200.0, 5000.0), st.sampled_from(["degC", "degF"]))
def test_temperatures_agree_with_pint(value, unit):
    assert quantity(f"{value!r} {unit}", "K", "T") == pytest.approx(REGISTRY.Quantity(value, unit).to("K").magnitude)


@given(
    st.floats(-1e12, 1e12),
    st.sampled_from(["degC", "degF", "K", "bar", "psi", "kmol/h", "Nm3/h", "kJ/mol", "kcal/kg", "inHg", "J/(mol K)"]),
)
def test_there_and_back(value, unit):
    SI = {"degC": "K", "degF": "K", "K": "K", "bar": "Pa", "psi": "Pa", "kmol/h": "mol/s", "Nm3/h": "mol/s"}
    SI |= {"kJ/mol": "J/mol", "kcal/kg": "J/kg", "inHg": "Pa", "J/(mol K)": "J/mol/K"}
    there = quantity(f"{value!r} {unit}", SI[unit], "x")
    assert from_si(there, unit) == pytest.approx(value, rel=1e-12, abs=1e-9)


def test_everything_else_goes_to_pint():
    # by hand: 1 mmHg = 13595.1 kg/m3 x 9.80665 m/s2 x 1 mm; 1 kgf/cm2 = 9.80665 N / 1e-4 m2
    assert quantity("1 mmHg", "Pa", "x") == pytest.approx(13.5951 * 9.80665, rel=1e-6)
    assert quantity("1 kgf/cm2", "Pa", "x") == pytest.approx(98066.5, rel=1e-12)
    assert quantity("4.184 J/mol/degC", "J/mol/K", "x") == pytest.approx(4.184)
    assert quantity("10 delta_degC", "K", "x") == pytest.approx(10.0)
    assert quantity("2 Nm3/minute", "mol/s", "x") == pytest.approx(quantity("120 Nm3/h", "mol/s", "x"))


def test_pint_quantities_of_any_registry():
    assert quantity(REGISTRY.Quantity(20.0, "degC"), "K", "T") == pytest.approx(293.15)
    assert unit_of(REGISTRY.Quantity(20.0, "degC")) == "°C"
    with pytest.raises(UnitError, match="expected a temperature"):
        quantity(REGISTRY.Quantity(20.0, "bar"), "K", "T")
    with pytest.raises(UnitError, match="one number"):
        quantity(REGISTRY.Quantity([1.0, 2.0], "K"), "K", "T")


@pytest.mark.parametrize(
    ("value", "unit"), [("870 degC", "degC"), ("24bar", "bar"), (" 3 kmol/h ", "kmol/h"), (3.0, ""), ("x", "")]
)
def test_unit_as_typed(value, unit):
    assert unit_of(value) == unit


def test_one_of_several_dimensions():
    assert one_of("3.6 t/h", ("mol/s", "kg/s"), "flow") == (pytest.approx(1.0), "kg/s")
    assert one_of(5, ("mol/s", "kg/s"), "flow") == (5.0, "mol/s")
    with pytest.raises(UnitError, match=r"is a mass, expected a flow of substance \(mol/s\) or a mass flow \(kg/s\)"):
        one_of("3 kg", ("mol/s", "kg/s"), "flow")
    with pytest.raises(UnitError, match="gauge"):
        one_of("3 barg", ("Pa", "K"), "x")


def test_results_in_a_unit():
    assert from_si(293.15, "degC") == pytest.approx(20.0)
    assert math.isclose(from_si(1e5, "bar"), 1.0)
    with pytest.raises(UnitError, match="cannot be read"):
        from_si(1.0, "furlongs per jiffy")
