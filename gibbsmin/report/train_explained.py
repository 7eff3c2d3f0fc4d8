"""What ``gibbsmin check`` prints of a train: its feeds, and its stages as a drawing."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from gibbsmin.report.table import heading


def train_explained(told: Mapping[str, Any]) -> list[str]:
    """Put a train's description in lines.

    Parameters
    ----------
    told : mapping
        What ``TrainStudy.describe`` returns.

    Returns
    -------
    list of str
        None longer than 80 columns.
    """
    lines = heading(told["title"])
    for stage in told["stages"]:
        lines.append(f"{', '.join([*stage['inlets'], *stage['recycled']])} -> {stage['name']}")
    return lines
