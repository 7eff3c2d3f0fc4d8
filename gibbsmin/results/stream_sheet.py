"""The streams of a train as people read them: frozen parts added to their species, the gas apart from the rest.

Numbers stand only where they are vouched for. A step that is not certified leaves nothing behind it; where recycles are
not steady, nothing is known but the feeds.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.studies.train.stream import Stream
from gibbsmin.studies.train.train import Solved

Floats = NDArray[np.float64]

WATER: Final = "H2O"


@dataclass(frozen=True)
class Entry:
    """A stream in every state; nan where nothing is known.

    Attributes
    ----------
    source, target : str
        The step that gives it, and the step that takes it; empty for a feed, and for what leaves the train.
    amounts : array (states, S)
        Of each substance, [mol or mol/s].
    gas : (S,) bool array
        Which substances are gases.
    water : (S,) bool array
        Which is water vapour.
    temperature, pressure, mass, enthalpy, entropy : array (states,)
        [K, Pa, kg, J, J/K, the last three or per second].
    atoms : mapping of str to array (states,)
        What a fuel by analysis brings beside, [mol or mol/s].
    """

    source: str
    target: str
    amounts: Floats
    gas: NDArray[np.bool_]
    water: NDArray[np.bool_]
    temperature: Floats
    pressure: Floats
    mass: Floats
    enthalpy: Floats
    entropy: Floats
    atoms: Mapping[str, Floats]

    @cached_property
    def total(self) -> Floats:
        """Amount of all substances, (states,), [mol or mol/s]."""
        return np.asarray(self.amounts.sum(axis=1))

    @cached_property
    def gas_total(self) -> Floats:
        """Amount of gas, (states,), [mol or mol/s]."""
        return np.asarray(self.amounts[:, self.gas].sum(axis=1))

    @cached_property
    def wet(self) -> Floats:
        """Mole fractions of the gas, (states, S), [-]; nan where there is no gas, and for what is no gas."""
        return _over(self.amounts, self.gas_total, self.gas)

    @cached_property
    def dry(self) -> Floats:
        """Mole fractions of the gas without its water vapour, (states, S), [-]; nan as for `wet`."""
        rest = self.gas & ~self.water
        return _over(self.amounts, np.asarray(self.amounts[:, rest].sum(axis=1)), rest)


@dataclass(frozen=True)
class StreamSheet:
    """All streams of a train: ``names`` of the substances, ``gas`` and ``molar_masses`` (S,), ``streams`` by name."""

    names: tuple[str, ...]
    gas: NDArray[np.bool_]
    molar_masses: Floats
    streams: Mapping[str, Entry]

    @property
    def feeds(self) -> list[str]:
        """Names of the streams that come in."""
        return [name for name, one in self.streams.items() if not one.source]

    @property
    def products(self) -> list[str]:
        """Names of the streams that leave."""
        return [name for name, one in self.streams.items() if not one.target]


def stream_sheet(solved: Solved) -> StreamSheet:
    """Lay out the streams of a train.

    Parameters
    ----------
    solved : Solved

    Returns
    -------
    StreamSheet
        Feeds first, then what each step gives, in the order of the steps.
    """
    substances = next(iter(solved.feeds.values())).substances
    names = tuple(dict.fromkeys(record.substance for record in substances.records))
    place = {name: k for k, name in enumerate(names)}
    adds = np.zeros((len(substances), len(names)))
    gas, masses = np.zeros(len(names), bool), np.zeros(len(names))
    for k, record in enumerate(substances.records):
        here = place[record.substance]
        adds[k, here], gas[here], masses[here] = 1.0, substances.gas[k], substances.molar_masses[k]
    water = np.array([name == WATER for name in names], bool)
    known = np.array([solved.steady is None or not reason for reason in solved.reasons], bool)
    source = {stream: name for name, step in solved.steps.items() for stream in step.outlets}
    target = {stream: name for name, step in solved.steps.items() for stream in step.inlets}
    found = {}
    for name, stream in solved.streams.items():
        ends = source.get(name, ""), target.get(name, "")
        found[name] = _entry(stream, ends, adds, gas, water, known | (name in solved.feeds))
    return StreamSheet(names, gas, masses, found)


def _entry(
    stream: Stream,
    ends: tuple[str, str],
    adds: Floats,
    gas: NDArray[np.bool_],
    water: NDArray[np.bool_],
    known: NDArray[np.bool_],
) -> Entry:
    """Lay out a stream whose states are ``known``."""
    known = known & np.isfinite(stream.amounts).all(axis=1)

    def kept(values: Floats) -> Floats:
        return np.where(known, values, np.nan)

    return Entry(
        *ends, np.where(known[:, None], stream.amounts @ adds, np.nan), gas, water,
        kept(stream.temperature), kept(stream.pressure), kept(stream.mass), kept(stream.enthalpy),
        kept(stream.entropy), {symbol: kept(n) for symbol, n in stream.atoms.items()},
    )  # fmt: skip


def _over(amounts: Floats, whole: Floats, which: NDArray[np.bool_]) -> Floats:
    """Amounts over a whole (states,), nan where that is nothing, and for what does not count."""
    out = np.full_like(amounts, np.nan)
    there = (whole > 0.0)[:, None] & which
    return np.asarray(np.divide(amounts, whole[:, None], out=out, where=there))
