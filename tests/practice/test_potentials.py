"""Activities from element potentials against those of the solver's own state, and where there are none."""

from __future__ import annotations

import numpy as np
import pytest
from settled_from import settle

from gibbsmin.practice.figures.potentials import given_temperature, ln_activity, record_of, usable
from gibbsmin.states.system import System
from gibbsmin.thermo.database import load

WATER_GAS = System.from_elements("C H O", exclude=["C(s):graphite"])
FEED = {"gas": {"CO": 1.0, "H2O": 1.5}}


def test_of_a_gas_it_is_its_partial_pressure() -> None:
    settled = settle(WATER_GAS, FEED, [900.0, 1200.0], 3.0e5)
    for name in ("CO", "H2O", "CH4", "O2"):
        expected = np.log(settled.wet(name) * 3.0)
        assert ln_activity(settled, settled.records[name]) == pytest.approx(expected, abs=1e-9)


def test_of_what_may_not_form_it_follows_from_any_reaction() -> None:
    """2 CO = C + CO2: ln a_C = ln K + 2 ln p_CO - ln p_CO2, with K from the records alone."""
    settled = settle(WATER_GAS, FEED, [900.0], 3.0e5)
    graphite, T = load().get("C(s):graphite"), settled.temperature
    ln_K = (2 * load().get("CO").gibbs_energy(T) - graphite.gibbs_energy(T) - load().get("CO2").gibbs_energy(T)) / (
        8.31446261815324 * T
    )
    expected = ln_K + 2 * np.log(settled.wet("CO") * 3.0) - np.log(settled.wet("CO2") * 3.0)
    assert ln_activity(settled, graphite) == pytest.approx(expected, abs=1e-9)


def test_without_one_of_its_elements_there_is_none() -> None:
    settled = settle(System.from_elements("C H O N"), FEED, [900.0])
    assert np.isnan(ln_activity(settled, load().get("NH3"))).all()  # an element that is absent
    assert np.isnan(ln_activity(settled, load().get("H2S"))).all()  # an element that the system does not have


def test_own_records_go_before_the_data() -> None:
    settled = settle(WATER_GAS, FEED, [900.0])
    assert record_of(settled, "CO") is settled.records["CO"]
    assert record_of(settled, "SO2").name == "SO2"
    assert given_temperature(settled) == pytest.approx([900.0])


def test_usable_is_where_the_data_may_be_used() -> None:
    graphite = load().get("C(s):graphite")
    low, high = graphite.usable
    found = usable(graphite, np.array([low - 1.0, low, high, high + 1.0, np.nan]))
    assert found.tolist() == [False, True, True, False, False]
