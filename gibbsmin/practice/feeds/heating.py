"""Heating values of feeds: the heat of complete combustion to what the trade takes as products.

C, H, S, N, Cl, F end as CO2, H2O, SO2, N2, HCl, HF, all of them ideal gases but water, which is liquid for the higher
value and a gas for the lower one; reactants and products are at one temperature. This is the combustion of ISO 6976
(2016), at 25 °C (thermochemistry) or 15 °C (the gas trade). Oxygen and products of combustion in the feed count with
no heat, but liquid water lowers the lower value by its evaporation, and water vapour adds its condensation to the
higher one. Ash, which is what holds other elements and needs no oxygen, stays as it is (common practice, no source).

A calorimeter leaves sulfur and halogens as dilute acids: values corrected for SO2 but not for HCl are higher.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Final

import numpy as np
from numpy.typing import ArrayLike

from gibbsmin.constants import ATMOSPHERE, STANDARD_TEMPERATURE, R
from gibbsmin.errors import FeedError, InputError
from gibbsmin.practice.feeds.ratios import oxygen_need
from gibbsmin.thermo.database import load
from gibbsmin.thermo.record import Species

AT_15_CELSIUS: Final = 288.15
"""Reference temperature of the gas trade (ISO 13443), [K]."""

NORMAL_MOLAR_VOLUME: Final = R * 273.15 / ATMOSPHERE
"""Of an ideal gas at 0 °C and 101325 Pa, which is what Nm3 means here, [m3/mol]."""

_BURNT: Final = frozenset(("C", "H", "S", "N", "O", "Cl", "F", "He", "Ne", "Ar", "Kr", "Xe"))


@dataclass(frozen=True)
class HeatingValue:
    """Higher and lower heating value of a feed, ideal gas, and what they are counted by.

    Attributes
    ----------
    higher, lower : float
        Of the whole feed, with water as a liquid and as a gas [J].
    temperature : float
        At which reactants and products are counted [K].
    amount, mass : float
        [mol], [kg].
    normal_volume : float
        At 0 °C and 101325 Pa as an ideal gas [m3]; nan where a part of the feed is condensed.
    """

    higher: float
    lower: float
    temperature: float
    amount: float
    mass: float
    normal_volume: float

    @property
    def per_mole(self) -> tuple[float, float]:
        """Higher and lower [J/mol]."""
        return self.higher / self.amount, self.lower / self.amount

    @property
    def per_mass(self) -> tuple[float, float]:
        """Higher and lower [J/kg]."""
        return self.higher / self.mass, self.lower / self.mass

    @property
    def per_normal_volume(self) -> tuple[float, float]:
        """Higher and lower [J/Nm3]; nan where a part of the feed is condensed."""
        return self.higher / self.normal_volume, self.lower / self.normal_volume


def heating_value(
    records: Sequence[Species], amounts: ArrayLike, temperature: float = STANDARD_TEMPERATURE
) -> HeatingValue:
    """Heat that a feed gives off when it burns completely.

    Parameters
    ----------
    records : sequence of Species
        What the feed is made of.
    amounts : (S,) array
        [mol], in the order of ``records``.
    temperature : float
        Of the reference [K], 298.15 or 288.15 by custom.

    Returns
    -------
    HeatingValue
        Zero, or next to it, where nothing burns.

    Raises
    ------
    InputError
        Amounts that do not fit, or none above zero.
    FeedError
        A species whose products of combustion are a matter of choice, or more Cl and F than hydrogen.

    Examples
    --------
    >>> methane = heating_value([load().get("CH4")], [1.0])
    >>> [round(value / 1000.0, 1) for value in methane.per_mole]
    [890.6, 802.6]
    """
    n = np.asarray(amounts, float)
    if n.shape != (len(records),):
        raise InputError(f"amounts must have shape ({len(records)},); got {n.shape}")
    if not (np.all(np.isfinite(n) & (n >= 0.0)) and n.any()):
        raise InputError("amounts must be finite and not negative, and one of them above zero")
    get = load().get
    heat, products = 0.0, dict.fromkeys(("CO2", "H2O", "SO2", "N2", "HCl", "HF", "O2"), 0.0)
    for record, amount in zip(records, n.tolist(), strict=True):
        if amount == 0.0 or _is_ash(record):
            continue
        heat += amount * record.enthalpy(temperature)
        for name, count in _products(record.elements).items():
            products[name] += amount * count
        for gas in _noble(record):
            heat -= amount * record.elements[gas] * get(gas).enthalpy(temperature)
    if products["H2O"] < 0.0:
        raise FeedError(
            f"the feed holds {-2.0 * products['H2O']:.4g} mol more Cl and F than H, so that they cannot all end as HCl "
            "and HF; its heating value is not defined"
        )
    for name, count in products.items():
        if count:
            heat -= count * get(name).enthalpy(temperature)
    condensation = products["H2O"] * (get("H2O").enthalpy(temperature) - get("H2O(l)").enthalpy(temperature))
    volume = np.nan if any(record.condensed for record, a in zip(records, n, strict=True) if a) else n.sum()
    return HeatingValue(
        higher=heat + condensation,
        lower=heat,
        temperature=temperature,
        amount=float(n.sum()),
        mass=float(n @ [record.molar_mass for record in records]),
        normal_volume=float(volume * NORMAL_MOLAR_VOLUME),
    )


def _products(elements: Mapping[str, float]) -> dict[str, float]:
    """Products of complete combustion of one formula unit [-], with the oxygen it needs as a negative product."""
    C, H, S, N, Cl, F = (elements.get(symbol, 0.0) for symbol in ("C", "H", "S", "N", "Cl", "F"))
    return {
        "CO2": C, "H2O": 0.5 * (H - Cl - F), "SO2": S, "N2": 0.5 * N, "HCl": Cl, "HF": F, "O2": -oxygen_need(elements),
    }  # fmt: skip


def _noble(record: Species) -> list[str]:
    """Noble gases in a species, which leave as they came."""
    return [symbol for symbol in record.elements if symbol in ("He", "Ne", "Ar", "Kr", "Xe")]


def _is_ash(record: Species) -> bool:
    """Whether a species stays as it is; FeedError where it neither does nor burns to the products above."""
    if record.elements.keys() <= _BURNT and not record.charge:
        return False
    if _stays(record):
        return True
    raise FeedError(
        f"the heating value of {record.name} is not defined: it is not made of C, H, O, N, S, Cl and F only, and is no "
        "oxide or salt that stays as it is"
    )


def _stays(record: Species) -> bool:
    """Whether all elements of a species are burnt already; nitrates give oxygen off and do not count."""
    if record.charge or "N" in record.elements:
        return False
    try:
        return oxygen_need(record.elements) <= 0.0
    except FeedError:  # an element whose oxide is a matter of choice
        return False
