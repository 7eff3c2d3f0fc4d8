"""A fuel known by its analysis: what a kilogram of it is made of, and the heat it brings."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from typing import Any, Final

from numpy.typing import ArrayLike

from gibbsmin.case.analysis_schema import AnalysisTable
from gibbsmin.case.fields import RuleError, in_si
from gibbsmin.elements import ATOMIC_WEIGHT
from gibbsmin.errors import FeedError, SpeciesError
from gibbsmin.practice.feeds.ash import Ash, read_oxides
from gibbsmin.practice.feeds.fuel_analysis import AS_RECEIVED, ASH, DRY_ASH_FREE, Analysis, Sample, wet_basis
from gibbsmin.practice.feeds.fuel_correlations import DEFAULT
from gibbsmin.practice.feeds.fuel_heat import FuelHeat, Stated, heat_of_fuel
from gibbsmin.practice.feeds.fuel_matter import counted_as_element, entropy_estimate, formation_enthalpy, sensible_heat
from gibbsmin.practice.feeds.heating import heating_value
from gibbsmin.thermo.record import Species

WATER: Final = "H2O(l)"
QUARTZ: Final = "SiO2(s)"
_ALWAYS: Final = 1.0e5  # K; an inert species is there at any temperature
_DIFFER: Final = 0.5  # percent; by so much the ultimate and the proximate analysis may differ

Find = Callable[[str], Species]


@dataclass(frozen=True)
class Fuel:
    """A kilogram of fuel as received.

    Attributes
    ----------
    analysis : Analysis
        On any basis.
    atoms : dict of str to float
        What burns, by element, [mol].
    species : dict of Species to float
        Moisture, ash and minerals, [mol].
    inert : frozenset of str
        Names of those of them that take no part.
    ash : Ash or None
        By its oxides, where they are known.
    heat : FuelHeat
        Heating values.
    formation : float
        Enthalpy of formation of what burns, [J].
    notes : tuple of str
        What was done and assumed, a sentence each.
    """

    analysis: Analysis
    atoms: Mapping[str, float]
    species: Mapping[Species, float]
    inert: frozenset[str]
    ash: Ash | None
    heat: FuelHeat
    formation: float
    notes: tuple[str, ...]

    def enthalpy(self, temperature: ArrayLike) -> Any:
        """Enthalpy of what burns in a kilogram of fuel, [J], at ``temperature`` [K], elements at 298.15 K as zero."""
        return self.formation + sensible_heat(self.atoms, temperature)

    def entropy(self, temperature: ArrayLike) -> Any:
        """Estimate of the entropy of what burns in a kilogram of fuel, [J/K], at ``temperature`` [K]."""
        return entropy_estimate(self.atoms, temperature)


def read_fuel(table: AnalysisTable, find: Find) -> Fuel:
    """Work out what a fuel is made of.

    Parameters
    ----------
    table : AnalysisTable
        Its analysis.
    find : callable
        Gives the species of a name, or raises SpeciesError.

    Returns
    -------
    Fuel

    Raises
    ------
    RuleError
        A species is not known, the analysis does not close, or its heat cannot be told; with the key.
    """
    parts, minerals, moisture = _parts(table, find)
    ash, notes = _ash(table)
    sample = Sample(
        parts,
        table.basis,
        moisture,
        table.air_dried_moisture_percent,
        table.ash_percent_dry,
        table.moisture_in_hydrogen,
        table.oxygen_by_difference,
        ash.taken_up if ash else 0.0,
    )
    try:
        analysis, told = sample.close()
    except FeedError as error:
        raise RuleError(str(error), "ultimate_percent") from None
    analysis = replace(analysis, density=None if table.density is None else in_si(table.density, "kg/m3"))
    analysis, seen = _with_proximate(table, analysis)
    notes += [*told, *seen]
    received = analysis.on(AS_RECEIVED)
    atoms = {part: percent / 100.0 / ATOMIC_WEIGHT[part] for part, percent in received.items() if part in ATOMIC_WEIGHT}
    by_name = {
        record: received[name] / 100.0 / record.molar_mass for name, record in minerals.items() if name in received
    }
    species = {find(WATER): moisture / 100.0 / find(WATER).molar_mass} if moisture else {}
    species |= by_name
    inert, amount = frozenset[str](), received.get(ASH, 0.0) / 100.0
    if amount and ash and table.ash != "inert":
        for name, n in ash.amounts.items():
            species[find(name)] = species.get(find(name), 0.0) + n * amount
        notes.append("The ash reacts, as the oxides of its analysis.")
    elif amount:
        record = inert_ash(find(QUARTZ))
        species[record] = amount / record.molar_mass
        inert = frozenset((record.name,))
        notes.append("The ash takes no part; its heat content is that of quartz.")
    try:
        heat = heat_of_fuel(analysis, _stated(table), table.heating_value_from or DEFAULT)
        of_minerals = heating_value(list(by_name), list(by_name.values())).higher if by_name else 0.0
        formation = formation_enthalpy(atoms, heat.higher - of_minerals)
    except FeedError as error:
        raise RuleError(str(error), *(("heating_value_from",) if table.heating_value_from else ())) from None
    if odd := counted_as_element(atoms):
        notes.append(f"{', '.join(odd)} count with no heat of burning.")
    return Fuel(analysis, atoms, species, inert, ash, heat, formation, (*notes, *heat.notes))


def inert_ash(quartz: Species) -> Species:
    """Ash of unknown make-up: a species of its own with the heat content of quartz."""
    return replace(
        quartz,
        name=ASH,
        aliases=(),
        usable=(quartz.usable[0], _ALWAYS),
        note="Ash that takes no part: its amount is counted as SiO2, and its heat content is that of quartz.",
    )


def _parts(table: AnalysisTable, find: Find) -> tuple[dict[str, float], dict[str, Species], float]:
    """Parts of the sample without its water, the minerals among them, and the moisture as received, in percent."""
    moisture = table.moisture_percent
    if table.moisture_percent_dry is not None:
        moisture = wet_basis(table.moisture_percent_dry)
    parts: dict[str, float] = {}
    minerals: dict[str, Species] = {}
    for label, percent in table.ultimate_percent.items():
        if label in ATOMIC_WEIGHT or label == ASH:
            parts[label] = percent
            continue
        at = ("ultimate_percent", label)
        try:
            record = find(label)
        except SpeciesError as error:
            raise RuleError(str(error), *at) from None
        if dict(record.elements) == {"H": 2.0, "O": 1.0}:
            if table.basis != AS_RECEIVED or moisture is not None or not record.condensed:
                raise RuleError("water in a fuel is its moisture; give it as moisture_percent", *at)
            moisture = percent
        elif table.basis == DRY_ASH_FREE:
            raise RuleError("a dry ash-free analysis holds elements only", *at)
        elif record.name in minerals:
            raise RuleError(f"{label!r} names {record.name!r}, which is named before; give each species once", *at)
        else:
            parts[record.name], minerals[record.name] = percent, record
    if moisture is not None and moisture >= 100.0:
        raise RuleError("the fuel is all water; expected less than 100 % of moisture", "ultimate_percent")
    return parts, minerals, moisture or 0.0


def _ash(table: AnalysisTable) -> tuple[Ash | None, list[str]]:
    if table.ash_oxides_percent is None:
        return None, []
    try:
        return read_oxides(table.ash_oxides_percent)
    except FeedError as error:
        raise RuleError(str(error), "ash_oxides_percent") from None


def _stated(table: AnalysisTable) -> Stated | None:
    value = table.higher_heating_value if table.lower_heating_value is None else table.lower_heating_value
    if value is None:
        return None
    return Stated(
        in_si(value, "J/kg"),
        table.lower_heating_value is not None,
        table.heating_value_basis or table.basis,
        table.heating_value_at or "constant pressure",
    )


def _with_proximate(table: AnalysisTable, analysis: Analysis) -> tuple[Analysis, list[str]]:
    """Add the proximate analysis, and say where it differs from the ultimate one."""
    given = table.proximate_percent
    if given is None:
        return analysis, []
    free = table.basis == DRY_ASH_FREE
    wet = analysis.sample_moisture(table.basis)
    minerals = 0.0 if free else analysis.minerals * (1.0 - wet / 100.0)
    notes = []
    for name, own, other in (("moisture", given.moisture, wet), ("ash", given.ash, minerals)):
        if own is not None and abs(own - other) > _DIFFER:
            notes.append(f"The proximate analysis has {own:g} % {name}, the ultimate one {other:.4g} %.")
    wet = wet if given.moisture is None else given.moisture
    rest = 100.0 - wet - (minerals if given.ash is None else given.ash)
    fixed = rest - given.volatile_matter if given.fixed_carbon is None else given.fixed_carbon
    if abs(fixed + given.volatile_matter - rest) > _DIFFER or fixed < -_DIFFER:
        total = 100.0 - rest + given.volatile_matter + max(fixed, 0.0)
        raise RuleError(
            f"the proximate analysis sums to {total:.6g}; expected 100 within {_DIFFER}", "proximate_percent"
        )
    scale = (1.0 - analysis.minerals / 100.0) if free else 1.0 / (1.0 - wet / 100.0)
    volatile, fixed = given.volatile_matter * scale, max(fixed, 0.0) * scale
    return replace(analysis, volatile_matter=volatile, fixed_carbon=fixed), notes
