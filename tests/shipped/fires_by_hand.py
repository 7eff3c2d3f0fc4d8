"""Fires recomputed outside the project: analyses and heating values by hand, equilibria by Cantera.

Cantera (https://cantera.org) minimizes with the collection of NASA (McBride, Gordon & Reno 1993, TM-4513) that it
packages, taken at 1 bar as that report has it, with OH, HCN and N2O of today. Names of species are those of the cases.
What a flue gas is reported by is written down a second time in `flue_gas`, each formula with its source.
"""

from __future__ import annotations

from collections.abc import Mapping
from functools import cache
from importlib.resources import files
from math import log, log10

import cantera as ct
import numpy as np
import pytest
from chemicals.iapws import iapws95_Psat
from scipy.optimize import brentq
from shipped import janaf_tables

R = 8.314462618  # J/mol/K
NORMAL = R * 273.15 / 101325.0  # m3/mol
WEIGHT = {
    "H": 1.008, "C": 12.011, "N": 14.007, "O": 15.999, "S": 32.06, "Cl": 35.45, "Br": 79.904, "K": 39.0983,
    "Ar": 39.95, "Si": 28.085,
}  # fmt: skip
"""g/mol, IUPAC 2021 abridged."""

DRY_AIR = {"N2": 0.78087, "O2": 0.209476, "Ar": 0.00934, "CO2": 0.000314}
"""ISO 2533:1975, traces as N2."""

LEAN = ["CO2", "H2O", "N2", "O2", "Ar", "CO", "H2", "OH", "H", "O", "NO", "NO2", "N2O", "HO2", "H2O2"]
SULFUR = ["SO2", "SO3", "SO", "H2SO4"]
CHLORINE = ["HCl", "Cl", "Cl2", "HOCl", "ClO"]
RICH = ["CH4", "NH3", "HCN", "CH3", "H2S", "COS", "SH", "S", "S2", "CS2", "CS"]

FORMATION = {"C": -393.51e3, "H2O": -285.83e3, "S": -296.81e3, "Cl": -92.31e3, "Br": -36.29e3}
"""Of CO2, liquid water, SO2, HCl and HBr, [J/mol] (CODATA key values, Cox et al. 1989)."""

TODAY = {"OH": 37.50e3, "HCN": 129.29e3, "N2O": 82.57e3}
"""Enthalpies of formation by Active Thermochemical Tables, [J/mol]; the collection has 39.5, 135.1 and 82.05 kJ/mol."""

EVAPORATION = 2.4417e6  # J/kg of water at 25 degC, IAPWS-95


def _nasa(name: str) -> str:
    """Name in NASA's collection."""
    return name.replace("Cl", "CL")


@cache
def packaged() -> dict[str, ct.Species]:
    """Species of the collection, at 1 bar."""
    found = {}
    for one in ct.Species.list_from_file("nasa_gas.yaml"):
        if isinstance(one.thermo, ct.NasaPoly2):
            data, coefficients = one.thermo, one.thermo.coeffs
            if one.name in TODAY:
                coefficients[[6, 13]] += (TODAY[one.name] - data.h(298.15) / 1e3) / R
            one.thermo = ct.NasaPoly2(data.min_temp, data.max_temp, 1e5, coefficients)
        found[one.name] = one
    found["BrCL"] = ct.Species.from_yaml(_bromine_chloride())
    return found


def _bromine_chloride() -> str:
    """BrCl, which the collection lacks, by its Gibbs energies in JANAF."""
    rows = []
    for line in files("janaf").joinpath("data", "Br-005.txt").read_text().splitlines()[2:]:
        cells = line.split("\t")
        if len(cells) == 8 and float(cells[0]) >= 200.0:
            rows.append([float(cell) for cell in cells])
    formed = next(row[5] for row in rows if row[0] == 298.15)  # kJ/mol
    data = {row[0]: 1e3 * formed - row[0] * row[3] for row in rows}  # J/mol: column 3 is -[G - H(298)]/T
    points = ", ".join(f"{T}: {g} J/mol" for T, g in data.items())
    thermo = f"{{model: piecewise-Gibbs, reference-pressure: 1 bar, h0: {1e3 * formed} J/mol, data: {{{points}}}}}"
    return f"{{name: BrCL, composition: {{Br: 1, Cl: 1}}, thermo: {thermo}}}"


@cache
def solution(names: tuple[str, ...]) -> ct.Solution:
    return ct.Solution(thermo="ideal-gas", species=[packaged()[_nasa(name)] for name in names])


def enthalpy(name: str, T: float) -> float:
    """J/mol, elements at 298.15 K being zero."""
    return float(packaged()[_nasa(name)].thermo.h(T)) / 1e3


def entropy(name: str, T: float) -> float:
    """J/mol/K at 1 bar."""
    return float(packaged()[_nasa(name)].thermo.s(T)) / 1e3


def atoms(name: str) -> dict[str, float]:
    made_of: dict[str, float] = packaged()[_nasa(name)].composition
    return made_of


def elements(amounts: Mapping[str, float]) -> dict[str, float]:
    found: dict[str, float] = {}
    for name, n in amounts.items():
        for symbol, count in atoms(name).items():
            found[symbol] = found.get(symbol, 0.0) + count * n
    return found


def plus(*parts: Mapping[str, float]) -> dict[str, float]:
    found: dict[str, float] = {}
    for part in parts:
        for name, n in part.items():
            found[name] = found.get(name, 0.0) + n
    return found


def times(factor: float, amounts: Mapping[str, float]) -> dict[str, float]:
    return {name: factor * n for name, n in amounts.items()}


def molar_mass(name: str) -> float:
    """kg/mol."""
    return 1e-3 * sum(WEIGHT[symbol] * count for symbol, count in atoms(name).items())


def settle(given: Mapping[str, float], names: list[str], T: float, bar: float) -> dict[str, float]:
    """Amounts of a gas of so many atoms at equilibrium, mol.

    The atoms go in as stable species that hold them, so that the minimizer begins near.
    """
    gas = solution(tuple(names))
    left = dict(given)
    start: dict[str, float] = {}
    for name, symbol in (("SO2", "S"), ("HCl", "Cl"), ("HBr", "Br"), ("Ar", "Ar")):
        if left.get(symbol):
            start[name] = left[symbol]
            for other, count in atoms(name).items():
                left[other] -= count * start[name]
    start["N2"] = left.get("N", 0.0) / 2.0
    carbon, hydrogen, oxygen = (left[symbol] for symbol in "CHO")
    spare = oxygen - 2.0 * carbon - hydrogen / 2.0
    if spare >= 0.0:
        start |= {"CO2": carbon, "H2O": hydrogen / 2.0, "O2": spare / 2.0}
    else:  # oxygen goes to CO first, then to H2O, then to CO2; carbon that it leaves is CH4
        start["CO"] = min(carbon, oxygen)
        start["CH4"] = carbon - start["CO"]
        spare = oxygen - start["CO"]
        start["H2O"] = min(spare, hydrogen / 2.0 - 2.0 * start["CH4"])
        start["CO2"] = spare - start["H2O"]
        start["CO"] -= start["CO2"]
        start["H2"] = hydrogen / 2.0 - 2.0 * start["CH4"] - start["H2O"]
    start = {name: n for name, n in start.items() if n}
    held = elements(start)
    assert all(abs(held[symbol] - n) <= 1e-9 * n for symbol, n in given.items() if n)
    gas.TPX = T, bar * 1e5, {_nasa(name): n for name, n in start.items()}
    mass = sum(n * molar_mass(name) for name, n in start.items())
    for solver in ("element_potential", "vcs", "gibbs"):
        try:
            gas.equilibrate("TP", solver=solver, rtol=1e-11, max_steps=2000)
        except ct.CanteraError:
            continue
        total = mass / (gas.mean_molecular_weight / 1e3)
        return {name: total * float(gas[_nasa(name)].X[0]) for name in names}
    raise AssertionError(f"Cantera found no equilibrium at {T:g} K")


def heat_content(amounts: Mapping[str, float], T: float) -> float:
    """J."""
    return sum(n * enthalpy(name, T) for name, n in amounts.items() if n)


def of_quartz(mass: float, T: float) -> float:
    """Heat content of ash above 25 degC as that of quartz: JANAF, of high cristobalite from 1087 K on, [J]."""
    table = "O-037" if T < 1087.0 else "O-035"
    moles = mass / (60.083e-3)
    return moles * (janaf_tables.enthalpy(table, T) - janaf_tables.enthalpy("O-037", 298.15))


def flame(
    given: Mapping[str, float], names: list[str], bar: float, fed: float, ash: float = 0.0
) -> tuple[float, dict[str, float]]:
    """Temperature [K] and gas [mol] of atoms that settle with the heat content ``fed`` [J], with ash [kg] in them."""

    def off(T: float) -> float:
        return heat_content(settle(given, names, T, bar), T) + (of_quartz(ash, T) if ash else 0.0) - fed

    T = float(brentq(off, 700.0, 3300.0, xtol=1e-4))
    return T, settle(given, names, T, bar)


def fractions(amounts: Mapping[str, float]) -> dict[str, float]:
    total = sum(amounts.values())
    return {name: n / total for name, n in amounts.items()}


def dry(amounts: Mapping[str, float], *names: str) -> float:
    total = sum(n for name, n in amounts.items() if name != "H2O")
    return sum(amounts.get(name, 0.0) for name in names) / total


# ---- fuels


def of_analysis(percent: Mapping[str, float]) -> dict[str, float]:
    """Atoms of a kilogram, mol."""
    return {symbol: 10.0 * w / WEIGHT[symbol] for symbol, w in percent.items() if symbol in WEIGHT}


def channiwala_parikh(dry_percent: Mapping[str, float]) -> float:
    """Higher heating value, [J/kg dry] (Channiwala & Parikh 2002)."""
    factor = {"C": 0.3491, "H": 1.1783, "S": 0.1005, "O": -0.1034, "N": -0.0151, "ash": -0.0211}
    return 1e6 * sum(factor[part] * w for part, w in dry_percent.items() if part in factor)


def formation(matter: Mapping[str, float], higher: float) -> float:
    """Enthalpy of formation of matter that gives off ``higher`` when it burns to liquid water, [J]."""
    get = matter.get
    water = (get("H", 0.0) - get("Cl", 0.0) - get("Br", 0.0)) / 2.0
    total = higher + water * FORMATION["H2O"]
    return total + sum(get(symbol, 0.0) * FORMATION[symbol] for symbol in ("C", "S", "Cl", "Br"))


def oxygen_need(matter: Mapping[str, float]) -> float:
    """O2 to CO2, H2O, SO2, HCl and HBr, mol."""
    get = matter.get
    halogens = get("Cl", 0.0) + get("Br", 0.0)
    return get("C", 0.0) + (get("H", 0.0) - halogens) / 4.0 + get("S", 0.0) - get("O", 0.0) / 2.0


def air(oxygen: float, moisture: float) -> dict[str, float]:
    """Air with so much O2 [mol], of which ``moisture`` is the mole fraction of vapour."""
    amounts = times(oxygen / DRY_AIR["O2"], DRY_AIR)
    whole = sum(DRY_AIR.values())
    return {**amounts, "H2O": oxygen / DRY_AIR["O2"] * whole * moisture / (1.0 - moisture)}


# ---- what a flue gas is reported by


def water_dew_point(p_w: float) -> float:
    """K, by the vapour pressure of IAPWS-95."""
    return float(brentq(lambda T: iapws95_Psat(T) - p_w, 274.0, 600.0))


def verhoff_banchero(p_w: float, p_a: float) -> float:
    """K, in the form of Pierce (1977): atmospheres and decimal logarithms."""
    w, a = log10(p_w / 101325.0), log10(p_a / 101325.0)
    return 1e3 / (1.7842 + 0.0269 * w - 0.1029 * a + 0.0329 * w * a)


def okkes(p_w: float, p_a: float) -> float:
    """K (Okkes 1987)."""
    w, a = log10(p_w / 101325.0), log10(p_a / 101325.0)
    return 273.15 + 203.25 + 27.6 * w + 10.83 * a + 1.06 * (a + 8.0) ** 2.19


def zarenezhad(p_w: float, p_a: float) -> float:
    """K (ZareNezhad 2009, from memory)."""
    w, a = log(p_w / 133.322), log(p_a / 133.322)
    return 273.15 + 150.0 + 11.664 * a + 8.1328 * w - 0.383226 * w * a


def kiang(coefficients: tuple[float, float, float, float], p_w: float, p: float) -> float:
    """K (Kiang 1981, from memory)."""
    a, b, c, d = coefficients
    w, x = log(p_w / 133.322), log(p / 133.322)
    return 1e3 / (a + b * w + c * x + d * w * x)


KIANG = {"HCl": (3.7368, -0.1591, -0.0326, 0.00269), "HBr": (3.5639, -0.1350, -0.0398, 0.00235)}


def flue_gas(
    fuel: Mapping[str, float],
    unit: float,
    lower: float,
    higher: float,
    oxidant: Mapping[str, float],
    gas: Mapping[str, float],
    pascal: float,
    reference: float | None,
    sulfur_trioxide: float | None = None,
) -> dict[str, float]:
    """Key figures of a flue gas by hand, for so much fuel as has the atoms ``fuel``.

    Air of 20.95 % O2 in all formulas of the trade; ``unit`` is what volumes refer to, [kg] or [Nm3]; ``lower`` and
    ``higher`` are the heat of the fuel, [J]; ``gas`` is what leaves, [mol], at the pressure ``pascal``.
    """
    need = oxygen_need(fuel)
    get = fuel.get
    burnt = need * (1.0 / 0.2095 - 1.0) + get("C", 0.0) + get("S", 0.0) + get("N", 0.0) / 2.0
    burnt += get("Cl", 0.0) + get("Br", 0.0)
    o2, free = dry(gas, "O2"), oxidant["O2"]
    dry_oxidant = sum(n for name, n in oxidant.items() if name != "H2O")
    dry_gas = sum(n for name, n in gas.items() if name != "H2O")
    wet = fractions(gas)
    found = {
        "oxygen_dry": o2,
        "carbon_dioxide_dry": dry(gas, "CO2"),
        "water_wet": wet["H2O"],
        "air_ratio_fed": free / need,
        "carbon_dioxide_most": get("C", 0.0) / burnt,
        "oxidant_oxygen": free / dry_oxidant,
        "fuel_carbon_dioxide": get("C", 0.0) * 44.009e-3 / lower,
        "fuel_factor": burnt * NORMAL / higher,
        "air_needed": need / 0.2095 * NORMAL / unit,
        "oxidant_wet": sum(oxidant.values()) * NORMAL / unit,
        "flue_gas_wet": sum(gas.values()) * NORMAL / unit,
        "flue_gas_dry": dry_gas * NORMAL / unit,
    }
    if found["oxidant_oxygen"] < 0.21:
        found["air_ratio_by_oxygen"] = 1.0 + burnt * 0.2095 / need * o2 / (0.2095 - o2)
    counted = {
        "nox": (46.005, ("NO", "NO2")), "n2o": (44.013, ("N2O",)), "co": (28.010, ("CO",)),
        "sox": (64.058, ("SO2", "SO3", "H2SO4")), "so3": (80.057, ("SO3", "H2SO4")), "hcl": (36.458, ("HCl",)),
        "cl2": (70.90, ("Cl2",)), "hbr": (80.912, ("HBr",)),
    }  # fmt: skip
    for name, (mass, members) in counted.items():
        x = dry(gas, *members)
        found[f"{name}_dry"] = x
        found[f"{name}_per_energy"] = x * dry_gas * mass * 1e-3 / lower
        if reference is not None:
            factor = (20.95 - reference) / (20.95 - 100.0 * o2)
            found[f"{name}_at_reference_oxygen"] = x * mass * 1e-3 / NORMAL * factor
            if name in ("nox", "co"):
                found[f"{name}_volume_at_reference_oxygen"] = x * factor
        else:
            found[f"{name}_mass"] = x * mass * 1e-3 / NORMAL
    p_w = wet["H2O"] * pascal
    found["dew_point_water"] = water_dew_point(p_w)
    acid = wet.get("SO3", 0.0) + wet.get("H2SO4", 0.0)
    if sulfur_trioxide is not None:
        acid = sulfur_trioxide * (acid + wet["SO2"])
    if acid > 1e-8:
        for name, function in (("verhoff_banchero", verhoff_banchero), ("okkes", okkes), ("zarenezhad", zarenezhad)):
            found[f"dew_point_sulfuric_acid_{name}"] = function(p_w, acid * pascal)
    for name, coefficients in KIANG.items():
        if wet.get(name, 0.0) > 1e-7:
            found[f"dew_point_{name.lower()}"] = kiang(coefficients, p_w, wet[name] * pascal)
    return found


def agree(found: Mapping[str, float | None], expected: Mapping[str, float], rel: float, traces: float) -> None:
    """Every number that is there is what was expected, traces of the gas within ``traces``."""
    assert {"oxygen_dry", "flue_gas_wet", "nox_dry", "dew_point_water"} <= found.keys()
    for name, value in found.items():
        if value is None:
            continue  # this state has none
        trace = name.startswith(("nox", "no_", "n2o", "co_", "so3", "cl2", "hbr", "loss_unburnt"))
        assert value == pytest.approx(expected[name], rel=traces if trace else rel, abs=1e-12), name


def stack_loss(gas: Mapping[str, float], stack: float, reference: float) -> float:
    """Heat of a gas above the reference, all water as vapour, [J]."""
    return sum(n * (enthalpy(name, stack) - enthalpy(name, reference)) for name, n in gas.items())


def total_entropy(amounts: Mapping[str, float], T: float, bar: float) -> float:
    """J/K of a mixture of ideal gases."""
    total = sum(amounts.values())
    return sum(n * (entropy(name, T) - R * np.log(n / total * bar)) for name, n in amounts.items() if n > 0.0)
