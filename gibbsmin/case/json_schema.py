"""The JSON Schema of case files, for editors."""

from __future__ import annotations

from typing import Any

from gibbsmin.case.schema import Case
from gibbsmin.case.train_schema import TrainCase


def case_schema() -> dict[str, Any]:
    """Return the JSON Schema of case files.

    Returns
    -------
    dict
        Draft 2020-12, with a description and examples for every key: of a single mixture, which holds its conditions,
        and of a train, which has stages.
    """
    single, train = (kind.model_json_schema(by_alias=True) for kind in (Case, TrainCase))
    return {
        "$schema": "https://json-schema.org/draft/2020-12/schema",
        **single,
        "title": "gibbsmin case file",
        "$defs": {**train["$defs"], **single["$defs"]},
        "properties": {**train["properties"], **single["properties"]},
        "required": [key for key in single["required"] if key in train["required"]],
        "oneOf": [{"required": ["held"]}, {"required": ["stage"]}],
    }
