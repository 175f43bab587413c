"""Drag: force, coefficient and parts for a body that moves along its own axis, with the band that the method earns."""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from typing import Final, Literal

from meshlure.physics.friction import NATURAL_TRANSITION
from meshlure.physics.layer import LayerParts, front_trips, layer_parts, ramp, turns_by_itself
from meshlure.physics.profile import Profile
from meshlure.physics.resistance import BARE, Drag, DragParts, Fittings

__all__ = ["BARE", "Drag", "DragParts", "Fittings", "Layer", "axial_drag", "headline_drag"]

Layer = Literal["laminar", "tripped"]

SHARP_BAND: Final = 0.3
SMOOTH_BAND: Final = 0.6
"""Share of the coefficient to either side, for bodies whose separation is fixed by edges and for smooth ones. Its
own calibration table lies within 0.15 (sharp-edged) and 0.5 (rounded) of the estimate; new shapes may lie farther."""

TRIPS_FROM: Final = 2e5
TRIPS_WHOLLY: Final = 3e5
"""Reynolds number of the length above which hooks, hangers or printed layers keep a layer turbulent; below it hardly
any turbulent layer lives (Preston, J. H. 1958, J. Fluid Mech. 3, about 2.3e5 with a thin layer, from memory)."""


@dataclass(frozen=True)
class _States:
    """Both states of one body's layer, and how far its front decides between them."""

    laminar: LayerParts
    tripped: LayerParts

    @property
    def insecurity(self) -> float:
        """How far the layer, not an edge, decides where the flow leaves: 0 sharp-edged to 1 smooth."""
        by_value = abs(math.log(self.tripped.cd / self.laminar.cd)) / math.log(1 + SMOOTH_BAND)
        by_place = abs(self.laminar.trailing_bluffness - self.tripped.trailing_bluffness) / 0.2
        return min(1.0, max(by_value, by_place))

    @property
    def spread(self) -> float:
        return SHARP_BAND + (SMOOTH_BAND - SHARP_BAND) * self.insecurity

    def mixed(self, share: float) -> LayerParts:
        """Return the parts with the given share of the tripped state."""
        keep = 1 - share
        base = keep * self.laminar.base + share * self.tripped.base
        tail = keep * self.laminar.tail + share * self.tripped.tail
        # One of the two is named: the other's remnant goes to it, so that the sum stays.
        base, tail = (base + tail, 0.0) if base >= tail else (0.0, base + tail)
        return LayerParts(
            friction=keep * self.laminar.friction + share * self.tripped.friction,
            forebody=keep * self.laminar.forebody + share * self.tripped.forebody,
            base=base,
            tail=tail,
            trailing_bluffness=keep * self.laminar.trailing_bluffness + share * self.tripped.trailing_bluffness,
            arc_reynolds=keep * self.laminar.arc_reynolds + share * self.tripped.arc_reynolds,
        )


def share_for(laminar: float, tripped: float, share: float) -> float:
    """Share of the tripped state at which the plain mean of two drags is their geometric mean at a given share."""
    apart = tripped - laminar
    if share in (0.0, 1.0) or abs(apart) <= 1e-9 * laminar:
        return share
    return float((laminar ** (1 - share) * tripped**share - laminar) / apart)


def spread_of(laminar: float, tripped: float) -> float:
    """Share by which a drag may be off to either side, by how far apart both states of its layer put it."""
    apart = abs(math.log(tripped / laminar)) / math.log(1 + SMOOTH_BAND)
    return SHARP_BAND + (SMOOTH_BAND - SHARP_BAND) * min(1.0, apart)


def _states(profile: Profile, reynolds_diameter: float, cup: float, transition: float = 0.0) -> _States:
    """Both states; behind a sharp front the laminar one is tripped too."""
    tripped = layer_parts(profile, reynolds_diameter, tripped=True, transition=transition, cup=cup)
    pure = _States(layer_parts(profile, reynolds_diameter, tripped=False, cup=cup), tripped)
    return _States(pure.mixed(front_trips(profile)), tripped)


def axial_drag(
    profile: Profile,
    speed: float,
    density: float,
    viscosity: float,
    layer: Layer | None = None,
    *,
    silhouette: float | None = None,
    cup: float = 0.0,
    fittings: Fittings = BARE,
) -> Drag:
    """Drag of a body that moves along its axis, its layer given or chosen by the Reynolds number and the front.

    Parameters
    ----------
    profile : Profile
        Counted from the end that leads.
    speed : float, m/s
    density : float, kg/m3
        Of the fluid.
    viscosity : float, m2/s
        Kinematic.
    layer : {"laminar", "tripped", None}
        State of the layer. A sharp front trips it in any case. None lets the model choose: laminar behind a smooth
        front while the Reynolds number of the way to where a turbulent layer would leave is below 5e5, else tripped;
        within a factor of 1.5 around that a geometric mean of both.
    silhouette : float, m2, optional
        Area along the flow that the coefficients refer to; the largest section's where left out.
    cup : float
        Depth of a cupped face, 0 to 1 (`meshlure.physics.cup.cup_depth`).
    fittings : Fittings
        Drag areas of lip, hooks and eyes.

    Returns
    -------
    Drag

    Raises
    ------
    ValueError
        Where speed, density, viscosity or silhouette is not positive, or the layer's name is unknown.

    Notes
    -----
    See `meshlure.physics.layer.layer_parts` for the estimate. Calibrated at Reynolds numbers on the diameter from 1e4
    to 2.5e6; the fluid is deep and at rest, the body steady and straight on.
    """
    if layer not in ("laminar", "tripped", None):
        raise ValueError(f"the layer is laminar, tripped or None, not {layer!r}")
    reynolds = _reynolds(profile, speed, density, viscosity)
    states = _states(profile, reynolds, cup)
    share = {"laminar": 0.0, "tripped": 1.0}.get(layer or "")
    chosen = states
    if share is None:
        trips = front_trips(profile)
        share = turns_by_itself(states.tripped.arc_reynolds)
        # A layer that no edge trips has a laminar run first.
        chosen = _states(profile, reynolds, cup, NATURAL_TRANSITION * (1 - trips))
        share = share_for(chosen.laminar.cd, chosen.tripped.cd, share)
    parts = chosen.mixed(share)
    spread = states.spread
    name = layer or ("tripped" if share + front_trips(profile) * (1 - share) >= 0.5 else "laminar")
    words = f"{'Layer chosen: ' if layer is None else 'Layer '}{name}."
    band = (parts.cd * (1 - spread), parts.cd * (1 + spread))
    setting = (speed, density, viscosity, silhouette, fittings)
    return _drag(profile, states, parts, name, share, band, words, setting)


def headline_drag(
    profile: Profile,
    speed: float,
    density: float,
    viscosity: float,
    *,
    trips: bool,
    silhouette: float | None = None,
    cup: float = 0.0,
    fittings: Fittings = BARE,
) -> Drag:
    """Drag to give a maker as one number: between both states of the layer, with a band that holds both.

    Parameters
    ----------
    profile, speed, density, viscosity, silhouette, cup, fittings
        As in `axial_drag`.
    trips : bool
        True where hooks, hangers, printed layers, scales or the like stand in the flow.

    Notes
    -----
    At the Reynolds numbers of baits the layer is the largest unknown, so the value is the geometric mean of both
    states. Where something trips the layer and the Reynolds number of the length exceeds 2e5 it moves to the tripped
    value, which it reaches at 3e5.
    """
    reynolds = _reynolds(profile, speed, density, viscosity)
    states = _states(profile, reynolds, cup)
    laminar, tripped = states.laminar.cd, states.tripped.cd
    reynolds_length = reynolds * profile.length / profile.diameter
    weight = 0.5 + 0.5 * (ramp(math.log(reynolds_length), math.log(TRIPS_FROM), math.log(TRIPS_WHOLLY)) if trips else 0)
    cd = laminar ** (1 - weight) * tripped**weight
    share = share_for(laminar, tripped, weight)
    spread = states.spread
    # As the value moves to the tripped state, the laminar end of the band moves along.
    far = cd * (laminar / cd) ** (2 * (1 - weight))
    band = (min(cd * (1 - spread), far, tripped), max(cd * (1 + spread), far, tripped))
    if weight == 1.0:
        name, words = "tripped", "Layer taken as tripped by what stands in the flow."
    else:
        name, words = "between", "Between a laminar and a tripped layer; the band holds both."
    setting = (speed, density, viscosity, silhouette, fittings)
    return _drag(profile, states, states.mixed(share), name, share, band, words, setting)


def _reynolds(profile: Profile, speed: float, density: float, viscosity: float) -> float:
    """Return the Reynolds number on the diameter, of numbers that were checked."""
    for what, value, unit in (("speed", speed, "m/s"), ("density", density, "kg/m3"), ("viscosity", viscosity, "m2/s")):
        if not 0 < value < math.inf:
            raise ValueError(f"a {what} is positive and finite, not {value} {unit}")
    return speed * profile.diameter / viscosity


def _drag(
    profile: Profile,
    states: _States,
    mixed: LayerParts,
    layer: str,
    share: float,
    band: tuple[float, float],
    words: str,
    setting: tuple[float, float, float, float | None, Fittings],
) -> Drag:
    """Put the coefficients, which refer to the largest section, on the silhouette, and the parts into areas."""
    speed, density, viscosity, silhouette, fittings = setting
    area = profile.greatest_area
    frontal = area if silhouette is None else silhouette
    if not 0 < frontal < math.inf:
        raise ValueError(f"a silhouette is positive and finite, not {frontal} m2")
    parts = DragParts(mixed.friction * area, mixed.forebody * area, mixed.base * area, mixed.tail * area)
    scale = area / frontal
    if states.laminar.cd < states.tripped.cd * 0.99 and layer != "tripped":
        words += (
            f" The laminar value ({states.laminar.cd * scale:.2g}) lies below the tripped one"
            f" ({states.tripped.cd * scale:.2g}): a laminar layer that stays on the tail is optimistic."
        )
    return Drag(
        layer=layer,
        tripped_share=share,
        speed=speed,
        density=density,
        reynolds_length=speed * profile.length / viscosity,
        reynolds_diameter=speed * profile.diameter / viscosity,
        cd=mixed.cd * scale,
        cd_low=band[0] * scale,
        cd_high=band[1] * scale,
        frontal_area=frontal,
        parts=replace(parts, lip=fittings.lip, hooks=fittings.hooks, eyes=fittings.eyes),
        trailing_bluffness=mixed.trailing_bluffness,
        laminar_cd=states.laminar.cd * scale,
        tripped_cd=states.tripped.cd * scale,
        words=words,
    )
