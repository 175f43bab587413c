"""Whole studies of baits whose weight, posture and verdict follow from arithmetic on boxes."""

from __future__ import annotations

import functools
import json
from collections.abc import Iterator, Sequence
from typing import Any

import numpy as np
import pytest
import shapes
from jsonschema import Draft202012Validator
from scipy.spatial.transform import Rotation
from workbench import MM, Insert, bait, balls, coat, hardware, insert, vector, void

from meshlure.bait.composition import compose
from meshlure.errors import InputError
from meshlure.examine import study
from meshlure.geometry.surface import Floats, Surface
from meshlure.results import schema
from meshlure.stock.materials import material

Tree = dict[str, Any]

LENGTH, WIDTH, DEPTH = 80.0, 20.0, 16.0  # mm along x, y, z; nose along -x, back along +z, so left is -y
VOLUME = LENGTH * WIDTH * DEPTH  # mm3
SKIN = 2 * (LENGTH * WIDTH + LENGTH * DEPTH + WIDTH * DEPTH)


def block(size: Sequence[float], centre: Sequence[float] = (0, 0, 0)) -> Surface:
    """Box of a size about a centre, mm."""
    return shapes.box(tuple(vector(*size)), tuple(vector(*centre)))


BODY = block((LENGTH, WIDTH, DEPTH))


def found(*pieces: Insert, body: Surface = BODY, **keys: Any) -> Tree:
    return dict(study(bait(body, *pieces, **keys)).results)


def upright(tree: Tree) -> Tree:
    (posture,) = (p for p in tree["postures"] if p["kind"] == "floating" and p["upright"])
    assert isinstance(posture, dict)
    return posture


def hanging(tree: Tree) -> list[Tree]:
    return [p for p in tree["postures"] if p["kind"] == "hanging"]


def wall_sided_angle(shift: float, height: float, metacentric_radius: float) -> float:
    """Degrees by which a wall-sided body tilts when its centre of gravity moves aside: (GM + BM tan2 / 2) tan = shift.

    The wall-sided formula of ship stability (Atwood's theorem for upright sides; from memory), exact for a box until
    an edge of its deck or bottom meets the water.
    """
    roots = np.roots([metacentric_radius / 2, 0, height, -shift])
    (real,) = roots[np.abs(roots.imag) < 1e-9].real
    return float(np.degrees(np.arctan(real)))


# Weight.


def test_weight_of_a_box() -> None:
    # m/12 (b2 + c2) and so on; the nose is 40 mm before the middle.
    weight, mass = found(density=1.2)["weight"], VOLUME * 1.2e-3
    assert weight["mass_g"] == pytest.approx(mass, rel=1e-12)
    assert weight["from_nose_mm"] == pytest.approx(40, rel=1e-12)
    squares = np.array([LENGTH, WIDTH, DEPTH]) ** 2
    inertia = mass / 12 * (squares.sum() - squares)
    np.testing.assert_allclose(weight["inertia_g_mm2"], np.diag(inertia), rtol=1e-12, atol=1e-9)
    np.testing.assert_allclose(weight["principal_g_mm2"], inertia, rtol=1e-12)
    np.testing.assert_allclose(weight["gyration_mm"], np.sqrt(inertia / mass), rtol=1e-12)
    np.testing.assert_allclose(np.abs(weight["principal_axes"]), np.eye(3), atol=1e-12)


def test_products_of_inertia_carry_a_minus() -> None:
    # A point mass m at (x, 0, z) adds -m x z to Ixz about the origin; about G by Steiner.
    tree = found(hardware=[hardware("shot", 2.0, vector(-30, 0, -6))])
    body, shot = VOLUME * 0.6e-3, 2.0
    assert tree["weight"]["inertia_g_mm2"][0][2] == pytest.approx(-shot * body / (shot + body) * 180, rel=1e-9)


def test_the_table_of_pieces_adds_up() -> None:
    tree = found(
        insert("slug", block((10, 4, 4), (-20, 0, -5)), 11.34),
        void("chamber", block((30, 6, 6), (10, 0, 0))),
        balls=[balls("chamber", 5e-3, 2, 7.81)],
        hardware=[hardware("hook", 0.8, vector(5, 0, -9), 7.85)],
        coat=coat(0.1 * MM, 1.15),
    )
    rows = tree["pieces"]
    assert [row["role"] for row in rows] == ["body", "insert", "void", "hardware", "coat", "ball"]
    mass = sum(row["mass_g"] for row in rows)
    assert tree["weight"]["mass_g"] == pytest.approx(mass, rel=1e-12)
    first = sum(row["mass_g"] * np.array(row["centre_mm"]) for row in rows)
    np.testing.assert_allclose(tree["weight"]["centre_mm"], first / mass, rtol=1e-9, atol=1e-12)


# Floating.


def test_waterline_of_a_coated_box() -> None:
    # L B d + t (L B + 2 (L + B) d) = M / rho, with M = rho_b L B H + rho_c t A.
    long, broad, deep, thick = 60.0, 40.0, 10.0, 0.2
    tree = found(body=block((long, broad, deep)), coat=coat(thick * MM, 1.15))
    area = 2 * (long * broad + long * deep + broad * deep)
    mass = (long * broad * deep * 0.6 + thick * area * 1.15) * 1e-3
    draught = (mass * 1e3 - thick * long * broad) / (long * broad + 2 * thick * (long + broad))
    assert len(tree["postures"]) == 2
    for posture in tree["postures"]:
        assert posture["waterline_mm"] == pytest.approx(draught - deep / 2, rel=1e-9)
        # The coat's own section, thickness times the waterline's length, is part of the waterplane.
        assert posture["waterplane_mm2"] == pytest.approx(long * broad + thick * 2 * (long + broad), rel=1e-9)
    assert tree["buoyancy"]["displaced_mm3"] == pytest.approx(long * broad * deep + thick * area, rel=1e-12)
    assert tree["skin_mm2"] == pytest.approx(area, rel=1e-12)


def test_metacentric_heights_of_a_ballasted_box() -> None:
    # GM = B2 / 12 d + KB - KG across, L2 / 12 d along; a degree is atan(1 mm / GM) per mm of G.
    tree = found(insert("keel", block((40, 4, 2), (0, 0, -6)), 11.34), density=0.4)
    mass = (VOLUME * 0.4 + 320 * (11.34 - 0.4)) * 1e-3
    gravity = -6 * 320 * (11.34 - 0.4) * 1e-3 / mass
    draught = mass * 1e3 / (LENGTH * WIDTH)
    arm = draught / 2 - DEPTH / 2 - gravity
    across, along = WIDTH**2 / 12 / draught + arm, LENGTH**2 / 12 / draught + arm
    posture = upright(tree)
    assert posture["metacentric_mm"]["sideways"] == pytest.approx(across, rel=1e-6)
    assert posture["metacentric_mm"]["fore_aft"] == pytest.approx(along, rel=1e-6)
    assert posture["metacentric_mm"]["least"] == pytest.approx(across, rel=1e-6)
    feels = posture["sensitivity"]
    assert feels["deg_per_mm"] == pytest.approx(np.degrees(np.arctan(1 / along)), rel=1e-6)
    assert feels["lean_deg_per_mm"] == pytest.approx(np.degrees(np.arctan(1 / across)), rel=1e-6)
    assert feels["deg_per_0_1g_10mm"] == pytest.approx(np.degrees(np.arctan(1 / mass / along)), rel=1e-6)
    assert feels["g_per_mm"] == pytest.approx(LENGTH * WIDTH * 1e-3, rel=1e-9)
    assert posture["submerged_share"] == pytest.approx(draught / DEPTH, rel=1e-9)
    assert posture["waterline_mm"] == pytest.approx(draught - DEPTH / 2, rel=1e-9)
    assert (posture["nose_up_deg"], posture["lean_deg"]) == pytest.approx((0, 0), abs=1e-6)


@pytest.mark.parametrize(("aft", "right"), [(3.0, 0.0), (-3.0, 0.0), (0.0, 1.0), (0.0, -1.0)])
def test_signs_and_sizes_of_nose_up_and_lean(aft: float, right: float) -> None:
    # Right is +y here: the nose looks along -x, the back along +z. A slug aft lifts the nose (common practice of the
    # trade), a slug to the right leans it to its right, both positive.
    slug = insert("slug", block((20, 4, 2), (aft, right, -6)), 11.34)
    more = 160 * (11.34 - 0.4) * 1e-3
    mass = VOLUME * 0.4e-3 + more
    gravity = -6 * more / mass
    draught = mass * 1e3 / (LENGTH * WIDTH)
    arm = draught / 2 - DEPTH / 2 - gravity
    tree = found(slug, density=0.4)
    posture, up = upright(tree), np.array(upright(tree)["up"])
    angles = {"nose_up_deg": np.arcsin(-up[0]), "lean_deg": np.arctan2(-up[1], up[2])}
    for key, shift, breadth in (("nose_up_deg", aft, LENGTH), ("lean_deg", right, WIDTH)):
        radius = breadth**2 / 12 / draught
        expected = wall_sided_angle(shift * more / mass, radius + arm, radius)
        assert np.degrees(angles[key]) == pytest.approx(expected, rel=1e-5, abs=1e-6)
        # What is told is the same, in steps of five where a millimetre turns the bait by more than twenty.
        touchy = np.degrees(np.arctan(1 / (radius + arm))) > 20
        assert posture[key] == pytest.approx(5 * round(expected / 5) if touchy else expected, rel=1e-5, abs=1e-6)
    # A box tilts about the middle of its waterplane.
    assert posture["waterline_mm"] == pytest.approx(up[2] * (draught - DEPTH / 2), rel=1e-6)


def test_displaced_mass_equals_the_bait_s_at_every_posture() -> None:
    tree = found(insert("slug", block((20, 4, 2), (8, 2, -6)), 11.34), density=0.5, water=1025.0)
    floating = [p for p in tree["postures"] if p["kind"] == "floating"]
    assert floating
    for posture in floating:
        assert not posture["dry"]
        water = posture["submerged_share"] * tree["buoyancy"]["displaced_mm3"] * 1.025e-3
        assert water == pytest.approx(tree["weight"]["mass_g"], rel=1e-9)
    assert sum(p["share"] for p in floating) == pytest.approx(1, rel=1e-9)


def test_an_eye_above_the_water_is_found_and_left_dry() -> None:
    # A fixed eye of 0.5 g and 2 g/cm3 on the back is lifted by nothing there; a ring below is, in every posture.
    eye = hardware("eye", 0.5, vector(0, 0, 9), 2.0, hangs=False)
    ring = hardware("ring", 0.5, vector(0, 0, -9), 2.0)
    tree = found(insert("keel", block((40, 4, 2), (0, 0, -6)), 11.34), density=0.4, hardware=[eye, ring])
    mass = (VOLUME * 0.4 + 320 * (11.34 - 0.4)) * 1e-3 + 1.0
    posture = upright(tree)
    assert posture["dry"] == ["eye"]
    draught = (mass * 1e3 - 250) / (LENGTH * WIDTH)
    assert posture["waterline_mm"] == pytest.approx(draught - DEPTH / 2, rel=1e-9)
    notes = [f for f in tree["findings"] if f["code"] == "eye-above-water"]
    above = 9 - (draught - DEPTH / 2)
    assert any(f"the eye of 'eye' stands {above:.1f} mm above the water" in note["message"] for note in notes)
    # Wholly under water it displaces again.
    assert tree["buoyancy"]["displaced_mm3"] == pytest.approx(VOLUME + 500, rel=1e-12)


# Sinking.


@pytest.mark.parametrize(("aft", "right"), [(10.0, 0.0), (-10.0, 0.0), (0.0, 3.0), (12.0, -2.0)])
def test_a_sinking_bait_hangs_with_buoyancy_over_gravity(aft: float, right: float) -> None:
    # G below the middle of the box by z, aft by a: tan(nose up) = a / z; tan(lean) = right / z.
    slug = insert("slug", block((20, 6, 4), (aft, right, -5)), 11.34)
    more = 480 * (11.34 - 1.1) * 1e-3
    mass = VOLUME * 1.1e-3 + more
    x, y, z = (offset * more / mass for offset in (aft, right, -5))
    tree = found(slug, density=1.1)
    (posture,) = hanging(tree)
    long = float(np.sqrt(x * x + y * y + z * z))
    assert posture["metacentric_mm"]["least"] == pytest.approx(long, rel=1e-9)
    per_mm = np.degrees(np.arctan(1 / long))
    assert posture["sensitivity"]["deg_per_mm"] == pytest.approx(per_mm, rel=1e-9)
    nose_up, lean = np.degrees(np.arcsin(x / long)), np.degrees(np.arctan2(y, -z))
    if per_mm > 20:
        # Touchy angles come in steps of five.
        assert posture["rounded"]
        nose_up, lean = (5 * round(angle / 5) for angle in (nose_up, lean))
    assert (posture["nose_up_deg"], posture["lean_deg"]) == pytest.approx((nose_up, lean), abs=1e-6)
    assert tree["buoyancy"]["state"] == "sinks"
    assert not [p for p in tree["postures"] if p["kind"] == "floating"]


def test_an_even_body_hangs_as_it_is_put() -> None:
    (posture,) = hanging(found(density=1.2))
    assert (posture["up"], posture["nose_up_deg"], posture["free"]) == (None, None, "both")


def keeled(density: float, within: float | None = None) -> tuple[Tree, float]:
    """Study of the box with a keel of 0.96 g, of a density as a whole, g/cm3; and the mass of its body, g."""
    body = VOLUME * 1e-3 * density - 0.96
    keel = insert("keel", block((40, 4, 2), (0, 0, -6)), 3.0)
    return found(keel, density=body / (VOLUME - 320) * 1e3, within=within), body


@pytest.mark.parametrize(
    ("density", "state", "words", "kinds"),
    [
        (0.990, "floats", "Floats: ", {"floating"}),
        (0.9945, "floats", "Floats, may suspend: ", {"floating"}),
        (0.9979, "floats", "Floats, may suspend or may sink: ", {"floating"}),
        (0.9981, "suspends", "Suspends, may float or may sink: ", {"floating", "hanging"}),
        (1.0019, "suspends", "Suspends, may float or may sink: ", {"hanging"}),
        (1.0021, "sinks", "Sinks, may float or may suspend: ", {"hanging"}),
        (1.0055, "sinks", "Sinks, may suspend: ", {"hanging"}),
        (1.010, "sinks", "Sinks: ", {"hanging"}),
    ],
)
def test_states_and_verdicts_at_their_edges(density: float, state: str, words: str, kinds: set[str]) -> None:
    # Within 0.2% of the displaced mass it suspends; the stated densities of body and keel may each be off by 0.5%.
    tree, body = keeled(density)
    told = tree["buoyancy"]
    assert told["state"] == state
    assert told["verdict"].startswith(words)
    assert told["reserve_g"] == pytest.approx(VOLUME * 1e-3 * (1 - density), rel=1e-6)
    assert told["reserve_high_g"] - told["reserve_g"] == pytest.approx(0.005 * np.hypot(body, 0.96), rel=1e-9)
    assert {p["kind"] for p in tree["postures"]} == kinds


def test_suspends_within_what_the_maker_says() -> None:
    density = 1 - 0.08 / (VOLUME * 1e-3)
    assert keeled(density)[0]["buoyancy"]["state"] == "floats"
    told = keeled(density, within=0.1)[0]["buoyancy"]
    assert (told["state"], told["suspends_within_g"]) == ("suspends", pytest.approx(0.1, rel=1e-12))


def test_the_band_of_the_reserve_by_hand() -> None:
    # Root of squares of: half a percent of each stated density, one of each weighed hook, 0.05 mm of coat. The two
    # hooks have names of their own, so each errs for itself.
    tree = found(
        insert("slug", block((10, 4, 4), (0, 0, -5)), 11.34),
        hardware=[hardware("front", 0.8, vector(-10, 0, -9), 7.85), hardware("rear", 0.7, vector(30, 0, -9))],
        coat=coat(0.2 * MM, 1.15),
    )
    doubts = {
        "density of body": (VOLUME - 160) * 0.6e-3 * 0.005,
        "density of slug": 160 * 11.34e-3 * 0.005,
        # A heavier hook of the same steel is a larger one, and displaces more.
        "mass of front": 0.008 * (1 - 1 / 7.85),
        "mass of rear": 0.007,
        # The coat's own density is stated as well.
        "density of coat": SKIN * 0.2 * 1.15e-3 * 0.005,
        "thickness of the coat": SKIN * 0.05 * 0.15e-3,
    }
    told = {row["what"]: (row["low_g"], row["high_g"]) for row in tree["buoyancy"]["doubts"]}
    assert told.keys() == doubts.keys()
    for what, doubt in doubts.items():
        assert told[what] == pytest.approx((doubt, doubt), rel=1e-9), what
    band = np.sqrt(sum(doubt**2 for doubt in doubts.values()))
    buoyancy = tree["buoyancy"]
    ends = buoyancy["reserve_low_g"], buoyancy["reserve_high_g"]
    assert ends == pytest.approx((buoyancy["reserve_g"] - band, buoyancy["reserve_g"] + band), rel=1e-9)


def test_facets_and_batches_in_the_band() -> None:
    # Equal items err together, and so do pieces of one stock material; the facets' own share is the smooth bait's.
    ball, ends = shapes.sphere(3 * MM, 2), (("a", -20), ("b", 20))
    slugs = [Insert(name, ball.moved(shift=vector(x, 0, -4)), {"material": "lead"}) for name, x in ends]
    hook = {"item": "treble 6", "hangs": True}
    places = [{"name": name, "at": [x, 0, -8], **hook} for name, x in (("front", -10), ("rear", 30))]
    tree = found(*slugs, hardware=places, density=0.3)
    told = {row["what"]: row for row in tree["buoyancy"]["doubts"]}
    lead = material("lead", "")
    volume = sum(row["volume_mm3"] for row in tree["pieces"] if row["material"] == lead.name) * 1e-6
    doubt = told[f"density of {lead.name}"]
    assert doubt["low_g"] == pytest.approx(volume * (lead.high - lead.density), rel=1e-9)
    assert doubt["high_g"] == pytest.approx(volume * (lead.density - lead.low), rel=1e-9)
    one = found(*slugs, hardware=places[:1], density=0.3)
    single = next(row for row in one["buoyancy"]["doubts"] if row["what"] == "mass of treble 6")
    assert told["mass of treble 6"]["low_g"] == pytest.approx(2 * single["low_g"], rel=1e-9)
    exact = 2 * 4 / 3 * np.pi * 27 - volume * 1e6
    assert told["facets"]["low_g"] == pytest.approx(exact * (11.34 - 0.3) * 1e-3, rel=0.05)
    lighter = tree["smooth"]["reserve_g"] - tree["buoyancy"]["reserve_g"]
    assert told["facets"]["low_g"] == pytest.approx(-lighter, rel=1e-9)


# Balls.


def chamber(slope: float = 0.0, kind: str = "sealed") -> Insert:
    """Bore of 40 x 6 x 6 mm, 3 mm below the middle, its nose end lower by a slope in degrees."""
    turn = Rotation.from_euler("y", -slope, degrees=True).as_matrix()
    return void("chamber", block((40, 6, 6)).moved(turn, vector(0, 0, -3)), kind)


BALL = np.pi / 6 * 5**3 * 7.81e-3  # g


def rolled() -> float:
    """Nose-up angle, degrees, of the box with one ball at its tail; at its nose it is as much down."""
    mass = (VOLUME - 1440) * 0.5e-3 + BALL
    gravity = -3 * (BALL - 1440 * 0.5e-3) / mass
    draught = mass * 1e3 / (LENGTH * WIDTH)
    radius = LENGTH**2 / 12 / draught
    return wall_sided_angle(17.5 * BALL / mass, radius + draught / 2 - DEPTH / 2 - gravity, radius)


def test_a_level_bore_is_bistable() -> None:
    tree = found(chamber(), balls=[balls("chamber", 5e-3, 1, 7.81)], density=0.5)
    both = [p for p in tree["postures"] if p["upright"]]
    assert {p["balls"]["chamber"]: p["nose_up_deg"] for p in both} == pytest.approx(
        {"nose": -rolled(), "tail": rolled()}, rel=1e-4
    )
    rows = {row["end"]: row for row in tree["balls"]}
    for end, sign in (("nose", -1), ("tail", 1)):
        assert rows[end]["nose_up_deg"] == pytest.approx(sign * rolled(), rel=1e-4)
        assert rows[end]["centre_mm"][0] == pytest.approx(
            sign * 17.5 * BALL / ((VOLUME - 1440) * 0.5e-3 + BALL), rel=1e-9
        )
        assert rows[end]["stays"]
        assert rows[end]["reserve_g"] == pytest.approx(tree["buoyancy"]["reserve_g"], rel=1e-12)


@pytest.mark.parametrize(("slope", "end"), [(6.0, "nose"), (-6.0, "tail")])
def test_a_steep_bore_holds_its_balls_at_the_lower_end(slope: float, end: str) -> None:
    assert rolled() < 6
    tree = found(chamber(slope), balls=[balls("chamber", 5e-3, 1, 7.81)], density=0.5)
    assert {p["balls"]["chamber"] for p in tree["postures"] if p["upright"]} == {end}
    assert {row["end"]: row["stays"] for row in tree["balls"]} == {"nose": end == "nose", "tail": end == "tail"}
    for posture in tree["postures"]:
        # Wherever balls lie of themselves, that end of the bore is the lower one.
        axis = Rotation.from_euler("y", -slope, degrees=True).apply([-1.0, 0, 0])
        rise = float(axis @ posture["up"])
        assert rise <= 1e-9 if posture["balls"]["chamber"] == "nose" else rise >= -1e-9


def test_a_held_ball_stays_where_the_bait_file_says() -> None:
    tree = found(chamber(6.0), balls=[balls("chamber", 5e-3, 1, 7.81, at="tail")], density=0.5)
    assert {p["balls"]["chamber"] for p in tree["postures"]} == {"tail"}
    assert [row["end"] for row in tree["balls"]] == ["tail"]


def test_balls_in_a_flooded_chamber_displace() -> None:
    one = balls("chamber", 5e-3, 1, 7.81)
    dry, wet = (found(chamber(kind=kind), balls=[one], density=0.5) for kind in ("sealed", "flooded"))
    assert dry["buoyancy"]["displaced_mm3"] == pytest.approx(VOLUME, rel=1e-12)
    assert wet["buoyancy"]["displaced_mm3"] == pytest.approx(VOLUME - 1440 + np.pi / 6 * 125, rel=1e-9)
    assert dry["weight"]["mass_g"] == pytest.approx(wet["weight"]["mass_g"], rel=1e-12)


def test_two_chambers_give_every_combination() -> None:
    bores = [void(name, block((40, 6, 6), (0, y, -3))) for name, y in (("left", -5), ("right", 5))]
    tree = found(*bores, balls=[balls(name, 5e-3, 1, 7.81) for name in ("left", "right")], density=0.5)
    ends = {(p["balls"]["left"], p["balls"]["right"]) for p in tree["postures"] if p["upright"]}
    # Level bores hold both balls at one end; with one at either end the bait lies level, where each may stay as well.
    assert {("nose", "nose"), ("tail", "tail")} <= ends
    rows = {(row["chamber"], row["end"]) for row in tree["balls"]}
    assert rows == {(bore, end) for bore in ("left", "right") for end in ("nose", "tail")}


# Common practice of the trade, no source.


def test_deeper_ballast_rights_better() -> None:
    heights, arms = [], []
    for z in (-2.0, -4.0, -6.0):
        tree = found(insert("keel", block((40, 4, 2), (0, 0, z)), 11.34), density=0.4)
        heights.append(upright(tree)["metacentric_mm"]["sideways"])
        curves = (c for c in tree["righting"] if c["plane"] == "sideways")
        curve = next(c for c in curves if tree["postures"][c["posture"]]["upright"])
        arms.append(curve["arm_mm"][curve["heel_deg"].index(pytest.approx(40))])
    assert heights == sorted(heights)
    assert arms == sorted(arms)


def test_a_round_section_has_less_skin_than_a_flat_one_of_its_volume() -> None:
    area = np.pi * 8**2
    around = shapes.cylinder(8 * MM, LENGTH * MM, 120).moved(Rotation.from_euler("y", 90, degrees=True).as_matrix())
    flat = block((LENGTH, 8, area / 8))
    skins = [compose(bait(body)).skin.painted for body in (around, flat)]
    assert skins[0] < 0.9 * skins[1]


# What must not matter.


@functools.cache
def knobbly(pose: str) -> Tree:
    """Study of a knobbly bait in some pose."""
    body = shapes.lumpy(4, 3)
    middle = body.vertices.mean(axis=0)
    reach = np.ptp(body.vertices, axis=0)
    slug = shapes.box((0.008, 0.004, 0.003)).moved(shapes.turn(7), middle + reach * [0.15, 0.05, -0.2])
    lip = shapes.box((0.012, 0.008, 0.001)).moved(shift=middle - reach * [0.5, 0, 0])
    turn, shift = POSES[pose]
    surfaces = [surface.moved(turn, shift) for surface in (body, slug, lip)]
    if pose == "shuffled":
        surfaces = [shapes.shuffled(surface, 1) for surface in surfaces]
    hook = turn @ middle + shift
    nose, back = (turn @ np.array(v, dtype=float) for v in ([-1, 0, 0], [0, 0, 1]))
    return found(
        insert("slug", surfaces[1], 11.34),
        insert("lip", surfaces[2], 1.2, lip=True),
        body=surfaces[0],
        density=0.55,
        nose=nose.tolist(),
        back=back.tolist(),
        coat=coat(0.1 * MM, 1.15),
        hardware=[hardware("hook", 0.5, hook, 7.85)],
    )


POSES: dict[str, tuple[Floats, Floats]] = {
    "as drawn": (np.eye(3), np.zeros(3)),
    "turned": (shapes.turn(11), np.array([0.2, -0.1, 0.05])),
    "upside down": (np.diag([1.0, -1, -1]), np.zeros(3)),
    "a kilometre off": (np.eye(3), np.array([800.0, -600.0, 10.0])),
    "shuffled": (np.eye(3), np.zeros(3)),
}


@pytest.mark.parametrize("pose", [name for name in POSES if name != "as drawn"])
def test_where_and_how_the_bait_was_drawn_changes_nothing(pose: str) -> None:
    one, other, (turn, shift) = knobbly("as drawn"), knobbly(pose), POSES[pose]
    far = 1e-6 if pose == "a kilometre off" else 1e-9

    def moved(point: Sequence[float]) -> Floats:
        return np.asarray(turn @ np.array(point) + shift * 1e3)

    assert other["weight"]["mass_g"] == pytest.approx(one["weight"]["mass_g"], rel=far)
    np.testing.assert_allclose(other["weight"]["centre_mm"], moved(one["weight"]["centre_mm"]), atol=1e3 * far)
    np.testing.assert_allclose(other["weight"]["principal_g_mm2"], one["weight"]["principal_g_mm2"], rtol=10 * far)
    assert other["weight"]["from_nose_mm"] == pytest.approx(one["weight"]["from_nose_mm"], rel=100 * far)
    for key in ("reserve_g", "displaced_mm3", "reserve_low_g"):
        share = 0.02 if key == "reserve_low_g" else 1e2 * far
        assert other["buoyancy"][key] == pytest.approx(one["buoyancy"][key], rel=share)
    np.testing.assert_allclose(other["buoyancy"]["centre_mm"], moved(one["buoyancy"]["centre_mm"]), atol=1e3 * far)
    assert len(other["postures"]) == len(one["postures"])
    for posture, same in zip(one["postures"], other["postures"], strict=True):
        assert same["words"] == posture["words"]
        np.testing.assert_allclose(same["up"], turn @ posture["up"], atol=1e3 * far)
        assert same["nose_up_deg"] == pytest.approx(posture["nose_up_deg"], abs=1e5 * far)
        assert same["metacentric_mm"]["least"] == pytest.approx(posture["metacentric_mm"]["least"], rel=1e5 * far)
        line = posture["waterline_mm"] + float(np.array(same["up"]) @ shift) * 1e3
        assert same["waterline_mm"] == pytest.approx(line, abs=1e6 * far)
    for view, again in zip(one["areas"], other["areas"], strict=True):
        assert again["area_mm2"] == pytest.approx(view["area_mm2"], rel=1e3 * far)
    headline = [row["drag_n"] for row in one["drag"]]
    # Estimates are read off grids laid over the bait, which lose digits far from the origin.
    share = 0.05 if pose == "a kilometre off" else 1e-3
    np.testing.assert_allclose([row["drag_n"] for row in other["drag"]], headline, rtol=share)


# The tree.


def leaves(node: Any, path: str = "$") -> Iterator[tuple[str, Any]]:
    if isinstance(node, dict):
        for key, inner in node.items():
            assert type(key) is str, path
            yield from leaves(inner, f"{path}.{key}")
    elif isinstance(node, list):
        for inner in node:
            yield from leaves(inner, f"{path}[]")
    else:
        yield path, node


BAITS: dict[str, Tree] = {
    "floating": {},
    "suspending": {"density": 0.902},
    "even": {"density": 1.0},
    "sinking": {"density": 1.3, "hardware": [hardware("hook", 0.5, vector(0, 0, -9), 7.85)]},
    "hollow": {
        "cavities": "flooded",
        "body": shapes.together(BODY, block((40, 10, 8)).turned()),
        "coat": coat(1e-4, 1.2),
    },
}


@pytest.mark.parametrize("kind", BAITS)
def test_the_tree_holds_plain_values_and_keeps_its_contract(kind: str) -> None:
    keel = insert("keel", block((30, 4, 2), (2, 0.5, -6)), 11.34)
    tree = found(*([] if kind == "even" else [keel]), **BAITS[kind])
    odd = {path: type(leaf) for path, leaf in leaves(tree) if type(leaf) not in (float, int, str, bool, type(None))}
    assert not odd
    errors = [error.message for error in Draft202012Validator(schema()).iter_errors(tree)]
    assert not errors
    assert json.loads(json.dumps(tree, allow_nan=False)) == tree


def test_what_leaves_a_mass_undefined_stops_with_everything_told() -> None:
    pieces: list[Insert] = [insert("a", block((10, 4, 4)), 11.34), insert("b", block((4, 4, 10)), 7.9)]
    with pytest.raises(InputError) as raised:
        found(*pieces, insert("c", block((4, 4, 4), (0, 0, 60)), 7.9))
    assert [fault.where for fault in raised.value.faults] == ["b.stl", "c.stl"]
