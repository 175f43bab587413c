"""The terminal: how words and results get to whoever reads them, whatever can be shown there."""

from __future__ import annotations

import os
import re
import sys
from collections.abc import Iterator, Sequence
from dataclasses import astuple
from typing import TYPE_CHECKING, Final, TextIO

import typer

from meshlure.errors import Fault, InputError

if TYPE_CHECKING:
    from meshlure.cli.tables import Table

_PLAINER: Final = str.maketrans(
    {"\N{MINUS SIGN}": "-", "\N{DEGREE SIGN}": " deg", "\N{EN DASH}": "-", "\N{SUPERSCRIPT THREE}": "3"}
)
"""For terminals whose character set lacks these: a minus that turns into a question mark would change the number."""

NARROWEST: Final = 40
"""Columns under which lines are no longer fitted to a terminal."""

_HEAD: Final = re.compile(r" *(?:- |[A-H]  |[a-z][a-z ]{0,10}: |[a-z][a-z ]{0,10} {2,})?")
"""What a line begins with that its continuation stands beside: a dash, a letter, "found: ", "mass     "."""
_DEEPEST: Final = 12
"""Columns to which a continuation is moved in at most."""

_STRONG, _FAINT, _BAD, _WARN, _PLAIN = "\x1b[1m", "\x1b[2m", "\x1b[1;31m", "\x1b[33m", "\x1b[0m"
_INKS: Final = (
    (re.compile(r"^(meshlure cannot go on[^:]*:)"), _BAD),
    (re.compile(r"^ *(fault):"), _BAD),
    (re.compile(r"^ *(warning):"), _WARN),
    (re.compile(r"^ +([a-z][a-z ]{0,10}:)(?= )"), _FAINT),
    (re.compile(r"^ +([a-z][a-z ]{0,10})(?=  )"), _FAINT),
)
"""What of a line is set off, and how; the words say the same without it."""

_state = {"quiet": False}


def hush(quiet: bool) -> None:
    """Have nothing printed from here on but faults and what is handed on to programs, or have it printed again."""
    _state["quiet"] = quiet


def hushed() -> bool:
    """Tell whether only faults are to be printed."""
    return _state["quiet"]


def harmless(text: str) -> str:
    """Return text with control characters made visible: no name of a file steers a terminal or passes for a line."""
    return "".join(c if c.isprintable() else c.encode("unicode_escape").decode() for c in text)


def is_terminal(stream: TextIO) -> bool:
    """Tell whether somebody reads a stream on a terminal."""
    try:
        return stream.isatty()
    except ValueError:  # closed
        return False


def can_ask() -> bool:
    """Tell whether somebody is there to answer questions: at a terminal that shows them, and not asked to be quiet."""
    return is_terminal(sys.stdin) and is_terminal(sys.stderr) and not hushed()


def has_colour(stream: TextIO) -> bool:
    """Tell whether a stream may be coloured: a terminal that can, and nobody who asked for none (no-color.org)."""
    if os.environ.get("NO_COLOR") or os.environ.get("TERM") == "dumb" or not is_terminal(stream):
        return False
    return sys.platform != "win32" or "WT_SESSION" in os.environ


def columns(stream: TextIO) -> int | None:
    """Return how many columns a stream's terminal shows; None where it is none, or too narrow to fit anything."""
    if not is_terminal(stream):
        return None
    try:
        wide = os.get_terminal_size(stream.fileno()).columns
    except (OSError, ValueError):
        return None
    return wide if wide >= NARROWEST else None


def tell(*lines: str) -> None:
    """Say something beside the results, on stderr."""
    for line in lines:
        for one in _fitted(line, sys.stderr):
            typer.echo(one, err=True)


def complain(faults: Sequence[Fault]) -> None:
    """Say on stderr why the input cannot be used, every fault with its next step."""
    count = len(faults)
    tell("meshlure cannot go on:" if count == 1 else f"meshlure cannot go on, for {count} reasons:")
    for fault in faults:
        plain = Fault(*map(harmless, astuple(fault)))
        tell(*f"- {plain}".splitlines())


def answer(*parts: str | Table) -> None:
    """Print an answer on stdout: lines in words, and tables.

    Parameters
    ----------
    parts : str or Table
        A line each, broken where a terminal ends; tables are fitted to a terminal, and plain where none is.

    Raises
    ------
    InputError
        Where it cannot be written.
    """
    if hushed():
        return
    lines: list[str] = []
    for part in parts:
        if isinstance(part, str):
            lines += _fitted(part, sys.stdout, title=not lines and not part.startswith(" "))
        else:
            lines += part.lines(columns(sys.stdout), sys.stdout.encoding or "utf-8", has_colour(sys.stdout))
    _write("".join(f"{line}\n" for line in lines))


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


def shown(text: str, encoding: str | None) -> str:
    """Return text without control characters, in the characters that an encoding has."""
    text, taken = harmless(text), encoding or "utf-8"
    try:
        text.encode(taken)
    except UnicodeEncodeError:
        return text.translate(_PLAINER).encode(taken, "backslashreplace").decode(taken)
    return text


def _fitted(line: str, stream: TextIO, title: bool = False) -> Iterator[str]:
    """Give a line as a stream can show it: broken where its terminal ends, what matters set off."""
    line, wide = shown(line, stream.encoding), columns(stream)
    broken = [line]
    if wide is not None and len(line) > wide:
        import textwrap

        head = _HEAD.match(line)
        deep = 0 if head is None else head.end()
        if deep > _DEEPEST:
            deep = len(line) - len(line.lstrip()) + 2
        broken = textwrap.wrap(line, wide, subsequent_indent=" " * deep, break_long_words=False, break_on_hyphens=False)
    if has_colour(stream):
        broken[0] = f"{_STRONG}{broken[0]}{_PLAIN}" if title else _inked(broken[0])
    yield from broken


def _inked(line: str) -> str:
    for pattern, ink in _INKS:
        found = pattern.search(line)
        if found:
            start, end = found.span(1)
            return f"{line[:start]}{ink}{line[start:end]}{_PLAIN}{line[end:]}"
    return line


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
