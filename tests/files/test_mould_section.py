"""[mould]: what it takes, what stands where nothing is said, and what is refused."""

from __future__ import annotations

import math
from pathlib import Path
from typing import Any

import pytest

from meshlure.errors import InputError
from meshlure.files.baitfile import bait_of
from meshlure.files.sections.mould import MouldSection

SHRINK = {"print": "0.2 %", "silicone": "3 permille", "resin": ["0.2 %", "0.2 %", "0.4 %"]}


def read(unit: str = "mm", **mould: Any) -> MouldSection:
    table: dict[str, Any] = {
        "format": 1,
        "bait": {"name": "minnow", "length_unit": unit, "nose": "-x", "back": "+z"},
        "body": {"mesh": "body.stl", "density": "1 g/cm3"},
        "mould": mould,
    }
    found = bait_of(table, Path(), "minnow").mould
    assert found is not None
    return found


def test_without_a_word_all_stands_at_its_default() -> None:
    found = read()
    assert set(found.assumed) == set(MouldSection().assumed)
    assert found.shrink_print == found.shrink_silicone == found.shrink_resin == (0.0, 0.0, 0.0)
    assert (found.pull, found.sprue.at, found.vents, found.keys, found.bed) == ("side", "tail", "auto", 4, None)


def test_everything_said() -> None:
    found = read(
        "cm",
        pull=[0.0, 3.0, 4.0],
        shrink=SHRINK,
        wall="12 mm",
        draft_least="1 deg",
        keys=6,
        sprue={"at": [1.0, 0.0, -2.0], "diameter": "6 mm"},
        vents=["nose", [0.5, 0.0, 1.0]],
        board="1/4 in",
        bed=["220 mm", "220 mm", "250 mm"],
        tab={"at": "back", "hole": "4 mm"},
    )
    assert found.pull == pytest.approx((0.0, 0.6, 0.8))
    assert (found.shrink_print, found.shrink_silicone) == ((0.002,) * 3, (0.003,) * 3)
    assert found.shrink_resin == (0.002, 0.002, 0.004)
    assert found.draft_least == pytest.approx(math.radians(1))
    # Points are in the mesh's unit: cm here.
    assert found.sprue.at == pytest.approx((0.01, 0.0, -0.02))
    assert found.vents[0] == "nose"
    assert found.vents[1] == pytest.approx((0.005, 0.0, 0.01))
    assert found.board == pytest.approx(0.00635)
    assert (found.wall, found.bed) == (0.012, (0.22, 0.22, 0.25))
    assert (found.tab.at, found.tab.hole, found.keys) == ("back", 0.004, 6)
    assert found.assumed == ()


@pytest.mark.parametrize(("pull", "taken"), [("side", "side"), ("back", "back"), ("-z", (0.0, 0.0, -1.0))])
def test_pulls_by_name(pull: str, taken: object) -> None:
    assert read(pull=pull).pull == taken


FAULTS: list[tuple[dict[str, Any], str]] = [
    ({"shrink": {"print": 5}}, r"mould\.shrink\.print: the number has no unit(.|\n)*'5 %' or '5 permille'"),
    ({"shrink": {"resin": "500 %"}}, r"mould\.shrink\.resin: .*outside(.|\n)*found: 500 %(.|\n)*up to 10 %"),
    ({"shrink": {"resin": "-1 %"}}, r"mould\.shrink\.resin: the value is too low(.|\n)*not below 0 %"),
    ({"shrink": {"resin": "1 mm"}}, r"mould\.shrink\.resin: 'mm' is not a unit of a shrinkage"),
    ({"shrink": {"print": ["1 %", "1 %"]}}, r"mould\.shrink\.print: .*along mesh x, y and z(.|\n)*found: 2 values"),
    ({"shrink": {"wax": "1 %"}}, r"mould\.shrink\.wax: no such key"),
    ({"shrink": "1 %"}, r"mould\.shrink: the value is of the wrong kind"),
    ({"wall": "0 mm"}, r"mould\.wall: a length must be above zero"),
    ({"wall": "1 mm"}, r"mould\.wall: .*(.|\n)*from 2 mm up to 100 mm"),
    ({"board": "0 mm"}, r"mould\.board: a length must be above zero"),
    ({"pull": [0, 0, 0]}, r"mould\.pull: no direction has this length"),
    ({"pull": "left"}, r"mould\.pull: no such choice(.|\n)*'side' or 'back' or '\+x'"),
    ({"keys": 21}, r"mould\.keys: the number is outside its range(.|\n)*0 to 20"),
    ({"keys": -1}, r"mould\.keys: the number is outside its range"),
    ({"keys": "four"}, r"mould\.keys: the value is of the wrong kind"),
    ({"sprue": {"at": "gill"}}, r"mould\.sprue\.at: no such place(.|\n)*'nose', 'tail', 'back', 'belly', or a point"),
    ({"sprue": {"at": [1, 2]}}, r"mould\.sprue\.at: three finite numbers were expected"),
    ({"sprue": {"diameter": "0 mm"}}, r"mould\.sprue\.diameter: a length must be above zero"),
    ({"vents": "nose"}, r"mould\.vents: no such vents(.|\n)*'auto', or a list of places"),
    ({"vents": ["nose", "ear"]}, r"mould\.vents\[2\]: no such place"),
    ({"vents": []}, r"mould\.vents: the list is empty"),
    ({"bed": ["1 m"]}, r"mould\.bed: a bed has three sizes(.|\n)*found: 1 values"),
    ({"draft_least": "60 deg"}, r"mould\.draft_least: .*(.|\n)*up to 45 deg"),
    ({"tab": {"hole": "9 mm"}}, r"mould\.tab\.hole: the hole is wider than the tab"),
    ({"rubber": "1 mm"}, r"mould\.rubber: no such key"),
]


@pytest.mark.parametrize(("keys", "told"), FAULTS, ids=lambda it: str(it)[:40])
def test_what_is_refused(keys: dict[str, Any], told: str) -> None:
    with pytest.raises(InputError, match=told) as refused:
        read(**keys)
    assert len(refused.value.faults) == 1


def test_all_faults_at_once() -> None:
    with pytest.raises(InputError) as refused:
        read(wall="0 mm", keys=21, board="0 mm", pull=[0, 0, 0])
    assert len(refused.value.faults) == 4
