"""`meshlure sheet`: the drawing to scale 1:1, to be printed and laid under the part."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path
from typing import TYPE_CHECKING, Final

from meshlure.cli.options import BaitPath, Debug, Largest, Out, most_bytes
from meshlure.cli.progress import phases
from meshlure.cli.terminal import answer
from meshlure.errors import Fault, InputError

if TYPE_CHECKING:
    from meshlure.results import Study

SHORT: Final = "Draw a bait 1:1 on A4, to be laid under the part."

HELP: Final = """Draw a bait 1:1 on A4, to be laid under the part.

Side, top and front on a millimetre grid, with inserts, hardware, centres, water, balls and measures from the nose:

\b
  meshlure sheet samples/minnow/minnow.toml --out out/sheet
  meshlure sheet samples/lipless/lipless.toml --out out/sheet

DIR gets sheet.pdf to print at 100 % (a long bait runs over several sheets, with the joins marked), sheet.svg, which
holds the whole drawing in one piece, and results.json.

Exit code: 0 done, 2 the input cannot be used, 3 a fault of ours.
"""

PDF, SVG = "sheet.pdf", "sheet.svg"


def sheet(
    bait: BaitPath,
    out: Out = None,
    largest: Largest = None,
    debug: Debug = False,
) -> None:
    """Draw a bait to scale."""
    del debug  # read by the entry, which every command shares
    if out is None:
        raise InputError(Fault("there is nowhere to write to", "--out", "nothing", "a folder", "add --out DIR"))
    from meshlure.files.folder import check_folder

    check_folder(out)
    most = most_bytes(largest)
    from meshlure.bait.loading import read_bait
    from meshlure.cli.writing import write_made
    from meshlure.examine import study

    counted = 0

    def make(folder: Path) -> tuple[Study, Sequence[str]]:
        nonlocal counted
        from meshlure.report.sheet import sheet as draw

        made = draw(found)
        counted = made.count
        (folder / PDF).write_bytes(made.pdf)
        (folder / SVG).write_bytes(made.svg)
        return found, (PDF, SVG)

    with phases() as said:
        said("reading the meshes")
        read = read_bait(bait, most)
        found = study(read, tell=said)
        said("drawing")
        written = write_made(out, page=False, make=make)
    sheets = "1 sheet" if counted == 1 else f"{counted} sheets"
    answer(
        str(written.results["name"]),
        f"  drawn    1:1 on {sheets} of A4, to be printed at 100 %",
        f"  written  {', '.join(['results.json', *written.results['files']])} in {out}",
    )
