"""A written result folder, read for drawing: no more states and no more of result.json than a figure needs."""

from __future__ import annotations

import json
import re
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING, Any, Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.errors import InputError
from gibbsmin.report.figures.names import held_title, input_unit, input_words

if TYPE_CHECKING:
    import xarray

Floats = NDArray[np.float64]

LINE_POINTS: Final = 401
"""Most points of a line; a longer sweep is drawn by evenly chosen states."""

MAP_POINTS: Final = 161
"""Most points of a map in each direction."""

PANEL_POINTS: Final = 41
"""Most values of an input where three or more are varied."""

DESIGN_POINTS: Final = 512
"""Most points of a random design; the first ones, since these fill its ranges evenly by themselves."""

_CHUNK: Final = 1 << 18
_BETWEEN: Final = " \n\r\t,"
_STATES: Final = re.compile(r'"states"\s*:\s*\[\s*\{')
_NOT_DRAWN: Final = ("reason", "enthalpy", "entropy", "gibbs_energy", "element_residual", "gap", "worst_affinity")


@dataclass(frozen=True)
class Input:
    """A varied input: dotted ``name``, ``label`` and ``unit`` as people write them, ``values`` as typed, (n,).

    ``typed_unit`` is the unit as files have it.
    """

    name: str
    label: str
    unit: str
    values: Floats
    typed_unit: str


@dataclass(frozen=True)
class Source:
    """A result, as far as figures go.

    Attributes
    ----------
    head : mapping
        What result.json says before its states.
    state : mapping or None
        The only state, where nothing is varied.
    kind : str
        ``"grid"``, ``"in step"`` (all inputs move together), or another design, whose states are points.
    inputs : tuple of Input
        Of a grid, the values of each axis; else one value of each input a point.
    data : xarray.Dataset or None
        The states that are drawn; None where nothing is varied.
    notes : tuple of str
        What the reader must know, such as that not every state is drawn.
    """

    head: Mapping[str, Any]
    state: Mapping[str, Any] | None
    kind: str
    inputs: tuple[Input, ...]
    data: xarray.Dataset | None
    notes: tuple[str, ...] = ()

    @property
    def case(self) -> Mapping[str, Any]:
        """The case as read."""
        found: Mapping[str, Any] = self.head.get("case") or {}
        return found

    @property
    def basis(self) -> str:
        """``"mol"`` or ``"mol/s"``."""
        return str(self.head.get("basis", "mol"))

    @property
    def is_train(self) -> bool:
        """Whether it is a train of stages."""
        return "order" in self.head

    @property
    def shape(self) -> tuple[int, ...]:
        """Numbers of points drawn: along each input of a grid, else in all."""
        if self.kind == "grid":
            return tuple(one.values.size for one in self.inputs)
        return (self.inputs[0].values.size,)

    @property
    def held(self) -> str:
        """What is held, for titles."""
        return held_title(self.case, [one.name for one in self.inputs])


def read_source(folder: Path) -> Source:
    """Read a result folder.

    Parameters
    ----------
    folder : Path

    Returns
    -------
    Source

    Raises
    ------
    InputError
        It is no result of gibbsmin, or its files cannot be read.
    """
    try:
        head, states = read_head(folder / "result.json")
    except FileNotFoundError:
        raise InputError(f"{folder} holds no result.json; name a folder that gibbsmin run has written") from None
    except OSError as error:
        raise InputError(f"cannot read {folder}: {error.strerror or error}") from error
    except ValueError:
        raise InputError(f"{folder}/result.json is not whole; run the case again") from None
    if "gibbsmin" not in head and "schema" not in head:
        raise InputError(f"{folder}/result.json is no result of gibbsmin")
    file = folder / "result.nc"
    if file.exists():
        try:
            return _sweep(head, file)
        except (OSError, KeyError, ValueError) as error:
            raise InputError(f"{file} cannot be read ({error}); run the case again") from error
    if not states:
        raise InputError(f"{folder} holds neither states nor result.nc; run the case again")
    if len(states) > 1:
        raise InputError(f"{folder} holds {len(states)} states but no result.nc; run the case again")
    return Source(head, states[0], "grid", (), None)


def read_head(file: Path) -> tuple[dict[str, Any], list[Any]]:
    """Read result.json up to its states, and these only where there are few.

    Parameters
    ----------
    file : Path

    Returns
    -------
    head : dict
    states : list
        Empty where a data set lies beside the file.

    Raises
    ------
    OSError, ValueError
        It cannot be read, or is not JSON.
    """
    if not file.with_name("result.nc").exists():
        data = json.loads(file.read_text(encoding="utf-8"))
        if not isinstance(data, dict):
            raise ValueError("not an object")
        return data, list(data.get("states", []))
    decoder, head = json.JSONDecoder(), dict[str, Any]()
    with file.open(encoding="utf-8") as text:
        rest = text.read(_CHUNK).lstrip()
        if not rest.startswith("{"):
            raise ValueError("not an object")
        rest = rest[1:]
        while True:
            rest = rest.lstrip(_BETWEEN)
            if rest.startswith("}") or _STATES.match(rest):
                return head, []
            try:
                key, at = decoder.raw_decode(rest)
                behind = rest[at:].lstrip(_BETWEEN).removeprefix(":").lstrip(_BETWEEN)
                value, at = decoder.raw_decode(behind)
                if not behind[at:]:
                    raise ValueError("a number may go on")
            except ValueError:
                more = text.read(_CHUNK)
                if not more:
                    raise
                rest += more
                continue
            head[key], rest = value, behind[at:]


def _sweep(head: Mapping[str, Any], file: Path) -> Source:
    """Read the states of a sweep that are drawn."""
    import xarray

    case = head.get("case") or {}
    varied = [str(axis["vary"]) for axis in case.get("sweep", [])]
    kind = str((case.get("design") or {}).get("kind", "grid"))
    with xarray.open_dataset(file, engine="h5netcdf") as data:
        names = [str(dimension) for dimension in data["certified"].dims]
        random = kind not in ("grid", "in step")
        most = {1: LINE_POINTS, 2: MAP_POINTS}.get(len(names), PANEL_POINTS)
        steps = {name: 1 if random else stride(data.sizes[name], most) for name in names}
        last = DESIGN_POINTS if random else None
        wanted = [name for name in map(str, data.variables) if name not in _NOT_DRAWN]
        thinned = data[wanted].isel({name: slice(None, last, step) for name, step in steps.items()}).load()
        fewer = random and data.sizes[names[0]] > DESIGN_POINTS
    inputs = names if kind == "grid" else varied
    notes = tuple(
        f"Every {_ordinal(step)} {'state' if len(names) == 1 else f'value of {input_words(name)}'} is drawn."
        for name, step in steps.items()
        if step > 1
    )
    if fewer:
        notes = (f"The first {DESIGN_POINTS} states are drawn.",)
    read = tuple(
        Input(
            name,
            input_words(name),
            input_unit(name, str(thinned[name].attrs.get("units", "1"))),
            np.asarray(thinned[name].values, float),
            str(thinned[name].attrs.get("units", "1")),
        )
        for name in inputs
    )
    return Source(head, None, kind, read, thinned, notes)


def stride(count: int, most: int) -> int:
    """Step with which at most ``most`` of ``count`` points are left, the last one among them if that can be.

    Examples
    --------
    >>> stride(100, 401), stride(1001, 161), stride(1000, 161)
    (1, 8, 9)
    """
    if count <= most:
        return 1
    least = -(-(count - 1) // (most - 1))
    return next((step for step in range(least, 2 * least + 1) if (count - 1) % step == 0), least)


def _ordinal(number: int) -> str:
    ending = {1: "st", 2: "nd", 3: "rd"}.get(number % 10, "th") if number % 100 not in (11, 12, 13) else "th"
    return f"{number}{ending}"
