"""Dew points of flue gas: where water, sulfuric acid and the hydrogen halides begin to wet a cold wall.

Published correlations, each in the units it was printed in. With natural logarithms and pressures in mmHg,

    1000/T = a + b ln p_w + c ln p + d ln p_w ln p                                                      (1)

is the form of Verhoff & Banchero (1974) for sulfuric acid, with the coefficients that Pierce (1977) reprints, and of
Kiang (1981) for HCl, HBr and HNO3. Okkes (1987) has atmospheres and decimal logarithms, θ in °C,

    θ = 203.25 + 27.6 lg p_w + 10.83 lg p_a + 1.06 (lg p_a + 8)^2.19                                    (2)

and ZareNezhad (2009) mmHg:  θ = 150 + 11.664 ln p_a + 8.1328 ln p_w - 0.383226 ln p_w ln p_a           (3)

p_w is the partial pressure of water, p_a that of SO3 and H2SO4 together. Coefficients of (1) for Kiang and of (3) are
from memory. Measured dew points scatter by some 10 K, and the correlations differ by 5 K (common practice, no source).
"""

from __future__ import annotations

from collections.abc import Callable
from typing import Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

from gibbsmin.constants import ATMOSPHERE
from gibbsmin.errors import InputError
from gibbsmin.practice.feeds.saturation import dew_temperature
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.tally import known, ratio

Floats = NDArray[np.float64]

_ZERO_CELSIUS: Final = 273.15
_MMHG: Final = ATMOSPHERE / 760.0
_VERHOFF_BANCHERO: Final = (2.276, -0.0294, -0.0858, 0.0062)
_KIANG: Final = {
    "HCl": (3.7368, -0.1591, -0.0326, 0.00269),
    "HBr": (3.5639, -0.1350, -0.0398, 0.00235),
    "HNO3": (3.6614, -0.1446, -0.0827, 0.00756),
}


def verhoff_banchero(water: ArrayLike, acid: ArrayLike) -> Floats:
    """Dew point of sulfuric acid by Verhoff & Banchero (1974), equation (1).

    Parameters
    ----------
    water, acid : array (states,)
        Partial pressures of H2O, and of SO3 and H2SO4 together, [Pa].

    Returns
    -------
    array (states,)
        [K]; nan where there is no water or no acid.

    Examples
    --------
    >>> round(float(verhoff_banchero(10132.5, 1.01325)) - 273.15, 1)  # 10 % and 10 ppmv at 1 atm
    137.3
    """
    p_w, p_a = _pair(water, acid)
    return _reciprocal(_VERHOFF_BANCHERO, p_w, p_a)


def okkes(water: ArrayLike, acid: ArrayLike) -> Floats:
    """Dew point of sulfuric acid by Okkes (1987), equation (2).

    Parameters
    ----------
    water, acid : array (states,)
        Partial pressures of H2O, and of SO3 and H2SO4 together, [Pa].

    Returns
    -------
    array (states,)
        [K]; nan where there is no water, or less acid than 1e-8 atm.
    """
    p_w, p_a = _pair(water, acid)
    lg_w, lg_a = np.log10(p_w / ATMOSPHERE), np.log10(p_a / ATMOSPHERE)
    above = np.where(lg_a > -8.0, lg_a + 8.0, np.nan)
    return np.asarray(_ZERO_CELSIUS + 203.25 + 27.6 * lg_w + 10.83 * lg_a + 1.06 * above**2.19)


def zarenezhad(water: ArrayLike, acid: ArrayLike) -> Floats:
    """Dew point of sulfuric acid by ZareNezhad (2009), equation (3).

    Parameters
    ----------
    water, acid : array (states,)
        Partial pressures of H2O, and of SO3 and H2SO4 together, [Pa].

    Returns
    -------
    array (states,)
        [K]; nan where there is no water or no acid.
    """
    p_w, p_a = _pair(water, acid)
    ln_w, ln_a = np.log(p_w / _MMHG), np.log(p_a / _MMHG)
    return np.asarray(_ZERO_CELSIUS + 150.0 + 11.664 * ln_a + 8.1328 * ln_w - 0.383226 * ln_w * ln_a)


def kiang(name: str, water: ArrayLike, acid: ArrayLike) -> Floats:
    """Dew point of HCl, HBr or HNO3 by Kiang (1981), equation (1).

    Parameters
    ----------
    name : str
        ``"HCl"``, ``"HBr"`` or ``"HNO3"``.
    water, acid : array (states,)
        Partial pressures, [Pa].

    Returns
    -------
    array (states,)
        [K]; nan where it does not lie above the dew point of water, below which the form is not valid.

    Raises
    ------
    InputError
        Another acid.
    """
    if name not in _KIANG:
        raise InputError(f"acid: expected {', '.join(_KIANG)}, got {name!r}")
    p_w, p_a = _pair(water, acid)
    return _above_water(_reciprocal(_KIANG[name], p_w, p_a), p_w)


SULFURIC: Final[dict[str, tuple[str, Callable[[ArrayLike, ArrayLike], Floats]]]] = {
    "verhoff_banchero": ("Verhoff and Banchero 1974", verhoff_banchero),
    "okkes": ("Okkes 1987", okkes),
    "zarenezhad": ("ZareNezhad 2009", zarenezhad),
}
"""Correlations for sulfuric acid by key: author and year, and the function of p_w and p_a."""


def dew_points(
    pressure: Floats, water: Floats, sulfuric: Floats, others: dict[str, Floats], basis: str
) -> list[KeyFigure]:
    """Dew points of a flue gas, those that it has.

    Parameters
    ----------
    pressure : array (states,)
        [Pa].
    water, sulfuric : array (states,)
        Mole fractions of H2O, and of SO3 and H2SO4 together, in the wet gas, [-].
    others : dict of str to array (states,)
        Mole fractions of HCl, HBr and HNO3 in the wet gas, [-]; those that it may hold.
    basis : str
        Where the SO3 comes from, in words.

    Returns
    -------
    list of KeyFigure
        That of water first; that of an acid only where a state has it above that of water.
    """
    p_w, p_a = water * pressure, sulfuric * pressure
    figures = [
        KeyFigure(
            "dew_point_water",
            "dew point of water",
            dew_temperature(p_w),
            "K",
            "degC",
            "Vapour pressure of pure water (IAPWS SR1-86, R14-08).",
        )
    ]
    for name, (author, function) in SULFURIC.items():
        figures.append(
            KeyFigure(
                f"dew_point_sulfuric_acid_{name}",
                f"dew point H2SO4, {author.split(' ')[0]}",
                _above_water(function(p_w, p_a), p_w),
                "K",
                "degC",
                f"{author}; SO3 {basis}; measured ones scatter by some 10 K.",
            )
        )
    for name, x in others.items():
        figures.append(
            KeyFigure(
                f"dew_point_{name.lower()}",
                f"dew point {name}, Kiang",
                kiang(name, p_w, x * pressure),
                "K",
                "degC",
                "Kiang 1981, coefficients from memory; only where it lies above that of water.",
            )
        )
    return [figures[0], *known(figures[1:])]


def _above_water(dew: Floats, water: Floats) -> Floats:
    """Keep dew points above that of water: where water wets the wall first, the acid dissolves in it."""
    return np.where(dew > dew_temperature(water), dew, np.nan)


def _reciprocal(coefficients: tuple[float, float, float, float], water: Floats, acid: Floats) -> Floats:
    """Evaluate equation (1), [K]."""
    a, b, c, d = coefficients
    ln_w, ln_a = np.log(water / _MMHG), np.log(acid / _MMHG)
    inverse = a + b * ln_w + c * ln_a + d * ln_w * ln_a
    return 1000.0 * ratio(np.ones(np.shape(inverse)), inverse)


def _pair(water: ArrayLike, acid: ArrayLike) -> tuple[Floats, Floats]:
    """Read two partial pressures; nan where there is nothing to take the logarithm of."""
    read = []
    for what, given in (("H2O", water), ("the acid", acid)):
        p = np.asarray(given, float)
        if np.any(p < 0.0):
            raise InputError(f"partial pressure of {what}: expected zero or above, got {float(np.nanmin(p)):g} Pa")
        read.append(np.where(p > 0.0, p, np.nan))
    return read[0], read[1]
