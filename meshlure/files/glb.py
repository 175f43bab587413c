"""GLB files: the triangles of every node of the scene, in its place, in metres as the standard has it."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator
from typing import Any, Final

import numpy as np

from meshlure.errors import InputError
from meshlure.files.glbjson import Glb, Tree
from meshlure.files.several import several, too_many
from meshlure.files.triangles import Part, Triangles, in_metres
from meshlure.findings import Finding, Level
from meshlure.geometry.surface import Floats, Ints

_TRIANGLES, _STRIP, _FAN = 4, 5, 6
_HARMLESS: Final = ("KHR_materials", "KHR_texture", "KHR_lights", "EXT_texture", "KHR_mesh_quantization", "KHR_xmp")
"""Beginnings of the names of extensions that leave the shape as it is, or are read."""


def read_glb(data: bytes, where: str, largest: int) -> Triangles:
    """Triangles of a GLB file, in m.

    Parameters
    ----------
    data : bytes
        The whole file.
    where : str
        The file, for messages.
    largest : int
        Bytes that may be read; its triangles are bounded in proportion.

    Raises
    ------
    InputError
        It is no GLB, is damaged or compressed, keeps its numbers in another file, holds no triangles, names a vertex
        that is not there, or holds a coordinate that is no finite number.

    Notes
    -----
    After the glTF 2.0 Specification: lengths are metres; a node's transform is its matrix, or translation, rotation
    and scale, after those of the nodes above it; one that mirrors turns the faces. Strips and fans are cut up, points
    and lines passed over. Skins and morph targets are left at rest, which is said. Up is y in such files, and an
    exporter turns the axes of CAD accordingly; here they stay as the file has them, which is said too.
    """
    glb = Glb(data, where)
    for name in _names(glb.tree.get("extensionsRequired")):
        if not name.startswith(_HARMLESS):
            raise glb.fault(
                "the GLB needs an extension that is not read", name[:60], "plain meshes", "export it uncompressed"
            )
    walk = _Walk(glb, largest)
    found = list(walk.all())
    if not found:
        raise glb.fault("the GLB holds no triangles", f"{walk.nodes} nodes", "a mesh", "export the part as a mesh")
    corners = np.concatenate([corners for _, corners in found])
    parts: list[Part] = []
    for name, held in found:
        if parts and parts[-1].name == name:
            parts[-1] = Part(name, parts[-1].triangles + len(held))
        else:
            parts.append(Part(name, len(held)))
    message = "In a GLB up is y, as its standard has it: exporters turn the axes of CAD."
    axes = Finding("axes-of-file", Level.NOTE, message, advice="State nose and back as they are in this file.")
    findings = [axes, *walk.findings(), *several(parts, "objects")]
    return Triangles(in_metres(corners, 1.0, where), tuple(findings), tuple(parts), "m")


def _names(said: object) -> list[str]:
    return [name for name in said if isinstance(name, str)] if isinstance(said, list) else []


class _Walk:
    """Goes through the nodes of a scene."""

    def __init__(self, glb: Glb, largest: int) -> None:
        self._glb = glb
        self._largest = largest
        self._count = 0
        self._seen: set[int] = set()
        self._left: Counter[str] = Counter()

    @property
    def nodes(self) -> int:
        """How many were met."""
        return len(self._seen)

    def findings(self) -> Iterator[Finding]:
        """Yield what was passed over."""
        for what, count in self._left.items():
            yield Finding("not-read", Level.NOTE, f"Passed over: {count} {what}.", count=count)

    def all(self) -> Iterator[tuple[str, Floats]]:
        """Yield the triangles of every node, (m, 3, 3), m, with its name."""
        waiting: list[tuple[Any, Floats]] = [(number, np.eye(4)) for number in reversed(self._roots())]
        while waiting:
            number, outer = waiting.pop()
            node = self._glb.entry("nodes", number)
            if number in self._seen:
                raise self._glb.fault("a node of the GLB hangs in two places, or in itself", f"node {number}")
            self._seen.add(number)
            transform = outer @ self._transform(node)
            self._left["skins, left at rest"] += "skin" in node
            self._left["nodes set in many places (EXT_mesh_gpu_instancing), once each"] += (
                "EXT_mesh_gpu_instancing" in (node.get("extensions") or {})
            )
            if "mesh" in node:
                yield from self._mesh(node, transform)
            children = node.get("children", [])
            if not isinstance(children, list):
                raise self._glb.fault("the children of a node cannot be read", repr(children)[:40])
            waiting += [(child, transform) for child in reversed(children)]
        self._left = +self._left

    def _roots(self) -> list[Any]:
        tree = self._glb.tree
        if tree.get("scenes"):
            scene = self._glb.entry("scenes", tree.get("scene", 0))
            nodes = scene.get("nodes", [])
            return nodes if isinstance(nodes, list) else []
        nodes = tree.get("nodes", [])
        if not isinstance(nodes, list):
            return []
        held = {str(child) for node in nodes if isinstance(node, dict) for child in node.get("children") or []}
        return [number for number in range(len(nodes)) if str(number) not in held]

    def _transform(self, node: Tree) -> Floats:
        """(4, 4) array, of column vectors."""
        try:
            if "matrix" in node:
                # The specification writes the columns one after another.
                made = np.array(node["matrix"], dtype=np.float64).reshape(4, 4).T
            else:
                made = np.eye(4)
                x, y, z, w = np.array(node.get("rotation", [0, 0, 0, 1]), dtype=np.float64)
                turn = np.array(
                    [
                        [1 - 2 * (y * y + z * z), 2 * (x * y - w * z), 2 * (x * z + w * y)],
                        [2 * (x * y + w * z), 1 - 2 * (x * x + z * z), 2 * (y * z - w * x)],
                        [2 * (x * z - w * y), 2 * (y * z + w * x), 1 - 2 * (x * x + y * y)],
                    ]
                )
                made[:3, :3] = turn * np.array(node.get("scale", [1, 1, 1]), dtype=np.float64).reshape(3)
                made[:3, 3] = np.array(node.get("translation", [0, 0, 0]), dtype=np.float64).reshape(3)
        except (ValueError, TypeError, OverflowError):
            made = np.full((4, 4), np.nan)
        if not np.isfinite(made).all():
            raise self._glb.fault("the transform of a node cannot be read", str(node.get("name", ""))[:40])
        return np.asarray(made)

    def _mesh(self, node: Tree, transform: Floats) -> Iterator[tuple[str, Floats]]:
        mesh = self._glb.entry("meshes", node["mesh"])
        name = str(node.get("name") or mesh.get("name") or "")
        primitives = mesh.get("primitives", [])
        for said in primitives if isinstance(primitives, list) else []:
            if not isinstance(said, dict):
                raise self._glb.fault("a mesh of the GLB cannot be read", repr(said)[:40])
            points, faces = self._primitive(said)
            if not len(faces):
                continue
            with np.errstate(over="ignore", invalid="ignore"):
                placed = points @ transform[:3, :3].T + transform[:3, 3]
            turned = faces[:, ::-1] if np.linalg.det(transform[:3, :3]) < 0 else faces
            yield name, np.asarray(placed[turned])

    def _primitive(self, said: Tree) -> tuple[Floats, Ints]:
        glb, mode = self._glb, said.get("mode", _TRIANGLES)
        none = np.empty((0, 3)), np.empty((0, 3), dtype=np.intp)
        if mode not in (_TRIANGLES, _STRIP, _FAN):
            self._left["sets of points or lines"] += 1
            return none
        if "KHR_draco_mesh_compression" in (said.get("extensions") or {}):
            raise glb.fault("the GLB is compressed", "KHR_draco_mesh_compression", "plain", "export it uncompressed")
        self._left["morph targets, left at rest"] += "targets" in said
        attributes = said.get("attributes")
        if not isinstance(attributes, dict) or "POSITION" not in attributes:
            return none
        with np.errstate(invalid="ignore"):  # a signalling "not a number", which is refused later
            points = np.asarray(glb.accessor(attributes["POSITION"], 3), dtype=np.float64)
        order = np.arange(len(points)) if "indices" not in said else glb.whole_numbers(said["indices"])
        if len(order) and (order.min() < 0 or order.max() >= len(points)):
            raise glb.fault("a face names a vertex that is not there", f"{order.max()}", f"0 to {len(points) - 1}")
        faces = _faces(order, mode)
        self._count += len(faces)
        beyond = too_many(self._count, self._largest, glb.where)
        if beyond is not None:
            raise InputError(beyond)
        return points, faces


def _faces(order: Ints, mode: int) -> Ints:
    """Triangles of a list of vertices; of an incomplete one the rest is left, as the specification asks."""
    if mode == _TRIANGLES:
        return order[: len(order) // 3 * 3].reshape(-1, 3)
    if len(order) < 3:
        return np.empty((0, 3), dtype=np.intp)
    if mode == _FAN:
        return np.stack([order[1:-1], order[2:], np.full(len(order) - 2, order[0])], axis=1)
    strip = np.stack([order[:-2], order[1:-1], order[2:]], axis=1)
    strip[1::2] = strip[1::2][:, [0, 2, 1]]
    return strip
