"""Vapour pressure of pure water over liquid and ice, and the temperature at which water begins to drop out.

Over liquid water: IAPWS SR1-86(1992), Wagner and Pruss 1993, 273.16 to 647.096 K. Over ice: IAPWS R14-08(2011), Wagner
and others 2011, 50 to 273.16 K. Both give 611.657 Pa at the triple point, so that a dew point and a frost point are one
function. Vapour beside other gases is taken as an ideal gas over pure water: what pressure adds (0.4 % at 1 atm and
20 degC, common practice, no source) is left out.
"""

from __future__ import annotations

from typing import Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

Floats = NDArray[np.float64]

TRIPLE_POINT: Final = 273.16
"""Of water, [K]; below it water vapour settles as ice."""

CRITICAL_TEMPERATURE: Final = 647.096
"""Of water, [K]."""

_CRITICAL_PRESSURE: Final = 22.064e6
_TRIPLE_PRESSURE: Final = 611.657
_COLDEST: Final = 50.0
_LIQUID: Final = (
    (-7.85951783, 1.0),
    (1.84408259, 1.5),
    (-11.7866497, 3.0),
    (22.6807411, 3.5),
    (-15.9618719, 4.0),
    (1.80122502, 7.5),
)
_ICE: Final = (
    (-21.2144006, 0.333333333e-2),
    (27.3203819, 1.20666667),
    (-6.10598130, 1.70333333),
)
_HALVINGS: Final = 60


def saturation_pressure(temperature: ArrayLike) -> Floats:
    """Vapour pressure of water, over ice below the triple point.

    Parameters
    ----------
    temperature : array
        [K].

    Returns
    -------
    array
        [Pa]; nan below 50 K and above the critical temperature, where there is none.

    Examples
    --------
    >>> round(float(saturation_pressure(298.15)), 1)
    3169.8
    """
    T = np.asarray(temperature, float)
    known = (T >= _COLDEST) & (T <= CRITICAL_TEMPERATURE)
    inside = np.where(known, T, TRIPLE_POINT)
    tau = np.maximum(1.0 - inside / CRITICAL_TEMPERATURE, 0.0)
    liquid = CRITICAL_TEMPERATURE / inside * sum(a * tau**power for a, power in _LIQUID)
    theta = np.minimum(inside / TRIPLE_POINT, 1.0)
    ice = sum(a * theta**power for a, power in _ICE) / theta
    pressure = np.where(
        inside < TRIPLE_POINT, _TRIPLE_PRESSURE * np.exp(np.asarray(ice)), _CRITICAL_PRESSURE * np.exp(liquid)
    )
    return np.asarray(np.where(known, pressure, np.nan), float)


def dew_temperature(vapour_pressure: ArrayLike) -> Floats:
    """Temperature at which water vapour begins to condense, or to settle as ice.

    Parameters
    ----------
    vapour_pressure : array
        Partial pressure of water, [Pa].

    Returns
    -------
    array
        [K]; nan where no temperature has this vapour pressure: none of it, or more than the critical pressure.
    """
    p = np.asarray(vapour_pressure, float)
    low, high = np.full(p.shape, _COLDEST), np.full(p.shape, CRITICAL_TEMPERATURE)
    known = (p >= saturation_pressure(_COLDEST)) & (p <= _CRITICAL_PRESSURE)
    for _ in range(_HALVINGS):
        middle = 0.5 * (low + high)
        below = saturation_pressure(middle) < p
        low, high = np.where(below, middle, low), np.where(below, high, middle)
    return np.asarray(np.where(known, 0.5 * (low + high), np.nan), float)
