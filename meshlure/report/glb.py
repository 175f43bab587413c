"""The bait in its water as a binary glTF file, for any viewer of 3-D scenes."""

from __future__ import annotations

import json
import struct
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from typing import Any

import numpy as np
from numpy.typing import NDArray

from meshlure.report.figures import INK, WATER
from meshlure.report.stand import Stand, stand
from meshlure.report.subject import subject
from meshlure.report.view import piece_colours
from meshlure.report.wording import cleaned
from meshlure.results import Scene, Study
from meshlure.version import VERSION

Floats = NDArray[np.float64]

_ASIDE, _AHEAD = 22.0, 10.0
"""mm of water shown beside the bait and beyond its ends."""
_DOT = 0.008
"""Radius of a centre's mark, as a share of the bait's length."""
_OPACITY = {"body": 0.3, "void": 0.4, "water": 0.3}
_FLOAT, _INT, _VERTICES, _FACES = 5126, 5125, 34962, 34963


@dataclass(frozen=True, eq=False)
class _Thing:
    """A node: its name, places and normals as right, away, up (mm), its triangles and its look."""

    name: str
    places: Floats
    normals: Floats
    faces: NDArray[np.intp]
    colour: str
    opacity: float = 1.0


@dataclass(eq=False)
class _Buffer:
    """Numbers one after the other, each lot at a multiple of four bytes, with the entries that find them again."""

    data: bytearray = field(default_factory=bytearray)
    views: list[dict[str, Any]] = field(default_factory=list)
    accessors: list[dict[str, Any]] = field(default_factory=list)

    def add(self, values: NDArray[Any], kind: str, **more: Any) -> int:
        raw = values.tobytes()
        target = _FACES if kind == "SCALAR" else _VERTICES
        self.views.append({"buffer": 0, "byteOffset": len(self.data), "byteLength": len(raw), "target": target})
        self.data += raw + b"\0" * (-len(raw) % 4)
        numbers = _INT if kind == "SCALAR" else _FLOAT
        view = len(self.views) - 1
        self.accessors.append(
            {"bufferView": view, "componentType": numbers, "count": len(values), "type": kind, **more}
        )
        return len(self.accessors) - 1


def glb(study: Study) -> bytes:
    """Return the scene of a study as one glTF 2.0 binary file.

    Parameters
    ----------
    study : Study
        With a scene that holds a mesh.

    Returns
    -------
    bytes
        Metres; y is up from the level water, the nose points along +z and the bait's left along +x, as the standard
        wants a front. A node a piece under the piece's name, then the water's surface and the two centres.

    Raises
    ------
    ValueError
        The study has no scene.

    References
    ----------
    Khronos Group, glTF 2.0 Specification (ISO/IEC 12113:2022): 3.4 coordinates, 3.6 buffers, 4 binary files.
    """
    if study.scene is None or not any(len(piece.faces) for piece in study.scene.pieces):
        raise ValueError("the study has no scene")
    things = [thing for thing in _things(study, study.scene) if len(thing.faces)]
    buffer = _Buffer()
    meshes = [_mesh(buffer, thing, number) for number, thing in enumerate(things)]
    tree = {
        "asset": {"version": "2.0", "generator": f"meshlure {VERSION}"},
        "scene": 0,
        "scenes": [{"name": cleaned(str(study.results["name"] or "bait")), "nodes": list(range(len(things)))}],
        "nodes": [{"name": thing.name, "mesh": number} for number, thing in enumerate(things)],
        "meshes": meshes,
        "materials": [_material(thing) for thing in things],
        "accessors": buffer.accessors,
        "bufferViews": buffer.views,
        "buffers": [{"byteLength": len(buffer.data)}],
    }
    return _file(tree, bytes(buffer.data))


def _things(study: Study, scene: Scene) -> Iterator[_Thing]:
    standing = stand(scene, study.results["frame"])
    for piece, colour in zip(scene.pieces, piece_colours(scene), strict=True):
        opacity = _OPACITY.get(piece.role, 1.0)
        places, normals = standing.place(piece.vertices), piece.normals @ standing.axes.T
        yield _Thing(cleaned(piece.name), places, normals, piece.faces, colour, opacity)
    if standing.water is not None:
        yield _water(scene, standing, standing.water)
    yield from _centres(study.results, standing)


def _water(scene: Scene, standing: Stand, level: float) -> _Thing:
    points = np.concatenate([standing.place(piece.vertices)[:, :2] for piece in scene.pieces])
    beyond = np.array([_AHEAD, _ASIDE])
    low, high = points.min(axis=0) - beyond, points.max(axis=0) + beyond
    corners = np.array([[x, y, level] for x, y in (low, (high[0], low[1]), high, (low[0], high[1]))])
    normals = np.tile([0.0, 0.0, 1.0], (4, 1))
    return _Thing("water", corners, normals, np.array([[0, 1, 2], [0, 2, 3]]), WATER, _OPACITY["water"])


def _centres(results: Mapping[str, Any], standing: Stand) -> Iterator[_Thing]:
    seen, radius = subject(results), _DOT * float(results["size"]["length_mm"])
    axes = np.concatenate([np.eye(3), -np.eye(3)])
    # An octahedron; each face takes one of the two ends of every axis.
    faces = np.array([[a, b, c] for a in (0, 3) for b in (1, 4) for c in (2, 5)])
    turned = np.linalg.det(axes[faces]) < 0
    faces[turned] = faces[turned][:, ::-1]
    for name, centre, colour in (
        ("centre of gravity", seen.gravity, INK),
        ("centre of buoyancy", seen.buoyancy, WATER),
    ):
        yield _Thing(name, standing.place(centre) + radius * axes, axes, faces, colour)


def _mesh(buffer: _Buffer, thing: _Thing, material: int) -> dict[str, Any]:
    places = np.ascontiguousarray(_yup(thing.places) * 1e-3, dtype="<f4")
    lengths = np.linalg.norm(thing.normals, axis=1, keepdims=True)
    # A vertex of faces too thin to have a normal has none either, and the standard allows no zero.
    normals = np.where(lengths > 0, thing.normals / np.where(lengths > 0, lengths, 1.0), (0.0, 0.0, 1.0))
    attributes = {
        "POSITION": buffer.add(places, "VEC3", min=places.min(axis=0).tolist(), max=places.max(axis=0).tolist()),
        "NORMAL": buffer.add(np.ascontiguousarray(_yup(normals), dtype="<f4"), "VEC3"),
    }
    faces = buffer.add(np.ascontiguousarray(thing.faces.ravel(), dtype="<u4"), "SCALAR")
    return {"name": thing.name, "primitives": [{"attributes": attributes, "indices": faces, "material": material}]}


def _yup(points: Floats) -> Floats:
    """Return points as right, away, up in the standard's axes: the bait's left, up, towards the nose."""
    return np.stack([-points[:, 1], points[:, 2], -points[:, 0]], axis=1)


def _material(thing: _Thing) -> dict[str, Any]:
    value = [int(thing.colour[at : at + 2], 16) / 255 for at in (1, 3, 5)]
    # The standard's factors are linear light; colours are written in sRGB (IEC 61966-2-1).
    linear = [v / 12.92 if v <= 0.04045 else ((v + 0.055) / 1.055) ** 2.4 for v in value]
    surface = {"baseColorFactor": [*linear, thing.opacity], "metallicFactor": 0.0, "roughnessFactor": 0.6}
    look = {"name": thing.name, "pbrMetallicRoughness": surface}
    return look if thing.opacity == 1 else look | {"alphaMode": "BLEND", "doubleSided": True}


def _file(tree: Mapping[str, Any], data: bytes) -> bytes:
    text = json.dumps(tree, separators=(",", ":"), ensure_ascii=False, allow_nan=False).encode("utf-8")
    text += b" " * (-len(text) % 4)
    chunks = struct.pack("<I4s", len(text), b"JSON") + text + struct.pack("<I4s", len(data), b"BIN\0") + data
    return struct.pack("<4sII", b"glTF", 2, 12 + len(chunks)) + chunks
