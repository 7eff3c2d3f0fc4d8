"""How numbers are written for people: few figures, one style everywhere, plain ASCII."""

from __future__ import annotations

from math import isfinite, log10
from typing import Final

_PREFIXES: Final = ((1e9, "G"), (1e6, "M"), (1e3, "k"), (1.0, ""), (1e-3, "m"))

MISSING: Final = "-"
"""Stands for a value that there is none of."""


def figures(value: float, count: int = 4) -> str:
    """Write ``value`` with ``count`` significant figures, without an exponent from 1e-4 to 1e7.

    Examples
    --------
    >>> figures(78.9134), figures(0.000123456), figures(3.2e-9), figures(120480.0)
    ('78.91', '0.0001235', '3.200e-09', '120500')
    """
    if not isfinite(value):
        return MISSING
    if value == 0.0:
        return "0"
    if not 1e-4 <= abs(value) < 1e7:
        return f"{value:.{count - 1}e}"
    rounded = float(f"{value:.{count - 1}e}")
    decimals = max(0, count - 1 - int(log10(abs(rounded)) // 1))
    return f"{rounded:.{decimals}f}"


def share(x: float) -> str:
    """Write a mole fraction as mole percent with 2 decimals, or below 0.1 % in ppm.

    Examples
    --------
    >>> share(0.494), share(0.00123), share(4.51e-5), share(2.3e-9)
    ('49.40', '0.12', '45.1 ppm', '0.0023 ppm')
    """
    if x >= 1e-3:
        return f"{100.0 * x:.2f}"
    if x <= 0.0:
        return "0"
    return f"{figures(1e6 * x, 3 if x >= 1e-6 else 2)} ppm"


def level(x: float) -> str:
    """Write a threshold given as mole fraction.

    Examples
    --------
    >>> level(1e-6), level(0.001)
    ('1 ppm', '0.1 %')
    """
    return f"{1e6 * x:.6g} ppm" if x < 1e-4 else f"{100.0 * x:.6g} %"


def prefixed(value: float, unit: str, count: int = 4) -> str:
    """Write a quantity with the SI prefix that keeps its number handy.

    Examples
    --------
    >>> prefixed(6.801e6, "W"), prefixed(-215000.0, "J")
    ('6.801 MW', '-215.0 kJ')
    """
    for scale, prefix in _PREFIXES:
        if abs(value) >= scale:
            return f"{figures(value / scale, count)} {prefix}{unit}"
    return f"{figures(value, count)} {unit}"


def plain(value: float) -> str:
    """Write a typed value with at most two decimals, below ten with four figures, and no idle zeros.

    Examples
    --------
    >>> plain(870.0), plain(426.54), plain(1143.15), plain(0.275), plain(-0.0)
    ('870', '426.54', '1143.15', '0.275', '0')
    """
    text = f"{value:.2f}" if not 0.0 < value < 10.0 else f"{float(f'{value:.4g}'):.10f}"
    text = text.rstrip("0").rstrip(".")
    return "0" if text == "-0" else text
