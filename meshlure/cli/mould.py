"""`meshlure mould`: from a bait file to the boards that silicone is poured over."""

from __future__ import annotations

from typing import Annotated, Final

import typer

from meshlure.cli.options import AsJson, BaitPath, Debug, Largest, NoPage, Out, check_out, most_bytes
from meshlure.cli.progress import phases
from meshlure.cli.terminal import answer, hand_on
from meshlure.errors import Fault, InputError

SHORT: Final = "Make the boards to mould a bait from, and study how it parts."

HELP: Final = """Make the boards to mould a bait from, and study how it parts.

Each of two boards carries half of the scaled body standing proud, with sprue, vents and keys, for silicone to be
poured over. The bait file's [mould] says how; without one, common practice is taken:

\b
  meshlure mould samples/stick/stick.toml --out out/mould

Or only the scaled master, with a tab to hang it by:

\b
  meshlure mould samples/stick/stick.toml --master --tab --out out/master

Exit code: 0 done, 1 done but a fault was found, 2 the input cannot be used, 3 a fault of ours.
"""


def mould(
    bait: BaitPath,
    out: Out = None,
    one_piece: Annotated[
        bool, typer.Option("--one-piece", help="A single open mould, for a part with a flat back.")
    ] = False,
    master: Annotated[bool, typer.Option("--master", help="Only the scaled master, no boards.")] = False,
    tab: Annotated[bool, typer.Option("--tab", help="With --master: add a tab with a hole to hang it by.")] = False,
    no_page: NoPage = False,
    json: AsJson = False,
    largest: Largest = None,
    debug: Debug = False,
) -> None:
    """Make a mould."""
    del debug  # read by the entry, which every command shares
    check_out(out, needed=not json)
    if one_piece and master:
        raise InputError(
            Fault("only one of these can be made", "mould", "--one-piece, --master", "one of them", "leave one out")
        )
    if tab and not master:
        raise InputError(Fault("a tab belongs to a master", "--tab", "no --master", "--master --tab", "add --master"))
    most = most_bytes(largest)
    from meshlure.bait.loading import read_bait
    from meshlure.making.mould.design import Kind
    from meshlure.moulding import mould as design
    from meshlure.moulding import write

    kind = Kind.ONE_PIECE if one_piece else Kind.MASTER if master else Kind.HALVES
    with phases() as said:
        said("reading the meshes")
        made = design(read_bait(bait, most), kind, tab, said)
        found = made.study
        if out is not None:
            from meshlure.cli.writing import write_made

            said("writing")
            found = write_made(out, page=not no_page, make=lambda folder: write(made, folder))
    if json:
        hand_on(found.to_json())
    else:
        from meshlure.cli.castings import mould_lines

        answer(*mould_lines(found.results, out))
    if any(finding["level"] == "fault" for finding in found.results["findings"]):
        raise typer.Exit(1)
