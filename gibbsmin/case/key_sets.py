"""Names of the sets of key figures that a case may ask for."""

from __future__ import annotations

from typing import Literal

KeySet = Literal[
    "reforming",
    "shift",
    "synthesis gas",
    "methanation",
    "ammonia",
    "methanol",
    "gasification",
    "fuel gas",
    "sulfur",
    "sulfuric acid",
    "reduction",
    "furnace atmosphere",
    "catalyst",
    "kiln",
    "salts",
    "halogens",
    "deposition",
]
"""Sets of key figures, those of `gibbsmin.results.key_figures`."""
