"""The movement budget: every cause with what it opens, closes and shears.

Opening is what widens the gap after sealing, closing what narrows it, shear what makes the
sides slip. With no restriction on the sealing temperature the full range counts both ways.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from attrs import frozen

from ..physics import strain, thermal
from ..working import DEFINITION, MEMORY, Step, Value
from .elements import Element

_GUIDE = "Movement guide practice (linear expansion), from memory of ASTM C1472; also FHWA and TM 5-809-3 worked cases"


@frozen
class Cause:
    """One row of the budget."""

    key: str
    label: str
    opening_mm: float
    closing_mm: float
    shear_mm: float
    source: str


@frozen
class Movement:
    """The budget of one joint, and how it depends on the temperature at sealing."""

    kind: str
    opening_mm: float
    closing_mm: float
    shear_mm: float
    rows: tuple[Cause, ...]
    elements: tuple[Element, ...]
    fixed_opening_mm: float
    fixed_closing_mm: float
    entered_opening_mm: float
    entered_closing_mm: float
    entered_shear_mm: float
    across_mm: float
    seal_from_c: float | None
    seal_to_c: float | None
    total_swing: bool
    steps: tuple[Step, ...]

    @property
    def hot_c(self) -> float:
        """The hottest that either side gets."""
        return max(item.hot_c for item in self.elements)

    @property
    def cold_c(self) -> float:
        """The coldest that either side gets."""
        return min(item.cold_c for item in self.elements)

    @property
    def rate_mm_per_k(self) -> float:
        """Movement of both sides together per kelvin, across the joint."""
        return sum(item.rate_mm_per_k for item in self.elements)

    def opening_from(self, *sealed_c: float) -> float:
        """Opening across the joint from the given side temperatures at sealing down to the coldest."""
        thermal_mm = sum(item.rate_mm_per_k * (at - item.cold_c) for item, at in zip(self.elements, sealed_c, strict=True))
        return thermal_mm + self.fixed_opening_mm

    def closing_from(self, *sealed_c: float) -> float:
        """Closing across the joint from the given side temperatures at sealing up to the hottest."""
        thermal_mm = sum(item.rate_mm_per_k * (item.hot_c - at) for item, at in zip(self.elements, sealed_c, strict=True))
        return thermal_mm + self.fixed_closing_mm

    def at(self, *sealed_c: float) -> tuple[float, float, float]:
        """Opening, closing and shear of a bead sealed at the given side temperatures; never below zero."""
        opening, closing = max(0.0, self.opening_from(*sealed_c)), max(0.0, self.closing_from(*sealed_c))
        if self.kind != "lap":
            return opening, closing, self.shear_mm
        slide = opening + closing if self.total_swing else max(opening, closing)
        return self.entered_opening_mm, self.entered_closing_mm, strain.combined_shear_mm(slide + self.entered_shear_mm, self.across_mm)


def budget(kind: str, elements: Sequence[Element], causes: Sequence[Mapping[str, Any]], seal_from_c: float | None, seal_to_c: float | None, *, total_swing: bool) -> Movement:
    """Add up all causes of movement of one joint.

    Parameters
    ----------
    kind : str
        `butt`, `mixed` or `lap`. In a lap the sides' movement shears the bead.
    elements : Sequence of Element
        The two sides.
    causes : Sequence of Mapping
        Rows that the user added, values as read.
    seal_from_c, seal_to_c : float or None
        Range of element temperature at sealing; None leaves that end free. [degC]
    total_swing : bool
        Whether the class is a total: then shear counts over the whole swing.

    Returns
    -------
    Movement
        Sums in mm, the rows behind them, and the working.
    """
    steps: list[Step] = [step for item in elements for step in item.steps]
    rows = [_thermal(item, seal_from_c, seal_to_c, steps) for item in elements]
    rows += [row for item in elements for row in _moisture(item, steps)]
    fixed = rows[len(elements):]  # fmt: skip
    entered = [_entered(index, cause) for index, cause in enumerate(causes)]
    entered_opening, entered_closing = sum(row.opening_mm for row in entered), sum(row.closing_mm for row in entered)
    entered_shear = sum(cause["shear"] or 0.0 for cause in causes)
    across = sum(cause["shear_across"] or 0.0 for cause in causes)
    slip = _slip(elements, seal_from_c, seal_to_c, steps, total_swing=total_swing) if kind in ("mixed", "lap") else 0.0
    moved_opening, moved_closing = sum(row.opening_mm for row in rows), sum(row.closing_mm for row in rows)
    if slip:
        rows.append(Cause("slip", "Sides slip along the joint", 0.0, 0.0, slip, "Definition: difference of the two sides' movement along the joint"))
    if kind == "lap":
        slide = moved_opening + moved_closing if total_swing else max(moved_opening, moved_closing)
        rows = [Cause(row.key, row.label, 0.0, 0.0, row.shear_mm or (row.opening_mm + row.closing_mm if total_swing else max(row.opening_mm, row.closing_mm)), row.source) for row in rows]
        across += slip
        opening, closing, along = entered_opening, entered_closing, slide + entered_shear
    else:
        opening, closing, along = moved_opening + entered_opening, moved_closing + entered_closing, slip + entered_shear
    shear = strain.combined_shear_mm(along, across)
    rows += entered
    steps += _sums(kind, opening, closing, along, across, shear, rows)
    fixed_opening = sum(row.opening_mm for row in fixed) + (0.0 if kind == "lap" else entered_opening)
    fixed_closing = sum(row.closing_mm for row in fixed) + (0.0 if kind == "lap" else entered_closing)
    return Movement(
        kind, opening, closing, shear, tuple(rows), tuple(elements), fixed_opening, fixed_closing,
        entered_opening, entered_closing, entered_shear, across, seal_from_c, seal_to_c, total_swing, tuple(steps),
    )  # fmt: skip


def _thermal(item: Element, seal_from_c: float | None, seal_to_c: float | None, steps: list[Step]) -> Cause:
    warm = item.hot_c if seal_to_c is None else seal_to_c
    cool = item.cold_c if seal_from_c is None else seal_from_c
    opening = max(0.0, thermal.length_change_mm(item.effective_mm, item.expansion_per_k, warm - item.cold_c))
    closing = max(0.0, thermal.length_change_mm(item.effective_mm, item.expansion_per_k, item.hot_c - cool))
    mark = item.key[-1].upper()
    common = {"a": Value(item.expansion_per_k, "expansion"), "L": Value(item.effective_mm, "length")}
    steps.append(Step(
        f"opening-{mark}", f"{item.label}: opening by cold", f"o_{mark}", "α · L · (T_seal,warmest − T_cold)", "{a} × {L} × ({w} − {c})",
        common | {"w": Value(warm, "temperature"), "c": Value(item.cold_c, "temperature")}, Value(opening, "length"), _GUIDE, MEMORY,
        remark="No limit on sealing temperature: the hottest counts as the warmest." if seal_to_c is None else "",
    ))  # fmt: skip
    steps.append(Step(
        f"closing-{mark}", f"{item.label}: closing by heat", f"c_{mark}", "α · L · (T_hot − T_seal,coldest)", "{a} × {L} × ({h} − {s})",
        common | {"h": Value(item.hot_c, "temperature"), "s": Value(cool, "temperature")}, Value(closing, "length"), _GUIDE, MEMORY,
        remark="No limit on sealing temperature: the coldest counts as the coldest sealing." if seal_from_c is None else "",
    ))  # fmt: skip
    return Cause(f"thermal-{mark}", f"Temperature, {item.label[0].lower()}{item.label[1:]}", opening, closing, 0.0, _GUIDE)


def _moisture(item: Element, steps: list[Step]) -> list[Cause]:
    mark, side = item.key[-1].upper(), f"{item.label[0].lower()}{item.label[1:]}"
    rows: list[Cause] = []
    if item.reversible_fraction and item.effective_mm:
        swing = thermal.moisture_change_mm(item.effective_mm, item.reversible_fraction)
        source, status = item.reversible_source
        steps.append(Step(
            f"moisture-{mark}", f"{item.label}: wetting and drying", f"m_{mark}", "R · L", "{R} × {L}",
            {"R": Value(item.reversible_fraction, "percent"), "L": Value(item.effective_mm, "length")}, Value(swing, "length"),
            source, status, remark="State at sealing unknown: counted both ways.",
        ))  # fmt: skip
        rows.append(Cause(f"moisture-{mark}", f"Wetting and drying, {side}", swing, swing, 0.0, source))
    if item.irreversible_fraction and item.effective_mm:
        change = thermal.moisture_change_mm(item.effective_mm, item.irreversible_fraction)
        grows = change > 0
        source, status = item.irreversible_source
        steps.append(Step(
            f"lasting-{mark}", f"{item.label}: {'lasting growth' if grows else 'lasting shrinkage'}", f"i_{mark}", "I · L", "{I} × {L}",
            {"I": Value(item.irreversible_fraction, "percent"), "L": Value(item.effective_mm, "length")}, Value(change, "length"),
            source, status,
            remark="Growth closes the joint." if grows else "Shrinkage opens the joint.",
        ))  # fmt: skip
        rows.append(Cause(f"lasting-{mark}", f"{'Lasting growth' if grows else 'Lasting shrinkage'}, {side}", max(0.0, -change), max(0.0, change), 0.0, source))
    return rows


def _entered(index: int, cause: Mapping[str, Any]) -> Cause:
    shear = strain.combined_shear_mm(cause["shear"] or 0.0, cause["shear_across"] or 0.0)
    return Cause(f"cause-{index}", cause["label"] or f"Cause {index + 1}", cause["opening"] or 0.0, cause["closing"] or 0.0, shear, cause["source"] or "entered by the user")


def _slip(elements: Sequence[Element], seal_from_c: float | None, seal_to_c: float | None, steps: list[Step], *, total_swing: bool) -> float:
    """Largest difference of the two sides' movement along the joint, over the seasons and sealing temperatures."""
    first, second = elements
    if not first.along_rate_mm_per_k and not second.along_rate_mm_per_k:
        return 0.0

    def difference(a_k: float, b_k: float) -> float:
        return abs(first.along_rate_mm_per_k * a_k - second.along_rate_mm_per_k * b_k)

    cases = [(first.hot_c - first.cold_c, second.hot_c - second.cold_c)]
    if not total_swing and seal_from_c is not None and seal_to_c is not None:
        cases = [(first.hot_c - at, second.hot_c - at) for at in (seal_from_c, seal_to_c)]
        cases += [(at - first.cold_c, at - second.cold_c) for at in (seal_from_c, seal_to_c)]
    a_k, b_k = max(cases, key=lambda case: difference(*case))
    slip = difference(a_k, b_k)
    steps.append(Step(
        "slip", "Sides slip along the joint", "s_T", "|α_A · L_along,A · ΔT_A − α_B · L_along,B · ΔT_B|", "|{a} × {L} × {p} − {b} × {M} × {q}|",
        {"a": Value(first.expansion_per_k, "expansion"), "L": Value(first.along_mm, "length"), "p": Value(a_k, "temperature_difference"),
         "b": Value(second.expansion_per_k, "expansion"), "M": Value(second.along_mm, "length"), "q": Value(b_k, "temperature_difference")},
        Value(slip, "length"), "Definition: difference of the two sides' movement along the joint", DEFINITION,
    ))  # fmt: skip
    return slip


def _sums(kind: str, opening: float, closing: float, along: float, across: float, shear: float, rows: Sequence[Cause]) -> list[Step]:
    """The three sums, with every part that went in."""

    def total(key: str, title: str, symbol: str, attribute: str, result: float) -> Step:
        parts = [(index, getattr(row, attribute)) for index, row in enumerate(rows) if getattr(row, attribute)]
        return Step(
            key, title, symbol, f"sum of the {title.split()[1]} of all causes", " + ".join(f"{{p{index}}}" for index, _ in parts) or "none",
            {f"p{index}": Value(part, "length") for index, part in parts}, Value(result, "length"), "Definition", DEFINITION,
        )  # fmt: skip

    steps = []
    if kind != "lap" or opening or closing:
        steps.append(total("opening", "Total opening", "o", "opening_mm", opening))
        steps.append(total("closing", "Total closing", "c", "closing_mm", closing))
    if along or across or kind in ("lap", "mixed"):
        steps.append(Step(
            "shear", "Shear", "s", "√(s_along² + s_across²)", "√(({p})² + ({q})²)", {"p": Value(along, "length"), "q": Value(across, "length")},
            Value(shear, "length"), "Definition: two directions of slip at right angles", DEFINITION,
        ))  # fmt: skip
    return steps



