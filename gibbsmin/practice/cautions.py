"""Plain cautions about a state: pure functions from mole fractions, temperature and pressure to sentences.

One caution a kind, however many species it names. Limits and their sources are in ``hazards``. Mixtures of flammable
gases follow Le Chatelier (1891): 1 / sum(y_j / L_j) over the gases that burn.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Final

from gibbsmin.practice.hazards import (
    AIR_OXYGEN,
    CARBON_NEAR,
    CARBONYL_PRESSURE,
    CARBONYL_TEMPERATURE,
    FLAMMABLE,
    OXYGEN_DEFICIENT,
    OXYGEN_ENRICHED,
    SELF_IGNITING,
    TOXIC,
)

CLOSING: Final = (
    "Equilibrium says where the mixture would settle, not how fast, and not what happens at walls, in cold corners"
    " or on start-up. Local codes and licensed practice decide."
)
"""Ends every list of cautions."""

_ALIKE: Final = ("flammable feed",)  # the same in every state


@dataclass(frozen=True, slots=True)
class Caution:
    """One caution: its ``kind``, the ``text`` for people, and a ``weight`` that orders cautions of the same kind."""

    kind: str
    text: str
    weight: float = 0.0


@dataclass(frozen=True, slots=True)
class Circumstances:
    """What cautions are judged by.

    Attributes
    ----------
    gas : mapping of str to float
        Mole fractions in the gas, [-]; empty where there is no gas.
    temperature, pressure : float
        [K], [Pa].
    carbon_activity : float or None
        Activity of carbon against graphite, [-]; None where the system has no carbon.
    solid_carbon : float
        Amount of graphite that settles out, [mol or mol/s].
    warnings : sequence of str
        What the state itself warns of, species used outside their range among it.
    """

    gas: Mapping[str, float]
    temperature: float
    pressure: float
    carbon_activity: float | None = None
    solid_carbon: float = 0.0
    warnings: Sequence[str] = ()


def share(x: float) -> str:
    """Mole fraction as people say it: percent from 0.1 % up, else ppm by volume, two figures.

    Examples
    --------
    >>> share(0.0967), share(0.00123), share(8.21e-4), share(4.5e-6), share(1.0)
    ('9.7 %', '0.12 %', '820 ppmv', '4.5 ppmv', '100 %')
    """
    value, unit = (100.0 * x, "%") if x >= 1e-3 else (1e6 * x, "ppmv")
    return f"{float(f'{value:.2g}'):g} {unit}"


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
    return Caution("toxic", " ".join(parts), rows[0][0])


def _level(x: float | None) -> str:
    """Exposure limit in ppm by volume."""
    return f"{1e6 * (x or 0.0):.6g} ppmv" if (x or 0.0) >= 1e-7 else f"{1e9 * (x or 0.0):.3g} ppbv"


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
    named = ", ".join(f"{name} {share(x)}" for name, x in _largest(burning, 3))
    text = f"Flammable gas ({named}): from about {share(1.0 / need)} of it in air can burn or explode."
    main = [name for name, x in burning.items() if x / FLAMMABLE[name].lower > 0.1 * need]
    if temperature > min(FLAMMABLE[name].ignition for name in main):
        text += " It is hot enough to ignite where it meets air."
    return Caution("flammable", text, need)


def flammable_feed(feed: Mapping[str, float]) -> Caution | None:
    """Whether the feeds, mixed and not yet reacted, lie in the flammable range.

    Parameters
    ----------
    feed : mapping of str to float
        Amounts of the mixed feeds, [mol]; condensed species are passed over.

    Returns
    -------
    Caution or None

    Notes
    -----
    The upper limit is used only where the oxidant is no richer than air; limits are for 25 degC and 1 atm, and heat,
    pressure and oxygen widen them.
    """
    gas = {name: n for name, n in feed.items() if n > 0.0 and "(s)" not in name and "(l)" not in name}
    total = sum(gas.values())
    burning = {name: n / total for name, n in gas.items() if name in FLAMMABLE}
    oxygen = gas.get("O2", 0.0) / total if total else 0.0
    if not burning or oxygen <= 0.0:
        return None
    whole = sum(burning.values())
    lower = sum(y / FLAMMABLE[name].lower for name, y in burning.items())
    upper = sum(y / FLAMMABLE[name].upper for name, y in burning.items())
    limits = [(y / whole, FLAMMABLE[name].oxygen) for name, y in burning.items()]
    least = min((value for part, value in limits if part > 0.05 and value is not None), default=0.05)
    oxidant = sum(gas.get(name, 0.0) for name in ("O2", "N2", "Ar")) / total
    too_rich = upper > 1.0 and oxygen / oxidant <= AIR_OXYGEN
    if lower < 1.0 or oxygen < least or too_rich:
        return None
    named = ", ".join(f"{name} {share(y)}" for name, y in _largest(burning, 3))
    text = (
        f"The feeds together ({named}, O2 {share(oxygen)})"
        " lie inside the flammable range before they react. The calculation says nothing about ignition."
    )
    return Caution("flammable feed", text, lower)


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
    return Caution("asphyxiant", f"The gas holds {share(x) if x > 1e-6 else 'no'} oxygen: it asphyxiates.", 1.0 - x)


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


def carbon(activity: float | None, solid: float) -> Caution | None:
    """Solid carbon that forms, or that is near to forming."""
    if solid > 0.0:
        return Caution("carbon", "Solid carbon forms: expect soot, plugged catalyst and, on metal, dusting.", 1e3)
    if activity is None or activity < CARBON_NEAR:
        return None
    if activity < 1.0:
        text = f"Carbon activity {activity:.2f}: the margin to solid carbon is thin; colder spots may lie beyond it."
    else:
        text = f"Carbon activity {activity:.2g}, above 1: solid carbon was left out but would form, and metal can dust."
    return Caution("carbon", text, activity)


def outside_range(warnings: Sequence[str]) -> Caution | None:
    """Put what the state warns of in one caution."""
    if not warnings:
        return None
    return Caution("data", " ".join(warnings), float(len(warnings)))


def cautions(circumstances: Circumstances) -> list[Caution]:
    """All cautions about one state, the gravest kinds first; empty where there is none.

    Parameters
    ----------
    circumstances : Circumstances

    Returns
    -------
    list of Caution
        One a kind. ``CLOSING`` is not among them; ``sentences`` adds it.
    """
    c = circumstances
    poison = toxic(c.gas)
    found = (
        poison,
        flammable(c.gas, c.temperature),
        oxygen(c.gas, c.temperature),
        None if poison else asphyxiant(c.gas),
        carbonyl(c.gas, c.temperature, c.pressure),
        carbon(c.carbon_activity, c.solid_carbon),
        outside_range(c.warnings),
    )
    return [caution for caution in found if caution is not None]


def gather(states: Sequence[Iterable[Caution]], peaks: Mapping[str, float]) -> list[Caution]:
    """Cautions of many states as one list: of each kind the gravest, with how many states it holds for.

    Parameters
    ----------
    states : sequence of iterables of Caution
        The cautions of each state.
    peaks : mapping of str to float
        Highest mole fraction of each gas in any of the states, [-]; toxic gases are told by it, because they do not
        peak in one state.

    Returns
    -------
    list of Caution
    """
    gravest: dict[str, Caution] = {}
    count: dict[str, int] = {}
    for found in states:
        for caution in found:
            count[caution.kind] = count.get(caution.kind, 0) + 1
            if caution.kind not in gravest or caution.weight > gravest[caution.kind].weight:
                gravest[caution.kind] = caution
    if len(states) < 2:
        return list(gravest.values())
    everywhere = len(states)
    found = []
    for kind, caution in gravest.items():
        where = f"In all {everywhere}" if count[kind] == everywhere else f"In {count[kind]} of {everywhere}"
        worst = toxic(peaks) if kind == "toxic" else None
        if worst is not None:
            found.append(replace(worst, text=f"{where} states, highest of each: {worst.text}"))
        elif kind in _ALIKE and count[kind] == everywhere:
            found.append(caution)
        else:
            found.append(replace(caution, text=f"{where} states, at worst: {caution.text}"))
    return found


def sentences(found: Iterable[Caution]) -> list[str]:
    """Return the texts, ended by ``CLOSING`` where there are any."""
    texts = [caution.text for caution in found]
    return [*texts, CLOSING] if texts else []


def _largest(parts: Mapping[str, float], count: int) -> list[tuple[str, float]]:
    """Return the ``count`` largest parts, largest first."""
    return sorted(parts.items(), key=lambda item: -item[1])[:count]
