"""What a study found: its states with all that is needed to read, file and repeat them."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import asdict, dataclass, field
from functools import cached_property
from typing import TYPE_CHECKING, Any, Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.practice.audit import Audit
from gibbsmin.practice.figures.key_figure import KeyFigure
from gibbsmin.results.account import Account
from gibbsmin.results.left_out import left_out
from gibbsmin.results.plain import plain
from gibbsmin.results.properties import PROPERTIES, properties
from gibbsmin.results.spreadsheet import spreadsheet
from gibbsmin.states.batch import Batch
from gibbsmin.states.state import State
from gibbsmin.states.system import GAS, System
from gibbsmin.studies.labelled import Axis, labelled, mole_fractions
from gibbsmin.thermo.database import load

if TYPE_CHECKING:
    import xarray

Floats = NDArray[np.float64]

SCHEMA: Final = 1
"""Version of the layout of result.json."""

FULL_STATES: Final = 1000
"""Up to so many states result.json names every species in every state; beyond, it would grow to gigabytes."""

NAMED_FRACTION: Final = 1e-12
"""Beyond ``FULL_STATES`` states result.json leaves out species that never reach this mole fraction."""

_CERTIFICATE: Final = ("element_residual", "gap", "worst_affinity", "held_residual")
_TOTALS: Final = ("temperature", "pressure", "volume", "enthalpy", "internal_energy", "entropy", "gibbs_energy")


@dataclass(frozen=True)
class FeedAmounts:
    """A feed in numbers, as its table has it.

    Attributes
    ----------
    name : str
        Name of the feed.
    amounts : dict of str to float
        Amount of each species, [mol or mol/s].
    atoms : dict of str to float
        What an ultimate analysis brings, by element, [mol or mol/s].
    element_amounts : dict of str to float
        All of it by element, [mol or mol/s].
    mass : float
        Mass, [kg or kg/s].
    temperature, pressure : float or None
        [K] and [Pa].
    """

    name: str
    amounts: Mapping[str, float]
    atoms: Mapping[str, float]
    element_amounts: Mapping[str, float]
    mass: float
    temperature: float | None
    pressure: float | None

    def to_dict(self) -> dict[str, Any]:
        """Return the same as a plain dictionary."""
        return asdict(self)


@dataclass(frozen=True)
class Result:
    """The states of a study.

    Attributes
    ----------
    title : str
        Title of the case.
    case : dict
        The case as read, with defaults.
    case_path, case_sha256 : str
        The file and its checksum; empty where there is none.
    system : System
        What might have formed.
    basis : str
        ``"mol"``, or ``"mol/s"`` where the feeds are flows; energies are then W, volumes m3/s.
    inputs : dict of str to array (states,)
        Varied inputs, in the units that were typed.
    input_units : dict of str to str
        Those units; ``"1"`` for a ratio.
    axes : tuple of Axis
        The varied inputs, each with its own values only.
    batch : Batch
        The states.
    display_units : dict of str to str
        Units that were typed, for ``temperature``, ``pressure`` and ``amount``.
    feeds : dict of str to FeedAmounts
        Feeds as the case has them; a swept size changes from state to state.
    held : dict of str to array (states,)
        The two conditions that were held, by the names that `equilibria` takes, in SI.
    account : Account
        What the feeds bring, and how energy is exchanged.
    key_figures : dict of str to list of KeyFigure
        Numbers of the trade that the case asks for, by set.
    """

    title: str
    case: dict[str, Any]
    case_path: str
    case_sha256: str
    system: System
    basis: str
    inputs: dict[str, Floats]
    input_units: dict[str, str]
    axes: tuple[Axis, ...]
    batch: Batch
    display_units: dict[str, str]
    feeds: dict[str, FeedAmounts]
    held: dict[str, Floats]
    account: Account
    key_figures: Mapping[str, Sequence[KeyFigure]] = field(default_factory=dict)

    def state(self, index: int) -> State:
        """Return state ``index``, counted from 0."""
        return self.batch.state(index)

    def heat(self, index: int) -> float | None:
        """Heat that must be supplied to reach state ``index``.

        Parameters
        ----------
        index : int
            Which state, from 0.

        Returns
        -------
        float or None
            Energy of the state less that of all feeds, or the heat that is held, [J or W]; negative where heat is
            given off. None where a feed has no temperature or is known by its elements only, or where the state is
            not certified.
        """
        return None if self.heats is None else plain(self.heats[index])

    def work(self, index: int) -> float | None:
        """Shaft work that must be supplied to reach state ``index``, [J or W]; negative where it is gained.

        Zero but for an expansion or compression; None as for `heat`.
        """
        return None if self.works is None else plain(self.works[index])

    def audit(self, index: int) -> Audit | None:
        """Second-law account of state ``index``; None where it is not certified, or a feed is not known."""
        return self.audits[index]

    @cached_property
    def heats(self) -> Floats | None:
        """Heat of every state, (states,), [J or W]; nan where a state is not certified."""
        return self.account.heat(self.batch)

    @cached_property
    def works(self) -> Floats | None:
        """Shaft work of every state, (states,), [J or W]; nan where a state is not certified."""
        return self.account.work(self.batch)

    @cached_property
    def entropies_generated(self) -> Floats | None:
        """Entropy that every state generates, (states,), [J/K or W/K]; None where that of a feed is not known."""
        return self.account.entropies_generated(self.batch)

    @cached_property
    def audits(self) -> list[Audit | None]:
        """Second-law account of every state."""
        return self.account.audits(self.batch, self.basis)

    @cached_property
    def properties(self) -> dict[str, Floats]:
        """Properties of every state, (states,) each, by name; none beyond 1000 states, for the time they take."""
        return properties(self.batch) if len(self.batch) <= FULL_STATES else {}

    def to_dict(self) -> dict[str, Any]:
        """Return the result as result.json has it.

        Returns
        -------
        dict
            Safe for JSON: plain numbers, None for what is not known. Amounts are per ``basis``. Beyond 1000 states,
            properties are left out, and species that stay below a mole fraction of 1e-12 in all of them, which are
            listed under ``left_out``; the data set holds them.
        """
        batch = self.batch
        arrays = {name: np.asarray(getattr(batch, name)) for name in (*_TOTALS, *_CERTIFICATE, "certified")}
        arrays["amounts"] = batch.amounts
        arrays["mole_fractions"] = mole_fractions(self.system, batch.amounts)
        reasons = batch.reason
        kept = np.ones(len(self.system.species), bool)
        if len(batch) > FULL_STATES:
            kept = np.nan_to_num(arrays["mole_fractions"]).max(axis=0) >= NAMED_FRACTION
        named = np.flatnonzero(kept)
        left_out = [name for name, flag in zip(self.system.species, kept, strict=True) if not flag]
        return {
            "schema": SCHEMA,
            "title": self.title,
            "basis": self.basis,
            "case": self.case,
            "input_units": self.input_units,
            **({"remark": self.account.remark} if self.account.remark else {}),
            "provenance": {"case_sha256": self.case_sha256, "data_version": load().version},
            **({"key_figures": self.legend()} if self.key_figures else {}),
            **({"left_out": {"below_mole_fraction": NAMED_FRACTION, "species": left_out}} if left_out else {}),
            "states": [self._state(i, arrays, named, reasons[i]) for i in range(len(batch))],
        }

    def legend(self) -> dict[str, dict[str, dict[str, str]]]:
        """Tell what the numbers of the trade are, by set and name."""
        return {
            group: {
                one.name: {"label": one.label, "unit": one.unit, "shown": one.shown, "note": one.note}
                for one in figures
            }
            for group, figures in self.key_figures.items()
        }

    def _state(self, i: int, arrays: dict[str, Any], named: NDArray[np.intp], reason: str) -> dict[str, Any]:
        names, amounts = self.system.species, arrays["amounts"][i]
        gas, certified = self.system.gas, bool(arrays["certified"][i])
        phases = {GAS: plain(amounts[gas].sum())} if gas.any() else {}
        phases |= {names[k]: plain(amounts[k]) for k in np.flatnonzero(~gas) if amounts[k] > 0.0}
        return {
            "inputs": {name: float(values[i]) for name, values in self.inputs.items()},
            **{name: plain(arrays[name][i]) for name in _TOTALS},
            "held": {name: plain(values[i]) for name, values in self.held.items()},
            "feed_enthalpy": _at(self.account.feed_enthalpy, i),
            "feed_internal_energy": _at(self.account.feed_internal_energy, i),
            "heat": self.heat(i),
            "work": self.work(i),
            **{name: plain(values[i]) for name, values in self.properties.items()},
            **(
                {
                    "key_figures": {
                        group: {one.name: plain(one.value[i]) for one in figures}
                        for group, figures in self.key_figures.items()
                    }
                }
                if self.key_figures
                else {}
            ),
            **(
                {"left_out": {name: plain(value) for name, value in left_out(self, i).items()}}
                if certified and self.case.get("species", {}).get("exclude") and len(self.batch) <= FULL_STATES
                else {}
            ),
            "audit": None if (account := self.audit(i)) is None else account.to_dict(),
            "phases": phases,
            "amounts": {names[k]: plain(amounts[k]) for k in named},
            "mole_fractions": {names[k]: plain(arrays["mole_fractions"][i, k]) for k in named},
            "certificate": {
                **{name: plain(arrays[name][i]) for name in _CERTIFICATE},
                "ok": certified,
                "reason": reason,
            },
            "cautions": list(self.state(i).warnings) if certified else [],
        }

    def tables(self) -> dict[str, str]:
        """Write the spreadsheets, by the name of their file."""
        return {"table.csv": spreadsheet(self)}

    def dataset(self) -> xarray.Dataset:
        """Return the states with named axes and units.

        Returns
        -------
        xarray.Dataset
            Dimensions are the varied inputs, under the names that the case gives them and in the units that were
            typed, and ``species``.
        """
        unit, per_K = ("W", "W/K") if self.basis == "mol/s" else ("J", "J/K")
        extra: dict[str, tuple[Floats, str, str]] = {}
        if self.heats is not None:
            extra["heat"] = (self.heats, unit, "heat to be supplied")
        if self.works is not None and self.account.shaft:
            extra["work"] = (self.works, unit, "shaft work to be supplied")
        if any(self.audits):
            made = np.array([np.nan if one is None else one.entropy_generated for one in self.audits])
            extra["entropy_generated"] = (made, per_K, "entropy generated in the system and its surroundings")
            extra["lost_work"] = (self.account.surroundings_temperature * made, unit, "lost work")
        for one in PROPERTIES:
            if one.name in self.properties:
                kind = one.rate if self.basis == "mol/s" else one.unit
                extra[one.name] = (self.properties[one.name], kind, one.meaning)
        for group, figures in self.key_figures.items():
            for figure in figures:
                extra[f"{group}.{figure.name}"] = (figure.value, figure.unit, figure.label)
        data = labelled(self.system, self.batch, self.axes, self.basis, extra)
        return data.assign_attrs(title=self.title, case_sha256=self.case_sha256)


def _at(values: Floats | None, i: int) -> float | None:
    return None if values is None else plain(values[i])
