"""All cautions about a state, and about many states; what each of them says is in the modules it comes from.

One caution a kind, however many species it names.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field, replace
from typing import Final

from gibbsmin.practice.safety.caution import GRAVE, Caution, Fed, foremost
from gibbsmin.practice.safety.gas_cautions import (
    asphyxiant,
    carbonyl,
    flammable,
    flammable_feed,
    oxygen,
    premix,
    reactive,
    toxic,
)
from gibbsmin.practice.safety.plant_cautions import (
    acid,
    carbon,
    cracking,
    diluted,
    dioxins,
    metal_dusting,
    outside_range,
    steel,
)

__all__ = ["CLOSING", "Caution", "Circumstances", "cautions", "gather", "sentences"]

CLOSING: Final = (
    "Equilibrium says where the mixture would settle, not how fast, and not what happens at walls, in cold corners"
    " or on start-up. Local codes and licensed practice decide."
)
"""Ends every list of cautions."""

_ALIKE: Final = ("flammable feed", "hot premix", "cracking")  # the same in every state


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
    feeds : sequence of Fed
        What is fed.
    wall_temperature : float or None
        Of the coldest wall or stack that the case names, [K].
    dew_points : mapping of str to float
        Dew points of the gas that meets it, by name, [K].
    measured_oxygen, reference_oxygen, oxidant_oxygen : float or None
        O2 of the dry flue gas, of the reference, and of the dry oxidant, mole fractions, [-]; None where the case does
        not ask for them.
    """

    gas: Mapping[str, float]
    temperature: float
    pressure: float
    carbon_activity: float | None = None
    solid_carbon: float = 0.0
    warnings: Sequence[str] = ()
    feeds: Sequence[Fed] = ()
    wall_temperature: float | None = None
    dew_points: Mapping[str, float] = field(default_factory=dict)
    measured_oxygen: float | None = None
    reference_oxygen: float | None = None
    oxidant_oxygen: float | None = None


def cautions(circumstances: Circumstances) -> list[Caution]:
    """All cautions about one state, the gravest first; empty where there is none.

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
    activity = 1.0 if c.solid_carbon > 0.0 else c.carbon_activity
    found = (
        _mixed(c.feeds),
        premix(c.feeds),
        poison,
        flammable(c.gas, c.temperature),
        reactive(c.gas),
        oxygen(c.gas, c.temperature),
        None if poison and poison.grade == GRAVE else asphyxiant(c.gas),
        carbonyl(c.gas, c.temperature, c.pressure),
        carbon(c.carbon_activity, c.solid_carbon),
        metal_dusting(c.gas, activity, c.temperature),
        steel(c.gas, c.temperature, c.pressure),
        acid(c.wall_temperature, c.dew_points),
        dioxins(c.gas, c.temperature, c.wall_temperature),
        cracking(c.feeds),
        diluted(c.measured_oxygen, c.reference_oxygen, c.oxidant_oxygen),
        outside_range(c.warnings),
    )
    return sorted((caution for caution in found if caution is not None), key=lambda caution: caution.grade)


def _mixed(feeds: Sequence[Fed]) -> Caution | None:
    """Judge the feeds as they meet."""
    mixed: dict[str, float] = {}
    for feed in feeds:
        for name, n in feed.amounts.items():
            mixed[name] = mixed.get(name, 0.0) + n
    hottest = max((feed.temperature for feed in feeds if feed.temperature is not None), default=None)
    return flammable_feed(mixed) if hottest is None else flammable_feed(mixed, hottest)


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
        As `foremost` orders and shortens it.
    """
    gravest: dict[str, Caution] = {}
    count: dict[str, int] = {}
    for found in states:
        for caution in found:
            count[caution.kind] = count.get(caution.kind, 0) + 1
            if caution.kind not in gravest or caution.weight > gravest[caution.kind].weight:
                gravest[caution.kind] = caution
    if len(states) < 2:
        return foremost(gravest.values())
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
    return foremost(found)


def sentences(found: Iterable[Caution]) -> list[str]:
    """Return the texts, ended by ``CLOSING`` where there are any."""
    texts = [caution.text for caution in found]
    return [*texts, CLOSING] if texts else []
