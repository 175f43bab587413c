"""ASCII STL: every solid of the file, and the line at which one goes wrong."""

from __future__ import annotations

import re
from array import array
from typing import Final

import numpy as np

from meshlure.errors import Fault, InputError
from meshlure.files.several import several
from meshlure.files.triangles import Part, Triangles, in_metres
from meshlure.geometry.surface import Floats

_CORNER: Final = rb"\s+vertex\s+([^\s_]+)\s+([^\s_]+)\s+([^\s_]+)"
_FACET: Final = re.compile(
    rb"\s*facet\s+normal\s+\S+\s+\S+\s+\S+\s+outer\s+loop" + 3 * _CORNER + rb"\s+endloop\s+endfacet(?=\s|\Z)",
    re.IGNORECASE,
)
_END: Final = re.compile(rb"\s*end[ \t]*solid\b[^\n]*(?:\n|\Z)", re.IGNORECASE)
_BEGIN: Final = re.compile(rb"\s*solid\b([^\n]*)(?:\n|\Z)", re.IGNORECASE)
_LONGEST: Final = 4000
"""Bytes of a line that are looked at: what follows is no part of three numbers."""
_LINES = ("outer loop", "vertex", "vertex", "vertex", "endloop", "endfacet")


def read_ascii(data: bytes, metres: float, where: str) -> Triangles:
    """Triangles of all solids of an ASCII STL, in m.

    Parameters
    ----------
    data : bytes
        The whole file, beginning with ``solid``.
    metres : float, m
        Length of the file's unit.
    where : str
        The file, for messages.

    Raises
    ------
    InputError
        A line is not what the format wants there (the line is named), the file is cut off or holds no faces.

    Notes
    -----
    The solids of a file are one mesh here; more than one is said in a note. Corners are rounded to 32-bit numbers, as
    in a binary STL, so that corners written with differing digits are equal where those are. What stands for a normal
    is passed over.
    """
    text = data.replace(b"\r\n", b"\n").replace(b"\r", b"\n")
    found = _solids(text)
    if found is None:
        raise InputError(_fault(data, where) or _unread(where, "lines that do not follow each other as they should"))
    exact, parts = found
    if not len(exact):
        raise InputError(
            Fault(
                "the STL holds no faces",
                where,
                "no 'facet' line",
                next_step="export the part again, with its solid selected",
            )
        )
    in_metres(exact, metres, where)  # before the rounding, which makes large numbers infinite
    corners = in_metres(exact.astype(np.float32), metres, where)
    return Triangles(corners, several(parts, "solids"), tuple(parts) if len(parts) > 1 else ())


def _solids(text: bytes) -> tuple[Floats, list[Part]] | None:
    """Corners of all solids, (m, 3, 3), and the solids; None where something stands in a wrong place."""
    corners = array("d")
    parts: list[Part] = []
    at, end = 0, len(text.rstrip())
    while at < end:
        begin = _BEGIN.match(text, at)
        if begin is None:
            return None
        at, before = begin.end(), len(corners)
        while facet := _FACET.match(text, at):
            try:
                corners.extend(map(float, facet.groups()))
            except ValueError:
                return None
            at = facet.end()
        stop = _END.match(text, at)
        if stop is None:
            return None
        at = stop.end()
        name = begin[1].strip().decode("utf-8", "replace")
        parts.append(Part(name, (len(corners) - before) // 9))
    return np.array(corners, dtype=np.float64).reshape(-1, 3, 3), parts


def _unread(where: str, reason: str) -> Fault:
    return Fault("the ASCII STL cannot be read", where, reason, next_step="export the part as binary STL")


def _fault(data: bytes, where: str) -> Fault | None:
    """First line that is not what the format wants there, None where all are."""
    expected: tuple[str, ...] = ("solid",)
    lines = data.splitlines()
    last = max((number for number, raw in enumerate(lines, 1) if raw.strip()), default=0)
    for number, raw in enumerate(lines, 1):
        line = raw[:_LONGEST].decode("utf-8", "replace").strip()
        words = line.lower().split()
        if not words:
            continue
        wanted = "facet normal" if expected[0] == "facet normal" and words[0] == "facet" else expected[0]
        if words[0] in {"endsolid", "end"} and wanted == "facet normal":
            expected = ("solid",)
            continue
        keyword, numbers = wanted.split(), 3 if wanted in {"facet normal", "vertex"} else 0
        rest = words[len(keyword) :]
        # A normal may be anything: exporters write there what a division by nothing gave them.
        holds = len(rest) == numbers if wanted == "facet normal" else not numbers or _numbers(rest, numbers)
        if words[: len(keyword)] != keyword or not holds:
            shown = f"'{line[:60]}'"
            return Fault(
                "a line of the ASCII STL is not what the format wants there",
                f"{where}, line {number}",
                shown,
                f"'{wanted}{' x y z' if numbers else ''}'" + (" or 'endsolid'" if wanted == "facet normal" else ""),
                "the file was cut off here: export or copy it again"
                if number == last
                else "export the part again; numbers take a decimal point, and faces three corners",
            )
        expected = expected[1:] or ("facet normal",)
        if wanted == "facet normal":
            expected = (*_LINES, "facet normal")
        elif wanted == "solid":
            expected = ("facet normal",)
    if expected[0] != "solid":
        return Fault(
            "the ASCII STL ends before its 'endsolid'",
            f"{where}, line {last}",
            "the end of the file",
            f"'{expected[0]}'",
            "the file was cut off: export or copy it again",
        )
    return None


def _numbers(words: list[str], count: int) -> bool:
    try:
        return len([float(word) for word in words if "_" not in word]) == count
    except ValueError:
        return False
