"""Films: yields by hand, supersaturation against a published constant and against the solver."""

from __future__ import annotations

import numpy as np
import pytest
from settled_from import by_hand, figures, settle

from gibbsmin.practice.figures.deposition import deposition
from gibbsmin.states.system import System

SILICON = System.from_elements("Si Cl H")
BARE = System.from_elements("Si Cl H", condensed=False)


def test_yield_and_halogen_by_hand() -> None:
    found = figures(
        deposition(by_hand({"Si(s)": 2.0, "SiCl4": 3.0, "H2": 90.0, "HCl": 3.0}, {"gas": {"SiHCl3": 5.0, "H2": 95.0}}))
    )
    assert found["yield_si"] == pytest.approx(0.4)
    assert found["cl_to_h_fed"] == pytest.approx(15.0 / 195.0)
    assert "etched_si" not in found


def test_etching_by_hand() -> None:
    """Of 10 silicon fed as a solid 9 are left, and the gas brought 0.5: minus two of the yield."""
    feeds = {"gas": {"SiCl4": 0.5, "HCl": 6.0, "H2": 50.0}, "wafer": {"Si(s)": 10.0}}
    found = figures(deposition(by_hand({"Si(s)": 9.0, "SiCl4": 1.5, "H2": 51.0}, feeds)))
    assert found["yield_si"] == pytest.approx(-2.0)
    assert found["etched_si"] == pytest.approx(0.1)


def test_hydrogen_chloride_alone_etches() -> None:
    feeds = {"gas": {"HCl": 5.0, "H2": 95.0}, "wafer": {"Si(s)": 10.0}}
    found = figures(deposition(settle(SILICON, feeds, [1273.15, 1473.15])))
    assert (found["etched_si"] > 0.0).all()
    assert "yield_si" not in found  # nothing of it came in as gas


def test_supersaturation_by_a_published_constant() -> None:
    """SiHCl3 + H2 = Si(s) + 3 HCl: log10 K(1300 K) = -1.954, NIST-JANAF, 4th ed., 1998 (log10 Kf combined)."""
    settled = settle(BARE, {"gas": {"SiHCl3": 5.0, "H2": 95.0}}, [1300.0])
    found = figures(deposition(settled))
    ln_a = -1.954 * np.log(10.0) + np.log(settled.wet("SiHCl3") * settled.wet("H2") / settled.wet("HCl") ** 3)
    assert found["affinity_si_s"] == pytest.approx(ln_a, abs=0.05)


def test_a_solid_that_is_supersaturated_forms_when_it_may() -> None:
    """Sign and zero, against the solver: the affinity without it tells whether it is there with it."""
    chlorine = np.array([0.0, 2.0, 8.0, 20.0, 40.0])
    feed = {"gas": {"SiCl4": 1.0, "H2": 40.0, "HCl": chlorine}}
    without = figures(deposition(settle(BARE, feed, 1373.15)))["affinity_si_s"]
    there = settle(SILICON, feed, 1373.15).amount("Si(s)") > 0.0
    assert there.any()
    assert not there.all()
    assert ((without > 0.0) == there).all()


def test_where_it_forms_it_is_not_told_as_absent() -> None:
    found = figures(deposition(settle(SILICON, {"gas": {"SiHCl3": 1.0, "H2": 99.0}}, [1373.15])))
    assert "affinity_si_s" not in found
    assert 0.0 < found["yield_si"][0] < 1.0


def test_of_a_compound_film_the_metal_counts() -> None:
    """TiN: titanium is nearly all deposited; of nitrogen, a carrier, no yield is told."""
    feed = {"gas": {"TiCl4": 2.0, "N2": 49.0, "H2": 49.0}}
    found = figures(deposition(settle(System.from_elements("Ti Cl N H"), feed, [1273.15])))
    assert 0.9 < found["yield_ti"][0] <= 1.0
    assert not any(name.startswith("yield_n") for name in found)
    assert sum(name.startswith("affinity_") for name in found) <= 4
