"""What a bait is made of: pieces with their surfaces and substances, and the directions of nose and back."""

from __future__ import annotations

from dataclasses import dataclass
from enum import StrEnum

import numpy as np

from meshlure.files.baitfile import BaitFile
from meshlure.files.reading import MeshFile
from meshlure.findings import Finding
from meshlure.geometry.surface import Floats, Surface
from meshlure.geometry.topology import EdgePairs
from meshlure.stock.waters import Water


class Role(StrEnum):
    """What a piece is to the bait."""

    BODY = "body"
    INSERT = "insert"
    VOID = "void"
    HARDWARE = "hardware"
    COAT = "coat"
    BALL = "ball"


@dataclass(frozen=True)
class Substance:
    """What a piece consists of.

    Attributes
    ----------
    name : str or None
        Of the material; None where only a density was stated.
    density, low, high : float, kg/m3
        Density with its range; a stated density has 0.5% either way.
    source : str
        Where the density comes from.
    assumed : bool
        Whether it is a default of the trade or a datasheet, not a statement of the user's.
    triggers : tuple of str
        Cautions that it calls for.
    """

    name: str | None
    density: float
    low: float
    high: float
    source: str
    assumed: bool
    triggers: tuple[str, ...] = ()


@dataclass(frozen=True, eq=False)
class Frame:
    """The bait's directions in mesh coordinates.

    Attributes
    ----------
    nose, back, side : (3,) arrays
        Unit vectors out of the nose, out of the back and to the bait's own left: side = back x nose.
    """

    nose: Floats
    back: Floats
    side: Floats

    @classmethod
    def of(cls, nose: Floats, back: Floats) -> Frame:
        """Return the frame of a nose and a back direction, the back turned to a right angle with the nose."""
        n = np.asarray(nose, dtype=np.float64)
        n = n / np.linalg.norm(n)
        b = np.asarray(back, dtype=np.float64)
        b = b - (b @ n) * n
        b = b / np.linalg.norm(b)
        return cls(n, b, np.cross(b, n))


@dataclass(frozen=True, eq=False)
class Print:
    """How a body is printed.

    Attributes
    ----------
    solid : Substance
        Of the print where it is solid.
    wall : float, m
        Thickness of the wall, measured square to the skin.
    infill : float
        Share of what lies deeper that is solid.
    core : tuple of Surface
        What lies deeper under the skin, without regard to inserts and hollows; empty where the walls meet.
    """

    solid: Substance
    wall: float
    infill: float
    core: tuple[Surface, ...]


@dataclass(frozen=True, eq=False)
class MeshPiece:
    """A piece given by a mesh: the body, an insert or a void.

    Attributes
    ----------
    name : str
    role : Role
        body, insert or void.
    surface : Surface
        Outward skin without cavities, overlapping shells joined.
    pairs : EdgePairs
        Its edges.
    shells : tuple of Surface
        Parts of the skin that hang together.
    cavities : tuple of Surface
        Spaces that the mesh itself closes off inside the piece, each outward.
    cavities_flooded : bool
        Whether they fill with water.
    substance : Substance or None
        None for a void.
    flooded : bool
        For a void: whether it fills with water.
    replaces : tuple of str
        Names of earlier inserts whose space this one takes.
    lip : bool
        Whether it is a lip, to be counted by itself in the drag.
    coated : bool
        Whether the coat goes over it where it shows.
    fit : float, m
        Gap per side of its pocket.
    glue : Substance or None
        What fills that gap.
    deficit : float, m3
        Volume that its facets leave out of the smooth part, cavities left out.
    skin_deficit : float, m3
        What the facets of its outward skin alone leave out.
    printed : Print or None
        How it is printed; its substance is then that of wall and infill together, as drawn.
    """

    name: str
    role: Role
    surface: Surface
    pairs: EdgePairs
    shells: tuple[Surface, ...]
    cavities: tuple[Surface, ...] = ()
    cavities_flooded: bool = False
    substance: Substance | None = None
    flooded: bool = False
    replaces: tuple[str, ...] = ()
    lip: bool = False
    coated: bool = False
    fit: float = 0.0
    glue: Substance | None = None
    deficit: float = 0.0
    skin_deficit: float = 0.0
    printed: Print | None = None


@dataclass(frozen=True, eq=False)
class Hardware:
    """A mass at a point: hook, ring, eye.

    Attributes
    ----------
    name : str
    mass, low, high : float, kg
    at : (3,) array, m
        Its eye if it hangs, else its own centre.
    hangs : bool
    volume : float, m3
        Displaced; 0 where no material is known.
    substance : Substance or None
    item : str or None
        Name of the stock row.
    source : str
        Where the mass comes from.
    assumed : bool
    triggers : tuple of str
        Cautions that it calls for.
    wire, wire_length : float or None, m
    drag_area : float or None, m2
    """

    name: str
    mass: float
    low: float
    high: float
    at: Floats
    hangs: bool
    volume: float
    substance: Substance | None
    item: str | None
    source: str
    assumed: bool
    triggers: tuple[str, ...] = ()
    wire: float | None = None
    wire_length: float | None = None
    drag_area: float | None = None


@dataclass(frozen=True, eq=False)
class Coat:
    """A thin coat over the body's skin.

    Attributes
    ----------
    thickness : float, m
    substance : Substance
    """

    thickness: float
    substance: Substance


@dataclass(frozen=True)
class Balls:
    """Balls that run in a void.

    Attributes
    ----------
    chamber : str
        Name of the void.
    diameter : float, m
    count : int
    substance : Substance
    at : str or None
        nose or tail where the bait file holds them there; None lets the posture decide.
    """

    chamber: str
    diameter: float
    count: int
    substance: Substance
    at: str | None


@dataclass(frozen=True, eq=False)
class Bait:
    """A bait, read and resolved: nothing is left to look up.

    Attributes
    ----------
    name : str
    frame : Frame
    body : MeshPiece
    pieces : tuple of MeshPiece
        Inserts and voids in the bait file's order.
    balls : tuple of Balls
    hardware : tuple of Hardware
    coat : Coat or None
    water : Water
    axes : tuple of (3,) arrays
        Further directions to see it from.
    plan : BaitFile
        What was stated: line, cast, retrieve, limits, measured and all the rest.
    files : tuple of MeshFile
        The meshes as read, the body's first.
    findings : tuple of Finding
        Of reading and soundness.
    timings : dict of float, s
        Spent on reading and soundness.
    """

    name: str
    frame: Frame
    body: MeshPiece
    pieces: tuple[MeshPiece, ...]
    balls: tuple[Balls, ...]
    hardware: tuple[Hardware, ...]
    coat: Coat | None
    water: Water
    axes: tuple[Floats, ...]
    plan: BaitFile
    files: tuple[MeshFile, ...]
    findings: tuple[Finding, ...]
    timings: dict[str, float]
