"""`meshlure compare`: baits held against each other."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Annotated, Final

import typer

from meshlure.cli.options import AsJson, Debug, Largest, Out, check_out, most_bytes
from meshlure.cli.progress import phases
from meshlure.cli.terminal import answer, hand_on
from meshlure.errors import Fault, InputError

if TYPE_CHECKING:
    from meshlure.files.baitfile import BaitFile

SHORT: Final = "Hold baits against each other: what differs, and what counts."

HELP: Final = """Hold baits against each other: what differs, and which differences count.

The others are held against the first, in its water, throw and retrieve. Writes results.json and compare.html, with
their outlines laid over each other:

\b
  meshlure compare samples/minnow/minnow.toml samples/stick/stick.toml --out out/compared

Or only the table, each in the water and throw of its own file:

\b
  meshlure compare samples/minnow/minnow.toml samples/minnow/minnow_coarse.toml --as-stated

Exit code: 0 done, 1 done but a fault was found in one of them, 2 the input cannot be used.
"""

PAGE: Final = "compare.html"


def compare(
    baits: Annotated[list[Path], typer.Argument(metavar="BAIT.toml ...", help="Bait files, two to eight.")],
    out: Out = None,
    as_stated: Annotated[
        bool, typer.Option("--as-stated", help="Leave each in the water, throw and retrieve of its own file.")
    ] = False,
    no_page: Annotated[bool, typer.Option("--no-page", help="Write results.json, but no compare.html.")] = False,
    json: AsJson = False,
    largest: Largest = None,
    debug: Debug = False,
) -> None:
    """Compare baits."""
    del debug  # read by the entry, which every command shares
    if len(baits) < 2:
        raise InputError(
            Fault(
                "there is nothing to hold it against",
                "meshlure compare",
                str(baits[0]),
                "two to eight baits",
                "name another",
            )
        )
    check_out(out, needed=False)
    most = most_bytes(largest)
    plans = _plans(baits)
    from meshlure.comparing import compare as compared

    with phases() as said:
        found = compared(plans, as_stated, said, most)
        study = found.study
        if out is not None:
            from meshlure.cli.writing import write_page
            from meshlure.report.comparison import page

            said("writing the page" if not no_page else "writing")
            draw = None if no_page else lambda: page(study, found.studies, found.tips)
            study = write_page(study, out, PAGE, draw)
    if json:
        hand_on(study.to_json())
    else:
        from meshlure.cli.differences import comparison_lines

        answer(*comparison_lines(study.results, out))
    if any(bait["faults"] for bait in study.results["comparison"]["baits"]):
        raise typer.Exit(1)


def _plans(baits: list[Path]) -> list[BaitFile]:
    """Return the baits as their files have them, all faults of all files at once."""
    from meshlure.files.baitfile import read_baitfile

    plans, faults = [], []
    for bait in baits:
        if bait.suffix.casefold() != ".toml":
            step = "write a bait file for it: meshlure new" if bait.suffix else "name the bait file in it"
            faults.append(
                Fault("only bait files are compared", str(bait), repr(bait.suffix), "a file that ends in .toml", step)
            )
            continue
        try:
            plans.append(read_baitfile(bait))
        except InputError as error:
            faults += error.faults
    if faults:
        raise InputError(faults)
    return plans
