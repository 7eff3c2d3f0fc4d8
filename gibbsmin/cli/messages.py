"""What is said to people: plain lines on standard error, exit codes, and a progress bar where one helps."""

from __future__ import annotations

import os
import sys
import time
from collections.abc import Callable
from functools import wraps
from typing import Any, Final, ParamSpec

import typer

from gibbsmin.errors import GibbsminError, NotCertified

SOLVED: Final = 0
NOT_CERTIFIED: Final = 1
WRONG: Final = 2
INTERRUPTED: Final = 130

_Arguments = ParamSpec("_Arguments")
_PATIENCE: Final = 1.0  # s of work before progress is shown


def say(text: str) -> None:
    """Print a line for people; it goes to standard error, so that data can be piped."""
    typer.echo(text, err=True)


def show(lines: list[str]) -> None:
    """Print a table; on a terminal that is not told NO_COLOR the word "caution" stands out."""
    marked = sys.stdout.isatty() and not os.environ.get("NO_COLOR")
    word = "caution"
    for line in lines:
        typer.echo(
            typer.style(word, bold=True, fg="yellow") + line[len(word) :]
            if marked and line.startswith(word + " ")
            else line
        )


def guarded(command: Callable[_Arguments, None]) -> Callable[_Arguments, None]:
    """Turn errors raised on purpose, Ctrl-C and a closed pipe into plain lines and exit codes."""

    @wraps(command)
    def call(*args: _Arguments.args, **kwargs: _Arguments.kwargs) -> None:
        try:
            command(*args, **kwargs)
            sys.stdout.flush()
        except GibbsminError as error:
            say(f"gibbsmin: {error}")
            raise typer.Exit(NOT_CERTIFIED if isinstance(error, NotCertified) else WRONG) from None
        except KeyboardInterrupt:
            say("gibbsmin: stopped; nothing more was written")
            raise typer.Exit(INTERRUPTED) from None
        except BrokenPipeError:
            # The reader of our output has left; what is still buffered goes nowhere.
            os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
            raise typer.Exit(SOLVED) from None
        except MemoryError:
            say("gibbsmin: not enough memory for this; ask for fewer states or fewer species")
            raise typer.Exit(WRONG) from None

    return call


class Progress:
    """A progress bar on standard error, only on a terminal and only once the work has taken a second.

    Parameters
    ----------
    what : str
        What is going on.
    """

    def __init__(self, what: str) -> None:
        self._what = what
        self._start = time.monotonic()
        self._first: int | None = None
        self._bar: Any = None
        self._task: Any = None

    def __call__(self, done: int, total: int) -> None:
        """Show that ``done`` of ``total`` states are solved."""
        self._first = done if self._first is None else self._first
        if self._bar is None:
            if not sys.stderr.isatty() or time.monotonic() - self._start < _PATIENCE:
                return
            from rich.console import Console
            from rich.progress import BarColumn, MofNCompleteColumn, TextColumn, TimeRemainingColumn
            from rich.progress import Progress as Bar

            self._bar = Bar(
                TextColumn("{task.description}"),
                BarColumn(),
                MofNCompleteColumn(),
                TextColumn("{task.fields[rate]}"),
                TimeRemainingColumn(),
                console=Console(stderr=True),
                transient=True,
            )
            self._task = self._bar.add_task(self._what, total=total, rate="")
            self._bar.start()
        rate = (done - self._first) / max(time.monotonic() - self._start, 1e-9)
        self._bar.update(self._task, completed=done, rate=f"{rate:,.0f} a second")

    def close(self) -> None:
        """Take the bar away."""
        if self._bar is not None:
            self._bar.stop()
