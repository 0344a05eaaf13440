"""At the joint face: may this joint, measured now at this temperature, be sealed now?"""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from attrs import frozen

from ..design import backing, depth, width, window
from ..design.inputs import Project, apply_range
from ..design.joint import REFERRED, UNKNOWN, Judgement
from ..physics import humidity, strain
from ..working import COMMON_PRACTICE, DEFINITION, MEMORY, READ, Step, Value

SEAL, WAIT, STOP = "seal", "wait", "stop"
FREEZING_C = 0.0


@frozen
class Check:
    """One gate: what was found against what is wanted; `passed` is None when it cannot be told."""

    key: str
    passed: bool | None
    severity: str
    value: Value | None
    limit: Value | None


@frozen
class FaceAnswer:
    """The answer at the face, in core units."""

    verdict: str
    checks: tuple[Check, ...]
    width_mm: float | None = None
    least_mm: float | None = None
    most_mm: float | None = None
    surface_c: tuple[float, float] | None = None
    cold_width_mm: float | None = None
    slip_mm: float | None = None
    hot_width_mm: float | None = None
    cold_strain_fraction: float | None = None
    hot_strain_fraction: float | None = None
    narrow_strain_fractions: tuple[float, float] | None = None
    reference_c: float | None = None
    reference_width_mm: float | None = None
    dew_point_c: float | None = None
    green_fraction: float | None = None
    window: window.Window | None = None
    rod: backing.Backing | None = None
    depth: depth.RuleDepth | None = None
    steps: tuple[Step, ...] = ()


def at_the_face(judged: Judgement, project: Project) -> FaceAnswer | None:
    """Judge the reading at the face of one joint.

    Returns
    -------
    FaceAnswer or None
        None when nothing was measured. `seal` needs every gate passed; `wait` means that time or
        weather can mend it; `stop` means that it cannot; `unknown` that a reading is missing.
    """
    joint = judged.joint
    if not joint.has_face:
        return None
    if judged.verdict == REFERRED:
        return FaceAnswer(REFERRED, ())
    if judged.movement is None or judged.capability is None or judged.widths is None or judged.sealant is None:
        return FaceAnswer(UNKNOWN, ())
    face = joint.face
    mean, least, most = _readings(face)
    surface = face["surface"]
    steps: list[Step] = []
    checks: list[Check] = [_wetness(face["wetness"])]
    temperatures = None if surface is None else (surface, face["surface_b"] if face["surface_b"] is not None else surface)
    checks += _temperature_checks(judged, temperatures)
    dew = _dew(face, surface, project, checks, steps)
    answer: dict[str, Any] = {}
    if mean is not None and least is not None and most is not None:
        answer |= _at_width(judged, project, mean, least, most, temperatures, face, checks, steps)
    else:
        checks.append(Check("class", None, STOP, None, None))
    return FaceAnswer(_verdict(checks), tuple(checks), mean, least, most, temperatures, dew_point_c=dew, steps=tuple(steps), **answer)


def _readings(face: Mapping[str, Any]) -> tuple[float | None, float | None, float | None]:
    """Mean, narrowest and widest, each filled from the others where it was not read. [mm]"""
    mean, least, most = face["width"], face["width_least"], face["width_most"]
    known = [item for item in (least, mean, most) if item is not None]
    if not known:
        return None, None, None
    least = min(known) if least is None else least
    most = max(known) if most is None else most
    return (mean if mean is not None else 0.5 * (least + most)), min(least, *known), max(most, *known)


def _verdict(checks: list[Check]) -> str:
    failed = {check.severity for check in checks if check.passed is False}
    if STOP in failed:
        return STOP
    if WAIT in failed:
        return WAIT
    # How far the surface will swing is a forecast, not a reading; without one the rest still stands, and says so.
    return UNKNOWN if any(check.passed is None and not (check.key == "green" and check.limit) for check in checks) else SEAL


def _wetness(word: str | None) -> Check:
    return Check("wetness", None if word is None else word == "dry", STOP if word in ("wet", "frost") else WAIT, None, None)


def _temperature_checks(judged: Judgement, temperatures: tuple[float, float] | None) -> list[Check]:
    sealant = judged.sealant
    assert sealant is not None
    low, high = apply_range(sealant)
    if temperatures is None:
        return [Check("frost", None, STOP, None, Value(FREEZING_C, "temperature")), Check("range", None, WAIT, None, None)]
    coldest, warmest = min(temperatures), max(temperatures)
    checks = [Check("frost", coldest > FREEZING_C, STOP, Value(coldest, "temperature"), Value(FREEZING_C, "temperature"))]
    if low is not None:
        checks.append(Check("apply-from", coldest >= low, WAIT, Value(coldest, "temperature"), Value(low, "temperature")))
    if high is not None:
        checks.append(Check("apply-to", warmest <= high, WAIT, Value(warmest, "temperature"), Value(high, "temperature")))
    return checks


def _dew(face: Mapping[str, Any], surface: float | None, project: Project, checks: list[Check], steps: list[Step]) -> float | None:
    air, damp = face["air"], face["humidity"]
    margin = project.site["dew_margin"]
    if air is None or damp is None or damp <= 0.0 or margin is None:
        checks.append(Check("dew", None, WAIT, None, Value(margin, "temperature_difference")))
        return None
    dew = humidity.dew_point_c(air, damp)
    steps.append(Step(
        "dew", "Dew point", "T_d", "C γ / (B − γ), γ = ln RH + B T / (C + T); B = 17.62, C = 243.12 °C, T in °C", "with T = {T}, RH = {R}",
        {"T": Value(air, "temperature", "degC"), "R": Value(damp, "percent")}, Value(dew, "temperature", "degC"), "Magnus formula with the WMO constants, over water", READ,
    ))  # fmt: skip
    coldest = None if surface is None else min(item for item in (surface, face["surface_b"]) if item is not None)
    if coldest is None:
        checks.append(Check("dew", None, WAIT, None, Value(margin, "temperature_difference")))
        return dew
    over = coldest - dew
    steps.append(Step(
        "dew-margin", "Surface over dew point", "ΔT_d", "T_s − T_d", "{s} − {d}", {"s": Value(coldest, "temperature"), "d": Value(dew, "temperature")},
        Value(over, "temperature_difference"), "Margin by common practice, borrowed from coatings work", COMMON_PRACTICE,
    ))  # fmt: skip
    checks.append(Check("dew", over >= margin - 1e-9, STOP if over <= 0 else WAIT, Value(over, "temperature_difference"), Value(margin, "temperature_difference")))
    return dew


def _at_width(judged: Judgement, project: Project, mean: float, least: float, most: float, temperatures: tuple[float, float] | None,
              face: Mapping[str, Any], checks: list[Check], steps: list[Step]) -> dict[str, Any]:  # fmt: skip
    movement, capability, widths = judged.movement, judged.capability, judged.widths
    assert movement is not None and capability is not None and widths is not None
    gap = project.site["closed_gap"] or 0.0
    found = window.find_window(least, movement, capability, gap)
    lap = movement.kind == "lap"
    answer: dict[str, Any] = {"window": found}
    if not lap:
        rod_type = project.tables["rod_types"][judged.joint.values["rod"] or "closed-cell"]
        answer |= {
            "rod": backing.choose(rod_type, project.site["rod_series"] or "metric", least, most),
            "depth": judged.depth_rule and depth.depth_by_rule(judged.depth_rule.rule, mean, is_porous=any(item.substrate.is_porous for item in judged.elements)),
        }
    _limits(widths, least, most, checks)
    if temperatures is None:
        checks.append(Check("class", None, STOP, None, None))
        return answer
    opening, closing, shear = movement.at(*temperatures)
    use = width.use_of(least, opening, closing, shear, movement.swing_at(*temperatures), capability, gap)
    checks.append(Check("class", use <= 1.0 + 1e-9, STOP if found.is_empty else WAIT, Value(use, "percent"), Value(1.0, "percent")))
    cold, hot = (mean, mean) if lap else (mean + opening, max(0.0, mean - closing))
    opened = strain.stretch_fraction(mean, opening, shear)
    closed = strain.stretch_fraction(mean, -min(closing, 0.999 * mean), shear if lap else 0.0)
    reference = project.site["reference"] if project.site["reference"] is not None else 20.0
    change = sum(item.rate_mm_per_k * (reference - at) for item, at in zip(movement.elements, temperatures, strict=True))
    answer |= {
        "cold_width_mm": cold, "hot_width_mm": hot, "cold_strain_fraction": opened, "hot_strain_fraction": closed,
        "narrow_strain_fractions": (strain.stretch_fraction(least, -min(closing, 0.999 * least), 0.0), strain.stretch_fraction(least, opening, shear)) if least < mean and not lap else None,
        "slip_mm": shear if lap else None, "reference_c": reference, "reference_width_mm": None if lap else mean - change,
    }  # fmt: skip
    now, rate = Value(mean, "length"), Value(movement.rate_mm_per_k, "rate")
    surface = sum(item.rate_mm_per_k * at for item, at in zip(movement.elements, temperatures, strict=True)) / movement.rate_mm_per_k if movement.rate_mm_per_k else temperatures[0]
    if not lap:
        steps += [
            Step("face-cold", "Width at the coldest", "w_cold", "w + o", "{w} + {o}", {"w": now, "o": Value(opening, "length")}, Value(cold, "length"), "Definition: opening from the surface temperature now", DEFINITION),
            Step("face-hot", "Width at the hottest", "w_hot", "w − c", "{w} − {c}", {"w": now, "c": Value(closing, "length")}, Value(hot, "length"), "Definition: closing from the surface temperature now", DEFINITION),
            Step("face-reference", "Width brought to the reference temperature", "w_ref", "w − Σ(α L) (T_ref − T_s)", "{w} − {r} × ({T} − {s})",
                 {"w": now, "r": rate, "T": Value(reference, "temperature"), "s": Value(surface, "temperature")}, Value(mean - change, "length"),
                 "Definition: the elements grow as they warm, so the joint narrows", DEFINITION, remark="T_s is the sides' mean, weighted by α L." if temperatures[0] != temperatures[1] else ""),
        ]  # fmt: skip
    steps.append(Step("face-strain", "Average strain at the coldest", "ε", "√((w + o)² + s²) / w − 1", "√(({w} + {o})² + ({s})²) / {w} − 1",
                      {"w": now, "o": Value(opening, "length"), "s": Value(shear, "length")}, Value(opened, "percent"), "Definition: stretch of the line across the bead", DEFINITION))  # fmt: skip
    _green(movement, project, least, face, checks, steps, answer)
    return answer


def _limits(widths: Any, least: float, most: float, checks: list[Check]) -> None:
    if widths.practical_least_mm is not None:
        checks.append(Check("width-least", least >= widths.practical_least_mm - 1e-9, STOP, Value(least, "length"), Value(widths.practical_least_mm, "length")))
    if widths.practical_most_mm is not None:
        checks.append(Check("width-most", most <= widths.practical_most_mm + 1e-9, STOP, Value(most, "length"), Value(widths.practical_most_mm, "length")))


def _green(movement: Any, project: Project, least: float, face: Mapping[str, Any], checks: list[Check], steps: list[Step], answer: dict[str, Any]) -> None:
    swing, limit = face["day_swing"], project.site["green_limit"]
    if swing is None or limit is None:
        checks.append(Check("green", None, WAIT, None, None if limit is None else Value(limit, "percent")))
        return
    # The narrowest place works the bead hardest.
    share = movement.rate_mm_per_k * swing / least
    answer["green_fraction"] = share
    steps.append(Step("green", "Movement while green", "g", "Σ(α L) · ΔT_day / w", "{r} × {T} / {w}",
                      {"r": Value(movement.rate_mm_per_k, "rate"), "T": Value(swing, "temperature_difference"), "w": Value(least, "length")},
                      Value(share, "percent"), "Limit by common practice, from memory; no standard gives one", MEMORY))  # fmt: skip
    checks.append(Check("green", share <= limit + 1e-9, WAIT, Value(share, "percent"), Value(limit, "percent")))
