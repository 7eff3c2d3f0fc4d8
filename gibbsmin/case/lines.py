"""Where each key of a TOML text stands.

The standard library reads TOML but keeps no places. This scanner walks a text that has already been read without
error, so it needs to know only where keys and values begin and end, not what they mean. Grammar: TOML 1.0.0
(https://toml.io/en/v1.0.0).
"""

from __future__ import annotations

import re
from bisect import bisect_left
from typing import Final, TypeAlias

Key: TypeAlias = tuple[str | int, ...]
"""Path to a value: table names, keys, and positions in arrays, counted from 0."""

_BLANK = re.compile(r"(?:[ \t\r\n]|#[^\n]*)*")
_BARE = re.compile(r"[A-Za-z0-9_-]+")
_STRING: Final = re.compile(
    r'"""(?:[^\\]|\\.)*?"{3,5}(?!")' + r"|'''.*?'{3,5}(?!')" + r'|"(?:[^"\\\n]|\\.)*"' + r"|'[^'\n]*'", re.DOTALL
)
_SCALAR = re.compile(r"[^,\]}#\n]+")
_ESCAPE = re.compile(r'\\(?:u([0-9A-Fa-f]{4})|U([0-9A-Fa-f]{8})|(["\\bfnrt]))')
_DEEPEST: Final = 32
_SHORT: Final = {"b": "\b", "f": "\f", "n": "\n", "r": "\r", "t": "\t", '"': '"', "\\": "\\"}


def key_lines(text: str) -> dict[Key, int]:
    r"""Find the line of every table, key and array element.

    Parameters
    ----------
    text : str
        A valid TOML document.

    Returns
    -------
    dict of tuple to int
        Line of each path, counted from 1; for a table its header, or where its first key stands.

    Raises
    ------
    RecursionError
        Keys are nested deeper than any case needs.

    Examples
    --------
    >>> key_lines("[held]\ntemperature = 300.0")
    {('held',): 1, ('held', 'temperature'): 2}
    """
    return _Scanner(text).scan()


class _Scanner:
    def __init__(self, text: str) -> None:
        self.text, self.place = text, 0
        self.lines: dict[Key, int] = {}
        self.breaks = [match.start() for match in re.finditer("\n", text)]
        self.counts: dict[Key, int] = {}  # tables seen so far of each array of tables

    def scan(self) -> dict[Key, int]:
        table: Key = ()
        self._skip()
        while self.place < len(self.text):
            if self._peek("[["):
                table = self._header(double=True)
            elif self._peek("["):
                table = self._header(double=False)
            else:
                self._pair(table)
            self._skip()
        return self.lines

    def _peek(self, token: str) -> bool:
        return self.text.startswith(token, self.place)

    def _skip(self) -> None:
        """Go past blanks, line ends and comments."""
        match = _BLANK.match(self.text, self.place)
        self.place = match.end() if match else self.place

    def _mark(self, key: Key) -> None:
        """Note the line of ``key``, and of the tables that it implies, unless known."""
        if len(key) > _DEEPEST:
            raise RecursionError
        line = bisect_left(self.breaks, self.place) + 1
        for length in range(1, len(key) + 1):
            self.lines.setdefault(key[:length], line)

    def _header(self, double: bool) -> Key:
        """Read ``[a.b]`` or ``[[a.b]]``; a part that is an array of tables means its last table."""
        start = self.place
        self.place += 2 if double else 1
        parts = self._key()
        end, self.place = self.place + (2 if double else 1), start
        path: Key = ()
        for part in parts[:-1]:
            path = self._last((*path, part))
        path = (*path, parts[-1])
        if double:
            self.counts[path] = self.counts.get(path, 0) + 1
        path = self._last(path)
        self._mark(path)
        self.place = end
        return path

    def _last(self, path: Key) -> Key:
        return (*path, self.counts[path] - 1) if path in self.counts else path

    def _key(self) -> tuple[str, ...]:
        """Read a dotted key and go past the blanks after it."""
        parts: list[str] = []
        while True:
            self._skip()
            quoted = _STRING.match(self.text, self.place)
            match = quoted or _BARE.match(self.text, self.place)
            if match is None:
                raise ValueError(f"no key at character {self.place}")
            parts.append(_unquote(match[0]) if quoted else match[0])
            self.place = match.end()
            self._skip()
            if not self._peek("."):
                return tuple(parts)
            self.place += 1

    def _pair(self, table: Key) -> None:
        """Read ``key = value``."""
        start = self.place
        key = (*table, *self._key())
        end, self.place = self.place + 1, start
        self._mark(key)
        self.place = end
        self._value(key)

    def _value(self, key: Key) -> None:
        self._skip()
        if self._peek("[") or self._peek("{"):
            self._collection(key, "]" if self._peek("[") else "}")
            return
        match = _STRING.match(self.text, self.place) or _SCALAR.match(self.text, self.place)
        self.place = match.end() if match else self.place + 1

    def _collection(self, key: Key, closing: str) -> None:
        """Read an array or an inline table."""
        self.place += 1
        count = 0
        self._skip()
        while not self._peek(closing):
            if closing == "]":
                self._mark((*key, count))
                self._value((*key, count))
            else:
                self._pair(key)
            count += 1
            self._skip()
            if self._peek(","):
                self.place += 1
                self._skip()
        self.place += 1


def _unquote(text: str) -> str:
    """Take the quotes and escapes off a quoted key."""
    if text.startswith("'"):
        return text[1:-1]
    return _ESCAPE.sub(lambda match: _SHORT[match[3]] if match[3] else chr(int(match[1] or match[2], 16)), text[1:-1])
