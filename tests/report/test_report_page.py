"""The page as HTML: whole, harmless, complete, the same every time. Judged by the standard library's HTML parser."""

from __future__ import annotations

import base64
import copy
import re
from html.parser import HTMLParser
from itertools import pairwise
from typing import Any
from xml.etree import ElementTree as ET

import invented_baits as baits
import pytest
from invented_flights import tumbling_flight
from jsonschema import Draft202012Validator

from meshlure.report.page import page
from meshlure.results import Study, schema

VOID = {"meta", "img", "br", "hr", "link", "input", "col"}
SECTIONS = [
    "drawings",
    "weight",
    "buoyancy",
    "postures",
    "budget",
    "areas",
    "drag",
    "flight",
    "sinking",
    "assumed",
    "findings",
    "cautions",
    "inputs",
]


class Reader(HTMLParser):
    """Collects what stands in a page and what is wrong with its nesting."""

    def __init__(self) -> None:
        super().__init__(convert_charrefs=True)
        self.open: list[str] = []
        self.faults: list[str] = []
        self.tags: list[tuple[str, dict[str, str | None]]] = []
        self.text = ""

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.tags.append((tag, dict(attrs)))
        if len({name for name, _ in attrs}) < len(attrs):
            self.faults.append(f"<{tag}> has an attribute twice")
        if tag not in VOID:
            self.open.append(tag)

    def handle_endtag(self, tag: str) -> None:
        if not self.open or self.open[-1] != tag:
            self.faults.append(f"</{tag}> closes {self.open[-1:]}")
        else:
            self.open.pop()

    def handle_data(self, data: str) -> None:
        if "style" not in self.open:
            self.text += data


def read(html: str) -> Reader:
    reader = Reader()
    reader.feed(html)
    reader.close()
    return reader


def said(reader: Reader) -> str:
    """Return a page's words; line ends of the source are spaces, as in a browser."""
    return re.sub("[ \n]+", " ", reader.text)


STUDIES = {"minnow": baits.minnow, "sinker": baits.sinker, "stick": baits.stick, "hostile": baits.hostile}


@pytest.fixture(scope="module", params=list(STUDIES))
def html(request: pytest.FixtureRequest) -> str:
    return page(STUDIES[request.param]())


@pytest.fixture(scope="module")
def minnow_html() -> str:
    return page(baits.minnow())


@pytest.mark.parametrize("name", STUDIES)
def test_the_invented_trees_keep_the_published_schema(name: str) -> None:
    # Judged by the independent library jsonschema.
    faults = Draft202012Validator(schema()).iter_errors(dict(STUDIES[name]().results))
    assert [f"{fault.json_path}: {fault.message[:120]}" for fault in faults] == []


def test_every_element_is_closed_in_order(html: str) -> None:
    reader = read(html)
    assert reader.faults == []
    assert reader.open == []


def test_it_starts_as_an_html_document_in_english(html: str) -> None:
    assert html.lstrip().startswith("<!DOCTYPE html>")
    assert next(attrs for tag, attrs in read(html).tags if tag == "html")["lang"] == "en"


def test_nothing_is_fetched_from_elsewhere_and_nothing_runs(html: str) -> None:
    for tag, attrs in read(html).tags:
        assert tag not in {"script", "link", "iframe", "object", "embed", "base", "form"}
        assert not [name for name in attrs if name.startswith("on")]
        for name in ("src", "href", "action", "srcset", "data", "poster"):
            if attrs.get(name) is not None:
                # A table's numbers are held in the page, and its link saves them under a name.
                own = r"#|data:text/csv;" if tag == "a" and attrs.get("download") else r"#|data:image/svg\+xml;base64,"
                assert re.match(own, attrs[name] or ""), (tag, name)
    style = re.search(r"<style>(.*?)</style>", html, re.DOTALL)
    assert style is not None
    assert "url(" not in style[1]
    assert "@import" not in style[1]


def test_pictures_fetch_nothing_either_and_are_sound_xml(html: str) -> None:
    for tag, attrs in read(html).tags:
        if tag == "img":
            svg = base64.b64decode((attrs["src"] or "").split(",")[1])
            for element in ET.fromstring(svg).iter():
                assert not element.tag.endswith(("}script", "}image", "}foreignObject"))
                for name, value in element.attrib.items():
                    if name.endswith("href"):
                        assert value.startswith("#")


def test_every_picture_has_words(html: str) -> None:
    alts = [attrs.get("alt") for tag, attrs in read(html).tags if tag == "img"]
    assert len(alts) >= 8
    assert all(alt and len(alt) > 20 for alt in alts)


def test_all_sections_stand_in_the_order_a_maker_asks(html: str) -> None:
    reader = read(html)
    assert [attrs.get("id") for tag, attrs in reader.tags if tag == "section" and attrs.get("id")] == SECTIONS
    headings = [int(tag[1]) for tag, _ in reader.tags if re.fullmatch("h[1-6]", tag)]
    assert headings[0] == 1
    assert headings.count(1) == 1
    assert all(after - before <= 1 for before, after in pairwise(headings))


def test_ids_are_unique_and_links_arrive(html: str) -> None:
    tags = read(html).tags
    ids = [attrs["id"] for _, attrs in tags if attrs.get("id")]
    assert len(ids) == len(set(ids))
    for _, attrs in tags:
        for name in ("href", "aria-labelledby"):
            if attrs.get(name) and not attrs.get("download"):
                assert (attrs[name] or "").removeprefix("#") in ids


def test_tables_say_what_they_hold_and_have_one_length_of_row(html: str) -> None:
    tables = html.split("<table")[1:]
    assert len(tables) >= 10
    for table in (text.split("</table>")[0] for text in tables):
        assert "<caption>" in table
        rows = [len(re.findall(r"<t[hd][ >]", row)) for row in table.split("<tr")[1:]]
        assert len(set(rows)) == 1


def test_the_same_study_gives_the_same_bytes() -> None:
    assert page(baits.minnow()) == page(baits.minnow())


def test_the_users_own_plot_settings_change_nothing(minnow_html: str) -> None:
    import matplotlib as mpl

    with mpl.rc_context({"font.size": 20, "axes.facecolor": "red", "svg.fonttype": "none"}):
        assert page(baits.minnow()) == minnow_html


def test_it_is_small(minnow_html: str) -> None:
    assert len(minnow_html.encode()) < 1_500_000


def test_the_verdict_stands_before_everything_else(minnow_html: str) -> None:
    text = said(read(minnow_html))
    top = text[: text.index("Drawings, 1:1")]
    for words in (
        "Alder pool minnow",
        "Floats",
        "Floats: reserve +1.2 g, between +0.9 and +1.5 g.",
        "Sways, tail first",
        "Rises at 17 cm/s",
        "13.2\u00a0g",
        "0.47\u00a0oz",
        "+1.2\u00a0g",
        "+0.9 to +1.5\u00a0g",
        "Not yet",
        "rights itself from any lean below 118°",
        "no faults, 1 warning",
        "151 mm3 of lip is outside the body",
        "Nose up −4°, outside your limits of −3° to 0°.",
    ):
        assert words in top, words


def test_what_was_given_stands_on_the_page(minnow_html: str) -> None:
    text = said(read(minnow_html))
    for words in (
        "9f" * 32,
        "18\u202f422",
        "11.240",
        "Lead is poisonous",
        "common practice, no source",
        "7f3a9c52",
        "posture 0.21",
    ):
        assert words in text, words


def test_hostile_names_come_out_as_text() -> None:
    html = page(baits.hostile())
    assert "<script" not in html
    assert "&lt;script&gt;" in html
    assert "{{ 7*7 }}" in html
    for letter in ("\x00", "\x1b", "\u202e"):
        assert letter not in html
    html.encode()  # no half of a surrogate pair is left


def test_a_bait_that_sinks_any_way_up_says_so() -> None:
    text = said(read(page(baits.sinker())))
    for words in (
        "Sinks",
        "−6.4\u00a0g",
        "No attitude of its own",
        "– (no attitude of its own)",
        "no righting curve",
        "Nothing found in the meshes",
    ):
        assert words.lower() in text.lower(), words


def test_a_free_angle_is_a_dash_with_its_reason() -> None:
    text = said(read(page(baits.stick())))
    for words in ("free to roll", "– (free to roll)", "– (stands on end)", "about its length"):
        assert words in text, words


def test_a_study_without_outlines_still_reports() -> None:
    html = page(Study(baits.minnow_results(), ()))
    assert read(html).faults == []
    assert "No outlines came with this study" in html


def test_what_may_be_null_may_be_null() -> None:
    results = baits.minnow_results()
    results.update(line=None, measured=None)
    results["flight"].update(tumbling_flight())
    assert read(page(Study(results, ()))).faults == []


def test_no_posture_at_all() -> None:
    results = baits.minnow_results()
    results.update(postures=[], righting=[])
    assert "no resting posture was found" in page(Study(results, baits.minnow_views()))


def test_the_study_is_left_as_it_was() -> None:
    study = baits.minnow()
    before: dict[str, Any] = copy.deepcopy(dict(study.results))
    page(study)
    assert study.results == before
