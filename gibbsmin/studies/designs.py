"""Designs of studies: which values of the varied inputs go together in each state."""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from math import prod
from threading import Lock
from typing import Final, Literal

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]
Kind = Literal["grid", "in step", "latin hypercube", "sobol"]

RANDOM: Final = ("latin hypercube", "sobol")
"""Kinds that draw their points."""

BLOCK: Final = 2**16
"""Points of a Sobol sequence that are made at a time."""

_MAKING: Final = Lock()  # so that threads wait for one design, rather than each make it


@dataclass(frozen=True)
class Design:
    """How the values of several inputs are put together.

    Attributes
    ----------
    sizes : tuple of int
        Number of values of each input; in a random design the number of points, for each input.
    kind : str
        ``"grid"``: each value with each of the others, the last input varying fastest. ``"in step"``: the first of
        all, then the second of all. ``"latin hypercube"``: as many equal parts of each range as points, and a point
        in each part (McKay et al. 1979). ``"sobol"``: the sequence of Sobol (1967), scrambled (Owen 1998).
    seed : int
        Makes a random design the same again, with the same version of SciPy.
    """

    sizes: tuple[int, ...] = ()
    kind: Kind = "grid"
    seed: int = 0

    @property
    def shape(self) -> tuple[int, ...]:
        """Number of values of each input of a grid; else the number of points alone."""
        return self.sizes if self.kind == "grid" else self.sizes[:1]

    @property
    def states(self) -> int:
        """Number of states."""
        return prod(self.shape)

    def places(self, start: int, stop: int) -> list[NDArray[np.intp] | Floats]:
        """Say which value each input takes in some of the states, without making the others.

        Parameters
        ----------
        start, stop : int
            First state, from 0, and the one behind the last.

        Returns
        -------
        list of array (stop - start,)
            Of each input: numbers of its values, from 0; in a random design the share of its range, 0 to 1. A latin
            hypercube is kept whole while it is used, 8 bytes a point and input: 480 MB for 10^7 points of 6 inputs.
        """
        if self.kind == "grid":
            return list(np.unravel_index(np.arange(start, stop), self.sizes)) if self.sizes else []
        inputs = len(self.sizes)
        if self.kind == "in step":
            return [np.arange(start, stop)] * inputs
        with _MAKING:
            if self.kind == "latin hypercube":
                return list(_latin_hypercube(self.states, inputs, self.seed)[:, start:stop])
            first, last = start // BLOCK, (stop - 1) // BLOCK
            made = np.vstack([_sobol(inputs, self.seed, block) for block in range(first, last + 1)])
        return list(made[start - first * BLOCK : stop - first * BLOCK].T)


@lru_cache(maxsize=1)
def _latin_hypercube(points: int, inputs: int, seed: int) -> Floats:
    """Make a Latin hypercube, an input at a time to need little room, (inputs, points)."""
    from scipy.stats import qmc

    shares = np.empty((inputs, points))
    for row, one in zip(shares, np.random.SeedSequence(seed).spawn(inputs), strict=True):
        row[:] = qmc.LatinHypercube(1, seed=np.random.default_rng(one)).random(points)[:, 0]
    shares.setflags(write=False)
    return shares


@lru_cache(maxsize=4)
def _sobol(inputs: int, seed: int, block: int) -> Floats:
    """Make some of the points of a Sobol sequence, (BLOCK, inputs)."""
    from scipy.stats import qmc

    sequence = qmc.Sobol(inputs, seed=np.random.default_rng(seed))
    if block:
        sequence.fast_forward(block * BLOCK)
    shares = np.asarray(sequence.random(BLOCK), float)
    shares.setflags(write=False)
    return shares
