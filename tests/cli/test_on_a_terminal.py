"""What a terminal is shown, on a pseudo-terminal: progress, colour, lines that fit. A pipe is shown none of it."""

from __future__ import annotations

import os
import re
import sys
from collections.abc import Mapping
from pathlib import Path

import pytest
from command_bench import QUICK, SCRIPT, Bench

pty = pytest.importorskip("pty", reason="needs POSIX pseudo-terminals")

SLOW = """
import time
from meshlure.cli.progress import phases
with phases() as said:
    said("soaking the wood\\x1b[2J")
    time.sleep(%s)
print("done")
"""


def shown(words: list[str | Path], columns: int = 80, more: Mapping[str, str] | None = None) -> tuple[int, str]:
    """Exit code and everything that a terminal of a width is sent while a command runs on it."""
    import fcntl
    import struct
    import termios

    pid, terminal = pty.fork()
    if pid == 0:  # the child: on the terminal's own side
        plain = {key: value for key, value in os.environ.items() if key not in ("NO_COLOR", "FORCE_COLOR")}
        os.write(1, b"^")
        os.read(0, 1)
        os.execve(words[0], [str(word) for word in words], plain | {"TERM": "xterm"} | dict(more or {}))
    assert os.read(terminal, 1) == b"^"
    fcntl.ioctl(terminal, termios.TIOCSWINSZ, struct.pack("HHHH", 24, columns, 0, 0))
    os.write(terminal, b"\n")
    sent = b""
    while True:
        try:
            more_sent = os.read(terminal, 4096)
        except OSError:  # Linux: the other side is closed
            break
        if not more_sent:
            break
        sent += more_sent
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


def test_progress_of_long_work_comes_and_goes() -> None:
    code, sent = shown([sys.executable, "-c", SLOW % 1.6])
    assert code == 0
    assert re.search(r"\r[-|/\\] soaking the wood\\x1b\[2J, 1 s", sent), sent
    assert left_over(sent) == ["done", ""]


def test_no_progress_where_work_is_short_or_nobody_looks() -> None:
    assert shown([sys.executable, "-c", SLOW % 0.2]) == (0, "done\n")
    quiet = f"from meshlure.cli.terminal import hush\nhush(True)\n{SLOW % 1.3}"
    assert shown([sys.executable, "-c", quiet]) == (0, "done\n")


COLOUR = re.compile(r"\x1b\[[0-9;]*m")

ANSWER = """
from meshlure.cli.tables import Column, Table
from meshlure.cli.terminal import answer
rows = [["lead", "11.34"], ["oak \x1b[31m", "0.7"]]
table = Table([Column("material"), Column("g/cm3", True)], rows)
answer("Alder minnow", "  mass     7 g", "           fault: it is open", table)
"""


@pytest.mark.parametrize(("more", "colour"), [({}, True), ({"NO_COLOR": "1"}, False), ({"TERM": "dumb"}, False)])
def test_colour_only_where_it_is_wanted_and_never_alone(more: Mapping[str, str], colour: bool) -> None:
    code, sent = shown([sys.executable, "-c", ANSWER], more=more)
    assert code == 0
    assert ("\x1b[1;31mfault\x1b[0m" in sent) == bool(COLOUR.search(sent)) == colour
    assert left_over(COLOUR.sub("", sent)) == [
        "Alder minnow",
        "  mass     7 g",
        "           fault: it is open",
        "material      g/cm3",
        "───────────────────",
        "lead          11.34",
        "oak \\x1b[31m    0.7",
        "",
    ]


def test_a_report_fits_the_terminal(bench: Bench) -> None:
    code, sent = shown([SCRIPT, "report", "body.stl", *QUICK, "--no-page", "--out", "out"], 60, {"NO_COLOR": "1"})
    lines = left_over(sent)
    assert code == 0
    assert max(map(len, lines)) <= 60
    # A line that was broken goes on beside its label; joined again it is the line that a pipe gets.
    start = next(number for number, line in enumerate(lines) if line.startswith("  posture"))
    assert re.match(r" {11}\S", lines[start + 1])
    piped = bench.report("body.stl").out.split()
    assert [*sent.split()[-len(piped) : -1], str(bench.out)] == piped
    code, sent = shown([SCRIPT, "report", "body.stl"], 60, {"NO_COLOR": "1"})
    assert code == 2
    assert max(map(len, left_over(sent))) <= 60
