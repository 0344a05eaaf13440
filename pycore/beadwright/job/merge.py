"""Compare two copies of a job, and merge them without deciding anything silently.

Lists of rows that carry an `id` are matched by it, so that a joint moved or added on one
tablet meets its twin on the other. Everything else is compared whole.
"""

from __future__ import annotations

from typing import Any

from .limits import pointer

_MISSING = object()
Change = dict[str, Any]


def _is_rows(value: object) -> bool:
    return isinstance(value, list) and all(isinstance(row, dict) and isinstance(row.get("id"), str) and row["id"] for row in value) and len({row["id"] for row in value}) == len(value)


def _children(value: object) -> dict[str, Any] | None:
    """The named parts of an object or of a list of rows with ids; None for a single value."""
    if isinstance(value, dict):
        return value
    if _is_rows(value):
        return {row["id"]: row for row in value}  # type: ignore[attr-defined]
    return None


def _same_sort(one: object, other: object) -> bool:
    return isinstance(one, dict) == isinstance(other, dict)


def _label(path: tuple[str, ...], *jobs: object) -> str:
    """A path in words: the name of each row instead of its id."""
    words = []
    for depth, part in enumerate(path):
        rows = (_walk(job, path[: depth + 1]) for job in jobs)
        names = (row.get("name") or row.get("label") for row in rows if isinstance(row, dict))
        name = next((name for name in names if isinstance(name, str)), part)
        words.append(name.replace("_", " "))
    return " › ".join(words)


def _walk(value: object, path: tuple[str, ...]) -> object:
    for part in path:
        inner = _children(value)
        if inner is None or part not in inner:
            return _MISSING
        value = inner[part]
    return value


def _shown(value: object) -> object:
    return None if value is _MISSING else value


def compare(mine: dict[str, Any], theirs: dict[str, Any]) -> dict[str, list[Change]]:
    """What taking `theirs` over `mine` would change, place by place.

    Returns
    -------
    dict
        `changes`, each with `path`, `label`, `mine`, `theirs` and `kind` (changed, added, removed).
    """
    changes: list[Change] = []
    _compare((), mine, theirs, changes, mine, theirs)
    return {"changes": changes}


def _compare(path: tuple[str, ...], one: object, other: object, changes: list[Change], mine: object, theirs: object) -> None:
    left, right = _children(one), _children(other)
    if left is not None and right is not None and _same_sort(one, other):
        for key in [*left, *(key for key in right if key not in left)]:
            _compare((*path, key), left.get(key, _MISSING), right.get(key, _MISSING), changes, mine, theirs)
        if isinstance(one, list) and [k for k in left if k in right] != [k for k in right if k in left]:
            changes.append({"path": pointer(*path), "label": f"{_label(path, mine, theirs)}: order", "mine": list(left), "theirs": list(right), "kind": "changed"})
        return
    if one == other and type(one) is type(other):
        return
    kind = "added" if one is _MISSING else "removed" if other is _MISSING else "changed"
    changes.append({"path": pointer(*path), "label": _label(path, mine, theirs), "mine": _shown(one), "theirs": _shown(other), "kind": kind})


def merge(mine: dict[str, Any], theirs: dict[str, Any], base: dict[str, Any] | None = None, choices: dict[str, str] | None = None) -> dict[str, Any]:
    """Merge two copies of one job.

    With a common `base`, a change on one side only is taken; without one, rows and entries that
    stand on one side only are kept. What differs on both sides is a conflict: `mine` stays until
    `choices[path]` says `theirs`.

    Returns
    -------
    dict
        `job`, and `conflicts` with `path`, `label`, `base`, `mine`, `theirs`.
    """
    conflicts: list[Change] = []
    start: object = base if base is not None else _MISSING
    merged = _merge((), start, mine, theirs, conflicts, choices or {}, (mine, theirs))
    return {"job": merged, "conflicts": conflicts}


def _merge(path: tuple[str, ...], base: object, one: object, other: object, conflicts: list[Change], choices: dict[str, str], jobs: tuple[object, object]) -> object:
    if one == other and type(one) is type(other):
        return one
    left, right = _children(one), _children(other)
    if left is not None and right is not None and _same_sort(one, other):
        before = _children(base) if base is not _MISSING else None
        merged: dict[str, Any] = {}
        for key in [*left, *(key for key in right if key not in left)]:
            inner = _MISSING if before is None else before.get(key, _MISSING)
            value = _merge((*path, key), inner, left.get(key, _MISSING), right.get(key, _MISSING), conflicts, choices, jobs)
            if value is not _MISSING:
                merged[key] = value
        return list(merged.values()) if isinstance(one, list) else merged
    if base is not _MISSING:
        if one == base:
            return other
        if other == base:
            return one
    elif one is _MISSING:
        return other
    elif other is _MISSING:
        return one
    place = pointer(*path)
    conflicts.append({"path": place, "label": _label(path, *jobs), "base": _shown(base), "mine": _shown(one), "theirs": _shown(other)})
    return other if choices.get(place) == "theirs" else one
