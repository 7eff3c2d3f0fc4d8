"""What a case may hold: each rule between the keys, and what each pair means in numbers."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import numpy as np
import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from gibbsmin.case.read import read_case
from gibbsmin.case.study import Study
from gibbsmin.errors import CaseError
from gibbsmin.report.summary import summary
from gibbsmin.results.judge import judge
from gibbsmin.thermo.database import load

R = 8.314462618
CASE = """\
title = "Held conditions"
[feeds.fuel]
species = "CH4"
amount = 1.0
temperature = "25 degC"
pressure = "2 bar"
[feeds.air]
composition = "air"
air_ratio = 1.2
temperature = "400 degC"
pressure = "3 bar"
[held]
"""
FLOWS = CASE.replace("amount = 1.0", 'flow = "1 mol/s"')

Read = Callable[..., Study]


@pytest.fixture
def read(tmp_path: Path) -> Read:
    def made(held: str, text: str = CASE) -> Study:
        path = tmp_path / "case.toml"
        path.write_text(text + held, encoding="utf-8")
        return read_case(path)

    return made


P = 'pressure = "1 bar"\n'
BAD = [
    (P, CASE, "held", "nothing says how hot it is"),
    ("temperature = 900.0", CASE, "held", "pressure or volume is missing"),
    (P + "temperature = 900.0\nadiabatic = true", CASE, "held.adiabatic", "without heat the temperature is what comes"),
    (P + 'temperature = 900.0\nheat = "5 kJ"', CASE, "held.heat", "one follows from the other"),
    (P + 'temperature = 900.0\nentropy = "from feeds"', CASE, "held.entropy", "the temperature would have to be"),
    (P + "adiabatic = true\nheat = 3.0", CASE, "held.heat", "adiabatic means no heat at all"),
    (P + 'adiabatic = true\nentropy = "from feeds"', CASE, "held.entropy", "without heat already"),
    (P + 'heat = 3.0\nentropy = "from feeds"', CASE, "held.entropy", "heat that is moved changes the entropy"),
    (P + "volume = 2.0\nadiabatic = true", CASE, "held.volume", "Possible are pressure or volume, together with"),
    (P + "adiabatic = false", CASE, "held.adiabatic", "false says nothing"),
    (P + 'adiabatic = "yes"', CASE, "held.adiabatic", "expected true or false"),
    (P + "entropy = 200.0", CASE, "held.entropy", "expected 'from feeds'"),
    (P + 'heat = "5 bar"', CASE, "held.heat", "is a pressure"),
    (P + 'heat = "5 kW"', CASE, "held.heat", "because the feeds are amounts"),
    (P + 'heat = "5 kJ"', FLOWS, "held.heat", "because the feeds are flows"),
    (P + "heat = nan", CASE, "held.heat", "finite"),
    (P + "heat = -1e30", CASE, "held.heat", "too low"),
    (P + "adiabatic = true\nisentropic_efficiency = 0.9", CASE, "held.isentropic_efficiency", "goes with entropy"),
    (P + 'entropy = "from feeds"\nisentropic_efficiency = 0', CASE, "held.isentropic_efficiency", "more than 0"),
    (P + 'entropy = "from feeds"\nisentropic_efficiency = 1.2', CASE, "held.isentropic_efficiency", "at most 1"),
    ('volume = "-2 m3"\nadiabatic = true', CASE, "held.volume", "too low"),
    ('volume = "of the feeds"\nadiabatic = true', CASE, "held.volume", "expected a number and a unit"),
    ("volume = 2.0\nadiabatic = true", FLOWS, "held.volume", "the feeds are flows; give them as amounts"),
    (P + "enthalpy = 3.0", CASE, "held.enthalpy", "its place is taken by heat"),
    (P + "adiabatic = true\n[surroundings]\ntemperature = 0", CASE, "surroundings.temperature", "more than 0 K"),
    (P + "adiabatic = true\n[surroundings]\nsource = 3", CASE, "surroundings.source", "heat_source_temperature"),
    (P + "adiabatic = true", CASE.replace('temperature = "400 degC"\n', ""), "feeds.air", "give its temperature"),
    (P + 'entropy = "from feeds"', CASE.replace('temperature = "25 degC"\n', ""), "feeds.fuel", "held entropy needs"),
    (
        P + 'entropy = "from feeds"',
        CASE.replace(
            'species = "CH4"\namount = 1.0', 'analysis = { ultimate_percent = { C = 100.0 } }\namount = "1 kg"'
        ),
        "feeds.fuel.analysis",
        "there is only an estimate; give it by species",
    ),
    (
        'volume = "of feeds"\nadiabatic = true',
        CASE.replace('pressure = "3 bar"\n', ""),
        "feeds.air",
        "held volume of feeds needs the pressure of every gas",
    ),
    (
        'volume = 2.0\nentropy = "from feeds"',
        CASE.replace('pressure = "2 bar"\n', ""),
        "feeds.fuel",
        "held entropy at a held volume needs the pressure",
    ),
    (P + "adiabatic = true", CASE.replace("400 degC", "40000 degC"), "feeds.air.temperature", "beyond all data"),
    (P + 'heat = 3.0\n[[sweep]]\nvary = "held.temperature"\nvalues = [900]', CASE, "sweep[1].vary", "held.heat"),
    (
        P + 'entropy = "from feeds"\nisentropic_efficiency = 0.9\n[[sweep]]\nvary = "held.isentropic_efficiency"\n'
        "values = [0.9, 1.1]",
        CASE,
        "sweep[1].values[2]",
        "at most 1",
    ),
    (
        'volume = "of feeds"\nadiabatic = true\n[[sweep]]\nvary = "held.volume"\nvalues = ["2 m3"]',
        CASE,
        "sweep[1].vary",
        "cannot be varied",
    ),
]


@pytest.mark.parametrize(("held", "text", "key", "words"), BAD)
def test_what_cannot_be_held_is_named(read: Read, held: str, text: str, key: str, words: str) -> None:
    with pytest.raises(CaseError) as caught:
        read(held, text)
    assert caught.value.key == key
    assert words in caught.value.message


def enthalpy_by_hand() -> float:
    """1 mol CH4 at 25 degC and air for an air ratio of 1.2 at 400 degC, J."""
    get = load().get
    air = {"N2": 0.78087, "O2": 0.209476, "Ar": 0.00934, "CO2": 0.000314}
    n = 1.2 * 2.0 / 0.209476  # mol air
    warm = sum(x * get(name).enthalpy(673.15) for name, x in air.items())
    return get("CH4").enthalpy(298.15) + n * warm


def test_adiabatic_is_the_enthalpy_of_the_feeds(read: Read) -> None:
    study = read(P + "adiabatic = true")
    assert study.conditions.held.keys() == {"pressure", "enthalpy"}
    assert study.conditions.held["enthalpy"] == pytest.approx([enthalpy_by_hand()], rel=1e-4)


def test_heat_counts_into_the_system(read: Read) -> None:
    study = read(P + 'heat = "-40 kJ"')
    without = read(P + "adiabatic = true").conditions.held["enthalpy"]
    assert study.conditions.held["enthalpy"] == pytest.approx(without - 40e3)
    result = study.run()
    assert result.heat(0) == -40e3
    assert result.work(0) == 0.0
    assert result.batch.enthalpy[0] - study.conditions.account.feed_enthalpy[0] == pytest.approx(-40e3, rel=1e-9)


def test_heat_of_flows_is_a_power(read: Read) -> None:
    held = read(P + 'heat = "-40 kW"', FLOWS).conditions.held["enthalpy"]
    assert held == pytest.approx(read(P + "heat = -40e3", FLOWS).conditions.held["enthalpy"])


def test_a_vessel_keeps_its_internal_energy(read: Read) -> None:
    study = read('volume = "of feeds"\nadiabatic = true')
    n = 1.2 * 2.0 / 0.209476
    volume = R * (298.15 / 2e5 + n * 673.15 / 3e5)
    energy = enthalpy_by_hand() - R * (298.15 + n * 673.15)
    assert study.conditions.held["volume"] == pytest.approx([volume], rel=1e-6)
    assert study.conditions.held["internal_energy"] == pytest.approx([energy], rel=1e-4)
    result = study.run()
    state = result.to_dict()["states"][0]
    assert state["heat"] == 0.0
    assert state["internal_energy"] == pytest.approx(state["feed_internal_energy"], rel=1e-9)
    assert state["held"] == {name: values[0] for name, values in study.conditions.held.items()}
    assert state["audit"]["entropy_generated"] > 0.0


@pytest.mark.parametrize("held", ["volume = 0.5\nadiabatic = true", 'volume = "500 L"\ntemperature = 2000.0'])
def test_a_vessel_without_pressures_of_its_feeds_has_no_second_law_account(read: Read, held: str) -> None:
    text = CASE.replace('pressure = "2 bar"\n', "").replace('pressure = "3 bar"\n', "")
    result = read(held, text).run()
    state = result.to_dict()["states"][0]
    assert state["audit"] is None
    assert state["volume"] == pytest.approx(0.5)
    assert "fuel, air is not given" in result.account.remark


def test_entropy_of_one_feed_is_kept(read: Read) -> None:
    text = CASE.split("[feeds.air]")[0].replace("CH4", "N2").replace("25 degC", "1500 K") + "[held]\n"
    result = read(P + 'entropy = "from feeds"', text).run()
    nitrogen = load().get("N2")
    # 2 bar to 1 bar at constant entropy of one ideal gas
    T = result.batch.temperature[0]
    assert nitrogen.entropy(1500.0) - nitrogen.entropy(T) == pytest.approx(R * np.log(2.0), rel=1e-6)
    assert result.audit(0) is not None
    assert result.audit(0).entropy_generated == 0.0
    assert result.work(0) == pytest.approx(nitrogen.enthalpy(T) - nitrogen.enthalpy(1500.0), rel=1e-6)
    assert result.heat(0) == 0.0


def test_several_feeds_mix_before_they_expand(read: Read) -> None:
    """Argon at two temperatures and pressures: the mean temperature, the lower pressure (5/2 R, monatomic)."""
    text = """\
title = "Argon"
[species]
allow = ["Ar"]
[feeds.cold]
species = "Ar"
amount = 1.0
temperature = 300.0
pressure = "2 bar"
[feeds.hot]
species = "Ar"
amount = 3.0
temperature = 700.0
pressure = "5 bar"
[held]
"""
    result = read(P + 'entropy = "from feeds"', text).run()
    assert result.batch.temperature[0] == pytest.approx(600.0 * 0.5**0.4, rel=1e-5)
    made = 4 * 2.5 * np.log(600.0) - 2.5 * np.log(300.0) - 7.5 * np.log(700.0) + 3 * np.log(5.0 / 2.0)
    assert result.audit(0).entropy_generated == pytest.approx(R * made, rel=1e-5)  # the data have an older R


def test_efficiency_takes_its_share_of_the_work(read: Read) -> None:
    text = CASE.split("[feeds.air]")[0].replace("CH4", "Ar").replace("25 degC", "1500 K") + "[held]\n"
    for pressure, factor in (("1 bar", 0.9), ("8 bar", 1.0 / 0.9)):
        held = f'pressure = "{pressure}"\nentropy = "from feeds"\n'
        ideal = read(held, text).run()
        real = read(held + "isentropic_efficiency = 0.9", text).run()
        assert real.work(0) == pytest.approx(factor * ideal.work(0), rel=1e-7)
        assert real.batch.certified.all()
        assert real.audit(0).entropy_generated > 0.0


SWEPT = [
    (P + 'heat = "1 kJ"', "held.heat", '["-10 kJ", "10 kJ"]', "temperature"),
    (P + "adiabatic = true", "held.pressure", '["1 bar", "10 bar"]', "temperature"),
    ("volume = 0.3\nadiabatic = true", "held.volume", '["0.5 m3", "0.3 m3"]', "pressure"),
    (P + "adiabatic = true", "feeds.air.temperature", '["25 degC", "400 degC"]', "temperature"),
    ('volume = "of feeds"\nadiabatic = true', "feeds.air.pressure", '["1 bar", "3 bar"]', "pressure"),
    (P + 'entropy = "from feeds"', "feeds.air.pressure", '["3 bar", "1.5 bar"]', "temperature"),
]


@pytest.mark.parametrize(("held", "vary", "values", "rising"), SWEPT)
def test_what_is_held_can_be_varied(read: Read, held: str, vary: str, values: str, rising: str) -> None:
    study = read(f'{held}\n[[sweep]]\nvary = "{vary}"\nvalues = {values}')
    result = study.run()
    assert result.batch.certified.all()
    first, last = getattr(result.batch, rising)
    assert last > first * (1.0 + 1e-6)
    data = result.dataset()
    assert data["temperature"].dims == (vary,)
    assert {"heat", "lost_work", "heat_capacity", "sound_speed"} <= set(data.variables)
    alone = read(f'{held}\n[[sweep]]\nvary = "{vary}"\nvalues = [{values.split(",")[1]}').run()
    assert alone.batch.temperature[0] == pytest.approx(result.batch.temperature[1], rel=1e-9)


def test_surroundings_and_source_of_the_account(read: Read) -> None:
    tail = '\n[surroundings]\ntemperature = "10 degC"\nheat_source_temperature = "1500 degC"'
    audit = read(P + 'heat = "100 kJ"' + tail).run().audit(0)
    assert audit.surroundings_temperature == pytest.approx(283.15)
    assert audit.entropy_of_surroundings == pytest.approx(-100e3 / 1773.15)
    assert audit.lost_work == pytest.approx(283.15 * audit.entropy_generated)


def test_a_request_beyond_the_data_is_a_state_with_its_reason(read: Read) -> None:
    result = read(P + 'heat = "1 GJ"').run()
    state = result.to_dict()["states"][0]
    assert state["certificate"]["ok"] is False
    assert "above all data" in state["certificate"]["reason"]
    assert state["temperature"] is None
    assert state["audit"] is None
    assert state["held"]["pressure"] == 1e5


def test_an_expansion_that_has_no_ideal_end_says_why(read: Read) -> None:
    text = CASE.split("[feeds.air]")[0].replace("CH4", "He").replace("25 degC", "60 K").replace("2 bar", "1000 bar")
    held = P + 'entropy = "from feeds"\nisentropic_efficiency = 0.9'
    result = read(held, text + "[held]\n").run()
    assert not result.batch.certified[0]
    assert "below all data" in result.batch.reason[0]


def test_properties_are_left_out_of_very_large_sweeps(read: Read) -> None:
    held = P + 'adiabatic = true\n[[sweep]]\nvary = "held.pressure"\nfrom = "1 bar"\nto = "2 bar"\npoints = 1001'
    result = read(held).run()
    state = result.to_dict()["states"][1000]
    assert "heat_capacity" not in state
    assert state["audit"]["entropy_generated"] > 0.0


def test_a_step_that_cannot_happen_by_itself_is_a_caution(read: Read) -> None:
    """Feeds at 2 and 3 bar do not end at 90 bar without a compressor."""
    text = CASE.split("[feeds.air]")[0].replace("CH4", "N2") + "[held]\n"
    result = read('pressure = "90 bar"\nadiabatic = true', text).run()
    assert result.audit(0).entropy_generated == pytest.approx(-R * np.log(45.0), rel=1e-5)
    caution = judge(result)[0][0]
    assert caution.kind == "second law"
    assert "must be compressed" in caution.text
    assert "second law  " not in "\n".join(summary(result, judge(result), Path("x")))


FED = st.dictionaries(st.sampled_from(["CH4", "H2", "O2", "N2", "CO2", "H2O", "H2O(l)", "CO"]), st.floats(0.05, 5.0))
HELD = st.sampled_from(
    [
        "adiabatic = true",
        'heat = "-2 kJ"',
        'entropy = "from feeds"',
        'entropy = "from feeds"\nisentropic_efficiency = 0.8',
    ]
)


@given(
    st.lists(st.tuples(FED.filter(bool), st.floats(290.0, 1500.0), st.floats(0.0, 2.0)), min_size=1, max_size=3), HELD
)
@settings(max_examples=40, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
def test_entropy_never_falls_and_energy_closes(
    read: Read, feeds: list[tuple[dict[str, float], float, float]], held: str
) -> None:
    """Random feeds of at least the held pressure."""
    text = 'title = "Any"\n'
    for k, (amounts, temperature, decades) in enumerate(feeds):
        inside = ", ".join(f'"{name}" = {n!r}' for name, n in amounts.items())
        text += f"[feeds.f{k}]\namounts = {{ {inside} }}\n"
        text += f"temperature = {temperature!r}\npressure = {1e5 * 10**decades!r}\n"
    result = read(P + held, text + "[held]\n").run()
    state = result.to_dict()["states"][0]
    if not state["certificate"]["ok"]:
        assert "all data" in state["certificate"]["reason"]
        return
    out, fed = state["enthalpy"], state["feed_enthalpy"]
    assert out - fed == pytest.approx(state["heat"] + state["work"], abs=1e-9 * (abs(out) + abs(fed)))
    assert state["audit"]["entropy_generated"] >= 0.0
