"""Numbers of arrays as numbers of JSON."""

from __future__ import annotations

import math
from typing import Any


def plain(value: Any) -> float | None:
    """Turn a number of an array into one of JSON; what is not finite into None.

    Examples
    --------
    >>> plain(1.5), plain(float("nan"))
    (1.5, None)
    """
    return float(value) if math.isfinite(value) else None
