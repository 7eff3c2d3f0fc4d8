"""A small result made by hand, so that the report is tested without the solver."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Any

import numpy as np

from gibbsmin.practice.audit import Audit, audit
from gibbsmin.results.account import Account
from gibbsmin.results.spreadsheet import spreadsheet
from gibbsmin.studies.labelled import Axis
from gibbsmin.thermo.database import load

SPECIES = ["H2", "H2O", "CO", "CO2", "CH4", "N2", "C2H4", "C(s):graphite", "H2O(l)"]
GAS = np.array([True] * 7 + [False] * 2)
# The textbook reformer exit, mol/s by hand: 100 in all, traces below 1 ppm.
EXIT = np.array([49.4, 32.5, 9.67, 5.46, 2.61, 0.36, 4e-7, 0.0, 0.0])


@dataclass
class FakeSystem:
    """The names and the gas mask."""

    species: list[str] = field(default_factory=lambda: list(SPECIES))
    gas: Any = field(default_factory=lambda: GAS.copy())
    elements: list[str] = field(default_factory=lambda: ["C", "H", "O", "N"])
    records: tuple[Any, ...] = ()
    constraints: dict[str, dict[str, float]] = field(default_factory=dict)


@dataclass
class FakeState:
    """What a view asks of a state."""

    affinities_array: dict[str, float]
    mean_molar_mass: float = 0.01405
    density: float = 3.55
    mass: float = 140.6
    warnings: list[str] = field(default_factory=list)


class FakeBatch:
    """Arrays of ``count`` states; the first species falls and the solid comes half way."""

    def __init__(self, count: int) -> None:
        self.amounts = np.tile(EXIT, (count, 1))
        self.temperature = np.linspace(1143.15, 1143.15 + count - 1, count)
        self.pressure = np.full(count, 24e5)
        self.volume = np.full(count, 39.6)
        self.enthalpy = np.full(count, -1.2e7)
        self.internal_energy = self.enthalpy - self.pressure * self.volume
        self.entropy = np.full(count, 2.1e4)
        self.gibbs_energy = np.full(count, -3.6e7)
        potentials = load().get("C(s):graphite").gibbs_energy(1143.15) / (8.314462618 * 1143.15)
        self.element_potentials = np.tile([potentials + np.log(0.18), -8.0, -30.0, -10.0], (count, 1))
        self.element_residual = np.full(count, 3e-16)
        self.gap = np.full(count, 2e-15)
        self.worst_affinity = np.zeros(count)
        self.held_residual = np.zeros(count)
        self.certified = np.ones(count, bool)
        self.reason = [""] * count
        if count > 1:
            self.amounts[count // 2 :, 7] = 1.5

    def state(self, index: int) -> FakeState:
        """Affinities of the two absent phases, and nothing to warn of."""
        return FakeState({"C(s):graphite": -1.715, "H2O(l)": -3.4})

    def __len__(self) -> int:
        return len(self.temperature)


@dataclass
class FakeFeed:
    """A feed's amounts."""

    amounts: dict[str, float]
    temperature: float | None = None


class FakeResult:
    """The attributes of a result that the report reads."""

    def __init__(self, count: int = 1) -> None:
        self.title = "A made-up reformer outlet"
        self.case: dict[str, Any] = {"held": {"temperature": "870 degC", "pressure": "24 bar"}, "show": {}}
        self.case_sha256 = "0" * 64
        self.system = FakeSystem()
        self.basis = "mol/s"
        self.batch = FakeBatch(count)
        self.display_units = {"temperature": "degC", "pressure": "bar"}
        self.feeds = {"gas": FakeFeed({"CH4": 27.0}), "steam": FakeFeed({"H2O": 81.0})}
        self.held = {"temperature": self.batch.temperature.copy(), "pressure": self.batch.pressure.copy()}
        self.account = Account(feed_enthalpy=self.batch.enthalpy - 6.8e6)
        self.properties: dict[str, Any] = {}
        self.key_figures: dict[str, Any] = {}
        varied = count > 1
        self.inputs = {"held.temperature": self.batch.temperature - 273.15} if varied else {}
        self.input_units = {"held.temperature": "degC"} if varied else {}

    @property
    def axes(self) -> tuple[Axis, ...]:
        """The one varied input, if any; of several each a value a state."""
        along = "point" if len(self.inputs) > 1 else ""
        return tuple(Axis(name, values, self.input_units[name], along) for name, values in self.inputs.items())

    def tables(self) -> dict[str, str]:
        """Write the one spreadsheet."""
        return {"table.csv": spreadsheet(self)}  # type: ignore[arg-type]

    def state(self, index: int) -> FakeState:
        """State of the batch."""
        return self.batch.state(index)

    @property
    def heats(self) -> Any:
        """A duty of 6.8 MW in every state."""
        return np.full(len(self.batch), 6.8e6)

    @property
    def works(self) -> Any:
        """No shaft."""
        return np.zeros(len(self.batch))

    @property
    def audits(self) -> list[Audit | None]:
        """The account of each state: some 1050 W/K generated in the first, more in the rest."""
        return [audit(2.0e4, 2.7e4 + 100.0 * k, 6.8e6, 1143.15 + k, flow=True) for k in range(len(self.batch))]

    def heat(self, index: int) -> float | None:
        """Return the duty."""
        return float(self.heats[index])

    def work(self, index: int) -> float | None:
        """Return the work."""
        return float(self.works[index])

    def audit(self, index: int) -> Audit | None:
        """Return the account, unless the state is not certified."""
        return self.audits[index] if self.batch.certified[index] else None

    def to_dict(self) -> dict[str, Any]:
        """Return the least that result.json needs."""
        return {
            "schema": 1,
            "title": self.title,
            "case": self.case,
            "basis": self.basis,
            "states": [
                {"temperature": float(T), "certificate": {"ok": bool(good)}}
                for T, good in zip(self.batch.temperature, self.batch.certified, strict=True)
            ],
        }

    def dataset(self) -> Any:
        """One variable along the varied input."""
        import xarray as xr

        return xr.Dataset({"temperature": ("state", self.batch.temperature, {"units": "K"})})
