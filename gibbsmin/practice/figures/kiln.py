"""Numbers of lime and cement kilns: calcination, carbon dioxide of the stone, moduli of the meal, what is volatile.

Moduli of the meal, oxides in mass % (from memory: F. M. Lea and T. W. Parker, Building Research Technical Paper 16,
1935, for the lime saturation; common practice for the others):

    lime saturation   100 CaO / (2.8 SiO2 + 1.18 Al2O3 + 0.65 Fe2O3)                                       (1)
    silica modulus    SiO2 / (Al2O3 + Fe2O3),      alumina modulus  Al2O3 / Fe2O3                          (2)

Alkali to sulfur, in moles (common practice, no source):  (K2O + Na2O - Cl2) / SO3                         (3)

Calcite and lime are together at the temperature at which the gas has just the pressure of CO2 over both,

    ln(p/1 bar) = -(G°_CaO + G°_CO2 - G°_CaCO3)/RT                                                         (4)

which rises with temperature.
"""

from __future__ import annotations

from collections.abc import Mapping
from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.constants import STANDARD_PRESSURE, R
from gibbsmin.elements import molar_mass, parse_formula
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.potentials import record_of
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.practice.figures.tally import key, known, ratio
from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]

_STONES: Final = ("Ca", "Mg")
_VOLATILE: Final = ("K", "Na", "Cl", "S")
_CALCITE, _LIME = "CaCO3(s):calcite", "CaO(s)"
_OXIDE: Final = {"Ca": "CaO", "Si": "SiO2", "Al": "Al2O3", "Fe": "Fe2O3"}
_COLD: Final = 400.0
_HOT: Final = 1400.0
"""K between which a calcination temperature is looked for: the data of calcite end there."""
_HALVINGS: Final = 50


def kiln(settled: Settled) -> list[KeyFigure]:
    """Numbers of a lime or cement kiln.

    Parameters
    ----------
    settled : Settled
        Feeds and what they settle to.

    Returns
    -------
    list of KeyFigure
        Those that any state has.
    """
    return known([*_calcination(settled), *_carbon_dioxide(settled), *_meal(settled), *_volatile(settled)])


def calcination_temperature(settled: Settled) -> Floats:
    """Temperature above which calcite gives its CO2 off into this gas, by eq. (4).

    Parameters
    ----------
    settled : Settled

    Returns
    -------
    array (states,)
        [K]; nan without CO2 in the gas, and above 1400 K, where the data of calcite end.
    """
    wanted = settled.pressure * settled.wet("CO2") / STANDARD_PRESSURE
    there = wanted > 0.0
    ln_p = np.log(np.where(there, wanted, 1.0))
    low, high = np.full(len(ln_p), _COLD), np.full(len(ln_p), _HOT)
    calcite, lime, gas = (record_of(settled, name) for name in (_CALCITE, _LIME, "CO2"))

    def above(T: Floats) -> NDArray[np.bool_]:
        step = lime.gibbs_energy(T) + gas.gibbs_energy(T) - calcite.gibbs_energy(T)
        return np.asarray(-step / (R * T) > ln_p, bool)

    bracketed = there & ~above(low) & above(high)
    for _ in range(_HALVINGS):
        middle = 0.5 * (low + high)
        up = above(middle)
        low, high = np.where(up, low, middle), np.where(up, middle, high)
    return np.where(bracketed, 0.5 * (low + high), np.nan)


def _calcination(settled: Settled) -> list[KeyFigure]:
    """How far carbonates are burnt, and where they would be."""
    found = []
    for metal in _STONES:
        fed, left = _in_carbonates(settled, _fed(settled), metal), _in_carbonates(settled, settled.amounts, metal)
        found.append(
            KeyFigure(
                f"calcined_{key(metal)}",
                f"{metal} carbonate calcined",
                ratio(fed - left, fed),
                shown="%",
                note=f"Atoms of {metal} fed as carbonate and no longer in one.",
            )
        )
    if "Ca" in settled.element_potentials:
        note = "Of CaCO3 at the CO2 pressure of this gas."
        found.append(
            KeyFigure(
                "calcination_temperature",
                "calcination temperature",
                calcination_temperature(settled),
                "K",
                "degC",
                note,
            )
        )
    return found


def _carbon_dioxide(settled: Settled) -> list[KeyFigure]:
    """CO2 for each tonne of burnt solids, split in stone and fuel; nothing where no carbonate is fed."""
    fed = _in_carbonates(settled, _fed(settled), "C")
    stone = np.where(fed > 0.0, fed - _in_carbonates(settled, settled.amounts, "C"), np.nan)
    gas = settled.amount("CO2") - settled.fed("CO2")
    burnt = [(record.molar_mass, name) for name, record in settled.records.items() if record.condensed]
    solids = np.asarray(sum((mass * settled.amounts[name] for mass, name in burnt), settled.zero))
    each = record_of(settled, "CO2").molar_mass
    note = "A tonne of solids and liquids that leave"
    return [
        KeyFigure(
            "co2_of_stone", "CO2 of the stone", ratio(each * stone, solids), "kg/kg", "kg/t", f"{note}; of carbonates."
        ),
        KeyFigure(
            "co2_of_fuel",
            "CO2 of the fuel",
            ratio(each * (gas - stone), solids),
            "kg/kg",
            "kg/t",
            f"{note}; gained by the gas, less that of carbonates.",
        ),
    ]


def _meal(settled: Settled) -> list[KeyFigure]:
    """Moduli of all that is fed, ash of fuels included where it reacts."""
    masses = {
        symbol: settled.fed_element(symbol) / parse_formula(oxide)[0][symbol] * molar_mass(parse_formula(oxide)[0])
        for symbol, oxide in _OXIDE.items()
    }
    CaO, SiO2, Al2O3, Fe2O3 = masses.values()
    note = "Oxides by mass, of all feeds, reacting ash included"
    saturation = np.where(SiO2 > 0.0, ratio(100.0 * CaO, 2.8 * SiO2 + 1.18 * Al2O3 + 0.65 * Fe2O3), np.nan)
    alkali = 0.5 * (settled.fed_element("K") + settled.fed_element("Na") - settled.fed_element("Cl"))
    alkali_fed = settled.fed_element("K") + settled.fed_element("Na") > 0.0
    return [
        KeyFigure(
            "lime_saturation_fed",
            "lime saturation factor",
            saturation,
            note=f"100 CaO/(2.8 SiO2 + 1.18 Al2O3 + 0.65 Fe2O3). {note}.",
        ),
        KeyFigure(
            "silica_modulus_fed",
            "silica modulus",
            np.where(SiO2 > 0.0, ratio(SiO2, Al2O3 + Fe2O3), np.nan),
            note=f"SiO2/(Al2O3 + Fe2O3). {note}.",
        ),
        KeyFigure(
            "alumina_modulus_fed",
            "alumina modulus",
            np.where(Al2O3 > 0.0, ratio(Al2O3, Fe2O3), np.nan),
            note=f"Al2O3/Fe2O3. {note}.",
        ),
        KeyFigure(
            "alkali_to_sulfur_fed",
            "alkali to sulfur fed",
            np.where(alkali_fed, ratio(alkali, settled.fed_element("S")), np.nan),
            note="(K2O + Na2O - Cl2)/SO3 in moles, all feeds; aim 0.8 to 1.2 (common practice, no source).",
        ),
    ]


def _volatile(settled: Settled) -> list[KeyFigure]:
    """Share of what circulates in a kiln that is in the gas."""
    return [
        KeyFigure(
            f"volatile_{key(symbol)}",
            f"{symbol} in the gas",
            ratio(settled.element(symbol, settled.gases), settled.element(symbol)),
            shown="%",
            note="Share of all of it; pure condensed phases only, so melts would hold more back.",
        )
        for symbol in _VOLATILE
        if np.any(settled.element(symbol) > 0.0)
    ]


def _fed(settled: Settled) -> dict[str, Floats]:
    """Amount of every species in all feeds, [mol or mol/s]."""
    names = dict.fromkeys(name for feed in settled.feeds.values() for name in feed.amounts)
    return {name: settled.fed(name) for name in names}


def _in_carbonates(settled: Settled, amounts: Mapping[str, Floats], symbol: str) -> Floats:
    """Atoms of an element that stand in solid or liquid carbonates, (states,), [mol or mol/s]."""
    total = settled.zero
    for name, amount in amounts.items():
        record = record_of(settled, name)
        if _is_carbonate(record):
            total = total + record.elements.get(symbol, 0.0) * amount
    return total


def _is_carbonate(record: Species) -> bool:
    """Whether a species is a carbonate of calcium or magnesium."""
    return record.condensed and {"C", "O"} < record.elements.keys() and not record.elements.keys().isdisjoint(_STONES)
