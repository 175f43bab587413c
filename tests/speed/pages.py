"""Measure what drawing a page adds to a report, and how large it is: prints a table of the samples.

    python tests/speed/pages.py [--rounds 3]

The report with its page and the one without take turns on one core; what is compared is processor time. A page is to
add less than 2.5 s and to stay under 3 MB.
"""

from __future__ import annotations

import argparse
import tempfile
from pathlib import Path

from clock import to_one_core
from run import meshlure, seconds, taking_turns

SAMPLES = Path(__file__).parents[2] / "samples"


def main() -> None:
    parser = argparse.ArgumentParser(description=(__doc__ or "").splitlines()[0])
    parser.add_argument("--rounds", type=int, default=3, help="turns that each sample takes")
    chosen = parser.parse_args()
    to_one_core()
    print(f"{'sample':20}{'with page s':>12}{'without s':>11}{'added s':>9}{'MB':>7}")
    with tempfile.TemporaryDirectory(prefix="meshlure pages ") as name:
        for bait in sorted(SAMPLES.glob("*/*.toml")):
            outs = [Path(name) / f"{bait.stem} {number}" for number in range(chosen.rounds)]
            drawn = [[meshlure(), "report", str(bait), "--out", str(out)] for out in outs]
            plain = [meshlure(), "report", str(bait), "--no-page", "--out", str(Path(name) / "plain")]
            pages, bare = taking_turns(drawn, plain, (0, 1))
            own, other = seconds(pages), seconds(bare)
            size = (outs[0] / "report.html").stat().st_size / 1e6
            print(f"{bait.stem:20}{own:12.1f}{other:11.1f}{own - other:9.2f}{size:7.2f}", flush=True)


if __name__ == "__main__":
    main()
