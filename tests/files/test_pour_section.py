"""[pour], [measured] and a printed body as the bait file states them, and every fault of theirs."""

from __future__ import annotations

import re
from pathlib import Path

import pytest

from meshlure.errors import InputError
from meshlure.files.baitfile import BaitFile, bait_of
from meshlure.files.toml import toml_table

HEAD = """\
format = 1
[bait]
length_unit = "mm"
nose = "-x"
back = "+z"
[body]
mesh = "body.stl"
"""
CAST = HEAD + 'density = "0.72 g/cm3"\n'


def read(text: str) -> BaitFile:
    return bait_of(toml_table(text, Path("bait.toml")), Path(), "bait")


def test_a_mix_in_si() -> None:
    pour = read(
        CAST
        + """[pour]
resin = "epoxy casting resin"
balloons = "0.13 g/cm3"
ratio = [100, 43]
by = "volume"
densities = ["1.13 g/cm3", "950 kg/m3"]
waste = "15 %"
baits = 6
packing = "62 %"
mass = "1/2 oz"
"""
    ).pour
    assert (pour.resin.material, pour.resin.density) == ("epoxy casting resin", None)
    assert pour.balloons.material is None
    assert pour.balloons.density == pytest.approx(130.0)
    assert pour.ratio == (100.0, 43.0)
    assert pour.by == "volume"
    assert pour.densities == pytest.approx((1130.0, 950.0))
    assert (pour.waste, pour.packing) == pytest.approx((0.15, 0.62))
    assert pour.baits == 6
    # Half an avoirdupois ounce of 28.349523125 g.
    assert pour.mass == pytest.approx(14.1747615625e-3)
    assert pour.assumed == ()


def test_a_mix_that_is_not_stated_is_assumed() -> None:
    pour = read(CAST).pour
    assert (pour.ratio, pour.by, pour.waste, pour.baits, pour.mass) == ((1.0, 1.0), "weight", 0.10, 1, None)
    assert pour.assumed == ("resin", "balloons", "ratio", "waste", "packing")
    assert "densities" in read(CAST + '[pour]\nby = "volume"\n').pour.assumed


def test_weighings_and_a_print() -> None:
    measured = read(
        CAST
        + """[measured]
dry = "18.4 g"
reserve = "1.2 g"
water = "21 degC"
salinity = "3 g/kg"
coat = "0.9 g"
step = "0.1 g"
"""
    ).measured
    assert measured is not None
    assert (measured.dry, measured.reserve, measured.coat, measured.step) == pytest.approx(
        (18.4e-3, 1.2e-3, 0.9e-3, 1e-4)
    )
    assert (measured.in_water, measured.uncoated, measured.assumed) == (None, None, ())
    assert (measured.water, measured.salinity) == pytest.approx((21.0, 3.0))
    printed = read(HEAD + 'printed = { material = "PLA", wall = "1.2 mm", infill = 0.15, solid = 0.95 }\n').body.printed
    assert printed is not None
    assert printed.solid == 0.95


FAULTS = [
    ("[pour]\nratio = [1, 0]", r"pour.ratio: a ratio takes two numbers above 0.*found: 1, 0"),
    ("[pour]\nratio = [1, 1, 1]", r"pour.ratio: a ratio takes two"),
    ('[pour]\nratio = ["1", 1]', r"pour.ratio\[1\]: a number was expected.*found: '1'"),
    ("[pour]\nratio = [1, nan]", r"pour.ratio\[2\]: a number was expected.*found: nan"),
    ('[pour]\nratio = "1:1"', r"pour.ratio: .*wrong kind.*a list of numbers"),
    ('[pour]\nby = "weigth"', r"pour.by: no such choice.*mean 'weight'"),
    ('[pour]\ndensities = ["1.1 g/cm3", "1 g/cm3"]', r"pour.densities: .*by weight need no densities"),
    ('[pour]\nby = "volume"\ndensities = ["1.1 g/cm3"]', r"pour.densities: there are two parts.*found: 1"),
    ('[pour]\nwaste = "-1 %"', r"pour.waste: .*-1 %"),
    ("[pour]\nwaste = 0.1", r"pour.waste: the number has no unit.*'0.1 %'"),
    ('[pour]\nresin = "1.05"', r"pour.resin: the number has no unit.*'1.05 g/cm3'"),
    ('[pour]\nballoons = "-150 kg/m3"', r"pour.balloons: .*above zero"),
    ("[pour]\nresin = 3", r"pour.resin: .*wrong kind"),
    ("[pour]\nbaits = 0", r"pour.baits: .*range.*found: 0"),
    ('[pour]\npacking = "80 %"', r"pour.packing: .*80 %.*from 30 % up to 75 %"),
    ('[pour]\nmass = "0 g"', r"pour.mass: .*above zero"),
    ('[pour]\nresine = "epoxy"', r"pour.resine: no such key.*'resin'"),
    ('[measured]\nwater = "20 degC"', r"measured: the section holds no weighing"),
    ('[measured]\ndry = "-2 g"', r"measured.dry: .*above zero"),
    ('[measured]\ndry = "20 g"\nin_water = "20 g"', r"measured.in_water: nothing weighs as much"),
    ('[measured]\ndry = "20 g"\nreserve = "-20 g"', r"measured.reserve: nothing weighs as much"),
    ('[measured]\ndry = "20 g"\ncoat = "20 g"', r"measured.coat: a part weighs as much as the whole"),
    ('[measured]\ndry = "20 g"\nuncoated = "21 g"', r"measured.uncoated: a part weighs as much"),
    ('[measured]\nin_water = "1 g"\nreserve = "-1 g"', r"measured: only one of these keys.*in_water, reserve"),
    ('[measured]\ndry = "20 g"\nsalinity = "35 g/kg"', r"measured.salinity: .*no temperature"),
    ('[measured]\ndry = "20 g"\nstep = "0 g"', r"measured.step: .*above zero"),
]


@pytest.mark.parametrize(("more", "told"), FAULTS)
def test_one_fault_one_message(more: str, told: str) -> None:
    with pytest.raises(InputError) as caught:
        read(f"{CAST}{more}\n")
    (fault,) = caught.value.faults
    assert re.match(told, str(fault).replace("\n", " ")), str(fault)


@pytest.mark.parametrize(
    ("printed", "told"),
    [
        ('material = "PLA", wall = "0 mm", infill = 0.15', "body.printed.wall: .*above zero"),
        ('material = "PLA", wall = "1.2 mm", infill = 2', "body.printed.infill: .*range.*found: 2"),
        ('material = "PLA", wall = "1.2 mm", infill = 0.15, solid = 1.2', "body.printed.solid: .*range.*1.2"),
        ('density = "1.2 g/cm3", wall = "1.2 mm", infill = 0.15, solid = 0.9', "body.printed.solid: a stated density"),
    ],
)
def test_a_print_that_cannot_be(printed: str, told: str) -> None:
    with pytest.raises(InputError) as caught:
        read(f"{HEAD}printed = {{ {printed} }}\n")
    (fault,) = caught.value.faults
    assert re.match(told, str(fault).replace("\n", " ")), str(fault)
