"""Properties of the states of a study, as arrays: what a settled mixture answers to small changes."""

from __future__ import annotations

from typing import Final, NamedTuple

import numpy as np
from numpy.typing import NDArray

from gibbsmin.states.batch import Batch

Floats = NDArray[np.float64]


class Property(NamedTuple):
    """A property of a state: its ``name``, its SI ``unit`` for amounts and ``rate`` for flows, and its meaning."""

    name: str
    unit: str
    rate: str
    meaning: str


PROPERTIES: Final = (
    Property("density", "kg/m3", "kg/m3", "mass of everything over the volume of the gas"),
    Property("mean_molar_mass", "kg/mol", "kg/mol", "mean molar mass of the gas"),
    Property("heat_capacity", "J/K", "W/K", "heat capacity at constant pressure, composition following"),
    Property("frozen_heat_capacity", "J/K", "W/K", "heat capacity at constant pressure, composition frozen"),
    Property("heat_capacity_constant_volume", "J/K", "W/K", "heat capacity at constant volume, composition following"),
    Property("isentropic_exponent", "1", "1", "(dlnP/dlnrho)_S, composition following"),
    Property("frozen_isentropic_exponent", "1", "1", "(dlnP/dlnrho)_S, composition frozen"),
    Property("sound_speed", "m/s", "m/s", "speed of sound, composition following"),
    Property("frozen_sound_speed", "m/s", "m/s", "speed of sound, composition frozen"),
    Property("thermal_expansion", "1/K", "1/K", "(dlnV/dT)_P, composition following"),
    Property("compressibility", "1/Pa", "1/Pa", "-(dlnV/dP)_T, composition following"),
)
"""Attributes of a state, in the order of the files."""


def properties(batch: Batch) -> dict[str, Floats]:
    """Properties of all states.

    Parameters
    ----------
    batch : Batch

    Returns
    -------
    dict of str to array (states,)
        By the names of ``PROPERTIES``, SI; nan where a state is not certified or has no such property, infinite
        where a heat capacity is (melting, boiling).
    """
    found = {one.name: np.full(len(batch), np.nan) for one in PROPERTIES}
    for i in np.flatnonzero(batch.certified):
        state = batch.state(int(i))
        for name, values in found.items():
            values[i] = getattr(state, name)
    return found
