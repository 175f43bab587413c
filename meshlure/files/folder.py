"""The output folder: whose it is, and how a run's result gets into it whole or not at all."""

from __future__ import annotations

import contextlib
import errno
import json
import os
import secrets
import shutil
from collections.abc import Callable, Iterator, Mapping
from pathlib import Path, PurePosixPath
from typing import Final

from meshlure.errors import Fault, InputError
from meshlure.files.exchange import locked, new_name, put, remove, settle, sync_tree

RESULTS: Final = "results.json"
TOOL: Final = "meshlure"

_FULL: Final = frozenset({errno.ENOSPC, errno.EDQUOT})
_UNNAMED: Final = _FULL | {errno.EFBIG, errno.EIO, errno.EROFS, errno.ESTALE}
"""What the system answers to writing into an open file; it does not say which one."""
_NAMED = 5
_ALLOWED: Final = "a folder that is absent, empty, or holds only what an earlier run wrote"


def check_folder(out: Path) -> None:
    """Refuse an output folder that a run may not write, before the run has cost anything.

    Raises
    ------
    InputError
        It is a file, a link that leads nowhere, a mount point, the folder one stands in, holds what no earlier run
        listed, or it or its parent may not be written.

    Notes
    -----
    Nothing is made and nothing is changed. `staged` checks the same again.
    """
    target = _resolved(out)
    _check_ours(target, out)
    try:
        parent = next(folder for folder in target.parents if folder.exists())
    except OSError as error:
        raise InputError(_refused(out, error, target.parent)) from error
    if not parent.is_dir():
        raise InputError(_parent_is_file(out, parent))
    # As the one that the process acts for, where the system tells these apart.
    if not os.access(parent, os.W_OK | os.X_OK, effective_ids=os.access in os.supports_effective_ids):
        raise InputError(_refused(out, PermissionError(errno.EACCES, os.strerror(errno.EACCES)), parent))


@contextlib.contextmanager
def staged(out: Path) -> Iterator[Path]:
    """Give a fresh folder to write a run's result into, which takes the output folder's place at the end.

    Parameters
    ----------
    out : Path
        The output folder; missing parents are made.

    Yields
    ------
    Path
        An empty folder beside ``out``, on the same file system. What is left in it when the block ends must hold
        ``results.json``, whose ``files`` lists every other file by its path in the folder.

    Raises
    ------
    InputError
        As `check_folder`; and where the disk is full or refuses in the block itself, or the folder is taken away. The
        earlier result is then whole, and nothing of the new one is left.
    RuntimeError
        The block left a file that results.json does not list, so that no later run could know it for ours.
    """
    target = _resolved(out)
    made: list[Path] = []
    staging = new_name(target, secrets.token_hex(4))
    begun = in_block = False
    try:
        _make_parents(target, out, made)
        with contextlib.ExitStack() as stack:
            with locked(target.parent, wait=True):
                settle(target, _is_ours)
                _check_ours(target, out)
                staging.mkdir()
                begun = True
                stack.enter_context(locked(staging, wait=False))
                if target.exists():
                    shutil.copymode(target, staging)
            in_block = True
            yield staging
            in_block = False
            _check_listed(staging)
            sync_tree(staging)
            with locked(target.parent, wait=True):
                put(staging, target, lambda replaced: _check_ours(replaced, out))
    except BaseException as error:
        gone = begun and not staging.exists()
        remove(staging)
        for folder in reversed(made):
            with contextlib.suppress(OSError):  # another run may have begun to use it
                folder.rmdir()
        if gone and isinstance(error, Exception):
            # Whatever the error says of itself: what it missed was taken from under it.
            raise InputError(_gone(out, target.parent)) from error
        if isinstance(error, OSError) and (not in_block or _is_about(error, staging)):
            raise InputError(_refused(out, error, target.parent)) from error
        raise


def write_folder(out: Path, files: Mapping[str, bytes | Callable[[Path], None]]) -> None:
    """Write files into the output folder, all or none.

    Parameters
    ----------
    out : Path
        The output folder.
    files : mapping
        By path in the folder, with forward slashes: the bytes, or a callable that writes the file it is given.
        ``results.json`` is one of them and lists the others.

    Raises
    ------
    InputError
        As `staged`.
    ValueError
        A path leads out of the folder.
    """
    with staged(out) as folder:
        for name, content in files.items():
            path = PurePosixPath(name)
            if path.is_absolute() or ".." in path.parts:
                raise ValueError(f"{name!r} leads out of the output folder")
            file = folder / path
            file.parent.mkdir(parents=True, exist_ok=True)
            if isinstance(content, bytes):
                file.write_bytes(content)
            else:
                content(file)


def foreign(folder: Path) -> tuple[str, ...]:
    """Entries of a folder that no run of ours listed, by their paths in it, sorted.

    Raises
    ------
    OSError
        A part of it cannot be looked at.
    """
    listed = _listed(folder)
    strange = []
    for place, folders, names in os.walk(folder, onerror=_raise):
        inside = Path(place).relative_to(folder)
        for name in names:
            path = inside / name
            if path.as_posix() not in listed or (folder / path).is_symlink():
                strange.append(path.as_posix())
        for name in folders:
            path = inside / name
            # A run makes folders for its files only, and never links.
            wanted = any(entry.startswith(f"{path.as_posix()}/") for entry in listed)
            if (folder / path).is_symlink() or not wanted:
                strange.append(f"{path.as_posix()}/")
        folders[:] = [name for name in folders if f"{(inside / name).as_posix()}/" not in strange]
    return tuple(sorted(strange))


def _listed(folder: Path) -> frozenset[str]:
    """Return what the folder's results.json lists, itself included; empty where there is none of ours."""
    try:
        results = json.loads((folder / RESULTS).read_bytes())
        files = results["files"]
        named = isinstance(files, list) and all(isinstance(name, str) for name in files)
        if results["tool"]["name"] != TOOL or not named:
            return frozenset()
    except (OSError, ValueError, LookupError, TypeError, RecursionError):
        return frozenset()  # not there, or not ours: then nothing in the folder is
    return frozenset({RESULTS, *files})


def _raise(error: OSError) -> None:
    raise error


def _is_ours(folder: Path) -> bool:
    try:
        return not foreign(folder)
    except OSError:
        return False


def _check_ours(folder: Path, out: Path) -> None:
    try:
        strange = foreign(folder) if folder.exists() else ()
    except FileNotFoundError:
        return  # gone while it was looked at: another run is at its second rename
    except OSError as error:
        raise InputError(_refused(out, error, folder)) from error
    if not strange:
        return
    more = f" and {len(strange) - _NAMED} more" if len(strange) > _NAMED else ""
    found = ", ".join(name if name.isprintable() else repr(name) for name in strange[:_NAMED]) + more
    step = "name another folder with --out, or move these out of it"
    raise InputError(Fault("the output folder holds what meshlure did not write", str(out), found, _ALLOWED, step))


def _check_listed(staging: Path) -> None:
    strange = foreign(staging)
    if strange or not (staging / RESULTS).exists():
        raise RuntimeError(f"{RESULTS} is missing or does not list {', '.join(strange)}")


def _resolved(out: Path) -> Path:
    """Folder that the output's name leads to; a link to a folder is followed, so that the link stays."""
    step = "name another folder with --out"
    try:
        if out.is_symlink() and not out.exists():
            raise InputError(
                Fault("the output folder is a link that leads nowhere", str(out), str(out.readlink()), _ALLOWED, step)
            )
        target = Path(os.path.realpath(out))
        if target.exists() and not target.is_dir():
            raise InputError(Fault("the output folder is a file", str(out), "", _ALLOWED, step))
        if os.path.ismount(target):
            step = f"name a folder inside it: --out {out / 'report'}"
            raise InputError(Fault("the output folder is a whole disk or mount point", str(out), "", _ALLOWED, step))
        here = Path(os.path.realpath(os.curdir))
        if target == here or target in here.parents:
            step = "name a folder inside it, or run from outside of it"
            raise InputError(
                Fault("the output folder is the one that you stand in", str(out), str(target), _ALLOWED, step)
            )
    except (OSError, ValueError) as error:
        # ValueError: a NUL character in the name.
        reason = error.strerror if isinstance(error, OSError) and error.strerror else str(error)
        raise InputError(Fault("the output folder cannot be looked at", str(out), reason, _ALLOWED, step)) from error
    return target


def _make_parents(target: Path, out: Path, made: list[Path]) -> None:
    missing = [folder for folder in target.parents if not folder.exists()]
    for folder in reversed(missing):
        if not folder.parent.is_dir():
            raise InputError(_parent_is_file(out, folder.parent))
        folder.mkdir()
        made.append(folder)
    if not target.parent.is_dir():
        raise InputError(_parent_is_file(out, target.parent))


def _parent_is_file(out: Path, parent: Path) -> Fault:
    step = "name another folder with --out"
    return Fault("a part of the output folder's path is a file", str(out), str(parent), "a folder", step)


def _is_about(error: OSError, staging: Path) -> bool:
    """Tell whether an error of the system is about the output, not about something else that a block does."""
    if error.errno in _FULL or (error.errno in _UNNAMED and error.filename is None):
        return True
    names = [os.fsdecode(name) for name in (error.filename, error.filename2) if isinstance(name, str | bytes)]
    return any(Path(name).is_relative_to(staging) for name in names)


def _gone(out: Path, parent: Path) -> Fault:
    what = "the folder in which the result was being written was taken away meanwhile"
    step = "let nothing clear up there while it runs, and run it again; what was there before was not touched"
    return Fault(what, str(out), str(parent), "", step)


def _refused(out: Path, error: OSError, parent: Path) -> Fault:
    untouched = "nothing was written, and what was there before is untouched"
    if error.errno in _FULL:
        try:
            found = f"{shutil.disk_usage(parent).free / 1e6:.1f} MB free"
        except OSError:
            found = error.strerror or ""
        step = f"free some space or name a folder on another disk with --out; {untouched}"
        return Fault("the disk is full", str(out), found, "", step)
    if error.errno in {errno.EACCES, errno.EPERM, errno.EROFS}:
        step = f"name another folder with --out, or ask for the right to write in {parent}; {untouched}"
        return Fault("the output folder may not be written", str(out), error.strerror or "", "", step)
    step = f"name another folder with --out; {untouched}"
    return Fault("the output folder cannot be written", str(out), error.strerror or str(error), "", step)
