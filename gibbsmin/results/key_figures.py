"""The trade's numbers of a result: which sets there are, and what they are computed from."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.practice.figures.atmosphere import atmosphere
from gibbsmin.practice.figures.catalyst import catalyst
from gibbsmin.practice.figures.deposition import deposition
from gibbsmin.practice.figures.gas_quality import fuel_gas
from gibbsmin.practice.figures.gasification import gasification
from gibbsmin.practice.figures.halogens import halogens
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.kiln import kiln
from gibbsmin.practice.figures.reduction import reduction
from gibbsmin.practice.figures.reforming import reforming, shift, synthesis_gas
from gibbsmin.practice.figures.salts import salts
from gibbsmin.practice.figures.settled import FeedFacts, Settled
from gibbsmin.practice.figures.sulfur import sulfur
from gibbsmin.practice.figures.sulfuric_acid import sulfuric_acid
from gibbsmin.practice.figures.syntheses import ammonia, methanation, methanol
from gibbsmin.states.batch import Batch
from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]

SETS: Final[Mapping[str, Callable[[Settled], list[KeyFigure]]]] = {
    "reforming": reforming,
    "shift": shift,
    "synthesis gas": synthesis_gas,
    "methanation": methanation,
    "ammonia": ammonia,
    "methanol": methanol,
    "gasification": gasification,
    "fuel gas": fuel_gas,
    "sulfur": sulfur,
    "sulfuric acid": sulfuric_acid,
    "reduction": reduction,
    "furnace atmosphere": atmosphere,
    "catalyst": catalyst,
    "kiln": kiln,
    "salts": salts,
    "halogens": halogens,
    "deposition": deposition,
}
"""Sets of key figures by the name that a case asks for them with."""


def settled(batch: Batch, feeds: Mapping[str, FeedFacts], heat: Floats | None, is_flow: bool) -> Settled:
    """Gather what the trade's numbers are computed from.

    Parameters
    ----------
    batch : Batch
        The settled states.
    feeds : mapping of str to FeedFacts
        The feeds.
    heat : array (states,) or None
        Heat put in, [J or W].
    is_flow : bool
        Whether amounts are per second.

    Returns
    -------
    Settled
        The frozen part of a species counts with the species.
    """
    system, amounts = batch.system, batch.amounts
    by_name: dict[str, Floats] = {}
    records: dict[str, Species] = {}
    for k, record in enumerate(system.records):
        name = record.substance
        by_name[name] = by_name[name] + amounts[:, k] if name in by_name else amounts[:, k]
        records.setdefault(name, record)
    potentials = dict(zip(system.elements, batch.element_potentials.T, strict=True))
    return Settled(by_name, records, batch.temperature, batch.pressure, potentials, feeds, heat, is_flow)
