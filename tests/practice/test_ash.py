"""Ash by its oxides against printed factors and sums done by hand."""

import pytest

from gibbsmin.elements import ATOMIC_WEIGHT
from gibbsmin.errors import FeedError
from gibbsmin.practice.feeds.ash import SPECIES_OF_OXIDE, read_oxides
from gibbsmin.practice.feeds.ratios import oxygen_need
from gibbsmin.thermo.database import load

# kg of oxide a kg of element, as tables of conversion factors of mineral analysis print them (common practice).
FACTORS = {
    "SiO2": ("Si", 2.1393), "Al2O3": ("Al", 1.8895), "Fe2O3": ("Fe", 1.4297), "CaO": ("Ca", 1.3992),
    "MgO": ("Mg", 1.6582), "Na2O": ("Na", 1.3480), "K2O": ("K", 1.2046), "TiO2": ("Ti", 1.6681), "P2O5": ("P", 2.2916),
    "MnO": ("Mn", 1.2912), "Mn3O4": ("Mn", 1.3883), "BaO": ("Ba", 1.1165), "SrO": ("Sr", 1.1826), "ZnO": ("Zn", 1.2448),
    "PbO": ("Pb", 1.0772), "CuO": ("Cu", 1.2518), "NiO": ("Ni", 1.2725), "Cr2O3": ("Cr", 1.4616), "V2O5": ("V", 1.7852),
}  # fmt: skip


def test_there_is_a_factor_for_every_oxide():
    assert FACTORS.keys() == SPECIES_OF_OXIDE.keys()


@pytest.mark.parametrize("oxide", FACTORS)
def test_oxide_to_element(oxide):
    symbol, factor = FACTORS[oxide]
    ash, _ = read_oxides({oxide: 100.0})
    ((name, amount),) = ash.amounts.items()
    record = load().get(name)
    assert record.condensed
    assert amount * record.molar_mass == pytest.approx(1.0, rel=1e-9)
    element = amount * record.elements[symbol] * ATOMIC_WEIGHT[symbol]
    assert 1.0 / element == pytest.approx(factor, rel=3e-4)


@pytest.mark.parametrize("oxide", ["SiO2", "Al2O3", "Fe2O3", "CaO", "MgO", "Na2O", "K2O", "TiO2", "P2O5", "MnO"])
def test_the_usual_oxides_are_burnt(oxide):
    assert oxygen_need(load().get(SPECIES_OF_OXIDE[oxide]).elements) == 0.0


STRAW = {"SiO2": 48.0, "K2O": 25.0, "CaO": 11.0, "MgO": 4.0, "Na2O": 1.0, "Al2O3": 2.0, "Fe2O3": 1.0, "P2O5": 4.0}


def test_indices_by_hand():
    """(1 + 11 + 4 + 1 + 25)/(48 + 2) = 0.84; 0.05 kg of ash with 27.08 % of alkali to 18 MJ: 0.752 kg/GJ."""
    ash, notes = read_oxides(STRAW)  # sums to 96
    assert notes == ["The oxides of the ash sum to 96 and were brought to 100."]
    assert sum(ash.oxides.values()) == pytest.approx(1.0)
    assert ash.base_to_acid == pytest.approx(0.84)
    assert 1e9 * ash.alkali_index(0.05, 18e6) == pytest.approx(0.05 * 26.0 / 96.0 / 0.018)
    assert read_oxides({"CaO": 100.0})[0].base_to_acid == float("inf")


def test_what_the_ash_took_up_leaves_it():
    ash, notes = read_oxides({**STRAW, "SO3": 3.0, "CO2": 1.0})
    assert notes == []
    assert ash.taken_up == pytest.approx(0.04)
    assert ash.oxides == pytest.approx({name: percent / 96.0 for name, percent in STRAW.items()})


@pytest.mark.parametrize(
    ("percent", "words"),
    [
        ({"SiO2": 60.0, "CaO": 34.0}, "sum to 94; expected 95 to 105"),
        ({"SiO2": 60.0, "CaO": 46.0}, "sum to 106"),
        ({"SiO2": 60.0, "Fe2O": 40.0}, "'Fe2O' is no oxide of an ash analysis; did you mean 'Fe2O3'"),
        ({"SO3": 60.0, "CO2": 40.0}, "all SO3 and CO2"),
    ],
)
def test_ash_that_cannot_be(percent, words):
    with pytest.raises(FeedError, match=words):
        read_oxides(percent)
