"""Figures of sweeps: what is chosen by what is varied, what stands in their files, and that the files are whole."""

from __future__ import annotations

import csv
import json
import time
from pathlib import Path
from typing import Any

import numpy as np
import pytest
from figure_folders import SPECIES, sweep_folder, train_folder
from PIL import Image

from gibbsmin.report.figures.files import Made
from gibbsmin.report.figures.make import figures

TEMPERATURES = (np.linspace(500.0, 900.0, 41), "degC")
PRESSURES = (np.geomspace(1.0, 100.0, 9), "bar")


def table(folder: Path, name: str) -> dict[str, np.ndarray]:
    """Read the data of a figure."""
    with (folder / "figures" / f"{name}.csv").open(newline="", encoding="utf-8") as file:
        heads, *rows = list(csv.reader(file))
    columns = zip(*rows, strict=True)
    return {
        head: np.array([float(cell or "nan") for cell in column]) for head, column in zip(heads, columns, strict=True)
    }


def whole(folder: Path, made: list[Made]) -> None:
    """Check that every figure has its three files, its words, and a place in the list."""
    place = folder / "figures"
    listed = json.loads((place / "index.json").read_text(encoding="utf-8"))["figures"]
    assert [one["name"] for one in listed] == [one.name for one in made]
    assert {path.name for path in place.iterdir()} == {"index.json", *(file for one in made for file in one.files)}
    for one in made:
        assert one.title
        assert one.alternative.endswith(".")
        assert one.alternative.count(". ") == 0
        assert (place / f"{one.name}.svg").read_text(encoding="utf-8").rstrip().endswith("</svg>")
        with Image.open(place / f"{one.name}.png") as picture:
            assert picture.width == 1260
            assert picture.info["dpi"][0] == pytest.approx(200.0, abs=0.1)
            grey = np.asarray(picture.convert("L"))
            assert 0.005 < np.mean(grey < 250) < 0.98


def test_one_input(tmp_path: Path) -> None:
    data = sweep_folder(tmp_path, {"held.temperature": TEMPERATURES})
    made = figures(tmp_path)
    whole(tmp_path, made)
    assert [one.name for one in made] == ["composition", "energy", "key_figures"]
    found = table(tmp_path, "composition")
    assert found["held.temperature [degC]"] == pytest.approx(data["held.temperature"].values)
    for name in ("H2", "CH4", "NO", "N2"):
        assert found[f"{name} [mol/mol gas]"] == pytest.approx(
            data["mole_fraction"].sel(species=name).values, rel=1e-12
        )
    assert list(found["C(s):graphite [mol/s]"]) == list(data["amount"].sel(species="C(s):graphite").values)
    assert "H2O(l) [mol/s]" not in found  # it never forms
    first = made[0]
    assert first.title == "What the mixture settles to at 24 bar absolute"
    assert "temperature from 500 to 900 °C" in first.alternative
    assert "kmol/h" in first.alternative
    assert any("C(s) graphite up to 690–700 °C" in note for note in first.notes)
    keys = table(tmp_path, "key_figures")
    assert list(keys["reforming.t_eq [K]"]) == list(data["reforming.t_eq"].values)
    assert "reforming.nothing [-]" not in keys
    assert "reforming.duty [W]" not in keys  # a straight line over the input says no more than the input


def test_states_that_are_not_certified_are_left_out(tmp_path: Path) -> None:
    import xarray

    sweep_folder(tmp_path, {"held.temperature": TEMPERATURES})
    with xarray.open_dataset(tmp_path / "result.nc", engine="h5netcdf") as data:
        changed = data.load()
    changed["certified"][7] = False
    changed.to_netcdf(tmp_path / "result.nc", engine="h5netcdf")
    figures(tmp_path)
    found = table(tmp_path, "composition")
    assert np.flatnonzero(np.isnan(found["H2 [mol/mol gas]"])).tolist() == [7]


def test_no_state_is_certified(tmp_path: Path) -> None:
    import xarray

    sweep_folder(tmp_path, {"held.temperature": TEMPERATURES})
    with xarray.open_dataset(tmp_path / "result.nc", engine="h5netcdf") as data:
        changed = data.load()
    changed["certified"][:] = False
    changed.to_netcdf(tmp_path / "result.nc", engine="h5netcdf")
    assert figures(tmp_path) == []
    assert [path.name for path in (tmp_path / "figures").iterdir()] == ["index.json"]


def test_figures_that_the_case_asks_for_stand_alone(tmp_path: Path) -> None:
    show = {"threshold": 1e-3, "columns": ["reforming.t_eq", "reforming.h2_dry", "no.such"]}
    sweep_folder(tmp_path, {"held.temperature": TEMPERATURES}, show=show)
    figures(tmp_path)
    found = table(tmp_path, "key_figures")
    assert set(found) == {"held.temperature [degC]", "reforming.t_eq [K]", "reforming.h2_dry [-]"}
    assert "NO [mol/mol gas]" not in table(tmp_path, "composition")  # below the threshold of this case


def test_seven_lines_and_the_rest_is_named(tmp_path: Path) -> None:
    import xarray

    names = [f"C{k}H{2 * k + 2}" for k in range(1, 11)]
    sweep_folder(tmp_path, {"held.temperature": TEMPERATURES})
    with xarray.open_dataset(tmp_path / "result.nc", engine="h5netcdf") as data:
        old = data.drop_dims("species").load()
    shares = np.array([10.0 ** -(0.4 * k) for k in range(10)]) * np.ones((41, 1))
    shares[:, 9] *= np.linspace(0.01, 1.0, 41)  # a trace that rises
    over = ("held.temperature", "species")
    new = old.assign(amount=(over, shares), mole_fraction=(over, shares / shares.sum(axis=1, keepdims=True)))
    new.assign_coords(species=names).to_netcdf(tmp_path / "result.nc", engine="h5netcdf")
    made = figures(tmp_path)
    drawn = [head for head in table(tmp_path, "composition") if "mol gas" in head]
    assert len(drawn) == 7
    assert "C10H22 [mol/mol gas]" in drawn
    left = {f"{name} [mol/mol gas]" for name in names} - set(drawn)
    from gibbsmin.report.figures.style import formula

    assert all(formula(head.split(" ")[0]) in made[0].notes[0] for head in left)


def test_families(tmp_path: Path) -> None:
    axes = {"held.temperature": TEMPERATURES, "feeds.gas.mole_ratio": (np.arange(1.0, 6.0), "1")}
    data = sweep_folder(tmp_path, axes, show={"columns": ["reforming.t_eq"]})
    made = figures(tmp_path)
    whole(tmp_path, made)
    assert all("a line for each mole ratio of gas" in one.title for one in made)
    name = next(one.name for one in made if one.name.startswith("reforming_t_eq"))
    found = table(tmp_path, name)
    assert list(found["reforming.t_eq [K]"]) == list(data["reforming.t_eq"].values.ravel())
    T, ratio = np.meshgrid(*(data[axis].values for axis in axes), indexing="ij")
    assert list(found["held.temperature [degC]"]) == list(T.ravel())
    assert list(found["feeds.gas.mole_ratio [-]"]) == list(ratio.ravel())


def test_maps_and_their_regions(tmp_path: Path) -> None:
    axes = {"held.temperature": TEMPERATURES, "held.pressure": PRESSURES}
    data = sweep_folder(tmp_path, axes, show={"columns": ["reforming.h2_dry"]})
    made = figures(tmp_path)
    whole(tmp_path, made)
    assert {one.name for one in made} >= {"map_reforming_h2_dry", "map_C_s_graphite", "map_heat"}
    for one in made:
        assert "°C" in one.alternative
        assert "absolute pressure from 1 to 100 bar" in one.alternative
        assert "dashed the regions of C(s) graphite" in one.alternative
    found = table(tmp_path, "map_heat")
    assert list(found["heat [W]"]) == list(data["heat"].values.ravel())


def test_a_map_of_a_hundred_thousand_states_is_quick(tmp_path: Path) -> None:
    axes = {"held.temperature": (np.linspace(500, 900, 401), "degC"), "held.pressure": (np.linspace(1, 30, 250), "bar")}
    show = {"threshold": 1e-6, "columns": ["reforming.h2_dry"]}
    data = sweep_folder(tmp_path, axes, show=show)
    start = time.perf_counter()
    made = figures(tmp_path)
    assert time.perf_counter() - start < 5.0
    found = table(tmp_path, "map_reforming_h2_dry")
    T, P, h2 = (found[head] for head in ("held.temperature [degC]", "held.pressure [bar]", "reforming.h2_dry [-]"))
    assert 5_000 < T.size < 27_000
    at = data["reforming.h2_dry"].sel({"held.temperature": T[777], "held.pressure": P[777]})
    assert float(at) == h2[777]
    assert T.max() == 900.0
    assert any("every" in note.lower() and "value" in note for note in made[0].notes)


def test_three_and_four_inputs(tmp_path: Path) -> None:
    axes = {
        "held.temperature": TEMPERATURES,
        "held.pressure": (np.array([1.0, 5.0, 30.0]), "bar"),
        "feeds.gas.mole_ratio": (np.arange(1.0, 7.0), "1"),
    }
    show = {"columns": ["reforming.t_eq"]}
    sweep_folder(tmp_path / "three", axes, show=show)
    made = figures(tmp_path / "three")
    whole(tmp_path / "three", made)
    assert all("a panel for each absolute pressure: 1 bar, 5 bar, 30 bar" in one.alternative for one in made)
    data = sweep_folder(tmp_path / "four", {**axes, "feeds.gas.air_ratio": (np.array([0.9, 1.1]), "1")}, show=show)
    made = figures(tmp_path / "four")
    whole(tmp_path / "four", made)
    assert all("air ratio 1.1" in one.title for one in made)
    found = table(tmp_path / "four", "panels_heat")
    assert set(found["feeds.gas.air_ratio [-]"]) == {1.1}
    assert list(found["heat [W]"]) == list(data["heat"].sel({"feeds.gas.air_ratio": 1.1}).values.ravel())


def test_design_without_a_grid(tmp_path: Path) -> None:
    draw = np.random.default_rng(1)
    axes = {
        "held.temperature": (draw.uniform(500, 900, 700), "degC"),
        "held.pressure": (draw.uniform(1, 30, 700), "bar"),
        "feeds.gas.mole_ratio": (draw.uniform(1, 3, 700), "1"),
        "feeds.gas.temperature": (draw.uniform(1, 1.01, 700), "degC"),
    }
    data = sweep_folder(tmp_path, axes, points=True, design={"kind": "sobol", "points": 700, "seed": 1})
    made = figures(tmp_path)
    whole(tmp_path, made)
    assert all("temperature of gas" in note for one in made for note in one.notes[:1])  # the one that does nothing
    found = table(tmp_path, made[0].name)
    head = next(head for head in found if head.startswith("reforming."))
    assert list(found[head]) == list(data[head.split(" [")[0]].values[:512])


def test_inputs_in_step_are_lines(tmp_path: Path) -> None:
    axes = {"held.temperature": TEMPERATURES, "held.pressure": (np.linspace(1, 30, 41), "bar")}
    sweep_folder(tmp_path, axes, points=True, design={"kind": "in step"})
    made = figures(tmp_path)
    whole(tmp_path, made)
    assert made[0].name == "composition"
    assert "temperature from 500 to 900 °C and absolute pressure from 1 to 30 bar" in made[0].alternative


def test_an_input_that_falls_and_two_points_only(tmp_path: Path) -> None:
    sweep_folder(tmp_path, {"held.temperature": (np.array([900.0, 500.0]), "degC")})
    made = figures(tmp_path)
    whole(tmp_path, made)
    assert list(table(tmp_path, "composition")["held.temperature [degC]"]) == [900.0, 500.0]


@pytest.mark.parametrize(
    "odd",
    [
        ["$H_2$", "a/b\\c", "<svg>&amp;", "🜂🜃", "", "Ж"],
        ["X" * 300, "h2", "CON", "..", "%d {0}", "H2"],
    ],
)
def test_odd_names_do_not_break(tmp_path: Path, odd: list[str]) -> None:
    axes = {"feeds.$a_b.mole_ratio": (np.linspace(1, 2, 7), "furlong^2 & <so> on"), "held.pressure": PRESSURES}
    sweep_folder(tmp_path / "one", dict(list(axes.items())[:1]), species=odd)
    sweep_folder(tmp_path / "two", axes, species=odd, show={"columns": ["reforming.h2_dry"]})
    for place in (tmp_path / "one", tmp_path / "two"):
        made = figures(place)
        assert made
        assert all((place / "figures" / file).stat().st_size > 0 for one in made for file in one.files)


def test_train(tmp_path: Path) -> None:
    data: Any = train_folder(tmp_path, 9)
    made = figures(tmp_path)
    whole(tmp_path, made)
    assert [one.name for one in made] == ["steps", "composition_hot_side", "temperatures", "energy"]
    found = table(tmp_path, "composition_hot_side")
    assert list(found["hot.side: H2O(l) [mol/s]"]) == list(
        data["amount"].sel(stream="hot.side", species="H2O(l)").values
    )
    assert "side taken at heater from 1 to 2 %" in made[1].alternative


def test_species_keep_their_colours(tmp_path: Path) -> None:
    from gibbsmin.report.figures.drawn import Colours
    from gibbsmin.report.figures.style import PALETTE

    colours = Colours()
    first = [colours.of(name) for name in SPECIES]
    assert first == [colours.of(name) for name in SPECIES] == list(PALETTE[:6])
    assert colours.of("O2") == PALETTE[6]
    assert colours.of("Ar") is None
