"""Gas quality by ISO 6976 against printed values, and what must hold of any gas."""

from __future__ import annotations

from dataclasses import fields

import numpy as np
import pytest
from chemicals import CAS_from_any, Pc, Tc, omega
from chemicals.virial import BVirial_Tsonopoulos_extended
from hypothesis import given
from hypothesis import strategies as st
from practice.settled_from import by_hand, figures

from gibbsmin.constants import ATMOSPHERE, R
from gibbsmin.errors import InputError
from gibbsmin.practice.figures.gas_quality import FACTORS, METERING, fuel_gas, gas_quality

# Superior heating values, kJ/mol, at 0, 15, 20 and 25 °C, ISO 6976:2016 table 3 (from memory).
HEATS = {
    "CH4": (892.92, 891.51, 891.05, 890.58),
    "C2H6": (1564.35, 1562.14, 1561.42, 1560.69),
    "C3H8": (2224.03, 2221.10, 2220.13, 2219.17),
    "H2": (286.64, 286.15, 285.99, 285.83),
    "CO": (282.80, 282.91, 282.95, 282.98),
}

# Superior heating value of the ideal gas, MJ/m3, ISO 6976:1995 table 5 (from memory): 15/15 °C and 25/0 °C.
IDEAL_VOLUME = {"CH4": (37.706, 39.735), "H2": (12.102, 12.752), "C2H6": (66.07, 69.63), "C3H8": (93.94, 99.01)}

# Test gases of EN 437, parts by volume, 15/15 °C, dry, 1013.25 mbar (from memory): Wobbe inferior and superior, heating
# value inferior and superior, MJ/m3, relative density.
TEST_GASES = {
    "G20": ({"CH4": 1.0}, (45.67, 50.72, 34.02, 37.78, 0.555)),
    "G21": ({"CH4": 0.87, "C3H8": 0.13}, (49.60, 54.76, 41.01, 45.28, 0.684)),
    "G23": ({"CH4": 0.925, "N2": 0.075}, (41.11, 45.66, 31.46, 34.95, 0.586)),
    "G25": ({"CH4": 0.86, "N2": 0.14}, (37.38, 41.52, 29.25, 32.49, 0.612)),
    "G30": ({"C4H10:n-butane": 0.5, "C4H10:isobutane": 0.5}, (80.58, 87.33, 116.09, 125.81, 2.075)),
    "G31": ({"C3H8": 1.0}, (70.69, 76.84, 88.00, 95.65, 1.550)),
    "G110": ({"CH4": 0.26, "H2": 0.50, "N2": 0.24}, (21.76, 24.75, 13.95, 15.87, 0.411)),
    "G222": ({"CH4": 0.77, "H2": 0.23}, (42.87, 47.87, 28.53, 31.86, 0.443)),
}

# Names in the package ``chemicals``. Those in the second list are heavy or unsaturated: the correlation is less good.
VIRIAL = {
    "CH4": "methane", "C2H6": "ethane", "C3H8": "propane", "C4H10:n-butane": "n-butane",
    "C4H10:isobutane": "isobutane", "C5H12:n-pentane": "n-pentane", "C5H12:isopentane": "isopentane",
    "C5H12:neopentane": "neopentane", "C6H14:n-hexane": "n-hexane", "C2H4": "ethylene", "C3H6:propene": "propylene",
    "H2S": "hydrogen sulfide", "CO": "carbon monoxide", "COS": "carbonyl sulfide", "CS2": "carbon disulfide",
    "CO2": "carbon dioxide", "N2": "nitrogen", "O2": "oxygen", "Ar": "argon", "C2H2:acetylene": "acetylene",
}  # fmt: skip
ROUGH = {
    "C7H16:n-heptane": "n-heptane", "C8H18:n-octane": "n-octane", "C6H6:benzene": "benzene", "C7H8:toluene": "toluene",
    "SO2": "sulfur dioxide", "NH3": "ammonia",
}  # fmt: skip


@pytest.mark.parametrize("name", HEATS)
def test_heats_of_the_standard(name: str) -> None:
    for temperature, printed in zip((273.15, 288.15, 293.15, 298.15), HEATS[name], strict=True):
        found = gas_quality({name: 1.0}, temperature, 288.15)
        assert found.superior_molar[0] / 1e3 == pytest.approx(printed, rel=2.0e-4)


def test_water_that_condenses() -> None:
    """ISO 6976 (from memory): 44.431 kJ/mol at 15 °C and 44.016 at 25 °C."""
    for temperature, printed in ((288.15, 44.431), (298.15, 44.016)):
        found = gas_quality({"H2": 1.0}, temperature, 288.15)
        assert (found.superior_molar - found.inferior_molar)[0] / 1e3 == pytest.approx(printed, rel=5.0e-4)


@pytest.mark.parametrize("name", IDEAL_VOLUME)
def test_ideal_volumes_of_the_standard(name: str) -> None:
    """The real gas times Z is the ideal one, which the edition of 1995 prints."""
    for (combustion, metering), printed in zip(((288.15, 288.15), (298.15, 273.15)), IDEAL_VOLUME[name], strict=True):
        found = gas_quality({name: 1.0}, combustion, metering)
        assert (found.superior * found.compression)[0] / 1e6 == pytest.approx(printed, rel=3.0e-4)


@pytest.mark.parametrize("name", TEST_GASES)
def test_test_gases_of_en_437(name: str) -> None:
    """A volume of a pure gas holds 1/Z times the moles of an ideal one, so that parts by volume become moles."""
    volumes, printed = TEST_GASES[name]
    moles = {part: v / (1.0 - FACTORS[part][1] ** 2) for part, v in volumes.items()}
    found = gas_quality({part: n / sum(moles.values()) for part, n in moles.items()}, 288.15, 288.15)
    values = (found.wobbe_inferior, found.wobbe_superior, found.inferior, found.superior)
    for value, expected in zip(values, printed[:4], strict=True):
        assert value[0] / 1e6 == pytest.approx(expected, rel=2.0e-3)
    assert found.relative_density[0] == pytest.approx(printed[4], rel=2.0e-3)


@pytest.mark.parametrize("name", [*VIRIAL, *ROUGH])
def test_factors_follow_from_second_virial_coefficients(name: str) -> None:
    """With B by the correlation of Tsonopoulos in ``chemicals``, s² = -B p/(R T)."""
    cas = CAS_from_any({**VIRIAL, **ROUGH}[name])
    for T, s in zip(METERING, FACTORS[name], strict=True):
        B = BVirial_Tsonopoulos_extended(T, Tc(cas), Pc(cas), omega(cas))
        assert s == pytest.approx(np.sqrt(-B * ATMOSPHERE / (R * T)), rel=0.05 if name in VIRIAL else 0.13)


def test_factors_fall_as_it_gets_warmer() -> None:
    for name, factors in FACTORS.items():
        assert list(factors) == sorted(factors, reverse=True), name


def test_water_vapour_by_its_virial_coefficient() -> None:
    """B of steam at 20 °C is about -1.24e-3 to -1.45e-3 m3/mol in published tables (from memory)."""
    B = -(FACTORS["H2O"][2] ** 2) * R * 293.15 / ATMOSPHERE
    assert -1.55e-3 < B < -1.20e-3


def test_wobbe_by_hand() -> None:
    """Equal moles of methane and nitrogen, metering at 15 °C, by eq. (1) and (2) with printed numbers."""
    found = gas_quality({"CH4": 0.5, "N2": 0.5}, 288.15, 288.15)
    Z = 1.0 - (0.5 * 0.04452 + 0.5 * 0.0170) ** 2
    per_volume = 0.5 * 891.51e3 * 101325.0 / (8.314462618 * 288.15 * Z)
    density = (0.5 * 16.043 + 0.5 * 28.014) / 28.96546 * 0.999595 / Z
    assert found.superior[0] == pytest.approx(per_volume, rel=1.0e-4)
    assert found.relative_density[0] == pytest.approx(density, rel=1.0e-4)
    assert found.wobbe_superior[0] == pytest.approx(per_volume / density**0.5, rel=1.0e-4)


PARTS = st.lists(st.floats(0.01, 1.0), min_size=4, max_size=4)


@given(PARTS, st.sampled_from(METERING))
def test_what_holds_of_any_gas(parts: list[float], metering: float) -> None:
    x = dict(zip(("CH4", "C3H8", "H2", "CO2"), np.array(parts) / sum(parts), strict=True))
    found = gas_quality(x, 298.15, metering)
    assert found.superior[0] > found.inferior[0] > 0.0
    assert found.superior[0] / found.superior_mass[0] == pytest.approx(found.density[0])
    assert found.wobbe_superior[0] / found.wobbe_inferior[0] == pytest.approx(found.superior[0] / found.inferior[0])
    assert found.superior_molar[0] == pytest.approx(
        sum(part * gas_quality({name: 1.0}, 298.15, metering).superior_molar[0] for name, part in x.items())
    )
    assert 0.97 < found.compression[0] < 1.0


@given(st.floats(0.0, 0.9), st.floats(0.01, 0.09))
def test_inert_gas_lowers_the_wobbe_index(share: float, more: float) -> None:
    less, most = (gas_quality({"CH4": 1.0 - x, "N2": x}).wobbe_superior[0] for x in (share, share + more))
    assert most < less


def test_states_go_side_by_side() -> None:
    x = np.array([0.0, 0.2, np.nan])
    found = gas_quality({"CH4": 1.0 - x, "H2": x})
    for i in range(2):
        alone = gas_quality({"CH4": 1.0 - x[i], "H2": x[i]})
        for field in fields(found):
            assert getattr(found, field.name)[i] == getattr(alone, field.name)[0]
    assert np.isnan(found.wobbe_superior[2])


def test_not_for_gases_that_are_nearly_liquid() -> None:
    octane = gas_quality({"C8H18:n-octane": 1.0})
    assert np.isnan(octane.superior[0])
    assert np.isnan(octane.wobbe_superior[0])
    assert octane.superior_mass[0] / 1e6 == pytest.approx(48.25, abs=0.3)  # gas, CRC Handbook (from memory)


def test_what_has_no_value_is_told() -> None:
    found = gas_quality({"CH4": 0.7, "CH3OH": 0.2, "KCl": 0.1})
    assert found.without_factor[0] == pytest.approx(0.3)
    assert found.without_heat[0] == pytest.approx(0.0, abs=1e-12)  # the salt is burnt already
    silane = gas_quality({"CH4": 0.9, "SiH4": 0.1})
    assert silane.without_heat[0] == pytest.approx(0.1)


@pytest.mark.parametrize(
    ("gas", "temperatures", "message"),
    [
        ({"CH4": 0.9}, (298.15, 273.15), "sum to 1; they miss it by 0.1"),
        ({"CH4": 1.1, "N2": -0.1}, (298.15, 273.15), "negative; got one of N2"),
        ({}, (298.15, 273.15), "at least one species"),
        ({"CH4": 1.0}, (300.0, 273.15), "combustion: 300 K is not one of ISO 6976"),
        ({"CH4": 1.0}, (298.15, 298.15), "metering: 298.15 K is not one"),
    ],
)
def test_bad_input(gas: dict[str, float], temperatures: tuple[float, float], message: str) -> None:
    with pytest.raises(InputError, match=message):
        gas_quality(gas, *temperatures)


def test_product_gas_is_taken_dry() -> None:
    gas = {"CO": 40.0, "H2": 50.0, "CO2": 10.0}
    wet = figures(fuel_gas(by_hand({**gas, "H2O": 80.0, "C(s):graphite": 5.0}, {})))
    dry = gas_quality({name: n / 100.0 for name, n in gas.items()})
    assert wet["wobbe_superior"] == pytest.approx(dry.wobbe_superior)
    assert wet["heating_value_inferior"] == pytest.approx(dry.inferior)
    assert wet["relative_density"] == pytest.approx(dry.relative_density)


def test_flue_gas_is_no_fuel() -> None:
    assert fuel_gas(by_hand({"CO": 0.01, "CO2": 10.0, "N2": 75.0, "H2O": 15.0}, {})) == []
    assert fuel_gas(by_hand({"H2O": 15.0}, {})) == []


def test_note_names_conditions_and_what_was_left_out() -> None:
    gas = {"CO": 60.0, "H2": 38.0, "HCN": 2.0}
    note = fuel_gas(by_hand(gas, {}), 288.15, 288.15)[0].note
    assert "15/15 degC" in note
    assert "up to 2 % taken as an ideal gas" in note
    assert "ideal" not in fuel_gas(by_hand({"CO": 60.0, "H2": 38.0}, {}))[0].note
