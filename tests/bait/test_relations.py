"""Where shells lie to each other: boxes and balls whose places leave no doubt, and pairs of shells in one piece."""

from __future__ import annotations

import numpy as np
import pytest
import shapes

from meshlure.bait.relations import Relation, relation
from meshlure.geometry.surface import Surface

BOX = shapes.box((4, 4, 4))


@pytest.mark.parametrize(
    ("shell", "expected"),
    [
        (shapes.box((1, 1, 1)), Relation.INSIDE),
        (shapes.box((1, 1, 1), (9, 0, 0)), Relation.APART),
        # Its bounds meet the box's, its skin does not.
        (shapes.torus(9.0, 1.0, 24), Relation.APART),
        (shapes.box((9, 9, 9)), Relation.AROUND),
        (shapes.box((1, 1, 1), (2, 0, 0)), Relation.CROSSING),
        (shapes.box((1, 1, 1), (1.5, 0, 0)), Relation.CROSSING),  # flush with a face: touching is crossing
        (shapes.box((1, 1, 1), (2.5, 0, 0)), Relation.CROSSING),  # laid on a face
        (shapes.box((1, 1, 1), (1.499, 0, 0)), Relation.INSIDE),  # a thousandth below the face
    ],
)
def test_one_shell(shell: Surface, expected: Relation) -> None:
    assert relation(shell, [BOX]) is expected


def test_a_body_of_two_shells_is_asked_shell_by_shell() -> None:
    # The second shell is far off, so that one vertex of the whole body would say "apart" of a piece round the first.
    body = [shapes.box((1, 1, 1), (20, 0, 0)), shapes.box((1, 1, 1))]
    assert relation(shapes.box((3, 3, 3)), body) is Relation.AROUND
    assert relation(shapes.box((0.5, 0.5, 0.5)), body) is Relation.INSIDE
    assert relation(shapes.box((0.5, 0.5, 0.5), (10, 0, 0)), body) is Relation.APART


@pytest.mark.parametrize("seed", range(4))
def test_it_turns_and_shifts_with_the_shells(seed: int) -> None:
    rotation, shift = shapes.turn(seed), np.array([1000.0, -200.0, 5.0])
    body = BOX.moved(rotation, shift)
    for shell, expected in (
        (shapes.box((1, 1, 1)), Relation.INSIDE),
        (shapes.box((1, 1, 1), (2, 0, 0)), Relation.CROSSING),
        (shapes.torus(9.0, 1.0, 24), Relation.APART),
    ):
        assert relation(shell.moved(rotation, shift), [body]) is expected
