"""A calendar file after RFC 5545: one event a stage, with the zone's rules written out from its own changes."""

from __future__ import annotations

from collections.abc import Iterable
from datetime import datetime, timedelta

from attrs import frozen

from ..curing.clock import Clock

PRODUCT = "-//Beadwright//Cure clock//EN"
_FOLD_OCTETS = 75
# An offset change at least this long before the first event is written out, so that its rule is in force
_BEFORE_H = 24.0 * 400.0
_EPOCH = datetime(1970, 1, 1)


@frozen
class Event:
    """One event: a moment on the line of hours, how long it lasts, and its texts."""

    uid: str
    at_h: float
    minutes: int
    summary: str
    description: str
    location: str
    stamp_h: float


def calendar_bytes(events: Iterable[Event], clock: Clock, name: str) -> bytes:
    """The whole file; without a zone the events stand at the clock's digits."""
    ordered = sorted(events, key=lambda event: (event.at_h, event.uid))
    lines = ["BEGIN:VCALENDAR", "VERSION:2.0", f"PRODID:{PRODUCT}", "CALSCALE:GREGORIAN", "METHOD:PUBLISH", f"X-WR-CALNAME:{_escaped(name)}"]
    if clock.rules is not None and ordered:
        lines += _zone(clock, ordered[0].at_h, ordered[-1].at_h)
    for event in ordered:
        lines += _event(event, clock)
    lines.append("END:VCALENDAR")
    return ("\r\n".join(piece for line in lines for piece in _folded(line)) + "\r\n").encode("utf-8")


def _event(event: Event, clock: Clock) -> list[str]:
    local = clock.local(event.at_h)
    where = f";TZID={clock.name}" if clock.rules is not None else ""
    # of a doubled clock time a reader takes the first, so the second is written in UTC
    start = f"DTSTART:{_utc(event.at_h)}" if clock.rules is not None and clock.hours(local) < round(event.at_h * 60.0) / 60.0 - 1e-6 else f"DTSTART{where}:{local:%Y%m%dT%H%M%S}"
    lines = ["BEGIN:VEVENT", f"UID:{_escaped(event.uid)}", f"DTSTAMP:{_utc(event.stamp_h)}", start, f"DURATION:PT{event.minutes}M", f"SUMMARY:{_escaped(event.summary)}"]
    if event.description:
        lines.append(f"DESCRIPTION:{_escaped(event.description)}")
    if event.location:
        lines.append(f"LOCATION:{_escaped(event.location)}")
    return [*lines, "TRANSP:TRANSPARENT", "END:VEVENT"]


def _utc(hours: float) -> str:
    return f"{_EPOCH + timedelta(minutes=round(hours * 60.0)):%Y%m%dT%H%M%SZ}"


def _zone(clock: Clock, first_h: float, last_h: float) -> list[str]:
    """The zone as a list of its changes over the time of the events."""
    changes = clock.changes(first_h - _BEFORE_H, last_h + 48.0)
    lines = ["BEGIN:VTIMEZONE", f"TZID:{clock.name}"]
    if not changes or changes[0] > first_h:
        offset = clock.offset_min(first_h - _BEFORE_H)
        lines += _rule("STANDARD", _EPOCH, offset, offset, clock.short_name(first_h - _BEFORE_H))
    for change in changes:
        before, after = clock.offset_min(change - 0.25), clock.offset_min(change + 0.25)
        onset = _EPOCH + timedelta(minutes=round(change * 60.0) + before)
        lines += _rule("DAYLIGHT" if _is_summer(clock, change + 0.25) else "STANDARD", onset, before, after, clock.short_name(change + 0.25))
    return [*lines, "END:VTIMEZONE"]


def _is_summer(clock: Clock, hours: float) -> bool:
    assert clock.rules is not None
    shift = clock.local(hours).replace(tzinfo=clock.rules).dst()
    return bool(shift)


def _rule(kind: str, onset: datetime, before_min: int, after_min: int, name: str) -> list[str]:
    lines = [f"BEGIN:{kind}", f"DTSTART:{onset:%Y%m%dT%H%M%S}", f"TZOFFSETFROM:{_offset(before_min)}", f"TZOFFSETTO:{_offset(after_min)}"]
    if name:
        lines.append(f"TZNAME:{_escaped(name)}")
    return [*lines, f"END:{kind}"]


def _offset(minutes: int) -> str:
    sign = "-" if minutes < 0 else "+"
    hours, rest = divmod(abs(minutes), 60)
    return f"{sign}{hours:02d}{rest:02d}"


def _escaped(text: str) -> str:
    """Text of a property: the four characters that mean something are marked, control characters left out."""
    plain = "".join(ch for ch in text.replace("\r\n", "\n").replace("\r", "\n") if ch == "\n" or (ch >= " " and ch != "\x7f"))
    return plain.replace("\\", "\\\\").replace(";", "\\;").replace(",", "\\,").replace("\n", "\\n")


def _folded(line: str) -> list[str]:
    """A line cut to 75 octets, no character split; further pieces begin with a space."""
    pieces, room, piece = [], _FOLD_OCTETS, ""
    for ch in line:
        size = len(ch.encode("utf-8"))
        if size > room:
            pieces.append(piece)
            piece, room = " ", _FOLD_OCTETS - 1
        piece += ch
        room -= size
    return [*pieces, piece]
