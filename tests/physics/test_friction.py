"""Skin friction against published values and an independent law."""

from __future__ import annotations

import math

import pytest
from scipy.optimize import brentq

from meshlure.physics.friction import friction, laminar_friction, turbulent_friction


@pytest.mark.parametrize(("reynolds", "expected"), [(1e4, 0.01328), (1e5, 0.0042), (5e5, 0.00188)])
def test_laminar_values(reynolds: float, expected: float) -> None:
    # Blasius 1908: 1.328/sqrt(Re), by hand to three digits.
    assert laminar_friction(reynolds) == pytest.approx(expected, rel=2e-3)


@pytest.mark.parametrize("reynolds", [1e6, 1e7, 1e8, 1e9])
def test_turbulent_values_agree_with_schoenherr(reynolds: float) -> None:
    # Schoenherr 1932 (from memory): 0.242/sqrt(C_f) = log10(Re C_f), an independent fit to plate measurements.
    other = brentq(lambda c: 0.242 / math.sqrt(c) - math.log10(reynolds * c), 1e-4, 0.1)
    assert turbulent_friction(reynolds) == pytest.approx(other, rel=0.03)


@pytest.mark.parametrize(("transition", "spared"), [(3e5, 1050), (5e5, 1700), (1e6, 3300), (3e6, 8700)])
def test_transition_spares_schlichtings_numbers(transition: float, spared: float) -> None:
    # Schlichting, Boundary-Layer Theory, ch. 21 (from memory): C_f = 0.455/(log10 Re)^2.58 - A/Re.
    reynolds = 1e7
    found = (turbulent_friction(reynolds) - friction(reynolds, transition)) * reynolds
    assert found == pytest.approx(spared, rel=0.08)


def test_friction_has_no_jump_at_transition_and_is_laminar_before() -> None:
    assert friction(5e5 * 1.000001) == pytest.approx(friction(5e5), rel=1e-5)
    assert friction(1e5) == laminar_friction(1e5)
    assert friction(1e5, transition=0) == turbulent_friction(1e5)
    assert laminar_friction(1e6) < friction(1e6) < turbulent_friction(1e6)


@pytest.mark.parametrize("reynolds", [10, 1e3, 5e3, 1.5e4, 1e5])
def test_turbulent_friction_never_falls_below_laminar(reynolds: float) -> None:
    assert turbulent_friction(reynolds) >= laminar_friction(reynolds)


@pytest.mark.parametrize("reynolds", [0.0, -1.0, math.nan, math.inf])
def test_a_reynolds_number_is_positive(reynolds: float) -> None:
    for law in (laminar_friction, turbulent_friction, friction):
        with pytest.raises(ValueError, match="Reynolds"):
            law(reynolds)


def test_a_transition_is_not_negative() -> None:
    with pytest.raises(ValueError, match="transition"):
        friction(1e6, -1)
