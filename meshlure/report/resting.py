"""The bait as it lies in the water: its outline turned until the surface is level."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from meshlure.report import figures as ink
from meshlure.report.figures import Picture, blank, picture
from meshlure.report.outlines import thinned
from meshlure.report.pen import fill, fills, path
from meshlure.report.subject import Rest, Subject, water_in
from meshlure.report.waterline import level_sign
from meshlure.results import View

TRUE = np.sin(np.radians(12))
"""How far the water's up may lean out of a view before the turned outline is no true picture of the posture."""
WIDE, TALL = 86.0, 58.0


def resting(views: Sequence[View], subject: Subject) -> Picture | None:
    """Return the bait at rest beside level water, or None where neither the side nor the front view shows it truly."""
    rest = subject.rest
    view = None if rest is None else _true_view(views, rest)
    if rest is None or view is None or not view.pieces or not view.pieces[0].rings:
        return None
    normal = np.array([rest.up @ view.right, rest.up @ view.up])
    normal /= np.hypot(*normal)
    turn = np.array([[normal[1], -normal[0]], normal])
    edge = water_in(view, rest, subject.gravity)
    corners = np.concatenate([ring @ turn.T for piece in view.pieces for ring in piece.rings])
    low, high = corners.min(axis=0), corners.max(axis=0)
    tall = TALL if view.name == "side" else 0.6 * TALL
    scale = min((WIDE - 12) / (high[0] - low[0]), (tall - 12) / (high[1] - low[1]))
    height = float(scale * (high[1] - low[1])) + 12
    shift = np.array([WIDE / 2 - scale * (low[0] + high[0]) / 2, 6 - scale * low[1]])
    figure = blank(WIDE, height)
    axes = figure.add_axes((0, 0, 1, 1))
    axes.set(xlim=(0, WIDE), ylim=(0, height))
    axes.axis("off")
    surface = height if edge is None else float(np.clip(scale * edge[1] + shift[1], 0, height))
    axes.axhspan(0, surface, color=ink.SHALLOW, linewidth=0, zorder=0)
    for number, piece in enumerate(view.pieces):
        shape = path([thinned(shift + scale * ring @ turn.T, 0.05) for ring in piece.rings])
        if shape is None or piece.role == "coat":
            continue
        if piece.role in ("skin", "body"):
            fill(axes, shape, 1, facecolor=(1, 1, 1, 0.7), edgecolor="none")
            fill(axes, shape, 3, facecolor="none", edgecolor=ink.INK, linewidth=1.2)
        else:
            fill(axes, shape, 2 + number / 1000, **fills(piece.role, subject.densities.get(piece.name)))
    if edge is not None:
        axes.plot([0, WIDE], [surface, surface], color=ink.WATER, linewidth=1.1, linestyle="dashdot", zorder=4)
        level_sign(axes, WIDE - 5, surface + 1.2)
    words = (
        f"Side outline of the bait as it rests, {rest.words}" if view.name == "side" else "Front outline as it rests"
    )
    return picture(figure, f"{words}; the water is level.")


def _true_view(views: Sequence[View], rest: Rest) -> View | None:
    by_name = {view.name: view for view in views}
    for name in ("side", "front"):
        view = by_name.get(name)
        if view is not None and abs(float(rest.up @ np.cross(view.right, view.up))) <= TRUE:
            return view
    return None
