"""Sulfur: the vapour over the liquid, and what the furnace and the converters of a sulfur plant rest on.

The vapour over liquid sulfur is the sum of S2 to S8, each in equilibrium with the liquid. Antoine's constants are read
from the package ``chemicals`` (Poling, Prausnitz & O'Connell, The Properties of Gases and Liquids, 5th ed. 2001; valid
528 to 768 K, from the measurements of West & Menzies 1929). Other figures are from memory of the source beside them.
The fit used both, so that agreement here proves the fit and the build; composition, H2S and H(S8) were not used.
"""

import csv
from math import exp, log, log10

import pytest

from gibbsmin.constants import ATMOSPHERE, STANDARD_PRESSURE, R
from gibbsmin.thermo.database import load
from gibbsmin.thermo.making.sources import janaf, package_file

SIZES = range(2, 9)


def over_liquid(T: float) -> dict[int, float]:
    """Partial pressures of S2 to S8 over liquid sulfur, [Pa]."""
    G = float(load().get("S(l)").gibbs_energy(T))
    return {k: STANDARD_PRESSURE * exp((k * G - float(load().get(f"S{k}").gibbs_energy(T))) / (R * T)) for k in SIZES}


def antoine() -> tuple[float, float, float, float, float]:
    path = package_file("chemicals", "Vapor Pressure", "Antoine Collection Poling.tsv")
    with path.open(encoding="utf-8", newline="") as file:
        row = next(row for row in csv.DictReader(file, delimiter="\t") if row["CAS"] == "7704-34-9")
    A, B, C, low, high = (float(value) for value in list(row.values())[2:7])
    return A, B, C, low, high


@pytest.mark.parametrize("T", [530.0, 570.0, 610.0, 650.0, 690.0, 720.0, 765.0])
def test_vapour_pressure_against_antoine(T: float) -> None:
    A, B, C, low, high = antoine()
    assert low < T < high
    assert sum(over_liquid(T).values()) == pytest.approx(10.0 ** (A - B / (T + C)), rel=0.03)


@pytest.mark.parametrize(
    ("T", "Pa", "within"),
    [
        # CRC Handbook, vapour pressure of the elements (from memory); sources are further apart the colder it is.
        (375.0, 1.0, 0.35),
        (408.0, 10.0, 0.15),
        (449.0, 100.0, 0.05),
        (508.0, 1000.0, 0.05),
        (591.0, 1.0e4, 0.04),
    ],
)
def test_vapour_pressure_cold(T: float, Pa: float, within: float) -> None:
    assert sum(over_liquid(T).values()) == pytest.approx(Pa, rel=within)


@pytest.mark.parametrize("celsius", [130.0, 150.0, 160.0, 170.0])
def test_condensers(celsius: float) -> None:
    # ln(p/Pa) = 89.273 - 13463/T - 8.9643 ln T: Shuai & Meisen, Oil & Gas J., 16 October 1995 (from memory).
    T = celsius + 273.15
    published = exp(89.273 - 13463.0 / T - 8.9643 * log(T))
    assert sum(over_liquid(T).values()) == pytest.approx(published, rel=0.08)


def test_boiling_point() -> None:
    # 717.8 K: fixed point of the old temperature scales, 444.6 degC (CRC Handbook).
    assert sum(over_liquid(717.0).values()) < ATMOSPHERE < sum(over_liquid(718.6).values())


def test_composition_at_the_boiling_point() -> None:
    # S8 leads, S6 and S7 are about a quarter each and S2 a few percent (Rau, Kutty & Guedes de Carvalho 1973, figure,
    # from memory): bounds wide enough for what the figure lets one read.
    p = over_liquid(717.8)
    share = {k: p[k] / sum(p.values()) for k in p}
    assert 0.35 < share[8] < 0.55
    assert 0.15 < share[7] < 0.32
    assert 0.18 < share[6] < 0.35
    assert 0.02 < share[2] < 0.07
    assert share[3] + share[4] + share[5] < 0.06


def test_enthalpy_of_the_ring() -> None:
    # Between the published values: 100.4 (NIST-JANAF), 101.25 (Mills 1974), 101.9 (Guthrie, Scott & Waddington 1954;
    # the last two from memory), kJ/mol. The entropy at 298.15 K is that of the vibrations, 430.3 in all three.
    ring = load().get("S8")
    assert 100.4e3 < ring.standard_enthalpy < 101.9e3
    assert ring.standard_entropy == pytest.approx(430.3, abs=0.1)


@pytest.mark.parametrize("T", [400.0, 500.0, 600.0, 700.0, 800.0, 1000.0])
def test_liquid_against_its_table(T: float) -> None:
    # NIST-JANAF S-004, counted from the liquid's own 1.854 kJ/mol; the table has West's heat capacities of 1959.
    row = next(row for row in janaf("S-004") if row.T == T)
    # H is kept from falling by 9 J/mol where the table begins, at 500 K: that moves G at 1000 K as much.
    assert load().get("S(l)").gibbs_energy(T) == pytest.approx(1854.0 + row.H - T * row.S, abs=20.0)


@pytest.mark.parametrize(
    ("celsius", "logK"),
    [
        # Twice the column log Kf of H2S in NIST-JANAF H-080 at 1000, 1200 and 1500 K, where S2 is the reference.
        (726.85, -2.0 * 2.141),
        (926.85, -2.0 * 1.355),
        (1226.85, -2.0 * 0.566),
    ],
)
def test_hydrogen_sulfide_dissociates(celsius: float, logK: float) -> None:
    T = celsius + 273.15
    G = {name: float(load().get(name).gibbs_energy(T)) for name in ("H2S", "H2", "S2")}
    found = -(2.0 * G["H2"] + G["S2"] - 2.0 * G["H2S"]) / (R * T * log(10.0))
    assert found == pytest.approx(logK, abs=0.02)


def test_less_than_a_thousandth_is_rings_at_the_furnace() -> None:
    # At 1478 K (1205 degC) and 0.17 bar of S2 the rings count for nothing, so that the fit cannot disturb it.
    T, p = 1478.0, 0.17
    G2 = float(load().get("S2").gibbs_energy(T))
    for k in (5, 6, 7, 8):
        G = float(load().get(f"S{k}").gibbs_energy(T))
        assert log10(exp((0.5 * k * G2 - G) / (R * T)) * p ** (0.5 * k)) < -3.0
