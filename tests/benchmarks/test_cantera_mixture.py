"""Both programs must be asked the same question, or the ratio of their times means nothing."""

import cantera as ct
import numpy as np
import pytest
from cantera_mixture import mixture_of, verdict
from problems import ASHES, FUELS, condensed

from gibbsmin.constants import R
from gibbsmin.states.system import System


@pytest.mark.parametrize("T", [450.0, 900.0, 2200.0])
def test_chemical_potentials_are_the_same(T: float) -> None:
    """At 30 bar, so that a molar volume of solids would show."""
    records = System.from_elements("C H O S").records
    system = System([*(r for r in records if not r.condensed), *(r for r in records if r.condensed)])
    P, whole = 30.0e5, mixture_of(system)
    whole.T, whole.P = T, P
    n = np.where(system.gas, 1.0, 0.0)
    whole.species_moles = n / 1000.0
    own = system.standard_potentials(T) + np.where(system.gas, np.log(P / 1.0e5 / n.sum()), 0.0)
    low, high = np.array([record.usable for record in system.records]).T
    there = (low < T) & (high > T)
    theirs = np.array(whole.chemical_potentials) / (1000.0 * R * T)
    assert theirs[there] == pytest.approx(own[there], rel=1e-9, abs=1e-7)


@pytest.mark.parametrize(("elements", "feed"), [("C H O N S", FUELS), ("C H O N S Cl Na K Ca Si", ASHES)])
def test_verdicts(elements: str, feed: dict[str, tuple[float, float]]) -> None:
    """Our own answer is the same; the feed, and an answer that lacks an element, are not."""
    problem = condensed(elements, 300, feed, 5, 5, ("vcs",))
    batch = problem.solve()
    assert batch.certified.all()
    for i in range(5):
        state = (problem.system, batch.temperature[i], batch.pressure[i], batch.element_potentials[i], problem.feeds[i])
        assert verdict(*state, batch.amounts[i]) == "same"
        assert verdict(*state, problem.feeds[i]) in ("wrong", "beyond")
        assert verdict(*state, 0.99 * batch.amounts[i]) == "wrong"


def test_a_solver_that_gives_up_is_counted() -> None:
    problem = condensed("C H O N S", 40, FUELS, 3, 3, ("vcs",))
    assert problem.verdicts is not None

    def give_up(i: int) -> None:
        raise ct.CanteraError("no")

    assert problem.verdicts(problem.solve(), give_up) == ["given up"] * 3
