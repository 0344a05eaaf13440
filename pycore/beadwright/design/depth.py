"""Depth of the bead at mid-width, by the rule set in force, with the other rule sets beside it."""

from __future__ import annotations

from attrs import frozen

from .. import catalogue
from ..working import COMMON_PRACTICE, Step, Value


@frozen
class RuleDepth:
    """What one rule set says at one width."""

    rule: catalogue.DepthRule
    least_mm: float
    target_mm: float
    most_mm: float
    covers_width: bool
    width_note: str
    target: catalogue.Depth


def _length(part: catalogue.Depth, width_mm: float) -> float:
    """One depth of a band at a width: a ratio or a fixed depth, held between its floor and cap. [mm]"""
    value = part.mm if part.mm is not None else (part.ratio or 0.0) * width_mm
    if part.floor_mm is not None:
        value = max(value, part.floor_mm)
    if part.cap_mm is not None:
        value = min(value, part.cap_mm)
    return value


def depth_by_rule(rule: catalogue.DepthRule, width_mm: float, *, is_porous: bool) -> RuleDepth | None:
    """What a rule set gives for a width and kind of face; None where it has no band for it.

    A width outside the set's own limits still gets the nearest band, and `covers_width` is False.
    """
    faces = ("any", "porous" if is_porous else "non-porous")
    bands = [band for band in rule.bands if band.faces in faces]
    if not bands:
        return None
    band = next((item for item in bands if width_mm > item.over_mm - 1e-9 and (item.to_mm is None or width_mm <= item.to_mm + 1e-9)), None)
    covered = band is not None
    if band is None:
        band = bands[0] if width_mm <= bands[0].over_mm else bands[-1]
    note = ""
    if rule.width_least_mm is not None and width_mm < rule.width_least_mm - 1e-9:
        covered, note = False, "below its least width"
    elif rule.width_most_mm is not None and width_mm > rule.width_most_mm + 1e-9:
        covered, note = False, "above its greatest width"
    elif not covered:
        note = "outside its widths"
    least, target, most = (_length(part, width_mm) for part in (band.least, band.target, band.most))
    return RuleDepth(rule, least, target, most, covered, note, band.target)


def all_rules(width_mm: float, *, is_porous: bool) -> list[RuleDepth]:
    """Every rule set at one width, in the table's order."""
    found = (depth_by_rule(rule, width_mm, is_porous=is_porous) for rule in catalogue.depth_rules().values())
    return [item for item in found if item is not None]


def agrees(target_mm: float, other: RuleDepth) -> bool:
    """Whether a depth lies within what another rule set allows, to a tenth of a millimetre."""
    return other.covers_width and other.least_mm - 0.1 <= target_mm <= other.most_mm + 0.1


def depth_step(chosen: RuleDepth, width_mm: float, *, is_porous: bool) -> Step:
    """Working of the depth."""
    faces = "porous" if is_porous else "non-porous"
    part = chosen.target
    inputs = {"w": Value(width_mm, "length"), "least": Value(chosen.least_mm, "length"), "most": Value(chosen.most_mm, "length")}
    template = "{d}" if part.mm is not None else "{r} × {w}"
    inputs |= {"d": Value(part.mm, "length"), "r": Value(part.ratio, "number"), "f": Value(part.floor_mm, "length"), "c": Value(part.cap_mm, "length")}
    template += (", not under {f}" if part.floor_mm is not None else "") + (", not over {c}" if part.cap_mm is not None else "")
    return Step(
        "depth", f"Depth at mid-width, {chosen.rule.label}", "d", f"rule set at width w, {faces} faces",
        f"{template}; allowed at w = {{w}}: {{least}} to {{most}}", inputs,
        Value(chosen.target_mm, "length"), chosen.rule.source, chosen.rule.status,
    )  # fmt: skip


def lap_step(thickness_mm: float, bond_least_mm: float, cover_mm: float) -> Step:
    """Working of the bonded cover of a lap, for which the rule sets say nothing of their own."""
    return Step(
        "depth", "Bonded cover of the lap", "d", "greater of thickness and least bond", "max({w}, {b})",
        {"w": Value(thickness_mm, "length"), "b": Value(bond_least_mm, "length")}, Value(cover_mm, "length"), "Common practice, no source", COMMON_PRACTICE,
    )  # fmt: skip
