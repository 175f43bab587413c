"""Being stopped from outside: what was begun is cleared away before the process ends."""

from __future__ import annotations

import contextlib
import signal
import threading
from collections.abc import Iterator
from types import FrameType
from typing import Final

_STOPS: Final = ("SIGTERM", "SIGHUP")
"""By which systems end a program: at the end of a session or a queue's time, and when its terminal is closed."""


class Stopped(BaseException):
    """The process was asked to end by a signal.

    Attributes
    ----------
    number : int
        The signal's.
    """

    def __init__(self, number: int) -> None:
        super().__init__(number)
        self.number = number


@contextlib.contextmanager
def stoppable() -> Iterator[None]:
    """Have the signals that end a process raise `Stopped` in the block.

    Notes
    -----
    Left to themselves they would end it where it stands, with what it was writing half done. Only the first counts, so
    that none cuts off the clearing away; a signal that whoever started the process has it ignore stays ignored.
    """
    if threading.current_thread() is not threading.main_thread():  # only there may signals be taken
        yield
        return
    numbers = [number for name in _STOPS if (number := getattr(signal, name, None)) is not None]
    before = {number: signal.getsignal(number) for number in numbers}
    ours = [number for number, handler in before.items() if handler is signal.SIG_DFL]

    def stop(number: int, _: FrameType | None) -> None:
        for one in ours:
            signal.signal(one, signal.SIG_IGN)
        raise Stopped(number)

    for number in ours:
        signal.signal(number, stop)
    try:
        yield
    finally:
        for number in ours:
            signal.signal(number, before[number])
