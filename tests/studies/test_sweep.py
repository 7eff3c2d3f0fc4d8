"""The grid of inputs and the sweep for Python users."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from gibbsmin.errors import GibbsminError
from gibbsmin.states.solve import equilibrium
from gibbsmin.states.system import System
from gibbsmin.studies.sweep import grid, sweep

VALUES = st.lists(st.floats(-1e6, 1e6), min_size=1, max_size=5, unique=True)


@given(st.lists(VALUES, max_size=3))
def test_the_grid_has_every_combination_once_the_last_input_fastest(axes):
    columns = grid(axes)
    assert len(columns) == len(axes)
    size = int(np.prod([len(values) for values in axes]))
    rows = list(zip(*columns, strict=True))
    assert len(set(rows)) == (size if axes else 0)
    if axes:
        assert list(columns[-1][: len(axes[-1])]) == axes[-1]
        assert list(columns[0][:: size // len(axes[0])]) == axes[0]


@pytest.fixture(scope="module")
def system():
    return System.from_species(["CH4", "H2O", "CO", "CO2", "H2", "O2", "C(s):graphite"])


FEED = {"CH4": 1.0, "H2O": 3.0}


def test_two_inputs(system):
    data = sweep(
        system, FEED, vary={"temperature": ["700 degC", 1100.0], "feed:H2O": [2.0, 3.0, 4.0]}, pressure="10 bar"
    )
    assert data["amount"].dims == ("temperature", "feed:H2O", "species")
    assert data["temperature"].values == pytest.approx([973.15, 1100.0])
    assert data["temperature"].attrs["units"] == "K"
    assert data["certified"].values.all()
    one = data.isel({"feed:H2O": 1}).sel(species="H2")["amount"].values
    for k, T in enumerate(["700 degC", 1100.0]):
        alone = equilibrium(system, FEED, temperature=T, pressure="10 bar")
        assert one[k] == pytest.approx(alone.amounts["H2"], rel=1e-8)


def test_elements_close_in_every_state(system):
    data = sweep(system, FEED, vary={"feed:O2": np.linspace(0.0, 2.0, 5)}, temperature=1200.0, pressure=1e5)
    oxygen = [record.elements.get("O", 0.0) for record in system.records]
    assert (data["amount"].values @ np.array(oxygen)) == pytest.approx(3.0 + 2.0 * np.linspace(0.0, 2.0, 5))


@pytest.mark.parametrize(
    ("keywords", "words"),
    [
        ({"vary": {}}, "vary is empty"),
        ({"vary": {"temprature": [1000.0]}}, "'temperature'"),
        ({"vary": {"temperature": []}}, "no values"),
        ({"vary": {"temperature": [1000.0]}, "temperature": 1000.0}, "held and varied"),
        ({"vary": {"temperature": ["1000 bar"]}}, r"vary\['temperature'\]"),
        ({"vary": {"feed:CH4": [1.0]}}, "pressure cannot be held; hold one of the pairs"),
        ({"vary": {"feed:N2": [1.0]}, "temperature": 1000.0}, "N"),
        ({"vary": {"feed:XX": [1.0]}, "temperature": 1000.0}, "XX"),
    ],
)
def test_inputs_that_do_not_suit(system, keywords, words):
    with pytest.raises(GibbsminError, match=words):
        sweep(system, FEED, pressure=1e5, **keywords)
