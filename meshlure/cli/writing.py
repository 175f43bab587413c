"""Writing a study into its output folder, whole or not at all."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import replace
from pathlib import Path
from time import perf_counter

from meshlure.bait.pieces import Bait
from meshlure.files.folder import RESULTS, staged
from meshlure.results.study import Study

PAGE = "report.html"


SCENE = "scene.glb"


def write(found: Study, out: Path, *, page: bool, variant: Bait | None, glb: bool = False) -> Study:
    """Write results.json, the page, the meshes of a variant and the scene; return the study with their names in it.

    Parameters
    ----------
    found : Study
    out : Path
        The output folder.
    page : bool
        Whether to draw the page.
    variant : Bait or None
        Of which the cut body and inserts are written.
    glb : bool
        Whether to write the bait in its water as a 3-D scene.
    """

    def make(folder: Path) -> tuple[Study, Sequence[str]]:
        names: list[str] = []
        if variant is not None:
            from meshlure.making.variant import write_cuttings

            names += write_cuttings(variant, folder)
        if glb:
            from meshlure.report.glb import glb as scene

            (folder / SCENE).write_bytes(scene(found))
            names.append(SCENE)
        return found, names

    return write_made(out, page=page, make=make)


def write_made(out: Path, *, page: bool, make: Callable[[Path], tuple[Study, Sequence[str]]]) -> Study:
    """Write what a command makes, with results.json and the page; return the study with all names in it.

    Parameters
    ----------
    out : Path
        The output folder.
    page : bool
        Whether to draw the page.
    make : callable
        Writes its files into the folder that it is given, and returns the study with their names. Whatever it raises
        leaves the output folder as it was.
    """
    with staged(out) as folder:
        found, made = make(folder)
        names = list(made)
        results = dict(found.results)
        if page:
            from meshlure.report.page import page as draw

            start = perf_counter()
            (folder / PAGE).write_text(draw(found), encoding="utf-8", errors="backslashreplace")
            names.append(PAGE)
            results["timings_s"] = results["timings_s"] | {"page": perf_counter() - start}
        results["files"] = sorted(names)
        found = replace(found, results=results)
        (folder / RESULTS).write_text(found.to_json(), encoding="utf-8")
    return found


BENCH = "bench.html"


def write_bench(found: Study, out: Path) -> Study:
    """Write results.json and the bench sheet of a study with a pour; return the study with their names in it."""

    def make(folder: Path) -> tuple[Study, Sequence[str]]:
        from meshlure.report.bench import bench

        (folder / BENCH).write_text(bench(found), encoding="utf-8", errors="backslashreplace")
        return found, (BENCH,)

    return write_made(out, page=False, make=make)


def write_page(found: Study, out: Path, name: str, draw: Callable[[], str] | None) -> Study:
    """Write results.json and a page of its own kind; return the study with its name in it.

    Parameters
    ----------
    found : Study
    out : Path
        The output folder.
    name : str
        Of the page.
    draw : callable or None
        Returns the page's text; None for no page.
    """

    def make(folder: Path) -> tuple[Study, Sequence[str]]:
        if draw is None:
            return found, ()
        (folder / name).write_text(draw(), encoding="utf-8", errors="backslashreplace")
        return found, (name,)

    return write_made(out, page=False, make=make)
