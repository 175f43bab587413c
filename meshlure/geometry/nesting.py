"""Nesting: which shells lie in which, what looks the wrong way, and which belong to one solid."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np

from meshlure.geometry.crossing import meets
from meshlure.geometry.shells import Shell, boxes_meet, winding_number
from meshlure.geometry.surface import Surface

_TRIES = 8
"""Faces of a shell of which a vertex and the middle are asked, at most, whether they lie inside another."""

Pair = tuple[int, int]


@dataclass(frozen=True, eq=False)
class Nest:
    """Shells in order: every one looks outwards, or inwards where it is a cavity in something solid.

    Attributes
    ----------
    shells : tuple of Shell
    flat : tuple of Shell
        Those left out because they enclose nothing.
    inverted : bool
        Whether all were turned, because everything outermost looked inwards.
    turned : tuple of int
        Those turned by themselves.
    sunk : tuple of int
        Outward shells that lie in something solid, which already counts their space.
    joins : tuple of (int, int)
        Outward shells that meet, or of which one lies in the solid of the other.
    clashes : tuple of (int, int)
        Shells that cross, of which at least one is a cavity or looked inwards.
    """

    shells: tuple[Shell, ...]
    flat: tuple[Shell, ...]
    inverted: bool
    turned: tuple[int, ...]
    sunk: tuple[int, ...]
    joins: tuple[Pair, ...]
    clashes: tuple[Pair, ...]

    @property
    def changed(self) -> bool:
        """Whether the shells together are no longer the surface they came from."""
        return bool(self.flat or self.inverted or self.turned)

    def groups(self) -> tuple[tuple[int, ...], ...]:
        """Shells in groups that hang together, by meeting or by lying in each other."""
        group = list(range(len(self.shells)))

        def root(number: int) -> int:
            while group[number] != number:
                group[number] = group[group[number]]
                number = group[number]
            return number

        links = [(number, shell.parent) for number, shell in enumerate(self.shells) if shell.parent is not None]
        for one, other in (*self.joins, *self.clashes, *links):
            low, high = sorted((root(one), root(other)))
            group[high] = low
        roots = [root(number) for number in range(len(self.shells))]
        return tuple(tuple(n for n, r in enumerate(roots) if r == head) for head in sorted(set(roots)))


def nest(shells: tuple[Shell, ...], depth: float) -> Nest:
    """Return shells with their nesting, turned where they look the wrong way.

    Parameters
    ----------
    shells : tuple of Shell
        Of one closed surface, as `shells.split` gives them.
    depth : float, m
        How deep a cavity must reach into another shell to cross it; less is touching.

    Notes
    -----
    Where all outermost shells look inwards, the surface as a whole is inside out and all shells are turned. An
    outermost shell that alone looks inwards is turned with all that lies in it. A shell within others that looks
    inwards is a cavity if what is around it is solid (more shells around it look outwards than inwards), and else is
    turned.
    """
    flat = tuple(shell for shell in shells if shell.flat)
    whole = nested(tuple(shell for shell in shells if not shell.flat))
    outermost = [shell for shell in whole if not shell.around]
    inverted = bool(outermost) and all(shell.reversed for shell in outermost)
    if inverted:
        whole = tuple(shell.turned() for shell in whole)
    looked_in = tuple(shell.reversed for shell in whole)
    whole, turned = _put_right(whole)
    sunk = tuple(n for n, shell in enumerate(whole) if not shell.reversed and _solid_around(whole, shell) > 0)
    joins, clashes = _meetings(whole, looked_in, sunk, depth)
    return Nest(whole, flat, inverted, turned, sunk, joins, clashes)


def nested(shells: tuple[Shell, ...]) -> tuple[Shell, ...]:
    """Shells told which of the others they lie inside of.

    Notes
    -----
    A shell can only lie in one whose bounds hold its own. There the winding number about one of its vertices decides; a
    vertex that lies on the other shell has none and the next is asked, then middles of faces. Two shells that cross are
    inside or outside each other by the point asked.
    """
    bounds = np.array([shell.bounds for shell in shells]).reshape(-1, 2, 3)
    volumes = np.array([abs(shell.volume) for shell in shells])
    result = []
    for shell in shells:
        holds = (bounds[:, 0] <= shell.bounds[0]).all(axis=1) & (bounds[:, 1] >= shell.bounds[1]).all(axis=1)
        hosts = np.flatnonzero(holds & (volumes > abs(shell.volume)))
        around = [int(host) for host in hosts if _inside(shell.surface, shells[host].surface)]
        around.sort(key=lambda host: -volumes[host])
        result.append(replace(shell, around=tuple(around)))
    return tuple(result)


def _put_right(shells: tuple[Shell, ...]) -> tuple[tuple[Shell, ...], tuple[int, ...]]:
    """Turn what looks inwards in nothing solid, from the outermost inwards."""
    result = list(shells)
    turned = []
    for number in sorted(range(len(shells)), key=lambda n: shells[n].depth):
        shell = result[number]
        if not shell.reversed or _solid_around(tuple(result), shell) > 0:
            continue
        result[number] = shell.turned()
        turned.append(number)
        if not shell.around:
            for inner, other in enumerate(shells):
                if number in other.around:
                    result[inner] = result[inner].turned()
    return tuple(result), tuple(turned)


def _solid_around(shells: tuple[Shell, ...], shell: Shell) -> int:
    """How many solids a shell lies in: the shells around it that look outwards less those that look inwards."""
    return sum(-1 if shells[other].reversed else 1 for other in shell.around)


def _meetings(
    shells: tuple[Shell, ...], looked_in: tuple[bool, ...], sunk: tuple[int, ...], depth: float
) -> tuple[tuple[Pair, ...], tuple[Pair, ...]]:
    joins = {
        (min(number, host), max(number, host))
        for number in sunk
        for host in shells[number].around[-1:]
        if not shells[host].reversed
    }
    clashes = []
    for one, other in boxes_meet(shells).tolist():
        a, b = shells[one], shells[other]
        # A shell that looked inwards and was turned for lying in nothing may be a cavity that broke out of its solid.
        if a.reversed or b.reversed or looked_in[one] or looked_in[other]:
            if meets(a.surface, b.surface, margin=-depth):
                clashes.append((one, other))
        elif (one, other) not in joins and meets(a.surface, b.surface):
            joins.add((one, other))
    return tuple(sorted(joins)), tuple(clashes)


def _inside(shell: Surface, host: Surface) -> bool:
    faces = shell.faces[:: max(1, len(shell.faces) // _TRIES)][:_TRIES]
    for point in (*shell.vertices[faces[:, 0]], *shell.vertices[faces].mean(axis=1)):
        winding = abs(winding_number(host, point))
        if abs(winding - round(winding)) < 1e-3:
            return round(winding) != 0
    return False
