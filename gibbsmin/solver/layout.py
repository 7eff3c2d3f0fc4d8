"""The arrays that the solver works in, allocated once for a whole batch of states."""

from __future__ import annotations

from typing import Any, Final, NamedTuple

import numpy as np

from gibbsmin.thermo.table import Pieces, new_pieces

# what[KIND, i]: what coordinate i of the basis is
FREE: Final = 0  # its activity is unknown
PRESENT: Final = 1  # a condensed species that is present: its activity is one, its amount is unknown
IDLE: Final = 2  # a row of A that depends on the others
EMPTY: Final = 3  # nothing can hold it: c is zero and no species takes it back; its activity is next to nothing

# count[...]
K: Final = 0  # candidate species
G: Final = 1  # of which the first G are gas
GAS: Final = 2  # 1 where a gas is present
STEPS: Final = 3  # Newton steps so far
CHANGES: Final = 4  # changes of the phase set so far
JOIN: Final = 5  # candidate that the next change puts into the basis
REUSES: Final = 6  # states since the coordinates were made afresh; -1 if they are not to be used again

MODE: Final = 7  # what is held beside pressure or volume, see below
VOLUME: Final = 8  # 1 where the volume is held, 0 where the pressure is
MIXED: Final = 10  # 1 where the state is a mixture of those on the two sides of a jump of energy, see `one_state`
SIDES: Final = 11  # which sides of the bracket are known: 1 the cold, 2 the warm one
HISTORY: Final = 12  # states before whose unknowns are kept: none, one, or two on the same phases
EXTRA: Final = 9  # condensed candidate that is present beside the basis, at a temperature where two coexist; or -1

# count[MODE]
TEMPERATURE: Final = 0
ENERGY: Final = 1  # the enthalpy at held pressure, the internal energy at held volume
ENTROPY: Final = 2

# value[...]
N: Final = 0  # amount of gas, mol (1 where there is none: the incipient gas; 1 at held volume, where n = exp(u))
X: Final = 1  # sum of exp(u) over the gas
T: Final = 2  # temperature, K
FIRST: Final = 3  # ln(P/P°), or ln(R/(P° V)) in J/K and mol: what the first held condition adds to g of a gas
SECOND: Final = 4  # what the second held condition asks: H/R or U/R, mol K, or S/R, mol
MORE: Final = 5  # amount of the candidate count[EXTRA], mol
COLD: Final = 6  # lowest and highest temperature of any species' data, K
WARM: Final = 7
SHARE: Final = 8  # share of the warm side in a mixed state
LOW: Final = 9  # bracket of T
HIGH: Final = 10
WIDTH: Final = 11  # relative width of the bracket at which the joint iteration is tried next
COLD_EXCESS: Final = 12  # E of eq. (7) at the two sides
WARM_EXCESS: Final = 13

# at[...]: rows of what belongs to a place of the basis
C: Final = 0  # mol
Y: Final = 1  # ln activity of the basis species
SUPPLY: Final = 2  # sum over the gas of nu n where nu > 0, mol
DEMAND: Final = 3  # c plus the sum of |nu| n where nu < 0, mol
LEFT: Final = 4  # what a basis leaves of b, mol
RIGHT: Final = 5  # right-hand side of eq. (6) and (8), then the step; three more than places
STEP: Final = 6  # scale of its rows
LAST: Final = 7  # y, ln(N / sum of b) and ln T of the last state, and of the one before, see `continuation`
BEFORE: Final = 8
POINT: Final = 9  # conditions of this state, of the last, and of the one before
LAST_POINT: Final = 10
BEFORE_POINT: Final = 11

# what[...]: rows of integers that belong to a place of the basis
KIND: Final = 0
BASIS: Final = 1  # candidate in the place, or -1
LIST: Final = 2  # the free places, one after the other

# of[...]: rows of what belongs to a candidate
D: Final = 0  # d of eq. (4)
DE: Final = 1  # energy of forming it from the basis, over RT, eq. (7)
U: Final = 2  # ln activity
AMOUNT: Final = 3  # mol, gas candidates
ROW: Final = 4  # a row in the making
ATOMS: Final = 5  # atoms in a formula unit, for scaling

# std[...]: rows of what belongs to a species at the present T
GIBBS: Final = 0  # G°/RT and what the first held condition adds; inf where it is no candidate
HEAT: Final = 1  # H°/RT, at held volume U°/RT
DISORDER: Final = 2  # S°/R
CAPACITY: Final = 3  # Cp°/R, at held volume Cv°/R
COLD_SIDE: Final = 4  # amounts in the last state of held T that had less energy than is asked for, mol
WARM_SIDE: Final = 5  # and in the last that had more
OFFSET: Final = 6  # what is added to g beside the standard potential


class Work(NamedTuple):
    """Arrays of one state; S species, m elements.

    What lies beyond the candidates in use means nothing. Long loops run over species, along rows, so that they compile
    to vector instructions. Few arrays, because each costs every function that gets them time to compile.
    """

    A: Any  # (m, S) atoms of each element in each species
    b: Any  # (m,) element amounts of the state, scaled to a sum of about one
    count: Any  # (13,) int, see above
    value: Any  # (14,) see above
    offered: Any  # (S,) bool, the species that the last state offered as candidates
    chosen: Any  # (S,) bool, those that remained
    lacking: Any  # (m,) bool, the elements of which it had none
    species: Any  # (S,) int, number of each candidate
    std: Any  # (7, S) see above
    of: Any  # (6, S) see above
    nu: Any  # (m, S) coordinates of each candidate, eq. (4)
    at: Any  # (12, m + 3) see above
    what: Any  # (3, m) int, see above
    inverse: Any  # (m, m) B^-1
    matrix: Any  # (m + 3, m + 3) eqs. (6) and (8)
    raw: Any  # (S,) room for `exponential`
    bits: Any  # (S,) the same memory as integers
    pieces: Pieces  # the polynomials of the range in which T is


def new_work(A: Any) -> Work:
    """Allocate the arrays for the element matrix ``A`` (m, S)."""
    m, S = A.shape
    raw = np.zeros(S)
    return Work(
        A,
        np.zeros(m),
        np.zeros(13, np.int64),
        np.zeros(14),
        np.zeros(S, np.bool_),
        np.zeros(S, np.bool_),
        np.zeros(m, np.bool_),
        np.zeros(S, np.int64),
        np.zeros((7, S)),
        np.zeros((6, S)),
        np.zeros((m, S)),
        np.zeros((12, m + 3)),
        np.zeros((3, m), np.int64),
        np.zeros((m, m)),
        np.zeros((m + 3, m + 3)),
        raw,
        raw.view(np.int64),
        new_pieces(S),
    )
