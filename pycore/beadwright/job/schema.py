"""The published JSON Schema of the job file, built from the declared fields.

`python -m beadwright.job.schema` writes `beadwright-job-1.schema.json` beside this module; a
test holds the two together. The schema tells shapes and allowed words, not limits of trade:
those are findings of an evaluation, never a reason to refuse a file.
"""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

from ..fields import (
    CAUSE,
    CURE,
    CUT,
    EXTRA,
    FACE,
    JOB,
    JOINT,
    PACK,
    RATE,
    ROOM,
    RUN,
    SEALANT,
    SEALED,
    SIDE,
    SITE,
    TAKEOFF,
    TWO_PART,
    WEATHER,
    Field,
    Group,
)
from .limits import FORMAT, MAX_JOINTS, MAX_TEXT, VERSION

PATH = Path(__file__).with_name(f"beadwright-job-{VERSION}.schema.json")


def _of_field(item: Field) -> dict[str, Any]:
    about = {"title": item.label} | ({"description": item.help} if item.help else {})
    if item.kind == "flag":
        return about | {"type": "boolean"}
    if item.choices:
        return about | {"type": "string", "enum": ["", *(choice.value for choice in item.choices)]}
    if item.kind in ("number", "count"):
        return about | {"type": ["string", "number"]}
    if item.units:
        return about | {"type": "string", "maxLength": MAX_TEXT, "examples": sorted({item.example} if isinstance(item.example, str) else set(item.example.values()))}
    return about | {"type": "string", "maxLength": MAX_TEXT}


def _of_group(spec: Group, **more: Any) -> dict[str, Any]:
    return {"type": "object", "title": spec.label, "properties": {item.key: _of_field(item) for item in spec.fields} | more}


def _rows(row: dict[str, Any], limit: int = MAX_JOINTS) -> dict[str, Any]:
    row["properties"] = {"id": {"type": "string", "minLength": 1, "maxLength": 80}} | row["properties"]
    row["required"] = ["id"]
    return {"type": "array", "items": row, "maxItems": limit}


def build() -> dict[str, Any]:
    """The schema of the newest version; unknown entries are allowed everywhere and kept."""
    side = {"$ref": "#/$defs/side"}
    joint = _of_group(JOINT, side_a=side, side_b=side, causes=_rows(_of_group(CAUSE), 100), face=_of_group(FACE))
    head = _of_group(JOB)["properties"]
    return {
        "$schema": "https://json-schema.org/draft/2020-12/schema",
        "$id": f"beadwright-job-{VERSION}.schema.json",
        "title": "Beadwright job file",
        "description": "A quantity is a text with its unit, such as \"3.2 m\", \"3/8 in\" or \"34 degC\".",
        "type": "object",
        "required": ["format", "version"],
        "properties": {
            "format": {"const": FORMAT},
            "version": {"const": VERSION},
            "id": {"type": "string", "maxLength": 80},
            **head,
            "site": _of_group(SITE),
            "sealants": _rows(_of_group(SEALANT)),
            "joints": _rows(joint),
            "takeoff": _of_group(TAKEOFF, runs=_rows(_of_group(RUN)), packs=_rows(_of_group(PACK), 200), extras=_rows(_of_group(EXTRA), 200), rates=_rows(_of_group(RATE), 200)),
            "cure": _of_group(CURE, sealed=_rows(_of_group(SEALED)), weather=_rows(_of_group(WEATHER)), cuts=_rows(_of_group(CUT), 200), two_part=_rows(_of_group(TWO_PART), 200), room=_of_group(ROOM)),
            "surveys": {"type": "array", "items": {"type": "object"}},
        },
        "$defs": {"side": _of_group(SIDE)},
    }


def to_text() -> str:
    """The schema as it is published."""
    return json.dumps(build(), ensure_ascii=False, indent=1) + "\n"


if __name__ == "__main__":
    PATH.write_text(to_text(), encoding="utf-8")
