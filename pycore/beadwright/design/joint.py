"""One joint judged: movement, width, depth, backing, section, strain, window and verdict."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from attrs import evolve, frozen

from .. import catalogue
from ..working import Note, Step
from . import backing, depth, width, window
from .bead import Bead, StrainState, bead_steps, make_bead, strain_steps, strained
from .elements import Element, read_element
from .inputs import JointInput, Project, Sealant
from .movement import Movement, budget

WITHIN, AT_LIMIT, BEYOND, UNKNOWN, REFERRED = "within", "at-limit", "beyond", "unknown", "referred"
# A joint that uses more than this share of its class has nothing in reserve.
AT_LIMIT_USE = 0.95


@frozen
class ClassRow:
    """One movement class and the width that it would take."""

    row: catalogue.MovementClass
    required_mm: float
    design_mm: float
    holds_present: bool | None


@frozen
class Widths:
    """All answers about width."""

    needs: tuple[width.Need, ...]
    governed_by: width.Need
    required_mm: float
    tolerance_parts_mm: Mapping[str, float]
    tolerance_worst_mm: float
    tolerance_rss_mm: float
    worst_mm: float
    rss_mm: float
    design_mm: float
    practical_least_mm: float | None
    practical_least_name: str
    practical_most_mm: float | None
    practical_most_name: str
    present_mm: float | None
    judged_mm: float
    use_fraction: float
    by_class: tuple[ClassRow, ...]
    smallest_class: catalogue.MovementClass | None
    other_required_mm: float | None
    other_convention: str
    length_scale: float | None
    increment_mm: float
    by_rss: bool


@frozen
class Judgement:
    """Everything that is known about one joint; parts are None where input is missing."""

    joint: JointInput
    sealant: Sealant | None
    use: catalogue.Use | None
    verdict: str
    reason: str
    elements: tuple[Element, ...] = ()
    capability: width.Capability | None = None
    movement: Movement | None = None
    widths: Widths | None = None
    depth_rule: depth.RuleDepth | None = None
    depth_others: tuple[depth.RuleDepth, ...] = ()
    neck_mm: float | None = None
    neck_source: str = ""
    backing: backing.Backing | None = None
    bead: Bead | None = None
    opened: StrainState | None = None
    closed: StrainState | None = None
    window: window.Window | None = None
    steps: tuple[Step, ...] = ()
    notes: tuple[Note, ...] = ()


def judge(joint: JointInput, project: Project) -> Judgement:
    """Judge one joint as drawn or built.

    Parameters
    ----------
    joint : JointInput
        As read by `inputs.read_joints`.
    project : Project
        What all joints share.

    Returns
    -------
    Judgement
        `verdict` is `referred` for uses that belong to tested systems or licensed practice,
        `unknown` while input is missing or wrong; otherwise `within`, `at-limit` or `beyond`.
    """
    sealant = project.sealants.get(joint.values["sealant"]) if joint.values["sealant"] else None
    use = catalogue.uses().get(joint.values["use"]) if joint.values["use"] else None
    if use is not None and use.is_referred:
        return Judgement(joint, sealant, use, REFERRED, use.referral_text)
    if joint.has_errors:
        return Judgement(joint, sealant, use, UNKNOWN, "Something is missing or wrong; see the marked fields.")
    if project.site_has_errors:
        return Judgement(joint, sealant, use, UNKNOWN, "A setting of the site is wrong; see the marked fields there.")
    if sealant is not None and sealant.has_errors:
        return Judgement(joint, sealant, use, UNKNOWN, "A figure of the sealant is missing or wrong; see the marked fields there.")
    if sealant is None or use is None:
        return Judgement(joint, sealant, use, UNKNOWN, "The sealant or the use is not chosen yet.")
    capability = width.capability_of(sealant, project.site["convention"] or width.EACH_WAY)
    if not capability.is_known:
        return Judgement(joint, sealant, use, UNKNOWN, _no_capability(sealant, capability))
    first, second = read_element("side_a", joint, project), read_element("side_b", joint, project)
    if first is None or second is None:
        return Judgement(joint, sealant, use, UNKNOWN, _no_temperatures(joint, project))
    return _judge(joint, project, sealant, use, capability, (first, second))


def _no_capability(sealant: Sealant, capability: width.Capability) -> str:
    if capability.convention == width.TOTAL_SWING:
        return f"{sealant.class_label} gives no single total swing. Enter the sealant's own total, or choose another class."
    return "The movement class of the sealant is not complete yet."


def _no_temperatures(joint: JointInput, project: Project) -> str:
    site = project.site
    for values, label in ((joint.side_a, "Side A"), (joint.side_b, "Side B")):
        hot, cold = values["summer_surface"], values["winter_surface"]
        if (hot is None and site["summer_air"] is None) or (cold is None and site["winter_air"] is None):
            return "The design temperatures of the site are missing or contradict each other."
        if hot is not None or cold is not None:
            return f"{label}: its hottest is colder than its coldest; check the surface temperatures."
    return "The temperatures of a side cannot be worked out; check the site."


def _site_or_own(joint: JointInput, project: Project, key: str) -> Any:
    own = joint.values[key]
    return own if own is not None else project.site[key]


def _judge(joint: JointInput, project: Project, sealant: Sealant, use: catalogue.Use, capability: width.Capability, elements: tuple[Element, Element]) -> Judgement:
    values, site = joint.values, project.site
    notes: list[Note] = []
    kind = values["kind"] or "butt"
    seal_from, seal_to = _site_or_own(joint, project, "seal_from"), _site_or_own(joint, project, "seal_to")
    total_swing = capability.convention == width.TOTAL_SWING
    movement = budget(kind, elements, joint.causes, seal_from, seal_to, total_swing=total_swing)
    gap = site["closed_gap"] or 0.0
    is_porous = any(item.substrate.is_porous for item in elements)
    rule_sets = catalogue.depth_rules()
    chosen_rule = rule_sets.get(site["depth_rule"] or "") or next(iter(rule_sets.values()))
    widths = _widths(joint, project, sealant, capability, movement, gap, chosen_rule)
    judged = widths.judged_mm
    basis = values["width"] if values["width"] is not None else widths.design_mm
    rule_depth = depth.depth_by_rule(chosen_rule, basis, is_porous=is_porous)
    if values["neck"] is not None:
        neck = values["neck"]
    elif kind == "lap":
        neck = max(basis, chosen_rule.bond_least_mm)
    else:
        neck = rule_depth.target_mm if rule_depth else basis / 2
    spread = widths.tolerance_worst_mm if site["tolerance_method"] != "root-sum-square" else widths.tolerance_rss_mm
    rod_type = catalogue.rod_types()[values["rod"] or "closed-cell"]
    if values["width"] is not None and values["width_is"] == "built":
        spread = 0.0
    series = site["rod_series"] or "metric"
    # The section shows the rod of the width itself; the bands tell what a built width takes.
    rod = backing.choose(rod_type, series, basis, basis)
    if spread and rod.diameter_mm is not None:
        rod = evolve(rod, bands=backing.size_bands(rod_type, series, max(basis - spread, 0.25 * basis), basis + spread))
    if kind == "lap":
        rod_sag, rod_mm = values["rod_sag"] or 0.0, None
    else:
        rod_sag, rod_mm = values["rod_sag"], rod.diameter_mm
    is_concave = values["tooling"] != "flush" and kind != "lap"
    tool_sag = values["tool_sag"]
    if max(tool_sag or 0.0, rod_sag or 0.0) > basis / 2:
        notes.append(Note("warning", "The hollow or crown entered is deeper than half the width found; half the width is used for the section."))
        tool_sag, rod_sag = (None if sag is None else min(sag, basis / 2) for sag in (tool_sag, rod_sag))
    shape = make_bead(basis, neck, tool_sag_mm=tool_sag, rod_sag_mm=rod_sag, rod_mm=rod_mm, is_concave=is_concave)
    opened = strained(shape, movement.opening_mm, movement.shear_mm)
    closed = strained(shape, -movement.closing_mm)
    sealing = window.find_window(judged, movement, capability, gap) if judged > 0 else window.NO_WIDTH
    verdict, reason = _verdict(widths)
    notes += _notes(joint, project, sealant, movement, widths, rule_depth, shape, is_porous, neck, kind)
    steps = list(movement.steps)
    steps += width.width_steps(movement, capability, sealant.class_label, gap, list(widths.needs))
    chosen_tolerance = widths.tolerance_rss_mm if site["tolerance_method"] == "root-sum-square" else widths.tolerance_worst_mm
    steps += width.tolerance_steps(widths.tolerance_parts_mm, widths.tolerance_worst_mm, widths.tolerance_rss_mm, widths.required_mm, widths.design_mm, widths.increment_mm, chosen_tolerance)
    if kind == "lap" and values["neck"] is None:
        steps.append(depth.lap_step(basis, chosen_rule.bond_least_mm, neck))
    elif rule_depth is not None and values["neck"] is None:
        steps.append(depth.depth_step(rule_depth, basis, is_porous=is_porous))
    if kind != "lap":
        rod_step = backing.backing_step(rod, rod_type, basis)
        if rod_step:
            steps.append(rod_step)
    steps += bead_steps(shape)
    if kind != "lap":
        steps += strain_steps(shape, opened, closed)
    steps += window.window_steps(judged, movement, capability, gap, sealing)
    return Judgement(
        joint, sealant, use, verdict, reason, elements, capability, movement, widths, rule_depth,
        () if kind == "lap" else tuple(depth.all_rules(basis, is_porous=is_porous)), neck, "entered" if values["neck"] is not None else "rule",
        rod, shape, opened, closed, sealing, tuple(steps), tuple(dict.fromkeys(notes)),
    )  # fmt: skip


def _practical_limits(sealant: Sealant, rule: catalogue.DepthRule) -> tuple[float | None, str, float | None, str]:
    """Least and greatest width in practice and who says so; the user's data sheet wins over the family."""
    least: list[tuple[float, str]] = []
    most: list[tuple[float, str]] = []
    own_least, own_most = sealant.values["width_least"], sealant.values["width_most"]
    family = sealant.family
    if own_least is not None:
        least.append((own_least, "data sheet of the sealant"))
    elif family is not None and family.width_least_mm is not None:
        least.append((family.width_least_mm, f"usual for {family.label}"))
    if own_most is not None:
        most.append((own_most, "data sheet of the sealant"))
    elif family is not None and family.width_most_mm is not None:
        most.append((family.width_most_mm, f"usual for {family.label}"))
    if rule.width_least_mm is not None:
        least.append((rule.width_least_mm, f"rule set {rule.label}"))
    if rule.width_most_mm is not None:
        most.append((rule.width_most_mm, f"rule set {rule.label}"))
    low = max(least, default=(None, ""), key=lambda item: item[0] or 0.0)
    high = min(most, default=(None, ""), key=lambda item: item[0] or 0.0)
    return low[0], low[1], high[0], high[1]


def _widths(joint: JointInput, project: Project, sealant: Sealant, capability: width.Capability, movement: Movement, gap: float, rule: catalogue.DepthRule) -> Widths:
    site = project.site
    found = width.needs(movement, capability, gap)
    top = width.governing(found)
    parts = {name: _site_or_own(joint, project, key) or 0.0 for name, key in (("fabrication", "fabrication_tolerance"), ("erection", "erection_tolerance"), ("spacing", "spacing_tolerance"))}
    worst, rss = width.tolerances(parts)
    least, least_name, most, most_name = _practical_limits(sealant, rule)
    increment = site["increment"] or 1.0

    def design(required: float, tolerance: float) -> float:
        return width.round_up_to_increment(max(required + tolerance, least or 0.0, increment), increment)

    by_rss = site["tolerance_method"] == "root-sum-square"
    chosen = rss if by_rss else worst
    designed = design(top.width_mm, chosen)
    present = joint.values["width"]
    built = joint.values["width_is"] == "built"
    judged = designed - chosen if present is None else present if built else present - chosen
    least_judged = max(judged, 1e-6)
    use = top.width_mm / least_judged if judged > 0 else float("inf")
    classes, smallest = _by_class(sealant, capability, movement, gap, lambda required: design(required, chosen), judged if present is not None else None)
    other = width.EACH_WAY if capability.convention == width.TOTAL_SWING else width.TOTAL_SWING
    other_capability = width.capability_of(sealant, other)
    other_required = None
    if other_capability.is_known:
        # A lap's slide differs between the conventions, so the budget is made anew.
        elsewhere = budget(movement.kind, movement.elements, joint.causes, movement.seal_from_c, movement.seal_to_c, total_swing=other == width.TOTAL_SWING)
        other_required = width.governing(width.needs(elsewhere, other_capability, gap)).width_mm
    scale = width.greatest_scale(judged, movement, capability, gap) if judged > 0 else None
    return Widths(
        tuple(found), top, top.width_mm, parts, worst, rss, design(top.width_mm, worst), design(top.width_mm, rss), designed,
        least, least_name, most, most_name, present, judged, use, classes, smallest, other_required, other, scale, increment, by_rss,
    )  # fmt: skip


def _by_class(sealant: Sealant, capability: width.Capability, movement: Movement, gap: float, design: Any, present_mm: float | None) -> tuple[tuple[ClassRow, ...], catalogue.MovementClass | None]:
    rows = []
    for row in catalogue.classes().values():
        able = width.capability_of(row, capability.convention)
        if not able.is_known:
            continue
        required = width.governing(width.needs(movement, able, gap)).width_mm
        rows.append(ClassRow(row, required, design(required), None if present_mm is None else required <= present_mm * (1 + 1e-9)))
    standard = next((row.row.standard for row in rows if row.row.id == sealant.class_id), None)
    able_rows = [row for row in rows if row.holds_present and (standard is None or row.row.standard == standard)]
    able_rows = able_rows or [row for row in rows if row.holds_present]
    smallest = max(able_rows, key=lambda row: row.required_mm).row if able_rows else None
    return tuple(rows), smallest


def _verdict(widths: Widths) -> tuple[str, str]:
    if widths.present_mm is None:
        if widths.practical_most_mm is not None and widths.design_mm > widths.practical_most_mm + 1e-9:
            return BEYOND, "practical-most"
        return WITHIN, "design"
    if widths.use_fraction > 1.0 + 1e-9:
        return BEYOND, "class"
    if widths.practical_least_mm is not None and widths.present_mm < widths.practical_least_mm - 1e-9:
        return BEYOND, "practical-least"
    if widths.practical_most_mm is not None and widths.present_mm > widths.practical_most_mm + 1e-9:
        return BEYOND, "practical-most"
    if widths.use_fraction > AT_LIMIT_USE:
        return AT_LIMIT, "class"
    return WITHIN, "class"


def _notes(joint: JointInput, project: Project, sealant: Sealant, movement: Movement, widths: Widths, rule_depth: depth.RuleDepth | None,
           shape: Bead, is_porous: bool, neck: float, kind: str) -> list[Note]:  # fmt: skip
    notes: list[Note] = []
    if kind == "butt" and any(side["length_along"] for side in (joint.side_a, joint.side_b)):
        notes.append(Note("warning", "A length that slips along the joint is entered, but the kind is butt: it is not counted. Choose butt with slip to count it."))
    for limit, reached, word in ((movement.seal_to_c, movement.hot_c, "warmer than the elements ever get"), (movement.seal_from_c, movement.cold_c, "colder than the elements ever get")):
        outside = limit is not None and (limit > reached if "warmer" in word else limit < reached)
        if outside:
            notes.append(Note("note", f"The sealing range reaches {word}; it is counted as entered."))
    if kind != "lap" and rule_depth is not None and not rule_depth.covers_width:
        notes.append(Note("warning", f"This width is {rule_depth.width_note} of the rule set in force; its nearest depth is shown. Ask the designer."))
    least_bond = rule_depth.rule.bond_least_mm if rule_depth is not None else None
    if least_bond is not None and shape.bond_mm < least_bond - 1e-9:
        notes.append(Note("warning", "The bond at the faces is shallower than the rule set's least bond."))
    if kind != "lap" and neck > shape.width_mm + 1e-9:
        notes.append(Note("warning", "The bead is deeper than it is wide: it strains more at its face for the same movement."))
    if rule_depth is not None and joint.values["neck"] is not None and not rule_depth.least_mm - 1e-9 <= neck <= rule_depth.most_mm + 1e-9:
        notes.append(Note("warning", "The depth entered is outside what the rule set in force allows."))
    if widths.practical_most_mm is not None and widths.design_mm > widths.practical_most_mm + 1e-9:
        notes.append(Note("warning", f"The width needed is above the greatest that is practical ({widths.practical_most_name}): more joints, a higher class, or another detail."))
    for item in movement.elements:
        if item.lacks_moisture_figure and item.effective_mm:
            notes.append(Note("note", f"The tables give no moisture movement for {item.substrate.label.lower()}; none is counted unless you enter it."))
    family = sealant.family
    if family is not None and sealant.extension_fraction is not None and sealant.extension_fraction > family.movement_high_fraction + 1e-9:
        notes.append(Note("warning", f"{sealant.class_label} is more than is usual for {family.label.lower()}; check the data sheet."))
    return notes
