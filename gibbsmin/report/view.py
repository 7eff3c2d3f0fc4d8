"""One state laid out for reading: plain numbers and names, taken from a result once."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from math import nan
from typing import TYPE_CHECKING

from gibbsmin.report.held_words import held_words

if TYPE_CHECKING:
    from gibbsmin.practice.audit import Audit
    from gibbsmin.results.result import Result


@dataclass(frozen=True, slots=True)
class Phase:
    """A phase: its ``name``, its ``amount`` [mol or mol/s], and its species with (amount, mole fraction)."""

    name: str
    amount: float
    species: Mapping[str, tuple[float, float]]


@dataclass(frozen=True, slots=True)
class View:
    """What is shown of one state; SI throughout.

    Attributes
    ----------
    phases : tuple of Phase
        Phases that are present, the gas first, the rest by falling amount.
    absent : mapping of str to float
        Affinity of every absent phase in units of RT, the nearest to forming first.
    heat, work : float or None
        Heat and shaft work to be supplied, [J or W]; None where a feed has no temperature.
    held : str
        What was held, in words; empty where it is temperature and pressure.
    shaft, given : bool
        Whether energy is exchanged as work, and whether the heat was held.
    second_law, remark : str
        What the second-law account comes to, and what it rests on, in words.
    properties : mapping of str to float
        By name, SI; empty where there are too many states for it.
    """

    temperature: float
    pressure: float
    mean_molar_mass: float
    density: float
    heat: float | None
    work: float | None
    held: str
    shaft: bool
    given: bool
    second_law: str
    remark: str
    properties: Mapping[str, float]
    mass: float
    phases: tuple[Phase, ...]
    absent: Mapping[str, float]
    element_residual: float
    gap: float
    worst_affinity: float
    certified: bool
    reason: str

    @property
    def gas(self) -> dict[str, float]:
        """Mole fractions of the gas, [-]; empty where there is none."""
        return {name: x for phase in self.phases if phase.name == "gas" for name, (_, x) in phase.species.items()}


def view(result: Result, index: int) -> View:
    """Lay out state ``index`` of a result.

    Parameters
    ----------
    result : Result
    index : int
        Which state, from 0.

    Returns
    -------
    View
    """
    batch, system = result.batch, result.system
    audit = result.audit(index)
    if not batch.certified[index]:
        return _without_answer(result, index)
    state = result.state(index)
    amounts = [float(n) for n in batch.amounts[index]]
    in_gas = [bool(flag) for flag in system.gas]
    gas_total = sum(n for n, flag in zip(amounts, in_gas, strict=True) if flag)
    phases = []
    if gas_total > 0.0:
        rows = {name: (n, n / gas_total) for name, n, flag in zip(system.species, amounts, in_gas, strict=True) if flag}
        phases.append(Phase("gas", gas_total, rows))
    condensed = [
        Phase(name, n, {name: (n, 1.0)})
        for name, n, flag in zip(system.species, amounts, in_gas, strict=True)
        if not flag and n > 0.0
    ]
    phases += sorted(condensed, key=lambda phase: -phase.amount)
    return View(
        temperature=float(batch.temperature[index]),
        pressure=float(batch.pressure[index]),
        mean_molar_mass=float(state.mean_molar_mass),
        density=float(state.density),
        heat=result.heat(index),
        work=result.work(index),
        held=_held(result),
        shaft=result.account.shaft,
        given=result.account.given_heat is not None,
        second_law=_second_law(audit),
        remark=result.account.remark,
        properties={name: float(values[index]) for name, values in result.properties.items()},
        mass=float(state.mass),
        phases=tuple(phases),
        absent=state.affinities_array,
        element_residual=float(batch.element_residual[index]),
        gap=float(batch.gap[index]),
        worst_affinity=float(batch.worst_affinity[index]),
        certified=True,
        reason="",
    )


def _second_law(audit: Audit | None) -> str:
    """Put the account in words; where it comes out against the law, a caution says so instead."""
    return "" if audit is None or audit.entropy_generated < 0.0 else audit.sentence.replace("°C", "degC")


def _held(result: Result) -> str:
    """Say what was held where that is more than temperature and pressure."""
    return "" if set(result.held) == {"temperature", "pressure"} else held_words(result.case.get("held", {}))


def _without_answer(result: Result, index: int) -> View:
    """Lay out a state that was not certified: its held conditions and the reason, no other numbers."""
    batch = result.batch
    return View(
        temperature=float(result.held["temperature"][index]) if "temperature" in result.held else nan,
        pressure=float(result.held["pressure"][index]) if "pressure" in result.held else nan,
        mean_molar_mass=nan,
        density=nan,
        heat=None,
        work=None,
        held=_held(result),
        shaft=False,
        given=False,
        second_law="",
        remark="",
        properties={},
        mass=nan,
        phases=(),
        absent={},
        element_residual=nan,
        gap=nan,
        worst_affinity=nan,
        certified=False,
        reason=str(batch.reason[index]),
    )
