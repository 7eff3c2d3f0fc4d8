"""Numbers of a sulfuric-acid plant: a converter bed, the gas after absorption, what leaves the stack for each tonne.

Common practice, no source. Sulfur trioxide and the vapour of the acid count as one, because absorption takes both:

    X = 1 - SO2 / (all sulfur of the gas),      SO2 a tonne of acid = (1 - X)/X · M(SO2)/M(H2SO4)          (1)
"""

from __future__ import annotations

from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.elements import split_name
from gibbsmin.practice.feeds.heating import NORMAL_MOLAR_VOLUME
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.potentials import record_of
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.practice.figures.tally import known, mass_unit, ratio

Floats = NDArray[np.float64]

_TRIOXIDE: Final = ("SO3", "H2SO4")


def sulfuric_acid(settled: Settled) -> list[KeyFigure]:
    """Numbers of sulfur dioxide oxidation.

    Parameters
    ----------
    settled : Settled
        Feeds and what they settle to: one bed, or a burner of sulfur.

    Returns
    -------
    list of KeyFigure
        Those that any state has.
    """
    return known([*_inlet(settled), *_conversion(settled), *_gas(settled), *_stack(settled)])


def _inlet(settled: Settled) -> list[KeyFigure]:
    """Tell what the bed is fed with."""
    dioxide = settled.fed("SO2")
    return [
        KeyFigure(
            "o2_to_so2_fed", "O2/SO2 fed", ratio(settled.fed("O2"), dioxide), note="Moles; the reaction takes ½."
        ),
        KeyFigure("so2_fed", "SO2 in the gas fed", ratio(dioxide, _gas_fed(settled)), shown="%", note="Mole fraction."),
    ]


def _conversion(settled: Settled) -> list[KeyFigure]:
    """Conversion in the bed, and over all that has been made before it."""
    left, fed = settled.amount("SO2"), settled.fed("SO2")
    other = settled.fed_element("S") - fed
    return [
        KeyFigure(
            "so2_conversion",
            "SO2 converted here",
            ratio(fed - left, fed),
            shown="%",
            note="Of the SO2 fed to this step.",
        ),
        KeyFigure(
            "so2_conversion_of_all_sulfur",
            "SO2 converted, of all sulfur",
            np.where(other > 1e-12 * fed, _converted(settled), np.nan),
            shown="%",
            note="SO3 fed counts as converted; real beds end 3 to 15 K short of it (common practice, no source).",
        ),
    ]


def _gas(settled: Settled) -> list[KeyFigure]:
    """Mole fractions in the gas as it is."""
    return [
        KeyFigure("so2_wet", "SO2", settled.wet("SO2"), shown="%", note="Mole fraction in the gas as it is."),
        KeyFigure(
            "so3_wet",
            "SO3 + H2SO4",
            settled.wet(*_TRIOXIDE),
            shown="%",
            note="Mole fraction in the gas as it is, the vapour of the acid counted with the trioxide.",
        ),
        KeyFigure("o2_wet", "O2", settled.wet("O2"), shown="%", note="Mole fraction in the gas as it is."),
    ]


def _stack(settled: Settled) -> list[KeyFigure]:
    """Tell what would leave if all trioxide and water were absorbed."""
    absorbed = settled.gas - settled.amount(*_TRIOXIDE, "H2O")
    left = ratio(settled.amount("SO2"), absorbed)
    converted = _converted(settled)
    dioxide, acid = record_of(settled, "SO2").molar_mass, record_of(settled, "H2SO4").molar_mass
    made = acid * (settled.element("S") - settled.amount("SO2"))
    note = "After absorption of all SO3, H2SO4 and water"
    return [
        KeyFigure("so2_after_absorption", "SO2 after absorption", left, shown="ppmv", note=f"{note}; dry."),
        KeyFigure(
            "so2_concentration_after_absorption",
            "SO2 after absorption, by mass",
            left * dioxide / NORMAL_MOLAR_VOLUME,
            "kg/m3",
            "mg/Nm3",
            f"{note}; dry, 0 degC and 101325 Pa.",
        ),
        KeyFigure(
            "so2_of_acid",
            "SO2 unconverted of acid made",
            ratio((1.0 - converted) * dioxide, converted * acid),
            "kg/kg",
            "kg/t",
            "Acid counted as H2SO4 of 100 %; equilibrium, so a lower bound.",
        ),
        KeyFigure("acid_made", "acid from this gas", made, *mass_unit(settled.is_flow), note="As H2SO4 of 100 %."),
    ]


def _converted(settled: Settled) -> Floats:
    """Share of all sulfur that is no longer dioxide, eq. (1)."""
    sulfur = settled.element("S")
    return ratio(sulfur - settled.amount("SO2"), sulfur)


def _gas_fed(settled: Settled) -> Floats:
    """Amount of gas in all feeds, (states,), [mol or mol/s]."""
    total = settled.zero
    for feed in settled.feeds.values():
        for name, amount in feed.amounts.items():
            if split_name(name).phase == "gas":
                total = total + amount
    return total
