"""The search for the steady state by itself, and what is said where there is none."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from numpy.typing import NDArray
from studies.train.plant import Plant

from gibbsmin.studies.train.recycle import CLOSE, steady
from gibbsmin.studies.train.train import Solved, solve_train

Floats = NDArray[np.float64]
States = NDArray[np.intp]


def nothing(x: Floats) -> Floats:
    """No amount is too small to matter."""
    return np.zeros_like(x)


@given(seed=st.integers(0, 2**32 - 1), size=st.integers(1, 5), gain=st.floats(0.1, 0.99))
@settings(max_examples=40)
def test_linear_loops_in_few_rounds(seed: int, size: int, gain: float) -> None:
    """X = A x + b with A of no negative entries and this spectral radius, in several states at once, against numpy."""
    random = np.random.default_rng(seed)
    A = random.random((3, size, size)) + 0.01
    A *= gain / np.abs(np.linalg.eigvals(A)).max(axis=1)[:, None, None]
    b = random.random((3, size)) + 0.1
    found = steady(np.zeros((3, size)), nothing, lambda x, states: np.einsum("sij,sj->si", A[states], x) + b[states])
    assert found.settled.all()
    assert found.rounds <= 5 * size + 10
    np.testing.assert_allclose(found.x, np.linalg.solve(np.eye(size) - A, b[:, :, None])[:, :, 0], rtol=1e-7)


def test_one_unknown_is_found_by_the_secant() -> None:
    """A gain of 0.999 would take 23,000 plain rounds."""
    found = steady(np.zeros((1, 1)), nothing, lambda x, states: 0.999 * x + 1.0)
    assert found.x[0, 0] == pytest.approx(1000.0)
    assert found.rounds <= 5


def test_a_state_does_not_wait_for_others() -> None:
    """A state that is steady is not evaluated again, and one that is lost (nan) does not harm the rest."""
    asked: list[list[int]] = []

    def evaluate(x: Floats, states: States) -> Floats:
        asked.append(states.tolist())
        gain = np.array([0.0, 0.9, np.nan])[states][:, None]
        return gain * np.cos(x) + 1.0

    found = steady(np.zeros((3, 1)), nothing, evaluate)
    assert found.settled.tolist() == [True, True, False]
    assert np.isnan(found.residual[2])
    assert found.x[0, 0] == pytest.approx(1.0)
    assert found.x[1, 0] == pytest.approx(0.9 * np.cos(found.x[1, 0]) + 1.0, rel=1e-9)
    assert sum(2 in states for states in asked) == 1
    assert sum(0 in states for states in asked) == 2


def test_a_round_that_overshoots_is_found_too() -> None:
    """X = 12 - 2 x grows in plain rounds; the secant finds 4."""
    found = steady(np.ones((1, 1)), nothing, lambda x, states: 12.0 - 2.0 * x)
    assert found.settled.all()
    assert found.x[0, 0] == pytest.approx(4.0)
    assert found.residual[0] <= CLOSE


def loop(plant: Plant, purge: float, **feed: float) -> Solved:
    steps = [
        plant.step("inlet", "feed", "rest"),
        plant.step("converter", "inlet", change=plant.converter("N2", 0.2, "Ar")),
        plant.step("condenser", "converter", takes=[plant.take("product", "NH3", share=1.0)]),
        plant.step("rest", "condenser", takes=[plant.take("purge", share=purge)]),
    ]
    return solve_train(steps, {"feed": plant.stream(feed)})


@pytest.mark.parametrize(
    ("feed", "gathers", "wants"),
    [
        ({"N2": 1.0, "H2": 3.0, "Ar": 0.02}, "gathers Ar", "Ar leaves"),
        ({"N2": 1.0, "H2": 3.5}, "gathers H2", "less of H leaves"),
        ({"N2": 1.0, "H2": 3.5, "Ar": 0.5}, "gathers", "leaves than comes in"),
    ],
)
def test_what_gathers_without_a_purge_is_named(feed: dict[str, float], gathers: str, wants: str) -> None:
    (reason,) = loop(Plant("N2 H2 NH3 Ar"), 0.0, **feed).reasons
    assert "no steady state" in reason
    assert gathers in reason
    assert wants in reason
    assert "purge" in reason


def test_without_a_purge_it_works_if_everything_reacts_away() -> None:
    solved = loop(Plant("N2 H2 NH3 Ar"), 0.0, N2=1.0, H2=3.0)
    assert solved.reasons == ("",)
    assert solved.streams["condenser.product"].named("NH3")[0] == pytest.approx(2.0, rel=1e-8)


def test_a_loop_that_heats_up_without_end_is_told() -> None:
    """Nine parts in ten go round a compressor that is not cooled: the work gathers."""
    plant = Plant("Ar")
    back = plant.take("back", share=0.9)
    steps = [
        plant.step("mixed", "feed", "valve.back"),
        plant.step("compressor", "mixed", change=plant.unreacted("entropy", 0.8, 3e6)),
        plant.step("valve", "compressor", change=plant.unreacted("heat", 0.0, 1e5), takes=[back]),
    ]
    (reason,) = solve_train(steps, {"feed": plant.stream({"Ar": 1.0})}).reasons
    assert reason.startswith("compressor: ")
    assert "beyond all data" in reason


def test_a_loop_that_is_hot_on_the_way_only() -> None:
    """The same with a cooler in it; and a step that takes nothing but what comes back."""
    plant = Plant("Ar")
    steps = [
        plant.step("compressor", "", "mixed", change=plant.unreacted("entropy", 0.8, 3e6)),
        plant.step("cooler", "compressor", change=plant.unreacted("temperature", 320.0)),
        plant.step("valve", "cooler", change=plant.unreacted("heat", 0.0, 1e5), takes=[plant.take("back", share=0.9)]),
        plant.step("mixed", "feed valve.back"),
    ]
    solved = solve_train(steps, {"feed": plant.stream({"Ar": 1.0}, 520.0)})
    assert solved.reasons == ("",)
    assert solved.streams["mixed"].total[0] == pytest.approx(10.0, rel=1e-8)
    assert solved.streams["mixed"].temperature[0] == pytest.approx(340.0, rel=1e-8)


def test_nothing_leaves_at_all() -> None:
    plant = Plant("N2 Ar")
    steps = [plant.step("mixed", "feed", "cooled"), plant.step("cooled", "mixed", change=plant.unreacted())]
    solved = solve_train(steps, {"feed": plant.stream({"N2": 3.0, "Ar": 1.0})})
    assert solved.products == ()
    assert "gathers N2, Ar" in solved.reasons[0]
