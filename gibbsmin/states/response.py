"""How a settled state answers small changes of temperature and volume: heat capacities, expansion, sound speeds.

The problem
-----------
Indices: i element, j gas species, c condensed species that is present, k basis species. Symbols: A (E, S) atoms of i in
j; n amounts [mol], N of the gas; u_j = U°_j/RT, that is H°_j/RT - 1 of a gas and H°_c/RT of a condensed species, whose
volume is neglected; cv_j likewise; c_j = n_j/V; lam element potentials; t = d ln T, v = d ln V.

The conditions of equilibrium, ln(c_j RT/P°) = a_j.lam - G°_j/RT and 0 = a_c.lam - G°_c/RT, change with T and V by

    d ln c_j = a_j.dlam + u_j t     for the gas,      0 = a_c.dlam + u_c t     for what is condensed            (1)

and the balances A n = b by

    sum_j a_j n_j (d ln c_j + v) + sum_c a_c dn_c = 0                                                          (2)

(Smith & Missen, Chemical Reaction Equilibrium Analysis, Wiley 1982, ch. 8; Zeleznik & Gordon, Ind. Eng. Chem. 60 (6)
(1968) 27). Volume, and not pressure, is the second variable here: two phases of one substance then need no special
case. As in `gibbsmin.solver` everything is written in the coordinates of a basis B, here of all condensed species that
are present and of the largest amounts in the gas, with nu_j = B^-1 a_j, Du_j = u_j - nu_j.u_B, and w_k = d ln c_k for
the basis species of the gas, which leaves

    d ln c_j = nu_j.w + Du_j t                                                                                 (3)
    M w = -r t - q v,   M = sum_j n_j nu_j nu_j^T,   q = sum_j n_j nu_j,   r = sum_j n_j Du_j nu_j             (4)

with nu cut to the rows of the gas. Divided by the roots of the amounts of the basis species, M is the identity and
something positive, with entries that do not grow however rare a species is, since none outside the basis is more
abundant than those it is made of: (4) is solved without loss.

What follows, with z_j = nu_j.w + Du_j at t = 1, v = 0:

    Cv/R = sum_j n_j cv_j + sum_c n_c cv_c + sum_j n_j z_j^2                                                   (5)
    beta = (d ln P/d ln T)_V = 1 + sum_j n_j z_j / N,     kappa = -(d ln P/d ln V)_T = q.M^-1 q / N            (6)
    Cp = Cv + N R beta^2/kappa,   (d ln V/d ln T)_P = beta/kappa,   (d ln P/d ln rho)_S = kappa + N R beta^2/Cv  (7)

Frozen properties are those with z = 0, beta = kappa = 1. kappa is zero where the gas has the composition of the phases
that it forms from (boiling, dissociation of one solid into its vapours): there Cp is infinite, and Cv is not. Where the
condensed species that are present depend on one another (melting, two crystal forms) both are infinite.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.constants import R
from gibbsmin.states.system import Array, System
from gibbsmin.thermo.polynomial import enthalpy_RT, heat_capacity_R
from gibbsmin.thermo.table import pieces_at

DEPENDENT: Final = 1.0e-9
"""Part of a column of A beside those of the basis, below which it is rounding [-]."""

PLATEAU: Final = 1.0e-14
"""kappa below which the gas has the composition of the condensed phases: what balances leave open squared [-]."""

BETWEEN: Final = 1.0e-8
"""Enthalpy beyond that of the species, relative to its terms, that tells of one between two crystal forms [-]."""


@dataclass(frozen=True)
class Response:
    """Properties of a whole state, gas and condensed phases moving along with each other.

    Attributes
    ----------
    heat_capacity, frozen_heat_capacity : float
        At constant pressure [J/K], with the composition following and with it frozen.
    heat_capacity_constant_volume : float
        With the composition following [J/K].
    thermal_expansion : float
        (d ln V/dT)_P [1/K].
    compressibility : float
        -(d ln V/dP)_T [1/Pa].
    isentropic_exponent, frozen_isentropic_exponent : float
        (d ln P/d ln rho)_S [-].
    sound_speed, frozen_sound_speed : float
        [m/s].
    """

    heat_capacity: float
    frozen_heat_capacity: float
    heat_capacity_constant_volume: float = np.nan
    thermal_expansion: float = np.nan
    compressibility: float = np.nan
    isentropic_exponent: float = np.nan
    frozen_isentropic_exponent: float = np.nan
    sound_speed: float = np.nan
    frozen_sound_speed: float = np.nan


def response(system: System, temperature: float, pressure: float, amounts: Array, enthalpy: float) -> Response:
    """Work out how a state at equilibrium answers small changes.

    Parameters
    ----------
    system : System
    temperature, pressure : float
        [K], [Pa].
    amounts : (S,) array
        Those of the state, [mol].
    enthalpy : float
        Of the state [J]. Where a species is between two crystal forms of its record, it says more than ``amounts``.

    Returns
    -------
    Response
        Infinite heat capacities on a plateau; without a gas, nan for all that needs a volume. Where the temperature
        cannot change (melting), the expansion has two values and is nan.
    """
    T, P = temperature, pressure
    here = np.flatnonzero(amounts > 0.0)
    n, gas = amounts[here], system.gas[here]
    h, cp = _standard_functions(system, here, T)  # H°/RT and Cp°/R, (present,)
    terms = R * T * float(n @ (np.abs(h) + 1.0))
    melting = abs(enthalpy - R * T * float(n @ h)) > BETWEEN * terms
    frozen = R * float(n @ cp)
    N, mass = float(n[gas].sum()), float(n @ system.molar_masses[here])
    moving = ~system.is_inert[here]  # what is inert has z = 0, and adds its amount to q.M^-1 q
    idle = float(n[gas & ~moving].sum())
    n, gas, h, A = n[moving], gas[moving], h[moving], system.element_matrix[:, here[moving]]
    basis, dependent = _basis(A, gas, n)
    melting = melting or dependent
    if not N:
        return Response(np.inf if melting else frozen, frozen)

    nu = np.linalg.lstsq(A[:, basis], A[:, gas], rcond=None)[0]  # (r, gases)
    u = h - gas
    Du = u[gas] - u[basis] @ nu  # (gases,)
    free = gas[basis]
    D = np.sqrt(n[basis][free])
    X = nu[free] * np.sqrt(n[gas]) / D[:, None]  # scaled by D: M = X X^T, eq. (4)
    M, q, r = X @ X.T, X @ np.sqrt(n[gas]), X @ (np.sqrt(n[gas]) * Du)
    solved = np.linalg.solve(M, np.column_stack((r, q))) if free.any() else np.empty((0, 2))
    z = Du - (nu[free] / D[:, None]).T @ solved[:, 0]
    kappa = (float(q @ solved[:, 1]) + idle) / N  # eq. (6)
    beta = 1.0 + float(n[gas] @ z) / N
    Cv = np.inf if melting else frozen - N * R + R * float(n[gas] @ z**2)  # eq. (5)
    flat = kappa < PLATEAU
    exponent = kappa + N * R * beta**2 / Cv  # eq. (7)
    frozen_exponent = frozen / (frozen - N * R)
    specific_work = N * R * T / mass  # P/rho, J/kg
    return Response(
        heat_capacity=np.inf if flat else Cv + N * R * beta**2 / kappa,
        frozen_heat_capacity=frozen,
        heat_capacity_constant_volume=Cv,
        thermal_expansion=np.nan if melting else np.inf if flat else beta / (kappa * T),
        compressibility=np.inf if flat else 1.0 / (kappa * P),
        isentropic_exponent=exponent,
        frozen_isentropic_exponent=frozen_exponent,
        sound_speed=float(np.sqrt(exponent * specific_work)),
        frozen_sound_speed=float(np.sqrt(frozen_exponent * specific_work)),
    )


def _standard_functions(system: System, here: NDArray[np.intp], T: float) -> tuple[Array, Array]:
    """H°/RT and Cp°/R at ``T`` [K] of the species numbered in ``here``."""
    table = system.table
    a, scale = table.coefficients[pieces_at(table, T)[here]].T, table.scale[here]
    return scale * enthalpy_RT(a, T, np.log(T)), scale * heat_capacity_R(a, T)


def _basis(A: Array, gas: NDArray[np.bool_], n: Array) -> tuple[NDArray[np.intp], bool]:
    """Columns of ``A`` that span it, what is condensed before gas and the abundant before the rare.

    Also whether condensed species depend on one another, which holds the temperature where it is.
    """
    chosen: list[int] = []
    directions = np.empty((0, A.shape[0]))
    melting = False
    for j in np.lexsort((-n, gas)):
        if gas[j] and len(chosen) == A.shape[0]:
            break
        rest = A[:, j]
        for _ in range(2):  # Gram-Schmidt, twice for accuracy
            rest = rest - directions.T @ (directions @ rest)
        size = float(np.linalg.norm(rest))
        if size > DEPENDENT * float(np.linalg.norm(A[:, j])):
            chosen.append(int(j))
            directions = np.vstack((directions, rest / size))
        elif not gas[j]:
            melting = True
    return np.array(chosen, np.intp), melting
