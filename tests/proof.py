"""A certificate worked out again in plain numpy, from amounts and element potentials alone, without the solver."""

from typing import Any, NamedTuple

import numpy as np

from gibbsmin.constants import STANDARD_PRESSURE
from gibbsmin.states.system import System


class Proof(NamedTuple):
    """Largest relative imbalance of an element; duality gap a mole [RT]; largest violation of a potential [RT]."""

    residual: float
    gap: float
    affinity: float

    @property
    def holds(self) -> bool:
        """Whether it is within what is promised for every state."""
        return self.residual <= 1.0e-10 and self.gap <= 1.0e-8 and self.affinity <= 1.0e-8


def prove(system: System, T: float, P: float, b: Any, n: Any, lam: Any) -> Proof:
    """Judge amounts ``n`` (S,) [mol] and potentials ``lam`` (E,) for element amounts ``b`` (E,) [mol].

    A pair is optimal when A n = b, n >= 0, mu_j >= a_j.lam for every species that may form, with equality where it is
    present, and the mole fractions exp(a_j.lam - g_j) of the gas sum to one (to less where there is no gas).
    """
    A, gas = system.element_matrix, system.gas
    b, n = np.asarray(b, float), np.asarray(n, float)
    assert (n >= 0.0).all()
    assert np.isfinite(n).all()
    known = np.isfinite(lam)
    usable = np.array([record.usable[0] <= T <= record.usable[1] for record in system.records])
    allowed = usable & ~(A[~known] != 0.0).any(axis=0)
    assert not n[~allowed].any()
    turnover = np.where(b != 0.0, abs(b), abs(A) @ n)
    imbalance = abs(A @ n - b)
    residual = float((imbalance[turnover > 0.0] / turnover[turnover > 0.0]).max(initial=0.0))
    g = system.standard_potentials(T) + np.where(gas, np.log(P / STANDARD_PRESSURE), 0.0)
    u = lam[known] @ A[known] - g  # ln of what the activity (the mole fraction, in the gas) is by the potentials
    total = n[gas].sum()
    ln_x = np.zeros_like(n)
    here = n > 0.0
    ln_x[gas & here] = np.log(n[gas & here] / total)
    gap = abs(n[here] @ (g + ln_x)[here] - b[known] @ lam[known]) / n.sum()
    exact = n > 1.0e-300  # below it numbers lose their digits
    off = [0.0, *abs(u - ln_x)[exact], *u[allowed & ~gas & ~here]]
    if (allowed & gas).any():
        ln_sum = np.log(np.exp(np.minimum(u[allowed & gas], 700.0)).sum() + 1e-300)
        off.append(abs(ln_sum) if total > 0.0 else ln_sum)
    return Proof(residual, float(gap), float(max(off)))
