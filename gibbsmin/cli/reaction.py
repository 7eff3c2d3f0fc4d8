"""``gibbsmin reaction``: is a reaction favourable, how much heat, and where does it turn."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated, Final

import typer

from gibbsmin.cli.messages import guarded, show
from gibbsmin.errors import InputError

if TYPE_CHECKING:
    from gibbsmin.practice.reactions.reactions import Reaction

_POINTS: Final = 11
_MOST: Final = 1000


@guarded
def reaction(
    equation: Annotated[
        list[str],
        typer.Argument(metavar="EQUATION", help="In quotes: '2 H2 + O2 = 2 H2O(l)'. A bare formula is a gas."),
    ],
    at: Annotated[
        list[str] | None, typer.Option(metavar="T", help="Temperature, like '25 degC'; may be given several times.")
    ] = None,
    start: Annotated[str | None, typer.Option("--from", metavar="T", help="First temperature of a range.")] = None,
    to: Annotated[str | None, typer.Option(metavar="T", help="Last temperature of a range.")] = None,
    points: Annotated[
        int | None, typer.Option(metavar="N", help=f"Temperatures in the range, {_POINTS} unless given.")
    ] = None,
    terms: Annotated[bool, typer.Option("--terms", help="Show what each species adds.")] = False,
    as_json: Annotated[bool, typer.Option("--json", help="Print JSON, in J and K, and nothing else.")] = False,
) -> None:
    """Show heat, entropy, Gibbs energy and equilibrium constant of a reaction over temperature.

    The equation must balance; where it does not, the coefficients that do are proposed. Bare numbers are kelvin.
    """
    from gibbsmin.practice.reactions.reactions import reaction as read

    found = read(" ".join(equation))
    temperatures = _temperatures(found, at or [], start, to, points)
    if as_json:
        from gibbsmin.report.reaction_table import reaction_document
        from gibbsmin.results.folder import as_json as written

        typer.echo(written(reaction_document(found, temperatures, terms)), nl=False)
        return
    from gibbsmin.report.reaction_table import reaction_table

    show(reaction_table(found, temperatures, terms))


def _temperatures(found: Reaction, at: list[str], start: str | None, to: str | None, points: int | None) -> list[float]:
    """Rows of the table, [K]."""
    from gibbsmin.report.reaction_table import default_temperatures

    if at and (start or to or points is not None):
        raise InputError("give either --at, or --from and --to, not both")
    if at:
        return sorted({_kelvin(text, "--at") for text in at})
    if start is None and to is None:
        if points is not None:
            raise InputError("--points needs --from and --to")
        return default_temperatures(found)
    if start is None or to is None:
        raise InputError(f"--{'from' if to else 'to'} is missing: a range needs both --from and --to")
    count = _POINTS if points is None else points
    if not 2 <= count <= _MOST:
        raise InputError(f"--points: expected 2 to {_MOST}, got {count}")
    low, high = _kelvin(start, "--from"), _kelvin(to, "--to")
    if low >= high:
        raise InputError(f"--from {start} is not below --to {to}")
    return [low + (high - low) * k / (count - 1) for k in range(count)]


def _kelvin(text: str, what: str) -> float:
    """Read a temperature, [K]; a bare number is one."""
    from gibbsmin.units import quantity

    try:
        value: float | str = float(text)
    except ValueError:
        value = text
    T = quantity(value, "K", what)
    if T <= 0.0:
        raise InputError(f"{what}: expected a temperature above 0 K, got {text!r}")
    return T
