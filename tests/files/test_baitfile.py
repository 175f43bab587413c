"""The bait file: what it says in SI (conversions by their definitions), its defaults, and its faults, all at once."""

from __future__ import annotations

import math
import re
from pathlib import Path

import pytest

from meshlure.errors import InputError
from meshlure.files import defaults
from meshlure.files.baitfile import BaitFile, read_baitfile
from meshlure.files.sections import water as section
from meshlure.stock import waters

WHOLE = """\
format = 1
[bait]
name = "Alder pool minnow"
length_unit = "in"
nose = "-x"
back = [0.0, -0.001, 2.0]
suspends_within = "0.05 g"
size_checked = true
[water]
temperature = "64.4 degF"
salinity = "0 g/kg"
[body]
mesh = "meshes/body.stl"
cavities = "flooded"
printed = { material = "PLA solid", wall = "1.2 mm", infill = 0.15 }
[[insert]]
name = "belly weight"
mesh = "belly.stl"
material = "lead"
fit = "0.2 mm"
glue = "epoxy clear coat"
free = true
pinned = true
[[insert]]
name = "rattle chamber"
mesh = "chamber.stl"
void = "sealed"
[[insert]]
name = "lip"
mesh = "lip.stl"
density = "1.2 g/cm3"
cavities = "flooded"
lip = true
replaces = ["belly weight"]
[[balls]]
chamber = "rattle chamber"
diameter = "1/4 in"
count = 2
material = "bearing steel"
at = "tail"
[[hardware]]
name = "front treble"
item = "treble 6"
mass = "0.75 g"
material = "carbon steel"
at = [1, 0, -0.5]
hangs = true
wire = "0.9 mm"
wire_length = "70 mm"
[[hardware]]
name = "rear treble"
mass = "1/2 oz"
at = [3, 0, -0.5]
hangs = false
drag_area = "60 mm2"
[coat]
thickness = "0.15 mm"
density = "1150 kg/m3"
[line]
tie = [0.5, 0.0, 0.25]
[areas]
axes = [[1, 2, 2], "-y", "z"]
[retrieve]
speeds = ["0.5 m/s", "3.6 km/h"]
[cast]
energy = "6 J"
rod_mass = "8 g"
angle = "90 deg"
height = "1 m"
line_pull = "20 mN"
wind = "-3 m/s"
[measured]
dry = "18.4 g"
in_water = "-1.2 g"
water = "21 degC"
uncoated = "17.6 g"
[limits]
reserve = ["-0.8 g", "1.6 g"]
nose_up = ["-90 deg", "0 deg"]
"""

LEAST = """\
format = 1
[bait]
length_unit = "mm"
nose = "-x"
back = "+z"
[body]
mesh = "body.stl"
density = "0.72 g/cm3"
"""


def it(*values: object) -> tuple[object, ...]:
    """Values that numbers within a rounding of them are held against."""
    return values


def read(folder: Path, text: str) -> BaitFile:
    path = folder / "minnow.toml"
    path.write_text(text, encoding="utf-8")
    return read_baitfile(path)


def faults(folder: Path, text: str) -> list[str]:
    with pytest.raises(InputError) as caught:
        read(folder, text)
    assert all(fault.where.startswith("minnow.toml: ") for fault in caught.value.faults)
    return [str(fault).removeprefix("minnow.toml: ").replace("\n  ", " | ") for fault in caught.value.faults]


def test_every_key_in_si(tmp_path: Path) -> None:
    bait = read(tmp_path, WHOLE)
    assert bait.path == tmp_path / "minnow.toml"
    assert (bait.bait.name, bait.bait.length_unit, bait.bait.metres) == ("Alder pool minnow", "in", 25.4e-3)
    assert bait.bait.nose == (-1.0, 0.0, 0.0)
    assert bait.bait.back == pytest.approx((0.0, -0.0005, 1.0), rel=1e-6)
    assert (bait.bait.suspends_within, bait.bait.size_checked) == it(pytest.approx(5e-5), True)
    # (64.4 - 32) 5/9 = 18
    assert (bait.water.temperature, bait.water.salinity) == it(pytest.approx(18.0), 0.0)
    assert (bait.water.density, bait.water.assumed) == (None, ())
    assert (bait.body.mesh, bait.body.substance, bait.body.cavities) == (tmp_path / "meshes/body.stl", None, "flooded")
    assert bait.body.printed is not None
    assert bait.body.printed.substance.material == "PLA solid"
    assert (bait.body.printed.wall, bait.body.printed.infill) == it(pytest.approx(1.2e-3), 0.15)

    weight, chamber, lip = bait.inserts
    assert weight.substance is not None
    assert (weight.name, weight.mesh, weight.substance.material) == ("belly weight", tmp_path / "belly.stl", "lead")
    assert (weight.fit, weight.glue, weight.free, weight.pinned) == it(
        pytest.approx(2e-4),
        "epoxy clear coat",
        True,
        True,
    )
    assert (weight.void, weight.lip, weight.replaces, weight.cavities) == (None, False, (), "sealed")
    assert (chamber.void, chamber.substance, chamber.fit, chamber.glue) == ("sealed", None, 0.0, None)
    assert lip.substance is not None
    assert (lip.substance.density, lip.substance.material) == it(pytest.approx(1200.0), None)
    assert (lip.lip, lip.replaces, lip.cavities) == (True, ("belly weight",), "flooded")

    (balls,) = bait.balls
    assert (balls.chamber, balls.count, balls.at) == ("rattle chamber", 2, "tail")
    assert (balls.diameter, balls.substance.material) == it(pytest.approx(6.35e-3), "bearing steel")

    front, rear = bait.hardware
    assert front.substance is not None
    assert (front.item, front.substance.material, front.hangs) == ("treble 6", "carbon steel", True)
    assert front.mass == pytest.approx(0.75e-3)
    assert front.at == pytest.approx((25.4e-3, 0.0, -12.7e-3))
    assert (front.wire, front.wire_length, front.drag_area) == it(pytest.approx(0.9e-3), pytest.approx(70e-3), None)
    # The avoirdupois ounce is 28.349523125 g.
    assert (rear.item, rear.mass, rear.substance) == it(None, pytest.approx(14.1747615625e-3), None)
    assert (rear.hangs, rear.drag_area) == it(False, pytest.approx(60e-6))

    assert bait.coat is not None
    assert (bait.coat.thickness, bait.coat.substance.density) == it(pytest.approx(0.15e-3), pytest.approx(1150.0))
    assert bait.line is not None
    assert bait.line.tie == pytest.approx((12.7e-3, 0.0, 6.35e-3))
    assert bait.areas.axes == it(pytest.approx((1 / 3, 2 / 3, 2 / 3)), (0.0, -1.0, 0.0), (0.0, 0.0, 1.0))
    assert (bait.retrieve.speeds, bait.retrieve.assumed) == it(pytest.approx((0.5, 1.0)), ())
    cast = bait.cast
    assert (cast.speed, cast.energy, cast.rod_mass, cast.sinker) == it(None, 6.0, pytest.approx(8e-3), None)
    assert (cast.angle, cast.height, cast.line_pull, cast.wind) == pytest.approx((math.pi / 2, 1.0, 0.02, -3.0))
    assert cast.assumed == ()
    measured = bait.measured
    assert measured is not None
    assert (measured.dry, measured.in_water, measured.uncoated) == pytest.approx((18.4e-3, -1.2e-3, 17.6e-3))
    assert measured.water == pytest.approx(21.0)
    assert bait.limits is not None
    assert bait.limits.reserve == pytest.approx((-0.8e-3, 1.6e-3))
    assert bait.limits.nose_up == pytest.approx((-math.pi / 2, 0.0))


def test_what_is_not_stated_is_none_or_assumed(tmp_path: Path) -> None:
    bait = read(tmp_path, LEAST)
    assert bait.bait.name == "minnow"
    assert (bait.bait.suspends_within, bait.bait.size_checked) == (None, False)
    assert bait.body.substance is not None
    assert (bait.body.substance.density, bait.body.cavities) == it(pytest.approx(720.0), "sealed")
    assert (bait.inserts, bait.balls, bait.hardware, bait.areas.axes) == ((), (), (), ())
    assert (bait.coat, bait.line, bait.measured, bait.limits) == (None, None, None, None)
    assert (bait.water.temperature, bait.water.salinity) == (defaults.WATER_TEMPERATURE, defaults.WATER_SALINITY)
    assert bait.water.assumed == ("temperature", "salinity")
    assert (bait.retrieve.speeds, bait.retrieve.assumed) == (defaults.RETRIEVE_SPEEDS, ("speeds",))
    assert (bait.cast.speed, bait.cast.angle) == (defaults.CAST_SPEED, defaults.CAST_ANGLE)
    assert bait.cast.assumed == ("speed", "angle", "height", "line_pull", "wind")


def test_only_what_is_missing_is_assumed(tmp_path: Path) -> None:
    sinker = '[cast]\nsinker = { mass = "20 g", diameter = "15 mm", distance = "62 m" }\nheight = "2 m"\n'
    bait = read(tmp_path, LEAST + '[water]\ntemperature = "10 degC"\n' + sinker)
    assert bait.water.assumed == ("salinity",)
    assert bait.cast.sinker is not None
    assert (bait.cast.sinker.mass, bait.cast.sinker.diameter) == pytest.approx((20e-3, 15e-3))
    assert bait.cast.sinker.distance == pytest.approx(62.0)
    assert (bait.cast.speed, bait.cast.assumed) == (None, ("angle", "line_pull", "wind"))


def test_a_stated_density_of_the_water_needs_no_temperature(tmp_path: Path) -> None:
    water = read(tmp_path, LEAST + '[water]\ndensity = "998.6 kg/m3"\n').water
    assert (water.density, water.temperature, water.salinity, water.assumed) == it(pytest.approx(998.6), None, None, ())


def test_every_water_that_the_file_may_state_is_one_that_the_stock_can_make() -> None:
    assert (section.TEMPERATURES, section.SALINITIES) == (waters.TEMPERATURES, waters.SALINITIES)
    assert section.DENSITIES == waters.DENSITIES


def test_the_meshes_by_piece(tmp_path: Path) -> None:
    named = read(tmp_path, WHOLE).meshes()
    assert [mesh.piece for mesh in named] == ["body", "belly weight", "rattle chamber", "lip"]
    assert [mesh.path.name for mesh in named] == ["body.stl", "belly.stl", "chamber.stl", "lip.stl"]
    assert named[0].where == "minnow.toml: body.mesh"
    assert named[2].where == "minnow.toml: insert[2] 'rattle chamber'.mesh"


def test_back_is_turned_by_what_it_missed_of_a_right_angle(tmp_path: Path) -> None:
    within, beyond = math.tan(math.radians(0.099)), math.tan(math.radians(0.101))
    back = read(tmp_path, LEAST.replace('"+z"', f"[{within}, 0, 1]")).bait.back
    assert back == pytest.approx((0.0, 0.0, 1.0), abs=1e-15)
    (fault,) = faults(tmp_path, LEAST.replace('"+z"', f"[{beyond}, 0, 1]"))
    # The angle is measured from the nose, -x.
    assert re.fullmatch(r"bait\.back: .*right angle.*90\.1 degrees between.*89\.9 to 90\.1 degrees.*", fault)


# One change of the whole file, and the one fault that it must be told by.
ONE_FAULT = [
    # sections and keys
    ("format = 1", "format = 2", "format: .*not known | found: 2 | allowed: 1"),
    ("format = 1", "format = true", "format: .*not known"),
    ("format = 1\n", "", "format: .*not known.*'format = 1'"),
    ("[water]", "[watter]", "watter: no such key.*did you mean 'water'"),
    ("[coat]", "[[coat]]", r"coat: .*section of its own.*\[\[coat\]\].*\[coat\]"),
    ("size_checked", "size_cheked", "bait.size_cheked: no such key.*'size_checked'"),
    (
        "pinned = true",
        'colour = "red"',
        r"insert\[1\] 'belly weight'.colour: no such key.*allowed: .*cavities, coated, density",
    ),
    ("tie = [0.5, 0.0, 0.25]\n", "", "line.tie: the key is missing.*add it"),
    ('mesh = "lip.stl"\n', "", r"insert\[3\] 'lip'.mesh: the key is missing"),
    ('name = "lip"\n', "", r"insert\[3\].name: the key is missing"),
    ("hangs = true\n", "", r"hardware\[1\] 'front treble'.hangs: .*missing.*swings.*fixed"),
    # kinds
    ("size_checked = true", 'size_checked = "yes"', "bait.size_checked: .*wrong kind.*'yes'.*true or false"),
    ('mesh = "lip.stl"', "mesh = 3", r"insert\[3\] 'lip'.mesh: .*wrong kind | found: 3"),
    ('mesh = "lip.stl"', 'mesh = " "', r"insert\[3\] 'lip'.mesh: the text is empty"),
    ('name = "lip"', 'name = "li\\u001bp"', r"insert\[3\].name: .*cannot be printed"),
    ("count = 2", "count = 0", r"balls\[1\] 'rattle chamber'.count: .*range.*found: 0.*1 to"),
    ("count = 2", "count = 2.0", r"balls\[1\] 'rattle chamber'.count: .*wrong kind.*whole number"),
    ("infill = 0.15", "infill = 15", "body.printed.infill: .*range.*found: 15.*15% as 0.15"),
    ("infill = 0.15", "infill = nan", "body.printed.infill: .*found: nan"),
    ("at = [1, 0, -0.5]", "at = [1, 0]", r"hardware\[1\] 'front treble'.at: three finite numbers"),
    ("at = [1, 0, -0.5]", "at = [1, inf, 0]", r"hardware\[1\] 'front treble'.at: three finite numbers"),
    ("at = [1, 0, -0.5]", "at = [1, true, 0]", r"hardware\[1\] 'front treble'.at: three finite numbers"),
    ('name = "Alder pool minnow"', "name = 2026-01-01", "bait.name: .*wrong kind"),
    # directions
    ('nose = "-x"', 'nose = "-q"', r"bait.nose: no such direction.*'-q'.*\+x, -x"),
    ('nose = "-x"', "nose = [0, 0, 0]", "bait.nose: no direction has this length"),
    ('nose = "-x"', 'nose = "+z"', "bait.back: .*right angle"),
    ("[[1, 2, 2], ", '["up", ', r"areas.axes\[1\]: no such direction"),
    ('axes = [[1, 2, 2], "-y", "z"]', "axes = []", "areas.axes: the list is empty"),
    ('axes = [[1, 2, 2], "-y", "z"]', "axes = [1, 2, 2]", "areas.axes: .*wrong kind.*list of directions"),
    # quantities
    ('length_unit = "in"', 'length_unit = "furlong"', "bait.length_unit: .*furlong.*mm, cm, m, in"),
    ('"1.2 g/cm3"', "1.2", r"insert\[3\] 'lip'.density: .*no unit.*'1.2 g/cm3' or '1200 kg/m3'"),
    ('"1.2 g/cm3"', '"0 g/cm3"', r"insert\[3\] 'lip'.density: .*above zero"),
    ('"1.2 g/cm3"', '"-1.2 g/cm3"', r"insert\[3\] 'lip'.density: .*above zero"),
    ('"1.2 g/cm3"', '"1.2 mm"', r"insert\[3\] 'lip'.density: .*not a unit of a density"),
    ('"1/4 in"', '"0 mm"', r"balls\[1\] 'rattle chamber'.diameter: .*above zero"),
    ('"0.15 mm"', '"6 mm"', "coat.thickness: .*6 mm.*up to 5 mm"),
    ('"3.6 km/h"', '"0 m/s"', r"retrieve.speeds\[2\]: .*above zero"),
    ('"3.6 km/h"', '"101 m/s"', r"retrieve.speeds\[2\]: .*101 m/s.*up to 100 m/s"),
    ('"90 deg"', '"90.1 deg"', "cast.angle: .*90.1 deg.*-90 deg up to 90 deg"),
    ('"-3 m/s"', '"-101 m/s"', "cast.wind: .*-101 m/s"),
    ('"1 m"', '"-1 m"', "cast.height: .*-1 m"),
    ('"64.4 degF"', '"140 degF"', "water.temperature: .*140 degF.*from 0 degC up to 40 degC"),
    ('"64.4 degF"', '"31 degF"', "water.temperature: .*31 degF.*from 0 degC up to 40 degC"),
    ('"0 g/kg"', '"42.1 g/kg"', "water.salinity: .*42.1 g/kg.*42 g/kg"),
    ('salinity = "0 g/kg"', 'density = "979 kg/m3"', "water.density: .*979 kg/m3.*from 0.98 g/cm3 up to 1.1 g/cm3"),
    ('salinity = "0 g/kg"', 'density = "1.11 g/cm3"', "water.density: .*1.11 g/cm3.*from 0.98 g/cm3 up to 1.1 g/cm3"),
    ('water = "21 degC"', 'water = "-1 degC"', "measured.water: .*-1 degC.*from 0 degC up to 40 degC"),
    # what excludes or needs what
    (
        'material = "lead"',
        'material = "lead"\ndensity = "11 g/cm3"',
        r"insert\[1\] 'belly weight': only one.*density, material",
    ),
    ('material = "lead"\n', "", r"insert\[1\] 'belly weight': a key is missing.*density, material, void"),
    (
        'void = "sealed"',
        'void = "sealed"\nmaterial = "lead"',
        r"insert\[2\] 'rattle chamber': only one.*material, void",
    ),
    ('void = "sealed"', 'void = "seald"', r"insert\[2\] 'rattle chamber'.void: no such choice.*'seald'.*mean 'sealed'"),
    ("printed = {", 'density = "1 g/cm3"\nprinted = {', "body: only one.*density, printed"),
    ('material = "PLA solid", ', "", "body.printed: a key is missing.*density, material"),
    ('density = "1150 kg/m3"\n', "", "coat: a key is missing.*density, material"),
    ('material = "bearing steel"\n', "", r"balls\[1\] 'rattle chamber': a key is missing"),
    ('fit = "0.2 mm"\n', "", r"insert\[1\] 'belly weight'.glue: there is no gap"),
    ("lip = true", 'lip = true\nname2 = "x"', r"insert\[3\] 'lip'.name2: no such key.*'name'"),
    ('void = "sealed"', 'void = "sealed"\nlip = true', r"insert\[2\] 'rattle chamber'.lip: a hollow space is no lip"),
    ('["belly weight"]', '["belly wieght"]', r"insert\[3\] 'lip'.replaces: no insert.*mean 'belly weight'"),
    ('["belly weight"]', '["lip"]', r"insert\[3\] 'lip'.replaces: .*cannot replace itself"),
    ('["belly weight"]', '["body"]', r"insert\[3\] 'lip'.replaces: every insert replaces the body"),
    ('["belly weight"]', '"belly weight"', r"insert\[3\] 'lip'.replaces: .*wrong kind"),
    ("pinned = true", 'replaces = ["lip"]', r"insert\[1\] .*replaces: .*only replace one before.*below 'lip'"),
    ('chamber = "rattle chamber"', 'chamber = "lip"', r"balls\[1\] 'lip'.chamber: .*this insert is solid"),
    (
        'chamber = "rattle chamber"',
        'chamber = "ratle chamber"',
        r"balls\[1\] .*chamber: no insert.*mean 'rattle chamber'",
    ),
    ('at = "tail"', 'at = "middle"', r"balls\[1\] 'rattle chamber'.at: no such choice.*'nose' or 'tail'"),
    ('name = "lip"', 'name = "Belly Weight"', r"insert\[3\] 'Belly Weight'.name: two pieces have one name"),
    ('name = "rear treble"', 'name = "body"', r"hardware\[2\] 'body'.name: two pieces.*the body"),
    ('mass = "1/2 oz"\n', "", r"hardware\[2\] 'rear treble': nothing says what this weighs"),
    ("drag_area", 'wire = "1 mm"\ndrag_area', r"hardware\[2\] 'rear treble': only one.*wire, drag_area"),
    ('salinity = "0 g/kg"', 'salinity = "0 g/kg"\ndensity = "998 kg/m3"', "water: only one.*density, salinity"),
    ("energy =", 'speed = "25 m/s"\nenergy =', "cast: only one.*speed, energy"),
    ('rod_mass = "8 g"\n', "", "cast.rod_mass: .*missing beside energy"),
    ('energy = "6 J"\n', "", "cast.rod_mass: .*only beside energy"),
    ('dry = "18.4 g"', 'dry = "-1.3 g"', "measured.dry: .*above zero"),
    ('in_water = "-1.2 g"', 'in_water = "18.4 g"', "measured.in_water: nothing weighs as much"),
    ('["-0.8 g", "1.6 g"]', '["1.6 g", "-0.8 g"]', "limits.reserve: .*wrong way round"),
    ('["-0.8 g", "1.6 g"]', '["1.6 g"]', "limits.reserve: a range takes two"),
    ('["-90 deg", "0 deg"]', '["-91 deg", "0 deg"]', r"limits.nose_up\[1\]: .*-91 deg"),
]


@pytest.mark.parametrize(("old", "new", "told"), ONE_FAULT)
def test_one_fault_one_message(tmp_path: Path, old: str, new: str, told: str) -> None:
    assert old in WHOLE
    said = faults(tmp_path, WHOLE.replace(old, new, 1))
    assert re.match(told, said[0]), said
    assert len(said) == 1, said


def test_all_faults_at_once_in_the_files_sections(tmp_path: Path) -> None:
    text = LEAST.replace('"mm"', '"furlong"').replace("0.72 g/cm3", "0.72")
    text += '[[insert]]\nname = "lip"\nvoid = "open"\n[[insert]]\n[retrieve]\nspeeds = [1]\n[colour]\n'
    where = [fault.split(": ")[0] for fault in faults(tmp_path, text)]
    assert where == [
        "bait.length_unit",
        "insert[1] 'lip'.void",
        "insert[1] 'lip'.mesh",
        "insert[2].name",
        "insert[2]",
        "insert[2].mesh",
        "body.density",
        "retrieve.speeds[1]",
        "colour",
    ]


def test_a_section_that_is_missing_is_told_once(tmp_path: Path) -> None:
    assert [fault.split(" | ")[0] for fault in faults(tmp_path, "format = 1\n")] == [
        "bait: the section is missing",
        "body: the section is missing",
    ]


SLIPS = [
    ('density = "0.72 g/cm3"', 'densty = "0.72 g/cm3"', "body.densty: no such key.*did you mean 'density'"),
    ('length_unit = "mm"', 'length-unit = "mm"', "bait.length-unit: no such key.*did you mean 'length_unit'"),
    ("[body]", "[boddy]", "boddy: no such key.*did you mean 'body'"),
    ("hangs = true", "hang = true", r"hardware\[1\] 'treble'.hang: no such key.*did you mean 'hangs'"),
    ('mass = "1 g"', 'mas = "1 g"', r"hardware\[1\] 'treble'.mas: no such key.*did you mean 'mass'"),
]


@pytest.mark.parametrize(("old", "new", "told"), SLIPS)
def test_a_mistyped_key_is_not_told_as_a_missing_one_too(tmp_path: Path, old: str, new: str, told: str) -> None:
    text = LEAST + '[[hardware]]\nname = "treble"\nmass = "1 g"\nat = [1, 2, 3]\nhangs = true\n'
    assert old in text
    (fault,) = faults(tmp_path, text.replace(old, new))
    assert re.match(told, fault), fault


def test_a_mistyped_key_beside_the_right_one_takes_no_other_fault_away(tmp_path: Path) -> None:
    text = LEAST.replace('density = "0.72 g/cm3"', 'colour = "red"\nmesk = "body.stl"')
    assert [fault.split(" | ")[0] for fault in faults(tmp_path, text)] == [
        "body: a key is missing",
        "body.colour: no such key",
        "body.mesk: no such key",
    ]


def test_a_section_written_as_a_key(tmp_path: Path) -> None:
    (fault,) = faults(tmp_path, "areas = [[1, 2, 2]]\n" + LEAST)
    assert re.match(r"areas: .*section of its own.*found: areas = \[\[1, 2, 2\]\].*write \[areas\]", fault)
    (fault,) = faults(tmp_path, "insert = 3\n" + LEAST)
    assert re.match(r"insert: there may be several.*found: insert = 3.*write \[\[insert\]\]", fault)
    (fault,) = faults(tmp_path, LEAST + "[insert]\n")
    assert re.match(r"insert: there may be several.*found: \[insert\].*write \[\[insert\]\]", fault)


def test_two_balls_sections_for_one_chamber(tmp_path: Path) -> None:
    more = '[[balls]]\nchamber = "rattle chamber"\ndiameter = "3 mm"\ncount = 1\nmaterial = "lead"\n'
    (fault,) = faults(tmp_path, WHOLE + more)
    assert fault.startswith("balls[2] 'rattle chamber'.chamber: other balls lie in this chamber already")


def test_limits_of_a_flight_in_the_cast(tmp_path: Path) -> None:
    text = LEAST.replace("[body]", '[cast]\nsteady_within = "15 deg"\nsways_within = "50 deg"\n[body]')
    (tmp_path / "bait.toml").write_text(text, encoding="utf-8")
    cast = read_baitfile(tmp_path / "bait.toml").cast
    assert (cast.steady_within, cast.sways_within) == pytest.approx((math.radians(15), math.radians(50)))
    (tmp_path / "bait.toml").write_text(text.replace("15 deg", "55 deg"), encoding="utf-8")
    with pytest.raises(InputError, match="steady flight is within"):
        read_baitfile(tmp_path / "bait.toml")
