"""What the fuzz starts from: small sound files of every format, the broken ones, and bait files with every section."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from pathlib import Path
from typing import Final

import shapes

from meshlure.files.stl import stl_bytes

TESTS: Final = Path(__file__).parents[1]
KINDS: Final = ("stl", "obj", "3mf", "ply", "off", "glb")
_LARGEST: Final = 60_000
"""Bytes. A larger seed costs turns and adds nothing."""

MESHES: Final[Mapping[str, bytes]] = {
    "body.stl": stl_bytes(shapes.ellipsoid((0.04, 0.007, 0.01), 2)),
    "weight.stl": stl_bytes(shapes.box((0.006, 0.004, 0.004), (0.0, 0.0, -0.004))),
    "bore.stl": stl_bytes(shapes.cylinder(0.003, 0.015, 12)),
    "lip.stl": stl_bytes(shapes.box((0.012, 0.012, 0.0015), (-0.04, 0.0, -0.003))),
}
"""What the bait files name."""

EVERYTHING: Final = """\
format = 1
[bait]
name = "Fuzzed flank"
length_unit = "mm"
nose = "-x"
back = [0.0, 0.0, 1.0]
size_checked = true
suspends_within = "0.1 g"
[water]
temperature = "18 degC"
salinity = "3 g/kg"
[body]
mesh = "body.stl"
density = "0.62 g/cm3"
cavities = "sealed"
[[insert]]
name = "weight"
mesh = "weight.stl"
material = "lead"
fit = "0.1 mm"
glue = "epoxy clear coat"
free = true
pinned = true
[[insert]]
name = "bore"
mesh = "bore.stl"
void = "sealed"
replaces = ["weight"]
[[insert]]
name = "lip"
mesh = "lip.stl"
density = "1.2 g/cm3"
lip = true
coated = true
[[balls]]
chamber = "bore"
diameter = "4 mm"
count = 2
material = "bearing steel"
at = "nose"
[[hardware]]
name = "treble"
item = "treble 6"
mass = "0.75 g"
material = "carbon steel"
at = [5.0, 0.0, -10.0]
hangs = true
[coat]
thickness = "0.15 mm"
material = "epoxy clear coat"
[line]
tie = [-40.0, 0.0, 2.0]
[areas]
axes = [[1, 0, -1], "+y"]
[retrieve]
speeds = ["0.5 m/s", "1 m/s"]
[cast]
energy = "6 J"
rod_mass = "8 g"
angle = "40 deg"
height = "2 m"
steady_within = "20 deg"
sways_within = "60 deg"
[measured]
dry = "8.4 g"
in_water = "-0.4 g"
[limits]
reserve = ["0.7 g", "1.4 g"]
nose_up = ["0 deg", "12 deg"]
[target]
behaviour = "floats"
reserve = "1.0 g"
nose_up = "4 deg"
lean = "0 deg"
[ballast]
materials = ["lead", "brass"]
shapes = ["rod", "ball"]
cover = "1.5 mm"
keep_clear = "1.0 mm"
between = ["10 mm", "60 mm"]
pocket = "embedded"
fit = "0.2 mm"
glue = "epoxy clear coat"
[chamber]
balls = [{ diameter = ["4 mm", "5 mm"], count = [1, 2], material = "bearing steel" }]
clearance = "0.5 mm"
wall = "1.2 mm"
end_wall = "2.0 mm"
slope = "8 deg"
open_to = "tail"
[mould]
shrink = { print = "0.2 %", silicone = "0.3 %", resin = "0.4 %" }
sprue = { at = "tail", diameter = "6 mm" }
[pour]
resin = "1.02 g/cm3"
balloons = "125 kg/m3"
baits = 4
"""

QUICK: Final[Mapping[str, str]] = {
    "--density": "0.72 g/cm3",
    "--material": "balsa",
    "--unit": "mm",
    "--nose": "-x",
    "--back": "+z",
    "--name": "Alder",
    "--temperature": "12 degC",
    "--salinity": "35 g/kg",
    "--insert": "weight.stl=lead",
}
"""Options of the quick form."""


def meshes() -> dict[str, list[bytes]]:
    """Mesh files by their format."""
    found: dict[str, list[bytes]] = {kind: [] for kind in KINDS}
    for folder in (TESTS / "formats", TESTS / "bad_meshes", TESTS / "fuzz" / "kept"):
        for file in sorted(folder.glob("*.*")):
            kind = file.suffix.lower().lstrip(".")
            if kind in found and 0 < file.stat().st_size <= _LARGEST:
                found[kind].append(file.read_bytes())
    found["stl"].append(MESHES["weight.stl"])
    return found


def baits() -> Sequence[bytes]:
    """Bait files, their meshes those of `MESHES`: with every section, with few, printed, sinking."""
    head, _, rest = EVERYTHING.partition("[[insert]]")
    printed = 'printed = { material = "PLA solid", wall = "1.2 mm", infill = 0.15 }'
    sinking = EVERYTHING.replace("0.62 g/cm3", "1.3 g/cm3").replace('"floats"', '"sinks"').replace('"1.0 g"', '"-2 g"')
    texts = (
        EVERYTHING,
        head,
        head + "[[insert]]" + rest.partition("[coat]")[0],
        EVERYTHING.replace('density = "0.62 g/cm3"', printed),
        sinking,
    )
    return [text.encode() for text in texts]
