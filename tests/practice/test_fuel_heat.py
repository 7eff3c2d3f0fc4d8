"""Heating values of fuels: correlations against measured substances, conversions against the standards' own forms."""

import math
import re

import pytest
from hypothesis import given
from hypothesis import strategies as st

from gibbsmin.errors import FeedError
from gibbsmin.practice.feeds.fuel_analysis import Analysis
from gibbsmin.practice.feeds.fuel_correlations import CORRELATIONS
from gibbsmin.practice.feeds.fuel_heat import Stated, heat_of_fuel, to_higher, to_lower

# Mass percent, dry; made up, in the range of bituminous coal and of wood.
COAL = Analysis({"C": 75.0, "H": 5.0, "O": 8.0, "N": 1.5, "S": 1.0, "ash": 9.5})
WOOD = Analysis(
    {"C": 50.0, "H": 6.0, "O": 43.0, "N": 0.3, "S": 0.05, "ash": 0.65}, volatile_matter=83.35, fixed_carbon=16.0
)
OIL = Analysis(
    {"C": 86.0, "H": 11.4, "O": 0.0, "N": 0.5397, "S": 2.0 / 0.995, "ash": 0.05 / 0.995}, moisture=0.5, density=960.0
)

# MJ/kg, worked by hand from the printed coefficients (for their sources see the table of correlations).
BY_HAND = [
    ("Channiwala and Parikh", COAL, 31.124), ("Channiwala and Parikh", WOOD, 20.065),
    ("Dulong", COAL, 31.239), ("Dulong", WOOD, 17.822),
    ("Boie", COAL, 31.493), ("Boie", WOOD, 19.809),
    ("Boie, lower", COAL, 30.155), ("Boie, lower", WOOD, 18.430),
    ("Milne", COAL, 30.968), ("Milne", WOOD, 19.779),
    ("Institute of Gas Technology", COAL, 30.979), ("Institute of Gas Technology", WOOD, 19.811),
    ("Mott and Spooner", COAL, 31.229), ("Mott and Spooner", WOOD, 20.071),
    ("Friedl", WOOD, 19.894), ("Sheng and Azevedo", WOOD, 19.901), ("Parikh, proximate", WOOD, 18.647),
    ("ISO 8217", OIL, 43.142), ("ISO 8217, lower", OIL, 40.747),
]  # fmt: skip


@pytest.mark.parametrize(("name", "fuel", "value"), BY_HAND)
def test_correlations_by_hand(name, fuel, value):
    assert CORRELATIONS[name].estimate(fuel) / 1e6 == pytest.approx(value, abs=1e-3)


def test_every_correlation_is_checked():
    assert {name for name, _, _ in BY_HAND} == set(CORRELATIONS)


# Mass percent of C, H, O by formula, and the higher heating value, MJ/kg: enthalpies of combustion of the CRC Handbook
# of Chemistry and Physics (from memory) over the molar mass; cellulose 17.3 to 17.6 (common practice).
SUBSTANCES = {
    "methane": ((74.87, 25.13, 0.0), 890.8 / 16.043),
    "benzene": ((92.25, 7.74, 0.0), 3267.6 / 78.114),
    "ethanol": ((52.14, 13.13, 34.73), 1366.8 / 46.069),
    "cellulose": ((44.44, 6.22, 49.34), 17.45),
}


@pytest.mark.parametrize("name", SUBSTANCES)
def test_the_default_on_measured_substances(name):
    percent, measured = SUBSTANCES[name]
    fuel = Analysis(dict(zip("CHO", percent, strict=True)))
    assert CORRELATIONS["Channiwala and Parikh"].estimate(fuel) / 1e6 == pytest.approx(measured, rel=0.025)


def test_lower_of_methane():
    """55.5 and 50.0 MJ/kg (textbook values, from memory)."""
    methane = Analysis({"C": 74.87, "H": 25.13})
    assert to_lower(55.5e6, methane, "dry") == pytest.approx(50.0e6, rel=1e-3)


def test_moist_coal_from_higher_to_lower():
    """By hand, 8 % of moisture: 31.30 x 0.92 = 28.796; less 2.4417 (8.936 x 4.6 + 8)/100 = 1.199: 27.597 MJ/kg."""
    coal = Analysis(COAL.dry, 8.0)
    found = heat_of_fuel(coal, Stated(31.30e6, basis="dry"))
    assert found.higher == pytest.approx(28.796e6, rel=1e-12)
    assert found.lower == pytest.approx(27.597e6, abs=1e3)
    assert found.stated
    assert found.estimate == pytest.approx(0.92 * 31.124e6, abs=1e3)
    assert found.notes == ()


dry_fuels = st.fixed_dictionaries({"C": st.floats(20.0, 85.0), "H": st.floats(0.5, 12.0), "O": st.floats(0.0, 50.0),
                                   "N": st.floats(0.0, 5.0), "ash": st.floats(0.0, 50.0)})  # fmt: skip


@given(dry_fuels, st.floats(0.0, 60.0), st.floats(5e6, 45e6))
def test_bomb_values_by_iso_1928(parts, moisture, bomb):
    """(q_v,gr,d - 212 H - 0.8 (O + N))(1 - 0.01 M) - 24.43 M, J/g (ISO 1928, from memory), to its rounding."""
    scale = 100.0 / sum(parts.values())
    fuel = Analysis({name: percent * scale for name, percent in parts.items()}, moisture)
    H, O, N = (fuel.percent(symbol) for symbol in "HON")
    standard = (bomb / 1e3 - 212.0 * H - 0.8 * (O + N)) * (1.0 - 0.01 * moisture) - 24.43 * moisture
    found = heat_of_fuel(fuel, Stated(bomb, basis="dry", at="constant volume"))
    assert found.lower / 1e3 == pytest.approx(standard, abs=5.0)


bases = st.sampled_from(["as received", "air-dried", "dry", "dry ash-free"])
held = st.sampled_from(["constant pressure", "constant volume"])


@given(bases, bases, held, st.booleans())
def test_one_heat_however_it_is_stated(basis, other, at, lower):
    """A value taken from one basis and stated on another, or as the lower one, is the same heat."""
    fuel = Analysis(COAL.dry, 12.0, 4.0)
    first = heat_of_fuel(fuel, Stated(30e6, lower, basis, at))
    higher = first.higher / fuel.per_kilogram(other)
    for again in (Stated(higher, False, other), Stated(to_lower(higher, fuel, other), True, other)):
        assert heat_of_fuel(fuel, again).higher == pytest.approx(first.higher, rel=1e-12)
    assert to_higher(to_lower(30e6, fuel, other), fuel, other) == pytest.approx(30e6, rel=1e-12)
    assert first.lower < first.higher


def test_a_lower_value_at_constant_volume():
    """Water evaporates against nothing there: 2.4417 MJ/kg less RT/M of 0.1376 MJ/kg, by hand."""
    water = 8.936 * 5.0 / 100.0
    gross = Stated(31.30e6, basis="dry", at="constant volume")
    net = Stated(31.30e6 - water * (2.4417e6 - 0.1376e6), True, "dry", "constant volume")
    assert heat_of_fuel(COAL, net).higher == pytest.approx(heat_of_fuel(COAL, gross).higher, abs=100.0)


def test_a_stated_value_far_from_the_correlation_is_told():
    """Dry percentages with a value as received: 8 % too low."""
    found = heat_of_fuel(COAL, Stated(0.92 * 31.1e6, basis="dry"))
    assert found.higher == pytest.approx(0.92 * 31.1e6)
    (note,) = found.notes
    assert "8.1 % below that of Channiwala and Parikh 2002" in note


@pytest.mark.parametrize(
    ("name", "fuel", "words"),
    [
        ("Sheng and Azevedo", COAL, r"biomass: O daf 8\.84 \(range 30 to 60\)"),
        ("Dulong", WOOD, r"coal: O daf 43\.28 \(range 0 to 30\), O 43 \(range 0 to 15\)"),
        ("Channiwala and Parikh", Analysis({"C": 98.0, "H": 0.2, "ash": 1.8}), r"C 98 .*H 0\.2 "),
    ],
)
def test_outside_the_range_of_a_correlation(name, fuel, words):
    (note,) = heat_of_fuel(fuel, name=name).notes
    assert re.search(words, note)


def test_inside_the_range_nothing_is_said():
    assert heat_of_fuel(WOOD).notes == ()
    assert heat_of_fuel(WOOD, name="Milne").notes == ()


def test_what_a_correlation_lacks():
    with pytest.raises(FeedError, match=r"Parikh et al\. 2005 .* needs volatile matter and fixed carbon of the fuel"):
        heat_of_fuel(COAL, name="Parikh, proximate")
    compared = heat_of_fuel(COAL, Stated(31e6), "ISO 8217")  # stated, so only the comparison is missing
    assert compared.higher == 31e6
    assert math.isnan(compared.estimate)


def test_a_fuel_without_heat():
    with pytest.raises(FeedError, match="finds no heat in this fuel"):
        heat_of_fuel(Analysis({"C": 5.0, "H": 0.5, "O": 49.0, "ash": 45.5}))
