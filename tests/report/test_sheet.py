"""The drawing 1:1: measured on the finished PDF and SVG, and how long drawings are cut.

Authorities: pypdf takes the PDF apart, the standard library's XML parser the SVG; lengths are those of the bait that
was drawn. A point is 1/72 inch (ISO 32000), an A4 sheet 210 x 297 mm (ISO 216).
"""

from __future__ import annotations

import math
import re
from dataclasses import replace
from itertools import pairwise
from typing import Any
from xml.etree import ElementTree as ET

import invented_baits as baits
import numpy as np
import pytest
from command_bench import Bench
from hypothesis import given
from hypothesis import strategies as st
from pdfpages import MM, Page, Path, pages

from meshlure.errors import InputError
from meshlure.report.packing import Block, Room, pack
from meshlure.report.sheet import Sheet, sheet
from meshlure.report.tiles import LAP, windows
from meshlure.results import Study


def sized(study: Study, times: float) -> Study:
    """A study of a bait so many times as large: every length in it, and every outline."""

    def grown(value: Any, key: str = "") -> Any:
        if isinstance(value, dict):
            return {name: grown(held, name) for name, held in value.items()}
        if isinstance(value, list):
            return [grown(held, key if key.endswith("_mm") else "") for held in value]
        return value * times if key.endswith("_mm") and isinstance(value, int | float) else value

    views = tuple(
        replace(
            view,
            shift=view.shift * times,
            pieces=tuple(replace(piece, rings=tuple(ring * times for ring in piece.rings)) for piece in view.pieces),
        )
        for view in study.views
    )
    return replace(study, results=grown(dict(study.results)), views=views)


@pytest.fixture(scope="module")
def minnow() -> Sheet:
    return sheet(baits.minnow())


@pytest.fixture(scope="module")
def minnow_page(minnow: Sheet) -> Page:
    (page,) = pages(minnow.pdf)
    return page


@pytest.fixture(scope="module")
def long() -> list[Page]:
    """Three and a third times the minnow: 307 mm, longer than a sheet."""
    return pages(sheet(sized(baits.minnow(), 10 / 3)).pdf)


def test_the_sheet_is_an_a4_sheet_lying(minnow_page: Page) -> None:
    assert minnow_page.size == pytest.approx((297, 210), abs=0.01)


def test_the_ruler_is_a_hundred_millimetres(minnow_page: Page) -> None:
    rulers = [p for p in minnow_page.paths if p.size == pytest.approx([100, 0], abs=0.01)]
    assert len(rulers) == 1


def test_the_bar_is_ten_millimetres(minnow_page: Page) -> None:
    bars = [p for p in minnow_page.paths if p.pen == pytest.approx(2) and p.size[1] < 1e-6]
    assert [bar.size[0] for bar in bars] == pytest.approx([10, 10], abs=0.01)  # under side and front


def test_outlines_have_the_size_of_the_bait(minnow_page: Page) -> None:
    # The rings that were handed over: the body from the side and from above, the weight, the lip from the side.
    side, top, _ = baits.minnow_views()
    for ring in (side.pieces[0].rings[0], top.pieces[0].rings[0], side.pieces[2].rings[0], side.pieces[0].rings[1]):
        wanted = np.ptp(ring, axis=0)
        assert [p for p in minnow_page.paths if p.size == pytest.approx(wanted, abs=0.06)], wanted


def test_pieces_lie_where_they_lie_in_the_bait(minnow_page: Page) -> None:
    # The weight's ellipse is 34 mm behind the nose and 6 mm under the axis of the outline's ring.
    side = baits.minnow_views()[0]
    skin, weight = side.pieces[0].rings[0], side.pieces[2].rings[0]
    on_paper = [
        next(p.points for p in minnow_page.paths if p.size == pytest.approx(np.ptp(ring, axis=0), abs=0.06))
        for ring in (skin, weight)
    ]
    shift = on_paper[1].min(axis=0) - on_paper[0].min(axis=0)
    assert shift == pytest.approx(weight.min(axis=0) - skin.min(axis=0), abs=0.06)


def test_the_grid_is_ruled_in_millimetres(minnow_page: Page) -> None:
    upright = sorted({round(float(p.points[0, 0]), 3) for p in minnow_page.paths if is_rule(p)})
    steps = {round(b - a, 2) for a, b in pairwise(upright)}
    assert 1.0 in steps
    assert max(steps.difference({1.0}), default=0) > 1.5 or steps == {1.0}


def is_rule(path: Path) -> bool:
    """An upright rule of the finest kind, in the side view."""
    return path.pen == pytest.approx(0.35) and path.size[0] < 1e-6 and path.size[1] > 30 and path.points[0, 0] < 138


def test_words_can_be_searched_and_say_what_a_maker_needs(minnow_page: Page) -> None:
    text = " ".join(minnow_page.text.split())
    for words in (
        "Alder pool minnow",
        "92.0 × 19.0 × 13.0 mm",
        "floats, reserve +1.22 g",
        "nose 4° down",
        "sheet 1 of 1",
        "this one is 100 mm long",
        "belly weight",
        "From the side",
        "From above",
        "From the front",
        "34.0, 0.0, −6.0",
    ):
        assert words in text, words


def test_the_same_study_gives_the_same_bytes(minnow: Sheet) -> None:
    again = sheet(baits.minnow())
    assert again.pdf == minnow.pdf
    assert again.svg == minnow.svg


def test_the_svg_holds_the_whole_in_true_size(minnow: Sheet) -> None:
    root = ET.fromstring(minnow.svg)
    wide = float(re.sub("pt$", "", root.attrib["width"]))
    assert root.attrib["width"].endswith("pt")
    assert wide == pytest.approx(float(root.attrib["viewBox"].split()[2]))  # so that its numbers are points
    wanted = np.ptp(baits.minnow_views()[0].pieces[0].rings[0], axis=0)
    sizes = []
    for element in root.iter():
        for part in re.split("(?=M)", element.attrib.get("d", "")):
            numbers = np.array([float(n) for n in re.findall(r"-?\d+(?:\.\d+)?", part)])
            if len(numbers) > 60 and len(numbers) % 2 == 0:
                sizes.append(np.ptp(numbers.reshape(-1, 2) * MM, axis=0))
    assert [size for size in sizes if size == pytest.approx(wanted, abs=0.06)]


def test_a_long_bait_runs_over_sheets_that_fit_at_the_join(long: list[Page]) -> None:
    assert len(long) >= 2
    assert all(page.size == pytest.approx((297, 210), abs=0.01) for page in long)
    parted = [page for page in long if "From the side" in page.text]
    assert len(parted) == 2
    joins = [[p for p in page.paths if p.pen == pytest.approx(0.8) and p.size[0] < 1e-6] for page in parted]
    assert [len(found) for found in joins] == [1, 1]
    # The ring of the balls' chamber is drawn on both; from it to the join, both must show the same way together.
    chamber = np.ptp(baits.minnow_views()[0].pieces[3].rings[0], axis=0) * 10 / 3
    places = [
        next(p.points[:, 0].min() for p in page.paths if p.size == pytest.approx(chamber, abs=0.06)) for page in parted
    ]
    way = [float(found[0].points[0, 0] - place) for found, place in zip(joins, places, strict=True)]
    assert way[0] == pytest.approx(way[1], abs=0.01)
    assert all("join 1" in page.text for page in parted)


def test_every_name_of_a_long_bait_stands_on_one_of_its_sheets(long: list[Page]) -> None:
    sides = [" ".join(page.text.split()) for page in long if "From the side" in page.text]
    for words in ("3 belly weight", "2 through-wire", "9 rear treble", "4 rattle chamber"):
        assert sum(words in text for text in sides) == 1, words


def test_a_bait_beyond_all_paper_is_refused() -> None:
    with pytest.raises(InputError, match="too large to be drawn 1:1"):
        sheet(sized(baits.minnow(), 40))


def test_hostile_names_and_a_bait_without_posture_are_drawn() -> None:
    study = baits.hostile()
    (page,) = pages(sheet(replace(study, results=dict(study.results) | {"postures": [], "righting": []})).pdf)
    assert "alert" in page.text
    assert "From the side" in page.text


def test_without_outlines_the_list_is_left() -> None:
    (page,) = pages(sheet(Study(baits.minnow_results())).pdf)
    assert "belly weight" in page.text


@given(st.floats(10, 3000), st.floats(60, 300), st.lists(st.tuples(st.floats(0, 3000), st.floats(1, 40)), max_size=30))
def test_windows_show_everything_and_share_a_strip(
    length: float, room: float, words: list[tuple[float, float]]
) -> None:
    found = windows(length, room, [(a, a + wide) for a, wide in words])
    assert found[0].low == found[0].first == 0
    assert found[-1].high == found[-1].last == length
    assert all(window.high - window.low <= room + 1e-9 for window in found)
    for one, other in pairwise(found):
        assert one.last == other.first
        assert one.high - one.last == pytest.approx(min(LAP, length - one.last))
        assert other.first - other.low == pytest.approx(LAP)


def test_a_join_keeps_clear_of_words() -> None:
    # Farthest the join could be at 277 - 5; words from 250 to 280 move it to 250 - 5 or less.
    one, _ = windows(400, 277, [(250, 280)])
    assert 240 < one.last <= 245
    assert windows(400, 277)[0].last == 272


def boxes(placed: list[Any]) -> list[tuple[int, float, float, float, float]]:
    return [
        (p.sheet, p.x, p.x + p.across.high - p.across.low, p.y, p.y + p.upright.high - p.upright.low) for p in placed
    ]


@given(
    st.lists(st.tuples(st.floats(20, 700), st.floats(10, 400), st.floats(0, 10)), min_size=1, max_size=2),
    st.lists(st.tuples(st.floats(10, 350), st.floats(10, 200)), max_size=5),
)
def test_nothing_on_a_sheet_covers_another_or_its_margin(
    long_ones: list[tuple[float, float, float]], others: list[tuple[float, float]]
) -> None:
    room = Room(277, 174)

    def block(wide: float, high: float, zero: float = 0.0) -> Block:
        return Block("", wide, high, lambda _: None, zero)

    placed, count = pack([block(*b) for b in long_ones], [[block(*b)] for b in others], room, 5, lambda _: [])
    found = boxes(placed)
    assert {box[0] for box in found} == set(range(count))
    for number, (on, left, right, low, high) in enumerate(found):
        assert left >= -1e-9
        assert right <= room.width + 1e-9
        assert low >= -1e-9
        assert high <= room.height + 1e-9
        for other in found[number + 1 :]:
            apart = right <= other[1] or other[2] <= left or high <= other[3] or other[4] <= low
            assert on != other[0] or apart
    shown = sum((right - left) * (high - low) for _, left, right, low, high in found)
    assert shown >= sum(wide * high for wide, high, *_ in [*long_ones, *others]) * (1 - 1e-9)


def test_the_command_writes_and_says_so(bench: Bench) -> None:
    bench.put("bait.toml", BAIT_FILE)
    ran = bench.run("sheet", "bait.toml", "--out", "out")
    assert (ran.code, ran.err) == (0, "")
    assert {path.name for path in bench.out.iterdir()} == {"results.json", "sheet.pdf", "sheet.svg"}
    assert "1:1 on 1 sheet" in ran.out
    (page,) = pages((bench.out / "sheet.pdf").read_bytes())
    # The box of the bench is 40 x 10 x 16 mm: from the side, from above and from the front.
    for size in ([40, 16], [40, 10], [10, 16]):
        assert [p for p in page.paths if p.size == pytest.approx(size, abs=0.01)], size
    assert math.isclose(page.size[0], 297, abs_tol=0.01)


def test_the_command_needs_a_folder(bench: Bench) -> None:
    bench.put("bait.toml", BAIT_FILE)
    ran = bench.run("sheet", "bait.toml")
    assert ran.code == 2
    assert "add --out DIR" in ran.err


BAIT_FILE = """\
format = 1
[bait]
name = "Alder pool block"
length_unit = "mm"
nose = "-x"
back = "+z"
[body]
mesh = "body.stl"
density = "1.2 g/cm3"
"""
