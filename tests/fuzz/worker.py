"""The process that is fed: one changed file after another, each laid down before it is tried."""

from __future__ import annotations

import json
import random
import resource
import sys
import time
import traceback
from pathlib import Path
from typing import Final

sys.path.insert(0, str(Path(__file__).parents[1]))

from fuzz.mutations import TEXTS, changed
from fuzz.seeds import KINDS, QUICK, baits, meshes
from fuzz.target import fed, prepared

MEMORY: Final = 4_000_000_000
"""Bytes of address space, libraries and all."""
_KEPT: Final = 300
"""Files of a format that are changed further because something new came of them."""
_TURNS: Final = (*KINDS, "stl", "3mf", "glb", *("bait",) * 5, "quick")


def quick(lot: random.Random) -> bytes:
    """Options of the quick form, some of them changed."""
    options = dict(QUICK)
    for _ in range(lot.choice((1, 1, 2, 4))):
        option = lot.choice(list(QUICK))
        options[option] = ("weight.stl=" if option == "--insert" else "") + lot.choice((*TEXTS, *QUICK.values()))
    for option in lot.choice((("--density",), ("--material",), ("--insert", "--material"), ())):
        options.pop(option, None)
    return json.dumps({key: value for key, value in options.items() if "\0" not in value}).encode()


def main(folder: Path, seed: int, ends: float) -> None:
    """Feed files until a time; every case is named on stdout before it is tried, with what came of it."""
    resource.setrlimit(resource.RLIMIT_AS, (MEMORY, MEMORY))
    prepared(folder)
    lot = random.Random(seed)
    pool = meshes() | {"bait": list(baits())}
    began = {kind: len(files) for kind, files in pool.items()}
    seen: set[str] = set()
    while time.time() < ends:
        kind = lot.choice(_TURNS)
        data = quick(lot) if kind == "quick" else changed(kind, lot.choice(pool[kind]), pool[kind], lot)
        case, own = folder / "case", lot.randrange(1 << 30)
        case.write_bytes(data)
        print(json.dumps(["try", kind, own]), flush=True)
        start = time.perf_counter()
        try:
            outcome = fed(kind, data, folder, random.Random(own))
        except Exception as error:
            rows = traceback.extract_tb(error.__traceback__)
            ours = [row for row in rows if "meshlure" in row.filename] or rows
            place = f"{Path(ours[-1].filename).name}:{ours[-1].lineno}"
            kept = case.rename(folder / f"wrong-{own}")  # the next case has its name
            said = ["wrong", f"{type(error).__name__} at {place}", traceback.format_exc(), str(kept)]
            print(json.dumps(said), flush=True)
            continue
        seconds = time.perf_counter() - start
        new = outcome not in seen
        seen.add(outcome)
        if new and kind != "quick" and len(pool[kind]) < began[kind] + _KEPT:
            pool[kind].append(data)
        print(json.dumps(["done", f"{kind}: {outcome}", seconds]), flush=True)


if __name__ == "__main__":
    main(Path(sys.argv[1]), int(sys.argv[2]), float(sys.argv[3]))
