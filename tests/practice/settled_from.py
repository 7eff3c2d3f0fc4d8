"""Settled mixtures for tests: solved ones, and ones put together by hand."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np
from numpy.typing import ArrayLike, NDArray

from gibbsmin.elements import parse_formula, split_name
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.settled import FeedFacts, Settled
from gibbsmin.states.solve import equilibria
from gibbsmin.states.system import System
from gibbsmin.thermo.database import load

Floats = NDArray[np.float64]
Amounts = Mapping[str, ArrayLike]


def feed_facts(amounts: Amounts, states: int) -> FeedFacts:
    """Put a feed of species together, [mol]."""
    by_name = {name: np.broadcast_to(np.asarray(value, float), (states,)) for name, value in amounts.items()}
    elements: dict[str, Floats] = {}
    mass = np.zeros(states)
    for name, amount in by_name.items():
        for symbol, count in parse_formula(split_name(name).formula)[0].items():
            elements[symbol] = elements.get(symbol, np.zeros(states)) + count * amount
        mass = mass + load().get(name).molar_mass * amount
    return FeedFacts(by_name, elements, mass)


def settle(
    system: System, feeds: Mapping[str, Amounts], temperature: ArrayLike, pressure: ArrayLike = 1e5, flow: bool = False
) -> Settled:
    """Solve states of held temperature [K] and pressure [Pa], and gather what the trade's numbers need."""
    swept = [np.asarray(value, float) for amounts in feeds.values() for value in amounts.values()]
    T, P, *_ = np.broadcast_arrays(np.atleast_1d(np.asarray(temperature, float)), np.asarray(pressure, float), *swept)
    facts = {name: feed_facts(amounts, len(T)) for name, amounts in feeds.items()}
    total = np.zeros((len(T), len(system.elements)))
    for i in range(len(T)):
        for feed in facts.values():
            total[i] += system.feed({name: float(amount[i]) for name, amount in feed.amounts.items()})
    batch = equilibria(system, element_amounts=total, temperature=T, pressure=P)
    assert batch.certified.all(), batch.reason
    return Settled(
        amounts=dict(zip(system.species, batch.amounts.T, strict=True)),
        records={record.name: record for record in system.records},
        temperature=batch.temperature,
        pressure=batch.pressure,
        element_potentials=dict(zip(system.elements, batch.element_potentials.T, strict=True)),
        feeds=facts,
        is_flow=flow,
    )


def by_hand(
    amounts: Amounts, feeds: Mapping[str, Amounts], temperature: float = 1000.0, pressure: float = 1e5
) -> Settled:
    """Put one state together from amounts alone [mol], at no equilibrium: its element potentials are not known."""
    facts = {name: feed_facts(feed, 1) for name, feed in feeds.items()}
    records = {name: load().get(name) for name in amounts}
    return Settled(
        amounts={name: np.atleast_1d(np.asarray(value, float)) for name, value in amounts.items()},
        records=records,
        temperature=np.array([temperature]),
        pressure=np.array([pressure]),
        element_potentials={symbol: np.array([np.nan]) for record in records.values() for symbol in record.elements},
        feeds=facts,
    )


def figures(found: list[KeyFigure]) -> dict[str, Floats]:
    """Values by name; names must not repeat, and labels must be short."""
    assert len({figure.name for figure in found}) == len(found)
    assert all(len(figure.label) <= 34 for figure in found)
    return {figure.name: figure.value for figure in found}
