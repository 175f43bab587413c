"""The bodies of the published drag table, built from their descriptions, as profiles and as meshes; diameter 1 m."""

from __future__ import annotations

import csv
import math
from collections.abc import Callable, Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from meshlure.geometry.surface import Surface
from meshlure.physics.form import Profile

Floats = NDArray[np.float64]
Outline = tuple[Floats, Floats]
TABLE = Path(__file__).parent.parent / "authorities" / "drag_table.csv"

R = 0.5
FINE = 400


@dataclass(frozen=True)
class Row:
    """One row of the table."""

    case: str
    family: str
    shape: str
    orientation: str
    reynolds: float
    layer: str
    cd: float
    source: str
    scored: bool

    @property
    def given(self) -> Literal["laminar", "tripped"] | None:
        """State of the layer in the source; None where it hardly matters or was not said."""
        return self.layer if self.layer in ("laminar", "tripped") else None  # type: ignore[return-value]


def rows() -> Iterator[Row]:
    """Yield the rows of the table."""
    with TABLE.open(encoding="utf-8", newline="") as lines:
        for row in csv.DictReader(line for line in lines if not line.startswith("#")):
            yield Row(
                row["case"],
                row["family"],
                row["shape"],
                row["orientation"],
                float(row["reynolds_on_diameter"]),
                row["layer"],
                float(row["cd"]),
                f"{row['source']} ({row['seen_or_memory']})",
                row["scored"] == "1",
            )


def spheroid(length: float) -> Outline:
    turn = np.linspace(0, math.pi, FINE)
    return length / 2 * (1 - np.cos(turn)), R * np.sin(turn)


def cylinder(length: float) -> Outline:
    return np.array([0, length]), np.array([R, R])


def cone(half_angle: float) -> Outline:
    return np.array([0, R / math.tan(math.radians(half_angle))]), np.array([0, R])


def dome() -> Outline:
    turn = np.linspace(0, math.pi / 2, FINE)
    return R * (1 - np.cos(turn)), R * np.sin(turn)


def teardrop() -> Outline:
    """Hemisphere with a tangent cone of 10 degrees half angle, cut at 3.35 diameters (the tip would lie at 3.38)."""
    half, length = math.radians(10), 3.35
    turn = np.linspace(0, math.pi / 2 + half, FINE)
    end = R * math.cos(half) - (length - R * (1 + math.sin(half))) * math.tan(half)
    return np.append(R * (1 - np.cos(turn)), length), np.append(R * np.sin(turn), end)


def airship() -> Outline:
    """Thickness curve of the NACA four-digit sections (Abbott and von Doenhoff 1959, eq. 6.2, closed), fineness 4."""
    u = (1 - np.cos(np.linspace(0, math.pi, FINE))) / 2
    y = 0.2969 * np.sqrt(u) - 0.1260 * u - 0.3516 * u**2 + 0.2843 * u**3 - 0.1036 * u**4
    return 4 * u, np.clip(R * y / y.max(), 0, None)


def cup(wall: float = 0.02) -> Outline:
    """Hemispherical cup, its outside first."""
    turn = np.linspace(0, math.pi / 2, FINE // 2)
    inner = R - wall
    x = np.concatenate([R * (1 - np.cos(turn)), (R - inner * np.cos(turn))[::-1]])
    return x, np.concatenate([R * np.sin(turn), (inner * np.sin(turn))[::-1]])


def bullet() -> Outline:
    """Tangent ogive 1.5 diameters long before a cylinder of 2 diameters."""
    nose = 1.5
    arc = (R**2 + nose**2) / (2 * R)
    x = np.linspace(0, nose, FINE)
    r = np.sqrt(arc**2 - (nose - x) ** 2) + R - arc
    return np.append(x, 3.5), np.append(np.clip(r, 0, None), R)


REVOLVED: dict[str, Callable[[], Outline]] = {
    "sph_1e4": lambda: spheroid(1),
    "sph_1e5": lambda: spheroid(1),
    "sph_1e6": lambda: spheroid(1),
    "obl075_lam": lambda: spheroid(0.75),
    "obl075_turb": lambda: spheroid(0.75),
    "pro18_H": lambda: spheroid(1.8),
    "pro2_lam": lambda: spheroid(2),
    "pro4_turb": lambda: spheroid(4),
    "pro8_lam": lambda: spheroid(8),
    "bullet_nasa": bullet,
    "cylax_0.5": lambda: cylinder(0.5),
    "cylax_1": lambda: cylinder(1),
    "cylax_2": lambda: cylinder(2),
    "cylax_3": lambda: cylinder(3),
    "cylax_4": lambda: cylinder(4),
    "disc": lambda: cylinder(0.02),
    "cone10_fwd": lambda: cone(10),
    "cone20_fwd": lambda: cone(20),
    "cone30_fwd": lambda: cone(30),
    "cone40_fwd": lambda: cone(40),
    "cone75_fwd": lambda: cone(75),
    "cone30_rev": lambda: flipped(cone(30)),
    "hemi_fwd": dome,
    "sphcone_fwd": teardrop,
    "streamlined": airship,
}

# length along the flow, short side, long side
PLATES = {
    "plate1": (0.02, 1.0, 1.0),
    "plate3": (0.02, 1.0, 3.0),
    "plate10": (0.02, 1.0, 10.0),
    "plate20": (0.02, 1.0, 20.0),
    "block3": (3.0, 1.0, 1.0),
}

CUPS: dict[str, Callable[[], Outline]] = {"cup_fwd": cup, "cup_rev": lambda: flipped(cup())}

CROSSWISE = {"cylx_1": 1.0, "cylx_2": 2.0, "cylx_4": 4.0, "cylx_10": 10.0, "cylx_40": 40.0}


def flipped(outline: Outline) -> Outline:
    """The other end first."""
    x, r = outline
    return x[-1] - x[::-1], r[::-1]


def profile_of(outline: Outline, count: int = 121) -> Profile:
    """Sections of a body of revolution."""
    x, r = outline
    return Profile.of_revolution(lambda at: np.interp(at, x, r), float(x[-1]), count)


def plate_profile(length: float, short: float, long: float) -> Profile:
    """Sections of a rectangular plate or bar."""
    x = np.linspace(1e-4 * length, (1 - 1e-4) * length, 121)
    ones = np.ones_like(x)
    return Profile(x, ones * short * long, ones * 2 * (short + long), length, long / short)


def profile(case: str) -> Profile:
    """Sections of a row's body."""
    return profile_of(REVOLVED[case]()) if case in REVOLVED else plate_profile(*PLATES[case])


def respaced(outline: Outline, count: int) -> Outline:
    """The same line by points evenly spread along it, its own corners kept."""
    x, r = outline
    if len(x) <= 4:
        return outline
    arc = np.concatenate([[0], np.cumsum(np.hypot(np.diff(x), np.diff(r)))])
    turn = np.abs(np.diff(np.unwrap(np.arctan2(np.diff(r), np.diff(x)))))
    corners = arc[1:-1][turn > math.radians(8)]
    at = np.unique(np.concatenate([np.linspace(0, arc[-1], count), corners]))
    return np.interp(at, arc, x), np.interp(at, arc, r)


def revolved(outline: Outline, around: int = 64) -> Surface:
    """Mesh of a body of revolution about x, a polygon of `around` corners at every point of its outline."""
    x, r = outline
    turn = 2 * math.pi * np.arange(around) / around
    ring = np.column_stack([np.zeros(around), np.cos(turn), np.sin(turn)])
    points = [np.array([[x[0], 0, 0]])]
    points += [ring * radius + np.array([at, 0, 0]) for at, radius in zip(x, r, strict=True) if radius > 1e-9]
    points.append(np.array([[x[-1], 0, 0]]))
    count = len(points) - 2
    here = np.arange(around)
    there = (here + 1) % around
    last = 1 + count * around
    faces = [np.column_stack([np.zeros(around, int), 1 + there, 1 + here])]
    for k in range(count - 1):
        a, b = 1 + k * around, 1 + (k + 1) * around
        faces.append(np.column_stack([a + here, a + there, b + here]))
        faces.append(np.column_stack([b + here, a + there, b + there]))
    faces.append(np.column_stack([1 + (count - 1) * around + here, 1 + (count - 1) * around + there, last + 0 * here]))
    return Surface(np.concatenate(points), np.concatenate(faces))


def boxed(length: float, short: float, long: float) -> Surface:
    """Mesh of a rectangular plate or bar, its length along x."""
    corners = np.array([[x, y, z] for x in (0, length) for y in (0, short) for z in (0, long)])
    faces = [[0, 1, 3], [0, 3, 2], [4, 6, 7], [4, 7, 5], [0, 4, 5], [0, 5, 1]]
    faces += [[2, 3, 7], [2, 7, 6], [0, 2, 6], [0, 6, 4], [1, 5, 7], [1, 7, 3]]
    return Surface(corners, np.array(faces))


def meshed(case: str, along: int = 60, around: int = 64) -> Surface:
    """Mesh of a row's body; what leads lies on the side of x = 0, or of any y for what lies crosswise."""
    if case in PLATES:
        return boxed(*PLATES[case])
    return revolved(respaced(outline(case), along), around)


def outline(case: str) -> Outline:
    """Outline of a row's body of revolution, along its own axis."""
    if case in CROSSWISE:
        return cylinder(CROSSWISE[case])
    return CUPS[case]() if case in CUPS else REVOLVED[case]()


def leads(case: str) -> tuple[float, float, float]:
    """Direction that goes first in a row."""
    return (0, -1, 0) if case in CROSSWISE else (-1, 0, 0)
