"""The flue gas of a stage of a train: the same as that of one mixture, however it comes about."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import numpy as np
import pytest

import gibbsmin as gm
from gibbsmin.errors import CaseError

FEEDS = """
[species]
allow = ["CH4", "H2S", "CO2", "H2O", "CO", "H2", "O2", "N2", "Ar", "NO", "SO2", "SO3", "OH"]
[feeds.fuel]
mole_percent = { CH4 = 98.0, H2S = 2.0 }
flow = "100 kmol/h"
temperature = "25 degC"
pressure = "1.013 bar"
[feeds.air]
composition = "air"
air_ratio = 1.1
temperature = "25 degC"
pressure = "1.013 bar"
"""
FLUE = 'reference_oxygen_percent = 3.0, stack_temperature = "180 degC"'
ONE = f"""
title = "one mixture"
{FEEDS}
[feeds.recycle]
composition = "flue gas"
recirculated_percent = 40.0
temperature = "180 degC"
[held]
temperature = "1000 degC"
pressure = "1.013 bar"
[flue_gas]
{FLUE.replace(", ", chr(10))}
"""
TRAIN = f"""
title = "the same as a train"
{FEEDS}
[[stage]]
name = "furnace"
inlets = ["fuel", "air"]
recycled = ["cooler.back"]
held = {{ adiabatic = true, pressure = "1.013 bar" }}
[[stage]]
name = "boiler"
inlets = ["furnace"]
held = {{ temperature = "1000 degC" }}
flue_gas = {{ {FLUE} }}
[[stage]]
name = "cooler"
inlets = ["boiler"]
frozen = true
held = {{ temperature = "180 degC" }}
take = {{ back = {{ percent = 40.0 }} }}
"""


def read(text: str, folder: Path) -> Any:
    path = folder / "case.toml"
    path.write_text(text, encoding="utf-8")
    return gm.read_case(path)


@pytest.mark.parametrize("recycle", [True, False])
def test_a_train_reports_the_flue_gas_of_one_mixture(recycle: bool, tmp_path: Path) -> None:
    one, train = ONE, TRAIN
    if not recycle:
        one = one.replace("recirculated_percent = 40.0", "recirculated_percent = 0.0")
        train = train.replace('recycled = ["cooler.back"]\n', "").replace("take = { back = { percent = 40.0 } }", "")
    figures = {f.name: f.value for f in read(one, tmp_path).run().key_figures["flue gas"]}
    found = {f.name: f.value for f in read(train, tmp_path).run().stages["boiler"].key_figures["flue gas"]}
    assert len(found) > 20
    for name, value in found.items():
        assert value == pytest.approx(figures[name], rel=1e-7), name


@pytest.mark.parametrize("recycle", ['recycled = ["cooler.back"]\n', ""])
def test_air_for_the_oxygen_of_the_flue_gas(recycle: str, tmp_path: Path) -> None:
    swept = (
        TRAIN.replace("air_ratio = 1.1", "flue_gas_oxygen_percent = 3.0").replace(
            "take = { back = { percent = 40.0 } }", "take = { back = { percent = 40.0 } }" if recycle else ""
        )
        + '[[sweep]]\nvary = "feeds.air.flue_gas_oxygen_percent"\nvalues = [1.0, 3.0, 6.0]\n'
    ).replace('recycled = ["cooler.back"]\n', recycle)
    figures = read(swept, tmp_path).run().figures
    assert figures["boiler.flue gas.oxygen_dry"].value == pytest.approx([0.01, 0.03, 0.06], rel=1e-8)
    one = ONE.replace("air_ratio = 1.1", "flue_gas_oxygen_percent = 3.0").replace(
        "recirculated_percent = 40.0", f"recirculated_percent = {40.0 if recycle else 0.0}"
    )
    alone = {f.name: f.value for f in read(one, tmp_path).run().key_figures["flue gas"]}
    ratio = figures["boiler.flue gas.air_ratio_fed"].value
    assert ratio[1] == pytest.approx(alone["air_ratio_fed"][0], rel=1e-8)


def test_the_stack_temperature_is_varied_by_its_dotted_name(tmp_path: Path) -> None:
    swept = TRAIN + '[[sweep]]\nvary = "stages.boiler.flue_gas.stack_temperature"\nvalues = ["120 degC", "180 degC"]\n'
    result = read(swept, tmp_path).run()
    loss = result.figures["boiler.flue gas.loss_flue_gas"].value
    assert loss[1] > 1.4 * loss[0]
    assert np.all(result.certified)


@pytest.mark.parametrize(
    ("old", "new", "told"),
    [
        ("reference_oxygen_percent = 3.0", 'frozen_at = "900 degC"', "a step of its own"),
        ('frozen = true\n', f"frozen = true\nflue_gas = {{ {FLUE} }}\n", "nothing reacts"),
    ],
)  # fmt: skip
def test_what_makes_no_sense_is_refused(old: str, new: str, told: str, tmp_path: Path) -> None:
    with pytest.raises(CaseError, match=told):
        read(TRAIN.replace(old, new), tmp_path)


def test_air_by_oxygen_needs_one_flue_gas_and_one_that_can_be(tmp_path: Path) -> None:
    sized = TRAIN.replace("air_ratio = 1.1", "flue_gas_oxygen_percent = 3.0")
    with pytest.raises(CaseError, match="which step has the flue gas"):
        read(sized.replace(f"flue_gas = {{ {FLUE} }}\n", ""), tmp_path)
    with pytest.raises(CaseError, match="can hold between 0 and"):
        read(sized.replace("oxygen_percent = 3.0\nt", "oxygen_percent = 30.0\nt"), tmp_path).run()
