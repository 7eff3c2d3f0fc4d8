"""``gibbsmin begin``: a commented case file to start from."""

from __future__ import annotations

from enum import StrEnum
from importlib.resources import files
from pathlib import Path
from typing import Annotated

import typer

from gibbsmin.cli.messages import guarded, say
from gibbsmin.errors import InputError


class Kind(StrEnum):
    """Kinds of case there is a beginning for."""

    REFORMER = "reformer"
    FURNACE = "furnace"
    GASIFIER = "gasifier"
    SWEEP = "sweep"


@guarded
def begin(
    name: Annotated[str, typer.Argument(metavar="NAME", help="Name of the file, with or without .toml.")],
    kind: Annotated[Kind, typer.Argument(metavar="[KIND]", help="reformer, furnace, gasifier or sweep.")] = (
        Kind.REFORMER
    ),
) -> None:
    """Write a commented case file to start from. A file that exists is left alone."""
    path = Path(name if name.endswith(".toml") else name + ".toml")
    if path.name == ".toml":
        raise InputError("NAME is empty; give the name of the case file to write, for example my_case")
    text = files("gibbsmin.cli").joinpath("kinds", f"{kind.value}.toml").read_text(encoding="utf-8")
    try:
        with path.open("x", encoding="utf-8") as file:
            file.write(text)
    except FileExistsError:
        raise InputError(f"{path} exists and is left as it is; choose another name") from None
    except OSError as error:
        raise InputError(f"cannot write {path}: {error.strerror or error}") from error
    say(f"wrote {path}; edit it, then: gibbsmin run {path}")
