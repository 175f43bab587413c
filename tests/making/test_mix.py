"""Mixes of resin and balloons against the rule of mixtures by hand."""

from __future__ import annotations

from dataclasses import replace

import pytest
from hypothesis import given
from hypothesis import strategies as st

from meshlure.bait.pieces import Substance
from meshlure.files.keys import Keys
from meshlure.files.sections.pour import read_pour
from meshlure.making.mix import Mix, batch, mixed, share_for, spread

STATED = read_pour(Keys({}, "pour", []))
GRAM, CM3 = 1e-3, 1e-6


@pytest.mark.parametrize(
    ("share", "density", "by_mass"),
    # Resin of 1050, balloons of 150 kg/m3: 0.1 x 150 + 0.9 x 1050 = 960, and so on; 15/960 = 1.6% of the mass.
    [(0.1, 960, 0.0156), (0.2, 870, 0.0345), (0.3, 780, 0.0577), (0.4, 690, 0.0870), (0.5, 600, 0.125)],
)
def test_rule_of_mixtures(share: float, density: float, by_mass: float) -> None:
    mix = Mix(1050, 150, share, 0.6)
    assert mix.density == pytest.approx(density)
    assert mix.mass_share == pytest.approx(by_mass, abs=5e-5)
    assert share_for(density, 1050, 150) == pytest.approx(share)


def test_a_cup_to_a_cup() -> None:
    # Six tenths of a cup of balloons are balloons: with a cup of resin they make 1.6 cups, 0.6/1.6 of it balloons.
    mix, reached = mixed(1050 - 0.375 * 900, 1050, 150, 0.6)
    assert reached
    assert mix.share == pytest.approx(0.375)
    assert mix.cups == pytest.approx(1.0)


@pytest.mark.parametrize(
    ("share", "flow"), [(0.0, "pours"), (0.4, "pours"), (0.41, "stiff"), (0.5, "stiff"), (0.51, "does not pour")]
)
def test_what_still_pours(share: float, flow: str) -> None:
    assert Mix(1050, 150, share, 0.6).flow == flow


@pytest.mark.parametrize(("wanted", "nearest"), [(500, 600), (1200, 1050), (100, 600)])
def test_out_of_reach_gives_the_nearest(wanted: float, nearest: float) -> None:
    mix, reached = mixed(wanted, 1050, 150, 0.6)
    assert not reached
    assert mix.density == pytest.approx(nearest)


def test_a_heavy_filler_makes_it_denser() -> None:
    mix, reached = mixed(1200, 1100, 2200, 0.6)
    assert reached
    assert mix.density == pytest.approx(1200)
    assert mix.share == pytest.approx(1 / 11)


def test_grams_for_six_baits_by_hand() -> None:
    # 16 cm3 a bait, six of them and 25% more: 120 cm3. A third balloons: 40 cm3 of 150 kg/m3, 6 g, which fill 66.7 cm3
    # of a cup; 80 cm3 of resin of 1050, 84 g, as 100 : 40 by weight 60 and 24 g.
    mix = Mix(1050, 150, 1 / 3, 0.6)
    found = batch(mix, 16 * CM3, replace(STATED, baits=6, waste=0.25, ratio=(100, 40)))
    assert found.volume == pytest.approx(120 * CM3)
    assert (found.part_a, found.part_b, found.balloons) == pytest.approx((60 * GRAM, 24 * GRAM, 6 * GRAM))
    assert found.balloons_bulk == pytest.approx(66.667 * CM3, rel=1e-4)
    assert found.resin_volume == pytest.approx(80 * CM3)
    assert found.mass == pytest.approx(mix.density * found.volume)


def test_parts_by_volume_weigh_by_their_densities() -> None:
    # Two volumes of 1.2 to one of 0.9: 2.4 to 0.9 by weight. 84 g of resin are 61.09 and 22.91 g.
    mix = Mix(1050, 150, 1 / 3, 0.6)
    stated = replace(STATED, baits=6, waste=0.25, ratio=(2, 1), by="volume", densities=(1200.0, 900.0))
    found = batch(mix, 16 * CM3, stated)
    assert (found.part_a, found.part_b) == pytest.approx((61.0909 * GRAM, 22.9091 * GRAM), rel=1e-5)
    assert found.part_a_volume / found.part_b_volume == pytest.approx(2.0)


def test_a_spread_by_hand() -> None:
    # Six tenths resin of 1050 +-20, four tenths balloons of 150 -30 +50: down hypot(12, 12), up hypot(12, 20).
    resin = Substance(None, 1050, 1030, 1070, "", assumed=False)
    balloons = Substance(None, 150, 120, 200, "", assumed=False)
    low, high = spread(Mix(1050, 150, 0.4, 0.6), resin, balloons)
    assert (low, high) == pytest.approx((690 - 16.971, 690 + 23.324), abs=1e-3)


@given(st.floats(900, 1300), st.floats(100, 600), st.floats(0, 0.5))
def test_back_and_forth(resin: float, balloons: float, share: float) -> None:
    mix = Mix(resin, balloons, share, 0.6)
    assert share_for(mix.density, resin, balloons) == pytest.approx(share, abs=1e-9)
