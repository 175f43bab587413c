"""`meshlure chamber`: where a chamber for balls fits, what it does, and the meshes to make it; or a hollow body."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from pathlib import Path
from typing import TYPE_CHECKING, Annotated, Any, Final, Protocol

import typer

from meshlure.cli.options import AsJson, BaitPath, Debug, Largest, NoPage, Out, check_out, most_bytes
from meshlure.cli.progress import phases
from meshlure.cli.terminal import answer, hand_on, tell
from meshlure.errors import Fault, InputError

if TYPE_CHECKING:
    from meshlure.bait.pieces import Bait
    from meshlure.results.study import Study

SHORT: Final = "Find where a chamber for balls fits, and write the meshes; or make the body hollow."

HELP: Final = """Find where a chamber for balls fits and what it does, and write the meshes to make it.

The bait file's [chamber] says which balls may run in it, how thick its walls must be and how it is opened:

\b
  meshlure chamber samples/lipless/lipless.toml --out out/chambered

Every way is shown with what it shifts, how the bait rests and flies with the balls at either end, and what it does when
the chamber fills with water. A void marked free = true and the balls in it are replaced. With --hollow the body itself
becomes a shell, closed, or drained as by "wall 2 mm, drain 3 mm at 0,-8,30":

\b
  meshlure chamber samples/stick/stick.toml --hollow "wall 2 mm" --out out/hollow

Exit code: 0 done, 1 no bore fits (what nearly does is told), 2 the input cannot be used.
"""


class _Found(Protocol):
    @property
    def account(self) -> Mapping[str, Any]: ...
    @property
    def reachable(self) -> bool: ...
    def make(self, folder: Path, out: Path, tell: Callable[[str], None] = ...) -> tuple[Study, list[str]]: ...


def chamber(
    bait: BaitPath,
    out: Out = None,
    take: Annotated[int, typer.Option("--take", metavar="N", help="Which of the ways to write; 1 is the best.")] = 1,
    hollow: Annotated[
        str | None,
        typer.Option("--hollow", metavar="WORDS", help='No chamber: the body as a shell, "wall 1.6 mm".'),
    ] = None,
    no_page: NoPage = False,
    json: AsJson = False,
    largest: Largest = None,
    debug: Debug = False,
) -> None:
    """Chamber or hollow a bait."""
    del debug  # read by the entry, which every command shares
    check_out(out, needed=not json)
    if take != 1 and hollow is not None:
        raise InputError(
            Fault("--take chooses among bores; --hollow cuts none", "--take", str(take), "", "leave one out")
        )
    most = most_bytes(largest)
    written: Study | None = None
    with phases() as said:
        said("reading the meshes")
        from meshlure.bait.loading import read_bait

        found = _found(read_bait(bait, most), take, hollow, said)
        if out is not None:
            from meshlure.cli.writing import write_made

            written = write_made(out, page=not no_page, make=lambda folder: found.make(folder, out, said))
    if written is None:
        from meshlure.results.jsontext import json_text

        hand_on(json_text({"chamber" if hollow is None else "hollow": found.account}))
    elif json:
        hand_on(written.to_json())
    else:
        from meshlure.cli.bores import chamber_lines, hollow_lines

        answer(*(chamber_lines if hollow is None else hollow_lines)(written.results, out))
    if not found.reachable:
        if out is None:
            tell("no bore fits")
        raise typer.Exit(1)


def _found(bait: Bait, take: int, hollow: str | None, said: Callable[[str], None]) -> _Found:
    if hollow is not None:
        from meshlure.chambering.hollowing import hollowed

        return hollowed(bait, hollow, said)
    from meshlure.chambering import finding

    return finding.chamber(bait, take, said)
