"""Cadmium chloride vapour, in which the cadmium of waste leaves the furnace.

The gas was placed by the boiling point; vapour pressures at lower temperature and the heat of boiling were not used.
"""

from math import exp, log, pi

import pytest

from gibbsmin.constants import AVOGADRO, BOLTZMANN, STANDARD_PRESSURE, R
from gibbsmin.thermo.checkup import PLANCK, translation_entropy
from gibbsmin.thermo.database import load

MMHG = 133.322
LIGHT = 2.99792458e10  # cm/s, exact


@pytest.mark.parametrize(
    ("celsius", "mmHg", "within"),
    # Stull, Ind. Eng. Chem. 39 (1947) 517, also in Perry's Chemical Engineers' Handbook (from memory).
    [
        (618, 5, 0.12),
        (656, 10, 0.06),
        (695, 20, 0.06),
        (736, 40, 0.06),
        (797, 100, 0.06),
        (847, 200, 0.06),
        (908, 400, 0.06),
        (967, 760, 0.03),
    ],
)
def test_vapour_pressure(celsius: float, mmHg: float, within: float) -> None:
    T = celsius + 273.15
    difference = float(load().get("CdCl2(l)").gibbs_energy(T)) - float(load().get("CdCl2").gibbs_energy(T))
    assert exp(difference / (R * T)) * STANDARD_PRESSURE == pytest.approx(mmHg * MMHG, rel=within)


def test_heat_of_boiling() -> None:
    # 124.3 kJ/mol at 1237.15 K, CRC Handbook of Chemistry and Physics.
    gas, liquid = load().get("CdCl2"), load().get("CdCl2(l)")
    assert gas.enthalpy(1237.15) - liquid.enthalpy(1237.15) == pytest.approx(124.3e3, abs=3.0e3)


@pytest.mark.parametrize("T", [300.0, 600.0, 1000.0, 2000.0])
def test_entropy_is_that_of_the_molecule(T: float) -> None:
    # Linear Cl-Cd-Cl, 2.27 Angstrom, 330, 88 (twice) and 425 /cm (from memory of matrix and gas spectra).
    gas = load().get("CdCl2")
    inertia = 2.0 * 0.035453 / AVOGADRO * 2.27e-10**2
    S = translation_entropy(gas.molar_mass) + 2.5 * R * log(T / 298.15)
    S += R * (1.0 + log(8.0 * pi**2 * inertia * BOLTZMANN * T / PLANCK**2 / 2.0))
    for wave in (330.0, 88.0, 88.0, 425.0):
        x = PLANCK * LIGHT * wave / (BOLTZMANN * T)
        S += R * (x / (exp(x) - 1.0) - log(1.0 - exp(-x)))
    assert gas.entropy(T) == pytest.approx(S, abs=0.3)
