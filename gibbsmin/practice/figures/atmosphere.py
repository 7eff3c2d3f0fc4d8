"""Numbers of furnace atmospheres that carburise, nitride or keep metals bright.

Carbon in austenite that goes with the activity a_C of carbon against graphite, a fit in use for plain carbon steel
(from memory; no source):

    log10 a_C = 2300/T - 2.21 + 0.15 w + log10 w,      w mass % of carbon, T in K                          (1)

Nitriding potential K_N = p(NH3)/p(H2)^1.5, in bar^-½ (E. Lehrer, Z. Elektrochem. 36 (1930) 383; from memory).
"""

from __future__ import annotations

from typing import Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

from gibbsmin.constants import STANDARD_PRESSURE
from gibbsmin.practice.feeds.saturation import dew_temperature
from gibbsmin.practice.figures.carbon import carbon
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.potentials import ln_activity, record_of
from gibbsmin.practice.figures.reduction import stability_potentials
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.practice.figures.tally import known, ratio

Floats = NDArray[np.float64]

_COLDEST: Final = 1000.0
_HOTTEST: Final = 1420.0
"""K between which eq. (1) is used: austenite."""

_SOOT: Final = 1.0 + 1e-6
"""Activity up to which eq. (1) is used: graphite, with what rounding leaves."""

_MOST_CARBON: Final = 2.2
"""Mass percent up to which eq. (1) is solved: a little more than austenite ever holds."""

_HALVINGS: Final = 60


def atmosphere(settled: Settled) -> list[KeyFigure]:
    """Numbers of a furnace atmosphere.

    Parameters
    ----------
    settled : Settled
        Feeds and what they settle to.

    Returns
    -------
    list of KeyFigure
        Those that any state has.
    """
    activity = np.exp(np.minimum(ln_activity(settled, record_of(settled, "C(s):graphite")), 1.0))
    bar = settled.pressure / STANDARD_PRESSURE
    hydrogen, ammonia = bar * settled.wet("H2"), bar * settled.wet("NH3")
    return known(
        [
            *carbon(settled),
            *stability_potentials(settled),
            KeyFigure(
                "water_dew_point",
                "water dew point",
                dew_temperature(settled.pressure * settled.wet("H2O")),
                "K",
                "degC",
                "Of the gas as it is, at its own pressure; below 0 degC over ice.",
            ),
            KeyFigure("co2_wet", "CO2, wet", settled.wet("CO2"), shown="%", note="Mole fraction, wet gas."),
            KeyFigure(
                "carbon_in_austenite",
                "carbon in plain steel",
                carbon_in_austenite(activity, settled.temperature) / 100.0,
                "kg/kg",
                "%",
                "Mass %, 727 to 1147 degC, up to the sooting limit; a fit for plain carbon steel, from memory.",
            ),
            KeyFigure(
                "nitriding_potential",
                "nitriding potential K_N, bar^-0.5",
                np.where(ammonia > 0.0, ratio(ammonia, hydrogen**1.5), np.nan),
                note="p(NH3)/p(H2)^1.5 in bar. At equilibrium NH3 is nearly gone: freeze it to ask about a real gas.",
            ),
        ]
    )


def carbon_in_austenite(activity: ArrayLike, temperature: ArrayLike) -> Floats:
    """Carbon that plain carbon steel takes up from a gas, by eq. (1).

    Parameters
    ----------
    activity : array
        Of carbon against graphite, [-].
    temperature : array
        [K].

    Returns
    -------
    array
        [mass %]; nan outside 1000 to 1420 K, above an activity of one, and where there is no carbon.

    Examples
    --------
    >>> round(float(carbon_in_austenite(0.540, 1198.15)), 2)
    0.8
    """
    a, T = np.broadcast_arrays(np.asarray(activity, float), np.asarray(temperature, float))
    inside = (T >= _COLDEST) & (T <= _HOTTEST) & (a > 0.0) & (a <= _SOOT)
    wanted = np.log10(np.where(inside, a, 1.0)) - 2300.0 / np.where(inside, T, 1.0) + 2.21
    low, high = np.zeros(a.shape), np.full(a.shape, _MOST_CARBON)
    for _ in range(_HALVINGS):
        middle = 0.5 * (low + high)
        above = 0.15 * middle + np.log10(middle) > wanted
        low, high = np.where(above, low, middle), np.where(above, middle, high)
    return np.where(inside & (high < _MOST_CARBON), 0.5 * (low + high), np.nan)
