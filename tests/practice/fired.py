"""Invented fires, put together by hand: fuel and air, and what complete combustion leaves."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
from settled_from import by_hand

from gibbsmin.practice.feeds.heating import heating_value
from gibbsmin.practice.figures.settled import FeedFacts, Settled
from gibbsmin.thermo.database import load

AIR_OXYGEN = 0.2095
MASS_PERCENT = {"C": 75.0, "H": 5.0, "O": 8.0, "N": 1.5, "S": 1.0}
"""A dry coal, the rest of it ash."""
WEIGHT = {"C": 12.011, "H": 1.008, "O": 15.999, "N": 14.007, "S": 32.06}
"""Standard atomic weights, [g/mol] (IUPAC, abridged)."""


def with_heat(fire: Settled) -> Settled:
    """Give feeds of species their heating values at 25 °C."""
    feeds = {}
    for name, feed in fire.feeds.items():
        records = [load().get(species) for species in feed.amounts]
        value = heating_value(records, [float(n[0]) for n in feed.amounts.values()])
        feeds[name] = replace(feed, lower=np.array([value.lower]), higher=np.array([value.higher]))
    return replace(fire, feeds=feeds)


def methane(air_ratio: float = 1.2, traces: dict[str, float] | None = None, celsius: float = 1000.0) -> Settled:
    """One mole of methane burnt completely with dry air of 20.95 % O2; ``traces`` are added in mol."""
    oxygen = 2.0 * air_ratio
    nitrogen = oxygen * (1.0 - AIR_OXYGEN) / AIR_OXYGEN
    amounts = {"CO2": 1.0, "H2O": 2.0, "O2": oxygen - 2.0, "N2": nitrogen, **(traces or {})}
    feeds = {"gas": {"CH4": 1.0}, "air": {"O2": oxygen, "N2": nitrogen}}
    return with_heat(by_hand(amounts, feeds, celsius + 273.15, 101325.0))


def coal(air_ratio: float = 1.2, air_oxygen: float = AIR_OXYGEN, ash: dict[str, float] | None = None) -> Settled:
    """One kilogram of a dry coal burnt completely; ``ash`` is what is left of it, in mol.

    Heating values 31.12 and 30.03 MJ/kg: the analysis by Channiwala and Parikh (2002), less 2.4417 MJ/kg of 0.447 kg.
    """
    atoms = {symbol: 10.0 * percent / WEIGHT[symbol] for symbol, percent in MASS_PERCENT.items()}
    need = atoms["C"] + atoms["H"] / 4.0 + atoms["S"] - atoms["O"] / 2.0
    oxygen = air_ratio * need
    nitrogen = oxygen * (1.0 - air_oxygen) / air_oxygen
    amounts = {
        "CO2": atoms["C"],
        "H2O": atoms["H"] / 2.0,
        "SO2": atoms["S"],
        "O2": oxygen - need,
        "N2": nitrogen + atoms["N"] / 2.0,
        **(ash or {}),
    }
    fire = by_hand(amounts, {"air": {"O2": oxygen, "N2": nitrogen}}, 1273.15, 101325.0)
    elements = {symbol: np.array([n]) for symbol, n in atoms.items()}
    fuel = FeedFacts({}, elements, np.array([1.0]), np.array([31.12e6]), np.array([30.03e6]), by_analysis=True)
    return replace(fire, feeds={"coal": fuel, **fire.feeds})
