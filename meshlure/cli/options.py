"""The options and arguments that several commands take, and what they ask of each other."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from meshlure.errors import Fault, InputError

BaitPath = Annotated[Path, typer.Argument(metavar="BAIT.toml", help="Bait file.")]

Out = Annotated[
    Path | None,
    typer.Option("--out", metavar="DIR", help="Folder to write; absent, empty, or from an earlier run."),
]

NoPage = Annotated[bool, typer.Option("--no-page", help="Write results.json, but no report.html.")]

AsJson = Annotated[bool, typer.Option("--json", help="Print the results; --out may then be left out.")]

Debug = Annotated[bool, typer.Option("--debug", help="On a fault of ours, print where it happened.")]
"""Read by the entry, which every command shares."""

Largest = Annotated[
    str | None,
    typer.Option("--largest", metavar="SIZE", help='Greatest mesh to read, "2 GB"; 500 MB unasked.'),
]


def check_out(out: Path | None, *, needed: bool, needing: str = "") -> None:
    """Refuse a run that would have nowhere to write to, or whose folder cannot be written.

    Parameters
    ----------
    out : Path or None
        What --out says.
    needed : bool
        Whether nothing would be told without it: neither --json prints the results, nor does the terminal show them.
    needing : str
        What writes more than the results and so needs a folder, as "--cut writes meshes"; empty for nothing.

    Raises
    ------
    InputError
    """
    if out is None and needed:
        raise InputError(
            Fault("there is nowhere to write to", "--out", "nothing", "a folder", "add --out DIR, or --json")
        )
    if out is None and needing:
        raise InputError(Fault(f"{needing} and needs a folder", "--out", "nothing", "a folder", "add --out DIR"))
    if out is not None:
        from meshlure.files.folder import check_folder

        check_folder(out)


def most_bytes(largest: str | None) -> int:
    """Bytes beyond which a mesh is not read, as the option says it.

    Raises
    ------
    InputError
        It is no size.
    """
    from meshlure.files.source import LARGEST, size_in_bytes

    return LARGEST if largest is None else size_in_bytes(largest, "--largest")
