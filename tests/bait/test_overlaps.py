"""Inserts and hollows that share space: who weighs there, by volumes of boxes."""

from __future__ import annotations

import pytest
import shapes
from workbench import Insert, bait, codes, insert, only, vector, void

from meshlure.bait.composition import Composition, compose
from meshlure.findings import Level
from meshlure.geometry.surface import Surface

BODY = shapes.box((0.08, 0.016, 0.02))
WHOLE = 25.6e-6


def block(size: tuple[float, float, float], centre: tuple[float, float, float] = (0, 0, 0)) -> Surface:
    return shapes.box(tuple(vector(*size)), tuple(vector(*centre)))


def made(*pieces: Insert, body: Surface = BODY, cavities: str = "sealed") -> Composition:
    return compose(bait(body, *pieces, cavities=cavities))


def volumes(composition: Composition) -> dict[str, float]:
    """mm3 by piece."""
    return {part.name: part.volume * 1e9 for part in composition.parts}


def test_an_unsaid_overlap_stops_with_its_volume_and_place() -> None:
    found = made(insert("slug", block((10, 4, 6)), 11.34), insert("wire", block((40, 1, 1), (0, 0, 0)), 7.9))
    fault = only(found.findings, "inserts-overlap")
    assert fault.stops
    assert fault.level is Level.FAULT
    assert "'wire' and 'slug' share 10 mm3 at (0.0, 0.0, 0.0) mm" in fault.message
    assert fault.where[0] == pytest.approx((0, 0, 0), abs=1e-9)
    assert 'replaces = ["slug"]' in fault.advice


def test_every_overlap_is_told() -> None:
    found = made(*(insert(name, block((10, 4, 6), (x, 0, 0)), 11.34) for name, x in (("a", 0), ("b", 5), ("c", 8))))
    assert [finding.code for finding in found.findings] == ["inserts-overlap"] * 3


def test_replaces_gives_the_space_to_the_later_one() -> None:
    slug = insert("slug", block((10, 4, 6)), 11.34)
    wire = insert("wire", block((40, 1, 1)), 7.9, replaces=["slug"])
    found = made(slug, wire)
    assert volumes(found) == pytest.approx({"body": 25600 - 230 - 40, "slug": 230, "wire": 40}, rel=1e-9)
    mass = (25330 * 0.6 + 230 * 11.34 + 40 * 7.9) * 1e-6
    assert found.still_mass.amount == pytest.approx(mass, rel=1e-9)
    assert not codes(found.findings)


def test_what_was_given_away_before_is_no_overlap() -> None:
    # The pin lies in the tube that took its space from the slug: it need not name the slug as well.
    slug = insert("slug", block((10, 6, 6)), 11.34)
    tube = insert("tube", block((12, 3, 3)), 8.5, replaces=["slug"])
    pin = insert("pin", block((14, 1, 1)), 7.9, replaces=["tube"])
    found = made(slug, tube, pin)
    assert not codes(found.findings)
    assert volumes(found) == pytest.approx(
        {"body": 25600 - 360 - 18 - 2, "slug": 360 - 90, "tube": 108 - 12, "pin": 14}, rel=1e-9
    )


def test_an_insert_that_is_replaced_wholly_is_told() -> None:
    found = made(insert("bead", block((2, 2, 2)), 2.5), insert("slug", block((6, 6, 6)), 11.34, replaces=["bead"]))
    assert only(found.findings, "nothing-left").piece == "bead"
    assert found.still_mass.amount == pytest.approx((25600 - 216) * 0.6e-6 + 216 * 11.34e-6, rel=1e-9)


def test_faces_that_only_touch_are_no_overlap() -> None:
    found = made(insert("a", block((4, 4, 4), (-2, 0, 0)), 11.34), insert("b", block((4, 4, 4), (2, 0, 0)), 7.9))
    assert not codes(found.findings)
    assert volumes(found) == pytest.approx({"body": 25600 - 128, "a": 64, "b": 64}, rel=1e-9)


def test_a_void_that_comes_after_the_insert_round_it_is_hollowed_out() -> None:
    found = made(insert("barrel", block((12, 6, 6)), 8.5), void("bore", block((10, 4, 4))))
    assert volumes(found) == pytest.approx({"body": 25600 - 432, "barrel": 432 - 160, "bore": 160}, rel=1e-9)
    note = only(found.findings, "hollowed-out")
    assert note.level is Level.NOTE
    assert "'bore' lies wholly inside 'barrel', 160 mm3" in note.message


def test_a_void_can_say_what_it_is_drilled_through() -> None:
    found = made(insert("barrel", block((12, 6, 6)), 8.5), void("bore", block((20, 4, 4)), replaces=["barrel"]))
    assert volumes(found) == pytest.approx({"body": 25600 - 432 - 128, "barrel": 432 - 192, "bore": 320}, rel=1e-9)
    assert not codes(found.findings)


def test_a_void_before_the_insert_round_it_is_filled() -> None:
    found = made(void("bore", block((10, 4, 4))), insert("barrel", block((12, 6, 6)), 8.5))
    assert volumes(found) == pytest.approx({"body": 25600 - 432, "bore": 0, "barrel": 432}, rel=1e-9, abs=1e-9)
    warning = only(found.findings, "hollow-filled")
    assert warning.level is Level.WARNING
    assert "'bore' is filled: 'barrel' takes all of its 160 mm3" in warning.message


def test_a_wire_through_a_chamber_stays_whole() -> None:
    found = made(insert("wire", block((40, 1, 1)), 7.9), void("chamber", block((20, 6, 6))))
    assert volumes(found) == pytest.approx({"body": 25600 - 720 - 20, "wire": 40, "chamber": 700}, rel=1e-9)
    assert not codes(found.findings)


def test_a_pocket_filled_to_its_walls_is_a_note() -> None:
    pocketed = shapes.together(BODY, block((10, 4, 6)).turned())
    found = made(insert("slug", block((10, 4, 6)), 11.34), body=pocketed)
    assert only(found.findings, "hollow-filled").level is Level.NOTE
    assert volumes(found) == pytest.approx({"body": 25600 - 240, "slug": 240, "body cavity": 0}, rel=1e-9, abs=1e-9)


@pytest.mark.parametrize("other", [block((10, 4, 4), (9, 0, 0)), block((10, 4, 4), (10, 0, 0))])
def test_a_sealed_void_that_opens_into_a_flooded_one_floods(other: Surface) -> None:
    # Overlapping by a millimetre, or sharing a wall of no thickness.
    found = made(void("chamber", other), void("bore", block((10, 4, 4)), "flooded"))
    fault = only(found.findings, "sealed-void-floods")
    assert (fault.piece, fault.level, fault.stops) == ("chamber", Level.FAULT, False)
    wet = [found.parts[1].volume, found.parts[2].volume]
    assert shapes.as_trimesh(found.skin.surface).volume == pytest.approx(WHOLE - sum(wet), rel=1e-9)


def test_a_wall_keeps_a_sealed_void_dry() -> None:
    found = made(void("chamber", block((10, 4, 4), (10.5, 0, 0))), void("bore", block((10, 4, 4)), "flooded"))
    assert not codes(found.findings)
    assert shapes.as_trimesh(found.skin.surface).volume == pytest.approx(WHOLE - 160e-9, rel=1e-9)


def test_a_plug_between_two_voids_keeps_one_dry() -> None:
    pieces = [void("chamber", block((10, 4, 4), (9, 0, 0))), void("bore", block((10, 4, 4)), "flooded")]
    found = made(*pieces, insert("plug", block((2, 4, 4), (4.5, 0, 0)), 1.2))
    assert not codes(found.findings)
    # Bore of 10 mm less the plug's 1.5 mm in it.
    assert shapes.as_trimesh(found.skin.surface).volume == pytest.approx(WHOLE - 8.5 * 16e-9, rel=1e-9)


def test_flooding_goes_on_from_void_to_void() -> None:
    row = [void(f"chamber {n}", block((10, 4, 4), (9.0 * n, 0, 0))) for n in (1, 2)]
    found = made(*row, void("bore", block((10, 4, 4)), "flooded"))
    assert [f.piece for f in found.findings] == ["chamber 1", "chamber 2"]
    assert shapes.as_trimesh(found.skin.surface).volume == pytest.approx(WHOLE - 28 * 16e-9, rel=1e-9)


def test_an_insert_s_own_cavity() -> None:
    hollow = shapes.together(block((12, 6, 6)), block((10, 4, 4)).turned())
    found = made(insert("barrel", hollow, 8.5))
    assert volumes(found) == pytest.approx({"body": 25600 - 432, "barrel": 272, "barrel cavity": 160}, rel=1e-9)
    flooded = made(insert("barrel", hollow, 8.5, cavities="flooded"))
    assert shapes.as_trimesh(flooded.skin.surface).volume == pytest.approx(WHOLE - 160e-9, rel=1e-9)
