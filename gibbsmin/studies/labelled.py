"""Solved states as a labelled data set."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any, Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.states.batch import Batch
from gibbsmin.states.system import System

if TYPE_CHECKING:
    import xarray

Floats = NDArray[np.float64]


POINT: Final = "point"
"""Dimension of states that do not lie on a grid."""


@dataclass(frozen=True)
class Axis:
    """A varied input: its ``name``, its ``values`` (n,), and their ``unit``.

    ``along`` is the dimension that the values lie along, where it is not a dimension of its own name.
    """

    name: str
    values: Floats
    unit: str
    along: str = ""

    @property
    def dimension(self) -> str:
        """Name of the dimension that the values lie along."""
        return self.along or self.name


def dimensions(axes: Sequence[Axis]) -> dict[str, int]:
    """Return the dimensions that the states of a study lie along, with their sizes, the last one the fastest."""
    return {axis.dimension: len(axis.values) for axis in axes}


def coordinates(axes: Sequence[Axis]) -> dict[str, Any]:
    """Return the varied inputs as xarray takes coordinates: by name the dimension, the values, and the unit."""
    return {axis.name: (axis.dimension, axis.values, {"units": axis.unit}) for axis in axes}


def mole_fractions(system: System, amounts: Floats) -> Floats:
    """Mole fraction of each species within its phase.

    Parameters
    ----------
    system : System
        The species.
    amounts : array (states, S)
        Amounts, [mol].

    Returns
    -------
    array (states, S)
        [-]; a pure phase is 1 where present and 0 where absent.
    """
    gas = np.asarray(system.gas, bool)
    total = amounts[:, gas].sum(axis=1, keepdims=True)  # (states, 1)
    fractions = np.where(np.isnan(amounts), np.nan, (amounts > 0.0).astype(float))
    fractions[:, gas] = amounts[:, gas] / np.where(total > 0.0, total, 1.0)
    return fractions


def labelled(
    system: System,
    batch: Batch,
    axes: Sequence[Axis],
    basis: str,
    extra: Mapping[str, tuple[Floats, str, str]] | None = None,
) -> xarray.Dataset:
    """Give the arrays of a batch their axes, names and units.

    Parameters
    ----------
    system : System
        The species.
    batch : Batch
        As many states as the dimensions of the axes have places, the last one varying fastest.
    axes : sequence of Axis
        The varied inputs; none for one state. Those of a grid have a dimension each.
    basis : str
        ``"mol"``, or ``"mol/s"`` where the feeds are flows.
    extra : mapping, optional
        More variables: values (states,), unit, and what they are.

    Returns
    -------
    xarray.Dataset
        Dimensions are those of the axes and ``species``. An axis takes the place of a variable of its name.
    """
    import xarray

    sizes = dimensions(axes)
    names, shape = tuple(sizes), tuple(sizes.values())
    varied = coordinates(axes)
    per = "/s" if basis == "mol/s" else ""
    energy, entropy = ("W", "W/K") if per else ("J", "J/K")

    def spread(values: Any) -> Any:
        array = np.asarray(values)
        return array.reshape(shape + array.shape[1:])

    states: dict[str, tuple[Any, str, str]] = {
        "temperature": (batch.temperature, "K", "temperature of the settled mixture"),
        "pressure": (batch.pressure, "Pa", "absolute pressure"),
        "volume": (batch.volume, f"m3{per}", "volume"),
        "enthalpy": (batch.enthalpy, energy, "enthalpy; the elements at 298.15 K are zero"),
        "entropy": (batch.entropy, entropy, "entropy"),
        "gibbs_energy": (batch.gibbs_energy, energy, "Gibbs energy"),
        "element_residual": (batch.element_residual, "1", "worst error of an element balance, relative to the element"),
        "gap": (batch.gap, "1", "duality gap, in units of RT"),
        "worst_affinity": (batch.worst_affinity, "1", "highest affinity of an absent phase, in units of RT"),
        **(extra or {}),
    }
    variables: dict[str, Any] = {
        name: (names, spread(values), {"units": unit, "long_name": text})
        for name, (values, unit, text) in states.items()
        if name not in varied
    }
    amounts = np.asarray(batch.amounts, float)
    fractions = mole_fractions(system, amounts)
    over = (*names, "species")
    variables["amount"] = (over, spread(amounts), {"units": basis, "long_name": "amount of each species"})
    within = {"units": "1", "long_name": "mole fraction of each species within its phase"}
    variables["mole_fraction"] = (over, spread(fractions), within)
    variables["certified"] = (names, spread(batch.certified), {"long_name": "whether the certificate holds"})
    variables["reason"] = (names, spread(np.array(batch.reason, dtype=str)), {"long_name": "why it does not"})
    return xarray.Dataset(variables, {**varied, "species": list(system.species)}, {"basis": basis})
