"""Reserve, its band and the words for it, against sums done by hand."""

from __future__ import annotations

from math import hypot

import numpy as np
import pytest

from meshlure.bait.composition import Part
from meshlure.bait.pieces import Coat, Hardware, Role, Substance
from meshlure.geometry.moments import point_moments
from meshlure.physics.buoyancy import COAT_SPREAD, Behaviour, Doubt, Reserve, behaviour, doubts, reserve

WATER = 998.2
GRAM, CM3 = 1e-3, 1e-6


def substance(density: float, low: float, high: float, name: str | None = None) -> Substance:
    return Substance(name, density, low, high, "for the test", assumed=False)


def part(name: str, volume: float, made_of: Substance | None, role: Role = Role.INSERT) -> Part:
    density = 0.0 if made_of is None else made_of.density
    return Part(name, role, made_of, volume, point_moments(volume * density, np.zeros(3)), np.zeros(3))


def hook(name: str, mass: float, low: float, high: float, item: str | None) -> Hardware:
    return Hardware(
        name=name,
        mass=mass,
        low=low,
        high=high,
        at=np.zeros(3),
        hangs=True,
        volume=0.0,
        substance=None,
        item=item,
        source="for the test",
        assumed=True,
    )


def test_reserve_is_what_the_displaced_water_weighs_less_the_bait() -> None:
    # The ellipsoid of 100 x 16 x 22 mm holds pi/6 of its box, 18.431 cm3: 18.398 g of fresh water at 20 degrees.
    volume = np.pi / 6 * 10 * 1.6 * 2.2 * CM3
    found = reserve(16.5 * GRAM, volume, WATER, None, ())
    assert found.reserve == pytest.approx(1.898 * GRAM, abs=0.001 * GRAM)
    assert (found.low, found.high) == (found.reserve, found.reserve)
    assert found.threshold == pytest.approx(0.002 * 18.398 * GRAM, rel=1e-4)
    assert found.state is Behaviour.FLOATS
    assert found.possible == (Behaviour.FLOATS,)


def test_the_band_is_the_root_of_the_squares_each_way() -> None:
    pair = (Doubt("a", 0.3 * GRAM, 0.1 * GRAM), Doubt("b", 0.4 * GRAM, 0.0))
    found = reserve(10 * GRAM, 11 * CM3, 1000.0, None, pair)
    assert found.reserve == pytest.approx(1 * GRAM)
    assert found.low == pytest.approx(0.5 * GRAM)
    assert found.high == pytest.approx(1.1 * GRAM)


@pytest.mark.parametrize(
    ("grams", "state"),
    [
        (0.021, Behaviour.FLOATS),
        (0.019, Behaviour.SUSPENDS),
        (-0.019, Behaviour.SUSPENDS),
        (-0.021, Behaviour.SINKS),
    ],
)
def test_the_line_lies_at_two_thousandths_of_the_displaced_mass(grams: float, state: Behaviour) -> None:
    # 10 cm3 of water of 1000 kg/m3: 0.02 g either way.
    assert reserve((10 - grams) * GRAM, 10 * CM3, 1000.0, None, ()).state is state
    assert behaviour(grams * GRAM, 0.02 * GRAM) is state


def test_an_own_threshold_is_kept() -> None:
    found = reserve(9.9 * GRAM, 10 * CM3, 1000.0, 0.15 * GRAM, ())
    assert found.threshold == 0.15 * GRAM
    assert found.state is Behaviour.SUSPENDS


@pytest.mark.parametrize(
    ("middle", "half", "states"),
    [
        (1.0, 0.5, {"floats"}),
        (0.3, 0.25, {"floats", "suspends"}),
        (0.05, 0.02, {"suspends"}),
        (0.0, 0.5, {"floats", "suspends", "sinks"}),
        (-0.3, 0.25, {"sinks", "suspends"}),
        (-1.0, 0.5, {"sinks"}),
    ],
)
def test_every_state_that_the_band_holds_is_said(middle: float, half: float, states: set[str]) -> None:
    # Against a walk along the band in small steps.
    found = Reserve(middle, middle - half, middle + half, 0.1, ())
    walked = {behaviour(float(value), 0.1).value for value in np.linspace(middle - half, middle + half, 1001)}
    assert {state.value for state in found.possible} == walked == states
    assert found.possible[0] is found.state


def test_stated_densities_err_each_for_itself_and_stock_by_the_batch() -> None:
    stated = substance(1000, 995, 1005)
    lead = substance(11340, 11300, 11350, "lead")
    found = doubts(
        [
            part("body", 10 * CM3, stated, Role.BODY),
            part("one", 1 * CM3, lead),
            part("two", 2 * CM3, lead),
            part("void", 5 * CM3, None),
        ],
        0.0,
        (),
        None,
        0.0,
        WATER,
    )
    by_name = {doubt.what: doubt for doubt in found}
    assert set(by_name) == {"density of body", "density of lead"}
    # A denser body has less reserve: 10 cm3 x 5 kg/m3 = 0.05 g. Lead: 3 cm3 x 10 and x 40 kg/m3.
    assert by_name["density of body"].low == pytest.approx(0.05 * GRAM)
    assert by_name["density of body"].high == pytest.approx(0.05 * GRAM)
    assert by_name["density of lead"].low == pytest.approx(0.03 * GRAM)
    assert by_name["density of lead"].high == pytest.approx(0.12 * GRAM)


def test_equal_hooks_err_together_and_others_apart() -> None:
    pair = [hook(name, 0.6 * GRAM, 0.5 * GRAM, 0.8 * GRAM, "treble 6") for name in ("front", "rear")]
    ring = hook("ring", 0.1 * GRAM, 0.09 * GRAM, 0.11 * GRAM, None)
    found = {doubt.what: doubt for doubt in doubts((), 0.0, [*pair, ring], None, 0.0, WATER)}
    # Heavier than thought: less reserve.
    assert found["mass of treble 6"].low == pytest.approx(2 * 0.2 * GRAM)
    assert found["mass of treble 6"].high == pytest.approx(2 * 0.1 * GRAM)
    assert found["mass of ring"].low == pytest.approx(0.01 * GRAM)
    assert len(found) == 2


@pytest.mark.parametrize(
    ("density", "thickness", "low", "high"),
    [
        # 50 cm2 of skin, 0.05 mm either way: 0.25 cm3 of a coat 151.8 kg/m3 heavier than water pulls 0.038 g down.
        (1150, 0.15e-3, 0.03795, 0.03795),
        # A lighter coat lifts when it is thicker.
        (900, 0.15e-3, 0.02455, 0.02455),
        # A coat of 0.02 mm can be no more than that thinner.
        (1150, 0.02e-3, 0.03795, 0.01518),
        (900, 0.02e-3, 0.00982, 0.02455),
    ],
)
def test_a_coats_thickness(density: float, thickness: float, low: float, high: float) -> None:
    coat = Coat(thickness, substance(density, density, density))
    (found,) = doubts((), 0.0, (), coat, 50e-4, WATER)
    assert COAT_SPREAD == 0.05e-3
    assert found.low == pytest.approx(low * GRAM, rel=1e-9)
    assert found.high == pytest.approx(high * GRAM, rel=1e-9)


def test_facets_count_both_ways() -> None:
    for facets in (0.2 * GRAM, -0.2 * GRAM):
        (found,) = doubts((), facets, (), None, 0.0, WATER)
        assert (found.low, found.high) == (0.2 * GRAM, 0.2 * GRAM)
    assert doubts((), 0.0, (), None, 0.0, WATER) == ()


def test_a_bait_of_everything() -> None:
    # Body 18.4 cm3 of 0.75 +- 0.5% (0.069 g), lead 0.4 cm3 (0.016, 0.004), two hooks (0.1, 0.2 each), facets 0.05.
    hooks = [hook(name, 0.6 * GRAM, 0.5 * GRAM, 0.8 * GRAM, "treble 6") for name in ("front", "rear")]
    found = doubts(
        [
            part("body", 18.4 * CM3, substance(750, 746.25, 753.75), Role.BODY),
            part("ballast", 0.4 * CM3, substance(11340, 11300, 11350, "lead")),
        ],
        0.05 * GRAM,
        hooks,
        None,
        0.0,
        WATER,
    )
    whole = reserve(16 * GRAM, 18.8 * CM3, WATER, None, found)
    assert whole.reserve - whole.low == pytest.approx(hypot(0.069, 0.004, 0.4, 0.05) * GRAM, rel=1e-9)
    assert whole.high - whole.reserve == pytest.approx(hypot(0.069, 0.016, 0.2, 0.05) * GRAM, rel=1e-9)
