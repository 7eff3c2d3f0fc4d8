"""Changes without reaction against the formulas of ideal gases."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from studies.train.plant import Plant

from gibbsmin.errors import InputError
from gibbsmin.studies.train.change import Conditions, Unreacted
from gibbsmin.studies.train.mixing import mixed
from gibbsmin.studies.train.train import solve_train

HERE = np.array([0])
R = 8.314462618


@given(T=st.floats(250.0, 1500.0), ratio=st.floats(0.05, 40.0), efficiency=st.floats(0.3, 1.0))
@settings(max_examples=40)
def test_argon_by_the_isentropic_formula(T: float, ratio: float, efficiency: float) -> None:
    """Cp is 5/2 R (of the data 6e-6 more): T2s = T1 r^0.4; the efficiency is of the work that is spent or gained."""
    plant = Plant("Ar N2")
    inlet = plant.stream({"Ar": 2.0}, T, 2e5)
    ideal = T * ratio**0.4
    real = T + (ideal - T) * (1.0 / efficiency if ratio > 1.0 else efficiency)
    if not 200.0 < real < 6000.0 or not 200.0 < ideal < 6000.0:
        return
    found = plant.unreacted("entropy", efficiency, ratio * 2e5)(inlet, HERE)
    assert found.outlet.temperature[0] == pytest.approx(real, rel=2e-5)
    assert found.work[0] == pytest.approx(2.0 * 2.5 * R * (real - T), rel=1e-4, abs=1e-2)
    assert found.heat[0] == 0.0
    assert found.outlet.entropy[0] >= inlet.entropy[0] - 1e-9 * abs(inlet.entropy[0])


@pytest.mark.parametrize(("efficiency", "celsius"), [(1.0, 393.5), (0.88, 443.0)])
def test_air_compressed_twenty_times(efficiency: float, celsius: float) -> None:
    """Dry air from 15 degC, pressure ratio 20, by NIST-JANAF tables: 393.5 ideally, 443.0 degC, 442.6 kJ/kg."""
    plant = Plant("N2 O2 Ar CO2")
    air = plant.stream({"N2": 78.087, "O2": 20.9476, "Ar": 0.934, "CO2": 0.0314}, 288.15, 101325.0)
    found = plant.unreacted("entropy", efficiency, 20.0 * 101325.0)(air, HERE)
    assert found.outlet.temperature[0] - 273.15 == pytest.approx(celsius, abs=0.5)
    if efficiency < 1.0:
        assert found.work[0] / air.mass[0] / 1e3 == pytest.approx(442.6, abs=0.5)


def test_there_and_back_without_loss() -> None:
    plant = Plant("CH4 H2O N2")
    inlet = plant.stream({"CH4": 1.0, "H2O": 2.0, "N2": 0.3}, 450.0, 3e5)
    up = plant.unreacted("entropy", 1.0, 2e6)(inlet, HERE)
    down = plant.unreacted("entropy", 1.0, 3e5)(up.outlet, HERE)
    assert down.outlet.temperature[0] == pytest.approx(450.0, rel=1e-10)
    assert down.work[0] == pytest.approx(-up.work[0], rel=1e-9)


def test_a_valve_keeps_the_temperature_of_an_ideal_gas() -> None:
    """And makes n R ln(p1/p2) of entropy."""
    plant = Plant("N2 H2")
    inlet = plant.stream({"N2": 1.0, "H2": 3.0}, 400.0, 2e6)
    outlet = plant.unreacted("heat", 0.0, 1e5)(inlet, HERE).outlet
    assert outlet.temperature[0] == pytest.approx(400.0, rel=1e-10)
    assert outlet.entropy[0] - inlet.entropy[0] == pytest.approx(4.0 * R * np.log(20.0), rel=1e-9)


def test_heat_and_temperature_are_two_ways_to_say_one_thing() -> None:
    plant = Plant("CO2 H2O")
    inlet = plant.stream({"CO2": 1.0, "H2O": 1.0}, 400.0)
    hot = plant.unreacted("temperature", 1100.0)(inlet, HERE)
    again = plant.unreacted("heat", float(hot.heat[0]))(inlet, HERE)
    assert again.outlet.temperature[0] == pytest.approx(1100.0, rel=1e-10)


def test_mixing_has_the_lowest_pressure_and_the_entropy_of_mixing() -> None:
    """Two monatomic gases of one temperature and of one pressure: n R ln 2 with equal amounts."""
    plant = Plant("Ar He")
    one, other = plant.stream({"Ar": 1.0}, 400.0, 2e5), plant.stream({"He": 1.0}, 400.0, 2e5)
    together = mixed([one, other])
    assert together.temperature[0] == pytest.approx(400.0, rel=1e-10)
    made = together.entropy[0] - one.entropy[0] - other.entropy[0]
    assert made == pytest.approx(2.0 * R * np.log(2.0), rel=1e-8)
    lower = mixed([one, plant.stream({"He": 1.0}, 400.0, 1e5)])
    assert lower.pressure[0] == 1e5


def test_an_empty_stream_does_not_set_the_pressure_or_the_temperature() -> None:
    plant = Plant("Ar")
    together = mixed([plant.stream({"Ar": 1.0}, 700.0, 5e5), plant.stream({}, 300.0, 1e5)])
    assert together.pressure[0] == 5e5
    assert together.temperature[0] == pytest.approx(700.0, rel=1e-10)


def test_a_temperature_beyond_all_data_is_told_of_that_state_alone() -> None:
    plant = Plant("Ar", 2)
    steps = [plant.step("cooler", "feed", change=plant.unreacted("heat", np.array([-1e9, 1e3])))]
    solved = solve_train(steps, {"feed": plant.stream({"Ar": 1.0})})
    assert solved.reasons[0].startswith("cooler: ")
    assert "beyond all data" in solved.reasons[0]
    assert solved.reasons[1] == ""


def test_a_drop_that_takes_all_pressure_is_refused() -> None:
    plant = Plant("Ar")
    step = Unreacted(Conditions("heat", plant.every(0.0), drop=plant.every(2e5)))
    with pytest.raises(InputError, match="more than the pressure"):
        step(plant.stream({"Ar": 1.0}), HERE)
