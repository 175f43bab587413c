"""Tackle: the drag of hooks, rings and whatever else is fixed to a bait as a mass at a point."""

from __future__ import annotations

from meshlure.bait.pieces import Hardware
from meshlure.physics.wire import Lie, wire_drag_area


def hook_drag_area(item: Hardware) -> float:
    """Return the drag area of one piece of hardware, m2; 0 where neither a drag area nor a wire is known.

    Parameters
    ----------
    item : Hardware

    Notes
    -----
    The stated drag area, or that of its wire: what hangs trails as a treble does, a split ring with the flow in its
    plane; what is fixed lies anyhow.
    """
    if item.drag_area is not None:
        return item.drag_area
    if item.wire is None or item.wire_length is None:
        return 0.0
    return wire_drag_area(item.wire_length, item.wire, _lie(item))


def _lie(item: Hardware) -> Lie:
    if (item.item or "").startswith("split ring"):
        return Lie.RING_EDGE_ON
    return Lie.TRAILING if item.hangs else Lie.ANYHOW
