"""Fuel and air of a fired unit: what each feed counts as, and the numbers that need no equilibrium.

A feed that needs oxygen to burn is fuel, one that holds free O2 and needs none is oxidant; what is neither (steam,
limestone) takes no part in these numbers. Complete combustion of fuel that needs o of O2, by air of which y is O2, by
the products of ``ratios``, with HCl, its like and noble gases in the dry gas (common practice, no source):

    A = o / y,   V = o (1/y - 1) + C + S + N/2 + halogens + noble gases                                      (1)

are dry air and dry gas; so CO2max = C / V, and for complete combustion at a dry O2 of x

    λ = 1 + (V/A) x / (y - x)                                                                               (2)
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.elements import CHARGE
from gibbsmin.errors import FeedError
from gibbsmin.practice.feeds.heating import NORMAL_MOLAR_VOLUME
from gibbsmin.practice.feeds.ratios import oxygen_need
from gibbsmin.practice.figures.fed import WATER
from gibbsmin.practice.figures.potentials import record_of
from gibbsmin.practice.figures.settled import FeedFacts, Settled
from gibbsmin.practice.figures.tally import ratio

Floats = NDArray[np.float64]

_DRY_GAS: Final = {"C": 1.0, "S": 1.0, "N": 0.5} | dict.fromkeys(
    ("Cl", "F", "Br", "I", "He", "Ne", "Ar", "Kr", "Xe"), 1.0
)


@dataclass(frozen=True)
class Firing:
    """Fuel and oxidant.

    Attributes
    ----------
    fuels, oxidants : tuple of FeedFacts
        The feeds that count as such.
    need : array (states,)
        O2 that the fuel needs, [mol or mol/s].
    air_oxygen : float
        O2 of dry air, mole fraction, [-].
    gaseous : bool
        Whether the fuel is a gas.
    """

    fuels: tuple[FeedFacts, ...]
    oxidants: tuple[FeedFacts, ...]
    need: Floats
    air_oxygen: float
    gaseous: bool

    def element(self, symbol: str) -> Floats:
        """Atoms of an element in the fuel, (states,), [mol or mol/s]."""
        nothing = np.zeros(self.need.shape)
        return np.asarray(sum((fuel.elements.get(symbol, nothing) for fuel in self.fuels), nothing))

    @cached_property
    def mass(self) -> Floats:
        """Mass of the fuel, (states,), [kg or kg/s]."""
        return np.asarray(sum((fuel.mass for fuel in self.fuels), np.zeros(self.need.shape)))

    @cached_property
    def lower(self) -> Floats | None:
        """Lower heating value at 25 °C, (states,), [J or W]; None where that of a fuel is not known."""
        return self._summed([fuel.lower for fuel in self.fuels])

    @cached_property
    def higher(self) -> Floats | None:
        """Higher heating value at 25 °C, (states,), [J or W]; None where that of a fuel is not known."""
        return self._summed([fuel.higher for fuel in self.fuels])

    @cached_property
    def normal_volume(self) -> Floats | None:
        """Normal volume of a fuel that is a gas, (states,), [Nm3 or Nm3/s]; None where a part of it is not."""
        if not self.gaseous:
            return None
        return self._summed([n * NORMAL_MOLAR_VOLUME for fuel in self.fuels for n in fuel.amounts.values()])

    @cached_property
    def dry_air(self) -> Floats:
        """Dry air that the fuel needs, (states,), [mol or mol/s], equation (1)."""
        return self.need / self.air_oxygen

    @cached_property
    def dry_gas(self) -> Floats:
        """Dry gas of complete combustion without air left over, (states,), [mol or mol/s], equation (1)."""
        made = sum(self.element(symbol) * part for symbol, part in _DRY_GAS.items())
        return np.asarray(self.need * (1.0 / self.air_oxygen - 1.0) + made)

    @cached_property
    def oxidant_oxygen(self) -> Floats:
        """O2 of all oxidants together, without their water, mole fraction, (states,), [-]; nan where there is none."""
        return ratio(self.free_oxygen, self.oxidant(dry=True))

    @cached_property
    def free_oxygen(self) -> Floats:
        """O2 that the oxidants bring, (states,), [mol or mol/s]."""
        nothing = np.zeros(self.need.shape)
        return np.asarray(sum((feed.amounts.get("O2", nothing) for feed in self.oxidants), nothing))

    def oxidant(self, *, dry: bool) -> Floats:
        """Amount of all oxidants, (states,), [mol or mol/s]."""
        parts = (n for feed in self.oxidants for name, n in feed.amounts.items() if not (dry and name in WATER))
        return np.asarray(sum(parts, np.zeros(self.need.shape)))

    def air_ratio(self, oxygen: Floats) -> Floats:
        """Air ratio by the O2 left over, equation (2).

        Parameters
        ----------
        oxygen : array (states,)
            O2 of the dry gas, mole fraction, [-].

        Returns
        -------
        array (states,)
            [-]; nan where the gas holds as much O2 as air.
        """
        return 1.0 + ratio(self.dry_gas, self.dry_air) * ratio(oxygen, self.air_oxygen - oxygen)

    def _summed(self, parts: list[Floats] | list[Floats | None]) -> Floats | None:
        """Sum what is known of every part; None where one is not."""
        total = np.zeros(self.need.shape)
        for part in parts:
            if part is None:
                return None
            total = total + part
        return total


def firing(settled: Settled, air_oxygen: float) -> Firing | None:
    """Tell fuel and oxidant among the feeds.

    Parameters
    ----------
    settled : Settled
        Its feeds are asked.
    air_oxygen : float
        O2 of dry air, mole fraction, [-].

    Returns
    -------
    Firing or None
        None where nothing burns, no feed brings free O2, or the oxygen need of an element is a matter of choice.
    """
    fuels, oxidants, total = [], [], settled.zero
    for feed in settled.feeds.values():
        try:
            need = _needs(feed)
        except FeedError:
            return None
        oxygen = feed.amounts.get("O2", settled.zero)
        if (need > 0.0).any() or not oxygen.any():
            total = total + need
            fuels += [feed] if (need > 0.0).any() else []
        else:
            total = total + need + oxygen
            oxidants.append(feed)
    if not fuels or not oxidants:
        return None
    named = {name for fuel in fuels for name in fuel.amounts}
    gaseous = not any(fuel.by_analysis for fuel in fuels) and not any(record_of(settled, n).condensed for n in named)
    return Firing(tuple(fuels), tuple(oxidants), total, air_oxygen, gaseous)


def _needs(feed: FeedFacts) -> Floats:
    """O2 that a feed needs to burn, (states,), [mol or mol/s]; the need is linear in the elements."""
    parts = [oxygen_need({element: 1.0}) * n for element, n in feed.elements.items() if element != CHARGE and n.any()]
    return np.asarray(sum(parts, np.zeros(feed.mass.shape)))
