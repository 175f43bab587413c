"""Putting a finished folder in another's place: in one step where the system can, else in two that can be finished."""

from __future__ import annotations

import contextlib
import ctypes
import errno
import glob
import os
import shutil
import sys
from collections.abc import Callable, Iterator
from pathlib import Path
from typing import Final

_AT_FDCWD: Final = -100
_RENAME_EXCHANGE: Final = 2
"""From Linux's fcntl.h and fs.h."""

_CANNOT: Final = frozenset({errno.ENOSYS, errno.EINVAL, errno.EOPNOTSUPP})


def new_name(target: Path, token: str) -> Path:
    """Where a run builds its folder or file: beside its place, so on the same file system."""
    return target.with_name(f".{target.name}.meshlure-new-{token}")


def ready_name(target: Path) -> Path:
    """Where a finished folder waits for the second of two renames."""
    return target.with_name(f".{target.name}.meshlure-ready")


def old_name(target: Path) -> Path:
    """Where the folder that is being replaced waits to be removed."""
    return target.with_name(f".{target.name}.meshlure-old")


def swap(one: Path, other: Path) -> bool:
    """Exchange two folders in one step; False where the system or the file system cannot.

    Raises
    ------
    OSError
        It can, and failed.
    """
    if sys.platform != "linux":
        return False
    try:
        renameat2 = ctypes.CDLL(None, use_errno=True).renameat2
    except AttributeError:  # a C library older than the call
        return False
    done: int = renameat2(_AT_FDCWD, os.fsencode(one), _AT_FDCWD, os.fsencode(other), _RENAME_EXCHANGE)
    if done == 0:
        return True
    code = ctypes.get_errno()
    if code in _CANNOT:
        return False
    raise OSError(code, os.strerror(code), str(one), None, str(other))


def put(built: Path, target: Path, check: Callable[[Path], None]) -> None:
    """Put a built folder in its place, and remove what was there.

    Parameters
    ----------
    built : Path
        From `new_name`.
    target : Path
        Absent, or a folder.
    check : callable
        Is given the replaced folder once nobody finds it under its name any more; what it raises undoes the exchange.

    Raises
    ------
    OSError
        Nothing was put in place; what was there is there.
    """
    if not target.exists() or not any(target.iterdir()):
        if os.name == "nt" and target.exists():  # elsewhere an empty folder is replaced by the renaming
            target.rmdir()
        built.rename(target)
        try:
            sync_folder(target.parent)
        except OSError:
            target.rename(built)
            raise
        return
    if swap(built, target):
        try:
            check(built)
            sync_folder(target.parent)
        except BaseException:
            swap(built, target)
            raise
        remove(built)
        return
    ready, old = ready_name(target), old_name(target)
    built.rename(ready)
    try:
        target.rename(old)
        check(old)
        ready.rename(target)
        sync_folder(target.parent)
    except BaseException:
        if old.exists():
            if target.exists():
                target.rename(ready)
            old.rename(target)
        ready.rename(built)
        raise
    remove(old)


def settle(target: Path, ours: Callable[[Path], bool]) -> None:
    """Finish, or clear away, what runs that were cut off left beside a folder.

    Parameters
    ----------
    target : Path
        The folder that they were to write.
    ours : callable
        Tells whether a folder holds only what we wrote; another is left alone.

    Notes
    -----
    With the two renames, a run that stopped between them left no folder at ``target``, the old one and the finished
    one: the finished one is put there. Before the first rename and after the second ``target`` is whole, and what lies
    beside it goes. A folder that a living run is building is locked by it, and stays.
    """
    ready, old = ready_name(target), old_name(target)
    if not target.exists():
        for waiting in (ready, old):
            if waiting.is_dir() and ours(waiting):
                waiting.rename(target)
                break
    if target.exists():
        for left in (ready, old):
            if left.is_dir() and ours(left):
                remove(left)
    for left in target.parent.glob(f"{glob.escape(new_name(target, '').name)}*"):
        # Opening a pipe of such a name would wait for its other end.
        if left.is_dir() and not left.is_symlink():
            with locked(left, wait=False) as free:
                if free:
                    remove(left)


@contextlib.contextmanager
def locked(folder: Path, *, wait: bool) -> Iterator[bool]:
    """Hold a folder's lock, which ends with the process; False where another process has it or there are no locks.

    Parameters
    ----------
    folder : Path
    wait : bool
        Wait until the lock is free.
    """
    try:
        import fcntl
    except ImportError:  # no POSIX system
        yield False
        return
    handle = os.open(folder, os.O_RDONLY)
    try:
        try:
            fcntl.flock(handle, fcntl.LOCK_EX | (0 if wait else fcntl.LOCK_NB))
        except OSError:  # held by another, or a network disk without locks
            yield False
        else:
            yield True
    finally:
        os.close(handle)


def remove(folder: Path) -> None:
    """Remove a folder of ours as far as it goes; what stays is found by the next run, and does not fail this one."""
    shutil.rmtree(folder, ignore_errors=True)


def sync_tree(folder: Path) -> None:
    """Have a folder's files written to the disk, so that a power cut after the exchange finds them there."""
    for place, _, names in os.walk(folder):
        for name in names:
            _sync(Path(place) / name, os.O_RDONLY if os.name == "posix" else os.O_RDWR)
        sync_folder(Path(place))


def sync_folder(folder: Path) -> None:
    """Have a folder's list of names written to the disk."""
    if os.name == "posix":
        _sync(folder, os.O_RDONLY)


def _sync(path: Path, flags: int) -> None:
    handle = os.open(path, flags)
    try:
        os.fsync(handle)
    except OSError as error:
        # EINVAL: this file system cannot sync such a thing. A disk that is full or broken says so otherwise.
        if error.errno != errno.EINVAL:
            raise
    finally:
        os.close(handle)
