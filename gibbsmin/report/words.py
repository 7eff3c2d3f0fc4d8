"""Words wrapped to the width of the terminal, with a label on the left."""

from __future__ import annotations

import re
import textwrap
from typing import Final

WIDTH: Final = 80
"""Columns that every table and sentence fits in."""

_INDENT: Final = 15
_NUMBER_AND_UNIT = re.compile(r"(?<=\d) (?=%|ppm|bar|deg|RT\b|K\b|kJ|J/|[kM]?W\b)")


def labelled(label: str, text: str) -> list[str]:
    """Lines of ``text`` hung behind a label.

    Examples
    --------
    >>> labelled("certificate", "certified")
    ['certificate    certified']
    """
    tied = _NUMBER_AND_UNIT.sub("\xa0", text)  # a number and its unit stay on one line
    lines = textwrap.wrap(
        tied,
        WIDTH,
        initial_indent=f"{label:<{_INDENT}}",
        subsequent_indent=" " * _INDENT,
        break_on_hyphens=False,
    )
    return [line.replace("\xa0", " ") for line in lines] or [label]


def shortened(text: str, width: int) -> str:
    """Cut ``text`` to ``width``, with two dots where something is missing."""
    return text if len(text) <= width else text[: width - 2] + ".."
