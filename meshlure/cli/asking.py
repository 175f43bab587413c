"""Questions on a terminal, each with what would be taken, asked again until the answer can be used."""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import dataclass, replace
from pathlib import Path
from typing import TYPE_CHECKING, Final, TypeVar

import typer

from meshlure.cli.terminal import harmless, tell
from meshlure.errors import Fault, InputError

if TYPE_CHECKING:
    from meshlure.bait.guess import Guess, Pose
    from meshlure.geometry.surface import Floats
    from meshlure.starting import Size, Start, Stated

T = TypeVar("T")

_ASKEW: Final = 1.7e-3
"""Sine of a tenth of a degree, by which directions may miss a right angle."""
_NUMBER: Final = re.compile(r"[+\-]?\.?\d")


def ask(question: str, proposed: str | None, take: Callable[[str], T]) -> T:
    """Return the answer to a question, as `take` reads it.

    Parameters
    ----------
    question : str
    proposed : str or None
        Taken for an empty answer.
    take : callable
        Reads the answer; where it raises an InputError, that is told and the question asked again.
    """
    while True:
        # Shown here, for the parser would send it to the terminal as it is, and a file may have any name.
        shown = f"{question} [{harmless(proposed)}]" if proposed else question
        text = typer.prompt(shown, default="" if proposed is None else proposed, show_default=False, err=True)
        try:
            return take(str(text).strip())
        except InputError as error:
            for fault in error.faults:
                tell(*(f"  {part}" for part in (fault.what, fault.allowed, fault.next_step) if part))


@dataclass(frozen=True)
class Asked:
    """What is asked before the meshes are looked at."""

    stated: Stated
    size: Size
    out: Path

    def filled(self) -> Stated:
        """Return what was stated with what was missing, as it was answered."""
        stated, size = self.stated, self.size
        long = f"{size.longest:.4g}{f' {size.unit}' if size.unit else ''} long"
        tell(f"{stated.mesh}: {size.triangles:,} triangles, {long}", "Ctrl-C stops, and nothing is written.", "")
        if not stated.unit:
            stated = replace(stated, unit=ask("Unit of the meshes: mm, cm, m or in", size.proposed, _unit))
        if stated.density is None and stated.material is None:
            words = 'Body: its density, such as "0.72 g/cm3", or a material in stock, such as balsa'
            density, material = ask(words, None, _substance)
            stated = replace(stated, density=density, material=material)
        if not stated.inserts:
            tell(
                "Ballast, wire, lip and hollows, each a mesh: belly.stl=lead, lip.stl=polycarbonate, chamber.stl=sealed"
            )
            stated = replace(stated, inserts=self._inserts())
        if stated.name is None:
            stated = replace(stated, name=ask("Name of the bait", stated.mesh.stem, str) or None)
        if stated.water is None:
            stated = replace(stated, water=ask('Water: fresh, sea, or its salt, "12 g/kg"', "fresh", _water))
        return stated

    def _inserts(self) -> tuple[str, ...]:
        found: list[str] = []
        while text := ask("One of them, or Enter for no more", None, _insert):
            found.append(text)
        return tuple(found)


def directions(start: Start) -> Pose:
    """Return nose and back as they were agreed to, or typed."""
    from meshlure.bait.guess import Guess, Sureness
    from meshlure.starting import direction, posed

    pose = start.pose
    assert pose is not None

    def agreed(what: str, guess: Guess, square_to: Guess | None) -> Guess:
        if guess.sureness is Sureness.STATED:
            return guess
        tell("", f"{what}: {_words(guess)} is {guess.sureness}: {guess.why}")

        def take(text: str) -> Guess:
            if text == _words(guess):
                return guess
            return Guess(_square(direction(text, ""), square_to), Sureness.STATED, "as stated")

        return ask(f"Out of the {what.lower()}: an axis such as -x, or three numbers", _words(guess), take)

    nose = agreed("Nose", pose.nose, pose.back if pose.back.sureness is Sureness.STATED else None)
    if nose is not pose.nose:
        stated = pose.back.direction if pose.back.sureness is Sureness.STATED else None
        pose = posed(start, nose.direction, stated)
    back = agreed("Back", pose.back, nose)
    return replace(pose, nose=nose, back=back)


def _words(guess: Guess) -> str:
    from meshlure.bait.guess import direction_words

    return direction_words(guess.direction)


def _square(way: Floats, to: Guess | None) -> Floats:
    """Refuse a direction that is not at a right angle to another."""
    if to is not None and abs(float(way @ to.direction)) > _ASKEW:
        raise InputError(Fault(f"it must be at a right angle to {_words(to)}", "", "", "", "look at the drawing again"))
    return way


def _unit(text: str) -> str:
    from meshlure.units import length_unit

    length_unit(text, "")
    return text


def _substance(text: str) -> tuple[str | None, str | None]:
    """Return a body's density or its material, whichever was answered."""
    from meshlure.stock.materials import material
    from meshlure.units import quantity

    if not text:
        raise InputError(Fault("it cannot be left open: weight and buoyancy hang on it"))
    if _NUMBER.match(text):
        quantity(text, "density", "")
        return text, None
    material(text, "")
    return None, text


def _water(text: str) -> str:
    from meshlure.units import quantity

    if text.casefold() not in ("fresh", "sea"):
        quantity(text, "salinity", "")
    return text


def _insert(text: str) -> str:
    if not text:
        return text
    file, sign, what = (part.strip() for part in text.rpartition("="))
    if not sign or not file or not what:
        raise InputError(Fault("it is a file and what it is", "", "", "FILE=MATERIAL, FILE=DENSITY, FILE=sealed"))
    if not Path(file).is_file():
        raise InputError(Fault("there is no such file", "", "", file))
    if what.casefold() not in ("sealed", "flooded"):
        _substance(what)
    return text
