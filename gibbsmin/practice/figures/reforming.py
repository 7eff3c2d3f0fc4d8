"""Numbers of hydrogen and synthesis gas: reformers with and without oxygen, partial oxidation, shift.

Common practice, no source, except where said. Steam to carbon counts all water in the feeds over the carbon of
hydrocarbons, not that of CO and CO2. Conversion counts all carbon of hydrocarbons as feed,

    X_C = (CO + CO2 out - CO, CO2 in)/C of hydrocarbons,      M = (H2 - CO2)/(CO + CO2)                   (1)

Methane that comes hot to the catalyst before it is reformed can crack where the reformed gas could not. On a straight
path from feeds to settled gas, n(z) = n_feeds + z (n_settled - n_feeds), methane alone would crack where

    K_M(T) x_CH4(z)/(x_H2(z)² p) > 1                                                                      (2)

at the temperature of the settled gas, which is the case up to the share z of the way that is told. A flame is no such
path, so that nothing is told where oxygen is fed.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from gibbsmin.practice.feeds.saturation import dew_temperature
from gibbsmin.practice.figures.approach import REFORMING, SHIFT, approach
from gibbsmin.practice.figures.carbon import carbon, carbon_by_reactions
from gibbsmin.practice.figures.fed import WATER, fed_amount, hydrocarbon_carbon
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.potentials import record_of
from gibbsmin.practice.figures.settled import Settled
from gibbsmin.practice.figures.tally import known, mass_unit, ratio

Floats = NDArray[np.float64]

_HALVINGS = 30


def reforming(settled: Settled) -> list[KeyFigure]:
    """Numbers of a reformer, an autothermal reformer or a partial oxidation.

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
            *_charged(settled),
            *synthesis_gas(settled),
            *_converted(settled),
            *approach(settled, REFORMING),
            *approach(settled, SHIFT),
            *carbon(settled),
            _cracking(settled),
            *_flows(settled),
        ]
    )


def shift(settled: Settled) -> list[KeyFigure]:
    """Numbers of a shift bed.

    Parameters
    ----------
    settled : Settled
        Feeds and what they settle to.

    Returns
    -------
    list of KeyFigure
        Those that any state has.
    """
    carbon_monoxide = settled.fed("CO")
    return known(
        [
            KeyFigure(
                "steam_to_dry_gas", "steam to dry gas, inlet", _steam_to_dry_gas(settled), note="mol/mol, feeds."
            ),
            *synthesis_gas(settled),
            KeyFigure(
                "co_conversion",
                "CO conversion",
                1.0 - ratio(settled.amount("CO"), carbon_monoxide),
                shown="%",
                note="1 - CO out/CO in.",
            ),
            *approach(settled, SHIFT),
            *_dew_margins(settled),
        ]
    )


def synthesis_gas(settled: Settled) -> list[KeyFigure]:
    """Tell how much H2, CO, CO2 and CH4 the dry gas holds, with H2/CO and module.

    Parameters
    ----------
    settled : Settled
        Feeds and what they settle to.

    Returns
    -------
    list of KeyFigure
        nan where there is no gas.
    """
    H2, CO, CO2 = (settled.amount(name) for name in ("H2", "CO", "CO2"))
    shares = (("h2_dry", "H2", "H2, dry"), ("co_dry", "CO", "CO, dry"), ("co2_dry", "CO2", "CO2, dry"))
    return [
        *(
            KeyFigure(name, label, settled.dry(species), shown="%", note="Mole fraction of the gas without water.")
            for name, species, label in (*shares, ("ch4_slip", "CH4", "CH4 slip, dry"))
            if species in settled.amounts
        ),
        KeyFigure("h2_to_co", "H2/CO", ratio(H2, CO)),
        KeyFigure("module", "module (H2 - CO2)/(CO + CO2)", ratio(H2 - CO2, CO + CO2), note="2.0 to 2.1 for methanol."),
    ]


def _charged(settled: Settled) -> list[KeyFigure]:
    """Ratios of the feeds."""
    fuel, oxygen = hydrocarbon_carbon(settled), settled.fed("O2")
    product = settled.amount("H2", "CO")
    given = np.where(oxygen > 0.0, oxygen, np.nan)
    steam = "All water of the feeds, mol, over carbon of hydrocarbons; that of CO and CO2 does not count."
    return [
        KeyFigure("steam_to_carbon", "steam to carbon, all feeds", ratio(settled.fed(*WATER), fuel), note=steam),
        KeyFigure("oxygen_to_carbon", "O2/C", ratio(given, fuel), note="mol O2 per atom of carbon in hydrocarbons."),
        KeyFigure(
            "oxygen_per_1000_synthesis_gas",
            "O2 per 1000 (H2 + CO), volume",
            1000.0 * ratio(given, product),
            note="Nm3 of O2 in all feeds for 1000 Nm3 of H2 + CO made.",
        ),
    ]


def _converted(settled: Settled) -> list[KeyFigure]:
    """Say what became of the hydrocarbons, and the heat it took."""
    fuel = hydrocarbon_carbon(settled)
    made = settled.amount("CO", "CO2") - settled.fed("CO", "CO2")
    figures = [
        KeyFigure(
            "hydrocarbon_conversion",
            "conversion of hydrocarbons",
            ratio(made, fuel),
            shown="%",
            note="CO + CO2 made, over the carbon of all hydrocarbons fed.",
        )
    ]
    if settled.heat is not None:
        note = "Heat put in for each mole of carbon in hydrocarbons; from feeds as they come in."
        figures.append(
            KeyFigure("duty_per_carbon", "duty per hydrocarbon C", ratio(settled.heat, fuel), "J/mol", "kJ/mol", note)
        )
    return figures


def _cracking(settled: Settled) -> KeyFigure:
    """How far the gas must have come for its methane not to crack at this temperature, eq. (2)."""
    total = fed_amount(settled)
    feeds = {name: settled.fed(name) for name in ("CH4", "H2")}
    makes_hydrogen = (feeds["CH4"] > 0.0) & (settled.amount("H2") > feeds["H2"])
    asked = np.asarray(makes_hydrogen & (total > 0.0) & (settled.fed("O2") == 0.0), bool)
    low, high = settled.zero, settled.zero + 1.0

    def cracks(z: Floats) -> NDArray[np.bool_]:
        gas = (1.0 - z) * total + z * settled.gas
        x = {
            name: ((1.0 - z) * n + z * settled.amount(name)) / np.where(gas > 0.0, gas, np.nan)
            for name, n in feeds.items()
        }
        activity = carbon_by_reactions(x, settled.temperature, settled.pressure)["ch4"]
        return np.asarray((activity > 1.0) | (x["H2"] <= 0.0), bool)

    asked &= ~cracks(high)
    for _ in range(_HALVINGS):
        middle = 0.5 * (low + high)
        above = cracks(middle)
        low, high = np.where(above, middle, low), np.where(above, high, middle)
    return KeyFigure(
        "methane_cracking_up_to",
        "CH4 may crack up to, of the way",
        np.where(asked, high, np.nan),
        shown="%",
        note="Share of the way from feeds to settled gas below which CH4 = C + 2 H2 would lay down carbon at this T.",
    )


def _flows(settled: Settled) -> list[KeyFigure]:
    """Dry gas, hydrogen, and the water to be condensed."""
    unit, shown = ("mol/s", "Nm3/h") if settled.is_flow else ("mol", "Nm3")
    mass, mass_shown = mass_unit(settled.is_flow)
    water = record_of(settled, "H2O").molar_mass * settled.amount("H2O")
    normal = "Nm3 at 0 degC and 101325 Pa."
    return [
        KeyFigure("dry_gas", "dry gas", settled.dry_gas, unit, shown, normal),
        KeyFigure("hydrogen", "H2 made and passed", settled.amount("H2"), unit, shown, normal),
        KeyFigure("water_in_gas", "water to condense", water, mass, mass_shown, "All water vapour of the gas."),
    ]


def _steam_to_dry_gas(settled: Settled) -> Floats:
    """Water over everything else in the feeds."""
    water = settled.fed(*WATER)
    return ratio(water, fed_amount(settled) - water)


def _dew_margins(settled: Settled) -> list[KeyFigure]:
    """How far feed and settled gas are above the temperature at which water drops out."""
    figures = []
    note = "15 to 20 K are usual before a cold bed (common practice); pure water, ideal gas, at the held pressure."
    inlet = _common_temperature(settled)
    if inlet is not None:
        dew = dew_temperature(ratio(settled.fed("H2O"), fed_amount(settled)) * settled.pressure)
        figures.append(KeyFigure("dew_margin_inlet", "above water dew point, inlet", inlet - dew, "K", note=note))
    dew = dew_temperature(settled.wet("H2O") * settled.pressure)
    figures.append(KeyFigure("dew_margin", "above water dew point, exit", settled.temperature - dew, "K", note=note))
    return figures


def _common_temperature(settled: Settled) -> Floats | None:
    """Temperature of the feeds where all come with the same one."""
    given = [feed.temperature for feed in settled.feeds.values()]
    first = given[0] if given else None
    if first is None or any(each is None or not np.allclose(each, first, atol=0.1, rtol=0.0) for each in given):
        return None
    return first
