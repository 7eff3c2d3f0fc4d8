"""Tests that catch errors in species data: one small function a test, run on the shipped file and on a user's.

Limits are those that the shipped data meet, given a little room; exceptions of the shipped data stand with their
reasons in ``data/exceptions.toml``, and hold for nothing else.
"""

from __future__ import annotations

import tomllib
from collections import defaultdict
from collections.abc import Callable, Iterable, Iterator, Sequence
from importlib.resources import files
from math import exp, log, pi, sqrt
from typing import Final, NamedTuple

import numpy as np

from gibbsmin.constants import AVOGADRO, BOLTZMANN, STANDARD_PRESSURE, STANDARD_TEMPERATURE, R
from gibbsmin.elements import parse_formula, split_name
from gibbsmin.errors import FormulaError
from gibbsmin.thermo.database import load
from gibbsmin.thermo.polynomial import enthalpy_RT, entropy_R
from gibbsmin.thermo.record import Piece, Species

PLANCK: Final = 6.62607015e-34  # J s, exact (SI 2019)

REACHES: Final = 300.0
"""A record that starts at this temperature [K] or below is held to its values at 298.15 K."""

GAS_SLACK: Final = 0.15
"""How far Cp°/R of a gas may dip below 5/2: fits of Ba, Cs, Mg2 and others do, by up to 0.14 above 1100 K."""

SOLID_CEILING: Final = 60.0
"""Largest Cp° of a condensed species, J/K per mole of atoms; lambda peaks are exceptions."""

INSIDE_G, INSIDE_H, JOIN_G = 1.0, 10.0, 5.0
"""Largest steps at a break [J/mol]: of G and H inside a form, and of G where two forms join."""

DEGENERACY: Final = (0.95, 30.0)
"""Effective number of electronic states of an atom in the gas; published ground terms have 1 to 25."""

ENTHALPY_CEILING, ION_CEILING = 1.0e6, 2.5e6
"""Largest magnitude of the enthalpy of formation, J per mole of atoms."""

ENTROPY_RANGE: Final = (5.0, 190.0)
"""Entropy at 298.15 K, J/K per mole of atoms."""

SAME_H, SAME_S = 100.0, 0.1
"""Two records of one composition this close in H [J/mol] and S [J/mol/K] at 298.15 K are one substance twice."""


class Finding(NamedTuple):
    """What a test found: species, test, a sentence, and the figure that it is about."""

    species: str
    test: str
    message: str
    figure: float


Found = Iterator[tuple[str, float]]


def atoms(species: Species) -> float:
    """Atoms in one formula unit; one for the electron."""
    return sum(species.elements.values()) or 1.0


def reaches_298(species: Species) -> bool:
    """Tell whether the record may be held to its values at 298.15 K."""
    low, high = species.temperature_range
    return low <= REACHES and high >= STANDARD_TEMPERATURE


def composition(species: Species) -> Found:
    """Elements and charge are those of the name."""
    try:
        elements, charge = parse_formula(split_name(species.name).formula)
    except FormulaError as error:
        yield f"the name cannot be read as a formula: {error}", 0.0
        return
    if dict(species.elements) != elements:
        yield f"the name says {elements}, the record {dict(species.elements)}", 0.0
    if species.charge != charge:
        yield f"the name says charge {charge:+d}, the record {species.charge:+d}", float(species.charge)


def third_law(species: Species) -> Found:
    """Entropy at 298.15 K is positive."""
    if reaches_298(species) and species.standard_entropy <= 0.0:
        yield f"S°(298.15 K) is {species.standard_entropy:.4g} J/mol/K, not positive", species.standard_entropy


def gap(species: Species) -> Found:
    """Pieces follow each other without gap or overlap."""
    for lower, upper in zip(species.pieces[:-1], species.pieces[1:], strict=True):
        if lower.high != upper.low:
            yield f"one piece ends at {lower.high:g} K and the next starts at {upper.low:g} K", upper.low - lower.high
    for piece in species.pieces:
        if not piece.low < piece.high:
            yield f"a piece runs from {piece.low:g} to {piece.high:g} K", piece.high - piece.low


def heat_capacity(species: Species) -> Found:
    """Cp is positive over the range; beyond it Cp stays as at the ends."""
    T, Cp = _profile(species)
    worst = int(np.argmin(Cp))
    if Cp[worst] <= 0.0:
        yield f"Cp° is {Cp[worst]:.4g} J/mol/K at {T[worst]:.0f} K, not positive", float(Cp[worst])


def gas_heat_capacity(species: Species) -> Found:
    """Cp of a gas is at least that of its translation, 5/2 R."""
    T, Cp = _profile(species)
    worst = int(np.argmin(Cp))
    if not species.condensed and 0.0 < Cp[worst] < (2.5 - GAS_SLACK) * R:
        yield f"Cp°/R is {Cp[worst] / R:.3g} at {T[worst]:.0f} K; a gas has 2.5 or more", float(Cp[worst] / R)


def condensed_heat_capacity(species: Species) -> Found:
    """Cp of a solid or liquid is of the size of Dulong and Petit's."""
    T, Cp = _profile(species)
    worst = int(np.argmax(Cp))
    each = float(Cp[worst] / atoms(species))
    if species.condensed and each > SOLID_CEILING:
        yield f"Cp° is {each:.3g} J/K per mole of atoms at {T[worst]:.0f} K; {SOLID_CEILING:g} is the usual limit", each


def breaks(species: Species) -> Found:
    """H and G are continuous where pieces of one form meet."""
    for T, form, other, H, G in _steps(species):
        if form == other and abs(G) > INSIDE_G:
            yield f"G° steps by {G:.3g} J/mol at {T:g} K", G
        if form == other and abs(H) > INSIDE_H:
            yield f"H° steps by {H:.3g} J/mol at {T:g} K", H


def joins(species: Species) -> Found:
    """Where two forms join G is continuous, and H rises."""
    for T, form, other, H, G in _steps(species):
        if form != other and abs(G) > JOIN_G:
            yield f"G° steps by {G:.3g} J/mol at {T:g} K, where {form or 'one form'} turns into {other}", G
        if form != other and H < -INSIDE_G:
            yield f"H° falls by {-H:.3g} J/mol at {T:g} K, where {form or 'one form'} turns into {other}", H


def degeneracy(species: Species) -> Found:
    """Entropy of a gas of atoms is that of translation and of a number of states that an atom can have."""
    if species.condensed or atoms(species) != 1.0 or not species.elements or not reaches_298(species):
        return
    states = exp((species.standard_entropy - translation_entropy(species.molar_mass)) / R)
    if not DEGENERACY[0] <= states <= DEGENERACY[1]:
        yield f"S°(298.15 K) implies {states:.3g} electronic states of the atom; 1 to 25 are known", states


def units(species: Species) -> Found:
    """Enthalpy and entropy have the size that chemistry allows: J are not taken for kJ, nor atm-era calories for J."""
    if not reaches_298(species) or not species.elements:
        return
    H, S = species.standard_enthalpy / atoms(species), species.standard_entropy / atoms(species)
    if abs(H) > (ION_CEILING if species.charge else ENTHALPY_CEILING):
        yield (
            f"the enthalpy of formation is {H:.4g} J per mole of atoms; was it given in J/mol where kJ/mol were "
            "written, or the other way round?",
            H,
        )
    if not ENTROPY_RANGE[0] <= S <= ENTROPY_RANGE[1]:
        yield (
            f"the entropy at 298.15 K is {S:.4g} J/K per mole of atoms, known are {ENTROPY_RANGE[0]:g} to "
            f"{ENTROPY_RANGE[1]:g}; is it in kJ/mol/K?",
            S,
        )


def source(species: Species) -> Found:
    """Demand a source."""
    if not species.source.strip():
        yield "no source is given", 0.0


EACH: Final[tuple[Callable[[Species], Found], ...]] = (
    composition,
    third_law,
    gap,
    heat_capacity,
    gas_heat_capacity,
    condensed_heat_capacity,
    breaks,
    joins,
    degeneracy,
    units,
    source,
)


def reference_state(species: Sequence[Species]) -> Iterator[Finding]:
    """No form of an element is more stable at 298.15 K than its reference state, whose enthalpy is zero."""
    shipped = load()
    references: dict[str, float] = {}
    candidates = [*species, *(shipped.get(name) for name in shipped.names)]
    pure = [one for one in candidates if len(one.elements) == 1 and not one.charge and reaches_298(one)]
    for one in pure:
        if abs(one.standard_enthalpy) < 5.0:
            (element,) = one.elements
            references[element] = min(references.get(element, np.inf), _gibbs_each(one))
    own = {one.name for one in species}
    for one in pure:
        (element,) = one.elements
        below = _gibbs_each(one) - references.get(element, np.inf)
        if one.name in own and below < -INSIDE_G and np.isfinite(below):
            text = f"G° at 298.15 K lies {-below:.4g} J per mole of atoms below the reference state of {element}"
            yield Finding(one.name, "reference_state", text, below)


def duplicates(species: Sequence[Species]) -> Iterator[Finding]:
    """No substance is there twice."""
    groups: dict[object, list[Species]] = defaultdict(list)
    for one in species:
        if reaches_298(one):
            groups[frozenset(one.elements.items()), one.charge, one.phase].append(one)
    for group in groups.values():
        for i, one in enumerate(group):
            for other in group[:i]:
                H = one.standard_enthalpy - other.standard_enthalpy
                if abs(H) < SAME_H and abs(one.standard_entropy - other.standard_entropy) < SAME_S:
                    text = f"has the same composition, enthalpy and entropy as {other.name}"
                    yield Finding(one.name, "duplicates", text, H)


def check(species: Iterable[Species]) -> list[Finding]:
    """Run all tests.

    Parameters
    ----------
    species : iterable of Species

    Returns
    -------
    list of Finding
        Empty if nothing is wrong.
    """
    listed = list(species)
    found = [
        Finding(one.name, test.__name__, message, figure)
        for one in listed
        for test in EACH
        for message, figure in test(one)
    ]
    return [*found, *reference_state(listed), *duplicates(listed)]


def exceptions() -> dict[tuple[str, str], str]:
    """Reasons, by species and test, for which the shipped data may fail a test."""
    text = files("gibbsmin.thermo").joinpath("data", "exceptions.toml").read_text("utf-8")
    entries = tomllib.loads(text)["exception"]
    return {(name, entry["test"]): entry["reason"] for entry in entries for name in entry["names"]}


def check_shipped() -> list[Finding]:
    """Run all tests on the shipped data; known exceptions do not count."""
    database, known = load(), exceptions()
    found = check(database.get(name) for name in database.names)
    return [finding for finding in found if (finding.species, finding.test) not in known]


def translation_entropy(molar_mass: float, T: float = STANDARD_TEMPERATURE) -> float:
    """Entropy of a gas of point masses at 1 bar, [J/mol/K], by Sackur and Tetrode.

    ``molar_mass`` [kg/mol], ``T`` [K].
    """
    wavelength = PLANCK / sqrt(2.0 * pi * molar_mass / AVOGADRO * BOLTZMANN * T)
    return R * (log(BOLTZMANN * T / STANDARD_PRESSURE / wavelength**3) + 2.5)


def _gibbs_each(species: Species) -> float:
    """G° at 298.15 K, J per mole of atoms."""
    return float(species.gibbs_energy(STANDARD_TEMPERATURE)) / atoms(species)


def _profile(species: Species) -> tuple[np.ndarray, np.ndarray]:
    """Temperatures [K] over the range and Cp° [J/mol/K] there, both sides of each break."""
    pairs = [(np.linspace(low, high, 41), a) for low, high, a, _ in species.pieces if low < high]
    T = np.concatenate([t for t, _ in pairs])
    Cp = [sum(c * t**power for c, power in zip(a[:7], range(-2, 5), strict=True)) for t, a in pairs]
    return T, species.gas_constant * np.concatenate(Cp)


def _steps(species: Species) -> Iterator[tuple[float, str, str, float, float]]:
    """Temperature [K], form below and above, and steps of H° and G° [J/mol] at each break."""
    scale = species.gas_constant

    def at(piece: Piece, T: float) -> tuple[float, float]:
        a = piece.coefficients
        H = scale * T * float(enthalpy_RT(a, T, log(T)))
        return H, H - scale * T * float(entropy_R(a, T, log(T)))

    for lower, upper in zip(species.pieces[:-1], species.pieces[1:], strict=True):
        T = upper.low
        below, above = at(lower, T), at(upper, T)
        yield T, lower.form, upper.form, above[0] - below[0], above[1] - below[1]
