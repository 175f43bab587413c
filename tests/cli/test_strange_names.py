"""Names made to steer a terminal, a page or another reader come out harmless from every command that says them."""

from __future__ import annotations

import json
import re
import runpy
import tomllib
from pathlib import Path
from typing import Any
from xml.etree import ElementTree as ET

import pytest
import shapes
from command_bench import BAIT, QUICK, Bench, Ran, box
from lxml import html  # type: ignore[import-untyped]

from meshlure.cli.asking import ask
from meshlure.cli.terminal import harmless as as_shown
from meshlure.files.reading import read_mesh
from meshlure.files.stl import stl_bytes

FORMATS: dict[str, Any] = runpy.run_path(str(Path(__file__).parents[1] / "formats" / "build.py"))

TAGS = "</script></title><hr id=x7 onclick=y7>&amp;\"'<!--"
"""What a bait file's texts may hold: they are printable."""
STEERS = "q\x1b[31m\n- body.stl: \u202efine\x9b31m\x07\u2066<hr id=x7>"
"""And what only a file's name may: escape sequences, lines, turns of direction, controls of eight bits."""

SECTIONS = (
    f"[[insert]]\nname = '''{TAGS}'''\nmesh = \"weight.stl\"\nmaterial = \"lead\"\n"
    f"[[hardware]]\nname = '''{TAGS}2'''\nmass = \"0.7 g\"\nat = [20, 5, -2]\nhangs = true\n"
    '[target]\nbehaviour = "sinks"\nreserve = "-3 g"\n[ballast]\nmaterials = ["lead"]\nshapes = ["rod"]\n'
    '[chamber]\nballs = [{ diameter = "4 mm", count = 1, material = "bearing steel" }]\nslope = "4 deg"\n'
    '[pour]\nresin = "1.05 g/cm3"\nballoons = "0.15 g/cm3"\n'
)
MOULD = '[mould]\nshrink = { print = "0.2 %", silicone = "0.3 %", resin = "0.4 %" }\nsprue = { diameter = "6 mm" }\n'
NAMED = BAIT.replace('"Alder pool minnow"', f"'''{TAGS}'''")

COMMANDS = {
    "report": ("{bait}", "--cut", "--glb"),
    "balance": ("{bait}",),
    "chamber": ("{bait}", "--no-page"),
    "mould": ("{lofted}", "--no-page"),
    "pour": ("{bait}",),
    "sheet": ("{bait}",),
    "compare": ("{bait}", "{lofted}"),
}


def harmless(text: str) -> None:
    """Letters, lines and blanks that end a line no sooner than they should; no tag of ours."""
    strange = {c for c in text if not (c.isprintable() or c in "\n\N{NO-BREAK SPACE}\N{NARROW NO-BREAK SPACE}")}
    assert not strange, sorted(map(ascii, strange))


def said(ran: Ran) -> None:
    assert ran.code in (0, 1), ran
    harmless(ran.out)
    harmless(ran.err)
    assert not re.search(r"^- body\.stl: ", ran.out + ran.err, re.MULTILINE)


@pytest.mark.parametrize("command", COMMANDS)
def test_of_a_bait(bench: Bench, command: str) -> None:
    folder = bench.folder / STEERS
    bench.put(f"{STEERS}/body.stl", box((0, 0, 0), (40, 10, 16)))
    bench.put(f"{STEERS}/weight.stl", box((10, 3, 3), (5, 4, 4)))
    places = {
        "bait": bench.put(f"{STEERS}/{STEERS}.toml", NAMED + SECTIONS),
        "lofted": bench.put(f"{STEERS}/l{STEERS}.toml", NAMED.replace("body.stl", "lofted.stl") + MOULD),
    }
    bench.put(f"{STEERS}/lofted.stl", stl_bytes(shapes.ellipsoid((0.03, 0.007, 0.01), 2)))
    out = folder / f"out{STEERS}"
    said(bench.run(command, *(word.format(**places) for word in COMMANDS[command]), "--out", out))
    written = sorted(out.iterdir())
    assert len(written) > 1
    for path in written:
        assert re.fullmatch(r"[a-z0-9.-]+", path.name)
        match path.suffix:
            case ".json":
                text = path.read_text(encoding="utf-8")
                harmless(text)
                # Nothing of a name is lost: what cannot be printed is written by its number.
                assert json.loads(text)["name"].startswith(TAGS)
                assert STEERS in json.loads(text)["inputs"][0]["file"] or command == "balance"
            case ".html":
                harmless(path.read_text(encoding="utf-8"))
                page = html.fromstring(path.read_bytes())
                assert not page.xpath("//hr[@id='x7'] | //*[@onclick='y7']")
                assert "hr id=x7" in page.text_content()
            case ".svg":
                harmless(path.read_text(encoding="utf-8"))
                assert not [one for one in ET.parse(path).iter() if one.get("id") == "x7"]
            case ".toml":
                harmless(path.read_text(encoding="utf-8"))
                assert tomllib.loads(path.read_text(encoding="utf-8"))["bait"]["name"].startswith(TAGS)
            case ".glb" | ".3mf":
                parts = read_mesh(path, None).parts
                for part in parts:
                    harmless(part.name)


def test_of_a_mesh(bench: Bench) -> None:
    mesh = bench.put(f"{STEERS}.stl", box((0, 0, 0), (40, 10, 16)))
    said(bench.run("inspect", mesh, "--unit", "mm", "--picture", bench.folder / f"p{STEERS}.svg"))
    drawn = (bench.folder / f"p{STEERS}.svg").read_text(encoding="utf-8")
    harmless(drawn)
    said(bench.run("inspect", mesh, "--unit", "mm", "--mend", "--out", bench.folder / f"m{STEERS}.3mf"))
    for part in read_mesh(bench.folder / f"m{STEERS}.3mf", None).parts:
        harmless(part.name)
    ran = bench.run("inspect", mesh, mesh, "--unit", "mm", "--json")
    said(ran)
    assert json.loads(ran.out)["meshes"][0]["file"] == str(mesh)
    ran = bench.run("report", mesh, *QUICK, "--json")
    said(ran)
    assert json.loads(ran.out)["name"] == STEERS


def test_of_a_new_bait(bench: Bench) -> None:
    """A bait file cannot name such a mesh: TOML has no place for it in a line that people read."""
    mesh = bench.put(f"{STEERS}.stl", box((0, 0, 0), (40, 10, 16)))
    ran = bench.run("new", mesh, "--unit", "mm", "--density", "1.2 g/cm3", "--yes", "--out", "a.toml")
    assert ran.code == 2
    harmless(ran.err)
    assert "rename the file" in ran.err
    assert not (bench.folder / "a.toml").exists()
    said(bench.run("new", "body.stl", "--unit", "mm", "--density", "1.2 g/cm3", "--yes", "--out", f"{STEERS}.toml"))


def test_of_a_mesh_that_is_asked_about(bench: Bench, monkeypatch: pytest.MonkeyPatch) -> None:
    """A name that is proposed stands in the question, and the terminal is sent the question as it is."""
    asked: list[str] = []

    def answered(text: str, default: str, **_: object) -> str:
        asked.append(text)
        return default

    monkeypatch.setattr("typer.prompt", answered)
    assert ask("Name of the bait", STEERS, str) == STEERS.strip()
    assert ask("One of them", None, str) == ""
    harmless("".join(asked))
    assert asked == [f"Name of the bait [{as_shown(STEERS)}]", "One of them"]


def test_of_parts_in_a_file(bench: Bench) -> None:
    """Names that a package or a scene gives its parts: control characters where the format lets them through."""
    steers = STEERS.replace("\n", "\v")
    nodes = [{"mesh": 0, "name": steers}, {"mesh": 0, "name": steers, "translation": [0.0, 0.0, 0.1]}]
    scene = FORMATS["scene"](nodes, FORMATS["floats"](FORMATS["METRES"]), 8, FORMATS["shorts"](FORMATS["TRIANGLES"]))
    named = [f'<object id="{n}" name="&lt;hr id=x7&gt;\x9b\u202e" type="model">' for n in (1, 2)]
    objects = "".join(FORMATS["object_"](n, FORMATS["BOX"]) for n in (1, 2))
    for n, head in enumerate(named, 1):
        objects = re.sub(rf'<object id="{n}"[^>]*>', head, objects)
    package = FORMATS["package"](FORMATS["model"](objects, FORMATS["item"](1) + FORMATS["item"](2)))
    for name, content in (("two.glb", scene), ("two.3mf", package)):
        bench.put(name, content)
        assert any("\x9b" in part.name for part in read_mesh(bench.folder / name, None).parts)
        said(bench.run("inspect", name))
        ran = bench.run("inspect", name, "--json")
        said(ran)
        assert json.loads(ran.out)["meshes"]
        said(bench.run("report", name, *QUICK, "--no-page", "--out", "out"))
        harmless((bench.out / "results.json").read_text(encoding="utf-8"))


def test_the_names_here_are_as_strange_as_they_should_be() -> None:
    with pytest.raises(AssertionError):
        harmless(STEERS)
    assert TAGS.isprintable()
