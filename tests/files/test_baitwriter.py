"""A changed bait's file: read back, it is the bait that was meant; the maker's comments stand where they stood."""

from __future__ import annotations

import re
import tomllib
from dataclasses import replace
from decimal import Decimal
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from meshlure.errors import InputError
from meshlure.files.baitfile import BaitFile, read_baitfile
from meshlure.files.baitwriter import Changes, write_baitfile
from meshlure.files.quickbait import quick_bait
from meshlure.files.sections.balls import BallsSection
from meshlure.files.sections.inserts import InsertSection
from meshlure.files.sections.substance import Substance

SAMPLES = Path(__file__).parents[2] / "samples"
NAMES = ["minnow/minnow.toml", "minnow/minnow_coarse.toml", "lipless/lipless.toml", "stick/stick.toml"]


def meshes(plan: BaitFile) -> dict[str, str]:
    return {mesh.piece: f"{mesh.piece.replace(' ', '-')}.stl" for mesh in plan.meshes()}


def moved(plan: BaitFile, path: Path) -> BaitFile:
    """The same bait in another file, its meshes beside that."""
    files = meshes(plan)
    inserts = tuple(replace(each, mesh=path.parent / files[each.name]) for each in plan.inserts)
    return replace(plan, path=path, body=replace(plan.body, mesh=path.parent / files["body"]), inserts=inserts)


@pytest.mark.parametrize("name", NAMES)
def test_the_same_bait_beside_its_new_meshes(tmp_path: Path, name: str) -> None:
    plan, path = read_baitfile(SAMPLES / name), tmp_path / "variant.toml"
    made = write_baitfile(path, plan, Changes(meshes(plan)))
    assert made == read_baitfile(path) == moved(plan, path)
    # All but the meshes' names stands as it stood.
    before, after = plan.text.splitlines(), path.read_text(encoding="utf-8").splitlines()
    assert after.pop(0).startswith(f"# Written by meshlure from {plan.path.name if plan.path else ''}")
    assert len(before) == len(after)
    changed = [(old, new) for old, new in zip(before, after, strict=True) if old != new]
    assert all(old.startswith("mesh = ") and new.startswith("mesh = ") for old, new in changed)
    assert all(old.partition("#")[2] == new.partition("#")[2] for old, new in changed)


@pytest.mark.parametrize("name", NAMES)
@pytest.mark.parametrize(("unit", "per_mm"), [("cm", "0.1"), ("m", "0.001")])
def test_coordinates_of_another_unit_become_millimetres(tmp_path: Path, name: str, unit: str, per_mm: str) -> None:
    text = (SAMPLES / name).read_text(encoding="utf-8").replace('length_unit = "mm"', f'length_unit = "{unit}"')

    def scaled(match: re.Match[str]) -> str:
        return match[1] + re.sub(r"-?\d+\.\d+", lambda number: str(Decimal(number[0]) * Decimal(per_mm)), match[2])

    source = tmp_path / "source.toml"
    source.write_text(re.sub(r"(?m)^((?:at|tie) = )(\[.*?\])", scaled, text), encoding="utf-8")
    plan, path = read_baitfile(source), tmp_path / "variant.toml"
    assert plan.bait.length_unit == unit
    write_baitfile(path, plan, Changes(meshes(plan)))
    assert read_baitfile(path) == moved(read_baitfile(SAMPLES / name), path)


def test_ballast_and_a_chamber_in_the_place_of_others(tmp_path: Path) -> None:
    plan, path = read_baitfile(SAMPLES / "lipless/lipless.toml"), tmp_path / "variant.toml"
    files = {piece: file for piece, file in meshes(plan).items() if piece not in {"keel", "rattle chamber"}}
    new = (
        InsertSection("ballast 1", Path("in/ballast-1.stl"), Substance("lead"), fit=0.2e-3, glue="epoxy clear coat"),
        InsertSection("ballast 2", Path("ballast-2.stl"), Substance(density=11.34e3), pinned=True, free=True),
        InsertSection("chamber", Path("chamber.stl"), void="flooded", cavities="flooded", replaces=("line tie",)),
    )
    balls = BallsSection("chamber", 6.35e-3, 3, Substance("lead"), "tail")
    changes = Changes(
        files,
        "Quillmere flank 65, lighter",
        body_density=1043.7,
        body_cavities="flooded",
        dropped=("keel", "rattle chamber"),
        inserts=new,
        balls=(balls,),
        without=("coat", "cast"),
    )
    made = write_baitfile(path, plan, changes)
    expected = moved(plan, path)
    kept = tuple(each for each in expected.inserts if each.name in files)
    assert made == read_baitfile(path)
    assert made == replace(
        expected,
        bait=replace(expected.bait, name="Quillmere flank 65, lighter"),
        body=replace(expected.body, substance=Substance(density=1043.7), cavities="flooded"),
        inserts=kept + tuple(replace(each, mesh=tmp_path / each.mesh) for each in new),
        balls=(balls,),
        coat=None,
        cast=made.cast,
    )
    assert made.cast.assumed == ("speed", "angle", "height", "line_pull", "wind")
    text = path.read_text(encoding="utf-8")
    assert "# 0.8 mm wire, feet cast in" in text
    # What was said of the old density is not true of the new one.
    assert "unfilled casting resin" not in text
    at = [text.index(words) for words in ("[[insert]]", '"ballast 1"', '"chamber"', "[[hardware]]")]
    assert at == sorted(at)
    # A variant of the variant says once where it comes from.
    again = write_baitfile(tmp_path / "again.toml", made, Changes(meshes(made)))
    assert again.text.startswith("# Written by meshlure from variant.toml.")
    assert again.text.count("Written by") == 1


PLAIN = """\
format = 1

[bait]
length_unit = "mm"
nose = "-x"
back = "+z"

[body]
mesh = "body.stl"
material = "balsa"              # light

# Weights, all of them weighed.

# the one at the nose
[[insert]]
name = "nose weight"
mesh = "nose.stl"
material = "lead"

# the one at the belly
[[insert]]
name = "belly weight"
mesh = "belly.stl"
material = "brass"
replaces = ["nose weight"]

# Hooks.
[[hardware]]
name = "treble"                 # sharp
mass = "1 g"
at = [1, 2, 3]
hangs = true
# the end"""


def written(folder: Path, text: str, changes: Changes) -> tuple[BaitFile, str]:
    source, path = folder / "source.toml", folder / "out.toml"
    source.write_bytes(text.encode("utf-8"))
    write_baitfile(path, read_baitfile(source), changes)
    return read_baitfile(path), path.read_bytes().decode("utf-8").partition("\n")[2]


def test_comments_go_with_what_they_stand_above(tmp_path: Path) -> None:
    files = {"body": "b.stl", "belly weight": "belly.stl"}
    bait, text = written(tmp_path, PLAIN, Changes(files, dropped=("nose weight",)))
    assert [each.name for each in bait.inserts] == ["belly weight"]
    assert bait.inserts[0].replaces == ()
    assert bait.bait.name == "source"
    assert "at the nose" not in text
    at = [
        text.index(words) for words in ("# light", "# Weights", "# the one at the belly", "# Hooks", "# sharp", "end")
    ]
    assert at == sorted(at)
    bait, text = written(tmp_path, PLAIN, Changes({"body": "b.stl"}, dropped=("nose weight", "belly weight")))
    assert bait.inserts == ()
    assert "# Weights, all of them weighed.\n" in text
    assert text.endswith("# the end\n")
    more = '\n\n# Lip, of sheet.\n\n# sawn\n[[insert]]\nname = "lip"\nmesh = "lip.stl"\ndensity = "1 g/cm3"\n'
    _, text = written(tmp_path, f"{PLAIN}{more}", Changes(files | {"nose weight": "n.stl"}, dropped=("lip",)))
    assert text.endswith("# the end\n\n# Lip, of sheet.\n")


def test_only_some_of_what_is_replaced_is_dropped(tmp_path: Path) -> None:
    more = (
        '[[insert]]\nname = "lip"\nmesh = "lip.stl"\nmaterial = "brass"\nreplaces = ["nose weight", "belly weight"]\n'
    )
    files = {"body": "b.stl", "belly weight": "belly.stl", "lip": "lip.stl"}
    bait, _ = written(tmp_path, f"{PLAIN}\n{more}", Changes(files, dropped=("nose weight",)))
    assert [each.replaces for each in bait.inserts] == [(), ("belly weight",)]


ODD = r'''
format = 1
[ bait ] # a header with blanks
length_unit = "in"
nose = [
  -1,
  0,
  0 # level
]
back = """+z"""
name = """one \
two"""
[body]
mesh = "body.stl"
[body.printed]
material = "PLA solid"
wall = "1.2 mm"
infill = 0.15
[[insert]]
name = " lip "
mesh = "lip.stl"
density = "1.2 g/cm3"
[[hardware]]
name = "eye"
mass = "1 g"
at = [
  1,
  2.5, # over the eye
  -0.1,
]
hangs = false
[[insert]]
name = "slug"
mesh = "slug.stl"
material = "lead"
[mould]
vents = ["nose", [1, 2, 3]]
[mould.sprue]
at = [-0.5, 0, 1]
[mould.tab]
at = "tail"
'''


@pytest.mark.parametrize("newline", ["\n", "\r\n"])
def test_odd_but_usable_spelling(tmp_path: Path, newline: str) -> None:
    files = {"body": "b.stl", "lip": "lip.stl", "slug": "s.stl"}
    text = ODD.replace("\n", newline)
    bait, text = written(tmp_path, text, Changes(files, "It's “odd” \\ done", body_density=500.0))
    assert bait.bait.name == "It's “odd” \\ done"
    assert bait.body.printed is None
    assert bait.body.substance == Substance(density=500.0)
    assert [each.name for each in bait.inserts] == ["lip", "slug"]
    # 25.4 mm an inch.
    assert bait.hardware[0].at == pytest.approx((25.4e-3, 63.5e-3, -2.54e-3), rel=1e-12)
    assert bait.mould is not None
    assert bait.mould.sprue.at == pytest.approx((-12.7e-3, 0.0, 25.4e-3), rel=1e-12)
    assert bait.mould.vents[0] == "nose"
    assert bait.mould.vents[1] == pytest.approx((25.4e-3, 50.8e-3, 76.2e-3), rel=1e-12)
    assert (bait.mould.tab.at, bait.bait.length_unit) == ("tail", "mm")
    assert "# level" in text
    assert "could not be kept" not in text
    assert text.count(newline) == text.count("\n")


INLINE = """\
format = 1 # the first
bait = { length_unit = "cm", nose = "-x", back = "+z" }
body.mesh = "body.stl"
body.density = "0.7 g/cm3"
insert = [{ name = "slug", mesh = "slug.stl", material = "lead" }]
"""
ABOVE = PLAIN[: PLAIN.index("# Weights")].replace("\n", f"\n{INLINE.splitlines()[-1]}\n", 1)
QUOTED = PLAIN.replace("[body]", '["body"]')
APART = f"{PLAIN}\n[body.printed]\ninfill = 0.2\nwall = '1 mm'\ndensity = '1 g/cm3'\n".replace('material = "balsa"', "")


@pytest.mark.parametrize(
    ("text", "files"),
    [
        (INLINE, {"slug": "s.stl"}),
        (ABOVE, {"slug": "s.stl"}),
        (QUOTED, {"nose weight": "n.stl", "belly weight": "b.stl"}),
        (APART, {"nose weight": "n.stl", "belly weight": "b.stl"}),
    ],
)
def test_what_cannot_be_changed_in_its_place_is_written_anew_and_said(
    tmp_path: Path, text: str, files: dict[str, str]
) -> None:
    source, path = tmp_path / "source.toml", tmp_path / "out.toml"
    source.write_text(text, encoding="utf-8")
    plan = read_baitfile(source)
    write_baitfile(path, plan, Changes(files | {"body": "b.stl"}, name="made"))
    bait = read_baitfile(path)
    assert [(each.name, each.mesh) for each in bait.inserts] == [
        (name, tmp_path / file) for name, file in files.items()
    ]
    assert (bait.body.substance, bait.body.printed) == (plan.body.substance, plan.body.printed)
    assert bait.hardware == plan.hardware
    assert path.read_text(encoding="utf-8").startswith(
        "# Written by meshlure from source.toml. Its comments could not be kept.\n\nformat = 1\n"
    )


def test_a_bait_stated_on_the_command_line(tmp_path: Path) -> None:
    stated = {"density": "45 lb/ft3", "unit": "cm", "nose": "-x", "back": "0, 0.001, 1"}
    plan = quick_bait(Path("far/body.stl"), **stated, inserts=["in/belly.stl=lead", "c.obj=sealed"], name="Sedge 70")
    path = tmp_path / "variant.toml"
    new = InsertSection("ballast", Path("ballast.stl"), Substance("tin"))
    files = {"body": "body.stl", "c": "c.stl"}
    write_baitfile(path, plan, Changes(files, dropped=("belly",), inserts=(new,)))
    bait = read_baitfile(path)
    assert (bait.bait.name, bait.bait.back, bait.bait.metres) == ("Sedge 70", plan.bait.back, 1e-3)
    assert (bait.body.substance, bait.water) == (plan.body.substance, plan.water)
    assert [(each.name, each.mesh, each.void) for each in bait.inserts] == [
        ("c", tmp_path / "c.stl", "sealed"),
        ("ballast", tmp_path / "ballast.stl", None),
    ]
    assert path.read_text(encoding="utf-8").startswith("format = 1\n")
    assert "[water]" not in path.read_text(encoding="utf-8")


def test_nothing_is_written_of_a_bait_that_could_not_be_read(tmp_path: Path) -> None:
    plan, path = read_baitfile(SAMPLES / "stick/stick.toml"), tmp_path / "variant.toml"
    new = InsertSection("Front treble", Path("x.stl"), Substance("lead"))
    with pytest.raises(InputError, match="two pieces have one name"):
        write_baitfile(path, plan, Changes(meshes(plan), inserts=(new,)))
    with pytest.raises(ValueError, match="no mesh is named for 'slug'"):
        write_baitfile(path, plan, Changes({"body": "b.stl"}))
    with pytest.raises(ValueError, match="no insert 'keel'"):
        write_baitfile(path, plan, Changes(meshes(plan), dropped=("keel",)))
    with pytest.raises(ValueError, match="no section 'measured'"):
        write_baitfile(path, plan, Changes(meshes(plan), without=("measured",)))
    assert not path.exists()


@given(
    st.floats(5.0, 25e3, exclude_min=True),
    st.floats(0.0, 5e-3),
    st.floats(1e-9, 0.1),
    st.text(st.characters(exclude_categories=("C", "Z")), min_size=1, max_size=20),
)
def test_numbers_and_names_come_back_as_they_went(
    tmp_path_factory: pytest.TempPathFactory, density: float, fit: float, diameter: float, name: str
) -> None:
    plan = quick_bait(Path("b.stl"), density="1 g/cm3", unit="mm", nose="-x", back="+z")
    insert = InsertSection(f"{name}1", Path("x.stl"), Substance(density=density), fit=fit)
    void = InsertSection(f"{name}2", Path("y.stl"), void="sealed")
    balls = BallsSection(void.name, diameter, 2, Substance(name))
    path = tmp_path_factory.mktemp("numbers") / "bait.toml"
    made = write_baitfile(path, plan, Changes({"body": "b.stl"}, name, inserts=(insert, void), balls=(balls,)))
    assert made.bait.name == name
    assert replace(made.inserts[0], mesh=insert.mesh, substance=None, fit=0.0) == replace(
        insert, substance=None, fit=0.0
    )
    assert made.inserts[0].substance is not None
    # One rounding to a decimal and one back.
    assert made.inserts[0].substance.density == pytest.approx(density, rel=3e-16)
    assert made.inserts[0].fit == pytest.approx(fit, rel=3e-16)
    assert made.balls[0].diameter == pytest.approx(diameter, rel=3e-16)
    assert replace(made.balls[0], diameter=diameter) == balls
    assert tomllib.loads(path.read_text(encoding="utf-8")) == tomllib.loads(made.text)
