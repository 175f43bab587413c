"""The terminal: how words and results get to whoever reads them, whatever can be shown there."""

from __future__ import annotations

import os
import sys
from typing import Final

import typer

from meshlure.errors import Fault, InputError

_PLAINER: Final = str.maketrans({"\N{MINUS SIGN}": "-", "\N{DEGREE SIGN}": " deg", "\N{EN DASH}": "-"})
"""For terminals whose character set lacks these: a minus that turns into a question mark would change the number."""


def harmless(text: str) -> str:
    """Return text with control characters made visible: no name of a file steers a terminal or passes for a line."""
    return "".join(c if c.isprintable() else c.encode("unicode_escape").decode() for c in text)


def tell(*lines: str) -> None:
    """Say something beside the results, on stderr."""
    for line in lines:
        typer.echo(_shown(harmless(line), sys.stderr.encoding), err=True)


def answer(*lines: str) -> None:
    """Print an answer in words on stdout.

    Raises
    ------
    InputError
        Where it cannot be written.
    """
    _write("".join(f"{_shown(harmless(line), sys.stdout.encoding)}\n" for line in lines))


def hand_on(text: str) -> None:
    """Print text for another program on stdout, as UTF-8 whatever the terminal's character set.

    Raises
    ------
    InputError
        Where it cannot be written.
    """
    if hasattr(sys.stdout, "reconfigure"):
        sys.stdout.reconfigure(encoding="utf-8")
    _write(text)


def _shown(text: str, encoding: str | None) -> str:
    """Return text in the characters that an encoding has."""
    taken = encoding or "utf-8"
    try:
        text.encode(taken)
    except UnicodeEncodeError:
        return text.translate(_PLAINER).encode(taken, "backslashreplace").decode(taken)
    return text


def _write(text: str) -> None:
    try:
        sys.stdout.write(text)
        sys.stdout.flush()
    except BrokenPipeError:
        # Whoever read has seen enough. The run is as good or bad as it was: its exit code says so.
        _let_go()
    except OSError as error:
        _let_go()
        raise InputError(
            Fault(
                what="the results cannot be printed",
                where="standard output",
                found=error.strerror or str(error),
                next_step="free some space where the output is led to, or lead it elsewhere",
            )
        ) from error


def _let_go() -> None:
    """Lead the rest of stdout nowhere, so that the end of the program does not stumble over it again."""
    nowhere = os.open(os.devnull, os.O_WRONLY)
    os.dup2(nowhere, sys.stdout.fileno())
    os.close(nowhere)
