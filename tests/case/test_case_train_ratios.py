"""Ratios of the feeds of a train count within one stage."""

from pathlib import Path

import pytest

import gibbsmin as gm

CASE = """
title = "ratios"
[feeds.gas]
species = "CH4"
flow = "100 kmol/h"
temperature = "500 degC"
[feeds.steam]
species = "H2O"
steam_to_carbon = 3.0
temperature = "500 degC"
[feeds.fuel]
species = "CH4"
flow = "40 kmol/h"
temperature = "25 degC"
[feeds.air]
composition = "air"
air_ratio = 1.1
temperature = "25 degC"
[feeds.purge]
species = "N2"
mole_ratio = 0.1
to = "gas"
temperature = "25 degC"
[[stage]]
name = "reformer"
inlets = ["gas", "steam"]
held = { temperature = "850 degC", pressure = "20 bar" }
[[stage]]
name = "firebox"
inlets = ["fuel", "air", "purge"]
held = { adiabatic = true, pressure = "1 bar" }
"""


def test_each_ratio_counts_the_feeds_of_its_own_stage(tmp_path: Path) -> None:
    path = tmp_path / "case.toml"
    path.write_text(CASE, encoding="utf-8")
    streams = gm.read_case(path).run().streams
    gas, fuel = streams["gas"].named("CH4")[0], streams["fuel"].named("CH4")[0]
    assert streams["steam"].named("H2O")[0] == pytest.approx(3.0 * gas)
    assert streams["air"].named("O2")[0] == pytest.approx(1.1 * 2.0 * fuel)
    assert streams["purge"].named("N2")[0] == pytest.approx(0.1 * gas), "`to` reaches over stages"
