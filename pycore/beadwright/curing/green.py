"""How far a joint moves before its bead is half through, and the best hour to seal in the weather given."""

from __future__ import annotations

from collections.abc import Sequence
from math import ceil

from attrs import frozen

from ..physics import humidity
from .clock import Clock
from .weather import Climate

LONGEST_H = 24.0 * 21.0
FREEZING_C = 0.0


@frozen
class Green:
    """Greatest opening and closing between sealing and the end of the green time, from the width at sealing."""

    opening_mm: float
    closing_mm: float
    width_mm: float
    until_h: float | None
    path: tuple[tuple[float, float], ...]

    @property
    def share(self) -> float:
        """The larger movement over the width."""
        return max(self.opening_mm, self.closing_mm) / self.width_mm


@frozen
class Hour:
    """One hour in which sealing might begin; `refused` says why it may not."""

    at_h: float
    surface_c: float
    share: float
    refused: str


@frozen
class Gates:
    """What the weather must keep while sealing."""

    work_h: tuple[float, float]
    least_c: float | None
    most_c: float | None
    dew_margin_k: float


def movement_while_green(start_h: float, until_h: float | None, rate_mm_per_k: float, width_mm: float, climate: Climate, surface_c: float | None = None) -> Green:
    """Follow the joint from hour to hour.

    Parameters
    ----------
    start_h, until_h : float
        Sealing, and the end of the green time; None or a long time is followed for three weeks.
    rate_mm_per_k : float
        Movement of both sides together per kelvin; warmth closes the joint.
    width_mm : float
        Width at sealing.
    climate : Climate
        Its surface temperature drives the elements.
    surface_c : float, optional
        Measured surface at sealing; else that of the weather.

    Notes
    -----
    Definition: the elements follow the surface without lag, which shows the most movement.
    """
    at_start = climate.at(start_h).surface_c if surface_c is None else surface_c
    end = start_h + LONGEST_H if until_h is None else min(until_h, start_h + LONGEST_H)
    opening = closing = 0.0
    path = [(start_h, 0.0)]
    for moment in _hours(start_h, end):
        change = rate_mm_per_k * (at_start - climate.at(moment).surface_c)
        path.append((moment, change))
        opening, closing = max(opening, change), max(closing, -change)
    return Green(opening, closing, width_mm, until_h, tuple(path))


def _hours(start: float, end: float) -> list[float]:
    whole = [float(hour) for hour in range(ceil(start + 1e-9), int(end) + 1)]
    return [*whole, end] if end > start else whole


def hours_to_seal(rate_mm_per_k: float, width_mm: float, green_dose_d: float, climate: Climate, clock: Clock, gates: Gates) -> list[Hour]:
    """Every working hour of the weather given, with the movement that a bead begun then would see."""
    if not climate.pieces:
        return []
    found = []
    first = ceil(climate.begins_h - 1e-9)
    surfaces = _Surfaces(climate, first)
    for hour in range(first, int(climate.ends_h)):
        local = clock.local(float(hour))
        of_day = local.hour + local.minute / 60.0
        if not gates.work_h[0] <= of_day < gates.work_h[1]:
            continue
        until = climate.when(float(hour), green_dose_d)
        end = hour + LONGEST_H if until is None else min(until, hour + LONGEST_H)
        low, high = surfaces.range(hour, int(end) + 1)
        at = climate.at(float(hour)).surface_c
        share = rate_mm_per_k * max(high - at, at - low, 0.0) / width_mm
        found.append(Hour(float(hour), at, share, _refusal(climate, hour, gates)))
    return found


class _Surfaces:
    """Least and greatest surface over spans of whole hours that begin one after another."""

    def __init__(self, climate: Climate, first: int) -> None:
        self._climate = climate
        self._first = first
        self._values: list[float] = []

    def range(self, start: int, end: int) -> tuple[float, float]:
        while len(self._values) < end - self._first:
            self._values.append(self._climate.at(float(self._first + len(self._values))).surface_c)
        part = self._values[start - self._first : max(end - self._first, start - self._first + 1)]
        return min(part), max(part)


def _refusal(climate: Climate, hour: int, gates: Gates) -> str:
    piece = climate.at(float(hour))
    if piece.is_wet:
        return "rain"
    if min(piece.surface_c, piece.air_c) <= FREEZING_C:
        return "frost"
    if gates.least_c is not None and piece.surface_c < gates.least_c:
        return "too cold"
    if gates.most_c is not None and piece.surface_c > gates.most_c:
        return "too hot"
    if piece.humidity_fraction > 0.0 and piece.surface_c - humidity.dew_point_c(piece.air_c, piece.humidity_fraction) < gates.dew_margin_k - 1e-9:
        return "dew"
    return ""


def best_of(hours: Sequence[Hour]) -> Hour | None:
    """The allowed hour with the least movement; of equal ones the earliest."""
    allowed = [hour for hour in hours if not hour.refused]
    return min(allowed, key=lambda hour: (round(hour.share, 4), hour.at_h)) if allowed else None
