"""The XML of a 3MF model part: objects, components and build items, without anything that XML could smuggle in."""

from __future__ import annotations

import math
import re
from array import array
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from typing import Final
from xml.parsers import expat

import numpy as np

from meshlure.errors import Fault, InputError
from meshlure.geometry.surface import Floats, Ints

CORE: Final = "http://schemas.microsoft.com/3dmanufacturing/core/2015/02"
PRODUCTION: Final = "http://schemas.microsoft.com/3dmanufacturing/production/2015/06"
_CHANGES_NOTHING: Final = frozenset(
    {
        CORE,
        PRODUCTION,
        "http://schemas.microsoft.com/3dmanufacturing/material/2015/02",
        "http://schemas.microsoft.com/3dmanufacturing/trianglesets/2021/07",
    }
)
"""Extensions that a model may require and that are read, or say nothing of its shape."""

_LONGEST: Final = 4_000_000
"""Bytes of one tag, or between two. The parser looks at a longer one again with every megabyte that it is given."""

_GROUPED: Final = re.compile(rb"""[\s](?:[xyz]|v[123])\s*=\s*["'][0-9.eE+-]*_""")
"""A number with an underscore in it, which Python would read as if it were not there."""


@dataclass(frozen=True, eq=False)
class Placed:
    """An object set somewhere: a build item, or a component of another object.

    Attributes
    ----------
    object_id : str
    path : str
        Part of the package that holds the object; empty for the one that this stands in.
    transform : (4, 3) array
        Of row vectors with a 1 behind them, file's unit.
    """

    object_id: str
    path: str
    transform: Floats


@dataclass(eq=False)
class Stored:
    """An object of a model part: a mesh, or other objects put together."""

    name: str
    kind: str
    vertices: array[float] = field(default_factory=lambda: array("d"))
    triangles: array[int] = field(default_factory=lambda: array("q"))
    components: list[Placed] = field(default_factory=list)

    def points(self) -> Floats:
        """(n, 3) array, file's unit."""
        return np.array(self.vertices, dtype=np.float64).reshape(-1, 3)

    def faces(self) -> Ints:
        """(m, 3) array."""
        return np.array(self.triangles, dtype=np.intp).reshape(-1, 3)


@dataclass(eq=False)
class Model:
    """What a model part says.

    Attributes
    ----------
    unit : str
        In the specification's words.
    objects : dict of Stored
        By their ids.
    items : list of Placed
        What is to be built.
    """

    unit: str = "millimeter"
    objects: dict[str, Stored] = field(default_factory=dict)
    items: list[Placed] = field(default_factory=list)


def read_model(data: bytes, where: str) -> Model:
    """Return a model part.

    Parameters
    ----------
    data : bytes
        Its XML.
    where : str
        File and part, for messages.

    Raises
    ------
    InputError
        It is no XML (with the line), has a document type, needs an extension that is not read, or says something that
        the format does not allow.

    Notes
    -----
    After the 3MF Core Specification 1.2. A document type is refused, as the specification asks (2.3.4): entities
    could name other files, or grow without end. Elements of other name spaces are passed over.
    """
    grouped = _GROUPED.search(data) if b"_" in data else None
    if grouped:
        line = data.count(b"\n", 0, grouped.start()) + 1
        found = grouped[0].strip().decode("ascii", "replace")
        raise InputError(Fault("a number cannot be read", f"{where}, line {line}", found, "digits", "export it again"))
    reader = _Reader(where)
    parser = expat.ParserCreate(namespace_separator=" ")
    parser.buffer_text = True
    reader.follow(parser)
    parse(parser, data, where, "the model is")
    return reader.model


def parse(parser: expat.XMLParserType, data: bytes, where: str, what: str) -> None:
    """Have a parser take all of a part's XML.

    Parameters
    ----------
    parser : expat parser
        With its handlers.
    data : bytes
    where : str
        For messages, which begin with ``what``.
    what : str
        "the model is".

    Raises
    ------
    InputError
        It is no sound XML, in an encoding that is not read, or has a tag that is too long.
    """
    ends = np.flatnonzero(np.frombuffer(data, dtype=np.uint8) == ord(">"))
    longest = int(np.diff(ends, prepend=0, append=len(data)).max(initial=0))
    if longest > _LONGEST:
        raise InputError(
            Fault(f"{what} no sound XML", where, f"a tag of {longest:,} bytes", f"{_LONGEST:,}", "export it again")
        )
    try:
        parser.Parse(data, True)
    except expat.ExpatError as error:
        found, line = expat.ErrorString(error.code), f"{where}, line {error.lineno}"
        raise InputError(Fault(f"{what} no sound XML", line, found, next_step="export the part again")) from None
    except (LookupError, ValueError) as error:
        # Of an encoding that Python does not know, or that the parser cannot take letter by letter.
        shown = "".join(c if c.isprintable() else " " for c in str(error))[:80]
        step = "export the part again"
        raise InputError(
            Fault(f"{what} in an encoding that is not read", where, shown, "UTF-8 or UTF-16", step)
        ) from None


class _Reader:
    """Takes a model's elements one after another."""

    def __init__(self, where: str) -> None:
        self.model = Model()
        self._where = where
        self._object: Stored | None = None
        self._prefixes: dict[str, str] = {}
        self._line: Callable[[], int] = lambda: 0
        self._begin: Mapping[str, Callable[[dict[str, str]], None]] = {
            f"{CORE} model": self._model,
            f"{CORE} object": self._begin_object,
            f"{CORE} component": self._component,
            f"{CORE} item": self._item,
        }

    def follow(self, parser: expat.XMLParserType) -> None:
        """Have a parser hand over what it meets."""
        vertex, triangle = f"{CORE} vertex", f"{CORE} triangle"
        begin = self._begin

        def started(tag: str, said: dict[str, str]) -> None:
            # A million of these: as few steps as can be.
            current = self._object
            if tag == vertex and current is not None:
                try:
                    current.vertices.extend((float(said["x"]), float(said["y"]), float(said["z"])))
                except (KeyError, ValueError):
                    raise self._unread("a vertex", said, "x, y and z with a decimal point") from None
                return
            if tag == triangle and current is not None:
                try:
                    current.triangles.extend((int(said["v1"]), int(said["v2"]), int(said["v3"])))
                except (KeyError, ValueError, OverflowError):
                    raise self._unread("a triangle", said, "v1, v2 and v3, numbers of vertices") from None
                return
            if tag in begin:
                begin[tag](said)

        def ended(tag: str) -> None:
            if tag == f"{CORE} object":
                self._object = None

        def declared(prefix: str | None, uri: str | None) -> None:
            self._prefixes.setdefault(prefix or "", uri or "")

        def doctype(*_: object) -> None:
            raise InputError(
                Fault(
                    "the model has a document type, which a 3MF may not have",
                    f"{self._where}, line {self._line()}",
                    "<!DOCTYPE",
                    "XML without entities",
                    "export the part again; a file that was made to mislead is best deleted",
                )
            )

        self._line = lambda: int(parser.CurrentLineNumber)
        parser.StartElementHandler = started
        parser.EndElementHandler = ended
        parser.StartNamespaceDeclHandler = declared
        parser.StartDoctypeDeclHandler = doctype

    def _model(self, said: dict[str, str]) -> None:
        self.model.unit = said.get("unit", "millimeter")
        for prefix in said.get("requiredextensions", "").split():
            uri = self._prefixes.get(prefix, prefix)
            if uri not in _CHANGES_NOTHING:
                raise InputError(
                    Fault(
                        "the model needs an extension of the format that is not read",
                        self._where,
                        uri[:120],
                        "plain meshes, in one or several objects",
                        "export the part as a plain 3MF mesh, or as STL",
                    )
                )

    def _begin_object(self, said: dict[str, str]) -> None:
        self._object = Stored(said.get("name", ""), said.get("type", "model"))
        number = said.get("id", "")
        if not number or number in self.model.objects:
            raise self._unread("an object", said, "an id that no other object has")
        self.model.objects[number] = self._object

    def _component(self, said: dict[str, str]) -> None:
        if self._object is not None:
            self._object.components.append(self._placed("a component", said))

    def _item(self, said: dict[str, str]) -> None:
        self.model.items.append(self._placed("a build item", said))

    def _placed(self, noun: str, said: dict[str, str]) -> Placed:
        words = said.get("transform", "1 0 0 0 1 0 0 0 1 0 0 0").split()
        try:
            numbers = [float(word) for word in words]
        except ValueError:
            numbers = []
        if len(numbers) != 12 or not all(map(math.isfinite, numbers)):
            raise self._unread(noun, said, "a transform of twelve numbers")
        return Placed(said.get("objectid", ""), said.get(f"{PRODUCTION} path", ""), np.reshape(numbers, (4, 3)))

    def _unread(self, noun: str, said: dict[str, str], allowed: str) -> InputError:
        found = " ".join(f'{key.rpartition(" ")[2]}="{value}"' for key, value in said.items())
        shown = "".join(c if c.isprintable() else " " for c in found)[:80]
        where = f"{self._where}, line {self._line()}"
        return InputError(Fault(f"{noun} cannot be read", where, shown, allowed, "export the part again"))
