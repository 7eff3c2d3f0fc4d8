"""What a case holds, in numbers: the pair of conditions for the solver, and the account of the feeds."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from gibbsmin.case.feed_states import FeedStates
from gibbsmin.case.fields import OF_FEEDS, RuleError, in_si
from gibbsmin.case.held_schema import Held
from gibbsmin.case.schema import Case
from gibbsmin.errors import InputError
from gibbsmin.results.account import Account
from gibbsmin.states.solve import COLDEST, HOTTEST

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class Conditions:
    """What is held in every state.

    Attributes
    ----------
    held : dict of str to array (states,)
        The two held quantities, by the names that `equilibria` takes, in SI.
    efficiency : array (states,) or None
        Isentropic efficiency of the step, [-]; None where there is none.
    account : Account
        What the feeds bring.
    """

    held: dict[str, Floats]
    efficiency: Floats | None
    account: Account


def read_conditions(case: Case, feeds: FeedStates, basis: str) -> Conditions:
    """Turn ``[held]`` into numbers.

    Parameters
    ----------
    case : Case
        The case.
    feeds : FeedStates
        Its feeds in every state.
    basis : str
        ``"mol"`` or ``"mol/s"``.

    Returns
    -------
    Conditions

    Raises
    ------
    RuleError
        A feed does not say what is needed, a unit does not suit, or a temperature is beyond all data; with the key.
    """
    held = case.held
    _check_feeds(held, feeds, basis)
    _check_temperatures(held, feeds)
    pair: dict[str, Floats] = {}
    if held.mechanical == "volume":
        pair["volume"] = feeds.volume if held.volume == OF_FEEDS else number(held, "volume", feeds, "m3")
    else:
        pair["pressure"] = number(held, "pressure", feeds, "Pa")
    otherwise = pair.get("pressure")
    heat = np.zeros(feeds.states) if held.adiabatic else None
    if held.heat is not None:
        heat = number(held, "heat", feeds, "W" if basis == "mol/s" else "J")
    account = Account(
        feed_enthalpy=feeds.enthalpy,
        feed_internal_energy=feeds.internal_energy,
        feed_entropy=feeds.entropy(otherwise),
        lower_heating_value=feeds.lower_heating_value,
        closed=held.mechanical == "volume",
        shaft=held.thermal == "entropy",
        given_heat=heat,
        surroundings_temperature=in_si(case.surroundings.temperature, "K"),
        source_temperature=_source(case),
        remark=_remark(feeds, otherwise),
    )
    if held.thermal == "temperature":
        pair["temperature"] = number(held, "temperature", feeds, "K")
    elif held.thermal == "entropy":
        entropy = feeds.mixed_entropy(otherwise)
        assert entropy is not None, "the feeds were checked"
        pair["entropy"] = entropy
    else:
        assert account.feed_energy is not None, "the feeds were checked"
        assert heat is not None, "adiabatic or heat is held"
        pair["internal_energy" if account.closed else "enthalpy"] = account.feed_energy + heat
    efficient = held.isentropic_efficiency is not None
    return Conditions(pair, number(held, "isentropic_efficiency", feeds, "1") if efficient else None, account)


def number(held: Held, key: str, feeds: FeedStates, unit: str) -> Floats:
    """Value of a key of ``[held]`` in every state, (states,), in ``unit``."""
    try:
        value = in_si(getattr(held, key), unit)
    except InputError as error:
        kind = "flows" if unit == "W" else "amounts"
        raise RuleError(f"{str(error).removeprefix('value: ')}, because the feeds are {kind}", "held", key) from None
    return np.asarray(feeds.columns.get(f"held.{key}", np.full(feeds.states, value)))


def _check_feeds(held: Held, feeds: FeedStates, basis: str) -> None:
    """Refuse feeds that do not say what the held conditions need."""
    if held.mechanical == "volume" and basis == "mol/s":
        raise RuleError(
            "a closed vessel holds amounts, but the feeds are flows; give them as amounts", "held", "volume"
        )
    by_volume = held.volume == OF_FEEDS
    if (held.thermal != "temperature" or by_volume) and feeds.without_enthalpy:
        feed = feeds.without_enthalpy[0]
        what = "volume of feeds" if held.thermal == "temperature" else held.thermal
        why = f"{'' if what == 'adiabatic' else 'held '}{what} needs the energy of every feed"
        raise RuleError(f'{why}; give its temperature, for example temperature = "25 degC"', "feeds", feed.name)
    if held.thermal == "entropy" and feeds.fuels:
        fuel = feeds.fuels[0]
        raise RuleError(
            "held entropy needs that of every feed, and of a fuel known by its analysis there is only an estimate; "
            "give it by species",
            "feeds",
            fuel.name,
            fuel.made_of,
        )
    if held.mechanical == "volume" and (by_volume or held.thermal == "entropy") and feeds.without_pressure:
        raise RuleError(
            f"held {'volume of feeds' if by_volume else 'entropy at a held volume'} needs the pressure of every gas;"
            ' give it, for example pressure = "1 bar"',
            "feeds",
            feeds.without_pressure[0].name,
        )
    if by_volume and not any(feed.gas > 0.0 for feed in feeds.recipes):
        raise RuleError("the feeds hold no gas, so their volume is not known; give the volume", "held", "volume")


def _check_temperatures(held: Held, feeds: FeedStates) -> None:
    """Refuse temperatures beyond all data."""
    asked = {f"feeds.{feed.name}.temperature": feeds.temperature(feed) for feed in feeds.recipes}
    if held.temperature is not None:
        asked["held.temperature"] = number(held, "temperature", feeds, "K")
    for path, values in asked.items():
        T = np.atleast_1d(np.asarray([] if values is None else values, float))
        beyond = T[(T < COLDEST) | (T > HOTTEST)]
        if beyond.size:
            varied = [k for k, axis in enumerate(feeds.axes) if axis.vary == path]
            key = ("sweep", varied[0]) if varied else tuple(path.split("."))
            raise RuleError(f"{beyond[0]:.6g} K is beyond all data; expected {COLDEST:g} to {HOTTEST:g} K", *key)


def _source(case: Case) -> float | None:
    given = case.surroundings.heat_source_temperature
    return None if given is None else in_si(given, "K")


def _remark(feeds: FeedStates, otherwise: Floats | None) -> str:
    """Say which feeds are taken at the held pressure, which lack one, and which have an estimate of their entropy."""
    if feeds.without_enthalpy:
        return ""
    names = ", ".join(feed.name for feed in feeds.without_pressure)
    if names and otherwise is None:
        return f"no second-law account: the pressure of {names} is not given"
    said = [f"taken at the held pressure: {names}"] if names else []
    if fuels := ", ".join(feed.name for feed in feeds.fuels):
        said.append(f"entropy estimated (Eisermann et al. 1980): {fuels}")
    return "; ".join(said)
