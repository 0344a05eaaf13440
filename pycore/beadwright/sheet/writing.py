"""Values to text in the reader's units, and working steps to lines that can be checked by hand."""

from __future__ import annotations

import math
import re
from typing import Any

from .. import quantity
from ..quantity import INCH, METRIC, plain
from ..working import Step, Value

_PLACE = re.compile(r"\{(\w+)\}")


def value_text(value: Value | None, system: str) -> str:
    """One value in the reader's units, at the precision of working (finer than that of answers)."""
    if value is None or value.number is None:
        return "–"
    number, kind = value.number, value.kind
    if kind == "number":
        return plain(number, 4)
    if kind == "area":
        return f"{plain(number, 1)} mm²" if system == METRIC else f"{plain(number / 645.16, 4)} in²"
    if kind == "rate":
        return f"{plain(number, 5)} mm/K" if system == METRIC else f"{plain(number / 25.4 / 1.8, 7)} in/°F"
    if kind == "length":
        return f"{plain(number, 3)} mm" if system == METRIC else f"{plain(number / 25.4, 4)} in"
    if kind == "percent":
        small = abs(number) < 0.01
        return f"{plain(number * 100, 4 if small else 2)} %"
    if value.unit:
        return quantity.show(number, kind, value.unit, 2)
    unit = quantity.default_unit(kind, system)
    return quantity.show(number, kind, unit, {"expansion": 3, "temperature": 2, "temperature_difference": 2}.get(kind))


def step_lines(step: Step, system: str) -> dict[str, Any]:
    """A step for the answer: title, symbol, formula, the numbers put in, result, source."""
    texts = {name: value_text(value, system) for name, value in step.inputs.items()}
    numbers = _PLACE.sub(lambda match: _put_in(match, texts, step.template), step.template)
    lines: dict[str, Any] = {
        "key": step.key,
        "title": step.title,
        "symbol": step.symbol,
        "formula": step.formula,
        "numbers": numbers,
        "result": value_text(step.result, system),
        "value": step.result.number if step.result else None,
        "source": step.source,
        "status": step.status,
    }
    if step.remark:
        lines["remark"] = step.remark
    return lines


def _put_in(match: re.Match[str], texts: dict[str, str], template: str) -> str:
    """The number for one place; a negative one is bracketed after an operator."""
    text = texts.get(match[1], match[0])
    before = template[: match.start()].rstrip()
    return f"({text})" if text.startswith("−") and before.endswith(("+", "−", "×", "/", "·", "-")) else text


def length(value_mm: float | None, system: str) -> str:
    """A joint-sized length as an answer."""
    if value_mm is None:
        return "–"
    return quantity.show_length(value_mm, system)


def near(value_mm: float | None, system: str) -> str:
    """A length to set by rule: in inches the nearest sixteenth, marked where it is not exact."""
    if value_mm is None or system == METRIC:
        return length(value_mm, system)
    exact = quantity.show_inches(value_mm, 32, exact_only=True)
    return exact or f"about {quantity.show_inches(value_mm, 16)}"


def up(value_mm: float, system: str) -> str:
    """A length that must not look smaller than it is: a tenth of a millimetre or 1/1000 in, upwards; an inch fraction stays one."""
    if system == METRIC:
        return f"{plain(ceil_to(value_mm, 10), 1)} mm"
    return quantity.show_inches(value_mm, 32, exact_only=True) or f"{plain(ceil_to(value_mm / 25.4, 1000), 3)} in"


def down(value_mm: float, system: str) -> str:
    """A length that must not look larger than it is; an inch fraction stays a fraction."""
    if system == METRIC:
        return f"{plain(-ceil_to(-value_mm, 10), 1)} mm"
    return quantity.show_inches(value_mm, 32, exact_only=True) or f"{plain(-ceil_to(-value_mm / 25.4, 1000), 3)} in"


def ceil_to(value: float, per_unit: int) -> float:
    """The next 1/per_unit at or above a value; float noise does not add a step."""
    return math.ceil(value * per_unit - 1e-6) / per_unit


def fine(value_mm: float, system: str) -> str:
    """A movement in a table: to a hundredth of a millimetre or 1/10000 in."""
    return f"{plain(value_mm, 2)} mm" if system == METRIC else f"{plain(value_mm / 25.4, 4)} in"


def span(value_mm: float, system: str) -> str:
    """An element-sized length as an answer."""
    return quantity.show_span(value_mm, system)


def span_down(value_mm: float, system: str) -> str:
    """The greatest length of an element, to a millimetre or 1/16 in, downwards."""
    step_mm = 1.0 if system == METRIC else 25.4 / 16
    return quantity.show_span(math.floor(value_mm / step_mm + 1e-6) * step_mm, system)


def temperature(value_c: float, system: str) -> str:
    """A temperature as an answer, to a whole degree where it is one."""
    return quantity.show(value_c, "temperature", "degF" if system == INCH else "degC", 1)


def temperature_up(value_c: float, system: str) -> str:
    """The lower end of a range of temperature, rounded inwards to a tenth."""
    return _inward(value_c, system, up=True)


def temperature_down(value_c: float, system: str) -> str:
    """The upper end of a range of temperature, rounded inwards to a tenth."""
    return _inward(value_c, system, up=False)


def _inward(value_c: float, system: str, *, up: bool) -> str:
    number = value_c * 1.8 + 32.0 if system == INCH else value_c
    rounded = ceil_to(number, 10) if up else -ceil_to(-number, 10)
    return f"{plain(rounded, 1)} {'°F' if system == INCH else '°C'}"


def difference(value_k: float, system: str) -> str:
    """A temperature difference as an answer."""
    return quantity.show(value_k, "temperature_difference", "degF" if system == INCH else "K", 1)


def percent(fraction: float, *, signed: bool = False) -> str:
    """A fraction as a percentage with one decimal."""
    text = f"{plain(fraction * 100, 1)} %"
    return f"+{text}" if signed and fraction > 0 else text


def percent_up(fraction: float) -> str:
    """A share that must not look smaller than it is: to a tenth of a per cent, upwards."""
    return f"{plain(ceil_to(fraction * 100, 10), 1)} %"


def area(value_mm2: float, system: str) -> str:
    """A section area as an answer."""
    return f"{plain(value_mm2, 0)} mm²" if system == METRIC else f"{plain(value_mm2 / 645.16, 3)} in²"


def volume_per_length(area_mm2: float, system: str) -> str:
    """Volume per run length: ml per metre (numerically the area in mm²), or US fluid ounces per foot."""
    if system == METRIC:
        return f"{plain(area_mm2, 0)} ml per metre"
    return f"{plain(area_mm2 / 645.16 * 12 / 1.8046875, 2)} US fl oz per foot"
