"""Conversions of a train against answers in closed form."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest

from gibbsmin.case.read import read_case

LOOP = """
title = "A converter of given conversion in its loop (invented)"
[species]
settling = ["CO", "H2O", "CO2", "H2"]
[feeds.fresh]
mole_percent = {{ CO = 45.0, H2O = 50.0, N2 = 5.0 }}
flow = "100 mol/s"
temperature = "300 degC"
pressure = "10 bar"
[[stage]]
name = "mixer"
inlets = ["fresh"]
recycled = ["splitter"]
[[stage]]
name = "converter"
inlets = ["mixer"]
held = {{ temperature = "300 degC" }}
constraint = {{ given = {{ amounts = {{ CO = 1.0 }}, percent_of_feeds = {left} }} }}
[[stage]]
name = "separator"
inlets = ["converter"]
take = {{ product = {{ of = ["CO2", "H2"], percent = 100.0 }} }}
[[stage]]
name = "splitter"
inlets = ["separator"]
take = {{ purge = {{ percent = {purge} }} }}
"""


def whole(path: Path, text: str) -> dict[str, Any]:
    (path / "case.toml").write_text(text)
    result = read_case(path / "case.toml").run()
    assert result.certified.all()
    found: dict[str, Any] = result.to_dict()["states"][0]["train"]
    return found


def conversion(path: Path, text: str) -> dict[str, Any]:
    found: dict[str, Any] = whole(path, text)["conversion"]
    return found


@pytest.mark.parametrize(("X", "purge"), [(0.3, 0.05), (0.6, 0.1), (0.9, 0.5)])
def test_converter_with_recycle_and_purge(tmp_path: Path, X: float, purge: float) -> None:
    # Of n into the converter (1 - X) n leave it, of which the part p is purged, so that X n of X n + p (1 - X) n fed
    # react. That of a pass is X, because the recycle joins all of the fresh feed before the converter.
    found = conversion(tmp_path, LOOP.format(left=100.0 * (1.0 - X), purge=100.0 * purge))["CO"]
    assert found["overall"] == pytest.approx(X / (X + purge - X * purge), rel=1e-8)
    assert found["per_pass"] == pytest.approx(X, rel=1e-8)
    assert found["steps"] == {"converter": pytest.approx(X, rel=1e-8)}


@pytest.mark.parametrize(("X", "purge"), [(0.3, 0.05), (0.9, 0.5)])
def test_where_the_elements_leave(tmp_path: Path, X: float, purge: float) -> None:
    # The carbon that reacts leaves as CO2 by the side stream, the rest as CO by the purge. 45 mol CO react with 45 of
    # the 50 mol water, so that of the hydrogen 0.9 times as much leaves with it.
    found = whole(tmp_path, LOOP.format(left=100.0 * (1.0 - X), purge=100.0 * purge))["recovery"]
    overall = X / (X + purge - X * purge)
    assert set(found) == {"C", "H"}
    assert found["C"] == pytest.approx({"separator.product": overall, "splitter.purge": 1.0 - overall}, rel=1e-8)
    assert found["H"]["separator.product"] == pytest.approx(0.9 * overall, rel=1e-8)
    assert sum(found["H"].values()) == pytest.approx(1.0, rel=1e-9)


def test_what_condenses_is_not_converted_and_what_passes_is_not_told(tmp_path: Path) -> None:
    found = conversion(
        tmp_path,
        """
title = "Gas with a knock-out (invented)"
[species]
settling = ["H2O", "H2O(l)"]
[feeds.gas]
mole_percent = { H2 = 50.0, N2 = 30.0, H2O = 20.0 }
flow = "10 mol/s"
temperature = "150 degC"
pressure = "10 bar"
[[stage]]
name = "knock_out"
inlets = ["gas"]
held = { temperature = "30 degC" }
take = { water = { of = "condensed", percent = 100.0 } }
""",
    )
    assert found == {}


def test_no_pass_without_a_recycle_and_the_most_converted_first(tmp_path: Path) -> None:
    found = conversion(
        tmp_path,
        """
title = "Burner (invented)"
[species]
settling = ["CH4", "O2", "CO2", "H2O"]
[feeds.gas]
mole_percent = { CH4 = 10.0, O2 = 40.0, N2 = 50.0 }
flow = "10 mol/s"
temperature = "25 degC"
pressure = "1 bar"
[[stage]]
name = "burner"
inlets = ["gas"]
held = { adiabatic = true }
""",
    )
    assert list(found) == ["O2", "CH4"]
    assert found["CH4"]["overall"] == pytest.approx(1.0)
    assert found["O2"]["overall"] == pytest.approx(2.0 * 10.0 / 40.0)  # CH4 + 2 O2
    assert all("per_pass" not in one for one in found.values())
