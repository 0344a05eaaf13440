"""What a job file may hold at most, and how a foreign object is measured against it."""

from __future__ import annotations

from typing import Any

from attrs import frozen

FORMAT = "beadwright-job"
VERSION = 1

MAX_BYTES = 16 * 1024 * 1024
MAX_DEPTH = 24
MAX_JOINTS = 5000
MAX_ROWS = 20000
MAX_TEXT = 20000
MAX_KEYS = 400
MAX_KEY_LENGTH = 200
# Names that reach into the machinery of the page when an object is copied carelessly there.
FORBIDDEN_KEYS = frozenset({"__proto__", "constructor", "prototype"})


@frozen
class Breach:
    """One limit that a file breaks: where, a stable code and a sentence."""

    path: str
    code: str
    message: str


def pointer(*parts: object) -> str:
    """JSON Pointer (RFC 6901) of a path given as keys and indices."""
    return "".join("/" + str(part).replace("~", "~0").replace("/", "~1") for part in parts)


def find_breach(value: Any) -> Breach | None:
    """The first limit that a decoded JSON value breaks, or None; works without recursion."""
    stack: list[tuple[Any, str, int]] = [(value, "", 0)]
    while stack:
        item, path, depth = stack.pop()
        if depth > MAX_DEPTH:
            return Breach(path, "too-deep", f"The file is nested more than {MAX_DEPTH} levels deep.")
        if isinstance(item, str):
            if len(item) > MAX_TEXT:
                return Breach(path, "text-too-long", f"A text in the file is longer than {MAX_TEXT} characters.")
            if any("\ud800" <= ch <= "\udfff" for ch in item):
                return Breach(path, "broken-text", "A text in the file holds half a character (a lone surrogate).")
        elif isinstance(item, dict):
            if len(item) > MAX_KEYS:
                return Breach(path, "too-many-keys", f"One part of the file has more than {MAX_KEYS} entries.")
            for key, inner in item.items():
                if key in FORBIDDEN_KEYS:
                    return Breach(pointer(key) if not path else path + pointer(key), "forbidden-key", f"The file uses the name “{key}”, which is not allowed.")
                if len(key) > MAX_KEY_LENGTH or any("\ud800" <= ch <= "\udfff" for ch in key):
                    return Breach(path, "bad-key", "A name in the file is too long or damaged.")
                stack.append((inner, path + pointer(key), depth + 1))
        elif isinstance(item, list):
            limit = MAX_JOINTS if path == "/joints" else MAX_ROWS
            if len(item) > limit:
                what = "joints" if path == "/joints" else "rows in one list"
                return Breach(path, "too-many-rows", f"The file has {len(item)} {what}; at most {limit} are read.")
            stack.extend((inner, f"{path}/{index}", depth + 1) for index, inner in enumerate(item))
    return None
