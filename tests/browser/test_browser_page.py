"""The samples' pages in a real browser, opened from the disk.

Authorities: Chromium opens, lays out and prints them; axe-core judges what people need to read them; pypdf takes the
print apart.
"""

from __future__ import annotations

import base64
import csv
import functools
import io
from collections.abc import Callable, Iterator
from pathlib import Path
from typing import Any

import pytest
from browsing import OVERFLOWS, OVERLAPS, PICTURES, Opened, amiss, opened
from invented_odd import crowded, restless, stretched
from pdfpages import pages
from pypdf import PdfReader
from studied import SAMPLES, sample

from meshlure.report.page import page
from meshlure.results import Study

WIDTHS = (360, 768, 1440)
"""Pixels: a phone, a tablet, a desk."""
SMALL = 480
"""Pixels of a window whose picture is soon painted without a graphics card."""
STAGE = "#turn .glass"
MARGIN = (15.0, 14.0)
"""mm that the page's style leaves white at the sides and at head and foot of an A4 sheet."""


@pytest.fixture(scope="module")
def written(tmp_path_factory: pytest.TempPathFactory) -> Callable[[str], Path]:
    """Give a callable that returns where a sample's page lies on the disk."""

    @functools.cache
    def path(name: str) -> Path:
        made: Path = tmp_path_factory.mktemp("page") / "report.html"
        made.write_text(page(sample(name)), encoding="utf-8")
        return made

    return path


@pytest.fixture(scope="module", params=[name for name in SAMPLES if "coarse" not in name])
def window(request: pytest.FixtureRequest, chromium: Any, written: Callable[[str], Path]) -> Iterator[Opened]:
    """One sample's page in a window that all its tests share."""
    with opened(chromium, written(request.param)) as found:
        yield found


def test_it_opens_without_a_complaint_and_asks_for_nothing(window: Opened) -> None:
    assert window.said == []
    assert [url for url in window.asked if not url.startswith("data:")] == [window.path.as_uri()]
    assert window.path.stat().st_size < 3e6


def test_the_bait_turns_under_the_hand(window: Opened) -> None:
    window.wide(SMALL)
    first = window.pixels(STAGE)  # and scrolled to it
    box = window.page.locator(f"{STAGE} canvas.marks").bounding_box()
    x, y = box["x"] + box["width"] / 2, box["y"] + box["height"] / 2
    window.page.mouse.move(x, y)
    window.page.mouse.down()
    window.page.mouse.move(x + 120, y + 30)
    window.page.mouse.up()
    assert window.pixels(STAGE) != first


def test_tables_open(window: Opened) -> None:
    window.page.locator("details summary").first.click()
    folded = "() => [...document.querySelectorAll('details')]"
    assert window.page.evaluate(f"{folded}.filter(each => each.open).length") == 1
    window.page.evaluate(f"{folded}.slice(1).forEach(each => each.querySelector('summary').click())")
    shut = "each => !each.open || ![...each.querySelectorAll('table, ul')].every(held => held.checkVisibility())"
    assert window.page.evaluate(f"{folded}.filter({shut}).map(each => each.textContent.slice(0, 60))") == []


@pytest.mark.parametrize("width", WIDTHS)
def test_no_words_lie_over_others_and_nothing_is_wider_than_its_place(window: Opened, width: int) -> None:
    window.wide(width)
    window.open_all()
    assert window.page.evaluate(OVERLAPS) == []
    assert window.page.evaluate(OVERFLOWS) == []


def test_no_words_of_a_picture_are_cut_or_met_by_others_or_a_leader(window: Opened) -> None:
    assert measured_pictures(window) > 9


@pytest.mark.parametrize(
    ("bait", "least"),
    [
        pytest.param(lambda: stretched((3.0, 0.35, 0.3)), 20, id="long and thin"),
        pytest.param(lambda: stretched((0.35, 1.2, 2.6)), 20, id="short and deep"),
        pytest.param(crowded, 60, id="crowded"),
        pytest.param(restless, 20, id="of many postures"),
    ],
)
def test_pictures_of_odd_baits_keep_their_words_apart(
    chromium: Any, tmp_path: Path, bait: Callable[[], Study], least: int
) -> None:
    path = tmp_path / "report.html"
    path.write_text(page(bait()), encoding="utf-8")
    with opened(chromium, path) as found:
        assert measured_pictures(found) >= least


def test_its_print_cuts_no_figure(window: Opened) -> None:
    found = pages(window.page.pdf(prefer_css_page_size=True, print_background=True))
    assert 3 <= len(found) <= 24
    figures = 0
    for number, sheet in enumerate(found, 1):
        assert sheet.size == pytest.approx((210, 297), abs=0.2)
        assert sheet.paths, f"sheet {number} is empty"
        # A picture's ground is drawn whole even where a sheet shows a part of it: then it sticks out of the margins.
        for path in (p for p in sheet.paths if p.size.min() > 20):
            figures += 1
            assert (path.points.min(axis=0) > [MARGIN[0] - 1, MARGIN[1] - 1]).all(), f"cut on sheet {number}"
            assert (path.points.max(axis=0) < [211 - MARGIN[0], 298 - MARGIN[1]]).all(), f"cut on sheet {number}"
    assert figures >= 10


def test_the_view_is_printed_as_it_was_turned(window: Opened) -> None:
    # Chromium prints a canvas as an image; the page has no other images of pixels.
    window.wide(1440)
    window.page.locator("#turn [data-do=above]").click()
    printed = window.page.pdf(prefer_css_page_size=True, print_background=True)
    images = [image for sheet in PdfReader(io.BytesIO(printed)).pages for image in sheet.images]
    # The greatest of them shows more than paper and one ink.
    shown = max((image.image for image in images if image.image is not None), key=lambda image: image.size)
    assert shown.width > 400
    assert len(shown.convert("RGB").resize((60, 30)).getcolors(1800) or ()) > 50
    assert window.page.locator("#turned").is_hidden()


def test_axe_finds_nothing_amiss(window: Opened, axe: Callable[[], Any]) -> None:
    window.wide(360)
    assert amiss(window, axe()) == []


@pytest.mark.parametrize(
    ("before", "options"),
    [
        ("HTMLCanvasElement.prototype.getContext = () => null;", {}),
        ("", {"java_script_enabled": False}),
    ],
    ids=["without WebGL", "without script"],
)
def test_the_pictures_are_left_where_nothing_can_be_turned(
    chromium: Any, written: Callable[[str], Path], before: str, options: dict[str, Any]
) -> None:
    with opened(chromium, written("stick/stick.toml"), before=before, **options) as found:
        assert found.page.locator("#turn").is_hidden()
        assert found.page.locator("nav [href='#turn']").is_hidden()
        assert found.page.locator("#drawings img").first.is_visible()
        assert found.said == []


def test_fingers_turn_and_zoom_it(chromium: Any, written: Callable[[str], Path]) -> None:
    with opened(chromium, written("stick/stick.toml"), SMALL, has_touch=True) as window:
        window.page.locator(STAGE).scroll_into_view_if_needed()
        box = window.page.locator(f"{STAGE} canvas.marks").bounding_box()
        x, y = box["x"] + box["width"] / 2, box["y"] + box["height"] / 2
        hand = window.page.context.new_cdp_session(window.page)

        def touch(kind: str, *places: tuple[float, float]) -> None:
            points = [{"x": x + across, "y": y + down, "id": number} for number, (across, down) in enumerate(places)]
            hand.send("Input.dispatchTouchEvent", {"type": kind, "touchPoints": points})

        seen = [signs(window)]
        for before, after in (
            (((0.0, 0.0),), ((60.0, 10.0),)),  # one finger turns
            (((-20.0, 0.0), (20.0, 0.0)), ((-70.0, 0.0), (70.0, 0.0))),  # two fingers zoom
        ):
            touch("touchStart", *before)
            touch("touchMove", *after)
            touch("touchEnd")
            seen.append(signs(window))
        assert len(set(seen)) == 3


def test_keys_and_buttons_turn_it_too_and_pieces_can_be_hidden(chromium: Any, written: Callable[[str], Path]) -> None:
    with opened(chromium, written("stick/stick.toml"), SMALL) as window:
        seen = [signs(window)]
        window.page.locator(f"{STAGE} canvas.marks").focus()
        for key in ("ArrowRight", "ArrowUp", "+", "Shift+ArrowLeft"):
            window.page.keyboard.press(key)
            seen.append(signs(window))
        assert len(set(seen)) == len(seen)
        window.page.keyboard.press("0")
        assert signs(window) == seen[0]
        for name in ("side", "above", "front", "nearer"):
            window.page.click(f"#turn [data-do={name}]")
            seen.append(signs(window))
        assert len(set(seen)) == len(seen)
        window.page.click("#turn [data-do=reset]")
        assert signs(window) == seen[0]
        body = window.page.locator("#turn [data-show='0']")
        body.focus()
        first = window.pixels(STAGE)
        body.uncheck()
        assert window.pixels(STAGE) != first
        body.check()
        assert window.pixels(STAGE) == first


def test_every_chart_has_numbers_to_save_without_script(
    chromium: Any, written: Callable[[str], Path], tmp_path: Path
) -> None:
    name = "minnow/minnow.toml"
    tree = sample(name).results
    with opened(chromium, written(name), java_script_enabled=False, accept_downloads=True) as found:
        links = found.page.locator(".save a")
        kept = {
            links.nth(number).get_attribute("download"): links.nth(number).get_attribute("href")
            for number in range(links.count())
        }
        found.page.locator("details:has([download$='-stations.csv']) > summary").click()
        with found.page.expect_download() as taken:
            found.page.locator("[download$='-stations.csv']").click()
        file = tmp_path / taken.value.suggested_filename
        taken.value.save_as(file)
    assert file.name == "quillmere-minnow-95-stations.csv"
    assert base64.b64decode(kept[file.name].partition(",")[2]) == file.read_bytes()
    with file.open(encoding="utf-8-sig", newline="") as lines:
        rows = list(csv.DictReader(lines))
    for key, values in tree["stations"].items():
        assert [float(row[key]) for row in rows] == values
    charts = {"buoyancy", "waters", "righting-sideways", "righting-fore-aft", "stations", "rose", "parts", "moments",
              "paths", "launch"}  # fmt: skip
    assert {f"quillmere-minnow-95-{chart}.csv" for chart in charts} <= set(kept)
    assert "published-drag-coefficients.csv" in kept


def measured_pictures(window: Opened) -> int:
    """How many leaders a page's pictures have, none of which meets another nor any words but its own."""
    measured = window.page.evaluate(PICTURES, "img")
    assert measured["found"] == []
    assert measured["words"] > measured["leaders"]
    count: int = measured["leaders"]
    return count


def signs(window: Opened) -> str:
    """The canvas with the marks, which lie where the view puts them."""
    window.rest()
    shown: str = window.page.evaluate(f"() => document.querySelector('{STAGE} canvas.marks').toDataURL()")
    return shown
