"""Feed changed files to every reader and to the bait file for some minutes: prints counts, and keeps what went wrong.

    python tests/fuzz/run.py [--minutes 10] [--seed 1] [--keep DIR]

No part of the tests. Files of `tests/formats` and `tests/bad_meshes`, and bait files with every section, are changed
along their structure; a file of which something new came is changed further. Each must be answered or refused in
words, within 4 GB, meshes within 20 s and baits that a command works on to the end within 90 s. What is kept goes, once
it is repaired, into `tests/fuzz/kept`, which the tests try again. The exit code is 1 where something went wrong.
"""

from __future__ import annotations

import argparse
import hashlib
import json
import select
import subprocess
import sys
import tempfile
import time
from collections import Counter
from pathlib import Path
from typing import Any, Final

SILENT: Final = {"bait": 90.0, "quick": 90.0, "": 120.0}
"""s after which a file counts as one that hangs, by its format; the last is for the libraries to be loaded."""
_SILENT = 20.0
"""s. Of all others."""


class Tally:
    """What came of the files so far."""

    def __init__(self, keep: Path) -> None:
        self.tried: Counter[str] = Counter()
        self.outcomes: Counter[str] = Counter()
        self.wrong: Counter[str] = Counter()
        self.slowest: dict[str, float] = {}
        self._keep = keep

    def note(self, wrong: str, kind: str, own: int, case: Path, told: str) -> None:
        """Count something that went wrong; the first file of its sort is kept."""
        self.wrong[wrong] += 1
        if self.wrong[wrong] > 1:
            return
        data = case.read_bytes()
        name = f"{hashlib.sha256(data).hexdigest()[:8]}-{own}.{'toml' if kind == 'bait' else kind}"
        self._keep.mkdir(parents=True, exist_ok=True)
        (self._keep / name).write_bytes(data)
        (self._keep / f"{name}.txt").write_text(f"{wrong}\n{told}\n", encoding="utf-8")
        print(f"{wrong}: {self._keep / name}", flush=True)


def watch(folder: Path, seed: int, ends: float, tally: Tally) -> None:
    """Follow one worker until it ends, breaks down or falls silent."""
    words = [sys.executable, str(Path(__file__).with_name("worker.py")), str(folder), str(seed), str(ends)]
    kind, own = "", 0
    with subprocess.Popen(words, stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True) as worker:
        assert worker.stdout is not None
        try:
            while select.select([worker.stdout], [], [], SILENT.get(kind, _SILENT))[0]:
                line = worker.stdout.readline()
                if not line:
                    break
                what, *more = json.loads(line)
                kind, own = _taken(what, more, kind, own, tally)
            else:
                tally.note(f"no answer to a {kind} in time", kind, own, folder / "case", "")
                return
        finally:
            worker.kill()
        _, errors = worker.communicate()
        if worker.returncode:
            tally.note(f"a {kind} ended the process with {worker.returncode}", kind, own, folder / "case", errors)


def _taken(what: str, more: list[Any], kind: str, own: int, tally: Tally) -> tuple[str, int]:
    if what == "try":
        tally.tried[more[0]] += 1
        return more[0], more[1]
    if what == "wrong":
        tally.note(more[0], kind, own, Path(more[2]), more[1])
    else:
        tally.outcomes[more[0]] += 1
        tally.slowest[kind] = max(tally.slowest.get(kind, 0.0), more[1])
    return kind, own


def main() -> int:
    parser = argparse.ArgumentParser(description="Feeds changed files to every reader and to the bait file.")
    parser.add_argument("--minutes", type=float, default=10.0)
    parser.add_argument("--seed", type=int, default=1)
    parser.add_argument("--keep", type=Path, default=Path(tempfile.gettempdir(), "meshlure-fuzz"))
    asked = parser.parse_args()
    tally, ends, seed = Tally(asked.keep), time.time() + 60 * asked.minutes, asked.seed
    while time.time() < ends:
        with tempfile.TemporaryDirectory(prefix="fuzz-") as place:
            watch(Path(place), seed, ends, tally)
        seed += 1000
    print(f"{'':8}{'tried':>8}  slowest s")
    for kind, count in sorted(tally.tried.items()):
        print(f"{kind:8}{count:8}  {tally.slowest.get(kind, 0.0):.2f}")
    print(
        f"{sum(tally.tried.values())} files, {len(tally.outcomes)} different outcomes, {len(tally.wrong)} of them wrong"
    )
    for wrong, count in tally.wrong.most_common():
        print(f"  {count:6} times {wrong}")
    return 1 if tally.wrong else 0


if __name__ == "__main__":
    sys.exit(main())
