"""Systems: which species, which balances, what a feed holds, and what is said when something is wrong."""

import numpy as np
import pytest

from gibbsmin.elements import ATOMIC_WEIGHT
from gibbsmin.errors import FeedError, InputError, SpeciesError, UnitError
from gibbsmin.states.solve import equilibrium
from gibbsmin.states.system import System
from gibbsmin.thermo.database import load
from gibbsmin.thermo.record import Piece, Species


def own_gas(name: str, elements: dict[str, float], g: float) -> Species:
    """Make a gas with Cp° = S° = 0 and H° = ``g`` R."""
    return Species(name, name, "gas", "", elements, 0, (Piece(200.0, 6000.0, (*[0.0] * 7, g, 0.0)),), (50.0, 20000.0))


def test_elements_as_text_or_list_name_the_same_system() -> None:
    names = [System.from_elements(given).species for given in ("C H O", "C,H;O", ["C", "H", "O"], " O H\tC ")]
    assert all(found == names[0] for found in names)
    assert {"CO2", "H2O", "H2O(l)", "C(s):graphite"} <= set(names[0])


def test_condensed_and_ions_are_choices() -> None:
    assert System.from_elements("C H O", condensed=False).gas.all()
    neutral, ions = System.from_elements("Na Cl"), System.from_elements("Na Cl", ions=True)
    assert "charge" not in neutral.elements
    assert ions.elements[-1] == "charge"
    assert {"Na+", "Cl-", "e-"} <= set(ions.species) - set(neutral.species)
    electron = ions.species.index("e-")
    assert ions.element_matrix[-1, electron] == -1.0
    assert not ions.element_matrix[:-1, electron].any()


def test_element_matrix_and_molar_masses_agree() -> None:
    system = System.from_elements("C H O N S Cl")
    weights = np.array([ATOMIC_WEIGHT[symbol] for symbol in system.elements])
    assert weights @ system.element_matrix == pytest.approx(system.molar_masses, rel=1.0e-12)


def test_exclude_by_name_and_alias() -> None:
    without = System.from_elements("C H O", exclude=["graphite", "C2H2"])
    assert "C(s):graphite" not in without.species
    assert "C2H2:acetylene" not in without.species
    assert "C2H2:vinylidene" in without.species


def test_own_species_stand_beside_and_in_place_of_the_data() -> None:
    heavy = own_gas("CO2", {"C": 1.0, "O": 2.0}, -1.0e6)
    new = own_gas("C9O9", {"C": 9.0, "O": 9.0}, 0.0)
    system = System.from_elements("C O", extra=[heavy, new])
    assert system.records[system.index["CO2"]] is heavy
    assert "C9O9" in system.species
    assert len(system.species) == len(System.from_elements("C O").species) + 1


def test_names_and_records_mix() -> None:
    system = System.from_species(["methane", "H2O(l)", own_gas("CX", {"C": 1.0}, 0.0)])
    assert system.species == ["CH4", "H2O(l)", "CX"]
    assert System.from_species("CH4 O2").species == ["CH4", "O2"]
    assert system.name_of("methane") == "CH4"


def test_phases_are_the_gas_and_every_solid_or_liquid() -> None:
    assert System.from_species("H2O H2O(l) N2").phases == ["gas", "H2O(l)"]
    assert System.from_species("H2O(s) H2O(l)").phases == ["H2O(s)", "H2O(l)"]


def test_a_feed_may_hold_species_that_may_not_form() -> None:
    system = System.from_species("CO2 H2O N2 O2")
    b = dict(zip(system.elements, system.feed({"CH3OH": 2.0}), strict=True))
    assert b == {"C": 2.0, "O": 2.0, "H": 8.0, "N": 0.0}


def test_feed_amounts_carry_units() -> None:
    system = System.from_species("CO2 H2O N2 O2")
    assert system.feed({"H2O": "2 kmol"}) == pytest.approx(1000.0 * system.feed({"H2O": 2.0}))


def test_inert_species_take_no_part() -> None:
    """Frozen carbon monoxide in oxygen stays, though burning it would be downhill."""
    system = System.from_elements("C H O", condensed=False, inert=["CO"])
    assert system.elements[-1] == "inert CO"
    state = equilibrium(system, {"CO": 1.0, "H2": 1.0, "O2": 5.0}, temperature=1000.0, pressure=1.0e5)
    assert state.amounts["CO"] == pytest.approx(1.0, rel=1.0e-12)
    assert state.amounts["H2O"] == pytest.approx(1.0, rel=1.0e-6)
    assert state.amounts["CO2"] == 0.0
    burnt = equilibrium(
        System.from_elements("C H O", condensed=False),
        {"CO": 1.0, "H2": 1.0, "O2": 5.0},
        temperature=1000.0,
        pressure=1.0e5,
    )
    assert burnt.gibbs_energy < state.gibbs_energy


def test_inert_species_of_other_elements_are_added() -> None:
    system = System.from_elements("H O", inert=["Ar"])
    assert "Ar" in system.species
    state = equilibrium(system, {"H2": 1.0, "O2": 0.5, "Ar": 3.0}, temperature=1500.0, pressure=1.0e5)
    assert state.amounts["Ar"] == pytest.approx(3.0, rel=1.0e-12)


@pytest.mark.parametrize(
    ("call", "error", "words"),
    [
        (lambda: System.from_elements("C Hx"), SpeciesError, ["'Hx'"]),
        (lambda: System.from_elements("c h o"), SpeciesError, ["'c'", "'C'"]),
        (lambda: System.from_elements("C H O", exclude=["CH5OH"]), SpeciesError, ["'CH5OH'", "CH3OH"]),
        (lambda: System.from_elements("C H O", inert=["Argon!"]), SpeciesError, ["'Argon!'"]),
        (lambda: System.from_elements("C H O", exclude=["CO"], inert=["CO"]), InputError, ["CO", "inert", "excluded"]),
        (lambda: System.from_species(["CH4", "CO7"]), SpeciesError, ["'CO7'"]),
        (lambda: System.from_species(["CH4", "methane"]), SpeciesError, ["CH4", "more than once"]),
        (lambda: System.from_species([]), InputError, ["at least one species"]),
        (lambda: System.from_species(["CH4"], inert=["N2"]), SpeciesError, ["N2", "not among"]),
        (lambda: System.from_species(["C4H10"]), SpeciesError, ["C4H10:n-butane", "C4H10:isobutane"]),
        (lambda: System.from_species("CO2").feed({"CH4": 1.0}), FeedError, ["CH4", "H"]),
        (lambda: System.from_species("CO2").feed({"CO2": -1.0}), FeedError, ["CO2", "negative"]),
        (lambda: System.from_species("CO2").feed({"C02": 1.0}), SpeciesError, ["'C02'"]),
        (lambda: System.from_species("CO2").feed({"CO2": "3 kg"}), UnitError, ["CO2", "kg"]),
        (lambda: System.from_species("CO2").feed({"CO2": float("nan")}), InputError, ["CO2"]),
        (lambda: System.from_species("NaCl").feed({"Na+": 1.0}), FeedError, ["Na+", "charge"]),
    ],
)  # fmt: skip
def test_what_is_wrong_is_named(call: object, error: type[Exception], words: list[str]) -> None:
    with pytest.raises(error) as caught:
        call()  # type: ignore[operator]
    assert all(word in str(caught.value) for word in words), str(caught.value)


def test_a_species_of_the_data_is_found_by_any_of_its_names() -> None:
    for alias in load().get("CH4").aliases:
        assert System.from_species([alias]).species == ["CH4"]


def test_what_is_inert_is_there_at_any_temperature() -> None:
    """Na2O(s) is no candidate at 1800 K, but what takes no part does not ask."""
    system = System.from_elements("C H O N", inert=["Na2O(s)"])
    top = next(record for record in system.records if record.name == "Na2O(s)").usable[1]
    feed = {"CH4": 1.0, "O2": 2.5, "N2": 8.0, "Na2O(s)": 0.1}
    state = equilibrium(system, feed, temperature=top + 300.0, pressure=1e5)
    assert state.amounts["Na2O(s)"] == pytest.approx(0.1)
    assert any("Na2O(s)" in warning for warning in state.warnings)
