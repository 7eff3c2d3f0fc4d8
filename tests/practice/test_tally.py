"""Ratios without a whole, keys of names, and figures that nobody has."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.tally import key, known, mass_unit, ratio
from gibbsmin.thermo.database import load


def test_a_ratio_without_a_whole_is_not_a_number() -> None:
    found = ratio(np.array([1.0, 1.0, 0.0, np.nan]), np.array([2.0, 0.0, 0.0, 1.0]))
    assert found[0] == 0.5
    assert np.isnan(found[1:]).all()


@given(st.floats(1e-9, 1e9), st.floats(1e-9, 1e9))
def test_a_ratio_times_its_whole_is_the_part(part: float, whole: float) -> None:
    assert ratio(np.array([part]), np.array([whole]))[0] * whole == pytest.approx(part)


def test_keys_of_all_condensed_species_differ() -> None:
    names = [record["name"] for record in load().to_records() if record["phase"] != "gas"]
    keys = {key(name) for name in names}
    assert len(keys) == len(names)
    assert all(one == one.lower() and one.replace("_", "").isalnum() for one in keys)


def test_figures_that_no_state_has_are_left_out() -> None:
    some = KeyFigure("some", "some", np.array([np.nan, 1.0]))
    none = KeyFigure("none", "none", np.array([np.nan, np.nan]))
    assert known([none, some]) == [some]


def test_a_flow_of_mass_is_shown_an_hour() -> None:
    assert mass_unit(True) == ("kg/s", "kg/h")
    assert mass_unit(False) == ("kg", "")
