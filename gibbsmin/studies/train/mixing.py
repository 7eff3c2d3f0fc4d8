"""Streams that mix, and temperatures of streams that do not react: one Newton iteration in T for all states.

Enthalpy and entropy of an unreacted stream rise with its temperature, so that every trial narrows a bracket; a step
that leaves the bracket is replaced by its middle. Where a species changes its form at a temperature, a range of
enthalpies belongs to it: the bracket then closes on that temperature.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.states.solve import COLDEST, HOTTEST
from gibbsmin.studies.train.stream import Stream, Substances

Floats = NDArray[np.float64]

ROUNDS: Final = 100
CLOSE: Final = 1e-13
"""Relative width of a bracket, or step, that ends the search for a temperature."""


def mixed(streams: Sequence[Stream], pressure: Floats | None = None) -> Stream:
    """Mix streams without heat and without reaction.

    Parameters
    ----------
    streams : sequence of Stream
        At least one. One that holds nothing does not count.
    pressure : array (states,) or None
        Of the mixture, [Pa]; the lowest of those that hold something unless given.

    Returns
    -------
    Stream
        Its temperature is nan where a fuel by analysis, or something of unknown temperature, is among them.
    """
    if len(streams) == 1 and pressure is None:
        return streams[0]
    substances = streams[0].substances
    amounts = np.sum([stream.amounts for stream in streams], axis=0)
    enthalpy = np.sum([stream.enthalpy for stream in streams], axis=0)
    symbols = dict.fromkeys(symbol for stream in streams for symbol in stream.atoms)
    zero = np.zeros(len(amounts))
    atoms = {s: np.asarray(sum((stream.atoms.get(s, zero) for stream in streams), zero)) for s in symbols}
    holds = np.array([stream.total > 0.0 for stream in streams])
    P = np.where(holds, [stream.pressure for stream in streams], np.inf).min(axis=0) if pressure is None else pressure
    P = np.where(np.isfinite(P), P, streams[0].pressure)
    if len(streams) == 1:
        return _unreacted(substances, amounts, enthalpy, P, streams[0].temperature, atoms, streams)
    T = np.where(holds, [stream.temperature for stream in streams], np.nan)
    known = ~np.isnan(T) | ~holds
    first = np.where(
        known.all(axis=0), np.nanmean(np.where(holds, T, [s.temperature for s in streams]), axis=0), np.nan
    )
    return _unreacted(substances, amounts, enthalpy, P, first, atoms, streams)


def _unreacted(
    substances: Substances,
    amounts: Floats,
    enthalpy: Floats,
    pressure: Floats,
    first: Floats,
    atoms: dict[str, Floats],
    streams: Sequence[Stream],
) -> Stream:
    """Make the stream of these amounts and this enthalpy; a fuel by analysis keeps the entropies apart."""
    if any(values.any() for values in atoms.values()):
        entropy = np.sum([stream.entropy for stream in streams], axis=0)
        return Stream(substances, amounts, np.full(len(amounts), np.nan), pressure, enthalpy, entropy, atoms)
    T = temperature_of_enthalpy(substances, amounts, enthalpy, first)
    entropy = substances.entropy(amounts, np.where(np.isnan(T), 298.15, T), pressure)
    return Stream(substances, amounts, T, pressure, enthalpy, np.where(np.isnan(T), np.nan, entropy))


def temperature_of_enthalpy(substances: Substances, amounts: Floats, enthalpy: Floats, first: Floats) -> Floats:
    """Temperature at which an unreacted stream has an enthalpy.

    Parameters
    ----------
    substances : Substances
    amounts : array (states, S)
        [mol].
    enthalpy : array (states,)
        [J].
    first : array (states,)
        A guess, [K]; nan where there is none to be found.

    Returns
    -------
    array (states,)
        [K]; nan where ``first`` is, and ``first`` where there is nothing. Where it would lie `beyond` all data, their
        end: on the way to a steady state a stream may be too hot, which it is not there.
    """
    return _solved(
        lambda T: substances.enthalpy(amounts, T) - enthalpy, lambda T: substances.heat_capacity(amounts, T),
        amounts, first,
    )  # fmt: skip


def temperature_of_entropy(
    substances: Substances, amounts: Floats, entropy: Floats, pressure: Floats, first: Floats
) -> Floats:
    """Temperature at which an unreacted stream has an entropy at a pressure; as `temperature_of_enthalpy`."""
    return _solved(
        lambda T: substances.entropy(amounts, T, pressure) - entropy,
        lambda T: substances.heat_capacity(amounts, T) / T,
        amounts, first,
    )  # fmt: skip


def beyond(temperature: Floats) -> NDArray[np.bool_]:
    """Tell where a temperature lies at the end of all data."""
    return np.asarray((temperature < 1.001 * COLDEST) | (temperature > 0.999 * HOTTEST))


def _solved(
    excess: Callable[[Floats], Floats], slope: Callable[[Floats], Floats], amounts: Floats, first: Floats
) -> Floats:
    """Find where ``excess`` of T, which rises, is zero, from ``first``."""
    sought = ~np.isnan(first) & (amounts.sum(axis=1) > 0.0)
    T = np.where(sought, first, 298.15)
    low, high = np.full(len(T), COLDEST), np.full(len(T), HOTTEST)
    for _ in range(ROUNDS):
        over, rise = excess(T), slope(T)
        high, low = np.where(over > 0.0, T, high), np.where(over > 0.0, low, T)
        step = T - over / np.where(rise > 0.0, rise, 1.0)
        found = np.abs(step - T) <= CLOSE * T  # T itself is an end of the bracket
        new = np.where(found | ((step > low) & (step < high)), step, 0.5 * (low + high))
        moved = np.abs(new - T) > CLOSE * T
        T = np.where(sought, new, T)
        if not np.any(sought & moved & (high - low > CLOSE * T)):
            break
    return np.where(sought, T, first)
