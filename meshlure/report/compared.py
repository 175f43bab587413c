"""The drag estimate against published values, in small: what the bands on the page rest on."""

from __future__ import annotations

import functools
import json
from importlib.resources import files
from typing import Any

from meshlure.report import figures as ink
from meshlure.report.charts import WIDE
from meshlure.report.figures import Picture, blank, picture
from meshlure.report.rulings import Ticks, margins, ruled
from meshlure.report.saved import flat, with_file
from meshlure.report.table import Table, table
from meshlure.report.wording import significant

_LOOKS = {"laminar": ("o", "none"), "tripped": ("s", ink.INK), "either": ("^", "none")}
"""By the layer that the source says: marker and filling."""


@functools.cache
def rows() -> tuple[dict[str, Any], ...]:
    """Return the published rows with the estimate, the layer as in the source."""
    text = files("meshlure.report").joinpath("compared.json").read_text(encoding="utf-8")
    return tuple(json.loads(text))


def chart() -> Picture:
    """Return the estimate over the published drag coefficient, with lines 25% either way."""
    figure = blank(WIDE, 60)
    axes = margins(figure, 14, 10, 3, 3)
    reach = (0.03, 2.0)
    axes.plot(reach, reach, color=ink.PENCIL, linewidth=0.8)
    for share in (0.75, 1.25):
        axes.plot(reach, [share * end for end in reach], color=ink.PENCIL, linewidth=0.8, linestyle=(0, (3, 2)))
    for layer, (marker, face) in _LOOKS.items():
        found = [row for row in rows() if row["layer"] == layer]
        axes.plot(
            [row["published"] for row in found],
            [row["estimate"] for row in found],
            linestyle="none",
            marker=marker,
            markersize=4,
            markerfacecolor=face,
            markeredgecolor=ink.INK,
            label=f"layer {layer}",
        )
    axes.set(xscale="log", yscale="log", xlim=reach, ylim=reach)
    marks = (0.05, 0.1, 0.2, 0.5, 1.0)
    ticks = Ticks(marks, [f"{mark:g}" for mark in marks])
    axes.set(xlabel="published drag coefficient", ylabel="estimate")
    ruled(axes, ticks, ticks)
    axes.legend(loc="upper left", frameon=False)
    near = sum(0.75 <= row["estimate"] / row["published"] <= 1.25 for row in rows())
    return picture(
        figure,
        f"Estimate over published drag coefficient of {len(rows())} plain bodies; {near} lie within the dashed lines, "
        "25% either way. The numbers are in the table.",
    )


def values() -> Table | None:
    """Return the rows of the comparison."""
    lines = [
        (
            row["body"],
            row["layer"],
            significant(row["published"], 3),
            significant(row["estimate"], 2),
            significant(row["estimate"] / row["published"], 2),
        )
        for row in rows()
    ]
    title = "Estimate and published drag coefficient of plain bodies"
    head = ("body, what leads", "layer there", "published", "estimate", "ratio")
    shown = table(title, head, lines, (0, 1))
    return None if shown is None else with_file(shown, flat(rows()), "published", "drag_coefficients")
