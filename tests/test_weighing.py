"""Copies that were weighed: what was put in by hand is found again, and the bait is foretold as if drawn so."""

from __future__ import annotations

import json
from typing import Any

import numpy as np
import pytest
import shapes
from jsonschema import Draft202012Validator
from workbench import bait, coat, hardware, insert, vector

from meshlure.bait.pieces import Bait
from meshlure.errors import InputError
from meshlure.examine import study
from meshlure.results import schema
from meshlure.results.study import Study

SIZE = (0.06, 0.02, 0.03)
"""m: 36 cm3, 1 cm3 of it taken by a slug of 24 g; a hook of 2 g displaces 0.25 cm3."""

FRESH_21 = 997.99
"""kg/m3 at 21 degrees: Tanaka et al. (2001), Metrologia 38, table of the density of water; 997.992."""


def box(density: float = 0.72, scale: float = 1.0, thick: float | None = None, **sections: Any) -> Bait:
    """A box that sinks, its size times a scale, with a coat of 1.2 g/cm3 where one is asked for."""
    slug = insert("slug", shapes.box((0.01, 0.01, 0.01), (0.004, 0.001, -0.008)), 24.0)
    over: dict[str, Any] = {} if thick is None else {"coat": coat(thick, 1.2)}
    hook = hardware("hook", 2.0, vector(0, 0, -17), 8.0)
    body = shapes.box(tuple(scale * side for side in SIZE))
    return bait(body, slug, density=density, hardware=[hook], **over, **sections)


def measured(**weighed: str) -> dict[str, Any]:
    return {"measured": weighed}


def told(found: Study) -> dict[str, Any]:
    """The account of the copy, its tree held against the schema."""
    tree = json.loads(found.to_json())
    assert not [error.message[:200] for error in Draft202012Validator(schema()).iter_errors(tree)]
    account: dict[str, Any] = tree["measured"]
    return account


def test_a_denser_body_is_found_and_named() -> None:
    # 35 cm3 of 0.738 instead of 0.72 g/cm3, 2.5% more: 25.83 g, 51.83 g in all. It displaces 36.25 cm3, 36.177 g of
    # water at 21 degrees, and weighs 15.653 g in it.
    dry, under = 51.83, 51.83 - 36.25 * FRESH_21 / 1000
    found = study(box(**measured(dry=f"{dry} g", in_water=f"{under:.3f} g", water="21 degC")))
    account = told(found)
    assert account["water_kg_m3"] == pytest.approx(FRESH_21, abs=0.01)
    assert [(row["what"], round(row["difference"], 2)) for row in account["rows"]] == [
        ("dry, g", 0.63),
        ("in water, g", 0.63),
    ]
    assert account["displaced"]["measured_mm3"] == pytest.approx(36250, rel=1e-4)
    # ISO 1183: 51.83 g over 36.25 cm3.
    assert account["displaced"]["bulk_density_g_cm3"] == pytest.approx(51.83 / 36.25, rel=1e-4)
    assert account["body"]["density_g_cm3"] == pytest.approx(0.738, rel=1e-3)
    assert account["body"]["difference_share"] == pytest.approx(0.025, abs=1e-3)
    best = account["explanations"][0]
    assert best["what"] == "density of the body"
    assert best["likely"]
    assert best["change"] == pytest.approx(2.5, abs=0.05)
    assert "density of the body +2.5%" in account["words"]


def test_what_was_weighed_is_foretold_as_if_it_were_drawn_so() -> None:
    dry, under = 51.83, 51.83 - 36.25
    account = told(study(box(**measured(dry=f"{dry} g", in_water=f"{under} g"))))
    drawn = study(box(0.738)).results
    assert account["weight"]["mass_g"] == pytest.approx(51.83, rel=1e-6)
    np.testing.assert_allclose(account["weight"]["centre_mm"], drawn["weight"]["centre_mm"], rtol=1e-6, atol=1e-9)
    np.testing.assert_allclose(
        account["weight"]["inertia_g_mm2"], drawn["weight"]["inertia_g_mm2"], rtol=1e-6, atol=1e-3
    )
    assert account["buoyancy"]["reserve_g"] == pytest.approx(drawn["buoyancy"]["reserve_g"], rel=1e-6)
    (mine,), (theirs,) = account["postures"], drawn["postures"]
    for key in ("nose_up_deg", "lean_deg"):
        assert mine[key] == pytest.approx(theirs[key], abs=1e-4)
        assert abs(mine[key]) > 1
    # What is left in doubt is half of the scale's hundredth, in the same water.
    half = account["buoyancy"]["reserve_high_g"] - account["buoyancy"]["reserve_g"]
    assert half == pytest.approx(0.005, rel=1e-6)


def test_a_larger_copy_is_found_by_its_displacement() -> None:
    # 0.8% longer each way: 36.8709 cm3, 35.8709 of them of 0.72 g/cm3, 25.8271 g; 51.8271 g in all, 37.1209 g of water
    # displaced.
    dry, under = 51.8271, 51.8271 - 37.1209
    account = told(study(box(**measured(dry=f"{dry} g", in_water=f"{under:.4f} g"))))
    assert account["displaced"]["difference_share"] == pytest.approx(37.1209 / 36.25 - 1, rel=1e-3)
    assert account["body"]["volume_mm3"] == pytest.approx(35870.9, rel=1e-4)
    assert account["body"]["density_g_cm3"] == pytest.approx(0.72, rel=1e-3)
    # A size and a skin are told apart by no scale. To first order a percent of size is 3% of volume, and 0.8709 cm3 on
    # 72 cm2 are 0.121 mm.
    likely = {row["what"]: row["change"] for row in account["explanations"] if row["likely"]}
    assert set(likely) == {"size of the body", "skin of the body"}
    assert likely["size of the body"] == pytest.approx(0.8, abs=0.02)
    assert likely["skin of the body"] == pytest.approx(0.8709 / 7.2, rel=1e-3)
    drawn = study(box(scale=1.008)).results["buoyancy"]
    assert account["buoyancy"]["reserve_g"] == pytest.approx(drawn["reserve_g"], abs=1e-3)


def test_a_larger_copy_floats_as_if_drawn_so() -> None:
    # The box alone, 0.8% longer each way: 36.8709 cm3 of 0.72 g/cm3, 26.5470 g, which pulls up by 10.3239 g.
    def alone(scale: float = 1.0, **sections: Any) -> Study:
        slug = insert("slug", shapes.box((0.01, 0.01, 0.001), (0.002, 0.0, -0.008)), 1.5)
        return study(bait(shapes.box(tuple(scale * side for side in SIZE)), slug, density=0.72, **sections))

    slug = 0.1 * (1.5 - 0.72)
    dry, reserve = 26.5470 + slug, 10.3239 - slug
    account = told(alone(**measured(dry=f"{dry:.4f} g", reserve=f"{reserve:.4f} g")))
    mine, theirs = account["postures"][0], alone(1.008).results["postures"][0]
    assert mine["submerged_share"] == pytest.approx(26.5470 / 36.8709 + slug / 36.8709, rel=1e-4)
    assert mine["submerged_share"] == pytest.approx(theirs["submerged_share"], rel=1e-4)
    # Lengths are those drawn: what hangs on them is off by 0.8%.
    assert mine["metacentric_mm"]["least"] == pytest.approx(theirs["metacentric_mm"]["least"], rel=0.012)


def test_dry_alone_leaves_the_choice() -> None:
    account = told(study(box(**measured(dry="51.55 g", step="0.1 g"))))
    assert account["displaced"] is None
    assert account["body"]["density_g_cm3"] == pytest.approx(0.73)
    likely = {row["what"]: row["change"] for row in account["explanations"] if row["likely"]}
    assert likely["density of the body"] == pytest.approx(100 * 0.35 / 25.2)
    # A percent of size is three of what all the box would weigh: the slug does not grow with it.
    assert likely["size of the body"] == pytest.approx(0.35 / 25.92 / 0.03, rel=1e-6)
    assert all(row["left_reserve_g"] is None for row in account["explanations"])
    assert "air bubbles under water" not in {row["what"] for row in account["explanations"]}
    band = account["buoyancy"]["reserve_high_g"] - account["buoyancy"]["reserve_g"]
    assert band == pytest.approx(0.05)


def test_reserve_alone_gives_the_density_that_the_body_has_to_have() -> None:
    # It pulls down by 14.5 g: 36.25 + 14.5 g of mass, 24.75 g of it body.
    account = told(study(box(**measured(reserve="-14.5 g"))))
    assert account["body"]["density_g_cm3"] == pytest.approx(24.75 / 35)
    assert account["weight"]["mass_g"] == pytest.approx(50.75)
    assert account["buoyancy"]["reserve_g"] == pytest.approx(-14.5)
    assert [row["what"] for row in account["rows"]] == ["reserve, g"]


def test_a_coat_by_what_it_added() -> None:
    # 72 cm2 of skin: 0.15 mm of 1.2 g/cm3 are 1.296 g. Body and slug alone 49.2 g; with hook and 1.8 g of coat 53 g.
    account = told(study(box(thick=0.15e-3, **measured(dry="53.0 g", uncoated="49.2 g"))))
    assert account["coat"]["mass_g"] == pytest.approx(1.8)
    assert account["coat"]["predicted_g"] == pytest.approx(1.296)
    assert account["coat"]["thickness_mm"] == pytest.approx(0.15 * 1.8 / 1.296)
    assert account["body"]["density_g_cm3"] == pytest.approx(0.72)
    # It displaces 1.5 cm3 where 1.08 were thought.
    assert account["buoyancy"]["displaced_mm3"] == pytest.approx(36250 + 1500, rel=1e-9)
    assert account["buoyancy"]["reserve_g"] == pytest.approx(37.75 - 53.0)


def test_a_coat_weighed_by_itself() -> None:
    account = told(study(box(thick=0.15e-3, **measured(coat="1.8 g"))))
    assert account["body"] is None
    assert account["weight"]["mass_g"] == pytest.approx(51.2 + 1.8)


def test_weighed_as_foretold() -> None:
    account = told(study(box(**measured(dry="51.2 g"))))
    assert account["words"] == "The copy weighs as predicted, within the scale's step."
    assert account["body"]["difference_share"] == pytest.approx(0.0, abs=1e-12)


def test_a_displacement_that_no_copy_has_is_asked_about() -> None:
    found = study(box(**measured(dry="51.2 g", in_water="25.6 g")))
    assert "odd-weighing" in {finding["code"] for finding in found.results["findings"]}
    assert "odd-weighing" not in {finding["code"] for finding in study(box()).results["findings"]}


@pytest.mark.parametrize(
    ("thick", "weighed", "fault"),
    [
        (None, {"dry": "25 g"}, "what was weighed is less than inserts, hooks and coat together | measured.dry"),
        (None, {"coat": "1 g"}, "a coat was weighed, but the bait file states none | measured.coat"),
        (1e-4, {"dry": "50 g", "uncoated": "48.5 g"}, "body and hooks weigh as much as the coated | measured.uncoated"),
        (None, {"uncoated": "20 g"}, "what was weighed is less than inserts, hooks and coat | measured.uncoated"),
    ],
)
def test_weighings_that_cannot_be(thick: float | None, weighed: dict[str, str], fault: str) -> None:
    what, where = fault.split(" | ")
    with pytest.raises(InputError) as caught:
        study(box(thick=thick, **measured(**weighed)))
    (found,) = caught.value.faults
    assert found.what.startswith(what)
    assert found.where == where


def test_none_weighed_none_told() -> None:
    assert study(box()).results["measured"] is None
