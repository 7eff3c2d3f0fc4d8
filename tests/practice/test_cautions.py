"""Cautions are raised at the published limits, one sentence a kind, and never without reason."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from gibbsmin.practice.safety.caution import DATA, GRAVE, HARMFUL, MOST, PLANT, Caution, Fed, foremost
from gibbsmin.practice.safety.cautions import CLOSING, Circumstances, cautions, gather, sentences
from gibbsmin.practice.safety.gas_cautions import (
    asphyxiant,
    carbonyl,
    flammable,
    flammable_feed,
    hot_limits,
    oxygen,
    premix,
    reactive,
    toxic,
)
from gibbsmin.practice.safety.hazards import FLAMMABLE, TOXIC
from gibbsmin.practice.safety.plant_cautions import acid, carbon, cracking, diluted, dioxins, metal_dusting, steel

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
    assert [caution.grade for caution in found] == [GRAVE, GRAVE, GRAVE, DATA]
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


def test_lower_limit_of_hot_methane() -> None:
    """Zabetakis (1965): 4.4 - 0.75 (200 - 25) / 191.8, in percent and kcal/mol of the lower heating value."""
    lower, upper = hot_limits("CH4", 473.15)
    assert 100.0 * lower == pytest.approx(4.4 - 0.75 * 175.0 / 191.8, abs=2e-3)
    assert 100.0 * upper == pytest.approx(17.0 + 0.75 * 175.0 / 191.8, abs=2e-3)
    assert hot_limits("CH4", 200.0) == (FLAMMABLE["CH4"].lower, FLAMMABLE["CH4"].upper)


@given(st.sampled_from(sorted(FLAMMABLE)), st.floats(200.0, 3000.0), st.floats(0.0, 500.0))
def test_heat_only_widens_the_limits(name: str, temperature: float, more: float) -> None:
    low, high = hot_limits(name, temperature)
    lower, higher = hot_limits(name, temperature + more)
    assert 0.0 <= lower <= low < high <= higher <= 1.0


def test_a_lean_feed_becomes_flammable_when_hot() -> None:
    feed = {"CH4": 4.0, "O2": 20.2, "N2": 75.8}
    assert flammable_feed(feed) is None
    assert flammable_feed(feed, 673.15) is not None


MIXTURE = {"CH4": 9.0, "O2": 19.0, "N2": 72.0}


@pytest.mark.parametrize(("celsius", "raised"), [(500.0, False), (560.0, True)])
def test_premix_near_its_self_ignition(celsius: float, raised: bool) -> None:
    """Methane in air: 600 degC (IEC 60079-20-1), less 50."""
    found = premix([Fed("air", {"O2": 21.0, "N2": 79.0}, 900.0), Fed("mixture", MIXTURE, celsius + 273.15)])
    assert (found is not None) is raised
    assert premix([Fed("mixture", MIXTURE, None)]) is None
    assert premix([Fed("gas", {"CH4": 1.0}, 1000.0), Fed("lean", {"CH4": 0.1, "O2": 21.0, "N2": 79.0}, 700.0)]) is None


@pytest.mark.parametrize(
    ("amounts", "celsius", "raised"),
    [
        ({"CH4": 0.9, "N2": 0.1}, 560.0, True),
        ({"CH4": 0.9, "N2": 0.1}, 540.0, False),
        ({"CH4": 1.0, "H2O": 3.0}, 650.0, False),
        ({"H2": 1.0}, 700.0, False),
        ({"C6H6:benzene": 0.2, "H2": 0.8}, 700.0, True),
        ({"CH4": 1.0}, None, False),
    ],
)
def test_fuel_gas_that_cracks(amounts: dict[str, float], celsius: float | None, raised: bool) -> None:
    feed = Fed("fuel", amounts, None if celsius is None else celsius + 273.15)
    assert (cracking([feed]) is not None) is raised


@pytest.mark.parametrize(
    ("activity", "monoxide", "celsius", "raised"),
    [
        (1.2, 0.2, 600.0, True),
        (1.0, 0.2, 900.0, True),  # it cools past the range somewhere
        (0.9, 0.2, 600.0, False),
        (1.2, 0.001, 600.0, False),
        (1.2, 0.2, 350.0, False),
        (None, 0.2, 600.0, False),
    ],
)
def test_metal_dusting(activity: float | None, monoxide: float, celsius: float, raised: bool) -> None:
    assert (metal_dusting({"CO": monoxide}, activity, celsius + 273.15) is not None) is raised


def test_graphite_that_settles_out_dusts_metal() -> None:
    found = cautions(Circumstances({"CO": 0.3, "H2": 0.7}, 900.0, 1e5, carbon_activity=1.0, solid_carbon=0.1))
    assert {"carbon", "metal dusting"} <= {caution.kind for caution in found}


@pytest.mark.parametrize(
    ("gas", "celsius", "bar", "words"),
    [
        ({"H2": 0.5}, 400.0, 20.0, ["H2 at 10 bar", "API RP 941"]),
        ({"H2": 0.5}, 200.0, 20.0, []),
        ({"H2": 0.5}, 400.0, 5.0, []),
        ({"H2S": 1e-4}, 300.0, 1.0, ["H2S 100 ppmv scales"]),
        ({"H2S": 1e-4}, 250.0, 1.0, []),
        ({"NH3": 0.05, "H2": 0.6}, 450.0, 150.0, ["H2 at 90 bar", "NH3 5 % nitrides"]),
        ({"NH3": 0.05}, 340.0, 150.0, []),
    ],
)
def test_steel(gas: dict[str, float], celsius: float, bar: float, words: list[str]) -> None:
    found = steel(gas, celsius + 273.15, bar * 1e5)
    assert (found is None) is (not words)
    assert found is None or all(word in found.text for word in words)


@pytest.mark.parametrize(
    ("wall", "raised", "word"),
    [(120.0, True, "below the highest"), (140.0, True, "less than 10 K above"), (148.0, False, ""), (None, False, "")],
)
def test_acid_condensation(wall: float | None, raised: bool, word: str) -> None:
    dews = {"water": 319.0, "H2SO4": 137.3 + 273.15, "HCl": float("nan")}
    found = acid(None if wall is None else wall + 273.15, dews)
    assert (found is not None) is raised
    assert found is None or (word in found.text and "H2SO4: 137 degC" in found.text)
    assert acid(300.0, {"HCl": float("nan")}) is None


@pytest.mark.parametrize(
    ("gas", "celsius", "wall", "raised"),
    [
        ({"HCl": 1e-3, "O2": 0.08, "CO2": 0.1}, 300.0, None, True),
        ({"HCl": 1e-3, "O2": 0.08, "CO2": 0.1}, 1100.0, None, False),
        ({"HCl": 1e-3, "O2": 0.08, "CO2": 0.1}, 1100.0, 180.0, True),  # it is cooled through the range
        ({"HCl": 1e-3, "O2": 0.08, "CO2": 0.1}, 150.0, 120.0, False),
        ({"HCl": 1e-3, "CO2": 0.1}, 300.0, None, False),
        ({"O2": 0.08, "CO2": 0.1}, 300.0, None, False),
        ({"HCl": 1e-3, "O2": 0.08}, 300.0, None, False),
    ],
)
def test_dioxins(gas: dict[str, float], celsius: float, wall: float | None, raised: bool) -> None:
    found = dioxins(gas, celsius + 273.15, None if wall is None else wall + 273.15)
    assert (found is not None) is raised


@pytest.mark.parametrize(
    ("measured", "reference", "oxidant", "word"),
    [
        (0.18, 0.03, 0.2095, "fourfold"),
        (0.05, 0.03, 0.95, "no air"),
        (0.05, 0.03, 0.2095, None),
        (0.18, None, 0.95, None),
        (None, 0.03, None, None),
    ],
)
def test_reference_oxygen_that_does_not_fit(
    measured: float | None, reference: float | None, oxidant: float | None, word: str | None
) -> None:
    found = diluted(measured, reference, oxidant)
    assert (found is None) if word is None else (found is not None and word in found.text)


def test_fluorine_is_reactive() -> None:
    assert reactive({"F2": 2e-3}) is not None
    assert reactive({"F2": 1e-5, "N2": 1.0}) is None


def test_no_air_to_breathe_is_grave_and_told_beside_a_lesser_poison() -> None:
    thin, none = asphyxiant({"O2": 0.15, "N2": 0.85}), asphyxiant({"N2": 1.0})
    assert (thin and thin.grade, none and none.grade) == (HARMFUL, GRAVE)
    kinds = [caution.kind for caution in cautions(Circumstances({"N2": 0.9997, "CO": 3e-4}, 300.0, 1e5))]
    assert kinds == ["asphyxiant", "toxic"]


grades = st.lists(st.sampled_from([GRAVE, HARMFUL, PLANT, DATA]), max_size=20)


@given(grades)
def test_what_can_kill_is_never_left_out_of_a_list(given_grades: list[int]) -> None:
    found = [Caution(f"kind {k}", f"Text {k}.", grade=grade) for k, grade in enumerate(given_grades)]
    shown = foremost(found)
    grave = [caution for caution in found if caution.grade == GRAVE]
    assert [caution for caution in shown if caution.grade == GRAVE] == grave
    assert [caution.grade for caution in shown] == sorted(caution.grade for caution in shown)
    assert len(shown) <= max(MOST, len(grave)) + 1
    last = shown[-1].text if shown else ""
    assert all(caution in shown or caution.kind in last for caution in found), "what is left out is named"


def test_a_short_list_is_shown_whole() -> None:
    found = [Caution("a", "A.", grade=DATA), Caution("b", "B.", grade=GRAVE)]
    assert [caution.kind for caution in foremost(found)] == ["b", "a"]
