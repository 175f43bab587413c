"""The command line's entry: runs a command and turns what goes wrong into a message and an exit code."""

from __future__ import annotations

import sys
from typing import NoReturn

import typer

from meshlure.cli import report
from meshlure.errors import InputError
from meshlure.version import VERSION

DONE, ANSWER_IS_NO, BAD_INPUT, OUR_FAULT, INTERRUPTED = 0, 1, 2, 3, 130

app = typer.Typer(
    name="meshlure",
    help="Weighs, floats, measures and cuts hard fishing baits from their meshes, before any resin is poured.",
    add_completion=False,
    no_args_is_help=True,
    rich_markup_mode=None,
    pretty_exceptions_enable=False,
)
app.command("report", help=report.HELP)(report.report)


def _version(asked: bool) -> None:
    if asked:
        typer.echo(f"meshlure {VERSION}")
        raise typer.Exit


@app.callback()
def _options(
    version: bool = typer.Option(False, "--version", callback=_version, is_eager=True, help="Print the version and end."),
) -> None:
    pass


def main() -> NoReturn:
    """Run the command line.

    Notes
    -----
    Exit codes: 0 done, 1 done but the answer is no, 2 bad input or usage, 3 our own fault.
    """
    try:
        app()
    except InputError as error:
        _say(error)
        sys.exit(BAD_INPUT)
    except KeyboardInterrupt:
        typer.echo("stopped; nothing was written", err=True)
        sys.exit(INTERRUPTED)
    except BrokenPipeError:
        # Whoever read the output has gone; there is nobody left to tell.
        sys.stderr.close()
        sys.exit(DONE)
    except Exception as error:
        if "--debug" in sys.argv:
            raise
        typer.echo(
            f"meshlure failed by a fault of its own ({type(error).__name__}: {_harmless(str(error))}). We are sorry.\n"
            "Nothing was written. Run the same command with --debug added and send us what it prints, with the bait file.",
            err=True,
        )
        sys.exit(OUR_FAULT)
    sys.exit(DONE)


def _say(error: InputError) -> None:
    count = len(error.faults)
    typer.echo("meshlure cannot go on:" if count == 1 else f"meshlure cannot go on, for {count} reasons:", err=True)
    for fault in error.faults:
        typer.echo(f"- {_harmless(str(fault))}", err=True)


def _harmless(text: str) -> str:
    """Return text with control characters made visible, so that no name in a file can steer a terminal."""
    return "".join(c if c == "\n" or c.isprintable() else c.encode("unicode_escape").decode() for c in text)
