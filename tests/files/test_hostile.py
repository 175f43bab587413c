"""Files made to hurt: whatever is fed in is answered in bounded time and memory, with a message that says why not."""

from __future__ import annotations

import io
import os
import re
import resource
import runpy
import struct
import subprocess
import sys
import time
import zipfile
from pathlib import Path
from typing import Any

import pytest

from meshlure.errors import InputError
from meshlure.files.reading import read_mesh
from meshlure.files.source import LARGEST, read_source, size_in_bytes, size_text
from meshlure.files.toml import toml_text

BUILD: dict[str, Any] = runpy.run_path(str(Path(__file__).parents[1] / "formats" / "build.py"))
MB = 1_000_000

LIMITED = """
import resource, sys
from pathlib import Path
from meshlure.errors import InputError
from meshlure.files.reading import read_mesh
resource.setrlimit(resource.RLIMIT_AS, (int(sys.argv[2]), int(sys.argv[2])))
resource.setrlimit(resource.RLIMIT_CPU, (20, 20))
try:
    read_mesh(Path(sys.argv[1]), "mm", largest=int(sys.argv[3]))
except InputError as error:
    print(error)
"""


def refused_within(path: Path, megabytes: int, largest: int = LARGEST) -> str:
    """What a file is refused with in a process that may take so much memory beyond what it starts with, and 20 s."""
    limit = (megabytes + 900) * MB  # the libraries' own address space
    words = [sys.executable, "-c", LIMITED, str(path), str(limit), str(largest)]
    environment = os.environ | {"OMP_NUM_THREADS": "1", "OPENBLAS_NUM_THREADS": "1"}
    done = subprocess.run(words, capture_output=True, text=True, timeout=120, env=environment)
    assert (done.returncode, done.stderr) == (0, ""), done.stderr[-2000:]
    return done.stdout


def bomb(size: int) -> bytes:
    """3MF whose model part unpacks to so many bytes, all of them blanks within the XML."""
    paper = io.BytesIO()
    with zipfile.ZipFile(paper, "w", zipfile.ZIP_DEFLATED, compresslevel=9) as package:
        package.writestr("_rels/.rels", BUILD["RELATIONS"])
        with package.open("3D/3dmodel.model", "w", force_zip64=True) as part:
            part.write(f'<model xmlns="{BUILD["CORE"]}">'.encode())
            for _ in range(size // MB):
                part.write(b" " * MB)
            part.write(b"</model>")
    return paper.getvalue()


def test_a_zip_bomb_is_unpacked_no_further_than_is_allowed(tmp_path: Path) -> None:
    """80 MB of blanks in 80 kB, where 4 MB may be unpacked, in a process that may not take so much more."""
    data = bomb(80 * MB)
    assert len(data) < MB
    (tmp_path / "bomb.3mf").write_bytes(data)
    told = refused_within(tmp_path / "bomb.3mf", 40, 4 * MB)
    assert "unpacks to more than is read" in told
    assert 'raise the limit: --largest "16 MB"' in told


def test_a_package_that_lies_about_its_sizes(tmp_path: Path) -> None:
    """The sizes in a zip's directory are only a claim: 1 byte here."""
    data = bomb(2 * MB)
    with zipfile.ZipFile(io.BytesIO(data)) as package:
        size = package.getinfo("3D/3dmodel.model").file_size
    # Central directory: signature, 20 bytes, then the unpacked size.
    at = data.rindex(b"PK\x01\x02")
    lying = data[: at + 24] + struct.pack("<I", 1) + data[at + 28 :]
    assert struct.unpack_from("<I", data, at + 24)[0] in (size, 0xFFFFFFFF)
    (tmp_path / "lying.3mf").write_bytes(lying)
    with pytest.raises(InputError, match=r"cannot be unpacked|no sound XML|holds no mesh"):
        read_mesh(tmp_path / "lying.3mf", None, largest=10 * MB)


def test_other_ways_of_packing_are_refused_before_they_unpack(tmp_path: Path) -> None:
    """Of bzip2 and LZMA the zip library unpacks four kilobytes at once, however much comes out of them."""
    for number, way in enumerate((zipfile.ZIP_BZIP2, zipfile.ZIP_LZMA)):
        paper = io.BytesIO()
        with zipfile.ZipFile(paper, "w", way) as package:
            package.writestr("_rels/.rels", BUILD["RELATIONS"])
            package.writestr("3D/3dmodel.model", b" " * MB)
        (tmp_path / f"{number}.3mf").write_bytes(paper.getvalue())
        with pytest.raises(InputError, match="packed in a way that packages may not be"):
            read_mesh(tmp_path / f"{number}.3mf", None)


TYPES = {
    "outside": '<!DOCTYPE model [<!ENTITY a SYSTEM "file:///etc/passwd">]>',
    "parameters": '<!DOCTYPE model [<!ENTITY % a SYSTEM "http://localhost/x.dtd"> %a;]>',
    "laughs": '<!DOCTYPE model [<!ENTITY a "ha"><!ENTITY b "&a;&a;&a;"><!ENTITY c "&b;&b;&b;">]>',
    "bare": "<!DOCTYPE model>",
}
"""Ways in which XML names other files, or grows (XML 1.0, 4.2.2 and 4.4)."""


@pytest.mark.parametrize("part", ["3D/3dmodel.model", "_rels/.rels"])
@pytest.mark.parametrize("name", TYPES)
@pytest.mark.parametrize("encoding", ["utf-8", "utf-16"])
def test_document_types(tmp_path: Path, name: str, part: str, encoding: str) -> None:
    sound = {
        "_rels/.rels": BUILD["RELATIONS"],
        "3D/3dmodel.model": BUILD["model"](BUILD["object_"](1, BUILD["BOX"], "&c;"), BUILD["item"](1)),
    }
    texts = {key: text if isinstance(text, str) else text.decode() for key, text in sound.items()}
    texts[part] = f'<?xml version="1.0" encoding="{encoding}"?>{TYPES[name]}' + re.sub(r"<\?xml.*?\?>", "", texts[part])
    with zipfile.ZipFile(tmp_path / "x.3mf", "w") as package:
        for key, text in texts.items():
            package.writestr(key, text.encode(encoding if key == part else "utf-8"))
    with pytest.raises(InputError, match="document type"):
        read_mesh(tmp_path / "x.3mf", None)


def test_very_many_entries(tmp_path: Path) -> None:
    entry = b"PK\x01\x02" + b"\0" * 42
    (tmp_path / "many.3mf").write_bytes(entry * 30_000 + b"PK\x05\x06" + b"\0" * 18)
    with pytest.raises(InputError, match=r"too many entries[\s\S]*30,000"):
        read_mesh(tmp_path / "many.3mf", None)


def test_an_encrypted_package(tmp_path: Path) -> None:
    data = bytearray(BUILD["content"]("box.3mf"))
    at = 0
    while (at := data.find(b"PK\x01\x02", at)) >= 0:
        data[at + 8] |= 1  # general purpose bit 0
        at += 4
    (tmp_path / "locked.3mf").write_bytes(data)
    with pytest.raises(InputError, match="is encrypted"):
        read_mesh(tmp_path / "locked.3mf", None)


def test_more_triangles_than_bytes(tmp_path: Path) -> None:
    """A GLB of 100 nodes that all hold the same mesh: 1,200 triangles, where 1,000 are allowed."""
    nodes = [{"mesh": 0, "translation": [float(n), 0.0, 0.0]} for n in range(100)]
    made = BUILD["scene"](nodes, BUILD["floats"](BUILD["METRES"]), 8, BUILD["shorts"](BUILD["TRIANGLES"]))
    (tmp_path / "many.glb").write_bytes(made)
    with pytest.raises(InputError, match=r"more comes out of the file[\s\S]*up to 1,000 triangles[\s\S]*--largest"):
        read_mesh(tmp_path / "many.glb", None, largest=50_000)
    assert read_mesh(tmp_path / "many.glb", None).triangles == 1200


LONG = 5 * MB
"""Lines of 100 MB take as long as 100 MB of anything; here they only have to come to an end."""

LINES = {
    "one word.stl": b"solid x\nfacet normal 0 0 0\nouter loop\nvertex " + b"1" * LONG,
    "blanks.stl": b"solid x\n" + b" " * LONG + b"\nendsolid",
    "name.stl": b"solid " + b"x" * LONG,
    "one word.obj": b"v 1 2 " + b"3" * LONG + b"\nf 1 1 1\n",
    "many corners.obj": b"v 0 0 0\nv 1 0 0\nv 0 1 0\nf" + b" 1 2 3" * (LONG // 60),
    "unknown.obj": b"x" * LONG,
    "one line.ply": BUILD["ply"]("ascii").replace(b"\n0 0 0\n", b"\n" + b"0" * LONG + b" 0 0\n", 1)[:-5],
    "remark.ply": b"ply\nformat ascii 1.0\ncomment " + b"x" * LONG,
    "one line.off": b"OFF\n3 1 0\n" + b"0 " * (LONG // 2),
    "attribute.3mf": BUILD["package"](BUILD["model"](BUILD["object_"](1, "", "x" * LONG), BUILD["item"](1))),
    "number.3mf": BUILD["package"](
        BUILD["model"](BUILD["object_"](1, BUILD["BOX"].replace('x="40"', f'x="{"4" * LONG}"', 1)), BUILD["item"](1))
    ),
    "deep.3mf": BUILD["package"](BUILD["model"](BUILD["object_"](1, "<a>" * (MB // 4)), BUILD["item"](1))),
    "deep.glb": BUILD["glb"]({"asset": {}}, b"").replace(b'{"asset": {}}', b"[" * 13),
    "open.step": b"ISO-10303-21;" + b"(" * LONG,
}


@pytest.mark.parametrize("name", LINES)
def test_a_line_of_megabytes(tmp_path: Path, name: str) -> None:
    (tmp_path / name).write_bytes(LINES[name])
    start = time.perf_counter()
    with pytest.raises(InputError) as caught:
        read_mesh(tmp_path / name, "mm")
    assert time.perf_counter() - start < 15.0
    # Nothing of the line stands in the message beyond a few words.
    assert len(str(caught.value)) < 1000 + len(str(tmp_path)) * 2


@pytest.mark.parametrize(
    ("name", "begins", "repeated", "said"),
    [
        ("corners.obj", b"v 0 0 0\nv 1 0 0\nv 0 1 0\nf", b" 1 2 3", "up to 100,000 corners"),
        ("corners.off", b"OFF\n3 1 0\n0 0 0\n1 0 0\n0 1 0\n33333333", b" 0", "more than 100,000 corners"),
        ("facets.stl", b"solid x\n", b"facet ", "'facet normal"),
        (
            "numbers.ply",
            BUILD["ply"]("ascii").partition(b"end_header\n")[0] + b"end_header\n",
            b"0 ",
            "fewer|ends before",
        ),
    ],
)
def test_a_line_of_a_hundred_megabytes(tmp_path: Path, name: str, begins: bytes, repeated: bytes, said: str) -> None:
    """Taken apart into words it would be twenty times that in memory; here it may take seven times, and 20 s."""
    with (tmp_path / name).open("wb") as file:
        file.write(begins)
        for _ in range(100):
            file.write(repeated * (MB // len(repeated)))
    assert re.search(said, refused_within(tmp_path / name, 700))


def test_deeply_nested_json(tmp_path: Path) -> None:
    deep = b'{"nodes":' + b"[" * 200_000 + b"]" * 200_000 + b"}"
    data = b"glTF" + struct.pack("<4I", 2, 20 + len(deep), len(deep), 0x4E4F534A) + deep
    (tmp_path / "deep.glb").write_bytes(data)
    with pytest.raises(InputError, match="JSON of the GLB cannot be read"):
        read_mesh(tmp_path / "deep.glb", None)


def test_a_polygon_of_very_many_corners_on_a_line(tmp_path: Path) -> None:
    """A square of 4,000 corners along its straight sides: what is left to cut comes to an end."""
    n = 1000
    side = [k / n for k in range(n)]
    ring = (
        [(x, 0.0) for x in side]
        + [(1.0, y) for y in side]
        + [(1 - x, 1.0) for x in side]
        + [(0.0, 1 - y) for y in side]
    )
    lines = "".join(f"v {x:.9g} {y:.9g} 0\n" for x, y in ring)
    (tmp_path / "square.obj").write_text(lines + "f " + " ".join(str(k + 1) for k in range(len(ring))) + "\n")
    start = time.perf_counter()
    mesh = read_mesh(tmp_path / "square.obj", "mm")
    assert time.perf_counter() - start < 20.0
    assert mesh.surface.area * 1e6 == pytest.approx(1.0, rel=1e-6)


def test_a_file_larger_than_is_read(tmp_path: Path) -> None:
    """Its size is known without reading it: a file of 600 MB that takes no room on the disk."""
    path = tmp_path / "large.stl"
    with path.open("wb") as file:
        file.truncate(600 * MB)
    before = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss
    with pytest.raises(
        InputError, match=r'larger than is read[\s\S]*600 MB[\s\S]*up to 500 MB[\s\S]*--largest "1.2 GB"'
    ):
        read_mesh(path, "mm")
    assert resource.getrusage(resource.RUSAGE_SELF).ru_maxrss - before < 50_000  # kB
    with pytest.raises(InputError, match="holds no faces"):  # zeros: an STL that counts no faces is another matter
        read_mesh(tmp_path / "small.stl" if (tmp_path / "small.stl").write_bytes(b"\0" * 84) else path, "mm")


def test_the_limit_holds_for_files_that_report_no_size(tmp_path: Path) -> None:
    path = tmp_path / "body.stl"
    path.write_bytes(b"\0" * 1000)
    assert len(read_source(path, "mesh", largest=1000)) == 1000
    with pytest.raises(InputError, match="larger than is read"):
        read_source(path, "mesh", largest=999)
    if Path("/proc/self/maps").exists():
        with pytest.raises(InputError, match="larger than is read"):
            read_source(Path("/proc/self/maps"), "mesh", largest=10)


@pytest.mark.parametrize(
    ("text", "size"), [("2 GB", 2_000_000_000), ("1.5MB", 1_500_000), ("4 KiB", 4096), ("700 kB", 700_000), ("9 B", 9)]
)
def test_sizes_as_people_write_them(text: str, size: int) -> None:
    assert size_in_bytes(text, "--largest") == size


@pytest.mark.parametrize("text", ["2", "GB", "-2 GB", "0 MB", "two GB", "1e3 MB", "2 GBs", "2 ib", ""])
def test_sizes_that_are_none(text: str) -> None:
    with pytest.raises(InputError, match="no size of a file"):
        size_in_bytes(text, "--largest")


def test_sizes_said() -> None:
    assert [size_text(n) for n in (12, 1500, 2_000_000, 12_345_678_901)] == ["12 bytes", "1.5 kB", "2 MB", "12.3 GB"]


def test_a_bait_file_that_is_a_mesh_is_not_parsed(tmp_path: Path) -> None:
    path = tmp_path / "body.toml"
    path.write_bytes(b"x" * (2 * MB))
    with pytest.raises(InputError, match="too large for a bait file"):
        toml_text(path)


def test_a_link_in_a_circle_and_one_to_a_device(tmp_path: Path) -> None:
    (tmp_path / "a.stl").symlink_to("b.stl")
    (tmp_path / "b.stl").symlink_to("a.stl")
    (tmp_path / "zero.stl").symlink_to("/dev/zero")
    with pytest.raises(InputError, match=r"cannot be read[\s\S]*symbolic links|is not there"):
        read_mesh(tmp_path / "a.stl", "mm")
    with pytest.raises(InputError, match="a device or a pipe"):
        read_mesh(tmp_path / "zero.stl", "mm")
