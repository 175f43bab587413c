"""Flight of whole bodies: trims, swings, verdicts, distances, and the practice of the trade."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from scipy.integrate import solve_ivp
from shapes import box, turn
from winged import AIR, FRAME, Winged, hook, spheroid, turned

from meshlure.bait.pieces import Frame
from meshlure.geometry.moments import Moments
from meshlure.geometry.surface import Floats, Surface
from meshlure.physics.flight import ANGLES, Air, Flight, distances, fly, moment_curves
from meshlure.physics.loads import Glider, Loads
from meshlure.physics.trajectory import Throw, trajectory

LENGTH, MASS, SPEED = 0.10, 0.015, 25.0
BAND = {"nose": (0.6, 1.6), "tail": (0.6, 1.6)}
PRESSURE = AIR[0] * SPEED**2 / 2


def air(pull: float = 0.0, tie: Floats | None = None) -> Air:
    return Air(AIR[0], Throw(SPEED, math.radians(40), 2.0, pull), tie)


def drop(z: Floats) -> Floats:
    """Radius of a teardrop 100 mm long, its round end at the tail, where z is 0: a half circle, then a cone."""
    r = 0.01
    return np.asarray(np.where(z < r, np.sqrt(np.maximum(r**2 - (z - r) ** 2, 0)), r * (LENGTH - z) / (LENGTH - r)))


DROP = Winged(turned(drop, LENGTH))
PLAIN = Winged(spheroid(LENGTH, 0.018))


def flown(body: Winged, mass: Moments, around: Air, end: str | None = None) -> Flight:
    return fly(body.wings(SPEED), mass, around, BAND, end)


def test_a_drag_behind_the_weight_swings_like_a_pendulum() -> None:
    # A streamer of drag area S a lever l behind the centre of gravity, and no body: M = q S l sin a, so that the
    # frequency of small swings is sqrt(q S l/I)/2 pi, and a trim lies at the end alone.
    streamer, lever = 2e-4, 0.05
    wings = _bare(streamer, lever)
    mass = PLAIN.weighed(MASS)
    inertia = float(FRAME.side @ mass.inertia @ FRAME.side)
    found = fly(wings, mass, air(), BAND)
    assert (found.bearing.end, found.bearing.verdict) == ("nose", "steady")
    assert found.swing_hz == pytest.approx(math.sqrt(PRESSURE * streamer * lever / inertia) / (2 * math.pi), rel=1e-3)
    assert found.drag_area == pytest.approx(streamer, rel=1e-6)
    # The whole force acts in the streamer, 15 degrees off as at any angle.
    assert found.pressure_margin == pytest.approx(lever, rel=1e-9)


class _Streamer(Glider):
    """No body at all: the hooks alone."""

    def _body(self, u: Floats) -> Loads:
        return Loads(np.zeros_like(u), np.zeros_like(u))


def _bare(area: float, lever: float) -> Glider:
    place = PLAIN.bulk.centre - lever * FRAME.nose
    wings = Winged(PLAIN.surface, [hook("streamer", area, place)]).wings()
    return _Streamer(**{name: getattr(wings, name) for name in wings.__dataclass_fields__})


@pytest.mark.parametrize("tail", [6e-4, 1e-3])
def test_swings_agree_with_a_motion_followed_in_time(tail: float) -> None:
    # I d2a/dt2 = -M(a) followed with scipy from a fiftieth of a degree off the trim, timed between crossings.
    body = Winged(PLAIN.surface, [hook("tail", tail, (0.0, 0.0, -0.002))])
    mass, wings, around = body.weighed(MASS, ahead=0.025), body.wings(SPEED), air()
    found = fly(wings, mass, around, BAND, "nose")
    assert found.swing_hz is not None
    rates = []
    for curve, lateral in zip(moment_curves(wings, mass, around), (FRAME.back, FRAME.side), strict=True):
        trim = curve.nearest_trim("nose")
        assert trim is not None

        def change(_: float, state: Floats, hinge: Floats, lateral: Floats, inertia: float) -> list[float]:
            towards = math.cos(state[0]) * FRAME.nose + math.sin(state[0]) * lateral
            moment = PRESSURE * float(wings.loads(towards).about(mass.centre)[0] @ hinge)
            return [state[1], -moment / inertia]

        def crosses(_: float, state: Floats, *__: object, at: float = trim.angle) -> float:
            return float(state[0] - at)

        hinge = np.cross(FRAME.nose, lateral)
        path = solve_ivp(
            change,
            (0, 1.6 / found.swing_hz),
            [trim.angle + 3e-4, 0.0],
            events=crosses,
            rtol=1e-5,
            atol=1e-9,
            args=(hinge, lateral, curve.inertia),
        )
        assert path.t_events is not None
        times = path.t_events[0]
        rates.append((len(times) - 1) / 2 / (times[-1] - times[0]))
    # The slope is read over a degree to either side, in which the crossflow already stiffens it a little.
    assert found.swing_hz == pytest.approx(min(rates), rel=0.02)


def test_a_round_baits_trim_lies_on_a_cone() -> None:
    # A body of revolution trims at one angle in every plane: taken together it is still that angle, not the sum.
    mass = PLAIN.weighed(MASS, ahead=0.012)
    around = air(0.03, np.array([0.0, 0.0, 0.0]))
    found = flown(PLAIN, mass, around, "nose")
    assert found.bearing.verdict == "sways"
    assert found.bearing.trim is not None
    off = math.acos(float(found.towards @ FRAME.nose))
    assert found.bearing.trim > math.radians(20)
    assert off == pytest.approx(found.bearing.trim, abs=math.radians(1.5))


def test_the_line_alone_straightens_what_it_pulls_behind() -> None:
    # T l sin a at the tie against the couple of the air, which goes with sin 2a: enough pull, and no trim but the end.
    # The tie is at the nose and the tail leads.
    mass = PLAIN.weighed(MASS, ahead=-0.01)
    tie = np.array([0.0, 0.0, LENGTH])
    offs = []
    for pull in (0.0, 0.05, 0.14):
        bearing = flown(PLAIN, mass, air(pull, tie), "tail").bearing
        assert bearing.trim is not None
        offs.append(bearing.trim)
    assert offs[0] > offs[1] > offs[2]
    assert offs[2] < math.radians(2)


def test_the_mean_of_a_tumbling_sphere_is_its_drag() -> None:
    # A streamer has one drag area in every direction.
    found = fly(replace(_bare(2e-4, 0.0)), PLAIN.weighed(MASS), air(), BAND)
    assert found.bearing.verdict == "tumbles"
    assert found.drag_area == pytest.approx(2e-4, rel=1e-9)


def test_the_distance_is_that_of_its_drag_area_and_the_band_holds_it() -> None:
    mass = DROP.weighed(MASS, ahead=-0.02)
    found = flown(DROP, mass, air(0.03, np.array([0.0, 0.0, LENGTH])))
    again = trajectory(MASS, found.drag_area, air(0.03).throw, AIR[0])
    assert found.path.distance == pytest.approx(again.distance, rel=1e-9)
    assert found.nearest.distance < found.path.distance < found.farthest.distance


def test_distance_over_the_launch_angle_without_air() -> None:
    # From the height h: x = v cos(th)/g (v sin(th) + sqrt(v^2 sin^2(th) + 2 g h)): exact.
    still = Air(1e-12, Throw(SPEED, 0.0, 2.0), None)
    rise = SPEED * np.sin(ANGLES)
    expected = SPEED * np.cos(ANGLES) / 9.80665 * (rise + np.sqrt(rise**2 + 2 * 9.80665 * 2.0))
    assert distances(MASS, 1e-4, still) == pytest.approx(expected, rel=1e-7)


def test_a_flight_turns_with_the_mesh() -> None:
    q = turn(11)
    hooks = [hook("belly", 5e-5, (0.0, -0.009, 0.06)), hook("nose", 5e-5, (0.0, -0.004, 0.095))]
    lip = box((0.01, 0.001, 0.012), (0.0, -0.004, 0.1))
    one = Winged(PLAIN.surface, hooks, lips={"lip": lip})
    moved = [replace(item, at=q @ item.at) for item in hooks]
    other = Winged(
        Surface(PLAIN.surface.vertices @ q.T, PLAIN.surface.faces),
        moved,
        Frame.of(q @ FRAME.nose, q @ FRAME.back),
        {"lip": Surface(lip.vertices @ q.T, lip.faces)},
    )
    tie = np.array([0.0, 0.002, 0.1])
    a = flown(one, one.weighed(MASS, ahead=-0.015), air(0.03, tie))
    b = flown(other, other.weighed(MASS, ahead=-0.015), air(0.03, q @ tie))
    assert (a.bearing.end, a.bearing.verdict) == (b.bearing.end, b.bearing.verdict) == ("tail", "sways")
    assert b.path.distance == pytest.approx(a.path.distance, rel=2e-3)
    assert b.bearing.trim == pytest.approx(a.bearing.trim, rel=5e-3)
    assert b.towards == pytest.approx(q @ a.towards, abs=0.01)
    for first, second in zip(a.curves, b.curves, strict=True):
        assert second.moment == pytest.approx(first.moment, abs=5e-3 * float(np.abs(first.moment).max()))


def test_a_round_end_ahead_of_a_fine_one_meets_less_air() -> None:
    # Common practice, no source: round in front, fine behind, the layer tripped.
    first, second = (DROP.way.drag(end, SPEED, *AIR, "tripped").cd for end in ("tail", "nose"))
    assert second > 1.25 * first


def test_weight_towards_the_leading_end_lowers_the_trim() -> None:
    # Common practice, no source.
    tie = np.array([0.0, 0.0, LENGTH])
    trims = []
    for ahead in (-0.005, -0.012, -0.020):
        bearing = flown(PLAIN, PLAIN.weighed(MASS, ahead=ahead), air(0.03, tie), "tail").bearing
        assert bearing.trim is not None
        trims.append(bearing.trim)
    assert trims[0] > trims[1] + math.radians(5) > trims[2] + math.radians(10)


def test_well_ahead_it_flies_like_an_arrow_and_well_behind_it_tumbles() -> None:
    # Common practice, no source: the weight ahead of the middle of the side in flight. What the trade calls usable, 5
    # to 10% of the length, is not steady by itself here: it sways, and a line that pulls harder makes it steady.
    tie, hooks = np.array([0.0, 0.0, LENGTH]), [hook("belly", 5e-5, (0.0, -0.009, 0.07))]
    body = Winged(PLAIN.surface, hooks)

    def verdict(share: float, pull: float = 0.03) -> str:
        return flown(body, body.weighed(MASS, ahead=-share * LENGTH), air(pull, tie), "tail").bearing.verdict

    assert verdict(-0.08) == "tumbles"
    assert verdict(0.08) == "sways"
    assert verdict(0.27) == "steady"
    assert verdict(0.12, 0.1) == "steady"


def test_a_big_lip_costs_distance() -> None:
    # Common practice, no source; the lip at 45 degrees under the nose, which trails.
    reach = []
    for side in (0.0, 0.01, 0.02):
        lips = {}
        if side:
            plate = box((side, 0.001, side)).vertices
            half = math.sqrt(0.5)
            leaning = plate @ np.array([[1, 0, 0], [0, half, half], [0, -half, half]])
            lips = {"lip": Surface(leaning + np.array([0.0, -0.008, 0.098]), box((1, 1, 1)).faces)}
        body = Winged(PLAIN.surface, lips=lips)
        mass = body.weighed(MASS, ahead=-0.02)
        reach.append(flown(body, mass, air(0.06, np.array([0.0, 0.0, LENGTH])), "tail").path.distance)
    assert reach[0] > reach[1] + 1 > reach[2] + 2


def test_tumbling_costs_more_than_any_change_of_shape() -> None:
    # Common practice, no source: the same shape tumbling against the same reversed and against a plain spheroid.
    tie = np.array([0.0, 0.0, LENGTH])
    steady = flown(DROP, DROP.weighed(MASS, ahead=-0.02), air(0.06, tie), "tail")
    tumbling = flown(DROP, DROP.weighed(MASS, ahead=0.03), air(0.06, tie), "tail")
    assert (steady.bearing.verdict, tumbling.bearing.verdict) == ("steady", "tumbles")
    straight = {
        (body, end): body.way.drag(end, SPEED, *AIR, None).drag_area
        for body in (DROP, PLAIN)
        for end in ("nose", "tail")
    }
    throw = air(0.06).throw
    reach = [trajectory(MASS, area, throw, AIR[0]).distance for area in straight.values()]
    assert max(reach) - min(reach) < steady.path.distance - tumbling.path.distance
