"""Hydrostatic weighing against examples worked elsewhere, and single causes against differences made by hand."""

from __future__ import annotations

import pytest

from meshlure.physics.hydrostatic import Lever, Weighing, explained

GRAM = 1e-3


@pytest.mark.parametrize(
    ("air", "under", "density"),
    [
        # A crown that a scale shows as 7.84 N in air and as 6.84 N under water: 7.84e3 kg/m3 (Serway and Jewett,
        # Physics for Scientists and Engineers, the example "Eureka!"; the numbers from memory).
        (7.84, 6.84, 7.84e3),
        # One of 8.33 N and 7.81 N: 16 g/cm3 (a school exercise solved on physicsforums.com, thread 462949).
        (8.33, 7.81, 16.0e3),
    ],
)
def test_crowns(air: float, under: float, density: float) -> None:
    found = Weighing(air / 9.80665, under / 9.80665, 1000.0)
    assert found.density == pytest.approx(density, rel=2e-3)
    assert found.density * found.volume == pytest.approx(found.dry)


def test_a_floating_plastic_with_a_sinker_by_hand() -> None:
    # ASTM D792, method A with a sinker: specific gravity a/(a + w - b), a the specimen in air, b specimen and sinker
    # under water, w the sinker under water. Polypropylene of 4.525 g with a sinker of 9.000 g under water, 8.5253 g
    # together, 23 degrees: 4.525/(4.525 + 9.000 - 8.5253) = 0.90506, times 997.54 kg/m3.
    found = Weighing(4.525 * GRAM, (8.5253 - 9.0) * GRAM, 997.54)
    assert found.density == pytest.approx(0.90506 * 997.54, rel=1e-5)
    # It displaces 4.9997 g of water.
    assert found.volume * 997.54 == pytest.approx(4.9997 * GRAM, rel=1e-9)


BODY = Lever("density of the body", "%", 0.1 * GRAM, -0.1 * GRAM, (5.0, 5.0))
SIZE = Lever("size", "%", 0.3 * GRAM, 0.25 * GRAM, (1.0, 1.0))
BUBBLE = Lever("bubbles", "cm3", 0.0, 1.0 * GRAM, (0.0, 0.5))


def test_two_weighings_tell_causes_apart() -> None:
    # A body 4% denser: half a gram... 0.4 g heavier and 0.4 g less in reserve.
    best, *others = explained([SIZE, BUBBLE, BODY], 0.4 * GRAM, -0.4 * GRAM, 0.02 * GRAM)
    assert best.lever is BODY
    assert best.change == pytest.approx(4.0)
    assert best.likely
    assert best.share == pytest.approx(1.0)
    assert not any(other.likely for other in others)
    # A bubble cannot explain the weight: it takes the whole of the reserve, so half of the squares, downwards.
    bubble = next(other for other in others if other.lever is BUBBLE)
    assert bubble.change == pytest.approx(-0.4)
    assert bubble.left_mass == pytest.approx(0.4 * GRAM)
    assert bubble.left_reserve == pytest.approx(0.0)
    assert bubble.share == pytest.approx(0.5)


def test_one_weighing_leaves_the_choice() -> None:
    found = explained([BODY, SIZE, BUBBLE], 0.3 * GRAM, None, 0.02 * GRAM)
    assert [row.lever.what for row in found] == ["density of the body", "size"]
    assert [row.change for row in found] == pytest.approx([3.0, 1.0])
    assert all(row.likely and row.left_reserve is None for row in found)


def test_an_unusual_change_is_not_likely() -> None:
    (body,) = explained([BODY], 0.9 * GRAM, -0.9 * GRAM, 0.02 * GRAM)
    assert body.share == pytest.approx(1.0)
    assert not body.likely


def test_nothing_weighed_explains_nothing() -> None:
    assert explained([BODY], None, None, 0.02 * GRAM) == ()
