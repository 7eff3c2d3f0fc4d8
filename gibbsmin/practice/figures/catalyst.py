"""Numbers of what harms catalysts: sulfur on nickel, bulk sulfides, carbonyls, poisons in the gas.

Coverage of a nickel surface with sulfur (I. Alstrup, J. R. Rostrup-Nielsen and S. Røen, Appl. Catal. 1 (1981) 303; from
memory), T in K:

    θ = 1.45 - 9.53e-5 T + 4.17e-5 T ln(p_H2S/p_H2)                                                        (1)

A metal M turns into its sulfide M_a S_b where H2S/H2 is above

    ln(H2S/H2) = (G°_MaSb + b G°_H2 - a G°_M - b G°_H2S) / bRT                                             (2)

and a carbonyl over the metal has the pressure p = K p_CO^n (bar), whatever that takes from the carbon monoxide.
"""

from __future__ import annotations

from functools import cache
from typing import Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

from gibbsmin.constants import STANDARD_PRESSURE, R
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.potentials import given_temperature, record_of, usable
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.practice.figures.tally import key, known, ratio
from gibbsmin.thermo.database import load
from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]

_SULFIDED: Final = {"Ni": "nickel", "Fe": "iron"}
_CARBONYLS: Final = {"Ni": ("Ni(CO)4", 4), "Fe": ("Fe(CO)5", 5)}
_POISONS: Final = ("S", "Cl", "As", "P")

_CARBONYL_BELOW: Final = 573.15
"""K below which carbonyls are told of; they peak where nickel is cool enough to hold them and warm enough to react."""


def catalyst(settled: Settled) -> list[KeyFigure]:
    """Numbers of what the gas would do to a metal catalyst or to steel that it touches.

    Parameters
    ----------
    settled : Settled
        Feeds and what they settle to; the metal need not be among them.

    Returns
    -------
    list of KeyFigure
        Those that any state has.
    """
    return known([*_sulfur(settled), *_carbonyls(settled), *_poisons(settled)])


def sulfur_coverage(sulfide_to_hydrogen: ArrayLike, temperature: ArrayLike) -> Floats:
    """Share of a nickel surface that sulfur covers, by eq. (1).

    Parameters
    ----------
    sulfide_to_hydrogen : array
        H2S/H2 of the gas, [-].
    temperature : array
        [K].

    Returns
    -------
    array
        [-], held within 0 and 1; nan without H2S.

    Examples
    --------
    >>> round(float(sulfur_coverage(1e-6, 973.15)), 3)
    0.797
    """
    x, T = np.broadcast_arrays(np.asarray(sulfide_to_hydrogen, float), np.asarray(temperature, float))
    there = x > 0.0
    coverage = 1.45 - 9.53e-5 * T + 4.17e-5 * T * np.log(np.where(there, x, 1.0))
    return np.where(there, np.clip(coverage, 0.0, 1.0), np.nan)


def _sulfur(settled: Settled) -> list[KeyFigure]:
    """Sulfur on a nickel surface, and whether the bulk of nickel or iron turns into sulfide."""
    x = ratio(settled.amount("H2S"), settled.amount("H2"))
    if not np.any(x > 0.0):
        return []
    found = [
        KeyFigure("h2s_to_h2", "H2S/H2", x, note="Moles."),
        KeyFigure(
            "sulfur_on_nickel",
            "Ni surface covered by S",
            sulfur_coverage(x, settled.temperature),
            shown="%",
            note="Alstrup, Rostrup-Nielsen & Røen 1981, from memory; held within 0 and 100 %.",
        ),
    ]
    for metal, word in _SULFIDED.items():
        edge = _sulfide_edge(settled, metal)
        found += [
            KeyFigure(
                f"sulfide_edge_{key(metal)}",
                f"H2S/H2 where {word} turns sulfide",
                edge,
                note=f"From pure {word} to its first sulfide in the data; alloys and oxides differ.",
            ),
            KeyFigure(
                f"sulfide_saturation_{key(metal)}",
                f"H2S/H2 over that for {word}",
                ratio(x, np.nan_to_num(edge)),
                note=f"Above 1 {word} turns into sulfide through and through; surfaces are poisoned long before.",
            ),
        ]
    return found


def _sulfide_edge(settled: Settled, metal: str) -> Floats:
    """H2S/H2 above which a metal turns into its first sulfide, eq. (2), (states,), [-]; nan beyond the data."""
    T = given_temperature(settled)
    pure = _lowest(_condensed_of(frozenset((metal,))), T)
    step = record_of(settled, "H2").gibbs_energy(T) - record_of(settled, "H2S").gibbs_energy(T)
    edges = np.full(len(T), np.inf)
    for record in _condensed_of(frozenset((metal, "S"))):
        a, b = record.elements[metal], record.elements["S"]
        ln_x = ((record.gibbs_energy(T) - a * pure) / b + step) / (R * T)
        there = usable(record, settled.temperature) & np.isfinite(ln_x)
        edges = np.where(there, np.minimum(edges, np.exp(ln_x)), edges)
    return np.where(np.isfinite(edges), edges, np.nan)


def _carbonyls(settled: Settled) -> list[KeyFigure]:
    """Carbonyls that nickel and iron would give to the gas, as mole fractions."""
    T, bar = given_temperature(settled), settled.pressure / STANDARD_PRESSURE
    monoxide = bar * settled.wet("CO")
    there = (T < _CARBONYL_BELOW) & (monoxide > 0.0)
    found = []
    for metal, (name, count) in _CARBONYLS.items():
        step = record_of(settled, name).gibbs_energy(T) - count * record_of(settled, "CO").gibbs_energy(T)
        ln_K = -(step - _lowest(_condensed_of(frozenset((metal,))), T)) / (R * T)
        ln_x = ln_K + count * np.log(np.where(there, monoxide, 1.0)) - np.log(bar)
        found.append(
            KeyFigure(
                f"carbonyl_{key(metal)}",
                f"{name} over {metal}",
                np.where(there, np.exp(np.minimum(ln_x, 0.0)), np.nan),
                shown="ppmv",
                note="Mole fraction over bare metal at this CO. Deadly at far less: keep nickel hot in CO.",
            )
        )
    return found


def _poisons(settled: Settled) -> list[KeyFigure]:
    """Atoms of catalyst poisons in the gas."""
    return [
        KeyFigure(
            f"poison_{key(symbol)}_dry",
            f"{symbol} in all gases, dry",
            ratio(settled.element(symbol, settled.gases), settled.dry_gas),
            shown="ppmv",
            note="Atoms for each mole of dry gas; the maker of the catalyst says how little it stands.",
        )
        for symbol in _POISONS
        if np.any(settled.element(symbol) > 0.0)
    ]


@cache
def _condensed_of(elements: frozenset[str]) -> tuple[Species, ...]:
    """Solids and liquids of the data that are made of just these elements."""
    return tuple(
        record for record in load().with_elements(elements) if record.condensed and record.elements.keys() == elements
    )


def _lowest(records: tuple[Species, ...], T: Floats) -> Floats:
    """Gibbs energy of the most stable of them whose data reach so far, (states,), [J/mol]; nan where none does."""
    each = [np.where(usable(record, T), record.gibbs_energy(T), np.inf) for record in records]
    least = np.min(each, axis=0)
    return np.where(np.isfinite(least), least, np.nan)
