"""What a terminal is shown, on a pseudo-terminal: progress, colour, lines that fit. A pipe is shown none of it."""

from __future__ import annotations

import re
import sys
from collections.abc import Mapping

import pytest
from command_bench import QUICK, SCRIPT, Bench

pytest.importorskip("pty", reason="needs POSIX pseudo-terminals")

from terminal_bench import left_over, shown

SLOW = """
import time
from meshlure.cli.progress import phases
with phases() as said:
    said("soaking the wood\\x1b[2J")
    time.sleep(%s)
print("done")
"""


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
