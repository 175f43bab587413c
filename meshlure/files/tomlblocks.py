"""TOML text as blocks, one for each header, that can be changed without touching what else the maker wrote."""

from __future__ import annotations

import copy
import re
from collections.abc import Mapping, MutableMapping
from dataclasses import dataclass
from typing import Any, Final, Protocol

import tomlkit
from tomlkit.items import AoT

_LINES: Final = re.compile(r"[^\n]*\n|[^\n]+")
_HEADER: Final = re.compile(r"\s*\[\[?\s*(?P<name>[A-Za-z0-9_-]+)\s*(?P<dotted>\.[^\]]*)?\]\]?\s*(?:#.*)?")


class Document(Protocol):
    """Sections that can be changed, removed and added."""

    def sections(self, name: str) -> list[MutableMapping[str, Any]]:
        """Sections of a name, [name] or every [[name]]; what is set in one is set in the document."""

    def remove(self, name: str, number: int) -> None:
        """Remove one section of a name, counted from 0."""

    def append(self, name: str, entry: Mapping[str, object]) -> None:
        """Put one more [[name]] after the others."""


class Plain:
    """A document of which only the values count.

    Parameters
    ----------
    table : mapping
        Copied.
    """

    def __init__(self, table: Mapping[str, object]) -> None:
        self.table: dict[str, Any] = copy.deepcopy(dict(table))

    def sections(self, name: str) -> list[MutableMapping[str, Any]]:
        """Sections of a name; see `Document`."""
        found = self.table.get(name, [])
        return list(found) if isinstance(found, list) else [found]

    def remove(self, name: str, number: int) -> None:
        """Remove one section; see `Document`."""
        if isinstance(self.table[name], list):
            del self.table[name][number]
        if not isinstance(self.table[name], list) or not self.table[name]:
            del self.table[name]

    def append(self, name: str, entry: Mapping[str, object]) -> None:
        """Put one more section after the others; see `Document`."""
        self.table.setdefault(name, []).append(dict(entry))

    def text(self) -> str:
        """TOML of the values."""
        return tomlkit.dumps({name: value for name, value in self.table.items() if value not in ({}, [])})


@dataclass
class _Block:
    """A header with its keys; ``lead`` are the blank lines and comments above it."""

    name: str
    lead: str
    document: tomlkit.TOMLDocument

    @property
    def section(self) -> MutableMapping[str, Any]:
        found = self.document[self.name]
        section: MutableMapping[str, Any] = found[0] if isinstance(found, AoT) else found
        return section


class Blocks:
    """A document of which comments, order and spelling stay as the maker wrote them.

    Parameters
    ----------
    text : str
        TOML.

    Raises
    ------
    ValueError
        A part of a section stands apart from it, or a line of a text of several lines reads like a header.

    Notes
    -----
    What stands above the first header is kept as it is: sections that are written there, as keys, are not found.
    Comments right above a header go with its section; those that a blank line parts from it stay. Comments beside a
    value stay when the value is set.
    """

    def __init__(self, text: str) -> None:
        self._windows = "\r\n" in text
        plain = text.replace("\r\n", "\n")
        if not plain.endswith("\n"):
            plain += "\n"
        self._top, self._blocks, self._end = _split(plain)

    def sections(self, name: str) -> list[MutableMapping[str, Any]]:
        """Sections of a name; see `Document`."""
        return [block.section for block in self._named(name)]

    def remove(self, name: str, number: int) -> None:
        """Remove one section; see `Document`."""
        block = self._named(name)[number]
        at = self._blocks.index(block)
        # What a blank line parts from the header speaks of more than this section.
        kept = block.lead[: block.lead.rfind("\n\n") + 1] if "\n\n" in block.lead else ""
        if kept.strip():
            if at + 1 < len(self._blocks):
                self._blocks[at + 1].lead = kept + self._blocks[at + 1].lead
            else:
                self._end = kept + self._end
        del self._blocks[at]

    def append(self, name: str, entry: Mapping[str, object]) -> None:
        """Put one more section after the others; see `Document`."""
        others = self._named(name)
        at = self._blocks.index(others[-1]) + 1 if others else len(self._blocks)
        self._blocks.insert(at, _Block(name, "\n", tomlkit.parse(tomlkit.dumps({name: [dict(entry)]}))))

    def text(self) -> str:
        """TOML with the changes."""
        parts = [self._top]
        for block in self._blocks:
            parts += [block.lead, tomlkit.dumps(block.document)]
        plain = "".join([*parts, self._end])
        return plain.replace("\n", "\r\n") if self._windows else plain

    def _named(self, name: str) -> list[_Block]:
        return [block for block in self._blocks if block.name == name]


def _split(text: str) -> tuple[str, list[_Block], str]:
    """Return what stands above the first header, the blocks, and the comments at the end."""
    top, name, lead = "", "", ""
    blocks: list[_Block] = []
    lines: list[str] = []
    for line in [*_LINES.findall(text), None]:
        header = None if line is None else _HEADER.fullmatch(line.rstrip())
        if header is not None and header["dotted"] and header["name"] != name:
            raise ValueError(f"[{header['name']}{header['dotted']}] stands apart from [{header['name']}]")
        if line is not None and (header is None or header["dotted"]):
            lines.append(line)
            continue
        after = _cut_end(lines)
        if name:
            blocks.append(_Block(name, lead, tomlkit.parse("".join(lines))))
        else:
            top = "".join(lines)
        if line is not None and header is not None:
            name, lines = header["name"], [line]
        lead = after
    return top, blocks, lead


def _cut_end(lines: list[str]) -> str:
    """Take the blank lines and comments off the end of some lines."""
    count = len(lines)
    while count and (not lines[count - 1].strip() or lines[count - 1].lstrip().startswith("#")):
        count -= 1
    end = "".join(lines[count:])
    del lines[count:]
    return end
