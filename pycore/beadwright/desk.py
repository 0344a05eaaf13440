"""The one door to the core: `forms`, `evaluate`, `export`, and the few calls around a job file.

Everything is plain JSON data in and out. `evaluate` never raises for what a user typed; an
exception that leaves this module is a fault of the program.
"""

from __future__ import annotations

import json
from collections.abc import Iterable, Mapping
from functools import cache, lru_cache
from importlib.util import find_spec
from typing import Any

from attrs import frozen

from . import __version__, catalogue
from .curing.inputs import joints_named
from .design.cautions import cautions_of_job, cautions_of_joint
from .design.inputs import OWN_CLASS, Project, joint_rows, read_joint, read_project
from .design.joint import judge
from .field.face import at_the_face
from .fields import GROUPS, Choice, Field, Reads
from .job import blank, blank_row, compare, merge, open_bytes, to_bytes
from .quantity import INCH, METRIC, sign_of
from .sheet import (
    calendar,
    cure_print,
    cure_sheet,
    joint_sheet,
    printed,
    schedule,
    takeoff_files,
    takeoff_sheet,
)
from .sheet.face_sheet import FACE_WORDS
from .sheet.takeoff_compare import compare_dict
from .takeoff.alternative import changed
from .takeoff.inputs import JointSection, joint_section
from .takeoff.paste import read_pasted
from .takeoff.total import Takeoff, total
from .working import InputError, Issue

__all__ = ["blank", "blank_row", "compare", "compare_takeoff", "evaluate", "export", "forms", "frames", "merge", "open_file", "paste_runs"]

EXPORT_KINDS = ("job", "sheet", "text", "schedule", "takeoff-csv", "takeoff-xlsx", "calendar", "cure-sheet")
MOST_FAULTS_TOLD = 20
_NOT_SHARED = ("joints", "takeoff", "cure", "surveys")


def _core() -> dict[str, Any]:
    return {"version": __version__, "tables": list(catalogue.table_ids())}


# ---- forms ------------------------------------------------------------------------------------


def forms() -> dict[str, Any]:
    """Every input, grouped, with labels, units, limits, choices and help.

    Returns
    -------
    dict
        `core`, `groups` (each with `key`, `label`, `path`, `fields`), `words` for verdicts, and `starters`
        (rows of packages and rates to begin with, all to edit).
    """
    return {
        "core": _core(),
        "groups": [{"key": item.key, "label": item.label, "path": item.path, "fields": [_field(field) for field in item.fields]} for item in GROUPS],
        "words": {
            "verdicts": dict(joint_sheet.VERDICT_WORDS),
            "face": dict(FACE_WORDS),
            "kinds": dict(joint_sheet.KIND_WORDS),
            "boundary": printed.BOUNDARY,
        },
        "starters": takeoff_sheet.starters(),
    }


def _field(item: Field) -> dict[str, Any]:
    both = (METRIC, INCH)

    def per_system(value: str | Mapping[str, str] | None) -> Any:
        return dict(value) if isinstance(value, Mapping) else value

    return {
        "key": item.key,
        "label": item.label,
        "symbol": item.symbol,
        "kind": item.kind,
        "units": {system: [sign_of(unit) for unit in item.units_for(system)] for system in both},
        "default": per_system(item.default),
        "required": item.required,
        "choices": _choices(item),
        "choices_from": {"field": "substrate", "key": "finishes"} if item.table == "finishes" else item.table if item.kind == "reference" else None,
        "section": item.section,
        "show_when": {key: list(values) for key, values in item.show_when.items()} if item.show_when else None,
        "help": item.help,
        "example": per_system(item.example),
        "source": item.source,
        "hard_min": item.hard_min,
        "hard_max": item.hard_max,
        "soft_min": item.soft_min,
        "soft_max": item.soft_max,
        "multiline": item.multiline,
        "advanced": item.advanced,
    }


@cache
def _table_choices() -> dict[str, list[dict[str, Any]]]:
    def simple(rows: Mapping[str, Any], group: str | None = None) -> list[dict[str, Any]]:
        return [{"value": key, "label": row.label} | ({"group": getattr(row, group)} if group else {}) for key, row in rows.items()]

    classes = simple(catalogue.classes(), "standard")
    classes.append({"value": OWN_CLASS, "label": "Own figures", "group": "Own"})
    substrates = simple(catalogue.substrates(), "group")
    for choice, row in zip(substrates, catalogue.substrates().values(), strict=True):
        choice["finishes"] = [{"value": finish.id, "label": finish.label} for finish in row.finishes]
    return {
        "regions": simple(catalogue.regions()),
        "depth_rules": simple(catalogue.depth_rules()),
        "families": simple(catalogue.families()),
        "classes": classes,
        "uses": simple(catalogue.uses()),
        "rod_types": simple(catalogue.rod_types()),
        "substrates": substrates,
    }


def _choices(item: Field) -> list[dict[str, Any]] | None:
    if item.choices:
        return [_choice(choice) for choice in item.choices]
    return _table_choices().get(item.table) if item.table else None


def _choice(choice: Choice) -> dict[str, Any]:
    shown = {"value": choice.value, "label": choice.label}
    return shown | {"help": choice.help} if choice.help else shown


# ---- evaluate ---------------------------------------------------------------------------------


def evaluate(job: object, only: Iterable[str] | None = None) -> dict[str, Any]:
    """Judge a whole job.

    Parameters
    ----------
    job : object
        A decoded job file; anything else yields issues, not an exception.
    only : iterable of str, optional
        Ids of the joints to give in full; the others come in short form (verdict and headline,
        no figures and no readings). None: all in full. The cure part is worked out only when
        `only` is None or holds `"cure"`; else it is `{"short": True}`.

    Returns
    -------
    dict
        `core`, `issues`, `readings`, `joints`, `takeoff`, `cure`, `surveys`, `cautions`, `facts`.
    """
    shared = _shared_text(job)
    project = _project(shared)
    rows = Reads(project.system)
    wanted = None if only is None else set(only)
    answers: dict[str, Any] = {}
    by_joint: dict[str, tuple[catalogue.Caution, ...]] = {}
    sections: dict[str, JointSection] = {}
    issues, readings = list(project.reads.issues), dict(project.reads.readings)
    for joint_id, path, row in joint_rows(job, rows):
        full = wanted is None or joint_id in wanted
        one = _answer(shared, joint_id, path, _text(row), full=full)
        answers[joint_id] = one.answer
        by_joint[joint_id] = one.cautions
        sections[joint_id] = one.section
        issues += one.issues
        if full:
            readings.update(one.readings)
    takeoff: dict[str, Any] = {}
    if (taken := _takeoff_of(job, shared, sections)) is not None:
        full = wanted is None or "takeoff" in wanted
        takeoff = taken.answer if full else takeoff_sheet.short_form(taken.answer)
        issues += taken.takeoff.issues
        readings.update(taken.takeoff.readings if full else {})
    cure = _cure(job, shared, wanted)
    issues += cure.issues
    readings.update(cure.readings)
    return {
        "core": _core(),
        "issues": [issue.as_dict() for issue in [*rows.issues, *issues]],
        "readings": readings,
        "joints": answers,
        "takeoff": takeoff,
        "cure": cure.answer,
        "surveys": {},
        "cautions": _cautions(project, by_joint),
        "facts": _facts(project),
    }


@frozen
class _Answer:
    """One joint's part of the answer."""

    answer: dict[str, Any]
    cautions: tuple[catalogue.Caution, ...]
    issues: tuple[Issue, ...]
    readings: dict[str, dict[str, object]]
    section: JointSection


def _text(value: object) -> str:
    """A decoded JSON value as text: the key under which an unchanged part is not judged again."""
    return json.dumps(value, ensure_ascii=False, default=str)


def _shared_text(job: object) -> str:
    """Everything of a job that all joints share."""
    if not isinstance(job, Mapping):
        return _text(job)
    return _text({key: value for key, value in job.items() if key not in _NOT_SHARED})


# The core is pure, so an answer may be kept: an edit to one joint judges that joint alone.
@lru_cache(maxsize=4)
def _project(shared: str) -> Project:
    return read_project(json.loads(shared))


@lru_cache(maxsize=4096)
def _answer(shared: str, joint_id: str, path: str, row: str, *, full: bool) -> _Answer:
    project = _project(shared)
    joint = read_joint(joint_id, path, json.loads(row), project)
    judged = judge(joint, project)
    found = tuple(cautions_of_joint(judged, project))
    face = at_the_face(judged, project)
    answer = joint_sheet.joint_dict(judged, face, project.system, [item.id for item in found], full=full)
    return _Answer(answer, found, tuple(joint.reads.issues), joint.reads.readings, joint_section(judged, project))


@frozen
class _Taken:
    """The take-off's part of the answer, and what it was written from."""

    takeoff: Takeoff
    answer: dict[str, Any]


def _takeoff_of(job: object, shared: str, sections: Mapping[str, JointSection]) -> _Taken | None:
    """The take-off of a job, or None while it is empty; an unchanged one is not worked out again."""
    raw = job.get("takeoff") if isinstance(job, Mapping) else None
    if not isinstance(raw, Mapping) or not raw:
        return None
    runs = raw.get("runs")
    pointed = {row.get("joint") for row in runs if isinstance(row, Mapping) and isinstance(row.get("joint"), str)} if isinstance(runs, list) else set()
    return _taken(shared, _text(raw), tuple(sections[name] for name in sections if name in pointed))


@lru_cache(maxsize=4)
def _taken(shared: str, raw: str, sections: tuple[JointSection, ...]) -> _Taken:
    project = _project(shared)
    found = total(json.loads(raw), project, {item.id: item for item in sections})
    return _Taken(found, takeoff_sheet.takeoff_dict(found, project.system))


def _sections(job: object) -> dict[str, JointSection]:
    """Sections of all joints, from answers that are kept."""
    shared = _shared_text(job)
    return {name: _answer(shared, name, path, _text(row), full=False).section for name, path, row in joint_rows(job, Reads(_project(shared).system))}


def paste_runs(text: str, units: str, job: dict[str, Any] | None = None, columns: list[str | None] | None = None) -> dict[str, Any]:
    """Runs from text pasted out of a spreadsheet, with how each column was understood; see `takeoff.paste.read_pasted`."""
    return read_pasted(text, units, job, columns)


def compare_takeoff(job: dict[str, Any], change: dict[str, Any] | None = None, other: dict[str, Any] | None = None) -> dict[str, Any]:
    """The take-off as it is beside a changed one, or beside that of another job.

    Parameters
    ----------
    job : dict
        A decoded job file.
    change : dict, optional
        What to change; see `takeoff.alternative.changed`.
    other : dict, optional
        Another job to compare with instead.

    Returns
    -------
    dict
        `rows`, `table`, `left_out` (how many runs each leaves out); `error` when it cannot be done.
    """
    try:
        second = other if other is not None else changed(job, change or {})
    except InputError as error:
        return {"rows": [], "table": None, "left_out": [0, 0], "error": error.message}
    found = [_takeoff_of(one, _shared_text(one), _sections(one)) for one in (job, second)]
    if found[0] is None or found[1] is None:
        return {"rows": [], "table": None, "left_out": [0, 0], "error": "There is no take-off to compare yet."}
    return compare_dict(found[0].takeoff, found[1].takeoff, _project(_shared_text(job)).system)


def _cure(job: object, shared: str, wanted: set[str] | None) -> cure_sheet.CurePart:
    """The cure part; an empty one costs nothing, an unchanged one is kept."""
    raw = job.get("cure") if isinstance(job, Mapping) else None
    if not raw:
        return cure_sheet.CurePart({})
    if wanted is not None and "cure" not in wanted:
        return cure_sheet.CurePart({"short": True})
    every = list(joint_rows(job, Reads(METRIC)))
    named = joints_named(raw)
    rows = {joint_id: (path, row) for joint_id, path, row in every if joint_id in named}
    return _cure_part(shared, _text(raw), _text(rows), tuple(joint_id for joint_id, _, _ in every), has_numpy=find_spec("numpy") is not None)


@lru_cache(maxsize=8)
def _cure_part(shared: str, raw: str, rows: str, joint_ids: tuple[str, ...], *, has_numpy: bool) -> cure_sheet.CurePart:
    whole = json.loads(shared)
    return cure_sheet.cure_part(json.loads(raw), _project(shared), json.loads(rows), joint_ids, str(whole.get("id") or ""))


def _cautions(project: Project, by_joint: Mapping[str, tuple[catalogue.Caution, ...]]) -> list[dict[str, Any]]:
    joints_of: dict[str, list[str]] = {}
    rows: dict[str, catalogue.Caution] = {item.id: item for item in cautions_of_job(project)}
    for joint_id, found in by_joint.items():
        for item in found:
            rows.setdefault(item.id, item)
            joints_of.setdefault(item.id, []).append(joint_id)
    order = {"stop": 0, "warning": 1, "note": 2}
    shown = sorted(rows.values(), key=lambda item: order.get(item.severity, 3))
    return [{"id": item.id, "severity": item.severity, "title": item.title, "text": item.text, "source": f"{item.source} ({item.status})", "joints": joints_of.get(item.id, [])} for item in shown]


def _facts(project: Project) -> list[dict[str, str]]:
    site = project.site
    rule = catalogue.depth_rules().get(site["depth_rule"] or "")
    region = catalogue.regions().get(project.region)
    facts = [
        {"label": "Convention of the class", "value": joint_sheet.CONVENTION_WORDS[site["convention"] or "each-way"]},
        {"label": "Depth rule set", "value": rule.label if rule else "none"},
        {"label": "Tolerances", "value": "root of the sum of squares" if site["tolerance_method"] == "root-sum-square" else "worst case"},
    ]
    if region is not None:
        facts.append({"label": "Region", "value": region.label})
    return facts


def frames(job: object, joint_id: str) -> dict[str, Any]:
    """The section of one joint from its coldest to its hottest, for the temperature scrubber.

    Returns
    -------
    dict
        `frames` (each `fraction`, `title`, `lines`, `drawing`), `start` (index of the sealing temperature), `caption`.
    """
    project = _project(_shared_text(job))
    for found, path, row in joint_rows(job, Reads(project.system)):
        if found == joint_id:
            return joint_sheet.frames(judge(read_joint(found, path, row, project), project), project.system)
    return {"frames": [], "start": 0, "caption": "This joint is not in the job."}


# ---- files ------------------------------------------------------------------------------------


def open_file(data: bytes) -> dict[str, Any]:
    """Read the bytes of a job file; see `job.open_bytes`. The answer is JSON-able."""
    opened = open_bytes(bytes(data))
    issues = [issue.as_dict() for issue in opened.issues]
    if opened.job is not None and not opened.read_only:
        # Before such a file is put together with another, its faults are told; what is merely missing is not one.
        faults = (item for item in evaluate(opened.job, only=())["issues"] if item["severity"] == "error" and item["code"] != "missing")
        issues += [item for item in faults if item not in issues][:MOST_FAULTS_TOLD]
    return {
        "job": opened.job,
        "issues": issues,
        "read_only": opened.read_only,
        "from_version": opened.from_version,
    }


def export(job: dict[str, Any], kind: str) -> tuple[str, str, bytes]:
    """Write a job out.

    Parameters
    ----------
    job : dict
        A decoded job file.
    kind : str
        `job` (JSON), `sheet` (printable HTML), `text`, `schedule` (CSV), `takeoff-csv`, `takeoff-xlsx`,
        `calendar` (RFC 5545) or `cure-sheet` (printable HTML).

    Returns
    -------
    tuple of str, str, bytes
        File name, media type, content.

    Raises
    ------
    ValueError
        For an unknown kind.
    """
    stem = _stem(job)
    if kind == "job":
        return f"{stem}.beadwright.json", "application/json", to_bytes(job)
    if kind not in EXPORT_KINDS:
        raise ValueError(f"kind must be one of {', '.join(EXPORT_KINDS)}; got {kind!r}")
    if kind.startswith("takeoff-"):
        return _takeoff_file(job, kind, stem)
    if kind == "calendar":
        cure = _cure(job, _shared_text(job), None)
        return f"{stem}.ics", "text/calendar", calendar.calendar_bytes(cure.events, cure.clock, str(job.get("title") or "Cure"))
    answer = evaluate(job)
    if kind == "cure-sheet":
        return f"{stem}-cure.html", "text/html", cure_print.cure_html(job, answer)
    if kind == "sheet":
        return f"{stem}.html", "text/html", printed.sheet_html(job, answer)
    if kind == "text":
        return f"{stem}.txt", "text/plain", (printed.sheet_text(job, answer) + cure_print.cure_text(answer)).encode("utf-8")
    return f"{stem}-schedule.csv", "text/csv", schedule.schedule_csv(answer["joints"].values())


def _takeoff_file(job: dict[str, Any], kind: str, stem: str) -> tuple[str, str, bytes]:
    """The take-off as a file; an empty one gives a file with headers only."""
    shared = _shared_text(job)
    taken = _takeoff_of(job, shared, _sections(job)) or _taken(shared, "{}", ())
    if kind == "takeoff-csv":
        return f"{stem}-take-off.csv", "text/csv", takeoff_files.takeoff_csv(taken.takeoff)
    title = job.get("title")
    return f"{stem}-take-off.xlsx", "application/vnd.openxmlformats-officedocument.spreadsheetml.sheet", takeoff_files.takeoff_xlsx(taken.takeoff, title if isinstance(title, str) else "")


def _stem(job: Mapping[str, Any]) -> str:
    """A file name of plain letters from reference or title."""
    for key in ("reference", "title"):
        value = job.get(key)
        if isinstance(value, str):
            words = "".join(ch if ch.isascii() and ch.isalnum() else " " for ch in value).split()
            if words:
                return "-".join(words).lower()[:60]
    return "beadwright-job"


def to_json(value: object) -> str:
    """JSON text of an answer; refuses NaN and infinity, which are faults."""
    return json.dumps(value, ensure_ascii=False, allow_nan=False)


def refused(issues: Iterable[Issue]) -> dict[str, Any]:
    """The answer for a file that could not be opened."""
    return {"core": _core(), "issues": [issue.as_dict() for issue in issues], "readings": {}, "joints": {}, "takeoff": {}, "cure": {}, "surveys": {}, "cautions": [], "facts": []}
