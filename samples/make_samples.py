"""Make the sample baits' meshes: model each in a B-rep kernel and export it as a CAD program would.

For developers: needs `pip install cadquery-ocp-novtk`. Run `python samples/make_samples.py`; it writes the STL files
beside the bait files and stops if a solid lies too near the skin or another.
"""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

from cad import lipless, minnow, stick
from cad.export import write_stl
from cad.shapes import gap_between, gap_to_skin
from OCP.TopoDS import TopoDS_Shape

HERE = Path(__file__).parent
FINE = (0.02, 0.35)  # chord in mm, angle in rad (20 degrees)
COARSE = (0.1, 0.5)
COVER, APART = 1.5, 1.0  # mm of resin over an insert, and between two

PIECES: dict[str, dict[str, Callable[[], TopoDS_Shape]]] = {
    "minnow": {"body": minnow.body, "wire": minnow.wire, "belly_weight": minnow.belly_weight, "lip": minnow.lip},
    "lipless": {
        "body": lipless.body,
        "chamber": lipless.chamber,
        "keel": lipless.keel,
        "line_tie": lipless.line_tie,
        "belly_hanger": lipless.belly_hanger,
        "tail_hanger": lipless.tail_hanger,
    },
    "stick": {"body": stick.body, "slug": stick.slug},
}
"""Bait, mesh name and the model of that piece."""

COARSE_HEAD = """\
# The minnow of minnow.toml once more, its meshes exported at 0.1 mm chord, 29 degrees, as a hasty export would be.
# Nothing else differs. The facets cut a good 100 mm3 off the body: see what the report says of it, and what it does to
# the reserve. Written by samples/make_samples.py from minnow.toml: change that one.

"""

OUTSIDE = {"wire", "lip", "line_tie", "belly_hanger", "tail_hanger"}
"""Pieces that are meant to stand out of the body."""


def check(bait: str, solids: dict[str, TopoDS_Shape]) -> None:
    """Print cover and clearances of a bait, and stop where there is too little."""
    inserts = {name: solid for name, solid in solids.items() if name != "body"}
    for name, solid in inserts.items():
        cover = gap_to_skin(solid, solids["body"])
        nearest = min((gap_between(solid, other) for key, other in inserts.items() if key != name), default=99.0)
        print(f"{bait:8} {name:13} cover {cover:5.2f} mm, next insert {nearest:5.2f} mm away")
        if nearest < APART or (name not in OUTSIDE and cover < COVER):
            raise SystemExit(f"{bait}: {name} needs {COVER} mm of cover and {APART} mm to the next insert")


def write_coarse_bait() -> None:
    """Write the bait file of the coarse minnow: the fine one's, with the coarse meshes."""
    fine = (HERE / "minnow" / "minnow.toml").read_text(encoding="utf-8")
    settings = fine[fine.index("format = 1") :].replace('mesh = "', 'mesh = "coarse/')
    settings = settings.replace('name = "Quillmere minnow 95"', 'name = "Quillmere minnow 95, coarse"')
    (HERE / "minnow" / "minnow_coarse.toml").write_text(COARSE_HEAD + settings, encoding="utf-8")


def main() -> None:
    """Write every mesh and the coarse bait file."""
    write_coarse_bait()
    for bait, pieces in PIECES.items():
        solids = {name: build() for name, build in pieces.items()}
        check(bait, solids)
        for name, solid in solids.items():
            write_stl(solid, HERE / bait / f"{name}.stl", *FINE)
            if bait == "minnow":
                write_stl(solid, HERE / bait / "coarse" / f"{name}.stl", *COARSE)


if __name__ == "__main__":
    main()
