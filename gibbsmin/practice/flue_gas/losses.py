"""What a fired unit loses through its stack, and the efficiency that is left, by an enthalpy balance of its own.

Per lower heating value of the fuel at 25 °C, with the composition of the gas frozen on its way to the stack,

    q_gas    = [Σ n_i (H_i(T) - H_i(T0)) + n_l (H_l(T) - H_v(T0))] / LHV     all gases, vapour v, condensate l   (1)
    q_burn   = Σ n_i LHV_i / LHV          gases that could still burn                                            (2)
    q_carbon = the same for solids,   q_ash = Σ n_j (H_j(T) - H_j(T0)) / LHV for the rest of them                (3)
    η = 1 - q_gas - q_burn - q_carbon - q_ash - q_wall                                                           (4)

T is the temperature of the stack, T0 that of the reference. Water counts as vapour, so that condensation below the dew
point makes q_gas small or negative and η larger than one; per higher heating value it never is. Heat that the air
brings from elsewhere is not counted as input; air preheated by the flue gas itself changes nothing.

Siegert's formula is kept for comparison:  q = (t - t_air) (A / (21 - O2) + B) / 100, with t in °C, dry O2 in %.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.errors import InputError, nearest
from gibbsmin.practice.feeds.heating import heating_value
from gibbsmin.practice.feeds.ratios import oxygen_need
from gibbsmin.practice.feeds.saturation import saturation_pressure
from gibbsmin.practice.figures.fed import WATER
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.practice.figures.tally import ratio
from gibbsmin.thermo.database import load
from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]

SIEGERT: Final = {
    "natural gas": (0.66, 0.009),
    "light oil": (0.68, 0.007),
    "LPG": (0.63, 0.008),
    "coke-oven gas": (0.60, 0.011),
    "town gas": (0.63, 0.011),
}
"""A and B by fuel: German small furnaces ordinance (1. BImSchV), annex, from memory."""

_LIQUID: Final = "H2O(l)"
_BURNS: Final = frozenset(("C", "H", "O", "N", "S"))


@dataclass(frozen=True)
class Stack:
    """Where the gas leaves.

    Attributes
    ----------
    temperature, pressure : array (states,)
        Of the gas in the stack, [K], [Pa].
    reference : float
        Temperature from which heat is counted, [K].
    wall_loss : float
        Heat lost through walls, per lower heating value, [-].
    siegert : str
        Fuel of ``SIEGERT`` for the comparison; empty for none.
    """

    temperature: Floats
    pressure: Floats
    reference: float
    wall_loss: float = 0.0
    siegert: str = ""


def siegert(fuel: str, stack: Floats, air: float, oxygen: Floats) -> Floats:
    """Flue-gas loss by Siegert's formula, for comparison.

    Parameters
    ----------
    fuel : str
        One of ``SIEGERT``.
    stack : array (states,)
        Temperature of the flue gas, [K].
    air : float
        Temperature of the air, [K].
    oxygen : array (states,)
        O2 of the dry flue gas, mole fraction, [-].

    Returns
    -------
    array (states,)
        Loss per lower heating value, [-]; nan from 21 % O2 on.

    Raises
    ------
    InputError
        Another fuel.
    """
    if fuel not in SIEGERT:
        raise InputError(
            f"no coefficients of Siegert's formula for {fuel!r}{nearest(fuel, SIEGERT)}; known are {', '.join(SIEGERT)}"
        )
    A, B = SIEGERT[fuel]
    return np.asarray((stack - air) * (A * ratio(np.ones(oxygen.shape), 21.0 - 100.0 * oxygen) + B) / 100.0)


def condensed_share(gas: Floats, water: Floats, temperature: Floats, pressure: Floats) -> Floats:
    """Part of the water of a flue gas that is liquid where the gas has cooled down.

    Parameters
    ----------
    gas, water : array (states,)
        Amounts of the dry gas and of all its water, [mol].
    temperature, pressure : array (states,)
        [K], [Pa].

    Returns
    -------
    array (states,)
        [-]; zero above the dew point.
    """
    p = np.nan_to_num(saturation_pressure(temperature), nan=np.inf)  # above the critical point all is vapour
    held = np.full(p.shape, np.inf)
    np.divide(p, pressure - p, out=held, where=p < pressure)  # vapour per dry gas, [-]
    return np.maximum(0.0, 1.0 - ratio(gas * held, water))


def losses(frozen: Settled, lower: Floats, higher: Floats, stack: Stack) -> list[KeyFigure]:
    """Losses and efficiency, equations (1) to (4).

    Parameters
    ----------
    frozen : Settled
        The mixture whose composition leaves.
    lower, higher : array (states,)
        Heating values of the fuel at 25 °C, [J or W].
    stack : Stack
        Where it leaves.

    Returns
    -------
    list of KeyFigure
        All per lower heating value but the last, [-].
    """
    T0 = stack.reference
    T = np.where(stack.temperature > 0.0, stack.temperature, T0)
    water = frozen.amount(*WATER)
    share = condensed_share(frozen.dry_gas, water, T, stack.pressure)
    vapour, liquid = load().get("H2O"), load().get(_LIQUID)
    heat = water * ((1.0 - share) * vapour.enthalpy(T) + share * liquid.enthalpy(T) - vapour.enthalpy(T0))
    burn = carbon = ash = np.where(np.isfinite(frozen.gas), 0.0, np.nan)
    for name, record in frozen.records.items():
        if name in WATER:
            continue
        amount = frozen.amounts[name]
        sensible = amount * (record.enthalpy(T) - record.enthalpy(T0))
        left = amount * _burnable(record)
        if record.condensed:
            ash, carbon = ash + sensible, carbon + left
        else:
            heat, burn = heat + sensible, burn + left
    oxygen = frozen.dry("O2")
    q_gas, q_burn, q_carbon, q_ash = (ratio(part, lower) for part in (heat, burn, carbon, ash))
    efficiency = 1.0 - q_gas - q_burn - q_carbon - q_ash - stack.wall_loss
    basis = f"Per LHV of the fuel, above {T0 - 273.15:.4g} degC, composition frozen."
    own = "Per LHV of the fuel; what equilibrium leaves unburnt, which real burners exceed."
    figures = [
        _percent("loss_flue_gas", "loss: flue gas", q_gas, f"{basis} Water as vapour, condensate as liquid."),
        _percent("loss_unburnt_gas", "loss: unburnt gas", q_burn, own),
    ]
    if np.any(q_carbon > 0.0):
        figures.append(_percent("loss_unburnt_carbon", "loss: unburnt solids", q_carbon, own))
    if np.any(np.abs(q_ash) > 0.0):
        figures.append(_percent("loss_ash", "loss: heat of ash", q_ash, f"{basis} Ash leaves as hot as the gas."))
    if stack.wall_loss > 0.0:
        given = np.full(q_gas.shape, stack.wall_loss)
        figures.append(_percent("loss_wall", "loss: walls", given, "Given, not calculated."))
    figures += [
        _percent("efficiency_lower", "efficiency on LHV", efficiency, "100 % less all losses; fuel alone is input."),
        _percent("efficiency_higher", "efficiency on HHV", efficiency * ratio(lower, higher), "The same heat per HHV."),
        _percent("water_condensed", "water condensed", share, "Part of the vapour, at equilibrium with the stack gas."),
    ]
    if stack.siegert:
        dry = np.where(share > 0.0, np.nan, siegert(stack.siegert, T, T0, oxygen))
        text = f"{stack.siegert}, coefficients from memory; dry stacks only, and no wet solid fuel."
        figures.append(_percent("loss_siegert", "loss: flue gas, Siegert", dry, f"Siegert's formula, {text}"))
    return figures


def _percent(name: str, label: str, value: Floats, note: str) -> KeyFigure:
    return KeyFigure(name, label, value, "1", "%", note)


def _burnable(record: Species) -> float:
    """Lower heating value of a species that needs oxygen to burn, [J/mol]; zero for every other."""
    if record.charge or not record.elements.keys() <= _BURNS or oxygen_need(record.elements) <= 0.0:
        return 0.0
    return heating_value([record], [1.0]).lower
