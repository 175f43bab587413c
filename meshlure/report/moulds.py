"""What the page says and shows of a mould: scale, parting, draft from both sides, boards, quantities."""

from __future__ import annotations

import base64
import io
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any, Final

import numpy as np

from meshlure.report.figures import CLAY, INK, PENCIL, Picture, blank, picture
from meshlure.report.pen import fill, path
from meshlure.report.table import Table, table
from meshlure.report.wording import DASH, SPACE, fixed, millimetres, point, significant
from meshlure.results import Study
from meshlure.results.study import HalfMap, Relief

Results = Mapping[str, Any]

_WIDTH: Final = 150.0
"""mm of paper for the longer side of a map."""
_LEAST: Final = 0.5
"""mm2. Smaller places that hold rubber are the grid's own grain."""
_KEY: Final = 13.0
"""mm of paper for a map's key."""
_SHADES: Final = ("#e8b48f", "#efd9b8", "#eef0e4", "#dbe7ea", "#bcd3de", "#8fb4c7")
"""From walls that stand upright to what lies flat: dark where rubber drags, pale where it lifts."""
_HATCHES: Final = ("////", "//", "", "", "", "")


@dataclass(frozen=True)
class Moulded:
    """What the page says of a mould.

    Attributes
    ----------
    kind : str
    sentences : tuple of str
    maps, boards : tuple of (str, Picture)
    facts, draft, undercuts, quantities, runners, pieces : Table or None
    """

    kind: str
    sentences: tuple[str, ...]
    maps: tuple[tuple[str, Picture], ...]
    boards: tuple[tuple[str, Picture], ...]
    facts: Table | None
    draft: Table | None
    undercuts: Table | None
    quantities: Table | None
    runners: Table | None
    pieces: Table | None


def moulded(study: Study, results: Results) -> Moulded | None:
    """Return what is said of a mould, None where the report is of something else; call inside `drawing_style`."""
    found = results.get("mould")
    if not found:
        return None
    return Moulded(
        kind=str(found["kind"]),
        sentences=_sentences(found),
        maps=tuple((f"Half {one.half}, seen from its pull", _map(one)) for one in study.maps),
        boards=tuple((one.name[:1].upper() + one.name[1:], _relief(one)) for one in study.reliefs),
        facts=_facts(found),
        draft=_draft(found),
        undercuts=_undercuts(found),
        quantities=_quantities(found),
        runners=_runners(found),
        pieces=_pieces(found),
    )


def _sentences(found: Results) -> tuple[str, ...]:
    trapped, depth = found["undercut_mm2"], found["undercut_depth_mm"]
    if trapped < 0.05:
        parts = ["Nothing is trapped: both halves lift off."]
    else:
        parts = [
            f"{significant(trapped, 3)}{SPACE}mm² are trapped under the pull, up to {fixed(depth, 2)}{SPACE}mm deep at "
            f"{point(found['undercut_at_mm'])}{SPACE}mm; soft rubber lifts over 1 to 3{SPACE}mm on soft corners "
            "(common practice, no source), a stiff mould does not."
        ]
    best = found["best_pull"]
    if best["lean_deg"] > 0.5 and best["trapped_mm3"] < found["trapped_mm3"]:
        parts.append(
            f"Pulled {fixed(best['lean_deg'], 0)}° aside it would trap {significant(best['trapped_mm3'], 2)}{SPACE}mm³ "
            f"instead of {significant(found['trapped_mm3'], 2)}."
        )
    return tuple(parts)


def _facts(found: Results) -> Table | None:
    axes = found["scale_axes"]
    scale = fixed(found["scale"], 4) if max(axes) - min(axes) < 1e-6 else ", ".join(fixed(axis, 4) for axis in axes)
    rows = [
        ("scale of the master", f"{scale}{'' if len(set(axes)) == 1 else ' along x, y, z'}"),
        ("body as drawn", f"{fixed(found['volume_drawn_mm3'] / 1e3, 3)}{SPACE}cm³"),
        ("as moulded", f"{fixed(found['volume_moulded_mm3'] / 1e3, 3)}{SPACE}cm³"),
        ("as cast", f"{fixed(found['volume_cast_mm3'] / 1e3, 3)}{SPACE}cm³"),
        ("pull", point(found["pull"], 2)),
        ("parting plane", f"{fixed(found['plane_mm'], 2)}{SPACE}mm along the pull"),
        *(
            (("box inside", " × ".join(fixed(side, 1) for side in found["box_mm"]) + f"{SPACE}mm"),)
            if found["box_mm"]
            else ()
        ),
    ]
    return table("Scale and parting", (), rows, (0, 1))


def _draft(found: Results) -> Table | None:
    rows = [(f"{row['half']}", str(row["range"]), fixed(row["area_mm2"], 0)) for row in found["draft"]]
    return table("Draft by half", ("half", "draft", "mm²"), rows, (0, 1))


def _undercuts(found: Results) -> Table | None:
    rows = [
        (
            str(row["half"]),
            str(row["piece"] or DASH),
            fixed(row["area_mm2"], 1),
            fixed(row["depth_mm"], 2),
            point(row["at_mm"]),
        )
        for row in found["undercuts"]
        if row["area_mm2"] >= _LEAST
    ]
    return table(
        f"Where rubber is held, from {_LEAST:g} mm² up", ("half", "at", "mm²", "mm deep", "x, y, z, mm"), rows, (0, 1)
    )


def _quantities(found: Results) -> Table | None:
    rubber = zip(found["rubber_cm3"], found["rubber_g"], strict=True)
    spare = f"{fixed(found['rubber_spare'] * 100, 0)}%"
    rows = [
        *(
            (f"rubber, half {half}", fixed(volume, 0), fixed(mass, 0), f"grams with {spare} spare, common practice")
            for half, (volume, mass) in zip("AB", rubber, strict=False)
        ),
        (
            "resin, one casting",
            fixed(found["resin_cm3"], 2),
            fixed(found["resin_g"], 2),
            f"sprue and vents {fixed(found['resin_outside_cm3'], 2)}{SPACE}cm³ of it",
        ),
    ]
    return table("What to weigh out", ("what", "cm³", "g", ""), rows, (0, 3))


def _runners(found: Results) -> Table | None:
    named = [("sprue", found["sprue"])] if found["sprue"] else []
    named += [(f"vent {number}", row) for number, row in enumerate(found["vents"], 1)]
    named += [(f"seat of {row['piece']}", row) for row in found["pins"]]
    rows = [
        (
            name,
            point(row["at_mm"]),
            fixed(row["diameter_mm"], 1),
            fixed(row["gate_mm"], 1),
            millimetres(row["length_mm"]),
        )
        for name, row in named
    ]
    return table("Sprue, vents and seats", ("what", "from x, y, z, mm", "⌀ mm", "⌀ at the skin, mm", "long"), rows)


def _pieces(found: Results) -> Table | None:
    rows = [
        (
            str(row["name"]),
            " × ".join(fixed(side, 1) for side in row["size_mm"]),
            fixed(row["volume_mm3"] / 1e3, 1),
            str(row["file"] or DASH),
        )
        for row in found["pieces"]
    ]
    return table("Pieces to print", ("piece", "mm", "cm³", "file"), rows, (0, 3))


def _map(one: HalfMap) -> Picture:
    """A half seen from its pull, its draft in shades, what holds rubber hatched."""
    rings = np.concatenate([ring for region in one.regions for ring in region.rings])
    low, high = rings.min(axis=0) - 2, rings.max(axis=0) + 2
    scale = min(_WIDTH / float((high - low).max()), 1.6)
    width, height = (high - low) * scale
    figure = blank(float(width), float(height) + _KEY)
    axes = figure.add_axes((0, _KEY / (height + _KEY), 1, height / (height + _KEY)))
    axes.set(xlim=(low[0], high[0]), ylim=(low[1], high[1]), aspect="equal")
    axes.axis("off")
    steps = [region for region in one.regions if region.low is not None]
    for number, region in enumerate(steps):
        look = _look(number, len(steps))
        fill(axes, path(region.rings), 1.0, linewidth=0.0, **look)
    held = [region for region in one.regions if region.low is None]
    for region in held:
        fill(axes, path(region.rings), 2.0, facecolor=CLAY, edgecolor=INK, hatch="xxxx", linewidth=0.4)
    _key(figure, steps, bool(held), float(width), float(height) + _KEY)
    words = f"Half {one.half} seen from its pull: regions of draft" + (", places that hold rubber" if held else "")
    return picture(figure, f"{words}.")


def _look(number: int, count: int) -> dict[str, Any]:
    at = round(number * (len(_SHADES) - 1) / max(count - 1, 1))
    return {"facecolor": _SHADES[at], "edgecolor": PENCIL, "hatch": _HATCHES[at]}


def _key(figure: Any, steps: Sequence[Any], held: bool, width: float, height: float) -> None:
    from matplotlib.patches import Rectangle

    axes = figure.add_axes((0, 0, 1, _KEY / height))
    axes.set(xlim=(0, width), ylim=(0, _KEY))
    axes.axis("off")
    boxes = [(f"{region.low:.0f} to {region.high:.0f}°", _look(n, len(steps))) for n, region in enumerate(steps)]
    if held:
        boxes.append(("holds rubber", {"facecolor": CLAY, "edgecolor": INK, "hatch": "xxxx"}))
    step = min(width / max(len(boxes), 1), 25.0)
    for number, (words, look) in enumerate(boxes):
        axes.add_artist(Rectangle((number * step + 1, 6.5), 8, 5, linewidth=0.4, **look))
        axes.text(number * step + 1, 1.2, words, fontsize=8)


def _relief(one: Relief) -> Picture:
    """A piece seen from above in slanting light, as a picture with a scale along its edge."""
    from matplotlib import image

    heights = one.heights
    ground = np.nanmin(heights)
    filled = np.where(np.isnan(heights), ground, heights)
    slope_x, slope_y = np.gradient(filled, one.pitch)
    normal = np.stack([-slope_x, -slope_y, np.ones_like(filled)], axis=-1)
    normal /= np.linalg.norm(normal, axis=-1, keepdims=True)
    light = np.array([-0.45, 0.55, 0.70])
    lit = np.clip(normal @ (light / np.linalg.norm(light)), 0.0, 1.0)
    span = max(float(np.nanmax(heights) - ground), 1e-9)
    tone = 0.30 + 0.55 * lit + 0.15 * (filled - ground) / span
    grey = np.where(np.isnan(heights), 1.0, np.clip(tone, 0.0, 1.0))
    paper = io.BytesIO()
    rgb = np.repeat((grey.T[::-1, :, None] * 255).astype(np.uint8), 3, axis=2)
    image.imsave(paper, rgb, format="png")
    width, height = np.array(heights.shape) * one.pitch
    scale = min(1.0, 110.0 / float(max(width, height)))
    uri = "data:image/png;base64," + base64.b64encode(paper.getvalue()).decode("ascii")
    words = f"{one.name} seen from above: {width:.0f} by {height:.0f} mm, {span:.1f} mm from lowest to highest."
    return Picture(uri, words, float(width * scale), float(height * scale))
