"""Numbers of syntheses: ammonia, methanol and methane, in one pass through the reactor.

Common practice, no source, except where said. A feed here is what enters the reactor, so that a conversion is that of
one pass; the loop has its own, which recycle and purge decide. Everything is an ideal gas: measured equilibrium of
ammonia lies higher from about 50 bar on (A. T. Larson and R. L. Dodge, J. Am. Chem. Soc. 45 (1923) 2918), and that of
methanol somewhat.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from gibbsmin.practice.figures.approach import AMMONIA, METHANATION, METHANOL, SHIFT, approach
from gibbsmin.practice.figures.carbon import carbon
from gibbsmin.practice.figures.fed import fed_amount
from gibbsmin.practice.figures.gas_quality import fuel_gas
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.practice.figures.tally import known, ratio

Floats = NDArray[np.float64]

_IDEAL_UP_TO = 50.0e5  # Pa


def ammonia(settled: Settled) -> list[KeyFigure]:
    """Numbers of a bed of an ammonia converter.

    Parameters
    ----------
    settled : Settled
        Feeds and what they settle to.

    Returns
    -------
    list of KeyFigure
        Those that any state has.
    """
    return known(
        [
            _share_fed(settled, "NH3", "nh3_inlet", "NH3, inlet"),
            _outlet(settled, "NH3", "nh3_outlet"),
            _conversion(settled, "N2", "N2 conversion per pass"),
            KeyFigure("h2_to_n2", "H2/N2, inlet", ratio(settled.fed("H2"), settled.fed("N2")), note="3 is used up."),
            _inert(settled, ("H2", "N2", "NH3")),
            *approach(settled, AMMONIA),
        ]
    )


def methanol(settled: Settled) -> list[KeyFigure]:
    """Numbers of a methanol reactor.

    Parameters
    ----------
    settled : Settled
        Feeds and what they settle to.

    Returns
    -------
    list of KeyFigure
        Those that any state has.
    """
    H2, CO2 = settled.fed("H2"), settled.fed("CO2")
    oxides = settled.fed("CO", "CO2")
    made = settled.amount("CH3OH") - settled.fed("CH3OH")
    return known(
        [
            KeyFigure("feed_module", "module of feed", ratio(H2 - CO2, oxides), note="(H2 - CO2)/(CO + CO2), aim 2.0."),
            _outlet(settled, "CH3OH", "methanol_outlet"),
            KeyFigure("water_outlet", "H2O, outlet", settled.wet("H2O"), shown="%", note="Mole fraction, whole gas."),
            KeyFigure(
                "carbon_per_pass",
                "carbon to CH3OH per pass",
                ratio(made, oxides),
                shown="%",
                note="CH3OH made over CO + CO2 fed; kinetics allow 30 to 50 % commonly.",
            ),
            _conversion(settled, "CO", "CO conversion per pass"),
            _conversion(settled, "CO2", "CO2 conversion per pass"),
            _inert(settled, ("H2", "CO", "CO2", "CH3OH", "H2O")),
            *approach(settled, METHANOL),
            *approach(settled, SHIFT),
        ]
    )


def methanation(settled: Settled) -> list[KeyFigure]:
    """Numbers of a methanation stage, with what the dry gas is worth.

    Parameters
    ----------
    settled : Settled
        Feeds and what they settle to.

    Returns
    -------
    list of KeyFigure
        Those that any state has.
    """
    CO, CO2 = settled.fed("CO"), settled.fed("CO2")
    left = settled.amount("CO", "CO2")
    return known(
        [
            KeyFigure(
                "feed_factor",
                "feed factor H2/(3 CO + 4 CO2)",
                ratio(settled.fed("H2"), 3.0 * CO + 4.0 * CO2),
                note="1 is used up; steam and methane of the feed do not count.",
            ),
            KeyFigure("ch4_dry", "CH4, dry", settled.dry("CH4"), shown="%"),
            KeyFigure("h2_dry", "H2, dry", settled.dry("H2"), shown="%", note="Networks allow 2 to 10 %."),
            KeyFigure("oxides_left", "CO + CO2, dry", settled.dry("CO", "CO2"), shown="ppmv", note="Of the dry gas."),
            KeyFigure("co_left", "CO, dry", settled.dry("CO"), shown="ppmv", note="Of the dry gas."),
            KeyFigure(
                "oxides_conversion",
                "conversion of CO + CO2",
                1.0 - ratio(left, CO + CO2),
                shown="%",
                note="1 - (CO + CO2 out)/(CO + CO2 in).",
            ),
            *approach(settled, METHANATION),
            *carbon(settled),
            *fuel_gas(settled),
        ]
    )


def _share_fed(settled: Settled, species: str, name: str, label: str) -> KeyFigure:
    """Mole fraction of a species in all feeds together."""
    share = ratio(settled.fed(species), fed_amount(settled))
    return KeyFigure(name, label, share, shown="%", note="Mole fraction in all feeds together.")


def _conversion(settled: Settled, species: str, label: str) -> KeyFigure:
    """Say what became of a species in one pass."""
    gone = 1.0 - ratio(settled.amount(species), settled.fed(species))
    return KeyFigure(f"{species.lower()}_conversion", label, gone, shown="%", note=f"1 - {species} out/{species} in.")


def _inert(settled: Settled, active: tuple[str, ...]) -> KeyFigure:
    """Share of the feed that takes no part."""
    total = fed_amount(settled)
    share = ratio(total - settled.fed(*active), total)
    return KeyFigure("inerts_inlet", "inerts, inlet", share, shown="%", note=f"All but {', '.join(active)}.")


def _outlet(settled: Settled, species: str, name: str) -> KeyFigure:
    """Mole fraction of a product, with what an ideal gas leaves out where it matters."""
    label, note = f"{species}, outlet", "Mole fraction, whole gas."
    if np.any(settled.pressure > _IDEAL_UP_TO):
        label += ", as ideal gas"
        note = f"{note[:-1]}, by constants of ideal gases; real equilibrium holds more of it above about 50 bar."
    return KeyFigure(name, label, settled.wet(species), shown="%", note=note)
