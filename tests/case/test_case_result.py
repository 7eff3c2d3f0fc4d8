"""What a study finds: closed balances, the contract of result.json, named axes."""

import dataclasses
import json

import numpy as np
import pytest

from gibbsmin.case.read import read_case
from gibbsmin.elements import parse_formula, split_name
from gibbsmin.solver.status import MEANING, SOLVED
from gibbsmin.thermo.database import load

NO_SWEEP = '[[sweep]]\nvary = "held.temperature"\nfrom = "800 degC"\nto = "900 degC"\npoints = 3\n'


@pytest.fixture
def result(write):
    more = '[[sweep]]\nvary = "feeds.steam.steam_to_carbon"\nvalues = [2.0, 3.0]\n\n[show]'
    return read_case(write(("[show]", more))).run()


@pytest.fixture
def single(write):
    return read_case(write((NO_SWEEP, ""))).run()


def test_states_are_certified_and_balanced(result):
    assert len(result.batch) == 6
    assert result.batch.certified.all()
    # atoms in, from the feeds by hand: H of 93 CH4 + 4 C2H6 and of 2 or 3 x 101 H2O, kmol/h
    hydrogen = 4 * 93 + 6 * 4 + 2 * np.array([202.0, 303.0] * 3)
    counts = [parse_formula(split_name(name).formula)[0].get("H", 0.0) for name in result.system.species]
    assert result.batch.amounts @ np.array(counts) * 3.6 == pytest.approx(hydrogen, rel=1e-9)


def test_result_json_is_safe_and_complete(result):
    data = json.loads(json.dumps(result.to_dict(), allow_nan=False))
    assert {"schema", "title", "basis", "case", "provenance", "states"} <= data.keys()
    assert data["basis"] == "mol/s"
    assert data["case"]["species"]["condensed"] is True
    assert data["provenance"]["case_sha256"] == result.case_sha256
    state = data["states"][1]
    assert state["inputs"] == {"held.temperature": 800.0, "feeds.steam.steam_to_carbon": 3.0}
    assert state["temperature"] == pytest.approx(1073.15)
    assert state["certificate"]["ok"] is True
    assert set(state["amounts"]) == set(result.system.species)
    gas = [name for name, flag in zip(result.system.species, result.system.gas, strict=True) if flag]
    assert sum(state["mole_fractions"][name] for name in gas) == pytest.approx(1.0)
    assert state["phases"]["gas"] == pytest.approx(sum(state["amounts"][name] for name in gas))


def test_a_state_that_failed_has_nulls_and_a_reason(single):
    outcome = single.batch.outcome._replace(status=np.array([next(code for code in MEANING if code != SOLVED)]))
    failed = dataclasses.replace(single, batch=dataclasses.replace(single.batch, outcome=outcome))
    state = json.loads(json.dumps(failed.to_dict(), allow_nan=False))["states"][0]
    assert state["amounts"]["CH4"] is None
    assert state["mole_fractions"]["CH4"] is None
    assert state["phases"]["gas"] is None
    assert state["enthalpy"] is None
    assert state["heat"] is None
    assert state["certificate"]["ok"] is False
    assert len(state["certificate"]["reason"]) > 10
    assert failed.dataset()["reason"].item() == state["certificate"]["reason"]


def test_heat_is_enthalpy_out_less_enthalpy_in(single):
    get = load().get
    flows = {"CH4": 93.0, "C2H6": 4.0, "N2": 2.0, "CO2": 1.0, "H2O": 303.0}  # kmol/h, all at 550 degC
    entering = sum(n / 3.6 * get(name).enthalpy(823.15) for name, n in flows.items())
    leaving = sum(n * get(name).enthalpy(1143.15) for name, n in single.state(0).amounts.items() if n > 0.0)
    assert single.heat(0) == pytest.approx(leaving - entering, rel=1e-6)
    # a primary reformer of 100 kmol/h takes up several MW (common practice, no source)
    assert 5e6 < single.heat(0) < 9e6


def test_no_heat_without_the_temperature_of_every_feed(write):
    text = 'steam_to_carbon = 3.0\ntemperature = "550 degC"'
    result = read_case(write((NO_SWEEP, ""), (text, "steam_to_carbon = 3.0"))).run()
    assert result.heat(0) is None
    assert "heat" not in result.dataset()


def test_named_axes_in_the_units_that_were_typed(result):
    data = result.dataset()
    assert data["amount"].dims == ("held.temperature", "feeds.steam.steam_to_carbon", "species")
    assert list(data["held.temperature"].values) == [800.0, 850.0, 900.0]
    assert data["held.temperature"].attrs["units"] == "degC"
    assert data["heat"].attrs["units"] == "W"
    hot = data.sel({"held.temperature": 900.0, "feeds.steam.steam_to_carbon": 3.0})
    assert float(hot["temperature"]) == pytest.approx(1173.15)
    assert float(hot["amount"].sel(species="H2")) == pytest.approx(result.state(5).amounts["H2"])
    assert float(hot["mole_fraction"].sel(species="H2")) == pytest.approx(result.state(5).mole_fractions["H2"])


def test_a_data_set_survives_its_file(result, tmp_path):
    import xarray

    path = tmp_path / "result.nc"
    result.dataset().to_netcdf(path, engine="h5netcdf")
    with xarray.open_dataset(path, engine="h5netcdf") as again:
        assert again["amount"].equals(result.dataset()["amount"])
        assert again["heat"].attrs["units"] == "W"


def test_one_state_has_no_axes(single):
    assert single.dataset()["amount"].dims == ("species",)
    assert single.inputs == {}
    assert single.display_units == {"temperature": "degC", "pressure": "bar", "amount": "kmol/h"}


def test_progress_is_told(write):
    told = []
    read_case(write(("points = 3", "points = 2001"))).run(progress=lambda done, total: told.append((done, total)))
    assert told == [(2000, 2001), (2001, 2001)]


def test_scaling_the_feeds_scales_the_result(write):
    one = read_case(write((NO_SWEEP, ""))).run()
    ten = read_case(write((NO_SWEEP, ""), ("100 kmol/h", "1000 kmol/h"))).run()
    assert ten.batch.amounts == pytest.approx(10.0 * one.batch.amounts, rel=1e-8, abs=1e-30)
    assert ten.heat(0) == pytest.approx(10.0 * one.heat(0))


def test_a_large_sweep_leaves_out_what_never_counts_and_says_so(write):
    result = read_case(write(("points = 3", "points = 1001"))).run()
    data = result.to_dict()
    left_out = data["left_out"]["species"]
    assert set(left_out) | set(data["states"][0]["amounts"]) == set(result.system.species)
    assert "CH4" not in left_out
    fractions = result.dataset()["mole_fraction"].sel(species=left_out)
    assert float(fractions.max()) < data["left_out"]["below_mole_fraction"] == 1e-12
