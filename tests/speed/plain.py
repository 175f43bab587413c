"""What a maker would script on the general libraries: mass, a floating posture, silhouettes and station areas.

    python plain.py FOLDER

FOLDER holds a bait file as `lofted.write` makes it, without hardware and coat, its inserts inside the body. Prints one
JSON object. It shares no code with the package, and is written for speed where the libraries let one choose:
the posture by minimising the potential energy over pitch, roll and draught at once, which takes one capped slice
a step where settling the draught at every tilt would take some six; the stations in one call.
"""

from __future__ import annotations

import json
import sys
import tomllib
from pathlib import Path
from typing import Any

import numpy as np
import trimesh
from scipy.optimize import minimize
from trimesh.path.polygons import projected

STATIONS = 60
SLICES = 100


def loaded(path: Path) -> Any:
    mesh = trimesh.load_mesh(path)
    if not mesh.is_watertight:
        sys.exit(f"{path} is not watertight")
    return mesh


def weighed(folder: Path) -> tuple[Any, float, Any, float]:
    """Body, mass in g, centre of gravity in mm, water's density in g/mm3."""
    with (folder / "bait.toml").open("rb") as file:
        bait = tomllib.load(file)
    body = loaded(folder / bait["body"]["mesh"])
    density = float(bait["body"]["density"].split()[0]) / 1e3
    mass = body.volume * density
    moment = body.center_mass * mass
    for row in bait["insert"]:
        mesh = loaded(folder / row["mesh"])
        own = float(row["density"].split()[0]) / 1e3 if "density" in row else 0.0
        mass += mesh.volume * (own - density)
        moment = moment + mesh.center_mass * mesh.volume * (own - density)
    return body, mass, moment / mass, float(bait["water"]["density"].split()[0]) / 1e6


def floated(body: Any, mass: float, centre: Any, water: float) -> tuple[Any, int]:
    """Up-direction at rest, and how many slices it took."""
    count = 0

    def up_of(pitch: float, roll: float) -> Any:
        return np.array([-np.sin(pitch), np.cos(pitch) * np.sin(roll), np.cos(pitch) * np.cos(roll)])

    def energy(x: Any) -> float:
        nonlocal count
        count += 1
        up = up_of(np.radians(x[0]), np.radians(x[1]))
        wet = body.slice_plane(plane_origin=x[2] * up, plane_normal=-up, cap=True)
        weight = mass * (up @ centre - x[2])
        return float(weight + water * wet.volume * (x[2] - up @ wet.center_mass))

    start = np.array([0.0, 0.0, float(body.center_mass[2])])
    steps = np.array([[0.0, 0.0, 0.0], [5.0, 0.0, 0.0], [0.0, 5.0, 0.0], [0.0, 0.0, 1.0]])
    found = minimize(
        energy,
        start,
        method="Nelder-Mead",
        options={"initial_simplex": start + steps, "maxfev": SLICES, "xatol": 1e-3, "fatol": 1e-7},
    )
    return up_of(*np.radians(found.x[:2])), count


def main(folder: Path) -> None:
    body, mass, centre, water = weighed(folder)
    up, slices = floated(body, mass, centre, water)
    views = {"side": [0, 1, 0], "top": [0, 0, 1], "front": [1, 0, 0]}
    shadows = {name: projected(body, normal=axis).area for name, axis in views.items()}
    low, high = body.bounds[:, 0]
    heights = np.linspace(low, high, STATIONS + 2)[1:-1]
    sections = body.section_multiplane(plane_origin=[0, 0, 0], plane_normal=[1, 0, 0], heights=heights)
    print(
        json.dumps(
            {
                "mass_g": mass,
                "centre_mm": centre.tolist(),
                "nose_up_deg": float(np.degrees(np.arcsin(-up[0]))),
                "slices": slices,
                "areas_mm2": shadows,
                "stations_mm": heights.tolist(),
                "station_areas_mm2": [section.area for section in sections],
            }
        )
    )


if __name__ == "__main__":
    main(Path(sys.argv[1]))
