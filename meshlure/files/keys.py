"""One table of the bait file, and what is wrong with its keys."""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping, Sequence
from typing import TypedDict, TypeVar, Unpack

from meshlure.errors import Fault, InputError
from meshlure.files.nearness import did_you_mean, nearest
from meshlure.findings import Point
from meshlure.units import quantity

T = TypeVar("T")

_LONGEST_TEXT = 200
_MOST_ROWS = 1000
AXES = ("+x", "-x", "+y", "-y", "+z", "-z")


class Limits(TypedDict, total=False):
    """Limits of a quantity, as `meshlure.units.quantity` takes them."""

    positive: bool
    signed: bool
    least: float | None
    most: float | None


class Keys:
    """Values of one table by key; faults are gathered, so that one reading finds them all.

    Parameters
    ----------
    table : mapping
        As the TOML reader gives it.
    path : str
        The table's name in messages: "cast", "insert[2] 'belly weight'".
    faults : list of Fault
        Where faults are put. While it is not empty at the end, nothing that was returned may be used: a faulty value
        is given as a stand-in of its type.

    Notes
    -----
    A key that was asked for is known; `close` finds the others.
    """

    def __init__(self, table: Mapping[str, object], path: str, faults: list[Fault]) -> None:
        self.path = path
        self.assumed: list[str] = []
        self._table = table
        self._faults = faults
        self._known: list[str] = []
        self._absent: dict[str, Fault] = {}

    def where(self, key: str) -> str:
        """Path of a key in messages."""
        return f"{self.path}.{key}" if self.path else key

    def fault(self, key: str, what: str, found: str = "", allowed: str = "", next_step: str = "") -> None:
        """Put down one fault of a key, or of the table itself where the key is empty."""
        self._faults.append(Fault(what, self.where(key) if key else self.path, found, allowed, next_step))

    def absent(self, fault: Fault, *keys: str) -> None:
        """Put down that a key, or any one of several, is missing; `close` takes it back where one was mistyped."""
        self._faults.append(fault)
        self._absent |= dict.fromkeys(keys, fault)

    def take(self, error: InputError) -> None:
        """Put down the faults that another reader found in a value of this table."""
        self._faults.extend(error.faults)

    def stated(self, key: str) -> bool:
        """Tell whether the table has a key; the key is known from then on."""
        self._known.append(key)
        return key in self._table

    def peek(self, key: str) -> str:
        """Text of a key as it stands, empty where it is none; nothing is checked and the key is not made known."""
        value = self._table.get(key)
        return value.strip() if isinstance(value, str) else ""

    def one_of(self, *keys: str, required: bool = True) -> str | None:
        """Key that is stated out of several that exclude each other; the first, where more are."""
        stated = [key for key in keys if self.stated(key)]
        if len(stated) > 1:
            what = "only one of these keys can be meant"
            self.fault(
                "", what, ", ".join(stated), f"one of {', '.join(keys)}", f"keep one and remove the {_rest(stated)}"
            )
        elif not stated and required:
            allowed, step = f"one of {', '.join(keys)}", f"add '{keys[0]} = ...'"
            self.absent(Fault("a key is missing", self.path, allowed=allowed, next_step=step), *keys)
        return stated[0] if stated else None

    def text(self, key: str) -> str | None:
        """Read a text, None where it is not stated."""
        if not self.stated(key):
            return None
        value = self._table[key]
        if not isinstance(value, str):
            self._wrong(key, "text in quotes")
        elif not value.strip():
            self.fault(key, "the text is empty", repr(value), next_step="write it or remove the key")
        elif len(value) > _LONGEST_TEXT or not value.isprintable():
            what = "the text is too long or holds characters that cannot be printed"
            allowed = f"up to {_LONGEST_TEXT} printable characters"
            self.fault(key, what, repr(value[:40]), allowed, "write a shorter, plain text")
        else:
            return value.strip()
        return ""

    def asked_text(self, key: str, such_as: str) -> str:
        """Read a text that must be stated."""
        value = self.text(key)
        if value is None:
            self._missing(key, repr(such_as))
        return value or ""

    def choice(self, key: str, allowed: tuple[str, ...]) -> str | None:
        """Read one word out of several, None where it is not stated."""
        value = self.text(key)
        if value and value not in allowed:
            words = " or ".join(repr(word) for word in allowed)
            self.fault(key, "no such choice", repr(value), words, did_you_mean(value, allowed, f"write {words}"))
        return value

    def flag(self, key: str, default: bool = False) -> bool:
        """Answer true or false; ``default`` where it is not stated."""
        if not self.stated(key):
            return default
        value = self._table[key]
        if not isinstance(value, bool):
            self._wrong(key, "true or false, without quotes")
        return value is True

    def whole(self, key: str, least: int, most: int) -> int:
        """Read a whole number within limits, which must be stated."""
        value = self._table.get(key)
        if not self.stated(key):
            self._missing(key, str(least))
        elif isinstance(value, bool) or not isinstance(value, int):
            self._wrong(key, f"a whole number, {least} to {most}")
        elif not least <= value <= most:
            self.fault(key, "the number is outside its range", str(value), f"{least} to {most}", "correct it")
        else:
            return value
        return least

    def share(self, key: str, inside: bool = False, positive: bool = False) -> float:
        """Read a number from 0 to 1, which must be stated; with ``inside`` neither of them, with ``positive`` not 0."""
        value = self._table.get(key)
        allowed = "above 0 and below 1" if inside else "above 0 and up to 1" if positive else "0 to 1"
        if not self.stated(key):
            self._missing(key, "0.15")
        elif not _is_number(value):
            self._wrong(key, "a number from 0 to 1, without quotes")
        elif not 0.0 <= float(value) <= 1.0 or (inside and value in {0, 1}) or (positive and value == 0):  # type: ignore[arg-type]
            self.fault(key, "the share is outside its range", str(value), allowed, "write 15% as 0.15")
        else:
            return float(value)  # type: ignore[arg-type]
        return 0.0

    def quantity(self, key: str, kind: str, **limits: Unpack[Limits]) -> float | None:
        """Read a quantity in SI, None where it is not stated; kinds and limits are those of `meshlure.units`."""
        return self._quantity(self._table[key], self.where(key), kind, limits) if self.stated(key) else None

    def asked_quantity(self, key: str, kind: str, such_as: str, **limits: Unpack[Limits]) -> float:
        """Read a quantity in SI that must be stated."""
        value = self.quantity(key, kind, **limits)
        if value is None:
            self._missing(key, repr(such_as))
            return math.nan
        return value

    def assumed_quantity(self, key: str, kind: str, default: float, **limits: Unpack[Limits]) -> float:
        """Read a quantity in SI; the default where it is not stated, and then the key joins `assumed`."""
        value = self.quantity(key, kind, **limits)
        return self.assume(key, default) if value is None else value

    def assume(self, key: str, default: T) -> T:
        """Return the default of a key that is not stated, and put the key among `assumed`."""
        self.assumed.append(key)
        return default

    def quantities(self, key: str, kind: str, such_as: str, **limits: Unpack[Limits]) -> tuple[float, ...] | None:
        """Read the quantities of a list in SI, None where it is not stated."""
        if not self.stated(key):
            return None
        rows = self._rows(key, f"a list such as {such_as}")
        return tuple(self._quantity(row, where, kind, limits) for where, row in rows)

    def numbers(self, key: str, such_as: str) -> tuple[float, ...] | None:
        """Read the plain numbers of a list, None where it is not stated."""
        if not self.stated(key):
            return None
        found = []
        for where, row in self._rows(key, f"a list of numbers such as {such_as}"):
            if _is_number(row) and math.isfinite(float(row)):  # type: ignore[arg-type]
                found.append(float(row))  # type: ignore[arg-type]
            else:
                self._faults.append(Fault("a number was expected", where, repr(row)[:60], such_as, "correct it"))
                found.append(math.nan)
        return tuple(found) or None

    def pair(self, key: str, kind: str, such_as: str, **limits: Unpack[Limits]) -> tuple[float, float] | None:
        """Read the least and greatest value allowed, in SI, None where it is not stated."""
        values = self.quantities(key, kind, such_as, **limits)
        if values is None:
            return None
        if len(values) != 2:
            self.fault(
                key, "a range takes two quantities", str(len(values)), f"least and greatest: {such_as}", "correct it"
            )
            return math.nan, math.nan
        if values[0] > values[1]:
            self.fault(
                key, "the range is the wrong way round", str(self._table[key]), f"{such_as}", "put the lesser first"
            )
        return values[0], values[1]

    def one_or_more(self, key: str, kind: str, such_as: str, **limits: Unpack[Limits]) -> tuple[float, ...]:
        """Read a quantity or a list of different ones in SI, which must be stated."""
        if not self.stated(key):
            self._missing(key, such_as)
            return ()
        if not isinstance(self._table[key], list):
            return (self._quantity(self._table[key], self.where(key), kind, limits),)
        values = self.quantities(key, kind, such_as, **limits) or ()
        self._told_once(key, values)
        return values

    def wholes(self, key: str, least: int, most: int) -> tuple[int, ...]:
        """Read a whole number or a list of different ones within limits, which must be stated."""
        if not self.stated(key):
            self._missing(key, str(least))
            return ()
        value, allowed = self._table[key], f"a whole number, {least} to {most}, or a list of them"
        rows = self._rows(key, allowed) if isinstance(value, list) else [(self.where(key), value)]
        numbers = []
        for where, row in rows:
            if isinstance(row, bool) or not isinstance(row, int):
                self._faults.append(
                    Fault("the value is of the wrong kind", where, repr(row)[:60], allowed, "correct it")
                )
            elif not least <= row <= most:
                what = "the number is outside its range"
                self._faults.append(Fault(what, where, str(row)[:60], f"{least} to {most}", "correct it"))
            else:
                numbers.append(row)
        self._told_once(key, numbers)
        return tuple(numbers)

    def choices(self, key: str, allowed: tuple[str, ...]) -> tuple[str, ...]:
        """Read different words out of several as a list; none where it is not stated."""
        words = self.names(key)
        for word in words:
            if word not in allowed:
                known = " or ".join(repr(each) for each in allowed)
                self.fault(key, "no such choice", repr(word), known, did_you_mean(word, allowed, f"write {known}"))
        self._told_once(key, words)
        return words

    def tables(self, key: str, such_as: str) -> list[Keys]:
        """Read the tables of a list, which must be stated; none after a fault."""
        if not self.stated(key):
            self._missing(key, such_as)
            return []
        found = []
        for where, row in self._rows(key, f"a list of tables such as {such_as}"):
            if isinstance(row, Mapping):
                found.append(Keys(row, where, self._faults))
            else:
                self._faults.append(Fault("a table was expected", where, repr(row)[:60], such_as, "correct it"))
        return found

    def names(self, key: str) -> tuple[str, ...]:
        """Read the texts of a list; none where it is not stated."""
        if not self.stated(key):
            return ()
        names = []
        for where, row in self._rows(key, "a list of names in quotes"):
            if isinstance(row, str) and row.strip():
                names.append(row.strip())
            else:
                self._faults.append(Fault("no name", where, repr(row), "a name in quotes", "correct it"))
        return tuple(names)

    def point(self, key: str, metres: float) -> Point:
        """Read a point in m, which must be stated, in mesh coordinates of ``metres`` a unit."""
        if not self.stated(key):
            self._missing(key, "[31.0, 0.0, -9.5]")
            return (math.nan,) * 3
        numbers = self._three(
            self._table[key], self.where(key), "three numbers, in the mesh's coordinates: [31.0, 0.0, -9.5]"
        )
        x, y, z = (number * metres for number in numbers)
        return x, y, z

    def listed(self, key: str) -> bool:
        """Tell whether a key stands there with a list; nothing is checked and the key is not made known."""
        return isinstance(self._table.get(key), list)

    def place(self, key: str, words: tuple[str, ...], metres: float) -> str | Point | None:
        """Read one word out of several or a point in m, as `point`; None where it is not stated."""
        return self._place(self._table[key], self.where(key), words, metres) if self.stated(key) else None

    def places(self, key: str, words: tuple[str, ...], metres: float) -> tuple[str | Point, ...]:
        """Read the places of a list, each as `place`; none where it is not stated."""
        if not self.stated(key):
            return ()
        rows = self._rows(key, f"a list of places: ['{words[0]}', [31.0, 0.0, -9.5]]")
        return tuple(self._place(row, where, words, metres) for where, row in rows)

    def direction(self, key: str) -> Point:
        """Read a unit vector, which must be stated."""
        if not self.stated(key):
            self._missing(key, "'-x'")
            return (math.nan,) * 3
        return self._direction(self._table[key], self.where(key))

    def directions(self, key: str) -> tuple[Point, ...]:
        """Read the unit vectors of a list; none where it is not stated."""
        if not self.stated(key):
            return ()
        value, allowed = self._table[key], "a list of directions: [[1, 2, 3], '+z']"
        if isinstance(value, list) and value and all(map(_is_number, value)):
            self._wrong(key, allowed)
            return ()
        rows = self._rows(key, allowed)
        return tuple(self._direction(row, where) for where, row in rows)

    def inner(self, key: str, such_as: str) -> Keys | None:
        """Read a table within the table, None where it is not stated."""
        if not self.stated(key):
            return None
        value = self._table[key]
        if not isinstance(value, Mapping):
            self._wrong(key, such_as)
            return None
        return Keys(value, self.where(key), self._faults)

    def close(self) -> None:
        """Put down every key that nothing asked for."""
        for key in self._table:
            if key not in self._known:
                known = sorted(set(self._known))
                self.fault(
                    _safe(key), "no such key", allowed=", ".join(known), next_step=did_you_mean(key, known, "remove it")
                )
                # One slip is one fault: what was meant by it is not missing.
                for meant in nearest(key, known, most=1):
                    if self._absent.get(meant) in self._faults:
                        self._faults.remove(self._absent[meant])

    def _quantity(self, value: object, where: str, kind: str, limits: Limits) -> float:
        try:
            return quantity(value, kind, where, **limits)
        except InputError as error:
            self.take(error)
            return math.nan

    def _told_once(self, key: str, values: Sequence[object]) -> None:
        """Put down that a list says the same twice; stand-ins of faulty values, which are no numbers, do not count."""
        read = [value for value in values if value == value]
        if len(set(read)) < len(read):
            self.fault(key, "the list says the same twice", repr(self._table[key])[:60], "each once", "remove one")

    def _rows(self, key: str, allowed: str) -> Iterator[tuple[str, object]]:
        """Entries of a list with their paths; none after a fault."""
        value = self._table[key]
        if not isinstance(value, list):
            self._wrong(key, allowed)
        elif not value:
            self.fault(key, "the list is empty", "[]", allowed, "fill it or remove the key")
        elif len(value) > _MOST_ROWS:
            self.fault(key, "the list is too long", str(len(value)), f"up to {_MOST_ROWS}", "shorten it")
        else:
            yield from ((f"{self.where(key)}[{number}]", row) for number, row in enumerate(value, 1))

    def _three(self, value: object, where: str, allowed: str) -> Point:
        if isinstance(value, list) and len(value) == 3 and all(map(_is_number, value)):
            x, y, z = map(float, value)
            return x, y, z
        self._faults.append(Fault("three finite numbers were expected", where, repr(value)[:60], allowed, "correct it"))
        return (math.nan,) * 3

    def _place(self, value: object, where: str, words: tuple[str, ...], metres: float) -> str | Point:
        known = f"{', '.join(repr(word) for word in words)}, or a point in the mesh's coordinates: [31.0, 0.0, -9.5]"
        if isinstance(value, str):
            word = value.strip()
            if word not in words:
                step = did_you_mean(word, words, "name one of them")
                self._faults.append(Fault("no such place", where, repr(value)[:60], known, step))
            return word
        x, y, z = (number * metres for number in self._three(value, where, known))
        return x, y, z

    def _direction(self, value: object, where: str) -> Point:
        allowed = f"one of {', '.join(AXES)}, or three numbers such as [1, 0, 0.2]"
        if isinstance(value, str):
            sign, axis = (value[0], value[1:]) if value[:1] in {"+", "-"} else ("+", value)
            if sign + axis not in AXES:
                self._faults.append(Fault("no such direction", where, repr(value), allowed, "correct it"))
                return (math.nan,) * 3
            size = -1.0 if sign == "-" else 1.0
            return tuple(size if name == axis else 0.0 for name in "xyz")  # type: ignore[return-value]
        vector = self._three(value, where, allowed)
        length = math.hypot(*vector)
        if length == 0.0 or math.isinf(length):
            self._faults.append(Fault("no direction has this length", where, repr(value), allowed, "correct it"))
            return (math.nan,) * 3
        x, y, z = (number / length for number in vector)
        return x, y, z

    def _wrong(self, key: str, allowed: str) -> None:
        self.fault(key, "the value is of the wrong kind", repr(self._table[key])[:60], allowed, "correct it")

    def _missing(self, key: str, such_as: str) -> None:
        self.absent(Fault("the key is missing", self.where(key), next_step=f"add it: {key} = {such_as}"), key)


def _rest(stated: list[str]) -> str:
    return "other" if len(stated) == 2 else "others"


def _safe(key: str) -> str:
    return key if key.isprintable() else repr(key)


def _is_number(value: object) -> bool:
    return isinstance(value, int | float) and not isinstance(value, bool) and abs(value) < 1e300
