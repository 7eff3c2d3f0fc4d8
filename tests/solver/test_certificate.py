"""The certificate cannot be fooled: whatever is done to a proved state shows in one of its three figures."""

from functools import cache
from typing import Any
from unittest.mock import patch

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from gibbsmin.solver import certificate
from gibbsmin.solver.certificate import element_residual, optimality
from gibbsmin.solver.exponential import exponentials
from gibbsmin.solver.layout import new_work
from gibbsmin.solver.status import AFFINITY_LIMIT, GAP_LIMIT, RESIDUAL_LIMIT
from gibbsmin.states.solve import equilibrium
from gibbsmin.states.state import State
from gibbsmin.states.system import System

FEEDS = {
    "flame": ({"CH4": 1.0, "O2": 1.8, "N2": 7.0}, 2200.0),
    "soot": ({"CH4": 1.0, "O2": 0.3}, 900.0),
    "dew": ({"CH4": 1.0, "O2": 2.5, "N2": 7.0}, 310.0),
}


@cache
def proved(name: str, exclude: tuple[str, ...] = ()) -> State:
    feed, T = FEEDS[name]
    return equilibrium(System.from_elements("C H O N", exclude=exclude), feed, temperature=T, pressure=1.0e5)


def figures(state: State, n: Any = None, lam: Any = None) -> tuple[float, float, float]:
    """Residual, gap and affinity of a state with other amounts or potentials."""
    system, A = state.system, state.system.element_matrix
    b = A @ state.amounts_array
    n = state.amounts_array if n is None else n
    lam = state.element_potentials_array if lam is None else lam
    usable = np.array([low <= state.temperature <= top for low, top in (r.usable for r in system.records)])
    usable &= ~(A[~np.isfinite(state.element_potentials_array)] != 0.0).any(axis=0)
    g = np.where(usable, system.standard_potentials(state.temperature), np.inf)  # at 1 bar
    with patch.object(certificate, "exponentials", exponentials.py_func):  # all of it as plain Python
        gap, affinity, _ = optimality.py_func(A, system.gas, b, g, n, lam, new_work(A))
    return element_residual.py_func(A, b, n), gap, affinity


def holds(found: tuple[float, float, float]) -> bool:
    return found[0] <= RESIDUAL_LIMIT and found[1] <= GAP_LIMIT and found[2] <= AFFINITY_LIMIT


@pytest.mark.parametrize("name", FEEDS)
def test_a_proved_state_is_proved_again(name: str) -> None:
    assert holds(figures(proved(name)))


@given(st.sampled_from(list(FEEDS)), st.integers(0, 10**6), st.floats(-7.0, 0.0).map(lambda e: 10.0**e), st.booleans())
def test_one_amount_changed(name: str, pick: int, change: float, up: bool) -> None:
    """Major or minor, its element row or its own potential tells."""
    state = proved(name)
    n = state.amounts_array.copy()
    here = np.flatnonzero(n > 1.0e-200)
    n[here[pick % here.size]] *= 1.0 + change if up else 1.0 / (1.0 + change)
    assert not holds(figures(state, n=n))


@given(st.sampled_from(list(FEEDS)), st.integers(0, 3), st.floats(-7.0, 1.0).map(lambda e: 10.0**e), st.booleans())
def test_one_potential_changed(name: str, i: int, change: float, up: bool) -> None:
    state = proved(name)
    lam = state.element_potentials_array.copy()
    if np.isfinite(lam[i]):
        lam[i] += change if up else -change
        found = figures(state, lam=lam)
        assert not holds(found)
        assert found[2] >= 0.5 * change * state.system.element_matrix[i][state.amounts_array > 1e-200].max()


@given(st.sampled_from(["flame", "soot"]), st.integers(0, 10**6), st.floats(-6.0, -2.0).map(lambda e: 10.0**e))
def test_composition_off_equilibrium_with_perfect_balances(name: str, seed: int, extent: float) -> None:
    """Reactions among the ten most abundant species: the residual stays, the affinity tells, the gap has one sign."""
    state = proved(name)
    n = state.amounts_array.copy()
    major = np.argsort(-n)[:10]
    A = state.system.element_matrix[:, major]
    null = np.linalg.svd(A)[2][np.linalg.matrix_rank(A) :]
    direction = np.random.default_rng(seed).normal(size=len(null)) @ null
    n[major] += extent * direction / max(abs(direction / n[major]).max(), 1.0e-300)
    residual, gap, affinity = figures(state, n=n)
    assert residual <= 1.0e-9
    assert affinity > 0.1 * extent
    primal_change = gap - figures(state)[1]
    assert primal_change >= -1.0e-12  # no composition lies below the minimum


@pytest.mark.parametrize(("name", "missing"), [("soot", "C(s):graphite"), ("dew", "H2O(l)")])
def test_a_phase_left_out_is_noticed(name: str, missing: str) -> None:
    """The optimum without a phase, judged with it: balances and gap are perfect, the affinity is not."""
    without = proved(name, (missing,))
    full = proved(name)
    n = without.amounts.reindex(full.system.species, fill_value=0.0).to_numpy()
    assert full.amounts[missing] > 0.0
    lam = without.element_potentials.reindex(full.system.elements).to_numpy()
    residual, gap, affinity = figures(full, n=n, lam=lam)
    assert residual <= RESIDUAL_LIMIT
    assert gap <= GAP_LIMIT
    assert affinity > 0.01


@pytest.mark.parametrize("name", ["soot", "dew"])
def test_a_present_phase_taken_away_is_noticed(name: str) -> None:
    state = proved(name)
    n = state.amounts_array.copy()
    n[~state.system.gas] = 0.0
    assert figures(state, n=n)[0] > 1.0e-3


def test_residual_is_relative_to_each_element() -> None:
    """1e-12 mol too much of an element of which there is 1e-12 mol is an error of one, not of 1e-12."""
    A, b = np.eye(2), np.array([1.0, 1.0e-12])
    assert element_residual.py_func(A, b, np.array([1.0, 2.0e-12])) == pytest.approx(1.0)
    assert element_residual.py_func(A, b, b) == 0.0


def test_charge_is_judged_by_its_turnover() -> None:
    """Where an element row sums to zero, as charge does, what passes through it is the measure."""
    A, b = np.array([[1.0, 1.0], [1.0, -1.0]]), np.array([2.0e-9, 0.0])
    assert element_residual.py_func(A, b, np.array([1.0e-9, 1.0e-9])) == 0.0
    assert element_residual.py_func(A, b, np.array([1.001e-9, 0.999e-9])) == pytest.approx(1.0e-3)
