"""Read the quantities that people type, print the ones that they read.

Unit definitions are pint's, taken once as exact fractions; everything afterwards is exact
rational arithmetic until the single conversion to float at the border of the core. Core
units: mm, degC (readings), K (differences), 1/K, h, W/m2, W/m2K, ml, m2/l, m/h; fractions are 0 to 1.

A typed text is never changed: `parse` returns it beside its value.
"""

from __future__ import annotations

import json
import math
import re
from fractions import Fraction
from functools import cache, lru_cache
from importlib import resources
from typing import TYPE_CHECKING

from attrs import frozen

from .working import InputError

if TYPE_CHECKING:
    import pint

METRIC = "metric"
INCH = "inch"
MAX_TEXT_LENGTH = 80
MAX_DIGITS = 24
MAX_EXPONENT = 24


@frozen
class Unit:
    """One unit that a field accepts: how it prints, its pint name and the spellings people use."""

    label: str
    pint_name: str
    spellings: tuple[str, ...]


@frozen
class Kind:
    """A kind of quantity: its core unit, the units accepted, and the defaults of each system."""

    key: str
    noun: str
    core: str
    units: tuple[Unit, ...]
    defaults: dict[str, str]
    example: dict[str, str]


@frozen
class Reading:
    """A typed text with what it was read as."""

    typed: str
    value: float
    exact: Fraction
    unit: str
    is_bare: bool


_MM = Unit("mm", "millimeter", ("mm", "millimetre", "millimetres", "millimeter", "millimeters"))
_CM = Unit("cm", "centimeter", ("cm", "centimetre", "centimetres", "centimeter", "centimeters"))
_M = Unit("m", "meter", ("m", "metre", "metres", "meter", "meters"))
_IN = Unit("in", "inch", ("in", "inch", "inches", '"', "\u2033", "\u201d", "''"))
_FT = Unit("ft", "foot", ("ft", "foot", "feet", "'", "\u2032", "\u2019"))
_YD = Unit("yd", "yard", ("yd", "yard", "yards"))

KINDS: dict[str, Kind] = {
    kind.key: kind
    for kind in (
        Kind(
            "length",
            "a length",
            "millimeter",
            (_MM, _CM, _M, _IN, _FT, _YD),
            {METRIC: "mm", INCH: "in"},
            {METRIC: "16 mm or 9,5 mm", INCH: '5/8 in, 1 1/4 in or 12\' 6 1/2"'},
        ),
        Kind(
            "temperature",
            "a temperature",
            "degC",
            (
                Unit("degC", "degC", ("degc", "°c", "c", "celsius", "℃")),
                Unit("degF", "degF", ("degf", "°f", "f", "fahrenheit", "℉")),
            ),
            {METRIC: "degC", INCH: "degF"},
            {METRIC: "34 °C or -12 °C", INCH: "94 °F or 10 °F"},
        ),
        Kind(
            "temperature_difference",
            "a temperature difference",
            "delta_degC",
            (
                Unit("K", "delta_degC", ("k", "kelvin", "degc", "°c", "c", "℃")),
                Unit("degF", "delta_degF", ("degf", "°f", "f", "℉")),
            ),
            {METRIC: "K", INCH: "degF"},
            {METRIC: "5 K", INCH: "9 °F"},
        ),
        Kind(
            "expansion",
            "a coefficient of expansion",
            "1/delta_degC",
            (
                Unit("1/K", "1/delta_degC", ("1/k", "/k", "perk", "1/°c", "/°c", "1/degc", "/degc", "mm/mm/k", "m/m/k")),
                Unit("e-6/K", "1e-6/delta_degC", ("e-6/°c", "e-6/degc", "ppm/k", "µm/m/k", "um/m/k", "μm/m/k", "µm/mk")),
                Unit("1/degF", "1/delta_degF", ("1/degf", "/degf", "1/°f", "/°f", "perf", "/f", "1/f", "in/in/f", "in/in/°f", "in/in/degf")),
                Unit("e-6/degF", "1e-6/delta_degF", ("e-6/°f", "e-6/f", "ppm/degf", "ppm/f")),
            ),
            {METRIC: "e-6/K", INCH: "e-6/degF"},
            {METRIC: "10.8 × 10⁻⁶/K", INCH: "6.0 × 10⁻⁶/°F"},
        ),
        Kind(
            "percent",
            "a percentage",
            "",
            (
                Unit("%", "0.01", ("%", "percent", "pct")),
                Unit("mm/m", "0.001", ("mm/m", "‰")),
            ),
            {METRIC: "%", INCH: "%"},
            {METRIC: "25 %", INCH: "25 %"},
        ),
        Kind(
            "duration",
            "a time",
            "hour",
            (
                Unit("min", "minute", ("min", "mins", "minute", "minutes")),
                Unit("h", "hour", ("h", "hr", "hrs", "hour", "hours")),
                Unit("d", "day", ("d", "day", "days")),
            ),
            {METRIC: "h", INCH: "h"},
            {METRIC: "24 h or 3 d", INCH: "24 h or 3 d"},
        ),
        Kind(
            "irradiance",
            "a strength of sunshine",
            "W/m**2",
            (
                Unit("W/m2", "W/m**2", ("w/m2", "w/m²", "w/m^2")),
                Unit("BTU/h/ft2", "BTU/hour/foot**2", ("btu/h/ft2", "btu/hr/ft2", "btu/h/ft²", "btu/(h·ft²)", "btu/h·ft²")),
            ),
            {METRIC: "W/m2", INCH: "BTU/h/ft2"},
            {METRIC: "600 W/m2", INCH: "190 BTU/h/ft2"},
        ),
        Kind(
            "film",
            "a surface film coefficient",
            "W/m**2/delta_degC",
            (
                Unit("W/m2K", "W/m**2/delta_degC", ("w/m2k", "w/m²k", "w/m2/k", "w/(m2k)", "w/(m²k)")),
                Unit("BTU/h/ft2/degF", "BTU/hour/foot**2/delta_degF", ("btu/h/ft2/degf", "btu/h/ft2/f", "btu/hr/ft2/f", "btu/h/ft²/°f", "btu/h·ft²·°f")),
            ),
            {METRIC: "W/m2K", INCH: "BTU/h/ft2/degF"},
            {METRIC: "17 W/m2K", INCH: "3 BTU/h/ft2/degF"},
        ),
        Kind(
            "volume",
            "a volume",
            "milliliter",
            (
                Unit("ml", "milliliter", ("ml", "millilitre", "millilitres", "milliliter", "milliliters", "cc", "cm3", "cm^3")),
                Unit("l", "liter", ("l", "litre", "litres", "liter", "liters", "ltr", "dm3")),
                Unit("US fl oz", "US_fluid_ounce", ("usfloz", "floz", "fluidounce", "fluidounces", "oz")),
                Unit("US qt", "US_liquid_quart", ("usqt", "qt", "quart", "quarts")),
                Unit("US gal", "US_liquid_gallon", ("usgal", "gal", "gallon", "gallons", "usgallon", "usgallons")),
                Unit("imp fl oz", "imperial_fluid_ounce", ("impfloz",)),
                Unit("imp gal", "imperial_gallon", ("impgal", "imperialgallon", "imperialgallons")),
                Unit("in3", "inch**3", ("in3", "in^3", "cuin", "cubicinch", "cubicinches")),
            ),
            {METRIC: "l", INCH: "US gal"},
            {METRIC: "300 ml or 20 l", INCH: "10.1 fl oz or 1.5 gal"},
        ),
        Kind(
            "coverage",
            "a coverage",
            "meter**2/liter",
            (
                Unit("m2/l", "meter**2/liter", ("m2/l", "m^2/l", "m2perl", "m2/litre", "m2/liter")),
                Unit("ft2/gal", "foot**2/US_liquid_gallon", ("ft2/gal", "ft^2/gal", "sqft/gal", "ft2/usgal", "sf/gal")),
            ),
            {METRIC: "m2/l", INCH: "ft2/gal"},
            {METRIC: "12 m2/l", INCH: "490 ft2/gal"},
        ),
        Kind(
            "pace",
            "a length done in an hour",
            "meter/hour",
            (
                Unit("m/h", "meter/hour", ("m/h", "m/hr", "mperh", "m/hour")),
                Unit("ft/h", "foot/hour", ("ft/h", "ft/hr", "lf/h", "lf/hr", "ftperh", "ft/hour")),
            ),
            {METRIC: "m/h", INCH: "ft/h"},
            {METRIC: "8 m/h", INCH: "25 ft/h"},
        ),
    )
}

_VULGAR = {
    "¼": "1/4", "½": "1/2", "¾": "3/4", "⅛": "1/8", "⅜": "3/8", "⅝": "5/8", "⅞": "7/8",
    "⅓": "1/3", "⅔": "2/3", "⅕": "1/5", "⅖": "2/5", "⅗": "3/5", "⅘": "4/5", "⅙": "1/6", "⅚": "5/6",
}  # fmt: skip
_SPACES = re.compile(r"[\s\u00a0\u2009\u202f]+")
_NUMBER = (
    r"(?:\d+(?:\s+|-|\s*\+\s*)\d+\s*/\s*\d+"  # 1 1/4, 1-1/4
    r"|\d+\s*/\s*\d+"  # 5/8
    r"|\d{1,3}(?: \d{3})+(?:[.,]\d+)?(?![\d/])"  # 1 500
    r"|(?:\d+(?:[.,]\d*)?|[.,]\d+)(?:[eE][+-]?\d+)?)"  # 9,5  5.5e-6
)
_TERM = re.compile(rf"\s*(?P<sign>[+-]?)\s*(?P<number>{_NUMBER})\s*(?P<unit>[^\d\s+\-.,][^\s]*(?:\s+(?![\d+\-.,])[^\s]+)*|)")
_MIXED = re.compile(r"^(\d+)(?:\s+|-|\s*\+\s*)(\d+)\s*/\s*(\d+)$")
_FRACTION = re.compile(r"^(\d+)\s*/\s*(\d+)$")
# `10.8 × 10⁻⁶/K` and `10.8 1e-6/K` hold a second number that belongs to the unit.
_POWER_OF_UNIT = re.compile(r"(?<=\d)\s*(?:[x·*]\s*|\s)(?:1e-0?6|10\^?-6|10⁻⁶)\s*/\s*", re.IGNORECASE)
_PER_OF_UNIT = re.compile(r"(?<=\d)\s+1\s*/\s*(?=[a-z°])", re.IGNORECASE)
_PLAIN = re.compile(r"^(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?$")
_AMBIGUOUS_COMMA = re.compile(r"^[1-9]\d{0,2},\d{3}$")


@cache
def registry() -> pint.UnitRegistry:
    """The one pint registry, exact: magnitudes are fractions, so 1 in is 25.4 mm to the last digit."""
    import pint

    return pint.UnitRegistry(non_int_type=Fraction)


@cache
def _factor_and_offset(kind: str, label: str) -> tuple[Fraction, Fraction]:
    """Exact `core = factor * typed + offset` of one accepted unit.

    Read from `units.json`, where pint's own fractions are kept so that a start on a tablet need
    not build pint's registry; a test holds the file to pint.
    """
    kept = _kept_factors().get(kind, {}).get(label)
    return (Fraction(kept[0]), Fraction(kept[1])) if kept else work_out(kind, label)


@cache
def _kept_factors() -> dict[str, dict[str, list[str]]]:
    text = resources.files(__package__).joinpath("units.json").read_text(encoding="utf-8")
    kept: dict[str, dict[str, list[str]]] = json.loads(text)
    return kept


def work_out(kind: str, label: str) -> tuple[Fraction, Fraction]:
    """Factor and offset of a unit as pint defines it (KeyError for an unknown one)."""
    spec = KINDS[kind]
    unit = unit_of(kind, label)
    if spec.core == "":
        return Fraction(unit.pint_name), Fraction(0)
    ureg = registry()
    scale = Fraction(1)
    name = unit.pint_name
    if name.startswith("1e-6/"):
        scale, name = Fraction(1, 10**6), "1/" + name[5:]
    zero = Fraction(ureg.Quantity(Fraction(0), name).to(spec.core).magnitude)
    one = Fraction(ureg.Quantity(Fraction(1), name).to(spec.core).magnitude)
    return (one - zero) * scale, zero


@cache
def _spellings(kind: str) -> dict[str, str]:
    """Every accepted spelling of a kind's units, folded, to the unit's own label."""
    table: dict[str, str] = {}
    for unit in KINDS[kind].units:
        for spelling in (unit.label, *unit.spellings):
            table[_fold(spelling)] = unit.label
    return table


def unit_of(kind: str, label: str) -> Unit:
    """The unit of a kind by its label; an unknown one is a programming error (KeyError)."""
    for unit in KINDS[kind].units:
        if unit.label == label:
            return unit
    raise KeyError(f"{kind} has no unit {label}")


def _fold(text: str) -> str:
    """Spelling of a unit without the differences that do not matter."""
    return _SPACES.sub("", text.strip().lower()).replace("²", "2").replace("³", "3").replace("·", "").replace("º", "°").rstrip(".")


def to_core(kind: str, number: Fraction, unit: str) -> Fraction:
    """Exact value in the core unit of `kind` of a number given in `unit` (a unit label)."""
    factor, offset = _factor_and_offset(kind, unit)
    return factor * number + offset


def from_core(kind: str, value: Fraction, unit: str) -> Fraction:
    """Exact number in `unit` of a value given in the core unit of `kind`."""
    factor, offset = _factor_and_offset(kind, unit)
    return (value - offset) / factor


@cache
def _float_factors(kind: str, unit: str) -> tuple[float, float]:
    factor, offset = _factor_and_offset(kind, unit)
    return float(factor), float(offset)


def _tidy(text: str) -> str:
    """The typed text with fraction signs, dashes and primes brought to one form."""
    out = text
    for sign, plain in _VULGAR.items():
        if sign in out:
            out = re.sub(rf"(?<=\d){sign}", f" {plain}", out).replace(sign, plain)
    return out.replace("\u2212", "-").replace("\u2013", "-").replace("\u2044", "/").replace("\u00d7", "x")


def parse_number(text: str) -> Fraction:
    """Read a plain number: `12`, `9,5`, `0.375`, `5/8`, `1 1/4`, `5.5e-6`.

    Raises
    ------
    InputError
        With code `not-a-number`, `ambiguous-comma` or `too-long`.
    """
    body = _SPACES.sub(" ", _tidy(text)).strip()
    sign = 1
    if body[:1] in "+-":
        sign = -1 if body[:1] == "-" else 1
        body = body[1:].strip()
    return sign * _number(body, text)


def _number(body: str, typed: str) -> Fraction:
    """Exact value of one unsigned number."""
    if sum(ch.isdigit() for ch in body) > MAX_DIGITS:
        raise InputError("too-long", f"“{_short(typed)}” has too many digits; write at most {MAX_DIGITS}.")
    if mixed := _MIXED.match(body):
        whole, top, bottom = (int(part) for part in mixed.groups())
        return whole + _ratio(top, bottom, typed)
    if plain := _FRACTION.match(body):
        return _ratio(int(plain[1]), int(plain[2]), typed)
    if _AMBIGUOUS_COMMA.match(body):
        raise InputError(
            "ambiguous-comma",
            f"“{_short(typed)}” can mean {body.replace(',', '')} or {body.replace(',', '.')}; write it without the comma.",
        )
    digits = body.replace(" ", "").replace(",", ".")
    if not _PLAIN.match(digits):
        raise InputError("not-a-number", f"“{_short(typed)}” is not a number.")
    _, _, exponent = digits.lower().partition("e")
    if exponent and abs(int(exponent)) > MAX_EXPONENT:
        raise InputError("too-long", f"“{_short(typed)}” is out of any range; write a plain number.")
    try:
        return Fraction(digits)
    except (ValueError, ZeroDivisionError):
        raise InputError("not-a-number", f"“{_short(typed)}” is not a number.") from None


def _ratio(top: int, bottom: int, typed: str) -> Fraction:
    if bottom == 0:
        raise InputError("not-a-number", f"“{_short(typed)}” divides by zero.")
    return Fraction(top, bottom)


def _short(text: str) -> str:
    return text if len(text) <= 24 else text[:23] + "…"


def _expected(kind: str, system: str) -> str:
    spec = KINDS[kind]
    return f"Write {spec.noun} such as {spec.example[system]}."


@lru_cache(maxsize=8192)
def parse(typed: str, kind: str, default_unit: str, system: str = METRIC) -> Reading:
    """Read a typed quantity of a known kind.

    Parameters
    ----------
    typed : str
        What the person wrote, for example `12' 6 1/2"`, `9,5 mm`, `5/8`.
    kind : str
        A key of `KINDS`.
    default_unit : str
        Label of the unit that a bare number takes.
    system : str
        `metric` or `inch`; chooses the examples in messages.

    Returns
    -------
    Reading
        The text, the value in the core unit (float and exact), the unit it was written in.

    Raises
    ------
    InputError
        Codes `empty`, `too-long`, `not-a-number`, `ambiguous-comma`, `unknown-unit`, `wrong-kind`, `one-unit`.
    """
    if len(typed) > MAX_TEXT_LENGTH:
        raise InputError("too-long", f"That is too long to be {KINDS[kind].noun}. {_expected(kind, system)}")
    body = _SPACES.sub(" ", _tidy(typed)).strip()
    if not body:
        raise InputError("empty", _expected(kind, system))
    if kind == "expansion":
        body = _PER_OF_UNIT.sub(" /", _POWER_OF_UNIT.sub(" e-6/", body))
    terms = _terms(body, typed, kind, system)
    sign = -1 if terms[0][0] == "-" else 1
    if len(terms) > 1 and kind != "length":
        raise InputError("one-unit", f"“{_short(typed)}” holds more than one number. {_expected(kind, system)}")
    total = Fraction(0)
    labels: list[str] = []
    for position, (_, number, spelling) in enumerate(terms):
        label = _unit_label(spelling, kind, typed, system) if spelling else None
        if label is None:
            label = "in" if position and labels[-1] == "ft" else default_unit
            if position and labels[-1] != "ft":
                raise InputError("one-unit", f"“{_short(typed)}” holds a second number without a unit. {_expected(kind, system)}")
        if labels and _factor_and_offset(kind, label)[0] >= _factor_and_offset(kind, labels[-1])[0]:
            raise InputError("one-unit", f"“{_short(typed)}” does not go from large to small units. {_expected(kind, system)}")
        labels.append(label)
        total += to_core(kind, sign * number if len(terms) == 1 else number, label)
    if len(terms) > 1:
        total *= sign
    value = float(total)
    if not math.isfinite(value):
        raise InputError("not-a-number", f"“{_short(typed)}” is out of any range. {_expected(kind, system)}")
    return Reading(typed, value, total, labels[-1] if len(labels) == 1 else labels[0], is_bare=not terms[0][2])


def _terms(body: str, typed: str, kind: str, system: str) -> list[tuple[str, Fraction, str]]:
    """Split a text into (sign, number, unit spelling); a dash inside `12'-6"` only joins."""
    found: list[tuple[str, Fraction, str]] = []
    position = 0
    while position < len(body):
        match = _TERM.match(body, position)
        if match is None or match.end() == position or len(found) == 3:
            raise InputError("not-a-number", f"“{_short(typed)}” cannot be read. {_expected(kind, system)}")
        sign, spelling = match["sign"], match["unit"]
        if found and sign and not (sign == "-" and _unit_quiet(found[-1][2]) == "ft"):
            raise InputError("not-a-number", f"“{_short(typed)}” cannot be read. {_expected(kind, system)}")
        end = match.end()
        # A prime closes the feet even when the inches follow without a space.
        if spelling[:1] in ("'", "\u2032", "\u2019") and spelling[:2] != "''":
            end = match.start("unit") + 1
            spelling = spelling[:1]
        try:
            number = _number(match["number"].strip(), typed)
        except InputError as error:
            raise InputError(error.code, f"{error.message} {_expected(kind, system)}" if error.code == "not-a-number" else error.message) from None
        found.append((sign, number, spelling))
        position = end
        while position < len(body) and body[position] == " ":
            position += 1
    return found


def _unit_quiet(spelling: str) -> str | None:
    return _spellings("length").get(_fold(spelling))


def _unit_label(spelling: str, kind: str, typed: str, system: str) -> str:
    """The label of a spelled unit, or an error that tells a foreign unit from a wrong one."""
    folded = _fold(spelling)
    label = _spellings(kind).get(folded)
    if label is not None:
        return label
    for other in KINDS.values():
        if other.key != kind and folded in _spellings(other.key):
            raise InputError("wrong-kind", f"“{_short(typed)}” is {other.noun}, not {KINDS[kind].noun}. {_expected(kind, system)}")
    raise InputError("unknown-unit", f"The unit “{_short(spelling.strip())}” is not known here. {_expected(kind, system)}")


# ---- printing ---------------------------------------------------------------------------------

_UNIT_SIGN = {
    "degC": "°C", "degF": "°F", "e-6/K": "× 10⁻⁶/K", "e-6/degF": "× 10⁻⁶/°F", "1/K": "/K", "1/degF": "/°F",
    "W/m2": "W/m²", "W/m2K": "W/m²K", "BTU/h/ft2": "BTU/h·ft²", "BTU/h/ft2/degF": "BTU/h·ft²·°F",
    "m2/l": "m²/l", "ft2/gal": "ft²/gal", "in3": "in³",
}  # fmt: skip
_DECIMALS = {
    ("length", "mm"): 1, ("length", "m"): 3, ("length", "in"): 3, ("length", "ft"): 2, ("length", "cm"): 2,
    ("temperature", "degC"): 1, ("temperature", "degF"): 1,
    ("temperature_difference", "K"): 1, ("temperature_difference", "degF"): 1,
    ("expansion", "e-6/K"): 2, ("expansion", "e-6/degF"): 2, ("percent", "%"): 2, ("percent", "mm/m"): 3,
    ("duration", "h"): 1, ("duration", "d"): 1, ("duration", "min"): 0,
    ("irradiance", "W/m2"): 0, ("irradiance", "BTU/h/ft2"): 1, ("film", "W/m2K"): 1, ("film", "BTU/h/ft2/degF"): 2,
    ("volume", "ml"): 1, ("volume", "l"): 2, ("volume", "US fl oz"): 2, ("volume", "US gal"): 2, ("volume", "US qt"): 2,
    ("coverage", "m2/l"): 2, ("coverage", "ft2/gal"): 0, ("pace", "m/h"): 2, ("pace", "ft/h"): 1,
}  # fmt: skip


def sign_of(unit: str) -> str:
    """How a unit label is printed, for example `°C`."""
    return _UNIT_SIGN.get(unit, unit)


def plain(number: float, decimals: int) -> str:
    """A number to at most so many decimals, without trailing zeros and without a negative zero."""
    text = f"{number:.{decimals}f}"
    if "." in text:
        text = text.rstrip("0").rstrip(".")
    return "0" if text in ("-0", "") else text.replace("-", "−")


def show(value: float, kind: str, unit: str, decimals: int | None = None) -> str:
    """A core value printed in `unit`, rounded once, here."""
    factor, offset = _float_factors(kind, unit)
    places = _DECIMALS.get((kind, unit), 3) if decimals is None else decimals
    sign = sign_of(unit)
    gap = "" if sign.startswith("/") else " "
    return f"{plain((value - offset) / factor, places)}{gap}{sign}"


def show_inches(value_mm: float, denominator: int = 16, *, exact_only: bool = False) -> str | None:
    """A length as feet, inches and a fraction; None when `exact_only` and it is not on the scale."""
    units = value_mm / 25.4 * denominator
    nearest = round(units)
    if exact_only and abs(units - nearest) > 1e-6:
        return None
    minus = "−" if nearest < 0 else ""
    whole, rest = divmod(abs(nearest), denominator)
    part = Fraction(rest, denominator)
    if part and whole:
        return f"{minus}{whole} {part.numerator}/{part.denominator} in"
    return f"{minus}{part.numerator}/{part.denominator} in" if part else f"{minus}{whole} in"


def show_length(value_mm: float, system: str) -> str:
    """A joint-sized length for reading: millimetres, or inches (a fraction when it falls on 1/32)."""
    if system == METRIC:
        return show(value_mm, "length", "mm")
    return show_inches(value_mm, 32, exact_only=True) or show(value_mm, "length", "in")


def show_span(value_mm: float, system: str) -> str:
    """An element-sized length for reading: metres, or feet and inches."""
    if system == METRIC:
        return show(value_mm, "length", "m")
    sixteenths = round(value_mm / 25.4 * 16)
    feet, rest = divmod(abs(sixteenths), 12 * 16)
    inches = show_inches(rest * 25.4 / 16) or "0 in"
    minus = "−" if sixteenths < 0 else ""
    return f"{minus}{feet} ft" if rest == 0 else f"{minus}{feet} ft {inches}" if feet else f"{minus}{inches}"


def default_unit(kind: str, system: str) -> str:
    """The unit in which a kind is shown in one system."""
    return KINDS[kind].defaults[system]


def exact_text(value: Fraction, kind: str, unit: str) -> str:
    """A text that `parse` reads back to exactly the same value, in `unit`."""
    number = from_core(kind, value, unit)
    sign = "-" if number < 0 else ""
    number = abs(number)
    bottom = number.denominator
    while bottom % 10 == 0:
        bottom //= 10
    for prime in (2, 5):
        while bottom % prime == 0:
            bottom //= prime
    if number.denominator == 1:
        body = str(number.numerator)
    elif bottom == 1 and number.denominator > 64:
        places = 1
        while (number * 10**places).denominator != 1:
            places += 1
        digits = str(int(number * 10**places)).rjust(places + 1, "0")
        body = f"{digits[:-places]}.{digits[-places:]}"
    else:
        whole, part = divmod(number, 1)
        body = f"{whole} {part.numerator}/{part.denominator}" if whole else f"{part.numerator}/{part.denominator}"
    return f"{sign}{body} {unit}"


def units_text() -> str:
    """What `units.json` holds: every accepted unit's factor and offset, worked out by pint."""
    table = {kind.key: {unit.label: [str(part) for part in work_out(kind.key, unit.label)] for unit in kind.units} for kind in KINDS.values()}
    return json.dumps(table, ensure_ascii=False, indent=1) + "\n"
