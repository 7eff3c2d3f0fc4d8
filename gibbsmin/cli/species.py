"""``gibbsmin species``: find species, show the data of one, check a file of own species."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from gibbsmin.cli.messages import WRONG, guarded, say
from gibbsmin.errors import SpeciesError

_MOST = 60


@guarded
def species(
    words: Annotated[
        list[str] | None, typer.Argument(metavar="[WORDS]...", help="A name, a formula, or words to search for.")
    ] = None,
    check: Annotated[
        Path | None,
        typer.Option(metavar="FILE", help="Check a file of your own species (TOML) or a Cantera file (YAML)."),
    ] = None,
) -> None:
    """Find species; with one name, show its data, range, source and uncertainty."""
    if check is not None and words:
        raise SpeciesError("give either words to search for or --check FILE, not both")
    if check is not None:
        _check(check)
        return
    from gibbsmin.report.species_sheet import species_list, species_sheet
    from gibbsmin.thermo.database import load

    database = load()
    if not words:
        typer.echo(f"{len(database.names)} species, data version {database.version}")
        typer.echo("Try: gibbsmin species methane, or: gibbsmin species CO2")
        return
    text = " ".join(words)
    try:
        typer.echo("\n".join(species_sheet(database.get(text))))
        return
    except SpeciesError as error:
        found = database.search(text)
        if not found:
            raise SpeciesError(str(error)) from None
    if len(found) == 1:
        typer.echo("\n".join(species_sheet(found[0])))
        return
    typer.echo("\n".join(species_list(found[:_MOST])))
    if len(found) > _MOST:
        say(f"{len(found) - _MOST} more; narrow the search")


def _check(path: Path) -> None:
    """Check a user's species file; exit code 2 where something is wrong with it."""
    from gibbsmin.interop import CANTERA_FILES, read_cantera_file
    from gibbsmin.report.species_sheet import findings_list, species_list
    from gibbsmin.thermo.checkup import check
    from gibbsmin.thermo.own import read_species

    cantera = path.suffix in CANTERA_FILES
    records = read_cantera_file(path) if cantera else read_species(path, strict=False)
    typer.echo("\n".join(species_list(records)))
    findings = check(records)
    if findings:
        typer.echo("\n".join(findings_list(findings)))
        raise typer.Exit(WRONG)
    if not cantera:
        read_species(path)  # refuses what only the text of the file shows, J written for kJ
    typer.echo(f"{len(records)} species, nothing to object to")
