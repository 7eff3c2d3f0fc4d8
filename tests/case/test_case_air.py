"""Air and other gases as they are fed: water, altitude, enrichment, and what is refused, with its key."""

import pytest
from chemicals.iapws import iapws95_Psat
from hypothesis import given
from hypothesis import strategies as st
from pydantic import ValidationError

from gibbsmin.case.feed_schema import Feed
from gibbsmin.case.fields import RuleError
from gibbsmin.case.read import read_case
from gibbsmin.case.recipe import read_recipe
from gibbsmin.errors import CaseError
from gibbsmin.report.explained import explained
from gibbsmin.thermo.database import load

ATM = 101325.0


def recipe(**keys):
    return read_recipe("air", Feed.model_validate({"amount": 1.0, **keys}), load().get)


def named(**keys):
    return {record.name: n for record, n in recipe(**keys).species.items()}


def air(**keys):
    return named(composition="air", **keys)


@pytest.mark.parametrize(
    ("keys", "pressure"),
    [
        ({"humidity_temperature": "15 degC"}, ATM),
        ({"temperature": "15 degC"}, ATM),
        ({"temperature": "300 degC", "humidity_temperature": 288.15}, ATM),
        ({"temperature": "15 degC", "pressure": "0.9 bar"}, 9e4),
        ({"temperature": "15 degC", "pressure": "20 bar", "humidity_pressure": "0.95 bar"}, 9.5e4),
        ({"temperature": "15 degC", "altitude": "1000 m"}, 89874.6),
        ({"temperature": "15 degC", "altitude": "1 km", "pressure": "20 bar"}, 89874.6),
    ],
)
def test_relative_humidity_where_it_was_measured(keys, pressure):
    # an ideal gas: the mole fraction is 0.6 p_s/p, p_s of IAPWS-95
    found = air(relative_humidity="60 %", **keys)
    assert found["H2O"] == pytest.approx(0.6 * iapws95_Psat(288.15) / pressure, rel=1e-4)
    assert sum(found.values()) == pytest.approx(1.0)
    assert found["O2"] / found["N2"] == pytest.approx(0.209476 / 0.78087)


def test_four_ways_to_say_one_humidity():
    # 15 degC, 60 %, 101325 Pa: dew point 7.31 degC, 6.346 g/kg, 1.0100 mole % (by hand with eq. (1) of practice/air)
    expected = air(relative_humidity=0.6, temperature="15 degC")["H2O"]
    assert air(dew_point="7.308 degC")["H2O"] == pytest.approx(expected, rel=2e-5)
    assert air(humidity_ratio="6.346 g/kg")["H2O"] == pytest.approx(expected, rel=2e-4)
    assert air(moisture_mole_percent=1.01002)["H2O"] == pytest.approx(expected, rel=1e-5)


def test_wet_bulb_of_the_worked_example():
    # ASHRAE Handbook of Fundamentals, Psychrometrics: 40 degC, wet bulb 20 degC, 101.325 kPa: 6.5 g/kg; from memory
    x = air(wet_bulb="20 degC", temperature="40 degC")["H2O"]
    assert 18.015 / 28.964 * x / (1.0 - x) == pytest.approx(6.5e-3, abs=0.1e-3)


def test_a_process_gas_that_was_analysed_dry():
    gas = {"CO2": 12.0, "O2": 3.0, "N2": 85.0}
    found = named(volume_percent=gas, moisture_mole_percent=20.0)
    assert found == pytest.approx({"CO2": 0.096, "O2": 0.024, "N2": 0.68, "H2O": 0.2})
    assert named(mass_percent={"N2": 100.0}, dew_point="-40 degC")["H2O"] == pytest.approx(12.84 / ATM, rel=2e-3)
    # 12.84 Pa over ice at -40 degC: ASHRAE, table of saturated ice (0.01285 kPa); from memory


def test_a_mass_flow_of_moist_air_counts_its_water():
    found = recipe(composition="air", moisture_mole_percent=2.0, amount="1 kg")
    assert found.size * found.mass == pytest.approx(1.0)
    dry = recipe(composition="air").mass
    assert found.mass == pytest.approx(0.98 * dry + 0.02 * 18.015e-3, rel=1e-5)


def test_altitude_gives_the_pressure_of_a_feed_that_has_none():
    # ISO 2533:1975, 1000 m: 898.746 hPa
    assert recipe(composition="air", altitude="1000 m").pressure == pytest.approx(89874.6, rel=1e-5)
    assert recipe(composition="air", altitude="3280.84 ft").pressure == pytest.approx(89874.6, rel=1e-5)
    found = recipe(composition="air", altitude="1000 m", pressure="2 bar", dew_point="5 degC")
    assert found.pressure == 2e5
    assert recipe(composition="air").pressure is None


def test_carbon_dioxide_of_today():
    assert air(carbon_dioxide_in_air="420 ppm")["CO2"] == pytest.approx(4.2e-4)
    assert air()["CO2"] == pytest.approx(3.14e-4)


def test_enriched_air_and_its_water():
    # 0.03 of water for a mole of dry air; enriched to 60.4738 %, half of the dry gas is air: 0.015 for a mole of it
    half = 100.0 * (1.0 + 0.209476) / 2.0
    keys = {"humidity_ratio": 0.03 * 18.015 / 28.9644, "oxygen_mole_percent": half}
    found = air(**keys)
    assert found["H2O"] == pytest.approx(0.015 / 1.015, rel=1e-4)
    assert found["O2"] / (1.0 - found["H2O"]) == pytest.approx(half / 100.0)
    whole = air(oxygen_mole_percent=half, moisture_mole_percent=3.0)
    assert whole["H2O"] == pytest.approx(0.03)


def test_enriched_with_oxygen_that_is_not_pure():
    # dry air and 95/3.5/1.5 until 30 % O2: share of oxygen (0.30 - 0.209476)/(0.95 - 0.209476) = 0.122243
    found = air(oxygen_mole_percent=30.0, enriched_with={"O2": 95.0, "Ar": 3.5, "N2": 1.5})
    assert found["O2"] == pytest.approx(0.30)
    assert found["Ar"] == pytest.approx(0.877757 * 0.00934 + 0.122243 * 0.035, rel=1e-5)


@given(st.floats(21.0, 95.0), st.floats(0.0, 1.0), st.floats(275.0, 310.0))
def test_enriched_moist_air_sums_up(oxygen, humidity, T):
    found = air(oxygen_mole_percent=oxygen, relative_humidity=humidity, humidity_temperature=T)
    assert sum(found.values()) == pytest.approx(1.0)
    assert found["O2"] / (1.0 - found["H2O"]) == pytest.approx(oxygen / 100.0)


def test_a_frozen_gas_may_be_moist():
    found = named(mole_percent={"N2": 100.0}, moisture_mole_percent=10.0, frozen=True)
    assert sorted(found.values()) == pytest.approx([0.1, 0.9])


@pytest.mark.parametrize(
    ("keys", "key", "words"),
    [
        ({"relative_humidity": 60}, (), "at most 1, which is 100 %: write percent with the sign"),
        ({"relative_humidity": "-5 %"}, (), "at least 0"),
        ({"relative_humidity": 0.5, "dew_point": 280.0}, ("dew_point",), "relative_humidity and dew_point"),
        ({"altitude": "1000 m", "pressure": "1 bar"}, ("altitude",), "altitude says nothing here"),
        ({"altitude": "1 bar"}, (), "is a pressure, expected a length"),
        (
            {"humidity_pressure": "1 bar"},
            ("humidity_pressure",),
            "goes with relative_humidity or wet_bulb or dew_point",
        ),
        (
            {"humidity_temperature": "1 degC", "dew_point": "1 degC"},
            ("humidity_temperature",),
            "goes with relative_humidity or wet_bulb, and",
        ),
        ({"enriched_with": {"O2": 100.0}}, ("enriched_with",), "goes with oxygen_mole_percent"),
        ({"oxygen_mole_percent": 30.0, "enriched_with": {"O2": 90.0}}, (), "sums to 90; expected 100"),
        ({"moisture_mole_percent": 100.0}, (), "less than 100"),
    ],
)
def test_keys_that_do_not_go_together(keys, key, words):
    with pytest.raises(ValidationError, match=words) as caught:
        air(**keys)
    if key:
        assert caught.value.errors()[0]["ctx"]["error"].key == key


@pytest.mark.parametrize("extra", [{"oxygen_mole_percent": 30.0}, {"carbon_dioxide_in_air": "400 ppm"}])
def test_keys_for_air_only(extra):
    with pytest.raises(ValidationError, match='goes with composition = "air"'):
        named(species="O2", **extra)


def test_amounts_hold_their_own_water():
    with pytest.raises(ValidationError, match="add its H2O there"):
        Feed.model_validate({"amounts": {"N2": 1.0}, "dew_point": 280.0})


@pytest.mark.parametrize(
    ("keys", "key", "words"),
    [
        ({"relative_humidity": 0.5}, "relative_humidity", "the feed has no temperature; add humidity_temperature"),
        ({"relative_humidity": 0.5, "temperature": "300 degC"}, "relative_humidity", "warmer .300 degC. than outside"),
        ({"wet_bulb": "20 degC", "temperature": "80 degC"}, "wet_bulb", "warmer .80 degC. than outside air"),
        (
            {"dew_point": "7 degC", "pressure": "20 bar"},
            "dew_point",
            'compressed .20 bar.; add humidity_pressure: "101325',
        ),
        ({"dew_point": "100.5 degC"}, "dew_point", "the gas as a whole has 101325 Pa only"),
        ({"altitude": "12 km"}, "altitude", "expected -2000 to 11000 m"),
        ({"oxygen_mole_percent": 15.0}, "oxygen_mole_percent", "15 mole % O2 cannot be made of air with 20.9476 %"),
    ],
)
def test_air_that_cannot_be(keys, key, words):
    with pytest.raises(RuleError, match=words) as caught:
        air(**keys)
    assert caught.value.key == (key,)


@pytest.mark.parametrize(
    ("added", "words"),
    [({"O2": 95.0, "H2O": 5.0}, "given dry; leave its water out"), ({"O2": 95.0, "Arr": 5.0}, "no species 'Arr'")],
)
def test_what_air_is_not_enriched_with(added, words):
    with pytest.raises(RuleError, match=words) as caught:
        air(oxygen_mole_percent=30.0, enriched_with=added)
    assert caught.value.key == ("enriched_with", list(added)[1])


@pytest.mark.parametrize(
    ("keys", "words"),
    [
        ({"mole_percent": {"N2": 95.0, "H2O": 5.0}}, "holds H2O already; give it dry"),
        ({"mole_percent": {"N2": 95.0, "SiO2(s)": 5.0}}, "is that of a gas, and the feed holds SiO2"),
        ({"analysis": {"ultimate_percent": {"C": 100.0}}, "amount": "1 kg"}, "dew_point is for gases"),
    ],
)
def test_what_takes_no_water_vapour(keys, words):
    with pytest.raises(RuleError, match=words) as caught:
        named(dew_point="5 degC", **keys)
    assert caught.value.key == ("dew_point",)


AIR = 'composition = "air"\nair_ratio = 1.2'


def spoiled(write, *keys, vary="temperature", first='"100 degC"', last='"300 degC"'):
    return write(
        ('species = "H2O"\nsteam_to_carbon = 3.0', "\n".join((AIR, *keys))),
        ("held.temperature", f"feeds.steam.{vary}"),
        ('"800 degC"', first),
        ('"900 degC"', last),
    )


@pytest.mark.parametrize("key", ["relative_humidity = 0.5", 'wet_bulb = "12 degC"'])
def test_a_varied_preheat_needs_the_temperature_of_the_humidity(write, key):
    with pytest.raises(CaseError, match="holds at one temperature; say at which by humidity_temperature") as caught:
        read_case(spoiled(write, key))
    assert caught.value.key == "sweep[1].vary"
    study = read_case(spoiled(write, key, 'humidity_temperature = "18 degC"'))
    assert study.recipes[1].of_species("H2O") > 0.0


def test_a_varied_pressure_needs_the_pressure_of_the_humidity(write):
    keys = ('dew_point = "7 degC"', 'pressure = "1 bar"')
    sweep = {"vary": "pressure", "first": '"1 bar"', "last": '"20 bar"'}
    with pytest.raises(CaseError, match="its dew_point holds at one pressure; say at which by humidity_pressure"):
        read_case(spoiled(write, *keys, **sweep))
    for more in ('humidity_pressure = "1 bar"', 'altitude = "100 m"'):
        assert read_case(spoiled(write, *keys, more, **sweep)).states == 3


def test_what_is_wrong_is_told_with_its_line(write):
    path = write(('species = "H2O"\nsteam_to_carbon = 3.0', AIR + '\nrelative_humidity = "60 %"'))
    with pytest.raises(CaseError, match="warmer") as caught:
        read_case(path)
    assert (caught.value.line, caught.value.key) == (14, "feeds.steam.relative_humidity")


def test_check_tells_moisture_and_ratios(write):
    keys = '\nrelative_humidity = "60 %"\nhumidity_temperature = "15 degC"\naltitude = "1000 m"'
    text = " ".join(
        " ".join(explained(read_case(write(('species = "H2O"\nsteam_to_carbon = 3.0', AIR + keys))).describe())).split()
    )
    # by hand: p_w 1023.4 Pa in 89874.6 Pa is 1.139 mole %; 0.62195 x 1023.4/(89874.6 - 1023.4) = 7.164 g/kg
    assert "moisture 1.139 mole % of water vapour, 7.164 g/kg dry gas, dew point 7.3 degC at 0.8987 bar" in text
    assert "ratios air ratio 1.200 (excess air 20 %, equivalence ratio 0.8333)" in text
