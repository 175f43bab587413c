"""Whether to make the bait: what is asked and missed, what is in doubt, and what is said of it.

The trees are invented; what each must lead to follows by hand from the bars that `results.objections` states.
"""

from __future__ import annotations

from collections.abc import Callable
from math import radians
from typing import Any

import pytest
from invented_minnow import minnow_results

from meshlure.files.sections.target import TargetSection
from meshlure.results.readiness import readiness

Tree = dict[str, Any]


def asked(**given: Any) -> TargetSection:
    keys: Tree = dict.fromkeys(("behaviour", "reserve", "submerged", "sink", "nose_up", "lean"))
    return TargetSection(**(keys | {"vary": "ballast"} | given))


def sound() -> Tree:
    """A bait that nothing speaks against: floats with +1.22 g, held to a tenth of a gram, nose 3.9 degrees down."""
    tree = minnow_results()
    tree["findings"] = [row for row in tree["findings"] if row["code"] == "sticks-out" or row["level"] == "note"]
    tree["limits"] = []
    tree["buoyancy"].update(reserve_g=1.22, reserve_low_g=1.12, reserve_high_g=1.32, state="floats")
    tree["budget"]["monte_carlo"].update(
        floats_share=1.0, suspends_share=0.0, sinks_share=0.0, left_share=0.0, pass_share=None,
        nose_up_deg=[-5.0, -4.4, -3.9, -3.4, -2.9],
    )  # fmt: skip
    tree["postures"][0].update(nose_up_deg=-3.9, lean_deg=0.0, rounded=False)
    return tree


def test_what_nothing_speaks_against_is_ready() -> None:
    found = readiness(sound(), asked(behaviour="floats", reserve=1.2e-3, nose_up=radians(-4.0), lean=0.0))
    assert (found["state"], found["reasons"]) == ("ready", [])
    assert found["words"] == "Ready to make: no faults, and it meets its target."
    assert "[measured]" in found["first"][-1]
    assert "10\u202f000 copies" in found["checked"]


def test_without_anything_asked_it_says_so() -> None:
    found = readiness(sound(), None)
    assert found["state"] == "ready"
    assert "sets no target and no limits" in found["words"]
    assert "target" not in found["checked"]


@pytest.mark.parametrize(
    ("target", "words", "quantity", "wanted", "value"),
    [
        (asked(behaviour="sinks", reserve=-2e-3), "it floats; wanted is that it sinks", None, None, None),
        (asked(reserve=1.4e-3), "reserve +1.22 g, +1.40 g wanted", "reserve_g", 1.4, 1.22),
        (asked(nose_up=radians(3.0)), "nose 4° down, 3° up wanted", "nose_up_deg", 3.0, -3.9),
        (asked(lean=radians(10.0)), "no lean, lean 10° to its right wanted", "lean_deg", 10.0, 0.0),
        (asked(sink=0.06), "sinks at 0 cm/s, 6 cm/s wanted", "sink_m_s", 0.06, 0.0),
    ],
)
def test_what_was_asked_and_is_missed_stops_it(
    target: TargetSection, words: str, quantity: str | None, wanted: float | None, value: float | None
) -> None:
    found = readiness(sound(), target)
    first = found["reasons"][0]
    assert found["state"] == "not yet"
    assert first["stops"] is True
    assert first["words"] == words
    assert found["words"].startswith(f"Not yet: {words}")
    if quantity is not None:
        assert (first["quantity"], first["wanted"], first["found"]) == (
            quantity, pytest.approx(wanted), pytest.approx(value)
        )  # fmt: skip
    assert any("meshlure balance" in step for step in found["first"])


@pytest.mark.parametrize(
    ("wanted", "state"),
    [(1.22 / 1.099, "ready"), (1.22 / 1.101, "not yet")],
    ids=["within a tenth of the reserve", "beyond"],
)
def test_a_reserve_is_reached_within_a_tenth_of_it(wanted: float, state: str) -> None:
    assert readiness(sound(), asked(reserve=wanted * 1e-3))["state"] == state


@pytest.mark.parametrize(
    ("rounded", "off", "state"),
    [(False, 1.4, "ready"), (False, 1.6, "not yet"), (True, 2.4, "ready"), (True, 2.6, "not yet")],
)
def test_an_angle_in_steps_of_five_is_held_to_half_a_step(rounded: bool, off: float, state: str) -> None:
    tree = sound()
    tree["postures"][0].update(nose_up_deg=5.0, rounded=rounded)
    assert readiness(tree, asked(nose_up=radians(5.0 + off)))["state"] == state


def widened(tree: Tree) -> None:
    tree["buoyancy"].update(reserve_low_g=0.9, reserve_high_g=1.5)
    tree["buoyancy"]["doubts"] = [{"what": "density of lead", "low_g": 0.28, "high_g": 0.28}]


def strayed(tree: Tree) -> None:
    tree["budget"]["monte_carlo"].update(floats_share=0.9, sinks_share=0.1)


def loosened(tree: Tree) -> None:
    tree["budget"]["monte_carlo"]["nose_up_deg"] = [-12.0, -6.0, -3.9, -1.0, 3.0]


def warned(tree: Tree) -> None:
    tree["findings"].append({"code": "thin-wall", "level": "warning", "advice": ""})


def fewer(tree: Tree) -> None:
    tree["budget"]["monte_carlo"]["pass_share"] = 0.8


@pytest.mark.parametrize(
    ("spoil", "words"),
    [
        (widened, "the density of lead is from stock, not weighed: reserve anywhere from +0.9 g to +1.5 g"),
        (strayed, "10% of copies would sink"),
        (loosened, "its posture is touchy: copies would rest from nose 12° down to nose 3° up"),
        (warned, "1 warning to look at"),
        (fewer, "only 80% of copies would pass your limits"),
    ],
)
def test_what_is_in_doubt_asks_for_one_copy_first(spoil: Callable[[Tree], None], words: str) -> None:
    tree = sound()
    spoil(tree)
    found = readiness(tree, None)
    assert [row["words"] for row in found["reasons"]] == [words]
    assert found["state"] == "one first"


def faulty(tree: Tree) -> None:
    tree["findings"].append({"code": "open-edges", "level": "fault", "advice": "close the gap in CAD"})


def outside(tree: Tree) -> None:
    tree["limits"] = [{"what": "reserve, g", "low": 1.3, "high": 2.0, "value": 1.22, "met": False}]


def failing(tree: Tree) -> None:
    tree["budget"]["monte_carlo"]["pass_share"] = 0.4


@pytest.mark.parametrize(
    ("spoil", "words"),
    [
        (faulty, "1 fault was found"),
        (outside, "reserve +1.22 g, outside your limits of +1.30 g to +2.00 g"),
        (failing, "only 40% of copies would pass your limits"),
    ],
)
def test_faults_and_limits_stop_it(spoil: Callable[[Tree], None], words: str) -> None:
    tree = sound()
    spoil(tree)
    warned(tree)
    found = readiness(tree, None)
    assert found["state"] == "not yet"
    assert [(row["words"], row["stops"]) for row in found["reasons"]] == [
        (words, True),
        ("1 warning to look at", False),
    ]
    assert found["words"] == f"Not yet: {words}, and 1 more reason."


def test_changes_that_do_the_same_are_joined_and_others_stand_apart() -> None:
    tree = sound()
    tree["changes"] = [
        {"towards": "nose", "words": "Move it."},
        {"towards": None, "words": "Add lead."},
        {"towards": "left", "words": "Move it left."},
    ]
    assert readiness(tree, None)["first"][:2] == ["Move it. Or: Add lead.", "Move it left."]


def test_a_bait_without_an_attitude_is_said_to_have_none_and_not_to_tip() -> None:
    tree = sound()
    tree["postures"][0].update(up=None, nose_up_deg=None, lean_deg=None)
    tree["budget"]["monte_carlo"].update(left_share=1.0, nose_up_deg=None)
    (reason,) = readiness(tree, None)["reasons"]
    assert reason["words"] == "its centres meet, so it has no preferred attitude"
