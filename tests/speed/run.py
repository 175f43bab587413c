"""Measure the speed against the general libraries, side by side: prints a table of ratios with their bars.

    python tests/speed/run.py [--triangles 1000000] [--rounds 9] [--whole 3]

No part of the timed tests: it takes several minutes, most of them the other side's. Both sides run on one core, taking
turns, and what is compared is processor time, so that other work on the machine weighs on neither much. The exit code
is 1 where a bar is missed.
"""

from __future__ import annotations

import argparse
import json
import platform
import shutil
import statistics
import sys
import tempfile
from collections.abc import Sequence
from importlib.metadata import version
from pathlib import Path
from typing import Any

from clock import Child, child, to_one_core
from figures import WIDTH, Figure, heading

HERE = Path(__file__).parent

MEMORY = 2.0
"""GB of peak memory that a report may take."""

LIBRARIES = ("numpy", "scipy", "trimesh", "shapely", "manifold3d")


def ended_well(command: Sequence[str], codes: Sequence[int] = (0,)) -> Child:
    run = child(command)
    if run.code not in codes:
        sys.exit(f"{' '.join(command)} ended with {run.code}:\n{run.errors[-2000:]}")
    return run


def script(name: str, *arguments: str) -> list[str]:
    return [sys.executable, str(HERE / name), *arguments]


def meshlure() -> str:
    """Path of the installed command, that of this interpreter's environment first."""
    found = shutil.which("meshlure", path=str(Path(sys.executable).parent)) or shutil.which("meshlure")
    if found is None:
        sys.exit("the meshlure command is not installed: pip install -e .")
    return found


def taking_turns(ours: Sequence[list[str]], theirs: list[str], codes: Sequence[int]) -> tuple[list[Child], list[Child]]:
    pairs = [(ended_well(command, codes), ended_well(theirs)) for command in ours]
    return [pair[0] for pair in pairs], [pair[1] for pair in pairs]


def seconds(runs: Sequence[Child]) -> float:
    return statistics.median(run.seconds for run in runs)


def started(rounds: int) -> Figure:
    """The command's help against the import that it cannot do without."""
    command, bare = [meshlure(), "--help"], [sys.executable, "-c", "import typer"]
    taking_turns([command], bare, (0,))
    ours, theirs = taking_turns([command] * rounds, bare, (0,))
    return Figure("meshlure --help / python -c 'import typer'", seconds(ours), seconds(theirs), 4, False)


def compared(tree: Any, plain: Any) -> tuple[str, bool]:
    """How far the report and the plain script differ, and whether they are about the same bait."""
    posture = next(posture for posture in tree["postures"] if posture["upright"])
    areas = {area["name"]: area["area_mm2"] for area in tree["areas"]}
    mass = abs(tree["weight"]["mass_g"] / plain["mass_g"] - 1)
    angle = abs(posture["nose_up_deg"] - plain["nose_up_deg"])
    area = max(abs(areas[name] / plain["areas_mm2"][name] - 1) for name in plain["areas_mm2"])
    words = f"masses agree to {mass:.0e}, silhouettes to {area:.0e}, nose to {angle:.3f} deg"
    return words, mass < 1e-6 and area < 1e-6 and angle < 0.05


def whole(folder: Path, rounds: int) -> tuple[Figure, list[float]]:
    """The report on a bait with three inserts against the plain script on the same files; peak memory of both, GB."""
    outs = [folder / f"out {number}" for number in range(rounds)]
    commands = [[meshlure(), "report", str(folder / "bait.toml"), "--no-page", "--out", str(out)] for out in outs]
    # A report that finds a fault ends with 1 and has done the same work.
    sides = taking_turns(commands, script("plain.py", str(folder)), (0, 1))
    tree = json.loads((outs[-1] / "results.json").read_text(encoding="utf-8"))
    plain = json.loads(sides[1][-1].output)
    words, same = compared(tree, plain)
    elapsed = " and ".join(f"{statistics.median(run.elapsed for run in side):.1f} s" for side in sides)
    what = f"whole report / plain script with {plain['slices']} slices"
    figure = Figure(what, seconds(sides[0]), seconds(sides[1]), 10, True, f"elapsed {elapsed}; {words}", same)
    return figure, [max(run.peak for run in side) for side in sides]


def main() -> int:
    parser = argparse.ArgumentParser(description=(__doc__ or "").splitlines()[0])
    parser.add_argument("--triangles", type=int, default=1_000_000, help="of the body")
    parser.add_argument("--rounds", type=int, default=9, help="turns that each kernel takes")
    parser.add_argument("--whole", type=int, default=3, help="turns of the whole report; 0 leaves it out")
    chosen = parser.parse_args()
    core = to_one_core()
    print(
        f"{'all cores' if core is None else f'one core ({core})'}, processor time, medians of {chosen.rounds} turns, "
        f"of the whole report {chosen.whole}"
    )
    print(f"Python {platform.python_version()}, {', '.join(f'{name} {version(name)}' for name in LIBRARIES)}\n")
    print(heading())
    met = []
    # The whole report comes first: a child's peak memory counts what its parent held when it was started.
    if chosen.whole:
        with tempfile.TemporaryDirectory(prefix="meshlure speed ") as name:
            ended_well(script("lofted.py", name, str(chosen.triangles)))
            figure, peaks = whole(Path(name), chosen.whole)
        fits = peaks[0] < MEMORY
        print(figure.line())
        print(
            f"{'peak memory of the same two':{WIDTH}}{peaks[0]:7.2f} GB {peaks[1]:7.2f} GB {'':8} "
            f"{f'< {MEMORY:g} GB':>7}  {'met' if fits else 'MISSED'}",
            flush=True,
        )
        met += [figure.met, fits]
    run = ended_well(script("kernels.py", str(chosen.triangles), str(chosen.rounds)))
    *rows, body = (json.loads(line) for line in run.output.splitlines())
    for figure in [started(chosen.rounds), *(Figure(**row) for row in rows)]:
        print(figure.line())
        met.append(figure.met)
    print(
        f"\nBody of {body['triangles']:,} triangles. Peak memory of the kernels together with the libraries "
        f"{body['peak_gb']:.2f} GB."
    )
    print("All bars met." if all(met) else "A bar is MISSED.")
    return 0 if all(met) else 1


if __name__ == "__main__":
    sys.exit(main())
