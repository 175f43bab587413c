"""Round stock for ballast: which diameters of which material."""

from __future__ import annotations

import pytest

from meshlure.errors import InputError
from meshlure.stock import shelf
from meshlure.stock.materials import materials
from meshlure.stock.rods import rod_diameters, rod_sizes

# The series R"10 of rounded preferred numbers, ISO 497, from memory, in mm from 2 on.
PREFERRED = (2, 2.5, 3, 4, 5, 6, 8, 10, 12)


@pytest.mark.parametrize("name", ["lead", "hard lead", "tungsten heavy alloy 90% W", "brass", "copper", "stainless"])
def test_metric_rod_is_of_preferred_diameters(name: str) -> None:
    assert rod_diameters(name) == pytest.approx([size * 1e-3 for size in PREFERRED], rel=1e-12)
    assert "common practice, no source" in rod_sizes(name).source


def test_soft_solder_and_pewter_are_sold_as_wire_only() -> None:
    # Solder wire is sold to some 4 mm, above as bars: common practice, no source.
    assert rod_diameters("pewter") == pytest.approx([2e-3, 2.5e-3, 3e-3, 4e-3], rel=1e-12)


def test_only_what_is_sold_round_has_diameters() -> None:
    assert rod_sizes("tungsten putty").diameters == ()
    assert rod_sizes("balsa").source == ""
    with pytest.raises(InputError, match=r"ballast\.materials\[2\]"):
        rod_diameters("unobtainium", "ballast.materials[2]")


@pytest.mark.parametrize("table", ["rods.toml", "balls.toml"])
def test_every_row_is_a_material_of_the_stock_once(table: str) -> None:
    rows = [row for group in shelf.read_table(table)["sold"] for row in group["rows"]]
    assert len(rows) == len(set(rows))
    assert set(rows) <= {row.name for row in materials()}
