"""``gibbsmin schema``: the JSON Schema of case files, for editors."""

from __future__ import annotations

import typer

from gibbsmin.cli.messages import guarded


@guarded
def schema() -> None:
    """Print the JSON Schema of case files, for editors that complete and check them."""
    import json

    from gibbsmin.case.json_schema import case_schema

    typer.echo(json.dumps(case_schema(), indent=2, ensure_ascii=False))
