"""Iron sulfides with gas: troilite beside iron, pyrrhotite beside sulfur, pyrite.

Pyrrhotite is a solution; here it has one composition, Fe0.877S. Toulmin & Barton, Geochim. Cosmochim. Acta 28 (1964)
641, measured S2 over it at 600 to 1016 K and gave the activity of FeS by the Gibbs-Duhem equation (their formulas are
from memory). The enthalpy of Fe0.877S was fitted to them; troilite, H2S and pyrite were not touched.
"""

from math import atanh, exp, log, sqrt

import pytest

from gibbsmin.constants import ATMOSPHERE, STANDARD_PRESSURE, R
from gibbsmin.thermo.database import load

SULFUR = 0.5 * (1.0 - 0.877)  # S2 beyond FeS in one Fe0.877S
MIXED = 0.877 / (0.877 + SULFUR)  # mole fraction of FeS, counted in FeS and S2
PYRITE = 1.0 / 0.877  # Fe0.877S from one FeS2


def G(name: str, T: float) -> float:
    return float(load().get(name).gibbs_energy(T))


def pressure_and_activity(T: float) -> tuple[float, float]:
    """S2 over pyrrhotite of the composition ``MIXED`` [atm], and the activity of FeS in it, after Toulmin & Barton."""
    cold, root = 1000.0 / T - 1.0, sqrt(1.0 - 0.9981 * MIXED)
    p = (70.03 - 85.83 * MIXED) * cold + 39.30 * root - 11.91
    a = 85.83 * cold * (1.0 - MIXED + log(MIXED)) + 39.30 * root - 39.23 * atanh(root) - 0.002
    return 10.0**p, 10.0**a


@pytest.mark.parametrize(
    ("T", "within"), [(600.0, 1300.0), (700.0, 1000.0), (800.0, 700.0), (900.0, 500.0), (1000.0, 500.0)]
)
def test_pyrrhotite(T: float, within: float) -> None:
    p, a = pressure_and_activity(T)
    S2 = G("S2", T) + R * T * log(p * ATMOSPHERE / STANDARD_PRESSURE)
    published = 0.877 * (G("FeS(s)", T) + R * T * log(a)) + SULFUR * S2
    assert G("Fe0.877S(s)", T) == pytest.approx(published, abs=within)


@pytest.mark.parametrize("T", [298.15, 420.0, 600.0, 900.0, 1200.0, 1400.0, 1460.0])
def test_iron_stands_beside_troilite(T: float) -> None:
    # The phase diagram: nothing richer in sulfur than FeS meets iron (CRC Handbook and others, from memory).
    assert G("FeS(s)", T) < G("Fe0.877S(s)", T) + 0.123 * G("Fe(s)", T) - 2000.0


@pytest.mark.parametrize("T", [800.0, 900.0, 1000.0, 1100.0, 1200.0])
def test_sulfur_over_iron_and_troilite(T: float) -> None:
    # 2 Fe + S2 = 2 FeS: -300500 + 105.1 T J/mol, 700 to 1260 K, after Richardson & Jeffes 1952 (from memory).
    published = -300500.0 + 105.1 * T
    assert 2.0 * (G("FeS(s)", T) - G("Fe(s)", T)) - G("S2", T) == pytest.approx(published, abs=3500.0)


def test_hydrogen_sulfide_over_iron() -> None:
    # Log Kf of FeS and H2S in NIST-JANAF Fe-023 and H-080 at 900 and 1000 K, both from S2 gas: H2S/H2.
    for T, sulfide, gas in ((900.0, 6.003, 2.659), (1000.0, 5.102, 2.141)):
        found = exp((G("FeS(s)", T) - G("Fe(s)", T) + G("H2", T) - G("H2S", T)) / (R * T))
        assert found == pytest.approx(10.0 ** (gas - sulfide), rel=0.06)


def test_pyrite_falls_apart() -> None:
    # 1 atm of S2 at 962 K, 689 degC (Toulmin & Barton 1964, from memory).
    def pressure(T: float) -> float:
        free = 0.5 * (2.0 - PYRITE)
        return exp((G("FeS2(s)", T) - PYRITE * G("Fe0.877S(s)", T) - free * G("S2", T)) / (R * T * free))

    assert pressure(945.0) < ATMOSPHERE / STANDARD_PRESSURE < pressure(985.0)
