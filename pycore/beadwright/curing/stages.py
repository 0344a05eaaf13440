"""When each stage of a bead is reached in the weather, with its band."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from attrs import frozen

from .. import catalogue
from .front import Rate, Reach
from .weather import Climate

TIME, DEPTH, NECK_SHARE, THROUGH = "time", "depth", "neck-share", "through"


@frozen
class StageTime:
    """One stage: the moments of its quick end, its middle and its slow end; None where it is never reached."""

    stage: catalogue.CureStage
    early_h: float | None
    at_h: float | None
    late_h: float | None
    applies: bool = True
    why_not: str = ""


def doses_of(stage: catalogue.CureStage, rate: Rate, reach: Reach, settings: Mapping[str, Any]) -> tuple[float, float, float]:
    """Equivalent days that a stage waits for: quick end, middle, slow end."""
    fast, slow = 1.0 + rate.uncertainty_fraction, 1.0 - rate.uncertainty_fraction
    through = 2.0 * reach.reach_mm2 / rate.k_mm**2
    if stage.basis == TIME:
        own = settings.get(f"{stage.id}_time")
        if own is not None:
            return own / 24.0 / fast**2, own / 24.0, own / 24.0 / slow**2
        return stage.low / 24.0, stage.value / 24.0, stage.high / 24.0
    if stage.basis == DEPTH:
        low, middle, high = stage.low, stage.value, stage.high
        doses = ((low / rate.fast_mm) ** 2, (middle / rate.k_mm) ** 2, (high / rate.slow_mm) ** 2)
        # a thin bead is through before its skin is as thick as that
        return min(doses[0], through / fast**2), min(doses[1], through), min(doses[2], through / slow**2)
    if stage.basis == NECK_SHARE:
        depth = stage.value * reach.throat_mm
        dose = min((depth / rate.k_mm) ** 2, through)
        return dose / fast**2, dose, dose / slow**2
    return stage.value * through / fast**2, stage.value * through, stage.value * through / slow**2


def stages_of(start_h: float, rate: Rate, reach: Reach, climate: Climate, settings: Mapping[str, Any], family: catalogue.Family | None) -> tuple[StageTime, ...]:
    """Every stage of a bead that was placed at a moment."""
    found = []
    for stage in catalogue.cure_stages().values():
        early, middle, late = (_reached(climate, start_h, dose, stage.least_d) for dose in doses_of(stage, rate, reach, settings))
        applies, why = True, ""
        if stage.id == "paint" and family is not None and not family.is_paintable:
            applies, why = False, f"{family.label} does not take paint."
        found.append(StageTime(stage, early, middle, late, applies, why))
    return tuple(found)


def _reached(climate: Climate, start_h: float, dose_d: float, least_d: float) -> float | None:
    moment = climate.when(start_h, dose_d)
    return None if moment is None else max(moment, start_h + 24.0 * least_d)
