"""STL files: which of the two formats one is, the binary one, and writing."""

from __future__ import annotations

import codecs
from pathlib import Path

import numpy as np

from meshlure.errors import Fault, InputError
from meshlure.files.asciistl import read_ascii
from meshlure.files.triangles import Triangles, in_metres
from meshlure.findings import Finding, Level
from meshlure.geometry.surface import Surface

HEADER = 80
START = HEADER + 4
RECORD = 50
"""Bytes: the header, the header with the face count, one face."""

_AGAIN = "export the part again, and compare the copy's size with the original's"


def read_stl(data: bytes, metres: float, where: str) -> Triangles:
    """Triangles of a binary or ASCII STL file, in m.

    Parameters
    ----------
    data : bytes
        The whole file.
    metres : float, m
        Length of the file's unit.
    where : str
        The file, for messages.

    Raises
    ------
    InputError
        The file is no STL, is cut off, holds no faces, or holds a coordinate that is no finite number.

    Notes
    -----
    A binary STL is 84 + 50 n bytes long, n being the count of faces after the header of 80 bytes. A file of just that
    size is binary even if it begins with ``solid``, as many exporters write there; the beginning decides only where the
    size does not. The normals in the file are not used: the order of the corners says which side is out.
    """
    count = int.from_bytes(data[HEADER:START], "little")
    sized = len(data) == START + RECORD * count
    if not sized and is_text(data):
        text = data.removeprefix(codecs.BOM_UTF8)
        if text.lstrip().lower().startswith(b"solid"):
            return read_ascii(text, metres, where)
        raise InputError(
            Fault(
                "this is a text file, no STL",
                where,
                f"it begins with {_beginning(data)}",
                "an ASCII STL begins with 'solid'; a binary one is no text",
                "name the mesh itself; a text of another format does not become an STL by its suffix",
            )
        )
    return _read_binary(data, count, metres, where)


def is_text(data: bytes) -> bool:
    """Tell whether the first kilobytes of a file hold no control characters that a text has no use for."""
    return not data[:4096].translate(None, delete=bytes({*range(9, 14), *range(32, 256)}))


def _beginning(data: bytes) -> str:
    return repr(data[:40].decode("utf-8", "replace"))


def _read_binary(data: bytes, count: int, metres: float, where: str) -> Triangles:
    findings = _sized(len(data), count, where)
    if count == 0:
        raise InputError(Fault("the STL holds no faces", where, "a face count of 0", next_step=_AGAIN))
    # Imported here so that a command that reads no STL does not pay for it.
    from stl.mesh import Mesh

    # numpy-stl's record laid over the bytes where they are; its normals and areas cost more than the reading.
    records = np.frombuffer(data, dtype=Mesh.dtype, count=count, offset=START)
    return Triangles(in_metres(Mesh(records, calculate_normals=False).vectors, metres, where), findings)


def _sized(size: int, count: int, where: str) -> tuple[Finding, ...]:
    """Hold a binary file's size against its face count; less than a face too much is a note, all else a fault."""
    if size < START:
        raise InputError(
            Fault("the file is too short for an STL", where, f"{size} bytes", f"at least {START} bytes", _AGAIN)
        )
    due = START + RECORD * count
    whole, rest = divmod(size - START, RECORD)
    if size < due:
        cut = f"between faces {whole} and {whole + 1}" if rest == 0 else f"inside face {whole + 1}"
        raise InputError(
            Fault(
                f"the binary STL is cut off {cut}, or it is no STL",
                where,
                f"{size:,} bytes, room for {whole:,} whole faces",
                f"{due:,} bytes for the {count:,} faces that its header counts",
                _AGAIN,
            )
        )
    if size - due >= RECORD:
        raise InputError(
            Fault(
                "the binary STL holds more than its header counts",
                where,
                f"{size:,} bytes, room for {whole:,} faces",
                f"{due:,} bytes for the {count:,} faces that its header counts",
                "export the part again; which of the faces belong to it cannot be told",
            )
        )
    if size > due:
        text = f"{size - due} bytes after the last face were not read; they are too few for another face."
        return (Finding("trailing-bytes", Level.NOTE, text, count=size - due),)
    return ()


def stl_bytes(surface: Surface) -> bytes:
    """Binary STL of a surface, in mm.

    Raises
    ------
    ValueError
        A coordinate in mm is beyond what the format's 32-bit numbers hold.

    Notes
    -----
    The corners are rounded to 32-bit numbers: 4 micrometres in 100 mm at worst is a hundred times what that loses. The
    header says the unit, since the format has no place for it, and does not begin with ``solid``.
    """
    from stl.mesh import Mesh

    records = np.zeros(len(surface.faces), dtype=Mesh.dtype)
    with np.errstate(over="ignore"):
        records["vectors"] = surface.corners * 1e3
    if not np.isfinite(records["vectors"]).all():
        raise ValueError("a coordinate does not fit the 32-bit numbers of an STL")
    # Unit normals as the format asks; a face without area has none, and gets zeros.
    normals = surface.double_areas
    lengths = np.linalg.norm(normals, axis=1, keepdims=True)
    records["normals"] = np.divide(normals, lengths, out=np.zeros_like(normals), where=lengths > 0)
    header = f"meshlure mm, {len(records)} faces".encode().ljust(HEADER)
    return header + len(records).to_bytes(4, "little") + records.tobytes()


def write_stl(path: Path, surface: Surface) -> None:
    """Write a surface as binary STL in mm, in the surface's own coordinates.

    Raises
    ------
    ValueError
        As `stl_bytes`.
    OSError
        The file cannot be written.
    """
    path.write_bytes(stl_bytes(surface))
