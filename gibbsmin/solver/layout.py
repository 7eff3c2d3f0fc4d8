"""The arrays that the solver works in, allocated once for a whole batch of states."""

from __future__ import annotations

from typing import Any, Final, NamedTuple

import numpy as np

from gibbsmin.compiled import allocating

# kind[i]: what coordinate i of the basis is
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


class Work(NamedTuple):
    """Arrays of one state; S species, m elements.

    What lies beyond the candidates in use means nothing. Long loops run over species, along rows, so
    that they compile to vector instructions.
    """

    A: Any  # (m, S) atoms of each element in each species
    count: Any  # (10,) int, see above
    value: Any  # (8,) see above
    offered: Any  # (S,) bool, the species that the last state offered as candidates
    chosen: Any  # (S,) bool, those that remained
    lacking: Any  # (m,) bool, the elements of which it had none
    g: Any  # (S,) of every species: G°/RT and what the first held condition adds; inf where it is no candidate
    e: Any  # (S,) of every species: H°/RT, at held volume U°/RT
    s: Any  # (S,) of every species: S°/R
    cp: Any  # (S,) of every species: Cp°/R, at held volume Cv°/R
    species: Any  # (S,) int, number of each candidate
    nu: Any  # (m, S) coordinates of each candidate, eq. (4)
    d: Any  # (S,)
    de: Any  # (S,) energy of forming each candidate from the basis, over RT
    u: Any  # (S,) ln activity
    n: Any  # (S,) mol, gas candidates
    row: Any  # (S,) a row in the making
    atoms: Any  # (S,) atoms in a formula unit, for scaling
    inverse: Any  # (m, m) B^-1
    basis: Any  # (m,) int, candidate in each place, or -1
    kind: Any  # (m,) int
    c: Any  # (m,) mol
    y: Any  # (m,)
    supply: Any  # (m,) sum over the gas of nu n where nu > 0, mol
    left: Any  # (m,) what a basis leaves of b, mol
    demand: Any  # (m,) c plus the sum of |nu| n where nu < 0, mol
    matrix: Any  # (m + 3, m + 3) eqs. (6) and (8)
    right: Any  # (m + 3,)
    step: Any  # (m + 3,)
    free: Any  # (m,) int, the free coordinates


@allocating
def new_work(A: Any) -> Work:
    """Allocate the arrays for the element matrix ``A`` (m, S)."""
    m, S = A.shape
    return Work(
        A,
        np.zeros(10, np.int64),
        np.zeros(8),
        np.zeros(S, np.bool_),
        np.zeros(S, np.bool_),
        np.zeros(m, np.bool_),
        np.zeros(S),
        np.zeros(S),
        np.zeros(S),
        np.zeros(S),
        np.zeros(S, np.int64),
        np.zeros((m, S)),
        np.zeros(S),
        np.zeros(S),
        np.zeros(S),
        np.zeros(S),
        np.zeros(S),
        np.zeros(S),
        np.zeros((m, m)),
        np.zeros(m, np.int64),
        np.zeros(m, np.int64),
        np.zeros(m),
        np.zeros(m),
        np.zeros(m),
        np.zeros(m),
        np.zeros(m),
        np.zeros((m + 3, m + 3)),
        np.zeros(m + 3),
        np.zeros(m + 3),
        np.zeros(m, np.int64),
    )
