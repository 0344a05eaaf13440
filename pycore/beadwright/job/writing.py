"""Write a job file, and make empty ones."""

from __future__ import annotations

import json
from typing import Any

from ..fields import Group, group
from .limits import FORMAT, VERSION

_FIRST = ("format", "version", "id", "title", "reference", "revision", "date", "units", "region")


def to_bytes(job: dict[str, Any]) -> bytes:
    """The job as UTF-8 JSON, known keys first; unknown keys are kept in their order."""
    ordered = {key: job[key] for key in _FIRST if key in job}
    ordered.update({key: value for key, value in job.items() if key not in ordered})
    return (json.dumps(ordered, ensure_ascii=False, indent=1, allow_nan=False) + "\n").encode("utf-8")


def _defaults(spec: Group, units: str) -> dict[str, Any]:
    return {item.key: default for item in spec.fields if (default := item.default_for(units)) is not None and not item.advanced}


def blank(units: str) -> dict[str, Any]:
    """An empty job in one unit system; the caller sets `id`."""
    head = {**_defaults(group("job"), units), "units": units}
    return {
        "format": FORMAT,
        "version": VERSION,
        "id": "",
        "title": "",
        **head,
        "site": _defaults(group("site"), units),
        "sealants": [],
        "joints": [],
        "takeoff": {},
        "cure": {},
        "surveys": [],
    }


def blank_row(key: str, units: str) -> dict[str, Any]:
    """An empty row of one group (`sealant`, `joint`, `side`, `run`, `pack`, …); the caller sets `id`."""
    row = _defaults(group(key), units)
    if key == "joint":
        row |= {"side_a": blank_row("side", units), "side_b": blank_row("side", units), "causes": [], "face": {}}
    if group(key).path.endswith("[]"):
        row = {"id": "", **row}
    return row
