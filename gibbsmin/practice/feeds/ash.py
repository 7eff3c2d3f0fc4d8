"""Ash by its oxides: elements, species, and two indices.

A lab reports every metal of the ash as its oxide, whether or not the ash holds it in that form, and SO3 and CO2 that
the ash took up while the fuel was burnt to it. Percentages that sum to 95 to 105 are brought to 100; outside, something
is missing or counted twice (common practice, no source).

Base to acid: (Fe2O3 + CaO + MgO + Na2O + K2O)/(SiO2 + Al2O3 + TiO2), by mass (common practice, no source). Alkali
index: kg of K2O and Na2O that come with a GJ of heat; fouling is probable above 0.17 and certain above 0.34 (Miles et
al. 1995, from memory).
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Final

from gibbsmin.elements import molar_mass, parse_formula
from gibbsmin.errors import FeedError, nearest

SPECIES_OF_OXIDE: Final = {
    "SiO2": "SiO2(s)",
    "Al2O3": "Al2O3(s):alpha",
    "Fe2O3": "Fe2O3(s)",
    "CaO": "CaO(s)",
    "MgO": "MgO(s)",
    "Na2O": "Na2O(s)",
    "K2O": "K2O(s)",
    "TiO2": "TiO2(s):rutile",
    "P2O5": "P4O10(s)",
    "MnO": "MnO(s)",
    "Mn3O4": "Mn3O4(s)",
    "BaO": "BaO(s)",
    "SrO": "SrO(s)",
    "ZnO": "ZnO(s)",
    "PbO": "PbO(s)",
    "CuO": "CuO(s)",
    "NiO": "NiO(s)",
    "Cr2O3": "Cr2O3(s)",
    "V2O5": "V2O5(s)",
}
"""Species that stands for each oxide of an ash analysis."""

TAKEN_UP: Final = ("SO3", "CO2")
"""What ash takes up while it is made; its S and C are the fuel's."""

_LEAST, _MOST = 95.0, 105.0
_BASES = ("Fe2O3", "CaO", "MgO", "Na2O", "K2O")
_ACIDS = ("SiO2", "Al2O3", "TiO2")

ALKALIS: Final = ("Na2O", "K2O")
"""Oxides that the alkali index counts."""


@dataclass(frozen=True)
class Ash:
    """Ash by its oxides.

    Attributes
    ----------
    oxides : mapping of str to float
        Mass fraction of each oxide in the ash without SO3 and CO2, [-]; sums to 1.
    taken_up : float
        Mass fraction of SO3 and CO2 in the ash as it was analysed, [-].
    """

    oxides: Mapping[str, float]
    taken_up: float

    @property
    def amounts(self) -> dict[str, float]:
        """Amount of each species in a kilogram of ash without SO3 and CO2, [mol]."""
        found: dict[str, float] = {}
        for oxide, share in self.oxides.items():
            name = SPECIES_OF_OXIDE[oxide]
            species_mass = molar_mass(parse_formula(name.partition("(")[0])[0])
            found[name] = found.get(name, 0.0) + share / species_mass
        return found

    @property
    def base_to_acid(self) -> float:
        """Bases over acids, by mass, [-]; infinite where there is no acid."""
        acids = self._sum(_ACIDS)
        return self._sum(_BASES) / acids if acids else float("inf")

    def alkali_index(self, ash: float, heat: float) -> float:
        """K2O and Na2O that come with a unit of heat.

        Parameters
        ----------
        ash : float
            Ash without SO3 and CO2 in the fuel, [kg/kg].
        heat : float
            Heating value of the fuel, [J/kg], of the same kilogram.

        Returns
        -------
        float
            [kg/J].
        """
        return ash * self._sum(ALKALIS) / heat

    def _sum(self, oxides: tuple[str, ...]) -> float:
        return sum(self.oxides.get(oxide, 0.0) for oxide in oxides)


def read_oxides(percent: Mapping[str, float]) -> tuple[Ash, list[str]]:
    """Read an ash analysis.

    Parameters
    ----------
    percent : mapping of str to float
        Mass percent of each oxide in the ash.

    Returns
    -------
    Ash
    list of str
        What was done to it, a sentence each.

    Raises
    ------
    FeedError
        An oxide that is not known here, or percentages that do not sum to 95 to 105.
    """
    known = (*SPECIES_OF_OXIDE, *TAKEN_UP)
    for oxide in percent:
        if oxide not in known:
            hint = nearest(oxide, known) or ";"
            raise FeedError(f"{oxide!r} is no oxide of an ash analysis{hint} known here are {', '.join(known)}")
    total = sum(percent.values())
    if not _LEAST <= total <= _MOST:
        raise FeedError(f"the oxides of the ash sum to {total:.6g}; expected {_LEAST:g} to {_MOST:g}")
    taken_up = sum(percent.get(oxide, 0.0) for oxide in TAKEN_UP)
    rest = total - taken_up
    if not rest > 0.0:
        raise FeedError("the ash is all SO3 and CO2; expected the oxides of its metals")
    notes = [f"The oxides of the ash sum to {total:.5g} and were brought to 100."] if abs(total - 100.0) > 1e-6 else []
    shares = {oxide: value / rest for oxide, value in percent.items() if value > 0.0 and oxide not in TAKEN_UP}
    return Ash(shares, taken_up / total), notes
