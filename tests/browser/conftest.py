"""What every browser test shares: the server, the browser, contexts of a tablet's and a phone's size.

Each context records every request of its pages; a request that leaves the origin fails the test
that made it. One Playwright serves the whole run, since a thread can hold only one.
"""

from __future__ import annotations

import os
import shutil
import subprocess
import sys
import time
from collections.abc import Callable, Iterator
from contextlib import ExitStack
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any

import pytest

playwright_api = pytest.importorskip("playwright.sync_api")

ROOT = Path(__file__).resolve().parents[2]
WEB = ROOT / "web"
sys.path.insert(0, str(ROOT / "demo"))

from server import DIST, Site  # noqa: E402
from steps import installed_browser  # noqa: E402

CHROMIUM_ARGUMENTS = [
    "--no-sandbox",
    "--disable-gpu",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
]
TABLET_LANDSCAPE = {"viewport": {"width": 1180, "height": 820}, "device_scale_factor": 2, "has_touch": True, "is_mobile": True}
TABLET_PORTRAIT = {**TABLET_LANDSCAPE, "viewport": {"width": 820, "height": 1180}}
PHONE = {**TABLET_LANDSCAPE, "viewport": {"width": 390, "height": 844}}
DESK = {"viewport": {"width": 1440, "height": 900}}
PLACE = {"timezone_id": "Europe/Berlin", "locale": "en-GB"}
LIMIT_MS = 30_000


@dataclass
class Requests:
    """Every request of a context: addresses, and the errors that nobody caught."""

    addresses: list[str] = field(default_factory=list)
    page_errors: list[str] = field(default_factory=list)
    console_errors: list[str] = field(default_factory=list)

    def watch(self, context: Any) -> None:
        context.on("request", lambda request: self.addresses.append(request.url))
        context.on("page", self._watch_page)
        for page in context.pages:
            self._watch_page(page)

    def _watch_page(self, page: Any) -> None:
        page.on("pageerror", lambda error: self.page_errors.append(str(error)))
        page.on("console", lambda message: self.console_errors.append(message.text) if message.type == "error" else None)
        page.on("websocket", lambda socket: self.addresses.append(socket.url))

    def foreign(self, origin: str) -> list[str]:
        """Addresses of another origin; `blob:` and `data:` never leave the page."""
        inside = (origin.rstrip("/") + "/", f"blob:{origin.rstrip('/')}", "data:", "about:")
        return [address for address in self.addresses if not address.startswith(inside)]


def until(page: Any, expression: str, limit_ms: int = LIMIT_MS) -> Any:
    """Wait until an expression is true. Polled from outside: the page's policy allows no string code."""
    end = time.monotonic() + limit_ms / 1000
    value = None
    while time.monotonic() < end:
        value = page.evaluate(expression)
        if value:
            return value
        page.wait_for_timeout(50)
    raise AssertionError(f"not within {limit_ms / 1000} s: {expression} (last: {value!r})")


def told(page: Any, expression: str, limit_ms: int = LIMIT_MS) -> Any:
    """The value of a promise of the page, or a failure when it never settles."""
    late = f"new Promise((go) => setTimeout(() => go('no answer'), {limit_ms}))"
    value = page.evaluate(f"Promise.race([{expression}, {late}])")
    assert value != "no answer", f"not settled within {limit_ms / 1000} s: {expression}"
    return value


@pytest.fixture(scope="session")
def playwright() -> Iterator[Any]:
    with playwright_api.sync_playwright() as running:
        yield running


@pytest.fixture(scope="session")
def browser_options() -> dict[str, Any]:
    return {"executable_path": installed_browser(), "args": CHROMIUM_ARGUMENTS}


@pytest.fixture(scope="session")
def chromium(playwright: Any, browser_options: dict[str, Any]) -> Iterator[Any]:
    """One browser process for all tests that need no profile of their own."""
    browser = playwright.chromium.launch(**browser_options)
    yield browser
    browser.close()


def build(*options: str) -> None:
    """The web build with these options; quick when only the shell changed."""
    environment = {**os.environ, "BEADWRIGHT_PYTHON": os.environ.get("BEADWRIGHT_PYTHON", sys.executable)}
    command = [shutil.which("node") or "node", "build/build.mjs", "--quiet", *options]
    done = subprocess.run(command, cwd=WEB, capture_output=True, text=True, env=environment)
    assert done.returncode == 0, done.stdout[-2000:] + done.stderr[-2000:]


@pytest.fixture(scope="session")
def dist() -> Path:
    """The app as built, brought up to date first."""
    build()
    return DIST


@pytest.fixture
def site(dist: Path) -> Iterator[Site]:
    """The app on a free loopback port; `site.stop()` pulls the plug."""
    running = Site(dist).start()
    yield running
    running.stop()


@pytest.fixture
def make_context(chromium: Any, playwright: Any, browser_options: dict[str, Any], request: pytest.FixtureRequest) -> Iterator[Callable[..., Any]]:
    """`make_context(profile=None, **options)` -> context with `.requests`; checked when the test ends.

    With `profile` (a folder) the context is persistent, as offline starts need.
    """
    made: list[Requests] = []
    origins = [request.getfixturevalue(name).url for name in ("site", "core_site") if name in request.fixturenames]
    with ExitStack() as stack:

        def make(profile: Path | None = None, **options: Any) -> Any:
            wanted = {**TABLET_LANDSCAPE, **PLACE, **options}
            if profile is None:
                context = chromium.new_context(**wanted)
            else:
                context = playwright.chromium.launch_persistent_context(str(profile), **browser_options, **wanted)
            context.set_default_timeout(LIMIT_MS)
            requests = Requests()
            requests.watch(context)
            context.requests = requests
            made.append(requests)
            stack.callback(_close, context)
            return context

        yield make
        for requests in made:
            strangers = [url for url in requests.addresses if all(Requests([url]).foreign(origin) for origin in origins)]
            assert not origins or strangers == [], f"requests left the origin: {strangers[:5]}"


def _close(context: Any) -> None:
    try:
        context.close()
    except Exception as error:  # a killed browser cannot be closed
        if "closed" not in str(error).lower():
            raise


@pytest.fixture
def tablet(make_context: Callable[..., Any]) -> Any:
    return make_context()


@pytest.fixture
def tablet_portrait(make_context: Callable[..., Any]) -> Any:
    return make_context(**TABLET_PORTRAIT)


@pytest.fixture
def phone(make_context: Callable[..., Any]) -> Any:
    return make_context(**PHONE)


# ---- the bare page for worker and offline copy, without the shell --------------------------------


def build_core_page(out: Path, stamp: str) -> Path:
    page = "../tests/browser/corepage"
    build("--entry", f"{page}/main.ts", "--html", f"{page}/index.html", "--out", str(out), "--stamp", stamp, "--developer")
    return out


@pytest.fixture(scope="session")
def core_dist(tmp_path_factory: pytest.TempPathFactory) -> Path:
    return build_core_page(tmp_path_factory.mktemp("core") / "one", "one")


@pytest.fixture(scope="session")
def core_dist_next(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The same source built as a newer version."""
    return build_core_page(tmp_path_factory.mktemp("core") / "two", "two")


@pytest.fixture
def core_site(core_dist: Path) -> Iterator[Site]:
    running = Site(core_dist, is_developer=True).start()
    yield running
    running.stop()
