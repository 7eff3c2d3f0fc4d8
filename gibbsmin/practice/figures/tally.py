"""What all lists of key figures need: safe ratios, keys made of names of species, and leaving out what nobody has."""

from __future__ import annotations

import re
from collections.abc import Iterable

import numpy as np
from numpy.typing import NDArray

from gibbsmin.practice.figures.key_figure import KeyFigure

Floats = NDArray[np.float64]


def ratio(part: Floats, whole: Floats) -> Floats:
    """Divide two amounts.

    Parameters
    ----------
    part, whole : array (states,)
        In the same unit.

    Returns
    -------
    array (states,)
        ``part`` over ``whole``, [-]; nan where there is no whole.
    """
    whole = np.asarray(whole, float)
    found: Floats = np.divide(part, whole, out=np.full(whole.shape, np.nan), where=whole > 0.0)
    return found


def key(name: str) -> str:
    """Make a key of a file from the name of a species.

    Examples
    --------
    >>> key("K2SO4(s)"), key("Fe0.947O(s)"), key("CaCO3(s):calcite")
    ('k2so4_s', 'fe0_947o_s', 'caco3_s_calcite')
    """
    return re.sub(r"[^a-z0-9]+", "_", name.lower()).strip("_")


def known(figures: Iterable[KeyFigure]) -> list[KeyFigure]:
    """Leave out the figures that no state has."""
    return [figure for figure in figures if np.isfinite(figure.value).any()]


def mass_unit(is_flow: bool) -> tuple[str, str]:
    """Return the unit of a mass, and the unit to show it in: a flow is shown an hour."""
    return ("kg/s", "kg/h") if is_flow else ("kg", "")
