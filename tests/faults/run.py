"""Deal every command that writes blows at random moments, and look at what is left: prints a table of counts.

    python tests/faults/run.py [--times 55] [--blows killed,stopped] [--jobs report,new] [--seed 1]

No part of the tests: each blow is a run or two of the real command. Every result must be the older one whole or the
newer one whole, and the run after it must work and clear away what was left. The exit code is 1 where that was not so.
"""

from __future__ import annotations

import argparse
import os
import random
import shutil
import sys
import tempfile
from collections import Counter
from pathlib import Path

sys.path.insert(0, str(Path(__file__).parents[1]))

from faults.blows import AIMS, BLOWS, Ground, ground
from faults.jobs import JOBS


def main() -> int:
    parser = argparse.ArgumentParser(description="Deals every command that writes blows at random moments.")
    parser.add_argument("--times", type=int, default=55, help="blows of each kind, spread over the commands")
    parser.add_argument("--blows", default=",".join(BLOWS))
    parser.add_argument("--jobs", default=",".join(JOBS))
    parser.add_argument("--seed", type=int, default=1)
    asked = parser.parse_args()
    kinds = [kind for kind in asked.blows.split(",") if kind != "disk full" or _may_mount()]
    lot = random.Random(asked.seed)
    wrong: list[str] = []
    with tempfile.TemporaryDirectory(prefix="faults-") as place:
        Path(place).chmod(0o755)
        grounds: list[Ground] = []
        for name in asked.jobs.split(","):
            folder = Path(place, name)
            folder.mkdir()
            grounds.append(ground(folder, JOBS[name]))
            print(f"{name:<10} takes {grounds[-1].span:5.2f} s, writes for {grounds[-1].writing:5.2f} s", flush=True)
        for kind in kinds:
            counts: Counter[str] = Counter()
            for number in range(asked.times):
                made = grounds[number % len(grounds)]
                aim = AIMS[number // len(grounds) % len(AIMS)]
                outcome = BLOWS[kind](made, lot, aim)
                counts[outcome.left if outcome.left in ("old", "new") else "mixed"] += 1
                counts["left something beside"] += outcome.cleared
                if outcome.wrong:
                    wrong.append(f"{kind}, {made.job.name}, {aim}: {outcome.wrong}")
                    print(wrong[-1], flush=True)
            told = ", ".join(f"{count} {what}" for what, count in sorted(counts.items()))
            print(f"{kind:<15} {asked.times:4d} times: {told}", flush=True)
    print(f"{len(wrong)} wrong")
    return 1 if wrong else 0


def _may_mount() -> bool:
    may = os.geteuid() == 0 and shutil.which("mount") is not None
    if not may:
        print("disk full       left out: only root mounts a small disk")
    return may


if __name__ == "__main__":
    sys.exit(main())
