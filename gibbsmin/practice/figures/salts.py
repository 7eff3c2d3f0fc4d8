"""Where alkali, chlorine and sulfur of a fuel or a meal go: vapours, condensed salts, sulfate against chloride.

Common practice, no source. Salts are pure phases here: real deposits are mixed and melt lower, 80 K below the pure
salts for potassium chloride with sulfate, and as low as 250 degC with chlorides of zinc and lead (from memory).
"""

from __future__ import annotations

from collections.abc import Callable
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.elements import ATOMIC_WEIGHT
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.practice.figures.tally import key, known, ratio
from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]

_ALKALI: Final = ("K", "Na")
_FOLLOWED: Final = ("K", "Na", "Cl", "S")

_SHOWN_SHARE: Final = 0.01
"""Share of an element from which a species is named."""

_NAMED: Final = 6
"""So many species of an element are named at most, those with the largest share first."""


def salts(settled: Settled) -> list[KeyFigure]:
    """Numbers of alkali salts in a gas and in what condenses from it.

    Parameters
    ----------
    settled : Settled
        Feeds and what they settle to.

    Returns
    -------
    list of KeyFigure
        Those that any state has; none where no feed holds potassium or sodium.
    """
    if not any(np.any(settled.fed_element(symbol) > 0.0) for symbol in _ALKALI):
        return []
    found = [*_fed_ratios(settled), *_kinds(settled)]
    for symbol in _FOLLOWED:
        found += _places(settled, symbol)
    return known(found)


def _fed_ratios(settled: Settled) -> list[KeyFigure]:
    """Whether sulfur suffices to keep chlorine out of the salts."""
    K, Na, Cl, S = (settled.fed_element(symbol) for symbol in _FOLLOWED)
    note = "Atoms in all feeds"
    return [
        KeyFigure(
            "s_to_cl_fed",
            "S/Cl fed",
            ratio(S, Cl),
            note=f"{note}; chloride deposits become rare above about 4 (common practice, no source).",
        ),
        KeyFigure(
            "sulfate_to_chloride_fed",
            "2 S/Cl fed",
            ratio(2.0 * S, Cl),
            note=f"{note}; alkali that sulfate can bind, over that chloride can.",
        ),
        KeyFigure(
            "alkali_to_acid_fed",
            "(K + Na)/(Cl + 2 S) fed",
            ratio(K + Na, Cl + 2.0 * S),
            note=f"{note}; above 1 alkali is left for hydroxide, carbonate and silicate.",
        ),
    ]


def _kinds(settled: Settled) -> list[KeyFigure]:
    """Alkali by the kind of its salt, and chlorine in what has condensed."""
    alkali = sum((settled.element(symbol) for symbol in _ALKALI), settled.zero)

    def as_kind(counts: Callable[[Species], bool]) -> Floats:
        names = [name for name, record in settled.records.items() if counts(record)]
        return ratio(sum((settled.element(symbol, names) for symbol in _ALKALI), settled.zero), alkali)

    deposit = [name for name, record in settled.records.items() if record.condensed and _has_alkali(record)]
    mass = sum((settled.records[name].molar_mass * settled.amounts[name] for name in deposit), settled.zero)
    vapour = [name for name, record in settled.records.items() if not record.condensed and _is_chloride(record)]
    chlorides = sum((settled.element(symbol, vapour) for symbol in _ALKALI), settled.zero)
    note = "Share of all potassium and sodium, gas and condensed."
    return [
        KeyFigure("alkali_as_sulfate", "alkali as sulfate", as_kind(_is_sulfate), shown="%", note=note),
        KeyFigure("alkali_as_chloride", "alkali as chloride", as_kind(_is_chloride), shown="%", note=note),
        KeyFigure("alkali_in_gas", "alkali in the gas", as_kind(lambda one: not one.condensed), shown="%", note=note),
        KeyFigure(
            "alkali_chlorides_wet",
            "alkali chlorides in gas, wet",
            ratio(chlorides, settled.gas),
            shown="ppmv",
            note="As KCl and NaCl, double molecules counted twice; mole fraction, wet gas.",
        ),
        KeyFigure(
            "chlorine_in_deposit",
            "Cl in condensed alkali salts",
            ratio(ATOMIC_WEIGHT["Cl"] * settled.element("Cl", deposit), mass),
            "kg/kg",
            "%",
            "Mass %; chloride under a deposit corrodes superheaters.",
        ),
    ]


def _places(settled: Settled, symbol: str) -> list[KeyFigure]:
    """Species that hold an element, the largest shares first."""
    total = settled.element(symbol)
    shares = {
        name: ratio(settled.element(symbol, [name]), total)
        for name, record in settled.records.items()
        if symbol in record.elements
    }
    peaks = {name: float(np.max(np.nan_to_num(share))) for name, share in shares.items()}
    named = sorted((name for name, peak in peaks.items() if peak >= _SHOWN_SHARE), key=lambda name: -peaks[name])
    return [
        KeyFigure(
            f"{key(symbol)}_in_{key(name)}",
            f"{symbol} in {name}{'' if settled.records[name].condensed else ' gas'}",
            shares[name],
            shown="%",
            note=f"Share of all {symbol}, gas and condensed.",
        )
        for name in named[:_NAMED]
    ]


def _has_alkali(record: Species) -> bool:
    """Whether a species holds potassium or sodium."""
    return not record.elements.keys().isdisjoint(_ALKALI)


def _is_sulfate(record: Species) -> bool:
    """Whether a species is a sulfate of alkali: four atoms of oxygen for each of sulfur."""
    elements = record.elements
    return _has_alkali(record) and "S" in elements and elements.get("O", 0.0) >= 4.0 * elements["S"]


def _is_chloride(record: Species) -> bool:
    """Whether a species is a chloride of alkali."""
    return _has_alkali(record) and "Cl" in record.elements and "O" not in record.elements
