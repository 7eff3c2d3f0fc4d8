"""Cautions of every state of a result, judged from its arrays."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.constants import STANDARD_TEMPERATURE
from gibbsmin.practice.carbon import carbon_activity
from gibbsmin.practice.cautions import Caution, Circumstances, cautions, flammable_feed
from gibbsmin.practice.hazards import FLAMMABLE, SELF_IGNITING, TOXIC
from gibbsmin.practice.vessels import vessel
from gibbsmin.results.fractions import gas_fractions
from gibbsmin.thermo.database import load
from gibbsmin.thermo.record import Species

if TYPE_CHECKING:
    from gibbsmin.results.result import Result

GRAPHITE: Final = "C(s):graphite"
_WATCHED: Final = frozenset({*TOXIC, *FLAMMABLE, *SELF_IGNITING, "O2"})


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
        (k, name)
        for k, (name, gas) in enumerate(zip(system.species, system.gas, strict=True))
        if gas and name in _WATCHED
    ]
    amounts, potentials, certified = batch.amounts, batch.element_potentials, batch.certified
    gas_total = amounts[:, system.gas].sum(axis=1)  # (states,)
    graphite = _graphite(result)
    solid = system.species.index(GRAPHITE) if GRAPHITE in system.species else None
    activity = None
    if graphite is not None:
        T = np.where(certified, batch.temperature, STANDARD_TEMPERATURE)  # any will do where there is no answer
        activity = carbon_activity(potentials[:, system.elements.index("C")], graphite, T)
    mixed = feed = _mixed_feed(result)
    is_gas = np.asarray(system.gas, bool)
    start, keeps_heat = _start(result), "temperature" not in result.held
    found: list[list[Caution]] = []
    for i in range(len(gas_total)):
        if not certified[i]:
            found.append([])
            continue
        total = float(gas_total[i])
        gas = {name: float(amounts[i, k]) / total for k, name in watched} if total > 0.0 else {}
        here = Circumstances(
            gas=gas,
            temperature=float(batch.temperature[i]),
            pressure=float(batch.pressure[i]),
            carbon_activity=None if activity is None else float(activity[i]),
            solid_carbon=float(amounts[i, solid]) if solid is not None else 0.0,
            warnings=batch.state(i).warnings,
        )
        if start is not None:
            condensed = bool(amounts[i, ~is_gas].any())
            feed = [vessel(here.pressure, _known(start[i]), keeps_heat=keeps_heat, condensed=condensed), *mixed]
        account = result.audit(i)
        against = []
        if account is not None and account.entropy_generated < 0.0:
            against = [Caution("second law", account.sentence.replace("°C", "degC"), -account.lost_work)]
        found.append([*against, *feed, *cautions(here)])
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


def _mixed_feed(result: Result) -> list[Caution]:
    """Return the caution about the feeds as they meet, if any."""
    mixed: dict[str, float] = {}
    for feed in result.feeds.values():
        for name, n in feed.amounts.items():
            mixed[name] = mixed.get(name, 0.0) + n
    caution = flammable_feed(mixed)
    return [] if caution is None else [caution]
