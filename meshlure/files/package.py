"""Parts of a zip package, unpacked no further than is allowed."""

from __future__ import annotations

import io
import posixpath
import zipfile
import zlib
from typing import Final

from meshlure.errors import Fault, InputError
from meshlure.files.source import size_text

_ENTRY: Final = b"PK\x01\x02"
_MOST: Final = 20_000
"""Entries of a package. Every one costs half a kilobyte of memory before anything is read."""

_AT_ONCE: Final = 1 << 20

_ENCRYPTED: Final = 0x41
"""Bits of a part's flags that say so."""

_UNPACKED: Final = frozenset({zipfile.ZIP_STORED, zipfile.ZIP_DEFLATED})
"""What packages may use (ECMA-376 part 2, annex B); of others the zip library unpacks without end at one call."""

_BROKEN: Final = (zipfile.BadZipFile, zlib.error, EOFError, OSError, ValueError, OverflowError, LookupError)
"""What the zip library raises for files that are cut off, altered or made to mislead."""


class Package:
    """A zip file in memory.

    Parameters
    ----------
    data : bytes
    where : str
        The file, for messages.
    largest : int
        Bytes that may be unpacked from it, all in all.

    Raises
    ------
    InputError
        It is no zip file, or has too many entries.

    Notes
    -----
    What the package says of its parts' sizes is not relied on: bytes are counted as they come out. Nothing is written
    to disk, so that the names of entries lead nowhere.
    """

    def __init__(self, data: bytes, where: str, largest: int) -> None:
        self.where = where
        self._largest = largest
        self._left = largest
        entries = data.count(_ENTRY)
        if entries > _MOST:
            raise InputError(
                Fault(
                    "the package has too many entries",
                    where,
                    f"{entries:,}",
                    f"up to {_MOST:,}",
                    "export the part alone",
                )
            )
        try:
            self._zip = zipfile.ZipFile(io.BytesIO(data))
        except _BROKEN as error:
            raise InputError(self._fault("this is no zip package, or it is cut off", str(error))) from error
        # Names of parts do not tell capitals from small letters (ECMA-376 part 2, 6.2.2.3).
        self._names = {name.lstrip("/").casefold(): name for name in reversed(self._zip.namelist())}

    def holds(self, name: str) -> bool:
        """Whether there is a part of this name, from the root with or without a slash."""
        return name.lstrip("/").casefold() in self._names

    def read(self, name: str) -> bytes:
        """Return a part's bytes.

        Raises
        ------
        InputError
            It is not there, damaged, encrypted, packed in a way that is not known, or larger than what is left of the
            limit.
        """
        if not self.holds(name):
            raise InputError(self._fault(f"the package has no part '{_shown(name)}'", ""))
        pieces = []
        info = self._zip.getinfo(self._names[name.lstrip("/").casefold()])
        if info.flag_bits & _ENCRYPTED:
            raise InputError(self._fault(f"the part '{_shown(name)}' is encrypted", "a password is asked for"))
        if info.compress_type not in _UNPACKED:
            raise InputError(
                self._fault(f"the part '{_shown(name)}' is packed in a way that packages may not be", "no deflate")
            )
        try:
            with self._zip.open(info) as part:
                while piece := part.read(_AT_ONCE):
                    self._left -= len(piece)
                    if self._left < 0:
                        raise InputError(self._too_large(name))
                    pieces.append(piece)
        except (*_BROKEN, NotImplementedError, RuntimeError) as error:
            raise InputError(self._fault(f"the part '{_shown(name)}' cannot be unpacked", str(error))) from error
        return b"".join(pieces)

    def _too_large(self, name: str) -> Fault:
        return Fault(
            f"the part '{_shown(name)}' unpacks to more than is read",
            self.where,
            f"more than {size_text(self._largest)}",
            f"up to {size_text(self._largest)} from one package",
            f'if that is meant, raise the limit: --largest "{size_text(4 * self._largest)}"',
        )

    def _fault(self, what: str, found: str) -> Fault:
        return Fault(what, self.where, _shown(found), next_step="copy or export the file again")


def resolved(target: str, source: str) -> str:
    """Return the part that a relation's target names, seen from the part that the relation is of."""
    return posixpath.normpath(posixpath.join("/", posixpath.dirname(source), target)).lstrip("/")


def _shown(text: str) -> str:
    return "".join(c if c.isprintable() else " " for c in text)[:80]
