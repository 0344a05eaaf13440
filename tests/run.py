#!/usr/bin/env python3
"""Set everything up, a browser included, and run every check and test.

    python3 tests/run.py [--setup] [--fast] [--long] [pytest arguments …]

--setup  only set up (environment, packages, browser, build)
--fast   leave out what drives a browser
--long   add the tests that take many minutes
"""

import sys

if sys.version_info < (3, 11):  # said before anything newer is used
    sys.exit("Stopped: Python 3.11 or newer is needed; this is " + sys.version.split()[0] + ".")

import os
import subprocess
from pathlib import Path

ROOT = Path(__file__).resolve().parents[1]
sys.path.insert(0, str(ROOT / "demo"))

import steps

CHECKED = ["pycore", "tests", "demo", "web/build/python", "web/src/core/bridge.py"]


def checks() -> list[str]:
    """Lint and types, each run to its end; returns the names of those that failed."""
    python = str(steps.venv_python())
    tsc = str(steps.WEB / "node_modules" / "typescript" / "bin" / "tsc")
    node = "node"
    wanted = [
        ("ruff", [python, "-m", "ruff", "check", "--quiet", *CHECKED], ROOT),
        ("mypy", [python, "-m", "mypy", "--no-error-summary"], ROOT),
        ("tsc (page)", [node, tsc, "--noEmit"], steps.WEB),
        ("tsc (workers)", [node, tsc, "--noEmit", "-p", "tsconfig.worker.json"], steps.WEB),
    ]
    failed = []
    for name, command, folder in wanted:
        steps.say(f"checking with {name}")
        if subprocess.run(command, cwd=folder).returncode != 0:
            failed.append(name)
    return failed


def main() -> int:
    own = {"--setup", "--fast", "--long"}
    asked = own.intersection(sys.argv[1:])
    passed_on = [argument for argument in sys.argv[1:] if argument not in own]

    steps.check_versions()
    steps.make_venv()
    steps.install_test_packages()
    steps.npm_ci()
    browser = None if "--fast" in asked else steps.find_or_install_browser()
    if "--fast" not in asked:
        steps.install_libreoffice()
    if browser:
        os.environ["BEADWRIGHT_CHROMIUM"] = browser
    steps.build()
    if "--setup" in asked:
        steps.say("ready: .venv, web/node_modules, web/dist" + (f", browser {browser}" if browser else ""))
        return 0

    failed = checks()
    chosen = []
    if "--fast" in asked:
        chosen.append("--ignore=tests/browser")
    if "--long" not in asked:
        chosen += ["-m", "not long"]
    steps.say("running the tests")
    result = subprocess.run([str(steps.venv_python()), "-m", "pytest", *chosen, *passed_on], cwd=ROOT)
    if failed:
        # Said before pytest's own last line would be hidden: the tests ran, and still this is a failure.
        print(f"Failed checks: {', '.join(failed)}", file=sys.stderr, flush=True)
    return result.returncode or (1 if failed else 0)


if __name__ == "__main__":
    raise SystemExit(main())
