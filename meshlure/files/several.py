"""The note on a file that holds several parts, and how many triangles may come out of a file."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Final

from meshlure.errors import Fault
from meshlure.files.source import size_text
from meshlure.files.triangles import Part
from meshlure.findings import Finding, Level

BYTES: Final = 50
"""Of one face in a binary STL: what the limit on a file's size comes to in triangles."""

_LISTED: Final = 10


def several(parts: Sequence[Part], kind: str) -> tuple[Finding, ...]:
    """Return the note that a file's parts were read as one mesh, none where it has one part.

    Parameters
    ----------
    parts : sequence of Part
    kind : str
        What the format calls them, in the plural.
    """
    if len(parts) < 2:
        return ()
    listed = ", ".join(f"{_named(part)}{part.triangles:,}" for part in parts[:_LISTED])
    more = f" and {len(parts) - _LISTED:,} more" if len(parts) > _LISTED else ""
    message = f"The file holds {len(parts):,} {kind} ({listed} faces{more}); they were read as one mesh."
    advice = "Export pieces of different density as files of their own."
    return (Finding("several-solids", Level.NOTE, message, count=len(parts), advice=advice),)


def _named(part: Part) -> str:
    shown = "".join(c if c.isprintable() else " " for c in part.name).strip()[:40]
    return f"'{shown}' " if shown else ""


def too_many(count: int, largest: int, where: str) -> Fault | None:
    """Return the fault of a file out of which more triangles come than its limit allows, None where they do not.

    Parameters
    ----------
    count : int
        Triangles.
    largest : int
        Bytes that may be read.
    where : str
        The file.
    """
    most = largest // BYTES
    if count <= most:
        return None
    return Fault(
        "more comes out of the file than is read",
        where,
        f"{count:,} triangles",
        f"up to {most:,} triangles, as many as a binary STL of {size_text(largest)} holds",
        f'if that is meant, raise the limit: --largest "{size_text(2 * BYTES * count)}"',
    )
