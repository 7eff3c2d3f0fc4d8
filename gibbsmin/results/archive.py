"""The states of a large study on disk: kept part by part, so that an interrupted run goes on, then put together.

While a study runs its parts lie in a folder beside the one to come, each written under a temporary name and renamed, so
that a part is there whole or not at all. `assemble` reads one after the other into NetCDF and CSV: memory does not grow
with the number of states.
"""

from __future__ import annotations

import json
import os
import shutil
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any, Final

import numpy as np
from numpy.typing import NDArray

from gibbsmin.errors import InputError
from gibbsmin.results.exports import export
from gibbsmin.results.folder import as_json, exchange
from gibbsmin.results.pieces import Layout, Variable, csv_head

Floats = NDArray[np.float64]

PLAN: Final = "plan.json"
FAILED_NAMED: Final = 100
"""States without a certificate that result.json names; the data set has all."""


def place_of(parts: Path, number: int) -> Path:
    """Place of a part in the folder of parts."""
    return parts / f"part-{number:06d}.npz"


def put(parts: Path, number: int, piece: Mapping[str, Any]) -> None:
    """Keep a part: whole under a temporary name, then renamed.

    Parameters
    ----------
    parts : Path
        The folder of parts.
    number : int
        Which part.
    piece : mapping of str to array

    Raises
    ------
    InputError
        The disk is full, or the folder is gone.
    """
    place = place_of(parts, number)
    rough = place.with_suffix(f".{os.getpid()}.tmp")
    try:
        with rough.open("wb") as file:
            arrays: dict[str, Any] = {name: np.asarray(values) for name, values in piece.items()}
            np.savez(file, **arrays)
        rough.replace(place)
    except OSError as error:
        rough.unlink(missing_ok=True)
        raise InputError(f"cannot write results to {parts}: {error.strerror or error}") from error


@dataclass(frozen=True)
class Plan:
    """What a large study is, and how it is cut.

    Attributes
    ----------
    title : str
    case : dict
        The case as read.
    fingerprint : str
        Of case, data and version: parts of another study are not mixed with these.
    basis : str
    axes : tuple of (str, str, array)
        Name, unit and values of each dimension; one, ``point``, where inputs do not form a grid.
    inputs : tuple of (str, str)
        Name and unit of each varied input.
    states : int
    cuts : tuple of int
        Where the parts begin, and the end of the last.
    layout : Layout
    provenance : dict
    """

    title: str
    case: dict[str, Any]
    fingerprint: str
    basis: str
    axes: tuple[tuple[str, str, Floats], ...]
    inputs: tuple[tuple[str, str], ...]
    states: int
    cuts: tuple[int, ...]
    layout: Layout
    provenance: dict[str, Any]

    @property
    def shape(self) -> tuple[int, ...]:
        """Sizes of the dimensions."""
        return tuple(len(values) for _, _, values in self.axes)

    @property
    def windows(self) -> list[tuple[int, int]]:
        """First and last state of each part."""
        return list(zip(self.cuts[:-1], self.cuts[1:], strict=True))


class Archive:
    """The parts of a study that runs.

    Parameters
    ----------
    folder : Path
        Where the result will be.
    plan : Plan
    resume : bool
        Whether parts of an interrupted run of the same study are kept; others are thrown away.

    Raises
    ------
    InputError
        The place cannot be written, or parts of another study are there and are to be resumed.
    """

    def __init__(self, folder: Path, plan: Plan, resume: bool) -> None:
        self.folder, self.plan = folder.absolute(), plan
        self.parts = self.folder.parent / f".{self.folder.name}-parts"
        try:
            if self.parts.exists():
                if resume and self._fingerprint() != plan.fingerprint:
                    raise InputError(
                        f"{self.parts} holds parts of another study, or of another version of this case; run it again "
                        "without --resume"
                    )
                if not resume:
                    shutil.rmtree(self.parts)
            self.parts.mkdir(parents=True, exist_ok=True)
            _write(self.parts / PLAN, json.dumps({"fingerprint": plan.fingerprint}).encode())
        except OSError as error:
            raise InputError(f"cannot write results to {folder}: {error.strerror or error}") from error

    def _fingerprint(self) -> str:
        """Read that of the parts that are there; empty where it cannot be read."""
        try:
            return str(json.loads((self.parts / PLAN).read_text(encoding="utf-8"))["fingerprint"])
        except (OSError, ValueError, KeyError):
            return ""

    def _place(self, number: int) -> Path:
        return place_of(self.parts, number)

    def pending(self) -> list[int]:
        """Numbers of the parts that are not there."""
        return [number for number in range(len(self.plan.windows)) if not self._place(number).is_file()]

    def pieces(self) -> Iterator[tuple[tuple[int, int], dict[str, Any]]]:
        """Read the parts, one after the other, with their windows."""
        for number, window in enumerate(self.plan.windows):
            with np.load(self._place(number), allow_pickle=False) as data:
                yield window, {name: data[name] for name in data.files}

    def assemble(self, cautions: Sequence[str], also: Sequence[str] = ()) -> dict[str, Any]:
        """Put all parts together into the result folder, and throw them away.

        Parameters
        ----------
        cautions : sequence of str
            Of states that were looked at.
        also : sequence of str
            Formats to write the spreadsheets in besides CSV.

        Returns
        -------
        dict
            What result.json holds.

        Raises
        ------
        InputError
            The folder cannot be written.
        """
        fresh = self.parts / "new"
        try:
            shutil.rmtree(fresh, ignore_errors=True)
            fresh.mkdir()
            document = {**self._document(fresh), "cautions": list(cautions)}
            (fresh / "result.json").write_text(as_json(document), encoding="utf-8")
            export(fresh, also, document)
            exchange(fresh, self.folder, self.parts / "old")
            shutil.rmtree(self.parts, ignore_errors=True)
        except OSError as error:
            raise InputError(f"cannot write results to {self.folder}: {error.strerror or error}") from error
        return document

    def _document(self, fresh: Path) -> dict[str, Any]:
        """Write NetCDF and CSV; return what result.json says of them."""
        import h5netcdf

        plan, layout = self.plan, self.plan.layout
        low = np.full(len(layout.variables), np.inf)
        high = -low
        certified, failed = 0, list[dict[str, Any]]()
        with (
            h5netcdf.File(fresh / "result.nc", "w") as file,
            (fresh / "table.csv").open("w", encoding="utf-8", newline="") as table,
        ):
            _prepare(file, plan)
            table.write(csv_head(plan.inputs, layout, plan.basis))
            for (start, stop), piece in self.pieces():
                _store(file, plan, start, stop, piece)
                table.write(piece["csv"].tobytes().decode("utf-8"))
                good = piece["certified"]
                certified += int(good.sum())
                failed += [
                    {"state": start + int(state) + 1, "reason": str(piece["reasons"][state])}
                    for state in np.flatnonzero(~good)[: FAILED_NAMED - len(failed)]
                ]
                if good.any():
                    low = np.fmin(low, np.nanmin(np.where(good[:, None], piece["numbers"], np.inf), axis=0))
                    high = np.fmax(high, np.nanmax(np.where(good[:, None], piece["numbers"], -np.inf), axis=0))
        ranges = {
            one.name: {"unit": one.unit, "lowest": float(a), "highest": float(b)}
            for one, a, b in zip(layout.variables, low, high, strict=True)
            if np.isfinite(a) and np.isfinite(b)
        }
        return {
            "schema": 1,
            "title": plan.title,
            "basis": plan.basis,
            "case": plan.case,
            **plan.provenance,
            "states_in": "result.nc",
            "states": [],
            "count": plan.states,
            "certified": certified,
            "failed": failed,
            "shape": dict(zip((name for name, _, _ in plan.axes), plan.shape, strict=True)),
            "ranges": ranges,
            "left_out": {"species": list(layout.left_out)},
        }


def _prepare(file: Any, plan: Plan) -> None:
    """Make dimensions, coordinates and empty variables."""
    import h5py

    layout = plan.layout
    file.attrs["title"], file.attrs["basis"] = plan.title, plan.basis
    file.attrs["case_sha256"] = plan.provenance.get("provenance", {}).get("case_sha256", "")
    file.dimensions = {
        **dict(zip((n for n, _, _ in plan.axes), plan.shape, strict=True)),
        "species": len(layout.species),
    }
    dims = tuple(name for name, _, _ in plan.axes)
    for name, unit, values in plan.axes:
        coordinate = file.create_variable(name, (name,), float, data=values)
        coordinate.attrs["units"] = unit
    text = h5py.string_dtype("utf-8")
    file.create_variable("species", ("species",), text, data=np.array(layout.species, dtype=object))
    _, block = slab(plan.shape, plan.cuts[0], plan.cuts[1])
    chunk = (*[1] * (len(dims) - len(block)), *block)  # a part is a chunk, or nearly so: none is pressed twice
    squeeze: dict[str, Any] = {"compression": "gzip", "compression_opts": 1, "shuffle": True, "chunks": chunk}
    empty = np.nan
    for one in layout.variables:
        if one.name in dims:
            continue
        variable = file.create_variable(_safe(one), dims, float, fillvalue=empty, **squeeze)
        variable.attrs["units"], variable.attrs["long_name"] = one.unit, one.meaning
        if one.shown:
            variable.attrs["shown"] = one.shown
    if dims == ("point",):
        for name, unit in plan.inputs:
            file.create_variable(name, dims, float, fillvalue=empty, **squeeze).attrs["units"] = unit
    by_species = {**squeeze, "chunks": (*chunk, 1)}
    amount = file.create_variable("amount", (*dims, "species"), float, fillvalue=empty, **by_species)
    amount.attrs["units"], amount.attrs["long_name"] = plan.basis, "amount of each species"
    gas = file.create_variable("gas", dims, float, fillvalue=empty, **squeeze)
    gas.attrs["units"], gas.attrs["long_name"] = plan.basis, "amount of all gas"
    certified = file.create_variable("certified", dims, "i1", **squeeze)
    certified.attrs["long_name"] = "whether the certificate holds"


def _store(file: Any, plan: Plan, start: int, stop: int, piece: Mapping[str, Any]) -> None:
    """Write a part, which is a block of the grid, into its place."""
    dims = tuple(name for name, _, _ in plan.axes)
    place, block = slab(plan.shape, start, stop)
    for k, one in enumerate(plan.layout.variables):
        if one.name not in dims:
            file[_safe(one)][place] = piece["numbers"][:, k].reshape(block)
    if dims == ("point",):
        for k, (name, _) in enumerate(plan.inputs):
            file[name][place] = piece["inputs"][:, k].reshape(block)
    file["amount"][place] = piece["amounts"].reshape((*block, -1))
    file["gas"][place] = piece["gas"].reshape(block)
    file["certified"][place] = piece["certified"].astype("i1").reshape(block)


def _safe(variable: Variable) -> str:
    """Name of a variable in NetCDF, which takes no slash."""
    return variable.name.replace("/", " per ")


def cuts(shape: Sequence[int], largest: int) -> tuple[int, ...]:
    """Cut a grid into parts that are blocks of it.

    Parameters
    ----------
    shape : sequence of int
        Sizes of its dimensions; the last varies fastest.
    largest : int
        States of a part at most.

    Returns
    -------
    tuple of int
        Where the parts begin, and the end of the last.
    """
    inner = 1
    axis = len(shape)
    while axis > 0 and inner * shape[axis - 1] <= largest:
        axis -= 1
        inner *= shape[axis]
    total = int(np.prod(shape, dtype=int))
    if axis == 0:
        return (0, total)
    step = max(largest // inner, 1)
    row = inner * shape[axis - 1]
    found = [base + first * inner for base in range(0, total, row) for first in range(0, shape[axis - 1], step)]
    return (*found, total)


def slab(shape: Sequence[int], start: int, stop: int) -> tuple[tuple[Any, ...], tuple[int, ...]]:
    """Place of a part in a grid, as indices and slices, and the shape of the block.

    Parameters
    ----------
    shape : sequence of int
        Sizes of the grid.
    start, stop : int
        First state of the part and the one after its last, as `cuts` gives them.

    Returns
    -------
    place : tuple of int or slice
    block : tuple of int
    """
    first, last = np.unravel_index(start, shape), np.unravel_index(stop - 1, shape)
    place: list[Any] = []
    block: list[int] = []
    free = False
    for a, b, size in zip(map(int, first), map(int, last), shape, strict=True):
        if not free and a == b:
            place.append(a)
            continue
        place.append(slice(0, size) if free else slice(a, b + 1))
        block.append(size if free else b + 1 - a)
        free = True
    return tuple(place), tuple(block)


def _write(path: Path, content: bytes) -> None:
    """Write a file under a temporary name, then rename it."""
    rough = path.with_suffix(".tmp")
    rough.write_bytes(content)
    rough.replace(path)
