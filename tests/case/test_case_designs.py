"""Designs of a case: parts of a study, its columns, and what the result says of them."""

import numpy as np
import pytest
import train_texts
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from gibbsmin.case.axes import AxisValues
from gibbsmin.case.read import read_case
from gibbsmin.errors import CaseError, InputError
from gibbsmin.report.explained import explained
from gibbsmin.report.summary import summary
from gibbsmin.report.train_explained import train_explained
from gibbsmin.report.train_summary import train_summary
from gibbsmin.results.judge import judge
from gibbsmin.results.judge_train import judge_train

TEMPERATURE = '[[sweep]]\nvary = "held.temperature"\nfrom = "800 degC"\nto = "900 degC"\npoints = 3\n'
RANGES = (
    '[[sweep]]\nvary = "held.temperature"\nfrom = "700 degC"\nto = "900 degC"\n{0}'
    '[[sweep]]\nvary = "held.pressure"\nfrom = "1 bar"\nto = "100 bar"\nspacing = "logarithmic"\n{1}'
    '[[sweep]]\nvary = "feeds.steam.steam_to_carbon"\nfrom = 4\nto = 0.5\n{2}'
)
SMALL = (
    'elements = "from feeds"',
    'allow = ["CH4", "C2H6", "H2O", "CO", "CO2", "H2", "N2", "O2", "graphite"]\ncondensed = true',
)
KINDS = {
    "grid": ("", ["points = 3\n", "points = 2\n", "points = 4\n"]),
    "in step": ('[design]\nkind = "in step"\n', ["points = 9\n"] * 3),
    "latin hypercube": ('[design]\nkind = "latin hypercube"\npoints = 30\nseed = 4\n', [""] * 3),
    "sobol": ('[design]\nkind = "sobol"\npoints = 32\nseed = 4\n', [""] * 3),
}


def study_of(write, kind):
    head, points = KINDS[kind]
    return read_case(write(SMALL, (TEMPERATURE, head + RANGES.format(*points))))


@pytest.mark.parametrize("kind", KINDS)
@settings(max_examples=15, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(data=st.data())
def test_a_part_is_a_slice_of_the_study(write, kind, data):
    study = study_of(write, kind)
    start = data.draw(st.integers(0, study.states - 1))
    stop = data.draw(st.integers(start + 1, study.states))
    part = study.part(start, stop)
    assert (part.states, part.all_states, part.shape) == (stop - start, study.states, study.shape)
    for whole, mine in ((study.columns, part.columns), (study.typed_inputs, part.typed_inputs)):
        assert list(whole) == list(mine)
        for name in whole:
            assert mine[name].tolist() == whole[name][start:stop].tolist()
    assert part.element_amounts == pytest.approx(study.element_amounts[start:stop], rel=1e-14)
    for name, values in part.conditions.held.items():
        assert values.tolist() == study.conditions.held[name][start:stop].tolist()


@pytest.mark.parametrize(("start", "stop"), [(-1, 3), (3, 3), (0, 25), (30, 31)])
def test_there_is_no_such_part(write, start, stop):
    with pytest.raises(InputError, match="the study has 0 to 24"):
        study_of(write, "grid").part(start, stop)


def test_values_in_step_go_together(write):
    columns = study_of(write, "in step").typed_inputs
    assert columns["held.temperature"] == pytest.approx(np.linspace(700.0, 900.0, 9))
    assert columns["held.pressure"] == pytest.approx(np.logspace(0.0, 2.0, 9))
    assert columns["feeds.steam.steam_to_carbon"] == pytest.approx(np.linspace(4.0, 0.5, 9))


@pytest.mark.parametrize("kind", ["latin hypercube", "sobol"])
def test_points_are_drawn_within_the_ranges_and_fill_them(write, kind):
    columns = study_of(write, kind).typed_inputs
    T, P, S = columns.values()
    assert 700.0 <= T.min() < 710.0 < 890.0 < T.max() <= 900.0
    assert 1.0 <= P.min() < 1.2 < 83.0 < P.max() <= 100.0
    assert 0.5 <= S.min() < 0.7 < 3.8 < S.max() <= 4.0
    # Logarithmic: half of the points lie below the geometric mean of the ends.
    assert np.sum(P < 10.0) == pytest.approx(len(P) / 2, abs=1)


@pytest.mark.parametrize("kind", ["latin hypercube", "sobol"])
def test_another_reading_of_the_file_draws_the_same(write, kind):
    first, again = study_of(write, kind), study_of(write, kind)
    for name, values in first.columns.items():
        assert values.tolist() == again.columns[name].tolist()


def test_ten_million_states_are_read_and_parted_at_once(write):
    big = RANGES.format("points = 250\n", "points = 200\n", "points = 200\n")
    study = read_case(write(SMALL, (TEMPERATURE, big)))
    assert study.states == 10_000_000
    part = study.part(9_999_998, 10_000_000)
    assert part.typed_inputs["feeds.steam.steam_to_carbon"] == pytest.approx([0.5 + 3.5 / 199, 0.5])
    assert part.element_amounts.shape == (2, len(part.system.elements))
    assert "columns" not in vars(study)  # arrays of all states are not made
    assert study.describe()["states"] == 10_000_000
    assert "columns" not in vars(study)


def test_what_cannot_be_at_the_end_of_a_range_is_told_before_anything_runs(write):
    hot = RANGES.replace('"900 degC"', '"30000 degC"')
    for head, points in KINDS.values():
        with pytest.raises(CaseError, match="beyond all data") as caught:
            read_case(write(SMALL, (TEMPERATURE, head + hot.format(*points))))
        assert caught.value.key == "sweep[1]"
    many = hot.format("points = 100\n", "points = 100\n", "points = 100\n")
    with pytest.raises(CaseError, match="beyond all data"):
        read_case(write(SMALL, (TEMPERATURE, many)))


@given(st.floats(1e-9, 1e9), st.floats(1.01, 1e9), st.integers(2, 50))
def test_logarithmic_values_have_equal_ratios(first, ratio, count):
    values = AxisValues("x", np.array([first, first * ratio]), "1", "1", logarithmic=True, count=count).values
    assert (values[0], values[-1]) == (first, first * ratio)
    assert values[1:] / values[:-1] == pytest.approx(ratio ** (1.0 / (count - 1)), rel=1e-9)
    assert values.max() <= first * ratio


@pytest.mark.parametrize(
    ("unit", "si", "typed"),
    [
        ("degC", [1073.15, 273.15, 200.0], [800.0, 0.0, -73.15]),
        ("degF", [273.15, 255.3722222222222], [32.0, 0.0]),
        ("bar", [1.7e5, 1e5 / 3.0], [1.7, 0.333333333333]),
    ],
)
def test_values_are_shown_as_they_would_be_typed(unit, si, typed):
    kind = "Pa" if unit == "bar" else "K"
    assert AxisValues("x", np.array(si), kind, unit).typed_values == pytest.approx(typed, rel=1e-12, abs=1e-9)
    # 800 degC is typed as 800, not as 799.9999999999999
    assert AxisValues("x", np.array([1073.15]), "K", "degC").typed_values.tolist() == [800.0]


@pytest.mark.parametrize("kind", ["in step", "latin hypercube", "sobol"])
def test_what_is_not_a_grid_has_one_dimension_and_its_inputs_along_it(write, kind, tmp_path):
    import xarray

    study = study_of(write, kind)
    result = study.run(out=tmp_path / "out")
    data = xarray.open_dataset(tmp_path / "out" / "result.nc", engine="h5netcdf")
    assert data["mole_fraction"].dims == ("point", "species")
    assert set(data.coords) == {*result.inputs, "species"}
    for name, unit in (("held.temperature", "degC"), ("held.pressure", "bar"), ("feeds.steam.steam_to_carbon", "1")):
        assert (data[name].dims, data[name].attrs["units"]) == (("point",), unit)
        assert data[name].values.tolist() == study.typed_inputs[name].tolist()
    assert data["temperature"].values == pytest.approx(data["held.temperature"].values + 273.15)
    assert data["pressure"].values == pytest.approx(1e5 * data["held.pressure"].values)
    assert data["certified"].values.all()
    told = study.case.model_dump(by_alias=True, exclude_none=True)["design"]
    assert result.to_dict()["case"]["design"] == told
    assert told == ({"kind": kind} if kind == "in step" else {"kind": kind, "points": study.states, "seed": 4})
    data.close()


def test_a_grid_of_three_inputs_has_three_dimensions(write):
    data = study_of(write, "grid").run().dataset()
    assert data["mole_fraction"].sizes == {
        "held.temperature": 3, "held.pressure": 2, "feeds.steam.steam_to_carbon": 4, "species": 9,
    }  # fmt: skip
    assert data["held.pressure"].values.tolist() == [1.0, 100.0]
    picked = data.sel({"held.temperature": 800.0, "held.pressure": 100.0, "feeds.steam.steam_to_carbon": 0.5})
    assert (float(picked["temperature"]), float(picked["pressure"])) == pytest.approx((1073.15, 1e7))
    # Oxygen of 1 CO2, and of half a mole of H2O for each carbon of 93 CH4 + 4 C2H6 (not that of CO2), kmol/h.
    water = {"CH4": 0, "C2H6": 0, "H2O": 1, "CO": 1, "CO2": 2}
    oxygen = sum(n * float(picked["amount"].sel(species=name)) for name, n in water.items())
    assert 3.6 * oxygen == pytest.approx(2.0 * 1 + 0.5 * (93 + 8), rel=1e-6)  # free O2 is a trace


def test_the_states_of_a_part_are_those_of_the_whole(write):
    study = study_of(write, "grid")
    whole, part = study.run(), study.part(5, 12).run()
    assert part.batch.amounts == pytest.approx(whole.batch.amounts[5:12], rel=1e-6, abs=1e-10)
    assert part.dataset()["temperature"].dims == ("point",)
    assert part.dataset()["held.pressure"].values.tolist() == whole.inputs["held.pressure"][5:12].tolist()


@pytest.mark.parametrize(
    ("kind", "design", "states"),
    [
        ("grid", "grid of 3 x 2 x 4: each value with each", 24),
        ("in step", "in step", 9),
        ("latin hypercube", "latin hypercube, 30 points, seed 4", 30),
        ("sobol", "sobol, 32 points, seed 4", 32),
    ],
)
def test_check_says_the_design(write, kind, design, states):
    lines = explained(study_of(write, kind).describe())
    assert max(map(len, lines)) <= 80
    assert f"design         {design}" in lines
    assert f"to solve       {states} states; nothing was solved yet" in lines
    count = {"grid": "2 values ", "in step": "9 values "}.get(kind, "")
    assert f"varied         held.pressure, {count}from 1 to 100 bar, logarithmic" in lines


@pytest.mark.parametrize("kind", KINDS)
def test_the_table_of_three_inputs_names_them_and_fits(write, kind, tmp_path):
    result = study_of(write, kind).run()
    lines = summary(result, judge(result), tmp_path)[:-1]
    assert max(map(len, lines)) <= 80
    head = next(k for k, line in enumerate(lines) if line.split()[:3] == ["temperature", "pressure", "steam_to_carbon"])
    rows = lines[head + 2 : head + 2 + len(result.batch)]
    shown = [[float(cell) for cell in row.split()[:3]] for row in rows]
    assert np.array(shown) == pytest.approx(np.column_stack(list(result.inputs.values())), rel=1e-3, abs=5e-3)
    text = "\n".join(lines)
    drawn = kind not in ("grid", "in step")
    assert ("onsets" in text) == (kind == "in step")  # along the temperatures of the grid graphite stays, or stays away
    graphite = (result.batch.amounts[:, result.system.index["C(s):graphite"]] > 0.0).sum()
    assert (f"states with    C(s):graphite {graphite}" in text) == drawn


DRAWN = """
[design]
kind = "sobol"
points = 8
seed = 2
[[sweep]]
vary = "feeds.steam.flow"
from = "40 kmol/h"
to = "80 kmol/h"
[[sweep]]
vary = "stages.knock_out.held.temperature"
from = "20 degC"
to = "60 degC"
[[sweep]]
vary = "feeds.gas.temperature"
from = "330 degC"
to = "370 degC"
[[sweep]]
vary = "feeds.steam.temperature"
from = "330 degC"
to = "370 degC"
"""


def test_a_train_over_points(tmp_path):
    (tmp_path / "case.toml").write_text(train_texts.SHIFT + DRAWN)
    study = read_case(tmp_path / "case.toml")
    result = study.run()
    assert result.certified.all()
    data = result.dataset()
    assert data["amount"].dims == ("point", "stream", "species")
    steam = data["amount"].sel(stream="steam", species="H2O").values
    assert 3.6 * steam == pytest.approx(data["feeds.steam.flow"].values)  # mol/s and kmol/h
    out = data["temperature"].sel(stream="knock_out").values - 273.15
    assert out == pytest.approx(data["stages.knock_out.held.temperature"].values)
    part = study.part(3, 5).run()
    at = list(result.streams).index("knock_out")
    assert part.dataset()["amount"].values[:, at] == pytest.approx(data["amount"].values[3:5, at], rel=1e-7, abs=1e-12)
    lines = train_summary(result, judge_train(result), tmp_path)[:-1]
    assert max(map(len, lines)) <= 80
    varied = " ".join(line.strip() for line in lines[2:6])
    assert "A = feeds.steam.flow, B = stages.knock_out.held.temperature" in varied
    assert "C = feeds.gas.temperature and D = feeds.steam.temperature; sobol, 8 points, seed 2" in varied
    rows = [line.split() for line in lines if line.split()[:4] == ["A", "B", "C", "D"]]
    assert len(rows) >= 2  # the whole train, and its gas
    assert "sobol, 8 points, seed 2" in " ".join(train_explained(study.describe()))
