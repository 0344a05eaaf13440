#!/usr/bin/env python3
"""Take the pictures of the README anew from the built app: `.venv/bin/python demo/take_pictures.py`."""

from __future__ import annotations

import sys
from pathlib import Path

sys.path.insert(0, str(Path(__file__).parent))
sys.path.insert(0, str(Path(__file__).parents[1]))

from playwright.sync_api import sync_playwright
from server import DIST, Site
from tests.browser.conftest import CHROMIUM_ARGUMENTS, installed_browser

PICTURES = Path(__file__).parent / "pictures"
JOB = "#/job/demo-harbour-hall"
LANDSCAPE, PORTRAIT, PHONE = (1180, 820), (820, 1180), (390, 844)
WANTED = [
    ("wall-landscape", LANDSCAPE, JOB),
    ("joint-landscape", LANDSCAPE, f"{JOB}/joint/panel"),
    ("joint-portrait", PORTRAIT, f"{JOB}/joint/metal"),
    ("face-phone", PHONE, f"{JOB}/joint/panel/face"),
    ("takeoff-landscape", LANDSCAPE, f"{JOB}/takeoff"),
    ("cure-portrait", PORTRAIT, f"{JOB}/cure"),
]
SETTLE_MS = 2500


def main() -> None:
    """Serve the build, open the demo job and take each picture."""
    PICTURES.mkdir(exist_ok=True)
    site = Site(DIST).start()
    with sync_playwright() as playwright:
        browser = playwright.chromium.launch(executable_path=installed_browser(), args=CHROMIUM_ARGUMENTS)
        for name, (width, height), route in WANTED:
            context = browser.new_context(viewport={"width": width, "height": height}, has_touch=True, is_mobile=True)
            page = context.new_page()
            page.goto(f"{site.url}#/demo/harbour-hall")
            page.locator('[data-testid="core-state"][data-phase="ready"]').wait_for(timeout=60_000)
            page.goto(f"{site.url}{route}")
            page.wait_for_timeout(SETTLE_MS * 2)
            page.screenshot(path=PICTURES / f"{name}.png")
            context.close()
        browser.close()
    site.stop()


if __name__ == "__main__":
    main()
