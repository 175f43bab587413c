"""What a maker asks of a chamber, materials looked up, and what he asks for that cannot be."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

from meshlure.bait.pieces import Bait, Substance
from meshlure.bait.substances import substance
from meshlure.errors import Fault, InputError
from meshlure.files.sections.chamber import ChamberSection
from meshlure.files.sections.substance import Substance as Stated
from meshlure.stock.balls import ball_mass

LEAST_TRAVEL: Final = 0.5
"""Ball diameters that the balls must be able to run: with less they neither shift weight nor knock; ours."""

LEAST_SLENDER: Final = 1.2
"""Bore diameters that a bore is long at least: a shorter hollow has no long axis that a row of balls lies along."""

EXAMPLE: Final = '[chamber] balls = [{ diameter = "6 mm", count = 1, material = "bearing steel" }]'


@dataclass(frozen=True)
class Choice:
    """Balls to choose.

    Attributes
    ----------
    diameter : float, m
    count : int
    substance : Substance
    """

    diameter: float
    count: int
    substance: Substance

    @property
    def row(self) -> float:
        """Length of the balls in a row, m."""
        return self.count * self.diameter

    @property
    def mass(self) -> float:
        """Mass of all balls, kg."""
        return self.count * ball_mass(self.diameter, self.substance.density)

    @property
    def name(self) -> str:
        """What a maker calls them."""
        size = f"{self.diameter * 1e3:g} mm"
        return f"one {size} ball" if self.count == 1 else f"{self.count} balls of {size}"


@dataclass(frozen=True)
class Lining:
    """A tube that lines the bore.

    Attributes
    ----------
    substance : Substance
    wall : float, m
    """

    substance: Substance
    wall: float


@dataclass(frozen=True)
class Needs:
    """Everything asked of a chamber.

    Attributes
    ----------
    choices : tuple of Choice
    clearance : float, m
        Bore less ball, on the diameter.
    wall, end_wall : float, m
        Least body material beside the room that is cut, and beyond its ends.
    clear : float, m
        Least distance to other pieces and to hardware.
    slope : float, rad
        By which the bore falls towards the nose, bait level.
    open_to : str
        nose, tail, belly or none.
    lining : Lining or None
    """

    choices: tuple[Choice, ...]
    clearance: float
    wall: float
    end_wall: float
    clear: float
    slope: float
    open_to: str
    lining: Lining | None

    def bore(self, ball: float) -> float:
        """Return the diameter of the hollow that a ball of a diameter runs in, m."""
        return ball + self.clearance

    def cut(self, ball: float) -> float:
        """Return the diameter of the room that is cut from the body, m: a tube's outside, or the bore itself."""
        return self.bore(ball) + (0.0 if self.lining is None else 2 * self.lining.wall)

    def shortest(self, choice: Choice) -> float:
        """Return the least useful length of a bore for some balls, m."""
        return max(choice.row + LEAST_TRAVEL * choice.diameter, LEAST_SLENDER * self.bore(choice.diameter))


def needs(bait: Bait) -> Needs:
    """Return what a bait's file asks of its chamber.

    Raises
    ------
    InputError
        Where it asks for none, for a material that the stock does not know, or for balls that the body cannot hold.
    """
    plan = bait.plan
    name = f"{plan.path.name}: " if plan.path is not None else ""
    section = plan.chamber
    if section is None:
        raise InputError(
            Fault(
                "the bait file does not say what balls may run in it",
                f"{name}chamber",
                "no [chamber] section",
                "the key balls; clearance, wall, end_wall, slope, open_to and tube may be left out",
                f"add a line [chamber], and under it {EXAMPLE.removeprefix('[chamber] ')}",
            )
        )
    if plan.body.printed is not None:
        raise InputError(
            Fault(
                "no chamber is cut into printed walls with infill: what it takes from them is unknown",
                f"{name}body.printed",
                "",
                "density or material",
                "weigh the print, state its density, and print a wall round the chamber as thick as its walls",
            )
        )
    faults: list[Fault] = []
    choices = _choices(section, f"{name}chamber.balls", faults)
    lining = _lining(section, f"{name}chamber.tube.material", faults)
    if faults:
        raise InputError(faults)
    asked = Needs(
        choices,
        section.clearance,
        section.wall,
        section.end_wall,
        plan.ballast.keep_clear,
        section.slope,
        section.open_to,
        lining,
    )
    faults = _oversized(bait, asked, f"{name}chamber.balls")
    if lining is not None and asked.open_to == "belly":
        faults.append(
            Fault(
                "a hole from the belly would have to go through the tube",
                f"{name}chamber.open_to",
                "open_to = 'belly' beside a tube",
                "nose or tail, from where the tube goes in as well, or none",
                "change open_to, or leave the tube out",
            )
        )
    if faults:
        raise InputError(faults)
    return asked


def _choices(section: ChamberSection, where: str, faults: list[Fault]) -> tuple[Choice, ...]:
    found: dict[tuple[float, int, str | None], Choice] = {}
    for number, row in enumerate(section.balls, 1):
        try:
            made_of = substance(Stated(material=row.material), f"{where}[{number}].material")
        except InputError as error:
            faults.extend(error.faults)
            continue
        for diameter in row.diameters:
            for count in row.counts:
                found.setdefault((diameter, count, made_of.name), Choice(diameter, count, made_of))
    return tuple(found.values())


def _lining(section: ChamberSection, where: str, faults: list[Fault]) -> Lining | None:
    tube = section.tube
    if tube is None:
        return None
    try:
        return Lining(substance(Stated(material=tube.material), where), tube.wall)
    except InputError as error:
        faults.extend(error.faults)
        return None


def _oversized(bait: Bait, asked: Needs, where: str) -> list[Fault]:
    """Balls whose bore is wider than the body is thick, or whose row is longer than the body."""
    frame, vertices = bait.frame, bait.body.surface.vertices
    size = {
        what: float((vertices @ way).max() - (vertices @ way).min())
        for what, way in (("long", frame.nose), ("wide", frame.side), ("deep", frame.back))
    }
    thin = min(("wide", "deep"), key=lambda what: size[what])
    faults = []
    for diameter in sorted({choice.diameter for choice in asked.choices}):
        if asked.cut(diameter) >= size[thin]:
            room = size[thin] - 2 * asked.wall - (asked.cut(diameter) - diameter)
            allowed = f"under {room * 1e3:.3g} mm, with its clearance and walls" if room > 0 else "thinner walls"
            faults.append(
                Fault(
                    f"the ball is larger than the body: it takes a bore of {asked.cut(diameter) * 1e3:.4g} mm",
                    where,
                    f"{diameter * 1e3:.4g} mm in a body {size[thin] * 1e3:.4g} mm {thin}",
                    allowed,
                    "take a smaller ball, and check length_unit",
                )
            )
    faults += [
        Fault(
            "the row of balls is longer than the body",
            where,
            f"{choice.name}, {choice.row * 1e3:.4g} mm in a body {size['long'] * 1e3:.4g} mm long",
            "a row that leaves room to run",
            "take fewer balls",
        )
        for choice in asked.choices
        if choice.row >= size["long"]
    ]
    return faults
