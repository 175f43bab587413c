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
    "grouped_digits.obj": "line 3: .*'v 0 1_0 0'.*three numbers",
    "far_out.stl": r"face 5: 1 of 12 faces: .*farther out than any bait.*found: 1e\+30",
    "far_out.obj": r"face 1, 4, 5: 3 of 6 faces: .*farther out.*found: 1e\+300.*within 100 km",
    "nowhere_large.obj": "the whole mesh is smaller than a millionth of a millimetre.*4e-15 m.*scale",
    # A package of no entries is the 22 bytes of its end.
    "empty_package.3mf": "does not say where its model is.*no _rels/.rels",
    "text_renamed.3mf": "no zip package.*not a zip file",
    "cut.3mf": "no zip package, or it is cut off",
    "flipped_byte.3mf": "cannot be unpacked.*Bad CRC-32",
    "entities.3mf": "3dmodel.model, line 1: .*document type.*<!DOCTYPE",
    "no_relations.3mf": "does not say where its model is.*no _rels/.rels",
    "index_beyond.3mf": "object 'body', triangle 1: .*not there.*found: 0 2 8.*0 to 7",
    "index_negative.3mf": "object 'body', triangle 1: .*not there.*found: 0 2 -1",
    "index_huge.3mf": 'line 3: a triangle cannot be read.*v3="99999999999999999999"',
    # Faces 2, 5, 11 and 12 have the box's second corner.
    "not_a_number.3mf": "face 2, 5, 11, 12: 4 of 12 faces: .*no finite number.*found: nan",
    "decimal_comma.3mf": 'line 3: a vertex cannot be read.*x="40,5".*decimal point',
    "grouped_digits.3mf": 'line 3: a number cannot be read.*x="4_',
    "unit_unknown.3mf": "unit is none of the format's.*furlong.*micron, millimeter",
    "extension_needed.3mf": "needs an extension.*beamlattice.*plain meshes",
    "object_missing.3mf": "object that is to be built is not there.*'7'",
    "bad_transform.3mf": "line 4: a build item cannot be read.*twelve numbers",
    "no_mesh.3mf": "holds no mesh.*1 objects, 1 to be built",
    "not_xml.3mf": "line 3: the model is no sound XML.*mismatched tag",
    "components_without_end.3mf": "hold each other without end.*64 levels",
    "components_by_the_million.3mf": "set in too many places.*20,000",
    "part_outside.3mf": "no part 'secret.model'",
    "cloud.ply": "holds no faces.*8 vertices.*cloud of points.*closed mesh",
    # The last face is a byte and four numbers of four; 9 bytes are gone.
    "cut.ply": "cut off in face 6.*379 bytes.*388 bytes at least",
    "cut_ascii.ply": "line 22: the file ends before its last face.*4 of 6",
    # A header of 199 bytes, and 12 bytes a vertex.
    "four_billion.ply": "cut off within its table of 'vertex'.*48,000,000,199 bytes for the 4,000,000,000",
    "four_billion_ascii.ply": "ends before its last face.*6 of 4,000,000,000",
    "long_face.ply": "cut off in face 1",
    "index_beyond.ply": "line 20: a face names a vertex that is not there.*found: 8.*0 to 7",
    "no_header_end.ply": "header of the PLY does not end",
    "odd_header.ply": "line 6: .*header cannot be read.*'property flaot y'",
    "no_z.ply": "no vertices in three dimensions.*x, y, w",
    "text_renamed.ply": "this is no PLY.*Belly weight",
    "cut.off": "line 14: the file ends before its last face.*4 of 6",
    "index_beyond.off": "line 12: .*not there.*'4 4 5 7 8'.*0 to 7",
    "four_dimensions.off": "line 1: .*not in three dimensions.*4OFF",
    "text_renamed.off": "line 1: an OFF begins with its name.*Belly weight",
    "negative_count.off": "line 2: the counts .* cannot be read.*'-8 6 12'",
    "cut.glb": "the GLB is cut off.*as its header says",
    "text_renamed.glb": "this is no GLB.*Belly weight",
    "not_json.glb": "JSON of the GLB cannot be read",
    "index_beyond.glb": "a face names a vertex that is not there.*found: 9.*0 to 7",
    "beyond_buffer.glb": "reaches beyond its buffer.*99 rows of 2 bytes from 0 on, in 72 bytes",
    "other_file.glb": "keeps its numbers in another file.*secret.bin.*everything in it",
    "compressed.glb": "needs an extension that is not read.*draco.*uncompressed",
    "nodes_without_end.glb": "a node of the GLB hangs in two places, or in itself.*node 1",
    "no_mesh.glb": "holds no triangles.*1 nodes",
    "text_renamed.step": "no STEP file.*Belly weight|not installed.*3MF",
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
    "in_inches.stl": (12, 12, 3.94 * 0.6 * 0.8, []),
    "half_body.stl": (10, 10, None, []),
    "small_hole.stl": (139, 139, None, []),
    "cracked.obj": (12, 12, None, []),
    # An octahedron's faces cut in four twice: 128 faces each.
    "balls.stl": (384, 384, None, []),
    "crossing_itself.stl": (484, 484, None, []),
    "coarse.stl": (32, 32, None, []),
    "denormal.obj": (12, 12, BOX, []),
    "far_off.stl": (128, 128, None, ["far-from-origin"]),
    # A power of ten may well be what was drawn; it is asked all the same.
    "far_off_rounded.obj": (12, 12, BOX, ["far-from-origin"]),
    "weight.stl": (12, 12, 80.0, []),
    "weight_beside.stl": (12, 12, 80.0, []),
    "weight_at_end.stl": (12, 12, 144.0, []),
    "weight_in_cavity.stl": (12, 12, 378.0, []),
    "half_closed.stl": (256 + 32, 256 + 32, None, []),
    "long_ball.stl": (512, 512, None, []),
    "keel.stl": (12, 12, 80.0, []),
    "trough.obj": (28, 28, 40.0 * (160.0 - 24.0), []),
    "keel_in_trough.stl": (12, 12, 3.5 * 5.25 * 30.0, []),
    "rattle_body.stl": (12, 12, 36.0 * 144.0, []),
    "bore.stl": (12, 12, 23.0 * 49.0, []),
}


def volume(mesh: MeshFile) -> float:
    """Signed volume in mm3, by the sum of tetrahedra."""
    a, b, c = np.moveaxis(mesh.surface.corners, 1, 0)
    return float(np.einsum("ij,ij->", a, np.cross(b, c))) / 6 * 1e9


def test_the_folder_is_what_its_script_makes() -> None:
    made = {name: BUILD["content"](name) for name in BUILD["FILES"] | BUILD["PIECES"] | BUILD["BAITS"]}
    assert {
        path.name: path.read_bytes() for path in FOLDER.iterdir() if path.is_file() and path.name != "build.py"
    } == made


def test_every_file_has_its_expectation() -> None:
    assert set(BUILD["FILES"] | BUILD["PIECES"]) == set(REFUSED) | set(READ)


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
