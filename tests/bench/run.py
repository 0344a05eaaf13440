#!/usr/bin/env python3
"""Measure the budgets in one run and print a Markdown table.

    python3 tests/bench/run.py [--rounds N] [--json FILE]

Every start is a fresh browser process. The yardstick is a stock `loadPyodide()` (Pyodide's own
files, nothing else) from the same server in the same run: times move with the machine, the ratios
are what counts.
"""

from __future__ import annotations

import argparse
import copy
import json
import os
import shutil
import statistics
import sys
import tempfile
from collections.abc import Callable
from pathlib import Path
from typing import Any

ROOT = Path(__file__).resolve().parents[2]
sys.path[:0] = [str(ROOT / "demo"), str(ROOT)]

import steps

if Path(sys.prefix).resolve() != steps.VENV.resolve():  # run in the project's own environment
    steps.check_versions()
    steps.make_venv()
    steps.install_test_packages()
    os.execv(steps.venv_python(), [str(steps.venv_python()), *sys.argv])

from playwright.sync_api import sync_playwright
from server import DIST, Site
from tests.browser.conftest import (
    CHROMIUM_ARGUMENTS,
    TABLET_LANDSCAPE,
    build,
    build_core_page,
    until,
)

ANSWERED = "document.getElementById('answer').textContent !== ''"
STOCK_PAGE = '<!doctype html><html lang="en"><meta charset="utf-8"><title>stock</title><script type="module" src="page.js"></script>'
STOCK_JS = "new Worker('worker.js', {type: 'module'}).onmessage = () => { document.documentElement.dataset.ready = String(performance.now()); };"
STOCK_WORKER = "import { loadPyodide } from './pyodide.mjs'; await loadPyodide(); postMessage('ready');"
# Notes when a row of the schedule and its verdict first stand on the page.
WATCH = """
globalThis.seen = {};
const look = () => {
  if (seen.row === undefined && document.querySelector('[data-testid^="joint-row-"]')) seen.row = performance.now();
  if (seen.verdict === undefined && document.querySelector('.small-verdict')) seen.verdict = performance.now();
};
document.addEventListener('DOMContentLoaded', () => new MutationObserver(look).observe(document.body, {subtree: true, childList: true, attributes: true}));
"""
EDIT = """
async ([pointer, texts]) => {
  const word = () => [...document.querySelectorAll('[data-testid="verdict"], [data-testid^="answer-"]')].map((it) => it.textContent).join('|');
  const line = document.querySelector(`[data-pointer="${pointer}"] .line`);
  const times = [];
  for (const text of texts) {
    const before = word();
    line.focus();
    line.value = text;
    line.dispatchEvent(new InputEvent('input', {bubbles: true}));
    await new Promise((go) => setTimeout(go, 120));
    const start = performance.now();
    line.dispatchEvent(new Event('change', {bubbles: true}));
    line.blur();
    await new Promise((go, stop) => {
      const late = setTimeout(() => stop(new Error('no new answer after ' + text)), 5000);
      const look = () => { if (word() !== before) { clearTimeout(late); go(); } else requestAnimationFrame(look); };
      look();
    });
    times.push(performance.now() - start);
    await new Promise((go) => setTimeout(go, 150));
  }
  return times;
}
"""


def stock_site(folder: Path) -> Path:
    """Pyodide as npm ships it, and the smallest page that starts it in a worker."""
    folder.mkdir()
    for name in ("pyodide.mjs", "pyodide.asm.mjs", "pyodide.asm.wasm", "python_stdlib.zip", "pyodide-lock.json"):
        shutil.copy(steps.WEB / "node_modules" / "pyodide" / name, folder / name)
    (folder / "index.html").write_text(STOCK_PAGE, "utf-8")
    (folder / "page.js").write_text(STOCK_JS, "utf-8")
    (folder / "worker.js").write_text(STOCK_WORKER, "utf-8")
    return folder


class Bench:
    def __init__(self, playwright: Any, work: Path) -> None:
        self.playwright = playwright
        self.work = work
        self.rows: dict[str, list[float]] = {}

    def note(self, name: str, value: float) -> None:
        self.rows.setdefault(name, []).append(float(value))
        print(f"  {name}: {value:.0f}", flush=True)

    def median(self, name: str) -> float:
        return statistics.median(self.rows[name])

    def visit(self, profile: Path, work: Callable[[Any, Any], None]) -> None:
        """One fresh browser process on a profile."""
        context = self.playwright.chromium.launch_persistent_context(str(profile), executable_path=steps.installed_browser(), args=CHROMIUM_ARGUMENTS, **TABLET_LANDSCAPE)
        try:
            work(context, context.pages[0])
        finally:
            context.close()

    def stock(self, folder: Path, index: int) -> None:
        site = Site(folder).start()
        profile = self.work / f"stock{index}"

        def go(kind: str) -> Callable[[Any, Any], None]:
            def work(_: Any, page: Any) -> None:
                page.goto(site.url)
                until(page, "document.documentElement.dataset.ready", 120_000)
                self.note(f"stock {kind}", float(page.evaluate("document.documentElement.dataset.ready")))

            return work

        self.visit(profile, go("cold"))
        self.visit(profile, go("warm"))
        site.stop()

    def ours(self, core_page: Path, index: int) -> None:
        site = Site(core_page).start()
        profile = self.work / f"ours{index}"

        def first(_: Any, page: Any) -> None:
            page.goto(site.url)
            until(page, ANSWERED, 120_000)
            self.note("first visit, precompiled", float(page.evaluate("document.documentElement.dataset.verdictMs")))
            self.note("bytes before the first verdict", sum(item.body_bytes for item in site.served if not item.path.startswith("snapshot/") and "/numpy-" not in item.path))
            until(page, "offline.state.phase === 'ready' && core.status.numpy === 'ready'", 120_000)
            self.note("bytes in all", sum(item.body_bytes for item in site.served))

        self.visit(profile, first)
        site.stop()

        def offline(query: str, name: str) -> Callable[[Any, Any], None]:
            def work(context: Any, page: Any) -> None:
                context.set_offline(True)
                page.goto(site.url + query)
                until(page, ANSWERED, 120_000)
                self.note(name, float(page.evaluate("document.documentElement.dataset.verdictMs")))

            return work

        self.visit(profile, offline("?core=precompiled", "offline, precompiled"))
        self.visit(profile, offline("", "offline, snapshot"))

    def app(self, index: int) -> None:
        """The app itself: paint, a readable job, the first verdict, all with the server gone."""
        site = Site(DIST).start()
        profile = self.work / f"app{index}"

        def first(_: Any, page: Any) -> None:
            page.goto(site.url + "#/demo")
            page.wait_for_selector(".small-verdict", timeout=120_000)
            size = len([item for item in json.loads((DIST / "sizes.json").read_text("utf-8"))["files"] if item["name"] != "sw.js"])
            until(page, f"caches.open('beadwright-files').then((it) => it.keys()).then((keys) => keys.length >= {size})", 120_000)
            page.wait_for_timeout(500)

        self.visit(profile, first)
        site.stop()

        def offline(context: Any, page: Any) -> None:
            context.set_offline(True)
            context.add_init_script(WATCH)
            page.goto(site.url + "#/demo")
            until(page, "seen.verdict", 60_000)
            self.note("app: first paint", page.evaluate("performance.getEntriesByName('first-contentful-paint')[0]?.startTime ?? -1"))
            self.note("app: job readable", page.evaluate("seen.row"))
            self.note("app: first verdict", page.evaluate("seen.verdict"))
            if index == 0:
                self.edits(page)

        self.visit(profile, offline)

    def edits(self, page: Any) -> None:
        """One edit on the joint page, from the commit to the new answer on screen."""
        page.evaluate("location.hash += '/joint/panel'")
        page.wait_for_selector("[data-testid=verdict]")
        page.wait_for_timeout(3000)
        texts = [f"{21 + n % 7} mm" for n in range(40)]
        for value in page.evaluate(EDIT, ["/joints/0/width", texts]):
            self.note("one edit to the new answer on screen", value)

    def core(self, core_page: Path) -> None:
        """The core alone, called from the page: one edit, and how a job grows."""
        site = Site(core_page).start()
        job = json.loads((core_page / "demo" / "first.json").read_text("utf-8"))

        def work(_: Any, page: Any) -> None:
            page.goto(site.url + "?core=snapshot&nosw")
            until(page, ANSWERED, 120_000)
            until(page, "core.status.numpy === 'ready'", 120_000)
            timed = "async (job) => { const start = performance.now(); await core.call('evaluate', [job, [job.joints[0].id]]); return performance.now() - start; }"
            for turn in range(60):
                edited = copy.deepcopy(job)
                edited["joints"][0]["width"] = f"{15 + turn % 20} mm"
                self.note("evaluate one edit, demo job", page.evaluate(timed, edited))
            for count in (250, 500, 1000):
                big = copy.deepcopy(job)
                big["joints"] = [{**copy.deepcopy(job["joints"][n % len(job["joints"])]), "id": f"j{n}"} for n in range(count)]
                for turn in range(4):
                    big["joints"][0]["width"] = f"{15 + turn} mm"
                    big["site"] = {**big.get("site", {}), "note": f"turn {turn}"}
                    value = page.evaluate(timed, big)
                    self.note(f"{count} joints, {'first time' if turn == 0 else 'after one edit'}", value)

        self.visit(self.work / "core", work)
        site.stop()


def percentile(values: list[float], share: float) -> float:
    return sorted(values)[min(len(values) - 1, int(share * len(values)))]


def table(bench: Bench) -> str:
    stock_warm, stock_cold = bench.median("stock warm"), bench.median("stock cold")
    lines = ["| measure | median | budget or yardstick |", "|---|---|---|"]

    def add(name: str, shown: str, budget: str) -> None:
        lines.append(f"| {name} | {shown} | {budget} |")

    add("stock `loadPyodide()`, cold / warm", f"{stock_cold:.0f} / {stock_warm:.0f} ms", "1.00")
    for name in ("offline, snapshot", "offline, precompiled"):
        value = bench.median(name)
        add(f"{name}: navigation to first verdict", f"{value:.0f} ms", f"{value / stock_warm:.2f} × warm, {value / stock_cold:.2f} × cold (≤ 0.8, aim 0.5)")
    value = bench.median("first visit, precompiled")
    add("first visit: navigation to first verdict", f"{value:.0f} ms", f"{value / stock_cold:.2f} × cold")
    if "app: first paint" in bench.rows:
        add("app offline: first paint", f"{bench.median('app: first paint'):.0f} ms", "< 300 ms")
        add("app offline: job readable", f"{bench.median('app: job readable'):.0f} ms", "< 300 ms")
        value = bench.median("app: first verdict")
        add("app offline: first verdict on screen", f"{value:.0f} ms", f"{value / stock_warm:.2f} × warm, {value / stock_cold:.2f} × cold (≤ 0.8)")
    for name, budget in (("one edit to the new answer on screen", "95 % ≤ 50 ms"), ("evaluate one edit, demo job", "95 % ≤ 16 ms")):
        if name in bench.rows:
            add(name, f"{bench.median(name):.1f} ms, 95 %: {percentile(bench.rows[name], 0.95):.1f} ms", budget)
    for count in (250, 500, 1000):
        add(f"{count} joints", f"{bench.median(f'{count} joints, first time'):.0f} ms at first, {bench.median(f'{count} joints, after one edit'):.0f} ms after an edit", "1,000 joints ≤ 1 s, growth linear")
    add("first visit: bytes before the first verdict", f"{bench.median('bytes before the first verdict') / 1e6:.2f} MB", "≤ 11 MB")
    add("first visit: bytes of all that offline needs", f"{bench.median('bytes in all') / 1e6:.2f} MB", "≤ 17 MB")
    return "\n".join(lines)


def main() -> None:
    parser = argparse.ArgumentParser(description="Measure the budgets in one run.")
    parser.add_argument("--rounds", type=int, default=5)
    parser.add_argument("--json", type=Path, help="write every measured value here")
    asked = parser.parse_args()
    build()
    with tempfile.TemporaryDirectory(prefix="beadwright-bench-") as name, sync_playwright() as playwright:
        work = Path(name)
        core_page = build_core_page(work / "core-page", "bench")
        stock = stock_site(work / "stock-site")
        bench = Bench(playwright, work)
        for index in range(asked.rounds):
            print(f"round {index + 1} of {asked.rounds}", flush=True)
            bench.stock(stock, index)
            bench.ours(core_page, index)
            bench.app(index)
        bench.core(core_page)
    if asked.json:
        asked.json.write_text(json.dumps(bench.rows, indent=1) + "\n", "utf-8")
    print(f"\nload of this machine while measuring: {os.getloadavg()[0]:.1f}\n\n{table(bench)}")


if __name__ == "__main__":
    main()
