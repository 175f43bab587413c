"""The charts: reserve, waters, righting, stations, rose and drag, with their units, told apart without colour."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import TYPE_CHECKING, Any

import numpy as np

from meshlure.report import figures as ink
from meshlure.report.figures import Picture, blank, drawable, picture
from meshlure.report.rulings import Ticks, margins, ruled
from meshlure.report.wording import band, banded_grams, fixed, square_millimetres

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

WIDE = 86.0
"""mm: half an A4 page between its margins, and legible across a telephone."""
LINES: tuple[dict[str, Any], ...] = (
    {"linestyle": "solid", "color": ink.INK},
    {"linestyle": (0, (5, 2)), "color": ink.CLAY},
    {"linestyle": (0, (1, 1.4)), "color": ink.WATER},
    {"linestyle": (0, (6, 1.5, 1, 1.5)), "color": ink.MOSS},
)
MARKS = ("o", "s", "^", "D")
COLUMNS = 3
"""Of a legend."""
PARTS = {
    "friction": ("skin friction", "#ffffff", ""),
    "forebody": ("forebody", "#dfe7ea", "/////"),
    "base": ("wake of the base", "#a9b9c0", ""),
    "tail": ("closing tail", "#eef2f3", "-----"),
    "lip": ("lip", "#e9d8c6", "\\\\\\\\\\"),
    "hooks": ("hooks and rings", "#c98f63", ""),
    "eyes": ("eyes and hangers", "#f4ece2", "xxxxx"),
}
"""Parts of the drag: name in the legend, ink, hatch."""


def reserve(buoyancy: Mapping[str, Any]) -> Picture:
    """Return the reserve with its band on a line from sinking to floating, g."""
    value, low, high = buoyancy["reserve_g"], buoyancy["reserve_low_g"], buoyancy["reserve_high_g"]
    reach = 1.25 * max(abs(low), abs(high), abs(value), 1e-3)
    figure = blank(WIDE, 20.5)
    axes = margins(figure, 4, 9.5, 4, 6)
    axes.set(xlim=(-reach, reach), ylim=(-1, 1))
    axes.spines["left"].set_visible(False)
    axes.axvspan(0, reach, color=ink.SHALLOW, linewidth=0)
    axes.axvline(0, color=ink.INK, linewidth=0.9)
    axes.barh(0, high - low, left=low, height=0.8, facecolor="white", edgecolor=ink.INK, hatch="/////", linewidth=0.9)
    axes.plot(value, 0, marker="D", color=ink.INK, markersize=5.5, markeredgecolor="white", markeredgewidth=0.9)
    axes.set_xlabel("reserve, g   (bar: how sure)", labelpad=1.5)
    ruled(axes, Ticks(gridded=False), Ticks(at=()))
    axes.text(-reach, 1.15, "sinks", ha="left", va="bottom")
    axes.text(0, 1.15, "hangs", ha="center", va="bottom")
    axes.text(reach, 1.15, "floats", ha="right", va="bottom")
    sure = band(low, high, "g", signed=True)
    words = f"Reserve {banded_grams(value, low, high)} on a line from sinking to floating; band {sure}."
    return picture(figure, words)


def waters(rows: Sequence[Mapping[str, Any]]) -> Picture | None:
    """Return the reserve over the water's temperature, one line a salinity, g."""
    kinds = sorted({row["salinity_g_kg"] for row in rows if row["temperature_c"] is not None})
    if not kinds:
        return None
    figure, axes = _under_legend(len(kinds))
    for kind, look in zip(kinds, _cycle(len(kinds)), strict=True):
        of_kind = sorted(
            (row["temperature_c"], row["reserve_g"])
            for row in rows
            if row["salinity_g_kg"] == kind and row["temperature_c"] is not None
        )
        label = "fresh" if kind < 0.5 else f"{kind:g} g/kg of salt"
        dotted: dict[str, Any] = {"marker": "o", "markersize": 2.6} | look
        axes.plot(*zip(*of_kind, strict=True), label=label, **dotted)
    low, high = axes.get_ylim()
    if low < 0 < high:
        axes.axhline(0, color=ink.PENCIL, linewidth=0.8)
    axes.set(xlabel="water temperature, °C", ylabel="reserve, g")
    ruled(axes)
    _legend(axes, len(kinds))
    return picture(
        figure,
        "Lines of the reserve in grams over the water's temperature; its numbers are in the table of other waters.",
    )


def righting(curves: Sequence[Mapping[str, Any]], plane: str, postures: Sequence[str]) -> Picture | None:
    """Return the righting arm over the heel in one plane, one line a posture, mm over degrees."""
    chosen = [curve for curve in curves if curve["plane"] == plane and curve["heel_deg"]]
    if not chosen:
        return None
    figure, axes = _under_legend(len(chosen))
    for curve, look in zip(chosen, _cycle(len(chosen)), strict=True):
        index = curve.get("posture")
        name = f"posture {index + 1}" if index is not None and len(postures) > index else "righting arm"
        arms = [np.nan if arm is None else arm for arm in curve["arm_mm"]]
        axes.plot(curve["heel_deg"], arms, label=name, **look)
    axes.axhline(0, color=ink.PENCIL, linewidth=0.8)
    axes.set(xlabel="heel to its right, °" if plane == "sideways" else "turned nose up, °", ylabel="righting arm, mm")
    axes.xaxis.set_major_locator(_steps())
    ruled(axes)
    _legend(axes, len(chosen))
    what = "heeled sideways" if plane == "sideways" else "turned nose up and down"
    return picture(
        figure,
        f"Line of the righting arm in millimetres over the angle, {what}; its numbers are in the table below it.",
    )


def stations(curves: Mapping[str, Any]) -> Picture:
    """Return section area over the distance from the nose, with width and depth below it, mm2 and mm over mm."""
    x = curves["from_nose_mm"]
    width, depth = curves.get("width_mm") or [], curves.get("depth_mm") or []
    below = bool(width and depth)
    figure = blank(WIDE, 78 if below else 52)
    top = margins(figure, 14, 42 if below else 10, 3, 3)
    top.fill_between(x, curves["area_mm2"], color=ink.SHALLOW, linewidth=0)
    top.plot(x, curves["area_mm2"], **LINES[0])
    top.set(ylabel="section area, mm²", ylim=(0, None))
    if below:
        under = margins(figure, 14, 10, 3, 44)
        under.plot(x, depth, label="depth", **LINES[0])
        under.plot(x, width, label="width", **LINES[1])
        under.set(ylabel="mm", ylim=(0, None), xlabel="mm from the nose")
        _legend(under, 2)
        top.set_xlim(under.get_xlim())
        ruled(under)
    else:
        top.set_xlabel("mm from the nose")
    ruled(top, Ticks(written=not below))
    most = int(np.argmax(curves["area_mm2"]))
    greatest = f"{square_millimetres(curves['area_mm2'][most])} at {fixed(x[most], 0)} mm from the nose"
    words = f"Section area from nose to tail, greatest {greatest}, with width and depth; all in the table of stations."
    return picture(figure, words)


def drag(rows: Sequence[Mapping[str, Any]], fluid: str) -> Picture | None:
    """Return the drag areas of one fluid at its greatest speed by parts, each way and layer, with their bands, mm2."""
    of_fluid = [row for row in rows if row["fluid"] == fluid]
    if not of_fluid:
        return None
    fastest = max(row["speed_m_s"] for row in of_fluid)
    chosen = [row for row in of_fluid if row["speed_m_s"] == fastest][::-1]
    figure = blank(WIDE, 27.5 + 7.5 * len(chosen))
    axes = margins(figure, 25, 18, 4, 5)
    start = np.zeros(len(chosen))
    for key in [*PARTS, *sorted({key for row in chosen for key in row["parts"]} - set(PARTS))]:
        name, colour, hatch = PARTS.get(key, (key, "#ffffff", "..."))
        lengths = np.array([row["parts"].get(key) or 0.0 for row in chosen])
        if not lengths.any():
            continue
        axes.barh(
            range(len(chosen)),
            lengths,
            left=start,
            height=0.62,
            label=name,
            facecolor=colour,
            hatch=hatch,
            edgecolor=ink.INK,
            linewidth=0.6,
        )
        start += lengths
    for level, row in enumerate(chosen):
        ends = [row["drag_area_mm2"] + (row[end] - row["cd"]) * row["frontal_mm2"] for end in ("cd_low", "cd_high")]
        axes.plot(ends, [level, level], color=ink.INK, linewidth=1.0, marker="|", markersize=7, zorder=5)
    labels = [f"{leads_words(row['leads'])}\n{layer_words(row)}" for row in chosen]
    words = [label if drawable(label.replace("\n", "")) else "?" for label in labels]
    axes.set_title(f"in {fluid}, {fixed(fastest, 1)} m/s", fontsize=7.5, loc="left", pad=3)
    axes.set(xlabel="drag area, mm²   (line: how sure)", xlim=(0, None))
    ruled(axes, y=Ticks(range(len(chosen)), words, marked=False, gridded=False))
    handles, names = axes.get_legend_handles_labels()
    figure.legend(
        handles,
        names,
        loc="lower center",
        ncols=3,
        fontsize=6.5,
        columnspacing=1.2,
        handlelength=2.2,
        borderaxespad=0.2,
    )
    told = f"Bars of the drag area in {fluid} at {fixed(fastest, 1)} m/s by parts, nose first and tail first"
    return picture(figure, f"{told}, with bands; numbers in the table of drag.")


def leads_words(leads: Any) -> str:
    """Return which end goes first."""
    return {"nose": "nose first", "tail": "tail first", None: "broadside"}.get(leads, str(leads))


def layer_words(row: Mapping[str, Any]) -> str:
    """Return the layer of a drag estimate, starred where that estimate is the one to go by."""
    return str(row["layer"]) + (" *" if row.get("headline") else "")


def _cycle(count: int) -> list[dict[str, Any]]:
    """Looks of so many lines, no two alike without colour: from the fifth on they carry marks."""
    plain = [dict(LINES[index % len(LINES)]) for index in range(count)]
    for index in range(len(LINES), count):
        mark = MARKS[(index // len(LINES) - 1) % len(MARKS)]
        plain[index] |= {"marker": mark, "markersize": 3.2, "markevery": 4, "markerfacecolor": "white"}
    return plain


def _under_legend(count: int) -> tuple[Figure, Axes]:
    """Return a sheet for one chart with room above it for a legend of so many lines, and the room for its curves."""
    more = 3.6 * ((count - 1) // COLUMNS)
    figure = blank(WIDE, 52 + more)
    return figure, margins(figure, 14, 10, 3, 6 + more)


def _legend(axes: Axes, count: int) -> None:
    if count > 1:
        axes.legend(
            loc="lower center",
            bbox_to_anchor=(0.5, 0.99),
            ncols=min(count, COLUMNS),
            fontsize=7,
            columnspacing=1.2,
            borderaxespad=0.1,
        )


def _steps() -> Any:
    from matplotlib.ticker import MaxNLocator

    return MaxNLocator(nbins=7, steps=[1, 1.5, 3, 4.5, 6, 9, 10])
