"""Held conditions and feeds: what is accepted, what is refused in which words, and batches against single states."""

from collections.abc import Callable

import numpy as np
import pytest
from proof import prove

from gibbsmin.errors import FeedError, InputError, NotCertified, UnitError
from gibbsmin.states import solve
from gibbsmin.states.solve import equilibria, equilibrium
from gibbsmin.states.system import System

GAS = System.from_species("CH4 O2 CO2 CO H2 H2O N2 H2O(l)")
FEED = {"CH4": 1.0, "O2": 1.5, "N2": 6.0}


def test_units_are_read() -> None:
    texts = equilibrium(
        GAS, {"CH4": "1 mol", "O2": "0.0015 kmol", "N2": 6}, temperature="1226.85 degC", pressure="2 bar"
    )
    plain = equilibrium(GAS, FEED, temperature=1500.0, pressure=2.0e5)
    assert texts.temperature == pytest.approx(1500.0, rel=1.0e-12)
    assert texts.pressure == pytest.approx(2.0e5, rel=1.0e-12)
    assert texts.amounts_array == pytest.approx(plain.amounts_array, rel=1.0e-9)


@pytest.mark.parametrize(
    ("temperature", "pressure", "error", "words"),
    [
        (-5.0, 1e5, InputError, ["temperature", "-5"]),
        (0.0, 1e5, InputError, ["temperature"]),
        (float("nan"), 1e5, InputError, ["temperature", "nan"]),
        (float("inf"), 1e5, InputError, ["temperature", "inf"]),
        (20.0, 1e5, InputError, ["temperature", "50", "20000", "20 K"]),
        (1.0e6, 1e5, InputError, ["temperature", "20000"]),
        ("3 bar", 1e5, UnitError, ["temperature", "3 bar"]),
        ("warm", 1e5, UnitError, ["temperature", "warm"]),
        (1000.0, 0.0, InputError, ["pressure", "0"]),
        (1000.0, -1e5, InputError, ["pressure", "-1"]),
        (1000.0, float("nan"), InputError, ["pressure", "nan"]),
        (1000.0, "300 K", UnitError, ["pressure", "300 K"]),
        (1000.0, "high", UnitError, ["pressure", "high"]),
    ],
)
def test_wrong_conditions_are_named(
    temperature: object, pressure: object, error: type[Exception], words: list[str]
) -> None:
    with pytest.raises(error) as caught:
        equilibrium(GAS, FEED, temperature=temperature, pressure=pressure)  # type: ignore[arg-type]
    assert all(word in str(caught.value) for word in words), str(caught.value)


S, E = len(GAS.species), len(GAS.elements)


@pytest.mark.parametrize(
    ("call", "error", "words"),
    [
        (lambda: equilibria(GAS, temperature=1e3, pressure=1e5), InputError, ["feeds", "element_amounts"]),
        (
            lambda: equilibria(GAS, np.ones(S), temperature=1e3, pressure=1e5, element_amounts=np.ones(E)),
            InputError,
            ["feeds", "element_amounts"],
        ),
        (
            lambda: equilibria(GAS, np.ones(S + 1), temperature=1e3, pressure=1e5),
            InputError,
            ["feeds", f"{S}", f"{S + 1}"],
        ),
        (lambda: equilibria(GAS, np.ones((2, 2, S)), temperature=1e3, pressure=1e5), InputError, ["feeds", "shape"]),
        (
            lambda: equilibria(GAS, element_amounts=np.ones(E + 1), temperature=1e3, pressure=1e5),
            InputError,
            ["element_amounts", f"{E}", f"{E + 1}"],
        ),
        (lambda: equilibria(GAS, np.full(S, np.nan), temperature=1e3, pressure=1e5), InputError, ["feeds", "finite"]),
        (lambda: equilibria(GAS, -np.eye(S)[1], temperature=1e3, pressure=1e5), FeedError, ["O2", "negative"]),
        (lambda: equilibria(GAS, np.ones(S), temperature=[1e3, -1.0], pressure=1e5), InputError, ["temperature", "-1"]),
        (
            lambda: equilibria(GAS, np.ones(S), temperature=[1e3, 9e9], pressure=1e5),
            InputError,
            ["temperature", "9e+09"],
        ),
        (lambda: equilibria(GAS, np.ones(S), temperature=1e3, pressure=[1e5, np.inf]), InputError, ["pressure", "inf"]),
        (
            lambda: equilibria(GAS, np.ones(S), temperature=np.full((2, 2), 1e3), pressure=1e5),
            InputError,
            ["axis", "(2, 2)"],
        ),
        (
            lambda: equilibria(GAS, np.ones((3, S)), temperature=[1e3, 2e3], pressure=1e5),
            InputError,
            ["temperature", "feeds"],
        ),
    ],
)
def test_wrong_arrays_are_named(call: Callable[[], object], error: type[Exception], words: list[str]) -> None:
    with pytest.raises(error) as caught:
        call()
    assert all(word in str(caught.value) for word in words), str(caught.value)


def random_batch(states: int, seed: int) -> tuple[System, np.ndarray, np.ndarray, np.ndarray]:
    system, rng = System.from_elements("C H O N S"), np.random.default_rng(seed)
    b = 10.0 ** rng.uniform(-4.0, 0.0, (states, 5)) * (rng.random((states, 5)) < 0.8)
    b[:, 0] += 1.0e-3
    return system, b, rng.uniform(250.0, 5000.0, states), 10.0 ** rng.uniform(2.0, 8.0, states)


def test_a_batch_is_its_states_whatever_their_order() -> None:
    """Neighbours in a batch lend each other their start; the answer must not show it."""
    system, b, T, P = random_batch(60, 3)
    batch = equilibria(system, element_amounts=b, temperature=T, pressure=P)
    order = np.random.default_rng(4).permutation(60)
    shuffled = equilibria(system, element_amounts=b[order], temperature=T[order], pressure=P[order])
    assert batch.certified.all()
    assert shuffled.certified.all()
    seen = batch.amounts > 1.0e-20
    for k, i in enumerate(order):
        assert shuffled.amounts[k][seen[i]] == pytest.approx(batch.amounts[i][seen[i]], rel=1.0e-7)
    for i in range(0, 60, 6):
        one = equilibria(system, element_amounts=b[i], temperature=T[i], pressure=P[i])
        assert len(one) == 1
        assert one.amounts[0][seen[i]] == pytest.approx(batch.amounts[i][seen[i]], rel=1.0e-7)


def test_columns_of_a_batch_are_the_values_of_its_states() -> None:
    system, b, T, P = random_batch(12, 8)
    batch = equilibria(system, element_amounts=b, temperature=T, pressure=P)
    for i in range(len(batch)):
        state = batch.state(i)
        for name in ("temperature", "pressure", "volume", "enthalpy", "entropy", "gibbs_energy", "internal_energy"):
            assert getattr(batch, name)[i] == pytest.approx(getattr(state, name), rel=1.0e-14), name
        assert (batch.amounts[i] == state.amounts_array).all()
        assert (batch.element_potentials[i] == state.element_potentials_array).all()
        assert batch.element_residual[i] == state.certificate.element_residual
        assert batch.gap[i] == state.certificate.gap
        assert batch.worst_affinity[i] == state.certificate.worst_affinity


def test_scalars_and_arrays_are_spread_over_the_states() -> None:
    feed = np.array([FEED.get(name, 0.0) for name in GAS.species])
    T = np.array([800.0, 1200.0, 1600.0])
    by_T = equilibria(GAS, feed, temperature=T, pressure=1.0e5)
    by_all = equilibria(GAS, np.tile(feed, (3, 1)), temperature=T, pressure=np.full(3, 1.0e5))
    assert (by_T.amounts == by_all.amounts).all()
    assert len(equilibria(GAS, feed, temperature=900.0, pressure=[1e5, 2e5])) == 2


@pytest.mark.parametrize("T", [1000.0, [1000.0, 1200.0]])
@pytest.mark.parametrize("P", [1.0e5, [1.0e5, 2.0e5]])
@pytest.mark.parametrize("feed", [np.ones(S), np.ones((2, S))], ids=["one feed", "feeds"])
def test_compiled_code_is_handed_arrays_of_one_kind(
    T: object, P: object, feed: np.ndarray, monkeypatch: pytest.MonkeyPatch
) -> None:
    """Read-only arrays are another type to numba, for which it would compile the solver once more."""
    seen: list[np.ndarray] = []
    monkeypatch.setattr(
        solve, "minimize_many", lambda A, gas, b, mode, volume, *held: seen.extend([A, gas, b, *held[:2]])
    )
    equilibria(GAS, feed, temperature=T, pressure=P)  # type: ignore[arg-type]
    assert len(seen) == 5
    assert all(array.flags.c_contiguous and array.flags.writeable for array in seen)


def test_no_states_are_no_trouble() -> None:
    batch = equilibria(GAS, np.ones(S), temperature=[], pressure=1.0e5)
    assert len(batch) == 0
    assert batch.amounts.shape == (0, S)
    assert batch.reason == []


def test_a_state_that_cannot_be_is_marked_and_the_others_stand() -> None:
    """Two of CO2 and CO cannot hold pure carbon, nor twice as much oxygen as CO2."""
    system = System.from_species("CO CO2")
    b = {"C": [1.0, 1.0, 1.0, 0.0], "O": [1.5, 0.0, 5.0, 0.0]}
    batch = equilibria(
        system, element_amounts=np.transpose([b[name] for name in system.elements]), temperature=1000.0, pressure=1e5
    )
    assert batch.certified.tolist() == [True, False, False, False]
    assert batch.reason[0] == ""
    assert "cannot hold the feed's elements" in batch.reason[1]
    assert "Allow more species" in batch.reason[2]
    assert "holds nothing" in batch.reason[3]
    assert batch.amounts[0] == pytest.approx([0.5, 0.5])
    for values in (batch.amounts, batch.enthalpy, batch.gap, batch.element_potentials, batch.volume):
        assert np.isnan(values[1:]).all()
        assert not np.isnan(values[0]).any()
    with pytest.raises(NotCertified, match="Allow more species") as caught:
        batch.state(1)
    assert caught.value.reason
    assert caught.value.remedy


@pytest.mark.parametrize(
    ("feed", "T", "words"),
    [({}, 1000.0, "holds nothing"), ({"CO": 0.0}, 1000.0, "holds nothing"), ({"C": 1.0}, 1000.0, "cannot hold")],
)
def test_a_single_state_that_cannot_be_is_an_error(feed: dict[str, float], T: float, words: str) -> None:
    with pytest.raises(NotCertified, match=words):
        equilibrium(System.from_species("CO CO2"), feed, temperature=T, pressure=1.0e5)


def test_solids_beyond_the_use_of_their_data_are_no_candidates() -> None:
    """Ice and water alone have nothing to offer at 1500 K."""
    with pytest.raises(NotCertified, match="ranges of temperature"):
        equilibrium(System.from_species("H2O(s) H2O(l)"), {"H2O": 1.0}, temperature=15000.0, pressure=1.0e5)


def test_charge_of_the_feed_is_balanced() -> None:
    system = System.from_elements("Ar", ions=True)
    neutral = equilibrium(system, {"Ar": 1.0}, temperature=12000.0, pressure=1.0e5)
    assert neutral.amounts["Ar+"] == pytest.approx(neutral.amounts["e-"], rel=1.0e-9)
    charged = equilibrium(system, {"Ar": 1.0, "e-": 0.25}, temperature=12000.0, pressure=1.0e5)
    assert charged.amounts["e-"] - charged.amounts["Ar+"] == pytest.approx(0.25, rel=1.0e-9)
    b = system.feed({"Ar": 1.0, "e-": 0.25})
    assert prove(system, 12000.0, 1.0e5, b, charged.amounts_array, charged.element_potentials_array).holds
