"""Which condensed species are present, and whether there is a gas.

Two things stay true: condensed species that are present stand in the basis (so that their number never exceeds what
the phase rule allows), and every change is a step of the simplex method, with the gas as one more column whose
composition is the present one. The functions here find the change; `minimize` carries it out: candidate
``w.count[JOIN]`` goes into a place of the basis and becomes present (a condensed species) or free (a gas species).
"""

from __future__ import annotations

from typing import Any, Final

import numpy as np

from gibbsmin.compiled import inlined
from gibbsmin.solver.energy import plateau
from gibbsmin.solver.gas import present_amount
from gibbsmin.solver.layout import (
    AMOUNT,
    ATOMS,
    BASIS,
    DEMAND,
    EMPTY,
    EXTRA,
    FREE,
    GAS,
    IDLE,
    JOIN,
    KIND,
    MODE,
    MORE,
    PRESENT,
    SUPPLY,
    TEMPERATURE,
    VOLUME,
    C,
    D,
    G,
    K,
    N,
    U,
    Work,
    X,
    Y,
)

APPEARS: Final = 1.0e-11  # ln activity above which an absent phase joins
VANISHES: Final = 1.0e-14  # share of its coordinate's turnover below which an amount is rounding
NOTHING: Final = -3000.0  # ln activity of what cannot be held at all
START: Final = -20.0  # first ln activity of a free species of which there is none at first
POOR: Final = 1.0e-3  # share of its coordinate's turnover that a basis species should hold
SEED: Final = 1.0e-6  # first amount of a gas that appears where the temperature is free to stay
ENTRY: Final = 1.0e-9  # smallest coordinate that can be divided by

NONE: Final = -1
STUCK: Final = -2
EXTRA_PLACE: Final = -3  # beside the basis


@inlined
def start_phases(w: Work) -> None:
    """Set kinds and first activities from the simplex basis."""
    amount = 0.0
    for i in range(w.nu.shape[0]):
        w.at[Y, i] = 0.0
        w.at[C, i] = max(w.at[C, i], 0.0)
        if w.what[KIND, i] != IDLE:
            w.what[KIND, i] = PRESENT if w.what[BASIS, i] >= w.count[G] and w.at[C, i] > 0.0 else FREE
            amount += w.at[C, i] if w.what[KIND, i] == FREE else 0.0
    set_gas(amount, w)
    for i in range(w.nu.shape[0]):
        if w.what[KIND, i] == FREE:
            w.at[Y, i] = np.log(w.at[C, i] / w.value[N]) if w.at[C, i] > 0.0 else START
    changed = True
    while changed:
        changed = False
        for i in range(w.nu.shape[0]):
            if w.what[KIND, i] == FREE and w.at[C, i] == 0.0 and not taken_back(i, w):
                w.what[KIND, i], w.at[Y, i] = EMPTY, NOTHING
                changed = True


@inlined
def taken_back(i: int, w: Work) -> bool:
    """Tell whether some species balances coordinate ``i``, of which there is none; if not, its holders are absent."""
    for j in range(w.count[K]):
        if w.nu[i, j] < 0.0 and w.of[D, j] < np.inf:
            possible = True
            for k in range(w.nu.shape[0]):
                possible &= not (w.what[KIND, k] == EMPTY and w.nu[k, j] > 0.0)
            if possible:
                return True
    return False


@inlined
def set_gas(amount: float, w: Work) -> None:
    """Declare a gas of ``amount`` [mol], or the incipient gas where that is zero; at held volume there is one."""
    if w.count[VOLUME] == 1:
        w.count[GAS], w.value[N] = 1, 1.0
        return
    w.count[GAS] = 1 if amount > 0.0 else 0
    w.value[N] = amount if amount > 0.0 else 1.0


@inlined
def gas_for(i: int, w: Work) -> int:
    """Gas species that holds most of coordinate ``i`` at the present activities, NONE if none does."""
    best, found = 0.0, NONE
    for j in range(w.count[G]):
        share = abs(w.nu[i, j])
        if share > ENTRY:
            share *= np.exp(max(min(w.of[U, j], 0.0), -600.0))
            if share > best:
                best, found = share, j
    return found


@inlined
def poor_place(w: Work) -> int:
    """Free place whose basis species holds next to nothing of its coordinate, for a gas species to take; NONE if none.

    With a rare or absent species as basis, a coordinate is the small difference of large terms.
    """
    for i in range(w.nu.shape[0]):
        if w.what[KIND, i] == FREE:
            held = w.of[AMOUNT, w.what[BASIS, i]] if w.what[BASIS, i] < w.count[G] else 0.0
            if held <= POOR * max(w.at[SUPPLY, i], w.at[DEMAND, i]):
                w.count[JOIN] = gas_for(i, w)
                if w.count[JOIN] not in (NONE, w.what[BASIS, i]):
                    return i
    return NONE


@inlined
def saturating(i: int, w: Work) -> int:
    """Condensed candidate that takes up what the gas cannot balance in coordinate ``i``; y_i moves to where it does.

    Supply without demand lowers y_i until a species with nu < 0 saturates, demand without supply raises it until one
    with nu > 0 does.
    """
    sign = -1.0 if w.at[SUPPLY, i] > 0.0 else 1.0
    best, found = np.inf, NONE
    for j in range(w.count[G], w.count[K]):
        nu = sign * w.nu[i, j]
        if nu > ENTRY and -w.of[U, j] / nu < best:
            best, found = -w.of[U, j] / nu, j
    if found != NONE:
        w.at[Y, i] += sign * best
    return found


@inlined
def place_for(k: int, b: Any, w: Work) -> int:
    """Free place for condensed ``k``, NONE if there is none: that of least turnover, so that major species stay.

    The rounding of B^-1 b counts as turnover: the coordinate of a rare element, whose terms are all small, is given to
    a new species that holds the element before one that is the small difference of large terms.
    """
    best, found = np.inf, NONE
    for i in range(w.nu.shape[0]):
        if w.what[KIND, i] == FREE and abs(w.nu[i, k]) > ENTRY:
            terms = 0.0
            for j in range(w.nu.shape[0]):
                terms += abs(w.inverse[i, j] * b[j])
            turnover = (max(w.at[SUPPLY, i], w.at[DEMAND, i]) + VANISHES * terms) / abs(w.nu[i, k])
            if turnover < best:
                best, found = turnover, i
    return found


@inlined
def gas_ends(k: int, place: int, w: Work) -> bool:
    """Tell whether no gas could stay if ``k`` took ``place``: no free coordinate would hold anything."""
    t = w.at[C, place] / w.nu[place, k]
    for i in range(w.nu.shape[0]):
        if w.what[KIND, i] == FREE and i != place:
            left = w.at[C, i] - t * w.nu[i, k]
            if abs(left) > VANISHES * (abs(w.at[C, i]) + abs(t * w.nu[i, k])):
                return False
    return True


@inlined
def first_used_up(k: int, alpha: float, w: Work) -> int:
    """Place of the condensed species that is used up first as ``k`` grows; NONE if the gas is, STUCK if nothing is.

    One mole of ``k`` takes ``alpha`` mol of gas (composition s, N s = c - amounts) and nu_k - alpha s of the condensed.
    """
    best, found = np.inf, STUCK
    if alpha > 0.0:
        best, found = w.value[N] / alpha, NONE
    for i in range(w.nu.shape[0]):
        if w.what[KIND, i] == PRESENT:
            amount = present_amount(i, w)
            taken = w.nu[i, k] - alpha * (w.at[C, i] - amount) / w.value[N]
            if taken > ENTRY and max(amount, 0.0) / taken < best:
                best, found = max(amount, 0.0) / taken, i
    if found >= 0 and alpha != 0.0:
        w.value[N] = max(w.value[N] - alpha * best, 1.0e-30)
    return found


@inlined
def place_of_join(k: int, b: Any, w: Work) -> int:
    """Place that condensed candidate ``k`` takes; STUCK if nothing limits its growth."""
    place = place_for(k, b, w)
    loose = w.count[MODE] != TEMPERATURE and not plateau(w)
    if place == NONE:
        if loose:
            w.count[EXTRA], w.value[MORE] = k, 0.0
            return EXTRA_PLACE
        return first_used_up(k, 0.0, w)
    if loose or w.count[VOLUME] == 1 or w.count[GAS] == 0 or not gas_ends(k, place, w):
        return place
    used = first_used_up(k, w.nu[place, k] * w.value[N] / w.at[C, place], w)
    if used == NONE:
        set_gas(0.0, w)
    elif used >= 0:
        if abs(w.nu[used, k]) > ENTRY:
            return used
        w.what[KIND, used] = FREE
    return place if used != STUCK else STUCK


@inlined
def place_of_gas(w: Work) -> int:
    """Place of the condensed species that the incipient gas uses up first as it grows; STUCK if there is none."""
    best, found = np.inf, STUCK
    for i in range(w.nu.shape[0]):
        if w.what[KIND, i] == PRESENT:
            taken = 0.0
            for j in range(w.count[G]):
                taken += w.nu[i, j] * w.of[AMOUNT, j]
            taken /= w.value[X]
            if taken > ENTRY and w.at[C, i] / taken < best:
                best, found = w.at[C, i] / taken, i
    if found != STUCK:
        set_gas(max(best, 1.0e-30), w)
    return found


@inlined
def leaving_phase(error: float, w: Work) -> int:
    """Place of the condensed species whose amount is most negative, NONE if none is beyond ``error``."""
    worst, found = 0.0, NONE
    for i in range(w.nu.shape[0]):
        if w.what[KIND, i] == PRESENT:
            turnover = max(w.at[SUPPLY, i], w.at[DEMAND, i])
            amount = present_amount(i, w)
            if amount < -(VANISHES + 10.0 * error) * turnover and amount / turnover < worst:
                worst, found = amount / turnover, i
    return found


@inlined
def wanted_change(error: float, b: Any, w: Work) -> int:
    """Find the one change that is most wanted: the place where candidate ``w.count[JOIN]`` goes in; NONE, or STUCK.

    ``error`` is that of the Newton iteration: what lies within it decides nothing.
    """
    place = leaving_phase(error, w)
    extra = w.count[EXTRA]
    if extra >= 0 and w.value[MORE] < -(VANISHES + 10.0 * error):
        w.count[EXTRA] = NONE
        return EXTRA_PLACE
    if place >= 0 and extra >= 0 and abs(w.nu[place, extra]) > ENTRY:
        w.count[EXTRA], w.count[JOIN] = NONE, extra
        return place
    if place == NONE:
        worst = APPEARS + 10.0 * error
        for k in range(w.count[G], w.count[K]):
            if w.of[U, k] / w.of[ATOMS, k] > worst and k != extra:
                worst, w.count[JOIN], place = w.of[U, k] / w.of[ATOMS, k], k, 0
        if place != NONE:
            return place_of_join(w.count[JOIN], b, w)
        absent = w.count[GAS] == 0 and w.count[G] > 0
        if not absent or np.log(w.value[X]) < APPEARS + 10.0 * error:
            return NONE
        if w.count[MODE] != TEMPERATURE and not plateau(w):
            w.count[GAS], w.value[N] = 1, SEED
            return EXTRA_PLACE
        place = place_of_gas(w)
    if place != STUCK:
        w.what[KIND, place] = FREE
        w.count[JOIN] = gas_for(place, w)
    return place
