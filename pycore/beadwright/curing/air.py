"""What a curing sealant leaves in the air of a room against the limits of the region: a screening estimate."""

from __future__ import annotations

from collections.abc import Callable
from functools import lru_cache

from attrs import frozen

from .. import catalogue
from ..physics import room_air

SHIFT_H = 8.0
SHORT_H = 0.25
BATCHES = 8
MOST_CHANGES = 2000.0
# Without any air change a room is never quite tight; this keeps the mass balance defined
_LEAST_CHANGES = 1e-6


@frozen
class Source:
    """A release: all of it in grams, through in hours, placed evenly over `spread_h`."""

    mass_g: float
    through_h: float
    spread_h: float

    def starts(self) -> tuple[float, ...]:
        """When its equal parts are placed."""
        if self.spread_h <= 0.0:
            return (0.0,)
        return tuple((index + 0.5) * self.spread_h / BATCHES for index in range(BATCHES))


@frozen
class Exposure:
    """Concentrations at the bead, in mg/m3; `peak_h` after the work began."""

    peak_mg_m3: float
    peak_h: float
    short_mg_m3: float
    shift_mg_m3: float

    def of(self, span: str) -> float:
        """The figure that a limit of this span speaks of."""
        return {"8h": self.shift_mg_m3, "15min": self.short_mg_m3, "ceiling": self.peak_mg_m3}[span]


@frozen
class Against:
    """One limit and how the room stands to it."""

    limit: catalogue.ExposureLimit
    found_mg_m3: float
    limit_mg_m3: float
    changes_per_h: float | None
    packages: float | None

    @property
    def is_kept(self) -> bool:
        """Whether the room stays at or below it."""
        return self.found_mg_m3 <= self.limit_mg_m3 * (1.0 + 1e-9)


def concentration_mg_m3(time_h: float, room_m3: float, changes_per_h: float, source: Source) -> float:
    """Concentration at a moment, all parts together."""
    starts = source.starts()
    part = source.mass_g / len(starts)
    return sum(room_air.curing_source_mg_m3(time_h - start, room_m3, changes_per_h, part, source.through_h) for start in starts)


def _mean(from_h: float, to_h: float, room_m3: float, changes_per_h: float, source: Source) -> float:
    starts = source.starts()
    part = source.mass_g / len(starts)
    total = 0.0
    for start in starts:
        low, high = max(0.0, from_h - start), to_h - start
        if high > low:
            total += room_air.mean_mg_m3(low, high, room_m3, changes_per_h, part, source.through_h) * (high - low)
    return total / (to_h - from_h)


@lru_cache(maxsize=64)
def exposure(room_m3: float, changes_per_h: float, source: Source) -> Exposure:
    """Peak, worst quarter of an hour and worst shift, the shift counted from the beginning of the work.

    Definition: a tight room keeps its vapour, so its peak is at the end of the cure.
    """
    peak_h, peak = _peak(room_m3, changes_per_h, source)
    return Exposure(peak, peak_h, _figure("15min", room_m3, changes_per_h, source), _figure("8h", room_m3, changes_per_h, source))


def _peak(room_m3: float, changes_per_h: float, source: Source) -> tuple[float, float]:
    """When the air is worst, and how bad. [h, mg/m3]"""
    changes = max(changes_per_h, _LEAST_CHANGES)
    first, last = source.starts()[0], source.starts()[-1]
    if first == last:
        at = min(room_air.PEAK_ARGUMENT**2 / changes, source.through_h)
        return at, concentration_mg_m3(at, room_m3, changes, source)
    high = last + min(room_air.PEAK_ARGUMENT**2 / changes, source.through_h)
    return _largest(lambda time_h: concentration_mg_m3(time_h, room_m3, changes, source), 0.0, high)


def _figure(span: str, room_m3: float, changes_per_h: float, source: Source) -> float:
    """The one figure that a limit of this span speaks of. [mg/m3]"""
    changes = max(changes_per_h, _LEAST_CHANGES)
    if span == "8h":
        return _mean(0.0, SHIFT_H, room_m3, changes, source)
    peak_h, peak = _peak(room_m3, changes_per_h, source)
    if span == "ceiling":
        return peak
    # the worst quarter of an hour holds the peak
    return _largest(lambda start_h: _mean(start_h, start_h + SHORT_H, room_m3, changes, source), max(0.0, peak_h - SHORT_H), peak_h)[1]


def _largest(function: Callable[[float], float], low: float, high: float) -> tuple[float, float]:
    """Place and height of the largest value, by a grid that is narrowed down."""
    best_at, best = low, function(low)
    for count in (20, 8, 8):
        step = (high - low) / count
        if step <= 0.0:
            break
        for index in range(count + 1):
            at = low + index * step
            value = function(at)
            if value > best:
                best_at, best = at, value
        low, high = max(low, best_at - step), min(high, best_at + step)
    return best_at, best


@lru_cache(maxsize=256)
def changes_that_keep(room_m3: float, source: Source, span: str, limit_mg_m3: float) -> float | None:
    """Least air change with perfect mixing that keeps a limit; None where even a gale would not."""

    def found(changes: float) -> float:
        return _figure(span, room_m3, changes, source)

    if found(0.0) <= limit_mg_m3:
        return 0.0
    if found(MOST_CHANGES) > limit_mg_m3:
        return None
    low, high = 0.0, 1.0
    while found(high) > limit_mg_m3:
        low, high = high, high * 3.0
    while high - low > 0.01 * high:
        middle = 0.5 * (low + high)
        low, high = (low, middle) if found(middle) <= limit_mg_m3 else (middle, high)
    return high


def limits_for(agent: str, region: str) -> list[catalogue.ExposureLimit]:
    """The limits of a region for one agent, strictest last in no order but the table's."""
    return [row for row in catalogue.exposure_limits().values() if row.agent == agent and region in row.regions]


def against(limit: catalogue.ExposureLimit, found: Exposure, packages: float, room_m3: float, mixing: float, source: Source) -> Against:
    """How a room stands to one limit, with the air change and the packages that would keep it."""
    value = found.of(limit.span)
    needed = changes_that_keep(room_m3, source, limit.span, limit.mg_m3)
    return Against(limit, value, limit.mg_m3, None if needed is None else needed * mixing, packages * limit.mg_m3 / value if value > 0.0 else None)
