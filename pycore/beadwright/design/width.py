"""Required and design width, the class that would do, the spacing that a width allows."""

from __future__ import annotations

import math
from collections.abc import Mapping

from attrs import frozen

from .. import catalogue
from ..physics import strain
from ..working import COMMON_PRACTICE, DEFINITION, READ, Step, Value
from .inputs import Sealant
from .movement import Movement

EACH_WAY = "each-way"
TOTAL_SWING = "total-swing"

_EXTENSION_SOURCE = "Geometry of the stretched bond line; ASTM C1472 practice uses an equivalent quadratic (from memory)"
_COMPRESSION_SOURCE = "Definition of the class: movement over the width when sealed (ASTM C920, ISO 11600)"
_SWING_SOURCE = "Total movement over the permissible total, as movement accommodation factors are used (engineeringcivil.com worked case 4 mm, 30 %)"


@frozen
class Capability:
    """What a class lets the bead do, under the project's convention."""

    convention: str
    extension_fraction: float | None
    compression_fraction: float | None
    total_fraction: float | None

    @property
    def is_known(self) -> bool:
        """Whether the convention finds the figures that it needs."""
        if self.convention == TOTAL_SWING:
            return self.total_fraction is not None
        return self.extension_fraction is not None and self.compression_fraction is not None


@frozen
class Need:
    """The width that one governing case asks for."""

    key: str
    label: str
    width_mm: float


def capability_of(row: Sealant | catalogue.MovementClass, convention: str) -> Capability:
    """The capability of a sealant or of a catalogue class under one convention; never converted."""
    return Capability(convention, row.extension_fraction, row.compression_fraction, row.total_fraction)


def needs(movement: Movement, capability: Capability, closed_gap_mm: float) -> list[Need]:
    """The widths that each case asks for, unrounded; the largest governs."""
    return needs_of(movement.opening_mm, movement.closing_mm, movement.shear_mm, movement.swing_mm, capability, closed_gap_mm)


def needs_of(opening_mm: float, closing_mm: float, shear_mm: float, swing_mm: float, capability: Capability, closed_gap_mm: float) -> list[Need]:
    """As `needs`, from the three movements and the total swing. [mm]"""
    found = []
    if capability.convention == TOTAL_SWING:
        assert capability.total_fraction is not None
        label = "total swing with shear" if shear_mm else "total swing"
        found.append(Need("swing", label, strain.width_for_swing_mm(swing_mm, 0.0, shear_mm, capability.total_fraction)))
    else:
        assert capability.extension_fraction is not None and capability.compression_fraction is not None
        label = "opening with shear" if shear_mm and opening_mm else "shear" if shear_mm else "opening"
        key = "opening-shear" if shear_mm and opening_mm else "shear" if shear_mm else "opening"
        found.append(Need(key, label, strain.width_for_opening_mm(opening_mm, shear_mm, capability.extension_fraction)))
        found.append(Need("closing", "closing", strain.width_for_closing_mm(closing_mm, capability.compression_fraction)))
    if closed_gap_mm > 0:
        found.append(Need("closed-gap", "least closed gap", closing_mm + closed_gap_mm))
    return found


def governing(found: list[Need]) -> Need:
    """The case that asks for the greatest width; the first of equals."""
    return max(found, key=lambda need: need.width_mm)


def round_up_to_increment(value_mm: float, increment_mm: float) -> float:
    """The next multiple of the increment at or above a value; float noise does not add a step.

    Parameters
    ----------
    value_mm : float
        What is rounded. [mm]
    increment_mm : float
        Step, greater than 0. [mm]

    Returns
    -------
    rounded_mm : float
        Multiple of the increment, not below the value by more than 1e-9 of a step. [mm]

    Notes
    -----
    Definition: widths round up, since the narrow side is the unsafe one.
    """
    return math.ceil(value_mm / increment_mm - 1e-9) * increment_mm


def tolerances(parts_mm: Mapping[str, float]) -> tuple[float, float]:
    """Worst case (plain sum) and root of the sum of squares of the minus tolerances. [mm]

    Definition; the movement guide adds the negative construction tolerance arithmetically (from memory of ASTM C1472).
    """
    return sum(parts_mm.values()), math.sqrt(sum(part * part for part in parts_mm.values()))


def holds(width_mm: float, opening_mm: float, closing_mm: float, shear_mm: float, swing_mm: float, capability: Capability, closed_gap_mm: float) -> bool:
    """Whether a bead sealed at this width keeps its movements within the class."""
    return use_of(width_mm, opening_mm, closing_mm, shear_mm, swing_mm, capability, closed_gap_mm) <= 1.0 + 1e-9


def use_of(width_mm: float, opening_mm: float, closing_mm: float, shear_mm: float, swing_mm: float, capability: Capability, closed_gap_mm: float) -> float:
    """Share of the class that is used at a width: required width over present width."""
    return governing(needs_of(opening_mm, closing_mm, shear_mm, swing_mm, capability, closed_gap_mm)).width_mm / width_mm


def greatest_scale(width_mm: float, movement: Movement, capability: Capability, closed_gap_mm: float) -> float | None:
    """How many times longer the elements may be at a width.

    Parameters
    ----------
    width_mm : float
        Width that is to be kept. [mm]
    movement : Movement
        The budget at the present lengths.
    capability : Capability
        Class under the convention of the project.
    closed_gap_mm : float
        Gap that must remain at the hottest. [mm]

    Returns
    -------
    scale : float or None
        Factor on every length across the joint; None when nothing depends on length, or when
        the movements that do not depend on it use the class up.

    Notes
    -----
    Definition: each case of the required width, solved for the length.
    """
    limits: list[tuple[float, float]] = []  # what is left for movement by length, that movement now
    by_length_open = movement.opening_mm - movement.entered_opening_mm
    by_length_close = movement.closing_mm - movement.entered_closing_mm
    if movement.kind == "lap":
        stretch = capability.total_fraction if capability.convention == TOTAL_SWING else capability.extension_fraction
        normal = movement.entered_opening_mm + (movement.entered_closing_mm if capability.convention == TOTAL_SWING else 0.0)
        slide = strain.allowed_shear_mm(width_mm, normal, stretch or 0.0)
        room = math.sqrt(slide * slide - movement.across_mm**2) if slide >= movement.across_mm else -1.0
        along = math.sqrt(max(0.0, movement.shear_mm**2 - movement.across_mm**2))
        limits.append((room - movement.entered_shear_mm, along - movement.entered_shear_mm))
        # The slide is in `limits`; here only what closing and the step across ask for by themselves.
        if not holds(width_mm, 0.0, movement.entered_closing_mm, movement.across_mm, movement.entered_closing_mm, capability, closed_gap_mm):
            return None
    elif capability.convention == TOTAL_SWING:
        room = strain.allowed_opening_mm(width_mm, movement.shear_mm, capability.total_fraction or 0.0)
        entered = movement.entered_opening_mm + movement.entered_closing_mm
        limits.append((room - entered, movement.swing_mm - entered))
    else:
        room = strain.allowed_opening_mm(width_mm, movement.shear_mm, capability.extension_fraction or 0.0)
        limits.append((room - movement.entered_opening_mm, by_length_open))
        limits.append(((capability.compression_fraction or 0.0) * width_mm - movement.entered_closing_mm, by_length_close))
    if closed_gap_mm > 0 and movement.kind != "lap":
        limits.append((width_mm - closed_gap_mm - movement.entered_closing_mm, by_length_close))
    if any(left < 0 for left, _ in limits):
        return None
    scales = [left / moved for left, moved in limits if moved > 1e-12]
    return min(scales) if scales else None


def width_steps(movement: Movement, capability: Capability, class_label: str, closed_gap_mm: float, found: list[Need]) -> list[Step]:
    """Working of the required width, one step a case and one for the greatest."""
    opening, closing, shear = Value(movement.opening_mm, "length"), Value(movement.closing_mm, "length"), Value(movement.shear_mm, "length")
    steps: list[Step] = []
    for need in found:
        result = Value(need.width_mm, "length")
        if need.key == "swing":
            total, swing = Value(capability.total_fraction, "number"), Value(movement.swing_mm, "length")
            if movement.shear_mm:
                steps.append(Step("width-swing", f"Width for the swing, {class_label}, total swing", "w_t", "[m + √(m² + K (m² + s²))] / K, K = (1 + C)² − 1",
                                  "[{m} + √(({m})² + K × (({m})² + ({s})²))] / K with C = {C}", {"m": swing, "s": shear, "C": total}, result, _SWING_SOURCE + "; shear joined to it as in the each-way form, a definition of ours", DEFINITION))  # fmt: skip
            else:
                steps.append(Step("width-swing", f"Width for the swing, {class_label}, total swing", "w_t", "m / C", "{m} / {C}", {"m": swing, "C": total}, result, _SWING_SOURCE, READ))
        elif need.key == "closing":
            steps.append(Step("width-closing", f"Width for closing, {class_label}", "w_c", "c / S_c", "{c} / {S}", {"c": closing, "S": Value(capability.compression_fraction, "number")}, result, _COMPRESSION_SOURCE, DEFINITION))
        elif need.key == "closed-gap":
            steps.append(Step("width-gap", "Width that leaves the least closed gap", "w_g", "c + g", "{c} + {g}", {"c": closing, "g": Value(closed_gap_mm, "length")}, result, "Definition: gap set for the site", DEFINITION))
        else:
            steps.append(_opening_step(need, opening, shear, capability, class_label, result))
    top = governing(found)
    steps.append(Step("width-required", f"Required width: {top.label} governs", "w_req", "greatest of the cases", "max(" + ", ".join(f"{{n{i}}}" for i in range(len(found))) + ")",
                      {f"n{i}": Value(need.width_mm, "length") for i, need in enumerate(found)}, Value(top.width_mm, "length"), "Definition", DEFINITION))  # fmt: skip
    return steps


def _opening_step(need: Need, opening: Value, shear: Value, capability: Capability, class_label: str, result: Value) -> Step:
    extension = Value(capability.extension_fraction, "number")
    if need.key == "opening":
        return Step("width-opening", f"Width for opening, {class_label}", "w_o", "o / S_e", "{o} / {S}", {"o": opening, "S": extension}, result, _COMPRESSION_SOURCE, DEFINITION)
    if need.key == "shear":
        return Step("width-shear", f"Width for shear, {class_label}", "w_s", "s / √(2 S_e + S_e²)", "{s} / √(2 × {S} + {S}²)", {"s": shear, "S": extension}, result, _EXTENSION_SOURCE, DEFINITION)
    return Step("width-opening-shear", f"Width for opening with shear, {class_label}", "w_os", "[o + √(o² + K (o² + s²))] / K, K = (1 + S_e)² − 1",
                "[{o} + √(({o})² + K × (({o})² + ({s})²))] / K with S_e = {S}", {"o": opening, "s": shear, "S": extension}, result, _EXTENSION_SOURCE, DEFINITION)  # fmt: skip


def tolerance_steps(parts_mm: Mapping[str, float], worst_mm: float, rss_mm: float, required_mm: float, design_mm: float, increment_mm: float, chosen_mm: float) -> list[Step]:
    """Working from the required width to the design width."""
    inputs = {key: Value(part, "length") for key, part in parts_mm.items()}
    names = ", ".join(parts_mm)
    return [
        Step("tolerance-worst", "Tolerance, worst case", "t_w", f"sum of {names}", " + ".join(f"{{{key}}}" for key in parts_mm), inputs, Value(worst_mm, "length"), "Negative tolerance added arithmetically, from memory of ASTM C1472", "memory"),
        Step("tolerance-rss", "Tolerance, root of the sum of squares", "t_r", f"√(sum of squares of {names})", "√(" + " + ".join(f"({{{key}}})²" for key in parts_mm) + ")", inputs, Value(rss_mm, "length"), "Common practice for independent deviations", COMMON_PRACTICE),
        Step("width-design", "Design width", "w_des", "w_req + tolerance, rounded up", "{w} + {t}, up to the next {i}", {"w": Value(required_mm, "length"), "t": Value(chosen_mm, "length"), "i": Value(increment_mm, "length")}, Value(design_mm, "length"), "Definition: rounded up, never down", DEFINITION),
    ]
