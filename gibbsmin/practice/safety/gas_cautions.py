"""Cautions about what a gas does to people: poison, fire, oxygen.

Pure functions from mole fractions, temperature and pressure to one caution a kind. Limits and their sources are in
``hazards``. Mixtures of flammable gases follow Le Chatelier (1891): 1 / sum(y_j / L_j) over the gases that burn. Heat
widens the limits L, in percent of volume, by Zabetakis (1965), for the upper one from memory; with the heat of
combustion ΔH in kcal/mol and the temperature t in °C

    L(t) = L - 0.75 (t - 25) / ΔH  (lower),   L(t) = L + 0.75 (t - 25) / ΔH  (upper)                       (1)
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from functools import lru_cache

from gibbsmin.constants import STANDARD_TEMPERATURE
from gibbsmin.practice.feeds.heating import heating_value
from gibbsmin.practice.safety.caution import GRAVE, HARMFUL, Caution, Fed, celsius, largest, share
from gibbsmin.practice.safety.hazards import (
    AIR_OXYGEN,
    CARBONYL_PRESSURE,
    CARBONYL_TEMPERATURE,
    FLAMMABLE,
    IGNITION_MARGIN,
    OXYGEN_DEADLY,
    OXYGEN_DEFICIENT,
    OXYGEN_ENRICHED,
    REACTIVE,
    SELF_IGNITING,
    TOXIC,
)
from gibbsmin.thermo.database import load


def toxic(gas: Mapping[str, float]) -> Caution | None:
    """Gases above the level at which minutes can kill, and gases above their short-term limit.

    Parameters
    ----------
    gas : mapping of str to float
        Mole fractions, [-].

    Returns
    -------
    Caution or None
    """
    rows = [(gas[name] / row.limit, row, gas[name]) for name, row in TOXIC.items() if gas.get(name, 0.0) >= row.limit]
    if not rows:
        return None
    rows.sort(key=lambda item: -item[0])
    deadly = [(row, x) for _, row, x in rows if row.dangerous is not None and x >= row.dangerous]
    harmful = [(row, x) for _, row, x in rows if row.dangerous is None or x < row.dangerous]
    parts = []
    if deadly:
        named = ", ".join(f"{row.species} {share(x)} (limit {_level(row.dangerous)})" for row, x in deadly)
        parts.append(f"Toxic gas, immediately dangerous to life: {named}.")
    if harmful:
        named = ", ".join(f"{row.species} {share(x)} ({_level(row.limit)}, {row.kind})" for row, x in harmful)
        parts.append(f"{'Also above' if deadly else 'Toxic gas, above'} exposure limits: {named}.")
    parts.append("Treat every leak as dangerous.")
    return Caution("toxic", " ".join(parts), rows[0][0], GRAVE if deadly else HARMFUL)


def _level(x: float | None) -> str:
    """Exposure limit in ppm by volume."""
    return f"{_limit(1e6 * (x or 0.0))} ppmv" if (x or 0.0) >= 1e-7 else f"{1e9 * (x or 0.0):.3g} ppbv"


def _limit(ppm: float) -> str:
    """Limit in ppm: whole where it is, else two figures, as one that was turned over from mg/m3."""
    return f"{ppm:.6g}" if abs(ppm - round(ppm, 1)) < 1e-9 * ppm else f"{ppm:.2g}"


def flammable(gas: Mapping[str, float], temperature: float) -> Caution | None:
    """Whether the gas can burn when it meets air.

    Parameters
    ----------
    gas : mapping of str to float
        Mole fractions, [-].
    temperature : float
        [K].

    Returns
    -------
    Caution or None
    """
    burning = {name: x for name, x in gas.items() if name in FLAMMABLE and x > 0.0}
    need = sum(x / FLAMMABLE[name].lower for name, x in burning.items())
    selves = [name for name, least in SELF_IGNITING.items() if gas.get(name, 0.0) >= least]
    if need < 1.0 and not selves:
        return None
    if selves:
        return Caution("flammable", f"Gas that ignites in air by itself: {', '.join(selves)}.", max(need, 1e3))
    named = largest(burning, 3)
    text = f"Flammable gas ({named}): from about {share(1.0 / need)} of it in air can burn or explode."
    main = [name for name, x in burning.items() if x / FLAMMABLE[name].lower > 0.1 * need]
    if temperature > min(FLAMMABLE[name].ignition for name in main):
        text += " It is hot enough to ignite where it meets air."
    return Caution("flammable", text, need)


def flammable_feed(feed: Mapping[str, float], temperature: float = STANDARD_TEMPERATURE) -> Caution | None:
    """Whether the feeds, mixed and not yet reacted, lie in the flammable range.

    Parameters
    ----------
    feed : mapping of str to float
        Amounts of the mixed feeds, [mol]; condensed species are passed over.
    temperature : float
        Of the hottest feed, [K].

    Returns
    -------
    Caution or None

    Notes
    -----
    The upper limit is used only where the oxidant is no richer than air; limits are for 1 atm, and pressure and oxygen
    widen them.
    """
    named = inside_limits(feed, temperature)
    if named is None:
        return None
    text = (
        f"The feeds together ({named[0]}) lie inside the flammable range before they react. The calculation says"
        " nothing about ignition."
    )
    return Caution("flammable feed", text, named[1])


def inside_limits(feed: Mapping[str, float], temperature: float) -> tuple[str, float] | None:
    """Tell what of a mixture burns, and how far it is above its lower limit; None where it is outside its limits.

    Parameters
    ----------
    feed : mapping of str to float
        Amounts, [mol]; condensed species are passed over.
    temperature : float
        [K].

    Returns
    -------
    tuple of str and float, or None
        Its gases in words, and sum(y_j / L_j), [-].
    """
    gas = {name: n for name, n in feed.items() if n > 0.0 and "(s)" not in name and "(l)" not in name}
    total = sum(gas.values())
    burning = {name: n / total for name, n in gas.items() if name in FLAMMABLE}
    oxygen = gas.get("O2", 0.0) / total if total else 0.0
    if not burning or oxygen <= 0.0:
        return None
    whole = sum(burning.values())
    limits = {name: hot_limits(name, temperature) for name in burning}
    lower = sum(y / max(limits[name][0], 1e-6) for name, y in burning.items())
    upper = sum(y / limits[name][1] for name, y in burning.items())
    least = min(
        (row.oxygen for name, y in burning.items() if y > 0.05 * whole and (row := FLAMMABLE[name]).oxygen is not None),
        default=0.05,
    )
    oxidant = sum(gas.get(name, 0.0) for name in ("O2", "N2", "Ar")) / total
    too_rich = upper > 1.0 and oxygen / oxidant <= AIR_OXYGEN
    if lower < 1.0 or oxygen < least or too_rich:
        return None
    return f"{largest(burning, 3)}, O2 {share(oxygen)}", lower


@lru_cache(maxsize=256)
def hot_limits(name: str, temperature: float) -> tuple[float, float]:
    """Flammable limits in air of one gas, by equation (1).

    Parameters
    ----------
    name : str
        One of ``FLAMMABLE``.
    temperature : float
        [K]; below 25 degC the limits of 25 degC are kept.

    Returns
    -------
    tuple of float
        Lower and upper, mole fractions, [-]; not below 0, not above 1.
    """
    row = FLAMMABLE[name]
    kcal = heating_value([load().get(name)], [1.0]).lower / 4184.0  # of a mole
    wider = 0.75 * max(0.0, temperature - STANDARD_TEMPERATURE) / kcal / 100.0
    return max(0.0, row.lower - wider), min(1.0, row.upper + wider)


def premix(feeds: Iterable[Fed]) -> Caution | None:
    """Whether a feed holds fuel and oxygen together, and is so hot that it may ignite by itself.

    Parameters
    ----------
    feeds : iterable of Fed

    Returns
    -------
    Caution or None
    """
    for feed in feeds:
        T = feed.temperature
        if T is None or inside_limits(feed.amounts, T) is None:
            continue
        name, ignition = min(
            ((name, FLAMMABLE[name].ignition) for name, n in feed.amounts.items() if name in FLAMMABLE and n > 0.0),
            key=lambda item: item[1],
        )
        if ignition - IGNITION_MARGIN < T:
            text = (
                f"Feed {feed.name!r} is a mixture of fuel and oxygen at {celsius(T)}; {name} ignites by itself near"
                f" {celsius(ignition)}. It can burn before it reaches the burner; how soon, equilibrium does not say."
            )
            return Caution("hot premix", text, T - ignition)
    return None


def reactive(gas: Mapping[str, float]) -> Caution | None:
    """Gases that burn most materials or explode by themselves."""
    found = {name: gas[name] for name, least in REACTIVE.items() if gas.get(name, 0.0) >= least}
    if not found:
        return None
    text = f"Fiercely reactive gas: {largest(found, 3)}. It can ignite what it touches, or explode by itself."
    return Caution("reactive", text, max(found.values()))


def oxygen(gas: Mapping[str, float], temperature: float) -> Caution | None:
    """Oxygen above 23.5 % of a gas, in which metals and oils burn."""
    x = gas.get("O2", 0.0)
    if x <= OXYGEN_ENRICHED:
        return None
    hot = " hot" if temperature > 373.15 else ""
    text = (
        f"Oxygen-enriched{hot} gas: O2 {share(x)} (above {share(OXYGEN_ENRICHED)} by volume). Oil, seals, clothing and"
        " even steel can burn in it; materials and cleanliness follow the rules for oxygen service."
    )
    return Caution("oxygen", text, x)


def asphyxiant(gas: Mapping[str, float]) -> Caution | None:
    """Oxygen below 19.5 % of a gas."""
    x = gas.get("O2", 0.0)
    if not gas or x >= OXYGEN_DEFICIENT:
        return None
    grade = GRAVE if x < OXYGEN_DEADLY else HARMFUL
    text = f"The gas holds {share(x) if x > 1e-6 else 'no'} oxygen: it asphyxiates."
    return Caution("asphyxiant", text, 1.0 - x, grade)


def carbonyl(gas: Mapping[str, float], temperature: float, pressure: float) -> Caution | None:
    """CO that is cool and strong enough to make carbonyls where it meets nickel, iron or cobalt."""
    partial = gas.get("CO", 0.0) * pressure
    if temperature >= CARBONYL_TEMPERATURE or partial <= CARBONYL_PRESSURE:
        return None
    text = (
        f"CO at {partial / 1e5:.2g} bar below 230 degC: with nickel, iron or cobalt (catalyst or steel) it can form"
        " carbonyls, which kill at a few ppm. Keep nickel hot before CO comes in, and purge before cooling."
    )
    return Caution("carbonyl", text, partial)
