"""`meshlure pour`: what a casting is mixed from, or what a print's walls and infill come to."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING, Annotated, Final

import typer

from meshlure.cli.completion import materials_begun
from meshlure.cli.options import AsJson, BaitPath, Debug, Largest, Out, check_out, most_bytes
from meshlure.cli.progress import phases
from meshlure.cli.terminal import answer, hand_on
from meshlure.errors import Fault, InputError

if TYPE_CHECKING:
    from meshlure.files.baitfile import BaitFile

SHORT: Final = "Resin, balloons and grams for a casting; walls and infill for a print."

HELP: Final = """Resin, balloons and grams for a casting; walls and infill for a print.

How many balloons give the body its density, what goes into the cups for some baits, how the bait lies if a batch is
3% off:

\b
  meshlure pour samples/minnow/minnow.toml --baits 6 --out out/pour

Or for a wanted mass of the whole bait, ready to fish:

\b
  meshlure pour bait.toml --mass "14 g" --json

Options stand in the place of the bait file's [pour]. DIR gets results.json and bench.html, a sheet for the bench.

Exit code: 0 done, 1 the density or mass cannot be reached (the nearest is told), 2 the input cannot be used.
"""


def pour(
    bait: BaitPath,
    out: Out = None,
    baits: Annotated[int | None, typer.Option("--baits", metavar="N", help="How many are poured at once.")] = None,
    waste: Annotated[
        str | None, typer.Option("--waste", metavar="SHARE", help='Mixed beyond what the baits take, "10 %".')
    ] = None,
    resin: Annotated[
        str | None,
        typer.Option(
            "--resin",
            metavar="NAME",
            autocompletion=materials_begun,
            help='A material, or its cured density, "1.05 g/cm3".',
        ),
    ] = None,
    balloons: Annotated[
        str | None,
        typer.Option(
            "--balloons",
            metavar="NAME",
            autocompletion=materials_begun,
            help='A material, or their density, "0.15 g/cm3".',
        ),
    ] = None,
    mass: Annotated[
        str | None, typer.Option("--mass", metavar="MASS", help='Wanted of the whole bait, ready to fish, "14 g".')
    ] = None,
    json: AsJson = False,
    largest: Largest = None,
    debug: Debug = False,
) -> None:
    """Work out a pour."""
    del debug  # read by the entry, which every command shares
    from meshlure.files.baitfile import read_baitfile

    stated = {"baits": baits, "waste": waste, "resin": resin, "balloons": balloons, "mass": mass}
    plan = _with(read_baitfile(bait), {key: value for key, value in stated.items() if value is not None})
    check_out(out, needed=False)
    most = most_bytes(largest)
    from meshlure.bait.loading import load
    from meshlure.pouring.study import pour as worked_out

    with phases() as said:
        said("reading the meshes")
        read = load(plan, largest=most)
        said("working out the pour")
        found = worked_out(read)
        if out is not None:
            from meshlure.cli.writing import write_bench

            said("writing the bench sheet")
            found = write_bench(found, out)
    if json:
        hand_on(found.to_json())
    else:
        from meshlure.cli.cups import pour_lines

        answer(*pour_lines(found.results, out))
    if any(finding["code"].endswith("-out-of-reach") for finding in found.results["findings"]):
        raise typer.Exit(1)


def _with(plan: BaitFile, options: dict[str, str | int]) -> BaitFile:
    """Return the bait with options in the place of the keys of its [pour].

    Raises
    ------
    InputError
        With every fault of the options, each with its own.
    """
    from meshlure.files.keys import Keys
    from meshlure.files.sections.pour import read_pour

    if not options:
        return plan
    section = plan.table.get("pour")
    faults: list[Fault] = []
    merged = read_pour(Keys({**(section if isinstance(section, dict) else {}), **options}, "pour", faults))
    if faults:
        raise InputError([replace(fault, where=fault.where.replace("pour.", "--", 1)) for fault in faults])
    return replace(plan, pour=merged)
