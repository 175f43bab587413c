"""How numbers and names are put into words: no more digits than were earned, and nothing that could do harm.

Lengths come in mm, masses in g, areas in mm2, volumes in mm3, angles in degrees, as in results.json. Every function
takes None and answers with a dash and the reason given.
"""

from __future__ import annotations

import math
import unicodedata
from collections.abc import Mapping
from typing import Any

DASH = "–"
MINUS = "−"
SPACE = "\u00a0"
THIN = "\u202f"
STRANGE = "\ufffd"

GRAMS_PER_OUNCE = 28.349523125
GRAM_FORCE = 9.80665e-3
"""N, one gram-force: the pull that a spring scale in the shop shows."""


def plain(text: str) -> str:
    """Return a text with every character that is not for reading made harmless.

    Line ends and tabs become spaces; control characters, direction overrides and halves of surrogate pairs become the
    replacement sign, so that a name can neither break a line nor turn the writing around.
    """
    return "".join(_readable(letter) for letter in text)


def _readable(letter: str) -> str:
    if letter in "\t\n\r\v\f\u2028\u2029":
        return " "
    kind = unicodedata.category(letter)
    # Joiners inside words of some scripts are format characters too, and harmless.
    return (
        STRANGE if kind in {"Cc", "Cs", "Co", "Cn"} or (kind == "Cf" and letter not in "\u200c\u200d\u00ad") else letter
    )


def cleaned(tree: Any) -> Any:
    """Return a tree of mappings and lists with `plain` applied to every text and key in it."""
    if isinstance(tree, str):
        return plain(tree)
    if isinstance(tree, Mapping):
        return {plain(str(key)): cleaned(value) for key, value in tree.items()}
    if isinstance(tree, list | tuple):
        return [cleaned(value) for value in tree]
    return tree


def missing(reason: str = "") -> str:
    """Return a dash, with the reason why there is no value."""
    return f"{DASH} ({reason})" if reason else DASH


def fixed(value: float | None, decimals: int, *, signed: bool = False, reason: str = "") -> str:
    """Return a number with so many decimals, thousands set apart, a true minus sign, and no minus before zero."""
    if value is None:
        return missing(reason)
    rounded = round(float(value), decimals)
    text = f"{abs(rounded):,.{max(decimals, 0)}f}".replace(",", THIN)
    if rounded < 0:
        return MINUS + text
    return "+" + text if signed and rounded > 0 else text


def significant(value: float | None, digits: int = 3, *, signed: bool = False, reason: str = "") -> str:
    """Return a number with so many significant digits."""
    if value is None:
        return missing(reason)
    if value == 0:
        return "0"
    # The exponent after rounding: 9.996 to three digits is 10.0.
    exponent = int(f"{value:.{digits - 1}e}".partition("e")[2])
    return fixed(value, digits - 1 - exponent, signed=signed)


def earned(low: float, high: float) -> int:
    """Return the decimals that a band earns: to its first digit, or to its second where the first is a 1."""
    half = (high - low) / 2
    if not half > 0:
        return 2
    place = math.floor(math.log10(half))
    if half / 10.0**place < 2:
        place -= 1
    return min(max(-place, 0), 3)


def grams(value: float | None, decimals: int = 2, *, signed: bool = False, reason: str = "") -> str:
    """Return a mass in g, by default to the 0.01 g that a pocket scale shows."""
    return missing(reason) if value is None else fixed(value, decimals, signed=signed) + SPACE + "g"


def headline_grams(value: float) -> str:
    """Return a mass in g to three significant digits, but never finer than 0.01 g."""
    decimals = 2 - math.floor(math.log10(value)) if value > 0 else 2
    return grams(value, min(max(decimals, 0), 2))


def ounces(mass_g: float) -> str:
    """Return a mass given in g as avoirdupois ounces (28.349523125 g, exact by definition)."""
    return fixed(mass_g / GRAMS_PER_OUNCE, 2) + SPACE + "oz"


def banded_grams(value: float, low: float, high: float) -> str:
    """Return a reserve in g, signed, with the digits that its band earns."""
    return grams(value, earned(low, high), signed=True)


def band(
    low: float | None, high: float | None, unit: str = "", decimals: int | None = None, *, signed: bool = False
) -> str:
    """Return "low to high unit"; an open end is said in words."""
    after = SPACE + unit if unit else ""
    if low is None or high is None:
        if low is not None:
            return f"at least {_free(low, decimals, signed)}{after}"
        return DASH if high is None else f"at most {_free(high, decimals, signed)}{after}"
    places = earned(low, high) if decimals is None else decimals
    return f"{fixed(low, places, signed=signed)} to {fixed(high, places, signed=signed)}{after}"


def _free(value: float, decimals: int | None, signed: bool) -> str:
    return significant(value, 3, signed=signed) if decimals is None else fixed(value, decimals, signed=signed)


def millimetres(value: float | None, decimals: int = 1, *, signed: bool = False, reason: str = "") -> str:
    """Return a length in mm, by default to 0.1 mm: what a ruler or a seat in a mould holds."""
    return missing(reason) if value is None else fixed(value, decimals, signed=signed) + SPACE + "mm"


def point(place: Any, decimals: int = 1) -> str:
    """Return a place in mesh coordinates, "x, y, z" in mm without the unit."""
    if place is None:
        return DASH
    return ", ".join(fixed(value, decimals) for value in place)


def degrees(value: float | None, *, rounded: bool = False, signed: bool = True, reason: str = "") -> str:
    """Return an angle to a whole degree, or "about" it where it was rounded to steps of five."""
    if value is None:
        return missing(reason)
    return ("about " if rounded else "") + fixed(value, 0, signed=signed) + "°"


def nose_words(value: float | None, *, rounded: bool = False) -> str:
    """Return how the nose lies: level, so many degrees up, or down."""
    if value is None:
        return "nose free to lie anywhere"
    about = "about " if rounded else ""
    if abs(round(value)) < 1:
        return f"nose {about}level"
    return f"nose {about}{fixed(abs(value), 0)}° {'up' if value > 0 else 'down'}"


def lean_words(value: float | None, *, rounded: bool = False, free: bool = False) -> str:
    """Return how the back lies: straight up, leaning to one side, or free."""
    if value is None:
        return "free to roll" if free else "no lean to speak of, it stands on end"
    about = "about " if rounded else ""
    if abs(round(value)) < 1:
        return "no lean"
    return f"leans {about}{fixed(abs(value), 0)}° to its {'right' if value > 0 else 'left'}"


def percent(share: float | None, *, reason: str = "") -> str:
    """Return a share of one as whole percents."""
    return missing(reason) if share is None else fixed(share * 100, 0) + SPACE + "%"


def cubic_centimetres(volume_mm3: float | None, decimals: int = 2, *, reason: str = "") -> str:
    """Return a volume given in mm3 as cm3."""
    return missing(reason) if volume_mm3 is None else fixed(volume_mm3 / 1000, decimals) + SPACE + "cm³"


def square_millimetres(area: float | None, *, reason: str = "") -> str:
    """Return an area in mm2 to whole mm2."""
    return missing(reason) if area is None else fixed(area, 0) + SPACE + "mm²"


def reynolds(value: float) -> str:
    """Return a Reynolds number to two significant digits, without a unit."""
    return significant(value, 2)


def newtons(force: float) -> str:
    """Return a force in N with the gram-force a spring scale shows; two significant digits, a drag earns no more."""
    return f"{significant(force, 2)}{SPACE}N{SPACE}({significant(force / GRAM_FORCE, 2)}{SPACE}gf)"


def clipped(text: str, most: int) -> str:
    """Return a text of at most so many characters, its end shown as left out."""
    return text if len(text) <= most else text[: most - 1].rstrip() + "…"
