"""States over one or more varied inputs: the grid, the solving in chunks, and the labelled result."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from typing import TYPE_CHECKING, Any, Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

from gibbsmin.errors import InputError, nearest
from gibbsmin.states.batch import Batch
from gibbsmin.states.held import UNIT, which_pair
from gibbsmin.states.solve import equilibria
from gibbsmin.states.system import System
from gibbsmin.studies.labelled import Axis, labelled
from gibbsmin.units import Measurable, quantity

if TYPE_CHECKING:
    import xarray

Floats = NDArray[np.float64]
Progress = Callable[[int, int], object]
"""Called with the number of states done and of all states."""

CHUNK: Final = 2000
"""States that are solved between two reports of progress."""

_FEED: Final = "feed:"


def grid(axes: Sequence[ArrayLike]) -> list[Floats]:
    """Combine the values of several inputs, each with each.

    Parameters
    ----------
    axes : sequence of arrays (n_k,)
        Values of each input.

    Returns
    -------
    list of arrays (states,)
        Value of each input in every state; the last input varies fastest. One state where there are no axes.
    """
    if not axes:
        return []
    meshes = np.meshgrid(*(np.asarray(values, float) for values in axes), indexing="ij")
    return [mesh.ravel() for mesh in meshes]


def solve_in_chunks(
    system: System,
    element_amounts: Floats,
    held: Mapping[str, Floats],
    progress: Progress | None = None,
    approach: Mapping[str, Floats] | None = None,
) -> Batch:
    """Solve many states, a chunk at a time.

    Parameters
    ----------
    system : System
        What may form.
    element_amounts : array (states, E)
        Amount of each element, and what each constraint holds, [mol].
    held : mapping of str to array (states,)
        The two held conditions by the names that `equilibria` takes, in SI.
    progress : callable, optional
        Called after each chunk.
    approach : mapping of str to array (states,), optional
        Approach temperatures of reactions of the system, [K].

    Returns
    -------
    Batch
        All states, in order.
    """
    states = len(element_amounts)
    done = []
    for start in range(0, states, CHUNK):
        part = slice(start, start + CHUNK)
        conditions = {name: values[part] for name, values in held.items()}
        changes = {name: values[part] for name, values in (approach or {}).items()}
        pair: dict[str, Any] = {**conditions, "approach": changes}
        done.append(equilibria(system, element_amounts=element_amounts[part], **pair))
        if progress is not None:
            progress(min(start + CHUNK, states), states)
    return _joined(done)


def _joined(parts: Sequence[Batch]) -> Batch:
    """Put the states of several batches of one system behind each other."""
    first = parts[0]
    outcome = type(first.outcome)(*map(np.concatenate, zip(*(part.outcome for part in parts), strict=True)))
    offset = (
        None if first.offset is None else np.concatenate([part.offset for part in parts if part.offset is not None])
    )
    return Batch(first.system, outcome, offset)


def sweep(
    system: System,
    feed: Mapping[str, Measurable],
    *,
    vary: Mapping[str, Sequence[Measurable] | Floats],
    temperature: Measurable | None = None,
    pressure: Measurable | None = None,
    volume: Measurable | None = None,
    enthalpy: Measurable | None = None,
    internal_energy: Measurable | None = None,
    entropy: Measurable | None = None,
    progress: Progress | None = None,
) -> xarray.Dataset:
    """Solve states over one or more varied inputs.

    Parameters
    ----------
    system : System
        What may form.
    feed : mapping of str to quantity
        Amount of each feed species, [mol].
    vary : mapping of str to sequence of quantities
        Values of each varied input: a held condition by its name, or ``"feed:NAME"``, the amount of a feed species
        [mol].
    temperature, pressure, volume, enthalpy, internal_energy, entropy : quantity
        Held conditions that are not varied, [K], [Pa], [m3], [J], [J], [J/K]; with the varied ones two, as in
        `equilibrium`.
    progress : callable, optional
        Called with the states done and all states.

    Returns
    -------
    xarray.Dataset
        One dimension an input, named as in ``vary``, and ``species``; every variable carries its units. States
        that could not be certified hold NaN and say why in ``reason``.

    Raises
    ------
    InputError
        Nothing is varied, an input is not known or is given twice, the conditions are not a pair that can be held, or
        a value does not suit.
    """
    if not vary:
        raise InputError("vary is empty; name at least one input, for example vary={'temperature': [1000.0, 1100.0]}")
    fixed = {
        "temperature": temperature,
        "pressure": pressure,
        "volume": volume,
        "enthalpy": enthalpy,
        "internal_energy": internal_energy,
        "entropy": entropy,
    }
    axes = _axes(vary, feed, fixed)
    columns = dict(zip(vary, grid([axis.values for axis in axes]), strict=True))
    states = len(next(iter(columns.values())))
    held = {name: columns[name] for name in fixed if name in columns}
    for name, value in fixed.items():
        if value is not None:
            held[name] = np.full(states, quantity(value, UNIT[name], name))
    which_pair({name: held.get(name) for name in fixed})
    elements = np.zeros((states, len(system.elements)))
    amounts: dict[str, Floats] = {name: np.full(states, quantity(n, "mol", name)) for name, n in feed.items()}
    amounts |= {name.removeprefix(_FEED): values for name, values in columns.items() if name.startswith(_FEED)}
    for name, amount in amounts.items():
        elements += np.outer(amount, system.feed({name: 1.0}))
    return labelled(system, solve_in_chunks(system, elements, held, progress), axes, "mol")


def _axes(
    vary: Mapping[str, Sequence[Measurable] | Floats],
    feed: Mapping[str, Measurable],
    fixed: Mapping[str, Measurable | None],
) -> list[Axis]:
    """Read the varied inputs."""
    units = {**UNIT, **{f"{_FEED}{name}": "mol" for name in feed}}
    axes = []
    for name, values in vary.items():
        if name not in units and not name.startswith(_FEED):
            raise InputError(
                f"vary: {name!r} is not an input{nearest(name, units) or ';'} known are {', '.join(units)}"
            )
        if fixed.get(name) is not None:
            raise InputError(f"{name} is held and varied at once; give it once")
        unit = units.get(name, "mol")
        read = np.array([quantity(_plain(value), unit, f"vary[{name!r}]") for value in values])
        if read.size == 0:
            raise InputError(f"vary[{name!r}] holds no values")
        axes.append(Axis(name, read, unit))
    return axes


def _plain(value: Measurable) -> Measurable:
    """Turn a value of an array into a Python number."""
    return value.item() if isinstance(value, np.generic) else value
