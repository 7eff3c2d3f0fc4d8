"""Feeds that mix before they react: their entropy by hand, and never less than before."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from gibbsmin.practice.audit import feed_enthalpy, feed_entropy
from gibbsmin.practice.feeds.mixing import mixed_entropy
from gibbsmin.thermo.database import load

R = 8.314462618


def mixed(parts, pressure):
    """Entropy before and after of (name, amount, temperature) at one pressure."""
    records = [load().get(name) for name, _, _ in parts]
    n, T = (np.array([part[k] for part in parts], float) for k in (1, 2))
    H = sum(feed_enthalpy([r], [a], t) for r, a, t in zip(records, n, T, strict=True))
    S = sum(feed_entropy([r], [a], t, pressure) for r, a, t in zip(records, n, T, strict=True))
    after = mixed_entropy(records, n[None], np.array([H]), np.array([pressure]), T.min(keepdims=1), T.max(keepdims=1))
    return S, float(after[0])


def test_entropy_of_mixing_of_two_gases():
    before, after = mixed([("N2", 1.0, 500.0), ("O2", 3.0, 500.0)], 2e5)
    assert after - before == pytest.approx(-R * (np.log(0.25) + 3 * np.log(0.75)), rel=1e-9)


def test_two_liquids_that_meet_share_their_heat():
    before, after = mixed([("H2O(l)", 1.0, 290.0), ("H2O(l)", 1.0, 350.0)], 1e5)
    # constant heat capacity of 75.3 J/mol/K within 0.5 %
    assert after - before == pytest.approx(75.3 * np.log(320.0**2 / (290.0 * 350.0)), rel=0.01)


def test_a_solid_that_changes_its_form_while_mixing_loses_no_enthalpy():
    """Iron between alpha and gamma (1185 K): the entropy of the change counts in part, dS = dH/T."""
    name = "Fe(s)"
    record = load().get(name)
    jumps = [a.high for a, b in zip(record.pieces, record.pieces[1:], strict=False) if a.form != b.form]
    T = jumps[-1]
    below, above = T * (1 - 1e-9), T * (1 + 1e-9)
    half = np.array([0.5 * (record.enthalpy(below) + record.enthalpy(above))])
    found = mixed_entropy([record], np.ones((1, 1)), half, np.array([1e5]), np.array([T - 200]), np.array([T + 200]))
    assert found[0] == pytest.approx(0.5 * (record.entropy(below) + record.entropy(above)), rel=1e-7)


PART = st.tuples(
    st.sampled_from(["N2", "CO2", "H2O", "CH4", "H2O(l)", "SiO2(s)"]), st.floats(0.01, 10.0), st.floats(250.0, 2500.0)
)


@given(st.lists(PART, min_size=1, max_size=4), st.floats(1e3, 1e7))
@settings(max_examples=30, deadline=None)
def test_mixing_never_lowers_the_entropy(parts, pressure):
    before, after = mixed(parts, pressure)
    assert after >= before - 1e-9 * abs(before)
