"""Drag of axial bodies against the published table, and how it behaves between the table's shapes.

The estimate's constants were set with this table in sight, and the counts below after its result was known: they hold
what was reached, they are no independent proof.
"""

from __future__ import annotations

import math
from functools import cache

import numpy as np
import pytest
from published_bodies import (
    CROSSWISE,
    PLATES,
    REVOLVED,
    Row,
    boxed,
    cone,
    dome,
    flipped,
    meshed,
    profile,
    profile_of,
    respaced,
    revolved,
    rows,
    spheroid,
    teardrop,
)

from meshlure.geometry.blocks import BlockIndex
from meshlure.geometry.stations import stations
from meshlure.geometry.surface import Surface
from meshlure.physics.broadside import broadside_cd
from meshlure.physics.cup import cup_depth
from meshlure.physics.drag import Drag, Fittings, Layer, axial_drag, headline_drag
from meshlure.physics.form import Profile

DENSITY = 1000.0
SCORED = [row for row in rows() if row.scored]
ROUNDED = {"sphere", "spheroid", "hemisphere", "teardrop", "streamlined"}


def at(body: Profile, reynolds: float, layer: Layer | None = None, cup: float = 0.0) -> Drag:
    """Drag at a Reynolds number on the diameter, at 1 m/s."""
    return axial_drag(body, 1.0, DENSITY, body.diameter / reynolds, layer, cup=cup)


def stated(row: Row) -> Layer | None:
    return {"laminar": "laminar", "tripped": "tripped"}.get(row.layer)  # type: ignore[return-value]


@cache
def ratios(given: bool) -> dict[str, float]:
    """Estimate over published value for every scored row, the layer as in the source or chosen by the model."""
    found = {}
    for row in SCORED:
        if row.case in CROSSWISE:
            found[row.case] = broadside_cd(CROSSWISE[row.case]) / row.cd
        else:
            body = profile(row.case)
            found[row.case] = at(body, row.reynolds, stated(row) if given else None).cd / row.cd
    return found


def within(share: float, given: bool, families: set[str] | None = None) -> int:
    cases = {row.case for row in SCORED if families is None or row.family in families}
    return sum(abs(ratio - 1) <= share for case, ratio in ratios(given).items() if case in cases)


def test_the_table_is_all_there() -> None:
    assert len(SCORED) == 30
    assert all(row.case in REVOLVED or row.case in PLATES or row.case in CROSSWISE for row in SCORED)
    assert sum(row.family in ROUNDED for row in SCORED) == 11


def test_scored_rows_with_the_layer_of_their_source() -> None:
    # Seen with pytest -s.
    print("\n  estimate over published value: layer as in the source, layer chosen")
    for case, ratio in ratios(True).items():
        print(f"  {case:12s} {ratio:5.2f} {ratios(False)[case]:5.2f}")
    assert within(0.25, given=True) >= 27
    assert within(0.50, given=True) == 30
    assert np.median(np.abs(np.log(list(ratios(True).values())))) <= 0.06
    assert within(0.25, given=True, families=ROUNDED) >= 8


def test_scored_rows_with_the_layer_chosen() -> None:
    assert within(0.25, given=False) >= 26
    assert within(0.50, given=False) >= 29
    published = [row.cd for row in SCORED]
    estimated = [row.cd * ratios(False)[row.case] for row in SCORED]
    assert np.corrcoef(np.argsort(np.argsort(published)), np.argsort(np.argsort(estimated)))[0, 1] >= 0.95


@pytest.mark.parametrize("row", [row for row in SCORED if row.case not in CROSSWISE], ids=lambda row: row.case)
def test_the_band_holds_the_published_value(row: Row) -> None:
    body = profile(row.case)
    found = at(body, row.reynolds, stated(row))
    assert found.cd_low <= row.cd <= found.cd_high


@pytest.mark.parametrize(
    "case",
    ["sph_1e5", "pro4_turb", "cone20_fwd", "cylax_2", "hemi_fwd", "disc", "sphcone_fwd", "streamlined", "plate3"],
)
def test_a_turned_mesh_gives_what_its_sections_give(case: str) -> None:
    row = next(row for row in SCORED if row.case == case)
    exact, meshy = profile(case), mesh_profile(meshed(case))
    for layer in ("laminar", "tripped"):
        expected = at(exact, row.reynolds, layer).cd
        assert at(meshy, row.reynolds, layer).cd == pytest.approx(expected, rel=0.015)


def mesh_profile(surface: Surface) -> Profile:
    """Sections of a mesh that was turned and moved at random; its leading end is at x = 0."""
    q, _ = np.linalg.qr(np.random.default_rng(7).normal(size=(3, 3)))
    turn = q * np.sign(np.linalg.det(q))
    moved = surface.moved(turn, np.array([0.3, -2.0, 5.0]))
    cut = stations(BlockIndex.build(moved), turn[:, 0], [turn[:, 1], turn[:, 2]])
    return Profile.from_stations(cut, leads_low=True)


@pytest.mark.parametrize(("along", "around", "within"), [(30, 32, 0.03), (60, 64, 0.01), (240, 256, 0.002)])
def test_meshes_converge_on_the_smooth_body(along: int, around: int, within: float) -> None:
    exact = at(profile_of(spheroid(5)), 3e4, "tripped").cd
    mesh = revolved(respaced(spheroid(5), along), around)
    assert at(mesh_profile(mesh), 3e4, "tripped").cd == pytest.approx(exact, rel=within)


def test_length_of_a_mesh_is_of_no_account_to_its_coefficient() -> None:
    big, small = (profile_of((x * scale, r * scale)) for scale in (1.0, 1e-2) for x, r in [teardrop()])
    assert at(big, 4e4, "tripped").cd == pytest.approx(at(small, 4e4, "tripped").cd, rel=1e-9)


@pytest.mark.parametrize("reynolds", [1e4, 3e4, 1e5])
def test_a_laminar_sphere_agrees_with_the_general_library(reynolds: float) -> None:
    # `fluids` (C. Bell), Clift's correlation for spheres.
    from fluids.drag import Clift

    assert at(profile_of(spheroid(1)), reynolds, "laminar").cd == pytest.approx(Clift(reynolds), rel=0.25)


def test_a_hemisphere_reversed() -> None:
    # Flat face first 1.17 over dome first 0.41 is 2.9: Munson, Young, Okiishi and Huebsch, 6th ed., fig. 9.20.
    fore, aft = at(profile_of(dome()), 1e5), at(profile_of(flipped(dome())), 1e5)
    assert aft.cd / fore.cd == pytest.approx(2.9, rel=0.2)


def test_a_teardrop_reversed() -> None:
    # Fine end first costs 1.8 times as much (from memory, after Eiffel 1910/11).
    fore, aft = (at(profile_of(line), 1.35e5, "tripped").cd for line in (teardrop(), flipped(teardrop())))
    assert aft / fore == pytest.approx(1.8, rel=0.2)


def test_a_cup_presses_harder_than_a_flat_face() -> None:
    # Hemispherical cup, open side first: 1.33 to 1.42 (Munson et al., fig. 9.20; Matthews, fig. 5.13b). CUP_GAIN was
    # taken from this value, so this guards it.
    full = cup_depth(2 / 3 * math.pi * 0.5**3, math.pi * 0.5**2)
    assert full == 1
    assert at(profile_of(flipped(dome())), 1e5, cup=full).cd == pytest.approx(1.38, rel=0.06)
    assert cup_depth(0.0, 1.0) == 0.0
    assert at(profile_of(spheroid(4)), 1e5, "laminar", cup=1).cd < 1.01 * at(profile_of(spheroid(4)), 1e5, "laminar").cd


def test_parts_add_up_and_speed_gives_the_force() -> None:
    body = profile_of(teardrop())
    items = Fittings(lip=0.02, hooks=0.03, eyes=0.004)
    for layer in ("laminar", "tripped", None):
        found = axial_drag(body, 2.0, DENSITY, 1e-4, layer, fittings=items)
        parts = found.parts
        assert min(parts.base, parts.tail) == 0
        assert found.cd * found.frontal_area == pytest.approx(parts.friction + parts.forebody + parts.base + parts.tail)
        assert found.drag_area == pytest.approx(parts.body + 0.054)
        assert found.force == pytest.approx(0.5 * DENSITY * 4 * found.drag_area)
        assert found.reynolds_length == pytest.approx(2.0 * 3.35 / 1e-4)
        assert found.reynolds_diameter == pytest.approx(2.0 / 1e-4, rel=1e-3)


def test_the_silhouette_changes_the_coefficient_and_not_the_force() -> None:
    body = profile_of(spheroid(4))
    own, wide = axial_drag(body, 1, 1, 1e-4), axial_drag(body, 1, 1, 1e-4, silhouette=2 * body.greatest_area)
    assert wide.cd == pytest.approx(own.cd / 2)
    assert wide.cd_high == pytest.approx(own.cd_high / 2)
    assert wide.force == pytest.approx(own.force)


def test_the_headline_lies_between_both_layers_with_a_band_over_both() -> None:
    body = profile_of(teardrop())
    viscosity = body.length / 1e5
    laminar, tripped = (axial_drag(body, 1, 1, viscosity, layer).cd for layer in ("laminar", "tripped"))
    for trips in (False, True):
        found = headline_drag(body, 1, 1, viscosity, trips=trips)
        assert found.layer == "between"
        assert found.cd == pytest.approx(math.sqrt(laminar * tripped))
        assert found.cd_low <= min(laminar, tripped) < max(laminar, tripped) <= found.cd_high
        assert found.parts.body == pytest.approx(found.cd * found.frontal_area)


def test_the_headline_is_tripped_alone_where_fittings_trip_a_fast_bait() -> None:
    body = profile_of(teardrop())
    slow, fast = 1.9e5, 3.1e5
    for reynolds, trips, layer in ((slow, True, "between"), (fast, False, "between"), (fast, True, "tripped")):
        assert headline_drag(body, 1, 1, body.length / reynolds, trips=trips).layer == layer
    found = headline_drag(body, 1, 1, body.length / fast, trips=True)
    assert found.cd == pytest.approx(axial_drag(body, 1, 1, body.length / fast, "tripped").cd)


def test_bands_are_narrow_where_edges_decide_and_wide_where_the_layer_does() -> None:
    sharp, smooth = at(profile("cylax_2"), 4e4, "tripped"), at(profile("sph_1e5"), 4e4, "tripped")
    assert sharp.cd_high / sharp.cd == pytest.approx(1.3, abs=0.01)
    assert smooth.cd_high / smooth.cd == pytest.approx(1.6, abs=0.01)
    assert sharp.laminar_cd == pytest.approx(sharp.tripped_cd, rel=0.07)


def test_a_laminar_layer_that_beats_a_tripped_one_is_called_optimistic() -> None:
    slender, stout = at(profile_of(spheroid(12)), 5e4, "laminar"), at(profile("sph_1e5"), 5e4, "laminar")
    assert slender.laminar_cd < slender.tripped_cd
    assert "optimistic" in slender.words
    assert "optimistic" not in stout.words


def test_the_model_chooses_by_reynolds_number_and_front() -> None:
    ball, tube = profile("sph_1e5"), profile("cylax_2")
    assert at(ball, 1e5).layer == "laminar"
    assert at(ball, 2e6).layer == "tripped"
    assert at(tube, 1e4).layer == "tripped"


def test_speed_moves_the_coefficient_without_a_jump() -> None:
    body = profile_of(spheroid(4))
    reynolds = np.geomspace(1e3, 5e6, 400)
    for values in (
        [at(body, float(r)).cd for r in reynolds],
        [headline_drag(body, 1, 1, body.diameter / float(r), trips=True).cd for r in reynolds],
    ):
        assert np.abs(np.diff(np.log(values))).max() < 0.06


@pytest.mark.parametrize("layer", ["laminar", "tripped", None])
def test_cones_from_a_needle_to_a_disc_rise_without_a_jump(layer: Layer | None) -> None:
    values = [at(profile_of(cone(float(half))), 1e5, layer).cd for half in np.linspace(10, 85, 151)]
    steps = np.diff(np.log(values))
    assert steps.min() > 0
    assert steps.max() < 0.03


def test_a_plate_and_a_bar_differ_by_their_length() -> None:
    plate, bar = (at(mesh_profile(boxed(length, 1, 1)), 1e5).cd for length in (0.02, 3.0))
    assert plate > 1.2 * bar


@pytest.mark.parametrize("bad", [0.0, -1.0, math.nan, math.inf])
@pytest.mark.parametrize("place", [0, 1, 2])
def test_speed_density_and_viscosity_are_positive(bad: float, place: int) -> None:
    numbers = [1.0, 1000.0, 1e-6]
    numbers[place] = bad
    speed, density, viscosity = numbers
    with pytest.raises(ValueError, match="positive"):
        axial_drag(profile("disc"), speed, density, viscosity)
    with pytest.raises(ValueError, match="positive"):
        headline_drag(profile("disc"), speed, density, viscosity, trips=True)


def test_other_bad_input_is_refused() -> None:
    body = profile("disc")
    with pytest.raises(ValueError, match="layer"):
        axial_drag(body, 1, 1, 1, "rough")  # type: ignore[arg-type]
    with pytest.raises(ValueError, match="silhouette"):
        axial_drag(body, 1, 1, 1, silhouette=0.0)
    with pytest.raises(ValueError, match="fittings"):
        Fittings(lip=-1.0)
    with pytest.raises(ValueError, match="cup"):
        cup_depth(-1.0, 1.0)
    with pytest.raises(ValueError, match="fineness"):
        broadside_cd(0.0)
