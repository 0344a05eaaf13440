"""The steps that setting up consists of, shared by demo/start.py and tests/run.py.

Each says what it does, does nothing when it was done before, and stops with one sentence that
tells what is missing. Only the standard library is used.
"""

from __future__ import annotations

import hashlib
import os
import platform
import shutil
import subprocess
import sys
import time
from pathlib import Path
from typing import NoReturn

ROOT = Path(__file__).resolve().parents[1]
WEB = ROOT / "web"
VENV = ROOT / ".venv"
CORE_WHEELS = WEB / "vendor" / "wheels.txt"
TEST_WHEELS = ROOT / "tests" / "requirements.txt"
LEAST_PYTHON = (3, 11)
LEAST_NODE = 20

BROWSER_NAMES = ("chromium", "chromium-browser", "google-chrome", "google-chrome-stable", "chrome")
BROWSER_PATHS = (
    "/Applications/Google Chrome.app/Contents/MacOS/Google Chrome",
    "/Applications/Chromium.app/Contents/MacOS/Chromium",
    r"C:\Program Files\Google\Chrome\Application\chrome.exe",
    r"C:\Program Files (x86)\Google\Chrome\Application\chrome.exe",
)


def say(text: str) -> None:
    print(f"· {text}", flush=True)


def stop(sentence: str) -> NoReturn:
    print(f"\nStopped: {sentence}", file=sys.stderr, flush=True)
    raise SystemExit(1)


def run(command: list[str], what: str, folder: Path = ROOT, is_shown: bool = False) -> None:
    """Run one command; its output is shown when it fails, or as it goes when `is_shown`."""
    if is_shown:
        if subprocess.run(command, cwd=folder).returncode != 0:
            stop(f"{what} failed; the lines above say why.")
        return
    done = subprocess.run(command, cwd=folder, capture_output=True, text=True)
    if done.returncode != 0:
        print(done.stdout[-4000:], done.stderr[-4000:], sep="\n", file=sys.stderr)
        stop(f"{what} failed; the lines above say why.")


def _mark(*parts: str | Path) -> str:
    digest = hashlib.sha256(f"{sys.version_info[:3]} {platform.machine()}".encode())
    for part in parts:
        digest.update(part.read_bytes() if isinstance(part, Path) else part.encode())
    return digest.hexdigest()


def _is_done(stamp: Path, mark: str) -> bool:
    return stamp.is_file() and stamp.read_text("utf-8") == mark


# ---- what must be there -------------------------------------------------------------------------


def check_versions() -> None:
    """Python and Node, each with a plain sentence when missing or too old."""
    if sys.version_info < LEAST_PYTHON:
        stop(f"Python 3.11 or newer is needed; this is {platform.python_version()}.")
    node = shutil.which("node")
    if node is None or shutil.which("npm") is None:
        stop("Node 20 or newer with npm is needed, and was not found. Install it (nodejs and npm) and run this again.")
    version = subprocess.run([node, "--version"], capture_output=True, text=True).stdout.strip()
    if int(version.lstrip("v").split(".")[0] or 0) < LEAST_NODE:
        stop(f"Node 20 or newer is needed; this is {version}.")


def venv_python() -> Path:
    folder = VENV / ("Scripts" if os.name == "nt" else "bin")
    return folder / ("python.exe" if os.name == "nt" else "python")


def make_venv() -> None:
    """The one Python environment of the project, with the core's packages and the core on its path."""
    python = venv_python()
    alive = python.exists() and subprocess.run([str(python), "-c", "import pip"], capture_output=True).returncode == 0
    if not alive:
        say("making the Python environment .venv")
        shutil.rmtree(VENV, ignore_errors=True)
        made = subprocess.run([sys.executable, "-m", "venv", str(VENV)], capture_output=True, text=True)
        if made.returncode != 0:
            print(made.stdout[-1500:], made.stderr[-1500:], file=sys.stderr)
            stop("Python could not make a virtual environment. On Debian and Ubuntu install the package python3-venv.")
    stamp, mark = VENV / "core.stamp", _mark(CORE_WHEELS)
    if not _is_done(stamp, mark):
        say("installing the core's packages (pint, attrs, cattrs), each checked against its hash")
        pip_install(CORE_WHEELS)
        stamp.write_text(mark, "utf-8")
    packages = subprocess.run([str(python), "-c", "import sysconfig; print(sysconfig.get_paths()['purelib'])"], capture_output=True, text=True, check=True)
    (Path(packages.stdout.strip()) / "beadwright.pth").write_text(f"{ROOT / 'pycore'}\n", "utf-8")


def pip_install(requirements: Path) -> None:
    command = [str(venv_python()), "-m", "pip", "install", "--quiet", "--disable-pip-version-check", "--require-hashes", "--no-deps", "-r", str(requirements)]
    run(command, f"installing {requirements.relative_to(ROOT)} (the network or a package index may be out of reach)")


def install_test_packages() -> None:
    stamp, mark = VENV / "tests.stamp", _mark(TEST_WHEELS)
    if _is_done(stamp, mark):
        return
    say("installing the test packages, each checked against its hash")
    pip_install(TEST_WHEELS)
    stamp.write_text(mark, "utf-8")


def npm_ci() -> None:
    """The JavaScript packages exactly as the lock file has them."""
    stamp, mark = WEB / "node_modules" / ".beadwright", _mark(WEB / "package-lock.json")
    if _is_done(stamp, mark):
        return
    say("installing the JavaScript packages of web/package-lock.json")
    npm = shutil.which("npm") or "npm"
    run([npm, "ci", "--no-audit", "--no-fund"], "npm ci (the network or the npm registry may be out of reach)", WEB)
    stamp.write_text(mark, "utf-8")


def build(*options: str) -> None:
    say("building (the first time takes a minute or two; later only what changed)")
    os.environ.setdefault("BEADWRIGHT_PYTHON", str(venv_python()))
    run([shutil.which("node") or "node", "build/build.mjs", *options], "the build", WEB, is_shown=True)


# ---- the browser of the tests -------------------------------------------------------------------


def installed_browser() -> str | None:
    named = os.environ.get("BEADWRIGHT_CHROMIUM")
    if named:
        if not Path(named).exists():
            stop(f"BEADWRIGHT_CHROMIUM names {named}, which does not exist.")
        return named
    return next(filter(None, (shutil.which(name) for name in BROWSER_NAMES)), None) or next((path for path in BROWSER_PATHS if Path(path).exists()), None)


def find_or_install_browser() -> str | None:
    """Path of a Chromium or Chrome; None where Playwright's own copy is used."""
    found = installed_browser()
    if found:
        return found
    if sys.platform == "linux" and shutil.which("apt-get") and os.geteuid() == 0:
        say("no Chromium found: installing the package chromium with apt-get")
        quiet = {**os.environ, "DEBIAN_FRONTEND": "noninteractive"}
        subprocess.run(["apt-get", "update", "-qq"], env=quiet, capture_output=True)
        done = subprocess.run(["apt-get", "install", "-y", "-qq", "--no-install-recommends", "chromium"], env=quiet, capture_output=True, text=True)
        found = installed_browser()
        if found:
            return found
        print(done.stderr[-1500:], file=sys.stderr)
    say("no Chromium found: asking Playwright for its own")
    done = subprocess.run([str(venv_python()), "-m", "playwright", "install", "chromium"], capture_output=True, text=True)
    if done.returncode != 0:
        print(done.stderr[-1500:], file=sys.stderr)
        stop("no browser for the tests: install Chromium or Chrome, or name one in BEADWRIGHT_CHROMIUM.")
    return None


def install_libreoffice() -> None:
    """LibreOffice Calc without a window, for the test that recomputes a workbook; without it that test is skipped."""
    if shutil.which("soffice") or not (sys.platform == "linux" and shutil.which("apt-get") and os.geteuid() == 0):
        return
    say("no LibreOffice found: installing the package libreoffice-calc-nogui with apt-get")
    quiet = {**os.environ, "DEBIAN_FRONTEND": "noninteractive"}
    subprocess.run(["apt-get", "update", "-qq"], env=quiet, capture_output=True)
    done = subprocess.run(["apt-get", "install", "-y", "-qq", "--no-install-recommends", "libreoffice-calc-nogui"], env=quiet, capture_output=True, text=True)
    if done.returncode != 0:
        say("LibreOffice could not be installed; its test is skipped")


class Clock:
    """Says how long a step took when that is worth saying."""

    def __init__(self) -> None:
        self.started = time.monotonic()

    def seconds(self) -> float:
        return time.monotonic() - self.started
