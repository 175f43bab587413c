"""ASCII STL: every solid of the file, and the line at which one goes wrong."""

from __future__ import annotations

import io
import re

import numpy as np

from meshlure.errors import Fault, InputError
from meshlure.files.triangles import Triangles, in_metres
from meshlure.findings import Finding, Level

_FACET_LINE = re.compile(rb"^[ \t]*(?:end)?facet\b", re.MULTILINE | re.IGNORECASE)
_FACET = ("outer loop", "vertex", "vertex", "vertex", "endloop", "endfacet")


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
    in a binary STL, so that corners written with differing digits are equal where those are.
    """
    from stl import Mode
    from stl.mesh import Mesh

    # numpy-stl takes what follows the last endsolid for one more solid, and knows no line ends but these.
    text = data.replace(b"\r\n", b"\n").replace(b"\r", b"\n").strip() + b"\n"
    try:
        solids = [
            solid.vectors
            for solid in Mesh.from_multi_file(where, calculate_normals=False, fh=io.BytesIO(text), mode=Mode.ASCII)
        ]
    except (RuntimeError, ValueError, AssertionError) as error:
        raise InputError(_fault(data, where) or _unread(where, str(error))) from error
    count = sum(map(len, solids))
    # An endsolid inside a facet ends numpy-stl's reading without a word, and drops that facet.
    lines = len(_FACET_LINE.findall(text))
    if 2 * count != lines:
        raise InputError(_fault(data, where) or _unread(where, f"{count} faces in {lines} lines of facets"))
    if count == 0:
        raise InputError(
            Fault(
                "the STL holds no faces",
                where,
                "no 'facet' line",
                next_step="export the part again, with its solid selected",
            )
        )
    findings: tuple[Finding, ...] = ()
    if len(solids) > 1:
        sizes = ", ".join(f"{len(solid):,}" for solid in solids)
        message = f"The file holds {len(solids)} solids ({sizes} faces); they were read as one mesh."
        advice = "Export pieces of different density as files of their own."
        findings = (Finding("several-solids", Level.NOTE, message, count=len(solids), advice=advice),)
    return Triangles(in_metres(np.concatenate(solids), metres, where), findings)


def _unread(where: str, reason: str) -> Fault:
    return Fault("the ASCII STL cannot be read", where, reason, next_step="export the part as binary STL")


def _fault(data: bytes, where: str) -> Fault | None:
    """First line that is not what the format wants there, None where all are."""
    expected: tuple[str, ...] = ("solid",)
    lines = data.splitlines()
    last = max((number for number, raw in enumerate(lines, 1) if raw.strip()), default=0)
    for number, raw in enumerate(lines, 1):
        line = raw.decode("utf-8", "replace").strip()
        words = line.lower().split()
        if not words:
            continue
        wanted = "facet normal" if expected[0] == "facet normal" and words[0] == "facet" else expected[0]
        if words[0] in {"endsolid", "end"} and wanted == "facet normal":
            expected = ("solid",)
            continue
        keyword, numbers = wanted.split(), 3 if wanted in {"facet normal", "vertex"} else 0
        rest = words[len(keyword) :]
        if words[: len(keyword)] != keyword or (numbers and not _numbers(rest, numbers)):
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
            expected = (*_FACET, "facet normal")
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
        return len([float(word) for word in words]) == count
    except ValueError:
        return False
