"""Numbers of gasifiers: air ratio, cold-gas efficiency, carbon conversion, yield and quality of the raw gas.

Common practice, no source, except where said. With n the raw gas without water and without species of sulfur, h their
heats of combustion at 25 °C, and F the feeds that burn,

    efficiency = Σ n_j h_j/Σ_F (heating value),   both sides higher or both lower                        (1)
    carbon conversion = (C in the gas - C in feeds that do not burn)/C in F                              (2)

A kilogram of fuel is one without its moisture. What the gasification trade calls its equivalence ratio, ER, is the air
ratio: oxygen fed over what complete combustion needs, 0.2 to 0.4.
"""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from gibbsmin.practice.feeds.heating import NORMAL_MOLAR_VOLUME
from gibbsmin.practice.figures.carbon import carbon
from gibbsmin.practice.figures.fed import fuels, moisture
from gibbsmin.practice.figures.gas_quality import heat_of_burning
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.practice.figures.potentials import record_of
from gibbsmin.practice.figures.settled import FeedFacts, Settled
from gibbsmin.practice.figures.tally import known, ratio
from gibbsmin.practice.flue_gas.firing import firing

Floats = NDArray[np.float64]

_AIR_OXYGEN = 0.209476  # ISO 2533:1975; the air ratio does not depend on it


def gasification(settled: Settled) -> list[KeyFigure]:
    """Numbers of a gasifier.

    Parameters
    ----------
    settled : Settled
        Feeds and what they settle to; a feed that burns has its heating values, where they are defined.

    Returns
    -------
    list of KeyFigure
        Those that any state has.
    """
    burning = fuels(settled)
    return known(
        [
            *_charged(settled, burning),
            *_efficiency(settled, burning),
            _carbon_conversion(settled, burning),
            *_raw_gas(settled),
            *carbon(settled),
        ]
    )


def _charged(settled: Settled, burning: Sequence[FeedFacts]) -> list[KeyFigure]:
    """Air ratio, and oxygen and gas for each kilogram of dry fuel."""
    dry_fuel = sum((feed.mass for feed in burning), settled.zero) - moisture(settled, burning)
    oxygen = record_of(settled, "O2").molar_mass * settled.fed("O2")
    figures = [
        KeyFigure(
            "oxygen_per_fuel",
            "O2 per kg dry fuel",
            ratio(np.where(oxygen > 0.0, oxygen, np.nan), dry_fuel),
            "kg/kg",
            note="Pure oxygen of all feeds for each kg of fuel without its moisture.",
        ),
        KeyFigure(
            "gas_per_fuel",
            "dry gas per kg dry fuel",
            ratio(NORMAL_MOLAR_VOLUME * settled.dry_gas, dry_fuel),
            "m3/kg",
            "Nm3/kg",
            "Nm3 at 0 degC and 101325 Pa.",
        ),
    ]
    if (fired := firing(settled, _AIR_OXYGEN)) is not None:
        note = "Free oxygen fed over what complete combustion needs: the ER of gasifiers, not the burner's phi."
        value = ratio(fired.free_oxygen, fired.need)
        figures.insert(0, KeyFigure("gasification_air_ratio", "air ratio (ER of gasification)", value, note=note))
    return figures


def _efficiency(settled: Settled, burning: Sequence[FeedFacts]) -> list[KeyFigure]:
    """Heating value of the raw gas, and cold-gas efficiency by both heating values, eq. (1)."""
    raw, clean = np.zeros((2, len(settled.zero))), np.zeros((2, len(settled.zero)))
    for name in settled.gases:
        if name == "H2O" or name not in settled.amounts:
            continue
        record = settled.records[name]
        heat = np.outer(np.nan_to_num(heat_of_burning(record)), settled.amounts[name])
        raw += heat
        clean += 0.0 if "S" in record.elements else heat
    basis = "both sides at 25 degC, gas without water and sulfur species, fuel as the feeds that burn."
    figures = []
    for word, gas, fed in (
        ("lower", clean[1], [feed.lower for feed in burning]),
        ("higher", clean[0], [feed.higher for feed in burning]),
    ):
        known_heat = [each for each in fed if each is not None]
        if len(known_heat) == len(fed):
            value = ratio(gas, np.asarray(sum(known_heat, settled.zero)))
            name, label = f"cold_gas_efficiency_{word}", f"CGE, {word[0].upper()}HV"
            note = f"Cold-gas efficiency by {word} heating values, {basis}"
            figures.append(KeyFigure(name, label, value, shown="%", note=note))
    note = "At 25 degC for each Nm3 (0 degC, 101325 Pa) of dry gas, sulfur species included."
    lower, higher = (ratio(heat, NORMAL_MOLAR_VOLUME * settled.dry_gas) for heat in (raw[1], raw[0]))
    return [
        *figures,
        KeyFigure("raw_gas_lower", "LHV raw gas, dry", lower, "J/m3", "MJ/Nm3", note),
        KeyFigure("raw_gas_higher", "HHV raw gas, dry", higher, "J/m3", "MJ/Nm3", note),
    ]


def _carbon_conversion(settled: Settled, burning: Sequence[FeedFacts]) -> KeyFigure:
    """Carbon that went into the gas, eq. (2)."""
    of_fuel = np.asarray(sum((feed.elements.get("C", settled.zero) for feed in burning), settled.zero))
    other = settled.fed_element("C") - of_fuel
    gained = settled.element("C", settled.gases) - other
    note = "Carbon in the gas, less that of feeds that do not burn, over carbon in the fuel."
    return KeyFigure("carbon_conversion", "carbon conversion", ratio(gained, of_fuel), shown="%", note=note)


def _raw_gas(settled: Settled) -> list[KeyFigure]:
    """Say what the raw gas is made of."""
    methane = "Real beds give 2 to 6 % and tar, which equilibrium denies (common practice); freeze what is measured."
    nitrogen = "At equilibrium; what the fuel's nitrogen leaves is more, and kinetic."
    rows = (
        ("synthesis_gas_dry", ("CO", "H2"), "%", "Mole fraction of the gas without water."),
        ("co2_dry", ("CO2",), "%", ""),
        ("ch4_dry", ("CH4",), "%", methane),
        ("sulfur_dry", ("H2S", "COS"), "ppmv", ""),
        ("nitrogen_dry", ("NH3", "HCN"), "ppmv", nitrogen),
    )
    return [
        KeyFigure("h2_to_co", "H2/CO", ratio(settled.amount("H2"), settled.amount("CO"))),
        *(
            KeyFigure(name, f"{' + '.join(species)}, dry", settled.dry(*species), shown=shown, note=note)
            for name, species, shown, note in rows
            if not settled.amounts.keys().isdisjoint(species)
        ),
    ]
