"""Cautions are raised at the published limits, one sentence a kind, and never without reason."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from gibbsmin.practice.cautions import (
    CLOSING,
    Circumstances,
    asphyxiant,
    carbon,
    carbonyl,
    cautions,
    flammable,
    flammable_feed,
    gather,
    oxygen,
    sentences,
    toxic,
)
from gibbsmin.practice.hazards import FLAMMABLE, TOXIC

AIR = {"N2": 0.78084, "O2": 0.209476, "Ar": 0.00934, "CO2": 0.000314}


# NIOSH, in ppm by volume, typed here a second time from job knowledge so that a slip in the table is seen:
# immediately dangerous (None where there is none), and the short-term limit.
PUBLISHED = {
    "CO": (1200, 200),
    "H2S": (100, 10),
    "HCN": (50, 4.7),
    "NH3": (300, 35),
    "SO2": (100, 5),
    "NO2": (13, 1),
    "NO": (100, 25),
    "CO2": (40000, 30000),
    "HCl": (45, 5),
    "Cl2": (10, 0.5),
    "HF": (30, 6),
    "COCl2": (2, 0.2),
    "Ni(CO)4": (2, 0.001),
    "Fe(CO)5": (None, 0.2),
    "C6H6:benzene": (500, 1),
}


@pytest.mark.parametrize(("species", "limits"), PUBLISHED.items())
def test_toxic_caution_begins_at_the_limit(species: str, limits: tuple[float | None, float]) -> None:
    dangerous, limit = limits
    assert toxic({species: 0.999 * limit * 1e-6}) is None
    low = toxic({species: 1.001 * limit * 1e-6})
    assert low is not None
    assert species in low.text
    assert "immediately dangerous" not in low.text
    if dangerous is not None:
        high = toxic({species: 1.001 * dangerous * 1e-6})
        assert high is not None
        assert "immediately dangerous to life" in high.text


def test_sulfuric_acid_limit_in_mg_is_converted() -> None:
    # 15 mg/m3 of M = 98.08 g/mol at 25 degC and 101325 Pa (24.465 L/mol): 15 / 98.08 * 24.465 = 3.742 ppm
    assert TOXIC["H2SO4"].dangerous == pytest.approx(3.742e-6, rel=1e-3)
    # mercury 10 mg/m3, M = 200.59: 1.2197 ppm
    assert TOXIC["Hg"].dangerous == pytest.approx(1.2197e-6, rel=1e-3)


def test_many_toxic_gases_make_one_caution() -> None:
    found = toxic({"CO": 0.1, "H2S": 0.003, "NH3": 100e-6, "N2": 0.8969})
    assert found is not None
    assert all(name in found.text for name in ("CO", "H2S", "NH3"))
    assert found.text.count("Toxic gas") == 1


def test_le_chatelier_half_methane_half_hydrogen() -> None:
    # wider pair: CH4 4.4, H2 4.0 %; 1 / (0.5/4.4 + 0.5/4.0) = 4.19 %
    found = flammable({"CH4": 0.5, "H2": 0.5}, 300.0)
    assert found is not None
    assert "4.2 %" in found.text
    assert "hot enough" not in found.text


def test_hot_synthesis_gas_ignites_where_it_meets_air() -> None:
    found = flammable({"H2": 0.5, "CO": 0.1, "H2O": 0.4}, 1143.15)
    assert found is not None
    assert "hot enough" in found.text


@pytest.mark.parametrize("species", sorted(FLAMMABLE))
def test_flammable_begins_at_the_lower_limit(species: str) -> None:
    lower = FLAMMABLE[species].lower
    assert flammable({species: 0.99 * lower}, 300.0) is None
    assert flammable({species: 1.01 * lower}, 300.0) is not None
    assert FLAMMABLE[species].lower < FLAMMABLE[species].upper <= 1.0


@pytest.mark.parametrize(
    ("feed", "inside"),
    [
        ({"CH4": 9.5, "O2": 19, "N2": 71.5}, True),  # stoichiometric in air
        ({"CH4": 3.0, "O2": 20.4, "N2": 76.6}, False),  # below 4.4 %
        ({"CH4": 30.0, "O2": 14.7, "N2": 55.3}, False),  # above 17 %
        ({"CH4": 40.0, "O2": 60.0}, True),  # with oxygen the upper limit in air says nothing
        ({"CH4": 10.0, "O2": 8.0, "N2": 82.0}, False),  # too little oxygen (12 %)
        ({"CH4": 1.0, "H2O": 3.0}, False),  # no oxygen
        ({"C(s):graphite": 1.0, "O2": 1.0}, False),  # no gas that burns
        ({}, False),
    ],
)
def test_flammable_feed(feed: dict[str, float], inside: bool) -> None:
    assert (flammable_feed(feed) is not None) is inside


@pytest.mark.parametrize(("x", "raised"), [(0.2095, False), (0.235, False), (0.24, True), (1.0, True)])
def test_oxygen_enriched(x: float, raised: bool) -> None:
    assert (oxygen({"O2": x}, 900.0) is not None) is raised


def test_asphyxiant_only_below_the_limit_and_only_with_a_gas() -> None:
    assert asphyxiant(AIR) is None
    assert asphyxiant({}) is None
    assert asphyxiant({"N2": 0.9, "O2": 0.1}) is not None


@pytest.mark.parametrize(("celsius", "bar", "raised"), [(150.0, 1.0, True), (231.0, 1.0, False), (150.0, 0.05, False)])
def test_carbonyl(celsius: float, bar: float, raised: bool) -> None:
    found = carbonyl({"CO": 1.0}, celsius + 273.15, bar * 1e5)
    assert (found is not None) is raised


@pytest.mark.parametrize(
    ("activity", "solid", "word"),
    [
        (0.3, 0.0, None),
        (0.75, 0.0, "thin"),
        (1.8, 0.0, "left out"),
        (1.0, 2.0, "Solid carbon forms"),
        (None, 0.0, None),
    ],
)
def test_carbon(activity: float | None, solid: float, word: str | None) -> None:
    found = carbon(activity, solid)
    assert (found is None) if word is None else (found is not None and word in found.text)


def test_air_gets_no_caution_at_all() -> None:
    assert cautions(Circumstances(AIR, 300.0, 1e5)) == []
    assert sentences([]) == []


def test_every_list_ends_by_deferring_to_local_codes_and_practice() -> None:
    found = cautions(Circumstances({"CO": 0.5, "N2": 0.5}, 400.0, 2e6, warnings=["X is used outside its range."]))
    assert [caution.kind for caution in found] == ["toxic", "flammable", "carbonyl", "data"]
    assert sentences(found)[-1] == CLOSING
    assert "Local codes and licensed practice decide" in CLOSING


def test_gather_counts_states_and_keeps_the_gravest() -> None:
    states = [cautions(Circumstances({"CO": x, "O2": 0.2}, 300.0, 1e5)) for x in (1e-6, 5e-4, 2e-2)]
    (found,) = [caution for caution in gather(states, {"CO": 2e-2, "NO": 3e-4}) if caution.kind == "toxic"]
    assert found.text.startswith("In 2 of 3 states")
    assert "CO 2 %" in found.text
    assert "NO 300 ppmv" in found.text, "a gas that peaks in another state is told as well"
    assert gather([states[2]], {}) == states[2]


fractions = st.dictionaries(
    st.sampled_from(sorted({*TOXIC, *FLAMMABLE, "O2", "N2", "Ar"})), st.floats(1e-12, 1.0), min_size=1
).map(lambda gas: {name: x / sum(gas.values()) for name, x in gas.items()})


@given(fractions, st.floats(200.0, 6000.0), st.floats(1.0, 1e9))
def test_any_gas_gives_one_sentence_a_kind(gas: dict[str, float], temperature: float, pressure: float) -> None:
    found = cautions(Circumstances(gas, temperature, pressure))
    kinds = [caution.kind for caution in found]
    assert len(set(kinds)) == len(kinds)
    assert all("nan" not in caution.text and caution.text.endswith(".") for caution in found)


@given(fractions, st.floats(1.01, 1e3))
def test_more_of_a_toxic_gas_never_silences_its_caution(gas: dict[str, float], factor: float) -> None:
    if toxic(gas) is not None:
        assert toxic({name: x * factor for name, x in gas.items()}) is not None
