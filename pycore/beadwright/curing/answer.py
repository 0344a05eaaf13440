"""The whole cure answer: each run's clock, movement while green and best hour, and the air of the room."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from math import sqrt
from typing import Any

from attrs import frozen

from .. import catalogue
from ..design.inputs import Project, Sealant
from ..design.joint import REFERRED, Judgement
from ..physics import humidity, room_air
from ..working import DEFINITION, ENTERED, MEMORY, Issue, Step, Value
from . import air, green, two_part
from .front import (
    DEEP_MM,
    Rate,
    Reach,
    bonus_faces,
    open_faces,
    permeation_of,
    rate_of,
    reach_of,
    reach_steps,
)
from .green import Green, Hour
from .inputs import CureInput, Run
from .stages import StageTime, doses_of, stages_of
from .weather import (
    CAUTIOUS,
    PERMEATION,
    VAPOUR,
    Climate,
    climate_of,
    dose_rate,
    pieces_of,
    steady_climate,
)

COLD_C, HOT_C, DRY_FRACTION = 4.0, 40.0, 0.30
GREEN_SHARE_ONE, GREEN_SHARE_TWO = "one-part", "two-part-fast"


@frozen
class RunAnswer:
    """One run: its rate, its section and its moments; parts are None where something is missing, and `trouble` says what."""

    run: Run
    judged: Judgement | None
    sealant: Sealant | None
    is_planned: bool
    start_h: float | None
    trouble: str
    trouble_value: str = ""
    rate: Rate | None = None
    reach: Reach | None = None
    climate: Climate | None = None
    stages: tuple[StageTime, ...] = ()
    throat_h: float | None = None
    green: Green | None = None
    green_limit: float | None = None
    hours: tuple[Hour, ...] = ()
    best: Hour | None = None
    bonus: tuple[tuple[str, ...], float | None] | None = None
    pot: two_part.Speed | None = None
    setting: two_part.Speed | None = None
    pot_h: float | None = None
    warnings: tuple[tuple[str, float | None], ...] = ()
    dew_c: float | None = None
    steps: tuple[Step, ...] = ()

    @property
    def is_indoors(self) -> bool:
        """Whether it cures in the air of the room."""
        return self.run.values["place"] == "room"

    def stage(self, key: str) -> StageTime | None:
        """One of its stages by key."""
        return next((item for item in self.stages if item.stage.id == key), None)


@frozen
class RoomAnswer:
    """The room: what is set free and how the air stands to the limits; `trouble` says what is missing."""

    trouble: str
    sealant: Sealant | None = None
    byproduct: catalogue.Byproduct | None = None
    share_fraction: float | None = None
    room_m3: float | None = None
    changes_per_h: float | None = None
    mixing: float | None = None
    packages: float | None = None
    source: air.Source | None = None
    exposure: air.Exposure | None = None
    against: tuple[air.Against, ...] = ()
    curve: tuple[tuple[float, float], ...] = ()
    through_known: bool = True
    water_g: float | None = None
    warnings: tuple[str, ...] = ()
    steps: tuple[Step, ...] = ()

    @property
    def governing(self) -> air.Against | None:
        """The limit that asks for the most."""
        return max(self.against, key=lambda item: item.found_mg_m3 / item.limit_mg_m3, default=None)


@frozen
class CureAnswer:
    """Everything, in core units."""

    entered: CureInput
    climate: Climate
    has_weather: bool
    runs: tuple[RunAnswer, ...]
    room: RoomAnswer | None


def cure_answer(entered: CureInput, project: Project, judged: Mapping[str, Judgement]) -> CureAnswer:
    """Reckon the cure part of a job.

    Parameters
    ----------
    entered : CureInput
        As read; findings of the reckoning are added to its `reads`.
    project : Project
        What all joints share.
    judged : Mapping
        The joints that the cure part names, judged, by id.
    """
    settings = entered.settings
    pieces = pieces_of(entered.weather, entered.clock)
    climates: dict[float, Climate] = {}

    def rate_for(permeation: float) -> Callable[[float, float], float]:
        return lambda air_c, damp: dose_rate(air_c, damp, settings["model"] or CAUTIOUS, permeation)

    def climate_for(permeation: float, *, indoors: bool = False) -> Climate:
        room = entered.room
        if indoors and room is not None and room["air"] is not None and room["humidity"] is not None:
            return steady_climate(room["air"], room["humidity"], rate_for(permeation))
        if permeation not in climates:
            climates[permeation] = climate_of(pieces, settings["after"] or "mean", rate_for(permeation))
        return climates[permeation]

    runs = tuple(_run(run, entered, project, judged, climate_for) for run in entered.runs)
    if not pieces and any(not item.is_indoors for item in runs):
        entered.reads.add(Issue("/cure/weather", "no-weather", "warning", "No weather is given: the clock runs at 23 °C and 50 % humidity. Type some days to trust it."))
    room = None if entered.room is None else _room(entered.room, entered, project, judged)
    return CureAnswer(entered, climate_for(permeation_of(None, settings)), bool(pieces), runs, room)


# ---- runs ---------------------------------------------------------------------------------------


def _run(run: Run, entered: CureInput, project: Project, judged: Mapping[str, Judgement], climate_for: Callable[..., Climate]) -> RunAnswer:
    joint = judged.get(run.values["joint"] or "")
    sealant = joint.sealant if joint is not None else None
    dew = None
    if run.values["air"] is not None and run.values["humidity"]:
        dew = humidity.dew_point_c(run.values["air"], run.values["humidity"])
    blank = RunAnswer(run, joint, sealant, run.start_h is None, run.start_h, "", dew_c=dew)

    def stopped(trouble: str, value: str = "") -> RunAnswer:
        return RunAnswer(run, joint, sealant, blank.is_planned, run.start_h, trouble, value, dew_c=dew)

    indoors = blank.is_indoors
    if indoors and (entered.room is None or entered.room["air"] is None or entered.room["humidity"] is None):
        return stopped("no-room")
    if joint is None:
        return stopped("no-joint")
    if joint.verdict == REFERRED:
        return stopped("referred", joint.reason)
    if sealant is None or sealant.family is None:
        return stopped("no-sealant")
    if sealant.family.cure == "two-part":
        return _two_part_run(blank, entered, project, climate_for(0.0, indoors=indoors))
    rate = rate_of(sealant, entered.settings, entered.cuts)
    if rate is None:
        return stopped("dries" if sealant.family.cure == "drying" else "no-rate", sealant.family.label)
    section = _section(run, joint, entered)
    if isinstance(section, str):
        return stopped(section)
    shape, lengths = section
    faces = open_faces(run.values["front"] or "open", run.values["back"] or "none")
    if shape == "fillet":
        faces = tuple(face for face in faces if face != "back")
    if not faces:
        return stopped("no-path")
    reach = reach_of(shape, lengths, faces)
    climate = climate_for(rate.permeation_j_mol, indoors=indoors)
    gates = _gates(entered, project, joint, sealant)
    green_stage = catalogue.cure_stages()["movement"]
    green_dose = doses_of(green_stage, rate, reach, entered.settings)[1]
    slide, width = _movement_of(joint, lengths[0])
    hours = tuple(green.hours_to_seal(slide, width, green_dose, climate, entered.clock, gates)) if not indoors else ()
    best = green.best_of(hours)
    start = run.start_h if run.start_h is not None else best.at_h if best is not None else climate.begins_h if climate.pieces else None
    if start is None:
        return stopped("no-time")
    stages = stages_of(start, rate, reach, climate, entered.settings, sealant.family)
    moves = next(item for item in stages if item.stage.id == "movement")
    surface = run.values["surface"] if run.start_h is not None else None
    moved = green.movement_while_green(start, moves.at_h, slide, width, climate, surface) if slide > 0.0 and not indoors else None
    throat = climate.when(start, (reach.throat_mm / rate.k_mm) ** 2)
    dose = 2.0 * reach.reach_mm2 / rate.k_mm**2
    steps = reach_steps(reach, rate, dose) + _green_steps(moved, slide)
    return RunAnswer(
        run, joint, sealant, run.start_h is None, start, "", "", rate, reach, climate, stages, None if throat is None else throat - start, moved,
        _green_limit(entered, project, GREEN_SHARE_ONE), hours, best, _bonus(joint, shape, lengths, faces, climate, start, rate), warnings=_warnings(reach, faces, climate, start, stages, indoors=indoors), dew_c=dew, steps=tuple(steps),
    )  # fmt: skip


def _section(run: Run, joint: Judgement, entered: CureInput) -> tuple[str, tuple[float, float, float, float]] | str:
    """Shape and lengths of the bead, or the word for what is missing."""
    if run.values["shape"] == "fillet":
        a, b, bulge = run.values["leg_a"], run.values["leg_b"], run.values["bulge"] or 0.0
        if a is None or b is None:
            return "no-legs"
        chord = sqrt(a * a + b * b)
        deepest = 0.5 * chord * (min(a, b) / (chord + max(a, b)))
        if not -0.98 * deepest <= bulge <= 0.5 * chord:
            entered.reads.add(Issue(f"{run.path}/bulge", "out-of-shape", "error", "Face bulges by: so deep an arc does not fit between these legs; a flat face is used.", value=bulge, unit="mm"))
            bulge = 0.0
        return "fillet", (a, b, bulge, 0.0)
    bead = joint.bead
    if bead is None:
        return "not-judged"
    if joint.movement is not None and joint.movement.kind == "lap":
        return "hourglass", (bead.width_mm, bead.neck_mm, 0.0, 0.0)
    half = 0.5 * bead.width_mm
    return "hourglass", (bead.width_mm, bead.neck_mm, min(bead.tool_sag_mm, half), min(bead.rod_sag_mm, half))


def _movement_of(joint: Judgement, width_mm: float) -> tuple[float, float]:
    """Movement per kelvin that works on the bead, and the width that it works on."""
    if joint.movement is None:
        return 0.0, width_mm
    return joint.movement.rate_mm_per_k, joint.bead.width_mm if joint.bead is not None else width_mm


def _gates(entered: CureInput, project: Project, joint: Judgement, sealant: Sealant) -> green.Gates:
    family = sealant.family
    assert family is not None
    lows = [sealant.values["apply_from"] if sealant.values["apply_from"] is not None else family.apply_low_c]
    highs = [sealant.values["apply_to"] if sealant.values["apply_to"] is not None else family.apply_high_c]
    for key, places in (("seal_from", lows), ("seal_to", highs)):
        own = joint.joint.values[key] if joint.joint.values[key] is not None else project.site[key]
        places.append(own)
    low = max((item for item in lows if item is not None), default=None)
    high = min((item for item in highs if item is not None), default=None)
    margin = project.site["dew_margin"]
    return green.Gates(entered.work_h, low, high, 3.0 if margin is None else margin)


def _green_limit(entered: CureInput, project: Project, row: str) -> float:
    own, site = entered.settings["movement_limit"], project.site["green_limit"]
    if own is not None:
        return float(own)
    if row == GREEN_SHARE_ONE and site is not None:
        return float(site)
    return catalogue.green_movement()[row].value


def _green_steps(moved: Green | None, rate_mm_per_k: float) -> list[Step]:
    if moved is None:
        return []
    change = max(moved.opening_mm, moved.closing_mm)
    return [
        Step("green-rate", "Movement of the joint per kelvin", "m", "Σ(α L) of both sides", "", {}, Value(rate_mm_per_k, "rate"), "Definition", DEFINITION),
        Step("green", "Movement while green, over the width", "g", "max |m (T_seal − T)| / w", "{c} / {w}", {"c": Value(change, "length"), "w": Value(moved.width_mm, "length")},
             Value(moved.share, "percent"), "Definition: elements follow the surface without lag; green until the front is at half the depth (common practice)", DEFINITION),
    ]  # fmt: skip


def _bonus(joint: Judgement, shape: str, lengths: tuple[float, float, float, float], faces: tuple[str, ...], climate: Climate, start: float, rate: Rate) -> tuple[tuple[str, ...], float | None] | None:
    """Hours to cure through if rod and materials breathe as well; None where they add nothing."""
    more = tuple(face for face in bonus_faces(joint, shape) if face not in faces)
    if not more:
        return None
    reached = climate.when(start, 2.0 * reach_of(shape, lengths, (*faces, *more)).reach_mm2 / rate.k_mm**2)
    return more, None if reached is None else reached - start


def _warnings(reach: Reach, faces: tuple[str, ...], climate: Climate, start: float, stages: tuple[StageTime, ...], *, indoors: bool) -> tuple[tuple[str, float | None], ...]:
    """Doubts about this front, each with the value that raised it."""
    found: list[tuple[str, float | None]] = []
    through = next(item for item in stages if item.stage.id == "through")
    end = min(start + 24.0 * 30.0, through.at_h if through.at_h is not None else start + 24.0 * 30.0)
    seen = [climate.at(start + hour) for hour in range(int(end - start) + 1)]
    coldest, hottest, driest = min(item.air_c for item in seen), max(item.air_c for item in seen), min(item.humidity_fraction for item in seen)
    if coldest <= 0.0:
        found.append(("frost", coldest))
    elif coldest < COLD_C:
        found.append(("cold", coldest))
    if hottest > HOT_C:
        found.append(("hot", hottest))
    if driest < DRY_FRACTION:
        found.append(("dry", driest))
    if len(faces) == 1 and reach.depth_mm > DEEP_MM:
        found.append(("deep", reach.depth_mm))
    if through.at_h is None:
        found.append(("never", None))
    if indoors:
        found.append(("indoors", None))
    elif not climate.pieces:
        found.append(("no-weather", None))
    elif through.late_h is None or through.late_h > climate.ends_h or start < climate.begins_h:
        found.append(("beyond-weather", climate.ends_h))
    if not reach.is_solved:
        found.append(("no-numpy", None))
    return tuple(found)


def _two_part_run(blank: RunAnswer, entered: CureInput, project: Project, climate: Climate) -> RunAnswer:
    """Pot life and cure of a mixed sealant; its stages wait for temperature alone."""
    assert blank.sealant is not None and blank.judged is not None
    row = next((item for item in entered.two_part if item["sealant"] == blank.sealant.id), None)
    pot = None if row is None else two_part.speed_of(row["warm"], row["warm_pot"], row["cool"], row["cool_pot"])
    setting = None if row is None else two_part.speed_of(row["warm"], row["warm_cure"], row["cool"], row["cool_cure"])
    if row is not None and setting is None and row["warm_cure"] is not None and row["cool_cure"] is not None:
        entered.reads.add(Issue(f"{row['path']}/cool_cure", "contradiction", "error", "These figures say that warmth slows the cure; check which is which."))
    if setting is None:
        return RunAnswer(blank.run, blank.judged, blank.sealant, blank.is_planned, blank.start_h, "no-figures", pot=pot, dew_c=blank.dew_c)
    bead = blank.judged.bead
    slide, width = _movement_of(blank.judged, bead.width_mm if bead is not None else 0.0)
    start = blank.start_h
    hours: tuple[Hour, ...] = ()
    best = None
    if climate.pieces and width > 0.0:
        # Arrhenius time at 23 degC as a dose of the weather would need its own climate: the time at the hour's own surface is near enough to rank hours
        gates = _gates(entered, project, blank.judged, blank.sealant)
        hours = tuple(green.hours_to_seal(slide, width, 0.5 * setting.hours(23.0) / 24.0, climate, entered.clock, gates))
        best = green.best_of(hours)
        if start is None and best is not None:
            start = best.at_h
    if start is None:
        start = climate.begins_h if climate.pieces else None
    if start is None:
        return RunAnswer(blank.run, blank.judged, blank.sealant, True, None, "no-time", pot=pot, setting=setting, dew_c=blank.dew_c)
    through = two_part.cured_at(start, setting, climate)
    half = two_part.cured_at(start, two_part.Speed(0.5 * setting.time_h, setting.at_c, setting.activation_j_mol, setting.is_rule_of_thumb, setting.from_c, setting.to_c), climate)
    rows = catalogue.cure_stages()
    stages = []
    for key, moment in (("movement", half), ("through", through), ("paint", through), ("adhesion", through), ("immersion", through)):
        at = None if moment is None else max(moment, start + 24.0 * rows[key].least_d)
        paints = key != "paint" or blank.sealant.family is None or blank.sealant.family.is_paintable
        stages.append(StageTime(rows[key], at, at, at, paints, "" if paints else f"{blank.sealant.family.label if blank.sealant.family else 'This sealant'} does not take paint."))
    moved = green.movement_while_green(start, half, slide, width, climate, blank.run.values["surface"]) if slide > 0.0 and width > 0.0 and not blank.is_indoors else None
    at_seal = climate.at(start).surface_c if blank.run.values["surface"] is None else blank.run.values["surface"]
    warnings: list[tuple[str, float | None]] = []
    if setting.is_outside(at_seal):
        warnings.append(("outside-figures", at_seal))
    if setting.is_rule_of_thumb:
        warnings.append(("rule-of-thumb", None))
    if through is None:
        warnings.append(("never", None))
    if blank.is_indoors:
        warnings.append(("indoors", None))
    elif not climate.pieces:
        warnings.append(("no-weather", None))
    elif through is None or through > climate.ends_h or start < climate.begins_h:
        warnings.append(("beyond-weather", climate.ends_h))
    status = MEMORY if setting.is_rule_of_thumb else ENTERED
    source = "twice as fast for each 10 K: rule of thumb, from memory" if setting.is_rule_of_thumb else "figures of the sealant at two temperatures, entered; straight line of ln t over 1/T (Arrhenius)"
    steps = [
        Step("activation", "Heat of activation, kJ/mol", "E", "R ln(t_cool / t_warm) / (1/T_cool − 1/T_warm)", "", {}, Value(setting.activation_j_mol / 1000.0, "number"), source, status),
        Step("pot", "Pot life at the surface when sealed, h", "t_pot", "t_ref exp(E/R (1/T − 1/T_ref))", "with T = {T}", {"T": Value(at_seal, "temperature")}, Value(pot.hours(at_seal) if pot else None, "number"), source, status),
    ]  # fmt: skip
    return RunAnswer(
        blank.run, blank.judged, blank.sealant, blank.is_planned, start, "", "", None, None, climate, tuple(stages), None, moved,
        _green_limit(entered, project, GREEN_SHARE_TWO), hours, best, None, pot, setting, pot.hours(at_seal) if pot else None, tuple(warnings), blank.dew_c, tuple(steps) + tuple(_green_steps(moved, slide)),
    )  # fmt: skip


# ---- room ---------------------------------------------------------------------------------------


def _room(values: Mapping[str, Any], entered: CureInput, project: Project, judged: Mapping[str, Judgement]) -> RoomAnswer:
    joint = judged.get(values["joint"] or "")
    sealant = project.sealants.get(values["sealant"] or "") or (joint.sealant if joint is not None else None)
    sides = [values[key] for key in ("length", "width", "height")]
    if None in sides:
        for key in ("length", "width", "height"):
            if values[key] is None and f"/cure/room/{key}" not in entered.reads.places:
                entered.reads.add(Issue(f"/cure/room/{key}", "missing", "warning", f"Room: {key} is not given yet; the air cannot be reckoned."))
        return RoomAnswer("no-room", sealant)
    if sealant is None or sealant.family is None:
        return RoomAnswer("no-sealant")
    row = catalogue.byproducts().get(sealant.family.id)
    if row is None:
        return RoomAnswer("nothing-known", sealant)
    room_m3 = sides[0] * sides[1] * sides[2] / 1e9
    mixing, changes = values["mixing"], values["air_change"]
    needed = ("packages", "package", "mixing", "air_change", "air", "humidity")
    if any(values[key] is None for key in needed):
        return RoomAnswer("wrong-figures", sealant, row)
    share = values["share"] if values["share"] is not None else row.share_high_fraction
    density = values["density"] if values["density"] is not None else row.density_g_ml
    volume = values["packages"] * values["package"]
    mass = room_air.released_g(volume, density, share, row.active_g_mol, row.released_per_active, row.agent_g_mol)
    rate = rate_of(sealant, entered.settings, entered.cuts)
    assert rate is not None
    # the quicker of both models, as the quicker release is the worse one here
    dose_a_day = max(dose_rate(values["air"], values["humidity"], model, rate.permeation_j_mol) for model in (VAPOUR, PERMEATION))
    if dose_a_day <= 0.0:
        return RoomAnswer("no-cure", sealant, row, share, room_m3, changes, mixing, values["packages"])
    depth, known = _room_depth(joint, values)
    # the quick end of the rate, so that the release is not made too slow
    through_h = 24.0 * (depth / rate.fast_mm) ** 2 / dose_a_day
    source = air.Source(mass, through_h, values["spread"] or 0.0)
    effective = changes / mixing
    found = air.exposure(room_m3, effective, source)
    rows = tuple(air.against(limit, found, values["packages"], room_m3, mixing, source) for limit in air.limits_for(row.agent, project.region))
    end = 24.0
    curve = tuple((end * (index / 60.0) ** 2, air.concentration_mg_m3(end * (index / 60.0) ** 2, room_m3, effective, source)) for index in range(61))
    warnings = []
    water = volume * density * share / row.active_g_mol * (1.5 if row.released_per_active > 1.0 else 0.5) * 18.015
    held = room_m3 * humidity.vapour_pressure_pa(values["air"], values["humidity"]) * 18.015 / (8.314462618 * (values["air"] + 273.15))
    if water > held * (1.0 + changes * 24.0):
        warnings.append("room-too-dry")
    if "isocyanate" in sealant.family.tags:
        warnings.append("isocyanate")
    steps = (
        Step("mass", f"{row.agent_label} set free, g", "m", "V ρ s / M_x · n · M_a", f"{{V}} × {{r}} × {{s}} / {row.active_g_mol} × {row.released_per_active:g} × {row.agent_g_mol}",
             {"V": Value(volume, "number"), "r": Value(density, "number"), "s": Value(share, "percent")}, Value(mass, "number"),
             f"Stoichiometry of {row.active}; share: {'entered' if values['share'] is not None else 'upper end, ' + row.source}", ENTERED if values["share"] is not None else row.status, remark="V in ml, ρ in g/ml."),
        Step("release", "Time until all is free, h", "t_f", "24 (A / b / k_quick)² / f²", "24 × ({d} / {k})² / {f}", {"d": Value(depth, "length"), "k": Value(rate.fast_mm, "length"), "f": Value(dose_a_day, "number")},
             Value(through_h, "number"), "Front law; section over open length as the depth, the quick end of the rate", DEFINITION),
        Step("peak", "Peak, mg/m³", "C", "largest of Σ m_i / (V √(n t_f)) · D(√(n t))", "with V = {V} m³, n = {n} / {K} per hour",
             {"V": Value(room_m3, "number"), "n": Value(changes, "number"), "K": Value(mixing, "number")}, Value(found.peak_mg_m3, "number"),
             "Derived: well-mixed room with a release that goes with √t, D Dawson's integral; mixing factor by common practice", "derived"),
    )  # fmt: skip
    return RoomAnswer("", sealant, row, share, room_m3, changes, mixing, values["packages"], source, found, rows, curve, known, water, tuple(warnings), steps)


def _room_depth(joint: Judgement | None, values: Mapping[str, Any]) -> tuple[float, bool]:
    """Mean depth of the bead behind its open face; a shallow one where no joint is named, since it gives off faster."""
    if joint is None or joint.bead is None:
        return 4.0, False
    bead = joint.bead
    return bead.area_mm2 / bead.width_mm, True
