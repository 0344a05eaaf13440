"""Weather as pieces of unchanging climate, and the dose of cure that it gives: equivalent days at 23 degC and 50 % humidity.

A day row becomes hours on a cosine between its lowest (3 h) and highest (15 h) with its vapour held constant; a reading holds
until the next one. Before, between and after the rows an average day stands in.
"""

from __future__ import annotations

from bisect import bisect_right
from collections.abc import Callable, Sequence
from datetime import datetime, time, timedelta
from math import cos, floor, pi

from attrs import field, frozen

from ..physics import cure, humidity
from .clock import Clock

WARMEST_HOUR = 15.0
HORIZON_H = 24.0 * 366.0 * 3.0
_HOLD_LAST_H = 1.0
_LONGEST_HOLD_H = 24.0

CAUTIOUS, VAPOUR, PERMEATION = "cautious", "vapour", "permeation"
MEAN, LAST, REFERENCE = "mean", "last", "reference"


@frozen
class Row:
    """A row of weather as read: a day with its range, or a reading at one moment."""

    day: datetime
    time_h: float | None
    least_c: float
    most_c: float
    humidity_fraction: float | None
    dew_c: float | None
    surface_least_c: float | None = None
    surface_most_c: float | None = None
    is_wet: bool = False


@frozen
class Piece:
    """A span of unchanging climate."""

    from_h: float
    to_h: float
    air_c: float
    humidity_fraction: float
    surface_c: float
    is_wet: bool = False


def dose_rate(air_c: float, humidity_fraction: float, model: str, permeation_j_mol: float) -> float:
    """Equivalent days at 23 degC and 50 % that a day of this climate counts; 0 in frost.

    Frost may stop the reaction, so nothing is counted; above 60 degC the formula ends and its end is used.
    """
    if air_c <= cure.LEAST_C:
        return 0.0
    warm = min(air_c, cure.MOST_C)
    heats = {CAUTIOUS: (0.0, permeation_j_mol), VAPOUR: (0.0,), PERMEATION: (permeation_j_mol,)}[model]
    factor = min(cure.rate_factor(warm, humidity_fraction, heat) for heat in heats)
    return factor * factor


def pieces_of(rows: Sequence[Row], clock: Clock) -> list[Piece]:
    """All rows as pieces in order, without overlap; readings win over day rows."""
    readings = sorted(((clock.hours(row.day + timedelta(hours=row.time_h)), row) for row in rows if row.time_h is not None), key=lambda pair: pair[0])
    found = []
    for index, (start, row) in enumerate(readings):
        end = readings[index + 1][0] if index + 1 < len(readings) else start + _HOLD_LAST_H
        if end > start:
            found.append(_reading_piece(row, start, min(end, start + _LONGEST_HOLD_H)))
    covered = [(piece.from_h, piece.to_h) for piece in found]
    for row in sorted((row for row in rows if row.time_h is None), key=lambda row: row.day):
        found += [piece for hour in _hours_of(row, clock) for piece in _outside(hour, covered)]
    return sorted(found, key=lambda piece: piece.from_h)


def _vapour_pa(row: Row) -> float:
    mean = 0.5 * (row.least_c + row.most_c)
    if row.dew_c is not None:
        return humidity.saturation_pressure_pa(row.dew_c)
    return humidity.vapour_pressure_pa(mean, row.humidity_fraction if row.humidity_fraction is not None else cure.REFERENCE_HUMIDITY_FRACTION)


def _reading_piece(row: Row, start: float, end: float) -> Piece:
    damp = min(1.0, _vapour_pa(row) / humidity.saturation_pressure_pa(row.least_c))
    surface = row.surface_least_c if row.surface_least_c is not None else row.surface_most_c
    return Piece(start, end, row.least_c, damp, row.least_c if surface is None else surface, row.is_wet)


def _hours_of(row: Row, clock: Clock) -> list[Piece]:
    midnight = datetime.combine(row.day.date(), time())
    start, end = clock.hours(midnight), clock.hours(midnight + timedelta(days=1))
    vapour = _vapour_pa(row)
    low_s = row.least_c if row.surface_least_c is None else row.surface_least_c
    high_s = row.most_c if row.surface_most_c is None else row.surface_most_c
    found, at = [], start
    while at < end - 1e-9:
        after = min(at + 1.0, end)
        clock_h = (clock.local(0.5 * (at + after)) - midnight) / timedelta(hours=1)
        wave = 0.5 + 0.5 * cos(2.0 * pi * (clock_h - WARMEST_HOUR) / 24.0)
        air = row.least_c + (row.most_c - row.least_c) * wave
        damp = min(1.0, vapour / humidity.saturation_pressure_pa(air))
        found.append(Piece(at, after, air, damp, low_s + (high_s - low_s) * wave, row.is_wet))
        at = after
    return found


def _outside(piece: Piece, covered: Sequence[tuple[float, float]]) -> list[Piece]:
    """What of a piece lies outside the covered spans."""
    parts = [(piece.from_h, piece.to_h)]
    for low, high in covered:
        parts = [part for start, end in parts for part in ((start, min(end, low)), (max(start, high), end)) if part[1] - part[0] > 1e-9]
    return [Piece(start, end, piece.air_c, piece.humidity_fraction, piece.surface_c, piece.is_wet) for start, end in parts]


@frozen
class Climate:
    """Weather with its dose; every moment has an answer, given or stood in for."""

    pieces: tuple[Piece, ...]
    edges: tuple[float, ...]
    doses: tuple[float, ...]
    day: tuple[Piece, ...]
    day_doses: tuple[float, ...]
    rate: Callable[[float, float], float] = field(repr=False)

    @property
    def begins_h(self) -> float:
        """Begin of the first piece given."""
        return self.edges[0] if self.edges else 0.0

    @property
    def ends_h(self) -> float:
        """End of the last piece given."""
        return self.edges[-1] if self.edges else 0.0

    @property
    def day_dose(self) -> float:
        """Dose of the average day that stands in."""
        return self.day_doses[-1]

    def at(self, hours: float) -> Piece:
        """The climate at a moment."""
        index = bisect_right(self.edges, hours) - 1
        if 0 <= index < len(self.pieces):
            return self.pieces[index]
        return self.day[floor(hours) % 24]

    def _standing_in(self, hours: float) -> float:
        days, rest = divmod(hours, 24.0)
        whole = min(int(rest), 23)
        return days * self.day_dose + self.day_doses[whole] + (rest - whole) * (self.day_doses[whole + 1] - self.day_doses[whole])

    def dose(self, hours: float) -> float:
        """Dose from the begin of the weather to a moment, in equivalent days; negative before it."""
        if not self.edges:
            return self._standing_in(hours)
        if hours <= self.begins_h:
            return self._standing_in(hours) - self._standing_in(self.begins_h)
        if hours >= self.ends_h:
            return self.doses[-1] + self._standing_in(hours) - self._standing_in(self.ends_h)
        index = bisect_right(self.edges, hours) - 1
        share = (hours - self.edges[index]) / (self.edges[index + 1] - self.edges[index])
        return self.doses[index] + share * (self.doses[index + 1] - self.doses[index])

    def when(self, start_h: float, dose_d: float) -> float | None:
        """Moment at which a dose has come together since a start; None where that takes over three years."""
        wanted = self.dose(start_h) + dose_d
        low, high = start_h, start_h
        step = 24.0
        while self.dose(high) < wanted:
            low, high = high, high + step
            step *= 2.0
            if high - start_h > HORIZON_H:
                return None
        for _ in range(60):
            middle = 0.5 * (low + high)
            low, high = (low, middle) if self.dose(middle) >= wanted else (middle, high)
            if high - low < 1e-6:
                break
        return high


def steady_climate(air_c: float, humidity_fraction: float, rate: Callable[[float, float], float]) -> Climate:
    """A climate that never changes, as indoors."""
    day = tuple(Piece(float(hour), hour + 1.0, air_c, humidity_fraction, air_c) for hour in range(24))
    one = rate(air_c, humidity_fraction) / 24.0
    return Climate((), (), (), day, tuple(hour * one for hour in range(25)), rate)


def climate_of(pieces: Sequence[Piece], after: str, rate: Callable[[float, float], float]) -> Climate:
    """Weather with an average day that stands in wherever nothing is given."""
    day = _day_of(pieces, after)
    day_doses = [0.0]
    for piece in day:
        day_doses.append(day_doses[-1] + rate(piece.air_c, piece.humidity_fraction) / 24.0)
    edges: list[float] = []
    doses: list[float] = []
    kept: list[Piece] = []
    for piece in pieces:
        if not edges:
            edges.append(piece.from_h)
            doses.append(0.0)
        at = edges[-1]
        while piece.from_h > at + 1e-9:
            # a gap in the weather is filled hour by hour
            end = min(piece.from_h, floor(at) + 1.0)
            filler = day[floor(at) % 24]
            kept.append(Piece(at, end, filler.air_c, filler.humidity_fraction, filler.surface_c))
            doses.append(doses[-1] + rate(filler.air_c, filler.humidity_fraction) * (end - at) / 24.0)
            edges.append(end)
            at = end
        kept.append(piece)
        doses.append(doses[-1] + rate(piece.air_c, piece.humidity_fraction) * (piece.to_h - at) / 24.0)
        edges.append(piece.to_h)
    return Climate(tuple(kept), tuple(edges), tuple(doses), tuple(day), tuple(day_doses), rate)


def _day_of(pieces: Sequence[Piece], after: str) -> list[Piece]:
    """An average day of 24 hours; for `last` the last day given, for `reference` or nothing given 23 degC and 50 %."""
    if not pieces or after == REFERENCE:
        return [Piece(float(hour), hour + 1.0, cure.REFERENCE_C, cure.REFERENCE_HUMIDITY_FRACTION, cure.REFERENCE_C) for hour in range(24)]
    if after == LAST:
        end = pieces[-1].to_h
        pieces = [piece for piece in pieces if piece.to_h > end - 24.0 + 1e-9]
    sums = [[0.0, 0.0, 0.0, 0.0] for _ in range(24)]
    for piece in pieces:
        at = piece.from_h
        while at < piece.to_h - 1e-9:
            hour = floor(at + 1e-9)
            end = min(piece.to_h, hour + 1.0)
            weight = end - at
            vapour = humidity.vapour_pressure_pa(piece.air_c, piece.humidity_fraction)
            for index, part in enumerate((weight, piece.air_c * weight, vapour * weight, piece.surface_c * weight)):
                sums[hour % 24][index] += part
            at = end
    total = [sum(row[index] for row in sums) for index in range(4)]
    day = []
    for hour, row in enumerate(sums):
        weight, air, vapour, surface = row if row[0] > 0.0 else total
        mean = air / weight
        day.append(Piece(float(hour), hour + 1.0, mean, min(1.0, vapour / weight / humidity.saturation_pressure_pa(mean)), surface / weight))
    return day
