"""Invented outlines of a minnow from three sides, nose along -x, back along +z; mm."""

from __future__ import annotations

import math

import numpy as np

from meshlure.results import DrawnPiece, View

LENGTH = 92.0


def half(x: np.ndarray, height: float, fullest: float) -> np.ndarray:
    """Half height of a fish-like outline, blunt at the nose and drawn out to the tail."""
    t = np.clip(x / LENGTH, 0, 1)
    rise = np.sqrt(np.clip(1 - ((fullest - t) / fullest) ** 2, 0, 1))
    fall = np.clip(1 - ((t - fullest) / (1 - fullest)) ** 2, 0, 1) ** 0.9
    return height * np.where(t < fullest, rise, np.maximum(fall, 0.06 * (t < 1)))


def _closed(upper: np.ndarray, lower: np.ndarray, x: np.ndarray) -> np.ndarray:
    return np.concatenate([np.column_stack([x, lower]), np.column_stack([x, upper])[::-1]])


def _ellipse(x: float, y: float, a: float, b: float, turn: float = 0.0) -> np.ndarray:
    t = np.linspace(0, 2 * math.pi, 48, endpoint=False)
    u, v = a * np.cos(t), b * np.sin(t)
    c, s = math.cos(turn), math.sin(turn)
    return np.column_stack([x + c * u - s * v, y + s * u + c * v])


def _lip() -> np.ndarray:
    return np.array([[4.0, -4.0], [-6.5, -14.0], [-5.3, -15.2], [5.8, -5.2]])[::-1]


def minnow_views() -> tuple[View, ...]:
    """Side, top and front of the minnow: nose along -x, back along +z."""
    x = LENGTH * (1 - np.cos(np.linspace(0, math.pi, 200))) / 2
    skin = _closed(half(x, 8.5, 0.36), -half(x, 10.5, 0.34), x)
    wire = np.array([[-2.5, -0.4], [94.0, -0.4], [94.0, 0.4], [-2.5, 0.4]])
    side = (
        DrawnPiece("skin", "skin", (skin, _lip())),
        DrawnPiece("through-wire", "insert", (wire,)),
        DrawnPiece("belly weight", "insert", (_ellipse(34.0, -6.0, 8.0, 2.6),)),
        DrawnPiece("rattle chamber", "void", (_ellipse(60.0, 0.8, 9.0, 3.2),)),
        DrawnPiece("balls in rattle chamber", "ball", (_ellipse(66.0, 0.6, 2.5, 2.5),)),
        DrawnPiece("lip", "insert", (_lip(),)),
        DrawnPiece("left eye", "insert", (_ellipse(9.0, 2.6, 2.4, 2.4),)),
        DrawnPiece("right eye", "insert", (_ellipse(9.0, 2.6, 2.4, 2.4),)),
    )
    plan = _closed(half(x, 6.5, 0.34), -half(x, 6.5, 0.34), x)
    lip_top = np.array([[-6.5, -6.0], [5.0, -5.0], [5.0, 5.0], [-6.5, 6.0]])
    top = (
        DrawnPiece("skin", "skin", (plan, lip_top)),
        DrawnPiece("through-wire", "insert", (wire,)),
        DrawnPiece("belly weight", "insert", (_ellipse(34.0, 0.0, 8.0, 3.0),)),
        DrawnPiece("rattle chamber", "void", (_ellipse(60.0, 0.0, 9.0, 3.2),)),
        DrawnPiece("balls in rattle chamber", "ball", (_ellipse(66.0, 0.0, 2.5, 2.5),)),
        DrawnPiece("left eye", "insert", (_ellipse(9.0, -4.6, 2.4, 1.0),)),
        DrawnPiece("right eye", "insert", (_ellipse(9.0, 4.6, 2.4, 1.0),)),
    )
    front = (
        DrawnPiece(
            "skin",
            "skin",
            (_ellipse(0.0, -1.0, 6.5, 9.5), np.array([[-6.0, -15.0], [6.0, -15.0], [5.0, -4.0], [-5.0, -4.0]])),
        ),
        DrawnPiece("belly weight", "insert", (_ellipse(0.0, -6.0, 3.0, 2.6),)),
        DrawnPiece("rattle chamber", "void", (_ellipse(0.0, 0.8, 3.2, 3.2),)),
        DrawnPiece("left eye", "insert", (_ellipse(4.6, 2.6, 1.0, 2.4),)),
        DrawnPiece("right eye", "insert", (_ellipse(-4.6, 2.6, 1.0, 2.4),)),
    )
    return (
        View("side", np.array([1.0, 0, 0]), np.array([0, 0, 1.0]), 0.0, side),
        View("top", np.array([1.0, 0, 0]), np.array([0, 1.0, 0]), 0.0, top),
        View("front", np.array([0, -1.0, 0]), np.array([0, 0, 1.0]), 0.0, front),
    )
