"""One reaction: enthalpy, entropy, Gibbs energy, equilibrium constant, and where its direction turns.

All sums are products less reactants, in their standard states: the ideal gas at 1 bar, the pure solid or liquid.

    dH = Σ ν H°(T),  dS = Σ ν S°(T),  dG = dH - T dS,  ln K = -dG/RT                                     (1)
    surroundings at T, which take up -dH:  dS_sur = -dH/T,   universe:  dS + dS_sur = -dG/T               (2)
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property
from math import log
from typing import Any, Final, NamedTuple

import numpy as np

from gibbsmin.constants import STANDARD_PRESSURE, R
from gibbsmin.errors import InputError
from gibbsmin.practice.reactions.balance import check_balance
from gibbsmin.practice.reactions.crossover import zeros
from gibbsmin.practice.reactions.equation import Term, number, read_equation, written
from gibbsmin.practice.reactions.participants import Participant, participant, phase_label
from gibbsmin.thermo.database import load
from gibbsmin.thermo.record import Species
from gibbsmin.units import quantity

_SLACK: Final = 2.0
"""K by which a temperature may lie below the data without a warning: many begin at 300 K."""
_TIE: Final = 1.0
"""J/mol within which two phases count as equally stable."""


class Part(NamedTuple):
    """What one species adds to a reaction at one temperature.

    ``name``, ``coefficient`` [-] (positive for products), the species' own ``enthalpy`` [J/mol], ``entropy`` [J/mol/K]
    and ``gibbs_energy`` [J/mol]. What it adds is the coefficient times these.
    """

    name: str
    coefficient: float
    enthalpy: float
    entropy: float
    gibbs_energy: float


class Uncertainty(NamedTuple):
    """Half-widths at 95 %: ``enthalpy`` [J/mol], ``entropy`` [J/mol/K], ``gibbs_energy`` [J/mol], ``ln_k`` [-].

    ``assumed`` names the species whose figure is a default of their class and not a published one.
    """

    enthalpy: float
    entropy: float
    gibbs_energy: Any
    ln_k: Any
    assumed: tuple[str, ...]


@dataclass(frozen=True)
class Reaction:
    """A balanced reaction; make it with `reaction`.

    Attributes
    ----------
    participants : tuple of Participant
        Its species.
    exact : tuple of Fraction
        Their coefficients, positive for products, [-].
    notes : tuple of str
        What was taken for granted when the equation was read.

    Notes
    -----
    Functions take kelvin, arrays of kelvin, or a text with a unit. Energies are for one mole of the equation as it is
    written, [J/mol]. The standard pressure is 1 bar, `standard_pressure`.
    """

    participants: tuple[Participant, ...]
    exact: tuple[Fraction, ...]
    notes: tuple[str, ...] = ()

    standard_pressure = STANDARD_PRESSURE

    def __str__(self) -> str:
        return self.equation

    @property
    def species(self) -> tuple[Species, ...]:
        """Records of its species."""
        return tuple(each.species for each in self.participants)

    @cached_property
    def equation(self) -> str:
        """The equation, with the phase of each species that may have several."""
        return written((nu, each.label) for nu, each in zip(self.exact, self.participants, strict=True))

    @cached_property
    def coefficients(self) -> dict[str, float]:
        """Coefficient of each species, positive for products, [-]."""
        return {record.name: float(nu) for record, nu in zip(self.species, self.exact, strict=True)}

    @property
    def changes_phase(self) -> bool:
        """True where one substance takes part in two phases, whose errors are then shared."""
        names = set(self.coefficients)
        return any(other.name in names for each in self.participants for other in each.others)

    @property
    def gas_change(self) -> float:
        """Moles of gas that come into being, [-]."""
        return sum(nu for record, nu in zip(self.species, self._nu, strict=True) if not record.condensed)

    def enthalpy(self, T: Any) -> Any:
        """Enthalpy of reaction dH [J/mol] at ``T`` [K], eq. (1); negative where heat is given off."""
        return self._sum(T, Species.enthalpy)

    def entropy(self, T: Any) -> Any:
        """Entropy of reaction dS [J/mol/K] at ``T`` [K], eq. (1)."""
        return self._sum(T, Species.entropy)

    def gibbs_energy(self, T: Any) -> Any:
        """Gibbs energy of reaction dG [J/mol] at ``T`` [K], eq. (1)."""
        return self._sum(T, Species.gibbs_energy)

    def ln_k(self, T: Any) -> Any:
        """Natural logarithm of the equilibrium constant [-] at ``T`` [K], pressures over 1 bar, eq. (1)."""
        return _plain(-self.gibbs_energy(T) / (R * _kelvin(T)))

    def log10_k(self, T: Any) -> Any:
        """Decimal logarithm of the equilibrium constant [-] at ``T`` [K], pressures over 1 bar."""
        return self.ln_k(T) / log(10.0)

    def entropy_of_surroundings(self, T: Any) -> Any:
        """Entropy that surroundings at ``T`` [K] gain by the heat given off, [J/mol/K], eq. (2)."""
        return _plain(-self.enthalpy(T) / _kelvin(T))

    def entropy_of_universe(self, T: Any) -> Any:
        """Entropy of reaction and surroundings together at ``T`` [K], [J/mol/K], eq. (2); positive: it may run."""
        return self.entropy(T) + self.entropy_of_surroundings(T)

    def terms(self, T: Any) -> tuple[Part, ...]:
        """Show what each species adds at one temperature ``T`` [K]."""
        t = float(_kelvin(T))
        return tuple(
            Part(each.label, nu, *(float(f(each.species, t)) for f in _FUNCTIONS))
            for nu, each in zip(self._nu, self.participants, strict=True)
        )

    def uncertainty(self, T: Any) -> Uncertainty:
        """Carry the uncertainty of the species' H° and S° at 298.15 K to the reaction.

        Parameters
        ----------
        T : float, array or str
            Temperature, [K].

        Returns
        -------
        Uncertainty
            At 95 %.

        Notes
        -----
        Added in quadrature, as if the species' errors were independent. They are not: formation enthalpies that hang
        on each other share errors, which may cancel in a reaction or add up; those of two phases of one substance
        cancel for the most part. Heat capacities are taken as exact.
        """
        t = _kelvin(T)
        u_H, u_S = (
            float(np.hypot.reduce([nu * u for nu, u in zip(self._nu, each, strict=True)]))
            for each in (
                [record.enthalpy_uncertainty for record in self.species],
                [record.entropy_uncertainty for record in self.species],
            )
        )
        u_G = np.hypot(u_H, t * u_S)
        return Uncertainty(u_H, u_S, _plain(u_G), _plain(u_G / (R * t)), self.assumed)

    @property
    def assumed(self) -> tuple[str, ...]:
        """Species whose uncertainty is a default of their class and not a published figure."""
        return tuple(each.label for each in self.participants if each.species.uncertainty_assumed)

    @property
    def temperature_range(self) -> tuple[float, float] | None:
        """Range in which the data of all species lie, [K]; None where they do not meet."""
        return _common(record.temperature_range for record in self.species)

    @property
    def search_range(self) -> tuple[float, float] | None:
        """Range that is searched for crossovers, [K]; None where there is none.

        Solids and liquids may be used somewhat beyond their data, so that a melting point at the end of both is found;
        gases only to their upper end.
        """
        return _common(
            (record.usable[0], record.usable[1] if record.condensed else record.temperature_range[1])
            for record in self.species
        )

    @cached_property
    def crossovers(self) -> tuple[float, ...]:
        """All temperatures at which dG = 0, [K], within `search_range`."""
        searched = self.search_range
        if searched is None:
            return ()
        breaks = sorted({end for record in self.species for piece in record.pieces for end in piece[:2]})
        return tuple(zeros(self.gibbs_energy, lambda T: -self.entropy(T), *searched, breaks))

    def crossover_uncertainty(self, T: float) -> float:
        """Half-width at 95 % of a crossover at ``T`` [K], [K]: that of dG over the slope of dG, -dS."""
        slope = abs(float(self.entropy(T)))
        return float(self.uncertainty(T).gibbs_energy) / slope if slope else float("inf")

    def warnings(self, T: Any) -> list[str]:
        """Say which species are used outside their data at ``T`` [K]; beyond, Cp is constant."""
        asked = np.atleast_1d(_kelvin(T))
        found: dict[str, list[str]] = {}
        for each in self.participants:
            low, high = each.species.temperature_range
            if outside := [f"{t:.6g}" for t in asked if not low - _SLACK <= t <= high]:
                found.setdefault(f"({low:g} to {high:g} K) at {_listed(outside)} K", []).append(each.label)
        return [f"outside the data of {', '.join(labels)} {where}" for where, labels in found.items()]

    def hypothetical(self, T: Any) -> list[str]:
        """Say which species have another phase that is more stable at ``T`` [K] and 1 bar."""
        found = []
        for each in self.participants:
            where: dict[str, list[str]] = {}
            for t in map(float, np.atleast_1d(_kelvin(T))):
                rivals = [other for other in each.others if other.usable[0] <= t <= other.usable[1]]
                best = min(rivals, key=lambda other: float(other.gibbs_energy(t)), default=each.species)
                if best.gibbs_energy(t) < each.species.gibbs_energy(t) - _TIE:
                    where.setdefault(phase_label(best), []).append(f"{t:.6g}")
            found += [f"{each.label} is less stable than {name} at {_listed(ts)} K" for name, ts in where.items()]
        return found

    def law(self) -> str:
        """Write K in pressures; pure solids and liquids count as one.

        Examples
        --------
        >>> reaction("CO + 1/2 O2 = CO2").law()
        'K = p[CO2] / (p[CO] p[O2]^(1/2))'
        """
        over, under = (
            [
                f"p[{each.species.name}]" + _power(abs(nu))
                for nu, each in zip(self.exact, self.participants, strict=True)
                if (nu > 0) == product and not each.species.condensed
            ]
            for product in (True, False)
        )
        below = f" / ({' '.join(under)})" if len(under) > 1 else f" / {under[0]}" if under else ""
        return f"K = {' '.join(over) or '1'}{below}"

    @cached_property
    def _nu(self) -> tuple[float, ...]:
        return tuple(float(nu) for nu in self.exact)

    def _sum(self, T: Any, function: Callable[[Species, Any], Any]) -> Any:
        """Products less reactants."""
        t = _kelvin(T)
        return _plain(sum(nu * function(record, t) for nu, record in zip(self._nu, self.species, strict=True)))


def reaction(equation: str, *, extra: Iterable[Species] = ()) -> Reaction:
    """Read and balance-check a reaction.

    Parameters
    ----------
    equation : str
        ``"CO + H2O = CO2 + H2"``. Sides are joined by ``=``, ``->`` or ``<=>``; coefficients are integers, decimals or
        fractions. A bare formula is the gas; ``(s)`` and ``(l)`` are said, ``(g)`` may be.
    extra : iterable of Species
        Own species, which go before those of the database.

    Returns
    -------
    Reaction

    Raises
    ------
    InputError
        The equation cannot be read, or does not balance; the text proposes coefficients.
    SpeciesError
        A species is unknown, or its phase must be said.

    Examples
    --------
    >>> r = reaction("2 H2 + O2 = 2 H2O(l)")
    >>> round(r.enthalpy(298.15) / 1e3, 1), round(r.entropy(298.15), 1)
    (-571.7, -326.6)
    """
    own = {record.name: record for record in extra}
    left, right = read_equation(str(equation), lambda name: name in own or name in load())
    notes: list[str] = []
    sides = [_gathered(side, own, notes) for side in (left, right)]
    exact: dict[str, Fraction] = {}
    found: dict[str, Participant] = {}
    for sign, side in zip((-1, 1), sides, strict=True):
        for name, (count, each) in side.items():
            exact[name] = exact.get(name, Fraction(0)) + sign * count
            found[name] = each
            if sign == 1 and name in sides[0]:
                notes.append(f"{each.label} stands on both sides and is cancelled as far as it goes")
    kept = [name for name, count in exact.items() if count]
    if not kept:
        raise InputError(f"equation {str(equation).strip()!r}: both sides are the same, nothing reacts")
    participants = tuple(found[name] for name in kept)
    coefficients = tuple(exact[name] for name in kept)
    check_balance([each.species for each in participants], coefficients, [each.label for each in participants])
    return Reaction(participants, coefficients, tuple(dict.fromkeys(notes)))


def _gathered(
    side: Iterable[Term], own: dict[str, Species], notes: list[str]
) -> dict[str, tuple[Fraction, Participant]]:
    """Sum the coefficients of one side by species."""
    found: dict[str, tuple[Fraction, Participant]] = {}
    for term in side:
        each = participant(term.name, own)
        name = each.species.name
        if each.note:
            notes.append(each.note)
        if name in found:
            notes.append(f"{each.label} stands twice on one side and is added up")
        found[name] = (found.get(name, (Fraction(0), each))[0] + term.coefficient, each)
    return found


_FUNCTIONS: Final = (Species.enthalpy, Species.entropy, Species.gibbs_energy)


def _kelvin(T: Any) -> Any:
    """Read one temperature, or an array of kelvin."""
    one = isinstance(T, str) or hasattr(T, "dimensionality")
    try:
        t = np.asarray(quantity(T, "K", "temperature") if one else T, float)
    except (TypeError, ValueError) as error:
        raise InputError(str(error) if one else f"temperature: expected kelvin or a text, got {T!r}") from None
    if not np.all((t > 0.0) & np.isfinite(t)):
        raise InputError(f"temperature: expected above 0 K and finite, got {T!r}")
    return t


def _plain(value: Any) -> Any:
    """Give a float where there is one value."""
    return value if np.ndim(value) else float(value)


def _common(ranges: Iterable[tuple[float, float]]) -> tuple[float, float] | None:
    """Where ranges overlap."""
    lows, highs = zip(*ranges, strict=True)
    return (max(lows), min(highs)) if max(lows) < min(highs) else None


def _listed(words: list[str]) -> str:
    """Write few words, or how many there are."""
    return ", ".join(words) if len(words) <= 4 else f"{words[0]} ... {words[-1]}"


def _power(nu: Fraction) -> str:
    """Write an exponent."""
    return "" if nu == 1 else f"^{number(nu)}" if nu.denominator == 1 else f"^({number(nu)})"
