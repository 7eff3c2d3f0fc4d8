"""The shipped data as a whole: what must hold for every species, whatever its figures."""

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from gibbsmin.constants import R
from gibbsmin.thermo.checkup import check_shipped, exceptions
from gibbsmin.thermo.database import load
from gibbsmin.thermo.record import Species

ALL = [load().get(name) for name in load().names]
JOINED = [species for species in ALL if len({piece.form for piece in species.pieces}) > 1]


def test_shipped_data_pass_the_checkup() -> None:
    assert check_shipped() == []


def test_every_exception_is_needed_and_has_a_reason() -> None:
    from gibbsmin.thermo.checkup import check

    found = {(finding.species, finding.test) for finding in check(ALL)}
    assert found == set(exceptions())
    assert all(len(reason) > 20 for reason in exceptions().values())


def test_every_species_has_its_papers() -> None:
    for species in ALL:
        assert species.source
        assert species.uncertainty_source
        assert species.enthalpy_uncertainty >= 0.0
        assert species.entropy_uncertainty > 0.0
        assert species.reference_pressure == 1.0e5
        assert species.gas_constant == 8.31451


def test_only_reference_states_and_electrons_are_exact() -> None:
    for species in ALL:
        if species.enthalpy_uncertainty == 0.0:
            assert len(species.elements) <= 1
            assert species.standard_enthalpy == pytest.approx(0.0, abs=5.0)


def test_each_element_has_a_reference_state() -> None:
    elements = {element for species in ALL for element in species.elements}
    references = {next(iter(s.elements)) for s in ALL if s.uncertainty_source == "reference state" and s.elements}
    # Mercury's neighbours and others come with compounds only; germanium and gallium are not in the data at all.
    assert elements - references == set()


def test_usable_ranges() -> None:
    for species in ALL:
        low, high = species.usable
        first, last = species.temperature_range
        assert low <= first
        assert high >= last
        if not species.condensed:
            assert species.usable == (150.0, 20000.0)
        else:
            assert low >= 150.0 or low == first
            assert high <= last + 300.0 + 1e-6


def test_ranges_that_were_run_on_without_evidence_are_cut() -> None:
    for name, T in {"Fe3O4(s)": 1870, "CaSO4(s)": 1735, "Pb3O4(s)": 1100, "Na2O2(s)": 950, "TiCl3(s)": 1000}.items():
        assert load().get(name).temperature_range[1] == T


@pytest.mark.parametrize("species", JOINED, ids=lambda species: species.name)
def test_joined_solids(species: Species) -> None:
    scale = species.gas_constant
    for lower, upper in zip(species.pieces[:-1], species.pieces[1:], strict=True):
        T = upper.low
        below = _single(species, lower)
        above = _single(species, upper)
        if lower.form != upper.form:
            assert below.gibbs_energy(T) == pytest.approx(above.gibbs_energy(T), abs=5e-3)
            assert above.enthalpy(T) - below.enthalpy(T) > -1.0
        else:
            assert below.gibbs_energy(T) == pytest.approx(above.gibbs_energy(T), abs=1.0)
    assert scale == 8.31451


def _single(species: Species, piece: object) -> Species:
    from dataclasses import replace

    return replace(species, pieces=(piece,))


def test_a_form_is_the_stable_one_on_its_own_side() -> None:
    for species in JOINED:
        for lower, upper in zip(species.pieces[:-1], species.pieces[1:], strict=True):
            if lower.form != upper.form:
                T = upper.low
                # G of the upper form falls faster: dG = -dS dT with dS >= 0 (a few transitions are second order).
                assert _single(species, upper).entropy(T) - _single(species, lower).entropy(T) > -0.01


def test_electrons_are_thermal() -> None:
    electron = load().get("e-")
    assert electron.heat_capacity([300.0, 3000.0]) == pytest.approx([2.5 * 8.31451] * 2)
    # Entropy of the electron gas at 298.15 K and 1 bar: Sackur-Tetrode with two spin states.
    from gibbsmin.elements import ELECTRON_MASS
    from gibbsmin.thermo.checkup import translation_entropy

    assert electron.standard_entropy == pytest.approx(translation_entropy(ELECTRON_MASS) + R * math.log(2.0), abs=0.01)


@pytest.mark.parametrize("name", ["He", "Ar", "Xe", "Hg", "Cu+", "Zn", "Mg", "H+"])
def test_atoms_without_degeneracy_have_the_entropy_of_translation(name: str) -> None:
    from gibbsmin.thermo.checkup import translation_entropy

    species = load().get(name)
    assert species.standard_entropy == pytest.approx(translation_entropy(species.molar_mass), abs=0.02)


def test_entropy_is_at_one_bar() -> None:
    # H2 at 298.15 K: 130.680 J/mol/K at 1 bar (CODATA), 130.571 at 1 atm.
    assert load().get("H2").standard_entropy == pytest.approx(130.680, abs=0.003)


def test_unbound_ions_are_not_there() -> None:
    assert not any(name in load() for name in ("N-", "N2-", "H2-", "Zn-"))
    assert load().get("Zn+").charge == 1


@given(st.sampled_from(ALL), st.floats(1e-7, 1e-4))
@settings(max_examples=300, deadline=None)
def test_functions_go_on_beyond_the_range(species: Species, step: float) -> None:
    for T in species.temperature_range:
        near, far = T * (1.0 - step), T * (1.0 + step)
        Cp = float(species.heat_capacity(T))
        assert abs(species.enthalpy(far) - species.enthalpy(near)) <= 1.2 * Cp * (far - near) + 1e-4
        assert abs(species.entropy(far) - species.entropy(near)) <= 1.2 * Cp * (far - near) / T + 1e-6


@given(st.sampled_from(ALL), st.floats(150.0, 20000.0))
@settings(max_examples=300, deadline=None)
def test_gibbs_energy_is_concave_everywhere(species: Species, T: float) -> None:
    # d2G/dT2 = -Cp/T < 0, within the pieces and beyond.
    assert species.heat_capacity(T) > 0.0


@given(st.sampled_from(ALL), st.floats(160.0, 6000.0))
@settings(max_examples=200, deadline=None)
def test_entropy_is_the_slope_of_gibbs_energy(species: Species, T: float) -> None:
    step = 1e-3
    edges = [piece.high for piece in species.extended_pieces if np.isfinite(piece.high)]
    if min(abs(T - edge) for edge in edges) < 0.1:
        return
    slope = (species.gibbs_energy(T + step) - species.gibbs_energy(T - step)) / (2.0 * step)
    assert -slope == pytest.approx(float(species.entropy(T)), rel=1e-3, abs=0.05)


def test_a_solid_and_its_liquid_change_places_once() -> None:
    condensed: dict[object, list[Species]] = {}
    for species in ALL:
        if species.condensed:
            condensed.setdefault(frozenset(species.elements.items()), []).append(species)
    pairs = [
        (s, q)
        for group in condensed.values()
        for s in group
        for q in group
        if (s.phase, q.phase) == ("solid", "liquid")
    ]
    assert len(pairs) > 150
    for solid, liquid in pairs:
        T = np.linspace(max(solid.usable[0], liquid.usable[0]), min(solid.usable[1], liquid.usable[1]), 801)
        gain = liquid.gibbs_energy(T) - solid.gibbs_energy(T)
        assert gain[0] > 0.0 > gain[-1]
        assert np.count_nonzero(np.diff(np.sign(gain))) == 1


def test_enthalpy_never_falls_where_one_piece_ends_and_the_next_begins() -> None:
    """Heat that a substance gives off on warming would leave several temperatures for one enthalpy."""
    falling = []
    for name in load().names:
        record = load().get(name)
        for piece in record.pieces[:-1]:
            below, above = (float(record.enthalpy(piece.high + step)) for step in (-1e-7, 1e-7))
            if above < below - 1.0:
                falling.append((name, piece.high, above - below))
    assert falling == []
