"""Numbers of reduction and roasting: oxygen and sulfur potentials, gas ratios, how far metals are reduced.

    μ(O2) = RT ln(p_O2/1 bar) = 2 λ_O RT - G°(O2)                                                          (1)

from the potential λ_O of oxygen, so that it is known where p_O2 is 1e-30 bar (the oxygen potential of
H. J. T. Ellingham, J. Soc. Chem. Ind. 63 (1944) 125; μ from gas ratios is the same at equilibrium). Metallisation and
oxidation degree are common practice, no source.
"""

from __future__ import annotations

from typing import Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.constants import R
from gibbsmin.practice.figures.carbon import carbon
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.potentials import ln_activity, record_of
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.practice.figures.tally import key, known, ratio
from gibbsmin.thermo.record import Species

Floats = NDArray[np.float64]

METALS: Final = (
    *("Fe", "Ni", "Co", "Cu", "Zn", "Pb", "Sn", "Cd", "Hg", "Ag", "Bi", "Sb"),
    *("Mn", "Cr", "V", "Ti", "W", "Mo", "Nb", "Ta"),
)  # fmt: skip
"""Metals that are won or held by reduction; those of ash and salts are not counted."""

_SHOWN_SHARE: Final = 0.01
"""Share of a metal from which a phase is named."""

_SHOWN_VAPOUR: Final = 1e-4
"""Share of a metal from which its vapour is told of."""


def reduction(settled: Settled) -> list[KeyFigure]:
    """Numbers of a reducing or roasting step.

    Parameters
    ----------
    settled : Settled
        Feeds and what they settle to.

    Returns
    -------
    list of KeyFigure
        Those that any state has.
    """
    metals = [metal for metal in METALS if any(metal in record.elements for record in settled.records.values())]
    found = [*stability_potentials(settled), *_gas_ratios(settled), *carbon(settled)]
    for metal in metals:
        found += _metal(settled, metal)
    return known(found)


def oxygen_potential(settled: Settled) -> Floats:
    """Oxygen potential by eq. (1).

    Parameters
    ----------
    settled : Settled

    Returns
    -------
    array (states,)
        [J/mol of O2], against oxygen of 1 bar; nan without oxygen.
    """
    return np.asarray(R * settled.temperature * ln_activity(settled, record_of(settled, "O2")))


def stability_potentials(settled: Settled) -> list[KeyFigure]:
    """Potentials of oxygen and sulfur, in which stability diagrams are drawn.

    Parameters
    ----------
    settled : Settled
        Feeds and what they settle to.

    Returns
    -------
    list of KeyFigure
        Those that any state has.
    """
    oxygen = oxygen_potential(settled)
    log10_oxygen = oxygen / (R * settled.temperature * np.log(10.0))
    log10_sulfur = ln_activity(settled, record_of(settled, "S2")) / np.log(10.0)
    figures = [
        KeyFigure("oxygen_potential", "oxygen potential", oxygen, "J/mol", "kJ/mol", "RT ln pO2, a mole of O2; 1 bar."),
        KeyFigure("log10_po2", "log10 pO2", log10_oxygen, note="Pressure of O2 in bar."),
        KeyFigure("log10_ps2", "log10 pS2", log10_sulfur, note="Pressure of S2 in bar."),
    ]
    return known(figures)


def _gas_ratios(settled: Settled) -> list[KeyFigure]:
    """How far the gas is oxidised, in and out."""
    H2, H2O, CO, CO2 = (settled.amount(name) for name in ("H2", "H2O", "CO", "CO2"))
    oxidised_in, reducing_in = settled.fed("H2O", "CO2"), settled.fed("H2", "CO")
    return [
        KeyFigure("h2o_to_h2", "H2O/H2", ratio(H2O, H2)),
        KeyFigure("co2_to_co", "CO2/CO", ratio(CO2, CO)),
        KeyFigure("hydrogen_used", "H2O/(H2 + H2O)", ratio(H2O, H2 + H2O), shown="%", note="Utilisation of hydrogen."),
        KeyFigure("co_used", "CO2/(CO + CO2)", ratio(CO2, CO + CO2), shown="%", note="Utilisation of CO."),
        KeyFigure(
            "oxidation_degree_fed",
            "oxidation degree of the gas fed",
            ratio(oxidised_in, oxidised_in + reducing_in),
            shown="%",
            note="(H2O + CO2)/(H2 + CO + H2O + CO2).",
        ),
        KeyFigure(
            "oxidation_degree",
            "oxidation degree of the gas",
            ratio(H2O + CO2, H2 + H2O + CO + CO2),
            shown="%",
            note="(H2O + CO2)/(H2 + CO + H2O + CO2), at the exit.",
        ),
    ]


def _metal(settled: Settled, metal: str) -> list[KeyFigure]:
    """How far one metal is reduced, and where it is."""
    holders = [name for name, record in settled.records.items() if metal in record.elements]
    total = settled.element(metal)
    metallic = settled.element(metal, [name for name in holders if _is_metallic(settled.records[name])])
    vapour = settled.element(metal, [name for name in holders if not settled.records[name].condensed])
    figures = [
        KeyFigure(
            f"metallisation_{key(metal)}",
            f"{metal} as metal",
            ratio(metallic, total),
            shown="%",
            note="Metallisation: atoms of the metal, its vapour and alloys (for iron its carbide too), over all of it.",
        )
    ]
    note = f"Share of all {metal}."
    in_gas = ratio(vapour, total)
    if np.any(in_gas >= _SHOWN_VAPOUR):
        figures.append(KeyFigure(f"{key(metal)}_in_gas", f"{metal} in the gas", in_gas, shown="%", note=note))
    shares = {name: ratio(settled.element(metal, [name]), total) for name in holders if settled.records[name].condensed}
    figures += [
        KeyFigure(f"{key(metal)}_as_{key(name)}", f"{metal} as {name}", share, shown="%", note=note)
        for name, share in shares.items()
        if np.any(share >= _SHOWN_SHARE)
    ]
    return figures


def _is_metallic(record: Species) -> bool:
    """Whether a species counts as metal: metals alone, and iron with carbon (common practice)."""
    others = record.elements.keys() - set(METALS)
    return not others or (others == {"C"} and record.elements.keys() == {"Fe", "C"})
