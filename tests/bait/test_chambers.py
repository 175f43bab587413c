"""Balls in their chamber, against the geometry of bores, domes, cones and boxes."""

from __future__ import annotations

import numpy as np
import pytest
import shapes
from workbench import Table, bait, balls, codes, insert, only, vector, void

from meshlure.bait.chambers import BallRow
from meshlure.bait.composition import compose
from meshlure.errors import InputError
from meshlure.geometry.surface import Surface

BODY = shapes.box((0.09, 0.03, 0.03))
D = 5e-3


def along_x(surface: Surface) -> Surface:
    """A solid about z laid along x, its upper end to -x, the nose."""
    return surface.moved(np.array([[0.0, 0, -1], [0, 1, 0], [1, 0, 0]]))


def bore(length: float = 25.0, width: float = 5.5) -> Surface:
    """Cylinder along the bait of a length and an (inscribed) width in mm."""
    around = 96
    return along_x(shapes.cylinder(width / 2 * 1e-3 / np.cos(np.pi / around), length * 1e-3, around, 3))


def row(chamber: Surface, stated: Table, *more: object, body: Surface = BODY, **keys: object) -> BallRow:
    made = compose(bait(body, void("chamber", chamber), *more, balls=[stated], **keys))  # type: ignore[arg-type]
    (found,) = made.rows
    return found


def run(count: int, diameter: float = D, at: str | None = None) -> Table:
    return balls("chamber", diameter, count, 7.81, at)


@pytest.mark.parametrize("count", [1, 3, 5])
def test_a_row_lies_against_either_end_wall(count: int) -> None:
    found = row(bore(), run(count))
    np.testing.assert_allclose(found.axis, [-1, 0, 0], atol=1e-12)
    steps = D * (np.arange(count) + 0.5)
    np.testing.assert_allclose(found.places["nose"][:, 0], -0.0125 + steps, atol=1e-9)
    np.testing.assert_allclose(found.places["tail"][:, 0], 0.0125 - steps, atol=1e-9)
    np.testing.assert_allclose(found.places["nose"][:, 1:], 0, atol=1e-9)
    mass = count * 7810 * np.pi / 6 * D**3
    for end in ("nose", "tail"):
        assert found.mass(end).amount == pytest.approx(mass, rel=1e-12)
        np.testing.assert_allclose(found.mass(end).centre, found.places[end].mean(axis=0), atol=1e-12)
    # Balls of m d^2/10 each, carried along the row: m d^2 (n^2 - 1)/12 of their common mass.
    across = mass * D**2 * (1 / 10 + (count**2 - 1) / 12)
    np.testing.assert_allclose(np.diag(found.mass("nose").inertia), [mass * D**2 / 10, across, across], rtol=1e-9)


def test_a_sloping_bore_turned_any_way() -> None:
    turn, shift = shapes.turn(5), vector(3, -1, 2)
    nose, back = (turn @ np.array(v, dtype=float) for v in ([-1, 0, 0], [0, 0, 1]))
    found = row(bore().moved(turn, shift), run(2), body=BODY.moved(turn, shift), nose=nose.tolist(), back=back.tolist())
    np.testing.assert_allclose(found.axis, nose, atol=1e-9)
    along = [shift + nose * (0.0125 - D / 2 - k * D) for k in range(2)]
    np.testing.assert_allclose(found.places["nose"], along, atol=1e-8)


def test_the_ball_stops_in_a_dome_where_it_fits() -> None:
    # Ends that are half balls as wide as the bore, 6 mm: a ball of 5 mm touches the dome's top, 2.5 mm from its middle.
    turn = np.linspace(-np.pi / 2, 0, 24)
    r = np.concatenate([3e-3 * np.cos(turn), 3e-3 * np.cos(turn[::-1])])
    z = np.concatenate([-8e-3 + 3e-3 * np.sin(turn), 8e-3 - 3e-3 * np.sin(turn[::-1])])
    r[0] = r[-1] = 0.0
    found = row(along_x(shapes.revolved(r, z, 96)), run(1))
    assert found.places["nose"][0, 0] == pytest.approx(-(11e-3 - D / 2), abs=5e-6)


def test_the_ball_stops_in_a_drill_s_cone_where_it_touches() -> None:
    # Drill point of 118 degrees on a bore of 6 mm: a ball touches the cone at r / sin 59 degrees from its apex.
    half, radius, length = np.radians(59), 3e-3, 20e-3
    depth = radius / np.tan(half)
    profile = shapes.revolved([radius, radius, 0.0], [-length / 2, length / 2, length / 2 + depth], 180)
    found = row(along_x(profile), run(1))
    assert found.places["nose"][0, 0] == pytest.approx(-(length / 2 + depth - D / 2 / np.sin(half)), abs=2e-6)
    assert found.places["tail"][0, 0] == pytest.approx(length / 2 - D / 2, abs=1e-8)


def test_a_wire_across_the_bore_stops_the_row() -> None:
    # A pin of 1 mm across the bore, 4 mm behind the nose wall: balls run from there to the tail wall.
    pin = insert("pin", shapes.box((1e-3, 0.02, 1e-3), tuple(vector(-8, 0, 0))), 7.9)
    found = row(bore(), run(2), pin)
    assert found.places["nose"][0, 0] == pytest.approx(-7.5e-3 + D / 2, abs=1e-8)
    assert found.places["tail"][0, 0] == pytest.approx(12.5e-3 - D / 2, abs=1e-8)


@pytest.mark.parametrize("size", [(6, 6, 6), (6.05, 6, 6)])
def test_a_chamber_without_a_long_axis_is_run_along_the_nose(size: tuple[float, float, float]) -> None:
    turn = shapes.turn(3)
    found = row(shapes.box(tuple(vector(*size))), run(1), nose=[-1, 0, 0])
    np.testing.assert_allclose(np.abs(found.axis), [1, 0, 0], atol=1e-9)
    nose, back = turn @ [-1.0, 0, 0], turn @ [0.0, 0, 1]
    round_one = row(shapes.sphere(3.2e-3, 3), run(1), nose=nose.tolist(), back=back.tolist())
    np.testing.assert_allclose(round_one.axis, nose, atol=1e-9)


def test_a_chamber_across_the_bait_has_its_nose_end_to_the_left() -> None:
    across = bore().moved(np.array([[0.0, -1, 0], [1, 0, 0], [0, 0, 1]]))
    # Nose along -x, back along +z: the bait's left is back x nose, along -y.
    np.testing.assert_allclose(row(across, run(1)).axis, [0, -1, 0], atol=1e-9)


@pytest.mark.parametrize(
    ("chamber", "stated", "allowed"),
    [
        (bore(length=24.9), run(5), r"a row of 24\.9 mm"),
        (bore(width=4.9), run(1), r"a bore of 4\.9 mm"),
        # Its diagonal is 7.8 mm, but a ball sees the sides.
        (shapes.box((25e-3, 5.5e-3, 5.5e-3)).moved(shapes.turn(2)), run(1, 6e-3), r"a bore of 5\.5 mm"),
        (shapes.box((25e-3, 5.5e-3, 3e-3)), run(1), r"a bore of 3 mm"),
    ],
)
def test_balls_that_do_not_fit_are_refused(chamber: Surface, stated: Table, allowed: str) -> None:
    with pytest.raises(InputError, match=rf"do not fit into 'chamber'(.|\n)*allowed: {allowed}(.|\n)*next: "):
        row(chamber, stated)


def test_a_slug_in_the_middle_of_the_chamber_leaves_no_room() -> None:
    slug = insert("slug", shapes.box((2e-3, 2e-3, 2e-3)), 11.34)
    with pytest.raises(InputError, match="something solid lies in the chamber's middle"):
        row(bore(), run(1), slug)


def test_every_row_that_does_not_fit_is_told() -> None:
    pieces = [void(name, bore().moved(shift=vector(0, 0, z))) for name, z in (("upper", 7), ("lower", -7))]
    stated = [balls(name, 6e-3, 1, 7.81) for name in ("upper", "lower")]
    with pytest.raises(InputError) as raised:
        compose(bait(BODY, *pieces, balls=stated))
    assert [fault.where for fault in raised.value.faults] == ["balls in 'upper'", "balls in 'lower'"]


def test_as_many_as_fit_exactly_are_taken() -> None:
    assert len(row(bore(length=25.0), run(5)).places["nose"]) == 5


def test_a_tight_bore_is_told() -> None:
    made = compose(bait(BODY, void("chamber", bore(width=5.05)), balls=[run(1)]))
    assert "0.05 mm of play" in only(made.findings, "balls-tight").message
    assert "balls-tight" not in codes(compose(bait(BODY, void("chamber", bore()), balls=[run(1)])).findings)


@pytest.mark.parametrize(("kind", "flooded"), [("sealed", False), ("flooded", True)])
def test_balls_displace_where_their_chamber_floods(kind: str, flooded: bool) -> None:
    made = compose(bait(BODY, void("chamber", bore(), kind), balls=[run(1)]))
    assert made.rows[0].flooded is flooded
