"""The bytes of a file that the user named, or why they cannot be had."""

from __future__ import annotations

from pathlib import Path

from meshlure.errors import Fault, InputError
from meshlure.files.nearness import nearest


def read_source(path: Path, kind: str, where: str = "") -> bytes:
    """Bytes of a file named by the user, all of them.

    Parameters
    ----------
    path : Path
        The file.
    kind : str
        What it should be, for the message: "mesh", "bait file".
    where : str
        Where the file was named, when that was in another file: "bait.toml: body.mesh".

    Raises
    ------
    InputError
        It is missing (the message offers files of nearly that name), a folder, no regular file, unreadable or empty.
    """
    place = f"{where}: {path}" if where else str(path)
    try:
        if path.is_dir():
            raise InputError(
                Fault(f"the {kind} is a folder", place, allowed="a file", next_step="name the file in the folder")
            )
        if path.exists() and not path.is_file():
            raise InputError(Fault(f"the {kind} is a device or a pipe", place, allowed="a file on disk"))
        data = path.read_bytes()
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
