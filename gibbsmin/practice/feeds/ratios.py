"""What ratios of feeds count: carbon for steam to carbon, oxygen need for air ratio.

Common practice, no source, except where said: the stoichiometric reference burns C, H, S, N and halogens to CO2, H2O,
SO2, N2 and HCl (HF, HBr, HI), and takes metals to the oxides of the usual ash analysis (Fe2O3, MnO, Cr2O3, V2O5, and
those of divalent Zn, Pb, Cu, Ni, Ba, Sr), whatever equilibrium says.
"""

from __future__ import annotations

from collections.abc import Mapping
from typing import Final

from gibbsmin.elements import CHARGE
from gibbsmin.errors import FeedError

# Electrons that an element gives up on the way to its product; a quarter of it is the O2 it needs.
_VALENCE: Final = {
    "C": 4,
    "H": 1,
    "D": 1,
    "S": 4,
    "N": 0,
    "O": -2,
    "Cl": -1,
    "F": -1,
    "Br": -1,
    "I": -1,
    "He": 0,
    "Ne": 0,
    "Ar": 0,
    "Kr": 0,
    "Xe": 0,
    "Si": 4,
    "Al": 3,
    "Fe": 3,
    "Ca": 2,
    "Mg": 2,
    "Na": 1,
    "K": 1,
    "Ti": 4,
    "P": 5,
    "Mn": 2,
    "Ba": 2,
    "Sr": 2,
    "Zn": 2,
    "Pb": 2,
    "Cu": 2,
    "Ni": 2,
    "Cr": 3,
    "V": 5,
}


def oxygen_need(elements: Mapping[str, float]) -> float:
    """O2 that a substance or mixture needs to burn completely.

    Parameters
    ----------
    elements : mapping of str to float
        Atoms of each element, [mol].

    Returns
    -------
    float
        O2 needed, [mol]; negative where it holds more oxygen than it needs.

    Raises
    ------
    FeedError
        It holds an element whose product of combustion is a matter of choice.

    Examples
    --------
    >>> oxygen_need({"C": 1.0, "H": 4.0})
    2.0
    """
    atoms = {element: count for element, count in elements.items() if element != CHARGE and count}
    unknown = sorted(atoms.keys() - _VALENCE.keys())
    if unknown:
        raise FeedError(
            f"the need of oxygen is not defined for {', '.join(unknown)}, whose product of combustion is a matter of "
            f"choice; give the size of the air as a flow or an amount"
        )
    return sum(_VALENCE[element] * count for element, count in atoms.items()) / 4.0


def supply_and_need(elements: Mapping[str, float], oxygen: float) -> tuple[float, float]:
    """Split the oxygen balance of a feed into what it supplies and what it needs.

    Global air ratio, as burners and boilers have it: supply over need, summed over the feeds. A feed is an oxidant
    where it holds O2, and more of it than burns whatever else it holds: its O2 is supply, and what it holds besides is
    need. In any other feed O2 and bound oxygen are taken off the need (a fuel gas with air in it, coal with its own
    oxygen); a feed without O2 that has oxygen to spare (N2O, H2O2) lowers the need, too.

    Parameters
    ----------
    elements : mapping of str to float
        Atoms of each element in the feed, [mol].
    oxygen : float
        O2 in it as such, [mol].

    Returns
    -------
    supply, need : float
        O2, [mol].

    Raises
    ------
    FeedError
        As for `oxygen_need`.

    Examples
    --------
    >>> supply_and_need({"O": 2.0, "N": 8.0}, 1.0)
    (1.0, 0.0)
    """
    need = oxygen_need(elements)
    return (oxygen, need + oxygen) if oxygen > 0.0 and need < 0.0 else (0.0, need)


def counted_carbon(elements: Mapping[str, float]) -> float:
    """Carbon of one species that counts for steam to carbon.

    Carbon of hydrocarbons and oxygenates counts, and pure carbon; that of CO, CO2, carbonates and other compounds
    without hydrogen does not.

    Parameters
    ----------
    elements : mapping of str to float
        Atoms of each element in one formula unit, [-].

    Returns
    -------
    float
        Atoms of carbon that count, [-].
    """
    alone = set(elements) == {"C"}
    return elements.get("C", 0.0) if alone or "H" in elements else 0.0
