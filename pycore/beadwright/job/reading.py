"""The one door for bytes that come from outside.

Whatever stands in a file, the answer is a job with named issues or a refusal with one; never
an exception, never a half-read job that looks whole.
"""

from __future__ import annotations

import json
from typing import Any

from attrs import field, frozen

from ..working import Issue
from .limits import FORBIDDEN_KEYS, FORMAT, MAX_BYTES, MAX_DEPTH, VERSION, find_breach
from .migrations import migrate


@frozen
class Opened:
    """What came out of a file: the job or None, what was found, and whether it may be written."""

    job: dict[str, Any] | None
    issues: list[Issue] = field(factory=list)
    read_only: bool = False
    from_version: int | None = None


class _Refused(Exception):
    """Carries the reason out of the JSON decoder's hooks."""

    def __init__(self, code: str, message: str) -> None:
        super().__init__(message)
        self.code = code
        self.message = message


def open_bytes(data: bytes) -> Opened:
    """Read a job file.

    Parameters
    ----------
    data : bytes
        The whole file, UTF-8 (a byte-order mark is accepted).

    Returns
    -------
    Opened
        `job` is None when the file is refused; then exactly one error says why and what to do.
    """
    try:
        return _open(data)
    except _Refused as refusal:
        return Opened(None, [Issue("", refusal.code, "error", refusal.message)])


def _open(data: bytes) -> Opened:
    if len(data) > MAX_BYTES:
        raise _Refused("file-too-large", f"The file is larger than {MAX_BYTES // 1024 // 1024} MiB, the most that a job file may be.")
    if not data.strip():
        raise _Refused("file-empty", "The file is empty.")
    try:
        text = data.decode("utf-8-sig")
    except UnicodeDecodeError:
        raise _Refused("not-text", "This is not a job file: it is not UTF-8 text.") from None
    _check_nesting(text)
    try:
        value = json.loads(text, parse_constant=_no_constant, object_pairs_hook=_unique, parse_int=_short_int, parse_float=_short_float)
    except json.JSONDecodeError as error:
        raise _Refused("not-json", f"The file is cut off or damaged at line {error.lineno}, column {error.colno}; it cannot be read as a job file.") from None
    if not isinstance(value, dict) or value.get("format") != FORMAT:
        raise _Refused("foreign-file", "This is not a Beadwright job file: its first entry does not say so. Nothing was changed.")
    version = value.get("version")
    if isinstance(version, bool) or not isinstance(version, int) or version < 1:
        raise _Refused("no-version", "The job file does not say which version it is, so it cannot be read safely.")
    if breach := find_breach(value):
        raise _Refused(breach.code, breach.message)
    if version > VERSION:
        message = (
            f"This job was written by a newer Beadwright (file version {version}; this one knows up to {VERSION}). "
            "It opens for reading only. Update the app to change it; the file itself can be passed on unchanged."
        )
        return Opened(value, [Issue("/version", "newer-version", "warning", message, value=version, limit=VERSION)], read_only=True, from_version=version)
    return Opened(migrate(value, version), _shape_issues(value), from_version=version)


def _check_nesting(text: str) -> None:
    """Refuse deep nesting before the decoder recurses into it."""
    depth = 0
    in_text = escaped = False
    for ch in text:
        if in_text:
            if escaped:
                escaped = False
            elif ch == "\\":
                escaped = True
            elif ch == '"':
                in_text = False
        elif ch == '"':
            in_text = True
        elif ch in "[{":
            depth += 1
            if depth > MAX_DEPTH:
                raise _Refused("too-deep", f"The file is nested more than {MAX_DEPTH} levels deep.")
        elif ch in "]}":
            depth -= 1


def _no_constant(name: str) -> float:
    raise _Refused("not-a-number", f"The file holds “{name}” where a number belongs.")


def _short_int(text: str) -> int:
    if len(text) > 30:
        raise _Refused("not-a-number", "The file holds a number with too many digits.")
    return int(text)


def _short_float(text: str) -> float:
    value = float(text)
    if value in (float("inf"), float("-inf")):
        raise _Refused("not-a-number", "The file holds a number that is out of any range.")
    return value


def _unique(pairs: list[tuple[str, Any]]) -> dict[str, Any]:
    found = dict(pairs)
    if len(found) != len(pairs):
        raise _Refused("double-key", "The file names the same entry twice, so it cannot be told which one holds.")
    for key in found:
        if key in FORBIDDEN_KEYS:
            raise _Refused("forbidden-key", f"The file uses the name “{key}”, which is not allowed.")
    return found


_LISTS = ("sealants", "joints", "surveys")
_OBJECTS = ("site", "takeoff", "cure")


def _shape_issues(value: dict[str, Any]) -> list[Issue]:
    """Parts of the wrong shape: they are kept, and named, so that nothing vanishes silently."""
    issues = []
    for key in _LISTS:
        part = value.get(key)
        if part is not None and not isinstance(part, list):
            issues.append(Issue(f"/{key}", "not-a-list", "error", f"The part “{key}” is damaged: a list was expected. It is kept but not used."))
        elif isinstance(part, list):
            issues.extend(
                Issue(f"/{key}/{index}", "not-an-object", "error", f"Row {index + 1} of “{key}” is damaged. It is kept but not used.")
                for index, row in enumerate(part)
                if not isinstance(row, dict)
            )
    for key in _OBJECTS:
        if value.get(key) is not None and not isinstance(value[key], dict):
            issues.append(Issue(f"/{key}", "not-an-object", "error", f"The part “{key}” is damaged. It is kept but not used."))
    return issues
