"""`meshlure new`: a first bait file for a mesh, what is missing asked for on a terminal."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from pathlib import Path
from shlex import quote
from typing import TYPE_CHECKING, Annotated, Any, Final

import typer

from meshlure.cli.completion import inserts_begun, materials_begun
from meshlure.cli.options import Largest, most_bytes
from meshlure.cli.progress import phases
from meshlure.cli.terminal import answer, can_ask
from meshlure.errors import Fault, InputError

if TYPE_CHECKING:
    from meshlure.bait.guess import Guess
    from meshlure.starting import Size, Start, Stated

SHORT: Final = "Write a bait file for a mesh, and ask for what is missing."

HELP: Final = """Write a bait file for a mesh, and ask for what is missing.

Nose and back are guessed from the shape and from what lies in it, with how sure that is and why. Asked on a terminal:

\b
  meshlure new body.stl --insert belly.stl=lead

Or all in options, --yes for what was guessed:

\b
  meshlure new body.stl --unit mm --density "0.72 g/cm3" --insert belly.stl=lead \\
    --hardware treble-6=31,0,-9.5 --yes --out minnow.toml

No file is written over. Exit code: 0 done, 2 something is missing or cannot be used.
"""


def new(
    mesh: Annotated[Path, typer.Argument(metavar="MESH", help="The body's mesh.")],
    out: Annotated[
        Path | None, typer.Option("--out", metavar="FILE", help="Bait file to write; beside the mesh if left out.")
    ] = None,
    unit: Annotated[str | None, typer.Option("--unit", metavar="UNIT", help="Of the meshes: mm, cm, m or in.")] = None,
    density: Annotated[
        str | None, typer.Option("--density", metavar="DENSITY", help='Of the body, "0.72 g/cm3".')
    ] = None,
    material: Annotated[
        str | None,
        typer.Option(
            "--material",
            metavar="NAME",
            help="Of the body, instead of a density.",
            autocompletion=materials_begun,
        ),
    ] = None,
    insert: Annotated[
        list[str] | None,
        typer.Option(
            "--insert",
            metavar="FILE=WHAT",
            help="WHAT is a material, a density, sealed or flooded. May repeat.",
            autocompletion=inserts_begun,
        ),
    ] = None,
    hardware: Annotated[
        list[str] | None,
        typer.Option("--hardware", metavar="ITEM=X,Y,Z", help="A hook, ring or eye in stock at its place. May repeat."),
    ] = None,
    nose: Annotated[
        str | None, typer.Option("--nose", metavar="DIRECTION", help='Out of the nose, "-x" or "1,0,0.2".')
    ] = None,
    back: Annotated[
        str | None, typer.Option("--back", metavar="DIRECTION", help="Out of the back, at a right angle to the nose.")
    ] = None,
    name: Annotated[
        str | None, typer.Option("--name", metavar="NAME", help="The bait's; the file's name if left out.")
    ] = None,
    water: Annotated[
        str | None,
        typer.Option("--water", metavar="WATER", help='fresh, sea, or its salt, "12 g/kg"; fresh if left out.'),
    ] = None,
    temperature: Annotated[
        str | None, typer.Option("--temperature", metavar="TEMPERATURE", help='Of the water, "18 degC" if left out.')
    ] = None,
    largest: Largest = None,
    yes: Annotated[bool, typer.Option("--yes", "-y", help="Ask nothing: take what was guessed.")] = False,
) -> None:
    """Begin a bait."""
    from meshlure.starting import Stated, check_new, look, measure, write

    out = mesh.with_suffix(".toml") if out is None else out
    check_new(out)
    most = most_bytes(largest)
    size = measure(mesh, most)
    stated = Stated(
        mesh,
        unit or size.unit or "",
        density,
        material,
        tuple(insert or ()),
        tuple(hardware or ()),
        name,
        water,
        temperature,
        nose,
        back,
    )
    asks = can_ask() and not yes
    if asks:
        from meshlure.cli.asking import Asked

        stated = Asked(stated, size, out).filled()
    else:
        stated = _complete(stated, size, yes)
    with phases() as said:
        start = look(stated, said, most)
    pose = start.pose
    assert pose is not None
    if asks:
        from meshlure.cli.asking import directions

        pose = directions(start)
    elif not yes:
        _check_directions(start)
    write(start, pose.nose, pose.back, out)
    answer(*_written(pose, out))


def _complete(stated: Stated, size: Size, yes: bool) -> Stated:
    """Return what was stated with a unit that is as good as certain; refuse where something is missing."""
    faults = []
    if not stated.unit and yes and size.proposed is not None:
        stated = replace(stated, unit=size.proposed)
    if not stated.unit:
        faults.append(_no_unit(stated, size))
    if stated.density is None and stated.material is None:
        faults.append(
            Fault(
                "what the body is made of is missing",
                "--density",
                "neither --density nor --material",
                'a weighed density, --density "0.72 g/cm3", or a material in stock, --material balsa',
                "add one of them; meshlure materials lists what is in stock",
            )
        )
    if faults:
        raise InputError(faults)
    return stated


def _no_unit(stated: Stated, size: Size) -> Fault:
    fits = f"; {size.proposed} would make it as long as a bait" if size.proposed else ""
    return Fault(
        "the unit of the mesh is missing",
        "--unit",
        f"{stated.mesh} is {size.longest:.4g} long, and does not say of what",
        "mm, cm, m or in",
        f"add --unit {size.proposed or 'mm'}{fits}",
    )


def _check_directions(start: Start) -> None:
    """Refuse directions that nobody stated or agreed to, telling what the shape suggests."""
    assert start.pose is not None
    pairs: Sequence[tuple[str, str | None, Guess]] = (
        ("--nose", start.stated.nose, start.pose.nose),
        ("--back", start.stated.back, start.pose.back),
    )
    missing = [(option, guess) for option, stated, guess in pairs if stated is None]
    if missing:
        raise InputError(
            [
                Fault(
                    f"which way the {option[2:]} points is missing",
                    option,
                    f"{_way(guess)} is {_sure(guess)}: {guess.why}",
                    "a signed axis such as -x, or three numbers",
                    f"add {option} {_way(guess)} if that is right, or --yes to take what was guessed",
                )
                for option, guess in missing
            ]
        )


def _way(guess: Guess) -> str:
    from meshlure.bait.guess import direction_words

    return direction_words(guess.direction)


def _sure(guess: Guess) -> str:
    return "an open guess" if guess.sureness == "open" else str(guess.sureness)


def _written(pose: Any, out: Path) -> list[str]:
    rows = (("nose", pose.nose), ("back", pose.back))
    lines = [f"{out} is written"]
    lines += [f"  {what}     {_way(guess)}, {_sure(guess)}: {guess.why}" for what, guess in rows]
    if any(guess.sureness == "open" for _, guess in rows):
        lines.append(
            "  warning: look at the drawings in the report before you trust angles; correct the file if need be"
        )
    folder = out.with_name(f"{out.stem}-report")
    lines.append(f"  next     meshlure report {quote(str(out))} --out {quote(str(folder))}")
    return lines
