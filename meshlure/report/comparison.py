"""The page that holds baits against each other: outlines over each other, what differs, and which of it counts."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from meshlure.report import figures as ink
from meshlure.report import wording
from meshlure.report.charts import WIDE
from meshlure.report.drawings import TITLES, Drawing
from meshlure.report.figures import Picture, blank, drawable, drawing_style, picture
from meshlure.report.lines import WORDS, look
from meshlure.report.overlay import common_scale, key, laid, overlay
from meshlure.report.resting import resting
from meshlure.report.rulings import Ticks, margins, ruled
from meshlure.report.saved import columns as columns_of
from meshlure.report.saved import saved_file, with_file
from meshlure.report.subject import readable, subject
from meshlure.report.table import Saved, Table, table
from meshlure.report.wording import clipped, fixed, significant
from meshlure.results import Study

Floats = NDArray[np.float64]
Tree = Mapping[str, Any]

SHOWN = 80
"""Characters of a bait's name that the page shows."""
SAME, UNKNOWN = "≈", "?"


@dataclass(frozen=True)
class Cell:
    """A bait's value in a row, with its difference from the first's."""

    value: str
    difference: str = ""
    counts: bool | None = None


@dataclass(frozen=True)
class Row:
    """A quantity of all baits."""

    what: str
    cells: tuple[Cell, ...]


@dataclass(frozen=True)
class Group:
    """Rows under one heading."""

    title: str
    rows: tuple[Row, ...]


@dataclass(frozen=True)
class Column:
    """One bait: its letter, its name, whether to make it, and how it rests."""

    letter: str
    name: str
    file: str
    found: str
    answer: str
    rest: Picture | None


def page(study: Study, studies: Sequence[Study], tips: Sequence[Floats]) -> str:
    """Return the comparison of baits as one HTML page.

    Parameters
    ----------
    study : Study
        Of the first bait; its results hold the comparison.
    studies : sequence of Study
        Of all baits: their views are drawn.
    tips : sequence of (3,) arrays, mm
        Each body's nose tip, in its own mesh coordinates.

    Returns
    -------
    str
        HTML that needs no other file, no network and no script.
    """
    from jinja2 import Environment, PackageLoader, StrictUndefined

    results = wording.cleaned(study.results)
    found = results["comparison"]
    trees = [wording.cleaned(one.results) for one in studies]
    with drawing_style():
        drawings = _drawings(found, studies, tips)
        columns = _columns(found, studies, trees)
        charts = [_reserves(found, trees), _stations(found, trees)]
        lines = key([(column.letter, column.name) for column in columns])
    templates = Environment(
        loader=PackageLoader("meshlure.report", "templates"),
        autoescape=True,
        undefined=StrictUndefined,
        trim_blocks=True,
        lstrip_blocks=True,
    )
    return templates.get_template("comparison.html").render(
        r=results,
        columns=columns,
        groups=groups(found),
        words=words(found),
        drawings=drawings,
        key=lines,
        charts=charts,
        chart_tables=[_reserve_table(found, trees), _station_table(found, trees)],
        differences=_difference_file(found),
        conditions=conditions(found["conditions"]),
        cautions=_cautions(trees),
        same=SAME,
        unknown=UNKNOWN,
    )


def groups(found: Tree) -> list[Group]:
    """Return the rows with their values and differences in words, by heading."""
    made: dict[str, list[Row]] = {}
    for row in found["rows"]:
        unit = wording_unit(row["unit"])
        cells = [Cell(fixed(row["values"][0], row["decimals"]))]
        for value, difference in zip(row["values"][1:], row["differences"], strict=True):
            by = fixed(difference["by"], row["decimals"], signed=True) if difference["by"] is not None else ""
            cells.append(Cell(fixed(value, row["decimals"]), by, difference["counts"]))
        made.setdefault(row["group"], []).append(Row(f"{row['what']}, {unit}" if unit else row["what"], tuple(cells)))
    return [Group(title, tuple(rows)) for title, rows in made.items()]


def wording_unit(unit: str) -> str:
    """Return a unit as the page writes it."""
    return {"mm2": "mm²", "mm3": "mm³", "deg": "°"}.get(unit, unit)


def words(found: Tree) -> Table | None:
    """Return what is said in words of each bait."""
    letters = [bait["letter"] for bait in found["baits"]]
    rows = [(row["what"], *row["values"]) for row in found["words"]]
    return table("In words", ("", *letters), rows, range(len(letters) + 1))


def conditions(found: Tree) -> list[str]:
    """Return in sentences what all were taken in."""
    if found["as_stated"]:
        return ["Each bait is in the water, throw and retrieve of its own bait file: differences come from these too."]
    water = found["water"]
    salt = water["salinity_g_kg"]
    how = f"{fixed(water['density_kg_m3'], 1)} kg/m³"
    if water["temperature_c"] is not None and salt is not None:
        how = f"{fixed(water['temperature_c'], 0)} °C and {significant(salt, 2)} g/kg of salt, {how}"
    lines = [
        f"All are taken in the first one's water ({how}), throw ({fixed(found['cast_speed_m_s'], 0)} m/s) and retrieve."
    ]
    lines += [
        f"The file of {other['name']} says otherwise of {' and '.join(other['differs'])}."
        for other in found["others"]
        if other["differs"]
    ]
    return lines


def _columns(found: Tree, studies: Sequence[Study], trees: Sequence[Tree]) -> list[Column]:
    made = []
    for bait, study, tree in zip(found["baits"], studies, trees, strict=True):
        counts = [
            f"{bait[f'{level}s']} {level}{'' if bait[f'{level}s'] == 1 else 's'}" for level in ("fault", "warning")
        ]
        rest = resting([readable(view) for view in study.views], subject(tree))
        name = clipped(bait["name"], SHOWN)
        made.append(Column(bait["letter"], name, bait["file"], ", ".join(counts), tree["readiness"]["words"], rest))
    return made


def _drawings(found: Tree, studies: Sequence[Study], tips: Sequence[Floats]) -> list[Drawing]:
    made: list[Drawing] = []
    scale = None
    for name, title in TITLES.items():
        outlines = [
            one
            for number, (bait, study, tip) in enumerate(zip(found["baits"], studies, tips, strict=True))
            if (one := laid(study.views, tip, name, number, bait["letter"], clipped(bait["name"], SHOWN))) is not None
        ]
        if not outlines:
            continue
        scale = common_scale(outlines) if scale is None else scale
        made.append(Drawing(name, title, overlay(name, outlines, scale)))
    return made


def _reserves(found: Tree, trees: Sequence[Tree]) -> Picture:
    """The reserve of each with its band, on one line from sinking to floating, g."""
    count = len(trees)
    figure = blank(WIDE, 16 + 6.5 * count)
    axes = margins(figure, 9, 10, 4, 6)
    rows = [tree["buoyancy"] for tree in trees]
    ends = [row[key] for row in rows for key in ("reserve_low_g", "reserve_high_g")]
    reach = max(max(ends) - min(ends), 0.1) * 0.12
    axes.set(xlim=(min(*ends, 0) - reach, max(*ends, 0) + reach), ylim=(count - 0.5, -0.5))
    axes.axvspan(0, axes.get_xlim()[1], color=ink.SHALLOW, linewidth=0)
    axes.axvline(0, color=ink.INK, linewidth=0.9)
    for number, row in enumerate(rows):
        axes.plot(
            [row["reserve_low_g"], row["reserve_high_g"]], [number, number], color=ink.INK, marker="|", markersize=7
        )
        axes.plot(row["reserve_g"], number, marker="D", color=ink.INK, markersize=4.5, markeredgecolor="white")
    axes.set_xlabel("reserve, g   (line: how sure)", labelpad=1.5)
    letters = [bait["letter"] for bait in found["baits"]]
    ruled(axes, y=Ticks(range(count), letters, marked=False, gridded=False))
    each = "; ".join(
        f"{bait['letter']} {wording.banded_grams(row['reserve_g'], row['reserve_low_g'], row['reserve_high_g'])}"
        for bait, row in zip(found["baits"], rows, strict=True)
    )
    return picture(figure, f"Reserves with their bands: {each}.")


def _stations(found: Tree, trees: Sequence[Tree]) -> Picture:
    """The section area over the distance from the nose, mm2 over mm."""
    figure = blank(WIDE, 56)
    axes = margins(figure, 14, 10, 3, 9)
    for number, (bait, tree) in enumerate(zip(found["baits"], trees, strict=True)):
        table_ = tree["stations"]
        label = bait["letter"] if drawable(bait["letter"]) else str(number + 1)
        axes.plot(table_["from_nose_mm"], table_["area_mm2"], label=label, **look(number, 0.12))
    most = max(max(tree["stations"]["area_mm2"]) for tree in trees)
    axes.set(ylabel="section area, mm²", xlabel="mm from the nose", ylim=(0, 1.08 * most))
    ruled(axes)
    axes.legend(loc="lower center", bbox_to_anchor=(0.5, 0.99), ncols=4, fontsize=7, borderaxespad=0.1)
    each = "; ".join(f"{bait['letter']} {WORDS[number]}" for number, bait in enumerate(found["baits"]))
    return picture(figure, f"Section area from nose to tail, one line a bait: {each}. Numbers are in the table below.")


def _reserve_table(found: Tree, trees: Sequence[Tree]) -> Table | None:
    """The reserves with their bands."""
    keys = ("reserve_g", "reserve_low_g", "reserve_high_g")
    rows = [
        {"bait": bait["letter"], "name": bait["name"], **{key: tree["buoyancy"][key] for key in keys}}
        for bait, tree in zip(found["baits"], trees, strict=True)
    ]
    lines = [
        (f"{row['bait']} {clipped(row['name'], SHOWN)}", *(fixed(row[key], 2, signed=True) for key in keys))
        for row in rows
    ]
    shown = table("Reserves with their bands", ("bait", "reserve, g", "from, g", "to, g"), lines)
    return None if shown is None else with_file(shown, rows, "comparison", "reserves")


def _station_table(found: Tree, trees: Sequence[Tree]) -> Table | None:
    """The section areas from nose to tail, bait by bait."""
    rows = [
        {"bait": bait["letter"], **row}
        for bait, tree in zip(found["baits"], trees, strict=True)
        for row in columns_of(tree["stations"], "from_nose_mm", "area_mm2")
    ]
    lines = [(row["bait"], fixed(row["from_nose_mm"], 1), fixed(row["area_mm2"], 1)) for row in rows]
    shown = table("Section area from nose to tail", ("bait", "from nose, mm", "area, mm²"), lines)
    return None if shown is None else with_file(shown, rows, "comparison", "stations")


def _difference_file(found: Tree) -> Saved:
    """All that differs, with every digit."""
    letters = [bait["letter"] for bait in found["baits"]]
    rows = [
        {"group": row["group"], "what": row["what"], "unit": row["unit"]}
        | dict(zip(letters, row["values"], strict=True))
        for row in found["rows"]
    ]
    return saved_file(rows, "comparison", "differences")


def _cautions(trees: Sequence[Tree]) -> list[Tree]:
    """Every caution of any of them, once."""
    return list({row["trigger"]: row for tree in trees for row in tree["cautions"]}.values())
