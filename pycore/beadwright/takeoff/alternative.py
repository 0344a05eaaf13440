"""A job with something changed, to be laid beside the one as it is: width, class, sealant, phases, settings."""

from __future__ import annotations

import copy
from collections.abc import Mapping
from typing import Any

from ..quantity import INCH, METRIC, exact_text, parse
from ..working import InputError


def changed(job: Mapping[str, Any], change: Mapping[str, Any]) -> dict[str, Any]:
    """A copy of a job with a change made.

    Parameters
    ----------
    job : Mapping
        A decoded job file; it is left alone.
    change : Mapping
        Any of `width` (a length added to every width entered, of runs and of the joints that they
        point to, such as `3 mm` or `-1/16 in`), `sealant` (`{"from": id, "to": id}`), `one_phase`
        (True: all phases ordered together), `takeoff` (settings), `joints` (`{id: {key: value}}`),
        `sealants` (`{id: {key: value}}`, for example another class).

    Raises
    ------
    InputError
        When `width` cannot be read.
    """
    other = copy.deepcopy(dict(job))
    takeoff = other.get("takeoff")
    if not isinstance(takeoff, dict):
        return other
    system = INCH if other.get("units") == INCH else METRIC
    runs = _rows(takeoff.get("runs"))
    joints = {row.get("id"): row for row in _rows(other.get("joints"))}
    for name in ("joints", "sealants"):
        part = change.get(name)
        if isinstance(part, Mapping):
            for row in _rows(other.get(name)):
                row.update(part.get(row.get("id"), {}))
    if isinstance(change.get("takeoff"), Mapping):
        takeoff.update(change["takeoff"])
    swap = change.get("sealant")
    if isinstance(swap, Mapping):
        for row in [*runs, *joints.values()]:
            if row.get("sealant") == swap.get("from"):
                row["sealant"] = swap.get("to")
    if change.get("one_phase"):
        for row in runs:
            row["phase"] = ""
    if change.get("width"):
        pointed = {row.get("joint") for row in runs}
        _widen([*runs, *(row for name, row in joints.items() if name in pointed)], str(change["width"]), system)
    return other


def _rows(value: object) -> list[dict[str, Any]]:
    return [row for row in value if isinstance(row, dict)] if isinstance(value, list) else []


def _widen(rows: list[dict[str, Any]], by: str, system: str) -> None:
    unit = "in" if system == INCH else "mm"
    step = parse(by, "length", unit, system).exact
    for row in rows:
        for key in ("width", "width_least", "width_most"):
            typed = row.get(key)
            if not isinstance(typed, str) or not typed.strip():
                continue
            try:
                reading = parse(typed, "length", unit, system)
            except InputError:
                continue  # told at its cell when the changed job is evaluated
            row[key] = exact_text(reading.exact + step, "length", "in" if reading.unit in ("in", "ft") else "mm")
