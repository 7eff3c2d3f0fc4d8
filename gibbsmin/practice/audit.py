"""The second-law account of a step: what entropy came in, went out, was given away, and was made.

With Q the heat that the system takes up (below zero where it gives heat off) from a source or into a sink at T_s:

    S_gen = S_out - S_in - Q/T_s                                                                               (1)
    lost work = T0 S_gen,     T0 the temperature of the surroundings                                           (2)

(Gouy 1889, Stodola 1905; Bejan, Advanced Engineering Thermodynamics, ch. 3). Work carries no entropy.

Heat cannot come from what is colder, nor go to what is hotter. Unless a temperature of the source is given, heat given
off ends in the surroundings (or in something as cold as the state, where that is colder), and heat taken up comes from
something just as hot as the state (or from the surroundings, where they are hotter): the least loss there can be. So an
equilibrium that was reached from feeds at its own pressure or above never has a negative account: at
T_s = T it is what H - TS of the feeds exceeds that of the state by, over T.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import asdict, dataclass
from typing import Any, Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

from gibbsmin.constants import STANDARD_PRESSURE, STANDARD_TEMPERATURE, R
from gibbsmin.errors import InputError
from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]

ROUNDING: Final = 1.0e-9
"""Entropy generated is taken as zero below this part of all entropies of the account [-]."""


@dataclass(frozen=True)
class Audit:
    """The second-law account of a step, in J and J/K, or in W and W/K where feeds are flows.

    Attributes
    ----------
    entropy_of_feeds, entropy_of_products : float
        [J/K].
    heat, work : float
        Taken up by the system, [J].
    entropy_of_surroundings : float
        What the source or sink of the heat gains, -Q/T_s [J/K].
    entropy_generated : float
        Eq. (1) [J/K]; exactly zero where it is rounding.
    lost_work : float
        Eq. (2) [J].
    surroundings_temperature, source_temperature : float
        T0 and T_s [K].
    sentence : str
        The same in words.
    """

    entropy_of_feeds: float
    entropy_of_products: float
    heat: float
    work: float
    entropy_of_surroundings: float
    entropy_generated: float
    lost_work: float
    surroundings_temperature: float
    source_temperature: float
    sentence: str

    def to_dict(self) -> dict[str, Any]:
        """Return the same as a plain dictionary."""
        return asdict(self)


def audit(
    entropy_of_feeds: float,
    entropy_of_products: float,
    heat: float,
    temperature: float,
    *,
    work: float = 0.0,
    surroundings_temperature: float = STANDARD_TEMPERATURE,
    source_temperature: float | None = None,
    heating_value: float | None = None,
    flow: bool = False,
) -> Audit:
    """Draw up the second-law account of a step from feeds to products.

    Parameters
    ----------
    entropy_of_feeds, entropy_of_products : float
        [J/K], or [W/K] for flows; so below.
    heat : float
        Heat taken up by the system [J]: enthalpy of the products less that of the feeds and less ``work``.
    temperature : float
        Of the products [K].
    work : float
        Shaft work done on the system [J].
    surroundings_temperature : float
        T0 [K].
    source_temperature : float or None
        Where the heat comes from or goes to [K]; None for the rule in the head of this module.
    heating_value : float or None
        Lower heating value of the feeds [J]; the sentence then says what part of it is lost.
    flow : bool
        Whether the amounts are flows: the sentence then says W for J.

    Returns
    -------
    Audit

    Raises
    ------
    InputError
        A temperature that is not above zero.

    Examples
    --------
    >>> account = audit(100.0, 110.0, -1192.6, 1000.0)
    >>> round(account.entropy_generated, 3), round(account.lost_work, 1)
    (14.0, 4174.1)
    """
    for name, value in (
        ("temperature", temperature),
        ("surroundings_temperature", surroundings_temperature),
        ("source_temperature", temperature if source_temperature is None else source_temperature),
    ):
        if not (np.isfinite(value) and value > 0.0):
            raise InputError(f"{name} must be finite and above 0 K; got {value}")
    T_s = least_loss_temperature(heat, temperature, surroundings_temperature)
    T_s = T_s if source_temperature is None else source_temperature
    given = 0.0 - heat / T_s  # not -0.0 where there is no heat
    generated = entropy_of_products - entropy_of_feeds + given
    turnover = abs(entropy_of_products) + abs(entropy_of_feeds) + abs(given)
    generated = 0.0 if abs(generated) < ROUNDING * turnover else generated
    lost = surroundings_temperature * generated
    return Audit(
        entropy_of_feeds,
        entropy_of_products,
        heat,
        work,
        given,
        generated,
        lost,
        surroundings_temperature,
        T_s,
        _sentence(generated, lost, surroundings_temperature, heating_value, "W" if flow else "J"),
    )


def least_loss_temperature(heat: float, temperature: float, surroundings_temperature: float) -> float:
    """Temperature [K] of source or sink at which ``heat`` [J] loses least and can still flow by itself.

    Parameters
    ----------
    heat : float
        Taken up by the system [J].
    temperature, surroundings_temperature : float
        Of the state and of the surroundings [K].

    Returns
    -------
    float
        The warmer of the two for heat taken up, the colder for heat given off [K].
    """
    return (max if heat > 0.0 else min)(temperature, surroundings_temperature)


def feed_enthalpy(records: Sequence[Species], amounts: ArrayLike, temperature: ArrayLike) -> Any:
    """Enthalpy of one feed at its own temperature.

    Parameters
    ----------
    records : sequence of Species
        What it is made of.
    amounts : (S,) or (states, S) array
        [mol], in the order of ``records``.
    temperature : float or (states,) array
        [K].

    Returns
    -------
    float or (states,) array
        [J]; elements at 298.15 K are the zero.
    """
    n = _amounts(records, amounts)
    T = np.asarray(temperature, float)
    h = np.stack([np.asarray(record.enthalpy(T)) for record in records], axis=-1)  # (..., S)
    total: Floats = np.sum(n * h, axis=-1)
    return total if total.ndim else float(total)


def feed_entropy(records: Sequence[Species], amounts: ArrayLike, temperature: ArrayLike, pressure: ArrayLike) -> Any:
    """Entropy of one feed at its own temperature and pressure.

    Its gases are an ideal mixture, each at its partial pressure; what is condensed is pure.

    Parameters
    ----------
    records : sequence of Species
        What it is made of.
    amounts : (S,) or (states, S) array
        [mol], in the order of ``records``.
    temperature, pressure : float or (states,) arrays
        [K], [Pa].

    Returns
    -------
    float or (states,) array
        [J/K].
    """
    n = _amounts(records, amounts)
    T, P = np.asarray(temperature, float), np.asarray(pressure, float)
    s = np.stack([np.asarray(record.entropy(T)) for record in records], axis=-1)  # (..., S)
    gas = n * np.array([not record.condensed for record in records])
    N = gas.sum(axis=-1)
    ln_N = np.log(np.where(N > 0.0, N, 1.0))
    mixing = np.sum(gas * np.log(np.where(gas > 0.0, gas, 1.0)), axis=-1) - N * ln_N  # sum n ln x
    total: Floats = np.sum(n * s, axis=-1) - R * (mixing + N * np.log(P / STANDARD_PRESSURE))
    return total if total.ndim else float(total)


def _amounts(records: Sequence[Species], amounts: ArrayLike) -> Floats:
    """Return the amounts as an array that has a last axis over ``records``."""
    n: Floats = np.asarray(amounts, float)
    if n.ndim not in (1, 2) or n.shape[-1] != len(records):
        raise InputError(f"amounts must have shape ({len(records)},) or (states, {len(records)}); got {n.shape}")
    if not np.all(np.isfinite(n) & (n >= 0.0)):
        raise InputError(f"amounts must be finite and not negative; got {n[~(np.isfinite(n) & (n >= 0.0))][0]}")
    return n


def _sentence(generated: float, lost: float, T0: float, heating_value: float | None, unit: str) -> str:
    """Say in words what an account comes to."""
    where = f"with surroundings at {T0 - 273.15:.1f} °C"
    if generated == 0.0:
        return "No entropy is generated: the step is reversible, and no work is lost."
    made = f"{_short(abs(generated), unit)}/K"
    if generated < 0.0:
        return (
            f"This step cannot happen by itself: entropy would fall by {made}, and at least {_short(-lost, unit)} of "
            f"work would be needed {where}. Either work is left out of the account (feeds at a lower pressure than the "
            "products must be compressed), or the heat comes from something too cold or goes to something too hot, or "
            "species of the feeds are excluded from the products."
        )
    if heating_value is not None and heating_value > 0.0:
        return (
            f"Of the {_short(heating_value, unit)} of lower heating value of the feeds, {_short(lost, unit)} "
            f"({100.0 * lost / heating_value:.1f} %) of work that could have been had is lost {where}: "
            f"{made} of entropy is generated."
        )
    return f"{_short(lost, unit)} of work that could have been had is lost {where}: {made} of entropy is generated."


def _short(value: float, unit: str) -> str:
    """Three or four figures with a prefix of the unit: 254 kJ."""
    for factor, prefix in ((1.0e9, "G"), (1.0e6, "M"), (1.0e3, "k")):
        if value >= factor:
            return f"{value / factor:.4g} {prefix}{unit}"
    return f"{value:.4g} {unit}"
