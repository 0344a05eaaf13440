"""One judged joint as the answer that people read: figures, bands, tables, working, drawing."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from ..design import depth as depths
from ..design.bead import StrainState, strained
from ..design.inputs import apply_range
from ..design.joint import AT_LIMIT, BEYOND, REFERRED, UNKNOWN, WITHIN, Judgement
from ..design.width import EACH_WAY, TOTAL_SWING
from ..field.face import FaceAnswer
from . import writing
from .drawing import Section, section_svg
from .face_sheet import face_dict

VERDICT_WORDS = {
    WITHIN: "Within class",
    AT_LIMIT: "At the limit",
    BEYOND: "Beyond class",
    UNKNOWN: "Not judged",
    REFERRED: "Referred",
}
_TONES = {WITHIN: "ok", AT_LIMIT: "warn", BEYOND: "bad", UNKNOWN: "plain", REFERRED: "warn"}
CONVENTION_WORDS = {EACH_WAY: "each way about the width when sealed", TOTAL_SWING: "total swing"}
KIND_WORDS = {"butt": "Butt joint", "lap": "Lap joint", "mixed": "Butt joint with slip"}
FRAME_COUNT = 41

Band = dict[str, str]


def joint_dict(judged: Judgement, face: FaceAnswer | None, system: str, cautions: Sequence[str], *, full: bool) -> dict[str, Any]:
    """The answer for one joint; the short form holds what a list of joints shows, no more."""
    joint = judged.joint
    answer: dict[str, Any] = {
        "id": joint.id,
        "name": joint.values["name"] or joint.id,
        "place": joint.values["place"] or "",
        "kind": joint.values["kind"] or "butt",
        "kind_word": KIND_WORDS[joint.values["kind"] or "butt"],
        "short": not full,
        "verdict": judged.verdict,
        "verdict_word": verdict_word(judged),
        "verdict_text": verdict_text(judged, system),
        "tone": _TONES[judged.verdict],
        "headline": _headline(judged, system),
    }
    if full:
        answer |= _figures(judged)
        answer |= {
            "answers": _bands(judged, system),
            "tables": _tables(judged, system),
            "face": face_dict(face, judged, system),
            "steps": [writing.step_lines(step, system) for step in judged.steps],
            "notes": [{"severity": note.severity, "text": note.text} for note in judged.notes],
            "cautions": list(cautions),
            "drawing": drawing(judged, system),
        }
    return answer


def verdict_word(judged: Judgement) -> str:
    """The word of the verdict; a practical limit is named as such."""
    if judged.verdict == BEYOND and judged.reason.startswith("practical"):
        return "Too narrow to seal" if judged.reason == "practical-least" else "Too wide to seal"
    if judged.verdict == WITHIN and judged.reason == "design":
        return "Sized"
    return VERDICT_WORDS[judged.verdict]


def verdict_text(judged: Judgement, system: str) -> str:
    """One sentence that says what the verdict rests on."""
    widths = judged.widths
    if widths is None or judged.sealant is None:
        return judged.reason
    need, have = writing.up(widths.required_mm, system), writing.down(widths.judged_mm, system)
    governs = widths.governed_by.label
    # With shear or a least gap the strain does not go by the width, so the share is one of width only.
    linear = widths.governed_by.key in ("opening", "closing") or (widths.governed_by.key == "swing" and not (judged.movement and judged.movement.shear_mm))
    if judged.reason == "practical-most":
        limit = writing.length(widths.practical_most_mm, system)
        shown = writing.length(widths.present_mm if widths.present_mm is not None else widths.design_mm, system)
        return f"The width, {shown}, is above {limit}, the greatest that is practical ({widths.practical_most_name})."
    if judged.reason == "practical-least":
        return f"The width is below {writing.length(widths.practical_least_mm, system)}, the least that is practical ({widths.practical_least_name})."
    if widths.present_mm is None:
        return f"No width is entered. {writing.length(widths.design_mm, system)} would keep the joint within {judged.sealant.class_label}{_sealed_within(judged, system)}; {governs} governs."
    tail = "" if widths.judged_mm == widths.present_mm else " once the tolerance is off"
    used = writing.percent_up(widths.use_fraction) if widths.use_fraction < 100 else "far more than all"
    if judged.verdict == BEYOND:
        if widths.judged_mm <= 0:
            return "The tolerance eats the whole width: nothing is left that can be relied on."
        said = f"{used} of {judged.sealant.class_label} would be used" if linear else f"{used} of it would be needed for {judged.sealant.class_label}"
        return f"Needs {need}, has {have}{tail}: {said}; {governs} governs.{_way_out(judged, system)}"
    said = f"{used} of {judged.sealant.class_label} is used" if linear else f"{used} of it is needed for {judged.sealant.class_label}"
    return f"Needs {need}, has {have}{tail}: {said}{_sealed_within(judged, system)}; {governs} governs."


def _sealed_within(judged: Judgement, system: str) -> str:
    """The sealing temperatures that the verdict takes for granted."""
    movement = judged.movement
    if movement is None or movement.total_swing or (movement.seal_from_c is None and movement.seal_to_c is None):
        return ""
    if movement.seal_from_c is None:
        return f" if sealed not above {writing.temperature(movement.seal_to_c or 0.0, system)}"
    if movement.seal_to_c is None:
        return f" if sealed not below {writing.temperature(movement.seal_from_c, system)}"
    return f" if sealed between {writing.temperature(movement.seal_from_c, system)} and {writing.temperature(movement.seal_to_c, system)}"


def _is_workable(judged: Judgement) -> bool:
    """Whether the sealant may be applied at any temperature of the sealing window."""
    window, sealant = judged.window, judged.sealant
    if window is None or sealant is None or window.from_c is None or window.to_c is None:
        return False
    low, high = apply_range(sealant)
    return (high is None or window.from_c <= high) and (low is None or window.to_c >= low)


def _way_out(judged: Judgement, system: str) -> str:
    """What sealing at the right temperature alone would mend, where it would."""
    window = judged.window
    if window is None or window.is_empty or judged.capability is None or judged.capability.convention == TOTAL_SWING or not _is_workable(judged):
        return ""
    return f" It would hold if sealed {_window_words(judged, system)[0].lower()}{_window_words(judged, system)[1:]}."


def _window_words(judged: Judgement, system: str) -> str:
    """The sealing window in words, each end rounded inwards."""
    window = judged.window
    assert window is not None and window.from_c is not None and window.to_c is not None
    low, high = writing.temperature_up(window.from_c, system), writing.temperature_down(window.to_c, system)
    if window.low_limited_by == window.high_limited_by == "element":
        return "At any temperature"
    if window.low_limited_by == "element":
        return f"Not above {high}"
    if window.high_limited_by == "element":
        return f"Not below {low}"
    return f"From {low} to {high}"


def _headline(judged: Judgement, system: str) -> dict[str, str | None]:
    widths = judged.widths
    if widths is None:
        return {"width": None, "depth": None, "rod": None}
    shown = widths.present_mm if widths.present_mm is not None else widths.design_mm
    lap = judged.movement is not None and judged.movement.kind == "lap"
    rod = judged.backing.size_label if judged.backing and not lap else None
    typed = judged.joint.typed_width if widths.present_mm is not None else ""
    return {"width": typed or writing.length(shown, system), "depth": writing.near(judged.neck_mm, system), "rod": rod}


def _figures(judged: Judgement) -> dict[str, Any]:
    """The contract's numbers, plain floats in the unit that the key ends with."""
    movement, widths, bead = judged.movement, judged.widths, judged.bead
    if movement is None or widths is None or bead is None or judged.window is None or judged.opened is None or judged.closed is None:
        empty = ("movement", "width", "depth", "backing", "section", "strain", "window")
        return dict.fromkeys(empty)
    rod = judged.backing
    rule = judged.depth_rule
    return {
        "movement": {
            "opening_mm": movement.opening_mm, "closing_mm": movement.closing_mm, "shear_mm": movement.shear_mm, "swing_mm": movement.swing_mm,
            "hot_c": movement.hot_c, "cold_c": movement.cold_c, "rate_mm_per_k": movement.rate_mm_per_k,
            "causes": [{"key": row.key, "label": row.label, "opening_mm": row.opening_mm, "closing_mm": row.closing_mm, "shear_mm": row.shear_mm, "source": row.source} for row in movement.rows],
        },
        "width": {
            "required_mm": widths.required_mm, "design_mm": widths.design_mm, "design_worst_mm": widths.worst_mm, "design_rss_mm": widths.rss_mm,
            "tolerance_worst_mm": widths.tolerance_worst_mm, "tolerance_rss_mm": widths.tolerance_rss_mm,
            "governed_by": widths.governed_by.key, "governed_text": widths.governed_by.label,
            "present_mm": widths.present_mm, "judged_mm": widths.judged_mm, "use_fraction": min(widths.use_fraction, 1e9),
            "practical_least_mm": widths.practical_least_mm, "practical_most_mm": widths.practical_most_mm,
            "by_class": [{"class": row.row.id, "label": row.row.label, "required_mm": row.required_mm, "design_mm": row.design_mm, "holds_present": row.holds_present} for row in widths.by_class],
            "smallest_class": widths.smallest_class.id if widths.smallest_class else None,
            "convention": judged.capability.convention if judged.capability else None,
            "other_convention": {"convention": widths.other_convention, "required_mm": widths.other_required_mm},
            "length_scale": widths.length_scale,
            "spacing_mm": _spacing(judged),
        },
        "depth": {
            "neck_mm": judged.neck_mm, "bond_mm": bead.bond_mm, "rule": rule.rule.id if rule else None, "rule_label": rule.rule.label if rule else None,
            "least_mm": rule.least_mm if rule else None, "most_mm": rule.most_mm if rule else None,
            "by_rule": [{"rule": item.rule.id, "least_mm": item.least_mm, "target_mm": item.target_mm, "most_mm": item.most_mm, "covers_width": item.covers_width} for item in judged.depth_others],
        },
        "backing": None if rod is None else {
            "type": rod.type_id, "diameter_mm": rod.diameter_mm, "label": rod.size_label, "compression_least_fraction": rod.compression_least_fraction,
            "compression_most_fraction": rod.compression_most_fraction, "fits": rod.fits,
            "bands": [{"diameter_mm": band.diameter_mm, "width_to_mm": band.width_to_mm} for band in rod.bands],
        },
        "section": {"area_mm2": bead.area_mm2, "rectangle_mm2": bead.rectangle_mm2, "width_mm": bead.width_mm, "tool_sag_mm": bead.tool_sag_mm, "rod_sag_mm": bead.rod_sag_mm},
        "strain": {
            "cold_average_fraction": judged.opened.average_fraction, "cold_face_fraction": judged.opened.face_fraction,
            "hot_average_fraction": judged.closed.average_fraction, "hot_face_fraction": judged.closed.face_fraction,
            "curve": [] if movement.kind == "lap" else _curve(judged, _sealed_at(judged, "metric")[0], 9),
        },
        "window": {"from_c": judged.window.from_c, "to_c": judged.window.to_c, "low_limited_by": judged.window.low_limited_by, "high_limited_by": judged.window.high_limited_by},
    }  # fmt: skip


def _spacing(judged: Judgement) -> float | None:
    """Greatest length that may feed the joint at the judged width, both sides together."""
    if judged.widths is None or judged.widths.length_scale is None:
        return None
    return judged.widths.length_scale * sum(item.effective_mm for item in judged.elements)


# ---- bands ------------------------------------------------------------------------------------


def _band(key: str, question: str, answer: str, detail: str = "", tone: str = "plain") -> Band:
    return {"key": key, "question": question, "answer": answer, "detail": detail, "tone": tone}


def _bands(judged: Judgement, system: str) -> list[Band]:
    if judged.widths is None or judged.movement is None or judged.bead is None:
        return []
    lap = judged.movement.kind == "lap"
    bands = [_width_band(judged, system, lap=lap), _movement_band(judged, system), _depth_band(judged, system, lap=lap)]
    if not lap:
        bands.append(_rod_band(judged, system))
    bands += [_window_band(judged, system), _class_band(judged), _spacing_band(judged, system)]
    if not lap:
        bands.append(_strain_band(judged, system))
    bands.append(_section_band(judged, system, lap=lap))
    return bands


def _width_band(judged: Judgement, system: str, *, lap: bool) -> Band:
    widths = judged.widths
    assert widths is not None
    by = "root of squares" if widths.by_rss else "worst case"
    detail = f"Movement asks for {writing.up(widths.required_mm, system)} ({widths.governed_by.label} governs)."
    if widths.tolerance_worst_mm:
        detail += f" With tolerance: {writing.length(widths.worst_mm, system)} worst case, {writing.length(widths.rss_mm, system)} by root of squares; {by} is used."
    if widths.practical_least_mm is not None and widths.design_mm > widths.required_mm and widths.practical_least_mm >= widths.required_mm + widths.tolerance_worst_mm:
        detail += f" Raised to the least practical width, {writing.length(widths.practical_least_mm, system)} ({widths.practical_least_name})."
    tone = "bad" if widths.practical_most_mm is not None and widths.design_mm > widths.practical_most_mm + 1e-9 else "plain"
    return _band("width", "How thick must the bead be?" if lap else "How wide must it be?", writing.length(widths.design_mm, system), detail, tone)


def _movement_band(judged: Judgement, system: str) -> Band:
    movement = judged.movement
    assert movement is not None
    parts = []
    if movement.kind != "lap" or movement.opening_mm or movement.closing_mm:
        parts += [f"opens {writing.up(movement.opening_mm, system)}", f"closes {writing.up(movement.closing_mm, system)}"]
    if movement.total_swing and movement.kind != "lap":
        parts.append(f"{writing.up(movement.swing_mm, system)} in all")
    if movement.shear_mm:
        parts.append(f"slips {writing.up(movement.shear_mm, system)}")
    sealed = "at any temperature"
    if movement.seal_from_c is not None or movement.seal_to_c is not None:
        low = "any cold" if movement.seal_from_c is None else writing.temperature(movement.seal_from_c, system)
        high = "any heat" if movement.seal_to_c is None else writing.temperature(movement.seal_to_c, system)
        sealed = f"between {low} and {high}"
    temperatures = f"Elements go from {writing.temperature(movement.cold_c, system)} to {writing.temperature(movement.hot_c, system)}; sealed {sealed}."
    return _band("movement", "How does it move?", ", ".join(parts) or "not at all", temperatures)


def _depth_band(judged: Judgement, system: str, *, lap: bool) -> Band:
    bead, rule = judged.bead, judged.depth_rule
    assert bead is not None
    if lap:
        return _band("depth", "How much cover?", writing.length(judged.neck_mm, system), "Bonded on both faces; common practice, the depth rule sets do not speak of laps.")
    detail = f"At mid-width; {writing.length(bead.bond_mm, system)} bonded at each face."
    if rule is not None and judged.neck_source == "rule":
        detail += f" By {rule.rule.label}: {writing.length(rule.least_mm, system)} to {writing.length(rule.most_mm, system)}."
        against = [item for item in judged.depth_others if item.rule.id != rule.rule.id and item.covers_width and not depths.agrees(rule.target_mm, item)]
        if against:
            detail += f" {len(against)} other rule set{'s' if len(against) > 1 else ''} would set another depth; see the table."
    else:
        detail += " As entered."
    return _band("depth", "How deep?", writing.near(judged.neck_mm, system), detail)


def _rod_band(judged: Judgement, system: str) -> Band:
    rod = judged.backing
    assert rod is not None
    if rod.diameter_mm is None:
        return _band("rod", "What goes behind it?", rod.size_label if rod.fits else "No rod fits", rod.advice, "plain" if rod.fits else "warn")
    assert rod.compression_least_fraction is not None and rod.compression_most_fraction is not None
    low, high = writing.percent(rod.compression_least_fraction), writing.percent(rod.compression_most_fraction)
    squeeze = f"squeezed {low}" if low == high else f"squeezed {low} at the widest to {high} at the narrowest"
    detail = f"{squeeze.capitalize()}. {rod.advice}".strip()
    if len(rod.bands) > 1:
        sizes = ", ".join(f"{band.size_label} up to {writing.down(band.width_to_mm, system)}" for band in rod.bands)
        detail += f" By the width found: {sizes}."
    return _band("rod", "What goes behind it?", f"{rod.size_label} {rod.label.lower()}", detail, "plain" if rod.fits else "warn")


def _window_band(judged: Judgement, system: str) -> Band:
    window, movement, widths = judged.window, judged.movement, judged.widths
    assert window is not None and movement is not None and widths is not None
    basis = writing.down(widths.judged_mm, system)
    if window.is_empty or window.from_c is None or window.to_c is None:
        return _band("window", "When may it be sealed?", "At no temperature", f"{window.advice} Judged at {basis}.", "bad")
    words = _window_words(judged, system)
    if not _is_workable(judged):
        return _band("window", "When may it be sealed?", "At no workable temperature", f"Movement would allow it {words[0].lower()}{words[1:]} only, where this sealant may not be applied: a wider joint, a higher class or shorter elements. Judged at {basis}.", "bad")
    if window.low_limited_by == window.high_limited_by == "element":
        return _band("window", "When may it be sealed?", words, f"As far as movement goes, at {basis}; the sealant and the weather set their own limits.", "ok")
    why = []
    if window.low_limited_by != "element":
        why.append("Colder, and summer closes it too far.")
    if window.high_limited_by != "element":
        why.append("Warmer, and winter opens it too far.")
    return _band("window", "When may it be sealed?", words, f"Temperature of the elements, not of the air, at {basis}. {' '.join(why)}")


def _class_band(judged: Judgement) -> Band:
    widths, sealant = judged.widths, judged.sealant
    assert widths is not None and sealant is not None
    convention = CONVENTION_WORDS[judged.capability.convention] if judged.capability else ""
    if widths.present_mm is None:
        return _band("class", "Which class would do?", sealant.class_label, f"Chosen; {convention}. Enter a width to see the smallest class that would do.")
    if widths.smallest_class is None:
        return _band("class", "Which class would do?", "None in the tables", f"No class holds at this width; {convention}.", "bad")
    return _band("class", "Which class would do?", widths.smallest_class.label, f"The smallest that holds at this width; {convention}. Chosen: {sealant.class_label}.")


def _spacing_band(judged: Judgement, system: str) -> Band:
    spacing = _spacing(judged)
    widths = judged.widths
    assert widths is not None
    question = "How long may the elements be?"
    if spacing is None:
        return _band("spacing", question, "Not governed by length", "Nothing that depends on the length of the elements decides here, or the other movements use the class up.")
    now = sum(item.effective_mm for item in judged.elements)
    return _band(
        "spacing", question, f"{writing.span_down(spacing, system)} feeding the joint",
        f"Both sides together at {writing.down(widths.judged_mm, system)}; now {writing.span(now, system)}. With elements held at mid-length this is the joint spacing.",
    )  # fmt: skip


def _strain_band(judged: Judgement, system: str) -> Band:
    cold, hot, bead = judged.opened, judged.closed, judged.bead
    assert cold is not None and hot is not None and bead is not None
    return _band(
        "strain", "How hard is the bead worked?", f"{writing.percent(cold.average_fraction, signed=True)} cold, {writing.percent(hot.average_fraction, signed=True)} hot",
        f"Average across a bead {writing.length(bead.width_mm, system)} wide, sealed at the worst temperature for each. {_at_free_face(cold, hot)}",
    )  # fmt: skip


def _at_free_face(cold: StrainState, hot: StrainState) -> str:
    """Strain of the free face; squeezed by more than half, the bead bulges out and its face says nothing of the bond."""
    said = f"At its free face: {writing.percent(cold.face_fraction, signed=True)} at the coldest"
    if hot.average_fraction < -0.5:
        return f"{said}; at the hottest it is squeezed by more than half and bulges out."
    return f"{said}, {writing.percent(hot.face_fraction, signed=True)} at the hottest."


def _section_band(judged: Judgement, system: str, *, lap: bool) -> Band:
    bead = judged.bead
    assert bead is not None
    share = bead.area_mm2 / bead.rectangle_mm2 - 1.0
    detail = f"Section {writing.area(bead.area_mm2, system)}"
    detail += "." if lap or abs(share) < 5e-4 else f", {writing.percent(abs(share))} {'more' if share > 0 else 'less'} than width × depth ({writing.area(bead.rectangle_mm2, system)})."
    return _band("section", "How much goes in?", writing.volume_per_length(bead.area_mm2, system), detail)


# ---- tables -----------------------------------------------------------------------------------


def _table(key: str, title: str, columns: Sequence[str], rows: list[dict[str, Any]], note: str = "") -> dict[str, Any]:
    shown = [{"label": label, "align": "left" if index == 0 or label in ("Source", "Remark") else "right"} for index, label in enumerate(columns)]
    return {"key": key, "title": title, "columns": shown, "rows": rows, "note": note}


def _tables(judged: Judgement, system: str) -> list[dict[str, Any]]:
    movement, widths = judged.movement, judged.widths
    if movement is None or widths is None:
        return []
    tables = [_causes_table(judged, system), _class_table(judged, system)]
    if movement.kind != "lap":
        tables.append(_range_table(judged, system))
    if judged.depth_others:
        tables.append(_rules_table(judged, system))
    return tables


def _causes_table(judged: Judgement, system: str) -> dict[str, Any]:
    movement = judged.movement
    assert movement is not None

    def cells(label: str, opening: float, closing: float, shear: float) -> list[str]:
        return [label, *(writing.fine(part, system) if part else "–" for part in (opening, closing, shear))]

    rows: list[dict[str, Any]] = [{"cells": cells(row.label, row.opening_mm, row.closing_mm, row.shear_mm), "mark": None} for row in movement.rows]
    rows.append({"cells": cells("Total", movement.opening_mm, movement.closing_mm, movement.shear_mm), "mark": "total"})
    note = "Slips at right angles combine as the root of the sum of squares."
    if movement.total_swing and movement.kind != "lap":
        note += f" One bead is sealed once and so swings {writing.up(movement.swing_mm, system)} in all, whatever the temperature at sealing."
    return _table("causes", "Movement by cause", ("Cause", "Opens", "Closes", "Slips"), rows, note)


def _class_table(judged: Judgement, system: str) -> dict[str, Any]:
    widths, sealant = judged.widths, judged.sealant
    assert widths is not None and sealant is not None and judged.capability is not None
    rows = []
    for row in widths.by_class:
        holds = "–" if row.holds_present is None else "holds" if row.holds_present else "does not hold"
        rows.append({"cells": [row.row.label, writing.up(row.required_mm, system), writing.length(row.design_mm, system), holds], "mark": "chosen" if row.row.id == sealant.class_id else None})
    other = f" Under the other convention ({CONVENTION_WORDS[widths.other_convention]}) {sealant.class_label} would ask for {writing.up(widths.other_required_mm, system)}." if widths.other_required_mm is not None else ""
    if widths.other_required_mm is not None and abs(widths.other_required_mm - widths.required_mm) < 0.05:
        other += " That is the same here, since with no limit on the sealing temperature the whole range counts each way."
    return _table("classes", "Width at each class", ("Class", "Movement asks", "Design width", "At this width"), rows,
                  f"Convention: {CONVENTION_WORDS[judged.capability.convention]}. Classes of different conventions are never turned into each other.{other}")  # fmt: skip


def _range_table(judged: Judgement, system: str) -> dict[str, Any]:
    """Width and strain on the way from the coldest to the hottest, for paper, which has no scrubber."""
    sealed, sealed_text = _sealed_at(judged, system)
    rows = []
    for point in _curve(judged, sealed, 5):
        temperatures = " / ".join(writing.temperature(round(at, 1), system) for at in dict.fromkeys(point["element_c"]))
        rows.append({"cells": [temperatures, writing.length(point["width_mm"], system), writing.percent(point["average_fraction"], signed=True), writing.percent(point["face_fraction"], signed=True)], "mark": None})
    return _table("range", "From the coldest to the hottest", ("Elements, A / B", "Width", "Average strain", "Strain at the face"), rows,
                  f"Temperature movement only, sealed at {sealed_text}.")  # fmt: skip


def _curve(judged: Judgement, sealed: float, count: int) -> list[dict[str, Any]]:
    """Width and strain at even steps from the coldest to the hottest, sealed at a share of that way."""
    bead = judged.bead
    assert bead is not None
    swing = sum(item.rate_mm_per_k * (item.hot_c - item.cold_c) for item in judged.elements)
    points = []
    for index in range(count):
        fraction = index / (count - 1)
        state = strained(bead, swing * (sealed - fraction))
        points.append({
            "fraction": fraction, "element_c": [item.cold_c + fraction * (item.hot_c - item.cold_c) for item in judged.elements],
            "width_mm": bead.width_mm + state.change_mm, "average_fraction": state.average_fraction, "face_fraction": state.face_fraction,
        })  # fmt: skip
    return points


def _rules_table(judged: Judgement, system: str) -> dict[str, Any]:
    chosen, neck = judged.depth_rule, judged.neck_mm or 0.0
    rows = []
    for item in judged.depth_others:
        in_force = chosen is not None and item.rule.id == chosen.rule.id
        verdict = item.width_note.capitalize() if not item.covers_width else "in force" if in_force else "agrees" if depths.agrees(neck, item) else "differs"
        band = writing.length(item.least_mm, system) if item.least_mm == item.most_mm else f"{writing.length(item.least_mm, system)} to {writing.length(item.most_mm, system)}"
        rows.append({"cells": [item.rule.label, writing.length(item.target_mm, system), band, verdict, f"{item.rule.source} ({item.rule.status})"], "mark": "chosen" if in_force else None})
    assert judged.bead is not None
    return _table("rules", f"Depth at {writing.length(judged.bead.width_mm, system)} by rule set", ("Rule set", "Depth", "Allows", "Compared", "Source"), rows,
                  "Published rules disagree; the one in force is a setting of the site.")  # fmt: skip


# ---- drawings ---------------------------------------------------------------------------------


def _section(judged: Judgement, system: str, change_mm: float = 0.0, shear_mm: float = 0.0) -> Section | None:
    bead, movement = judged.bead, judged.movement
    if bead is None or movement is None or judged.neck_mm is None:
        return None
    rod = judged.backing
    lap = movement.kind == "lap"
    state = strained(bead, change_mm) if change_mm and not lap else None
    rod_mm = rod.diameter_mm if rod and not lap and rod.diameter_mm and rod.diameter_mm >= bead.width_mm else None
    now = bead.width_mm + change_mm
    return Section(
        movement.kind, bead.width_mm, bead.neck_mm, bead.tool_sag_mm, bead.rod_sag_mm, rod_mm, bool(rod and rod.type_id == "tape"), change_mm, shear_mm,
        bead.width_mm + movement.opening_mm, writing.length(now, system),
        writing.length(state.neck_mm if state else bead.neck_mm, system), writing.length(bead.bond_mm, system), rod.size_label if rod else "",
        f"A  {judged.elements[0].substrate.label}", f"B  {judged.elements[1].substrate.label}", f"Section of {judged.joint.values['name'] or judged.joint.id}, {writing.length(now, system)} wide",
    )  # fmt: skip


def drawing(judged: Judgement, system: str) -> str | None:
    """The section as drawn, at the width when sealed."""
    section = _section(judged, system)
    return section_svg(section) if section else None


def frames(judged: Judgement, system: str) -> dict[str, Any]:
    """The section from the coldest to the hottest, for a bead sealed in the middle of its window.

    Each frame moves every element the same share of the way from its coldest to its hottest.
    """
    movement, bead = judged.movement, judged.bead
    if movement is None or bead is None:
        return {"frames": [], "start": 0, "caption": judged.reason}
    sealed, sealed_text = _sealed_at(judged, system)
    found = [_frame(judged, system, index / (FRAME_COUNT - 1), sealed) for index in range(FRAME_COUNT)]
    start = min(max(round(sealed * (FRAME_COUNT - 1)), 0), FRAME_COUNT - 1)
    return {"frames": found, "start": start, "caption": f"Temperature movement only, for a bead sealed at {sealed_text}. Lasting moisture movement and loads come on top."}


def _sealed_at(judged: Judgement, system: str) -> tuple[float, str]:
    """Share of the way from coldest to hottest at which the bead is taken as sealed, and its temperature."""
    movement, window = judged.movement, judged.window
    assert movement is not None and window is not None
    low, high = movement.cold_c, movement.hot_c
    surface, other = judged.joint.face["surface"], judged.joint.face["surface_b"]
    if surface is not None:
        measured = (surface, surface if other is None else other)
        shown = " and ".join(writing.temperature(at, system) for at in dict.fromkeys(measured))
        return _share(judged, measured), f"{shown}, the surface measured at the face"
    bottom = max(item for item in (window.from_c, movement.seal_from_c, low) if item is not None)
    top = min(item for item in (window.to_c, movement.seal_to_c, high) if item is not None)
    at = min(max(0.5 * (bottom + top), low), high)
    return _share(judged, (at, at)), f"{writing.temperature(at, system)}, the middle of its sealing range"


def _share(judged: Judgement, sealed_c: tuple[float, float]) -> float:
    """How far the joint has come from its widest to its narrowest at the given temperatures of the sides.

    Sides whose ranges differ do not stand at the same share; the gap counts what each of them has moved.
    """
    swing = sum(item.rate_mm_per_k * (item.hot_c - item.cold_c) for item in judged.elements)
    if swing == 0.0:
        item = judged.elements[0]
        span = item.hot_c - item.cold_c
        return (sealed_c[0] - item.cold_c) / span if span else 0.5
    return sum(item.rate_mm_per_k * (at - item.cold_c) for item, at in zip(judged.elements, sealed_c, strict=True)) / swing


def _frame(judged: Judgement, system: str, fraction: float, sealed: float) -> dict[str, Any]:
    movement, bead = judged.movement, judged.bead
    assert movement is not None and bead is not None
    moved = sum(item.rate_mm_per_k * (item.hot_c - item.cold_c) for item in judged.elements) * (sealed - fraction)
    temperatures = [item.cold_c + fraction * (item.hot_c - item.cold_c) for item in judged.elements]
    same = abs(temperatures[0] - temperatures[1]) < 0.05
    title = writing.temperature(round(temperatures[0]), system) if same else f"A {writing.temperature(round(temperatures[0]), system)}, B {writing.temperature(round(temperatures[1]), system)}"
    lap = movement.kind == "lap"
    state = strained(bead, 0.0 if lap else moved, abs(moved) if lap else 0.0)
    section = _section(judged, system, 0.0 if lap else moved, moved if lap else 0.0)
    lines = [{"label": "Slip" if lap else "Width", "value": writing.length(abs(moved) if lap else bead.width_mm + moved, system)}]
    lines.append({"label": "Average strain", "value": writing.percent(state.average_fraction, signed=True)})
    if not lap:
        lines.append({"label": "Strain at the face", "value": writing.percent(state.face_fraction, signed=True)})
    return {"fraction": fraction, "title": title, "lines": lines, "drawing": section_svg(section) if section else None}
