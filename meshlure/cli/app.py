"""The command line as the parser takes it, and one run of it."""

from __future__ import annotations

import sys
from typing import Any, Final

import typer

from meshlure.cli.codes import BAD_INPUT, DONE, INTERRUPTED, OUR_FAULT
from meshlure.cli.terminal import answer, complain, hush, tell
from meshlure.cli.usage import Commands, UsageError, misread
from meshlure.errors import InputError
from meshlure.version import VERSION

HELP: Final = """Weighs, floats, measures and cuts hard fishing baits from their meshes.

A report on a sample, to see what it is about:

\b
  meshlure report samples/minnow/minnow.toml --out out
"""

app = typer.Typer(
    name="meshlure",
    cls=Commands,
    help=HELP,
    epilog="meshlure COMMAND --help has examples of each.",
    subcommand_metavar="COMMAND ...",
    no_args_is_help=True,
    rich_markup_mode=None,
    pretty_exceptions_enable=False,
)


def _version(asked: bool) -> None:
    if asked:
        answer(f"meshlure {VERSION}")
        raise typer.Exit


@app.callback()
def _options(
    version: bool = typer.Option(
        False, "--version", callback=_version, is_eager=True, help="Print the version and end."
    ),
) -> None:
    pass


def run() -> int:
    """Run the command line, and return its exit code."""
    hush(False)
    try:
        return app(prog_name="meshlure", standalone_mode=False) or DONE
    except InputError as error:
        complain(error.faults)
        return BAD_INPUT
    except UsageError as error:
        return _usage(error)
    except (typer.Abort, KeyboardInterrupt):
        return INTERRUPTED
    except MemoryError:
        tell("meshlure cannot go on: this needs more memory than the computer gives. Export coarser meshes.")
        return BAD_INPUT
    except Exception as error:
        _apologize(error)
        return OUR_FAULT


def _usage(error: Any) -> int:
    if type(error).__name__ == "NoArgsIsHelpError":
        typer.echo(error.format_message(), err=True)
    else:
        complain([misread(error, sys.argv[1:])])
    return BAD_INPUT


def _apologize(error: Exception) -> None:
    if "--debug" in sys.argv:
        import traceback

        traceback.print_exception(error)
    said = f"{type(error).__name__}: {error}" if str(error) else type(error).__name__
    tell(f"meshlure failed by a fault of its own ({said}). We are sorry. Nothing half-written was left behind.")
    if "--debug" not in sys.argv:
        tell("Run the same command with --debug added and send us what it prints, with the bait file.")
