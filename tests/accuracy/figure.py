"""The figure of the comparison: estimate over published value, row by row."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path

import matplotlib as mpl
from matplotlib.axes import Axes
from matplotlib.figure import Figure
from matplotlib.ticker import NullLocator
from published_bodies import Row

Compared = tuple[Row, tuple[float, float]]

MARKS = {
    "sphere": "o", "spheroid": "D", "hemisphere": "h", "teardrop": "v", "streamlined": "^", "cylinder axial": "s",
    "disc/plate": "_", "cylinder cross": "|", "cone apex first": ">",
}  # fmt: skip


def draw(found: Sequence[Compared], extra: Sequence[Compared], path: Path) -> None:
    """Write the figure: layer as in the source with the rows from memory, and layer chosen."""
    mpl.rcParams["svg.hashsalt"] = "meshlure"
    mpl.rcParams["svg.fonttype"] = "none"
    figure = Figure(figsize=(9, 3.6), layout="constrained")
    left, right = figure.subplots(1, 2, sharey=True)
    for axes, which, title in ((left, 0, "layer as in the source"), (right, 1, "layer chosen by the model")):
        _ground(axes)
        for family, mark in MARKS.items():
            rows = [(row.cd, ratios[which]) for row, ratios in found if row.family == family]
            label = family if which == 0 else None
            axes.plot(*zip(*rows, strict=True), mark, color="black", fillstyle="none", markersize=6, label=label)
        axes.set_title(title, fontsize=10)
    own = [(row.cd, ratios[0]) for row, ratios in extra]
    left.plot(*zip(*own, strict=True), ".", color="0.55", markersize=5, label="further bodies, values from memory")
    left.set_ylabel("estimate / published")
    figure.legend(loc="outside right upper", fontsize=8, frameon=False)
    figure.savefig(path, metadata={"Date": None} if path.suffix == ".svg" else None)


def _ground(axes: Axes) -> None:
    axes.set_xscale("log")
    axes.set_yscale("log")
    axes.axhspan(0.5, 1.5, color="0.95")
    axes.axhspan(0.75, 1.25, color="0.87")
    axes.axhline(1, color="0.4", linewidth=0.8)
    axes.set_ylim(0.4, 2.5)
    axes.set_yticks([0.5, 0.75, 1, 1.25, 1.5, 2], ["0.5", "0.75", "1", "1.25", "1.5", "2"])
    axes.yaxis.set_minor_locator(NullLocator())
    axes.set_xticks([0.05, 0.1, 0.2, 0.5, 1, 2], ["0.05", "0.1", "0.2", "0.5", "1", "2"])
    axes.xaxis.set_minor_locator(NullLocator())
    axes.set_xlabel("published drag coefficient")
