"""Heating values of fuels known by analysis: stated or from a correlation, higher and lower, on any basis.

At 25 °C and constant pressure, with all hydrogen of the fuel ending as water (the custom of labs, which leave out that
chlorine takes some of it):

    lower = higher - 2.4417 MJ/kg (8.936 H + M)/100                                                             (1)

where H (without that of the moisture) and M are mass percent on the basis of the values, and 2.4417 MJ/kg is what water
takes to evaporate at 25 °C (IAPWS-95). A bomb measures at constant volume. What the gas does not do there against the
atmosphere is RT for each mole that it grows by: per kilogram of fuel n_O/2 + n_N/2 - n_H/4 mol, so that

    higher at constant pressure = higher at constant volume + RT (n_H/4 - n_O/2 - n_N/2)                        (2)

which is ISO 1928 to its rounding. A lower value at constant volume lacks in the same way RT for its water, as vapour.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final, Literal

from gibbsmin.constants import STANDARD_TEMPERATURE, R
from gibbsmin.elements import ATOMIC_WEIGHT
from gibbsmin.errors import FeedError
from gibbsmin.practice.feeds.fuel_analysis import AS_RECEIVED, HYDROGEN_OF_WATER, Analysis, Basis
from gibbsmin.practice.feeds.fuel_correlations import CORRELATIONS, DEFAULT, Correlation, CorrelationName

EVAPORATION: Final = 2.4417e6
"""Enthalpy of evaporation of water at 25 °C, [J/kg] (IAPWS-95)."""

NOTED: Final = 0.03
"""A stated value that differs by more than this part from the correlation is told, [-]; common practice, no source."""

HeldAt = Literal["constant pressure", "constant volume"]

_RT: Final = R * STANDARD_TEMPERATURE
_WATER: Final = 2.0 * ATOMIC_WEIGHT["H"] + ATOMIC_WEIGHT["O"]


@dataclass(frozen=True)
class Stated:
    """A heating value as a lab states it.

    Attributes
    ----------
    value : float
        [J/kg].
    lower : bool
        Whether it is the lower one.
    basis : Basis
        Of the kilogram.
    at : HeldAt
        What was held while it was measured.
    """

    value: float
    lower: bool = False
    basis: Basis = AS_RECEIVED
    at: HeldAt = "constant pressure"

    def higher(self, fuel: Analysis) -> float:
        """Higher value at constant pressure on the same basis, [J/kg]."""
        if self.at == "constant pressure":
            return to_higher(self.value, fuel, self.basis) if self.lower else self.value
        gross = self.value
        if self.lower:
            gross += _water(fuel, self.basis) * (EVAPORATION - _RT / _WATER)
        return gross + _RT * _shrinkage(fuel, self.basis)


@dataclass(frozen=True)
class FuelHeat:
    """Heating values of a fuel, 25 °C, constant pressure.

    Attributes
    ----------
    higher, lower : float
        Of the fuel as received, [J/kg].
    correlation : Correlation
        That was used or compared with.
    estimate : float
        Higher value of the fuel as received that the correlation gives, [J/kg]; nan where it cannot.
    stated : bool
        Whether the values were stated; else they are those of the correlation.
    notes : tuple of str
        What should be known of them, a sentence each.
    """

    higher: float
    lower: float
    correlation: Correlation
    estimate: float
    stated: bool
    notes: tuple[str, ...]


def to_lower(higher: float, fuel: Analysis, basis: Basis) -> float:
    """Lower heating value from the higher one on the same basis, [J/kg]; equation (1)."""
    return higher - EVAPORATION * _water(fuel, basis)


def to_higher(lower: float, fuel: Analysis, basis: Basis) -> float:
    """Higher heating value from the lower one on the same basis, [J/kg]; equation (1)."""
    return lower + EVAPORATION * _water(fuel, basis)


def heat_of_fuel(fuel: Analysis, stated: Stated | None = None, name: CorrelationName = DEFAULT) -> FuelHeat:
    """Settle the heating values of a fuel; a stated one wins over a correlation.

    Parameters
    ----------
    fuel : Analysis
    stated : Stated or None
        What a lab measured.
    name : CorrelationName
        Correlation to use, or to compare with.

    Returns
    -------
    FuelHeat

    Raises
    ------
    FeedError
        The correlation cannot be evaluated, and nothing is stated.
    """
    correlation = CORRELATIONS[name]
    try:
        found = correlation.estimate(fuel)
    except FeedError:
        if stated is None:
            raise
        found = float("nan")
    found = to_higher(found, fuel, correlation.basis) if correlation.lower else found
    estimate = found * fuel.per_kilogram(correlation.basis)
    higher = estimate if stated is None else stated.higher(fuel) * fuel.per_kilogram(stated.basis)
    off = higher / estimate - 1.0
    notes = []
    if abs(off) > NOTED:
        notes.append(
            f"The stated heating value is {abs(100.0 * off):.1f} % {'above' if off > 0.0 else 'below'} that of "
            f"{correlation.source}: check the analysis, the basis, and whether higher and lower are mixed up."
        )
    if (stated is None or notes) and (outside := correlation.outside(fuel)):
        notes.append(
            f"The fuel lies outside the range of {correlation.source}, which is for {correlation.fuels}: "
            f"{', '.join(outside)}."
        )
    return FuelHeat(
        higher, to_lower(higher, fuel, AS_RECEIVED), correlation, estimate, stated is not None, tuple(notes)
    )


def _water(fuel: Analysis, basis: Basis) -> float:
    """Water of a kilogram on a basis, its own and that of burning, [kg]."""
    return (fuel.percent("H", basis) / HYDROGEN_OF_WATER + fuel.sample_moisture(basis)) / 100.0


def _shrinkage(fuel: Analysis, basis: Basis) -> float:
    """Gas that burning to liquid water takes away more than it makes, of a kilogram on a basis, [mol]."""
    H, O, N = (fuel.percent(symbol, basis) / 100.0 / ATOMIC_WEIGHT[symbol] for symbol in ("H", "O", "N"))
    return H / 4.0 - O / 2.0 - N / 2.0
