"""Trains of a case file: a sweep is its states one by one, and the order of the tables says nothing."""

from __future__ import annotations

from functools import cache
from pathlib import Path

import numpy as np
import pytest

from gibbsmin import read_case
from gibbsmin.results.train_result import TrainResult

CASE = """title = "a loop to test with (invented)"
[species]
settling = ["N2", "H2", "NH3"]
[feeds.gas]
mole_percent = { N2 = 24.0, H2 = 74.0, Ar = 2.0 }
flow = "100 kmol/h"
temperature = "20 degC"
pressure = "200 bar"
[[stage]]
name = "inlet"
inlets = ["gas"]
recycled = ["blower"]
[[stage]]
name = "heater"
inlets = ["inlet"]
frozen = true
held = { temperature = "380 degC" }
[[stage]]
name = "bed"
inlets = ["heater"]
held = { adiabatic = true, pressure_drop = "4 bar" }
[[stage]]
name = "cooler"
inlets = ["bed"]
frozen = true
held = { temperature = "20 degC" }
take = { product = { of = ["NH3"], percent = 85.0 } }
[[stage]]
name = "rest"
inlets = ["cooler"]
take = { purge = { percent = 5.0 } }
[[stage]]
name = "blower"
inlets = ["rest"]
frozen = true
held = { entropy = "from inlets", isentropic_efficiency = 0.8, pressure = "200 bar" }
"""

SWEEPS = {
    "stages.rest.take.purge.percent": ("percent = 5.0", "percent = {}", [2.0, 5.0, 20.0]),
    "stages.cooler.take.product.percent": ("percent = 85.0", "percent = {}", [50.0, 85.0, 100.0]),
    "stages.heater.held.temperature": ('"380 degC"', '"{} degC"', [350.0, 380.0, 420.0]),
    "feeds.gas.temperature": ('temperature = "20 degC"\npressure', 'temperature = "{} degC"\npressure', [0.0, 20.0]),
    "stages.blower.held.isentropic_efficiency": ("= 0.8", "= {}", [0.5, 1.0]),
}


@cache
def run(text: str, folder: Path) -> TrainResult:
    path = folder / "case.toml"
    path.write_text(text, encoding="utf-8")
    found = read_case(path).run()
    assert isinstance(found, TrainResult)
    return found


def swept(vary: str) -> str:
    values = SWEEPS[vary][2]
    typed = [f"{value} degC" for value in values] if vary.endswith("temperature") else values
    return f'{CASE}[[sweep]]\nvary = "{vary}"\nvalues = {typed}\n'


def same(one: TrainResult, i: int, other: TrainResult, k: int) -> None:
    """Two states are the same, as far as loops are steady."""
    for name, stream in one.streams.items():
        twin = other.streams[name]
        total = stream.total[i]
        names = [record.name for record in twin.substances.records]
        for record, n in zip(stream.substances.records, stream.amounts[i], strict=True):
            assert twin.amounts[k][names.index(record.name)] == pytest.approx(n, rel=1e-8, abs=1e-11 * total), name
        assert twin.temperature[k] == pytest.approx(stream.temperature[i], rel=1e-9)
        assert twin.pressure[k] == pytest.approx(stream.pressure[i])
        assert twin.enthalpy[k] == pytest.approx(stream.enthalpy[i], rel=1e-7, abs=1e-6)
    for name, account in one.accounts.items():
        assert other.accounts[name].heat[k] == pytest.approx(account.heat[i], rel=1e-7, abs=1e-3)
        assert other.accounts[name].work[k] == pytest.approx(account.work[i], rel=1e-7, abs=1e-3)


@pytest.mark.parametrize("vary", SWEEPS)
def test_a_sweep_is_its_states_one_by_one(vary: str, tmp_path: Path) -> None:
    old, new, values = SWEEPS[vary]
    whole = run(swept(vary), tmp_path)
    assert whole.certified.all()
    changed = set()
    for state, value in enumerate(values):
        assert CASE.count(old) == 1
        alone = run(CASE.replace(old, new.format(value)), tmp_path)
        same(whole, state, alone, 0)
        changed.add(float(whole.streams["inlet"].enthalpy[state]))
    assert len(changed) == len(values)  # the input matters


@pytest.mark.parametrize("order", [[5, 4, 3, 2, 1, 0], [2, 0, 4, 1, 5, 3]])
def test_the_order_of_the_tables_says_nothing(order: list[int], tmp_path: Path) -> None:
    head, *stages = CASE.split("[[stage]]\n")
    shuffled = "[[stage]]\n".join([head, *(stages[k] for k in order)])
    same(run(CASE, tmp_path), 0, run(shuffled, tmp_path), 0)


def test_one_bad_state_leaves_the_others_alone(tmp_path: Path) -> None:
    """Without purge argon gathers; that state is told, the rest of the sweep holds."""
    text = swept("stages.rest.take.purge.percent").replace("[2.0, 5.0, 20.0]", "[2.0, 0.0, 20.0]")
    found = run(text, tmp_path)
    assert found.certified.tolist() == [True, False, True]
    assert "gathers Ar" in found.solved.reasons[1]
    alone = run(CASE.replace("percent = 5.0", "percent = 20.0"), tmp_path)
    same(found, 2, alone, 0)


def test_a_step_that_cannot_be_is_told_with_its_name(tmp_path: Path) -> None:
    """So much heat taken away that there is no temperature of that enthalpy."""
    text = CASE.replace("adiabatic = true, pressure_drop", 'heat = "-1 GW", pressure_drop')
    found = run(text, tmp_path)
    assert not found.certified.any()
    assert found.solved.reasons[0].startswith("bed: ")


def test_argon_by_the_purge_along_a_sweep(tmp_path: Path) -> None:
    found = run(swept("stages.rest.take.purge.percent"), tmp_path)
    fed = found.streams["gas"].named("Ar")
    np.testing.assert_allclose(found.streams["inlet"].named("Ar"), fed / np.array([0.02, 0.05, 0.2]), rtol=1e-8)
