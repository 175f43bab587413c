"""The bait in the wind of its flight: its outline at its trim, with the centres that hold it there or turn it."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from meshlure.report import figures as ink
from meshlure.report.figures import POINTS_PER_MM, Picture, blank, picture
from meshlure.report.outlines import thinned
from meshlure.report.pen import fill, fills, halo, path, strokes
from meshlure.report.subject import Subject
from meshlure.report.wording import fixed, millimetres
from meshlure.results import View

if TYPE_CHECKING:
    from matplotlib.axes import Axes

Floats = NDArray[np.float64]
Results = Mapping[str, Any]

WIDE, TALL, WIND, EDGE = 86.0, 78.0, 15.0, 9.0
"""mm of paper: its width, its greatest height, the strip for the wind, and the margin elsewhere."""
RAIL, WORDS = 11.0, 3.2
"""mm from G to the rails on which the margins stand, and on to their words."""
ASKEW = 5.0
"""Degrees off the leading end from which the view is chosen that shows that angle."""
RADII = {"G": 1.5, "P": 1.05, "A": 0.62}
OUTLINE = {"yaw": "side", "pitch": "top"}
"""The view whose outline has the area that a plane sees."""


@dataclass(frozen=True, eq=False)
class Wind:
    """The picture with what it shows in words."""

    picture: Picture
    caption: str


def off_wind(results: Results) -> float:
    """Return the angle between the leading end and the direction of motion, degrees."""
    nose = np.asarray(results["frame"]["nose"], dtype=float)
    cosine = float(np.asarray(results["flight"]["towards"]) @ nose) * (
        1 if results["flight"]["leads"] == "nose" else -1
    )
    return float(np.degrees(np.arccos(np.clip(cosine, -1, 1))))


def chosen_view(views: Sequence[View], results: Results) -> View | None:
    """Return the view that shows the trim best, or where it flies straight, the outline of the lesser margin."""
    flight = results["flight"]
    by_name = {view.name: view for view in views if view.pieces and view.pieces[0].rings}
    order = ["side", "top"] if flight["margin_plane"] == "yaw" else ["top", "side"]
    if off_wind(results) > ASKEW:
        towards = np.asarray(flight["towards"], dtype=float)
        hidden = {v.name: abs(float(towards @ np.cross(v.right, v.up))) for v in by_name.values()}
        order.sort(key=lambda name: round(hidden.get(name, 2.0), 2))
    return next((by_name[name] for name in order if name in by_name), None)


def windward(views: Sequence[View], subject: Subject, results: Results) -> Wind | None:
    """Return the bait in the wind, the leading end to windward, or None where no outline came."""
    view = chosen_view(views, results)
    if view is None:
        return None
    flight = results["flight"]
    nose = np.asarray(results["frame"]["nose"], dtype=float)
    along = _flat(view, nose if flight["leads"] == "nose" else -nose)
    towards, sense = _flat(view, np.asarray(flight["towards"], dtype=float)), np.sign(along[0]) or 1.0
    turn = levelling(towards, sense)
    spots = centres(view, results, along)
    outline = np.concatenate([ring @ turn.T for piece in view.pieces for ring in piece.rings])
    corners = np.concatenate([outline, [turn @ spot for spot in spots.values()]])
    wide, high = np.ptp(corners, axis=0)
    scale = min((WIDE - WIND - EDGE) / wide, (TALL - 2 * EDGE) / high)
    # What the rails and their words take beside the outline, paper mm.
    lean = _across(turn @ along)
    room = scale * (turn @ spots["G"]) + np.array([lean, -lean]) * (RAIL + 2 * WORDS)
    floor, roof = (end(np.append(scale * corners[:, 1], room[:, 1])) for end in (np.min, np.max))
    height = float(roof - floor) + 2 * EDGE / 3
    middle = (WIND + WIDE - EDGE) / 2 if sense < 0 else (EDGE + WIDE - WIND) / 2
    shift = np.array([middle - scale * float(corners[:, 0].min() + wide / 2), EDGE / 3 - floor])
    figure = blank(WIDE, height)
    axes = figure.add_axes((0, 0, 1, 1))
    axes.set(xlim=(0, WIDE), ylim=(0, height))
    axes.axis("off")
    for number, piece in enumerate(view.pieces):
        shape = path([thinned(shift + scale * ring @ turn.T, 0.12) for ring in piece.rings])
        if shape is None or piece.role == "coat":
            continue
        if piece.role in ("skin", "body"):
            fill(axes, shape, 1, facecolor="white", edgecolor="none")
            fill(axes, shape, 3, facecolor="none", edgecolor=ink.INK, linewidth=1.2)
        else:
            look = fills(piece.role, subject.densities.get(piece.name))
            fill(axes, shape, 2 + number / 1000, **(look | {"alpha": 0.55}))
    _wind(axes, sense, height)
    placed = {letter: shift + scale * turn @ spot for letter, spot in spots.items()}
    _rings(axes, placed, turn @ along, flight)
    caption = _caption(view, results, "P" in spots)
    return Wind(picture(figure, f"Outline of the bait in the wind. {caption}"), caption)


def levelling(towards: Floats, sense: float) -> Floats:
    """Return the turn, (2, 2), that lays a direction level, to the right (sense 1) or to the left (-1) of the paper."""
    c, s = sense * towards[0], -sense * towards[1]
    return np.array([[c, -s], [s, c]])


def _flat(view: View, direction: Floats) -> Floats:
    """A direction as it lies in a view, of length one."""
    flat = np.array([direction @ view.right, direction @ view.up])
    return np.asarray(flat / np.hypot(*flat))


def centres(view: View, results: Results, along: Floats) -> dict[str, Floats]:
    """Return where G, A and P lie in a view, mm: by their margins along the bait, A at its own height if it has one."""
    flight = results["flight"]
    outline = OUTLINE[flight["margin_plane"]]
    centres = {row["name"]: row["centre_mm"] for row in results["areas"]}
    # The centre of gravity with the balls where they lie in flight: as far ahead of A as the margin says.
    area = np.asarray(view.place(np.asarray(centres[outline], dtype=float)))
    gravity = np.asarray(view.place(np.asarray(results["weight"]["centre_mm"], dtype=float)))
    across = np.array([-along[1], along[0]])
    if view.name != outline:
        area = area + across * float((gravity - area) @ across)
    gravity = area + along * flight["margin_mm"] + across * float((gravity - area) @ across)
    spots = {"G": gravity, "A": area}
    margin = flight["pressure_margin_mm"]
    if margin is not None and abs(margin) < results["size"]["length_mm"]:
        spots["P"] = gravity - along * margin
    return spots


def _wind(axes: Axes, sense: float, height: float) -> None:
    """Arrows of the wind from the side that the bait flies to."""
    start, end = (2.5, 11.0) if sense < 0 else (WIDE - 2.5, WIDE - 11.0)
    for y in np.linspace(0.2, 0.8, 4) * height:
        axes.annotate("", (end, y), (start, y), arrowprops={"arrowstyle": "-|>", "color": ink.PENCIL, "linewidth": 0.8})
    axes.text((start + end) / 2, 0.8 * height + 2.2, "wind", ha="center", va="bottom", color=ink.PENCIL)


def _across(along: Floats) -> Floats:
    """The direction across the bait that points up the paper."""
    across = np.array([-along[1], along[0]])
    return -across if across[1] < 0 else across


def _rings(axes: Axes, placed: Mapping[str, Floats], along: Floats, flight: Mapping[str, Any]) -> None:
    """The lettered rings, and their distances along the bait on rails beside it: A's on one side, P's on the other."""
    up = _across(along)
    for letter, margin, across in (("A", flight["margin_mm"], up), ("P", flight["pressure_margin_mm"], -up)):
        if letter not in placed or margin is None:
            continue
        rail = placed["G"] + RAIL * across
        ends = [rail + along * float((placed[name] - rail) @ along) for name in ("G", letter)]
        stakes = [(placed[name] + 1.6 * across, end + across) for name, end in zip(("G", letter), ends, strict=True)]
        strokes(axes, stakes, ink.PENCIL, 0.6, 6)
        strokes(axes, [ends], ink.INK, 1.3, 6)
        words = f"G–{letter} {millimetres(abs(margin), 1)}"
        seat = (ends[0] + ends[1]) / 2 + WORDS * across
        turned = float(np.degrees(np.arctan2(*(along if along[0] > 0 else -along)[::-1])))
        look: dict[str, Any] = {"ha": "center", "va": "center", "fontsize": 7.2, "path_effects": halo()}
        axes.text(float(seat[0]), float(seat[1]), words, rotation=turned, rotation_mode="anchor", zorder=9, **look)
    for letter, spot in placed.items():
        for colour, weight in (("white", 2.2), (ink.INK, 1.0)):
            axes.plot(
                *spot,
                marker="o",
                markersize=2 * RADII[letter] * POINTS_PER_MM,
                markerfacecolor="none",
                markeredgecolor=colour,
                markeredgewidth=weight,
                zorder=8.4 if colour == ink.INK else 8.2,
            )
    for letter, seat in _seats(placed, along, up).items():
        bold: dict[str, Any] = {"ha": "center", "va": "center", "fontsize": 8.2, "fontweight": "bold"}
        axes.text(float(seat[0]), float(seat[1]), letter, zorder=9, path_effects=halo(), **bold)


def _seats(placed: Mapping[str, Floats], along: Floats, up: Floats) -> dict[str, Floats]:
    """Where the rings' letters stand: near their ring, off other rings, letters and the stakes of the rails."""
    stakes = [
        (placed[letter], side) for letter, side in (("A", up), ("P", -up), ("G", up), ("G", -up)) if letter in placed
    ]
    found: dict[str, Floats] = {}
    for letter, spot in placed.items():
        tried: list[tuple[float, int, Floats]] = []
        for reach in (3.2, 4.4, 6.0):
            for turn in np.radians(np.arange(0, 360, 30)):
                seat = spot + reach * (np.cos(turn) * along + np.sin(turn) * up)
                cost = 0.35 * reach
                cost += sum(
                    max(0.0, 3.3 - float(np.hypot(*(seat - ring)))) for k, ring in placed.items() if k != letter
                )
                cost += sum(2 * max(0.0, 3.8 - float(np.hypot(*(seat - other)))) for other in found.values())
                beside = [
                    abs(float((seat - foot) @ along)) for foot, side in stakes if float((seat - foot) @ side) > -1.5
                ]
                cost += sum(max(0.0, 2.0 - far) for far in beside)
                tried.append((round(cost, 6), len(tried), seat))
        found[letter] = min(tried, key=lambda one: one[:2])[2]
    return found


def _caption(view: View, results: Results, pressed: bool) -> str:
    """What the picture shows and how far off the wind the bait rides."""
    flight = results["flight"]
    seen = {"side": "seen from the side", "top": "seen from above"}[view.name]
    how = (
        f"drawn straight, {flight['leads']} first, for it tumbles and keeps no angle"
        if flight["verdict"] == "tumbles"
        else f"{flight['leads']} first at its trim, {fixed(off_wind(results), 0)}° off the wind"
    )
    shown = "side" if flight["margin_plane"] == "yaw" else "plan"
    rings = f"G centre of gravity; A centre of the {shown} area"
    if pressed:
        rings += f"; P centre of pressure {fixed(flight['limits']['pressure_deg'], 0)}° off {flight['leads']} first"
    return f"{seen.capitalize()}, {how}. {rings}."
