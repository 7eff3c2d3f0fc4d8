"""Maps and the large design: ammonia and soot by NIST-JANAF constants, the furnace and the design by their trends."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import numpy as np
import pytest
import xarray
from shipped.conftest import CASES, Run
from shipped.gas_by_hand import log_k

import gibbsmin as gm
from gibbsmin.case.study import Study

Shipped = Callable[[str], Run]


def test_ammonia_by_its_constant(shipped: Shipped) -> None:
    """1/2 N2 + 3/2 H2 = NH3 in an ideal gas: extent by bisection, K from NIST-JANAF (H-083)."""
    run = shipped("map_ammonia")
    assert len(run.data["states"]) == 4 * 5 * 41
    for state in run.data["states"][::17]:
        T, bar = state["temperature"], state["pressure"] / 1e5
        inert = state["inputs"]["feeds.inerts.mole_ratio"]
        k = 10.0 ** log_k({"NH3": 1.0, "N2": -0.5, "H2": -1.5}, T)
        low, high = 0.0, 0.5
        for _ in range(60):
            x = 0.5 * (low + high)  # NH3 formed of 0.25 N2 + 0.75 H2
            total = 1.0 - x + inert
            q = x / total / ((0.25 - 0.5 * x) / total) ** 0.5 / ((0.75 - 1.5 * x) / total) ** 1.5 / bar
            low, high = (x, high) if q < k else (low, x)
        # the enthalpy of NH3 is 0.1 to 0.3 kJ/mol newer than the tables'
        assert state["mole_fractions"]["NH3"] == pytest.approx(x / (1.0 - x + inert), rel=0.03)


def test_soot_is_where_its_activity_by_the_gas_is_one(shipped: Shipped) -> None:
    """2 CO = C + CO2 by NIST-JANAF: one where graphite lies, below one where it does not."""
    seen = set()
    for state in shipped("map_reformer").data["states"]:
        x, bar = state["mole_fractions"], state["pressure"] / 1e5
        if x["CO"] < 1e-3 or not 700.0 <= state["temperature"] <= 1300.0:
            continue
        k = 10.0 ** log_k({"CO2": 1.0, "CO": -2.0}, state["temperature"])
        activity = k * x["CO"] ** 2 * bar / x["CO2"]
        soot = state["amounts"]["C(s):graphite"] > 0.0
        seen.add(soot)
        assert activity == pytest.approx(1.0, rel=0.06) if soot else activity < 1.06
    assert seen == {True, False}


def test_where_the_region_of_soot_opens(shipped: Shipped) -> None:
    """As the head of the case says."""
    states = shipped("map_reformer").data["states"]
    soot = {
        (round(one["inputs"]["feeds.steam.steam_to_carbon"], 3), one["inputs"]["held.temperature"])
        for one in states
        if one["amounts"]["C(s):graphite"] > 0.0
    }
    assert max(ratio for ratio, _ in soot) == pytest.approx(0.9)
    first = [T for ratio, T in soot if ratio == 0.9]
    assert 700.0 < min(first) <= max(first) < 800.0
    assert (0.5, 1050.0) in soot


def test_furnace_trends(shipped: Shipped) -> None:
    states = shipped("map_furnace").data["states"]
    grid = np.array([one["temperature"] for one in states]).reshape(26, 25)
    nox = np.array([one["key_figures"]["flue gas"]["nox_dry"] for one in states]).reshape(26, 25)
    co = np.array([one["key_figures"]["flue gas"]["co_dry"] for one in states]).reshape(26, 25)
    assert (np.diff(grid, axis=1) > 0.0).all(), "preheat warms the flame"
    assert (np.diff(nox, axis=1) > 0.0).all(), "and makes NO"
    assert (np.diff(co, axis=0) < 0.0).all(), "air burns CO"
    assert (nox[:, -1] / nox[:, 0] > (grid[:, -1] / grid[:, 0]) ** 2).all(), "much faster than the flame warms"


def test_the_million_in_small(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """The design with fewer points: it is even in every input, and the slip answers as it must."""
    text = (CASES / "study_million.toml").read_text(encoding="utf-8")
    assert "points = 1048576" in text
    path = tmp_path / "small.toml"
    path.write_text(text.replace("points = 1048576", "points = 4096"), encoding="utf-8")
    monkeypatch.setattr("gibbsmin.case.study.LARGE", 1000)
    study = gm.read_case(path)
    assert isinstance(study, Study)
    done = study.run_into(tmp_path / "out")
    assert done.all_certified
    data = xarray.open_dataset(tmp_path / "out" / "result.nc", engine="h5netcdf")
    slip = data["reforming.ch4_slip"].values
    for name, low, high, sign in (
        ("held.temperature", 830.0, 900.0, -1), ("held.pressure", 20.0, 28.0, 1),
        ("feeds.steam.steam_to_carbon", 2.5, 3.5, -1), ("approach.reforming.temperature", -20.0, 0.0, -1),
    ):  # fmt: skip
        values = data[name].values
        counts, _ = np.histogram(values, bins=8, range=(low, high))
        assert (np.abs(counts - 512) <= 8).all(), name
        assert sign * np.corrcoef(values, slip)[0, 1] > 0.05, name
