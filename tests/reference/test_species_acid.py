"""Sulfuric acid vapour, against measured vapour pressures of the acid (all from memory of the papers).

The acid that was measured held 98 to 99 %; the pressures are those of H2SO4 itself. At 298.15 K they were used to place
the gas; the others were not.
"""

from math import exp

import pytest

from gibbsmin.constants import ATMOSPHERE, STANDARD_PRESSURE, R
from gibbsmin.thermo.database import load


def vapour(T: float) -> float:
    """Pressure of H2SO4 over the pure acid, [Pa]."""
    G = [float(load().get(name).gibbs_energy(T)) for name in ("H2SO4(l)", "H2SO4")]
    return STANDARD_PRESSURE * exp((G[0] - G[1]) / (R * T))


def dissociation(T: float) -> float:
    """Constant of H2SO4 = SO3 + H2O, [bar]."""
    G = {name: float(load().get(name).gibbs_energy(T)) for name in ("H2SO4", "SO3", "H2O")}
    return exp((G["H2SO4"] - G["SO3"] - G["H2O"]) / (R * T))


@pytest.mark.parametrize(
    ("T", "Pa", "factor"),
    [
        (298.15, 133.322 * exp(20.70 - 9360.0 / 298.15), 1.3),  # Richardson, Hightower & Pigg 1986
        (296.0, 3.3e-3, 1.5),  # Roedel 1979, 2.5e-5 Torr
        # ln(p/atm) = 16.259 - 10156/T, Ayers, Gillett & Gras 1980, 338 to 445 K
        (340.0, ATMOSPHERE * exp(16.259 - 10156.0 / 340.0), 2.2),
        (400.0, ATMOSPHERE * exp(16.259 - 10156.0 / 400.0), 2.2),
        (445.0, ATMOSPHERE * exp(16.259 - 10156.0 / 445.0), 2.2),
    ],
)
def test_vapour_pressure(T: float, Pa: float, factor: float) -> None:
    assert Pa / factor < vapour(T) < Pa * factor


def test_boils_near_its_published_temperature() -> None:
    # H2SO4, SO3 and H2O over the acid, as it falls apart: pure acid begins to boil near 290 degC, the
    # azeotrope of 98.3 % boils at 338 degC (CRC Handbook).
    def total(T: float) -> float:
        return vapour(T) + 2.0 * (vapour(T) * STANDARD_PRESSURE * dissociation(T)) ** 0.5

    assert total(555.0) < ATMOSPHERE < total(612.0)


def test_is_whole_in_cold_flue_gas_and_falls_apart_in_hot() -> None:
    # With 8 % water: all acid below 200 degC, half near 310 degC, none above 450 degC (common practice, no source).
    water = 0.08
    share = {celsius: 1.0 / (1.0 + dissociation(celsius + 273.15) / water) for celsius in (180, 300, 450)}
    assert share[180] > 0.97
    assert 0.3 < share[300] < 0.7
    assert share[450] < 0.05
