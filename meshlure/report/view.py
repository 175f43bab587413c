"""The bait to be turned and looked at in the page: its meshes, marks and legend, for a script that draws them."""

from __future__ import annotations

import base64
import hashlib
import json
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from functools import cache
from importlib.resources import files
from typing import Any

import numpy as np
from numpy.typing import NDArray

from meshlure.report.figures import INK, WATER
from meshlure.report.stand import Stand, stand
from meshlure.report.subject import Subject
from meshlure.report.wording import cleaned
from meshlure.results import Scene, ScenePiece

Floats = NDArray[np.float64]

COLOURS = ("#d55e00", "#009e73", "#cc79a7", "#e69f00", "#0072b2", "#f0e442")
"""For inserts, in turn: told apart with any kind of colour vision (Okabe & Ito 2008, Color Universal Design; their sky
blue is left out, since it would pass for water). Numbers tell apart those that share one."""
BALL = "#4a5a61"
GLASS, HOLLOW = "#f4f1e8", "#ffffff"
STEPS = 65535
"""Steps of the grid that places are told in, along the longest way through the scene."""


@dataclass(frozen=True)
class Entry:
    """A line of the legend: the piece's place in the scene, its number in the table of pieces, name, look, colour."""

    place: int
    number: int | None
    name: str
    look: str
    colour: str


@dataclass(frozen=True)
class Turning:
    """What the page needs to show a scene.

    Attributes
    ----------
    data : str
        JSON for the script; free of ``<``, so that it can stand in a page as it is.
    script : str
    policy : str
        The script by its SHA-256, as a content security policy names it: nothing else on the page may run.
    legend : tuple of Entry
    water : bool
        Whether there is a surface to show.
    posture : str
        How it stands, in words.
    words : str
        What is seen, in words.
    """

    data: str
    script: str
    policy: str
    legend: tuple[Entry, ...]
    water: bool
    posture: str
    words: str


def turning(scene: Scene | None, results: Mapping[str, Any], subject: Subject) -> Turning | None:
    """Return a study's scene for the page, or None where it has none.

    Parameters
    ----------
    scene : Scene or None
    results : mapping
        The result tree, cleaned.
    subject : Subject
        Of which the marks are taken.
    """
    if scene is None or not scene.pieces:
        return None
    standing = stand(scene, results["frame"])
    legend = tuple(_legend(scene, subject))
    words = ", ".join(entry.name for entry in legend[:9]) + (f" and {len(legend) - 9} more" if len(legend) > 9 else "")
    posture = _posture(scene, subject)
    return Turning(
        data=_data(scene, standing, legend, subject, np.asarray(results["frame"]["nose"], dtype=np.float64)),
        script=_script(),
        policy=_policy(),
        legend=legend,
        water=standing.water is not None,
        posture=posture,
        words=f"{posture}, see-through, with {words}",
    )


def piece_colours(scene: Scene) -> list[str]:
    """Return every piece's colour: inserts each their own in turn."""
    looks, inserts = {"body": GLASS, "void": HOLLOW, "ball": BALL}, 0
    found = []
    for piece in scene.pieces:
        if piece.role in looks:
            found.append(looks[piece.role])
        else:
            found.append(COLOURS[inserts % len(COLOURS)])
            inserts += 1
    return found


def _posture(scene: Scene, subject: Subject) -> str:
    if scene.up is None or subject.rest is None:
        return "Back up: it has no attitude of its own"
    how = "As it hangs under water" if scene.waterline_mm is None else "As it floats"
    return f"{how}, {subject.rest.words}"


def _legend(scene: Scene, subject: Subject) -> Iterator[Entry]:
    looks = {"body": "glass", "void": "hollow"}
    for place, (piece, colour) in enumerate(zip(scene.pieces, piece_colours(scene), strict=True)):
        name = cleaned(piece.name)
        yield Entry(place, subject.numbers.get(name), name, looks.get(piece.role, "solid"), colour)


def _data(scene: Scene, standing: Stand, legend: tuple[Entry, ...], subject: Subject, nose: Floats) -> str:
    placed = [standing.place(piece.vertices) for piece in scene.pieces]
    low, high = _bounds(placed)
    step = float(max(*(high - low), 1e-6)) / STEPS
    tree = {
        "low": [round(float(value), 5) for value in low],
        "step": step,
        "water": standing.water,
        "under": scene.up is not None and standing.water is None,
        "colours": {"ink": INK, "water": WATER},
        "pieces": [
            _piece(piece, points, standing.axes, entry, low, step)
            for piece, points, entry in zip(scene.pieces, placed, legend, strict=True)
        ],
        "marks": [
            {"look": look, "name": name, "at": [round(float(value), 3) for value in standing.place(at)]}
            for look, name, at in _marks(scene, subject, nose)
        ],
    }
    return json.dumps(tree, separators=(",", ":"), ensure_ascii=True).replace("<", "\\u003c")


def _piece(piece: ScenePiece, points: Floats, axes: Floats, entry: Entry, low: Floats, step: float) -> dict[str, Any]:
    steps = np.clip(np.rint((points - low) / step), 0, STEPS).astype("<u2")
    wide = "<u4" if len(points) > STEPS else "<u2"
    middle = (points.min(axis=0) + points.max(axis=0)) / 2 if len(points) else low
    return {
        "look": entry.look,
        "colour": entry.colour,
        "label": "" if entry.number is None or piece.role == "body" else str(entry.number),
        "at": [round(float(value), 3) for value in middle],
        "places": _packed(steps),
        "normals": _packed(np.rint(piece.normals @ axes.T * 127).astype("<i1")),
        "faces": _packed(piece.faces.astype(wide)),
        "wide": wide == "<u4",
    }


def _packed(values: NDArray[Any]) -> str:
    return base64.b64encode(values.tobytes()).decode("ascii")


def _marks(scene: Scene, subject: Subject, nose: Floats) -> Iterator[tuple[str, str, Floats]]:
    yield "ring", "G", subject.gravity
    yield "ring", "B", subject.buoyancy
    for spot in subject.hardware:
        yield "cross", "", spot.at
    if subject.tie is not None:
        yield "diamond", "", subject.tie
    body = scene.pieces[0].vertices
    if len(body):
        yield "word", "nose", body[int(np.argmax(body @ nose))]


def _bounds(placed: list[Floats]) -> tuple[Floats, Floats]:
    points = [p for p in placed if len(p)]
    if not points:
        return np.zeros(3), np.zeros(3)
    return np.min([p.min(axis=0) for p in points], axis=0), np.max([p.max(axis=0) for p in points], axis=0)


@cache
def _script() -> str:
    return files("meshlure.report").joinpath("templates", "turn.js").read_text(encoding="utf-8")


@cache
def _policy() -> str:
    digest = hashlib.sha256(_script().encode("utf-8")).digest()
    return f"'sha256-{base64.b64encode(digest).decode('ascii')}'"
