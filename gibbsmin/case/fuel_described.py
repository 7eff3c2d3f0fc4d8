"""What is known of a fuel by its analysis, in plain numbers, for people to check."""

from __future__ import annotations

from typing import Any, get_args

from gibbsmin.case.fuel_recipe import Fuel
from gibbsmin.errors import FeedError
from gibbsmin.practice.feeds.air import DRY_AIR
from gibbsmin.practice.feeds.ash import ALKALIS, SPECIES_OF_OXIDE
from gibbsmin.practice.feeds.fuel_analysis import AIR_DRIED, AS_RECEIVED, ASH, Basis, dry_basis
from gibbsmin.practice.feeds.fuel_heat import to_lower
from gibbsmin.practice.feeds.heating import NORMAL_MOLAR_VOLUME
from gibbsmin.practice.feeds.ratios import oxygen_need
from gibbsmin.thermo.database import load

MOISTURE = "moisture"


def describe_fuel(fuel: Fuel) -> dict[str, Any]:
    """Say what an analysis comes to.

    Parameters
    ----------
    fuel : Fuel

    Returns
    -------
    dict
        ``bases`` (a dict each by name: ``percent`` of every part with its moisture, ``higher`` and ``lower`` heating
        value in J/kg), ``moisture_dry`` (percent of dry fuel), ``oxygen_need`` (mol/kg as received) and ``air_need``
        (dry air of ISO 2533: Nm3/kg and kg/kg as received), None where not defined, ``stated``, ``correlation``,
        ``correlation_error``, ``estimate`` (J/kg as received, higher), ``formation_enthalpy`` (J/kg as received, of
        what burns), ``base_to_acid``, ``alkali_index`` (kg/J of higher heating value; K2O and Na2O that the analysis
        names beside the ash count, too), None where the ash is not known, ``notes``.
    """
    analysis, ash = fuel.analysis, fuel.ash
    bases = [name for name in get_args(Basis) if name != AIR_DRIED or analysis.air_dried_moisture is not None]
    oxygen, air = _needs(fuel)
    received, higher = analysis.on(AS_RECEIVED), fuel.heat.higher
    minerals = received.get(ASH, 0.0) / 100.0
    named = sum(received.get(SPECIES_OF_OXIDE[oxide], 0.0) for oxide in ALKALIS) / 100.0
    return {
        "bases": {name: _on(fuel, name) for name in bases},
        "moisture_dry": dry_basis(analysis.moisture),
        "oxygen_need": oxygen,
        "air_need": air,
        "stated": fuel.heat.stated,
        "correlation": fuel.heat.correlation.source,
        "correlation_error": fuel.heat.correlation.error,
        "estimate": fuel.heat.estimate,
        "formation_enthalpy": fuel.formation,
        "base_to_acid": None if ash is None else ash.base_to_acid,
        "alkali_index": None if ash is None else ash.alkali_index(minerals, higher) + named / higher,
        "notes": list(fuel.notes),
    }


def _on(fuel: Fuel, basis: Basis) -> dict[str, Any]:
    """Percentages and heating values on a basis."""
    analysis = fuel.analysis
    higher = fuel.heat.higher / analysis.per_kilogram(basis)
    percent = analysis.on(basis)
    ordered = {part: percent[part] for part in (*"CHONS", *percent) if part in percent}
    return {
        "percent": ordered | {MOISTURE: analysis.sample_moisture(basis)},
        "higher": higher,
        "lower": to_lower(higher, analysis, basis),
    }


def _needs(fuel: Fuel) -> tuple[float | None, tuple[float, float] | None]:
    """O2 that a kilogram as received needs, [mol], and the dry air with it, [Nm3] and [kg]."""
    try:
        need = oxygen_need(fuel.atoms)
        need += sum(n * oxygen_need(record.elements) for record, n in fuel.species.items())
    except FeedError:
        return None, None
    whole = sum(DRY_AIR.values())
    air = need * whole / DRY_AIR["O2"]
    molar_mass = sum(x * load().get(name).molar_mass for name, x in DRY_AIR.items()) / whole
    return need, (air * NORMAL_MOLAR_VOLUME, air * molar_mass)
