"""`meshlure report`: from a bait's meshes to results.json and report.html."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Annotated, Final

import typer

from meshlure.cli.completion import inserts_begun, materials_begun
from meshlure.cli.options import AsJson, Debug, Largest, NoPage, Out, check_out, most_bytes
from meshlure.cli.progress import phases
from meshlure.cli.terminal import answer, hand_on
from meshlure.errors import Fault, InputError
from meshlure.files.formats import FORMATS

if TYPE_CHECKING:
    from meshlure.files.baitfile import BaitFile

BAIT_FILE: Final = ".toml"
SUFFIXES: Final = (BAIT_FILE, *FORMATS)

SHORT: Final = "Weigh, float and measure a bait."

HELP: Final = """Weigh, float and measure a bait: writes results.json and report.html.

BAIT is a bait file (.toml), which names the meshes and what they are made of:

\b
  meshlure report samples/minnow/minnow.toml --out out

Or, for a quick look, it is the body's mesh (.stl, .obj, .3mf, .ply, .off, .glb, .step), with the rest in options:

\b
  meshlure report body.stl --density "0.72 g/cm3" --insert belly.stl=lead \\
    --unit mm --nose -x --back +z --out out

Exit code: 0 done, 1 done but a fault was found, 2 the input cannot be used, 3 a fault of ours.
"""


def report(
    bait: Annotated[Path, typer.Argument(metavar="BAIT", help="Bait file, or the body's mesh.")],
    out: Out = None,
    no_page: NoPage = False,
    json: AsJson = False,
    cut: Annotated[
        bool,
        typer.Option("--cut", help="Also write the body with pockets cut for its inserts, and each insert, as STL."),
    ] = False,
    glb: Annotated[
        bool, typer.Option("--glb", help="Also write the bait in its water as a 3-D scene for viewers, scene.glb.")
    ] = False,
    density: Annotated[
        str | None, typer.Option("--density", metavar="DENSITY", help='Quick: of the body, "0.72 g/cm3".')
    ] = None,
    material: Annotated[
        str | None,
        typer.Option(
            "--material",
            metavar="NAME",
            help="Quick: of the body, instead of a density.",
            autocompletion=materials_begun,
        ),
    ] = None,
    insert: Annotated[
        list[str] | None,
        typer.Option(
            "--insert",
            metavar="FILE=WHAT",
            help="Quick: WHAT is a material, a density, sealed or flooded. May repeat.",
            autocompletion=inserts_begun,
        ),
    ] = None,
    unit: Annotated[
        str | None, typer.Option("--unit", metavar="UNIT", help="Quick: of all the meshes; mm, cm, m or in.")
    ] = None,
    nose: Annotated[
        str | None,
        typer.Option("--nose", metavar="AXIS", help="Quick: mesh direction out of the nose; -x, or 1,0,0.2."),
    ] = None,
    back: Annotated[
        str | None, typer.Option("--back", metavar="AXIS", help="Quick: mesh direction out of the back; +z.")
    ] = None,
    name: Annotated[str | None, typer.Option("--name", metavar="NAME", help="Quick: of the bait.")] = None,
    temperature: Annotated[
        str | None, typer.Option("--temperature", metavar="DEGREES", help='Quick: of the water, "12 degC".')
    ] = None,
    salinity: Annotated[
        str | None, typer.Option("--salinity", metavar="SALT", help='Quick: of the water, "35 g/kg".')
    ] = None,
    against: Annotated[
        Path | None,
        typer.Option("--against", metavar="BAIT.toml", help="Another bait file whose flight this one is held against."),
    ] = None,
    mend: Annotated[
        bool, typer.Option("--mend", help="Mend the meshes before anything is told, each step as a finding.")
    ] = False,
    largest: Largest = None,
    debug: Debug = False,
) -> None:
    """Study a bait and write what was found."""
    del debug  # read by the entry, which every command shares
    check_out(out, needed=not json, needing="--cut writes meshes" if cut else "--glb writes a scene" if glb else "")
    options = {
        "--density": density,
        "--material": material,
        "--unit": unit,
        "--nose": nose,
        "--back": back,
        "--name": name,
        "--temperature": temperature,
        "--salinity": salinity,
    }
    plan = _plan(bait, options, insert or [])
    from meshlure.bait.loading import load
    from meshlure.examine import study
    from meshlure.geometry.mending.steps import Wishes

    most = most_bytes(largest)
    wishes = Wishes() if mend else None
    with phases() as said:
        said("reading the meshes")
        read = load(plan, wishes, most)
        other = None if against is None else load(_plan(against, {}, []), wishes, most)
        found = study(read, other, said)
        if out is not None:
            from meshlure.cli.writing import write

            said("writing the page" if not no_page else "writing")
            found = write(found, out, page=not no_page, variant=read if cut else None, glb=glb)
    if json:
        hand_on(found.to_json())
    else:
        from meshlure.cli.summary import summary

        answer(*summary(found.results, out))
    if any(finding["level"] == "fault" for finding in found.results["findings"]):
        raise typer.Exit(1)


def _plan(bait: Path, options: dict[str, str | None], inserts: list[str]) -> BaitFile:
    """Return the bait as stated: by its file, or by the quick form's options."""
    given = [option for option, value in options.items() if value is not None] + ["--insert"] * bool(inserts)
    if bait.suffix.casefold() == BAIT_FILE:
        if given:
            raise InputError(
                Fault(
                    what="these options belong to the quick form, which takes a mesh instead of a bait file",
                    where=str(bait),
                    found=", ".join(given),
                    allowed="--out, --no-page, --json, --cut, --glb, --against, --mend, --largest",
                    next_step="write them into the bait file",
                )
            )
        from meshlure.files.baitfile import read_baitfile

        return read_baitfile(bait)
    if bait.suffix.casefold() not in SUFFIXES:
        folder = bait.is_dir()
        raise InputError(
            Fault(
                what="this is a folder, not a bait"
                if folder
                else "this is neither a bait file nor a mesh, by its name",
                where=str(bait),
                found="" if folder else repr(bait.suffix or bait.name),
                allowed=f"a file that ends in {', '.join(SUFFIXES)}",
                next_step="name the bait file in it" if folder else "export the part as STL, or name the bait file",
            )
        )
    says = FORMATS[bait.suffix.casefold()].says_unit
    needed = ("--nose", "--back") if says else ("--unit", "--nose", "--back")
    missing = [option for option in needed if options[option] is None]
    if missing:
        raise InputError(
            Fault(
                what="a mesh does not say its unit, nor which way its nose and back are",
                where=str(bait),
                found=f"no {', '.join(missing)}",
                allowed=f"all of {', '.join(needed)}",
                next_step="add them, such as --unit mm --nose -x --back +z; a bait file ends in .toml",
            )
        )
    from meshlure.files.quickbait import quick_bait

    return quick_bait(
        bait,
        density=options["--density"],
        material=options["--material"],
        inserts=inserts,
        unit=options["--unit"] or ("mm" if says else ""),
        nose=options["--nose"] or "",
        back=options["--back"] or "",
        name=options["--name"],
        temperature=options["--temperature"],
        salinity=options["--salinity"],
    )
