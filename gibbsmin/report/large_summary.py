"""What ``gibbsmin run`` prints of a large study: its size, what its numbers lie between, what failed, its cautions."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path
from typing import Any, Final

from gibbsmin.report.numbers import figures
from gibbsmin.report.table import certificate, heading
from gibbsmin.report.words import labelled, shortened

_PROOF: Final = ("element_residual", "gap", "worst_affinity", "held_residual")
_FAILED: Final = 3


def large_summary(document: Mapping[str, Any], folder: Path) -> list[str]:
    """Lines for the terminal.

    Parameters
    ----------
    document : mapping
        What result.json holds.
    folder : Path
        Where the result was written.

    Returns
    -------
    list of str
        None longer than 80 columns, but for the name of the folder.
    """
    ranges = document["ranges"]
    shape = " x ".join(f"{name} ({size})" for name, size in document["shape"].items())
    lines = [*heading(document["title"]), *labelled("states", f"{document['count']:,}: {shape}"), ""]
    lines.append(f"{'':<44}{'lowest':>14}{'highest':>14}")
    for name, one in ranges.items():
        if name not in _PROOF:
            unit = "" if one["unit"] == "1" else one["unit"]
            cells = f"{figures(one['lowest']):>14}{figures(one['highest']):>14}"
            lines.append(f"  {shortened(name, 41):<42}{cells} {unit}".rstrip())
    lines.append("")
    failed = document["count"] - document["certified"]
    if failed:
        told = "; ".join(f"state {one['state']}: {one['reason']}" for one in document["failed"][:_FAILED])
        lines += labelled("certificate", f"{failed:,} of {document['count']:,} states NOT certified. {told}")
    else:
        worst = [ranges.get(name, {}).get("highest", 0.0) for name in _PROOF[:3]]
        lines += labelled("certificate", f"all {document['count']:,} {certificate(*worst)}")
    for caution in document["cautions"]:
        lines += labelled("caution" if caution != document["cautions"][-1] else "note", caution)
    return [*lines, f"{'written':<15}{folder}/"]
