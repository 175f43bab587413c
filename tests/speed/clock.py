"""How the measurements are timed: on one core, by processor time, the two sides taking turns."""

from __future__ import annotations

import os
import statistics
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import IO

MAXRSS = 1 if sys.platform == "darwin" else 1024
"""Bytes in which the system counts the largest resident memory."""


def to_one_core() -> int | None:
    """Hold this process and its children to one core, and return its number; None where the system cannot."""
    # So that no library is given more hands than another.
    for name in ("OMP_NUM_THREADS", "OPENBLAS_NUM_THREADS", "MKL_NUM_THREADS"):
        os.environ[name] = "1"
    if not hasattr(os, "sched_setaffinity"):
        return None
    core = max(os.sched_getaffinity(0))
    os.sched_setaffinity(0, {core})
    return core


def taken(work: Callable[[], object]) -> float:
    """Processor time of one call, s."""
    start = time.process_time()
    work()
    return time.process_time() - start


def alternating(ours: Sequence[Callable[[], object]], theirs: Sequence[Callable[[], object]]) -> tuple[float, float]:
    """Median processor times, s, of two lists of calls that take turns, after one turn each that does not count."""
    ours[0]()
    theirs[0]()
    pairs = [(taken(a), taken(b)) for a, b in zip(ours, theirs, strict=True)]
    return statistics.median(pair[0] for pair in pairs), statistics.median(pair[1] for pair in pairs)


@dataclass(frozen=True)
class Child:
    """A program that was run to its end.

    Attributes
    ----------
    code : int
        Exit code.
    seconds : float, s
        Processor time, its own and the system's for it.
    elapsed : float, s
    peak : float, GB
        Largest resident memory.
    output, errors : str
    """

    code: int
    seconds: float
    elapsed: float
    peak: float
    output: str
    errors: str


def child(command: Sequence[str]) -> Child:
    """Run a program to its end."""
    with _text_file() as output, _text_file() as errors:
        start = time.monotonic()
        # Not waited for by subprocess, since only wait4 gives one child's own use.
        process = subprocess.Popen(list(command), stdout=output, stderr=errors, stdin=subprocess.DEVNULL)
        _, status, use = os.wait4(process.pid, 0)
        elapsed = time.monotonic() - start
        process.returncode = os.waitstatus_to_exitcode(status)
        output.seek(0)
        errors.seek(0)
        peak = use.ru_maxrss * MAXRSS / 1e9
        return Child(process.returncode, use.ru_utime + use.ru_stime, elapsed, peak, output.read(), errors.read())


def _text_file() -> IO[str]:
    return tempfile.TemporaryFile("w+", encoding="utf-8")
