"""The steady state of recycles: a fixed point x = F(x) in every state, found by Anderson's method.

x holds what the recycled streams are: amounts, temperature and pressure. Anderson (J. ACM 12 (1965) 547) takes the
combination of the last few rounds whose misses F(x) - x come nearest to zero, and steps from there; with one round
before it is the secant method. It needs no derivatives, and a linear loop with d recycled unknowns is done in d + 1
rounds. What does not come home so is tried by Newton's method with Krylov steps (SciPy).
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Final

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]
States = NDArray[np.intp]
Round = Callable[[Floats, States], Floats]
"""From x (active, d) of some states to F(x)."""

CLOSE: Final = 1e-10
"""Change of an unknown in a round, relative to itself, at which it is steady."""

FINE: Final = 1e-12
"""The same, at which no further round is spent; else there is one more, because a loop adds up what it leaves open."""

MATTERS: Final = 1e-12
"""Share of a stream below which a species is rounding."""

ROUNDS: Final = 150
MEMORY: Final = 6


@dataclass(frozen=True)
class Steady:
    """The fixed point.

    Attributes
    ----------
    x : array (states, d)
    residual : array (states,)
        Largest change of an unknown that matters in the last round, relative to itself, [-].
    settled : (states,) bool array
    rounds : int
        Rounds that the slowest state took.
    """

    x: Floats
    residual: Floats
    settled: NDArray[np.bool_]
    rounds: int


def steady(first: Floats, scale: Callable[[Floats], Floats], evaluate: Round) -> Steady:
    """Find the steady state of the recycles.

    Parameters
    ----------
    first : array (states, d)
        Where to begin.
    scale : callable
        From x (active, d) to the amount of each unknown below which it does not matter.
    evaluate : callable
        One round through the train.

    Returns
    -------
    Steady
    """
    x = first.copy()
    residual = np.full(len(x), np.inf)
    settled = np.zeros(len(x), bool)
    past_x: list[Floats] = []
    past_f: list[Floats] = []
    rounds = 0
    while rounds < ROUNDS and not settled.all():
        rounds += 1
        active = np.flatnonzero(~settled)
        given = evaluate(x[active], active)
        miss = np.zeros_like(x)
        miss[active] = given - x[active]
        near = residual[active] <= CLOSE
        residual[active] = _residual(x[active], given, scale(given))
        settled[active] = residual[active] <= np.where(near, CLOSE, FINE)
        lost = active[np.isnan(residual[active])]
        settled[lost] = True  # a step was not certified: nothing more to find here
        if settled.all():
            break
        past_x.append(x.copy())
        past_f.append(miss)
        past_x, past_f = past_x[-MEMORY:], past_f[-MEMORY:]
        active = np.flatnonzero(~settled)
        x[active] = _next(
            [one[active] for one in past_x], [one[active] for one in past_f], scale(x[active] + miss[active])
        )
    for state in np.flatnonzero(~settled):
        x[state] = _newton(x[state], int(state), scale, evaluate)
        here = np.array([state])
        given = evaluate(x[here], here)
        residual[here] = _residual(x[here], given, scale(given))
    settled = residual <= CLOSE
    return Steady(x, residual, settled, rounds)


def _newton(x: Floats, state: int, scale: Callable[[Floats], Floats], evaluate: Round) -> Floats:
    """Try Newton's method with Krylov steps for one state; the best found, steady or not."""
    from scipy.optimize import NoConvergence, newton_krylov  # takes a while to import, and is seldom needed

    here = np.array([state])
    unit = np.maximum(np.abs(x), scale(x[None, :])[0])
    unit = np.where(unit > 0.0, unit, 1.0)

    def miss(y: Floats) -> Floats:
        point = np.maximum(y * unit, 0.0)[None, :]
        open_part: Floats = (evaluate(point, here) - point)[0] / unit
        return open_part

    try:
        found = newton_krylov(miss, x / unit, f_tol=0.1 * CLOSE, maxiter=30)
    except NoConvergence as error:
        found = error.args[0]
    except (ValueError, np.linalg.LinAlgError):
        return x
    answer: Floats = np.maximum(np.asarray(found, float) * unit, 0.0)
    return answer


def _residual(x: Floats, given: Floats, floor: Floats) -> Floats:
    """Largest relative change of an unknown that matters, (active,)."""
    size = np.maximum(np.abs(given), floor)
    change = np.divide(np.abs(given - x), size, out=np.zeros_like(x), where=~(size <= 0.0))  # nan stays nan
    return np.asarray(change.max(axis=1, initial=0.0))


def _next(xs: list[Floats], misses: list[Floats], floor: Floats) -> Floats:
    """Anderson's step from the last rounds, (active, d); not below zero for what was not below zero."""
    x, f = xs[-1], misses[-1]
    plain = x + f
    if len(xs) == 1:
        return plain
    weight = 1.0 / np.maximum(np.maximum(np.abs(plain), floor), np.finfo(float).tiny)  # (active, d)
    dF = np.stack([f - one for one in misses[:-1]], axis=-1)  # (active, d, m)
    dX = np.stack([x - one for one in xs[:-1]], axis=-1)
    A = dF * weight[:, :, None]
    b = f * weight
    gram = np.einsum("adm,adn->amn", A, A)
    right = np.einsum("adm,ad->am", A, b)
    size = np.einsum("amm->a", gram)
    gram = gram + 1e-14 * np.maximum(size, np.finfo(float).tiny)[:, None, None] * np.eye(gram.shape[-1])
    try:
        gamma = np.linalg.solve(gram, right[:, :, None])[:, :, 0]
    except np.linalg.LinAlgError:
        return plain
    new = plain - np.einsum("adm,am->ad", dX + dF, gamma)
    good = np.isfinite(new).all(axis=1) & (np.abs(gamma).sum(axis=1) < 1e6)
    new = np.where(good[:, None], new, plain)
    return np.where((new < 0.0) & (x >= 0.0) & (plain >= 0.0), 0.5 * plain, new)
