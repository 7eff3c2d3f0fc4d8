"""Analyses of solid and liquid fuels: bases, moisture, and what must close.

A lab reports mass percent of a sample that is wet (as received), partly dried in its air (air-dried), dry, or thought
free of water and ash (dry ash-free). With M the moisture of the sample and A the ash of its dry matter, mass percent,
a kilogram of it holds

    (1 - M/100)                kg of dry fuel                                                                  (1)
    (1 - M/100) (1 - A/100)    kg of dry, ash-free fuel                                                        (2)

and an element keeps its mass, so that its percent goes from one basis to another by a ratio of these (ISO 1170 and
ISO 16993 have the same, from memory). Hydrogen and oxygen are those of the dry matter; older reports count the
water's own among them, which is taken off first. "Ash" is what is left of the minerals after ashing: what it took up
on the way, SO3 and CO2, is already counted as sulfur and carbon of the fuel and leaves the ash once.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Final, Literal

from gibbsmin.elements import ATOMIC_WEIGHT
from gibbsmin.errors import FeedError

Basis = Literal["as received", "air-dried", "dry", "dry ash-free"]

AS_RECEIVED: Final = "as received"
AIR_DRIED: Final = "air-dried"
DRY: Final = "dry"
DRY_ASH_FREE: Final = "dry ash-free"

ASH: Final = "ash"
"""Key of the minerals among the parts of an analysis."""

TOLERANCE: Final = 0.5
"""By how much an analysis may miss 100, in percent; common practice, no source."""

HYDROGEN_OF_WATER: Final = 2.0 * ATOMIC_WEIGHT["H"] / (2.0 * ATOMIC_WEIGHT["H"] + ATOMIC_WEIGHT["O"])
"""Mass fraction of hydrogen in water, [-]."""


@dataclass(frozen=True)
class Analysis:
    """A fuel by its analysis, whatever basis it came on.

    Attributes
    ----------
    dry : mapping of str to float
        Mass percent of dry fuel: elements by symbol, ``"ash"``, and minerals by the name of their species; sums to 100.
    moisture : float
        Mass percent of the fuel as received.
    air_dried_moisture : float or None
        Mass percent of the air-dried sample.
    volatile_matter, fixed_carbon : float or None
        Mass percent of dry fuel, by the proximate analysis.
    density : float or None
        Of a liquid fuel at 15 °C, [kg/m3].
    """

    dry: Mapping[str, float]
    moisture: float = 0.0
    air_dried_moisture: float | None = None
    volatile_matter: float | None = None
    fixed_carbon: float | None = None
    density: float | None = None

    @property
    def minerals(self) -> float:
        """Ash and minerals, mass percent of dry fuel."""
        return sum(percent for part, percent in self.dry.items() if part not in ATOMIC_WEIGHT)

    def sample_moisture(self, basis: Basis) -> float:
        """Moisture of a sample on a basis, mass percent; nan for an air-dried one that was not weighed."""
        if basis == AS_RECEIVED:
            return self.moisture
        if basis == AIR_DRIED:
            return float("nan") if self.air_dried_moisture is None else self.air_dried_moisture
        return 0.0

    def per_kilogram(self, basis: Basis) -> float:
        """Mass of the sample on a basis that a kilogram of fuel as received gives, [kg]; equations (1) and (2)."""
        dry = 1.0 - self.moisture / 100.0
        if basis == DRY_ASH_FREE:
            return dry * (1.0 - self.minerals / 100.0)
        return dry / (1.0 - self.sample_moisture(basis) / 100.0)

    def on(self, basis: Basis) -> dict[str, float]:
        """Mass percent of each part on a basis, without the moisture; free of ash it holds the elements only."""
        factor = (1.0 - self.moisture / 100.0) / self.per_kilogram(basis)
        kept = {part: percent for part, percent in self.dry.items() if basis != DRY_ASH_FREE or part in ATOMIC_WEIGHT}
        return {part: percent * factor for part, percent in kept.items()}

    def percent(self, symbol: str, basis: Basis = DRY) -> float:
        """Mass percent of an element on a basis; zero where the fuel has none."""
        return self.on(basis).get(symbol, 0.0)


@dataclass(frozen=True)
class Sample:
    """An analysis as a lab reports it.

    Attributes
    ----------
    parts : mapping of str to float
        Mass percent on ``basis``: elements, ``"ash"``, minerals by the name of their species; no moisture.
    basis : Basis
        Of the parts.
    moisture : float
        Of the fuel as received, mass percent.
    air_dried_moisture : float or None
        Of the air-dried sample, mass percent.
    dry_ash : float or None
        Ash of the dry fuel, mass percent; for a sample that is dry and free of ash.
    moisture_in_hydrogen : bool
        Whether H and O count those of the moisture.
    oxygen_by_difference : bool
        Whether O is what is left to 100.
    ash_counted_twice : float
        Part of the ash that is SO3 and CO2, [-].
    """

    parts: Mapping[str, float]
    basis: Basis = AS_RECEIVED
    moisture: float = 0.0
    air_dried_moisture: float | None = None
    dry_ash: float | None = None
    moisture_in_hydrogen: bool = False
    oxygen_by_difference: bool = False
    ash_counted_twice: float = 0.0

    def close(self) -> tuple[Analysis, list[str]]:
        """Bring the sample to dry fuel whose parts sum to 100.

        Returns
        -------
        Analysis
        list of str
            What was done to it, a sentence each.

        Raises
        ------
        FeedError
            It does not close to 100, or holds less than nothing of an element.
        """
        parts = {part: float(percent) for part, percent in self.parts.items()}
        wet = {AS_RECEIVED: self.moisture, AIR_DRIED: self.air_dried_moisture or 0.0}.get(self.basis, 0.0)
        notes: list[str] = []
        if self.basis == DRY_ASH_FREE:
            share = 1.0 - (self.dry_ash or 0.0) / 100.0
            if not self.oxygen_by_difference:
                _check(sum(parts.values()), "")
            parts = {part: percent * share for part, percent in parts.items()}
            parts[ASH] = self.dry_ash or 0.0
        if self.moisture_in_hydrogen:
            _take(parts, "H", HYDROGEN_OF_WATER * wet)
            if not self.oxygen_by_difference:
                _take(parts, "O", (1.0 - HYDROGEN_OF_WATER) * wet)
            notes.append("H and O were reported with those of the moisture, which were taken off.")
        twice = self.ash_counted_twice * parts.get(ASH, 0.0)
        reported = sum(parts.values()) + wet
        if twice:
            parts[ASH] -= twice
            notes.append(
                f"SO3 and CO2 of the ash, {twice:.2g} % of the sample, are counted as S and C of the fuel already and "
                "were taken out of the ash."
            )
        if self.oxygen_by_difference:
            parts["O"] = _difference(sum(parts.values()) + wet)
            notes.append(f"O is by difference: {parts['O']:.4g} % of the sample.")
        elif twice and abs(reported - 100.0) < abs(reported - twice - 100.0):
            parts["O"] = parts.get("O", 0.0) + twice
            notes.append(
                "The analysis closes with SO3 and CO2 in the ash, so that O, by difference, was too low by them."
            )
        total = sum(parts.values()) + wet
        _check(total, f" with {wet:g} % of moisture" if wet else "")
        scale = 100.0 / (total - wet)
        if abs(total - 100.0) > 1e-6:
            notes.append(f"The analysis sums to {total:.5g} and was brought to 100.")
        dry = {part: percent * scale for part, percent in parts.items() if percent > 0.0}
        return Analysis(dry, self.moisture, self.air_dried_moisture), notes


def wet_basis(moisture: float) -> float:
    """Moisture in percent of the wet fuel, from ``moisture`` in percent of the dry: 100 u/(100 + u)."""
    return 100.0 * moisture / (100.0 + moisture)


def dry_basis(moisture: float) -> float:
    """Moisture in percent of the dry fuel, from ``moisture`` in percent of the wet: 100 W/(100 - W)."""
    return 100.0 * moisture / (100.0 - moisture)


def _take(parts: dict[str, float], symbol: str, percent: float) -> None:
    """Take the moisture's share off an element."""
    left = parts.get(symbol, 0.0) - percent
    if left < 0.0:
        raise FeedError(
            f"the moisture alone holds {percent:.4g} % {symbol}, but the analysis {parts.get(symbol, 0.0):g} %, so "
            "that its H and O are those of the dry matter: leave moisture_in_hydrogen out"
        )
    parts[symbol] = left


def _difference(rest: float) -> float:
    """Oxygen that is left to 100."""
    if rest > 100.0 + TOLERANCE:
        raise FeedError(f"all but oxygen sums to {rest:.6g} already; expected at most 100")
    return max(0.0, 100.0 - rest)


def _check(total: float, what: str) -> None:
    """Refuse what does not close."""
    if abs(total - 100.0) > TOLERANCE * (1.0 + 1e-12):
        raise FeedError(f"the analysis sums to {total:.6g}{what}; expected 100 within {TOLERANCE}")
