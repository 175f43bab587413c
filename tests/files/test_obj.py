"""OBJ: every way of writing a face, against trimesh where it reads the format right, and by hand where it does not."""

from __future__ import annotations

import io

import pytest
import trimesh

from meshlure.errors import InputError
from meshlure.files.obj import read_obj


def corners(text: str) -> list[list[list[float]]]:
    listed: list[list[list[float]]] = read_obj(text.encode(), 1.0, "piece.obj").corners.tolist()
    return listed


TRIANGLE = "v 0 0 0\nv 1 0 0\nv 0 1 0\n"
WANTED = [[[0, 0, 0], [1, 0, 0], [0, 1, 0]]]


@pytest.mark.parametrize(
    "text",
    [
        TRIANGLE + "f 1 2 3",
        TRIANGLE + "f 1/1 2/2 3/3\n",
        TRIANGLE + "f 1//7 2//8 3//9\n",
        TRIANGLE + "f 1/1/1 2/2/2 3/3/3 # a comment\n",
        TRIANGLE + "f -3 -2 -1\n",
        TRIANGLE + "f\t1\t2\t3\n",
        TRIANGLE + "f 1 2 \\\n  3\n",
        TRIANGLE.replace("\n", "\r\n") + "f 1 2 3\r\n",
        TRIANGLE.replace("\n", "\r") + "f 1 2 3\r",
        "\ufeff" + TRIANGLE + "f 1 2 3\n",
        "v 0 0 0 0.5 0.5 0.5\nv 1 0 0\nv 0 1 0 1.0\nvn 0 0 1\nvt 0 0\ng a b\ns off\nf 1 2 3\nl 1 2\np 1\n",
        # Faces before their vertices, and an unnamed vertex that is no number.
        "f 1 2 3\n" + TRIANGLE + "v nan 0 0\n",
        "v 0 0 0\nv +1.e0 0 0\nv 0 10E-1 0\nf 1 2 3\n",
    ],
)
def test_one_triangle_however_it_is_written(text: str) -> None:
    assert corners(text) == WANTED


def test_negative_indices_count_back_from_their_own_line() -> None:
    text = TRIANGLE + "f -3 -2 -1\nv 5 0 0\nv 6 0 0\nv 5 1 0\nf -3 -2 -1\n"
    assert corners(text) == [*WANTED, [[5, 0, 0], [6, 0, 0], [5, 1, 0]]]


def test_as_trimesh_reads_a_mesh_of_triangles() -> None:
    ball = trimesh.creation.icosphere(subdivisions=2, radius=7.5)
    data = ball.export(file_type="obj", digits=17).encode()
    read = read_obj(data, 1e-3, "ball.obj")
    seen = trimesh.load_mesh(io.BytesIO(data), file_type="obj", process=False, maintain_order=True)
    assert read.corners == pytest.approx(seen.triangles * 1e-3, rel=1e-15)
    assert read.findings == ()


def test_lines_are_counted_through_joined_ones() -> None:
    with pytest.raises(InputError, match="line 6: a face names a vertex that is not there"):
        corners(TRIANGLE + "f 1 2 \\\n3\nf 1 2 4\n")


def test_several_bad_faces_are_counted() -> None:
    with pytest.raises(InputError, match=r"line 5: .* \(and 2 more such faces\)"):
        corners(TRIANGLE + "f 1 2 3\nf 1 2 40\nf 1 50 3\nf 60 2 3\n")


def test_an_index_beyond_all_integers() -> None:
    with pytest.raises(InputError, match="line 4: a face cannot be read"):
        corners(TRIANGLE + "f 1 2 99999999999999999999999\n")


def test_control_characters_stay_out_of_messages() -> None:
    with pytest.raises(InputError) as caught:
        corners(TRIANGLE + "f 1 2 \x1b[31mred\x07\n")
    assert "\x1b" not in str(caught.value)
    assert "\x07" not in str(caught.value)


def test_places_of_bent_polygons_are_metres() -> None:
    text = "v 10 0 0\nv 20 0 0\nv 20 10 3\nv 10 10 0\nf 1 2 3 4\n"
    (finding,) = read_obj(text.encode(), 1e-3, "piece.obj").findings
    assert finding.where == ((0.01, 0.0, 0.0),)
    # Lifted by 3, one corner puts all four 3/4 off the mean height; the normal, the cross product of the diagonals
    # (10, 10, 3) and (-10, 10, 0), leans by 200 / sqrt(30^2 + 30^2 + 200^2): 0.734.
    assert "0.73 mm" in finding.message
