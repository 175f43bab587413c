"""The sections of a bait file's table: those of one table, those of several, and those that nothing knows."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from typing import TypeVar

from meshlure.errors import Fault
from meshlure.files.keys import Keys

T = TypeVar("T")


class Tables:
    """The bait file's sections by name.

    Parameters
    ----------
    table : mapping
        The whole file, as the TOML reader gives it.
    faults : list of Fault
        Where faults are put.
    """

    def __init__(self, table: Mapping[str, object], faults: list[Fault]) -> None:
        self._table = table
        self._faults = faults
        self._keys = Keys(table, "", faults)
        stated = table.get("format") if self._keys.stated("format") else None
        self.format = stated if isinstance(stated, int) and not isinstance(stated, bool) else None

    def one(self, name: str) -> Keys | None:
        """Keys of the section [name], None where it is not stated or no table."""
        if not self._keys.stated(name):
            return None
        value = self._table[name]
        if isinstance(value, Mapping):
            return Keys(value, name, self._faults)
        several = isinstance(value, list) and all(isinstance(entry, Mapping) for entry in value)
        found = f"[[{name}]]" if several else f"{name} = {value!r}"[:60]
        self._fault("this is a section of its own", name, found, f"[{name}]", f"write [{name}] above its keys")
        return None

    def asked(self, name: str) -> Keys:
        """Keys of the section [name], which must be stated."""
        before = len(self._faults)
        keys = self.one(name)
        if keys is not None:
            return keys
        if len(self._faults) == before:
            step = f"add [{name}] with its keys"
            self._keys.absent(Fault("the section is missing", name, allowed=f"[{name}]", next_step=step), name)
        # One fault is enough: the keys that are missing with their section are not told one by one.
        return Keys({}, name, [])

    def none(self, name: str) -> Keys:
        """Keys of a section that is not stated, so that all stand at their defaults."""
        return Keys({}, name, self._faults)

    def many(self, name: str) -> list[Keys]:
        """Keys of every [[name]], in the file's order."""
        if not self._keys.stated(name):
            return []
        value = self._table[name]
        if not isinstance(value, list) or not all(isinstance(entry, Mapping) for entry in value):
            found = f"[{name}]" if isinstance(value, Mapping) else f"{name} = {value!r}"[:60]
            self._fault(
                "there may be several of these", name, found, f"[[{name}]]", f"write [[{name}]] above each one's keys"
            )
            return []
        return [
            Keys(entry, entry_path(name, number, entry.get("name", entry.get("chamber"))), self._faults)
            for number, entry in enumerate(value, 1)
        ]

    def read(self, name: str, reader: Callable[[Keys], T]) -> T | None:
        """Section [name] as the reader makes it, None where it is not stated."""
        keys = self.one(name)
        return None if keys is None else reader(keys)

    def close(self) -> None:
        """Put down every section that nothing asked for."""
        self._keys.close()

    def _fault(self, what: str, where: str, found: str, allowed: str, next_step: str) -> None:
        self._faults.append(Fault(what, where, found, allowed, next_step))


def entry_path(section: str, number: int, name: object) -> str:
    """Path of one of several sections in messages: "insert[2] 'belly weight'"."""
    shown = isinstance(name, str) and name.isprintable() and 0 < len(name) <= 60
    return f"{section}[{number}] {name!r}" if shown else f"{section}[{number}]"
