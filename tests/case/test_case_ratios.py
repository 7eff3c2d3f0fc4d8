"""Sizes by ratio against sums done by hand, and the ratios that come out whatever key sized the feeds.

Atomic weights, g/mol (IUPAC 2021, abridged): H 1.008, C 12.011, N 14.007, O 15.999, S 32.06.
"""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from pydantic import ValidationError

from gibbsmin.case.feed_ratios import feed_ratios
from gibbsmin.case.feed_schema import Feed
from gibbsmin.case.fields import RuleError
from gibbsmin.case.read import read_case
from gibbsmin.case.recipe import read_recipe
from gibbsmin.case.sizes import feed_units
from gibbsmin.errors import CaseError
from gibbsmin.practice.feeds.air import dry_air
from gibbsmin.thermo.database import load

AIR_O2 = dry_air()["O2"]
GAS = {"mole_percent": {"CH4": 93.0, "C2H6": 4.0, "N2": 2.0, "CO2": 1.0}, "amount": 100.0}
"""100 mol of it hold 101 mol of C that counts, and need 93 x 2 + 4 x 3.5 = 200 mol O2."""
METHANE = {"species": "CH4", "amount": 1.0}
COAL = {"analysis": {"ultimate_percent": {"C": 75.0, "H": 5.0, "O": 8.0, "N": 1.5, "S": 1.0, "ash": 9.5}}}


def recipes_of(feeds):
    return [read_recipe(name, Feed.model_validate(keys), load().get) for name, keys in feeds.items()]


def sized(recipes):
    return feed_units(recipes, {one.name: one.size for one in recipes})[0]


def units(**feeds):
    return dict(zip(feeds, sized(recipes_of(feeds)), strict=True))


def told(**feeds):
    recipes = recipes_of(feeds)
    return feed_ratios(recipes, sized(recipes))


def test_equivalence_ratio_is_that_of_burners():
    # phi 0.8 is an air ratio of 1.25: 250 mol O2
    air = {"composition": "air", "equivalence_ratio": 0.8}
    assert units(gas=GAS, air=air)["air"] == pytest.approx(250.0 / AIR_O2)


def test_oxygen_to_carbon_counts_molecules_of_this_feed():
    oxygen = {"mole_percent": {"O2": 99.5, "Ar": 0.5}, "oxygen_to_carbon": 0.6}
    assert units(gas=GAS, oxygen=oxygen)["oxygen"] == pytest.approx(60.6 / 0.995)


@pytest.mark.parametrize("key", [{"air_ratio": 1.2}, {"excess_air": 20.0}, {"equivalence_ratio": 1.0 / 1.2}])
def test_oxygen_of_a_second_oxidant_is_supply(key):
    # 1 CH4 needs 2 O2; at 1.2 the supply is 2.4, of which 0.5 is fed as oxygen and 1.9 is left for the air
    oxygen = {"species": "O2", "amount": 0.5}
    found = units(gas=METHANE, oxygen=oxygen, air={"composition": "air", **key})
    assert found["air"] == pytest.approx(1.9 / AIR_O2)


def test_oxygen_of_a_fuel_is_taken_off_its_need():
    # 50 CH4 need 100 O2, 2 are in the gas: 98 are left
    gas = {"mole_percent": {"CH4": 50.0, "CO2": 40.0, "O2": 2.0, "N2": 8.0}, "amount": 100.0}
    assert units(gas=gas, air={"composition": "air", "air_ratio": 1.2})["air"] == pytest.approx(1.2 * 98.0 / AIR_O2)


def test_what_burns_in_an_oxidant_is_need():
    # x mol of vent air with 21 % O2 and 1 % CH4 beside 1 CH4: 0.21 x = 1.1 (2 + 0.02 x), so x = 2.2/0.188
    air = {"mole_percent": {"O2": 21.0, "CH4": 1.0, "N2": 78.0}, "air_ratio": 1.1}
    assert units(gas=METHANE, air=air)["air"] == pytest.approx(2.2 / 0.188)


def test_what_is_frozen_takes_no_part():
    still = {"mole_percent": {"O2": 50.0, "CO": 25.0, "H2O": 25.0}, "amount": 7.0, "frozen": True}
    found = units(gas=METHANE, still=still, air={"composition": "air", "air_ratio": 1.0})
    assert found["air"] == pytest.approx(2.0 / AIR_O2)
    ratios = told(gas=METHANE, still=still, steam={"species": "H2O", "steam_to_carbon": 2.0})
    assert ratios == {"steam": pytest.approx({"steam_to_carbon": 2.0})}


def test_mole_and_mass_ratio():
    feeds = {"gas": {"species": "CH4", "amount": 2.0}, "other": {"species": "CO2", "amount": 1.0}}
    steam = {"species": "H2O", "mole_ratio": 3.0}
    assert units(**feeds, steam=steam)["steam"] == pytest.approx(9.0)
    assert units(**feeds, steam=steam | {"to": "gas"})["steam"] == pytest.approx(6.0)
    steam = {"species": "H2O", "mass_ratio": 0.5}
    both = 0.5 * (2.0 * 16.043 + 44.009) / 18.015
    assert units(**feeds, steam=steam)["steam"] == pytest.approx(both, rel=1e-4)
    assert units(**feeds, steam=steam | {"to": "other"})["steam"] == pytest.approx(0.5 * 44.009 / 18.015, rel=1e-4)


@pytest.mark.parametrize(
    ("basis", "share"),
    [({}, 1.0), ({"per": "as received"}, 1.0), ({"per": "dry"}, 0.92), ({"per": "dry ash-free"}, 0.8326)],
)
@pytest.mark.parametrize("oxides", [{}, {"ash_oxides_percent": {"SiO2": 60.0, "CaO": 40.0}}])
def test_mass_ratio_to_a_fuel_on_three_bases(basis, share, oxides):
    # as received 8 % moisture and 8.74 % ash: 100 kg hold 92 kg dry and 83.26 kg dry and ash-free
    percent = {"C": 69.0, "H": 4.6, "O": 7.36, "N": 1.38, "S": 0.92, "ash": 8.74}
    coal = {"analysis": {"ultimate_percent": percent, "moisture_percent": 8.0, **oxides}, "amount": "100 kg"}
    air = {"composition": "air", "amount": 9.0}
    oxygen = {"species": "O2", "mass_ratio": 0.85, "to": "coal", **basis}
    assert units(coal=coal, air=air, oxygen=oxygen)["oxygen"] * 0.031998 == pytest.approx(85.0 * share, rel=1e-4)


def test_a_ratio_to_a_feed_that_is_sized_by_a_ratio():
    # steam 202 mol for 101 C; then 0.1 mol of N2 for each mol of steam
    steam, purge = {"species": "H2O", "steam_to_carbon": 2.0}, {"species": "N2", "mole_ratio": 0.1, "to": "steam"}
    assert units(purge=purge, gas=GAS, steam=steam)["purge"] == pytest.approx(20.2)


BAD = {
    "two by need": (
        {"x": {"composition": "air", "air_ratio": 1.0}, "y": {"species": "O2", "equivalence_ratio": 1.0}},
        "air_ratio",
        "x and y are both sized",
    ),
    "too much already": (
        {"oxygen": {"species": "O2", "amount": 500.0}, "x": {"composition": "air", "excess_air": 50.0}},
        "excess_air",
        "oxygen alone gives an air ratio of 2.5, more than is asked for",
    ),
    "a rich mixture": (
        {"x": {"mole_percent": {"CH4": 50.0, "O2": 50.0}, "air_ratio": 1.0}},
        "air_ratio",
        "needs more oxygen to burn than it holds",
    ),
    "no oxygen": ({"x": {"species": "N2", "oxygen_to_carbon": 1.0}}, "oxygen_to_carbon", "no O2"),
    "an analysis": (
        {"coal": COAL | {"amount": "1 kg"}, "x": {"species": "H2O", "mole_ratio": 1.0}},
        "mole_ratio",
        "coal is known by an analysis and has no moles",
    ),
    "no such feed": (
        {"x": {"species": "H2O", "mole_ratio": 1.0, "to": "gsa"}},
        "to",
        "'gsa' is no feed; did you mean 'gas'",
    ),
    "itself": (
        {"x": {"species": "H2O", "mass_ratio": 1.0, "to": "x"}},
        "to",
        "is this feed itself; the others are gas",
    ),
    "nothing": (
        {"none": {"species": "CO", "amount": 0.0}, "x": {"species": "O2", "mass_ratio": 1.0, "to": "none"}},
        "mass_ratio",
        "no mass",
    ),
    "a circle": (
        {
            "x": {"species": "O2", "mole_ratio": 2.0, "to": "y"},
            "y": {"species": "N2", "mole_ratio": 0.5, "to": "x"},
        },
        "mole_ratio",
        "contradict",
    ),
    "a circle that grows": (
        {"x": {"species": "O2", "mole_ratio": 2.0}, "y": {"species": "N2", "mole_ratio": 2.0}},
        "mole_ratio",
        "contradict|no amount",
    ),
}


@pytest.mark.parametrize("name", BAD)
def test_ratios_that_cannot_be(name):
    feeds, key, words = BAD[name]
    with pytest.raises(RuleError, match=words) as caught:
        units(gas=GAS, **feeds)
    assert caught.value.key == ("x", key)


@pytest.mark.parametrize(
    ("keys", "key", "words"),
    [
        ({"steam_to_carbon": 1.0, "to": "gas"}, "to", "to goes with mole_ratio or mass_ratio"),
        ({"mole_ratio": 1.0, "per": "dry"}, "per", "per goes with mass_ratio"),
        ({"mole_ratio": 1.0, "mass_ratio": 1.0}, "mass_ratio", "exactly one of flow, amount, steam_to_carbon"),
    ],
)
def test_keys_that_need_another(keys, key, words):
    with pytest.raises(ValidationError, match=words) as caught:
        Feed.model_validate({"species": "H2O", **keys})
    assert caught.value.errors()[0]["ctx"]["error"].key == (key,)


def varied(write, feed, key, values):
    first, last = values
    return write(
        ('species = "H2O"\nsteam_to_carbon = 3.0', f"{feed}\n{key} = {last}"),
        ("held.temperature", f"feeds.steam.{key}"),
        ('"800 degC"', str(first)),
        ('"900 degC"', str(last)),
    )


@pytest.mark.parametrize("key", ["steam_to_carbon", "mole_ratio", "mass_ratio"])
def test_every_ratio_of_steam_can_be_varied(write, key):
    found = read_case(varied(write, 'species = "H2O"', key, (1.0, 3.0))).units[:, 1]
    assert found / found[1] == pytest.approx([0.5, 1.0, 1.5])


@pytest.mark.parametrize(
    ("key", "values", "air_ratio"),
    [
        ("air_ratio", (1.0, 2.0), [1.0, 1.5, 2.0]),
        ("excess_air", (0.0, 100.0), [1.0, 1.5, 2.0]),
        ("equivalence_ratio", (0.5, 1.0), [2.0, 4.0 / 3.0, 1.0]),
        ("oxygen_to_carbon", (1.0, 2.0), [1.01 / 2.0, 1.515 / 2.0, 2.02 / 2.0]),  # 1.01 C and a need of 2 O2 a mole
    ],
)
def test_every_size_of_air_can_be_varied(write, key, values, air_ratio):
    found = read_case(varied(write, 'composition = "air"', key, values)).units
    assert found[:, 1] * AIR_O2 / (2.0 * found[:, 0]) == pytest.approx(air_ratio)


def test_an_equivalence_ratio_of_zero_is_refused(write):
    with pytest.raises(CaseError, match=r"expected more than 0(\.0)?, got 0"):
        read_case(write(('species = "H2O"\nsteam_to_carbon = 3.0', 'composition = "air"\nequivalence_ratio = 0.0')))
    with pytest.raises(CaseError, match="0 is too low; expected more than 0"):
        read_case(varied(write, 'composition = "air"', "equivalence_ratio", (0, 1.0)))


@given(
    st.sampled_from(["air_ratio", "excess_air", "equivalence_ratio"]),
    st.floats(0.3, 5.0),
    st.floats(0.0, 0.4),
    st.floats(0.0, 0.05),
    st.floats(0.0, 3.0),
)
def test_the_air_ratio_is_what_the_totals_say(key, air_ratio, pure, in_gas, steam):
    """Recomputed by hand: O2 of both oxidants over 2 CH4 + CO/2 less the O2 in the gas."""
    value = {"air_ratio": air_ratio, "excess_air": 100.0 * (air_ratio - 1.0), "equivalence_ratio": 1.0 / air_ratio}[key]
    feeds = {
        "gas": {"amounts": {"CH4": 0.8, "CO": 0.2, "O2": in_gas}},
        "steam": {"species": "H2O", "steam_to_carbon": steam},
        "oxygen": {"species": "O2", "amount": pure},
        "air": {"composition": "air", key: value},
    }
    found = units(**feeds)
    assert found["air"] * AIR_O2 + pure == pytest.approx(air_ratio * (1.7 - in_gas))
    ratios = told(**feeds)
    whole = ratios.get("all feeds", ratios.get("air", {}))
    assert whole["air_ratio"] == pytest.approx(air_ratio)
    assert whole["excess_air"] == pytest.approx(air_ratio - 1.0, abs=1e-9)
    assert whole["equivalence_ratio"] == pytest.approx(1.0 / air_ratio)


def test_ratios_that_come_out_whatever_sized_the_feeds():
    # 202 mol steam for 101 C, 60.6 mol O2 of the 200 that the gas needs
    steam, oxygen = {"species": "H2O", "amount": 202.0}, {"species": "O2", "amount": 60.6}
    ratios = told(gas=GAS, steam=steam, oxygen=oxygen)
    assert ratios["steam"] == pytest.approx({"steam_to_carbon": 2.0})
    air = {"air_ratio": 0.303, "excess_air": -0.697, "equivalence_ratio": 1.0 / 0.303}
    assert ratios["oxygen"] == pytest.approx(air | {"oxygen_to_carbon": 0.6})
    assert ratios["all feeds"] == pytest.approx(air | {"oxygen_to_carbon": 0.6, "steam_to_carbon": 2.0})
    assert "gas" not in ratios


def test_steam_to_carbon_of_all_feeds_counts_the_water_of_the_gas():
    gas = {"mole_percent": {"CH4": 50.0, "H2O": 50.0}, "amount": 2.0}
    ratios = told(gas=gas, steam={"species": "H2O", "steam_to_carbon": 2.0})
    assert ratios["steam"]["steam_to_carbon"] == pytest.approx(2.0)
    assert ratios["all feeds"]["steam_to_carbon"] == pytest.approx(3.0)


def test_water_is_no_ratio_where_air_suffices():
    assert set(
        told(gas=GAS, steam={"species": "H2O", "amount": 5.0}, air={"composition": "air", "air_ratio": 1.1})
    ) == {"air"}


def test_ratios_of_what_has_no_usual_product_are_left_out():
    assert told(gas={"species": "WF6", "amount": 1.0}, air={"composition": "air", "amount": 1.0}) == {}


def test_carbon_of_a_fuel_by_analysis_counts():
    # 1 kg with 75 % C holds 750/12.011 mol
    ratios = told(coal=COAL | {"amount": "1 kg"}, steam={"species": "H2O", "amount": 10.0})
    assert ratios["steam"]["steam_to_carbon"] == pytest.approx(10.0 * 12.011 / 750.0)


def test_arrays_of_ratios_are_solved_state_by_state():
    recipes = recipes_of({"gas": GAS, "air": {"composition": "air", "equivalence_ratio": 1.0}})
    found = feed_units(recipes, {"gas": 100.0, "air": np.array([0.5, 1.0, 2.0])})
    assert found[:, 1] * AIR_O2 == pytest.approx([400.0, 200.0, 100.0])
