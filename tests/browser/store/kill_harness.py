"""Kill a real browser in the middle of its work, many times, and look at what it kept.

Each round opens the profile that the round before has left behind, checks every record in it, then edits through the
page as fast as the page says "saved", and sends SIGKILL to the browser's own process group at a random moment. An
edit counts as acknowledged when the page's save state has said so; nothing acknowledged may be missing afterwards,
and no record may be torn (its checksum, its pointer and its parts must all be of one edit). The records are checked
here, with hashlib, not with the code that wrote them.

    python tests/browser/store/kill_harness.py --rounds 200

The page is found through data-testid hooks that the app has as well (`field-…`, `save-state` with `data-kind`), so
that the app as built can be killed in the same way:

    python tests/browser/store/kill_harness.py --rounds 20 --app web/dist

Now and then Chromium itself throws its database away ("Corruption: checksum mismatch"): its log, cut off by one kill
and written on after the next start, cannot be read after a second kill. That is counted apart (`dropped`), with how
many jobs the store's second copy brought back and how many edits were lost with it.

That the harness can go red is shown with faults put into the page (`--fault`), 40 rounds each:

    early-ack    a save is called complete as soon as it has begun: 10 of 573 acknowledged edits lost, 0 torn
    two-writes   revision and pointer in two transactions: 59 of 498 acknowledged edits lost, 94 torn records
    relaxed      the browser's default durability: 0 of 569 lost, 0 torn

The last line is no fault of the harness: killing a process leaves what it has handed to the operating system, so a
kill cannot tell relaxed from strict durability. Only a power cut could. That commits ask for strict durability is
therefore held by a test of its own (promise 2 in test_promises.py).
"""

from __future__ import annotations

import argparse
import contextlib
import hashlib
import json
import os
import random
import re
import signal
import sys
import tempfile
import threading
import time
from collections.abc import Callable
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any

# Seconds of editing before the kill, at random between these.
LEAST_S, MOST_S = 0.05, 0.7
LONGEST_ROUND_S = 60

FAULTS = {
    # The browser's default: the data has been handed to the system, not to the disk.
    "relaxed": """
        const transaction = IDBDatabase.prototype.transaction;
        IDBDatabase.prototype.transaction = function (names, mode) { return transaction.call(this, names, mode, {durability: "relaxed"}); };
    """,
    # Durability switched off: a write is called complete as soon as it has begun.
    "early-ack": """
        const listen = IDBTransaction.prototype.addEventListener;
        IDBTransaction.prototype.addEventListener = function (type, listener, ...rest) {
          if (type === "complete" && this.mode === "readwrite") { setTimeout(() => listener.call(this, new Event("complete")), 0); return; }
          return listen.call(this, type, listener, ...rest);
        };
    """,
    # The revision and the pointer to it in two transactions.
    "two-writes": """
        const put = IDBObjectStore.prototype.put;
        IDBObjectStore.prototype.put = function (value) {
          if (this.name !== "revisions") return put.call(this, value);
          const db = this.transaction.db;
          setTimeout(() => put.call(db.transaction(["revisions"], "readwrite").objectStore("revisions"), value), 15);
          return this.count();
        };
    """,
}

# Plain IndexedDB, so that nothing of the store takes part in the check. Binary data is left out.
DUMP = """
async (name) => {
  if (!(await indexedDB.databases()).some((d) => d.name === name)) return null;
  const done = (request) => new Promise((resolve, reject) => { request.onsuccess = () => resolve(request.result); request.onerror = () => reject(request.error); });
  const db = await done(indexedDB.open(name));
  const all = {};
  for (const store of ["jobs", "revisions", "drafts", "quarantine", "meta"]) all[store] = await done(db.transaction(store).objectStore(store).getAll());
  db.close();
  return all;
}
"""

# Types into the field as a person would, only faster: value, input event, change event, wait for "saved", next.
# Now and then an edit is typed and left as a draft, or two commits follow each other without waiting.
BURST = """
async ([fieldSelector, stateSelector, from]) => {
  const input = document.querySelector(fieldSelector);
  const state = document.querySelector(stateSelector);
  const saved = () => new Promise((resolve) => {
    const look = () => { if (state.dataset.kind === "saved") { watcher.disconnect(); resolve(); } };
    const watcher = new MutationObserver(look);
    watcher.observe(state, {attributes: true, childList: true, subtree: true, characterData: true});
    Promise.resolve().then(look);
  });
  const type = (text) => { input.value = text; input.dispatchEvent(new Event("input", {bubbles: true, composed: true})); };
  const enter = () => {
    input.dispatchEvent(new KeyboardEvent("keydown", {key: "Enter", bubbles: true, composed: true}));
    input.dispatchEvent(new Event("change", {bubbles: true, composed: true}));
  };
  for (let n = from; ; n++) {
    window.harnessTells("issued", n);
    type(String(n));
    if (n % 29 === 0) { await new Promise((resolve) => setTimeout(resolve, 330)); continue; }
    if (n % 5 === 0) await new Promise((resolve) => setTimeout(resolve, 5));
    enter();
    if (n % 7 === 0) continue;
    // The screen may show the state a frame later; what it said before this edit does not count.
    await new Promise((resolve) => setTimeout(resolve, 0));
    await saved();
    window.harnessTells("acknowledged", n);
  }
}
"""


@dataclass
class Report:
    rounds: int = 0
    issued: int = 0
    acknowledged: int = 0
    lost: int = 0
    torn: int = 0
    drafts_found: int = 0
    unacknowledged_found: int = 0
    cut_short: int = 0
    dropped: int = 0
    brought_back: int = 0
    lost_with_it: int = 0
    seconds: float = 0.0
    faults: list[str] = field(default_factory=list)

    @property
    def is_clean(self) -> bool:
        return self.lost == 0 and self.torn == 0 and not self.faults

    def text(self) -> str:
        return (
            f"{self.rounds} rounds in {self.seconds:.0f} s: {self.issued} edits begun, {self.acknowledged} acknowledged, "
            f"{self.lost} acknowledged edits lost, {self.torn} torn records, {self.cut_short} kills with an edit under way, "
            f"{self.unacknowledged_found} edits found that had not been acknowledged yet, {self.drafts_found} drafts found, "
            f"{self.dropped} databases dropped by the browser itself, {self.brought_back} of them brought back, {self.lost_with_it} edits lost with them"
        )


@dataclass
class Ear:
    """Hears what the page tells while it is edited and, if asked to, kills it at the n-th acknowledgement."""

    report: Report
    issued: int
    acknowledged: int
    kill_at: int
    group: int = 0
    heard: int = 0

    def hear(self, _source: object, what: str, n: int) -> None:
        if what == "issued":
            self.issued = max(self.issued, n)
            self.report.issued += 1
            return
        self.acknowledged = max(self.acknowledged, n)
        self.report.acknowledged += 1
        self.heard += 1
        if self.heard == self.kill_at and self.group > 1:
            os.killpg(self.group, signal.SIGKILL)


def canonical(value: object) -> bytes:
    return json.dumps(value, sort_keys=True, separators=(",", ":"), ensure_ascii=False).encode()


def find_torn(dump: dict, job: str, *, is_uniform: bool) -> list[str]:
    """Name every record that is not whole."""
    torn = []
    for store, records in (("revisions", dump["revisions"]), ("drafts", [d["envelope"] for d in dump["drafts"]])):
        for record in records:
            told = {k: v for k, v in record.items() if k != "sha256"}
            if hashlib.sha256(canonical(told)).hexdigest() != record.get("sha256"):
                torn.append(f"{store} {record.get('rev')}: checksum")
            payload = record["payload"]
            if is_uniform and record["id"] == job:
                parts = {payload["title"], *(j["note"] for j in payload["joints"]), payload["filler"].removesuffix("0123456789abcdef" * 2048)}
                if len(parts) != 1:
                    torn.append(f"{store} {record.get('rev')}: parts of different edits {sorted(parts)}")
    for pointer in dump["jobs"]:
        kept = {r["rev"]: r for r in dump["revisions"] if r["id"] == pointer["id"]}
        head = kept.get(pointer["rev"])
        if head is None or head["sha256"] != pointer["sha256"]:
            torn.append(f"pointer to {pointer['rev']} without its revision")
        if missing := [m["rev"] for m in pointer["revisions"] if m["rev"] not in kept]:
            torn.append(f"revisions {missing} are listed and not there")
        if extra := sorted(set(kept) - {m["rev"] for m in pointer["revisions"]}):
            torn.append(f"revisions {extra} are there and not listed")
        history = next((m["value"] for m in dump["meta"] if m["key"] == f"history/{pointer['id']}"), None)
        if history is not None and history["entries"][history["at"]]["rev"] != pointer["rev"]:
            torn.append("undo list and pointer of different edits")
    if dump["quarantine"]:
        torn.append(f"{len(dump['quarantine'])} records in quarantine")
    return torn


def group_of(profile: str) -> int:
    """The process group of the browser that was started on this profile, and on no other."""
    for entry in Path("/proc").iterdir():
        if not entry.name.isdigit():
            continue
        try:
            words = (entry / "cmdline").read_bytes().split(b"\0")
        except OSError:
            continue
        if f"--user-data-dir={profile}".encode() in words and not any(w.startswith(b"--type=") for w in words):
            group = os.getpgid(int(entry.name))
            if group == os.getpgid(0):
                raise RuntimeError("the browser shares this process's group: it must not be killed")
            return group
    raise RuntimeError("the browser's process was not found")


def wait_until_gone(group: int) -> None:
    """The next browser must not meet the locks of a dying one."""
    deadline = time.monotonic() + 20
    while time.monotonic() < deadline:
        try:
            os.killpg(group, 0)
        except ProcessLookupError:
            return
        time.sleep(0.01)
    raise RuntimeError("the killed browser is still there")


def value_at(payload: Any, path: tuple[str, ...]) -> Any:
    for key in path:
        payload = payload.get(key, {}) if isinstance(payload, dict) else {}
    return payload


def edit_number(title: object) -> int:
    match = re.search(r"\d+", str(title))
    return int(match.group()) if match else 0


def run(
    rounds: int,
    *,
    url: str,
    blank: str,
    executable: str | None,
    arguments: list[str],
    seed: int,
    make_job: Callable[[Any], str] | None = None,
    database: str = "beadwright",
    field_selector: str = '[data-testid="field-title"] input',
    state_selector: str = '[data-testid="save-state"]',
    path: tuple[str, ...] = ("title",),
    is_uniform: bool = True,
    fault: str | None = None,
    say: Callable[[str], None] = lambda _text: None,
) -> Report:
    from playwright.sync_api import Error, sync_playwright

    dice = random.Random(seed)
    job = None if make_job is not None else "kill"
    report = Report()
    began = time.monotonic()
    issued = acknowledged = 0
    with tempfile.TemporaryDirectory(prefix="kill-", ignore_cleanup_errors=True) as profile, sync_playwright() as pw:

        def launch() -> Any:
            context = pw.chromium.launch_persistent_context(profile, executable_path=executable, args=arguments, timeout=30_000)
            context.set_default_timeout(LONGEST_ROUND_S * 1000)
            return context

        # One more opening than there are kills: the last one only looks.
        for round_ in range(rounds + 1):
            context = launch()
            page = context.pages[0] if context.pages else context.new_page()
            page.goto(blank)
            try:
                dump = page.evaluate(DUMP, database)
            except Error as error:
                if "backing store" not in str(error):
                    raise
                # The browser has found its own files damaged and thrown them away: not to be mended in this process.
                context.close()
                report.dropped += 1
                context = launch()
                page = context.pages[0] if context.pages else context.new_page()
                page.goto(url if make_job is None else f"{url}#/job/{job}")
                page.wait_for_selector(f'{state_selector}[data-kind]:not([data-kind=""])', state="attached")
                page.goto(blank)
                dump = page.evaluate(DUMP, database)
                mine = [value_at(r["payload"], path) for r in dump["revisions"] if r["id"] == job]
                found = max((edit_number(value) for value in mine), default=0)
                report.brought_back += found > 0
                report.lost_with_it += max(0, acknowledged - found)
                acknowledged = min(acknowledged, found)
            if dump is not None:
                if torn := find_torn(dump, job, is_uniform=is_uniform):
                    report.torn += len(torn)
                    report.faults.append(f"round {round_}: {torn}")
                mine = {r["rev"]: value_at(r["payload"], path) for r in dump["revisions"] if r["id"] == job}
                # Without its head a job opens at the newest revision there is.
                heads = [mine.get(p["rev"], mine[max(mine)] if mine else 0) for p in dump["jobs"] if p["id"] == job]
                found = edit_number(heads[0]) if heads else 0
                if found < acknowledged:
                    report.lost += acknowledged - found
                    report.faults.append(f"round {round_}: edit {acknowledged} was acknowledged, {found} was found")
                    acknowledged = found
                # The page may have begun, and even saved, edits of which the kill cut off the word.
                issued = max(issued, found)
                report.unacknowledged_found += max(0, found - acknowledged)
                report.cut_short += found < issued and round_ > 0
                report.drafts_found += len(dump["drafts"])
            if fault is not None:
                context.add_init_script(f"(() => {{ {FAULTS[fault]} }})();")

            ear = Ear(report, issued, acknowledged, kill_at=dice.randint(1, 15) if round_ % 2 else 0)
            context.expose_binding("harnessTells", ear.hear)
            if make_job is not None and job is None:
                page.goto(url)
                job = make_job(page)
            page.goto(url if make_job is None else f"{url}#/job/{job}")
            page.wait_for_selector(field_selector, state="attached")
            page.wait_for_selector(f'{state_selector}[data-kind]:not([data-kind=""])', state="attached")
            if dump is not None and fault is None:
                shown = edit_number(page.input_value(field_selector))
                if shown != found:
                    report.faults.append(f"round {round_}: {found} is stored, {shown} is shown")
            if round_ == rounds:
                context.close()
                break
            group = ear.group = group_of(profile)
            # Every other round ends at any moment, the rest on the heels of an acknowledgement.
            killer = threading.Timer(LONGEST_ROUND_S if ear.kill_at else dice.uniform(LEAST_S, MOST_S), os.killpg, (group, signal.SIGKILL))
            killer.start()
            with contextlib.suppress(Error):
                page.evaluate(BURST, [field_selector, state_selector, issued + 1])
            if ear.kill_at:
                killer.cancel()
            killer.join()
            issued, acknowledged = ear.issued, ear.acknowledged
            report.rounds += 1
            with contextlib.suppress(Error):
                context.close()
            wait_until_gone(group)
            if round_ % 10 == 9:
                report.seconds = time.monotonic() - began
                say(report.text())
    report.seconds = time.monotonic() - began
    return report


def new_job(page: Any) -> str:
    """Make a job in the app as a person would; its id is in the address then."""
    page.click('[data-testid="new-metric"]')
    page.wait_for_url("**/index.html#/job/*")
    page.wait_for_selector('[data-testid="save-state"][data-kind="saved"]')
    return page.evaluate("decodeURIComponent(location.hash.split('/')[2])")


def run_app(rounds: int, base: str, **common: Any) -> Report:
    """Kill the app as built, edited through its field for the place of the building."""
    return run(
        rounds,
        url=f"{base}/index.html",
        blank=f"{base}/forms.json",
        make_job=new_job,
        field_selector='[data-testid="field-place"] input',
        path=("site", "place"),
        is_uniform=False,
        **common,
    )


def main() -> int:
    parser = argparse.ArgumentParser(description="Kill the browser at random moments and check what it kept.")
    parser.add_argument("--rounds", type=int, default=20)
    parser.add_argument("--seed", type=int, default=None)
    parser.add_argument("--fault", choices=sorted(FAULTS), default=None, help="put a fault into the page: the run must go red")
    parser.add_argument("--app", type=Path, default=None, help="folder of the built app: drive it instead of the small page")
    options = parser.parse_args()

    sys.path.insert(0, str(Path(__file__).resolve().parent))
    import conftest

    seed = options.seed if options.seed is not None else random.randrange(2**32)
    print(f"seed {seed}", flush=True)
    common = {
        "executable": conftest.find_chromium(),
        "arguments": conftest.CHROMIUM_ARGUMENTS,
        "seed": seed,
        "fault": options.fault,
        "say": lambda text: print(text, flush=True),
    }
    if options.app is not None:
        with conftest.serve(options.app) as base:
            report = run_app(options.rounds, base, **common)
    else:
        with tempfile.TemporaryDirectory() as folder:
            conftest.build_pages(Path(folder))
            with conftest.serve(Path(folder)) as base:
                report = run(options.rounds, url=f"{base}/harness_page.html", blank=f"{base}/empty.html", **common)
    print(report.text())
    for fault in report.faults:
        print("  " + fault)
    return 0 if report.is_clean else 1


if __name__ == "__main__":
    sys.exit(main())
