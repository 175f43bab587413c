"""Quantities with their unit in, SI values out; and the units that numbers are printed in."""

from __future__ import annotations

import difflib
import functools
import math
import re
from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from types import MappingProxyType
from typing import Any, Final

from meshlure.errors import Fault, InputError

MM: Final = 1e-3
CM: Final = 1e-2
INCH: Final = 0.0254
MM2: Final = 1e-6
CM2: Final = 1e-4
MM3: Final = 1e-9
CM3: Final = 1e-6
GRAM: Final = 1e-3
OUNCE: Final = 28.349523125e-3
"""kg. The international avoirdupois ounce, exact since 1959."""
G_PER_CM3: Final = 1e3
DEGREE: Final = math.pi / 180.0

LENGTH_UNITS: Final[Mapping[str, float]] = MappingProxyType({"mm": MM, "cm": CM, "m": 1.0, "in": INCH})
"""m. What one unit of a mesh's coordinates may stand for."""

LIGHTEST: Final = 5.0
"""kg/m3. Lighter than any foam a maker buys: a density below it is taken for a slip of the unit."""
HEAVIEST: Final = 25e3
"""kg/m3. Denser than osmium: a density above it is taken for a slip of the unit."""


@dataclass(frozen=True)
class _Kind:
    """What is accepted as one kind of quantity.

    ``unit`` is what comes out; ``shown`` and ``size`` are what limits are told in. Below ``bottom`` (unless signed)
    and beyond ``top``, both in ``unit``, nothing about a bait makes sense.
    """

    noun: str
    unit: str
    usual: tuple[str, ...]
    pair: tuple[str, str]
    shown: str
    size: float = 1.0
    bottom: float = 0.0
    top: float = math.inf
    # pint holds degrees, g/kg and percent to be plain numbers, so kinds without a dimension name their units.
    only: frozenset[str] = frozenset()


_KINDS: Final[Mapping[str, _Kind]] = MappingProxyType(
    {
        "length": _Kind("a length", "m", ("mm", "cm", "m", "in"), ("mm", "in"), "mm", MM, top=1e3),
        "mass": _Kind("a mass", "kg", ("g", "kg", "oz", "lb"), ("g", "oz"), "g", GRAM, top=50.0),
        "density": _Kind(
            "a density", "kg/m**3", ("g/cm3", "kg/m3", "lb/ft3", "lb/in3"), ("g/cm3", "kg/m3"), "g/cm3", G_PER_CM3
        ),
        "speed": _Kind("a speed", "m/s", ("m/s", "km/h", "kn", "ft/s", "mph"), ("m/s", "km/h"), "m/s"),
        "angle": _Kind(
            "an angle",
            "radian",
            ("deg", "rad"),
            ("deg", "rad"),
            "deg",
            DEGREE,
            bottom=-math.inf,
            only=frozenset({"degree", "radian", "milliradian", "turn", "arcminute"}),
        ),
        "temperature": _Kind(
            "a temperature",
            "degC",
            ("degC", "degF", "K"),
            ("degC", "degF"),
            "degC",
            bottom=-273.15,
            only=frozenset({"degree_Celsius", "degree_Fahrenheit", "kelvin"}),
        ),
        "salinity": _Kind(
            "a salinity",
            "g/kg",
            ("g/kg", "%"),
            ("g/kg", "%"),
            "g/kg",
            top=1e3,
            only=frozenset({"gram / kilogram", "percent", "permille"}),
        ),
        "shrinkage": _Kind(
            "a shrinkage",
            "dimensionless",
            ("%", "permille"),
            ("%", "permille"),
            "%",
            1e-2,
            only=frozenset({"percent", "permille"}),
        ),
        "share": _Kind(
            "a share",
            "dimensionless",
            ("%", "permille"),
            ("%", "permille"),
            "%",
            1e-2,
            only=frozenset({"percent", "permille"}),
        ),
        "force": _Kind("a force", "N", ("N", "mN", "gf", "lbf"), ("N", "gf"), "N"),
        "energy": _Kind("an energy", "J", ("J", "mJ", "N m", "ft lbf"), ("J", "ft lbf"), "J"),
        "area": _Kind("an area", "m**2", ("mm2", "cm2", "m2", "in2"), ("mm2", "cm2"), "mm2", MM2),
    }
)

# Spellings that the units library takes for something else, or does not know.
_MEANT: Final[Mapping[str, Mapping[str, str]]] = MappingProxyType(
    {
        "temperature": {"C": "degC", "F": "degF", "deg": "degC", "°": "degC"},
        "salinity": {"psu": "g/kg", "PSU": "g/kg", "ppt": "g/kg"},
    }
)

_DECIMAL = re.compile(r"(?P<number>[+-]?(?:\d+(?:\.\d*)?|\.\d+)(?:[eE][+-]?\d+)?)(?P<unit>.*)", re.ASCII | re.DOTALL)
_FRACTION = re.compile(
    r"(?P<sign>[+-]?)(?:(?P<whole>\d+)\s+)?(?P<top>\d+)\s*/\s*(?P<bottom>\d+)(?P<unit>.*)", re.ASCII | re.DOTALL
)
_COMMA = re.compile(r"[+-]?\d+,\d")
_THOUSANDS = re.compile(r"[+-]?[1-9]\d{0,2},\d{3}(?!\d)")
_NOT_FINITE = re.compile(r"[+-]?(?:nan|inf(?:inity)?)\b", re.IGNORECASE)
_POWER = re.compile(r"(?<=[A-Za-zµμ])\^?(-?[1-4])(?![\d.])")
# The parser passes over what it does not know, such as a semicolon or what follows a hash.
_SPELLING = re.compile(r"[A-Za-z_°µμ%‰²³⁻¹*/^()·\s\d.+-]+", re.ASCII)
_GRAIN_OR_GRAM = re.compile(r"(?<![A-Za-z])gr(?![A-Za-z])")
_LONGEST: Final = 60
_HUGE: Final = 1e60


@functools.cache
def _registry() -> Any:
    """Return the one units registry; built on first use, for it costs some 0.4 s."""
    import pint

    # Decimals, so that 0.72 g/cm3 comes out as 720 kg/m3 and not as 719.9999999999999.
    return pint.UnitRegistry(non_int_type=Decimal)


@dataclass(frozen=True)
class _Entry:
    """What the user wrote and where, for the messages about it."""

    kind: str
    where: str
    found: str

    @property
    def sort(self) -> _Kind:
        return _KINDS[self.kind]

    @property
    def example(self) -> str:
        return f"write it like '1.2 {self.sort.usual[0]}'"

    def refuse(self, what: str, next_step: str, allowed: str = "") -> InputError:
        usual = f"{self.sort.noun} as a number with its unit, in quotes: {', '.join(self.sort.usual)}"
        return InputError(Fault(what, self.where, self.found, allowed or usual, next_step))


def quantity(
    text: object,
    kind: str,
    where: str,
    *,
    positive: bool = False,
    signed: bool = False,
    least: float | None = None,
    most: float | None = None,
) -> float:
    """Value of a quantity written with its unit, in SI (temperature in degC, salinity in g/kg).

    Parameters
    ----------
    text : str
        A number and a unit, such as ``"0.72 g/cm3"``, ``"1/2 oz"`` or ``"18 degC"``. Anything else is refused: a
        bare number with the two readings that it could have.
    kind : str
        length (m), mass (kg), density (kg/m3), speed (m/s), angle (rad), temperature (degC), salinity (g/kg),
        shrinkage (a share of the length), share (of one), force (N), energy (J) or area (m2).
    where : str
        The key or option that the text stands at, for the message.
    positive : bool
        Refuse zero as well; a density is always positive.
    signed : bool
        Allow values below zero (a weight in water, a wind, a coordinate). Angles and temperatures are always signed.
    least, most : float or None
        Further limits, inclusive, in the unit that is returned.

    Returns
    -------
    float

    Raises
    ------
    InputError
        With one Fault: not a string with a number and a unit, an unknown or ambiguous unit, a unit of another kind,
        not finite, or outside the limits.

    Notes
    -----
    Units are pint's, with ``cm3`` read like ``cm**3``. ``gr`` is refused, for it stands for grain in one place and
    for gram in another. A density under 5 kg/m3 or over 25 g/cm3, a mass over 50 kg and a length over 1 km are taken
    for slips of the unit.
    """
    entry = _Entry(kind, where, _shorten(text))
    if isinstance(text, bool) or not isinstance(text, str | int | float):
        raise entry.refuse(f"{entry.sort.noun} was expected", entry.example)
    if isinstance(text, str) and len(text) > _LONGEST:
        raise entry.refuse(f"the text is too long for {entry.sort.noun}", entry.example)
    written = text if isinstance(text, str) else repr(text) if abs(text) < _HUGE else "inf"
    number, spelling = _split(written, entry)
    if not math.isfinite(number):
        raise entry.refuse("the number is not finite", entry.example)
    if not spelling:
        first, second = _readings(float(number), kind)
        grams = f" ({float(number) * OUNCE / GRAM:.4g} g)" if kind == "mass" else ""
        raise entry.refuse("the number has no unit", f"write '{first}' or '{second}'{grams}")
    value = _convert(number, spelling, entry)
    if kind == "density":
        _check_density(value, number, entry)
    _check_limits(value, entry, positive=positive, signed=signed, least=least, most=most)
    return value


def _shorten(text: object) -> str:
    if isinstance(text, int) and abs(text) > 10**_LONGEST:
        return "a whole number of very many digits"
    words = str(text).strip() or "an empty text"
    return words if len(words) <= _LONGEST else f"{words[:_LONGEST]}..."


def _split(text: str, entry: _Entry) -> tuple[Decimal, str]:
    """Return the number, as exact as it was written, and the unit's spelling."""
    plain = text.replace("\N{MINUS SIGN}", "-").strip()
    if _COMMA.match(plain):
        step = f"write '{plain.replace(',', '.', 1)}'"
        if _THOUSANDS.match(plain):
            step += f" or '{plain.replace(',', '')}'"
        raise entry.refuse("the number holds a comma", step)
    if match := _FRACTION.fullmatch(plain):
        if int(match["bottom"]):
            size = int(match["whole"] or 0) + Decimal(match["top"]) / Decimal(match["bottom"])
            return (-size if match["sign"] == "-" else size), match["unit"].strip()
    elif match := _DECIMAL.fullmatch(plain):
        # The detour by float finds an exponent that no double holds.
        number = float(match["number"])
        return Decimal(match["number"]) if math.isfinite(number) else Decimal(number), match["unit"].strip()
    elif _NOT_FINITE.match(plain):
        return Decimal("nan"), ""
    raise entry.refuse(f"cannot be read as {entry.sort.noun}", entry.example)


def _convert(number: Decimal, spelling: str, entry: _Entry) -> float:
    """Return the number in the kind's own unit."""
    sort = entry.sort
    if _GRAIN_OR_GRAM.search(spelling):
        step = f"write '{number:g} g' for grams or '{number:g} grain' (0.0648 g) for grains"
        raise entry.refuse("'gr' may stand for grams or for grains", step)
    near = _MEANT.get(entry.kind, {}).get(spelling) or _nearest(spelling, sort.usual)
    step = f"write '{number:g} {near}' if that is meant" if near else entry.example
    if not _SPELLING.fullmatch(spelling):
        raise entry.refuse(f"the unit '{spelling}' is not known", step)
    registry = _registry()
    try:
        unit = registry.parse_units(_POWER.sub(r"**\1", spelling.replace("·", "*")))
    except Exception as problem:  # the parser raises a dozen types, all of them for what the user wrote
        raise entry.refuse(f"the unit '{spelling}' is not known", step) from problem
    if sort.only:
        fits = str(unit) in sort.only
    else:
        fits = unit.dimensionality == registry.parse_units(sort.unit).dimensionality
    if not fits:
        raise entry.refuse(f"'{spelling}' is not a unit of {sort.noun}", step)
    try:
        value = float(registry.Quantity(number, unit).to(sort.unit).magnitude)
    except ArithmeticError as problem:
        raise entry.refuse("the number is not finite", entry.example) from problem
    if not math.isfinite(value):
        raise entry.refuse("the number is not finite", entry.example)
    return value


def _check_density(value: float, number: Decimal, entry: _Entry) -> None:
    if value <= 0.0 or LIGHTEST <= value <= HEAVIEST:
        return
    low = value < LIGHTEST
    slip, other = ("g/cm3", G_PER_CM3) if low else ("kg/m3", 1.0)
    meant = LIGHTEST <= float(number) * other <= HEAVIEST
    what = "this is lighter than any foam" if low else "this is denser than any metal"
    step = f"is it '{number:g} {slip}'?" if meant else "check the number and the unit"
    raise entry.refuse(what, step, f"{LIGHTEST:g} kg/m3 to {HEAVIEST / G_PER_CM3:g} g/cm3")


def _check_limits(
    value: float, entry: _Entry, *, positive: bool, signed: bool, least: float | None, most: float | None
) -> None:
    sort = entry.sort
    step = "check the number and the unit"
    if value <= 0.0 and (positive or entry.kind == "density"):
        raise entry.refuse(f"{sort.noun} must be above zero here", step, f"above 0 {sort.shown}")
    if not (signed or value >= sort.bottom):
        raise entry.refuse("the value is too low", step, f"not below {sort.bottom / sort.size:g} {sort.shown}")
    if abs(value) > sort.top:
        raise entry.refuse(f"nothing about a bait has {sort.noun} like this", step, f"up to {sort.top:g} {sort.unit}")
    ends = [f"from {least / sort.size:g} {sort.shown}"] if least is not None else []
    ends += [f"up to {most / sort.size:g} {sort.shown}"] if most is not None else []
    if (least is not None and value < least) or (most is not None and value > most):
        raise entry.refuse("the value is outside what is possible here", step, " ".join(ends))


def _readings(number: float, kind: str) -> tuple[str, str]:
    """Return the two quantities that a bare number most likely stands for."""
    first, second = _KINDS[kind].pair
    if kind == "density":
        if abs(number) <= 20.0:
            return f"{number:g} g/cm3", f"{number * G_PER_CM3:g} kg/m3"
        # Between a foam in kg/m3 and a wood in lb/ft3 the number alone does not decide.
        in_pounds = abs(number) < 70.0
        return f"{number:g} kg/m3", f"{number:g} lb/ft3" if in_pounds else f"{number / G_PER_CM3:g} g/cm3"
    if kind == "salinity" and abs(number) > 10.0:
        return f"{number:g} g/kg", f"{number / 10.0:g} %"
    return f"{number:g} {first}", f"{number:g} {second}"


def _nearest(spelling: str, usual: tuple[str, ...]) -> str | None:
    plain = {unit.casefold(): unit for unit in usual}
    close = difflib.get_close_matches(spelling.casefold().replace(" ", ""), plain, n=1, cutoff=0.6)
    return plain[close[0]] if close else None


def length_unit(name: str, where: str) -> float:
    """Length that one unit of a mesh stands for, m.

    Raises
    ------
    InputError
        Where the name is none of mm, cm, m, in.
    """
    if name in LENGTH_UNITS:
        return LENGTH_UNITS[name]
    near = _nearest(name, tuple(LENGTH_UNITS))
    step = f"write '{near}'" if near else "write the unit that the mesh was exported in"
    raise InputError(Fault("the mesh's length unit is not known", where, name, ", ".join(LENGTH_UNITS), step))


def grams(mass: float, places: int = 2) -> str:
    """Mass as text in grams.

    Parameters
    ----------
    mass : float, kg
    places : int
        Decimals; two are a pocket scale's.
    """
    return _fixed(mass / GRAM, places, "g")


def ounces(mass: float, places: int = 3) -> str:
    """Mass (kg) as text in avoirdupois ounces."""
    return _fixed(mass / OUNCE, places, "oz")


def millimetres(length: float, places: int = 1) -> str:
    """Length (m) as text in millimetres."""
    return _fixed(length / MM, places, "mm")


def _fixed(value: float, places: int, unit: str) -> str:
    # Adding zero turns a rounded -0.0 into 0.0.
    return f"{round(value, places) + 0.0:.{places}f} {unit}"
