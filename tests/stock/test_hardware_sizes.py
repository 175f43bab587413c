"""Hooks, rings and eyes: names, ranges, and masses against the closed forms of bent wire."""

import itertools
import math

import pytest

from meshlure.errors import InputError
from meshlure.stock.cautions import all_cautions
from meshlure.stock.hardware import HardwareItem, hardware, item, wire_mass
from meshlure.stock.materials import material

TREBLES = [row for row in hardware() if row.name.startswith("treble")]


def row(name: str) -> HardwareItem:
    return item(name, "the.key")


@pytest.mark.parametrize(
    ("diameter", "published"),
    # Grams of 100 mm of wire of 7930 kg/m3: pi/4 d^2 L rho, worked out by hand to three places.
    [(0.5, 0.156), (0.8, 0.399), (1.0, 0.623), (1.2, 0.897), (1.6, 1.594), (2.0, 2.491)],
)
def test_wire_weighs_what_a_cylinder_weighs(diameter: float, published: float) -> None:
    assert wire_mass(diameter * 1e-3, 0.1, 7930.0) * 1e3 == pytest.approx(published, abs=5e-4)
    made = row(f"wire {diameter} x 100")
    assert made.mass * 1e3 == pytest.approx(published, abs=5e-4)
    assert made.low < made.mass < made.high
    assert (made.wire, made.wire_length) == pytest.approx((diameter * 1e-3, 0.1), rel=1e-12)


@pytest.mark.parametrize(("size", "outside", "wire"), [("3", 6.0, 0.6), ("5", 8.0, 0.8), ("8", 12.5, 1.3)])
def test_a_split_ring_weighs_what_two_tori_weigh(size: str, outside: float, wire: float) -> None:
    # Volume of a torus 2 pi^2 R r^2 (Pappus), twice.
    torus = 2.0 * math.pi**2 * (outside - wire) / 2.0 * (wire / 2.0) ** 2
    ring = row(f"split ring {size}")
    assert ring.mass == pytest.approx(2.0 * torus * 1e-9 * 7930.0, rel=1e-9)
    assert (ring.low, ring.high) == pytest.approx((0.75 * ring.mass, 1.25 * ring.mass), rel=1e-12)


def test_a_screw_eye_is_a_shank_and_a_torus() -> None:
    eye = 2.0 * math.pi**2 * (2.0 + 0.8) / 2.0 * 0.4**2
    shank = math.pi * 0.4**2 * 10.0
    screw = row("screw eye 0.8 x 10")
    assert screw.mass == pytest.approx((eye + shank) * 1e-9 * 7930.0, rel=1e-9)
    assert screw.wire_length == pytest.approx(math.pi * 2.8e-3, rel=1e-12)


@pytest.mark.parametrize("hook", TREBLES, ids=lambda hook: hook.name)
def test_a_treble_weighs_what_its_wire_weighs(hook: HardwareItem) -> None:
    # Drawn out, three shanks of two gapes and three bends with points of 2.3 gapes are 13 gapes of wire (common
    # practice of drawing a hook, no source); the row's length in the stream is 11 gapes. A consistency of the
    # row's own mass, wire and gape, not a check of the shop's sizes.
    assert hook.wire is not None
    assert hook.wire_length is not None
    drawn = wire_mass(hook.wire, hook.wire_length * 13.0 / 11.0, 7850.0)
    assert 0.70 < drawn / hook.mass < 1.0
    assert 0.85 * hook.low < drawn < hook.high


def test_a_larger_number_is_a_smaller_hook_until_the_noughts() -> None:
    assert [hook.name.split()[1] for hook in TREBLES] == [
        *("14", "12", "10", "8", "6", "4", "2", "1"),
        *("1/0", "2/0", "3/0", "4/0", "5/0"),
    ]
    for small, large in itertools.pairwise(TREBLES):
        assert small.mass < large.mass
        assert small.wire is not None
        assert large.wire is not None
        assert small.wire < large.wire


def test_two_trebles_and_three_rings_of_a_middling_bait() -> None:
    # Common practice of the trade, no source: two size 6 trebles and three rings of size 3 come to about 1.7 g.
    assert 2.0 * row("treble 6").mass + 3.0 * row("split ring 3").mass == pytest.approx(1.7e-3, rel=0.05)


def test_every_row_is_whole_and_assumed() -> None:
    triggers = {caution.trigger for caution in all_cautions()}
    for piece in hardware():
        assert 0.0 < piece.low < piece.mass < piece.high < 0.02, piece.name
        assert piece.assumed, piece.name
        assert len(piece.source) > 10, piece.name
        assert material(piece.material, piece.name).name == piece.material
        assert set(piece.kinds) <= triggers
        assert ("hooks" in piece.kinds) == piece.name.startswith("treble")
        assert (piece.wire is None) == (piece.wire_length is None)
    assert len({piece.name for piece in hardware()}) == len(hardware())


@pytest.mark.parametrize(
    ("asked", "name"),
    [
        ("Treble 6", "treble 6"),
        ("treble #6", "treble 6"),
        ("treble-1/0", "treble 1/0"),
        ("SPLIT RING 3", "split ring 3"),
        ("screw eye 1 x 15", "screw eye 1.0 x 15"),
        ("screw eye 1.0×15", "screw eye 1.0 x 15"),
        ("screw eye 1.0 x 15", "screw eye 1.0 x 15"),
    ],
)
def test_spellings_of_one_name(asked: str, name: str) -> None:
    assert row(asked).name == name


@pytest.mark.parametrize(
    ("asked", "near"), [("treble 7", "treble 6"), ("treble 10/0", "treble 1/0"), ("splitring 3", "split ring 3")]
)
def test_an_unknown_size_is_refused_with_near_ones(asked: str, near: str) -> None:
    with pytest.raises(InputError) as caught:
        row(asked)
    (fault,) = caught.value.faults
    assert near in fault.allowed
    assert (fault.where, fault.found) == ("the.key", asked)
    assert "mass" in fault.next_step


@pytest.mark.parametrize("asked", ["wire 5 x 100", "wire 0.1 x 100", "wire 1.0 x 0.5", "wire 1.0 x 5000"])
def test_a_wire_of_no_sold_size_is_refused(asked: str) -> None:
    with pytest.raises(InputError, match=r"D 0\.3 to 3, L 1 to 1000"):
        row(asked)
