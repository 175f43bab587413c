"""Every file of tests/bad_meshes gets the message or the finding that it is there for."""

from __future__ import annotations

import math
import re
import runpy
from pathlib import Path

import numpy as np
import pytest

from meshlure.errors import InputError
from meshlure.files.reading import MeshFile, read_mesh

FOLDER = Path(__file__).parents[1] / "bad_meshes"
BUILD = runpy.run_path(str(FOLDER / "build.py"))

REFUSED = {
    "empty.stl": "the mesh is empty.*0 bytes",
    "too_short.stl": "too short for an STL.*40 bytes.*84 bytes",
    "text_renamed.stl": "a text file, no STL.*Belly weight",
    "picture_renamed.stl": "cut off.*or it is no STL.*264 bytes",
    "no_faces.stl": "holds no faces.*count of 0",
    "no_faces_ascii.stl": "holds no faces.*no 'facet'",
    # 684 bytes is 84 + 50 * 12, by the format's layout.
    "cut_inside_a_face.stl": "cut off inside face 10.*564 bytes, room for 9 whole.*684 bytes for the 12",
    "cut_between_faces.stl": "cut off between faces 10 and 11.*584 bytes, room for 10 whole.*684 bytes for the 12",
    "four_billion.stl": "cut off.*84 bytes.*200,000,000,084 bytes for the 4,000,000,000",
    "more_than_counted.stl": "holds more than its header counts.*room for 12.*384 bytes for the 6",
    "solid_but_binary_cut.stl": "cut off between faces 10 and 11.*684 bytes for the 12",
    "not_a_number.stl": r"stl, face 5: 1 of 12 faces: .*no finite number.*found: nan",
    "infinite_ascii.stl": r"stl, face 3: 1 of 12 faces: .*no finite number.*found: inf",
    "ascii_cut.stl": r"line 41: .*found: 'vertex'.*cut off here",
    "ascii_no_end.stl": "line 85: .*ends before its 'endsolid'",
    "ascii_decimal_comma.stl": "line 11: .*'vertex 0,5 10 0'.*decimal point",
    "ascii_four_corners.stl": "line 7: .*'vertex 40 0 0'.*'endloop'",
    "ascii_end_inside_a_facet.stl": "line 82: .*'endsolid box'.*'vertex x y z'",
    "all_collapsed.stl": "no triangle of the mesh has three corners apart.*4 triangles",
    "no_faces.obj": "holds no faces.*8 vertices and no polygon",
    "text_renamed.obj": "holds no faces.*begins with 'Belly weight",
    "binary_renamed.obj": "no text, and so no OBJ",
    "index_zero.obj": "line 12: .*not there.*0 in 'f 0 3 7 8 4'.*1 to 8",
    "index_beyond.obj": "line 12: .*not there.*9 in 'f 3 7 9 4'.*1 to 8",
    "index_back_beyond.obj": "line 12: .*not there.*-9 in 'f 3 7 -9 4'",
    "two_corners.obj": "line 12: .*'f 3 7'.*three corners",
    "word_for_index.obj": "line 12: .*'f 3 7 eight 4'",
    "two_coordinates.obj": "line 3: .*'v 0 10'.*three numbers",
    "decimal_comma.obj": "line 3: .*'v 0 10,5 0'.*decimal point",
    "not_a_number.obj": "face 1, 4, 5; line 3: 3 of 6 faces: .*no finite number.*found: nan",
    "free_form.obj": "line 3: .*free-form.*'cstype'.*polygon mesh",
}

BOX = 6400.0
"""mm3: 40 x 10 x 16."""

READ = {
    # name: (triangles in the file, triangles kept, signed volume in mm3 by hand, finding codes)
    "solid_but_binary.stl": (12, 12, BOX, []),
    "trailing_bytes.stl": (12, 12, BOX, ["trailing-bytes"]),
    "two_solids.stl": (24, 24, 2 * BOX, ["several-solids"]),
    "blank_lines_at_end.stl": (12, 12, BOX, []),
    # Two pyramids 20 high over a regular octagon of radius 8: 40/3 * 2 sqrt(2) 8^2.
    "collapsed.stl": (32, 16, 40 / 3 * 2 * math.sqrt(2) * 64, ["collapsed-triangles"]),
    # 216 mm2 by the shoelace formula, 10 mm high; ends of 6 corners, 6 sides of 4.
    "concave.obj": (20, 20, 2160.0, []),
    "missing_material.obj": (12, 12, BOX, []),
    # The box, and a tetrahedron of 10 * 9 * 5 / 6.
    "groups_and_negative.obj": (16, 16, BOX + 75.0, []),
    # Its raised corner adds 40 * 10 / 3 * 2 mm to the box or half of that, as the top's diagonal runs.
    "bent.obj": (12, 12, BOX + 800 / 3, ["bent-polygons"]),
    "unknown_lines.obj": (12, 12, BOX, ["unread-lines"]),
    "open_box.stl": (10, 10, None, []),
    "mixed_winding.stl": (12, 12, None, []),
    "inside_out.stl": (12, 12, -BOX, []),
    "duplicate_face.stl": (13, 13, None, []),
    "needle_face.stl": (13, 13, BOX, []),
    "shared_edge.stl": (24, 24, 2 * BOX, []),
    "shells_apart.stl": (24, 24, 2 * BOX, []),
    "shells_overlapping.stl": (24, 24, BOX + 720.0, []),
    "cavity.stl": (24, 24, BOX - 640.0, []),
    "in_metres.stl": (12, 12, BOX * 1e-9, []),
    "crossing.obj": (11, 11, None, ["crossing-polygons"]),
}


def volume(mesh: MeshFile) -> float:
    """Signed volume in mm3, by the sum of tetrahedra."""
    a, b, c = np.moveaxis(mesh.surface.corners, 1, 0)
    return float(np.einsum("ij,ij->", a, np.cross(b, c))) / 6 * 1e9


def test_the_folder_is_what_its_script_makes() -> None:
    made = {name: BUILD["content"](name) for name in BUILD["FILES"]}
    assert {path.name: path.read_bytes() for path in FOLDER.iterdir() if path.suffix in {".stl", ".obj"}} == made


def test_every_file_has_its_expectation() -> None:
    assert set(BUILD["FILES"]) == set(REFUSED) | set(READ)


@pytest.mark.parametrize("name", REFUSED)
def test_refused(name: str) -> None:
    with pytest.raises(InputError) as caught:
        read_mesh(FOLDER / name, "mm")
    (fault,) = caught.value.faults
    assert fault.where.startswith(str(FOLDER / name))
    assert fault.next_step
    assert re.search(REFUSED[name], str(fault), re.DOTALL), str(fault)


@pytest.mark.parametrize("name", READ)
def test_read(name: str) -> None:
    in_file, kept, expected, codes = READ[name]
    mesh = read_mesh(FOLDER / name, "mm", piece="belly weight")
    assert mesh.triangles == in_file
    assert len(mesh.surface.faces) == kept
    assert [finding.code for finding in mesh.findings] == codes
    assert all(finding.piece == "belly weight" for finding in mesh.findings)
    if expected is not None:
        assert volume(mesh) == pytest.approx(expected, rel=1e-6)
