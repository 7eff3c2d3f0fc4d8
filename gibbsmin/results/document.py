"""The whole of a result as one JSON document (result.json)."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING, Any

from gibbsmin import __version__
from gibbsmin.practice.safety.cautions import Caution, sentences
from gibbsmin.results.provenance import provenance

if TYPE_CHECKING:
    from gibbsmin.results.folder import Written


def document(result: Written, judged: Sequence[Sequence[Caution]]) -> dict[str, Any]:
    """Put a result, its provenance and its cautions together.

    Parameters
    ----------
    result : Result or TrainResult
    judged : sequence of sequences of Caution
        The cautions of each state, from ``judge``.

    Returns
    -------
    dict
        JSON-safe, no NaN.
    """
    data = result.to_dict()
    data["gibbsmin"] = __version__
    data["provenance"] = provenance(result.case_sha256)
    for state, found in zip(data["states"], judged, strict=True):
        state["cautions"] = sentences(found)
    return data
