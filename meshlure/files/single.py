"""A single file written whole or not at all, and never over something that is there."""

from __future__ import annotations

import contextlib
import errno
import glob
import os
import secrets
from pathlib import Path
from typing import Final

from meshlure.errors import Fault, InputError
from meshlure.files import exchange

_NO_LINKS: Final = frozenset({errno.EPERM, errno.ENOTSUP, errno.ENOSYS, errno.EMLINK, errno.EXDEV})
"""What file systems answer that know no second name of a file."""


_BEGINNING: Final = 120
"""Bytes of a file's name that the name beside it begins with; with what follows, less than any file system takes."""


def check_absent(path: Path, option: str, mark: bytes = b"") -> None:
    """Refuse a file that is to be written where something is that is not ours to replace.

    Parameters
    ----------
    path : Path
    option : str
        That named it, for the message.
    mark : bytes
        What the first kilobytes of a file hold that may be replaced; empty where none may.

    Raises
    ------
    InputError
        Something is there, or the folder is not.
    """
    try:
        there = path.is_symlink() or path.exists()
        folder = path.parent.is_dir()
        ours = there and bool(mark) and path.is_file() and not path.is_symlink() and mark in _beginning(path)
    except (OSError, ValueError) as error:
        # ValueError: a NUL character in the name.
        reason = error.strerror if isinstance(error, OSError) and error.strerror else str(error)
        raise InputError(
            Fault("this file cannot be looked at", f"{option} {path}", reason, next_step="check the path")
        ) from error
    if there and not ours:
        raise InputError(
            Fault(
                "there is something of this name already, and it stays",
                f"{option} {path}",
                next_step="name another file, or move that one out of the way",
            )
        )
    if not folder:
        raise InputError(
            Fault("the folder is not there", f"{option} {path}", str(path.parent), "a folder", "make it first")
        )


def write_file(path: Path, content: bytes, option: str, replace: bool = False) -> None:
    """Write a file beside its place and move it there, so that nobody ever finds a part of it.

    Parameters
    ----------
    path : Path
    content : bytes
    option : str
        That named it, for messages.
    replace : bool
        Whether a file that is there is replaced; else it stays, and that is a fault.

    Raises
    ------
    InputError
        The disk is full or refuses, or something is there that stays. Nothing is left behind.
    """
    try:
        put_file(path, content, replace)
    except FileExistsError:
        check_absent(path, option)
        raise
    except (OSError, ValueError) as error:
        reason = error.strerror if isinstance(error, OSError) and error.strerror else str(error)
        step = "nothing was written; name another place, or free some space"
        raise InputError(Fault("this file cannot be written", f"{option} {path}", reason, next_step=step)) from error


def put_file(path: Path, content: bytes, replace: bool = False) -> None:
    """Write a file as `write_file`, and leave what goes wrong to the caller.

    Raises
    ------
    FileExistsError
        Something is there that stays.
    OSError
        The disk is full or refuses.

    Notes
    -----
    A run that is killed leaves at most a hidden file beside; it is not locked any more, and the next run that writes
    the same file clears it away.
    """
    beside = exchange.new_name(_short(path), secrets.token_hex(4))
    with contextlib.ExitStack() as stack:
        with exchange.locked(path.parent, wait=True):
            _clear(path)
            file = stack.enter_context(beside.open("xb"))
            stack.callback(_unlink, beside)
            stack.enter_context(exchange.locked(beside, wait=False))
        file.write(content)
        file.flush()
        os.fsync(file.fileno())
        file.close()  # some systems rename and remove no open file
        if replace:
            beside.replace(path)
        else:
            _place(beside, path)


def _short(path: Path) -> Path:
    """Return a name for what lies beside a file, short enough to take more characters."""
    return path.with_name(os.fsencode(path.name)[:_BEGINNING].decode("utf-8", "ignore"))


def _clear(path: Path) -> None:
    """Remove what killed runs left beside a file; what a living one writes is locked, and stays."""
    for left in path.parent.glob(f"{glob.escape(exchange.new_name(_short(path), '').name)}*"):
        if left.is_file() and not left.is_symlink():
            with exchange.locked(left, wait=False) as free:
                if free:
                    _unlink(left)


def _unlink(path: Path) -> None:
    with contextlib.suppress(OSError):
        path.unlink(missing_ok=True)


def _place(beside: Path, path: Path) -> None:
    """Give a file its name; unlike a renaming, a second link fails where something of that name is there."""
    try:
        path.hardlink_to(beside)
    except OSError as error:
        if error.errno not in _NO_LINKS:
            raise
        if path.exists():
            raise FileExistsError(errno.EEXIST, os.strerror(errno.EEXIST), str(path)) from None
        beside.rename(path)


def _beginning(path: Path) -> bytes:
    with path.open("rb") as file:
        return file.read(4096)
