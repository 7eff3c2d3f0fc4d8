"""What feeds bring: carbon that counts, moisture, and which of them is fuel."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from practice.settled_from import by_hand

from gibbsmin.practice.figures.fed import fed_amount, fuels, hydrocarbon_carbon, moisture
from gibbsmin.practice.figures.settled import FeedFacts, Settled


def of(**feeds: dict[str, float]) -> Settled:
    """Put feeds beside a gas that does not matter."""
    return by_hand({"N2": 1.0}, feeds)


def test_carbon_of_oxides_and_carbonates_does_not_count() -> None:
    gas = {"CH4": 2.0, "C3H8": 1.0, "CH3OH": 1.0, "CO": 5.0, "CO2": 7.0, "CaCO3(s)": 3.0, "C(s):graphite": 0.5}
    assert hydrocarbon_carbon(of(gas=gas)).tolist() == [2.0 + 3.0 + 1.0 + 0.5]


def test_all_carbon_of_an_analysis_counts() -> None:
    coal = FeedFacts({"H2O(l)": np.array([4.0])}, {"C": np.array([60.0])}, np.array([1.0]), by_analysis=True)
    state = of(gas={"CH4": 1.0})
    both = replace(state, feeds={**state.feeds, "coal": coal})
    assert hydrocarbon_carbon(both).tolist() == [61.0]
    assert fed_amount(both).tolist() == [5.0]  # the coal itself has no moles


def test_moisture_is_water_in_any_form() -> None:
    state = of(fuel={"H2O(l)": 2.0, "CH4": 1.0}, steam={"H2O": 3.0})
    assert moisture(state, state.feeds.values())[0] == pytest.approx(5.0 * 0.018015, rel=1e-4)
    assert moisture(state, [state.feeds["fuel"]])[0] == pytest.approx(2.0 * 0.018015, rel=1e-4)


@pytest.mark.parametrize(
    ("lower", "by_analysis", "burns"),
    [
        (5e6, False, True),
        (1e-6, False, False),  # rounding, as in the vapour of moist air
        (-44.0, False, False),
        (None, True, True),
        (None, False, False),
    ],
)
def test_what_is_fuel(lower: float | None, by_analysis: bool, burns: bool) -> None:
    heat = None if lower is None else np.array([lower])
    feed = FeedFacts({}, {}, np.array([1.0]), higher=heat, lower=heat, by_analysis=by_analysis)
    assert fuels(replace(of(gas={"N2": 1.0}), feeds={"one": feed})) == ([feed] if burns else [])
