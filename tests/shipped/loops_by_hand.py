"""What syntheses in a loop need beside ``gas_by_hand``: vapour pressures that are measured, and work without reaction.

Vapour pressures are those of the package ``chemicals``: water by IAPWS, ammonia and methanol by the VDI Heat Atlas.
"""

from __future__ import annotations

from collections.abc import Mapping
from math import exp, log

from chemicals import vapor_pressure
from scipy.optimize import brentq
from shipped import gas_by_hand as hand

CAS = {"NH3": "7664-41-7", "CH3OH": "67-56-1"}


def saturation(name: str, T: float) -> float:
    """bar; water from 0 °C on."""
    if name == "H2O":
        return float(vapor_pressure.Psat_IAPWS(T)) / 1e5
    row = vapor_pressure.Psat_data_VDI_PPDS_3.loc[CAS[name]]
    t = 1.0 - T / row.Tc
    return float(row.Pc * exp((row.A * t + row.B * t**1.5 + row.C * t**2.5 + row.D * t**5) * row.Tc / T)) / 1e5


def heat_of_vaporization(name: str, T: float) -> float:
    """J/mol by Clausius and Clapeyron, the vapour being an ideal gas."""
    step = 0.01
    return hand.R * T**2 * log(saturation(name, T + step) / saturation(name, T - step)) / (2.0 * step)


def condensed(amounts: Mapping[str, float], T: float, bar: float, *names: str) -> dict[str, float]:
    """Liquid of these names, each by itself, that leaves a gas saturated with it."""
    rest = sum(n for name, n in amounts.items() if name not in names)
    left = {name: saturation(name, T) / bar for name in names}
    gas = rest / (1.0 - sum(left.values()))
    return {name: amounts[name] - left[name] * gas for name in names}


def compressed(amounts: Mapping[str, float], T: float, bar: float, to: float, efficiency: float) -> tuple[float, float]:
    """Temperature [K] and work [J] of a compression without reaction."""
    S, H = hand.total_entropy(amounts, T, bar), hand.total_enthalpy(amounts, T)
    ideal = brentq(lambda t: hand.total_entropy(amounts, t, to) - S, T - 1.0, T + 500.0, xtol=1e-9)
    work = (hand.total_enthalpy(amounts, ideal) - H) / efficiency
    return hand.adiabatic(lambda t: dict(amounts), H + work, T - 1.0, T + 500.0), work
