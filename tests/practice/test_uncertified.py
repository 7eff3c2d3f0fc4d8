"""A state that was not certified leaves nan in its place and spoils no other."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace

import numpy as np
import pytest
from settled_from import Floats, settle

from gibbsmin.practice.figures.atmosphere import atmosphere
from gibbsmin.practice.figures.catalyst import catalyst
from gibbsmin.practice.figures.deposition import deposition
from gibbsmin.practice.figures.halogens import halogens
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.kiln import kiln
from gibbsmin.practice.figures.reduction import reduction
from gibbsmin.practice.figures.salts import salts
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.practice.figures.sulfur import sulfur
from gibbsmin.practice.figures.sulfuric_acid import sulfuric_acid
from gibbsmin.states.system import System

FEED = {"CO": 1.0, "H2": 2.0, "H2O": 1.0, "H2S": 0.2, "HCl": 0.1, "KCl(s)": 0.1, "CaCO3(s):calcite": 0.1}


def spoilt(values: Floats) -> Floats:
    return np.where([False, True], np.nan, values)


@pytest.fixture(scope="module")
def pair() -> tuple[Settled, Settled]:
    """Return one mixture in one good state, and in two of which the second was lost."""
    system = System.from_elements("C H O S Cl K Ca", exclude=["C(s):graphite"])
    one, two = (settle(system, {"all": FEED}, T) for T in ([520.0], [520.0, 520.0]))
    lost = replace(
        two,
        amounts={name: spoilt(values) for name, values in two.amounts.items()},
        temperature=spoilt(two.temperature),
        pressure=spoilt(two.pressure),
        element_potentials={name: spoilt(values) for name, values in two.element_potentials.items()},
    )
    return one, lost


@pytest.mark.parametrize(
    "numbers",
    [sulfur, sulfuric_acid, reduction, atmosphere, deposition, halogens, kiln, salts, catalyst],
    ids=lambda function: function.__name__,
)
def test_a_lost_state(pair: tuple[Settled, Settled], numbers: Callable[[Settled], list[KeyFigure]]) -> None:
    alone, beside = (numbers(settled) for settled in pair)
    assert alone
    assert [figure.name for figure in beside] == [figure.name for figure in alone]
    for one, two in zip(alone, beside, strict=True):
        assert two.value.shape == (2,)
        assert two.value[0] == pytest.approx(one.value[0], rel=1e-9)
        assert np.isnan(two.value[1]) or "fed" in one.name
