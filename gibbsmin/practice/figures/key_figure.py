"""A number that the trade reports, with what it is and where its rule comes from."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]


@dataclass(frozen=True)
class KeyFigure:
    """A number of a report, in every state.

    Attributes
    ----------
    name : str
        Key in files: lower case with underscores.
    label : str
        What people read, short: "CH4 slip, dry".
    value : array (states,)
        In ``unit``; nan where a state does not have it.
    unit : str
        Unit of the value, as files have it: SI, or ``"1"`` for a plain number.
    shown : str
        Unit to show it in: ``"%"``, ``"ppmv"``, ``"mg/Nm3"``, ``"degC"``; empty for ``unit`` itself.
    note : str
        Basis, source of the correlation, what was assumed: one short sentence or nothing.
    """

    name: str
    label: str
    value: Floats
    unit: str = "1"
    shown: str = ""
    note: str = ""
