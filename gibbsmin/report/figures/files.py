"""Figures on disk: SVG, PNG and CSV of each, and a list of them; the folder is replaced whole or not at all."""

from __future__ import annotations

import csv
import io
import json
import re
import shutil
import tempfile
from collections.abc import Sequence
from math import isnan
from pathlib import Path
from typing import Any, Final, NamedTuple

import numpy as np

from gibbsmin.errors import InputError
from gibbsmin.report.figures.drawn import Drawn
from gibbsmin.report.figures.style import DPI
from gibbsmin.results.folder import FIGURES, exchange

INDEX: Final = "index.json"
"""Name of the list of figures in it."""

_LONGEST: Final = 60


class Made(NamedTuple):
    """A figure that was written: its ``name``, ``title``, ``alternative`` text, ``notes`` and ``files``."""

    name: str
    title: str
    alternative: str
    notes: tuple[str, ...]
    files: tuple[str, ...]


def file_name(text: str) -> str:
    """Make a name for files of any text.

    Examples
    --------
    >>> file_name("flue gas.co_dry"), file_name("C(s):graphite"), file_name("../x"), file_name("é")
    ('flue_gas_co_dry', 'C_s_graphite', 'x', 'figure')
    """
    return re.sub(r"[^A-Za-z0-9-]+", "_", text).strip("_")[:_LONGEST] or "figure"


def write_figures(drawn: Sequence[Drawn], folder: Path, remarks: Sequence[str] = ()) -> list[Made]:
    """Write figures into a result folder, in the place of those that are there.

    Parameters
    ----------
    drawn : sequence of Drawn
    folder : Path
        The result folder.
    remarks : sequence of str
        What is to be said of all of them.

    Returns
    -------
    list of Made

    Raises
    ------
    InputError
        The folder cannot be written.
    """
    target = folder.absolute() / FIGURES
    try:
        if target.is_symlink() or (target.exists() and not target.is_dir()):
            raise InputError(f"cannot write figures to {folder / FIGURES}: it is not a folder; move it away")
        work = Path(tempfile.mkdtemp(prefix=f".{folder.absolute().name}-", dir=folder.absolute().parent))
    except OSError as error:
        raise InputError(f"cannot write figures to {folder}: {error.strerror or error}") from error
    try:
        fresh = work / "new"
        fresh.mkdir()
        made = [_write(one, name, fresh) for one, name in zip(drawn, _names(drawn), strict=True)]
        listed = {"figures": [one._asdict() for one in made], "remarks": list(remarks)}
        text = json.dumps(listed, ensure_ascii=False, indent=1) + "\n"
        (fresh / INDEX).write_text(text, encoding="utf-8")
        exchange(fresh, target, work / "old")
    except OSError as error:
        raise InputError(f"cannot write figures to {folder}: {error.strerror or error}") from error
    finally:
        shutil.rmtree(work, ignore_errors=True)
    return made


def _names(drawn: Sequence[Drawn]) -> list[str]:
    """Give each figure a name that no other has, whatever the letters' case."""
    names: list[str] = []
    for one in drawn:
        name, count = file_name(one.name), 2
        while name.casefold() in {other.casefold() for other in names}:
            name, count = f"{file_name(one.name)}_{count}", count + 1
        names.append(name)
    return names


def _write(one: Drawn, name: str, folder: Path) -> Made:
    """Write the three files of a figure; no dates and no versions in them, so that they come out the same again."""
    one.figure.draw_without_rendering()
    one.figure.set_layout_engine("none")  # laid out once for both files
    told: dict[str, Any] = {"Title": one.title, "Description": one.alternative}
    one.figure.savefig(folder / f"{name}.svg", metadata={**told, "Date": None, "Creator": None})
    one.figure.savefig(folder / f"{name}.png", dpi=DPI, metadata={**told, "Software": None})
    (folder / f"{name}.csv").write_text(_table(one), encoding="utf-8", newline="")
    files = tuple(f"{name}.{ending}" for ending in ("svg", "png", "csv"))
    return Made(name, one.title, one.alternative, one.notes, files)


def _table(one: Drawn) -> str:
    """CSV of the data of a figure; full precision, empty where there is no number."""
    text = io.StringIO()
    writer = csv.writer(text)
    writer.writerow(one.data)
    columns = [values.tolist() if isinstance(values, np.ndarray) else list(values) for values in one.data.values()]
    for row in zip(*columns, strict=True):
        writer.writerow(["" if isinstance(cell, float) and isnan(cell) else cell for cell in row])
    return text.getvalue()
