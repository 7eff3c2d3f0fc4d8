"""What is varied, and how, in words."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from gibbsmin.report.words import labelled
from gibbsmin.studies.designs import RANDOM


def design_words(design: Mapping[str, Any]) -> str:
    """Say how the values of several inputs are put together.

    Parameters
    ----------
    design : mapping
        The table ``[design]``, as a case has it.

    Returns
    -------
    str
        Empty for a grid.

    Examples
    --------
    >>> design_words({"kind": "latin hypercube", "points": 1000, "seed": 1}), design_words({"kind": "in step"})
    ('latin hypercube, 1,000 points, seed 1', 'in step')
    """
    kind = str(design.get("kind", "grid"))
    if kind in RANDOM:
        return f"{kind}, {design['points']:,} points, seed {design['seed']}"
    return "" if kind == "grid" else kind


def listed(words: Sequence[str]) -> str:
    """List words as a sentence does.

    Examples
    --------
    >>> listed(["a"]), listed(["a", "b"]), listed(["a", "b", "c"])
    ('a', 'a and b', 'a, b and c')
    """
    return f"{', '.join(words[:-1])} and {words[-1]}" if len(words) > 1 else "".join(words)


def varied_lines(inputs: Mapping[str, str], design: Mapping[str, Any]) -> list[str]:
    """Say what is varied along a sweep, and how.

    Parameters
    ----------
    inputs : mapping of str to str
        Dotted names, and the letter that stands for each in the table; empty where the table names it.
    design : mapping
        The table ``[design]``.

    Returns
    -------
    list of str
    """
    how = design_words(design)
    told = listed([f"{letter}\xa0=\xa0{name}" if letter else name for name, letter in inputs.items()])
    return labelled("varied", told + (f"; {how}" if how else ""))
