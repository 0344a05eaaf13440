"""The sealing window: element temperatures at which sealing keeps both extremes within class."""

from __future__ import annotations

import math

from attrs import frozen

from ..physics import strain
from ..working import DEFINITION, Step, Value
from .movement import Movement
from .width import TOTAL_SWING, Capability, holds


@frozen
class Window:
    """Range of one element temperature, same on both sides; None bounds mean that there is none."""

    from_c: float | None
    to_c: float | None
    low_limited_by: str
    high_limited_by: str
    advice: str

    @property
    def is_empty(self) -> bool:
        """Whether no sealing temperature keeps the class."""
        return self.from_c is None


NO_WIDTH = Window(None, None, "tolerance", "tolerance", "The tolerance eats the whole width.")


def _slack(width_mm: float, movement: Movement, capability: Capability, gap_mm: float) -> tuple[float, float]:
    """Greatest opening and greatest closing that the class allows at this width. [mm]"""
    assert capability.extension_fraction is not None and capability.compression_fraction is not None
    if movement.kind == "lap":
        slide = strain.allowed_shear_mm(width_mm, movement.entered_opening_mm, capability.extension_fraction)
        along = math.sqrt(max(0.0, slide * slide - movement.across_mm**2)) - movement.entered_shear_mm if slide >= movement.across_mm else -1.0
        if movement.entered_closing_mm > min(capability.compression_fraction * width_mm, width_mm - gap_mm) + 1e-9:
            along = -1.0
        return along, along
    opening = strain.allowed_opening_mm(width_mm, movement.shear_mm, capability.extension_fraction)
    return opening, min(capability.compression_fraction * width_mm, width_mm - gap_mm)


def find_window(width_mm: float, movement: Movement, capability: Capability, closed_gap_mm: float) -> Window:
    """The range of element temperature in which a joint of this width may be sealed.

    Parameters
    ----------
    width_mm : float
        Width at sealing, least as built. [mm]
    movement : Movement
        The budget; its shear is held constant, on the safe side.
    capability : Capability
        Class under the convention of the project.
    closed_gap_mm : float
        Gap that must remain at the hottest. [mm]

    Returns
    -------
    Window
        Within the temperatures that the elements reach. Under the total-swing convention the
        sealing temperature does not matter, so the window is everything or nothing.

    Notes
    -----
    Definition: opening grows and closing falls in step with the sealing temperature, so each
    end is where one of them uses up the class.
    """
    low_c, high_c = movement.cold_c, movement.hot_c
    rate = movement.rate_mm_per_k
    if capability.convention == TOTAL_SWING or rate == 0.0:
        return _window_of_swing(width_mm, movement, capability, closed_gap_mm)
    open_slack, close_slack = _slack(width_mm, movement, capability, closed_gap_mm)
    to_c = (open_slack - movement.fixed_opening_mm + sum(item.rate_mm_per_k * item.cold_c for item in movement.elements)) / rate
    from_c = (sum(item.rate_mm_per_k * item.hot_c for item in movement.elements) + movement.fixed_closing_mm - close_slack) / rate
    if from_c > to_c + 1e-9 or from_c > high_c or to_c < low_c:
        ways = "a wider joint, a higher class, or shorter elements"
        if from_c > to_c + 1e-9:
            advice = f"Opening and closing together are too much for the class at any sealing temperature: {ways}."
        elif to_c < low_c:
            advice = f"Opening is too much even when sealed at the coldest: {ways}."
        else:
            advice = f"Closing is too much even when sealed at the hottest: {ways}."
        return Window(None, None, "closing", "opening", advice)
    return Window(
        max(from_c, low_c), min(to_c, high_c),
        "closing" if from_c > low_c else "element", "opening" if to_c < high_c else "element", "",
    )  # fmt: skip


def _window_of_swing(width_mm: float, movement: Movement, capability: Capability, closed_gap_mm: float) -> Window:
    """Everything or nothing as far as the class goes; a gap that must stay open sets a lower end."""
    low_c, high_c, rate = movement.cold_c, movement.hot_c, movement.rate_mm_per_k
    at = tuple(item.cold_c for item in movement.elements)
    opening, closing, shear = movement.at(*at)
    gap_by_temperature = closed_gap_mm if rate > 0.0 and movement.kind != "lap" else 0.0
    if not holds(width_mm, opening, closing, shear, movement.swing_at(*at), capability, 0.0 if gap_by_temperature else closed_gap_mm):
        return Window(None, None, "swing", "swing", "The swing is too large at any sealing temperature: a wider joint, a higher class or shorter elements.")
    if gap_by_temperature:
        from_c = (sum(item.rate_mm_per_k * item.hot_c for item in movement.elements) + movement.fixed_closing_mm - (width_mm - closed_gap_mm)) / rate
        if from_c > high_c:
            return Window(None, None, "closing", "element", "The least closed gap is lost even when sealed at the hottest: a wider joint or shorter elements.")
        if from_c > low_c:
            return Window(from_c, high_c, "closing", "element", "")
    return Window(low_c, high_c, "element", "element", "")


def window_steps(width_mm: float, movement: Movement, capability: Capability, closed_gap_mm: float, window: Window) -> list[Step]:
    """Working of both ends of the window; none where the sealing temperature does not matter."""
    rate = movement.rate_mm_per_k
    if capability.convention == TOTAL_SWING or rate == 0.0 or window.is_empty:
        return []
    open_slack, close_slack = _slack(width_mm, movement, capability, closed_gap_mm)
    per_k = Value(rate, "rate")
    cold = sum(item.rate_mm_per_k * item.cold_c for item in movement.elements) / rate
    hot = sum(item.rate_mm_per_k * item.hot_c for item in movement.elements) / rate
    lap = movement.kind == "lap"
    opened, closed, other = ("s_max", "s_max", "s_other") if lap else ("o_max", "c_max", "other")
    mean = "T_cold and T_hot are the sides' means, weighted by α L." if len({(item.hot_c, item.cold_c) for item in movement.elements}) > 1 else ""
    return [
        *_allowed_steps(width_mm, movement, capability, closed_gap_mm, open_slack, close_slack),
        Step("window-to", "Sealing window, upper end", "T_to", f"T_cold + ({opened} − {other}) / Σ(α L)", "{T} + ({m} − {f}) / {r}",
             {"T": Value(cold, "temperature"), "m": Value(open_slack, "length"), "f": Value(movement.fixed_opening_mm, "length"), "r": per_k},
             Value(cold + (open_slack - movement.fixed_opening_mm) / rate, "temperature"), "Definition: the opening then just uses up the class", DEFINITION,
             remark=("Beyond the hottest that the elements get, so opening sets no limit. " if window.high_limited_by == "element" else "") + mean),
        Step("window-from", "Sealing window, lower end", "T_from", f"T_hot − ({closed} − {other}) / Σ(α L)", "{T} − ({m} − {f}) / {r}",
             {"T": Value(hot, "temperature"), "m": Value(close_slack, "length"), "f": Value(movement.fixed_closing_mm, "length"), "r": per_k},
             Value(hot - (close_slack - movement.fixed_closing_mm) / rate, "temperature"), "Definition: the closing then just uses up the class", DEFINITION,
             remark=("Beyond the coldest that the elements get, so closing sets no limit. " if window.low_limited_by == "element" else "") + mean),
    ]  # fmt: skip


def _allowed_steps(width_mm: float, movement: Movement, capability: Capability, gap_mm: float, open_slack_mm: float, close_slack_mm: float) -> list[Step]:
    """Working of what the class allows at this width, before any of it is used."""
    width, stretch = Value(width_mm, "length"), Value(capability.extension_fraction, "number")
    source = "Geometry of the stretched bond line, solved for the movement"
    if movement.kind == "lap":
        return [Step("slip-allowed", "Slip that the class allows at this width", "s_max", "√((1 + S_e)² w² − (w + o)² − s_across²) − s_entered", "√((1 + {S})² × ({w})² − ({w} + {o})² − ({x})²) − {e}",
                     {"S": stretch, "w": width, "o": Value(movement.entered_opening_mm, "length"), "x": Value(movement.across_mm, "length"), "e": Value(movement.entered_shear_mm, "length")},
                     Value(open_slack_mm, "length"), source, DEFINITION)]  # fmt: skip
    pressed = Value(capability.compression_fraction, "number")
    if gap_mm:
        formula, template, inputs = "lesser of S_c · w and w − g", "min({S} × {w}, {w} − {g})", {"S": pressed, "w": width, "g": Value(gap_mm, "length")}
    else:
        formula, template, inputs = "S_c · w", "{S} × {w}", {"S": pressed, "w": width}
    return [
        Step("opening-allowed", "Opening that the class allows at this width", "o_max", "√((1 + S_e)² w² − s²) − w", "√((1 + {S})² × ({w})² − ({s})²) − {w}",
             {"S": stretch, "w": width, "s": Value(movement.shear_mm, "length")}, Value(open_slack_mm, "length"), source, DEFINITION),
        Step("closing-allowed", "Closing that the class allows at this width", "c_max", formula, template, inputs, Value(close_slack_mm, "length"), "Definition of the class and of the gap set for the site", DEFINITION),
    ]  # fmt: skip
