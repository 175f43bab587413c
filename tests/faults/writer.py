"""Write a result as the commands do, with nothing worked out for it: `python tests/faults/writer.py AGE`."""

from __future__ import annotations

import json
import sys
from pathlib import Path

from meshlure.cli.terminal import complain
from meshlure.errors import InputError
from meshlure.files.folder import write_folder

FILES = [f"part-{number}.stl" for number in range(12)]


def main(age: str) -> int:
    listing = {"tool": {"name": "meshlure"}, "run": age, "files": FILES}
    files = {name: f"{age} {name} ".encode() * 10_000 for name in FILES}
    try:
        write_folder(Path("out"), files | {"results.json": json.dumps(listing).encode()})
    except InputError as error:
        complain(error.faults)
        return 2
    return 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1]))
