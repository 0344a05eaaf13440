"""From the raw `cure` part of a job to values; nothing is decided here."""

from __future__ import annotations

import re
from collections.abc import Mapping
from datetime import datetime, time
from typing import Any

from attrs import frozen

from ..design.inputs import Project, rows
from ..fields import CURE, CUT, ROOM, SEALED, TWO_PART, WEATHER, Field, Group, Reads, read_group
from ..quantity import INCH, parse_number
from ..working import InputError, Issue
from .clock import Clock, has_rules, read_day, read_time, read_when, zone_rules
from .weather import Row

MAX_WEATHER_ROWS = 2000
MAX_RUNS = 500
MAX_SPAN_D = 800
MAX_PASTED = 20000
_SPLIT = re.compile(r"[;\t]|,\s+|\s+")


@frozen
class Run:
    """A run sealed, or planned where `start_h` is None."""

    id: str
    path: str
    values: Mapping[str, Any]
    start_h: float | None
    primer_h: float | None


@frozen
class CureInput:
    """Everything of the cure part, read."""

    settings: Mapping[str, Any]
    clock: Clock
    work_h: tuple[float, float]
    runs: tuple[Run, ...]
    weather: tuple[Row, ...]
    cuts: tuple[Mapping[str, Any], ...]
    two_part: tuple[Mapping[str, Any], ...]
    room: Mapping[str, Any] | None
    reads: Reads


def joints_named(raw: object) -> set[str]:
    """Ids of the joints that the cure part speaks of."""
    if not isinstance(raw, Mapping):
        return set()
    parts = raw.get("sealed") if isinstance(raw.get("sealed"), list) else []
    places = [*(parts or []), raw.get("room")]
    return {part["joint"] for part in places if isinstance(part, Mapping) and isinstance(part.get("joint"), str)}


def read_cure(raw: object, project: Project, joint_ids: Mapping[str, Any]) -> CureInput:
    """Read the cure part; findings and readings are collected in `reads`."""
    reads = Reads(project.system)
    tables = {**project.tables, "joints": joint_ids}
    whole: Mapping[str, Any] = raw if isinstance(raw, Mapping) else {}
    if not isinstance(raw, Mapping):
        reads.add(Issue("/cure", "not-an-object", "error", "The cure part is damaged: a set of fields was expected here."))
    settings = read_group(CURE, {key: value for key, value in whole.items() if key != "pasted"}, "/cure", reads, tables)
    clock = _clock(settings["zone"], reads)
    work = (_time_of_day(settings, "work_from", 7.0, reads), _time_of_day(settings, "work_to", 17.0, reads))
    if work[0] >= work[1]:
        reads.add(Issue("/cure/work_to", "contradiction", "error", "Work must end after it begins; 07:00 to 17:00 is used."))
        work = (7.0, 17.0)
    runs = tuple(_run(index, row, clock, reads, tables) for index, row in rows(whole.get("sealed"), "/cure/sealed", "run", reads, MAX_RUNS))
    found = [item for index, row in rows(whole.get("weather"), "/cure/weather", "weather row", reads, MAX_WEATHER_ROWS) if (item := _weather_row(index, row, reads, tables)) is not None]
    weather = _tidy([*found, *_pasted(whole.get("pasted"), reads, project.system)], reads)
    cuts = _group_rows(CUT, whole, "cuts", "cut test", reads, tables)
    two_part = _group_rows(TWO_PART, whole, "two_part", "two-part row", reads, tables)
    room = read_group(ROOM, whole["room"], "/cure/room", reads, tables) if whole.get("room") else None
    return CureInput(settings, clock, work, runs, weather, cuts, two_part, room, reads)


def _group_rows(spec: Group, whole: Mapping[str, Any], key: str, noun: str, reads: Reads, tables: Mapping[str, Any]) -> tuple[Mapping[str, Any], ...]:
    found = []
    for index, row in rows(whole.get(key), f"/cure/{key}", noun, reads, 200):
        found.append(read_group(spec, row, f"/cure/{key}/{index}", reads, tables, label=f"{noun.capitalize()} {index + 1}") | {"path": f"/cure/{key}/{index}"})
    return tuple(found)


def _clock(name: str | None, reads: Reads) -> Clock:
    wanted = (name or "").strip()
    if not wanted:
        return Clock("", None)
    rules = zone_rules(wanted)
    if rules is None:
        if has_rules():
            reads.add(Issue("/cure/zone", "not-a-zone", "error", f"Time zone: “{wanted[:40]}” is not in the list; write it such as Europe/Berlin or America/New_York."))
        else:
            reads.add(Issue("/cure/zone", "no-zone-rules", "warning", "This device holds no time-zone rules: hours are taken as they stand, also when the clocks change."))
        return Clock("", None)
    return Clock(wanted, rules)


def _time_of_day(values: Mapping[str, Any], key: str, fallback: float, reads: Reads) -> float:
    text = values[key]
    if not text:
        return fallback
    try:
        return read_time(text)
    except InputError as error:
        reads.add(Issue(f"/cure/{key}", error.code, "error", f"{CURE[key].label}: {error.message}", value=text[:40]))
        return fallback


def _moment(values: Mapping[str, Any], field: Field, path: str, clock: Clock, reads: Reads) -> float | None:
    text = values[field.key]
    if not text:
        return None
    try:
        local = read_when(text)
    except InputError as error:
        reads.add(Issue(f"{path}/{field.key}", error.code, "error", f"{field.label}: {error.message}", value=text[:40]))
        return None
    if clock.is_skipped(local):
        reads.add(Issue(f"{path}/{field.key}", "skipped-time", "warning", f"{field.label}: the clock jumps over this time; {clock.text(clock.hours(local))} is used.", value=text[:40]))
    elif clock.is_doubled(local):
        reads.add(Issue(f"{path}/{field.key}", "doubled-time", "note", f"{field.label}: the clock shows this time twice that night; the first is used.", value=text[:40]))
    return clock.hours(local)


def _run(index: int, row: Mapping[str, Any], clock: Clock, reads: Reads, tables: Mapping[str, Any]) -> Run:
    path = f"/cure/sealed/{index}"
    given = row.get("id")
    name = given if isinstance(given, str) and 0 < len(given) <= 80 else f"run-{index}"
    values = read_group(SEALED, row, path, reads, tables, label=f"Run {index + 1}")
    if values["joint"] is None and f"{path}/joint" not in reads.places and values["shape"] != "fillet":
        reads.add(Issue(f"{path}/joint", "missing", "error", f"Run {index + 1}: the joint is not chosen yet."))
    if values["expiry"]:
        try:
            read_day(values["expiry"])
        except InputError as error:
            reads.add(Issue(f"{path}/expiry", error.code, "error", f"Use by: {error.message}", value=values["expiry"][:40]))
    return Run(name, path, values, _moment(values, SEALED["when"], path, clock, reads), _moment(values, SEALED["primer_at"], path, clock, reads))


def _weather_row(index: int, row: Mapping[str, Any], reads: Reads, tables: Mapping[str, Any]) -> Row | None:
    path = f"/cure/weather/{index}"
    values = read_group(WEATHER, row, path, reads, tables, label=f"Weather {index + 1}")
    if not values["day"]:
        reads.add(Issue(f"{path}/day", "missing", "error", f"Weather {index + 1}: the day is not given yet."))
        return None
    try:
        day = read_day(values["day"])
        hour = read_time(values["time"]) if values["time"] else None
    except InputError as error:
        reads.add(Issue(f"{path}/{'time' if error.code == 'not-a-time' else 'day'}", error.code, "error", f"Weather {index + 1}: {error.message}", value=str(values["day"])[:40]))
        return None
    low, high = values["least"], values["most"]
    if hour is not None:
        low = low if low is not None else high
        high = low
    for key, value in (("least", low), ("most", high)):
        if value is None and not any(f"{path}/{place}" in reads.places for place in ("least", "most")):
            reads.add(Issue(f"{path}/{key}", "missing", "error", f"Weather {index + 1}: {WEATHER[key].label.lower()} is not given yet; the row is not used."))
    if low is None or high is None:
        return None
    if values["humidity"] is None and values["dew"] is None:
        if f"{path}/humidity" not in reads.places:
            reads.add(Issue(f"{path}/humidity", "missing", "error", f"Weather {index + 1}: humidity or dew point is not given yet; the row is not used."))
        return None
    return _row(datetime.combine(day, time()), hour, low, high, values["humidity"], values["dew"], path, reads, values["surface_least"], values["surface_most"], wet=bool(values["rain"]))


def _row(day: datetime, hour: float | None, low: float, high: float, damp: float | None, dew: float | None, path: str, reads: Reads,
         surface_low: float | None = None, surface_high: float | None = None, *, wet: bool = False) -> Row | None:  # fmt: skip
    if low > high:
        reads.add(Issue(f"{path}/least", "contradiction", "error", "The lowest of a day is above its highest; the row is not used."))
        return None
    if surface_low is not None and surface_high is not None and surface_low > surface_high:
        reads.add(Issue(f"{path}/surface_least", "contradiction", "error", "The coldest surface is above the hottest; the air is used."))
        surface_low = surface_high = None
    if dew is not None and dew > high:
        reads.add(Issue(f"{path}/dew", "contradiction", "warning", "The dew point is above the highest air; saturated air is used."))
    return Row(day, hour, low, high, damp, dew, surface_low, surface_high, wet)


def _pasted(raw: object, reads: Reads, system: str) -> list[Row]:
    if raw is None or raw == "":
        return []
    path = "/cure/pasted"
    if not isinstance(raw, str):
        reads.add(Issue(path, "not-text", "error", "Weather as text must be text."))
        return []
    if len(raw) > MAX_PASTED:
        reads.add(Issue(path, "too-long", "error", f"Weather as text may be at most {MAX_PASTED} characters long; this has {len(raw)}."))
        return []
    found = []
    bad: list[int] = []
    for number, line in enumerate(raw.splitlines(), 1):
        if not line.strip() or line.lstrip().startswith("#"):
            continue
        row = _pasted_line(line, path, reads, system)
        if row is None:
            bad.append(number)
        else:
            found.append(row)
    if bad:
        places = ", ".join(str(item) for item in bad[:8]) + (" …" if len(bad) > 8 else "")
        reads.add(Issue(path, "unread-line", "warning", f"Weather as text: line {places} cannot be read. Write day, lowest, highest, humidity; or day, time, air, humidity."))
    return found


def _pasted_line(line: str, path: str, reads: Reads, system: str) -> Row | None:
    """A line of text as a row; None for one that cannot be read."""
    parts = [part.strip(" ,\"'°CcFf%") for part in _SPLIT.split(line.strip()) if part.strip(" ,\"'°CcFf%")]
    if len(parts) != 4:
        return None
    try:
        day = datetime.combine(read_day(parts[0]), time())
        hour = read_time(parts[1]) if ":" in parts[1] else None
        numbers = [float(parse_number(part)) for part in parts[1 if hour is None else 2 :]]
    except InputError:
        return None
    *airs, percent = numbers
    if system == INCH:
        airs = [(air - 32.0) / 1.8 for air in airs]
    if not 0.0 <= percent <= 100.0 or not all(-90.0 <= air <= 60.0 for air in airs) or airs[0] > airs[-1]:
        return None
    return _row(day, hour, airs[0], airs[-1], percent / 100.0, None, path, reads)


def _tidy(found: list[Row], reads: Reads) -> tuple[Row, ...]:
    """Without second rows for one day or moment, and within a span that can be reckoned."""
    kept: list[Row] = []
    seen: set[tuple[datetime, float | None]] = set()
    for row in found[:MAX_WEATHER_ROWS]:
        if (row.day, row.time_h) in seen:
            reads.add(Issue("/cure/weather", "double-day", "warning", f"The weather of {row.day:%Y-%m-%d} is given twice; the first is used."))
            continue
        seen.add((row.day, row.time_h))
        kept.append(row)
    if kept:
        first = min(row.day for row in kept)
        far = [row for row in kept if (row.day - first).days > MAX_SPAN_D]
        if far:
            reads.add(Issue("/cure/weather", "far-apart", "error", f"The weather spans more than {MAX_SPAN_D} days; rows from {min(row.day for row in far):%Y-%m-%d} on are not used. Check the year."))
            kept = [row for row in kept if row not in far]
    return tuple(kept)
