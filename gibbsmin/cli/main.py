"""The ``gibbsmin`` command. Everything heavy is imported inside the commands, so that help answers at once."""

from __future__ import annotations

from typing import Annotated

import typer

from gibbsmin import __version__
from gibbsmin.cli.begin import begin
from gibbsmin.cli.check import check
from gibbsmin.cli.messages import INTERRUPTED, say
from gibbsmin.cli.reaction import reaction
from gibbsmin.cli.report import report
from gibbsmin.cli.run import run
from gibbsmin.cli.schema import schema
from gibbsmin.cli.species import species

app = typer.Typer(
    name="gibbsmin",
    help="Chemical equilibrium by Gibbs energy minimization, with a proof for every answer.",
    epilog="Start with: gibbsmin begin my_case reformer, then: gibbsmin run my_case.toml",
    no_args_is_help=True,
    rich_markup_mode=None,
    pretty_exceptions_enable=False,
    add_completion=False,
    context_settings={"help_option_names": ["-h", "--help"], "max_content_width": 80},
)
for command, told in (
    (run, "Solve cases, print their tables, write their result folders."),
    (check, "Read and explain cases without solving them."),
    (species, "Find species; show the data of one."),
    (reaction, "Heat, entropy, Gibbs energy and K of a reaction over temperature."),
    (report, "Draw the figures of result folders again."),
    (begin, "Write a commented case file to start from."),
    (schema, "Print the JSON Schema of case files."),
):
    app.command(short_help=told)(command)


def _version(wanted: bool) -> None:
    """Print the version and stop."""
    if wanted:
        typer.echo(f"gibbsmin {__version__}")
        raise typer.Exit


@app.callback()
def _top(
    version: Annotated[
        bool, typer.Option("--version", callback=_version, is_eager=True, help="Print the version and stop.")
    ] = False,
) -> None:
    """Chemical equilibrium by Gibbs energy minimization, with a proof for every answer."""


def main() -> None:
    """Run the command line."""
    try:
        app(prog_name="gibbsmin")
    except KeyboardInterrupt:
        say("gibbsmin: stopped")
        raise SystemExit(INTERRUPTED) from None
