"""The only Python that the worker calls: JSON text in, JSON text out, nothing raised.

Bad user input never raises in the core; whatever does is a fault of ours and comes back
with a reference code, so that two reports of one fault can be told to be the same.
"""

from __future__ import annotations

import base64
import hashlib
import importlib.util
import json
import os
import sys
import time
import traceback
from typing import Any

from beadwright import desk
from beadwright.curing import clock

METHODS = (
    "forms", "evaluate", "export", "frames", "open_file", "blank", "blank_row", "compare", "merge",
    "paste_runs", "compare_takeoff",
)
_BYTES = "$bytes"
# Packages that only some calls need: the worker brings them before it asks.
_LATE = {"takeoff-xlsx": ("openpyxl",), "calendar": ("tzdata",), "cure-sheet": ("tzdata",), "text": ("tzdata",)}
_CURE_ONLY = '["cure"]]'  # how the parameters of `evaluate` end when the page of the cure asks


def _arriving(value: Any) -> Any:
    if isinstance(value, dict) and len(value) == 1 and _BYTES in value:
        return base64.b64decode(value[_BYTES])
    return value


def _leaving(value: Any) -> Any:
    if isinstance(value, (bytes, bytearray)):
        return {_BYTES: base64.b64encode(value).decode("ascii")}
    if isinstance(value, (list, tuple)):
        return [_leaving(item) for item in value]
    return value


def _export(*params: Any) -> dict[str, Any]:
    name, media, data = desk.export(*params)
    return {"name": name, "media": media, "bytes": _leaving(data)}


def _fault(error: BaseException) -> dict[str, Any]:
    frames = traceback.extract_tb(error.__traceback__)
    place = [f"{os.path.basename(frame.filename)}:{frame.name}" for frame in frames[-4:]]
    mark = hashlib.sha256("|".join([type(error).__name__, *place]).encode()).hexdigest()[:6].upper()
    return {
        "code": f"PY-{mark}",
        "kind": type(error).__name__,
        "message": str(error)[:500],
        "trace": "".join(traceback.format_exception(error))[-4000:],
        # after these the interpreter's state is in doubt: the page restarts the worker
        "fatal": isinstance(error, (MemoryError, SystemError, SystemExit, KeyboardInterrupt)),
    }


def wanted(method: str, params_text: str) -> str:
    """The packages that this call needs and that are not there yet, between blanks."""
    names: tuple[str, ...] = ()
    if method == "evaluate" and params_text.endswith(_CURE_ONLY):
        names = ("tzdata",)
    elif method == "export":
        params = json.loads(params_text)
        names = _LATE.get(str(params[1]), ()) if len(params) > 1 else ()
    missing = [name for name in names if importlib.util.find_spec(name) is None]
    if "tzdata" in missing:
        _forget_zones()
    return " ".join(missing)


def _forget_zones() -> None:
    """What was answered without the rules of time zones must not outlive their coming."""
    clock.zone_rules.cache_clear()
    clock.has_rules.cache_clear()
    desk._cure_part.cache_clear()


def call(method: str, params_text: str) -> str:
    """Run one method of the desk; the answer is `{"ok": ..., "result" | "error": ...}` as text."""
    try:
        if method not in METHODS:
            raise LookupError(f"the core has no method '{method}'")
        params = [_arriving(value) for value in json.loads(params_text)]
        run = _export if method == "export" else getattr(desk, method)
        answer = {"ok": True, "result": _leaving(run(*params))}
        return json.dumps(answer, ensure_ascii=False, separators=(",", ":"), allow_nan=False)
    except BaseException as error:
        return json.dumps({"ok": False, "error": _fault(error)})


def settle(zone: str, language: str) -> str:
    """Put right what a memory snapshot brings along from the building machine; name the versions."""
    import random

    random.seed(os.urandom(32))
    os.environ["LANG"] = language
    os.environ["TZ"] = zone
    if hasattr(time, "tzset"):
        time.tzset()
    import beadwright

    return json.dumps({"core": beadwright.__version__, "python": sys.version.split()[0]})
