"""`meshlure balance`: the ballast for a target, placed, cut and written."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated, Final

import typer

from meshlure.cli.options import AsJson, BaitPath, Debug, Largest, NoPage, Out, check_out, most_bytes
from meshlure.cli.progress import phases
from meshlure.cli.terminal import answer, hand_on
from meshlure.errors import Fault, InputError

if TYPE_CHECKING:
    from meshlure.results.study import Study

SHORT: Final = "Find the ballast that makes a bait rest as wanted, and write the meshes."

HELP: Final = """Find the ballast that makes a bait rest as wanted, and write the meshes to make it.

The bait file's [target] says how the bait is to rest, its [ballast] what may be used and where:

\b
  meshlure balance samples/minnow/minnow.toml --out out/balanced

Inserts marked free = true are replaced. Without a search, ballast goes exactly where you say:

\b
  meshlure balance bait.toml --ballast "lead rod 5 mm x 18 mm at 41,0,-6" --out out/balanced

Exit code: 0 what is written meets the target, 1 it does not (the nearest is written), 2 the input cannot be used.
"""


def balance(
    bait: BaitPath,
    out: Out = None,
    take: Annotated[int, typer.Option("--take", metavar="N", help="Which of the ways to write; 1 is the best.")] = 1,
    ballast: Annotated[
        str | None,
        typer.Option("--ballast", metavar="WORDS", help="No search: what lies where, its middle in CAD coordinates."),
    ] = None,
    halves: Annotated[
        bool, typer.Option("--halves", help="Also write the body's left and right halves, with holes for pins.")
    ] = False,
    no_page: NoPage = False,
    json: AsJson = False,
    largest: Largest = None,
    debug: Debug = False,
) -> None:
    """Balance a bait."""
    del debug  # read by the entry, which every command shares
    check_out(out, needed=not json, needing="--halves writes meshes" if halves else "")
    if take != 1 and ballast is not None:
        raise InputError(
            Fault("--take chooses among ways found; --ballast states one", "--take", str(take), "", "leave one out")
        )
    most = most_bytes(largest)
    from meshlure.bait.loading import read_bait
    from meshlure.balancing import finding

    written: Study | None = None
    with phases() as said:
        said("reading the meshes")
        read = read_bait(bait, most)
        found = finding.balance(read, take, said) if ballast is None else finding.place(read, ballast, said)
        if out is not None:
            from meshlure.cli.writing import write_made

            folder = out
            written = write_made(
                folder, page=not no_page, make=lambda staging: found.make(staging, folder, halves, said)
            )
    if written is None:
        from meshlure.results.jsontext import json_text

        hand_on(json_text({"balance": found.account}))
    elif json:
        hand_on(written.to_json())
    else:
        from meshlure.cli.ways import balance_lines

        answer(*balance_lines(written.results, folder))
    if not found.met:
        raise typer.Exit(1)
