"""Numbers of gases with halogens: acids, free halogens, and the Deacon balance between them.

    4 HCl + O2 = 2 Cl2 + 2 H2O                                                                             (1)

runs to the right on cooling, but below some 600 degC too slowly without a catalyst (common practice, no source), so
that a quenched gas keeps the free chlorine of the hot end. Dioxins form on fly ash between about 200 and 450 degC by
paths that equilibrium does not know (common practice, no source).
"""

from __future__ import annotations

from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.elements import ATOMIC_WEIGHT
from gibbsmin.practice.figures.fed import fuels
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.practice.figures.tally import key, known, ratio

Floats = NDArray[np.float64]

_GASES: Final = {
    "Cl": ("HCl", "Cl2", "Cl", "COCl2"),
    "Br": ("HBr", "Br2", "Br", "BrCl"),
    "F": ("HF", "F2"),
    "I": ("HI", "I2", "I"),
}

_FREE: Final = {
    "Cl": {"Cl2": 2, "Cl": 1, "BrCl": 1, "ICl": 1},
    "Br": {"Br2": 2, "Br": 1, "BrCl": 1, "IBr": 1},
    "I": {"I2": 2, "I": 1, "ICl": 1, "IBr": 1},
}
"""Free halogen: molecules and atoms, which become molecules on cooling; the atoms in each."""


def halogens(settled: Settled) -> list[KeyFigure]:
    """Numbers of a gas with chlorine, bromine, fluorine or iodine.

    Parameters
    ----------
    settled : Settled
        Feeds and what they settle to.

    Returns
    -------
    list of KeyFigure
        Those that any state has; none where no feed holds a halogen.
    """
    there = [symbol for symbol in _GASES if np.any(settled.fed_element(symbol) > 0.0)]
    found: list[KeyFigure] = []
    for symbol in there:
        found += [
            KeyFigure(
                f"{_key(name)}_dry", f"{name}, dry", settled.dry(name), shown="ppmv", note="Mole fraction, dry gas."
            )
            for name in _GASES[symbol]
            if name in settled.amounts
        ]
        if symbol in _FREE:
            found.append(_free(settled, symbol))
    if "Cl" in there:
        found += _chlorine(settled)
    return known(found)


def _free(settled: Settled, symbol: str) -> KeyFigure:
    """Share of a halogen's gas that is free."""
    atoms = sum((count * settled.amount(name) for name, count in _FREE[symbol].items()), settled.zero)
    return KeyFigure(
        f"free_{key(symbol)}",
        f"{symbol} free, not in acid or salt",
        ratio(atoms, settled.element(symbol, settled.gases)),
        shown="%",
        note=f"{symbol} in molecules of halogens and as atoms, over all {symbol} of the gas; a fast quench keeps it.",
    )


def _chlorine(settled: Settled) -> list[KeyFigure]:
    """Return what is asked of chlorine alone."""
    return [
        KeyFigure(
            "cl2_to_hcl",
            "Cl2/HCl",
            ratio(settled.amount("Cl2"), settled.amount("HCl")),
            note="Balance of 4 HCl + O2 = 2 Cl2 + 2 H2O; hardly moves below 600 degC (common practice, no source).",
        ),
        KeyFigure(
            "h_to_cl_fed",
            "H/Cl fed",
            ratio(settled.fed_element("H"), settled.fed_element("Cl")),
            note="Atoms in all feeds; from about 4 up little free chlorine is left (common practice, no source).",
        ),
        KeyFigure(
            "chlorine_of_fuels",
            "Cl in the feeds that burn",
            ratio(*_chlorine_of_fuels(settled)),
            "kg/kg",
            "%",
            "Mass %. Directive 2010/75/EU art. 50: hazardous waste above 1 % organic Cl burns at 1100 degC for 2 s.",
        ),
    ]


def _chlorine_of_fuels(settled: Settled) -> tuple[Floats, Floats]:
    """Mass of chlorine, and mass of all, in the feeds that burn, [kg or kg/s]."""
    chlorine, mass = settled.zero, settled.zero
    for feed in fuels(settled):
        chlorine = chlorine + ATOMIC_WEIGHT["Cl"] * feed.elements.get("Cl", 0.0)
        mass = mass + feed.mass
    return chlorine, mass


def _key(name: str) -> str:
    """Make a key of a halogen gas; that of an atom says so."""
    return f"{key(name)}_atom" if name in ("Cl", "Br", "I") else key(name)
