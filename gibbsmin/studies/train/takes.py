"""What a step parts from its outlet: a share, a flow, or a phase or species of it."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from gibbsmin.studies.train.stream import Stream

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class Take:
    """A side stream.

    Attributes
    ----------
    name : str
        Of the side stream.
    of : (S,) bool array
        The substances that it takes from.
    share : array (states,) or None
        Part of them that it takes, [-].
    flow : array (states,) or None
        Instead: amount that it takes, [mol or mol/s].
    ratio : array (states,) or None
        Instead: what it takes over what it leaves of them, [-].
    """

    name: str
    of: NDArray[np.bool_]
    share: Floats | None = None
    flow: Floats | None = None
    ratio: Floats | None = None

    def __call__(self, outlet: Stream, states: NDArray[np.intp]) -> tuple[Stream, Stream]:
        """Part a stream.

        Parameters
        ----------
        outlet : Stream
        states : array (states,) of int
            Which states these are.

        Returns
        -------
        taken, rest : Stream
            Both at the temperature and pressure of the whole. A flow that is more than there is takes all.
        """
        n = np.where(self.of, outlet.amounts, 0.0)
        if self.share is not None:
            part = self.share[states]
        elif self.ratio is not None:
            part = self.ratio[states] / (1.0 + self.ratio[states])
        else:
            there = n.sum(axis=1)
            wanted = np.zeros(len(states)) if self.flow is None else self.flow[states]
            part = np.minimum(np.divide(wanted, there, out=np.ones_like(there), where=there > 0.0), 1.0)
        taken = _of(outlet, n * part[:, None])
        rest = _of(outlet, outlet.amounts - taken.amounts)
        return taken, replace(rest, enthalpy=outlet.enthalpy - taken.enthalpy)


def _of(outlet: Stream, amounts: Floats) -> Stream:
    """Make a stream of other amounts at the same temperature and pressure; nothing where these are not known."""
    known = np.isfinite(outlet.temperature) & np.isfinite(amounts).all(axis=1)
    T, P = np.where(known, outlet.temperature, 298.15), np.where(known, outlet.pressure, 1e5)
    made = Stream.of(outlet.substances, np.where(known[:, None], amounts, 0.0), T, P)
    blank = np.where(known, 0.0, np.nan)
    return Stream(
        made.substances, amounts, outlet.temperature, outlet.pressure, made.enthalpy + blank, made.entropy + blank
    )
