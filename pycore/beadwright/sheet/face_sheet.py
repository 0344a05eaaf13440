"""The answer at the face as people read it."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from ..design.backing import Backing
from ..design.joint import UNKNOWN, Judgement
from ..field.face import SEAL, STOP, WAIT, Check, FaceAnswer
from ..fields import FACE
from ..working import Value
from . import writing

FACE_WORDS = {SEAL: "Seal now", WAIT: "Wait", STOP: "Do not seal", "unknown": "Readings missing", "referred": "Referred"}
_TONES = {SEAL: "ok", WAIT: "warn", STOP: "bad", "unknown": "plain", "referred": "warn"}

# key: label, what is said when passed, failed, not told.
_CHECKS: dict[str, tuple[str, str, str, str]] = {
    "wetness": ("Bond faces", "Dry.", "Not dry: free water, damp or frost at the face breaks the bond.", ""),
    "frost": ("Above freezing", "Above freezing.", "At or below freezing: ice may be there unseen. Warm and dry the joint first.", ""),
    "range": ("Sealant's range", "", "", ""),
    "apply-from": ("Warm enough for the sealant", "Warm enough.", "Colder than the sealant may be applied.", ""),
    "apply-to": ("Cool enough for the sealant", "Cool enough.", "Hotter than the sealant may be applied: wait for shade.", ""),
    "dew": ("Surface over dew point", "Dry enough: no dew will form.", "Closer to the dew point than the margin wanted: dew may form on the face.", ""),
    "class": ("Share of the width needed", "Stays within class all year.", "Sealed now, it would go beyond its class within the year.", ""),
    "width-least": ("Not too narrow", "Wide enough to seal.", "Narrower than is practical to seal.", ""),
    "width-most": ("Not too wide", "Narrow enough to seal.", "Wider than is practical to seal.", ""),
    "green": ("Movement while green", "Little enough movement while it cures.", "It would move too much while it cures: seal later in the day, in shade, or on a cloudy day.", "Not told: how far the surface will swing while the bead is green."),
}  # fmt: skip


def face_dict(answer: FaceAnswer | None, judged: Judgement, system: str) -> dict[str, Any] | None:
    """The face answer for the page; None when nothing was measured."""
    if answer is None:
        return None
    shown: dict[str, Any] = {
        "verdict": answer.verdict,
        "verdict_word": FACE_WORDS[answer.verdict],
        "verdict_text": _reason(answer, judged),
        "tone": _TONES[answer.verdict],
        "answers": _bands(answer, system),
        "checks": [_check(check, system) for check in sorted(answer.checks, key=_urgency)],
        "steps": [writing.step_lines(step, system) for step in answer.steps],
    }
    for key in ("width_mm", "cold_width_mm", "hot_width_mm", "cold_strain_fraction", "hot_strain_fraction", "reference_c", "reference_width_mm", "dew_point_c", "green_fraction"):
        shown[key] = getattr(answer, key)
    shown["window"] = None if answer.window is None else {"from_c": answer.window.from_c, "to_c": answer.window.to_c}
    shown["rod_mm"] = answer.rod.diameter_mm if answer.rod else None
    shown["depth_mm"] = answer.depth.target_mm if answer.depth else None
    return shown


def _reason(answer: FaceAnswer, judged: Judgement) -> str:
    if answer.verdict in ("referred",):
        return judged.reason
    if not answer.checks:
        return "The joint itself is not complete yet; fill in its sides and sealant first."
    failed = [_CHECKS[check.key][2] for check in answer.checks if check.passed is False]
    if failed:
        return " ".join(failed)
    if answer.verdict == UNKNOWN:
        missing = _missing(judged.joint.face)
        return f"Still needed: {', '.join(missing)}." if missing else "A setting of the site that this needs cannot be read; see the job."
    if any(check.passed is None for check in answer.checks):
        return "Every gate that could be judged is passed. How far the bead moves while green is not known: give the swing to have it judged."
    return "Every gate is passed at these readings. Check again when the weather turns."


def _missing(face: Mapping[str, Any]) -> list[str]:
    """The readings that the verdict still waits for, by their labels."""
    wanted = [key for key in ("surface", "air", "humidity", "wetness") if face[key] is None]
    if all(face[key] is None for key in ("width", "width_least", "width_most")):
        wanted.insert(0, "width")
    labels = {"wetness": "whether the bond faces are dry"}
    return [labels.get(key, FACE[key].label[0].lower() + FACE[key].label[1:]) for key in wanted]


def _urgency(check: Check) -> int:
    """What fails stands first, then what is not told; the rest keeps its order."""
    return 2 if check.passed else 1 if check.passed is None else 0


def _check(check: Check, system: str) -> dict[str, Any]:
    label, good, bad, missing = _CHECKS[check.key]
    text = good if check.passed else bad if check.passed is False else missing
    return {"key": check.key, "label": label, "value": _brief(check.value, system), "limit": _brief(check.limit, system), "pass": check.passed, "text": text}


def _brief(value: Value | None, system: str) -> str:
    if value is None or value.number is None:
        return ""
    if value.kind == "temperature":
        return writing.temperature(value.number, system)
    if value.kind == "temperature_difference":
        return writing.difference(value.number, system)
    if value.kind == "percent":
        return writing.percent_up(value.number) if value.number < 100 else "over 9999 %"
    return writing.length(value.number, system)


def _bands(answer: FaceAnswer, system: str) -> list[dict[str, str]]:
    bands: list[dict[str, str]] = []

    def add(key: str, question: str, text: str, detail: str = "", tone: str = "plain") -> None:
        bands.append({"key": key, "question": question, "answer": text, "detail": detail, "tone": tone})

    if answer.slip_mm is not None and answer.cold_strain_fraction is not None:
        add("extremes", "How far will it go?", f"Slips {writing.up(answer.slip_mm, system)}", f"From the temperature now; the bead stretches by {writing.percent(answer.cold_strain_fraction)}.")
    elif answer.cold_width_mm is not None and answer.hot_width_mm is not None and answer.cold_strain_fraction is not None and answer.hot_strain_fraction is not None:
        add("extremes", "How far will it go?", f"{writing.length(answer.hot_width_mm, system)} to {writing.length(answer.cold_width_mm, system)}",
            f"Hottest to coldest; strain {writing.percent(answer.hot_strain_fraction, signed=True)} to {writing.percent(answer.cold_strain_fraction, signed=True)}.{_narrow(answer, system)}")  # fmt: skip
    if answer.window is not None:
        if answer.window.is_empty or answer.window.from_c is None or answer.window.to_c is None:
            add("window", "At which temperature?", "At none", answer.window.advice, "bad")
        else:
            add("window", "At which temperature?", f"{writing.temperature_up(answer.window.from_c, system)} to {writing.temperature_down(answer.window.to_c, system)}", "Of the elements, for the narrowest width read.")
    if answer.reference_width_mm is not None and answer.reference_c is not None:
        add("reference", f"Width at {writing.temperature(answer.reference_c, system)}?", writing.length(answer.reference_width_mm, system), "To compare with the drawing and with other days.")
    if answer.rod is not None:
        add("rod", "Which rod?", f"{answer.rod.size_label} {answer.rod.label.lower()}" if answer.rod.diameter_mm else answer.rod.size_label, _rod_detail(answer.rod, system), "plain" if answer.rod.fits else "warn")
    if answer.depth is not None:
        add("depth", "Set which depth?", writing.near(answer.depth.target_mm, system), f"At mid-width, {writing.length(answer.depth.least_mm, system)} to {writing.length(answer.depth.most_mm, system)} allowed by {answer.depth.rule.label}.")
    if answer.dew_point_c is not None:
        add("dew", "Dew point?", writing.temperature(answer.dew_point_c, system), "Of the air now.")
    if answer.green_fraction is not None:
        add("green", "Movement while green?", writing.percent(answer.green_fraction), "Of the narrowest width, over the swing entered. A rough guide: how far a green bead may move depends on the sealant.")
    return bands


def _narrow(answer: FaceAnswer, system: str) -> str:
    """What the narrowest place takes, which is where the class is judged."""
    if answer.narrow_strain_fractions is None or answer.least_mm is None:
        return ""
    hot, cold = answer.narrow_strain_fractions
    return f" At the narrowest, {writing.down(answer.least_mm, system)}, where the class is judged: {writing.percent(hot, signed=True)} to {writing.percent(cold, signed=True)}."


def _rod_detail(rod: Backing, system: str) -> str:
    """The size at each width where one cannot serve the whole range."""
    if rod.fits or len(rod.bands) < 2:
        return rod.advice
    return f"{rod.advice} {', '.join(f'{band.size_label} up to {writing.down(band.width_to_mm, system)}' for band in rod.bands)}."
