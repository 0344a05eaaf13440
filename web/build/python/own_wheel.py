"""Build Beadwright's own wheel from the working tree, the same bytes every time.

Usage: own_wheel.py OUT_DIR. Prints the wheel's name. No build backend is needed, so the
developer server can make a fresh wheel at every reload.
"""

from __future__ import annotations

import base64
import hashlib
import sys
import tomllib
import zipfile
from pathlib import Path

ROOT = Path(__file__).resolve().parents[3]
CORE = ROOT / "pycore"
BRIDGE = ROOT / "web" / "src" / "core" / "bridge.py"
FIXED_TIME = (1980, 1, 1, 0, 0, 0)
KEPT = {".py", ".json", ".txt", ".typed"}


def _version() -> str:
    for line in (CORE / "beadwright" / "__init__.py").read_text("utf-8").splitlines():
        if line.startswith("__version__"):
            return line.split("=", 1)[1].strip().strip("\"'")
    raise SystemExit("pycore/beadwright/__init__.py names no __version__")


def members() -> dict[str, bytes]:
    """Every file of the package by its name in the wheel, and the bridge that the worker calls."""
    found = {
        path.relative_to(CORE).as_posix(): path.read_bytes()
        for path in sorted((CORE / "beadwright").rglob("*"))
        if path.is_file() and path.suffix in KEPT and "__pycache__" not in path.parts
    }
    found["beadwright_bridge.py"] = BRIDGE.read_bytes()
    return found


def build(out_dir: Path) -> Path:
    """Write the wheel and return its path."""
    project = tomllib.loads((ROOT / "pyproject.toml").read_text("utf-8"))["project"]
    version = _version()
    info = f"beadwright-{version}.dist-info"
    files = members()
    requires = "".join(f"Requires-Dist: {item}\n" for item in project["dependencies"])
    files[f"{info}/METADATA"] = (
        f"Metadata-Version: 2.4\nName: beadwright\nVersion: {version}\n"
        f"Summary: {project['description']}\nLicense-Expression: {project['license']}\n"
        f"Requires-Python: {project['requires-python']}\n{requires}"
    ).encode()
    files[f"{info}/licenses/LICENSE"] = (ROOT / "LICENSE").read_bytes()
    files[f"{info}/WHEEL"] = (
        b"Wheel-Version: 1.0\nGenerator: beadwright\nRoot-Is-Purelib: true\nTag: py3-none-any\n"
    )
    record = []
    for name, data in files.items():
        digest = base64.urlsafe_b64encode(hashlib.sha256(data).digest()).rstrip(b"=").decode()
        record.append(f"{name},sha256={digest},{len(data)}\n")
    files[f"{info}/RECORD"] = ("".join(record) + f"{info}/RECORD,,\n").encode()

    out_dir.mkdir(parents=True, exist_ok=True)
    target = out_dir / f"beadwright-{version}-py3-none-any.whl"
    with zipfile.ZipFile(target, "w", zipfile.ZIP_DEFLATED, compresslevel=6) as wheel:
        for name, data in files.items():
            entry = zipfile.ZipInfo(name, FIXED_TIME)
            entry.compress_type = zipfile.ZIP_DEFLATED
            entry.external_attr = 0o644 << 16
            wheel.writestr(entry, data)
    return target


if __name__ == "__main__":
    print(build(Path(sys.argv[1])).name)
