"""The dry, ash-free matter of a fuel as a substance: enthalpy of formation, sensible heat, entropy.

**Enthalpy of formation**: what makes burning to CO2, liquid water, SO2, N2, HCl, HF and HBr give the higher heating
value. Metals known by element end as the oxides of the usual ash analysis. Minerals keep their own.

**Sensible heat**: Merrick 1983 (from memory) for coal and char, two Einstein functions of a mean atom:

    h(T) - h(298.15 K) = (R/a) (E(380 K) + 2 E(1800 K)) between the two,   E(theta) = theta/(exp(theta/T) - 1)

with 1/a the atoms in a kilogram. It gives 1.1 kJ/kg/K for coal at 25 °C; it lies 10 to 15 % low for wood and oil, which
is 1 kJ for every kilogram and 6 K.

**Entropy**: there is no measurement for a fuel. Eisermann, Johnson and Conger 1980 (from memory) fit those of organic
solids, kJ/K for kmol of the atoms c, h, o, n, s,

    S = c (37.1653 - 31.4767 exp(-0.564682 h/(c + n)) + 20.1145 o/(c + n) + 54.3111 n/(c + n) + 44.6712 s/(c + n))

at 25 °C, within 10 % for aromatic solids and up to 40 % high for carbohydrates: for wood 0.3 kJ/kg/K, or 0.6 % of the
heating value where it is counted as lost work.
"""

from __future__ import annotations

from collections.abc import Mapping
from functools import cache
from math import exp
from typing import Any, Final

import numpy as np
from numpy.typing import ArrayLike

from gibbsmin.constants import STANDARD_TEMPERATURE, R
from gibbsmin.errors import FeedError
from gibbsmin.practice.feeds.ash import SPECIES_OF_OXIDE
from gibbsmin.thermo.database import load

_ACIDS: Final = {"Cl": "HCl", "F": "HF", "Br": "HBr"}
_MODES: Final = ((1.0, 380.0), (2.0, 1800.0))
"""Weight and temperature of each Einstein function, [-] and [K]."""


def formation_enthalpy(atoms: Mapping[str, float], higher: float) -> float:
    """Enthalpy of formation of what burns in a kilogram of fuel.

    Parameters
    ----------
    atoms : mapping of str to float
        Atoms of each element in it, without moisture and minerals, [mol].
    higher : float
        Heat that it gives off, with its water as a liquid, [J].

    Returns
    -------
    float
        [J].

    Raises
    ------
    FeedError
        There is more halogen than hydrogen, so that the products are a matter of choice.
    """
    get = load().get
    halogens = sum(atoms.get(symbol, 0.0) for symbol in _ACIDS)
    water = (atoms.get("H", 0.0) - halogens) / 2.0
    if water < 0.0:
        raise FeedError(
            f"the fuel holds {-2.0 * water:.4g} mol/kg more Cl, F and Br than H, which cannot all end as HCl, HF "
            "and HBr; its heating value is not defined"
        )
    products = {"CO2": atoms.get("C", 0.0), "H2O(l)": water, "SO2": atoms.get("S", 0.0)}
    products |= {acid: atoms.get(symbol, 0.0) for symbol, acid in _ACIDS.items()}
    for symbol, n in atoms.items():
        if symbol in _oxides():
            name, count = _oxides()[symbol]
            products[name] = n / count
    return higher + sum(n * get(name).standard_enthalpy for name, n in products.items() if n)


def counted_as_element(atoms: Mapping[str, float]) -> list[str]:
    """Elements of a fuel that no usual product is known of, so that they count with no heat of burning."""
    return [symbol for symbol in atoms if symbol not in {*"CHONS", *_ACIDS, *_oxides()}]


def sensible_heat(atoms: Mapping[str, float], temperature: ArrayLike) -> Any:
    """Enthalpy of dry, ash-free fuel above that at 298.15 K.

    Parameters
    ----------
    atoms : mapping of str to float
        Atoms of each element in it, [mol].
    temperature : float or (states,) array
        [K].

    Returns
    -------
    float or (states,) array
        [J].
    """
    T = np.asarray(temperature, float)
    energy = sum(
        w * theta * (1.0 / np.expm1(theta / T) - 1.0 / np.expm1(theta / STANDARD_TEMPERATURE)) for w, theta in _MODES
    )
    return R * sum(atoms.values()) * energy


def entropy_estimate(atoms: Mapping[str, float], temperature: ArrayLike) -> Any:
    """Entropy of dry, ash-free fuel.

    Parameters
    ----------
    atoms : mapping of str to float
        Atoms of each element in it, [mol].
    temperature : float or (states,) array
        [K].

    Returns
    -------
    float or (states,) array
        [J/K]; an estimate.
    """
    c, h, o, n, s = (atoms.get(symbol, 0.0) for symbol in "CHONS")
    T = np.asarray(temperature, float)
    at_25 = 0.0
    if c > 0.0:
        organic = 37.1653 - 31.4767 * exp(-0.564682 * h / (c + n))
        at_25 = c * (organic + (20.1145 * o + 54.3111 * n + 44.6712 * s) / (c + n))
    warmer = sum(w * (_einstein(theta / T) - _einstein(theta / STANDARD_TEMPERATURE)) for w, theta in _MODES)
    return at_25 + R * sum(atoms.values()) * warmer


def _einstein(z: Any) -> Any:
    """Entropy of an Einstein oscillator over R, at z = theta/T."""
    return z / np.expm1(z) - np.log(-np.expm1(-z))


@cache
def _oxides() -> dict[str, tuple[str, float]]:
    """Usual oxide of each metal, and how many atoms of it that holds."""
    found: dict[str, tuple[str, float]] = {}
    for name in SPECIES_OF_OXIDE.values():
        for symbol, count in load().get(name).elements.items():
            if symbol != "O":
                found.setdefault(symbol, (name, count))
    return found
