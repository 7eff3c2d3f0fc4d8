"""What an outcome of the solver means, and what to do about it."""

from __future__ import annotations

from typing import Final

SOLVED: Final = 0
NO_FEED: Final = 1
NO_ROOM: Final = 2
UNSETTLED: Final = 3
UNPROVED: Final = 4
TOO_HOT: Final = 5
TOO_COLD: Final = 6
IN_GAP: Final = 7

RESIDUAL_LIMIT: Final = 1.0e-10
GAP_LIMIT: Final = 1.0e-8
AFFINITY_LIMIT: Final = 1.0e-8
HELD_LIMIT: Final = 1.0e-9

MEANING: Final[dict[int, tuple[str, str]]] = {
    SOLVED: ("", ""),
    NO_FEED: ("The feed holds nothing.", "Give at least one species a positive amount."),
    NO_ROOM: (
        "The species that may form cannot hold the feed's elements, or meet the constraints, at this temperature.",
        "Allow more species, or check their ranges of temperature, the charge of the feed, and what is constrained.",
    ),
    UNSETTLED: (
        "The iteration did not settle.",
        "Move the temperature or pressure slightly; please report the state.",
    ),
    TOO_HOT: (
        "What is held asks for a temperature above all data.",
        "Give less heat or entropy, more feed, or more volume.",
    ),
    TOO_COLD: (
        "What is held asks for a temperature below all data.",
        "Give more heat or entropy, or check the sign of the heat and the temperatures of the feeds.",
    ),
    IN_GAP: (
        "What is held falls into a gap: a solid or liquid reaches the end of its data, and nothing may take its place.",
        "Allow the liquid or gas that replaces it, or hold other values.",
    ),
    UNPROVED: (
        "A composition was found, but its certificate does not hold.",
        "Move the temperature or pressure slightly; please report the state.",
    ),
}
"""For each status: the reason in a sentence, and a remedy."""
