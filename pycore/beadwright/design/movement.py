"""The movement budget: every cause with what it opens, closes and shears.

Opening is what widens the gap after sealing, closing what narrows it, shear what makes the
sides slip. With no restriction on the sealing temperature the full range counts both ways; but one
bead is sealed once, so its total swing holds the range once, whatever the temperature at sealing.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from attrs import evolve, frozen

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
    swing_mm: float


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
    reversible_mm: float
    swing_mm: float
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

    def swing_from(self, *sealed_c: float) -> float:
        """Total movement, from most closed to most open, of a bead sealed at the given side temperatures."""
        thermal_mm = sum(_swing(item, at, at) for item, at in zip(self.elements, sealed_c, strict=True))
        return thermal_mm + self.fixed_opening_mm + self.fixed_closing_mm - self.reversible_mm

    def swing_at(self, *sealed_c: float) -> float:
        """Total movement across the joint of such a bead; in a lap the sides' own movement is shear instead."""
        return self.entered_opening_mm + self.entered_closing_mm if self.kind == "lap" else self.swing_from(*sealed_c)

    def at(self, *sealed_c: float) -> tuple[float, float, float]:
        """Opening, closing and shear of a bead sealed at the given side temperatures; never below zero."""
        opening, closing = max(0.0, self.opening_from(*sealed_c)), max(0.0, self.closing_from(*sealed_c))
        if self.kind != "lap":
            return opening, closing, self.shear_mm
        slide = self.swing_from(*sealed_c) if self.total_swing else max(opening, closing)
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
    slips = _slips(elements, seal_from_c, seal_to_c, steps) if kind in ("mixed", "lap") else []
    slip = sum(row.shear_mm for row in slips)
    moved_opening, moved_closing = sum(row.opening_mm for row in rows), sum(row.closing_mm for row in rows)
    rows += slips
    swing = sum(row.swing_mm for row in rows)
    if kind == "lap":
        opens = moved_opening >= moved_closing
        slide = swing if total_swing else max(moved_opening, moved_closing)
        rows = [evolve(row, opening_mm=0.0, closing_mm=0.0, shear_mm=row.shear_mm or (row.swing_mm if total_swing else row.opening_mm if opens else row.closing_mm), swing_mm=0.0) for row in rows]
        steps.append(_slide_step(elements, seal_from_c, seal_to_c, fixed, moved_opening, moved_closing, slide, entered_shear, total_swing=total_swing))
        swing = 0.0
        across += slip
        opening, closing, along = entered_opening, entered_closing, slide + entered_shear
    else:
        opening, closing, along = moved_opening + entered_opening, moved_closing + entered_closing, slip + entered_shear
    shear = strain.combined_shear_mm(along, across)
    rows += entered
    along_parts = [along] if kind == "lap" else [row.shear_mm for row in slips] + [cause["shear"] for cause in causes]
    across_parts = ([row.shear_mm for row in slips] if kind == "lap" else []) + [cause["shear_across"] for cause in causes]
    steps += _sums(kind, opening, closing, [part for part in along_parts if part], [part for part in across_parts if part], shear, rows)
    swing += entered_opening + entered_closing
    if total_swing and kind != "lap":
        steps.append(_swing_step(elements, seal_from_c, seal_to_c, [row for row in rows if not row.key.startswith("thermal-")], swing))
    reversible = sum(row.opening_mm for row in fixed if row.key.startswith("moisture-"))
    fixed_opening = sum(row.opening_mm for row in fixed) + (0.0 if kind == "lap" else entered_opening)
    fixed_closing = sum(row.closing_mm for row in fixed) + (0.0 if kind == "lap" else entered_closing)
    return Movement(
        kind, opening, closing, shear, tuple(rows), tuple(elements), fixed_opening, fixed_closing,
        entered_opening, entered_closing, entered_shear, across, reversible, swing, seal_from_c, seal_to_c, total_swing, tuple(steps),
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
    return Cause(f"thermal-{mark}", f"Temperature, {item.label[0].lower()}{item.label[1:]}", opening, closing, 0.0, _GUIDE, _swing(item, seal_from_c, seal_to_c))


def _swing_ends(item: Element, seal_from_c: float | None, seal_to_c: float | None) -> tuple[float, float]:
    """The hottest and coldest that an element passes; a bead sealed beyond its range starts from there."""
    hot = item.hot_c if seal_to_c is None else max(item.hot_c, seal_to_c)
    cold = item.cold_c if seal_from_c is None else min(item.cold_c, seal_from_c)
    return hot, cold


def _swing(item: Element, seal_from_c: float | None, seal_to_c: float | None) -> float:
    hot, cold = _swing_ends(item, seal_from_c, seal_to_c)
    return item.rate_mm_per_k * (hot - cold)


def _swing_terms(elements: Sequence[Element], seal_from_c: float | None, seal_to_c: float | None) -> tuple[list[str], dict[str, Value]]:
    """`α · L · (T_hot − T_cold)` of each side with its numbers."""
    terms: list[str] = []
    inputs: dict[str, Value] = {}
    for item in elements:
        mark = item.key[-1].upper()
        hot, cold = _swing_ends(item, seal_from_c, seal_to_c)
        terms.append(f"{{a{mark}}} × {{L{mark}}} × ({{h{mark}}} − {{c{mark}}})")
        inputs |= {f"a{mark}": Value(item.expansion_per_k, "expansion"), f"L{mark}": Value(item.effective_mm, "length"), f"h{mark}": Value(hot, "temperature"), f"c{mark}": Value(cold, "temperature")}
    return terms, inputs


def _swing_step(elements: Sequence[Element], seal_from_c: float | None, seal_to_c: float | None, others: Sequence[Cause], swing_mm: float) -> Step:
    """Working of the total swing."""
    terms, inputs = _swing_terms(elements, seal_from_c, seal_to_c)
    parts = {f"p{index}": Value(row.swing_mm, "length") for index, row in enumerate(others) if row.swing_mm}
    return Step(
        "swing", "Total swing", "m", "Σ α · L · (T_hot − T_cold) + all other causes, opening and closing", " + ".join([*terms, *(f"{{{key}}}" for key in parts)]),
        inputs | parts, Value(swing_mm, "length"), _GUIDE, MEMORY,
        remark="One bead is sealed once: its range counts once, whatever the temperature at sealing.",
    )  # fmt: skip


def _slide_step(elements: Sequence[Element], seal_from_c: float | None, seal_to_c: float | None, fixed: Sequence[Cause], opening_mm: float, closing_mm: float, slide_mm: float,
                entered_mm: float, *, total_swing: bool) -> Step:  # fmt: skip
    """Working of the slide along a lap: what would open or close a butt joint, and what is entered."""
    inputs = {"e": Value(entered_mm, "length")}
    if total_swing:
        terms, numbers = _swing_terms(elements, seal_from_c, seal_to_c)
        parts = {f"p{index}": Value(row.swing_mm, "length") for index, row in enumerate(fixed) if row.swing_mm}
        formula, template = "Σ α · L · (T_hot − T_cold) + moisture + entered slip", " + ".join([*terms, *(f"{{{key}}}" for key in parts), "{e}"])
        inputs |= numbers | parts
    else:
        formula, template = "greater of Σ(by cold) and Σ(by heat), moisture with it, + entered slip", "max({o}, {c}) + {e}"
        inputs |= {"o": Value(opening_mm, "length"), "c": Value(closing_mm, "length")}
    return Step("slide", "Slip along the lap", "s_along", formula, template, inputs, Value(slide_mm + entered_mm, "length"), "Definition: what would open or close a butt joint slides a lap", DEFINITION)


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
        rows.append(Cause(f"moisture-{mark}", f"Wetting and drying, {side}", swing, swing, 0.0, source, swing))
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
        rows.append(Cause(f"lasting-{mark}", f"{'Lasting growth' if grows else 'Lasting shrinkage'}, {side}", max(0.0, -change), max(0.0, change), 0.0, source, abs(change)))
    return rows


def _entered(index: int, cause: Mapping[str, Any]) -> Cause:
    shear = strain.combined_shear_mm(cause["shear"] or 0.0, cause["shear_across"] or 0.0)
    opening, closing = cause["opening"] or 0.0, cause["closing"] or 0.0
    return Cause(f"cause-{index}", cause["label"] or f"Cause {index + 1}", opening, closing, shear, cause["source"] or "entered by the user", opening + closing)


def _slips(elements: Sequence[Element], seal_from_c: float | None, seal_to_c: float | None, steps: list[Step]) -> list[Cause]:
    """Difference of the two sides' movement along the joint: by temperature, and by moisture."""
    found = [_thermal_slip(elements, seal_from_c, seal_to_c, steps), _moisture_slip(elements, steps)]
    return [row for row in found if row is not None and row.shear_mm]


_SLIP_SOURCE = "Definition: difference of the two sides' movement along the joint"


def _thermal_slip(elements: Sequence[Element], seal_from_c: float | None, seal_to_c: float | None, steps: list[Step]) -> Cause | None:
    """Largest difference by temperature, from hottest to coldest or from sealing to either.

    Sealed at one temperature, two sides whose ranges differ may slip further than between their
    extremes, where both may have moved alike.
    """
    first, second = elements
    if not first.along_rate_mm_per_k and not second.along_rate_mm_per_k:
        return None

    def difference(a_k: float, b_k: float) -> float:
        return abs(first.along_rate_mm_per_k * a_k - second.along_rate_mm_per_k * b_k)

    cases = [(first.hot_c - first.cold_c, second.hot_c - second.cold_c)] if seal_from_c is None or seal_to_c is None else []
    low = max(first.cold_c, second.cold_c) if seal_from_c is None else seal_from_c
    high = min(first.hot_c, second.hot_c) if seal_to_c is None else seal_to_c
    for at in (low, high):
        cases += [(first.hot_c - at, second.hot_c - at), (at - first.cold_c, at - second.cold_c)]
    a_k, b_k = max(cases, key=lambda case: difference(*case))
    slip = difference(a_k, b_k)
    steps.append(Step(
        "slip", "Sides slip along the joint", "s_T", "|α_A · L_along,A · ΔT_A − α_B · L_along,B · ΔT_B|", "|{a} × {L} × {p} − {b} × {M} × {q}|",
        {"a": Value(first.expansion_per_k, "expansion"), "L": Value(first.along_mm, "length"), "p": Value(a_k, "temperature_difference"),
         "b": Value(second.expansion_per_k, "expansion"), "M": Value(second.along_mm, "length"), "q": Value(b_k, "temperature_difference")},
        Value(slip, "length"), _SLIP_SOURCE, DEFINITION,
    ))  # fmt: skip
    return Cause("slip", "Sides slip along the joint", 0.0, 0.0, slip, _SLIP_SOURCE, 0.0)


def _moisture_slip(elements: Sequence[Element], steps: list[Step]) -> Cause | None:
    """Difference by moisture: lasting movement with its sign, wetting and drying as if each side were on its own."""
    first, second = elements
    lasting = abs(first.irreversible_fraction * first.along_mm - second.irreversible_fraction * second.along_mm)
    swing = first.reversible_fraction * first.along_mm + second.reversible_fraction * second.along_mm
    if not lasting and not swing:
        return None
    steps.append(Step(
        "slip-moisture", "Sides slip by moisture", "s_m", "|I_A · L_along,A − I_B · L_along,B| + R_A · L_along,A + R_B · L_along,B", "|{i} × {L} − {j} × {M}| + {r} × {L} + {q} × {M}",
        {"i": Value(first.irreversible_fraction, "percent"), "L": Value(first.along_mm, "length"), "j": Value(second.irreversible_fraction, "percent"),
         "M": Value(second.along_mm, "length"), "r": Value(first.reversible_fraction, "percent"), "q": Value(second.reversible_fraction, "percent")},
        Value(lasting + swing, "length"), _SLIP_SOURCE, DEFINITION, remark="Strains as for the movement across the joint.",
    ))  # fmt: skip
    return Cause("slip-moisture", "Sides slip by moisture", 0.0, 0.0, lasting + swing, _SLIP_SOURCE, 0.0)


def _sums(kind: str, opening: float, closing: float, along: Sequence[float], across: Sequence[float], shear: float, rows: Sequence[Cause]) -> list[Step]:
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
        inputs = {f"{name}{index}": Value(part, "length") for name, parts in (("p", along), ("q", across)) for index, part in enumerate(parts or [0.0])}
        squares = [" + ".join(f"{{{key}}}" for key in inputs if key.startswith(name)) for name in ("p", "q")]
        steps.append(Step(
            "shear", "Shear", "s", "√(s_along² + s_across²)", f"√(({squares[0]})² + ({squares[1]})²)", inputs,
            Value(shear, "length"), "Definition: two directions of slip at right angles", DEFINITION,
        ))  # fmt: skip
    return steps
