"""Numbers of solids grown from a gas: yield, what is etched, halogen to hydrogen, how far solids are supersaturated.

Common practice, no source. An element's yield is what its solids gained over what came in as gas:

    yield = (atoms in solids and liquids - atoms fed in them) / (atoms fed as gas)                         (1)

Below zero the gas etches. The supersaturation of a solid that may not form, or has not formed, is its activity; its
logarithm is the affinity in units of RT.
"""

from __future__ import annotations

from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.elements import ATOMIC_WEIGHT, parse_formula, split_name
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.potentials import ln_activity, usable
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.practice.figures.tally import key, known, ratio
from gibbsmin.thermo.database import load
from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]

_CARRIERS: Final = frozenset(("H", "D", "N", "O", "F", "Cl", "Br", "I", "He", "Ne", "Ar", "Kr", "Xe"))
"""Elements of carrier gases and reactants, of which a yield says nothing."""

_HALOGENS: Final = ("F", "Cl", "Br", "I")

_NAMED: Final = 4
"""So many solids are named as supersaturated, the most supersaturated first."""


def deposition(settled: Settled) -> list[KeyFigure]:
    """Numbers of a deposition or an etching step.

    Parameters
    ----------
    settled : Settled
        Feeds and what they settle to.

    Returns
    -------
    list of KeyFigure
        Those that any state has.
    """
    return known([*_halogen(settled), *_yields(settled), *_supersaturation(settled)])


def _halogen(settled: Settled) -> list[KeyFigure]:
    """Halogen to hydrogen of the feeds, which decides between growth and etching."""
    hydrogen = settled.fed_element("H")
    return [
        KeyFigure(
            f"{key(symbol)}_to_h_fed",
            f"{symbol}/H fed",
            ratio(settled.fed_element(symbol), hydrogen),
            note="Atoms in all feeds.",
        )
        for symbol in _HALOGENS
        if np.any(settled.fed_element(symbol) > 0.0)
    ]


def _yields(settled: Settled) -> list[KeyFigure]:
    """Yield of every element that a solid may hold, and what of a solid that was fed is gone."""
    solids = [name for name, record in settled.records.items() if record.condensed]
    symbols = dict.fromkeys(symbol for name in solids for symbol in settled.records[name].elements)
    found = []
    for symbol in symbols:
        if symbol in _CARRIERS:
            continue
        before, after = _fed_condensed(settled, symbol), settled.element(symbol, solids)
        found += [
            KeyFigure(
                f"yield_{key(symbol)}",
                f"{symbol} deposited",
                ratio(after - before, settled.fed_element(symbol) - before),
                shown="%",
                note="Gained by solids and liquids, of what came in as gas; below zero the gas etches.",
            ),
            KeyFigure(
                f"etched_{key(symbol)}",
                f"{symbol} etched",
                ratio(before - after, before),
                shown="%",
                note="Of what came in as a solid or liquid; below zero it grew.",
            ),
        ]
    return found


def _supersaturation(settled: Settled) -> list[KeyFigure]:
    """Solids and liquids that the gas could not, or may not, deposit, the most supersaturated first."""
    potentials = settled.element_potentials.items()
    elements = [symbol for symbol, value in potentials if symbol in ATOMIC_WEIGHT and np.isfinite(value).any()]
    wanted = set(elements) - _CARRIERS
    candidates = {record.name: record for record in load().with_elements(elements)} | dict(settled.records)
    nearest: list[tuple[float, Species, Floats]] = []
    for record in candidates.values():
        if not record.condensed or not record.elements.keys() & wanted:
            continue
        away = ~(settled.amount(record.name) > 0.0) & usable(record, settled.temperature)
        affinity = np.where(away, ln_activity(settled, record), np.nan)
        if np.isfinite(affinity).any():
            nearest.append((float(np.nanmax(affinity)), record, affinity))
    nearest.sort(key=lambda item: -item[0])
    return [
        KeyFigure(
            f"affinity_{key(record.name)}",
            f"ln a of {record.name}",
            affinity,
            note=f"Supersaturation of what {_why(settled, record.name)}; above zero the gas could deposit it.",
        )
        for _, record, affinity in nearest[:_NAMED]
    ]


def _why(settled: Settled, name: str) -> str:
    """Say why a solid is away."""
    return "has not formed" if name in settled.records else "was not allowed to form"


def _fed_condensed(settled: Settled, symbol: str) -> Floats:
    """Atoms of an element that were fed in solids and liquids, (states,), [mol or mol/s]."""
    total = settled.zero
    for feed in settled.feeds.values():
        for name, amount in feed.amounts.items():
            said = split_name(name)
            if said.phase != "gas":
                total = total + parse_formula(said.formula)[0].get(symbol, 0.0) * amount
    return total
