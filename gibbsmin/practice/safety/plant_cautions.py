"""Cautions about what a gas does to the plant: carbon, steel, cold walls; and about numbers that mislead.

Thresholds and their sources are in ``hazards``. Each caution says what equilibrium cannot say.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from typing import Final

from gibbsmin.elements import parse_formula
from gibbsmin.errors import FormulaError
from gibbsmin.practice.flue_gas.emissions import DILUTED, ENRICHED
from gibbsmin.practice.safety.caution import DATA, PLANT, Caution, Fed, celsius, largest, share
from gibbsmin.practice.safety.hazards import (
    CARBON_NEAR,
    CHLORINE,
    DEW_MARGIN,
    DIOXIN_RANGE,
    DIOXIN_TRACE,
    DUSTING_MONOXIDE,
    DUSTING_RANGE,
    FUEL_CRACKS,
    HYDROGEN_ATTACK,
    NITRIDING,
    SULFIDATION,
)

_DEPOSITS: Final = 1.0 - 1e-6


def carbon(activity: float | None, solid: float) -> Caution | None:
    """Solid carbon that forms, or that is near to forming."""
    if solid > 0.0:
        text = "Solid carbon forms: expect soot and plugged catalyst. How fast, and where, equilibrium does not say."
        return Caution("carbon", text, 1e3, PLANT)
    if activity is None or activity < CARBON_NEAR:
        return None
    if activity < 1.0:
        text = f"Carbon activity {activity:.2f}: the margin to solid carbon is thin; colder spots may lie beyond it."
    else:
        text = f"Carbon activity {activity:.2g}, above 1: solid carbon was left out but would form."
    return Caution("carbon", text, activity, PLANT)


def metal_dusting(gas: Mapping[str, float], activity: float | None, temperature: float) -> Caution | None:
    """Gas from which carbon may form, rich in CO, at temperatures at which iron, nickel and cobalt crumble in it.

    Parameters
    ----------
    gas : mapping of str to float
        Mole fractions, [-].
    activity : float or None
        Of carbon, [-].
    temperature : float
        [K].

    Returns
    -------
    Caution or None
    """
    low, high = DUSTING_RANGE
    if activity is None or activity < _DEPOSITS or gas.get("CO", 0.0) < DUSTING_MONOXIDE or temperature < low:
        return None
    where = "at" if temperature <= high else "where it cools past"
    text = (
        f"Metal dusting: with carbon activity {activity:.2g} and CO {share(gas['CO'])}, alloys of iron, nickel and"
        f" cobalt can crumble {where} 400 to 800 degC. Scales and traces of sulfur decide, not equilibrium."
    )
    return Caution("metal dusting", text, activity, PLANT)


def steel(gas: Mapping[str, float], temperature: float, pressure: float) -> Caution | None:
    """Tell what hydrogen, H2S and ammonia do to hot steel.

    Parameters
    ----------
    gas : mapping of str to float
        Mole fractions, [-].
    temperature, pressure : float
        [K], [Pa].

    Returns
    -------
    Caution or None
    """
    parts, weight = [], 0.0
    hydrogen = gas.get("H2", 0.0) * pressure
    if temperature > HYDROGEN_ATTACK[0] and hydrogen > HYDROGEN_ATTACK[1]:
        parts.append(f"H2 at {hydrogen / 1e5:.2g} bar makes it brittle above 220 degC (grades by API RP 941)")
        weight = max(weight, hydrogen / HYDROGEN_ATTACK[1])
    sulfide = gas.get("H2S", 0.0)
    if temperature > SULFIDATION[0] and sulfide > SULFIDATION[1]:
        parts.append(f"H2S {share(sulfide)} scales it above 260 degC")
        weight = max(weight, sulfide / SULFIDATION[1])
    ammonia = gas.get("NH3", 0.0)
    if temperature > NITRIDING[0] and ammonia > NITRIDING[1]:
        parts.append(f"NH3 {share(ammonia)} nitrides it above 350 degC")
        weight = max(weight, ammonia / NITRIDING[1])
    if not parts:
        return None
    text = f"Steel as hot as this gas: {'; '.join(parts)}. The temperature of the wall and its alloy decide."
    return Caution("steel", text, weight, PLANT)


def acid(wall: float | None, dew_points: Mapping[str, float]) -> Caution | None:
    """Watch for a wall or stack so cold that water or acid condenses on it.

    Parameters
    ----------
    wall : float or None
        Its temperature, [K].
    dew_points : mapping of str to float
        By name, [K]; nan where the gas has none.

    Returns
    -------
    Caution or None
    """
    known = {name: dew for name, dew in dew_points.items() if dew == dew}
    if wall is None or not known:
        return None
    name, highest = max(known.items(), key=lambda item: item[1])
    if wall >= highest + DEW_MARGIN:
        return None
    below = "below" if wall < highest else f"less than {DEW_MARGIN:g} K above"
    text = (
        f"Acid condensation: wall or stack at {celsius(wall)} lies {below} the highest dew point ({name}:"
        f" {celsius(highest)}). Correlations scatter by some 10 K, and colder spots come first."
    )
    return Caution("acid condensation", text, highest + DEW_MARGIN - wall, PLANT)


def dioxins(gas: Mapping[str, float], temperature: float, wall: float | None) -> Caution | None:
    """Chlorine and oxygen in a gas that is, or is cooled through, where dioxins form.

    Parameters
    ----------
    gas : mapping of str to float
        Mole fractions, [-].
    temperature : float
        [K].
    wall : float or None
        Temperature to which it is cooled, [K].

    Returns
    -------
    Caution or None
    """
    low, high = DIOXIN_RANGE
    coldest = temperature if wall is None else min(temperature, wall)
    chlorine = sum(gas.get(name, 0.0) for name in CHLORINE)
    carbon_there = gas.get("CO2", 0.0) + gas.get("CO", 0.0)
    if temperature < low or coldest > high or min(chlorine, gas.get("O2", 0.0), carbon_there) < DIOXIN_TRACE:
        return None
    text = (
        f"Dioxins: this gas (chlorine {share(chlorine)}) passes 200 to 450 degC, where they form on fly ash. They are"
        " no product of equilibrium: burn-out, quick cooling and measurement decide."
    )
    return Caution("dioxins", text, chlorine, PLANT)


def cracking(feeds: Iterable[Fed]) -> Caution | None:
    """Hydrocarbons heated without enough steam or oxygen, so that they crack to soot on the way."""
    for feed in feeds:
        total = sum(feed.amounts.values())
        if feed.temperature is None or feed.temperature <= FUEL_CRACKS or not total:
            continue
        parts = {name: n / total for name, n in feed.amounts.items() if _is_hydrocarbon(name)}
        if sum(parts.values()) < 0.01 or feed.amounts.get("H2O", 0.0) + feed.amounts.get("O2", 0.0) > 0.01 * total:
            continue
        text = (
            f"Feed {feed.name!r} ({largest(parts, 2)}) at {celsius(feed.temperature)}: hydrocarbons without steam crack"
            " to soot in preheaters above some 550 degC. How fast, equilibrium does not say."
        )
        return Caution("cracking", text, feed.temperature, PLANT)
    return None


def diluted(measured: float | None, reference: float | None, oxidant: float | None) -> Caution | None:
    """Concentrations turned to a reference oxygen that does not fit the gas.

    Parameters
    ----------
    measured, reference, oxidant : float or None
        O2 of the dry flue gas, of the reference, and of the dry oxidant, mole fractions, [-].

    Returns
    -------
    Caution or None
    """
    if reference is None:
        return None
    if oxidant is not None and oxidant > ENRICHED:
        text = (
            f"The oxidant holds O2 {share(oxidant)}, it is no air: a reference oxygen has no meaning here. Compare by"
            " mass per energy."
        )
    elif measured is not None and measured > DILUTED:
        text = (
            f"The dry flue gas holds O2 {share(measured)}: turned to {share(reference)}, errors of the measurement grow"
            " more than fourfold. Compare by mass per energy."
        )
    else:
        return None
    return Caution("reference oxygen", text, max(measured or 0.0, oxidant or 0.0), PLANT)


def outside_range(warnings: Sequence[str]) -> Caution | None:
    """Put what the state warns of in one caution."""
    if not warnings:
        return None
    return Caution("data", " ".join(warnings), float(len(warnings)), DATA)


def _is_hydrocarbon(name: str) -> bool:
    """Whether a gas is made of carbon and hydrogen alone."""
    try:
        elements = parse_formula(name.partition(":")[0])[0]
    except FormulaError:
        return False
    return elements.keys() == {"C", "H"}
