"""The command line's entry: runs a command and turns what goes wrong into a message and an exit code."""

from __future__ import annotations

import sys
import traceback
from dataclasses import astuple
from pathlib import Path
from typing import Final, NoReturn

import typer

from meshlure.cli import balance, mould, pour, report
from meshlure.cli.terminal import answer, harmless, tell
from meshlure.errors import Fault, InputError
from meshlure.version import VERSION

DONE: Final = 0
ANSWER_IS_NO: Final = 1
BAD_INPUT: Final = 2
OUR_FAULT: Final = 3
INTERRUPTED: Final = 130
"""As shells count a program that Ctrl-C ended."""

HELP: Final = """Weighs, floats, measures and cuts hard fishing baits from their meshes.

Start with: meshlure report --help
"""

app = typer.Typer(
    name="meshlure",
    help=HELP,
    add_completion=False,
    no_args_is_help=True,
    rich_markup_mode=None,
    pretty_exceptions_enable=False,
)
app.command("report", help=report.HELP, short_help=report.SHORT)(report.report)
app.command("balance", help=balance.HELP, short_help=balance.SHORT)(balance.balance)
app.command("mould", help=mould.HELP, short_help=mould.SHORT)(mould.mould)
app.command("pour", help=pour.HELP, short_help=pour.SHORT)(pour.pour)


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


def main() -> NoReturn:
    """Run the command line.

    Notes
    -----
    Exit codes: 0 done, 1 done but the answer is no, 2 bad input or usage, 3 our own fault, 130 stopped by Ctrl-C.
    """
    try:
        _check_command(sys.argv[1:])
        app()
    except SystemExit as ended:
        if ended.code == INTERRUPTED:
            tell("stopped; nothing half-written was left behind")
        raise
    except InputError as error:
        _refuse(error)
        sys.exit(BAD_INPUT)
    except MemoryError:
        tell("meshlure cannot go on: this needs more memory than the computer gives. Export coarser meshes.")
        sys.exit(BAD_INPUT)
    except Exception as error:
        _apologize(error)
        sys.exit(OUR_FAULT)
    sys.exit(DONE)


def _check_command(words: list[str]) -> None:
    """Refuse a file in the command's place with the words that would have worked."""
    if words and Path(words[0]).suffix.casefold() in report.SUFFIXES:
        raise InputError(
            Fault(
                what="a command comes first",
                where="meshlure",
                found=words[0],
                allowed="report",
                next_step=f"write meshlure report {words[0]} ...",
            )
        )


def _refuse(error: InputError) -> None:
    count = len(error.faults)
    tell("meshlure cannot go on:" if count == 1 else f"meshlure cannot go on, for {count} reasons:")
    for fault in error.faults:
        plain = Fault(*map(harmless, astuple(fault)))
        tell(*f"- {plain}".splitlines())


def _apologize(error: Exception) -> None:
    if "--debug" in sys.argv:
        traceback.print_exception(error)
    said = f"{type(error).__name__}: {error}" if str(error) else type(error).__name__
    tell(f"meshlure failed by a fault of its own ({said}). We are sorry. Nothing half-written was left behind.")
    if "--debug" not in sys.argv:
        tell("Run the same command with --debug added and send us what it prints, with the bait file.")
