"""Standard-state functions of one polynomial piece, the only place where the formulas stand.

Nine coefficients a1..a7, b1, b2 (McBride, Zehe & Gordon, NASA TP-2002-211556, 2002, eqs. (4) to (6)); the
seven-coefficient pieces of NASA TM-4513 (McBride, Gordon & Reno 1993) are those with a1 = a2 = 0:

    Cp°/R = a1 T^-2 + a2 T^-1 + a3 + a4 T + a5 T^2 + a6 T^3 + a7 T^4                                        (1)
    H°/RT = -a1 T^-2 + a2 ln(T)/T + a3 + a4 T/2 + a5 T^2/3 + a6 T^3/4 + a7 T^4/5 + b1/T                     (2)
    S°/R  = -a1 T^-2/2 - a2/T + a3 ln T + a4 T + a5 T^2/2 + a6 T^3/3 + a7 T^4/4 + b2                        (3)

R is the one that the coefficients were fitted with. The functions hold for floats and for arrays, and are written
so that numba compiles them as they stand.
"""

from __future__ import annotations

from typing import Any

import numpy as np

COEFFICIENTS = 9


def heat_capacity_R(a: Any, T: Any) -> Any:
    """Cp°/R by eq. (1); ``a`` (9,), ``T`` [K]."""
    return (a[0] / T + a[1]) / T + a[2] + T * (a[3] + T * (a[4] + T * (a[5] + T * a[6])))


def enthalpy_RT(a: Any, T: Any, lnT: Any) -> Any:
    """H°/RT by eq. (2); ``a`` (9,), ``T`` [K], ``lnT`` its logarithm."""
    inverse = (a[1] * lnT + a[7] - a[0] / T) / T
    return inverse + a[2] + T * (a[3] / 2.0 + T * (a[4] / 3.0 + T * (a[5] / 4.0 + T * a[6] / 5.0)))


def entropy_R(a: Any, T: Any, lnT: Any) -> Any:
    """S°/R by eq. (3); ``a`` (9,), ``T`` [K], ``lnT`` its logarithm."""
    inverse = -(a[0] / (2.0 * T) + a[1]) / T
    return inverse + a[2] * lnT + a[8] + T * (a[3] + T * (a[4] / 2.0 + T * (a[5] / 3.0 + T * a[6] / 4.0)))


def constant_heat_capacity(a: tuple[float, ...], T: float) -> tuple[float, ...]:
    """Coefficients of the piece that goes on from ``a`` at ``T`` [K] with Cp° constant, H° and S° continuous."""
    lnT = float(np.log(T))
    cp = float(heat_capacity_R(a, T))
    b1 = T * (float(enthalpy_RT(a, T, lnT)) - cp)
    b2 = float(entropy_R(a, T, lnT)) - cp * lnT
    return (0.0, 0.0, cp, 0.0, 0.0, 0.0, 0.0, b1, b2)
