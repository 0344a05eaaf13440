"""Local clock texts to hours on one line and back, through the zone's own rules; nothing here asks what time it is.

Hours are counted from 1970-01-01 00:00 UTC; without a zone the clock's digits are taken as they stand.
"""

from __future__ import annotations

import re
from datetime import UTC, date, datetime, timedelta
from functools import lru_cache
from zoneinfo import ZoneInfo, ZoneInfoNotFoundError

from attrs import frozen

from ..working import InputError

_EPOCH = datetime(1970, 1, 1)
_FIRST_YEAR, _LAST_YEAR = 1980, 2100
_WHEN = re.compile(r"^\s*(\d{4})-(\d{1,2})-(\d{1,2})[ T]+(\d{1,2}):(\d{2})(?::\d{2})?\s*$")
_DAY = re.compile(r"^\s*(\d{4})-(\d{1,2})-(\d{1,2})\s*$")
_TIME = re.compile(r"^\s*(\d{1,2}):(\d{2})\s*$")


def read_when(text: str) -> datetime:
    """A local time written `2026-11-24 10:40`; raises InputError."""
    found = _WHEN.match(text)
    if found is None:
        raise InputError("not-a-time", "write day and time such as 2026-11-24 10:40.")
    try:
        when = datetime(*(int(part) for part in found.groups()))  # type: ignore[arg-type]
    except ValueError:
        raise InputError("not-a-time", "this day or time is not in the calendar.") from None
    _in_range(when.year)
    return when


def read_day(text: str) -> date:
    """A day written `2026-11-24`; raises InputError."""
    found = _DAY.match(text)
    if found is None:
        raise InputError("not-a-day", "write the day such as 2026-11-24.")
    try:
        day = date(*(int(part) for part in found.groups()))
    except ValueError:
        raise InputError("not-a-day", "this day is not in the calendar.") from None
    _in_range(day.year)
    return day


def read_time(text: str) -> float:
    """A time of day written `10:40`, in hours; 24:00 is the end of the day. Raises InputError."""
    found = _TIME.match(text)
    hours = int(found[1]) + int(found[2]) / 60.0 if found and int(found[2]) < 60 else 25.0
    if hours > 24.0:
        raise InputError("not-a-time", "write a time of day such as 10:40.")
    return hours


def _in_range(year: int) -> None:
    if not _FIRST_YEAR <= year <= _LAST_YEAR:
        raise InputError("not-a-time", f"the year must lie between {_FIRST_YEAR} and {_LAST_YEAR}.")


@lru_cache(maxsize=64)
def zone_rules(name: str) -> ZoneInfo | None:
    """The rules of a zone by its IANA name; None where the name or the rules are not to be had."""
    try:
        return ZoneInfo(name)
    except (ZoneInfoNotFoundError, ValueError, OSError):
        return None


@lru_cache(maxsize=1)
def has_rules() -> bool:
    """Whether zone rules are at hand at all (a browser may lack them)."""
    return any(zone_rules(name) is not None for name in ("Europe/London", "America/New_York"))


@frozen
class Clock:
    """A local clock: `rules` None means digits as they stand."""

    name: str
    rules: ZoneInfo | None

    def hours(self, local: datetime) -> float:
        """Hours on the line of a local clock time; of two equal clock times in autumn the first."""
        if self.rules is None:
            return (local - _EPOCH) / timedelta(hours=1)
        shifted = local.replace(tzinfo=self.rules, fold=0).astimezone(UTC).replace(tzinfo=None)
        return (shifted - _EPOCH) / timedelta(hours=1)

    def local(self, hours: float) -> datetime:
        """The local clock time, to the minute, of a moment."""
        moment = _EPOCH + timedelta(minutes=round(hours * 60.0))
        if self.rules is None:
            return moment
        return moment.replace(tzinfo=UTC).astimezone(self.rules).replace(tzinfo=None)

    def offset_min(self, hours: float) -> int:
        """Minutes that the local clock is ahead of UTC at a moment."""
        if self.rules is None:
            return 0
        moment = (_EPOCH + timedelta(hours=hours)).replace(tzinfo=UTC).astimezone(self.rules)
        offset = moment.utcoffset()
        return 0 if offset is None else round(offset.total_seconds() / 60.0)

    def short_name(self, hours: float) -> str:
        """What the zone is called at a moment, such as CET."""
        if self.rules is None:
            return ""
        return (_EPOCH + timedelta(hours=hours)).replace(tzinfo=UTC).astimezone(self.rules).tzname() or ""

    def is_skipped(self, local: datetime) -> bool:
        """Whether the clock jumps over this time (spring)."""
        return self.rules is not None and self.local(self.hours(local)) != local

    def is_doubled(self, local: datetime) -> bool:
        """Whether the clock shows this time twice (autumn)."""
        if self.rules is None:
            return False
        offsets = [local.replace(tzinfo=self.rules, fold=fold).utcoffset() for fold in (0, 1)]
        return offsets[0] != offsets[1] and not self.is_skipped(local)

    def changes(self, from_h: float, to_h: float) -> list[float]:
        """Moments, to the minute, at which the offset changes in a span."""
        found: list[float] = []
        step, at = 24.0, from_h
        while at < to_h:
            after = min(at + step, to_h)
            if self.offset_min(at) != self.offset_min(after):
                low, high = at, after
                while high - low > 1.0 / 120.0:
                    middle = 0.5 * (low + high)
                    low, high = (middle, high) if self.offset_min(middle) == self.offset_min(at) else (low, middle)
                found.append(round(high * 60.0) / 60.0)
            at = after
        return found

    def text(self, hours: float) -> str:
        """A moment as the file writes it."""
        return self.local(hours).strftime("%Y-%m-%d %H:%M")
