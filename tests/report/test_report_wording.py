"""Numbers in words. Roundings are checked against hand rounding, units against their definitions."""

from __future__ import annotations

import pytest

from meshlure.report import wording as w


@pytest.mark.parametrize(
    ("value", "decimals", "signed", "said"),
    [
        (1.005, 1, False, "1.0"),
        (-0.04, 1, True, "0.0"),
        (-0.06, 1, False, "−0.1"),
        (0.06, 1, True, "+0.1"),
        (1234567.0, 0, False, "1\u202f234\u202f567"),
        (1250.0, -2, False, "1\u202f200"),
        (None, 2, False, "–"),
    ],
)
def test_fixed(value: float | None, decimals: int, signed: bool, said: str) -> None:
    assert w.fixed(value, decimals, signed=signed) == said


@pytest.mark.parametrize(
    ("value", "digits", "said"),
    [(0.0123456, 2, "0.012"), (123456.0, 2, "120\u202f000"), (9.996, 3, "10.0"), (0.0, 2, "0"), (-4.56, 2, "−4.6")],
)
def test_significant(value: float, digits: int, said: str) -> None:
    assert w.significant(value, digits) == said


@pytest.mark.parametrize(
    ("half", "decimals"), [(0.3, 1), (0.15, 2), (0.02, 2), (0.012, 3), (4.0, 0), (0.99, 1), (1e-9, 3), (0.0, 2)]
)
def test_digits_follow_the_band(half: float, decimals: int) -> None:
    assert w.earned(1 - half, 1 + half) == decimals


def test_a_reserve_has_no_more_digits_than_its_band() -> None:
    assert w.banded_grams(1.2345, 0.9, 1.6) == "+1.2\u00a0g"
    assert w.banded_grams(-0.0312, -0.05, -0.01) == "−0.03\u00a0g"


@pytest.mark.parametrize(
    ("mass", "said"), [(7.234, "7.23\u00a0g"), (13.23, "13.2\u00a0g"), (132.6, "133\u00a0g"), (0.5678, "0.57\u00a0g")]
)
def test_headline_mass_has_three_digits(mass: float, said: str) -> None:
    assert w.headline_grams(mass) == said


def test_ounces() -> None:
    # 1 oz avdp = 28.349523125 g exactly: international yard and pound agreement, 1959.
    assert w.ounces(28.349523125) == "1.00\u00a0oz"
    assert w.ounces(7.0873807813) == "0.25\u00a0oz"


def test_gram_force() -> None:
    # 1 gf = 9.80665e-3 N: standard gravity, 3rd CGPM (1901).
    assert w.newtons(0.0980665) == "0.098\u00a0N\u00a0(10\u00a0gf)"


def test_angles_carry_no_decimals_and_a_sense() -> None:
    assert w.degrees(-3.9) == "−4°"
    assert w.degrees(15.0, rounded=True) == "about +15°"
    assert w.degrees(None, reason="free to roll") == "– (free to roll)"
    assert w.nose_words(-3.9) == "nose 4° down"
    assert w.nose_words(0.4) == "nose level"
    assert w.nose_words(20.0, rounded=True) == "nose about 20° up"
    assert w.lean_words(2.7) == "leans 3° to its right"
    assert w.lean_words(-2.7) == "leans 3° to its left"


def test_bands_with_an_open_end() -> None:
    assert w.band(0.8, 1.6, "g", 1) == "0.8 to 1.6\u00a0g"
    assert w.band(None, 1.6, "g", 1) == "at most 1.6\u00a0g"
    assert w.band(0.8, None, "g", 1) == "at least 0.8\u00a0g"


def test_letters_that_are_not_for_reading() -> None:
    assert w.plain("a\nb\tc") == "a b c"
    assert w.plain("a\x00\x1b[0m\u202eb\ud800\u2066") == "a\ufffd\ufffd[0m\ufffdb\ufffd\ufffd"
    assert w.plain("Köder 鱼 µm²") == "Köder 鱼 µm²"
    assert w.cleaned({"k\x00": ["v\x07", 1.5, None, True]}) == {"k\ufffd": ["v\ufffd", 1.5, None, True]}
