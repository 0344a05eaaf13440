"""Write what the page shows before Python is ready: forms.json, blank jobs, demo jobs, their index.

Usage: static.py OUT_DIR. Runs on CPython from the working tree.
"""

from __future__ import annotations

import json
import sys
from pathlib import Path
from typing import Any

ROOT = Path(__file__).resolve().parents[3]
sys.path.insert(0, str(ROOT / "pycore"))

from beadwright import desk  # noqa: E402


def dump(path: Path, value: Any) -> None:
    path.parent.mkdir(parents=True, exist_ok=True)
    path.write_text(json.dumps(value, ensure_ascii=False, separators=(",", ":")) + "\n", "utf-8")


def main(out: Path) -> None:
    dump(out / "site" / "forms.json", desk.forms())
    blanks = {units: desk.blank(units) for units in ("metric", "inch")}
    dump(out / "site" / "blank.json", blanks)

    index = []
    first = None
    for path in sorted((ROOT / "demo").glob("*.beadwright.json")):
        opened = desk.open_file(path.read_bytes())
        if opened["job"] is None:
            raise SystemExit(f"build: {path.name} does not open: {opened['issues']}")
        job = opened["job"]
        dump(out / "site" / "demo" / path.name, job)
        index.append({"file": f"demo/{path.name}", "id": job["id"], "title": job.get("title", path.stem)})
        first = first or job
    dump(out / "site" / "demo" / "index.json", index)
    if first is None:
        print("build: demo/ holds no *.beadwright.json yet; the snapshot is warmed with a blank job", file=sys.stderr)
    dump(out / "first.json", first or blanks["metric"])
    dump(out / "site" / "demo" / "first.json", first or blanks["metric"])


if __name__ == "__main__":
    main(Path(sys.argv[1]))
