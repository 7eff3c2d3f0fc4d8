"""Every error that gibbsmin raises on purpose.

    GibbsminError
    ├── InputError            what was asked for is wrong; the text says what to change
    │   ├── UnitError         a quantity with the wrong dimension or an unreadable unit
    │   ├── FormulaError      a chemical formula that cannot be read
    │   ├── SpeciesError      an unknown, ambiguous or implausible species
    │   ├── FeedError         a feed that the system cannot hold
    │   └── CaseError         a case file: carries file, line and key
    └── NotCertified          a state that was found but not proved, or not found

A state of a batch that cannot be certified is not raised: it carries its reason as a value.
"""

from __future__ import annotations

import difflib
from collections.abc import Iterable


class GibbsminError(Exception):
    """Base of every error raised on purpose."""


class InputError(GibbsminError, ValueError):
    """What was asked for is wrong; the message says what would be right."""


class UnitError(InputError):
    """A quantity has the wrong dimension or a unit that cannot be read."""


class FormulaError(InputError):
    """A chemical formula cannot be read."""


class SpeciesError(InputError):
    """A species is unknown, ambiguous or has implausible data."""


class FeedError(InputError):
    """A feed holds what the system has no place for."""


class CaseError(InputError):
    """A case file is wrong.

    Parameters
    ----------
    message : str
        What was found and what would be right.
    file, key : str
        Where; empty when not known.
    line : int or None
        Line in the file, counted from 1.
    """

    def __init__(self, message: str, file: str = "", key: str = "", line: int | None = None) -> None:
        self.message, self.file, self.key, self.line = message, file, key, line
        super().__init__(message, file, key, line)

    def __str__(self) -> str:
        place = self.file + (f", line {self.line}" if self.line else "")
        parts = [part for part in (place, self.key) if part]
        return ": ".join([*parts, self.message])


class NotCertified(GibbsminError):
    """No state was found whose certificate holds.

    Parameters
    ----------
    reason : str
        What failed.
    remedy : str
        What to try.
    """

    def __init__(self, reason: str, remedy: str) -> None:
        self.reason, self.remedy = reason, remedy
        super().__init__(reason, remedy)

    def __str__(self) -> str:
        return f"{self.reason} {self.remedy}".strip()


def nearest(word: str, known: Iterable[str], count: int = 3) -> str:
    """Return '; did you mean ...?' with the known words nearest to ``word``, or an empty string."""
    names = list(known)
    folded = [name for name in names if name.casefold() == word.casefold()]
    found = [*folded, *(name for name in difflib.get_close_matches(word, names, count, 0.6) if name not in folded)][
        :count
    ]
    return f"; did you mean {' or '.join(repr(name) for name in found)}?" if found else ""
