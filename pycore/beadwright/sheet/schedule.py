"""The joint schedule as CSV (RFC 4180): one row a joint, numbers in the unit named in the header."""

from __future__ import annotations

import csv
import io
from collections.abc import Iterable, Mapping
from typing import Any

_RISKY = ("=", "+", "-", "@", "\t", "\r")
_COLUMNS: tuple[tuple[str, tuple[str, ...]], ...] = (
    ("Joint", ("name",)),
    ("Where", ("place",)),
    ("Kind", ("kind_word",)),
    ("Verdict", ("verdict_word",)),
    ("Opening [mm]", ("movement", "opening_mm")),
    ("Closing [mm]", ("movement", "closing_mm")),
    ("Shear [mm]", ("movement", "shear_mm")),
    ("Width present [mm]", ("width", "present_mm")),
    ("Width required [mm]", ("width", "required_mm")),
    ("Width design [mm]", ("width", "design_mm")),
    ("Depth [mm]", ("depth", "neck_mm")),
    ("Bond [mm]", ("depth", "bond_mm")),
    ("Rod [mm]", ("backing", "diameter_mm")),
    ("Section [mm2]", ("section", "area_mm2")),
    ("Seal from [degC]", ("window", "from_c")),
    ("Seal to [degC]", ("window", "to_c")),
)


def safe_cell(value: object) -> object:
    """A text that a spreadsheet would run as a formula gets an apostrophe in front; numbers stay numbers."""
    if isinstance(value, str) and value.startswith(_RISKY):
        return f"'{value}"
    return value


def schedule_csv(joints: Iterable[Mapping[str, Any]]) -> bytes:
    """All joints as CSV, UTF-8 with a byte-order mark so that spreadsheets read it as such."""
    out = io.StringIO(newline="")
    writer = csv.writer(out, lineterminator="\r\n")
    writer.writerow([title for title, _ in _COLUMNS])
    for joint in joints:
        writer.writerow([_cell(joint, path) for _, path in _COLUMNS])
    return ("\ufeff" + out.getvalue()).encode("utf-8")


def _cell(joint: Mapping[str, Any], path: tuple[str, ...]) -> object:
    value: Any = joint
    for key in path:
        value = value.get(key) if isinstance(value, dict) else None
    return round(value, 3) if isinstance(value, float) else "" if value is None else safe_cell(value)
