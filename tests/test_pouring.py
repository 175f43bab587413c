"""Pours from end to end: castings and prints of boxes by hand, out of reach, and what cannot be mixed."""

from __future__ import annotations

import json
from typing import Any

import numpy as np
import pytest
import shapes
from jsonschema import Draft202012Validator
from workbench import bait, coat, hardware, insert, vector, void

from meshlure.bait.pieces import Bait
from meshlure.errors import InputError
from meshlure.pouring.study import pour
from meshlure.results import schema
from meshlure.results.study import Study

BOX = (0.06, 0.02, 0.03)
"""m: 36 cm3."""


def box(density: float = 0.72, **sections: Any) -> Bait:
    """A box with a lead slug of 1 cm3 low in it and a hook of 2 g; it sinks, which takes less time than floating."""
    slug = insert("slug", shapes.box((0.01, 0.01, 0.01), (0.0, 0.0, -0.008)), 24.0)
    return bait(
        shapes.box(BOX),
        slug,
        density=density,
        hardware=[hardware("hook", 2.0, vector(0, 0, -17), 8.0)],
        **sections,
    )


def checked(found: Study) -> dict[str, Any]:
    """The pour of a study, its tree held against the schema."""
    tree = json.loads(found.to_json())
    assert not [error.message[:200] for error in Draft202012Validator(schema()).iter_errors(tree)]
    told: dict[str, Any] = tree["pour"]
    return told


def codes(found: Study) -> list[str]:
    return [finding["code"] for finding in found.results["findings"]]


def test_a_casting_by_hand() -> None:
    # 35 cm3 of 0.72 from 1.05 and 0.15 g/cm3: 0.33/0.90 = 0.36667 of the volume balloons. Four baits and a tenth more:
    # 154 cm3, 56.47 of it balloons that weigh 8.47 g and fill 94.1 ml; 97.53 of resin that weigh 102.41 g.
    stated = {"resin": "1.05 g/cm3", "balloons": "0.15 g/cm3", "baits": 4, "ratio": [2, 1]}
    found = pour(box(pour=stated))
    told = checked(found)
    assert told["mix"]["share"] == pytest.approx(0.33 / 0.90)
    assert told["mix"]["flow"] == "pours"
    cups = told["batch"]
    assert cups["body_mm3"] == pytest.approx(35000)
    assert (cups["part_a_g"], cups["part_b_g"]) == pytest.approx((68.273, 34.137), abs=2e-3)
    assert (cups["balloons_g"], cups["balloons_ml"]) == pytest.approx((8.470, 94.111), abs=2e-3)
    # Body 25.2 g, slug 24 g, hook 2 g that displaces 0.25 cm3.
    assert told["bait"]["bare_g"] == pytest.approx(49.2)
    assert told["bait"]["mass_g"] == pytest.approx(51.2)
    assert told["bait"]["reserve_g"] == pytest.approx(36.25 - 51.2)
    assert [row["off_share"] for row in told["off"]] == [-0.03, 0.03]
    assert [row["mass_g"] for row in told["off"]] == pytest.approx([51.2 - 0.756, 51.2 + 0.756])
    assert [row["name"] for row in told["inserts"]] == ["slug"]
    # The slug's middle is the box's along its length: half of 60 mm from the nose.
    assert told["inserts"][0]["from_nose_mm"] == pytest.approx(30.0)
    assert codes(found) == []
    # What nobody stated is told as assumed, and the dust and the resin call for care.
    assert {"share of a tapped cup of balloons that is balloons", "waste in cup, sprue and vents"} <= {
        row["what"] for row in told["assumptions"] if row["assumed"]
    }
    assert {"fine dust", "polyurethane", "epoxy"} <= {row["trigger"] for row in found.results["cautions"]}


def test_the_other_mixes_go_by_the_rule() -> None:
    told = checked(pour(box(pour={"resin": "1.05 g/cm3", "balloons": "0.15 g/cm3"})))
    densities = [row["outcome"]["density_g_cm3"] for row in told["shares"]]
    assert densities == pytest.approx([1.05, 0.96, 0.87, 0.78, 0.69, 0.60])
    assert [row["outcome"]["mass_g"] for row in told["shares"]] == pytest.approx([35 * d + 26 for d in densities])


def test_a_mass_that_is_wanted_of_the_whole() -> None:
    # 52.6 g less 26 g over 35 cm3: 0.76 g/cm3.
    told = checked(pour(box(pour={"mass": "52.6 g", "resin": "1.05 g/cm3", "balloons": "0.15 g/cm3"})))
    assert told["wanted"] == {"by": "mass", "density_g_cm3": pytest.approx(0.76), "reached": True}
    assert told["bait"]["mass_g"] == pytest.approx(52.6)


def test_a_reserve_that_is_wanted_by_the_body() -> None:
    # Displaced 36.25 g; 13 g more than that weighs 49.25 g, 23.25 g of it body.
    target = {"behaviour": "sinks", "reserve": "-13 g", "vary": "body density"}
    told = checked(pour(box(target=target, pour={"resin": "1.05 g/cm3", "balloons": "0.15 g/cm3"})))
    assert told["wanted"]["by"] == "reserve"
    assert told["bait"]["density_g_cm3"] == pytest.approx(23.25 / 35)
    assert told["bait"]["reserve_g"] == pytest.approx(-13.0)
    assert told["bait"]["state"] == "sinks"


@pytest.mark.parametrize(
    ("density", "nearest", "code"),
    [(0.5, 0.60, "mix-out-of-reach"), (1.2, 1.05, "mix-out-of-reach"), (0.62, 0.62, "stiff-mix"), (0.7, 0.7, None)],
)
def test_out_of_reach_or_stiff(density: float, nearest: float, code: str | None) -> None:
    found = pour(box(density, pour={"resin": "1.05 g/cm3", "balloons": "0.15 g/cm3"}))
    told = checked(found)
    assert told["wanted"]["reached"] is (code != "mix-out-of-reach")
    assert told["mix"]["density_g_cm3"] == pytest.approx(nearest)
    assert told["bait"]["density_g_cm3"] == pytest.approx(nearest)
    assert codes(found) == ([] if code is None else [code])


def test_what_weighs_too_much_already() -> None:
    found = pour(box(pour={"mass": "25 g"}))
    assert checked(found)["wanted"] == {"by": "mass", "density_g_cm3": None, "reached": False}
    assert "mass-out-of-reach" in codes(found)
    assert "mix-out-of-reach" not in codes(found)


@pytest.mark.parametrize(
    ("stated", "told"),
    [
        ({"resin": "lead"}, "pour.resin: this is no casting resin"),
        ({"resin": "polyurethane + glass microballoons"}, "pour.resin: this is no casting resin"),
        ({"balloons": "balsa"}, "pour.balloons: these are no balloons"),
        (
            {"balloons": "glass microballoons tapped bulk"},
            "pour.balloons: this is the density of balloons with the air",
        ),
        ({"resin": "1.1 g/cm3", "balloons": "1.1 g/cm3"}, "pour.balloons: resin and balloons have one density"),
        ({"resin": "epoxi"}, "pour.resin: no material of this name"),
    ],
)
def test_what_cannot_be_mixed(stated: dict[str, str], told: str) -> None:
    with pytest.raises(InputError) as caught:
        pour(box(pour=stated))
    (fault,) = caught.value.faults
    assert str(fault).startswith(told)


def test_both_faults_at_once() -> None:
    with pytest.raises(InputError) as caught:
        pour(box(pour={"resin": "lead", "balloons": "oak"}))
    assert [fault.where for fault in caught.value.faults] == ["pour.resin", "pour.balloons"]


def test_a_sealed_hollow_calls_for_care_under_pressure() -> None:
    hollow = bait(
        shapes.box(BOX), void("chamber", shapes.box((0.02, 0.006, 0.006))), density=1.06, coat=coat(1e-4, 1.1)
    )
    assert "pressure" in {row["trigger"] for row in pour(hollow).results["cautions"]}
    assert "pressure" not in {row["trigger"] for row in pour(box()).results["cautions"]}


def print_box(**sections: Any) -> Bait:
    """The box printed with a wall of 1.2 mm and 90% infill of 1.2 g/cm3, in water of 1 g/cm3."""
    how = {"density": "1.2 g/cm3", "wall": "1.2 mm", "infill": 0.9}
    return bait(shapes.box(BOX), printed=how, **sections)


def test_walls_and_infills_of_a_box_by_hand() -> None:
    found = pour(print_box(pour={"mass": "38 g"}))
    told = checked(found)
    made = told["print"]
    for row in made["rows"]:
        t = row["wall_mm"]
        core = (60 - 2 * t) * (20 - 2 * t) * (30 - 2 * t)
        assert row["core_mm3"] == pytest.approx(core, rel=1e-6)
        masses = [1.2e-3 * (36000 - core + share * core) for share in made["infills"]]
        assert row["bait_g"] == pytest.approx(masses, rel=1e-6)
        assert row["reserve_g"] == pytest.approx([36.0 - mass for mass in masses], rel=1e-6)
        share = (38 / 1.2e-3 - 36000 + core) / core
        assert row["infill_share"] == (pytest.approx(share, rel=1e-6) if 0 <= share <= 1 else None)
    assert told["wanted"]["reached"]
    assert told["mix"] is told["batch"] is told["shares"] is None


def test_a_flooded_print_by_hand() -> None:
    told = checked(pour(print_box()))
    core = 57.6 * 17.6 * 27.6e-3
    mass = 1.2 * (36 - 0.1 * core)
    assert told["print"]["flooded_water_g"] == pytest.approx(0.1 * core)
    flooded = told["print"]["flooded"]
    assert flooded["mass_g"] == pytest.approx(mass + 0.1 * core)
    assert flooded["reserve_g"] == pytest.approx(36 - mass - 0.1 * core)
    assert flooded["state"] == "sinks"
    assert told["print"]["target_g"] is None


def test_a_mass_that_no_wall_makes() -> None:
    found = pour(print_box(pour={"mass": "50 g"}))
    assert not checked(found)["wanted"]["reached"]
    assert "mass-out-of-reach" in codes(found)
    assert np.prod(BOX) * 1.2e6 < 50
