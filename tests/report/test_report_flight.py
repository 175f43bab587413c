"""Flight and descent on the page: angles and places against plane geometry, words against the invented trees."""

from __future__ import annotations

import copy
import math
import re
from html.parser import HTMLParser
from typing import Any

import invented_baits as baits
import invented_flights as flights
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from meshlure.report import airborne, flight, underwater, water
from meshlure.report.figures import drawing_style
from meshlure.report.page import page
from meshlure.report.subject import subject
from meshlure.report.windward import centres, chosen_view, levelling, off_wind, windward
from meshlure.results import Study

Tree = dict[str, Any]


def tree(**sections: Tree) -> Tree:
    return {**baits.minnow_results(), **copy.deepcopy(sections)}


class Words(HTMLParser):
    """Collects what a page says."""

    text = ""

    def handle_data(self, data: str) -> None:
        self.text += data


def said(results: Tree) -> str:
    reader = Words()
    reader.feed(page(Study(results, ())))
    return re.sub("[ \n]+", " ", reader.text)


@pytest.fixture(scope="module")
def minnow_words() -> str:
    return said(baits.minnow_results())


def test_angles_from_the_tail_are_half_a_turn_on() -> None:
    curve = {"angle_deg": list(range(-180, 180, 10)), "moment_n_mm": [float(a) for a in range(-180, 180, 10)]}
    angle, moment = airborne.from_leading(curve, "tail")
    assert list(angle) == sorted(angle)
    # 30 degrees from tail first is 150 degrees short of nose first, where the curve says -150.
    assert moment[list(angle).index(30)] == -150
    assert moment[list(angle).index(-30)] == 150
    assert list(airborne.from_leading(curve, "nose")[1])[:-1] == curve["moment_n_mm"]


def test_a_stable_trim_is_where_the_line_of_the_chart_rises() -> None:
    # A vane hinged ahead of its centre: moment proportional to sin(angle), stable nose first and unstable tail first.
    angles = list(range(-180, 181))
    curve = {"angle_deg": angles, "moment_n_mm": [math.sin(math.radians(a)) for a in angles]}
    for leads, rises in (("nose", True), ("tail", False)):
        angle, moment = airborne.from_leading(curve, leads)
        middle = int(np.argmin(np.abs(angle)))
        assert bool(moment[middle + 2] > moment[middle - 2]) is rises
        assert (angle[0], angle[-1]) == (-180, 180)
        assert (np.diff(angle) > 0).all()


@given(st.floats(-math.pi, math.pi), st.sampled_from([-1.0, 1.0]))
def test_the_bait_is_turned_not_mirrored_until_it_flies_level(angle: float, sense: float) -> None:
    towards = np.array([math.cos(angle), math.sin(angle)])
    turn = levelling(towards, sense)
    assert turn @ towards == pytest.approx(np.array([sense, 0.0]), abs=1e-12)
    assert np.linalg.det(turn) == pytest.approx(1.0)


def test_the_angle_off_the_wind_is_the_one_between_motion_and_leading_end() -> None:
    assert off_wind(baits.minnow_results()) == pytest.approx(24.0)
    assert off_wind(tree(flight=flights.tumbling_flight())) == pytest.approx(0.0, abs=1e-6)


@pytest.mark.parametrize("plane", ["pitch", "yaw"])
@pytest.mark.parametrize("leads", ["nose", "tail"])
def test_the_rings_stand_apart_by_their_margins(plane: str, leads: str) -> None:
    results = baits.minnow_results()
    results["flight"].update(margin_plane=plane, leads=leads)
    for view in baits.minnow_views()[:2]:
        # Nose along -x: what leads is at the left of both views where the nose does.
        along = np.array([-1.0, 0.0]) if leads == "nose" else np.array([1.0, 0.0])
        spots = centres(view, results, along)
        assert (spots["G"] - spots["A"]) @ along == pytest.approx(3.7)
        assert (spots["G"] - spots["P"]) @ along == pytest.approx(-12.4)
    side = {"yaw": 41.0, "pitch": 41.5}[plane]
    assert spots["A"][0] == pytest.approx(side)


@pytest.mark.parametrize(
    ("towards", "plane", "seen"),
    [
        ([0.91, 0.0, 0.41], "yaw", "side"),
        ([0.91, 0.41, 0.0], "yaw", "top"),
        ([1.0, 0.0, 0.0], "yaw", "side"),
        ([1.0, 0.0, 0.0], "pitch", "top"),
    ],
)
def test_the_view_is_the_one_that_shows_the_angle(towards: list[float], plane: str, seen: str) -> None:
    results = baits.minnow_results()
    results["flight"].update(towards=towards, margin_plane=plane)
    view = chosen_view(baits.minnow_views(), results)
    assert view is not None
    assert view.name == seen


def test_a_tumbling_bait_is_drawn_straight_and_says_so() -> None:
    results = tree(flight=flights.tumbling_flight())
    with drawing_style():
        found = windward(baits.minnow_views(), subject(results), results)
    assert found is not None
    assert "drawn straight, nose first, for it tumbles" in found.caption
    assert "P centre" not in found.caption


def test_two_points_are_no_path() -> None:
    found = flights.swaying_flight()
    found["paths"][2].update(x_m=[0.0, 33.7], y_m=[2.0, 0.0])
    with drawing_style():
        assert airborne.paths(found).height_mm == airborne.paths(flights.swaying_flight()).height_mm


def test_reach_counts_this_baits_as_one() -> None:
    reach = airborne.reaches(flights.swaying_flight())
    assert reach == pytest.approx({"bait": 1.0, "reversed": 1 / 1.24, "sphere": 1 / 0.81})


@pytest.mark.parametrize(
    "words",
    [
        "In the air",
        "Sways, tail first",
        "It reaches 81\u00a0% of the way of a smooth ball",
        "1.24 times as far as nose first, where it tumbles",
        "0.970 times as far as Willow minnow in its own throw",
        "6.3\u00a0mm nearer the tail it would fly steadily; 1.8\u00a0g added at the very tail would do that",
        "3.7\u00a0mm ahead, 4\u00a0% of the length",
        "12.4\u00a0mm behind: the air turns it farther off",
        "27\u00a0m, band 22 to 34\u00a0m",
        "into a wind of 3.0\u00a0m/s",
        "Not in the bait file, so assumed: speed, line pull.",
        "These limits are ours",
        "balls at the tail",
        "17\u00a0cm/s up",
        "15 to 19\u00a0cm/s",
        "18° towards the nose",
        "an order of size",
        "swimming action",
        "What the bands are made of",
    ],
)
def test_a_maker_reads(words: str, minnow_words: str) -> None:
    assert words in minnow_words


def test_a_tumbler_without_trims_says_what_is_missing() -> None:
    text = said(tree(flight=flights.tumbling_flight(), sinking=flights.fluttering()))
    for words in (
        "Tumbles; the nose is the likelier end in front",
        "it tumbles from either end",
        "No place of the centre of gravity along the bait was found",
        "none: no stable trim; from 30° off it swings right round",
        "the two do not end alike",
        "belly up",
        "– (over ten minutes)",
        "no: means of its swings",
    ):
        assert words in text, words
    assert "balls at the tail" not in text


def test_what_suspends_has_no_speed() -> None:
    text = said(tree(sinking=flights.suspending()))
    assert "Suspends: it neither sinks nor rises" in text
    assert "to 1\u00a0m" not in text


@pytest.mark.parametrize(
    ("better", "words"),
    [
        ({"verdict": "sways", "shift_to_nose_mm": 7.44, "added_g": None}, "no weight added at the nose alone can"),
        (None, "No place of the centre of gravity"),
    ],
)
def test_what_would_help(better: Tree | None, words: str) -> None:
    assert words in flight.help_words({**flights.swaying_flight(), "better": better})


def test_nothing_helps_what_is_steady() -> None:
    assert "steadily as it is" in flight.help_words({**flights.swaying_flight(), "verdict": "steady", "better": None})


def test_tow_leaves_out_parts_that_pull_nothing() -> None:
    found = underwater.tow(baits.minnow_results())
    assert found is not None
    assert "lip, N" in found.head
    assert "eyes and hangers, N" not in found.head


def test_the_verdict_has_no_more_digits_than_its_band() -> None:
    found = {"reserve_g": 6.346, "reserve_low_g": 5.28, "reserve_high_g": 7.39}
    words = "Floats: reserve +6.35 g, between +5.28 and +7.39 g."
    assert water.verdict_words({**found, "verdict": words}) == "Floats: reserve +6.3 g, between +5.3 and +7.4 g."
    narrow = {"reserve_g": 1.08, "reserve_low_g": 1.03, "reserve_high_g": 1.14, "verdict": words}
    assert water.verdict_words(narrow) == words
