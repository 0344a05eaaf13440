#!/usr/bin/env python3
"""Set up, build, and serve Beadwright on this machine, with the demo job open.

    python3 demo/start.py [--port N] [--no-build] [--no-open] [--developer]
"""

import sys

if sys.version_info < (3, 11):  # said before anything newer is used
    sys.exit("Stopped: Python 3.11 or newer is needed; this is " + sys.version.split()[0] + ".")

import argparse
import os
import webbrowser
from pathlib import Path

sys.path.insert(0, str(Path(__file__).resolve().parent))

import steps
from server import DIST, LOOPBACK, Site

PORT = 8420


def options() -> argparse.Namespace:
    parser = argparse.ArgumentParser(description="Set up, build and serve Beadwright on this machine.")
    parser.add_argument("--port", type=int, default=PORT, help=f"port on {LOOPBACK} (default {PORT}; 0 takes a free one)")
    parser.add_argument("--no-build", action="store_true", help="serve what was built last")
    parser.add_argument("--no-open", action="store_true", help="do not open a browser window")
    parser.add_argument("--developer", action="store_true", help="no build of Python: edit pycore/, reload the page")
    return parser.parse_args()


def listening(port: int, is_developer: bool) -> Site:
    try:
        return Site(DIST, port, is_developer).start()
    except OSError:
        if port != PORT:
            steps.stop(f"port {port} is taken; choose another with --port, or --port 0 for a free one.")
        steps.say(f"port {port} is taken: using a free one")
        return Site(DIST, 0, is_developer).start()


def has_screen() -> bool:
    return sys.platform != "linux" or bool(os.environ.get("DISPLAY") or os.environ.get("WAYLAND_DISPLAY"))


def main() -> None:
    asked = options()
    if not asked.no_build:
        steps.check_versions()
        steps.make_venv()
        steps.npm_ci()
        steps.build(*(["--developer", "--shell"] if asked.developer else []))
    if not (DIST / "index.html").is_file():
        steps.stop("nothing is built yet: run this once without --no-build.")
    site = listening(asked.port, asked.developer)
    demos = sorted((steps.ROOT / "demo").glob("*.beadwright.json"))
    page = f"#/demo/{demos[0].name.removesuffix('.beadwright.json')}" if demos else ""
    address = f"{site.url}{'?core=developer' if asked.developer else ''}{page}"
    print(f"\nBeadwright is at  {address}\nIt stays on this machine. Ctrl-C ends it.\n", flush=True)
    if not asked.no_open and has_screen():
        webbrowser.open(address)
    site.serve_until_interrupted()
    print("\nEnded.")


if __name__ == "__main__":
    main()
