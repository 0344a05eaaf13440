"""The store in a real browser: a small page that bundles it, served on loopback from a temporary folder."""

from __future__ import annotations

import concurrent.futures
import contextlib
import http.server
import os
import shutil
import subprocess
import threading
from collections.abc import Iterator
from pathlib import Path

import pytest

HERE = Path(__file__).resolve().parent
WEB = HERE.parents[2] / "web"
FIXTURES = HERE.parents[1] / "fixtures" / "store"
CHROMIUM_ARGUMENTS = [
    "--no-sandbox",
    "--disable-gpu",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
]


def find_chromium() -> str | None:
    """Path of an installed browser, or None to let Playwright use its own."""
    named = os.environ.get("BEADWRIGHT_CHROMIUM")
    return named or shutil.which("chromium") or shutil.which("chromium-browser") or shutil.which("google-chrome")


def bundle(source: Path, target: Path) -> None:
    """Bundle one TypeScript page with the esbuild of the web folder."""
    esbuild = WEB / "node_modules" / ".bin" / "esbuild"
    if not esbuild.exists():
        pytest.fail(f"{esbuild} is missing: run 'npm ci' in web/ first")
    subprocess.run(
        [str(esbuild), str(source), "--bundle", "--format=esm", "--target=es2022", f"--outfile={target}", "--log-level=warning"],
        check=True,
        env={**os.environ, "NODE_PATH": str(WEB / "node_modules")},
    )


@contextlib.contextmanager
def serve(folder: Path) -> Iterator[str]:
    """Serve a folder on a free loopback port."""

    class Quiet(http.server.SimpleHTTPRequestHandler):
        def __init__(self, *args: object, **named: object) -> None:
            super().__init__(*args, directory=str(folder), **named)  # type: ignore[arg-type, misc]

        def log_message(self, *args: object) -> None:
            pass

    server = http.server.ThreadingHTTPServer(("127.0.0.1", 0), Quiet)
    thread = threading.Thread(target=server.serve_forever, daemon=True)
    thread.start()
    try:
        yield f"http://127.0.0.1:{server.server_address[1]}"
    finally:
        server.shutdown()
        server.server_close()


def build_pages(folder: Path) -> None:
    for name in ("store_page", "harness_page"):
        bundle(HERE / "page" / f"{name}.ts", folder / f"{name}.js")
        html = f'<!doctype html><meta charset="utf-8"><title>{name}</title><body><script type="module" src="{name}.js"></script>'
        (folder / f"{name}.html").write_text(html, encoding="utf-8")
    # A page of the same origin without any script, for looking at the origin from outside the store.
    (folder / "empty.html").write_text("<!doctype html><title>empty</title>", encoding="utf-8")


@pytest.fixture(scope="session")
def store_folder(tmp_path_factory: pytest.TempPathFactory) -> Path:
    folder = tmp_path_factory.mktemp("store-pages")
    build_pages(folder)
    return folder


@pytest.fixture(scope="session")
def store_url(store_folder: Path) -> Iterator[str]:
    with serve(store_folder) as url:
        yield url


@pytest.fixture(scope="session")
def store_browser(playwright):
    browser = playwright.chromium.launch(executable_path=find_chromium(), args=CHROMIUM_ARGUMENTS)
    yield browser
    browser.close()


@pytest.fixture(scope="session")
def in_own_thread():
    """Call something in a thread of its own: one thread holds only one Playwright."""

    def call(function, *args, **named):
        with concurrent.futures.ThreadPoolExecutor(1) as pool:
            return pool.submit(function, *args, **named).result()

    return call


@pytest.fixture
def store_context(store_browser):
    """A fresh, empty origin for each test; any error of a page that nobody caught fails the test."""
    context = store_browser.new_context(timezone_id="Europe/Berlin", locale="en-GB")
    context.set_default_timeout(20_000)
    faults: list[str] = []
    context.on("page", lambda page: page.on("pageerror", lambda error: faults.append(str(error))))
    yield context
    context.close()
    assert faults == [], faults


@pytest.fixture
def new_page(store_context, store_url):
    def make():
        page = store_context.new_page()
        page.goto(f"{store_url}/store_page.html")
        page.wait_for_function("window.bw !== undefined")
        return page

    return make


@pytest.fixture
def page(new_page):
    return new_page()
