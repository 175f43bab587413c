"""The error budget against closed forms, against the bait put together anew, and its draws against the linear law."""

from __future__ import annotations

from typing import Any

import numpy as np
import pytest
import shapes
from scipy.optimize import brentq
from scipy.special import ellipeinc, ellipkinc
from workbench import bait, coat, hardware, insert, vector

from meshlure.bait.composition import compose, weighed
from meshlure.bait.pieces import Bait
from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.surface import Surface
from meshlure.physics.budget import Budget, Extent, Row, budget
from meshlure.physics.buoyancy import Reserve, doubts, reserve
from meshlure.physics.draws import COUNT
from meshlure.physics.repose import Dangle, Repose, Vessel
from meshlure.physics.stance import Stance
from meshlure.posing import pose
from meshlure.results import budget as tree

GRAM = 1e-3
FISH = (0.05, 0.008, 0.011)
"""m. Half axes of an ellipsoid of 100 x 16 x 22 mm: 18.431 cm3."""


def vessel_of(one: Bait) -> Vessel:
    composition = compose(one)
    skin = composition.skin
    index = BlockIndex.build(skin.surface, skin.thickness)
    return Vessel(composition, index, one.hardware, one.frame, one.water.density)


def spent(one: Bait) -> tuple[Budget, Reserve, Repose | Dangle]:
    vessel = vessel_of(one)
    main = pose(vessel).main
    parts = weighed(vessel.composition, main.ends)
    mass, hull = vessel.composition.mass(main.ends), vessel.hull(main.ends)
    facets, painted = vessel.composition.deficit.reserve(vessel.water), vessel.composition.skin.painted
    doubted = doubts(parts, facets, one.hardware, one.coat, painted, vessel.water)
    held = reserve(mass.amount, hull.volume, vessel.water, None, doubted)
    dry = main.dry if isinstance(main, Repose) else ()
    return budget(one, parts, vessel.composition.skin, held, Stance.of(vessel, main), dry), held, main


def row(found: Budget, what: str, change: str = "") -> Row:
    (only,) = [r for r in found.rows if what in r.whatif.what and r.whatif.change.startswith(change)]
    return only


def ellipsoid_area(a: float, b: float, c: float) -> float:
    """Of half axes a >= b >= c, by Legendre's formula with incomplete elliptic integrals (DLMF 19.33.2)."""
    angle = np.arccos(c / a)
    k2 = a**2 * (b**2 - c**2) / (b**2 * (a**2 - c**2))
    part = ellipeinc(angle, k2) * np.sin(angle) ** 2 + ellipkinc(angle, k2) * np.cos(angle) ** 2
    return float(2 * np.pi * (c**2 + a * b / np.sin(angle) * part))


def test_reserve_of_an_ellipsoid_by_hand() -> None:
    # 15 degrees fresh: 999.10 kg/m3; 4 and 30 degrees fresh: 999.97 and 995.65; sea of practical salinity 35: 1025.97,
    # which is 35.165 g/kg, and 0.77 kg/m3 less for every g/kg (UNESCO Technical Papers in Marine Science 44, EOS-80).
    volume, area = np.pi / 6 * 0.1 * 0.016 * 0.022, ellipsoid_area(0.05, 0.011, 0.008)
    one = bait(shapes.ellipsoid(FISH, 4), density=0.75, water=999.10)
    found, _, _ = spent(one)
    body, water = 750.0, 999.10
    for what, change, grams in (
        ("size of body", "+1", volume * (1.01**3 - 1) * (water - body) / GRAM),
        ("skin of the body", "+0.1 mm", area * 1e-4 * (water - body) / GRAM),
        ("sea water", "at 15", volume * (1025.84 - 999.10) / GRAM),
        ("warmed", "4 to 30", volume * (995.65 - 999.97) / GRAM),
        ("density of the body", "-0.5", volume * body * 0.005 / GRAM),
        ("density of the body", "+0.5", -volume * body * 0.005 / GRAM),
        ("bubble", "5 mm", np.pi / 6 * 0.005**3 * water / GRAM),
    ):
        assert row(found, what, change).reserve / GRAM == pytest.approx(grams, rel=4e-3, abs=1e-4), what
    at_its_mass = [r.reserve / GRAM for r in found.rows if r.whatif.what.startswith("the same")]
    assert at_its_mass == pytest.approx([volume * 0.030301 * water / GRAM, area * 1e-4 * water / GRAM], rel=4e-3)
    # The figures that the trade works with for such a body: 0.55 g, 0.48 g.
    assert at_its_mass == pytest.approx([0.55, 0.48], abs=0.01)


BOX = (0.08, 0.03, 0.016)


def test_lean_of_a_box_by_the_wall_sided_formula() -> None:
    # A box whose sides stay upright where the water meets them heels by GM t + BM t^3/2 = d for its centre of gravity
    # moved sideways by d, t the tangent of the heel (Rawson and Tupper, Basic Ship Theory, wall-sided formula; the
    # formula from memory).
    length, beam, depth = BOX
    one = bait(shapes.box(BOX), insert("slug", shapes.box((0.01, 0.006, 0.004), (0, 0, -0.005)), 11.34), density=0.5)
    found, _, main = spent(one)
    assert isinstance(main, Repose)
    slug = 10 * 6 * 4 * 1e-9
    mass = length * beam * depth * 500 + slug * (11340 - 500)
    draught = mass / 1000 / (length * beam)
    gravity = (slug * (11340 - 500) * -0.005) / mass
    bm = beam**2 / (12 * draught)
    gm = -depth / 2 + draught / 2 + bm - gravity
    shift = slug * (11340 - 500) * 1e-3 / mass
    tangent = brentq(lambda t: gm * t + bm * t**3 / 2 - shift, 0, 1)
    # Moved to its left, it leans to its left: negative.
    lean = row(found, "place of 'slug'", "1 mm to its left").lean
    assert lean == pytest.approx(-np.arctan(tangent), rel=1e-3)
    assert tangent > 0.02


def lump(**more: Any) -> Bait:
    """A floating bait of everything, without a plane of symmetry."""
    keys: dict[str, Any] = {
        "hardware": [hardware("front", 0.76, vector(-15, 0, -9), 7.85), hardware("rear", 0.76, vector(38, 0, 2), 7.85)],
        "coat": coat(0.15e-3, 1.15),
        "density": 0.62,
    } | more
    body = shapes.ellipsoid((0.04, 0.008, 0.011), 3)
    bent = Surface(body.vertices + np.outer(body.vertices[:, 0] ** 2, [0, 0.6, 1.5]), body.faces)
    slug = insert("slug", shapes.box((0.012, 0.006, 0.004), (-0.004, 0.001, -0.005)), keys.pop("slug", 11.34))
    return bait(bent, slug, **keys)


def posture(one: Bait, up: Any) -> tuple[float, float]:
    """Nose up and lean, degrees, of a bait put together anew and put to rest on its full mesh."""
    vessel = vessel_of(one)
    rest = vessel.reposed({}, up)
    assert rest is not None
    found = rest.rest.state.up
    frame = one.frame
    return (
        float(np.degrees(np.arcsin(found @ frame.nose))),
        float(np.degrees(np.arctan2(found @ frame.side, found @ frame.back))),
    )


HEAVY = [hardware("front", 0.76 * 1.01, vector(-15, 0, -9), 7.85), hardware("rear", 0.76, vector(38, 0, 2), 7.85)]


def test_rows_and_doubts_against_the_bait_put_together_anew() -> None:
    one = lump()
    found, _, main = spent(one)
    assert isinstance(main, Repose)
    up = main.rest.state.up
    nose_up, lean = posture(one, up)
    assert found.nose_up is not None
    assert found.lean is not None
    assert (np.radians(nose_up), np.radians(lean)) == pytest.approx((found.nose_up, found.lean), abs=2e-5)
    ends = {doubt.what: extent for doubt, extent in found.doubts}
    tilts = []
    changed: tuple[tuple[dict[str, Any], Row | Extent], ...] = (
        ({"coat": coat(0.20e-3, 1.15)}, row(found, "thickness", "+0.05")),
        ({"coat": coat(0.10e-3, 1.15)}, row(found, "thickness", "-0.05")),
        ({"density": 0.62 * 0.995}, row(found, "density of the body", "-0.5")),
        ({"hardware": HEAVY}, ends["mass of front"]),
        ({"slug": 11.34 * 1.005}, ends["density of slug"]),
    )
    for change, told in changed:
        there = posture(lump(**change), up)
        tilt, roll = there[0] - nose_up, there[1] - lean
        tilts.append(abs(tilt))
        if isinstance(told, Row):
            assert told.nose_up is not None
            assert told.lean is not None
            assert np.degrees(told.nose_up) == pytest.approx(tilt, abs=7e-3), change
            assert np.degrees(told.lean) == pytest.approx(roll, abs=7e-3), change
        else:
            # The heavier end moves the nose this way; the lighter one the other way, as far.
            end = told.nose_up_high if tilt > 0 else told.nose_up_low
            assert end is not None
            assert np.degrees(end) == pytest.approx(abs(tilt), abs=7e-3), change
    assert min(tilts) > 8e-3


def test_a_bait_that_hangs_turns_as_its_centres_say() -> None:
    # Sinking box, slug under its middle: centre of buoyancy in the middle, centre of gravity h below it. The slug moved
    # 1 mm aft moves it by x, and the nose rises by atan(x/h).
    slug = 10 * 6 * 4 * 1e-9
    one = bait(shapes.box(BOX), insert("slug", shapes.box((0.01, 0.006, 0.004), (0, 0, -0.005)), 11.34), density=1.05)
    found, _, main = spent(one)
    assert isinstance(main, Dangle)
    net = slug * (11340 - 1050)
    told = row(found, "place of 'slug'", "1 mm aft").nose_up
    assert told == pytest.approx(np.arctan(net * 1e-3 / (net * 5e-3)), rel=1e-9)
    # Places: half a millimetre fore-aft, three tenths sideways, of two deviations each.
    assert found.band.nose_up_low == pytest.approx(np.arctan(0.1), rel=1e-6)
    assert found.band.lean_high == pytest.approx(np.arctan(0.06), rel=1e-6)
    assert found.stance.miss == 0


def test_a_fatter_flank_leans_the_bait_as_its_weight_and_lift_say() -> None:
    # The sinking box again, bare: 0.05 mm of its own stuff more on the left flank and less on the right one move mass
    # and displacement by 0.1 mm of a flank over half the beam; the bait leans by atan((yB - yG)/h).
    length, beam, depth = BOX
    one = bait(shapes.box(BOX), insert("slug", shapes.box((0.01, 0.006, 0.004), (0, 0, -0.005)), 11.34), density=1.05)
    found, _, _ = spent(one)
    slug = 10 * 6 * 4 * 1e-9 * (11340 - 1050)
    mass, volume = length * beam * depth * 1050 + slug, length * beam * depth
    layer = 2 * 0.05e-3 * length * depth * beam / 2
    height = slug * 0.005 / mass
    # More weight than lift on the left: it leans to the left, negative.
    wanted = np.arctan((layer / volume - layer * 1050 / mass) / height)
    assert row(found, "left flank").lean == pytest.approx(wanted, rel=1e-9)
    assert wanted != 0


def test_draws_follow_the_linear_law_on_a_box() -> None:
    # Body of a stated density (0.5% as two deviations) and one weighed hook (1%, no displacement): the reserve is
    # normal, its deviation half the root of the squares. Errors of a percentile of 10,000 draws: sqrt(p (1 - p)/n) over
    # the density there, 0.027 deviations at 2.5%.
    one = bait(shapes.box(BOX), density=0.6, hardware=[hardware("hook", 2.0, vector(0, 0, -8))])
    found, held, _ = spent(one)
    mass = 0.08 * 0.03 * 0.016 * 600
    deviation = np.hypot(mass * 0.005, 0.02 * GRAM) / 2
    assert held.reserve - held.low == pytest.approx(2 * deviation, rel=1e-9)
    middle = 0.08 * 0.03 * 0.016 * 1000 - mass - 2 * GRAM
    percentiles = found.draws.percentiles(found.draws.reserve)
    assert percentiles is not None
    wanted = middle + deviation * np.array([-1.95996, -0.99446, 0.0, 0.99446, 1.95996])
    np.testing.assert_allclose(percentiles, wanted, atol=4 * 0.027 * deviation)
    assert np.std(found.draws.reserve) == pytest.approx(deviation, rel=4 / np.sqrt(2 * COUNT))
    # The other way: what the lot says of a copy is what its own mass says.
    assert held.low == pytest.approx(middle - 2 * deviation, rel=1e-9)


def test_nose_angles_of_the_draws_follow_the_slug() -> None:
    # What hangs: tan of the nose's angle is the slug's way over its depth, normal with half of 0.5 mm over 5 mm.
    one = bait(shapes.box(BOX), insert("slug", shapes.box((0.01, 0.006, 0.004), (0, 0, -0.005)), 11.34), density=1.05)
    found, _, _ = spent(one)
    assert np.std(np.tan(found.draws.nose_up)) == pytest.approx(0.05, rel=4 / np.sqrt(2 * COUNT))


def test_no_copy_has_less_than_no_coat() -> None:
    one = bait(shapes.box(BOX), density=0.6, coat=coat(0.02e-3, 1.15))
    found, _, _ = spent(one)
    (thickness,) = [doubt for doubt, _ in found.doubts if "thickness" in doubt.what]
    assert thickness.most[0] == np.inf
    assert thickness.most[1] == pytest.approx(1.0)
    # Lightest copy: without coat, and three or four deviations lighter in its body and in its coat's density.
    bare = 0.08 * 0.03 * 0.016 * 1000 - 0.08 * 0.03 * 0.016 * 600
    assert found.draws.reserve.max() < bare + 4.5 / 2 * 0.005 * 0.08 * 0.03 * 0.016 * 600


@pytest.mark.parametrize(
    ("limits", "share"),
    [
        ({"reserve": ["5 g", "15 g"]}, 1.0),
        ({"reserve": ["13.36 g", "15 g"]}, 0.5),
        ({"reserve": ["14 g", "15 g"]}, 0.0),
        ({"reserve": ["5 g", "15 g"], "nose_up": ["10 deg", "20 deg"]}, 0.0),
        (None, None),
    ],
)
def test_share_of_copies_that_pass(limits: Any, share: float | None) -> None:
    # The box of 38.4 cm3 and 23.04 g with its hook of 2 g: 13.36 g in reserve, so half of the copies have more.
    sections = {} if limits is None else {"limits": limits}
    one = bait(shapes.box(BOX), density=0.6, hardware=[hardware("hook", 2.0, vector(0, 0, -8))], **sections)
    found, held, _ = spent(one)
    told = tree.budget(found, held, one.plan.limits, None)["monte_carlo"]
    assert told["pass_share"] == (None if share is None else pytest.approx(share, abs=0.02))
    assert told["floats_share"] == 1.0
    assert [entry["what"] for entry in told["limits"]] == [name.replace("_", " ") for name in limits or {}]


def test_a_free_angle_is_not_told() -> None:
    one = bait(shapes.box(BOX), density=0.6, limits={"nose_up": ["-5 deg", "5 deg"]})
    found, held, _ = spent(one)
    told = tree.budget(found, held, one.plan.limits, "nose_up")
    assert told["monte_carlo"]["pass_share"] is None
    assert told["band"]["nose_up_low_deg"] is None
    assert all(entry["nose_up_deg"] is None for entry in told["rows"])
    assert told["band"]["lean_low_deg"] is not None


def test_hooks_of_the_stock_go_one_size_up() -> None:
    # Trebles 6 and 4 of the stock: 0.75 and 1.10 g in the middle of their ranges; a weighed one grows in proportion.
    hooks = [
        {"name": "front", "item": "treble 6", "at": [-15, 0, -9], "hangs": True},
        {"name": "rear", "item": "treble 6", "mass": "0.9 g", "at": [38, 0, 2], "hangs": True},
        {"name": "ring", "item": "split ring 3", "at": [38, 0, 2], "hangs": True},
    ]
    found, _, _ = spent(bait(shapes.ellipsoid(FISH, 3), density=0.7, hardware=hooks))
    up = (0.75 + 0.9) * (1.1 / 0.75 - 1)
    # Carbon steel of the stock, 7.85 g/cm3: of each gram 0.8726 g pull down.
    assert row(found, "one size up").reserve / GRAM == pytest.approx(-up * (1 - 1 / 7.85), rel=1e-6)
    assert row(found, "one size up").whatif.change == f"{up:+.2f} g"
