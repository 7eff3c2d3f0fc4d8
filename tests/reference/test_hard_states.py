"""States at held T and P on which a general library is publicly reported to fail, and others of our own making.

Numbers are those of issues in Cantera's public tracker (https://github.com/Cantera/cantera/issues); systems and
states are those of the reports. Every state must be certified, and the certificate is worked out again in plain numpy
(`proof`). Those of #60, #154 and #268 are at held enthalpy.
"""

import itertools

import cantera as ct
import numpy as np
import pytest
from proof import Proof, prove

from gibbsmin.constants import ATMOSPHERE, R
from gibbsmin.interop import system_from_cantera
from gibbsmin.states.batch import Batch
from gibbsmin.states.solve import equilibria, equilibrium
from gibbsmin.states.state import State
from gibbsmin.states.system import System
from gibbsmin.thermo.database import load
from gibbsmin.thermo.record import Piece, Species


def proof_of(state: State, feed: dict[str, float]) -> Proof:
    """Judge a state for the feed it was found for."""
    system = state.system
    b, n, lam = system.feed(feed), state.amounts_array, state.element_potentials_array
    return prove(system, state.temperature, state.pressure, b, n, lam)


def prove_some(batch: Batch, b: np.ndarray, every: int) -> None:
    """Judge every so many states of a batch."""
    for i in range(0, len(batch), every):
        state = (batch.temperature[i], batch.pressure[i], b[i], batch.amounts[i], batch.element_potentials[i])
        assert prove(batch.system, *state).holds, (state[:2], b[i])


# ------------------------------------------------------------------------------------------- public reports


@pytest.mark.parametrize("M", [100, 200])
@pytest.mark.parametrize("T", [400.0, 600.0, 923.0])
@pytest.mark.parametrize("graphite", [False, True], ids=["gas", "gas and graphite"])
def test_composition_triangle(M: int, T: float, graphite: bool) -> None:
    """#265, #266: C n, H M-m, O m-n mol for all 0 <= n < m < M, 4,950 and 19,900 states in one call."""
    phases = [ct.Solution("gri30.yaml")] + [ct.Solution("graphite.yaml")] * graphite
    system = system_from_cantera(phases)
    n, m = np.array([(n, m) for m in range(M) for n in range(m)], float).T
    assert n.size == {100: 4950, 200: 19900}[M]
    b = np.zeros((n.size, len(system.elements)))
    for symbol, amount in (("C", n), ("H", M - m), ("O", m - n)):
        b[:, system.elements.index(symbol)] = amount
    batch = equilibria(system, element_amounts=b, temperature=T, pressure=ATMOSPHERE)
    assert batch.certified.all(), b[~batch.certified][:3]
    assert batch.element_residual.max() <= 1.0e-10
    prove_some(batch, b, 97)


@pytest.mark.parametrize("feed", [{"H2O": 2.0, "N2": 0.7}, {"H2": 2.0, "O2": 1.0, "N2": 0.7}], ids=["burnt", "unburnt"])
def test_fewer_major_species_than_elements(feed: dict[str, float]) -> None:
    """#2125, #2164: at 550 K steam and nitrogen are all there is, so that two potentials are all but undetermined."""
    system = system_from_cantera(ct.Solution("h2o2.yaml"))
    state = equilibrium(system, feed, temperature=550.0, pressure=2.0 * ATMOSPHERE)
    assert proof_of(state, feed).holds
    assert state.amounts["H2O"] == pytest.approx(2.0, rel=1.0e-12)
    assert state.amounts["N2"] == pytest.approx(0.7, rel=1.0e-12)
    # By hand: H2O = H2 + 1/2 O2 is the only source of either, so x_H2 = 2 x_O2 with K of the data.
    x, T = state.mole_fractions, 550.0
    G = {name: system.records[system.index[name]].gibbs_energy(T) for name in ("H2O", "H2", "O2")}
    K = np.exp(-(G["H2"] + 0.5 * G["O2"] - G["H2O"]) / (R * T))
    x_O2 = (K * x["H2O"] / 2.0 / np.sqrt(2.0 * ATMOSPHERE / 1.0e5)) ** (2.0 / 3.0)
    assert x["O2"] == pytest.approx(x_O2, rel=1.0e-6)
    assert x["H2"] == pytest.approx(2.0 * x_O2, rel=1.0e-6)


def test_one_major_species_for_two_elements() -> None:
    """#130: pure CO2 at 300 K among all gases of carbon and oxygen."""
    system = System.from_elements("C O", condensed=False)
    state = equilibrium(system, {"CO2": 1.0}, temperature=300.0, pressure=1.0e5)
    assert proof_of(state, {"CO2": 1.0}).holds
    assert state.amounts["CO2"] == pytest.approx(1.0, rel=1.0e-12)
    assert state.amounts["CO"] == pytest.approx(2.0 * state.amounts["O2"], rel=1.0e-9)


def test_linearly_dependent_elements() -> None:
    """#245: C2H5 and isobutane, two gases with the same ratio of carbon to hydrogen, half and half."""
    system = System.from_species(["C2H5", "C4H10:isobutane"])
    feed = {"C2H5": 0.5, "C4H10:isobutane": 0.5}
    state = equilibrium(system, feed, temperature=300.0, pressure=101325.0)
    assert proof_of(state, feed).holds
    assert state.amounts["C4H10:isobutane"] == pytest.approx(0.75, rel=1.0e-12)
    ethyl, butane = system.records
    K = np.exp(-(2.0 * ethyl.gibbs_energy(300.0) - butane.gibbs_energy(300.0)) / (R * 300.0))
    assert state.mole_fractions["C2H5"] == pytest.approx(np.sqrt(K / 1.01325), rel=1.0e-9)


def test_free_atoms_settle_like_the_molecules() -> None:
    """#60: 1 C, 4 H, 4 O against CH4 + 2 O2 at 300 K and 1 atm, and with the enthalpy of that state held."""
    system = system_from_cantera(ct.Solution("gri30.yaml"))
    atoms = equilibrium(system, {"C": 1.0, "H": 4.0, "O": 4.0}, temperature=300.0, pressure=ATMOSPHERE)
    molecules = equilibrium(system, {"CH4": 1.0, "O2": 2.0}, temperature=300.0, pressure=ATMOSPHERE)
    assert proof_of(atoms, {"C": 1.0, "H": 4.0, "O": 4.0}).holds
    assert atoms.amounts_array == pytest.approx(molecules.amounts_array, rel=1.0e-9, abs=1.0e-300)
    assert atoms.amounts["H2O"] == pytest.approx(2.0, rel=1.0e-12)
    found = equilibrium(system, {"C": 1.0, "H": 4.0, "O": 4.0}, enthalpy=molecules.enthalpy, pressure=ATMOSPHERE)
    assert proof_of(found, {"C": 1.0, "H": 4.0, "O": 4.0}).holds
    assert found.temperature == pytest.approx(300.0, rel=1.0e-9)
    assert found.amounts[["CO2", "H2O"]].to_numpy() == pytest.approx([1.0, 2.0], rel=1.0e-12)


def enthalpy_of(records: tuple[Species, ...], n: np.ndarray, T: float) -> float:
    """Enthalpy of amounts as they are, unreacted, [J]."""
    return float(sum(amount * record.enthalpy(T) for amount, record in zip(n, records, strict=True) if amount))


def temperature_by_bisection(system: System, feed: dict[str, float], H: float, P: float) -> float:
    """Temperature [K] whose state at held T and P has the enthalpy ``H``; another way to the same answer."""
    low, high = 280.0, 4000.0
    while high - low > 1.0e-9 * low:
        middle = 0.5 * (low + high)
        enough = equilibrium(system, feed, temperature=middle, pressure=P).enthalpy > H
        low, high = (low, middle) if enough else (middle, high)
    return 0.5 * (low + high)


@pytest.mark.parametrize("data", ["gri30", "shipped"])
def test_rich_flame(data: str) -> None:
    """#154: ethylene at 4.3 times what its air burns, from 299.999 K and 100,002 Pa."""
    if data == "gri30":
        system = system_from_cantera(ct.Solution("gri30.yaml"))
    else:
        system = System.from_elements("C H O N", condensed=False)
    feed = {"C2H4": 0.225861 / 0.028054, "N2": 0.594407 / 0.028014, "O2": 0.179732 / 0.031998}  # of 1 kg, mol
    n = np.array([feed.get(name, 0.0) for name in system.species])
    H, P = enthalpy_of(system.records, n, 299.999), 100002.0
    state = equilibrium(system, feed, enthalpy=H, pressure=P)
    assert proof_of(state, feed).holds
    assert enthalpy_of(system.records, state.amounts_array, state.temperature) == pytest.approx(H, rel=1.0e-9)
    assert state.temperature == pytest.approx(temperature_by_bisection(system, feed, H, P), rel=1.0e-8)


def test_flame_over_water() -> None:
    """#268: from 300 K and 1 atm, 1 mol of methane, oxygen and nitrogen over 2 mol of liquid water, held enthalpy."""
    system = System.from_species([*system_from_cantera(ct.Solution("gri30.yaml")).records, load().get("H2O(l)")])
    feed = {"O2": 1.0 / 5.26, "N2": 3.76 / 5.26, "CH4": 0.5 / 5.26, "H2O(l)": 2.0}
    n = np.array([feed.get(name, 0.0) for name in system.species])
    H = enthalpy_of(system.records, n, 300.0)
    state = equilibrium(system, feed, enthalpy=H, pressure=ATMOSPHERE)
    assert proof_of(state, feed).holds
    assert enthalpy_of(system.records, state.amounts_array, state.temperature) == pytest.approx(H, rel=1.0e-9)
    # the fuel burns completely, and its heat boils a part of the water away, whose vapour pressure sets T
    assert state.amounts["CO2"] == pytest.approx(0.5 / 5.26, rel=1.0e-6)
    assert 0.1 < state.amounts["H2O(l)"] < 2.0
    assert 330.0 < state.temperature < 373.0
    assert state.temperature == pytest.approx(temperature_by_bisection(system, feed, H, ATMOSPHERE), rel=1.0e-8)


# ------------------------------------------------------------------------------------------- of our own making

FUELS = """
    H2 CO CH4 C2H6 C3H8 C4H10:n-butane C4H10:isobutane C2H4 C3H6:propene C2H2:acetylene C6H6:benzene C7H8:toluene
    C8H18:n-octane CH3OH C2H5OH CH3OCH3 CH2O NH3 N2H4 HCN C2N2 C
"""
OXIDANTS = ["O2", "O3", "N2O", "NO", "NO2", "N2O4", "H2O2", "HNO3", "air"]


def oxygen_wanted(elements: dict[str, float]) -> float:
    """Atoms of oxygen that burn a molecule to CO2, H2O and N2; negative for an oxidant."""
    return 2.0 * elements.get("C", 0.0) + 0.5 * elements.get("H", 0.0) - elements.get("O", 0.0)


@pytest.mark.parametrize("condensed", [False, True], ids=["gas only", "with condensed"])
def test_stoichiometric_at_300_K(condensed: bool) -> None:
    """Every pair of fuel and oxidant, exactly stoichiometric: nothing but CO2, H2O and N2 is left, to 1e-12."""
    system = System.from_elements("C H O N", condensed=condensed)
    for fuel, oxidant in itertools.product(FUELS.split(), OXIDANTS):
        molecule = "O2" if oxidant == "air" else oxidant
        parts = oxygen_wanted(load().get(fuel).elements) / -oxygen_wanted(load().get(molecule).elements)
        feed = {fuel: 1.0, molecule: parts} | ({"N2": 3.76 * parts} if oxidant == "air" else {})
        state = equilibrium(system, feed, temperature=300.0, pressure=1.0e5)
        assert proof_of(state, feed).holds, (fuel, oxidant)
        b = dict(zip(system.elements, system.feed(feed), strict=True))
        n = state.amounts
        water = n["H2O"] + (n["H2O(l)"] if condensed else 0.0)
        assert n["CO2"] == pytest.approx(b["C"], rel=1.0e-12), (fuel, oxidant)
        assert water == pytest.approx(b["H"] / 2.0, rel=1.0e-12), (fuel, oxidant)
        assert n["N2"] == pytest.approx(b["N"] / 2.0, rel=1.0e-12), (fuel, oxidant)


ELEMENTS = "Al Ar B Ba Be Br C Ca Cl Co Cr Cu F Fe H He Hg I K Li Mg Mn N Na Ne Ni O P Pb S Si Sr Ti V W Zn Zr"


@pytest.mark.parametrize("element", ELEMENTS.split(" "))
def test_one_pure_element(element: str) -> None:
    system = System.from_elements([element])
    T = np.linspace(200.0, 6000.0, 117)
    for P in (1.0e1, 1.0e5, 1.0e9):
        batch = equilibria(system, element_amounts=[1.0], temperature=T, pressure=P)
        assert batch.certified.all(), (P, T[~batch.certified])
        assert batch.amounts @ system.element_matrix[0] == pytest.approx(1.0, rel=1.0e-12)


TWELVE = ["C", "H", "O", "N", "S", "Cl", "Na", "K", "Ca", "Si", "Al", "Fe"]


@pytest.mark.parametrize("rare", TWELVE)
def test_one_element_at_1e_minus_14(rare: str) -> None:
    """Rare in a hot gas (everything evaporates at 5500 K and 1e-2 bar) and in a cold one over solids."""
    system = System.from_elements(TWELVE)
    b = np.ones(len(system.elements))
    b[system.elements.index("O")] = 12.0
    b[system.elements.index(rare)] = 1.0e-14
    T, P = np.array([5500.0, 1500.0, 700.0, 300.0]), np.array([1.0e3, 1.0e5, 1.0e5, 1.0e5])
    batch = equilibria(system, element_amounts=b, temperature=T, pressure=P)
    assert batch.certified.all(), T[~batch.certified]
    assert not batch.amounts[0, ~system.gas].any()
    prove_some(batch, np.broadcast_to(b, (4, b.size)), 1)
    held = batch.amounts @ system.element_matrix.T
    assert held[:, system.elements.index(rare)] == pytest.approx(1.0e-14, rel=1.0e-10)


METALS = ["Al", "Ca", "Cr", "Cu", "Fe", "Mg", "Mn", "Ni", "Si", "Ti", "W", "Zr"]


@pytest.mark.parametrize("oxides", [False, True])
def test_twelve_elements_with_only_solids(oxides: bool) -> None:
    """Metals and silicides; then with oxygen enough for some of the oxides only, and no gas to take the rest."""
    system = System.from_elements(METALS + ["O"] * oxides)
    system = System.from_species([record for record in system.records if record.phase == "solid"])
    assert len(system.elements) == 12 + oxides
    assert not system.gas.any()
    rng = np.random.default_rng(12)
    b = 10.0 ** rng.uniform(-14.0, 0.0, (300, len(system.elements)))
    if oxides:
        metals = [symbol != "O" for symbol in system.elements]
        b[:, system.elements.index("O")] = 0.5 * b[:, metals].sum(axis=1)
    batch = equilibria(system, element_amounts=b, temperature=rng.uniform(300.0, 800.0, 300), pressure=1.0e5)
    assert batch.certified.all()
    assert batch.volume.max() == 0.0
    prove_some(batch, b, 17)


def melting_point(solid: Species, liquid: Species) -> float:
    """Temperature at which the two have the same G, to the last bit."""
    low, high = solid.temperature_range[1] - 20.0, solid.temperature_range[1] + 20.0
    while True:
        middle = 0.5 * (low + high)
        if middle in (low, high):
            return middle
        low, high = (low, middle) if liquid.gibbs_energy(middle) < solid.gibbs_energy(middle) else (middle, high)


@pytest.mark.parametrize("name", ["H2O", "Na", "Al", "NaCl", "Cu", "Fe", "Pb", "LiF"])
def test_on_a_melting_point(name: str) -> None:
    """At the last bit on either side, at the printed end of the solid's data, and at its neighbours."""
    solid, liquid = load().get(f"{name}(s)"), load().get(f"{name}(l)")
    system = System.from_elements(list(solid.elements))
    T = melting_point(solid, liquid)
    end = solid.temperature_range[1]
    near = [
        *(np.nextafter(T, T + s) for s in (-1.0, 0.0, 1.0)),
        *(np.nextafter(end, end + s) for s in (-1.0, 0.0, 1.0)),
    ]
    for temperature in [*near, T - 1.0e-9, T + 1.0e-9]:
        state = equilibrium(system, {solid.name: 1.0}, temperature=float(temperature), pressure=1.0e5)
        assert proof_of(state, {solid.name: 1.0}).holds
        assert state.amounts[[solid.name, liquid.name]].sum() == pytest.approx(1.0, abs=1.0e-3)  # the rest is vapour
    below, above = (equilibrium(system, {solid.name: 1.0}, temperature=T + d, pressure=1.0e5) for d in (-0.01, 0.01))
    assert below.amounts[liquid.name] == 0.0
    assert above.amounts[solid.name] == 0.0


def crystal(form: str, H: float, S: float) -> Species:
    """Make a solid SiO2 with Cp° = 0, H° and S° in units of R; twins cross where H° - T S° are equal."""
    coefficients = (*[0.0] * 7, H, S)
    pieces = (Piece(200.0, 3000.0, coefficients),)
    return Species(f"SiO2(s):{form}", "SiO2", "solid", form, {"Si": 1.0, "O": 2.0}, 0, pieces, (200.0, 3000.0))


@pytest.mark.parametrize("gas", [False, True], ids=["solids only", "under oxygen"])
def test_two_solids_of_one_composition_cross(gas: bool) -> None:
    """Equal to the last bit at 1000 K, where H° and S° are whole numbers: any mixture is an optimum."""
    twins = [crystal("one", -110000.0, 1.0), crystal("two", -109000.0, 2.0)]
    system = System.from_species([*twins, *(["O2", "Si", "SiO"] if gas else [])])
    feed = {twins[0].name: 1.0} | ({"O2": 0.25} if gas else {})
    for T in (999.0, np.nextafter(1000.0, 0.0), 1000.0, np.nextafter(1000.0, 2000.0), 1001.0):
        state = equilibrium(system, feed, temperature=float(T), pressure=1.0e5)
        assert proof_of(state, feed).holds
        assert state.amounts[[twin.name for twin in twins]].sum() == pytest.approx(1.0, rel=1.0e-9)
        if T == 999.0:
            assert state.amounts[twins[1].name] == 0.0
        if T == 1001.0:
            assert state.amounts[twins[0].name] == 0.0


@pytest.mark.parametrize("tiny", [1.0e-8, 1.0e-10, 1.0e-12, 1.0e-13])
def test_gas_of_next_to_nothing(tiny: float) -> None:
    """A trace of nitrogen over a mole of water: the gas is that trace, wetted to saturation."""
    system = System.from_species(["H2O", "H2O(l)", "N2"])
    feed = {"H2O(l)": 1.0, "N2": tiny}
    state = equilibrium(system, feed, temperature=320.0, pressure=1.0e5)
    assert proof_of(state, feed).holds
    vapour, liquid = load().get("H2O"), load().get("H2O(l)")
    p = np.exp((liquid.gibbs_energy(320.0) - vapour.gibbs_energy(320.0)) / (R * 320.0))  # bar
    assert state.phase_amounts["gas"] == pytest.approx(tiny / (1.0 - p), rel=1.0e-9)


def test_pressure_at_which_the_last_1e_minus_12_mol_of_gas_goes() -> None:
    """Limestone in a trace of nitrogen: near the decomposition pressure the gas is a trace of each; then it goes."""
    system = System.from_species(["CaCO3(s):calcite", "CaO(s)", "CO2"])
    T = 1100.0
    carbonate, lime, dioxide = system.records
    drop = dioxide.gibbs_energy(T) + lime.gibbs_energy(T) - carbonate.gibbs_energy(T)
    P = 1.0e5 * np.exp(-drop / (R * T))
    feed = {"CaCO3(s):calcite": 1.0 - 1.0e-12, "CaO(s)": 1.0, "CO2": 1.0e-12}
    for factor, gas in ((1.0 - 1.0e-9, 1.0), (1.0 + 1.0e-9, 0.0)):
        state = equilibrium(system, feed, temperature=T, pressure=P * factor)
        assert proof_of(state, feed).holds
        assert state.phase_amounts["gas"] == pytest.approx(gas, abs=1.0e-12)


@pytest.mark.parametrize("scale", [1.0e-20, 1.0e20])
def test_equal_feeds_at_extreme_scales(scale: float) -> None:
    system = System.from_elements("C H O N S Cl Na Ca Si")
    rng = np.random.default_rng(5)
    b = 10.0 ** rng.uniform(-6.0, 0.0, (60, len(system.elements)))
    T, P = rng.uniform(300.0, 4000.0, 60), 10.0 ** rng.uniform(2.0, 8.0, 60)
    plain = equilibria(system, element_amounts=b, temperature=T, pressure=P)
    scaled = equilibria(system, element_amounts=b * scale, temperature=T, pressure=P)
    assert plain.certified.all()
    assert scaled.certified.all()
    here = plain.amounts > 1.0e-25
    assert scaled.amounts[here] / scale == pytest.approx(plain.amounts[here], rel=1.0e-8)
    prove_some(scaled, b * scale, 7)
