"""Spreadsheets of a result in other formats: an Excel workbook of all of them, and the states as Parquet.

Both are made from the CSV files, row after row, so that memory does not grow with them and no number differs.
"""

from __future__ import annotations

import csv
import importlib.util
import math
from collections.abc import Callable, Iterator, Mapping, Sequence
from pathlib import Path
from typing import Any, Final

from gibbsmin.errors import InputError

WORKBOOK: Final = "tables.xlsx"
PARQUET: Final = "table.parquet"

SHEET_ROWS: Final = 1_048_576
"""Rows that a sheet of Excel holds, the head among them (ECMA-376, as its makers state the limit)."""

_SHEETS: Final = {"table.csv": "states", "streams.csv": "streams", "steps.csv": "steps"}
_TEXT: Final = ("step", "takes", "gives", "what", "unit", "reason")
_BLOCK: Final = 1 << 22  # bytes of CSV that are turned into Parquet at once


def check_exports(formats: Sequence[str], states: int) -> None:
    """Refuse formats that cannot be written, before anything is solved.

    Parameters
    ----------
    formats : sequence of str
        Of `FORMATS`.
    states : int
        Rows to come.

    Raises
    ------
    InputError
        There is no such format, its library is not installed, or the states do not fit.
    """
    for name in formats:
        if name not in FORMATS:
            raise InputError(f"there is no format {name!r}; there are {', '.join(FORMATS)}")
        if importlib.util.find_spec(_LIBRARY[name]) is None:
            raise InputError(f"{name} files need an extra: pip install 'gibbsmin[{name}]'")
        if name == "excel" and states >= SHEET_ROWS:
            raise InputError(f"{states:,} states do not fit in a sheet of Excel, which has {SHEET_ROWS:,} rows")


def export(folder: Path, formats: Sequence[str], about: Mapping[str, Any]) -> None:
    """Write the spreadsheets of a result folder in other formats.

    Parameters
    ----------
    folder : Path
        Holds the CSV files.
    formats : sequence of str
        Of `FORMATS`.
    about : mapping
        What result.json holds.

    Raises
    ------
    OSError
        The folder cannot be written.
    """
    for name in dict.fromkeys(formats):
        FORMATS[name](folder, about)


def _workbook(folder: Path, about: Mapping[str, Any]) -> None:
    """Write a workbook: what the result is, then a sheet for each CSV file."""
    import xlsxwriter
    from xlsxwriter.exceptions import FileCreateError

    try:
        with xlsxwriter.Workbook(folder / WORKBOOK, {"constant_memory": True}) as book:
            book.set_properties({"title": str(about["title"]), "comments": f"gibbsmin {about['gibbsmin']}"})
            bold = book.add_format({"bold": True, "text_wrap": True, "valign": "top"})
            sheet = book.add_worksheet("about")
            sheet.set_column(0, 0, 24)
            sheet.set_column(1, 1, 100)
            for row, (what, told) in enumerate(_about(about)):
                sheet.write_string(row, 0, what, bold)
                sheet.write_string(row, 1, told)
            for file, title in _SHEETS.items():
                if (folder / file).is_file():
                    _sheets(book, title, folder / file, bold)
    except FileCreateError as error:
        raise OSError(str(error)) from error


def _about(about: Mapping[str, Any]) -> Iterator[tuple[str, str]]:
    """Say what the workbook holds, and what to know of it."""
    told = about.get("provenance", {})
    yield "case", str(about["title"])
    yield "gibbsmin", str(about["gibbsmin"])
    yield "species data", str(told.get("data_version", ""))
    yield "checksum of the case", str(told.get("case_sha256", ""))
    yield "made", str(told.get("created", ""))
    states = about["states"]
    count = about.get("count", len(states))
    good = about.get("certified", sum(one["certificate"]["ok"] for one in states))
    yield "states certified", f"{good} of {count}; rows of the others are empty and give the reason"
    cautions = [*about.get("cautions", ()), *(line for one in states for line in one.get("cautions", ()))]
    for line in dict.fromkeys(map(str, cautions)):
        yield "caution", line


def _sheets(book: Any, title: str, file: Path, bold: Any) -> None:
    """Write a CSV file as a sheet, with the head fixed; on further sheets where it is too long for one."""
    with file.open(encoding="utf-8", newline="") as text:
        rows = csv.reader(text)
        head = next(rows)
        sheet, at, number = None, SHEET_ROWS, 0
        for row in rows:
            if sheet is None or at == SHEET_ROWS:
                number += 1
                sheet, at = book.add_worksheet(title if number == 1 else f"{title} {number}"), 1
                sheet.freeze_panes(1, 0)
                sheet.set_column(0, len(head) - 1, 14)
                sheet.set_row(0, 45)
                for column, name in enumerate(head):
                    sheet.write_string(0, column, name, bold)
            for column, cell in enumerate(row):
                if not cell:
                    continue
                number_in = _number(cell) if head[column] not in _TEXT else None
                if number_in is None:
                    sheet.write_string(at, column, cell)
                else:
                    sheet.write_number(at, column, number_in)
            at += 1


def _number(cell: str) -> float | None:
    """Read a number; None where the cell is a word."""
    try:
        found = float(cell)
    except ValueError:
        return None
    return found if math.isfinite(found) else None


def _parquet(folder: Path, about: Mapping[str, Any]) -> None:
    """Write the states as Parquet: numbers as such, units in the names of the columns as in the CSV file."""
    import pyarrow
    from pyarrow import csv as arrow_csv
    from pyarrow import parquet

    source = folder / "table.csv"
    with source.open(encoding="utf-8", newline="") as text:
        head = next(csv.reader(text))
    types = {name: pyarrow.string() if name in _TEXT else pyarrow.float64() for name in head}
    with (
        arrow_csv.open_csv(
            source,
            read_options=arrow_csv.ReadOptions(block_size=_BLOCK, use_threads=False),
            convert_options=arrow_csv.ConvertOptions(column_types=types, null_values=[""], strings_can_be_null=True),
        ) as blocks,
        parquet.ParquetWriter(
            folder / PARQUET, blocks.schema.with_metadata({"title": str(about["title"])}), compression="zstd"
        ) as writer,
    ):
        for block in blocks:
            writer.write_batch(block)


FORMATS: Final[dict[str, Callable[[Path, Mapping[str, Any]], None]]] = {"excel": _workbook, "parquet": _parquet}
"""What the spreadsheets can be written as besides CSV, by name."""

_LIBRARY: Final = {"excel": "xlsxwriter", "parquet": "pyarrow"}
