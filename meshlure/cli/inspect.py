"""`meshlure inspect`: what a mesh file holds, what is wrong with it, and mending it on request."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path
from typing import TYPE_CHECKING, Annotated, Final

import typer

from meshlure.cli.options import Debug, Largest, most_bytes
from meshlure.cli.progress import phases
from meshlure.cli.terminal import answer, hand_on
from meshlure.errors import Fault, InputError

if TYPE_CHECKING:
    from meshlure.geometry.mending.steps import Wishes
    from meshlure.inspecting import Inspection

SHORT: Final = "Tell what is in a mesh, what is wrong with it, and mend it."

HELP: Final = """Tell what is in a mesh, what is wrong with it and where; mend it on request.

FILE is a mesh (.stl, .obj, .3mf, .ply, .off, .glb, and .step with the brep extra) or a folder of them. 3MF, GLB and
STEP say their unit, which is believed; of all others state it:

\b
  meshlure inspect samples/minnow/body.stl --unit mm

With --mend it tells what mending would do; with --out it writes the mended mesh, and leaves the original alone:

\b
  meshlure inspect samples/minnow/body.stl --unit mm --mend

Exit code: 0 sound, 1 something was found, 2 a file cannot be read.
"""

_SOUND, _FOUND, _UNREADABLE = 0, 1, 2

_WIDEST: Final = 1e-3
"""m. No crack is wider; what is farther apart was drawn so."""
_LONGEST: Final = 0.1
"""m. Of a shell that is decoration, and of a lattice's step."""


def inspect(
    files: Annotated[list[Path], typer.Argument(metavar="FILE...", help="Meshes, or folders of meshes.")],
    unit: Annotated[
        str | None, typer.Option("--unit", metavar="UNIT", help="Of files that do not say it: mm, cm, m or in.")
    ] = None,
    picture: Annotated[
        Path | None,
        typer.Option(
            "--picture", metavar="PLACE", help="Draw each mesh: a folder, or a file that ends in .png or .svg."
        ),
    ] = None,
    mend: Annotated[bool, typer.Option("--mend", help="Tell what mending would do; with --out, do it.")] = False,
    out: Annotated[
        Path | None, typer.Option("--out", metavar="FILE", help="Mended mesh to write, .stl or .3mf, in mm.")
    ] = None,
    weld: Annotated[
        str | None,
        typer.Option(
            "--weld", metavar="LENGTH", help='Mend: how far apart edges may be to be sewn; "0.01 mm" unasked.'
        ),
    ] = None,
    cap: Annotated[
        str | None,
        typer.Option("--cap", metavar="SHARE", help='Mend: flat holes up to this share of the skin are closed; "1%".'),
    ] = None,
    mirror: Annotated[
        bool, typer.Option("--mirror", help="Mend: complete half a body by its mirror image at its flat opening.")
    ] = False,
    drop: Annotated[
        list[str] | None,
        typer.Option(
            "--drop", metavar="WHAT", help='Mend: leave out a part by name, or shells up to a size, "2 mm". May repeat.'
        ),
    ] = None,
    remake: Annotated[
        str | None,
        typer.Option(
            "--remake", metavar="STEP", help='Mend: if nothing else closes it, a new skin in steps, "0.3 mm".'
        ),
    ] = None,
    largest: Largest = None,
    json: Annotated[bool, typer.Option("--json", help="Print everything as JSON, and nothing else.")] = False,
    debug: Debug = False,
) -> None:
    """Inspect meshes."""
    del debug  # read by the entry, which every command shares
    asked = {"--weld": weld, "--cap": cap, "--mirror": mirror or None, "--drop": drop, "--remake": remake, "--out": out}
    given = [option for option, value in asked.items() if value is not None]
    if given and not mend:
        raise InputError(
            Fault("these options belong to mending", ", ".join(given), "no --mend", "--mend beside them", "add --mend")
        )
    most = most_bytes(largest)
    meshes = list(_meshes(files))
    if out is not None:
        _check_out(out, meshes)
    pictures = {} if picture is None else _pictures(picture, meshes)
    wishes, dropped = _wishes(mend, weld, cap, mirror, drop or [], remake)
    from meshlure.inspecting import account
    from meshlure.inspecting import inspect as look

    found = []
    with phases() as said:
        for number, mesh in enumerate(meshes, 1):
            said("inspecting" if len(meshes) == 1 else f"inspecting mesh {number} of {len(meshes)}")
            looked = look(mesh, unit, wishes, dropped, most)
            if mesh in pictures:
                _draw(looked, pictures[mesh])
            found.append(looked if out is not None else looked.told())
        if out is not None:
            said("writing")
            _write(found[0], out)
    tree = account(found)
    if json:
        from meshlure.results.jsontext import json_text

        hand_on(json_text(tree))
    else:
        from meshlure.cli.soundings import lines, table

        if len(found) > 1:
            answer(table(tree["meshes"]))
        for row in tree["meshes"] if len(found) == 1 or mend else []:
            answer(*lines(row))
    worst = _code(tree["meshes"], out is not None)
    if worst:
        raise typer.Exit(worst)


def _code(rows: list[dict[str, object]], written: bool) -> int:
    """Exit code of all meshes; one that was mended and written counts as it came out."""
    codes = {"sound": _SOUND, "findings": _FOUND, "unreadable": _UNREADABLE}
    if written:
        mending = rows[0]["mending"]
        assert isinstance(mending, dict)
        return _FOUND if any(row["level"] != "note" for row in mending["findings"]) else _SOUND
    return max(codes[str(row["verdict"])] for row in rows)


def _meshes(files: list[Path]) -> Iterator[Path]:
    """Yield the meshes that are named, those of a folder in the order of their names.

    Raises
    ------
    InputError
        A folder holds none, or cannot be looked at.
    """
    from meshlure.files.formats import FORMATS

    for file in files:
        try:
            if not file.is_dir():
                yield file
                continue
            inside = sorted(entry for entry in file.iterdir() if entry.suffix.lower() in FORMATS and entry.is_file())
        except (OSError, ValueError) as error:
            reason = error.strerror if isinstance(error, OSError) and error.strerror else str(error)
            raise InputError(
                Fault("this cannot be looked at", str(file), reason, next_step="check the path")
            ) from error
        if not inside:
            deeper = sorted({m.parent.name for m in file.glob("*/*") if m.suffix.lower() in FORMATS and m.is_file()})
            step = f"name one that does, such as {str(file / deeper[0])!r}" if deeper else "name one that does"
            allowed = f"a folder with files that end in {', '.join(FORMATS)}"
            raise InputError(Fault("the folder itself holds no mesh", str(file), "", allowed, step))
        yield from inside


def _check_out(out: Path, meshes: list[Path]) -> None:
    from meshlure.files.single import check_absent
    from meshlure.making.mended import SUFFIXES

    if len(meshes) != 1:
        raise InputError(
            Fault("one mesh is mended into one file", "--out", f"{len(meshes)} meshes", "one mesh", "name one of them")
        )
    if out.suffix.lower() not in SUFFIXES:
        allowed = f"a file that ends in {' or '.join(SUFFIXES)}"
        raise InputError(
            Fault("a mended mesh is written as STL or 3MF", f"--out {out}", out.suffix, allowed, "name one")
        )
    check_absent(out, "--out")


def _pictures(place: Path, meshes: list[Path]) -> dict[Path, Path]:
    """Return where the picture of each mesh goes.

    Raises
    ------
    InputError
        Something else is there, or several meshes would go into one picture.
    """
    from meshlure.files.single import check_absent
    from meshlure.report.threesides import MARK, SUFFIXES

    if place.suffix.lower() in SUFFIXES and not place.is_dir():
        if len(meshes) != 1:
            raise InputError(
                Fault(
                    "several meshes need a folder for their pictures", "--picture", str(place), "a folder", "name one"
                )
            )
        places = {meshes[0]: place}
    elif place.is_dir():
        used: set[str] = set()
        places = {mesh: place / _name(mesh, used) for mesh in meshes}
    else:
        allowed = f"a folder that is there, or a file that ends in {' or '.join(SUFFIXES)}"
        raise InputError(Fault("a picture needs a place", f"--picture {place}", str(place), allowed, "make the folder"))
    for target in places.values():
        check_absent(target, "--picture", MARK.encode())
    return places


def _name(mesh: Path, used: set[str]) -> str:
    name, number = f"{mesh.stem}.png", 2
    while name.casefold() in used:
        name, number = f"{mesh.stem}-{number}.png", number + 1
    used.add(name.casefold())
    return name


def _wishes(
    mend: bool, weld: str | None, cap: str | None, mirror: bool, drop: list[str], remake: str | None
) -> tuple[Wishes | None, tuple[str, ...]]:
    """Return what mending may do, None where it is not asked for, and the parts to leave out by name.

    Raises
    ------
    InputError
        With every option that cannot be understood.
    """
    if not mend:
        return None, ()
    from meshlure.geometry.mending.steps import CAP, WELD, Wishes
    from meshlure.units import quantity

    faults: list[Fault] = []

    def length(text: str, option: str, most: float) -> float:
        try:
            return quantity(text, "length", option, positive=True, most=most)
        except InputError as error:
            faults.extend(error.faults)
            return 0.0

    names, sizes = [], [0.0]
    for what in drop:
        if what.strip()[:1].isdigit():
            sizes.append(length(what, "--drop", _LONGEST))
        else:
            names.append(what)
    share = CAP
    if cap is not None:
        try:
            share = quantity(cap, "share", "--cap", most=1.0)
        except InputError as error:
            faults.extend(error.faults)
    wishes = Wishes(
        weld=WELD if weld is None else length(weld, "--weld", _WIDEST),
        cap=share,
        mirror=mirror,
        smallest=max(sizes),
        remake=None if remake is None else length(remake, "--remake", _LONGEST),
    )
    if faults:
        raise InputError(faults)
    return wishes, tuple(names)


def _draw(found: Inspection, place: Path) -> None:
    if found.surface is None:
        return
    from meshlure.files.single import write_file
    from meshlure.report.threesides import three_sides

    title = f"{found.tree['file']}: {found.tree['verdict']}"
    drawn = three_sides(place, found.surface, found.open_edges, found.findings, title)
    write_file(place, drawn, "--picture", replace=True)


def _write(found: Inspection, out: Path) -> None:
    """Write the mended mesh.

    Raises
    ------
    InputError
        It could not be read, or is not closed all the same.
    """
    if found.mended is None:
        faults = [Fault(**row) for row in found.tree["faults"]]
        raise InputError(faults)
    after = found.mended.after
    if found.tree["mending"]["volume_mm3"] is None:
        raise InputError(
            [
                Fault("cannot be mended: " + left.what, found.tree["file"], next_step=left.advice)
                for left in found.mended.left
            ]
            or Fault("cannot be mended", found.tree["file"], next_step="see what is found without --out")
        )
    from meshlure.files.single import write_file
    from meshlure.making.mended import mesh_bytes

    content, slack = mesh_bytes(after.surface, out, out.stem)
    write_file(out, content, "--out")
    found.tree["mending"] |= {"file": str(out), "merged_mm": slack * 1e3}
