"""The cure answer as people read it: bands, tables, drawings, calendar events, sealing record."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from attrs import field, frozen

from ..curing.answer import CureAnswer, RoomAnswer, RunAnswer, cure_answer
from ..curing.clock import Clock
from ..curing.front import Rate, Reach
from ..curing.green import Hour
from ..curing.inputs import read_cure
from ..curing.stages import StageTime
from ..design.inputs import Project, read_joint
from ..design.joint import judge
from ..physics import cure, section_solve
from ..physics.section_solve import Picture
from ..quantity import INCH, plain
from ..working import Issue
from . import writing
from .calendar import Event
from .cure_drawing import Bar, curve_svg, section_svg, timeline_svg
from .cure_words import (
    AFTER_WORDS,
    FACE_WORDS,
    ROOM_TROUBLES,
    TROUBLES,
    between,
    doubt,
    duration,
    later,
    moment,
    short_moment,
    span,
)

_TIMELINE_D = 10.0
_DEPTH_TIMES = ((1.0, "1 h"), (6.0, "6 h"), (24.0, "1 d"), (48.0, "2 d"), (72.0, "3 d"), (168.0, "7 d"), (336.0, "14 d"), (672.0, "28 d"))
_MARKS_D = (0.25, 1.0, 2.0, 4.0, 7.0, 14.0, 28.0, 56.0)
_ISOCYANATE = "Free isocyanate is not reckoned here: it depends on heat and spray more than on cure. Once your lungs react to it, a trace is enough; keep to the limits for MDI and to the training that your law asks for."
SCREENING = "A screening estimate: well-mixed room, nothing taken up by walls, all set free at once as the front passes. It tells when to measure or to open a window, not that a room is safe."
_REFUSED_WORDS = {"rain": "rain", "frost": "frost", "too cold": "too cold", "too hot": "too hot", "dew": "too close to the dew point"}
_SHORT_STAGES = {"skin": "skin", "tack": "tack-free", "rain": "rain", "wash": "wash", "movement": "half", "through": "through", "paint": "paint", "adhesion": "pull test", "immersion": "water"}

Band = dict[str, str]


def _band(key: str, question: str, answer: str, detail: str = "", tone: str = "plain") -> Band:
    return {"key": key, "question": question, "answer": answer, "detail": detail, "tone": tone}


def _table(key: str, title: str, columns: Sequence[tuple[str, str]], rows: Sequence[tuple[Sequence[str], str | None]], note: str) -> dict[str, Any]:
    return {"key": key, "title": title, "columns": [{"label": label, "align": align} for label, align in columns], "rows": [{"cells": list(cells), "mark": mark} for cells, mark in rows], "note": note}


@frozen
class CurePart:
    """The cure part of an evaluation: its dict, findings, readings and calendar events."""

    answer: dict[str, Any]
    issues: tuple[Issue, ...] = ()
    readings: Mapping[str, dict[str, object]] = field(factory=dict)
    events: tuple[Event, ...] = ()
    clock: Clock = field(factory=lambda: Clock("", None))


def cure_part(raw: object, project: Project, joints: Mapping[str, tuple[str, Mapping[str, Any]]], joint_ids: Sequence[str], job_id: str) -> CurePart:
    """Read, reckon and write the cure part; `joints` holds path and raw row of each joint that it names."""
    entered = read_cure(raw, project, dict.fromkeys(joint_ids))
    judged = {key: judge(read_joint(key, path, row, project), project) for key, (path, row) in joints.items()}
    answer = cure_answer(entered, project, judged)
    shown, issues = cure_dict(answer, project.system)
    return CurePart(shown, (*entered.reads.issues, *issues), entered.reads.readings, tuple(events(answer, job_id)), entered.clock)


def cure_dict(answer: CureAnswer, system: str) -> tuple[dict[str, Any], list[Issue]]:
    """The cure part of an evaluation, and the findings that came up while it was made."""
    clock = answer.entered.clock
    issues: list[Issue] = []
    runs: dict[str, dict[str, Any]] = {}
    for item in answer.runs:
        key = item.run.id
        while key in runs:
            key += "-x"
        if key != item.run.id:
            issues.append(Issue(f"{item.run.path}/id", "double-id", "error", f"This run has the same id as another; it is called “{key}” here."))
        if item.trouble:
            place, severity, text = TROUBLES[item.trouble]
            if f"{item.run.path}/{place}" not in answer.entered.reads.places:
                issues.append(Issue(f"{item.run.path}/{place}", item.trouble, severity, text.format(item.trouble_value)))
        runs[key] = _run_dict(item, answer, system)
    drawings = []
    if any(item.stages for item in answer.runs):
        drawings.append({"key": "timeline", "title": "Runs and weather", "run": None, "svg": _timeline(answer, system)})
    room = None if answer.room is None else _room_dict(answer.room, system)
    shown = {
        "short": False,
        "zone": clock.name,
        "answers": _bands(answer, room, system),
        "tables": _weather_tables(answer, system),
        "drawings": drawings,
        "weather": _weather_dict(answer),
        "runs": runs,
        "room": room,
        "notes": [],
        "events": len(events(answer, "")),
    }
    return shown, issues


# ---- the whole ----------------------------------------------------------------------------------


def _bands(answer: CureAnswer, room: dict[str, Any] | None, system: str) -> list[Band]:
    bands: list[Band] = []
    clock = answer.entered.clock
    timed = [(item, item.stage("through")) for item in answer.runs]
    known = [(item, stage) for item, stage in timed if stage is not None]
    if known:
        reached = [(item, stage.at_h) for item, stage in known if stage.at_h is not None]
        if len(reached) == len(known):
            last, at = max(reached, key=lambda pair: pair[1])
            bands.append(_band("all-through", "When is everything cured through?", moment(at, clock), f"Last: {_name(last)}." if len(known) > 1 else "", "plain"))
        else:
            bands.append(_band("all-through", "When is everything cured through?", "Not in this weather", "At least one run would not cure within three years.", "bad"))
    worst = max((item for item in answer.runs if item.green is not None and item.green_limit is not None), key=lambda item: item.green.share / max(item.green_limit, 1e-9) if item.green and item.green_limit is not None else 0.0, default=None)
    if worst is not None and worst.green is not None and worst.green_limit is not None:
        good = worst.green.share <= worst.green_limit + 1e-9
        bands.append(_band("worst-green", "Does any bead move too much while green?", "No" if good else "Yes", f"{_name(worst)}: {writing.percent(worst.green.share)} of the width, limit {writing.percent(worst.green_limit)}.", "ok" if good else "bad"))
    if room is not None and room["answers"]:
        bands.append(room["answers"][0])
    waiting = [item for item in answer.runs if item.trouble]
    if waiting:
        bands.append(_band("waiting", "What is missing?", f"{len(waiting)} run{'s' if len(waiting) > 1 else ''} without a clock", " ".join(f"{_name(item)}: {TROUBLES[item.trouble][2].format(item.trouble_value)}" for item in waiting[:3]), "warn"))
    return bands


def _name(item: RunAnswer) -> str:
    return item.run.values["name"] or (item.judged.joint.values["name"] if item.judged is not None and item.judged.joint.values["name"] else item.run.id)


def _weather_dict(answer: CureAnswer) -> dict[str, Any]:
    climate, clock = answer.climate, answer.entered.clock
    given = answer.has_weather
    return {
        "given": given, "from": clock.text(climate.begins_h) if given else None, "to": clock.text(climate.ends_h) if given else None,
        "after": answer.entered.settings["after"], "rows": len(answer.entered.weather),
        "equivalent_days_per_day": climate.day_dose,
    }  # fmt: skip


def _weather_tables(answer: CureAnswer, system: str) -> list[dict[str, Any]]:
    climate, clock = answer.climate, answer.entered.clock
    if not answer.has_weather:
        return []
    rows: list[tuple[Sequence[str], str | None]] = []
    at = climate.begins_h
    while at < climate.ends_h - 1e-6 and len(rows) < 60:
        end = min(climate.ends_h, at + 24.0)
        pieces = [piece for piece in climate.pieces if piece.to_h > at + 1e-9 and piece.from_h < end - 1e-9]
        airs = [piece.air_c for piece in pieces]
        damp = sum(piece.humidity_fraction * (piece.to_h - piece.from_h) for piece in pieces) / sum(piece.to_h - piece.from_h for piece in pieces)
        dose = (climate.dose(end) - climate.dose(at)) / ((end - at) / 24.0)
        rows.append((
            (moment(at, clock).split(",")[0], writing.temperature(round(min(airs), 1), system), writing.temperature(round(max(airs), 1), system), writing.percent(round(damp, 2)), "rain" if any(piece.is_wet for piece in pieces) else "", f"{plain(dose * 100, 0)} %"),
            None,
        ))  # fmt: skip
        at = end
    after = AFTER_WORDS[answer.entered.settings["after"] or "mean"]
    return [_table("weather", "Weather as used", (("From", "left"), ("Lowest", "right"), ("Highest", "right"), ("Humidity", "right"), ("", "left"), ("Counts as", "right")), rows,
                   f"Counts as: share of a day at 23 °C (73 °F) and 50 % humidity, for a sealant whose permeability does not change. Outside these days {after}.")]  # fmt: skip


# ---- one run ------------------------------------------------------------------------------------


def _run_dict(item: RunAnswer, answer: CureAnswer, system: str) -> dict[str, Any]:
    clock = answer.entered.clock
    values = item.run.values
    through = item.stage("through")
    shown: dict[str, Any] = {
        "id": item.run.id,
        "name": _name(item),
        "joint": values["joint"],
        "sealant": item.sealant.id if item.sealant is not None else None,
        "is_planned": item.is_planned,
        "start": None if item.start_h is None else clock.text(item.start_h),
        "start_text": "" if item.start_h is None else moment(item.start_h, clock, exact=not item.is_planned),
        "trouble": None if not item.trouble else {"code": item.trouble, "text": TROUBLES[item.trouble][2].format(item.trouble_value)},
        "rate": None if item.rate is None else {"k_mm": item.rate.k_mm, "uncertainty_fraction": item.rate.uncertainty_fraction, "source": item.rate.source, "status": item.rate.status},
        "section": None if item.reach is None else _section_dict(item.reach),
        "through_h": None if through is None or item.start_h is None or through.at_h is None else through.at_h - item.start_h,
        "throat_h": item.throat_h,
        "pot_h": item.pot_h,
        "stages": [_stage_dict(stage, item, clock) for stage in item.stages],
        "green": None if item.green is None else {
            "share_fraction": item.green.share, "limit_fraction": item.green_limit, "opening_mm": item.green.opening_mm, "closing_mm": item.green.closing_mm,
            "width_mm": item.green.width_mm, "until": None if item.green.until_h is None else clock.text(item.green.until_h), "pass": item.green_limit is None or item.green.share <= item.green_limit + 1e-9,
        },
        "best": None if item.best is None else {"at": clock.text(item.best.at_h), "share_fraction": item.best.share, "surface_c": item.best.surface_c},
        "hours": [{"at": clock.text(hour.at_h), "share_fraction": hour.share, "surface_c": hour.surface_c, "refused": hour.refused} for hour in item.hours],
        "dew_c": item.dew_c,
        "record": _record(item, answer, system),
        "steps": [writing.step_lines(step, system) for step in item.steps],
        "notes": [doubt(key, value, system, answer.entered.settings["after"] or "mean") for key, value in item.warnings],
    }  # fmt: skip
    shown["notes"] += _record_notes(item, answer)
    shown["answers"] = _run_bands(item, answer, system)
    shown["tables"] = _run_tables(item, answer, system)
    shown["drawings"] = _run_drawings(item, answer, system)
    shown["headline"] = {"through": short_moment(through.at_h, clock) if through is not None else None, "green": None if item.green is None else writing.percent(item.green.share)}
    return shown


def _section_dict(reach: Reach) -> dict[str, Any]:
    return {
        "shape": reach.shape, "open_faces": list(reach.open_faces), "method": "section" if reach.is_solved else "throat", "reach_mm2": reach.reach_mm2, "depth_mm": reach.depth_mm,
        "throat_mm": reach.throat_mm, "area_mm2": reach.area_mm2, "last_x_mm": reach.last_mm[0] if reach.last_mm else None, "last_y_mm": reach.last_mm[1] if reach.last_mm else None,
    }  # fmt: skip


def _stage_dict(stage: StageTime, item: RunAnswer, clock: Clock) -> dict[str, Any]:
    def since(hours: float | None) -> float | None:
        return None if hours is None or item.start_h is None else hours - item.start_h

    row = stage.stage
    return {
        "key": row.id, "label": row.label, "at": None if stage.at_h is None else clock.text(later(stage.at_h)), "at_text": moment(stage.at_h, clock),
        "hours": since(stage.at_h), "early_h": since(stage.early_h), "late_h": since(stage.late_h), "is_rough": row.is_rough, "applies": stage.applies,
        "text": stage.why_not or row.note, "source": row.source, "status": row.status,
    }  # fmt: skip


def last_point_words(reach: Reach) -> str:
    """Where the last wet point is, in words."""
    if reach.last_mm is None:
        return "at mid-width" if reach.shape == "hourglass" else "in the corner"
    x, y = reach.last_mm
    if reach.shape == "fillet":
        return "in the corner" if x * x + y * y < 0.01 * reach.area_mm2 else "inside the bead"
    width, neck, tool, crown = reach.lengths_mm
    bond = neck + tool + crown
    where = "at the bond face" if abs(x) > 0.45 * width else "at mid-width" if abs(x) < 0.1 * width else "between mid-width and bond face"
    deep = "right at the back" if y > 0.93 * bond - (crown if abs(x) < 0.1 * width else 0.0) else "inside the bead"
    if where == "at the bond face" and deep == "right at the back":
        return "in the bond corner beside the rod" if crown > 0.0 else "at the back"
    return f"{where}, {deep}"


def _run_bands(item: RunAnswer, answer: CureAnswer, system: str) -> list[Band]:
    clock = answer.entered.clock
    if item.trouble or item.start_h is None:
        return []
    bands: list[Band] = []
    through = item.stage("through")
    assert through is not None
    since = [None if moment_h is None else moment_h - item.start_h for moment_h in (through.early_h, through.at_h, through.late_h)]
    band_text = f"; {between(since[0], since[2])}" if through.early_h != through.late_h else ""
    tail = " Counted from the best hour." if item.is_planned and item.best is not None else " Counted from the begin of the weather." if item.is_planned else ""
    bands.append(_band("through", "When is it cured through?", moment(through.at_h, clock), f"{duration(since[1])} after sealing{band_text}.{tail}", "plain" if through.at_h is not None else "bad"))
    if item.reach is not None:
        bands.append(_last_point_band(item, since[1]))
        rain, tack = item.stage("rain"), item.stage("tack")
        if rain is not None and tack is not None:
            bands.append(_band("rain", "When is it safe from a shower?", moment(rain.at_h, clock), f"Skin of {writing.length(rain.stage.value, system)}; tack-free about {duration(None if tack.at_h is None else tack.at_h - item.start_h)} after sealing. Rough."))
    if item.pot_h is not None:
        bands.append(_band("pot", "How long can the mix be worked?", duration(item.pot_h), "At the surface temperature when it is sealed; a full pail heats itself and goes faster."))
    bands += _green_bands(item, answer, system)
    if item.bonus is not None:
        faces = ", ".join(FACE_WORDS[face] for face in item.bonus[0])
        bands.append(_band("bonus", "If rod and materials breathe too?", duration(item.bonus[1]), f"With the {faces} open as well. A bonus, not counted."))
    return bands


def _last_point_band(item: RunAnswer, through_h: float | None) -> Band:
    reach = item.reach
    assert reach is not None
    if not reach.is_solved:
        return _band("last-point", "Where is the last wet point?", "Not solved yet", f"The throat alone says {duration(item.throat_h)}. The true section is solved once numpy has loaded.", "warn")
    detail = f"The throat alone says {duration(item.throat_h)}."
    if item.throat_h and through_h:
        more = through_h / item.throat_h - 1.0
        detail += f" The true section takes {plain(abs(more) * 100, 0)} % {'longer' if more >= 0 else 'less'}." if abs(more) >= 0.005 else " The true section takes as long."
    return _band("last-point", "Where is the last wet point?", last_point_words(reach).capitalize(), detail)


def _green_bands(item: RunAnswer, answer: CureAnswer, system: str) -> list[Band]:
    clock = answer.entered.clock
    bands: list[Band] = []
    if item.green is not None and item.green_limit is not None:
        good = item.green.share <= item.green_limit + 1e-9
        until = f"until {short_moment(item.green.until_h, clock)}" if item.green.until_h is not None else "for three weeks"
        bands.append(_band("green", "Does it move too much while green?", "No" if good else "Yes",
                           f"{writing.percent(item.green.share)} of the width {until}; limit {writing.percent(item.green_limit)}. Opens {writing.length(round(item.green.opening_mm, 2), system)}, closes {writing.length(round(item.green.closing_mm, 2), system)}.", "ok" if good else "bad"))  # fmt: skip
    if item.hours:
        if item.best is None:
            reasons = ", ".join(dict.fromkeys(_REFUSED_WORDS[hour.refused] for hour in item.hours if hour.refused))
            bands.append(_band("best", "Best hour to seal?", "No hour in this weather", f"Every working hour is refused: {reasons}.", "bad"))
        else:
            over = item.green_limit is not None and item.best.share > item.green_limit + 1e-9
            detail = f"Then {writing.percent(item.best.share)} of the width while green, surface {writing.temperature(round(item.best.surface_c, 1), system)}."
            bands.append(_band("best", "Best hour to seal?", moment(item.best.at_h, clock), detail + (" Still too much: shade it, wait for steadier weather or use a faster sealant." if over else ""), "warn" if over else "ok"))
    return bands


def _run_tables(item: RunAnswer, answer: CureAnswer, system: str) -> list[dict[str, Any]]:
    clock = answer.entered.clock
    if item.trouble or item.start_h is None:
        return []
    tables = []
    rows: list[tuple[Sequence[str], str | None]] = []
    for stage in item.stages:
        if not stage.applies:
            rows.append(((stage.stage.label, "no", "", "", stage.why_not), "bad"))
            continue
        since = [None if at is None else at - item.start_h for at in (stage.early_h, stage.at_h, stage.late_h)]
        band = "" if stage.early_h == stage.late_h else span(since[0], since[2])
        rows.append(((stage.stage.label, moment(stage.at_h, clock), duration(since[1]), band, f"{stage.stage.note} [{stage.stage.source}; {stage.stage.status}]"), "chosen" if stage.stage.id == "through" else None))
    note = f"Band: rate {plain((1 - item.rate.uncertainty_fraction) * 100, 0)} to {plain((1 + item.rate.uncertainty_fraction) * 100, 0)} % of its figure. The front runs faster than reckoned after some millimetres, so these are on the slow side." if item.rate is not None else "By temperature alone; depth does not matter."
    tables.append(_table("stages", "Stages", (("Stage", "left"), ("Reached", "left"), ("After", "right"), ("Band", "left"), ("Rule", "left")), rows, note))
    if item.rate is not None and item.reach is not None and item.climate is not None:
        tables.append(_depth_table(item, item.rate, system))
    if item.hours:
        tables.append(_hours_table(item.hours, item, clock, system))
    return tables


def _depth_table(item: RunAnswer, rate: Rate, system: str) -> dict[str, Any]:
    assert item.climate is not None and item.start_h is not None
    rows: list[tuple[Sequence[str], str | None]] = []
    for hours, label in _DEPTH_TIMES:
        dose = item.climate.dose(item.start_h + hours) - item.climate.dose(item.start_h)
        depths = [cure.front_depth_mm(k, dose) for k in (rate.slow_mm, rate.k_mm, rate.fast_mm)]
        rows.append(([label, *(writing.length(round(depth, 2 if system == INCH else 1), system) for depth in depths)], None))
    return _table("depths", "Cured skin at an open face, in this weather", (("After", "left"), ("Slow", "right"), ("Middle", "right"), ("Quick", "right")), rows, "Depth of a wide bead with one open face; slow and quick are the ends of the rate's band.")


def _hours_table(hours: Sequence[Hour], item: RunAnswer, clock: Clock, system: str) -> dict[str, Any]:
    by_day: dict[str, list[Hour]] = {}
    for hour in hours:
        by_day.setdefault(clock.text(hour.at_h)[:10], []).append(hour)
    rows: list[tuple[Sequence[str], str | None]] = []
    for found in by_day.values():
        day_name = moment(found[0].at_h, clock).split(",")[0]
        allowed = [hour for hour in found if not hour.refused]
        if not allowed:
            reasons = ", ".join(dict.fromkeys(_REFUSED_WORDS[hour.refused] for hour in found))
            rows.append(((day_name, "none", "", "", reasons), "bad"))
            continue
        best = min(allowed, key=lambda hour: (round(hour.share, 4), hour.at_h))
        mark = "chosen" if item.best is not None and best.at_h == item.best.at_h else None
        rows.append(((day_name, f"{clock.local(best.at_h):%H:%M}", writing.percent(best.share), writing.temperature(round(best.surface_c, 1), system), f"{len(allowed)} of {len(found)} working hours allowed"), mark))
    return _table("hours", "Best hour of each day", (("Day", "left"), ("Hour", "left"), ("Moves while green", "right"), ("Surface", "right"), ("", "left")), rows,
                  "Least movement before the front is at half the depth; refused in rain, frost, outside the sealant's range and too close to the dew point.")  # fmt: skip


def _picture(reach: Reach) -> Picture | None:
    try:
        if reach.shape == "fillet":
            return section_solve.fillet_picture(reach.lengths_mm[0], reach.lengths_mm[1], reach.lengths_mm[2], reach.faces_text)
        return section_solve.hourglass_picture(*reach.lengths_mm, reach.faces_text)
    except ImportError:
        return None


def _run_drawings(item: RunAnswer, answer: CureAnswer, system: str) -> list[dict[str, Any]]:
    drawings: list[dict[str, Any]] = []
    if item.reach is not None and item.rate is not None and item.climate is not None and item.start_h is not None and item.reach.is_solved:
        picture = _picture(item.reach)
        if picture is not None:
            drawings.append({"key": "section", "title": "Where the front stands", "run": item.run.id, "svg": _section_drawing(item, item.reach, item.rate, picture)})
    if item.green is not None and len(item.green.path) > 2 and item.green_limit is not None:
        start = item.green.path[0][0]
        points = [(hours - start, 100.0 * change / item.green.width_mm) for hours, change in item.green.path]
        limit = 100.0 * item.green_limit
        across = _hour_marks(points[-1][0])
        svg = curve_svg(points, [(limit, f"limit {plain(limit, 0)} %"), (-limit, f"limit −{plain(limit, 0)} %")], "Movement while green: opening up, closing down", "% of the width", across)
        drawings.append({"key": "green", "title": "Movement while green", "run": item.run.id, "svg": svg})
    return drawings


def _hour_marks(end_h: float) -> list[tuple[float, str]]:
    step = next((step for step in (1.0, 2.0, 6.0, 12.0, 24.0, 48.0, 96.0, 240.0) if end_h / step <= 9.0), 480.0)
    return [(index * step, f"{plain(index * step, 0)} h" if step < 24 else f"{plain(index * step / 24, 0)} d") for index in range(int(end_h / step) + 1)]


def _section_drawing(item: RunAnswer, reach: Reach, rate: Rate, picture: Picture) -> str:
    assert item.climate is not None and item.start_h is not None
    marks: list[tuple[float, str]] = []
    for days in _MARKS_D:
        level = 0.5 * rate.k_mm**2 * (item.climate.dose(item.start_h + 24.0 * days) - item.climate.dose(item.start_h))
        if 0.002 * reach.reach_mm2 < level < 0.97 * reach.reach_mm2 and (not marks or level > 1.3 * marks[-1][0]):
            marks.append((level, f"{plain(24 * days, 0)} h" if days < 1 else f"{plain(days, 0)} d"))
    through = item.stage("through")
    hours = None if through is None or through.at_h is None else through.at_h - item.start_h
    faces = ("front", "side-a", "side-b") if reach.shape == "fillet" else ("front", "back", "side-a", "side-b")
    even = ("side-a" in reach.open_faces) == ("side-b" in reach.open_faces)
    halved = even and (reach.shape == "hourglass" or reach.lengths_mm[0] == reach.lengths_mm[1])
    return section_svg(picture, reach.shape, halved, marks[-5:], "Front after sealing; ring: last wet point", f"Last wet point {last_point_words(reach)}: {duration(hours)}.", [(FACE_WORDS[face], face in reach.open_faces) for face in faces])


def _timeline(answer: CureAnswer, system: str) -> str:
    """All runs on one line of time that shows the weather well; what lies beyond stands as a line of text."""
    clock = answer.entered.clock
    timed = [item for item in answer.runs if item.start_h is not None and item.stages]
    begin = min(item.start_h for item in timed if item.start_h is not None)
    last = max(item.start_h for item in timed if item.start_h is not None)
    reached = [stage.at_h for item in timed for stage in item.stages if stage.applies and stage.at_h is not None]
    until = min(max(reached, default=last + 24.0), last + 24.0 * _TIMELINE_D)
    if answer.has_weather:
        begin = min(begin, answer.climate.begins_h)
        until = max(until, min(answer.climate.ends_h, begin + 24.0 * 40.0))
    bars = []
    for item in timed:
        assert item.start_h is not None
        stages, beyond = [], []
        for stage in item.stages:
            if not stage.applies or stage.at_h is None or stage.stage.id in ("tack", "paint"):
                continue
            if stage.at_h > until:
                beyond.append(f"{_SHORT_STAGES[stage.stage.id]} {short_moment(stage.at_h, clock).rsplit(' ', 1)[0]}")
            wide = stage.stage.id == "through"
            early = stage.early_h if wide and stage.early_h is not None else stage.at_h
            late = stage.late_h if wide and stage.late_h is not None else stage.at_h
            stages.append((stage.at_h, early, late, _SHORT_STAGES[stage.stage.id]))
        bars.append(Bar(_name(item), item.start_h, tuple(sorted(stages)), f"later: {', '.join(beyond)}" if beyond else ""))
    air: list[tuple[float, float, float]] = []
    if answer.has_weather:
        step = max(1.0, (answer.climate.ends_h - answer.climate.begins_h) / 240.0)
        count = int((answer.climate.ends_h - answer.climate.begins_h) / step)
        for index in range(count):
            at = answer.climate.begins_h + index * step
            piece = answer.climate.at(at)
            air.append((at, piece.air_c, piece.humidity_fraction))
    days = max(1.0, (until - begin) / 24.0)
    every = next((step for step in (1, 2, 5, 7, 14) if days / step <= 10), 28)
    labels = []
    local = clock.local(begin).replace(hour=0, minute=0)
    first = clock.hours(local)
    for index in range(0, int(days) + 2, every):
        at = first + 24.0 * index
        if begin <= at <= until:
            labels.append((at, short_moment(at + 6.0, clock).rsplit(" ", 1)[0]))
    marks = [float(value) for value in range(-40, 61, 5)]
    return timeline_svg(bars, air, labels, [(value, writing.temperature(value, system)) for value in marks], "Runs and weather", until)


# ---- record -------------------------------------------------------------------------------------


def _record(item: RunAnswer, answer: CureAnswer, system: str) -> list[dict[str, str]]:
    """The sealing record of a run, line by line; empty lines are kept, to be filled in by hand."""
    values, clock = item.run.values, answer.entered.clock
    joint = item.judged
    bead = joint.bead if joint is not None else None
    lines = [
        ("Run", _name(item)),
        ("Joint", joint.joint.values["name"] or joint.joint.id if joint is not None else ""),
        ("Where", joint.joint.values["place"] or "" if joint is not None else ""),
        ("Sealed", "" if item.is_planned or item.start_h is None else clock.text(item.start_h) + (f" {clock.short_name(item.start_h)}" if clock.rules else "")),
        ("Length", writing.span(values["length"], system) if values["length"] is not None else ""),
        ("Bead", f"{writing.length(round(bead.width_mm, 1), system)} wide, {writing.length(round(bead.neck_mm, 1), system)} deep" if bead is not None and values["shape"] != "fillet" else "fillet" if values["shape"] == "fillet" else ""),
        ("Sealant", item.sealant.name if item.sealant is not None else ""),
        ("Lot", values["lot"] or ""),
        ("Use by", values["expiry"] or ""),
        ("Crew", values["crew"] or ""),
        ("Surface", writing.temperature(values["surface"], system) if values["surface"] is not None else ""),
        ("Air", writing.temperature(values["air"], system) if values["air"] is not None else ""),
        ("Humidity", writing.percent(values["humidity"]) if values["humidity"] is not None else ""),
        ("Dew point", writing.temperature(round(item.dew_c, 1), system) if item.dew_c is not None else ""),
        ("Primer put on", clock.text(item.run.primer_h) if item.run.primer_h is not None else ""),
        ("Primer waited", duration(item.run.start_h - item.run.primer_h) if item.run.primer_h is not None and item.run.start_h is not None and item.run.start_h >= item.run.primer_h else ""),
        ("Photos", values["photos"] or ""),
        ("Notes", values["note"] or ""),
    ]
    return [{"label": label, "value": value} for label, value in lines]


def _record_notes(item: RunAnswer, answer: CureAnswer) -> list[dict[str, str]]:
    """What in the record itself is out of order."""
    values, clock, start = item.run.values, answer.entered.clock, item.run.start_h
    notes = []

    def add(key: str, severity: str, text: str) -> None:
        notes.append({"severity": severity, "key": key, "text": text})

    if item.run.primer_h is not None and start is not None:
        waited = start - item.run.primer_h
        if waited < 0.0:
            add("primer", "warning", "The primer was put on after sealing: check the times.")
        elif values["primer_least"] is not None and waited < values["primer_least"] - 1e-9:
            add("primer", "warning", f"The primer waited {duration(waited)}, less than its {duration(values['primer_least'])}.")
        elif values["primer_most"] is not None and waited > values["primer_most"] + 1e-9:
            add("primer", "warning", f"The primer waited {duration(waited)}, more than its {duration(values['primer_most'])}: clean and prime again.")
    if values["expiry"] and start is not None and len(values["expiry"].strip()) == 10 and clock.text(start)[:10] > values["expiry"].strip():
        add("expiry", "warning", "The sealant was past its date when it was used.")
    if item.dew_c is not None and values["surface"] is not None and values["surface"] - item.dew_c < 3.0:
        add("dew", "warning", "The surface was less than 3 K (5 °F) over the dew point when it was sealed.")
    return notes


# ---- room ---------------------------------------------------------------------------------------


def _room_dict(room: RoomAnswer, system: str) -> dict[str, Any]:
    shown: dict[str, Any] = {"trouble": None, "answers": [], "tables": [], "drawings": [], "steps": [], "notes": [{"severity": "note", "key": "screening", "text": SCREENING}]}
    if room.trouble:
        shown["trouble"] = {"code": room.trouble, "text": ROOM_TROUBLES[room.trouble]}
        shown["notes"] = [{"severity": "note", "key": room.trouble, "text": ROOM_TROUBLES[room.trouble]}]
        return shown
    assert room.source is not None and room.exposure is not None and room.byproduct is not None and room.room_m3 is not None and room.share_fraction is not None
    found, agent = room.exposure, room.byproduct
    shown |= {
        "agent": agent.agent, "agent_label": agent.agent_label, "mass_g": room.source.mass_g, "share_fraction": room.share_fraction, "room_m3": room.room_m3,
        "through_h": room.source.through_h, "peak_mg_m3": found.peak_mg_m3, "peak_ppm": _ppm(found.peak_mg_m3, agent.agent_g_mol), "peak_h": found.peak_h,
        "short_mg_m3": found.short_mg_m3, "shift_mg_m3": found.shift_mg_m3, "water_g": room.water_g,
        "limits": [{"id": item.limit.id, "authority": item.limit.authority, "year": item.limit.year, "span": item.limit.span, "limit_mg_m3": item.limit_mg_m3, "found_mg_m3": item.found_mg_m3,
                    "pass": item.is_kept, "changes_per_h": item.changes_per_h, "packages": item.packages, "source": item.limit.source, "status": item.limit.status} for item in room.against],
    }  # fmt: skip
    shown["answers"] = _room_bands(room)
    shown["tables"] = [_limits_table(room)]
    levels = [(item.limit_mg_m3, f"{item.limit.authority}, {_span_word(item.limit.span)}") for item in _few(room)]
    shown["drawings"] = [{"key": "room", "title": "In the air", "run": None, "svg": curve_svg(list(room.curve), levels, f"{agent.agent_label.capitalize()} in the air", "mg/m³", _hour_marks(room.curve[-1][0]))}]
    shown["steps"] = [writing.step_lines(step, system) for step in room.steps]
    if not room.through_known:
        shown["notes"].append({"severity": "note", "key": "no-joint", "text": "No joint is named: a bead of 4 mm is taken, which gives off fast."})
    if "room-too-dry" in room.warnings:
        shown["notes"].append({"severity": "note", "key": "room-too-dry", "text": "The moisture of this room's air and of a day of air change is less than the sealant needs: cure slows until fresh air comes in."})
    if "isocyanate" in room.warnings:
        shown["notes"].append({"severity": "warning", "key": "isocyanate", "text": _ISOCYANATE})
    if agent.agent == "meko":
        shown["notes"].append({"severity": "warning", "key": "meko", "text": "The EU holds this oxime to cause cancer: keep it as low as you can, whatever the figure says."})
    return shown


def _ppm(mg_m3: float, molar: float) -> float:
    from ..physics.room_air import ppm_from_mg

    return ppm_from_mg(mg_m3, molar)


def _few(room: RoomAnswer) -> list[Any]:
    """At most one limit line for each span, the strictest, so that the drawing stays readable."""
    kept: dict[str, Any] = {}
    for item in room.against:
        if item.limit.span not in kept or item.limit_mg_m3 < kept[item.limit.span].limit_mg_m3:
            kept[item.limit.span] = item
    top = max(value for _, value in room.curve)
    return [item for item in kept.values() if item.limit_mg_m3 < 8.0 * top]


def _span_word(word: str) -> str:
    return {"8h": "8 hours", "15min": "15 minutes", "ceiling": "never above"}[word]


def _room_bands(room: RoomAnswer) -> list[Band]:
    assert room.exposure is not None and room.byproduct is not None and room.source is not None
    agent, found, worst = room.byproduct, room.exposure, room.governing
    bands: list[Band] = []
    peak = f"Peak {plain(found.peak_mg_m3, 1)} mg/m³ ({plain(_ppm(found.peak_mg_m3, agent.agent_g_mol), 1)} ppm) {duration(found.peak_h)} after the start; 15 minutes {plain(found.short_mg_m3, 1)}, 8 hours {plain(found.shift_mg_m3, 1)} mg/m³."
    if worst is None:
        bands.append(_band("room", f"Is the air fit to breathe ({agent.agent_label})?", "No limit known here", peak, "warn"))
    else:
        ratio = worst.found_mg_m3 / worst.limit_mg_m3
        good = worst.is_kept
        bands.append(_band("room", f"Is the air fit to breathe ({agent.agent_label})?", "Below the limits" if good else f"Over the limit, {plain(ratio, 1)} times", f"{peak} Governs: {worst.limit.authority}, {_span_word(worst.limit.span)}, {plain(worst.limit_mg_m3, 1)} mg/m³. Screening only.", "ok" if good else "bad"))
        needs = [item.changes_per_h for item in room.against]
        if any(need is None for need in needs):
            bands.append(_band("air-change", "Which air change keeps below?", "No air change that a room can have", "Use less, another sealant, or breathing protection chosen by a specialist.", "bad"))
        else:
            most = max(need for need in needs if need is not None)
            bands.append(_band("air-change", "Which air change keeps below?", "No air change is needed" if most <= 0.0 else f"{plain(most, 1)} an hour or more", f"Now {plain(room.changes_per_h or 0.0, 1)} an hour, mixing factor {plain(room.mixing or 1.0, 1)}.", "plain"))
        packs = min((item.packages for item in room.against if item.packages is not None), default=None)
        if packs is not None:
            whole = int(packs + 1e-9)
            bands.append(_band("packages", "How many packages a shift keep below?", f"{whole}" if whole else "Less than one", f"{plain(packs, 1)} at this air change; now {plain(room.packages or 0.0, 1)}.", "plain"))
    bands.append(_band("mass", "How much is set free?", f"{plain(room.source.mass_g, 1)} g of {agent.agent_label}", f"Over the whole cure; crosslinker share {writing.percent(room.share_fraction or 0.0)} by mass ({writing.percent(agent.share_low_fraction)} to {writing.percent(agent.share_high_fraction)} is usual)."))
    return bands


def _limits_table(room: RoomAnswer) -> dict[str, Any]:
    rows: list[tuple[Sequence[str], str | None]] = []
    for item in room.against:
        row = item.limit
        rows.append((
            (row.authority + (f" ({row.year})" if row.year is not None else ""), _span_word(row.span), f"{plain(row.mg_m3, 2)} mg/m³ ({plain(row.ppm, 3)} ppm)", f"{plain(item.found_mg_m3, 1)} mg/m³",
             "none" if item.changes_per_h is None else plain(item.changes_per_h, 1), "–" if item.packages is None else plain(item.packages, 1), f"{row.source} ({row.status}).{' ' + row.note if row.note else ''}"),
            None if item.is_kept else "bad",
        ))  # fmt: skip
    columns = (("Authority", "left"), ("Over", "left"), ("Limit", "right"), ("Here", "right"), ("Air changes needed", "right"), ("Packages that keep it", "right"), ("Source", "left"))
    return _table("limits", "Against the limits of the region", columns, rows, "Lists change: check the newest one of your authority. " + SCREENING)


# ---- calendar -----------------------------------------------------------------------------------


def events(answer: CureAnswer, job_id: str) -> list[Event]:
    """One event for each stage of each run that was sealed."""
    found = []
    for item in answer.runs:
        if item.is_planned or item.start_h is None or item.trouble:
            continue
        place = item.judged.joint.values["place"] or "" if item.judged is not None else ""
        for stage in item.stages:
            if not stage.applies or stage.at_h is None:
                continue
            since = [None if at is None else at - item.start_h for at in (stage.early_h, stage.at_h, stage.late_h)]
            band = f" {between(since[0], since[2]).capitalize()} after sealing." if stage.early_h != stage.late_h else ""
            text = f"{duration(since[1])} after sealing.{band}{' Rough.' if stage.stage.is_rough else ''} {stage.stage.note} An estimate: check the bead itself."
            found.append(Event(f"{item.run.id}-{stage.stage.id}-{job_id or 'job'}@beadwright", later(stage.at_h), 15, f"{_name(item)}: {stage.stage.label.lower()}", text, place, item.start_h))
    return found
