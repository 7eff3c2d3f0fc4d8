"""States over one or more varied inputs: the grid, the solving in chunks, and the labelled result."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from typing import TYPE_CHECKING, Final

import numpy as np
from numpy.typing import ArrayLike, NDArray

from gibbsmin.errors import InputError, nearest
from gibbsmin.states.batch import Batch
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
    temperature: Floats,
    pressure: Floats,
    progress: Progress | None = None,
) -> Batch:
    """Solve many states, a chunk at a time.

    Parameters
    ----------
    system : System
        What may form.
    element_amounts : array (states, E)
        Amount of each element, [mol].
    temperature, pressure : array (states,)
        Held conditions, [K] and [Pa].
    progress : callable, optional
        Called after each chunk.

    Returns
    -------
    Batch
        All states, in order.
    """
    states = len(element_amounts)
    done = []
    for start in range(0, states, CHUNK):
        part = slice(start, start + CHUNK)
        done.append(
            equilibria(
                system, element_amounts=element_amounts[part], temperature=temperature[part], pressure=pressure[part]
            )
        )
        if progress is not None:
            progress(min(start + CHUNK, states), states)
    return _joined(done)


def _joined(parts: Sequence[Batch]) -> Batch:
    """Put the states of several batches of one system behind each other."""
    first = parts[0]
    outcome = type(first.outcome)(*map(np.concatenate, zip(*(part.outcome for part in parts), strict=True)))
    return Batch(first.system, outcome)


def sweep(
    system: System,
    feed: Mapping[str, Measurable],
    *,
    vary: Mapping[str, Sequence[Measurable] | Floats],
    temperature: Measurable | None = None,
    pressure: Measurable | None = None,
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
        Values of each varied input: ``"temperature"`` [K], ``"pressure"`` [Pa], or ``"feed:NAME"``, the amount of
        a feed species [mol].
    temperature, pressure : quantity
        Held conditions that are not varied, [K] and [Pa].
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
        Nothing is varied, an input is not known, is given twice or is missing, or a value does not suit.
    """
    if not vary:
        raise InputError("vary is empty; name at least one input, for example vary={'temperature': [1000.0, 1100.0]}")
    fixed = {"temperature": temperature, "pressure": pressure}
    units = {"temperature": "K", "pressure": "Pa", **{f"{_FEED}{name}": "mol" for name in feed}}
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
    columns = dict(zip(vary, grid([axis.values for axis in axes]), strict=True))
    states = len(next(iter(columns.values())))
    held = {}
    for name, value in fixed.items():
        if value is None and name not in columns:
            raise InputError(f"{name} is missing; give {name}= or vary it")
        held[name] = columns[name] if name in columns else np.full(states, quantity(value or 0.0, units[name], name))
    elements = np.zeros((states, len(system.elements)))
    for name in [
        *feed,
        *(key[len(_FEED) :] for key in vary if key.startswith(_FEED) and key[len(_FEED) :] not in feed),
    ]:
        amount = columns.get(f"{_FEED}{name}")
        if amount is None:
            amount = np.full(states, quantity(feed[name], "mol", name))
        elements += np.outer(amount, system.feed({name: 1.0}))
    batch = solve_in_chunks(system, elements, held["temperature"], held["pressure"], progress)
    return labelled(system, batch, axes, "mol")


def _plain(value: Measurable) -> Measurable:
    """Turn a value of an array into a Python number."""
    return value.item() if isinstance(value, np.generic) else value
