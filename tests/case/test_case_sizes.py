"""Compositions and sizes of feeds against sums done by hand.

Atomic weights, g/mol (IUPAC 2021, abridged): H 1.008, C 12.011, N 14.007, O 15.999, S 32.06.
"""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from pydantic import ValidationError

from gibbsmin.case.feed_schema import Feed
from gibbsmin.case.feed_states import FeedStates
from gibbsmin.case.fields import RuleError
from gibbsmin.case.recipe import read_recipe
from gibbsmin.case.sizes import feed_units, read_basis
from gibbsmin.errors import FeedError
from gibbsmin.practice.feeds.ratios import counted_carbon, oxygen_need
from gibbsmin.thermo.database import load

AIR_O2 = 0.209476  # mole fraction of O2, ISO 2533:1975


def recipe(name="gas", **keys):
    return read_recipe(name, Feed.model_validate(keys), load().get)


def named(found):
    return {record.name: n for record, n in found.species.items()}


def units(**feeds):
    recipes = [recipe(name, **keys) for name, keys in feeds.items()]
    return dict(zip(feeds, feed_units(recipes, {one.name: one.size for one in recipes})[0], strict=True))


NATURAL_GAS = {"mole_percent": {"CH4": 93.0, "C2H6": 4.0, "N2": 2.0, "CO2": 1.0}, "amount": 100.0}


def test_mole_percent_is_normalised():
    assert named(recipe(mole_percent={"CH4": 90.0, "N2": 10.4}, amount=1.0)) == pytest.approx(
        {"CH4": 90.0 / 100.4, "N2": 10.4 / 100.4}
    )


def test_volume_percent_is_mole_percent():
    shares = {"CH4": 60.0, "CO2": 40.0}
    assert named(recipe(volume_percent=shares, amount=1.0)) == named(recipe(mole_percent=shares, amount=1.0))


@pytest.mark.parametrize("flow", ["100 m3/h", "3 L/min"])
def test_a_volume_of_gas_without_conditions_is_refused(flow):
    with pytest.raises(ValidationError, match=r"only with its conditions: Nm3 \(0 degC, 101325 Pa\), Sm3 \(15 degC"):
        Feed.model_validate({"species": "CH4", "flow": flow})


def test_normal_and_standard_volume_differ_by_their_temperatures():
    normal, standard = (recipe(species="CH4", flow=f"1 {unit}/h").size for unit in ("Nm3", "Sm3"))
    assert normal / standard == pytest.approx(288.15 / 273.15)
    # molar volume of the ideal gas at 0 degC and 101325 Pa, m3/mol (CODATA 2018)
    assert 1.0 / (3600.0 * normal) == pytest.approx(22.41396954e-3, rel=1e-9)


def test_mass_fractions_become_moles():
    # 0.2 kg CH4 is 0.2/0.016043 = 12.4665 mol, 0.8 kg O2 is 0.8/0.031998 = 25.0016 mol
    found = recipe(mass_fraction={"CH4": 0.2, "O2": 0.8}, amount="1 kg")
    assert found.size * named(found)["CH4"] == pytest.approx(0.2 / 0.016043, rel=1e-9)
    assert found.size * named(found)["O2"] == pytest.approx(0.8 / 0.031998, rel=1e-9)
    assert found.size * found.mass == pytest.approx(1.0)


def test_flows_in_moles_mass_and_normal_volume():
    # CO2 44.009 g/mol: 44.009 kg/h is 1 kmol/h, and so is 22.41396954 Nm3/h
    sizes = [recipe(species="CO2", flow=flow).size for flow in ("1 kmol/h", "44.009 kg/h", "22.41396954 Nm3/h")]
    assert sizes == pytest.approx([1000.0 / 3600.0] * 3, rel=1e-8)


def test_amounts_may_mix_moles_and_masses():
    found = recipe(amounts={"H2": 2.0, "O2": "31.998 g"})
    assert found.size == pytest.approx(3.0)
    assert named(found) == pytest.approx({"H2": 2 / 3, "O2": 1 / 3})


def test_an_ultimate_analysis_with_moisture_and_ash():
    # 1 kg: 0.60 C, 0.05 H, 0.15 O, 0.10 water, 0.10 quartz (60.083 g/mol)
    percent = {"C": 60.0, "H": 5.0, "O": 15.0, "H2O(l)": 10.0, "SiO2(s)": 10.0}
    found = recipe(analysis={"ultimate_percent": percent}, flow="3.6 t/h")
    assert found.size == pytest.approx(1.0)  # kg/s
    assert found.mass == pytest.approx(1.0)
    assert found.atoms == pytest.approx({"C": 600 / 12.011, "H": 50 / 1.008, "O": 150 / 15.999})
    assert named(found) == pytest.approx({"H2O(l)": 100 / 18.015, "SiO2(s)": 100 / 60.083})
    assert found.elements["H"] == pytest.approx(50 / 1.008 + 2 * 100 / 18.015)
    assert found.gas == 0.0


def states_of(found):
    return FeedStates((found,), (), {}, 1)


def test_enthalpy_of_a_feed_at_its_temperature():
    # Water vapour at 298.15 K: its enthalpy of formation, -241.826 kJ/mol (CODATA key values, Cox et al. 1989)
    water = states_of(recipe(species="H2O", amount=1.0, temperature=298.15))
    assert water.enthalpy == pytest.approx([-241826.0], abs=40.0)
    assert water.internal_energy == pytest.approx(water.enthalpy - 8.314462618 * 298.15)
    assert states_of(recipe(species="H2O", amount=1.0)).enthalpy is None


def test_dry_air():
    found = recipe(composition="air", amount=1.0)
    assert found.mass == pytest.approx(28.9644e-3, rel=5e-5)  # ISO 2533:1975, with the atomic weights of its day
    assert named(found)["O2"] == pytest.approx(AIR_O2)


def test_steam_to_carbon_counts_hydrocarbon_carbon_only():
    # 93 CH4 + 4 C2H6 give 93 + 2 x 4 = 101 C per 100 mol; the C of 1 CO2 is not counted
    assert units(gas=NATURAL_GAS, steam={"species": "H2O", "steam_to_carbon": 3.0})["steam"] == pytest.approx(303.0)


def test_steam_to_carbon_of_a_feed_that_is_not_all_steam():
    wet = {"mole_percent": {"H2O": 80.0, "N2": 20.0}, "steam_to_carbon": 2.0}
    assert units(gas=NATURAL_GAS, steam=wet)["steam"] == pytest.approx(202.0 / 0.8)


@pytest.mark.parametrize(
    ("name", "carbon"),
    [("CH4", 1), ("C2H6", 2), ("C2H5OH", 2), ("C(s):graphite", 1), ("CO", 0), ("CO2", 0), ("COS", 0)],
)
def test_carbon_that_counts(name, carbon):
    assert counted_carbon(load().get(name).elements) == carbon


@pytest.mark.parametrize(
    ("elements", "need"),
    [
        ({"C": 1, "H": 4}, 2.0),  # CH4 + 2 O2 = CO2 + 2 H2O
        ({"C": 2, "H": 6, "O": 1}, 3.0),  # C2H5OH + 3 O2 = 2 CO2 + 3 H2O
        ({"C": 1, "O": 1}, 0.5),
        ({"C": 1, "O": 2}, 0.0),
        ({"H": 2, "S": 1}, 1.5),  # H2S + 1.5 O2 = SO2 + H2O
        ({"N": 1, "H": 3}, 0.75),  # NH3 + 0.75 O2 = 0.5 N2 + 1.5 H2O
        ({"C": 2, "H": 3, "Cl": 1}, 2.5),  # C2H3Cl + 2.5 O2 = 2 CO2 + H2O + HCl
        ({"Fe": 1, "S": 2}, 2.75),  # 4 FeS2 + 11 O2 = 2 Fe2O3 + 8 SO2
        ({"Si": 1, "O": 2}, 0.0),
        ({"Ca": 1, "C": 1, "O": 3}, 0.0),
        ({"K": 1, "Cl": 1}, 0.0),
        ({"O": 2}, -1.0),
    ],
)
def test_oxygen_need_from_the_equation_of_combustion(elements, need):
    assert oxygen_need(elements) == pytest.approx(need)


def test_oxygen_need_without_a_usual_product():
    with pytest.raises(FeedError, match="not defined for U,"):
        oxygen_need({"U": 1.0, "H": 3.0})


def test_air_ratio_and_excess_air():
    # need of 100 mol gas: 93 x 2 + 4 x 3.5 = 200 mol O2
    expected = 1.15 * 200.0 / AIR_O2
    assert units(gas=NATURAL_GAS, air={"composition": "air", "air_ratio": 1.15})["air"] == pytest.approx(expected)
    assert units(gas=NATURAL_GAS, air={"composition": "air", "excess_air": 15.0})["air"] == pytest.approx(expected)


def test_air_for_coal():
    # mol O2 per kg: 750/12.011 + 50/(4 x 1.008) + 10/32.06 - 80/(2 x 15.999) = 72.656
    percent = {"C": 75.0, "H": 5.0, "O": 8.0, "N": 1.5, "S": 1.0, "SiO2(s)": 9.5}
    coal = {"analysis": {"ultimate_percent": percent}, "amount": "1 kg"}
    need = 750 / 12.011 + 50 / 4.032 + 10 / 32.06 - 80 / 31.998
    assert units(coal=coal, air={"composition": "air", "air_ratio": 1.2})["air"] == pytest.approx(1.2 * need / AIR_O2)


def test_ratios_that_depend_on_each_other():
    # a steam feed with 1 % CH4 needs air too, and its own carbon does not count for itself
    steam = {"mole_percent": {"H2O": 99.0, "CH4": 1.0}, "steam_to_carbon": 2.0}
    found = units(gas={"species": "CH4", "amount": 1.0}, steam=steam, air={"composition": "air", "air_ratio": 0.5})
    assert found["steam"] == pytest.approx(2.0 / 0.99)
    assert found["air"] == pytest.approx(0.5 * 2.0 * (1.0 + 0.01 * 2.0 / 0.99) / AIR_O2)


def test_sizes_of_many_states_at_once():
    recipes = [recipe("gas", **NATURAL_GAS), recipe("steam", species="H2O", steam_to_carbon=3.0)]
    found = feed_units(recipes, {"gas": np.array([1.0, 2.0, 3.0]), "steam": np.array([0.0, 1.0, 2.0])})
    assert found == pytest.approx(np.array([[1.0, 0.0], [2.0, 2.02], [3.0, 6.06]]))


@given(st.floats(1e-3, 1e3), st.floats(0.0, 10.0), st.floats(0.0, 5.0), st.floats(0.1, 1.0), st.floats(0.0, 1.0))
def test_ratios_hold_in_what_comes_out(size, steam_ratio, air_ratio, methane, carbon_monoxide):
    gas = {"amounts": {"CH4": size * methane, "CO": size * carbon_monoxide}}
    steam = {"species": "H2O", "steam_to_carbon": steam_ratio}
    found = units(gas=gas, steam=steam, air={"composition": "air", "air_ratio": air_ratio})
    assert found["steam"] == pytest.approx(steam_ratio * size * methane)
    assert found["air"] * AIR_O2 == pytest.approx(air_ratio * size * (2.0 * methane + 0.5 * carbon_monoxide))


@pytest.mark.parametrize(
    ("feeds", "key", "words"),
    [
        ({"gas": NATURAL_GAS, "x": {"species": "N2", "steam_to_carbon": 1.0}}, ("x", "steam_to_carbon"), "no H2O"),
        ({"gas": NATURAL_GAS, "x": {"species": "H2O", "air_ratio": 1.0}}, ("x", "air_ratio"), "no O2"),
        (
            {"gas": {"species": "CO", "amount": 1.0}, "x": {"species": "H2O", "steam_to_carbon": 1.0}},
            ("x", "steam_to_carbon"),
            "no carbon that counts",
        ),
        (
            {"gas": {"species": "CO2", "amount": 1.0}, "x": {"composition": "air", "air_ratio": 1.0}},
            ("x", "air_ratio"),
            "no need of oxygen",
        ),
        (
            {"gas": {"species": "CH4", "amount": 0.0}, "x": {"composition": "air", "air_ratio": 1.0}},
            ("x", "air_ratio"),
            "no need of oxygen",
        ),
        (
            {
                "gas": NATURAL_GAS,
                "x": {"composition": "air", "air_ratio": 1.0},
                "y": {"species": "O2", "excess_air": 1.0},
            },
            ("x", "air_ratio"),
            "x and y are both sized",
        ),
        (
            {"gas": {"species": "WF6", "amount": 1.0}, "x": {"composition": "air", "air_ratio": 1.0}},
            ("x", "air_ratio"),
            "not defined for W",
        ),
    ],
)
def test_ratios_with_nothing_to_hold_on_to(feeds, key, words):
    with pytest.raises(RuleError, match=words) as caught:
        units(**feeds)
    assert caught.value.key == key


@pytest.mark.parametrize(
    ("keys", "key", "words"),
    [
        ({"species": "CH5", "amount": 1.0}, ("species",), "no species 'CH5'"),
        ({"mole_percent": {"CH4": 50.0, "CHO4": 50.0}, "amount": 1.0}, ("mole_percent", "CHO4"), "no species"),
        ({"mole_percent": {"CH4": 50.0, "methane": 50.0}, "amount": 1.0}, ("mole_percent", "methane"), "named before"),
        ({"amounts": {"CH4": 0.0}}, ("amounts",), "above zero"),
        ({"volume_percent": {"CH4": 90.0, "H2O(l)": 10.0}, "amount": 1.0}, ("volume_percent", "H2O(l)"), "of a gas"),
        ({"analysis": {"ultimate_percent": {"C": 100.0}}, "flow": "1 kmol/h"}, ("flow",), "give the size as a mass"),
    ],
)
def test_compositions_that_cannot_be(keys, key, words):
    with pytest.raises(RuleError, match=words) as caught:
        recipe(**keys)
    assert caught.value.key == key


def test_amounts_or_flows():
    def basis(**feeds):
        return read_basis({name: Feed.model_validate(keys) for name, keys in feeds.items()})

    steam = {"species": "H2O", "steam_to_carbon": 1.0}
    assert basis(steam=steam, gas={"species": "CH4", "flow": "3 t/h"}) == "mol/s"
    assert basis(steam=steam, gas={"amounts": {"CH4": "1 kg"}}) == "mol"
    with pytest.raises(RuleError, match="at least one needs a flow or an amount"):
        basis(steam=steam)
    with pytest.raises(RuleError, match="some are flows"):
        basis(gas={"species": "CH4", "flow": 1.0}, oil={"species": "C2H6", "amount": 1.0})
    with pytest.raises(RuleError, match="some are flows"):
        basis(gas={"amounts": {"CH4": 1.0, "H2": "1 kmol/h"}})
