"""The report page: one HTML file with everything in it, nothing remote and no script."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from meshlure.report import (
    airborne,
    attitude,
    ballast,
    budget,
    chambers,
    charts,
    compared,
    flight,
    flow,
    moulds,
    origin,
    substance,
    underwater,
    water,
    weighed,
    wording,
)
from meshlure.report.call import call
from meshlure.report.drawings import TITLES, Drawing, drawing
from meshlure.report.figures import Picture, drawing_style
from meshlure.report.layout import scale_for, scale_words
from meshlure.report.pen import swatches
from meshlure.report.resting import resting
from meshlure.report.rose import rose
from meshlure.report.saved import with_files
from meshlure.report.subject import Subject, main_posture, readable, subject, touchy
from meshlure.report.view import turning
from meshlure.report.windward import windward
from meshlure.results import Study

MOST_PARTS = 400
"""Characters of a bait's name that the page shows."""


@dataclass(frozen=True)
class Verdict:
    """What stands first on the page, in words."""

    state: str
    sentence: str
    mass: str
    ounces: str
    reserve: str
    reserve_band: str
    posture: str
    lean: str
    touchy: tuple[str, ...]
    counted: str
    faults: tuple[origin.Found, ...]
    warnings: tuple[origin.Found, ...]
    posture_band: str
    passing: str


def page(study: Study) -> str:
    """Return the report of a study as one HTML page.

    Parameters
    ----------
    study : Study
        Its ``results`` give every number and word, its ``views`` the outlines; nothing is worked out anew.

    Returns
    -------
    str
        HTML that needs no other file, no network and no script. The same study gives the same text.

    Notes
    -----
    Everything that came from a user (names, materials, messages) is stripped of control characters and escaped.
    """
    from jinja2 import Environment, PackageLoader, StrictUndefined

    results = wording.cleaned(study.results)
    shown = subject(results)
    with drawing_style():
        pictures = _pictures(study, results, shown)
        made = moulds.moulded(study, results)
    templates = Environment(
        loader=PackageLoader("meshlure.report", "templates"),
        autoescape=True,
        undefined=StrictUndefined,
        trim_blocks=True,
        lstrip_blocks=True,
    )
    return templates.get_template("page.html").render(
        r=results,
        name=wording.clipped(results["name"] or "Bait without a name", MOST_PARTS),
        verdict=_verdict(results),
        water=water.water_words(results["buoyancy"]["water"]),
        buoyancy_of=shown.buoyancy_of,
        findings=origin.findings(results),
        journey=flow.journey(results),
        flies=flight.verdict(results["flight"]),
        reach=flight.headline(results),
        throw=flight.throw(results),
        help_words=flight.help_words(results["flight"]),
        timings=origin.timings(results),
        budget_words=budget.words(results),
        balanced=ballast.balanced(results),
        chambered=chambers.chambered(results),
        moulded=made,
        call=call(results),
        tables=with_files(_tables(results), results),
        turning=turning(study.scene, results, shown),
        w=wording,
        **pictures,
    )


def _verdict(results: Mapping[str, Any]) -> Verdict:
    found = results["buoyancy"]
    posture = main_posture(results)
    findings = origin.findings(results)
    low, high = found["reserve_low_g"], found["reserve_high_g"]
    lean, words = "", "no resting posture was found"
    turns: list[str] = []
    if posture is not None:
        words = posture.get("words") or posture.get("name") or posture["kind"]
        # The state stands above it in large letters.
        words = words.removeprefix(f"{found['state'].capitalize()}, ")
        if posture["up"] is not None:
            lean = wording.lean_words(
                posture["lean_deg"], rounded=touchy(posture, "lean_deg"), free=posture["free"] is not None
            )
        for key, what in (
            ("deg_per_0_1g_10mm", "0.1 g moved 10 mm fore-aft turns it {}°"),
            ("g_per_mm", "{}\u00a0g more sinks it 1 mm"),
        ):
            value = (posture["sensitivity"] or {}).get(key)
            if value is not None:
                turns.append(what.format(wording.significant(value, 2)))
    return Verdict(
        state=found["state"],
        sentence=water.verdict_words(found),
        mass=wording.headline_grams(results["weight"]["mass_g"]),
        ounces=wording.ounces(results["weight"]["mass_g"]),
        reserve=wording.banded_grams(found["reserve_g"], low, high),
        reserve_band=wording.band(low, high, "g", signed=True),
        posture=words[:1].upper() + words[1:],
        lean=lean,
        touchy=tuple(turns),
        counted=origin.counted(findings),
        faults=tuple(f for f in findings if f.level == "fault"),
        warnings=tuple(f for f in origin.gathered(findings) if f.level == "warning"),
        posture_band=budget.posture_band(results),
        passing=budget.passing(results),
    )


def _tables(results: Mapping[str, Any]) -> dict[str, Any]:
    return {
        "pieces": substance.pieces(results),
        "hardware": substance.hardware(results),
        "weight": substance.weight(results),
        "facets": substance.facets(results),
        "limits": substance.limits(results),
        "measured": substance.measured(results),
        "weighed": weighed.facts(results),
        "again": weighed.again(results),
        "explanations": weighed.explanations(results),
        "budget": budget.rows(results),
        "copies": budget.copies(results),
        "budget_doubts": budget.doubts(results),
        "buoyancy": water.buoyancy(results),
        "doubts": water.doubts(results),
        "waters": water.waters(results),
        "balls": water.balls(results),
        "postures": attitude.postures(results),
        "righting_sideways": attitude.righting(results, "sideways"),
        "righting_fore_aft": attitude.righting(results, "fore_aft"),
        "areas": flow.areas(results),
        "rose": flow.rose(results),
        "stations": flow.stations(results),
        "form": flow.form(results),
        "drag": flow.drag(results),
        "parts": flow.parts(results),
        "compared": compared.values(),
        "flight": flight.facts(results),
        "flight_balls": flight.balls(results),
        "trims": flight.trims(results),
        "moments": flight.moments(results),
        "paths": flight.paths(results),
        "launch": flight.launch(results),
        "sinking": underwater.facts(results),
        "tow": underwater.tow(results),
        "assumptions": origin.assumptions(results),
        "inputs": origin.inputs(results),
    }


def _pictures(study: Study, results: Mapping[str, Any], shown: Subject) -> dict[str, Any]:
    """All pictures, each kind under the name that the templates know it by."""
    views = [readable(view) for view in study.views]
    size = results["size"]
    scale = scale_for(max(float(size["length_mm"]), _reach(views, "side")), float(size["depth_mm"]))
    drawn: list[Drawing] = [d for view in views if (d := drawing(view, shown, scale)) is not None]
    planes = list(dict.fromkeys(results["rose"].get("plane") or [""]))
    fluids = list(dict.fromkeys(row["fluid"] for row in results["drag"]))
    names = [posture.get("name") or posture["kind"] for posture in results["postures"]]
    return {
        "drawings": sorted(drawn, key=lambda d: list(TITLES).index(d.name) if d.name in TITLES else len(TITLES)),
        "scale": scale_words(scale),
        "swatches": swatches() if drawn else None,
        "resting": resting(views, shown),
        "reserve_chart": charts.reserve(results["buoyancy"]),
        "waters_chart": charts.waters(results["waters"]),
        "righting_charts": _present(
            charts.righting(results["righting"], plane, names) for plane in ("sideways", "fore_aft")
        ),
        "stations_chart": charts.stations(results["stations"]),
        "rose_charts": _present(rose(results["rose"], results["frame"], plane) for plane in planes),
        "drag_charts": _present(charts.drag(results["drag"], fluid) for fluid in fluids),
        "compared_chart": compared.chart(),
        "wind": windward(views, shown, results),
        "moment_charts": _present(airborne.moments(results["flight"], plane) for plane in ("pitch", "yaw")),
        "path_charts": [airborne.paths(results["flight"]), airborne.launch(results["flight"], results["cast"])],
    }


def _present(pictures: Any) -> list[Picture]:
    return [made for made in pictures if made is not None]


def _reach(views: Any, name: str) -> float:
    """How wide a view's outlines are together, mm."""
    xs = [
        float(x)
        for view in views
        if view.name == name
        for piece in view.pieces
        for ring in piece.rings
        for x in (ring[:, 0].min(), ring[:, 0].max())
    ]
    return max(xs) - min(xs) if xs else 0.0
