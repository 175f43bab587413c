"""The postures of a whole bait: afloat or hanging, righting curves, and what the balls' ends change."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from meshlure.bait.axes import rest_findings
from meshlure.findings import Finding, Level
from meshlure.geometry.surface import Floats
from meshlure.physics.barrier import barriers
from meshlure.physics.buoyancy import suspends_within
from meshlure.physics.posture import attitude, coarse_potential
from meshlure.physics.repose import Dangle, Ends, Repose, Vessel
from meshlure.physics.righting import righting
from meshlure.results import postures
from meshlure.results.numbers import GRAM, MM, degrees, plain

Tree = dict[str, Any]


@dataclass(frozen=True, eq=False)
class Posed:
    """Every posture of a bait.

    Attributes
    ----------
    ends : dict
        Where the balls lie in the posture that heads the page.
    main : Repose or Dangle
        That posture.
    trees : list of dict
        Postures, floating ones first, the lowest energy first.
    righting : list of dict
    balls : list of dict
        The bait with its balls held at either end.
    findings : tuple of Finding
    """

    ends: Ends
    main: Repose | Dangle
    trees: list[Tree]
    righting: list[Tree]
    balls: list[Tree]
    findings: tuple[Finding, ...]


@dataclass(frozen=True, eq=False)
class _Setting:
    """The bait with its balls at given ends."""

    ends: Ends
    reposes: tuple[Repose, ...]
    dangle: Dangle

    @property
    def upright(self) -> Repose | None:
        return next((r for r in self.reposes if r.rest.upright), None)


def pose(vessel: Vessel, stated: float | None = None) -> Posed:
    """Return every posture of a bait.

    Parameters
    ----------
    vessel : Vessel
    stated : float or None, kg
        Reserve within which it suspends and so hangs as well as floats; None takes the usual one.

    Notes
    -----
    Balls lie at the end that is lower: every combination of ends is put to rest, and the postures in which some
    balls would roll away are left out.
    """
    settings = [_Setting(ends, vessel.reposes(ends), vessel.dangle(ends)) for ends in vessel.settings()]
    afloat = [r for setting in settings for r in setting.reposes if r.held]
    hanging = [setting.dangle for setting in settings if setting.dangle.held]
    findings: list[Finding] = []
    if any(s.reposes for s in settings) and not afloat:
        afloat, restless = [r for s in settings for r in s.reposes], True
    else:
        restless = False
    if not hanging:
        hanging, restless = [s.dangle for s in settings], True
    if restless:
        findings.append(_restless())
    afloat = sorted(afloat, key=lambda r: r.rest.state.energy)
    main = _headline(afloat, hanging)
    ends = main.ends
    trees = _afloat(vessel, afloat) if afloat else []
    if not afloat or _suspends(vessel, ends, stated):
        share = 1.0 / len(hanging)
        trees += [postures.dangling(d, vessel.frame, vessel.composition.mass(d.ends).amount, share) for d in hanging]
    findings += _dry(afloat, vessel)
    findings += rest_findings(_settled(main), vessel.frame)
    return Posed(ends, main, trees, _righting(vessel, afloat), _balls(vessel, settings, ends), tuple(findings))


def _settled(main: Repose | Dangle) -> Floats | None:
    """Return the up of a posture that nothing but itself would do for."""
    if isinstance(main, Dangle):
        return main.hang.up
    return main.rest.state.up if main.rest.neutral is None else None


def _headline(afloat: Sequence[Repose], hanging: Sequence[Dangle]) -> Repose | Dangle:
    if not afloat:
        return hanging[0]
    return next((r for r in afloat if r.rest.upright), afloat[0])


def _suspends(vessel: Vessel, ends: Ends, stated: float | None) -> bool:
    displaced = vessel.hull(ends).volume * vessel.water
    return abs(displaced - vessel.composition.mass(ends).amount) <= suspends_within(displaced, stated)


def _afloat(vessel: Vessel, afloat: Sequence[Repose]) -> list[Tree]:
    total = sum(r.rest.share for r in afloat) or 1.0
    rises = _barriers(vessel, afloat)
    trees = []
    for r, rise in zip(afloat, rises, strict=True):
        mass = vessel.composition.mass(r.ends).amount
        trees.append(postures.floating(r, vessel.frame, mass, vessel.water, rise, r.rest.share / total))
    return trees


def _barriers(vessel: Vessel, afloat: Sequence[Repose]) -> list[float | None]:
    """Least rise of the energy to leave each posture, among those with the balls at the same ends."""
    rises: list[float | None] = [None] * len(afloat)
    for ends in vessel.settings():
        group = [number for number, r in enumerate(afloat) if r.ends == ends]
        if len(group) < 2:
            continue
        full = vessel.potential(ends)
        rough = coarse_potential(full.hull, vessel.composition.skin.surface, full.centre, full.volume)
        found = barriers(rough, full, [afloat[number].rest for number in group], vessel.frame.nose)
        for number, barrier in zip(group, found, strict=True):
            rises[number] = None if barrier is None else barrier.rise
    return rises


def _righting(vessel: Vessel, afloat: Sequence[Repose]) -> list[Tree]:
    """Curves from the upright posture, and from the lowest if that is another."""
    starts = [number for number, r in enumerate(afloat) if r.rest.upright][:1]
    if afloat and 0 not in starts:
        starts.append(0)
    return postures.righting(
        [
            (number, curve)
            for number in starts
            for curve in righting(
                afloat[number].potential, afloat[number].rest.state, vessel.frame.nose, vessel.frame.side
            )
        ]
    )


def _balls(vessel: Vessel, settings: Sequence[_Setting], headline: Ends) -> list[Tree]:
    """The bait with one chamber's balls at either end, the others' as in the headline."""
    rows = []
    for chamber in headline:
        for setting in settings:
            if any(setting.ends[name] != end for name, end in headline.items() if name != chamber):
                continue
            mass = vessel.composition.mass(setting.ends)
            up = setting.upright.rest.state.up if setting.upright is not None else setting.dangle.hang.up
            frame = vessel.frame
            angles = None if up is None else attitude(up, frame.nose, frame.back, frame.side)
            rows.append(
                {
                    "chamber": chamber,
                    "end": setting.ends[chamber],
                    "mass_g": mass.amount * GRAM,
                    "centre_mm": plain(mass.centre, MM),
                    "nose_up_deg": None if angles is None else degrees(angles.nose_up),
                    "lean_deg": None if angles is None else degrees(angles.lean),
                    "stays": setting.upright.held if setting.upright is not None else setting.dangle.held,
                }
            )
    return rows


def _restless() -> Finding:
    return Finding(
        code="balls-restless",
        level=Level.WARNING,
        message="with the balls at either end, that end comes to lie higher: they have no place of rest, and the "
        "postures shown hold them where each says",
        advice='give the chamber more slope, or hold the balls with at = "nose" or "tail"',
    )


def _dry(afloat: Sequence[Repose], vessel: Vessel) -> list[Finding]:
    places = {item.name: item.at for item in vessel.hardware}
    findings = []
    for number, repose in enumerate(afloat, 1):
        for name in repose.dry:
            at = places[name]
            above = float(at @ repose.rest.state.up) - repose.rest.state.immersed.cut.height
            # Without its lift the bait lies deeper: an eye near the water may be under it then.
            where = f"stands {above * MM:.1f} mm above the water" if above >= 0 else "lies in the water's surface"
            findings.append(
                Finding(
                    code="eye-above-water",
                    level=Level.NOTE,
                    piece=name,
                    message=f"in posture {number} the eye of '{name}' {where}: it is counted dry there",
                    where=((float(at[0]), float(at[1]), float(at[2])),),
                    advice="a hook that still hangs into the water lifts a little of its weight off the bait",
                )
            )
    return findings
