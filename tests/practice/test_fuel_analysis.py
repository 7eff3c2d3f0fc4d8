"""Bases of fuel analyses, against sums done by hand, and there and back again."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from gibbsmin.errors import FeedError
from gibbsmin.practice.feeds.fuel_analysis import Analysis, Sample, dry_basis, wet_basis

COAL = {"C": 75.0, "H": 5.0, "O": 8.0, "N": 1.5, "S": 1.0, "ash": 9.5}  # mass percent, dry; made up
BASES = ("as received", "air-dried", "dry", "dry ash-free")


def closed(parts, **keys):
    return Sample(parts, **keys).close()


def test_a_coal_on_every_basis():
    """Worked by hand: 8 % of moisture as received, 3 % air-dried (formulas of ISO 1170, from memory)."""
    coal, notes = closed(COAL, basis="dry", moisture=8.0, air_dried_moisture=3.0)
    assert notes == []
    assert coal.percent("C", "as received") == pytest.approx(75.0 * 0.92)  # 69.0
    assert coal.percent("C", "air-dried") == pytest.approx(75.0 * 0.97)  # 72.75
    assert coal.percent("C", "dry ash-free") == pytest.approx(75.0 / 0.905)  # 82.87
    assert coal.on("as received")["ash"] == pytest.approx(9.5 * 0.92)  # 8.74
    assert coal.percent("Cl") == 0.0
    assert coal.per_kilogram("as received") == 1.0
    assert coal.per_kilogram("dry") == pytest.approx(0.92)
    assert coal.per_kilogram("dry ash-free") == pytest.approx(0.92 * 0.905)
    # air-dried to as received: w (100 - 8)/(100 - 3)
    assert coal.per_kilogram("air-dried") == pytest.approx(92.0 / 97.0)


def test_every_basis_sums_to_100_with_its_moisture():
    coal, _ = closed(COAL, basis="dry", moisture=8.0, air_dried_moisture=3.0)
    for basis in BASES:
        assert sum(coal.on(basis).values()) + coal.sample_moisture(basis) == pytest.approx(100.0, rel=1e-12), basis
    assert "ash" not in coal.on("dry ash-free")


parts = st.fixed_dictionaries(
    {"C": st.floats(5.0, 90.0), "H": st.floats(0.1, 15.0), "O": st.floats(0.0, 60.0)},
    optional={
        "N": st.floats(0.0, 6.0),
        "S": st.floats(0.0, 9.0),
        "Cl": st.floats(0.0, 9.0),
        "SiO2(s)": st.floats(0, 9),
    },
)


@given(parts, st.floats(0.0, 60.0), st.floats(0.0, 70.0), st.floats(0.0, 30.0), st.sampled_from(BASES))
def test_there_and_back_on_every_basis(elements, ash, moisture, air_dried, basis):
    if basis == "dry ash-free":
        elements = {name: percent for name, percent in elements.items() if name != "SiO2(s)"}
    whole = (100.0 - ash) / sum(elements.values())
    dry = {name: percent * whole for name, percent in elements.items()} | {"ash": ash}
    fuel = Analysis(dry, moisture, air_dried)
    reported = fuel.on(basis)
    sample = Sample(reported, basis, moisture, air_dried, ash if basis == "dry ash-free" else None)
    found, _ = sample.close()
    for name, percent in dry.items():
        assert found.dry.get(name, 0.0) == pytest.approx(percent, abs=1e-9), name
    for other in BASES:
        back = found.on(other)
        for name, percent in fuel.on(other).items():
            assert back.get(name, 0.0) == pytest.approx(percent, abs=1e-9), (other, name)
    # less mass is left the more is taken out of a kilogram
    masses = [found.per_kilogram(name) for name in ("as received", "dry", "dry ash-free")]
    assert masses == sorted(masses, reverse=True)


def test_moisture_on_both_bases():
    """45 % of wet wood is 81.8 % of the dry: 45/(100 - 45)."""
    assert dry_basis(45.0) == pytest.approx(81.82, abs=0.01)
    assert wet_basis(100.0) == 50.0


@given(st.floats(0.0, 99.0))
def test_moisture_there_and_back(moisture):
    assert wet_basis(dry_basis(moisture)) == pytest.approx(moisture, abs=1e-12)


def test_hydrogen_and_oxygen_that_count_the_moisture():
    """By hand: 10 % of water holds 10 x 2.016/18.015 = 1.119 % H and 8.881 % O."""
    counted = {"C": 60.0, "H": 5.0 + 1.11907, "O": 10.0 + 8.88093, "N": 1.0, "ash": 14.0}
    found, notes = closed(counted, moisture=10.0, moisture_in_hydrogen=True)
    assert sum(counted.values()) == pytest.approx(100.0)
    assert found.on("as received")["H"] == pytest.approx(5.0, abs=1e-4)
    assert found.on("as received")["O"] == pytest.approx(10.0, abs=1e-4)
    assert len(notes) == 1
    counted.pop("O")
    by_difference, _ = closed(counted, moisture=10.0, moisture_in_hydrogen=True, oxygen_by_difference=True)
    assert by_difference.dry == pytest.approx(found.dry, abs=1e-4)


def test_oxygen_by_difference():
    given_all, _ = closed(COAL, basis="dry")
    rest = {name: percent for name, percent in COAL.items() if name != "O"}
    found, notes = closed(rest, basis="dry", oxygen_by_difference=True)
    assert found.dry == pytest.approx(given_all.dry)
    assert "O is by difference: 8 %" in notes[0]
    free = {name: percent / 0.905 for name, percent in rest.items() if name != "ash"}
    found, _ = closed(free, basis="dry ash-free", dry_ash=9.5, oxygen_by_difference=True)
    assert found.dry == pytest.approx(given_all.dry)


def test_sulfur_that_stands_in_the_ash_too_counts_once():
    """By hand: 10 % of ash with 5 % SO3 is 0.5 % SO3. The fuel itself is C 70, H 5, O 14.5, S 1, oxides 9.5."""
    true = {"C": 70.0, "H": 5.0, "S": 1.0, "O": 14.5, "ash": 9.5}
    measured, _ = closed({**true, "ash": 10.0}, basis="dry", ash_counted_twice=0.05)  # sums to 100.5 with SO3
    assert measured.dry == pytest.approx(true)
    lab = {**true, "O": 14.0, "ash": 10.0}  # the lab took O by difference, with SO3 in the ash
    given_as_closed, notes = closed(lab, basis="dry", ash_counted_twice=0.05)
    assert given_as_closed.dry == pytest.approx(true)
    assert "too low" in notes[1]
    lab.pop("O")
    by_difference, _ = closed(lab, basis="dry", ash_counted_twice=0.05, oxygen_by_difference=True)
    assert by_difference.dry == pytest.approx(true)


def test_what_does_not_quite_close_is_brought_to_100_and_told():
    found, notes = closed({**COAL, "O": 8.4}, basis="dry")
    assert sum(found.dry.values()) == pytest.approx(100.0)
    assert found.dry["C"] == pytest.approx(75.0 / 1.004)
    assert notes == ["The analysis sums to 100.4 and was brought to 100."]


@pytest.mark.parametrize(
    ("parts", "keys", "words"),
    [
        ({**COAL, "O": 9.0}, {"basis": "dry"}, "sums to 101; expected 100 within 0.5"),
        (COAL, {"moisture": 8.0}, "sums to 108 with 8 % of moisture"),
        (
            {"C": 50.0},
            {"moisture": 50.0, "moisture_in_hydrogen": True},
            "holds 5.595 % H, but the analysis 0 %, so that .* leave",
        ),
        ({"C": 95.0, "H": 6.0}, {"basis": "dry", "oxygen_by_difference": True}, "sums to 101 already"),
        ({"C": 90.0, "H": 5.0}, {"basis": "dry ash-free", "dry_ash": 10.0}, "sums to 95;"),
    ],
)
def test_analyses_that_cannot_be(parts, keys, words):
    with pytest.raises(FeedError, match=words):
        closed(parts, **keys)
