"""Progress: a line on the terminal that says which phase a long work is in."""

from __future__ import annotations

import itertools
import sys
import threading
import time
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from typing import Final

from meshlure.cli.terminal import columns, hushed, shown

PATIENCE: Final = 1.0
"""s. Work that is done within this says nothing."""
_STEP: Final = 0.125
"""s from one stroke of the line to the next."""
_STROKES: Final = "|/-\\"


@contextmanager
def phases() -> Iterator[Callable[[str], None]]:
    """Give a callable that is told each phase as it begins, and show it while the block runs.

    Yields
    ------
    callable
        Takes the phase in a word or two, such as "finding postures".

    Notes
    -----
    One line on stderr, rewritten in place and taken away at the end; nothing at all where stderr is no terminal, the
    work is done within a second, or only faults are to be printed.
    """
    wide = None if hushed() else columns(sys.stderr)
    if wide is None:
        yield lambda _: None
        return
    line = _Line(wide)
    try:
        yield line.tell
    finally:
        line.end()


class _Line:
    """The line, drawn by a thread of its own: the work may not come back for seconds."""

    def __init__(self, wide: int) -> None:
        self._wide = wide - 1
        self._start = time.monotonic()
        self._phase = ""
        self._drawn = 0
        self._over = threading.Event()
        self._thread = threading.Thread(target=self._draw, daemon=True)
        self._thread.start()

    def tell(self, phase: str) -> None:
        self._phase = phase

    def end(self) -> None:
        self._over.set()
        self._thread.join()
        if self._drawn:
            self._put("")
            sys.stderr.write("\r")
            sys.stderr.flush()

    def _draw(self) -> None:
        if self._over.wait(PATIENCE):
            return
        for stroke in itertools.cycle(_STROKES):
            phase, spent = self._phase or "working", time.monotonic() - self._start
            self._put(f"{stroke} {shown(phase, sys.stderr.encoding)}, {spent:.0f} s")
            if self._over.wait(_STEP):
                return

    def _put(self, text: str) -> None:
        """Write over the line; blanks wipe what was longer, as every terminal understands."""
        text = text[: self._wide]
        try:
            sys.stderr.write(f"\r{text}{' ' * (self._drawn - len(text))}")
            sys.stderr.flush()
        except OSError:  # the terminal is gone
            self._over.set()
        self._drawn = len(text)
