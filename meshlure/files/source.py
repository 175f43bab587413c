"""The bytes of a file that the user named, or why they cannot be had."""

from __future__ import annotations

import re
import sys
from pathlib import Path
from typing import Final

from meshlure.errors import Fault, InputError
from meshlure.files.nearness import nearest

LARGEST: Final = 500_000_000
"""Bytes. A file larger than this is not read unless it is asked for: ten million faces of a binary STL."""

ALL: Final = sys.maxsize
"""Bytes. For files that we wrote ourselves, from meshes that were allowed."""

_AT_ONCE: Final = 1 << 28
"""Bytes read at a time; most meshes come in one piece, which is then not copied."""

_SIZES: Final = {"b": 1, "kb": 10**3, "mb": 10**6, "gb": 10**9, "kib": 2**10, "mib": 2**20, "gib": 2**30}
_SIZE: Final = re.compile(r"\s*(\d+(?:\.\d+)?)\s*([kmg]?i?b)\s*", re.IGNORECASE)


def size_in_bytes(text: str, where: str) -> int:
    """Return the bytes of a size as people write it, such as "2 GB" (1000 MB) or "2 GiB" (1024 MiB).

    Raises
    ------
    InputError
        It is no size, or not positive.
    """
    match = _SIZE.fullmatch(text)
    size = int(float(match[1]) * _SIZES[match[2].lower()]) if match and match[2].lower() in _SIZES else 0
    if size <= 0:
        raise InputError(
            Fault("this is no size of a file", where, text, "a number with B, kB, MB or GB", 'write "2 GB"')
        )
    return size


def size_text(size: int) -> str:
    """Return a size in bytes as people say it."""
    for unit, factor in (("GB", 10**9), ("MB", 10**6), ("kB", 10**3)):
        if size >= factor:
            return f"{size / factor:.3g} {unit}" if size < 1000 * factor else f"{size / factor:,.0f} {unit}"
    return f"{size} bytes"


def read_source(path: Path, kind: str, where: str = "", largest: int = LARGEST) -> bytes:
    """Bytes of a file named by the user, all of them.

    Parameters
    ----------
    path : Path
        The file.
    kind : str
        What it should be, for the message: "mesh", "bait file".
    where : str
        Where the file was named, when that was in another file: "bait.toml: body.mesh".
    largest : int
        Bytes; of a larger file no more than its size is looked at.

    Raises
    ------
    InputError
        It is missing (the message offers files of nearly that name), a folder, no regular file, unreadable, empty or
        larger than that.
    """
    place = f"{where}: {path}" if where else str(path)
    try:
        if path.is_dir():
            raise InputError(
                Fault(f"the {kind} is a folder", place, allowed="a file", next_step="name the file in the folder")
            )
        if path.exists() and not path.is_file():
            step = "write what comes out of it into a file, and name that"
            raise InputError(Fault(f"the {kind} is a device or a pipe", place, "", "a file on disk", step))
        size = path.stat().st_size
        # A file may grow, and some report no size: so it is read to its end, but no further than is allowed.
        data = None if size > largest else _up_to(path, largest)
    except FileNotFoundError:
        raise InputError(_missing(path, kind, place)) from None
    except NotADirectoryError:
        raise InputError(Fault(f"the {kind} is not there", place, next_step=_first_gap(path))) from None
    except PermissionError:
        raise InputError(
            Fault(f"the {kind} may not be read", place, next_step="ask its owner for the right to read it, or copy it")
        ) from None
    except (OSError, ValueError) as error:
        # ValueError: a NUL character in the name.
        reason = error.strerror if isinstance(error, OSError) and error.strerror else str(error)
        raise InputError(
            Fault(f"the {kind} cannot be read", place, found=reason, next_step="check the path")
        ) from error
    if data is None:
        found = size_text(size) if size > largest else f"more than {size_text(largest)}"
        raise InputError(
            Fault(
                f"the {kind} is larger than is read",
                place,
                found,
                f"up to {size_text(largest)}",
                f'export it coarser, or raise the limit: --largest "{size_text(2 * max(size, largest))}"',
            )
        )
    if not data:
        raise InputError(
            Fault(
                f"the {kind} is empty",
                place,
                found="0 bytes",
                next_step="export or save it again; the disk may have been full",
            )
        )
    return data


def _up_to(path: Path, largest: int) -> bytes | None:
    """Bytes of a file, None where they are more than that."""
    pieces, left = [], largest
    with path.open("rb") as file:
        while piece := file.read(min(left, _AT_ONCE) + 1):
            pieces.append(piece)
            left -= len(piece)
            if left < 0:
                return None
    return pieces[0] if len(pieces) == 1 else b"".join(pieces)


def _missing(path: Path, kind: str, place: str) -> Fault:
    folder = path.parent
    if not folder.is_dir():
        return Fault(f"the {kind} is not there", place, next_step=_first_gap(path))
    try:
        names = sorted(entry.name for entry in folder.iterdir() if entry.is_file())
    except OSError:
        names = []  # a folder that may be entered but not listed: there is nothing to offer
    # Stems are compared, for the suffix alone would make strangers alike. The same stem under another suffix is the
    # commonest slip: body.stl asked for, body.obj there.
    stems = nearest(path.stem, [Path(name).stem for name in names])
    near = [name for stem in stems for name in names if Path(name).stem == stem][:3]
    if near:
        return Fault(f"the {kind} is not there", place, next_step=f"did you mean {' or '.join(map(repr, near))}?")
    return Fault(f"the {kind} is not there", place, next_step=f"check the name; nothing in {folder} reads like it")


def _first_gap(path: Path) -> str:
    """Name the first part of a path that is not a folder."""
    for parent in reversed(path.parents):
        if not parent.is_dir():
            return f"check the path: {parent} is no folder"
    return "check the path"
