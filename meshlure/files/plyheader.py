"""The header of a PLY file: which elements follow, and what each is made of."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from types import MappingProxyType
from typing import Final

from meshlure.errors import Fault, InputError

TYPES: Final[Mapping[str, str]] = MappingProxyType(
    {
        **dict.fromkeys(("char", "int8"), "i1"),
        **dict.fromkeys(("uchar", "uint8"), "u1"),
        **dict.fromkeys(("short", "int16"), "i2"),
        **dict.fromkeys(("ushort", "uint16"), "u2"),
        **dict.fromkeys(("int", "int32"), "i4"),
        **dict.fromkeys(("uint", "uint32"), "u4"),
        **dict.fromkeys(("float", "float32"), "f4"),
        **dict.fromkeys(("double", "float64"), "f8"),
    }
)
"""The format's names of numbers: kind and bytes, as numpy writes them."""

_CORNERS: Final = ("vertex_indices", "vertex_index")
"""Names that writers give to the list of a face's corners."""

_LONGEST: Final = 65_536
"""Bytes of a header. Remarks of scanners run to some kilobytes."""

_END: Final = b"end_header"


@dataclass(frozen=True)
class Property:
    """One property of an element.

    Attributes
    ----------
    name : str
    kind : str
        Of a number, as numpy writes it.
    length : str
        Of the count before a list, as numpy writes it; empty for a single number.
    """

    name: str
    kind: str
    length: str = ""


@dataclass(frozen=True)
class Element:
    """A table of the file.

    Attributes
    ----------
    name : str
    count : int
        Of its rows.
    properties : tuple of Property
    """

    name: str
    count: int
    properties: tuple[Property, ...]

    @property
    def plain(self) -> bool:
        """Whether no property is a list."""
        return not any(each.length for each in self.properties)


def corner_list(element: Element) -> Property | None:
    """Return the property of the faces that lists their corners, None where there is none."""
    lists = (each for each in element.properties if each.length and each.kind[0] != "f")
    return next((each for each in lists if each.name in _CORNERS), None)


@dataclass(frozen=True)
class Header:
    """What the header says.

    Attributes
    ----------
    order : str
        "<" or ">" of binary numbers, empty where the file is text.
    elements : tuple of Element
        In the file's order.
    start : int
        Byte at which the rows begin.
    lines : int
        Of the header.
    """

    order: str
    elements: tuple[Element, ...]
    start: int
    lines: int


_ORDERS: Final[Mapping[str, str]] = MappingProxyType(
    {"ascii": "", "binary_little_endian": "<", "binary_big_endian": ">"}
)


def read_header(data: bytes, where: str) -> Header:
    """Return the header of a PLY file.

    Raises
    ------
    InputError
        There is none, or a line of it cannot be read (it is named).

    References
    ----------
    G. Turk (1994), The PLY polygon file format (from memory).
    """
    if data[:3] != b"ply" or data[3:4] not in (b"\n", b"\r"):
        begins = repr(data[:40].decode("utf-8", "replace"))
        step = "name the PLY itself; another format does not become one by its suffix"
        raise InputError(Fault("this is no PLY", where, f"it begins with {begins}", "'ply' in a line of its own", step))
    head = data[:_LONGEST]
    at = head.find(_END)
    if at < 0:
        found = f"no 'end_header' in the first {len(head):,} bytes"
        raise InputError(Fault("the header of the PLY does not end", where, found, next_step="export the part again"))
    start = at + len(_END)
    # The line's end is one character or two, and a binary table may begin with the second of them.
    start += 2 if head[start : start + 2] == b"\r\n" else 1
    lines = head[:at].replace(b"\r\n", b"\n").replace(b"\r", b"\n").decode("utf-8", "replace").split("\n")
    return _Lines(where).read(lines, start)


class _Lines:
    """Reads a header line by line."""

    def __init__(self, where: str) -> None:
        self._where = where
        self._order: str | None = None
        self._elements: list[tuple[str, int, list[Property]]] = []

    def read(self, lines: list[str], start: int) -> Header:
        for number, line in enumerate(lines[1:-1], 2):
            words = line.split()
            if words and not self._take(words):
                shown = "".join(c if c.isprintable() else " " for c in line)[:60]
                raise InputError(
                    Fault(
                        "a line of the PLY's header cannot be read",
                        f"{self._where}, line {number}",
                        f"'{shown}'",
                        "format, element, property, comment",
                        "export the part again",
                    )
                )
        if self._order is None:
            found, allowed = "no 'format' line", ", ".join(_ORDERS)
            raise InputError(
                Fault("the PLY does not say its format", self._where, found, allowed, "export the part again")
            )
        elements = tuple(Element(name, count, tuple(held)) for name, count, held in self._elements)
        return Header(self._order, elements, start, len(lines))

    def _take(self, words: list[str]) -> bool:
        match words:
            case ["comment" | "obj_info", *_]:
                return True
            case ["format", kind, "1.0"] if kind in _ORDERS:
                self._order = _ORDERS[kind]
            case ["element", name, count] if count.isascii() and count.isdigit() and len(count) < 20:
                if any(name == other for other, *_ in self._elements):
                    return False  # which of the two is meant cannot be told
                self._elements.append((name, int(count), []))
            case ["property", "list", length, kind, name] if self._known(length, kind) and TYPES[length][0] != "f":
                self._elements[-1][2].append(Property(name, TYPES[kind], TYPES[length]))
            case ["property", kind, name] if self._known(kind):
                self._elements[-1][2].append(Property(name, TYPES[kind]))
            case _:
                return False
        return True

    def _known(self, *kinds: str) -> bool:
        return bool(self._elements) and all(kind in TYPES for kind in kinds)
