"""Moist air against printed tables, the standard atmosphere, and round trips.

ASHRAE is the Handbook of Fundamentals (2009 and later), chapter Psychrometrics, from memory: its tables hold what
pressure adds to the vapour (0.4 to 0.5 %), which is left out here, hence their tolerance.
"""

import numpy as np
import pytest
from chemicals.iapws import iapws11_Psub, iapws95_Psat
from hypothesis import given
from hypothesis import strategies as st

import gibbsmin as gm
from gibbsmin.errors import FeedError
from gibbsmin.practice.feeds.air import (
    DRY_AIR,
    dew_point,
    dry_air,
    enriched,
    humidity_ratio,
    pressure_at_altitude,
    water_of_dew_point,
    water_of_humidity_ratio,
    water_of_relative_humidity,
    water_of_wet_bulb,
)
from gibbsmin.thermo.database import load

ATM, ZERO = 101325.0, 273.15
AIR = 28.9644e-3  # kg/mol, ISO 2533:1975
RECORDS = {load().get(name): x for name, x in dry_air().items()}


def test_dry_air_of_the_standard_atmosphere():
    assert sum(dry_air().values()) == pytest.approx(1.0, abs=1e-12)
    assert sum(n * one.molar_mass for one, n in RECORDS.items()) == pytest.approx(AIR, rel=5e-5)


@given(st.floats(0.0, 0.01))
def test_carbon_dioxide_of_today(share):
    air = dry_air(share)
    assert air["CO2"] == share
    assert sum(air.values()) == pytest.approx(1.0)
    assert air["Ar"] / air["O2"] == pytest.approx(DRY_AIR["Ar"] / DRY_AIR["O2"])


@pytest.mark.parametrize(
    ("altitude", "pressure"),
    [(-1000, 113929), (0, 101325), (1000, 89874.6), (2000, 79495.2), (5000, 54019.9), (11000, 22632.06)],
)
def test_pressure_of_the_standard_atmosphere(altitude, pressure):
    # ISO 2533:1975 and U.S. Standard Atmosphere 1976, tables by geopotential altitude; from memory
    assert pressure_at_altitude(altitude) == pytest.approx(pressure, rel=1e-5)


@pytest.mark.parametrize("altitude", [-2001.0, 11001.0, float("nan")])
def test_altitudes_beyond_the_troposphere(altitude):
    with pytest.raises(FeedError, match="expected -2000 to 11000 m"):
        pressure_at_altitude(altitude)


@pytest.mark.parametrize(("celsius", "ratio"), [(-10, 1.6062e-3), (0, 3.7895e-3), (20, 14.758e-3), (30, 27.329e-3)])
def test_saturated_air_of_the_table(celsius, ratio):
    # ASHRAE, table of moist air at 101.325 kPa
    x = water_of_relative_humidity(1.0, celsius + ZERO, ATM)
    assert humidity_ratio(x, AIR) == pytest.approx(ratio, rel=6e-3)


@pytest.mark.parametrize("T", [200.0, 250.0, 273.0, 280.0, 298.15, 330.0])
def test_relative_humidity_against_formulations_of_iapws(T):
    # over ice the sublimation curve of 2011, over water the saturation of IAPWS-95
    saturated = iapws11_Psub(T) if T < 273.16 else iapws95_Psat(T)
    assert water_of_relative_humidity(0.4, T, ATM) == pytest.approx(0.4 * saturated / ATM, rel=1e-4)


def test_air_at_15_degrees_and_60_percent():
    # by hand: p_s(15 degC) 1705.7 Pa (IAPWS); p_w = 0.6 p_s = 1023.4 Pa
    x = water_of_relative_humidity(0.6, 15.0 + ZERO, ATM)
    assert x * ATM == pytest.approx(1023.4, abs=0.2)
    assert humidity_ratio(x, AIR) == pytest.approx(0.621945 * 1023.4 / (ATM - 1023.4), rel=2e-4)


@given(st.floats(0.01, 1.0), st.floats(230.0, 320.0), st.floats(5e4, 2e5))
def test_humidity_and_dew_point_go_both_ways(humidity, T, P):
    x = water_of_relative_humidity(humidity, T, P)
    dew = dew_point(x, P)
    assert dew <= T + 1e-9
    assert water_of_dew_point(dew, P) == pytest.approx(x, rel=1e-9)
    assert water_of_humidity_ratio(humidity_ratio(x, AIR), AIR) == pytest.approx(x, rel=1e-12)


@given(st.floats(231.0, 340.0), st.floats(5e4, 2e5))
def test_a_dew_point_comes_back(dew, P):
    assert dew_point(water_of_dew_point(dew, P), P) == pytest.approx(dew, abs=1e-9)


def test_no_water_has_no_dew_point():
    assert np.isnan(dew_point(0.0, ATM))
    assert water_of_humidity_ratio(0.0, AIR) == 0.0


@pytest.mark.parametrize(
    ("call", "words"),
    [
        (lambda: water_of_relative_humidity(0.6, 573.15, ATM), "at 573.15 K would have"),
        (lambda: water_of_relative_humidity(0.6, 700.0, 1e8), "critical temperature of water, 647.096 K"),
        (lambda: water_of_dew_point(373.2, ATM), "with a dew point of 373.2 K would have"),
        (lambda: water_of_wet_bulb(RECORDS, 300.0, 301.0, ATM), "between 273.16 K, where the wick freezes"),
        (lambda: water_of_wet_bulb(RECORDS, 300.0, 270.0, ATM), "between 273.16 K, where the wick freezes"),
        (lambda: water_of_wet_bulb(RECORDS, 320.0, 275.0, ATM), "colder than that of gas without any water"),
        (lambda: enriched(dry_air(), {"O2": 1.0}, 0.2), "20 mole % O2 cannot be made of air with 20.9476"),
        (lambda: enriched(dry_air(), {"O2": 0.95, "N2": 0.05}, 0.96), "a gas with 95 %"),
        (lambda: enriched(dry_air(), {"N2": 1.0}, 0.1), "cannot be made"),
    ],
)
def test_what_cannot_be(call, words):
    with pytest.raises(FeedError, match=words):
        call()


def test_wet_bulb_of_the_worked_example():
    # ASHRAE, example of the chart: 40 degC dry bulb, 20 degC wet bulb, 101.325 kPa: 6.5 g/kg, 14 %, dew point 7 degC
    x = water_of_wet_bulb(RECORDS, 40.0 + ZERO, 20.0 + ZERO, ATM)
    assert humidity_ratio(x, AIR) == pytest.approx(6.5e-3, abs=0.1e-3)
    assert x / water_of_relative_humidity(1.0, 40.0 + ZERO, ATM) == pytest.approx(0.14, abs=0.005)
    assert dew_point(x, ATM) - ZERO == pytest.approx(7.0, abs=0.5)


@given(st.floats(274.0, 330.0), st.floats(7e4, 1.2e5))
def test_the_wet_bulb_of_saturated_air_is_its_temperature(T, P):
    assert water_of_wet_bulb(RECORDS, T, T, P) == pytest.approx(water_of_relative_humidity(1.0, T, P), rel=1e-12)


@given(st.floats(300.0, 330.0), st.floats(0.0, 12.0), st.floats(8e4, 1.2e5))
def test_the_wet_bulb_lies_between_dew_point_and_dry_bulb(T, depression, P):
    x = water_of_wet_bulb(RECORDS, T, T - depression, P)
    assert dew_point(x, P) <= T - depression + 1e-9


@pytest.mark.parametrize(("T", "wet_bulb"), [(313.15, 293.15), (300.0, 290.0), (330.0, 305.0)])
def test_the_wet_bulb_is_where_water_evaporates_at_held_enthalpy(T, wet_bulb):
    """The solver as a judge: the moist air with liquid water of the wet bulb, adiabatic, settles at the wet bulb.

    The vapour pressure over its liquid is 0.03 to 0.4 % off that of IAPWS (ideal gas, no pressure term), 0.05 K here.
    """
    system = gm.System.from_species(["N2", "O2", "Ar", "CO2", "H2O", "H2O(l)"])
    x = water_of_wet_bulb(RECORDS, T, wet_bulb, ATM)
    vapour, liquid = load().get("H2O"), load().get("H2O(l)")
    feed = {**dry_air(), "H2O": x / (1.0 - x), "H2O(l)": 0.1}
    enthalpy = sum(n * float(one.enthalpy(T)) for one, n in RECORDS.items())
    enthalpy += feed["H2O"] * float(vapour.enthalpy(T)) + 0.1 * float(liquid.enthalpy(wet_bulb))
    state = gm.equilibrium(system, feed, enthalpy=enthalpy, pressure=ATM)
    assert state.amounts["H2O(l)"] > 0.01
    assert state.temperature == pytest.approx(wet_bulb, abs=0.05)


def test_enriched_by_hand():
    # 100 mol of 21/79 and y mol of O2: (21 + y)/(100 + y) = 0.3, y = 9/0.7
    mixture, share = enriched({"O2": 0.21, "N2": 0.79}, {"O2": 1.0}, 0.30)
    assert share == pytest.approx(1.0 / (1.0 + 0.09 / 0.7))
    assert mixture == pytest.approx({"O2": 0.30, "N2": 0.70})


@given(st.floats(0.0, 1.0), st.floats(0.5, 1.0))
def test_enriched_air_holds_what_was_wanted(place, purity):
    oxygen = {"O2": purity, "Ar": 1.0 - purity}
    least = dry_air()["O2"]
    wanted = least + place * (purity - least)
    mixture, share = enriched(dry_air(), oxygen, wanted)
    assert mixture["O2"] == pytest.approx(wanted)
    assert sum(mixture.values()) == pytest.approx(1.0)
    assert mixture["N2"] == pytest.approx(share * dry_air()["N2"])
