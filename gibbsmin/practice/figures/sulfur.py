"""Numbers of sulfur recovery: reaction furnace, catalytic stage, condenser.

Common practice, no source, except where said. What a stage converts is counted in atoms of sulfur: elemental sulfur
at the exit, vapour and liquid, less what came in as such, over the sulfur that came in compounds. Air demand counts
the hydrogen sulfide to which COS and CS2 hydrolyse,

    D = H2S + COS + 2 CS2 - 2 SO2,      O2 that is wanting = D/2    (2 H2S + O2 = 2 S + 2 H2O)              (1)

and leaves hydrogen and carbon monoxide out, which pass the catalyst unburnt.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.potentials import record_of
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.practice.figures.sulfur_vapour import CONDENSED, VAPOUR, sulfur_dew_temperature, vapour_atoms
from gibbsmin.practice.figures.tally import key, known, mass_unit, ratio

Floats = NDArray[np.float64]

_PERCENT = {"H2S": "%", "SO2": "%", "COS": "ppmv", "CS2": "ppmv", "H2": "%", "CO": "%"}

_BLOWN = 1e-3
"""O2 or NH3 fed, over the sulfur fed, below which it is a trace of a step before and no feed, [mol/mol]."""

_SHOWN_SHARE = 1e-4
"""Share of the vapour from which a molecule of sulfur is named."""


def sulfur(settled: Settled) -> list[KeyFigure]:
    """Numbers of a furnace, a catalytic stage or a condenser of sulfur recovery.

    Parameters
    ----------
    settled : Settled
        Feeds and what they settle to.

    Returns
    -------
    list of KeyFigure
        Those that any state has.
    """
    return known([*_ratios(settled), *_conversion(settled), *_gas(settled), *_vapour(settled), *_dropping_out(settled)])


def _ratios(settled: Settled) -> list[KeyFigure]:
    """Ratios that the analyser of the tail gas steers the air by."""
    sulfide = settled.amount("H2S") + settled.amount("COS") + 2.0 * settled.amount("CS2")
    dioxide = settled.amount("SO2")
    wanting = 0.5 * (sulfide - 2.0 * dioxide)
    blown = _fed(settled, "O2")
    return [
        KeyFigure(
            "o2_to_h2s_fed",
            "O2/H2S fed",
            np.where(blown > 0.0, ratio(blown, settled.fed("H2S")), np.nan),
            note="Moles; ½ burns a third of the H2S, less is wanted as H2S survives, more where CH4 or NH3 burns.",
        ),
        KeyFigure("h2s_to_so2", "H2S/SO2", ratio(settled.amount("H2S"), dioxide), note="Aim of a stage: 2."),
        KeyFigure(
            "sulfide_to_so2",
            "(H2S + COS + 2 CS2)/SO2",
            ratio(sulfide, dioxide),
            note="COS and CS2 counted as the H2S to which they hydrolyse.",
        ),
        KeyFigure(
            "air_demand",
            "air demand",
            ratio(wanting, blown),
            shown="%",
            note="Air that brings H2S + COS + 2 CS2 to twice SO2, over the air fed; below zero there is too much.",
        ),
    ]


def _fed(settled: Settled, name: str) -> Floats:
    """Amount of a gas fed, (states,), [mol or mol/s]; zero where it is a trace of the step before."""
    amount = settled.fed(name)
    return np.where(amount > _BLOWN * settled.fed_element("S"), amount, 0.0)


def _conversion(settled: Settled) -> list[KeyFigure]:
    """Tell what became of the sulfur and the ammonia that were fed."""
    elemental = vapour_atoms(settled) + settled.amount(*CONDENSED)
    fed = sum((n * settled.fed(name) for name, n in VAPOUR.items()), settled.fed(*CONDENSED))
    compounds = settled.fed_element("S") - fed
    return [
        KeyFigure(
            "conversion_to_sulfur",
            "conversion to sulfur",
            ratio(elemental - fed, np.where(compounds > 1e-12 * settled.fed_element("S"), compounds, 0.0)),
            shown="%",
            note="Elemental sulfur made, vapour and condensed, over the sulfur that came in compounds.",
        ),
        KeyFigure(
            "sulfur_in_cos_and_cs2",
            "S in COS and CS2",
            ratio(settled.amount("COS") + 2.0 * settled.amount("CS2"), settled.element("S")),
            shown="%",
            note="Share of all sulfur atoms; it needs hydrolysis in a hot first stage.",
        ),
        KeyFigure(
            "ammonia_left",
            "NH3 left of that fed",
            ratio(settled.amount("NH3"), _fed(settled, "NH3")),
            shown="%",
            note="At equilibrium; real furnaces need above about 1250 degC and time (common practice, no source).",
        ),
    ]


def _gas(settled: Settled) -> list[KeyFigure]:
    """Mole fractions that the trade asks for."""
    return [
        KeyFigure(f"{key(name)}_wet", f"{name}, wet", settled.wet(name), shown=unit, note="Mole fraction, wet gas.")
        for name, unit in _PERCENT.items()
        if name in settled.amounts
    ]


def _vapour(settled: Settled) -> list[KeyFigure]:
    """How the vapour of sulfur is made up."""
    atoms = vapour_atoms(settled)
    shares = {name: ratio(n * settled.amount(name), atoms) for name, n in VAPOUR.items() if name in settled.amounts}
    named = [
        KeyFigure(
            f"sulfur_vapour_as_{key(name)}",
            f"sulfur vapour as {name}",
            share,
            shown="%",
            note="Share of the sulfur atoms of the elemental vapour; those that stay below 0.01 % are left out.",
        )
        for name, share in shares.items()
        if np.any(share >= _SHOWN_SHARE)
    ]
    mean = KeyFigure(
        "atoms_in_sulfur_vapour",
        "atoms in a molecule of vapour",
        ratio(atoms, settled.amount(*VAPOUR)),
        note="Mean of S to S8.",
    )
    return [mean, *named]


def _dropping_out(settled: Settled) -> list[KeyFigure]:
    """Dew temperature, and what has condensed."""
    dew = sulfur_dew_temperature(settled)
    condensed = settled.amount(*CONDENSED)
    atoms = vapour_atoms(settled)
    unit, shown = mass_unit(settled.is_flow)
    molar_mass = record_of(settled, "S(l)").molar_mass
    found = [
        KeyFigure(
            "sulfur_dew_temperature",
            "sulfur dew point",
            dew,
            "K",
            "degC",
            "Of this gas, cooled with all but S to S8 frozen; a wall or bed below it collects sulfur.",
        ),
        KeyFigure(
            "sulfur_dew_margin",
            "above the sulfur dew point",
            np.where(condensed > 0.0, 0.0, settled.temperature - dew),
            "K",
            note="At least 5 to 10 K for a catalyst bed (common practice, no source).",
        ),
        KeyFigure("sulfur_as_vapour", "sulfur as vapour", molar_mass * atoms, unit, shown, "Elemental, S to S8."),
    ]
    if not np.any(condensed > 0.0):
        return found
    return [
        *found,
        KeyFigure("sulfur_condensed", "sulfur condensed", molar_mass * condensed, unit, shown, "Liquid and solid."),
        KeyFigure(
            "sulfur_condensed_share",
            "condensed of elemental sulfur",
            ratio(condensed, condensed + atoms),
            shown="%",
            note="Before what is carried over as mist.",
        ),
    ]
