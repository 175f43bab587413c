"""The greatest file that a command reads: the option that raises it, the same in every command."""

from __future__ import annotations

from typing import Annotated

import typer

Largest = Annotated[
    str | None,
    typer.Option("--largest", metavar="SIZE", help='Greatest mesh to read, "2 GB"; 500 MB unasked.'),
]
"""Of a command's option."""


def most_bytes(largest: str | None) -> int:
    """Bytes beyond which a mesh is not read, as the option says it.

    Raises
    ------
    InputError
        It is no size.
    """
    from meshlure.files.source import LARGEST, size_in_bytes

    return LARGEST if largest is None else size_in_bytes(largest, "--largest")
