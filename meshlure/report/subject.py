"""What of a bait goes into its drawings, picked out of the result tree; mesh coordinates, mm."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace
from typing import Any

import numpy as np
from numpy.typing import NDArray

from meshlure.report.wording import cleaned, nose_words
from meshlure.results import View

Floats = NDArray[np.float64]
Results = Mapping[str, Any]


@dataclass(frozen=True, eq=False)
class Spot:
    """A named place: its number in the table of pieces (None where it has no row there), its name, its point."""

    number: int | None
    name: str
    at: Floats


@dataclass(frozen=True, eq=False)
class Balls:
    """A row of balls: its name, where its middle lies as drawn, and where it lies at the other ends of its run."""

    name: str
    at: Floats
    elsewhere: tuple[Floats, ...]


@dataclass(frozen=True, eq=False)
class Rest:
    """A resting posture to draw: upward direction, level of the water (None under it) and what to write beside it."""

    up: Floats
    waterline: float | None
    words: str


@dataclass(frozen=True, eq=False)
class Subject:
    """Everything that drawings show besides outlines."""

    numbers: Mapping[str, int]
    densities: Mapping[str, float | None]
    centres_of_pieces: Mapping[str, Floats]
    hardware: tuple[Spot, ...]
    tie: Floats | None
    gravity: Floats
    buoyancy: Floats
    buoyancy_of: str
    area_centres: Mapping[str, Floats]
    rest: Rest | None
    balls: tuple[Balls, ...]
    length: float
    left: Floats

    def spots(self) -> list[Floats]:
        """Return the places of hardware and of the line tie."""
        return [spot.at for spot in self.hardware] + ([] if self.tie is None else [self.tie])


def main_posture(results: Mapping[str, Any]) -> Mapping[str, Any] | None:
    """Return the posture a maker sees: afloat, the one reached from back up; else the first."""
    postures = results["postures"]
    afloat = [posture for posture in postures if posture["kind"] == "floating" and posture["upright"]]
    return next(iter([*afloat, *postures]), None)


def touchy(posture: Mapping[str, Any], key: str) -> bool:
    """Return whether an angle of a posture was rounded to a step of five, because it turns so easily."""
    angle = posture[key]
    return bool(posture.get("rounded")) and angle is not None and angle % 5 == 0


def piece_numbers(results: Mapping[str, Any]) -> dict[str, int]:
    """Return the number of every piece: its row in the table of pieces, hardware without a row after them."""
    numbers: dict[str, int] = {}
    for row in [*results["pieces"], *(results.get("hardware") or [])]:
        numbers.setdefault(row["name"], len(numbers) + 1)
    return numbers


def subject(results: Mapping[str, Any]) -> Subject:
    """Return what the drawings of a bait show."""
    posture = main_posture(results)
    numbers = piece_numbers(results)
    gravity, buoyancy, of = results["weight"]["centre_mm"], results["buoyancy"]["centre_mm"], "of all it displaces"
    rest = None
    if posture is not None:
        gravity = posture.get("centre_mm") or gravity
        if posture.get("buoyancy_centre_mm"):
            buoyancy, of = (
                posture["buoyancy_centre_mm"],
                "as it floats" if posture["kind"] == "floating" else "of all it displaces",
            )
        if posture["up"] is not None:
            words = nose_words(posture["nose_up_deg"], rounded=touchy(posture, "nose_up_deg"))
            rest = Rest(np.asarray(posture["up"], dtype=float), posture["waterline_mm"], words)
    hardware = [
        Spot(numbers[row["name"]], row["name"], np.asarray(row["at_mm"], dtype=float))
        for row in results.get("hardware") or []
    ]
    line = results.get("line")
    return Subject(
        numbers=numbers,
        densities={row["name"]: row["density_g_cm3"] for row in results["pieces"]},
        centres_of_pieces={row["name"]: np.asarray(row["centre_mm"], dtype=float) for row in results["pieces"]},
        hardware=tuple(hardware),
        tie=np.asarray(line["tie_mm"], dtype=float) if line and line.get("tie_mm") else None,
        gravity=np.asarray(gravity, dtype=float),
        buoyancy=np.asarray(buoyancy, dtype=float),
        buoyancy_of=of,
        area_centres={
            row["name"]: np.asarray(row["centre_mm"], dtype=float)
            for row in results["areas"]
            if row["name"] in ("side", "top", "front")
        },
        rest=rest,
        balls=balls(results),
        length=float(results["size"]["length_mm"]),
        left=np.asarray(results["frame"]["side"], dtype=float),
    )


def balls(results: Results) -> tuple[Balls, ...]:
    """Return where balls lie, as weighed and at the other end of their chamber.

    Notes
    -----
    The table of ball positions gives the whole bait's centre of gravity with the balls at each end. What moves it are
    the balls alone: their own centre is moved as much farther as the bait is heavier than they are.
    """
    weight, found = results["weight"], []
    for row in results["pieces"]:
        if row["role"] != "ball" or not row["mass_g"]:
            continue
        at = np.asarray(row["centre_mm"], dtype=float)
        ends = [end for end in results.get("balls") or [] if row["name"].endswith(end["chamber"])]
        moves = [np.subtract(end["centre_mm"], weight["centre_mm"]) * weight["mass_g"] / row["mass_g"] for end in ends]
        found.append(
            Balls(row["name"], at, tuple(at + move for move in moves if np.hypot(*move[:2]) + abs(move[2]) > 0.2))
        )
    return tuple(found)


def readable(view: View) -> View:
    """Return a view whose pieces' names are as the page writes them."""
    return replace(view, pieces=tuple(replace(piece, name=cleaned(piece.name)) for piece in view.pieces))


def water_in(view: View, rest: Rest, through: Floats) -> tuple[Floats, float] | None:
    """Return the water's edge in a view as normal and offset, normal.(x, y) = offset in mm, where the view shows it.

    The surface is cut by the plane of the drawing that goes through a point (the centre of gravity): the true edge
    where the bait does not lean out of that plane. None where the view looks at the surface more from above than from
    the side, or where there is no surface.
    """
    normal = np.array([rest.up @ view.right, rest.up @ view.up])
    length = float(np.hypot(*normal))
    if rest.waterline is None or length < np.sqrt(0.5):
        return None
    away = np.cross(view.right, view.up)
    offset = rest.waterline - view.shift * float(rest.up @ view.right) - float(through @ away) * float(rest.up @ away)
    return normal / length, offset / length
