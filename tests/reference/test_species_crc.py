"""Condensed species against the CRC Handbook's table of standard thermodynamic properties.

The table is read from the package ``chemicals``; CAS numbers stand here. It is a compilation of its own: the shipped
values come from TM-4513, NIST-JANAF and Burcat & Ruscic. Tolerances are the uncertainties shipped with the species,
and where the sources are known to lie further apart, the distance that the species' note or uncertainty admits.
"""

import pytest

from gibbsmin.thermo.database import load
from gibbsmin.thermo.making.sources import crc

CAS = dict(
    line.split()
    for line in """
    Al2O3(s) 1344-28-1
    CaO(s) 1305-78-8
    MgO(s) 1309-48-4
    Fe2O3(s) 1309-37-1
    Cu2O(s) 1317-39-1
    CuO(s) 1317-38-0
    ZrO2(s) 1314-23-4
    V2O5(s) 1314-62-1
    Nb2O5(s) 1313-96-8
    Ta2O5(s) 1314-61-0
    PbO(s) 1317-36-8
    SiO2(s) 14808-60-7
    B2O3(s) 1303-86-2
    BaO(s) 1304-28-5
    SrO(s) 1314-11-0
    BeO(s) 1304-56-9
    Na2O(s) 1313-59-3
    Li2O(s) 12057-24-8
    NaCl(s) 7647-14-5
    KCl(s) 7447-40-7
    MgCl2(s) 7786-30-3
    PbCl2(s) 7758-95-4
    CsCl(s) 7647-17-8
    LiF(s) 7789-24-4
    NaF(s) 7681-49-4
    MgF2(s) 7783-40-6
    FeCl2(s) 7758-94-3
    FeCl3(s) 7705-08-0
    AlCl3(s) 7446-70-0
    TiCl4(l) 7550-45-0
    NaOH(s) 1310-73-2
    KOH(s) 1310-58-3
    Ca(OH)2(s) 1305-62-0
    Mg(OH)2(s) 1309-42-8
    CaCO3(s) 471-34-1
    K2CO3(s) 584-08-7
    Na2SO4(s) 7757-82-6
    K2SO4(s) 7778-80-5
    CaSO4(s) 7778-18-9
    MgSO4(s) 7487-88-9
    FeS(s) 1317-37-9
    PbS(s) 1314-87-0
    AlN(s) 24304-00-5
    BN(s) 10043-11-5
    HgO(s) 21908-53-2
    WO3(s) 1314-35-8
    MoO3(s) 1313-27-5
    MoO2(s) 18868-43-4
    CoO(s) 1307-96-6
    NiCl2(s) 7718-54-9
    CuCl(s) 7758-89-6
    MnO(s) 1344-43-0
    MnS(s) 18820-29-6
    Hg2Cl2(s) 10112-91-1
    Li2CO3(s) 554-13-2
    H3PO4(s) 7664-38-2
    KBr(s) 7758-02-3
    NaH(s) 7646-69-7
    """.strip().splitlines()
)

ELEMENTS = {
    "Ba(s)": "7440-39-3",
    "Ca(s)": "7440-70-2",
    "Co(s)": "7440-48-4",
    "Cu(s)": "7440-50-8",
    "Fe(s)": "7439-89-6",
    "Mn(s)": "7439-96-5",
    "Ni(s)": "7440-02-0",
    "Ti(s)": "7440-32-6",
    "W(s)": "7440-33-7",
    "Zn(s)": "7440-66-6",
}


@pytest.mark.parametrize("name", sorted(CAS))
def test_standard_values(name: str) -> None:
    species, row = load().get(name), crc()[CAS[name]]
    suffix = "l" if species.phase == "liquid" else "s"
    assert species.standard_enthalpy == pytest.approx(row[f"Hf{suffix}"], abs=max(4000.0, species.enthalpy_uncertainty))
    if f"S0{suffix}" in row:
        assert species.standard_entropy == pytest.approx(row[f"S0{suffix}"], abs=2.5)


@pytest.mark.parametrize("name", sorted(ELEMENTS))
def test_elements(name: str) -> None:
    species, row = load().get(name), crc()[ELEMENTS[name]]
    assert species.standard_enthalpy == pytest.approx(0.0, abs=1.0)
    assert species.standard_entropy == pytest.approx(row["S0s"], abs=0.1)
    assert species.heat_capacity(298.15) == pytest.approx(row["Cps"], abs=0.15)


@pytest.mark.parametrize(
    ("name", "H", "S"),
    [
        # kJ/mol and J/mol/K, CRC Handbook, 97th ed., table 5-3 (from memory): the figures of the additions.
        ("ZnO(s)", -350.5, 43.7),
        ("NiO(s)", -239.7, 38.0),
        ("Fe3C(s)", 25.1, 104.6),
        ("BaSO4(s)", -1473.2, 132.2),
        ("NaHCO3(s)", -950.8, 101.7),
        ("NH4NO3(s)", -365.6, 151.1),
    ],
)
def test_additions(name: str, H: float, S: float) -> None:
    species = load().get(name)
    assert species.standard_enthalpy / 1e3 == pytest.approx(H, abs=0.05)
    assert species.standard_entropy == pytest.approx(S, abs=0.1)
