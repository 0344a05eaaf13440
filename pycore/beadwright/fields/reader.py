"""Read the fields of one group: values, findings at each field, and the reading of each quantity.

Choices that come from a catalogue table are named by table; the caller brings the tables' ids.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping
from functools import lru_cache
from typing import Any

from attrs import field, frozen

from .. import quantity
from ..quantity import INCH, METRIC
from ..working import InputError, Issue
from .spec import NOTE_LIMIT, TEXT_LIMIT, Field, Group

Tables = Mapping[str, Mapping[str, Any]]


@frozen
class Reads:
    """What the reader collects besides values: issues, and the reading of each quantity."""

    system: str
    issues: list[Issue] = field(factory=list)
    readings: dict[str, dict[str, object]] = field(factory=dict)
    places: set[str] = field(factory=set)

    def add(self, issue: Issue) -> None:
        """Keep one finding."""
        self.issues.append(issue)
        self.places.add(issue.path)


def read_group(spec: Group, raw: object, path: str, reads: Reads, tables: Tables, *, label: str = "") -> dict[str, Any]:
    """Read every field of one group from its raw object.

    Parameters
    ----------
    spec : Group
        The fields to read.
    raw : object
        What stands in the job file; anything but an object yields an issue and empty values.
    path : str
        JSON Pointer of that object.
    reads : Reads
        Collects issues and readings.
    tables : Mapping
        Ids of the catalogue tables and of the job's sealants, by table name.
    label : str
        Put before field labels in messages, for example `Side A`.

    Returns
    -------
    dict
        Field key to value: float in the core unit, str, bool, or None where nothing usable stands.
    """
    values: dict[str, Any] = dict.fromkeys((item.key for item in spec.fields), None)
    if raw is None:
        raw = {}
    if not isinstance(raw, Mapping):
        reads.add(Issue(path, "not-an-object", "error", f"{label or spec.label} is damaged: a set of fields was expected here."))
        return values
    for item in spec.fields:
        values[item.key] = _read_field(item, raw.get(item.key), f"{path}/{item.key}", reads, tables, label)
    return values


def _name(item: Field, label: str) -> str:
    return f"{label}, {item.label[0].lower()}{item.label[1:]}" if label else item.label


def _read_field(item: Field, raw: object, path: str, reads: Reads, tables: Tables, label: str) -> Any:
    if raw is None or (isinstance(raw, str) and not raw.strip()):
        raw = item.default_for(reads.system)
        if raw is None:
            return None
    reader = _READERS.get(item.kind, _read_quantity)
    return reader(item, raw, path, reads, tables, label)


def _refuse(reads: Reads, path: str, code: str, message: str, value: object) -> None:
    shown = value if isinstance(value, (str, int)) or (isinstance(value, float) and math.isfinite(value)) else None
    reads.add(Issue(path, code, "error", message, value=shown))


def _read_text(item: Field, raw: object, path: str, reads: Reads, tables: Tables, label: str) -> str | None:
    if not isinstance(raw, str):
        _refuse(reads, path, "not-text", f"{_name(item, label)} must be text.", None)
        return None
    limit = NOTE_LIMIT if item.kind == "note" else TEXT_LIMIT
    if len(raw) > limit:
        _refuse(reads, path, "too-long", f"{_name(item, label)} may be at most {limit} characters long; this has {len(raw)}.", None)
        return raw[:limit]
    return raw


def _read_flag(item: Field, raw: object, path: str, reads: Reads, tables: Tables, label: str) -> bool | None:
    if isinstance(raw, bool):
        return raw
    _refuse(reads, path, "not-a-flag", f"{_name(item, label)} must be yes or no.", raw)
    return None


def _read_choice(item: Field, raw: object, path: str, reads: Reads, tables: Tables, label: str) -> str | None:
    allowed: Any = {choice.value for choice in item.choices} if item.choices else tables.get(item.table or "", {})
    if isinstance(raw, str) and (raw in allowed or item.table == "finishes"):
        return raw
    what = "a sealant of this job" if item.table == "sealants" else "one of the choices offered"
    shown = f"“{raw[:40]}”" if isinstance(raw, str) else "what stands here"
    _refuse(reads, path, "not-a-choice", f"{_name(item, label)}: {shown} is not {what}.", raw)
    return None


def _read_number(item: Field, raw: object, path: str, reads: Reads, tables: Tables, label: str) -> float | None:
    if isinstance(raw, bool) or not isinstance(raw, (str, int, float)):
        _refuse(reads, path, "not-a-number", f"{_name(item, label)} must be a number.", None)
        return None
    try:
        value = float(quantity.parse_number(str(raw)))
    except InputError as error:
        _refuse(reads, path, error.code, f"{_name(item, label)}: {error.message}", raw)
        return None
    return value if _within(item, value, path, reads, label, lambda v: quantity.plain(v, 3), "") else None


def _read_count(item: Field, raw: object, path: str, reads: Reads, tables: Tables, label: str) -> int | None:
    value = _read_number(item, raw, path, reads, tables, label)
    if value is None:
        return None
    if not value.is_integer():
        _refuse(reads, path, "not-whole", f"{_name(item, label)} must be a whole number.", raw)
        return None
    return int(value)


def _read_quantity(item: Field, raw: object, path: str, reads: Reads, tables: Tables, label: str) -> float | None:
    if isinstance(raw, bool) or not isinstance(raw, (str, int, float)):
        expected = item.example if isinstance(item.example, str) else item.example[reads.system]
        _refuse(reads, path, "not-a-number", f"{_name(item, label)}: write it as text with its unit, such as {expected}.", None)
        return None
    units = item.units_for(reads.system)
    try:
        reading = quantity.parse(str(raw), item.kind, units[0], reads.system)
    except InputError as error:
        _refuse(reads, path, error.code, f"{_name(item, label)}: {error.message}", raw)
        return None
    unit = reading.unit
    if reading.is_bare:
        reads.add(Issue(path, "unit-missing", "note", f"{_name(item, label)} has no unit; read as {quantity.sign_of(units[0])}.", value=raw))
    reads.readings[path] = dict(_reads_as(item.kind, reading.value, reading.unit))
    good = _within(item, reading.value, path, reads, label, lambda v: quantity.show(v, item.kind, unit), unit)
    return reading.value if good else None


_CORE_UNIT = {"length": "mm", "temperature": "degC", "temperature_difference": "K", "expansion": "1/K", "percent": "fraction",
              "duration": "h", "irradiance": "W/m2", "film": "W/m2K",
              "volume": "ml", "coverage": "m2/l", "pace": "m/h"}  # fmt: skip


@lru_cache(maxsize=4096)
def _reads_as(kind: str, value: float, unit: str) -> tuple[tuple[str, object], ...]:
    """The value in core units and in the other system's habit, to stand beside what was typed."""
    if kind == "length" and unit in ("in", "ft", "yd"):
        text = quantity.show(value, "length", "mm") if abs(value) < 1000 else quantity.show_span(value, METRIC)
    elif kind == "length":
        text = quantity.show_length(value, INCH) if abs(value) < 600 else quantity.show_span(value, INCH)
    else:
        text = quantity.show(value, kind, _OTHER.get((kind, unit), unit))
    return (("value", value), ("unit", _CORE_UNIT[kind]), ("reads", f"= {text}"), ("short", text))


_OTHER = {
    ("temperature", "degC"): "degF", ("temperature", "degF"): "degC",
    ("temperature_difference", "K"): "degF", ("temperature_difference", "degF"): "K",
    ("expansion", "e-6/K"): "e-6/degF", ("expansion", "1/K"): "e-6/degF",
    ("expansion", "e-6/degF"): "e-6/K", ("expansion", "1/degF"): "e-6/K",
    ("irradiance", "W/m2"): "BTU/h/ft2", ("irradiance", "BTU/h/ft2"): "W/m2",
    ("film", "W/m2K"): "BTU/h/ft2/degF", ("film", "BTU/h/ft2/degF"): "W/m2K",
    ("volume", "ml"): "US fl oz", ("volume", "l"): "US gal", ("volume", "US fl oz"): "ml", ("volume", "US qt"): "l", ("volume", "US gal"): "l",
    ("volume", "imp fl oz"): "ml", ("volume", "imp gal"): "l", ("volume", "in3"): "ml",
    ("coverage", "m2/l"): "ft2/gal", ("coverage", "ft2/gal"): "m2/l", ("pace", "m/h"): "ft/h", ("pace", "ft/h"): "m/h",
}  # fmt: skip


def _within(item: Field, value: float, path: str, reads: Reads, label: str, show: Callable[[float], str], unit: str) -> bool:
    """Hard limits refuse, soft ones warn; both name the limit in the unit that was typed."""
    name = _name(item, label)
    low, high = item.hard_min, item.hard_max
    if low is not None and (value <= low if item.above else value < low):
        must = f"more than {show(low)}" if item.above else f"{show(low)} or more"
        reads.add(Issue(path, "too-small", "error", f"{name} must be {must}; this reads {show(value)}.", value, low, unit))
        return False
    if high is not None and value > high:
        reads.add(Issue(path, "too-large", "error", f"{name} must be {show(high)} or less; this reads {show(value)}.", value, high, unit))
        return False
    for limit, over, word in ((item.soft_min, -1, "below"), (item.soft_max, 1, "above")):
        if limit is not None and (value - limit) * over > 0:
            message = f"{name} reads {show(value)}, {word} {show(limit)}. {item.soft_reason} Sure?"
            reads.add(Issue(path, "unusual", "warning", message, value, limit, unit))
    return True


_READERS: dict[str, Callable[..., Any]] = {
    "text": _read_text,
    "note": _read_text,
    "date": _read_text,
    "flag": _read_flag,
    "choice": _read_choice,
    "reference": _read_choice,
    "number": _read_number,
    "count": _read_count,
}
