"""Measure what balance, chamber and mould take beside a report on the same bait: prints a table.

    python tests/speed/jobs.py [--triangles 100000] [--rounds 3]

The commands take turns with the report on one core, and what is compared is processor time. The elapsed seconds are
printed too: on two idle cores of a desktop machine balance and chamber are to stay under 15 s at 100,000 triangles.
"""

from __future__ import annotations

import argparse
import statistics
import tempfile
from pathlib import Path

from clock import to_one_core
from lofted import write
from run import meshlure, seconds, taking_turns

SECTIONS = """
[target]
behaviour = "floats"
reserve = "1.0 g"
nose_up = "2 deg"
[ballast]
materials = ["lead", "tungsten heavy alloy 90% W", "brass"]
[chamber]
balls = [{ diameter = ["4 mm", "5 mm"], count = [1, 2], material = "bearing steel" }]
open_to = "tail"
"""
"""What the jobs are asked for: nothing but what a maker would state; all else as it is assumed."""

JOBS = ("balance", "chamber", "mould")


def main() -> None:
    parser = argparse.ArgumentParser(description=(__doc__ or "").splitlines()[0])
    parser.add_argument("--triangles", type=int, default=100_000, help="of the body")
    parser.add_argument("--rounds", type=int, default=3, help="turns that each job takes")
    chosen = parser.parse_args()
    to_one_core()
    print(f"{'job / report, without pages':30}{'processor s':>12}{'elapsed s':>11}{'report s':>10}{'ratio':>7}")
    with tempfile.TemporaryDirectory(prefix="meshlure jobs ") as name:
        bait = write(Path(name), chosen.triangles)
        bait.write_text(bait.read_text(encoding="utf-8") + SECTIONS, encoding="utf-8")
        for job in JOBS:
            outs = [Path(name) / f"{job} {number}" for number in range(chosen.rounds)]
            ours = [[meshlure(), job, str(bait), "--no-page", "--out", str(out)] for out in outs]
            report = [meshlure(), "report", str(bait), "--no-page", "--out", str(Path(name) / "report")]
            # A target that is missed, or a fault that is found, ends with 1 and has done the same work.
            jobs, reports = taking_turns(ours, report, (0, 1))
            elapsed = statistics.median(run.elapsed for run in jobs)
            own, other = seconds(jobs), seconds(reports)
            print(f"{job:30}{own:12.1f}{elapsed:11.1f}{other:10.1f}{own / other:7.2f}", flush=True)


if __name__ == "__main__":
    main()
