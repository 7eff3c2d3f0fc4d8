"""Cautions of every state of a result, judged from its arrays."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.constants import STANDARD_TEMPERATURE
from gibbsmin.practice.figures.carbon import carbon_activity
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.safety.caution import Caution, Fed
from gibbsmin.practice.safety.cautions import Circumstances, cautions
from gibbsmin.practice.safety.hazards import CHLORINE, FLAMMABLE, REACTIVE, SELF_IGNITING, TOXIC
from gibbsmin.practice.safety.vessels import vessel
from gibbsmin.results.fractions import gas_fractions
from gibbsmin.thermo.database import load
from gibbsmin.thermo.record import FROZEN, Species
from gibbsmin.units import quantity

if TYPE_CHECKING:
    from gibbsmin.results.result import Result

GRAPHITE: Final = "C(s):graphite"
FLUE_GAS: Final = "flue gas"
"""Set of key figures that the cautions about stacks and permits are judged by."""

_WATCHED: Final = frozenset({*TOXIC, *FLAMMABLE, *SELF_IGNITING, *REACTIVE, *CHLORINE, "O2"})


def judge(result: Result) -> list[list[Caution]]:
    """Return the cautions of each state, in the order of the states.

    Parameters
    ----------
    result : Result

    Returns
    -------
    list of list of Caution
        Empty lists for states that were not certified: nothing is said of numbers that are not vouched for.
    """
    batch, system = result.batch, result.system
    watched = [
        (k, substance)
        for k, (name, gas) in enumerate(zip(system.species, system.gas, strict=True))
        if gas and (substance := name.removesuffix(FROZEN)) in _WATCHED
    ]
    amounts, potentials, certified = batch.amounts, batch.element_potentials, batch.certified
    gas_total = amounts[:, system.gas].sum(axis=1)  # (states,)
    graphite = _graphite(result)
    held = any(GRAPHITE in parts for parts in system.constraints.values())  # what is left of the fuel, not soot
    solid = system.species.index(GRAPHITE) if GRAPHITE in system.species and not held else None
    activity = None
    if graphite is not None:
        T = np.where(certified, batch.temperature, STANDARD_TEMPERATURE)  # any will do where there is no answer
        activity = carbon_activity(potentials[:, system.elements.index("C")], graphite, T)
    vessels: list[Caution] = []
    flue = _flue_gas(result)
    is_gas = np.asarray(system.gas, bool)
    start, keeps_heat = _start(result), "temperature" not in result.held
    found: list[list[Caution]] = []
    for i in range(len(gas_total)):
        if not certified[i]:
            found.append([])
            continue
        total = float(gas_total[i])
        gas: dict[str, float] = {}
        for k, name in watched if total > 0.0 else ():
            gas[name] = gas.get(name, 0.0) + float(amounts[i, k]) / total
        here = Circumstances(
            gas=gas,
            temperature=float(batch.temperature[i]),
            pressure=float(batch.pressure[i]),
            carbon_activity=None if activity is None else float(activity[i]),
            solid_carbon=float(amounts[i, solid]) if solid is not None else 0.0,
            warnings=batch.state(i).warnings,
            feeds=_feeds(result, i),
            wall_temperature=_at(flue, "stack_temperature", i),
            dew_points={one.label: float(one.value[i]) for one in flue.values() if one.name.startswith("dew_point_")},
            measured_oxygen=_at(flue, "oxygen_dry", i),
            reference_oxygen=_at(flue, "reference_oxygen", i),
            oxidant_oxygen=_at(flue, "oxidant_oxygen", i),
        )
        if start is not None:
            condensed = bool(amounts[i, ~is_gas].any())
            vessels = [vessel(here.pressure, _known(start[i]), keeps_heat=keeps_heat, condensed=condensed)]
        account = result.audit(i)
        against = []
        if account is not None and account.entropy_generated < 0.0:
            against = [Caution("second law", account.sentence.replace("°C", "degC"), -account.lost_work)]
        found.append([*against, *vessels, *cautions(here)])
    return found


def peaks(result: Result) -> dict[str, float]:
    """Return the highest mole fraction of each gas in any certified state, [-]."""
    gas = np.asarray(result.system.gas, bool)
    fractions = gas_fractions(result.batch.amounts[np.asarray(result.batch.certified, bool)], gas)  # (states, S)
    highest = fractions.max(axis=0, initial=0.0)
    return {name: float(x) for name, x, flag in zip(result.system.species, highest, gas, strict=True) if flag}


def _graphite(result: Result) -> Species | None:
    """Return the record of graphite: the system's own where it is a candidate, else the shipped one."""
    if "C" not in result.system.elements:
        return None
    own = [record for record in result.system.records if record.name == GRAPHITE]
    return own[0] if own else load().get(GRAPHITE)


def _start(result: Result) -> NDArray[np.float64] | None:
    """Pressure of the feeds before they settle in a closed vessel, nan where not known; None where none is closed."""
    volume = result.held.get("volume")
    if volume is None:
        return None
    H, U = result.account.feed_enthalpy, result.account.feed_internal_energy
    return np.full(len(volume), np.nan) if H is None or U is None else np.asarray((H - U) / volume)


def _known(value: float) -> float | None:
    return float(value) if value > 0.0 else None


def _feeds(result: Result, i: int) -> list[Fed]:
    """Gather the feeds of one state: amounts as the case has them, temperatures as they are varied."""
    feeds = []
    for name, feed in result.feeds.items():
        varied = f"feeds.{name}.temperature"
        temperature = feed.temperature
        if varied in result.inputs:
            typed = f"{float(result.inputs[varied][i])!r} {result.input_units[varied]}"
            temperature = quantity(typed, "K", varied)
        feeds.append(Fed(name, feed.amounts, temperature))
    return feeds


def _flue_gas(result: Result) -> dict[str, KeyFigure]:
    """Key figures of the flue gas by name; empty where the case does not ask for them."""
    return {one.name: one for one in result.key_figures.get(FLUE_GAS, ())}


def _at(figures: dict[str, KeyFigure], name: str, i: int) -> float | None:
    """Value of a key figure in one state; None where there is none."""
    value = float(figures[name].value[i]) if name in figures else np.nan
    return value if np.isfinite(value) else None
