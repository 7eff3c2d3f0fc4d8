"""Small trains to test with: steps by one line each."""

from __future__ import annotations

from collections.abc import Iterable, Mapping

import numpy as np
from numpy.typing import NDArray

from gibbsmin.states.system import System
from gibbsmin.studies.train.change import Change, Conditions, Settling, Unreacted
from gibbsmin.studies.train.graph import Node
from gibbsmin.studies.train.stream import Stream, Substances
from gibbsmin.studies.train.takes import Take
from gibbsmin.studies.train.train import Step
from gibbsmin.thermo.database import load

Floats = NDArray[np.float64]
T, P = 500.0, 1e5


class Plant:
    """Steps of a train whose streams hold these species, in so many states.

    Parameters
    ----------
    species : str
        Names, with blanks between them.
    states : int
    """

    def __init__(self, species: str, states: int = 1) -> None:
        self.substances = Substances([load().get(name) for name in species.split()])
        self.states = states

    def every(self, value: float | Floats) -> Floats:
        """Return a value in every state."""
        return np.broadcast_to(np.asarray(value, float), (self.states,)).copy()

    def stream(self, amounts: Mapping[str, float | Floats], temperature: float = T, pressure: float = P) -> Stream:
        """Return a stream."""
        n = np.zeros((self.states, len(self.substances)))
        for name, amount in amounts.items():
            n[:, self.substances.index[name]] = amount
        return Stream.of(self.substances, n, self.every(temperature), self.every(pressure))

    def take(self, name: str, of: str = "", **how: float | Floats) -> Take:
        """Return a side stream: ``share``, ``flow`` or ``ratio`` of the species, or of all."""
        which = np.array([not of or record.name in of.split() for record in self.substances.records])
        return Take(name, which, **{key: self.every(value) for key, value in how.items()})

    def step(
        self, name: str, inlets: str, recycled: str = "", change: Change | None = None, takes: Iterable[Take] = ()
    ) -> Step:
        """Return a step."""
        sides = tuple(takes)
        node = Node(
            name, (*inlets.split(), *recycled.split()), tuple(recycled.split()), tuple(take.name for take in sides)
        )
        return Step(node, change, sides)

    def unreacted(
        self, thermal: str = "heat", value: float | Floats = 0.0, pressure: float | Floats | None = None
    ) -> Unreacted:
        """Return a change without reaction; a valve or nothing unless said."""
        return Unreacted(
            Conditions(thermal, self.every(value), None if pressure is None else self.every(pressure)),
        )

    def converter(self, unconverted: str, conversion: float | Floats, inert: str = "") -> Settling:
        """Return a converter at 500 K of given conversion of a species of its inlet."""
        system = System.from_species(self.substances.records, inert.split(), constraints={"given": {unconverted: 1.0}})
        share = ({unconverted: 1.0}, self.every(1.0 - np.asarray(conversion)))
        return Settling(system, Conditions("temperature", self.every(T), self.every(P)), {"given": share})
