"""The result folder: written whole under a temporary name beside its place, then renamed; or not at all."""

from __future__ import annotations

import json
import os
import shutil
import tempfile
from collections.abc import Mapping, Sequence
from pathlib import Path
from typing import TYPE_CHECKING, Any, Final, Protocol

from gibbsmin.errors import InputError
from gibbsmin.practice.safety.cautions import Caution
from gibbsmin.results.document import document
from gibbsmin.results.exports import PARQUET, WORKBOOK, export

if TYPE_CHECKING:
    import xarray

SCHEMA: Final = 1
_INDENTED: Final = 200  # states up to which result.json is indented
FILES: Final = ("result.json", "table.csv", "streams.csv", "steps.csv", "result.nc", WORKBOOK, PARQUET)
"""What a result folder may hold beside its figures; a folder with anything else is not replaced."""

FIGURES: Final = "figures"
"""Folder of the figures in a result folder."""

_DRAWN: Final = (".svg", ".png", ".csv", ".json")


def check_place(folder: Path) -> None:
    """Refuse a place that a result cannot be written to, before anything is solved.

    Parameters
    ----------
    folder : Path
        Where the result would go.

    Raises
    ------
    InputError
        It is a file, or holds something that is not a result of gibbsmin, or its parent cannot be written.
    """
    if folder.is_symlink() or (folder.exists() and not folder.is_dir()):
        raise InputError(f"cannot write results to {folder}: it is not a folder; choose another place with --out")
    if folder.is_dir() and any(folder.iterdir()) and not _is_result(folder):
        raise InputError(
            f"cannot write results to {folder}: it holds files that gibbsmin did not write;"
            " choose an empty or new folder with --out"
        )
    parent = folder.absolute().parent
    while not parent.exists():
        parent = parent.parent
    if not parent.is_dir() or not os.access(parent, os.W_OK | os.X_OK):
        raise InputError(f"cannot write results to {folder}: {parent} cannot be written to; choose another with --out")


class Written(Protocol):
    """A result, as far as its folder goes."""

    @property
    def inputs(self) -> Mapping[str, Any]:
        """Varied inputs."""

    @property
    def case_sha256(self) -> str:
        """Checksum of the case file."""

    def to_dict(self) -> dict[str, Any]:
        """Return what result.json holds, but for cautions and provenance."""

    def tables(self) -> dict[str, str]:
        """Write the spreadsheets, by the name of their file."""

    def dataset(self) -> xarray.Dataset:
        """Return the states with named axes and units."""


def write_folder(
    result: Written, judged: Sequence[Sequence[Caution]], folder: Path, also: Sequence[str] = ()
) -> dict[str, Any]:
    """Write a result folder.

    Parameters
    ----------
    result : Result or TrainResult
    judged : sequence of sequences of Caution
        The cautions of each state.
    folder : Path
        Where; made if needed, replaced only if it holds an earlier result.
    also : sequence of str
        Formats to write the spreadsheets in besides CSV; see `gibbsmin.results.exports`.

    Returns
    -------
    dict
        What result.json holds.

    Raises
    ------
    InputError
        The place is taken or cannot be written.
    """
    check_place(folder)
    data = document(result, judged)
    target = folder.absolute()
    try:
        target.parent.mkdir(parents=True, exist_ok=True)
        work = Path(tempfile.mkdtemp(prefix=f".{target.name}-", dir=target.parent))
    except OSError as error:
        raise InputError(f"cannot write results to {folder}: {error.strerror or error}") from error
    try:
        fresh = work / "new"
        fresh.mkdir()
        (fresh / "result.json").write_text(as_json(data), encoding="utf-8")
        for name, text in result.tables().items():
            (fresh / name).write_text(text, encoding="utf-8", newline="")
        if result.inputs:
            result.dataset().to_netcdf(fresh / "result.nc", engine="h5netcdf")
        export(fresh, also, data)
        exchange(fresh, target, work / "old")
    except OSError as error:
        raise InputError(f"cannot write results to {folder}: {error.strerror or error}") from error
    finally:
        shutil.rmtree(work, ignore_errors=True)
    return data


def as_json(data: Any) -> str:
    """JSON text with a line end, indented unless it is long; a NaN is an error, not a word that JSON does not know."""
    long = isinstance(data, dict) and len(data.get("states", ())) > _INDENTED
    layout: dict[str, Any] = {"separators": (",", ":")} if long else {"indent": 1}
    return json.dumps(data, ensure_ascii=False, allow_nan=False, **layout) + "\n"


def exchange(fresh: Path, target: Path, old: Path) -> None:
    """Put ``fresh`` in the place of ``target``; bring the old one back if that fails."""
    if not target.exists():
        fresh.rename(target)
        return
    target.rename(old)
    try:
        fresh.rename(target)
    except OSError:
        old.rename(target)
        raise


def _is_own(path: Path) -> bool:
    """Tell a file that a result may have, and a folder that holds figures only."""
    if path.name == FIGURES and path.is_dir() and not path.is_symlink():
        return all(one.is_file() and one.suffix in _DRAWN for one in path.iterdir())
    return path.name in FILES and path.is_file()


def _is_result(folder: Path) -> bool:
    """Tell an earlier result by its files and by what its result.json says of itself."""
    if not all(_is_own(path) for path in folder.iterdir()):
        return False
    try:
        data = json.loads((folder / "result.json").read_text(encoding="utf-8"))
    except (OSError, ValueError):
        return False
    return isinstance(data, dict) and "gibbsmin" in data and data.get("schema") == SCHEMA
