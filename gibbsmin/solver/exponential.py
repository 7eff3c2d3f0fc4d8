"""Exponentials of a whole row at once: as exact as the library's, in vector instructions.

exp(u) = 2^k exp(r) with k the integer nearest to u/ln 2 and r the rest, at most half of ln 2, for which the power
series is exact to rounding after its fourteenth term. Adding 1.5 2^52 rounds to an integer and leaves it in the low
bits of the sum; shifted into the place of the exponent, they are 2^k.
"""

from __future__ import annotations

from typing import Any, Final

from gibbsmin.compiled import inlined

FLOOR: Final = -700.0  # u below which the exponential counts as zero: it would not be a normal number
CEILING: Final = 300.0  # largest u that is taken at its word, so that nothing overflows

LOG2_E: Final = 1.4426950408889634
LN_2: Final = (0.6931471803691238, 1.9082149292705877e-10)  # its first 32 bits, and the rest
ROUND: Final = 6755399441055744.0  # 1.5 2^52
BIAS: Final = 1023
PLACE: Final = 52


@inlined
def exponentials(count: int, u: Any, x: Any, raw: Any, bits: Any) -> None:
    """Fill ``x`` with exp(u), zero below FLOOR; ``raw`` and ``bits`` are one memory, as floats and as integers."""
    for j in range(count):
        v = min(max(u[j], FLOOR), CEILING)
        t = v * LOG2_E + ROUND
        raw[j] = t
        k = t - ROUND
        r = (v - k * LN_2[0]) - k * LN_2[1]
        p = 1.0 / 479001600.0 + r * (1.0 / 6227020800.0)
        p = 1.0 / 3628800.0 + r * (1.0 / 39916800.0 + r * p)
        p = 1.0 / 40320.0 + r * (1.0 / 362880.0 + r * p)
        p = 1.0 / 720.0 + r * (1.0 / 5040.0 + r * p)
        p = 1.0 / 24.0 + r * (1.0 / 120.0 + r * p)
        p = 0.5 + r * (1.0 / 6.0 + r * p)
        x[j] = 1.0 + r * (1.0 + r * p)
    for j in range(count):
        bits[j] = (bits[j] + BIAS) << PLACE
    for j in range(count):
        x[j] = x[j] * raw[j] if u[j] > FLOOR else 0.0
