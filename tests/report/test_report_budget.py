"""The page's error budget and weighed copy, and the bench sheet: what stands in the tree stands there."""

from __future__ import annotations

import re
from typing import Any

import pytest
import shapes
from invented_minnow import minnow_results
from invented_outlines import minnow_views
from workbench import bait, coat, hardware, insert, vector

from meshlure.examine import study
from meshlure.pouring.study import pour
from meshlure.report.bench import bench
from meshlure.report.budget import copies, doubts, passing, posture_band, rows, words
from meshlure.report.page import page
from meshlure.report.weighed import again, explanations, facts
from meshlure.results import Study

BOX = (0.06, 0.02, 0.03)


@pytest.fixture(scope="module")
def weighed() -> Study:
    """A sinking box with a slug, hooks, a coat, limits and a copy of it weighed."""
    slug = insert("slug <b>", shapes.box((0.01, 0.01, 0.01), (0.004, 0.001, -0.008)), 24.0)
    return study(
        bait(
            shapes.box(BOX),
            slug,
            density=0.72,
            hardware=[hardware("hook", 2.0, vector(20, 0, -17), 8.0)],
            coat=coat(0.1e-3, 1.2),
            limits={"reserve": ["-16 g", "-15.1 g"]},
            measured={"dry": "52.7 g", "in_water": "15.66 g", "coat": "0.9 g"},
        )
    )


def section(text: str, name: str) -> str:
    found = re.search(rf'<section id="{name}".*?</section>', text, re.DOTALL)
    assert found is not None
    return found[0]


def test_the_page_shows_both(weighed: Study) -> None:
    text = page(weighed)
    told = section(text, "budget")
    for row in weighed.results["budget"]["rows"]:
        assert row["what"].replace("'", "&#39;").replace("<b>", "&lt;b&gt;") in told
    assert "slug <b>" not in text
    for row in weighed.results["measured"]["explanations"]:
        assert row["what"].replace("'", "&#39;").replace("<b>", "&lt;b&gt;") in section(text, "measured")
    assert 'href="#budget"' in text
    assert 'href="#measured"' in text
    # One list of doubts, not two.
    assert "What the bands are made of" in told
    assert "What the band is made of" not in text


def test_numbers_stand_as_they_are_in_the_tree(weighed: Study) -> None:
    tree = weighed.results["budget"]
    table = rows(weighed.results)
    assert table is not None
    first = tree["rows"][0]
    assert table.rows[0][2] == f"{first['reserve_g']:+.2f}".replace("-", "−")
    made_of = doubts(weighed.results)
    assert made_of is not None
    assert len(made_of.rows) == len(tree["doubts"])
    drawn = copies(weighed.results)
    assert drawn is not None
    assert drawn.rows[0][1] == f"{tree['monte_carlo']['reserve_g'][0]:.2f}".replace("-", "−")
    assert drawn.head[1:] == ("2.5 % below", "16 % below", "50 % below", "84 % below", "97.5 % below")


def test_what_the_weighings_tell(weighed: Study) -> None:
    found = weighed.results["measured"]
    table = facts(weighed.results)
    assert table is not None
    told = {row[0]: row[1] for row in table.rows}
    assert set(told) == {"displaces", "body's density", "coat"}
    assert told["body's density"].startswith(f"{found['body']['density_g_cm3']:.3f} g/cm³")
    assert told["coat"].startswith("0.90\N{NO-BREAK SPACE}g")
    both = again(weighed.results)
    assert both is not None
    assert both.rows[0] == ("mass, g", f"{weighed.results['weight']['mass_g']:.2f}", "52.70")
    alone = explanations(weighed.results)
    assert alone is not None
    assert len(alone.rows) == len(found["explanations"])


def test_shares_in_words() -> None:
    def with_share(share: float | None) -> dict[str, Any]:
        limits = [
            {"what": "reserve, g", "low": 0.7, "high": 1.4},
            {"what": "nose up, degrees", "low": -3.0, "high": 12.0},
        ]
        return {"budget": {"monte_carlo": {"pass_share": share, "draws": 10_000}}, "limits": limits}

    said = {share: passing(with_share(share)) for share in (None, 0.0, 0.004, 0.5, 0.996, 1.0)}
    within = "within your limits (reserve +0.70 to +1.40\u00a0g, nose up −3 to +12°)."
    before = "Of 10\u202f000 copies drawn by lot from these doubts, "
    assert said == {
        None: "",
        0.0: f"{before}none is {within}",
        0.004: f"{before}less than 1 % are {within}",
        0.5: f"{before}50 % are {within}",
        0.996: f"{before}more than 99 % are {within}",
        1.0: f"{before}all are {within}",
    }


def test_a_tree_without_either_still_draws() -> None:
    results = minnow_results()
    del results["budget"]
    text = page(Study(results, minnow_views()))
    assert 'id="budget"' not in text
    assert 'id="measured"' not in text
    assert rows(results) is doubts(results) is copies(results) is facts(results) is again(results) is None
    assert (words(results), passing(results), posture_band(results)) == ([], "", "")


def test_a_band_that_has_no_value_is_left_out(weighed: Study) -> None:
    assert posture_band(weighed.results).startswith("Band: nose ")
    band = {**weighed.results["budget"]["band"], "lean_low_deg": None}
    without = {**weighed.results, "budget": {**weighed.results["budget"], "band": band}}
    assert "lean" in posture_band(weighed.results)
    assert "lean" not in posture_band(without)
    assert "lean" not in words(without)[0]


def test_the_bench_sheet_of_a_casting() -> None:
    slug = insert("slug <i>", shapes.box((0.01, 0.01, 0.01), (0.004, 0.001, -0.008)), 24.0, pinned=True)
    made = pour(bait(shapes.box(BOX), slug, density=0.72, pour={"baits": 3, "balloons": "0.15 g/cm3"}))
    text = bench(made)
    cups = made.results["pour"]["batch"]
    for key in ("part_a_g", "part_b_g", "balloons_g"):
        assert f"{cups[key]:.2f}" in text
    # Where the slug lies: from the nose, and in the CAD's coordinates.
    assert ">34.0<" in text
    assert ">4.00, 1.00, −8.00<" in text
    assert ">on a pin<" in text
    assert "slug &lt;i&gt;" in text
    assert "isocyanates" in text
    assert "P2 or N95" in text
    assert "<script" not in text
    assert "http" not in text.split("</style>")[1]


def test_the_bench_sheet_of_a_print() -> None:
    how = {"density": "1.2 g/cm3", "wall": "1.2 mm", "infill": 0.9}
    made = pour(bait(shapes.box(BOX), printed=how, pour={"mass": "38 g"}))
    text = bench(made)
    found = made.results["pour"]["print"]
    assert "infill full of water" in text
    for row in found["rows"]:
        assert f"{row['bait_g'][0]:.2f}" in text
    assert "for 38.00\N{NO-BREAK SPACE}g" in text
