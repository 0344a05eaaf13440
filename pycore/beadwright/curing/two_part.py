"""Two-part sealants: pot life and cure by temperature, from figures at two temperatures; depth does not matter."""

from __future__ import annotations

from math import exp, floor, log

from attrs import frozen

from ..physics.cure import GAS_CONSTANT_J_MOL_K, ICE_POINT_K
from .weather import HORIZON_H, Climate

# Without a second temperature: twice as fast for each 10 K, a rule of thumb from memory
DOUBLING_K = 10.0
# How far outside the figures given an answer is still shown without a warning
MARGIN_K = 5.0


@frozen
class Speed:
    """A time that shortens with warmth: ln t = ln t_ref + E / R (1/T − 1/T_ref)."""

    time_h: float
    at_c: float
    activation_j_mol: float
    is_rule_of_thumb: bool
    from_c: float
    to_c: float

    def hours(self, temp_c: float) -> float:
        """The time at a temperature. [h]"""
        return self.time_h * exp(self.activation_j_mol / GAS_CONSTANT_J_MOL_K * (1.0 / (temp_c + ICE_POINT_K) - 1.0 / (self.at_c + ICE_POINT_K)))

    def is_outside(self, temp_c: float) -> bool:
        """Whether a temperature lies well outside the figures given."""
        return not self.from_c - MARGIN_K <= temp_c <= self.to_c + MARGIN_K


def speed_of(warm_c: float | None, warm_h: float | None, cool_c: float | None, cool_h: float | None) -> Speed | None:
    """Arrhenius line through one or two figures; None without any, or where warmth would slow it."""
    if warm_c is not None and warm_h is not None and cool_c is not None and cool_h is not None and warm_c != cool_c:
        slope = log(cool_h / warm_h) / (1.0 / (cool_c + ICE_POINT_K) - 1.0 / (warm_c + ICE_POINT_K))
        energy = slope * GAS_CONSTANT_J_MOL_K
        return None if energy < 0.0 else Speed(warm_h, warm_c, energy, False, min(warm_c, cool_c), max(warm_c, cool_c))
    for temp, hours in ((warm_c, warm_h), (cool_c, cool_h)):
        if temp is not None and hours is not None:
            per = 1.0 / (temp + ICE_POINT_K - DOUBLING_K) - 1.0 / (temp + ICE_POINT_K)
            return Speed(hours, temp, GAS_CONSTANT_J_MOL_K * log(2.0) / per, True, temp, temp)
    return None


def cured_at(start_h: float, speed: Speed, climate: Climate) -> float | None:
    """Moment at which the shares of the weather's hours add up to one; None where that takes over three years."""
    done, at = 0.0, start_h
    while at - start_h < HORIZON_H:
        end = floor(at) + 1.0
        step = (end - at) / speed.hours(climate.at(at).surface_c)
        if done + step >= 1.0:
            return at + (1.0 - done) / step * (end - at)
        done += step
        at = end
    return None
