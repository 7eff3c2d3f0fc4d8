"""The files of a train: they close, they agree with each other, and hold nothing that is not vouched for."""

from __future__ import annotations

import csv
import json
from collections.abc import Callable
from functools import cache
from pathlib import Path
from typing import Any, NamedTuple

import pytest
import train_texts

from gibbsmin.case.read import read_case
from gibbsmin.errors import InputError

Row = dict[str, str]


class Folder(NamedTuple):
    """A result folder that was read: ``data`` of result.json, rows of the three tables, and its ``path``."""

    data: dict[str, Any]
    table: list[Row]
    steps: list[Row]
    streams: list[Row]
    path: Path

    def row(self, what: str, unit: str, state: int = 1) -> Row:
        """Row of the stream table of one state."""
        (found,) = [r for r in self.streams if (r["what"], r["unit"], r["state"]) == (what, unit, str(state))]
        return found


@pytest.fixture(scope="session")
def folder(tmp_path_factory: pytest.TempPathFactory) -> Callable[[str], Folder]:
    """Run a train and read its folder, once a session."""

    @cache
    def run(text: str) -> Folder:
        place = tmp_path_factory.mktemp("train")
        (place / "case.toml").write_text(text)
        read_case(place / "case.toml").run(place / "out")
        tables = []
        for name in ("table", "steps", "streams"):
            with (place / "out" / f"{name}.csv").open(newline="", encoding="utf-8") as file:
                tables.append(list(csv.DictReader(file)))
        data = json.loads((place / "out" / "result.json").read_text(encoding="utf-8"))
        return Folder(data, *tables, place / "out")

    return run


def test_heads_have_units(folder: Callable[[str], Folder]) -> None:
    found = folder(train_texts.LOOP + train_texts.PURGES)
    assert all("[" in head or head == "reason" for head in found.table[0])
    plain = {"state", "step", "takes", "gives"}
    assert all("[" in head or head in plain for head in found.steps[0])
    assert "stages.condenser.take.purge.percent [-]" in found.streams[0]


def test_stream_table_closes(folder: Callable[[str], Folder]) -> None:
    found = folder(train_texts.SHIFT)
    for unit in ("mole % of the gas, wet", "mole % of the gas, dry"):
        total = found.row("total", unit)
        parts = [r for r in found.streams if r["unit"] == unit and r["what"] != "total"]
        for name in ("gas", "hot_bed", "knock_out"):
            assert float(total[name]) == pytest.approx(100.0, abs=1e-9)
            assert sum(float(r[name] or 0.0) for r in parts) == pytest.approx(100.0, abs=1e-9)
        assert total["knock_out.water"] == ""  # no gas
    mass = found.row("mass", "kg/h")
    assert float(mass["all products"]) == pytest.approx(float(mass["all feeds"]), rel=1e-12)
    elements = [r for r in found.streams if r["what"].startswith("element ")]
    assert {r["what"] for r in elements} == {"element C", "element H", "element O", "element Ar"}
    for r in elements:
        assert float(r["all products"]) == pytest.approx(float(r["all feeds"]), rel=1e-12)
        assert float(r["knock_out"]) + float(r["knock_out.water"]) == pytest.approx(float(r["cold_bed"]), rel=1e-12)


def test_trade_units_stand_beside_SI(folder: Callable[[str], Folder]) -> None:
    found = folder(train_texts.SHIFT)
    for what, si, trade, factor, zero in (
        ("temperature", "K", "degC", 1.0, -273.15), ("pressure, absolute", "Pa", "bar", 1e-5, 0.0),
        ("amount", "mol/s", "kmol/h", 3.6, 0.0), ("mass", "kg/s", "kg/h", 3600.0, 0.0),
        ("enthalpy", "W", "kW", 1e-3, 0.0), ("H2", "mol/s", "kmol/h", 3.6, 0.0),
    ):  # fmt: skip
        one, other = found.row(what, si), found.row(what, trade)
        assert float(other["cold_bed"]) == pytest.approx(factor * float(one["cold_bed"]) + zero, rel=1e-12)
    # the ideal gas by hand: 22.414 L/mol at 0 degC and 101325 Pa
    n, T, P = (
        float(found.row(*key)["gas"])
        for key in (("amount", "mol/s"), ("temperature", "K"), ("pressure, absolute", "Pa"))
    )
    assert float(found.row("gas at 0 degC and 101325 Pa", "Nm3/h")["gas"]) == pytest.approx(
        3600.0 * 0.022414 * n, rel=2e-5
    )
    there = float(found.row("gas at its temperature and pressure", "m3/s")["gas"])
    assert there == pytest.approx(0.022414 * n * T / 273.15 * 101325.0 / P, rel=2e-5)
    assert float(found.row("H2", "kg/h")["cold_bed"]) == pytest.approx(
        2.016 * float(found.row("H2", "kmol/h")["cold_bed"])
    )


def test_stream_table_says_whence_and_whither(folder: Callable[[str], Folder]) -> None:
    found = folder(train_texts.LOOP)
    assert found.row("from", "")["condenser.purge"] == "condenser"
    assert found.row("to", "")["condenser"] == "heater"
    assert found.row("to", "")["condenser.purge"] == found.row("from", "")["make_up"] == ""


def test_steps_balance_by_their_own_numbers(folder: Callable[[str], Folder]) -> None:
    found = folder(train_texts.LOOP)
    for r in found.steps:
        H_in, H_out, heat, work = (float(r[f"{key} [W]"]) for key in ("enthalpy in", "enthalpy out", "heat", "work"))
        assert abs(H_in + heat + work - H_out) <= 1e-9 * max(map(abs, (H_in, H_out, heat, work)))
        assert float(r["mass in [kg/h]"]) == pytest.approx(float(r["mass out [kg/h]"]), rel=1e-9)
        assert float(r["energy left open [-]"]) < 1e-9
        assert float(r["elements left open [-]"]) < 1e-9
    *steps, whole = found.steps
    assert whole["step"] == "whole train"
    assert whole["takes"] == "make_up"
    assert whole["gives"] == "condenser.ammonia + condenser.purge"
    assert sum(float(r["lost work [% of all]"]) for r in steps) == pytest.approx(100.0)
    for key in ("heat [W]", "work [W]", "lost work [W]"):
        assert sum(float(r[key]) for r in steps) == pytest.approx(float(whole[key]))


def test_tables_agree_with_the_document(folder: Callable[[str], Folder]) -> None:
    found = folder(train_texts.LOOP + train_texts.PURGES)
    for i, state in enumerate(found.data["states"]):
        row = found.table[i]
        assert row["certified [-]"] == str(int(state["certificate"]["ok"]))
        assert row["reason"] == state["certificate"]["reason"]
        if i == 0:
            continue
        assert float(row["train.heat [W]"]) == state["train"]["heat"]
        assert float(row["train.N2.conversion_per_pass [-]"]) == state["train"]["conversion"]["N2"]["per_pass"]
        assert float(row["converter.temperature [K]"]) == state["streams"]["converter"]["temperature"]
        name = "converter.ammonia.h2_to_n2 [-]"
        assert float(row[name]) == state["stages"]["converter"]["key_figures"]["ammonia"]["h2_to_n2"]
        purge = state["streams"]["condenser.purge"]
        assert float(found.row("Ar", "mol/s", i + 1)["condenser.purge"]) == purge["amounts"]["Ar"]
        assert float(row["condenser.purge.Ar [mol/s]"]) == purge["amounts"]["Ar"]


def test_nothing_stands_where_a_recycle_is_not_steady(folder: Callable[[str], Folder]) -> None:
    found = folder(train_texts.LOOP + train_texts.PURGES)
    state = found.data["states"][0]
    assert not state["certificate"]["ok"]
    assert state["streams"]["make_up"]["mass"] > 0.0
    assert all(one["mass"] is None and one["amounts"] == {} for n, one in state["streams"].items() if n != "make_up")
    assert not state["stages"]["converter"]["certificate"]["ok"]
    assert set(state["stages"]["converter"]["key_figures"]["ammonia"].values()) == {None}
    assert state["cautions"] == []
    assert all(cell is None for account in state["steps"].values() for cell in account.values())
    known = {"stages.condenser.take.purge.percent [-]", "train.recycle_residual [-]", "certified [-]", "reason"}
    assert {head for head, cell in found.table[0].items() if cell} == known
    assert found.row("mass", "kg/h", 1)["condenser"] == found.row("mass", "kg/h", 1)["all products"] == ""
    assert found.row("mass", "kg/h", 3)["condenser"] != ""


def test_the_proof_of_a_state_is_the_worst_of_its_stages(folder: Callable[[str], Folder]) -> None:
    for state in folder(train_texts.TOO_COLD + train_texts.COOLING).data["states"]:
        stages = [stage["certificate"] for stage in state["stages"].values()]
        for key in ("element_residual", "gap", "worst_affinity"):
            told = state["certificate"][key]
            if state["certificate"]["ok"]:
                assert told == max(abs(one[key]) for one in stages)
            else:
                assert told is None


def test_what_comes_before_a_step_that_fails_stands(folder: Callable[[str], Folder]) -> None:
    found = folder(train_texts.TOO_COLD + train_texts.COOLING)
    good, bad, other = found.data["states"]
    assert good["certificate"]["ok"]
    assert other["certificate"]["ok"]
    assert bad["certificate"]["reason"].startswith("freezer: ")
    assert bad["streams"]["bed"]["temperature"] == pytest.approx(good["streams"]["bed"]["temperature"], rel=1e-9)
    assert bad["steps"]["bed"]["lost_work"] == pytest.approx(good["steps"]["bed"]["lost_work"], rel=1e-6)
    for name in ("freezer", "heater", "last"):
        assert bad["streams"][name]["temperature"] is None
        assert set(bad["steps"][name].values()) == {None}
    assert bad["train"]["heat"] is None
    assert found.table[1]["train.heat [W]"] == found.table[1]["heater.temperature [K]"] == ""


def test_a_state_does_not_hang_on_its_neighbours_that_fail(folder: Callable[[str], Folder]) -> None:
    alone = folder(train_texts.TOO_COLD.replace("-50 MW", "-0.2 MW"))
    along = folder(train_texts.TOO_COLD + train_texts.COOLING)
    for name, one in alone.data["states"][0]["streams"].items():
        same = along.data["states"][2]["streams"][name]
        assert same["temperature"] == pytest.approx(one["temperature"], rel=1e-9)
        assert same["amounts"] == pytest.approx(one["amounts"], rel=1e-8)


def test_a_frozen_part_counts_with_its_species(folder: Callable[[str], Folder]) -> None:
    text = train_texts.SHIFT.replace(
        'held = { adiabatic = true, pressure_drop = "1 bar" }',
        'held = { adiabatic = true, pressure_drop = "1 bar" }\nspecies = { elements = "C H O", inert = ["CH4"] }',
    )
    found = folder(text)
    streams = found.data["states"][0]["streams"]
    assert streams["hot_bed"]["amounts"]["CH4"] == pytest.approx(0.049995 * 100.0 / 3.6, rel=1e-12)
    assert not any("frozen" in name for one in streams.values() for name in one["amounts"])
    assert not any("frozen" in r["what"] for r in found.streams)


def test_amounts_that_are_no_flows_and_a_fuel_by_analysis(folder: Callable[[str], Folder]) -> None:
    found = folder(train_texts.BURNER)
    assert {r["unit"] for r in found.streams} & {"kg/h", "W", "kmol/h", "Nm3/h"} == set()
    char = found.data["states"][0]["streams"]["char"]
    # 80 % of the dry fuel is carbon; dry fuel is 1/1.05 of a kilogram
    assert char["atoms"]["C"] == pytest.approx(0.80 / 1.05 / 0.012011, rel=1e-4)
    carbon = found.row("element C", "mol")
    assert float(carbon["char"]) == pytest.approx(char["atoms"]["C"], rel=1e-12)
    assert float(carbon["all products"]) == pytest.approx(float(carbon["all feeds"]), rel=1e-9)
    assert float(found.row("mass", "kg")["products less feeds"]) == pytest.approx(0.0, abs=1e-9)


def test_dataset_holds_the_same_streams(folder: Callable[[str], Folder]) -> None:
    import xarray

    found = folder(train_texts.LOOP + train_texts.PURGES)
    with xarray.open_dataset(found.path / "result.nc", engine="h5netcdf") as data:
        some = data["amount"].sel(stream="condenser.purge", species="Ar").values
        assert data["amount"].attrs["units"] == "mol/s"
        assert data["step_work"].sel(step="compressor").values[1:] == pytest.approx(
            [state["steps"]["compressor"]["work"] for state in found.data["states"][1:]]
        )
    expected = [state["streams"]["condenser.purge"]["amounts"].get("Ar") for state in found.data["states"]]
    assert str(some[0]) == "nan"
    assert some[1:] == pytest.approx(expected[1:])


def test_an_earlier_result_of_either_kind_is_replaced_and_notes_are_kept(tmp_path: Path) -> None:
    (tmp_path / "case.toml").write_text(train_texts.TOO_COLD.replace("-50 MW", "-0.2 MW"))
    study = read_case(tmp_path / "case.toml")
    study.run(tmp_path / "out")
    study.run(tmp_path / "out")
    assert sorted(p.name for p in (tmp_path / "out").iterdir()) == [
        "result.json",
        "steps.csv",
        "streams.csv",
        "table.csv",
    ]
    (tmp_path / "out" / "notes.txt").write_text("mine")
    with pytest.raises(InputError, match="did not write"):
        study.run(tmp_path / "out")
    assert (tmp_path / "out" / "notes.txt").read_text() == "mine"
