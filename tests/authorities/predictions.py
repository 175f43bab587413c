"""Weight and buoyancy of the sample baits straight from B-rep volumes: the sum a maker would do, without a facet.

Densities of the stock materials are written here, so that a changed stock row shows. Left out: the air in the chamber
(under a milligram) and the glue. A hook or ring acts, with its weight and its displacement, at the eye it hangs from.
"""

from __future__ import annotations

import math
import tomllib
from pathlib import Path
from typing import Any

import gsw
import numpy as np
from cad import lipless
from cad.masses import Amount, area, point, volume
from cad.shapes import Point, cut, join, skin, sphere
from numpy.typing import NDArray
from OCP.TopoDS import TopoDS_Shape

DENSITY = {  # g/cm3
    "acrylic": 1.185,
    "basswood": 0.415,
    "bearing steel": 7.81,
    "carbon steel": 7.85,
    "epoxy clear coat": 1.15,
    "lead": 11.34,
    "polycarbonate": 1.20,
    "stainless 304": 7.93,
    "UV-cure clear coat": 1.12,
}


def _number(text: str) -> float:
    return float(text.split()[0])


def _density(piece: dict[str, Any]) -> float:
    """Density in g/mm3."""
    return (_number(piece["density"]) if "density" in piece else DENSITY[piece["material"]]) * 1e-3


def water_density(water: dict[str, str]) -> float:
    """Density in kg/m3: stated, or by TEOS-10 at the surface."""
    if "density" in water:
        return _number(water["density"])
    salinity, temperature = _number(water["salinity"]), _number(water["temperature"])
    return float(gsw.rho_t_exact(salinity, temperature, 0.0))


def _axis(text: str) -> NDArray[np.float64]:
    return np.asarray(np.eye(3)["xyz".index(text[1])] * (1 if text[0] == "+" else -1))


def hanging(bait: dict[str, Any], total: Amount, room: Amount) -> dict[str, float]:
    """Nose-up and lean in degrees of a bait wholly under water: its buoyancy stands over its weight."""
    nose, back = _axis(bait["bait"]["nose"]), _axis(bait["bait"]["back"])
    up = (room.centre - total.centre) / np.linalg.norm(room.centre - total.centre)
    return {
        "nose_up_deg": math.degrees(math.asin(up @ nose)),
        "lean_deg": math.degrees(math.atan2(up @ np.cross(back, nose), up @ back)),
    }


def round_lean(bait: dict[str, Any], total: Amount, room: Amount, rho: float) -> float:
    """Lean in degrees of a round bait afloat, at any nose-up.

    The water presses on a body of revolution through its axis, however deep it lies, and so does a coat of even
    thickness. Roll is settled by what is off the axis alone: the weight's moment, less the moment of the displaced
    hooks. The axis of the drawing must be the nose's.
    """
    nose, back = _axis(bait["bait"]["nose"]), _axis(bait["bait"]["back"])
    pull = total.measure * total.centre - rho * 1e-6 * room.measure * room.centre
    return math.degrees(math.atan2(-pull @ np.cross(back, nose), -pull @ back))


def ball_centres(diameter: float, count: int, end: str) -> list[Point]:
    """Return where the balls rest in the lipless bait's chamber, in a row against its nose or tail wall."""
    slope, sign = math.radians(lipless.CHAMBER_SLOPE), {"nose": -1, "tail": 1}[end]
    aft = np.array([0.0, -math.cos(slope), math.sin(slope)])
    reach = lipless.CHAMBER_LENGTH / 2 - diameter / 2 - diameter * np.arange(count)
    rows = np.array(lipless.CHAMBER_AT) + sign * reach[:, None] * aft
    return [(float(x), float(y), float(z)) for x, y, z in rows]


def predict(path: Path, solids: dict[str, TopoDS_Shape], balls_at: str = "nose") -> dict[str, Any]:
    """Return mass, displaced volume, their centres and the reserve of a bait; `solids` by the stem of their mesh."""
    bait = tomllib.loads(path.read_text(encoding="utf-8"))
    inserts = {insert["name"]: (insert, solids[Path(insert["mesh"]).stem]) for insert in bait["insert"]}
    bare = cut(solids["body"], *(solid for _, solid in inserts.values()))
    weights = {"body": volume(bare) * _density(bait["body"])}
    outer, shell = solids["body"], skin(solids["body"])
    for name, (insert, solid) in inserts.items():
        if "void" in insert:
            continue
        weights[name] = volume(solid) * _density(insert)
        if volume(cut(solid, solids["body"])).measure > 1e-3:  # stands out: displaces, and the skin loses its footprint
            outer, shell = join(outer, solid), cut(shell, solid)
    for balls in bait.get("balls", []):
        diameter = _number(balls["diameter"])
        for index, centre in enumerate(ball_centres(diameter, balls["count"], balls_at)):
            weights[f"ball {index + 1}"] = volume(sphere(centre, diameter / 2)) * _density(balls)

    room = volume(outer)
    for item in bait["hardware"]:
        weights[item["name"]] = point(_number(item["mass"]), item["at"])
        if "material" in item:
            room += point(_number(item["mass"]) / _density(item), item["at"])
    thickness, painted = _number(bait["coat"]["thickness"]), area(shell)
    weights["coat"] = painted * (thickness * _density(bait["coat"]))
    room += painted * thickness

    total = next(iter(weights.values()))
    for part in list(weights.values())[1:]:
        total += part
    rho = water_density(bait["water"])
    answer = {
        "water_density_kg_m3": rho,
        "mass_g": total.measure,
        "centre_mm": total.centre.tolist(),
        "inertia_g_mm2": total.inertia.tolist(),
        "displaced_mm3": room.measure,
        "buoyancy_centre_mm": room.centre.tolist(),
        "reserve_g": room.measure * rho * 1e-6 - total.measure,
        "skin_mm2": painted.measure,
        "pieces": {name: {"mass_g": part.measure, "centre_mm": part.centre.tolist()} for name, part in weights.items()},
    }
    if answer["reserve_g"] < 0:
        return answer | {"hanging": hanging(bait, total, room)}
    return answer | {"floating": {"lean_deg": round_lean(bait, total, room, rho)}} if path.stem == "stick" else answer
