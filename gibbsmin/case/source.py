"""A case file as text: opened with care, read as TOML, with the place of every key for messages."""

from __future__ import annotations

import hashlib
import re
import tomllib
from dataclasses import dataclass
from pathlib import Path
from typing import Any, Final

from gibbsmin.case.lines import Key, key_lines
from gibbsmin.errors import CaseError

MAX_BYTES: Final = 2**20
"""Largest case file that is read."""

_PLACE = re.compile(r"\s*\(at (?:line (\d+), column (\d+)|end of document)\)$")
_PLAIN: Final = (
    (re.compile(r"Cannot overwrite a value"), "this key was given before in the same table; give it once"),
    (re.compile(r"Cannot declare \((.*?),?\) twice"), "the table {} was opened before; put its keys in one place"),
    (re.compile(r"Cannot mutate immutable namespace .*"), "this table was closed with {{ }} and cannot be added to"),
    (re.compile(r"Duplicate inline table key '(.*)'"), "the key '{}' is given twice in these braces"),
    (re.compile(r"Invalid value|Invalid initial character.*"), "a value cannot be read here; texts stand in quotes"),
    (re.compile(r"Expected '=' after a key.*"), "expected 'key = value' on this line"),
    (re.compile(r"Expected newline or end of document.*"), "there is more on this line than one value"),
    (re.compile(r"Unclosed array"), "a list is not closed with ]"),
    (re.compile(r"Unclosed inline table"), "braces are not closed; a table in braces must stand on one line"),
    (re.compile(r"(?:Illegal character '\\n'|Unterminated string).*"), "a text is not closed with a quote"),
)


@dataclass(frozen=True)
class Source:
    """A case file that could be read as TOML.

    Attributes
    ----------
    path : Path
        The file.
    data : dict
        What it holds, not yet checked.
    sha256 : str
        Checksum of its bytes, hexadecimal.
    lines : dict
        Line of each key, counted from 1.
    """

    path: Path
    data: dict[str, Any]
    sha256: str
    lines: dict[Key, int]

    @property
    def folder(self) -> Path:
        """Folder of the file, without links and dots."""
        return self.path.parent.resolve()

    def error(self, message: str, key: Key = ()) -> CaseError:
        """Make the error for ``key``, with the line of the nearest table that stands in the file."""
        known = next((key[:length] for length in range(len(key), 0, -1) if key[:length] in self.lines), ())
        return CaseError(message, str(self.path), dotted(key), self.lines.get(known))


def dotted(key: Key) -> str:
    """Write a path as a reader of the file would: ``feeds.gas.flow``, ``sweep[2].from`` (counted from 1)."""
    text = ""
    for part in key:
        text += f"[{part + 1}]" if isinstance(part, int) else f".{part}" if text else part
    return text


def open_source(path: str | Path) -> Source:
    """Open a case file and read it as TOML.

    Parameters
    ----------
    path : str or Path
        The file; UTF-8, at most 1 MiB.

    Returns
    -------
    Source

    Raises
    ------
    CaseError
        The file is missing, is not a file, is too large, is not UTF-8 text, or is not TOML.
    """
    path = Path(path)
    raw = _bytes(path)
    try:
        text = raw.decode("utf-8-sig").replace("\r\n", "\n")
    except UnicodeDecodeError as error:
        line = raw.count(b"\n", 0, error.start) + 1
        raise CaseError("this is not UTF-8 text; save the file as UTF-8", str(path), line=line) from None
    try:
        data = tomllib.loads(text)
        lines = key_lines(text)
    except tomllib.TOMLDecodeError as error:
        raise _not_toml(str(error), text, path) from None
    except RecursionError:
        raise CaseError("lists or braces are nested too deeply for a case file", str(path)) from None
    except ValueError as error:  # a number of more digits than Python converts
        raise CaseError(f"a value cannot be read: {error}", str(path)) from None
    return Source(path, data, hashlib.sha256(raw).hexdigest(), lines)


def _bytes(path: Path) -> bytes:
    """Read the bytes of a regular file of bearable size."""
    file = str(path)
    try:
        if path.is_dir():
            raise CaseError("this is a folder; expected a case file", file)
        if not path.exists():
            raise CaseError("there is no such file", file)
        if not path.is_file():
            raise CaseError("this is not an ordinary file", file)
        with path.open("rb") as stream:
            raw = stream.read(MAX_BYTES + 1)
    except (OSError, ValueError) as error:
        if isinstance(error, CaseError):
            raise
        reason = getattr(error, "strerror", None) or str(error)
        raise CaseError(f"the file cannot be opened: {reason}", file) from None
    if len(raw) > MAX_BYTES:
        raise CaseError("the file is larger than 1 MiB; a case file holds a few pages at most", file)
    return raw


def _not_toml(message: str, text: str, path: Path) -> CaseError:
    """Say in plain words what is not TOML, with the line."""
    place = _PLACE.search(message)
    line = int(place[1]) if place and place[1] else text.rstrip().count("\n") + 1
    found = message[: place.start()] if place else message
    for pattern, plain in _PLAIN:
        match = pattern.match(found)
        if match:
            found = plain.format(*(group.replace("'", "").replace(", ", ".") for group in match.groups()))
            break
    shown = text.split("\n")[line - 1].strip()
    quoted = f": {shown[:60]}" if shown else ""
    return CaseError(f"not readable as TOML: {found}{quoted}", str(path), line=line)
