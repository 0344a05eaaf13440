"""The start of Python, its recovery, and the offline copy, each in a real browser."""

from __future__ import annotations

import json
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest
from server import Reply, Site

from .conftest import told, until

pytestmark = pytest.mark.browser

ANSWERED = "document.getElementById('answer').textContent !== ''"
READY_OFFLINE = "offline.state.phase === 'ready'"


def opened(context: Any, site: Site, query: str = "") -> Any:
    page = context.pages[0] if context.pages else context.new_page()
    page.goto(site.url + query)
    return page


def answer_of(page: Any) -> str:
    until(page, ANSWERED)
    return page.inner_text("#answer")


def status_of(page: Any) -> dict[str, Any]:
    return page.evaluate("core.status")


def visited(make_context: Callable[..., Any], site: Site, profile: Path) -> tuple[Any, Any, str]:
    """One complete visit: first verdict, everything stored, a check found every file."""
    context = make_context(profile)
    page = opened(context, site)
    answer = answer_of(page)
    assert "failed" not in answer
    until(page, READY_OFFLINE)
    return context, page, answer


def blackout(context: Any, site: Site) -> None:
    site.stop()
    context.set_offline(True)


# ---- promises 14, 11, 12 ------------------------------------------------------------------------


def test_promise_14_a_cold_start_with_the_network_off_works_after_one_visit(make_context, core_site, tmp_path):
    context, _, answer = visited(make_context, core_site, tmp_path)
    context.close()
    core_site.stop()

    again = make_context(tmp_path)
    again.set_offline(True)
    page = opened(again, core_site)
    assert answer_of(page) == answer
    assert status_of(page)["way"] == "snapshot"
    until(page, "core.status.numpy === 'ready'")
    until(page, READY_OFFLINE)
    found = page.evaluate("offline.check(true)")
    assert found["missing"] == [] and found["damaged"] == [] and found["present"] == found["total"] > 15


def test_promise_11_an_interrupted_install_leaves_the_old_version_running_offline(make_context, core_site, core_dist_next, tmp_path):
    context, page, answer = visited(make_context, core_site, tmp_path)
    listed = sorted(path.name for path in core_dist_next.glob("app-*.js"))
    core_site.dist = core_dist_next
    core_site.intercept = lambda name: Reply(b"x" * 50, cut_at=10) if name in listed else None
    page.evaluate("navigator.serviceWorker.getRegistration().then((it) => it.update().catch(() => undefined))")
    until(page, "navigator.serviceWorker.getRegistration().then((it) => it.installing === null)")
    page.wait_for_timeout(500)
    assert page.evaluate("navigator.serviceWorker.getRegistration().then((it) => it.waiting === null)")
    assert page.evaluate("offline.state.phase") == "ready"

    blackout(context, core_site)
    page.reload()
    assert answer_of(page) == answer
    assert page.evaluate("stamp") == "one"


def test_promise_12_an_update_waits_for_the_tap_then_saves_first_and_reloads_once(make_context, core_site, core_dist_next, tmp_path):
    context, page, _ = visited(make_context, core_site, tmp_path)
    other = context.new_page()
    other.goto(core_site.url)
    answer_of(other)
    core_site.dist = core_dist_next
    page.evaluate("navigator.serviceWorker.getRegistration().then((it) => it.update())")
    until(page, "offline.state.updateWaiting")
    page.wait_for_timeout(1000)
    assert page.evaluate("stamp") == "one", "no version changes without a tap"
    page.reload()
    answer_of(page)
    assert page.evaluate("stamp") == "one", "a reload alone does not change it either"
    loads, loads_other = page.evaluate("loads"), other.evaluate("loads")
    until(page, "offline.state.updateWaiting")

    page.evaluate("void offline.applyUpdate()")
    for tab, before in ((page, loads), (other, loads_other)):
        _until_reloaded(tab, "two")
        answer_of(tab)
        tab.wait_for_timeout(1000)
        assert tab.evaluate("loads") == before + 1, "each tab reloads exactly once"
        assert tab.evaluate("sessionStorage.getItem('saved')") == "1", "each tab saves first, once"
    until(page, READY_OFFLINE)


def _until_reloaded(page: Any, stamp: str) -> None:
    for _ in range(200):
        try:
            if page.evaluate("window.stamp") == stamp:
                return
        except Exception as error:  # the page was just going away
            if "context was destroyed" not in str(error) and "navigat" not in str(error):
                raise
        page.wait_for_timeout(100)
    raise AssertionError(f"the page did not become version {stamp}")


def test_an_update_whose_save_fails_does_not_take_over(make_context, core_site, core_dist_next, tmp_path):
    _, page, _ = visited(make_context, core_site, tmp_path)
    core_site.dist = core_dist_next
    page.evaluate("navigator.serviceWorker.getRegistration().then((it) => it.update())")
    until(page, "offline.state.updateWaiting")
    said = page.evaluate("offline.applyUpdate(() => Promise.reject(new Error('disk full'))).catch((error) => error.message)")
    assert said == "disk full"
    page.wait_for_timeout(1000)
    assert page.evaluate("stamp") == "one"


# ---- the offline copy -----------------------------------------------------------------------------


def test_a_wrong_byte_is_never_stored_and_ready_is_never_said(make_context, core_site, core_dist, tmp_path):
    wasm = next(core_dist.glob("py/*/pyodide.asm.wasm"))
    name = wasm.relative_to(core_dist).as_posix()
    wrong = bytearray(next(core_dist.glob("snapshot/*.gz")).read_bytes())
    wrong[len(wrong) // 2] ^= 1
    core_site.intercept = lambda asked: Reply(bytes(wrong)) if asked.startswith("snapshot/") else None
    page = opened(make_context(tmp_path), core_site)
    answer_of(page)
    until(page, "offline.state.phase === 'broken'")
    stored = page.evaluate("caches.open('beadwright-files').then((it) => it.keys()).then((keys) => keys.map((key) => key.url))")
    assert not any("/snapshot/" in url for url in stored)
    assert page.evaluate("log.includes('ready')") is False
    assert name  # the other files may stay: each is exactly what its hash says


def test_the_next_visit_stores_what_was_missing(make_context, core_site, tmp_path):
    core_site.intercept = lambda asked: Reply(b"gone", 404) if asked.startswith("snapshot/") else None
    page = opened(make_context(tmp_path), core_site)
    until(page, "offline.state.phase === 'broken'")
    core_site.intercept = None
    core_site.served.clear()
    page.reload()
    until(page, READY_OFFLINE)
    fetched = [item.path for item in core_site.served if item.status == 200 and item.path.endswith((".wasm", ".whl"))]
    assert fetched == [], "what was stored already is not fetched again"


def test_what_was_evicted_is_named_and_repaired(make_context, core_site, tmp_path):
    _, page, _ = visited(make_context, core_site, tmp_path)
    page.evaluate(
        "caches.open('beadwright-files').then(async (it) => { for (const key of await it.keys()) if (key.url.includes('forms.json')) await it.delete(key); })"
    )
    found = page.evaluate("offline.check()")
    assert found["missing"] == ["forms.json"]
    assert page.evaluate("offline.state.phase") == "incomplete"
    assert "forms.json" in page.evaluate("offline.state.text")

    core_site.intercept = lambda asked: Reply(b"away", 503)
    assert page.evaluate("fetch('forms.json').then((it) => it.text())").startswith("Missing on this device: forms.json")
    assert page.evaluate("offline.repair().then(() => 'repaired', () => 'not repaired')") == "not repaired"
    core_site.intercept = None
    assert page.evaluate("offline.repair().then((it) => it.missing.length)") == 0
    assert page.evaluate("offline.state.phase") == "ready"


def test_a_damaged_file_is_found_by_the_deep_check_and_repaired(make_context, core_site, tmp_path):
    _, page, _ = visited(make_context, core_site, tmp_path)
    page.evaluate(
        "caches.open('beadwright-files').then(async (it) => { for (const key of await it.keys()) if (key.url.includes('forms.json')) await it.put(key, new Response('{}')); })"
    )
    assert page.evaluate("offline.check(false).then((it) => it.damaged.length)") == 0
    assert page.evaluate("offline.check(true).then((it) => it.damaged)") == ["forms.json"]
    assert page.evaluate("offline.repair().then((it) => it.damaged.length)") == 0


def test_the_first_visit_fetches_nothing_twice(make_context, core_site, tmp_path):
    _, page, _ = visited(make_context, core_site, tmp_path)
    until(page, "core.status.numpy === 'ready'")
    bodies = [item.path for item in core_site.served if item.status == 200 and item.body_bytes > 10_000]
    assert sorted(bodies) == sorted(set(bodies))
    assert sum(item.body_bytes for item in core_site.served) < 19_000_000


# ---- the ways to start ------------------------------------------------------------------------------


def test_the_first_visit_starts_the_precompiled_way_and_says_how_far_it_is(make_context, core_site, tmp_path):
    _, page, _ = visited(make_context, core_site, tmp_path)
    status = status_of(page)
    assert status["way"] == "precompiled" and status["phase"] == "ready" and status["restarts"] == 0
    assert any(" MB" in text for text in page.evaluate("texts"))


@pytest.mark.parametrize("damage", ["wrong byte", "missing", "cut short"])
def test_a_refused_snapshot_falls_back_to_the_precompiled_way(make_context, core_site, core_dist, damage):
    whole = next(core_dist.glob("snapshot/*.gz")).read_bytes()
    flipped = bytearray(whole)
    flipped[1000] ^= 1
    reply = {"wrong byte": Reply(bytes(flipped)), "missing": Reply(b"", 404), "cut short": Reply(whole[: len(whole) // 3])}[damage]
    core_site.intercept = lambda asked: reply if asked.startswith("snapshot/") else None
    page = opened(make_context(), core_site, "?core=snapshot&nosw")
    assert "failed" not in answer_of(page)
    status = status_of(page)
    assert status["way"] == "precompiled" and status["refused"]


def test_both_ways_give_the_same_answer(make_context, core_site, core_dist):
    demo = json.loads((core_dist / "demo" / "first.json").read_text("utf-8"))
    texts = []
    for way in ("snapshot", "precompiled"):
        page = opened(make_context(), core_site, f"?core={way}&nosw")
        answer_of(page)
        assert status_of(page)["way"] == way
        texts.append(page.evaluate("(job) => core.call('evaluate', [job]).then(JSON.stringify)", demo))
    assert texts[0] == texts[1]


def test_a_missing_runtime_file_is_named_instead_of_hanging(make_context, core_site):
    core_site.intercept = lambda asked: Reply(b"", 404) if asked.endswith("pyodide.asm.wasm") else None
    page = opened(make_context(), core_site, "?nosw")
    until(page, "core.status.phase === 'failed'")
    assert "pyodide.asm.wasm" in status_of(page)["text"]
    code = page.evaluate("core.call('forms', []).then(() => 'answered', (error) => error.code)")
    assert code == "CORE-DOWN"
    core_site.intercept = None
    page.evaluate("core.start()")
    until(page, "core.status.phase === 'ready'")


# ---- the worker's life --------------------------------------------------------------------------------


def test_the_newest_call_wins(make_context, core_site):
    page = opened(make_context(), core_site, "?nosw")
    answer_of(page)
    got = told(
        page,
        """Promise.all([1, 2, 3, 4].map((n) =>
             core.call('blank', [n === 4 ? 'inch' : 'metric'], {key: 'one'}).then((job) => job.units, (error) => error.name)))""",
    )
    assert got == ["Superseded", "Superseded", "Superseded", "inch"]
    assert status_of(page)["restarts"] == 0


@pytest.mark.parametrize("harm", ["for (;;) {}", "self.close()", "throw new Error('gone')"])
def test_a_hung_or_dead_worker_is_restarted_and_the_question_repeated(make_context, core_site, harm):
    page = opened(make_context(), core_site, "?nosw&limit=3000")
    answer_of(page)
    worker = page.workers[0]
    worker.evaluate(f"setTimeout(() => {{ {harm} }}, 0)")
    units = told(page, "core.call('blank', ['inch']).then((job) => job.units, (error) => error.code)")
    assert units == "inch"
    assert status_of(page)["restarts"] == 1 and status_of(page)["phase"] == "ready"


def test_a_question_that_kills_the_worker_twice_is_given_up_and_the_next_one_is_answered(make_context, core_site, core_dist):
    worker = next(core_dist.glob("core-*.js"))
    trap = "\n{ const say = self.onmessage; self.onmessage = (event) => { if (event.data.method === 'forms') for (;;) {} say(event); }; }"
    core_site.intercept = lambda asked: Reply(worker.read_bytes() + trap.encode()) if asked == worker.name else None
    page = opened(make_context(), core_site, "?nosw&limit=3000")
    answer_of(page)
    code = told(page, "core.call('forms', []).then(() => 'answered', (error) => error.code)")
    assert code == "CORE-LOST"
    until(page, "core.status.phase === 'ready'")
    assert told(page, "core.call('blank', ['metric']).then((job) => job.units)") == "metric"
    assert status_of(page)["restarts"] == 2


def test_a_fault_in_python_comes_back_with_a_reference_and_harms_nothing(make_context, core_site):
    page = opened(make_context(), core_site, "?nosw")
    answer_of(page)
    for method, params in (("nonsense", []), ("blank", ["metric", "too", "many"])):
        got = page.evaluate("([method, params]) => core.call(method, params).then(() => 'answered', (error) => [error.name, error.code])", [method, params])
        assert got[0] == "CoreFault" and got[1].startswith("PY-")
    assert told(page, "core.call('blank', ['metric']).then((job) => job.units)") == "metric"
    assert status_of(page)["restarts"] == 0


def test_bytes_cross_the_border_whole(make_context, core_site, core_dist):
    page = opened(make_context(), core_site, "?nosw")
    answer_of(page)
    demo = json.loads((core_dist / "demo" / "first.json").read_text("utf-8"))
    same = page.evaluate(
        """async (job) => {
             const file = await core.call('export', [job, 'job']);
             const back = await core.call('open_file', [file.bytes]);
             return [file.bytes instanceof Uint8Array, file.media, back.job.id === job.id, back.job.joints.length === job.joints.length];
           }""",
        demo,
    )
    assert same == [True, "application/json", True, True]


def test_after_a_restore_chance_is_fresh_and_time_is_the_pages(make_context, core_site):
    """The snapshot brings the building machine's seed and zone along; the start puts both right."""
    probe = "import random, os, time; str([random.random(), os.environ['TZ'], os.environ['LANG']])"
    seen = []
    for _ in range(2):
        page = opened(make_context(), core_site, "?core=snapshot&nosw")
        answer_of(page)
        assert status_of(page)["way"] == "snapshot"
        seen.append(page.workers[0].evaluate("probe => self.pyodideForDevelopers().runPython(probe)", probe))
    assert seen[0] != seen[1]
    assert "Europe/Berlin" in seen[0] and "'en'" in seen[0]


def test_the_developer_way_runs_the_working_tree_without_a_build_of_python(make_context, core_site):
    page = opened(make_context(), core_site, "?core=developer")
    assert "failed" not in answer_of(page)
    assert status_of(page)["way"] == "developer"
    until(page, "core.status.numpy === 'ready'")
    assert page.evaluate("offline.state.phase") == "unsupported"


def test_the_apps_own_build_knows_no_developer_way(make_context, site):
    page = make_context().new_page()
    page.goto(site.url + "?core=developer")
    page.wait_for_selector("main h1, main h2")
    assert not any("__dev" in address for address in page.context.requests.addresses)


# ---- the policy ------------------------------------------------------------------------------------------


def test_the_policy_is_strict_in_the_page_and_on_every_file(make_context, core_site):
    page = opened(make_context(), core_site, "?nosw")
    answer_of(page)
    policy = page.get_attribute("meta[http-equiv='Content-Security-Policy']", "content")
    assert "unsafe-inline" not in policy and "'unsafe-eval'" not in policy and "default-src 'self'" in policy
    headers = page.evaluate("fetch('index.html').then((it) => Object.fromEntries(it.headers))")
    assert "frame-ancestors 'none'" in headers["content-security-policy"]
    refused = page.evaluate("fetch('https://example.invalid/').then(() => 'sent', () => 'refused')")
    assert refused == "refused"
    # In a timer, since what the test evaluates directly is exempt from the policy.
    tried = "new Promise((tell) => setTimeout(() => { try { new Function('return 1'); tell('ran'); } catch { tell('refused'); } }))"
    assert page.evaluate(tried) == "refused"


# ---- the app itself ---------------------------------------------------------------------------------------


def test_the_app_starts_cold_with_the_network_off_after_one_visit(make_context, site, tmp_path):
    context = make_context(tmp_path)
    page = context.pages[0]
    page.goto(site.url)
    until(page, "navigator.serviceWorker.getRegistration().then((it) => Boolean(it && it.active))", 60_000)
    until(page, "caches.open('beadwright-files').then((it) => it.keys()).then((keys) => keys.length > 15)")
    context.close()
    site.stop()

    again = make_context(tmp_path)
    again.set_offline(True)
    page = again.pages[0]
    page.goto(site.url + "#/demo")
    page.wait_for_selector("main h1, main h2")
    assert again.requests.page_errors == []
