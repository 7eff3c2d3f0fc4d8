"""Cautions of a result see its feeds, its flue gas and what was frozen."""

from __future__ import annotations

import numpy as np
import pytest
from report_fakes import FakeFeed, FakeResult

from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.results.judge import judge
from gibbsmin.thermo.record import FROZEN


def kinds(result: FakeResult, i: int = 0) -> list[str]:
    """Kinds of caution of a state."""
    return [caution.kind for caution in judge(result)[i]]


def figure(name: str, *values: float) -> KeyFigure:
    """Make a number of the trade."""
    return KeyFigure(name, name.replace("_", " "), np.array(values))


def test_a_wall_below_the_dew_point() -> None:
    result = FakeResult(2)
    assert "acid condensation" not in kinds(result)
    dews = figure("dew_point_water", 330.0, 330.0), figure("dew_point_sulfuric_acid_okkes", np.nan, 405.0)
    result.key_figures = {"flue gas": [figure("stack_temperature", 410.0, 410.0), *dews]}
    assert "acid condensation" not in kinds(result, 0)
    assert "acid condensation" in kinds(result, 1)


def test_a_reference_that_does_not_fit() -> None:
    result = FakeResult()
    result.key_figures = {"flue gas": [figure("reference_oxygen", 0.03), figure("oxygen_dry", 0.19)]}
    assert "reference oxygen" in kinds(result)
    result.key_figures = {"flue gas": [figure("oxygen_dry", 0.19)]}
    assert "reference oxygen" not in kinds(result)


def test_varied_temperature_of_a_feed() -> None:
    result = FakeResult(2)
    result.feeds = {"gas": FakeFeed({"CH4": 1.0}, 300.0)}
    result.inputs = {"feeds.gas.temperature": np.array([500.0, 600.0])}
    result.input_units = {"feeds.gas.temperature": "degC"}
    assert "cracking" not in kinds(result, 0)
    assert "cracking" in kinds(result, 1)


def test_what_was_frozen_counts_with_its_substance() -> None:
    """Carbon monoxide that does not react harms as much as any."""
    result = FakeResult()
    result.batch.amounts[:] = 0.0
    place = {name: k for k, name in enumerate(result.system.species)}
    result.batch.amounts[0, place["N2"]] = 1.0
    result.batch.amounts[0, [place["CO"], place["C2H4"]]] = 0.7e-3
    result.system.species[place["C2H4"]] = "CO" + FROZEN
    found = next(caution for caution in judge(result)[0] if caution.kind == "toxic")
    assert "CO 0.14 %" in found.text


@pytest.mark.parametrize("count", [1, 2])
def test_nothing_is_said_of_a_state_that_is_not_certified(count: int) -> None:
    result = FakeResult(count)
    result.batch.certified[0] = False
    assert judge(result)[0] == []
