"""The two chunks of a GLB file, and the tables of numbers that its JSON describes."""

from __future__ import annotations

import json
import struct
from collections.abc import Mapping
from types import MappingProxyType
from typing import Any, Final

import numpy as np
from numpy.typing import NDArray

from meshlure.errors import Fault, InputError

_MAGIC: Final = b"glTF"
_JSON: Final = 0x4E4F534A
_BIN: Final = 0x004E4942
_KINDS: Final[Mapping[int, str]] = MappingProxyType(
    {5120: "<i1", 5121: "<u1", 5122: "<i2", 5123: "<u2", 5125: "<u4", 5126: "<f4"}
)
_WIDTHS: Final[Mapping[str, int]] = MappingProxyType({"SCALAR": 1, "VEC2": 2, "VEC3": 3, "VEC4": 4})

Tree = dict[str, Any]


class Glb:
    """A GLB file in memory.

    Parameters
    ----------
    data : bytes
    where : str
        The file, for messages.

    Raises
    ------
    InputError
        It is no GLB of version 2, is cut off, or its JSON cannot be read.

    Notes
    -----
    Buffers outside of the file are not read: a GLB that needs another file is refused.

    References
    ----------
    Khronos Group, glTF 2.0 Specification, 4.4 (GLB) and 3.6 (accessors) (from memory).
    """

    def __init__(self, data: bytes, where: str) -> None:
        self.where = where
        if data[:4] != _MAGIC or len(data) < 20:
            begins = repr(data[:20].decode("utf-8", "replace"))
            raise self.fault("this is no GLB", f"it begins with {begins}", "'glTF'")
        version, length, size, kind = struct.unpack_from("<4I", data, 4)
        if version != 2:
            raise self.fault("the GLB is of a version that is not read", str(version), "2")
        if length > len(data):
            raise self.fault("the GLB is cut off", f"{len(data):,} bytes", f"{length:,} bytes as its header says")
        if kind != _JSON or 20 + size > len(data):
            raise self.fault("the GLB does not begin with its JSON", "another chunk", "JSON")
        try:
            tree = json.loads(data[20 : 20 + size])
        except (ValueError, RecursionError) as error:
            raise self.fault("the JSON of the GLB cannot be read", str(error)[:80], "JSON") from None
        self.tree: Tree = tree if isinstance(tree, dict) else {}
        self._binary = b""
        at = 20 + size
        if at + 8 <= len(data):
            size, kind = struct.unpack_from("<2I", data, at)
            if kind == _BIN:
                self._binary = data[at + 8 : at + 8 + size]

    def fault(self, what: str, found: str, allowed: str = "", step: str = "export the part again") -> InputError:
        """Return a fault of the file."""
        shown = "".join(c if c.isprintable() else " " for c in found)
        return InputError(Fault(what, self.where, shown, allowed, step))

    def entry(self, kind: str, number: object) -> Tree:
        """Return an entry of one of the JSON's lists.

        Raises
        ------
        InputError
            It is not there.
        """
        entries = self.tree.get(kind)
        if not isinstance(entries, list) or type(number) is not int or not 0 <= number < len(entries):
            raise self.fault(f"the GLB names one of its {kind} that is not there", repr(number)[:40])
        found = entries[number]
        if not isinstance(found, dict):
            raise self.fault(f"one of the GLB's {kind} cannot be read", repr(found)[:40])
        return found

    def accessor(self, number: object, width: int) -> NDArray[Any]:
        """(n, width) array of an accessor, as it is stored or, where it says so, brought to -1 ... 1.

        Raises
        ------
        InputError
            It is not there, of another kind, or reaches beyond its buffer.
        """
        said = self.entry("accessors", number)
        count = self._whole(said, "count")
        kind = np.dtype(self._known(said, "componentType"))
        if _WIDTHS.get(str(said.get("type"))) != width:
            raise self.fault("a table of the GLB is of another kind than its use", str(said.get("type"))[:40])
        if count > max(len(self._binary), 1) and "bufferView" in said:
            raise self.fault("a table of the GLB reaches beyond its buffer", f"{count:,} rows")
        if "bufferView" in said:
            values = self._table(said, kind, count, width)
        elif "sparse" in said and count * width * kind.itemsize <= 64 * len(self._binary):
            values = np.zeros((count, width), dtype=kind)
        else:
            raise self.fault("a table of the GLB has no numbers", f"accessor {number}")
        if isinstance(said.get("sparse"), dict):
            values = self._sparse(values, said["sparse"], kind, width)
        if said.get("normalized") and kind.kind in "iu":
            # Quantized positions (KHR_mesh_quantization): whole numbers stand for shares of one.
            return np.asarray(np.maximum(values / np.iinfo(kind).max, -1.0))
        return values

    def whole_numbers(self, number: object) -> NDArray[np.intp]:
        """(n,) array of an accessor that numbers something.

        Raises
        ------
        InputError
            As `accessor`, or its numbers are no whole ones.
        """
        values = self.accessor(number, 1)[:, 0]
        if values.dtype.kind not in "iu":
            raise self.fault("a table of the GLB is of another kind than its use", "fractions", "whole numbers")
        return values.astype(np.intp)

    def _sparse(self, values: NDArray[Any], said: Tree, kind: np.dtype[Any], width: int) -> NDArray[Any]:
        count = self._whole(said, "count")
        where, what = said.get("indices"), said.get("values")
        if not isinstance(where, dict) or not isinstance(what, dict):
            raise self.fault("a sparse table of the GLB cannot be read", "no indices or no values")
        stored = np.dtype(self._known(where, "componentType"))
        if stored.kind not in "iu":
            raise self.fault("a table of the GLB is of another kind than its use", "fractions", "whole numbers")
        places = self._table(where, stored, count, 1)[:, 0].astype(np.intp)
        if len(places) and not 0 <= int(places.min()) <= int(places.max()) < len(values):
            raise self.fault("a sparse table of the GLB names a row that is not there", str(places.max()))
        values = values.copy()
        values[places] = self._table(what, kind, count, width)
        return values

    def _table(self, said: Tree, kind: np.dtype[Any], count: int, width: int) -> NDArray[Any]:
        view = self.entry("bufferViews", said.get("bufferView"))
        if "EXT_meshopt_compression" in (view.get("extensions") or {}):
            raise self.fault("the GLB is compressed", "EXT_meshopt_compression", "plain", "export it uncompressed")
        buffer = self._buffer(view.get("buffer"))
        start = self._whole(view, "byteOffset", 0)
        held = buffer[start : start + self._whole(view, "byteLength")]
        row = width * kind.itemsize
        step, first = self._whole(view, "byteStride", row), self._whole(said, "byteOffset", 0)
        if not row <= step <= 65_535 or first + (count - 1) * step + row > len(held):
            found = f"{count:,} rows of {row} bytes from {first:,} on, in {len(held):,} bytes"
            raise self.fault("a table of the GLB reaches beyond its buffer", found)
        if not count:
            return np.empty((0, width), dtype=kind)
        return np.ndarray((count, width), kind, held, first, (step, kind.itemsize))

    def _buffer(self, number: object) -> bytes:
        said = self.entry("buffers", number)
        if "uri" in said or number != 0:
            raise self.fault(
                "the GLB keeps its numbers in another file",
                str(said.get("uri", ""))[:60],
                "one file that holds all",
                "export it as GLB with everything in it",
            )
        return self._binary

    def _known(self, said: Tree, key: str) -> str:
        kind = _KINDS.get(said[key]) if type(said.get(key)) is int else None
        if kind is None:
            raise self.fault("a table of the GLB is of an unknown kind of numbers", repr(said.get(key))[:40])
        return kind

    def _whole(self, said: Tree, key: str, default: int | None = None) -> int:
        number = said.get(key, default)
        if type(number) is not int or not 0 <= number < 2**62:
            raise self.fault(f"'{key}' of a table of the GLB cannot be read", repr(number)[:40], "a whole number")
        return number
