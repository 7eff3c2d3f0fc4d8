"""What `gibbsmin run` prints of a train: the numbers of result.json on 80 columns, none that is not vouched for."""

from __future__ import annotations

from collections.abc import Callable
from functools import cache
from pathlib import Path
from typing import Any, NamedTuple

import pytest
import train_texts

from gibbsmin.case.read import read_case
from gibbsmin.report.train_heads import head_rows
from gibbsmin.report.train_summary import train_summary
from gibbsmin.results.document import document
from gibbsmin.results.judge_train import judge_train


class Shown(NamedTuple):
    """What a train shows: its ``lines``, and ``data`` of result.json."""

    lines: list[str]
    data: dict[str, Any]

    @property
    def text(self) -> str:
        """All of it, in one line."""
        return " ".join(" ".join(self.lines).split())

    def row(self, label: str, block: int = 0) -> list[str]:
        """Cells of the row with this label in one of the blocks of a table."""
        found = [line for line in self.lines if line.strip().startswith(label + " ")]
        return found[block].strip().removeprefix(label).split()


@pytest.fixture(scope="session")
def show(tmp_path_factory: pytest.TempPathFactory) -> Callable[..., Shown]:
    """Run a train, once a session."""

    @cache
    def run(text: str) -> Shown:
        path = tmp_path_factory.mktemp("train") / "case.toml"
        path.write_text(text)
        result = read_case(path).run()
        judged = judge_train(result)
        return Shown(train_summary(result, judged, Path("results/x")), document(result, judged))

    return run


ALL = [
    train_texts.SHIFT, train_texts.LOOP, train_texts.LOOP + train_texts.PURGES, train_texts.TOO_COLD,
    train_texts.TOO_COLD + train_texts.COOLING, train_texts.BURNER,
]  # fmt: skip


@pytest.mark.parametrize("text", ALL)
def test_80_columns_of_plain_ascii(show: Callable[..., Shown], text: str) -> None:
    lines = show(text).lines
    assert max(map(len, lines)) <= 80
    assert "\n".join(lines).isascii()
    assert not any(line != line.rstrip() for line in lines)
    assert "nan" not in " ".join(lines).split()


def test_stream_table_holds_the_numbers_of_the_file(show: Callable[..., Shown]) -> None:
    shown = show(train_texts.SHIFT)
    streams = shown.data["states"][0]["streams"]
    names = ["gas", "steam", "hot_bed", "waste_heat_boiler_with_a_long_name", "cold_bed"]
    for label, key, factor, zero in (
        ("temperature, degC", "temperature", 1.0, -273.15), ("pressure, bar abs", "pressure", 1e-5, 0.0),
        ("amount, kmol/h", "amount", 3.6, 0.0), ("mass, kg/h", "mass", 3600.0, 0.0),
        ("gas, Nm3/h", "gas", 3600.0 * 8.314462618 * 273.15 / 101325.0, 0.0),
    ):  # fmt: skip
        cells = [float(cell) for cell in shown.row(label)]
        assert cells == pytest.approx([factor * streams[name][key] + zero for name in names], rel=6e-4, abs=0.06)
    wet, dry = shown.row("CO2"), shown.row("CO2", block=1)
    for cells, key in ((wet, "mole_fractions_wet"), (dry, "mole_fractions_dry")):
        told = [float(cell) for cell in cells if cell != "-"]
        there = [100.0 * streams[name][key].get("CO2", 0.0) for name in names if streams[name][key]]
        assert told == pytest.approx(there, abs=0.006)


def test_streams_say_where_they_stand(show: Callable[..., Shown]) -> None:
    lines = show(train_texts.LOOP).lines
    heads = [k for k, line in enumerate(lines) if line.startswith("streams ") and "mole %" not in line]
    marks = [lines[next(j for j in range(k, k + 5) if lines[j].startswith("temperature")) - 1].split() for k in heads]
    assert marks == [["feed", "recycled"], ["leaves", "leaves"]]


def test_gas_closes_to_a_hundred_and_traces_are_told(show: Callable[..., Shown]) -> None:
    shown = show(train_texts.SHIFT)
    assert set(shown.row("total")) == {"100.00"}
    argon = next(line for line in shown.lines if line.startswith("  Ar "))
    assert "5.00 ppm" in argon  # 0.0005 % of the gas that is fed


def test_what_is_condensed_has_its_mass(show: Callable[..., Shown]) -> None:
    shown = show(train_texts.SHIFT)
    water = shown.data["states"][0]["streams"]["knock_out.water"]
    assert list(water["amounts"]) == ["H2O(l)"]
    assert shown.row("H2O(l)") == [f"{3600.0 * water['mass']:.4g}"]
    told = next(line for line in shown.lines if line.startswith("mass   ")).split()
    assert told[1] == told[5]  # kg that come in, kg that leave


def test_steps_show_heat_work_and_lost_work_of_the_file(show: Callable[..., Shown]) -> None:
    shown = show(train_texts.LOOP)
    state = shown.data["states"][0]
    for name, account in state["steps"].items():
        T, P, heat, work, made, lost, of_all, percent = shown.row(name)
        assert float(T) == pytest.approx(state["streams"][name]["temperature"] - 273.15, abs=0.06)
        assert float(P) == pytest.approx(state["streams"][name]["pressure"] / 1e5, rel=6e-4)
        for cell, key in ((heat, "heat"), (work, "work"), (lost, "lost_work")):
            assert float(cell) == pytest.approx(account[key] / 1e6, rel=6e-4, abs=1e-8)
        assert float(made) == pytest.approx(account["entropy_generated"] / 1e3, rel=6e-4)
        assert float(of_all) == pytest.approx(100.0 * account["lost_work"] / state["train"]["lost_work"], abs=0.06)
        assert percent == "%"


def test_work_has_no_column_where_there_is_none(show: Callable[..., Shown]) -> None:
    head = next(line for line in show(train_texts.SHIFT).lines if line.startswith("steps "))
    assert head.split() == ["steps", "degC", "bar", "abs", "heat", "entropy", "lost", "work", "of", "all"]


def test_conversions_overall_per_pass_and_of_a_step(show: Callable[..., Shown]) -> None:
    shown = show(train_texts.LOOP)
    told = shown.data["states"][0]["train"]["conversion"]["N2"]
    lines = shown.lines[next(k for k, line in enumerate(shown.lines) if line.startswith("conversion, %")) :]
    overall, per_pass, converter = next(line for line in lines if line.startswith("  N2")).split()[1:]
    assert [float(overall), float(per_pass), float(converter)] == pytest.approx(
        [100.0 * told["overall"], 100.0 * told["per_pass"], 100.0 * told["steps"]["converter"]], abs=0.006
    )


def test_certificate_tells_the_proof_the_closing_and_the_recycle(show: Callable[..., Shown]) -> None:
    text = show(train_texts.LOOP).text
    assert "1 settling step proved" in text
    assert "in elements" in text
    assert "recycle steady to" in text
    assert "recycle" not in show(train_texts.SHIFT).text


def test_cautions_and_key_figures_name_their_stage(show: Callable[..., Shown]) -> None:
    shown = show(train_texts.SHIFT)
    assert "hot_bed: shift" in shown.lines
    assert "Stage hot_bed: Toxic gas" in shown.text or "Stage cold_bed: Toxic gas" in shown.text
    assert shown.lines[-1].split() == ["written", "results/x/"]


def test_a_fuel_by_analysis_has_mass_and_no_mole_percent(show: Callable[..., Shown]) -> None:
    shown = show(train_texts.BURNER)
    assert shown.row("mass, kg")[0] == "1.000"
    assert shown.row("O2")[0] == "-"
    assert "char: by analysis" in shown.text
    assert "kg/h" not in shown.text


def test_a_state_that_fails_is_told_with_its_stage_and_shows_what_is_known(show: Callable[..., Shown]) -> None:
    shown = show(train_texts.TOO_COLD)
    assert "NOT CERTIFIED freezer: What is held asks for a temperature below all data." in shown.text
    assert shown.row("mass, kg/h") == ["1361", "1361", "-", "-", "-"]
    assert "certificate" not in shown.text
    assert "lost work" not in shown.text


def test_a_recycle_that_is_not_steady_shows_no_streams(show: Callable[..., Shown]) -> None:
    shown = show(train_texts.LOOP.replace(", purge = { percent = 3.0 }", ""))
    assert "NOT CERTIFIED" in shown.text
    assert "purge" in shown.text
    assert "kmol/h" not in shown.text
    assert "caution" not in shown.text


def test_sweep_tables_hold_the_numbers_of_the_file(show: Callable[..., Shown]) -> None:
    shown = show(train_texts.LOOP + train_texts.PURGES)
    states = shown.data["states"]
    k = shown.lines.index("whole train, and outlets whose temperature moves")
    heads = shown.lines[k + 1].split()
    assert heads == ["purge", "percent", "heat", "work", "lost", "work", "converter"]
    for state, line in zip(states[1:], shown.lines[k + 4 :], strict=False):
        purge, heat, work, lost, hot = map(float, line.split())
        assert purge == state["inputs"]["stages.condenser.take.purge.percent"]
        train = state["train"]
        assert [heat, work, lost] == pytest.approx(
            [train[key] / 1e6 for key in ("heat", "work", "lost_work")], rel=6e-4
        )
        assert hot == pytest.approx(state["streams"]["converter"]["temperature"] - 273.15, abs=0.06)
    k = next(k for k, line in enumerate(shown.lines) if line.startswith("condenser.purge, gas"))
    names = shown.lines[k + 1].split()[4:]
    for state, line in zip(states[1:], shown.lines[k + 4 :], strict=False):
        _, amount, mass, *shares = map(float, line.split())
        stream = state["streams"]["condenser.purge"]
        assert [amount, mass] == pytest.approx([3.6 * stream["amount"], 3600.0 * stream["mass"]], rel=6e-4)
        x = stream["mole_fractions_wet"]
        assert shares == pytest.approx([100.0 * x[name] for name in names], abs=0.006)


def test_sweep_shows_no_number_of_a_state_without_certificate(show: Callable[..., Shown]) -> None:
    shown = show(train_texts.LOOP + train_texts.PURGES)
    rows = [line.split() for line in shown.lines if line.split()[:1] == ["0"]]
    assert len(rows) == 3  # the whole train, and two products
    assert all(set(row[1:]) == {"-"} for row in rows)
    assert "1 of 4 states NOT certified; the first is state 1: The recycle" in shown.text


def test_sweep_shows_the_streams_of_the_case_itself(show: Callable[..., Shown]) -> None:
    shown = show(train_texts.LOOP + train_texts.PURGES)
    assert "streams of state 3: stages.condenser.take.purge.percent 3" in shown.text
    amount = 3.6 * shown.data["states"][2]["streams"]["heater"]["amount"]
    assert float(shown.row("amount, kmol/h")[2]) == pytest.approx(amount, rel=6e-4)
    other = show(train_texts.TOO_COLD + train_texts.COOLING)  # the case's own state is the one that fails
    assert "streams of state 3: stages.freezer.held.heat -0.2 MW" in other.text


def test_heads_break_long_names_between_words() -> None:
    lines = head_rows(
        "", ["knock_out.water", "waste_heat_boiler", "extraordinarily", "a_b_c_d_e_f_g_h_i_j_k_l_m_n_o_p_q_r_s"]
    )
    words = [line.split() for line in lines]
    assert words[0][:3] == ["knock_out", "waste_heat_", "extraordi.."]
    assert words[1][:2] == [".water", "boiler"]
    assert len(lines) <= 3
