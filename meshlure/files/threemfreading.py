"""3MF packages read: every object that is to be built, in its place, in the unit that the file states."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from types import MappingProxyType
from typing import Final
from xml.parsers import expat

import numpy as np

from meshlure.errors import Fault, InputError
from meshlure.files.package import Package, resolved
from meshlure.files.several import several, too_many
from meshlure.files.threemf import MODEL
from meshlure.files.threemfxml import Model, Placed, Stored, parse, read_model
from meshlure.files.triangles import Part, Triangles, in_metres
from meshlure.findings import Finding, Level
from meshlure.geometry.surface import Floats

_RELATIONS: Final = "_rels/.rels"
_KIND: Final = "http://schemas.microsoft.com/3dmanufacturing/2013/01/3dmodel"

UNITS: Final[Mapping[str, tuple[str, float]]] = MappingProxyType(
    {
        "micron": ("um", 1e-6),
        "millimeter": ("mm", 1e-3),
        "centimeter": ("cm", 1e-2),
        "inch": ("in", 0.0254),
        "foot": ("ft", 0.3048),
        "meter": ("m", 1.0),
    }
)
"""The specification's names of units: ours, and the length in m."""

_DEEPEST: Final = 64
"""Objects within objects; an assembly of a bait has two or three."""

_PLACES: Final = 20_000
"""Placed objects, those that only hold others among them."""

_NOT_PARTS: Final = frozenset({"support", "solidsupport"})
"""Kinds of objects that only hold a print up."""


@dataclass(frozen=True, eq=False)
class _Leaf:
    """A mesh in its place."""

    name: str
    stored: Stored
    transform: Floats


def read_3mf(data: bytes, where: str, largest: int) -> Triangles:
    """Triangles of a 3MF package, in m.

    Parameters
    ----------
    data : bytes
        The whole file.
    where : str
        The file, for messages.
    largest : int
        Bytes that may be unpacked from it; its triangles are bounded in proportion.

    Raises
    ------
    InputError
        It is no such package, is damaged, needs what is not read, names objects, vertices or parts that are not there,
        holds no mesh, or unpacks to more than is allowed.

    Notes
    -----
    After the 3MF Core Specification 1.2 and, for objects kept in parts of their own, the Production Extension. Build
    items and components are set in place by their transforms; one that mirrors also turns the faces, so that a solid
    stays one. Objects that are not built are not read, nor supports. Where nothing is to be built, the objects that no
    other holds are read as they lie, and that is said.
    """
    package = Package(data, where, largest)
    root = _root(package, where)
    models = {root: read_model(package.read(root), f"{where}, {root}")}
    model = models[root]
    if model.unit not in UNITS:
        raise InputError(
            Fault("the model's unit is none of the format's", where, model.unit[:40], ", ".join(UNITS), "export again")
        )
    unit, metres = UNITS[model.unit]
    placing = _Placing(package, models, where, largest)
    findings = list(_unbuilt(model)) if not model.items else []
    items = model.items or _loose(model)
    leaves = [leaf for item in items for leaf in placing.leaves(item, root, np.eye(4, 3), "", 0)]
    if placing.supports:
        message = f"Left out: {placing.supports} supports, which only hold the print up."
        findings.append(Finding("supports-left-out", Level.NOTE, message, count=placing.supports))
    if not leaves:
        found = f"{len(model.objects)} objects, {len(model.items)} to be built"
        raise InputError(Fault("the 3MF holds no mesh", where, found, "an object with triangles", "export the part"))
    corners = np.concatenate([_corners(leaf, where) for leaf in leaves])
    parts = tuple(Part(leaf.name, len(leaf.stored.triangles) // 3) for leaf in leaves)
    return Triangles(in_metres(corners, metres, where), (*findings, *several(parts, "objects")), parts, unit)


def _root(package: Package, where: str) -> str:
    """Name of the model part, as the package's relations say it."""
    if not package.holds(_RELATIONS):
        raise InputError(
            Fault("the package does not say where its model is", where, "no _rels/.rels", "a 3MF", "export it again")
        )
    targets: list[str] = []

    def started(tag: str, said: dict[str, str]) -> None:
        if tag.rpartition(" ")[2] == "Relationship" and said.get("Type") == _KIND:
            targets.append(said.get("Target", ""))

    def refuse(*_: object) -> None:
        what = "the package's relations have a document type"
        raise InputError(Fault(what, where, "<!DOCTYPE", "XML without entities", "export the part again"))

    parser = expat.ParserCreate(namespace_separator=" ")
    parser.StartElementHandler = started
    parser.StartDoctypeDeclHandler = refuse
    parse(parser, package.read(_RELATIONS), where, "the package's relations are")
    if not targets:
        raise InputError(
            Fault(
                "the package holds no 3D model",
                where,
                "no relation to one",
                f"a relation to {MODEL}",
                "name the 3MF itself; another office document does not become one by its suffix",
            )
        )
    return resolved(targets[0], "")


def _loose(model: Model) -> list[Placed]:
    """Objects that no other holds, as if they were to be built."""
    held = {component.object_id for stored in model.objects.values() for component in stored.components}
    return [Placed(number, "", np.eye(4, 3)) for number in model.objects if number not in held]


def _unbuilt(model: Model) -> Iterator[Finding]:
    if model.objects:
        message = "The file says of none of its objects that it is to be built; all were read as they lie."
        yield Finding("nothing-to-build", Level.NOTE, message, count=len(model.objects))


class _Placing:
    """Follows build items and components down to meshes."""

    def __init__(self, package: Package, models: dict[str, Model], where: str, largest: int) -> None:
        self._package = package
        self._models = models
        self._where = where
        self._largest = largest
        self._count = 0
        self._visits = 0
        self.supports = 0

    def leaves(self, item: Placed, part: str, outer: Floats, above: str, depth: int) -> Iterator[_Leaf]:
        """Yield every mesh of an item in its place."""
        path = resolved(item.path, "") if item.path else part
        if path not in self._models:
            self._models[path] = read_model(self._package.read(path), f"{self._where}, {path}")
        stored = self._models[path].objects.get(item.object_id)
        self._visits += 1
        if stored is None:
            raise self._fault("an object that is to be built is not there", f"objectid {item.object_id!r}")
        if depth > _DEEPEST:
            raise self._fault("objects hold each other without end, or too deep", f"more than {_DEEPEST} levels")
        if stored.kind in _NOT_PARTS:
            self.supports += 1
            return
        transform = _after(item.transform, outer)
        name = stored.name or above
        if stored.triangles:
            self._count += len(stored.triangles) // 3
            yield _Leaf(name, stored, transform)
        beyond = too_many(self._count, self._largest, self._where)
        if beyond is not None:
            raise InputError(beyond)
        if self._visits > _PLACES:
            raise self._fault("objects are set in too many places", f"more than {_PLACES:,}")
        for component in stored.components:
            yield from self.leaves(component, path, transform, name, depth + 1)

    def _fault(self, what: str, found: str) -> InputError:
        return InputError(Fault(what, self._where, found, next_step="export the part again"))


def _after(inner: Floats, outer: Floats) -> Floats:
    """Transform that first does the inner one: row vectors with a 1 behind them, (4, 3)."""
    return np.column_stack([inner, [0, 0, 0, 1]]) @ outer


def _corners(leaf: _Leaf, where: str) -> Floats:
    """(m, 3, 3) array, file's unit."""
    points, faces = leaf.stored.points(), leaf.stored.faces()
    lost = np.flatnonzero(((faces < 0) | (faces >= len(points))).any(axis=1))
    if len(lost):
        name = "".join(c if c.isprintable() else " " for c in leaf.name)[:40]
        raise InputError(
            Fault(
                f"a triangle names a vertex that is not there (and {len(lost) - 1:,} more such triangles)"
                if len(lost) > 1
                else "a triangle names a vertex that is not there",
                f"{where}, object '{name}', triangle {lost[0] + 1}",
                " ".join(map(str, faces[lost[0]].tolist())),
                f"0 to {len(points) - 1}",
                "the file is cut off or damaged: export it again",
            )
        )
    with np.errstate(over="ignore", invalid="ignore"):
        placed = points @ leaf.transform[:3] + leaf.transform[3]
        mirrored = np.linalg.det(leaf.transform[:3]) < 0
    if mirrored:
        faces = faces[:, ::-1]
    return np.asarray(placed[faces])
