"""Run-outs: vertices where narrow facets of something curved meet wide ones of something straighter."""

from __future__ import annotations

from typing import Final

import numpy as np

from meshlure.geometry.normals import Facets, SkinNormals, corrected
from meshlure.geometry.surface import Floats, Ints, Surface
from meshlure.geometry.topology import EdgePairs, Ints32, next_corner

WIDER: Final = 2.5
"""A facet so many times as wide as its neighbour across an edge is straighter, or was meshed apart from it."""

ASKEW: Final = 0.6
"""Share by which a side's slopes against the skin may differ at its two ends; an arc has equal ones."""

STEEPER: Final = 50.0
"""Ratio of curvatures beyond which a wide facet beside a straight narrow one is a chamfer's neighbour, not an arc."""

TANGENT: Final = 0.15
"""Share of the narrow facet's slope below which the wide one is tangent to the skin."""


def run_out(surface: Surface, pairs: EdgePairs, plain: Facets, skin: SkinNormals) -> SkinNormals:
    """Skin normals corrected where something curved runs out into something straighter.

    Parameters
    ----------
    surface : Surface
    pairs : EdgePairs
        Its edges.
    plain : Facets
        Its faces.
    skin : SkinNormals
        Normals averaged round the vertices.

    Notes
    -----
    The turn between a wide and a narrow facet belongs to both in unknown shares, and an average of their normals gives
    the wide one a bulge that it was never drawn with: a cylinder with round ends would swell along its whole length.
    The narrow facet knows better: its side towards the next row of vertices stands for an arc, against which the skin
    slopes alike at both ends, and the normal at the far end is sound. So the slope there is taken for the near end too,
    and what remains of the turn is the wide facet's. Where that would leave the wide facet far more curved than the
    narrow one, the narrow one is a chamfer, and the wide one keeps its own normal. A vertex that is told different
    things by several edges takes the least bulge.
    """
    wide, narrow = _steps(plain, pairs, skin)
    normal_wide, normal_narrow = plain.normals[:, wide // 3].T, plain.normals[:, narrow // 3].T
    corners, vertices = surface.faces.ravel(), surface.vertices
    along = vertices[corners[next_corner(narrow)]] - vertices[corners[narrow]]
    along /= np.sqrt(_dot(along, along))[:, None]
    # Directions across the edge, from the wide facet into the narrow one, each within its own.
    onto, into = np.cross(normal_wide, along), np.cross(normal_narrow, along)
    turn = np.arctan2(_dot(np.cross(normal_narrow, normal_wide), along), _dot(normal_wide, normal_narrow))
    far, back = next_corner(next_corner(narrow)), next_corner(next_corner(wide))
    far_normal = skin.normals[:, skin.groups[far]].T
    numbers, slopes, normals = [], [], []
    for near in (narrow, next_corner(narrow)):
        number = skin.groups[near]
        normal = skin.normals[:, number].T
        side, behind = (
            vertices[corners[far]] - vertices[corners[near]],
            vertices[corners[near]] - vertices[corners[back]],
        )
        across, across_wide = _dot(into, side), _dot(onto, behind)
        found = -_dot(normal, into)
        arc = found + _dot(normal + far_normal, side) / across
        left = turn - arc
        askew = np.abs(arc - found) > ASKEW * np.maximum(np.abs(found), np.abs(arc))
        chamfer = np.abs(_dot(normal, behind)) * _dot(side, side) > STEEPER * np.abs(_dot(far_normal, side)) * _dot(
            behind, behind
        )
        steep = np.abs(left) * across > STEEPER * np.abs(arc) * across_wide
        left = np.where(chamfer | steep | (np.abs(left) < TANGENT * np.abs(arc)), 0.0, left)
        wrong = (askew | chamfer) & ~skin.firm[number]
        numbers.append(number[wrong])
        slopes.append(np.abs(left[wrong]))
        normals.append((normal + (left - _dot(normal, onto))[:, None] * onto)[wrong])
    return corrected(skin, *_least(np.concatenate(numbers), np.concatenate(slopes), np.concatenate(normals)))


def _steps(plain: Facets, pairs: EdgePairs, skin: SkinNormals) -> tuple[Ints32, Ints32]:
    """Half-edges of the wide and of the narrow facet along every smooth edge with one much wider than the other."""
    one, other = plain.areas[pairs.forward_face], plain.areas[pairs.backward_face]
    known = ~(skin.sharp | plain.thin[pairs.forward_face] | plain.thin[pairs.backward_face])
    # The two share a side, so their widths across it are as their areas.
    first, second = known & (one > WIDER * other), known & (other > WIDER * one)
    wide = np.concatenate([pairs.forward[first], pairs.backward[second]])
    return wide, np.concatenate([pairs.backward[first], pairs.forward[second]])


def _least(numbers: Ints, slopes: Floats, normals: Floats) -> tuple[Ints, Floats]:
    """Keep, for every number, the normal with the least slope; (3, k) by coordinate."""
    order = np.lexsort((slopes, numbers))
    first = np.ones(len(order), dtype=np.bool_)
    first[1:] = numbers[order][1:] != numbers[order][:-1]
    kept = order[first]
    return numbers[kept], normals[kept].T


def _dot(a: Floats, b: Floats) -> Floats:
    return np.asarray((a * b).sum(axis=1))
