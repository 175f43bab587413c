"""The command in a process of its own: pipes, full disks, narrow character sets, Ctrl-C."""

from __future__ import annotations

import json
import os
import re
import signal
import subprocess
import sys
import time
from collections.abc import Callable
from pathlib import Path

import pytest
from command_bench import QUICK, SCRIPT, Bench, box

FULL = Path("/dev/full")

SLOW_PAGE = """
import signal
signal.signal(signal.SIGINT, signal.default_int_handler)  # what a shell starts in the background ignores it
import time
import meshlure.report.page as page
page.page = lambda found: time.sleep(60)
from meshlure.cli.main import main
main()
"""


def test_results_and_narration_keep_apart(bench: Bench) -> None:
    ran = bench.launch("report", "body.stl", *QUICK, "--json", env=os.environ | {"FORCE_COLOR": "1", "LC_ALL": "C"})
    assert (ran.code, ran.err) == (0, "")
    assert json.loads(ran.out)["name"] == "body"
    assert "\x1b" not in ran.out


def test_a_terminal_without_a_minus_sign_shows_a_hyphen(bench: Bench) -> None:
    narrow = os.environ | {"PYTHONIOENCODING": "ascii", "PYTHONUTF8": "0"}
    ran = bench.launch("report", "body.stl", *QUICK, "--no-page", "--out", "out", "--name", "Ålder", env=narrow)
    assert (ran.code, ran.err) == (0, "")
    assert re.search(r"Sinks: reserve -1\.\d\d g", ran.out)
    assert ran.out.startswith("\\xc5lder\n")
    # What another program reads is UTF-8 all the same.
    ran = bench.launch("report", "body.stl", *QUICK, "--json", "--name", "Ålder", env=narrow, encoding="utf-8")
    assert json.loads(ran.out)["name"] == "Ålder"


@pytest.mark.parametrize(("chamber", "code"), [((20, 3, 3), 0), ((20, -1, 3), 1)], ids=["done", "fault found"])
def test_a_reader_that_has_gone_changes_nothing(bench: Bench, chamber: tuple[int, int, int], code: int) -> None:
    bench.put("chamber.stl", box(chamber, (6, 4, 6)))
    words = ["report", "body.stl", *QUICK, "--insert", "chamber.stl=sealed", "--no-page", "--out", "out", "--json"]
    reading, writing = os.pipe()
    os.close(reading)
    done = subprocess.run(
        [SCRIPT, *words], cwd=bench.folder, stdout=writing, stderr=subprocess.PIPE, text=True, timeout=120
    )
    os.close(writing)
    assert (done.returncode, done.stderr) == (code, "")
    assert (bench.out / "results.json").exists()


@pytest.mark.skipif(not FULL.exists(), reason="this system has no device that is always full")
def test_stdout_on_a_full_disk(bench: Bench) -> None:
    with FULL.open("w") as full:
        done = subprocess.run(
            [SCRIPT, "report", "body.stl", *QUICK, "--json"],
            cwd=bench.folder, stdout=full, stderr=subprocess.PIPE, text=True, timeout=120,
        )  # fmt: skip
    assert done.returncode == 2
    assert "standard output: the results cannot be printed\n  found: No space left on device" in done.stderr
    assert "Traceback" not in done.stderr


@pytest.mark.skipif(sys.platform == "win32", reason="sends a POSIX signal")
@pytest.mark.parametrize("number", [signal.SIGINT, signal.SIGTERM], ids=["Ctrl-C", "asked to end"])
def test_stopped_it_leaves_nothing(bench: Bench, number: signal.Signals) -> None:
    before = bench.contents()
    staging = bench.folder / "new"
    words = ["report", "body.stl", *QUICK, "--out", "new/out"]
    with subprocess.Popen(
        [sys.executable, "-c", SLOW_PAGE, *words],
        cwd=bench.folder,
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        text=True,
    ) as run:
        try:
            begun = _waited(run, lambda: staging.is_dir() and any(staging.iterdir()))
            run.send_signal(number)
            out, err = run.communicate(timeout=60)
        finally:
            run.kill()
    assert begun, err
    assert (run.returncode, out) == (128 + number, "")
    assert err == "stopped; nothing half-written was left behind\n"
    assert bench.contents() == before
    assert not staging.exists()


def _waited(run: subprocess.Popen[str], until: Callable[[], bool]) -> bool:
    """Tell whether something came about while a process ran."""
    end = time.monotonic() + 60
    while run.poll() is None and time.monotonic() < end:
        if until():
            return True
        time.sleep(0.01)
    return False
