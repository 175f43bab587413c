"""`meshlure report`: from a bait's meshes to results.json and report.html."""

from __future__ import annotations

import sys
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from meshlure.errors import Fault, InputError

if TYPE_CHECKING:
    from meshlure.files.baitfile import BaitFile
    from meshlure.results.study import Study

HELP = """Weigh a bait, float it, measure it: writes results.json and report.html.

BAIT is a bait file (.toml), or the body's mesh (.stl, .obj) with the options of the quick form.

Example: meshlure report samples/minnow/minnow.toml --out out

Quick form: meshlure report body.stl --density "0.72 g/cm3" --insert belly.stl=lead --unit mm --nose -x --back +z --out out

Exit code: 0 done, 1 done but a fault was found, 2 bad input, 3 a fault of ours.
"""

_QUICK = "Quick form"
_WRITES = "What is written"


def report(
    bait: Annotated[Path, typer.Argument(metavar="BAIT", help="Bait file (.toml), or the body's mesh for the quick form.")],
    out: Annotated[
        Path | None,
        typer.Option("--out", metavar="DIR", help="Folder to write; absent, empty, or from an earlier run.", rich_help_panel=_WRITES),
    ] = None,
    no_page: Annotated[bool, typer.Option("--no-page", help="Write results.json alone.")] = False,
    json: Annotated[bool, typer.Option("--json", help="Print results.json; --out may then be left out.")] = False,
    cut: Annotated[
        bool, typer.Option("--cut", help="Also write the body with pockets cut for its inserts, and each insert, as STL.")
    ] = False,
    density: Annotated[str | None, typer.Option("--density", help='Of the body: "0.72 g/cm3".', rich_help_panel=_QUICK)] = None,
    material: Annotated[str | None, typer.Option("--material", help="Of the body, instead of a density.")] = None,
    insert: Annotated[
        list[str] | None,
        typer.Option("--insert", metavar="FILE=WHAT", help="WHAT: a material, a density, sealed or flooded. May repeat."),
    ] = None,
    unit: Annotated[str | None, typer.Option("--unit", help="Of the meshes: mm, cm, m or in.")] = None,
    nose: Annotated[str | None, typer.Option("--nose", help="Mesh direction out of the nose: -x, or 1,0,0.2.")] = None,
    back: Annotated[str | None, typer.Option("--back", help="Mesh direction out of the back: +z.")] = None,
    name: Annotated[str | None, typer.Option("--name", help="Of the bait.")] = None,
    temperature: Annotated[str | None, typer.Option("--temperature", help='Of the water: "12 degC".')] = None,
    salinity: Annotated[str | None, typer.Option("--salinity", help='Of the water: "35 g/kg".')] = None,
    debug: Annotated[bool, typer.Option("--debug", help="On a fault of ours, print where it happened.")] = False,
) -> None:
    """Study a bait and write what was found."""
    del debug  # read by the entry, which every command shares
    if out is None and not json:
        raise InputError(Fault("there is nowhere to write to", "--out", "nothing", "a folder", "add --out DIR, or --json"))
    if cut and out is None:
        raise InputError(Fault("--cut writes meshes and needs a folder", "--out", "nothing", "a folder", "add --out DIR"))
    options = {
        "--density": density, "--material": material, "--unit": unit, "--nose": nose, "--back": back, "--name": name,
        "--temperature": temperature, "--salinity": salinity,
    }
    plan = _plan(bait, options, insert or [])
    if out is not None:
        from meshlure.files.folder import check_folder

        check_folder(out)
    from meshlure.bait.loading import load
    from meshlure.examine import study

    read = load(plan)
    found = study(read)
    if out is not None:
        from meshlure.cli.writing import write

        found = write(found, out, page=not no_page, variant=read if cut else None)
    if json:
        sys.stdout.write(found.to_json())
    else:
        _tell(found, out)
    if any(finding["level"] == "fault" for finding in found.results["findings"]):
        raise typer.Exit(1)


def _plan(bait: Path, options: dict[str, str | None], inserts: list[str]) -> BaitFile:
    """Return the bait as stated: by its file, or by the quick form's options."""
    given = [option for option, value in options.items() if value is not None] + ["--insert"] * bool(inserts)
    if bait.suffix.casefold() == ".toml":
        if given:
            raise InputError(Fault(
                what="these options belong to the quick form, which takes a mesh instead of a bait file",
                where=str(bait), found=", ".join(given), allowed="--out, --no-page, --json, --cut",
                next_step="write them into the bait file",
            ))
        from meshlure.files.baitfile import read_baitfile

        return read_baitfile(bait)
    missing = [option for option in ("--unit", "--nose", "--back") if options[option] is None]
    if missing:
        raise InputError(Fault(
            what="a mesh does not say its unit, nor which way its nose and back are",
            where=str(bait), found=f"no {', '.join(missing)}", allowed="all of --unit, --nose and --back",
            next_step="add them, such as --unit mm --nose -x --back +z; a bait file ends in .toml",
        ))
    from meshlure.files.quickbait import quick_bait

    return quick_bait(
        bait,
        density=options["--density"],
        material=options["--material"],
        inserts=inserts,
        unit=options["--unit"] or "",
        nose=options["--nose"] or "",
        back=options["--back"] or "",
        name=options["--name"],
        temperature=options["--temperature"],
        salinity=options["--salinity"],
    )


def _tell(found: Study, out: Path | None) -> None:
    """Print what a maker asks first."""
    results = found.results
    mass = results["weight"]["mass_g"]
    lines = [
        str(results["name"]),
        f"  mass     {mass:.2f} g ({mass / 28.349523125:.3f} oz), centre of gravity {results['weight']['from_nose_mm']:.1f} mm from the nose",
        f"  verdict  {results['buoyancy']['verdict']}",
    ]
    lines += [f"  posture  {posture['words']}" for posture in results["postures"]]
    counts = {level: sum(f["level"] == level for f in results["findings"]) for level in ("fault", "warning", "note")}
    lines.append("  found    " + ", ".join(f"{n} {level}{'' if n == 1 else 's'}" for level, n in counts.items()))
    lines += [f"           {f['level']}: {f['message']}" for f in results["findings"] if f["level"] != "note"]
    if out is not None:
        lines.append(f"  written  {', '.join(['results.json', *results['files']])} in {out}")
    typer.echo("\n".join(_printable(line) for line in lines))


def _printable(text: str) -> str:
    return "".join(c if c.isprintable() else c.encode("unicode_escape").decode() for c in text)
