"""A bench for what a terminal is shown: a command on a pseudo-terminal of a width, its questions answered."""

from __future__ import annotations

import fcntl
import os
import pty
import struct
import termios
from collections.abc import Mapping, Sequence
from pathlib import Path


def shown(
    words: Sequence[str | Path], columns: int = 80, more: Mapping[str, str] | None = None, answers: Sequence[str] = ()
) -> tuple[int, str]:
    """Exit code and everything that a terminal of a width is sent while a command runs on it.

    Each answer is typed when the last line that was sent is a question: it ends with a colon and a blank.
    """
    pid, terminal = pty.fork()
    if pid == 0:  # the child: on the terminal's own side
        plain = {key: value for key, value in os.environ.items() if key not in ("NO_COLOR", "FORCE_COLOR")}
        os.write(1, b"^")
        os.read(0, 1)
        os.execve(words[0], [str(word) for word in words], plain | {"TERM": "xterm"} | dict(more or {}))
    assert os.read(terminal, 1) == b"^"
    fcntl.ioctl(terminal, termios.TIOCSWINSZ, struct.pack("HHHH", 24, columns, 0, 0))
    os.write(terminal, b"\n")
    sent, waiting, asked = b"", list(answers), 0
    while True:
        try:
            part = os.read(terminal, 4096)
        except OSError:  # Linux: the other side is closed
            break
        if not part:
            break
        sent += part
        if waiting and sent.endswith(b": ") and len(sent) > asked:
            os.write(terminal, waiting.pop(0).encode() + b"\n")
            asked = len(sent)
    os.close(terminal)
    code = os.waitstatus_to_exitcode(os.waitpid(pid, 0)[1])
    return code, sent.decode().replace("\r\n", "\n").removeprefix("\n")


def left_over(sent: str) -> list[str]:
    """Lines as the terminal shows them in the end: what follows a carriage return is written over the line."""
    lines = []
    for line in sent.split("\n"):
        face = ""
        for part in line.split("\r"):
            face = part + face[len(part) :]
        lines.append(face.rstrip())
    return lines
