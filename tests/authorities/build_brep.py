"""Build brep.json: exact mass properties by a B-rep kernel (Open CASCADE), the outside authority on volumes.

For developers: needs `pip install cadquery-ocp-novtk`. Run `python tests/authorities/build_brep.py` after the sample
solids have changed; it also writes the facets of the small composite solids to meshes/.
"""

from __future__ import annotations

import datetime as dt
import json
import sys
from importlib.metadata import version
from pathlib import Path
from typing import Any

import numpy as np

HERE = Path(__file__).parent
SAMPLES = HERE.parents[1] / "samples"
sys.path[:0] = [str(SAMPLES), str(HERE)]

from cad.export import write_stl  # noqa: E402
from cad.masses import EPSILON, Amount, area, volume  # noqa: E402
from cad.shapes import cut, join  # noqa: E402
from closed_forms import CLOSED_FORMS  # noqa: E402
from composites import CHORDS, COMPOSITES  # noqa: E402
from make_samples import OUTSIDE, PIECES  # noqa: E402
from OCP.TopoDS import TopoDS_Shape  # noqa: E402
from predictions import DENSITY, predict  # noqa: E402

CONVENTION = (
    "Lengths in mm along the axes of the drawing. inertia_mm5 is the tensor of the integral of (r.r 1 - r r^T) over "
    "the volume at unit density, about the solid's own centroid, so the products stand with a minus sign (Ixy = "
    "-integral of x y); the kernel's MatrixOfInertia has this sign, as closed_forms shows. area_mm2 is the whole "
    "surface of the solid, inner faces too."
)


def properties(solid: TopoDS_Shape) -> dict[str, Any]:
    """Volume, centroid, inertia and area of a solid, as stored."""
    amount = volume(solid)
    return {
        "volume_mm3": amount.measure,
        "centroid_mm": amount.centre.tolist(),
        "inertia_mm5": amount.inertia.tolist(),
        "area_mm2": area(solid).measure,
    }


def against_closed_form(found: Amount, exact: Amount) -> dict[str, Any]:
    """Return the textbook values and how far the kernel is off them, each relative to its largest entry."""
    pairs: dict[str, tuple[Any, Any]] = {
        "volume": (found.measure, exact.measure),
        "centroid": (found.centre, exact.centre),
        "inertia": (found.inertia, exact.inertia),
    }
    off = {name: float(np.max(np.abs(np.subtract(a, b))) / np.max(np.abs(b))) for name, (a, b) in pairs.items()}
    if max(off.values()) > 1e-11:
        raise SystemExit(f"the kernel disagrees with the closed form by {off}")
    return {
        "volume_mm3": exact.measure,
        "centroid_mm": exact.centre.tolist(),
        "inertia_mm5": exact.inertia.tolist(),
        "kernel_off_by": off,
    }


def joined_and_cut(solids: dict[str, TopoDS_Shape]) -> dict[str, Any]:
    """Return the body less all its inserts, and the body joined with what stands out of it."""
    inserts = {name: solid for name, solid in solids.items() if name != "body"}
    outer = solids["body"]
    for name in OUTSIDE & set(inserts):
        outer = join(outer, inserts[name])
    return {
        "body less inserts": properties(cut(solids["body"], *inserts.values())),
        "body joined with what stands out": properties(outer),
        "outside_mm3": {name: volume(cut(solid, solids["body"])).measure for name, solid in inserts.items()},
    }


def rounded(entry: Any) -> Any:
    """Return the book with its numbers cut to 12 digits, what is under 1e-7 to nought: the kernel's own noise."""
    if isinstance(entry, dict):
        return {key: value if key == "kernel_off_by" else rounded(value) for key, value in entry.items()}
    if isinstance(entry, list):
        return [rounded(value) for value in entry]
    if isinstance(entry, float):
        return float(f"{entry:.12g}") if abs(entry) > 1e-7 else 0.0
    return entry


def main() -> None:
    """Write brep.json and the composites' meshes."""
    built = {bait: {name: build() for name, build in pieces.items()} for bait, pieces in PIECES.items()}
    book: dict[str, Any] = {
        "kernel": f"Open CASCADE by cadquery-ocp-novtk {version('cadquery-ocp-novtk')}",
        "date": dt.datetime.now(tz=dt.UTC).date().isoformat(),
        "integration": f"BRepGProp, adaptive, faces divided every quarter turn, relative error {EPSILON:g} asked",
        "convention": CONVENTION,
        "closed_forms": {},
        "composites": {},
        "samples": {},
        "baits": {},
        "densities_g_cm3": DENSITY,
    }
    for name, build_pair in CLOSED_FORMS.items():
        solid, exact = build_pair()
        book["closed_forms"][name] = against_closed_form(volume(solid), exact)
    for name, build in COMPOSITES.items():
        solid, files = build(), {}
        for chord in CHORDS:
            files[f"{name}_{chord:g}.stl"] = chord
            write_stl(solid, HERE / "meshes" / f"{name}_{chord:g}.stl", chord, 0.5)
        book["composites"][name] = properties(solid) | {"meshes_chord_mm": files}
    for bait, solids in built.items():
        book["samples"][bait] = {name: properties(solid) for name, solid in solids.items()} | joined_and_cut(solids)
        path = SAMPLES / bait / f"{bait}.toml"
        for end in ("nose", "tail") if bait == "lipless" else ("",):
            book["baits"][f"{bait}, balls at {end}" if end else bait] = predict(path, solids, end)
    (HERE / "brep.json").write_text(json.dumps(rounded(book), indent=1, allow_nan=False) + "\n", encoding="utf-8")


if __name__ == "__main__":
    main()
