"""[target], [ballast] and [chamber]: in SI by the units' definitions, their defaults, and what cannot be meant."""

from __future__ import annotations

import math
import re
from pathlib import Path

import pytest

from meshlure.errors import InputError
from meshlure.files import defaults
from meshlure.files.baitfile import BaitFile, read_baitfile
from meshlure.files.sections.chamber import BallChoice, Tube

LEAST = """\
format = 1
[bait]
length_unit = "cm"
nose = "-x"
back = "+z"
[body]
mesh = "body.stl"
density = "0.72 g/cm3"
"""

WHOLE = (
    LEAST
    + """\
[target]
behaviour = "floats"
reserve = "1/4 oz"
nose_up = "-5 deg"
lean = "0 deg"
vary = "body density"
[ballast]
materials = ["pewter", "lead"]
shapes = ["ball"]
cover = "2 mm"
keep_clear = "0 mm"
between = ["20 mm", "3 in"]
pocket = "from belly"
fit = "0.2 mm"
glue = "epoxy clear coat"
[chamber]
balls = [
  { diameter = ["5 mm", "1/4 in"], count = [1, 3], material = "bearing steel" },
  { diameter = "8 mm", count = 2, material = "soda-lime glass" },
]
clearance = "0.1 mm"
wall = "1 mm"
end_wall = "2.5 mm"
slope = "60 deg"
open_to = "tail"
tube = { material = "brass", wall = "0.25 mm" }
"""
)


def read(folder: Path, text: str) -> BaitFile:
    path = folder / "stick.toml"
    path.write_text(text, encoding="utf-8")
    return read_baitfile(path)


def faults(folder: Path, text: str) -> list[str]:
    with pytest.raises(InputError) as caught:
        read(folder, text)
    assert all(fault.where.startswith("stick.toml: ") for fault in caught.value.faults)
    return [str(fault).removeprefix("stick.toml: ").replace("\n  ", " | ") for fault in caught.value.faults]


def test_every_key_in_si(tmp_path: Path) -> None:
    bait = read(tmp_path, WHOLE)
    target, ballast, chamber = bait.target, bait.ballast, bait.chamber
    assert target is not None
    # The avoirdupois ounce is 28.349523125 g, since 1959.
    assert target.reserve == pytest.approx(28.349523125e-3 / 4, rel=1e-12)
    assert (target.behaviour, target.submerged, target.sink, target.vary) == ("floats", None, None, "body density")
    assert (target.nose_up, target.lean) == pytest.approx((-math.pi / 36, 0.0), rel=1e-12)
    assert (ballast.materials, ballast.shapes) == (("pewter", "lead"), ("ball",))
    assert (ballast.cover, ballast.keep_clear, ballast.fit) == pytest.approx((2e-3, 0.0, 2e-4), rel=1e-12)
    # From the nose in a unit of their own, whatever the mesh's is; the inch is 25.4 mm.
    assert ballast.between == pytest.approx((20e-3, 76.2e-3), rel=1e-12)
    assert (ballast.pocket, ballast.glue, ballast.assumed) == ("from belly", "epoxy clear coat", ())
    assert chamber is not None
    first, second = chamber.balls
    assert first.diameters == pytest.approx((5e-3, 6.35e-3), rel=1e-12)
    assert (first.counts, first.material) == ((1, 3), "bearing steel")
    assert second == BallChoice((8e-3,), (2,), "soda-lime glass")
    assert (chamber.clearance, chamber.wall, chamber.end_wall) == pytest.approx((1e-4, 1e-3, 2.5e-3), rel=1e-12)
    assert chamber.slope == pytest.approx(math.pi / 3, rel=1e-12)
    assert (chamber.open_to, chamber.tube, chamber.assumed) == ("tail", Tube("brass", 0.25e-3), ())


def test_what_is_not_stated_is_none_or_assumed(tmp_path: Path) -> None:
    bait = read(tmp_path, LEAST)
    assert (bait.target, bait.chamber) == (None, None)
    ballast = bait.ballast
    assert ballast.materials == ("lead", "tungsten heavy alloy 90% W", "brass")
    assert (ballast.shapes, ballast.cover, ballast.keep_clear) == (("rod", "ball"), 1.5e-3, 1e-3)
    assert (ballast.between, ballast.pocket, ballast.fit, ballast.glue) == (None, "embedded", 0.0, None)
    assert ballast.assumed == ("materials", "shapes", "cover", "keep_clear", "pocket")
    text = '[chamber]\nballs = [{ diameter = "6 mm", count = 1, material = "lead" }]\nwall = "2 mm"\n'
    chamber = read(tmp_path, f'{LEAST}[target]\nbehaviour = "suspends"\n{text}').chamber
    assert chamber is not None
    assert (chamber.clearance, chamber.end_wall, chamber.slope) == (0.5e-3, 2e-3, defaults.CHAMBER_SLOPE)
    assert chamber.slope == pytest.approx(8 * math.pi / 180, rel=1e-12)
    assert (chamber.open_to, chamber.tube) == ("none", None)
    assert chamber.assumed == ("clearance", "end_wall", "slope", "open_to")


WANTED = [
    ('behaviour = "suspends"', ("suspends", None, None, None)),
    ('behaviour = "suspends"\nreserve = "0.1 g"', ("suspends", 1e-4, None, None)),
    ('behaviour = "floats"\nsubmerged = 0.8', ("floats", None, 0.8, None)),
    ('behaviour = "sinks"\nreserve = "-2 g"', ("sinks", -2e-3, None, None)),
    ('behaviour = "sinks"\nsink = "6 cm/s"', ("sinks", None, None, 0.06)),
    ('reserve = "0 g"', (None, 0.0, None, None)),
    ('nose_up = "90 deg"', (None, None, None, None)),
]


@pytest.mark.parametrize(("text", "wanted"), WANTED)
def test_what_can_be_wanted(tmp_path: Path, text: str, wanted: tuple[object, ...]) -> None:
    target = read(tmp_path, f"{LEAST}[target]\n{text}\n").target
    assert target is not None
    assert (target.behaviour, target.reserve, target.submerged, target.sink) == wanted
    assert target.vary == "ballast"


# What [target] says, and the one fault that it must be told by.
CLASHES = [
    ("", "target: the section asks for nothing.*behaviour, reserve.*remove the section"),
    ('vary = "ballast"', "target: the section asks for nothing"),
    ('behaviour = "floats"', "target: nothing says how much it floats.*reserve, above 0, or submerged.*add reserve"),
    ('behaviour = "sinks"\nnose_up = "0 deg"', "target: nothing says how much it sinks.*reserve, below 0, or sink"),
    ('behaviour = "floats"\nreserve = "0 g"', r"target.reserve: what floats has.*reserve 0.00 g.*above 0 g.*the sign"),
    ('behaviour = "floats"\nreserve = "-1 g"', r"target.reserve: what floats.*'floats', reserve -1.00 g"),
    ('behaviour = "floats"\nsink = "6 cm/s"', "target.sink: what floats does not sink.*'floats', sink 0.06 m/s"),
    ('behaviour = "sinks"\nreserve = "0 g"', "target.reserve: what sinks has a reserve below 0"),
    ('behaviour = "sinks"\nsubmerged = 0.9', "target.submerged: what sinks is wholly.*submerged 0.9.*remove submerged"),
    ('behaviour = "suspends"\nsubmerged = 0.9', "target.submerged: what suspends is wholly"),
    ('behaviour = "suspends"\nsink = "1 cm/s"', "target.sink: what suspends does not sink"),
    ('behaviour = "floats"\nreserve = "-1 g"\nsubmerged = 0.5', "target: only one of these.*reserve, submerged"),
    ('behaviour = "floats"\nreserve = "1 g"\nsink = "1 m/s"', "target: only one of these.*reserve, sink"),
    ("submerged = 1.0", "target.submerged: the share is outside.*found: 1.0.*above 0 and below 1"),
    ("submerged = 0", "target.submerged: the share is outside.*found: 0"),
    ("submerged = 80", "target.submerged: the share is outside.*found: 80"),
    ('submerged = "80 %"', "target.submerged: .*wrong kind"),
    ('sink = "0 m/s"', "target.sink: .*above zero"),
    ('sink = "6 m/s"', "target.sink: .*up to 5 m/s"),
    ("reserve = 1.2", "target.reserve: .*no unit.*'1.2 g'"),
    ('behaviour = "float"', "target.behaviour: no such choice.*did you mean 'floats'"),
    ('behaviour = "sinks"\nreserve = "-1 oz"\nvary = "density"', "target.vary: no such choice.*body density"),
    ('nose_up = "-91 deg"', "target.nose_up: .*-91 deg.*-90 deg up to 90 deg"),
    ('lean = "91 deg"', "target.lean: .*91 deg"),
    ('nose_up = "-90 deg"\nlean = "0 deg"', "target.lean: a bait that stands on end has no lean"),
    ('reserv = "1 g"\nlean = "0 deg"', "target.reserv: no such key.*did you mean 'reserve'"),
]


@pytest.mark.parametrize(("text", "told"), CLASHES)
def test_what_cannot_be_wanted(tmp_path: Path, text: str, told: str) -> None:
    said = faults(tmp_path, f"{LEAST}[target]\n{text}\n")
    assert re.match(told, said[0]), said
    assert len(said) == 1, said


# One change of the whole file, and the one fault that it must be told by.
ONE_FAULT = [
    ('["pewter", "lead"]', "[]", "ballast.materials: the list is empty"),
    ('["pewter", "lead"]', '"lead"', "ballast.materials: .*wrong kind.*list of names"),
    ('["pewter", "lead"]', '["lead", "Lead"]', "ballast.materials: the list says the same twice.*'lead', 'Lead'"),
    ('["ball"]', '["bal"]', "ballast.shapes: no such choice.*'bal'.*mean 'ball'"),
    ('["ball"]', '["rod", "rod"]', "ballast.shapes: the list says the same twice"),
    ('cover = "2 mm"', 'cover = "-2 mm"', "ballast.cover: .*too low.*-2 mm"),
    ('keep_clear = "0 mm"', 'keep_clear = "51 mm"', "ballast.keep_clear: .*51 mm.*up to 50 mm"),
    ('["20 mm", "3 in"]', '["3 in", "20 mm"]', "ballast.between: .*wrong way round"),
    ('["20 mm", "3 in"]', '["20 mm", "2 cm"]', "ballast.between: .*without length.*twice 20 mm"),
    ('["20 mm", "3 in"]', '["-1 mm", "20 mm"]', r"ballast.between\[1\]: .*too low"),
    ('["20 mm", "3 in"]', '["20 mm"]', "ballast.between: a range takes two"),
    ('"from belly"', '"from the belly"', "ballast.pocket: no such choice.*mean 'from belly'"),
    ('fit = "0.2 mm"', 'fit = "5.1 mm"', "ballast.fit: .*up to 5 mm"),
    ('fit = "0.2 mm"', 'fit = "0 mm"', "ballast.glue: there is no gap for the glue.*remove glue"),
    ('fit = "0.2 mm"\n', "", "ballast.glue: there is no gap for the glue"),
    ("cover =", "covr =", "ballast.covr: no such key.*did you mean 'cover'"),
    ("[ballast]", "[[ballast]]", "ballast: .*section of its own"),
    ('["5 mm", "1/4 in"]', "[]", r"chamber.balls\[1\].diameter: the list is empty"),
    ('["5 mm", "1/4 in"]', '["6.35 mm", "1/4 in"]', r"chamber.balls\[1\].diameter: .*same twice"),
    ('["5 mm", "1/4 in"]', '["5 mm", "0 mm"]', r"chamber.balls\[1\].diameter\[2\]: .*above zero"),
    ('["5 mm", "1/4 in"]', "5", r"chamber.balls\[1\].diameter: .*no unit.*'5 mm'"),
    ('diameter = "8 mm", ', "", r"chamber.balls\[2\].diameter: the key is missing.*diameter = \"6 mm\""),
    ("[1, 3]", "[1, 21]", r"chamber.balls\[1\].count\[2\]: .*range.*found: 21.*1 to 20"),
    ("[1, 3]", "0", r"chamber.balls\[1\].count: .*range.*found: 0.*1 to 20"),
    ("[1, 3]", "[]", r"chamber.balls\[1\].count: the list is empty"),
    ("[1, 3]", "[3, 3]", r"chamber.balls\[1\].count: .*same twice"),
    ("[1, 3]", "[1, 2.0]", r"chamber.balls\[1\].count\[2\]: .*wrong kind.*2.0"),
    ("[1, 3]", "true", r"chamber.balls\[1\].count: .*wrong kind"),
    (', material = "soda-lime glass"', "", r"chamber.balls\[2\].material: the key is missing"),
    ("count = 2,", 'count = 2, colour = "red",', r"chamber.balls\[2\].colour: no such key"),
    ('clearance = "0.1 mm"', 'clearance = "0.09 mm"', "chamber.clearance: .*0.09 mm.*from 0.1 mm up to 3 mm"),
    ('wall = "1 mm"', 'wall = "0 mm"', "chamber.wall: .*above zero"),
    ('"2.5 mm"', '"-1 mm"', "chamber.end_wall: .*above zero"),
    ('"60 deg"', '"61 deg"', "chamber.slope: .*61 deg.*from 0 deg up to 60 deg"),
    ('"60 deg"', '"-1 deg"', "chamber.slope: .*-1 deg"),
    ('open_to = "tail"', 'open_to = "top"', "chamber.open_to: no such choice.*'nose' or 'tail' or 'belly' or 'none'"),
    (', wall = "0.25 mm"', "", "chamber.tube.wall: the key is missing"),
    ('{ material = "brass", wall = "0.25 mm" }', '"brass"', "chamber.tube: .*wrong kind"),
]


@pytest.mark.parametrize(("old", "new", "told"), ONE_FAULT)
def test_one_fault_one_message(tmp_path: Path, old: str, new: str, told: str) -> None:
    assert old in WHOLE
    said = faults(tmp_path, WHOLE.replace(old, new, 1))
    assert re.match(told, said[0]), said
    assert len(said) == 1, said


@pytest.mark.parametrize(
    ("balls", "told"),
    [
        ("", r"chamber.balls: the key is missing.*balls = \[\{ diameter"),
        ("balls = []", "chamber.balls: the list is empty"),
        ("balls = 3", "chamber.balls: .*wrong kind.*list of tables"),
        ('balls = ["6 mm"]', r"chamber.balls\[1\]: a table was expected"),
        ('ball = [{ diameter = "6 mm", count = 1, material = "lead" }]', "chamber.ball: no such key.*mean 'balls'"),
    ],
)
def test_a_chamber_needs_balls(tmp_path: Path, balls: str, told: str) -> None:
    said = faults(tmp_path, f"{LEAST}[chamber]\n{balls}\n")
    assert re.match(told, said[0]), said
    assert len(said) == 1, said


def test_balls_may_be_tables_of_their_own(tmp_path: Path) -> None:
    table = '[[chamber.balls]]\ndiameter = "6 mm"\ncount = 2\nmaterial = "lead"\n'
    chamber = read(tmp_path, f"{LEAST}{table}").chamber
    assert chamber is not None
    assert chamber.balls == (BallChoice((6e-3,), (2,), "lead"),)
